package export

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"regexp"
	"strings"
	"time"

	"halfspan/convert/working"
	"halfspan/report/ledger"
)

// Confirmed picks the results to be exported: those whose standing decision
// confirms or amends them, in their order, with those that print the same marked.
func Confirmed(rows []ledger.Row) []Row {
	var picked []Row
	for _, r := range rows {
		if r.Decision != nil && (r.Decision.Verdict == ledger.Confirmed || r.Decision.Verdict == ledger.Amended) {
			picked = append(picked, Row{Row: r})
		}
	}
	same := map[string][]int{}
	for i := range picked {
		key := printedKey(&picked[i].Current().Working.Record)
		same[key] = append(same[key], i)
	}
	for i := range picked {
		for _, k := range same[printedKey(&picked[i].Current().Working.Record)] {
			if k != i {
				picked[i].Twice = append(picked[i].Twice, picked[k].ID())
			}
		}
	}
	return picked
}

// printedKey is equal for two results of a paper that print the same.
func printedKey(r *working.Record) string {
	value := func(s *string) string {
		if s == nil {
			return ""
		}
		return *s
	}
	return strings.Join([]string{r.PaperSHA256, value(r.Estimate), value(r.Lower), value(r.Upper), value(r.GivenValue), value(r.GivenAs)}, "\x00")
}

// CSV writes results as RFC 4180 says, in UTF-8, with one line of names.
func CSV(w io.Writer, rows []Row) error {
	columns := allColumns()
	names := make([]string, len(columns))
	for k, c := range columns {
		names[k] = c.name
	}
	return writeCSV(w, "the CSV", names, len(rows), func(row, column int) string { return columns[column].value(&rows[row]) })
}

// writeCSV writes a table as CSV; what names it in errors.
func writeCSV(w io.Writer, what string, names []string, rows int, text func(row, column int) string) error {
	out := csv.NewWriter(w)
	out.UseCRLF = true
	if err := out.Write(names); err != nil {
		return fmt.Errorf("writing %s: %w", what, err)
	}
	line := make([]string, len(names))
	for i := range rows {
		for k := range names {
			line[k] = harmless(text(i, k))
		}
		if err := out.Write(line); err != nil {
			return fmt.Errorf("writing %s: %w", what, err)
		}
	}
	out.Flush()
	if err := out.Error(); err != nil {
		return fmt.Errorf("writing %s: %w", what, err)
	}
	return nil
}

var number = regexp.MustCompile(`^[-+]?[0-9]+(\.[0-9]+)?([eE][-+]?[0-9]+)?$`)

// formulaStart begins what a spreadsheet program takes for a formula, in its
// full-width forms too.
const formulaStart = "=+-@\t\r\n＝＋－＠"

// harmless keeps a spreadsheet program from running text as a formula: an
// apostrophe goes before it. Numbers stay numbers.
func harmless(text string) string {
	trimmed := strings.TrimLeft(text, " ")
	if trimmed == "" || number.MatchString(text) || !strings.ContainsAny(firstRune(trimmed), formulaStart) {
		return text
	}
	return "'" + text
}

func firstRune(s string) string {
	for _, r := range s {
		return string(r)
	}
	return ""
}

func placesText(places []working.Place) string {
	if len(places) == 0 {
		return ""
	}
	text, err := json.Marshal(places)
	if err != nil {
		return "" // places are made of strings and finite numbers
	}
	return string(text)
}

// exported is the line of one result in JSON Lines: the record, then what was
// decided.
type exported struct {
	working.Record
	Decision     ledger.Verdict  `json:"decision"`
	Checker      string          `json:"checker"`
	DecidedAt    string          `json:"decided_at"`
	DecidedFor   string          `json:"decision_reason"`
	Note         string          `json:"decision_note"`
	State        ledger.State    `json:"state"`
	AddedFrom    string          `json:"added_from"`
	PrintedAgain []string        `json:"printed_again"`
	Read         *working.Record `json:"read"` // as the program read it; null where a person added it
}

// JSONLines writes results as JSON Lines.
func JSONLines(w io.Writer, rows []Row) error {
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	for i := range rows {
		r := &rows[i]
		line := exported{Record: r.Current().Working.Record, Decision: r.Decision.Verdict, Checker: r.Decision.Checker,
			DecidedAt: r.Decision.At.Format(time.RFC3339), DecidedFor: r.Decision.Reason, Note: r.Decision.Note, State: r.State, AddedFrom: r.ByHand,
			PrintedAgain: append([]string{}, r.Twice...)}
		line.ID, line.Paper, line.Mates = r.Working.Record.ID, r.Working.Record.Paper, r.Working.Record.Mates
		if r.ByHand == "" {
			line.Read = &r.Decision.Seen.Working.Record
		}
		if err := enc.Encode(line); err != nil {
			return fmt.Errorf("writing the JSON Lines: %w", err)
		}
	}
	return nil
}
