package scale

import (
	"strconv"
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// statement is the limits of a scale with the clause that names it.
type statement struct {
	low, high int
	clause    string
	table     string // label of the table whose caption or note says it; empty: the text
	source    result.Source
}

// Set fills in the limits of the scale and whether the outcome is counted, in the
// Evidence of the results of a paper, where the paper prints them: in the name of
// the outcome, in the caption and notes of its table, or in the text. Limits that
// an estimate of the same outcome does not keep to are dropped for all of them;
// where several are printed for one outcome, the widest are taken.
func Set(doc *paper.Document, found []result.Result) {
	said := statements(doc)
	type about struct{ table, outcome string }
	known := map[about][]int{}
	var order []about
	for i := range found {
		r := &found[i]
		if r.Outcome == "" || !onValues(r) {
			continue
		}
		r.Evidence.Integer = r.Evidence.Integer || counted(r)
		k := about{r.Table, r.Outcome}
		if known[k] == nil {
			order = append(order, k)
		}
		known[k] = append(known[k], i)
	}
	for _, k := range order {
		setOne(found, known[k], said)
	}
}

// measured are outcomes with a unit of measurement: they have no scale. A unit of
// points, or the length of a line on paper, is a scale's.
var (
	measured  = pattern.MustCompile(`(?i)\bduration\b|[,(\[]\s*(?:years?|yrs?|months?|weeks?|days?|hours?|h|min|minutes?|s|kg|g|mg|mL|L|%|kcal|kJ)\s*[)\]]?$`)
	scaleUnit = pattern.MustCompile(`(?i)^(?:|points?|pts?\.?|scores?|mm|cm)$`)
)

// onValues reports that the values of the outcome themselves are summarised, so that
// the limits of its scale apply.
func onValues(r *result.Result) bool {
	return (r.Statistic == result.Mean || r.Statistic == result.MeanChange || r.Statistic == result.Median) && !measured.MatchString(r.Outcome)
}

func setOne(found []result.Result, these []int, said []statement) {
	first := &found[these[0]]
	from := chosen(first, said)
	if from == nil {
		return
	}
	for _, i := range these {
		if !keeps(&found[i], from.low, from.high) {
			return
		}
	}
	for _, i := range these {
		e := &found[i].Evidence
		if !scaleUnit.MatchString(found[i].Unit) || e.ScaleLow != "" || e.ScaleHigh != "" {
			continue
		}
		e.ScaleLow, e.ScaleHigh = strconv.Itoa(from.low), strconv.Itoa(from.high)
		if from.source.Text != "" {
			found[i].Sources = append(found[i].Sources, from.source)
		}
	}
}

// chosen gives the limits that the paper prints for an outcome, those nearest to it:
// in its own name, in its table, in the text. Several are widened to hold all.
func chosen(r *result.Result, said []statement) *statement {
	var out *statement
	take := func(s statement) {
		if out == nil {
			out = &s
			return
		}
		out.low, out.high = min(out.low, s.low), max(out.high, s.high)
	}
	for _, text := range []string{r.Outcome, r.Heading} {
		for _, sp := range own(text) {
			take(statement{low: sp.low, high: sp.high})
		}
		if out != nil {
			return out
		}
	}
	called := namesOf(r.Outcome)
	for _, inTable := range []bool{true, false} {
		for _, s := range said {
			if (s.table != "") == inTable && (s.table == r.Table || !inTable) && called.speaksOf(s.clause) {
				take(s)
			}
		}
		if out != nil {
			return out
		}
	}
	return nil
}

// keeps reports that an estimate lies within the limits; a change within their
// distance.
func keeps(r *result.Result, low, high int) bool {
	v, err := strconv.ParseFloat(r.Estimate, 64)
	if err != nil {
		return false
	}
	if r.Statistic == result.MeanChange {
		return v >= float64(low-high) && v <= float64(high-low)
	}
	return v >= float64(low) && v <= float64(high)
}

// statements lists the limits of scales that captions, notes and text print.
func statements(doc *paper.Document) []statement {
	var out []statement
	add := func(run *paper.TextRun, table, from string) {
		for _, sp := range spansOf(run.S) {
			end := min(sp.end, len(run.S))
			out = append(out, statement{low: sp.low, high: sp.high, table: table, clause: run.S[sp.clause:sp.start],
				source: result.Source{Field: "limits", Place: run.Between(sp.start, end), Text: strings.TrimSpace(run.S[sp.start:end]), From: from}})
		}
	}
	for i := range doc.Blocks {
		b := &doc.Blocks[i]
		switch {
		case b.Table != nil:
			add(&b.Table.Caption, b.Table.Label, "the table's caption")
			for k := range b.Table.Notes {
				add(&b.Table.Notes[k].Text, b.Table.Label, "a note of the table")
			}
		case b.Kind == paper.Paragraph && b.Zone != paper.Introduction && b.Zone != paper.Discussion && b.Zone != paper.References && b.Zone != paper.BackMatter:
			add(&b.Text, "", "the text")
		}
	}
	return out
}

var (
	countWords = pattern.MustCompile(`(?i)^(?:total )?(?:number|no\.|nr\.?|count|#) of\b|\bcounts?$`)
	notWhole   = pattern.MustCompile(`(?i)\b(?:per|mean|average|daily|weekly|monthly|annual|rate|ratio|percent|proportion|change|log|weighted|density|estimated)\b|[/%]`)
	noUnit     = pattern.MustCompile(`(?i)^(?:|n|no\.?|count|number)$`)
)

// counted reports that each value of the outcome is a whole number.
func counted(r *result.Result) bool {
	return r.Statistic == result.Mean && countWords.MatchString(r.Outcome) && !notWhole.MatchString(r.Outcome) && !strings.ContainsAny(r.Heading, "%/") && noUnit.MatchString(r.Unit)
}
