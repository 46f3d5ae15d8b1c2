package export

import (
	"strings"
	"time"

	"halfspan/report/ledger"
	"halfspan/report/review"
)

// column is one column of the export.
type column struct {
	name     string
	kind     string // of the Table Schema: string, integer, number, datetime
	unit     string // what a number counts; empty where that goes without saying
	describe string
	value    func(r *Row) string
}

// Row is one result to be exported.
type Row struct {
	ledger.Row
	Twice []string // ids of exported results that print the same in the same paper
}

// recordColumns describes the record's fields, in their order.
func recordColumns() []column {
	const outcome = "as in the column unit"
	columns := []column{
		{name: "id", kind: "string", describe: "Name of the result, kept from scan to scan."},
		{name: "paper", kind: "string", describe: "File of the paper, relative to the scanned folder."},
		{name: "paper_sha256", kind: "string", describe: "SHA-256 of the paper's file, in hexadecimal."},
		{name: "page", kind: "integer", describe: "Page of the paper's file, counted from 1; empty where the format has no pages."},
		{name: "section", kind: "string", describe: "Nearest heading above the result."},
		{name: "table", kind: "string", describe: "Label of the table the result stands in; empty in running text."},
		{name: "snippet", kind: "string", describe: "The printed text around the result."},
		{name: "statistic", kind: "string", describe: "What kind of estimate it is: mean, mean difference, mean change, median, geometric mean, ratio, proportion, risk difference, rate, coefficient, other."},
		{name: "measure", kind: "string", describe: "Which ratio or difference, where the paper says so."},
		{name: "given_as", kind: "string", describe: "How its uncertainty is printed: ci, sd, se, iqr, range, unstated."},
		{name: "estimate", kind: "number", unit: outcome, describe: "The estimate with the digits that are printed."},
		{name: "lower", kind: "number", unit: outcome, describe: "Lower bound of the interval, quartile or least value, with the digits that are printed."},
		{name: "upper", kind: "number", unit: outcome, describe: "Upper bound of the interval, quartile or greatest value, with the digits that are printed."},
		{name: "given_value", kind: "number", unit: outcome, describe: "The SD, SE, unexplained ± or one-number IQR, with the digits that are printed."},
		{name: "level", kind: "number", unit: "percent", describe: "Level of the interval."},
		{name: "n", kind: "integer", unit: "those counted", describe: "Sample size behind the estimate."},
		{name: "n2", kind: "integer", unit: "those counted", describe: "Sample size of the comparator arm of a result between groups."},
		{name: "n_from", kind: "string", describe: "Where n was read: beside, heading, caption, elsewhere; person: not read, a person gave it."},
		{name: "n_kind", kind: "string", describe: "What n counts: randomised, analysed, completers, unclear."},
		{name: "arm", kind: "string", describe: "The group it is about."},
		{name: "arm2", kind: "string", describe: "The comparator of a result between groups."},
		{name: "time", kind: "string", describe: "Time point or change period."},
		{name: "subgroup", kind: "string", describe: "Subgroup, where it is about one."},
		{name: "outcome", kind: "string", describe: "What was measured."},
		{name: "unit", kind: "string", describe: "Unit of the estimate as printed; % for a percentage."},
		{name: "heading", kind: "string", describe: "Column and row headings of the table cell as printed."},
		{name: "adjusted", kind: "string", describe: "Whether the mean or difference is adjusted: yes, no, unclear."},
		{name: "p", kind: "string", describe: "P value as printed with the result."},
		{name: "t", kind: "string", describe: "t statistic as printed with the result."},
		{name: "f", kind: "string", describe: "F statistic as printed with the result."},
		{name: "df", kind: "string", describe: "Degrees of freedom as printed with the result."},
		{name: "mean", kind: "number", unit: outcome, describe: "Mean for analysis; empty where there is none."},
		{name: "sd", kind: "number", unit: outcome, describe: "SD for analysis, printed or worked out (see method and use); empty where it is withheld (see reason)."},
		{name: "sd_of", kind: "string", describe: "What the SD is the SD of: values, changes, differences."},
		{name: "se", kind: "number", unit: "see scale", describe: "Standard error of the estimate, on the scale in the column scale."},
		{name: "scale", kind: "string", describe: "Scale of se: raw (that of the estimate), log (natural logarithm), logit."},
		{name: "sd_digits_low", kind: "number", unit: outcome, describe: "Least SD that the printed digits allow under the method's assumption."},
		{name: "sd_digits_high", kind: "number", unit: outcome, describe: "Greatest SD that the printed digits allow under the method's assumption."},
		{name: "sd_normal", kind: "number", unit: outcome, describe: "The SD by the normal instead of the t distribution."},
		{name: "method", kind: "string", describe: "Name of the method, explained by 'halfspan methods'."},
		{name: "use", kind: "string", describe: "Where the SD comes from: printed, converted, withheld."},
		{name: "reason", kind: "string", describe: "Why the SD is withheld."},
		{name: "reading", kind: "string", describe: "How sure the program was of its reading: clear, look, doubtful. Says nothing of the quality of the study."},
		{name: "flags", kind: "string", describe: "What was to be looked at, parted by spaces; explained by 'halfspan flags'."},
		{name: "mates", kind: "string", describe: "Ids of results with the same estimate, arm, time and outcome, parted by spaces."},
		{name: "places", kind: "string", describe: "Where each field was read, as JSON: page and box in points of the unrotated page, or byte offset."},
	}
	for i := range columns {
		name := columns[i].name
		columns[i].value = func(r *Row) string { return recordValue(r, name) }
	}
	return columns
}

// recordValue is a field of the record as decided. The names of result and paper
// are those they have now.
func recordValue(r *Row, name string) string {
	switch name {
	case "id", "paper", "mates":
		text, _ := review.Field(&r.Working.Record, name)
		return text
	case "places":
		return placesText(r.Current().Working.Record.Places)
	}
	text, _ := review.Field(&r.Current().Working.Record, name)
	return text
}

// decisionColumns describes what was decided.
func decisionColumns() []column {
	return []column{
		{name: "decision", kind: "string", describe: "confirmed or amended.", value: func(r *Row) string { return string(r.Decision.Verdict) }},
		{name: "checker", kind: "string", describe: "Initials of the person who decided.", value: func(r *Row) string { return r.Decision.Checker }},
		{name: "decided_at", kind: "datetime", describe: "When it was decided, UTC.", value: func(r *Row) string { return r.Decision.At.Format(time.RFC3339) }},
		{name: "decision_reason", kind: "string", describe: "Why it was amended.", value: func(r *Row) string { return r.Decision.Reason }},
		{name: "decision_note", kind: "string", describe: "What the checker noted.", value: func(r *Row) string { return r.Decision.Note }},
		{name: "state", kind: "string", describe: "The decision, or 'read differently since' where a later scan read the same place otherwise; the values are those decided.", value: func(r *Row) string { return string(r.State) }},
		{name: "added_from", kind: "string", describe: "Where a person found a result that the program had missed: table, text, figure, supplement, author's reply; empty for the program's own.", value: func(r *Row) string { return r.ByHand }},
		{name: "printed_again", kind: "string", describe: "Ids of exported results of the same paper that print the same (in abstract and table, say), parted by spaces: use one of them.", value: func(r *Row) string { return strings.Join(r.Twice, " ") }},
	}
}

// originals names the fields that are given as the program read them, too.
var originals = []string{"statistic", "measure", "given_as", "estimate", "lower", "upper", "given_value", "level", "n", "n2",
	"arm", "arm2", "time", "subgroup", "outcome", "unit", "adjusted", "mean", "sd", "se"}

// originalColumns describes what was read before anything was amended.
func originalColumns() []column {
	kinds := map[string]column{}
	for _, c := range recordColumns() {
		kinds[c.name] = c
	}
	var columns []column
	for _, name := range originals {
		columns = append(columns, column{
			name: "read_" + name, kind: kinds[name].kind, unit: kinds[name].unit,
			describe: "The column " + name + " as the program read or worked it out, before anything was amended.",
			value: func(r *Row) string {
				if r.ByHand != "" {
					return ""
				}
				text, _ := review.Field(&r.Decision.Seen.Working.Record, name)
				return text
			},
		})
	}
	return columns
}

func allColumns() []column {
	return append(append(recordColumns(), decisionColumns()...), originalColumns()...)
}
