package working

import (
	"fmt"
	"slices"
	"strings"
	"unicode"

	"halfspan/extract/result"
)

// compareContexts raises the flags that say whether the words of a result tell it
// apart: what it is about is the likeliest thing to be read wrongly.
func compareContexts(items []*item) {
	for _, it := range items {
		if it.res.Table != "" {
			continue
		}
		it.raise("in-running-text", "read from a sentence")
		if it.res.N == 0 {
			it.raise("n-missing", "no sample size is printed for this result")
		}
		if it.res.Arm == "" {
			it.raise("arm-not-named", "the sentence names no arm that the program knows")
		}
	}
	for _, table := range tablesOf(items) {
		sizesMissing(table)
		for _, it := range table {
			againstHeading(it)
			wordsOfOutcome(it)
		}
		lacking(table, "time-unclear", "other results of this table name a time, this one does not", func(r *result.Result) string { return r.Time })
		lacking(table, "arm-unclear", "other results of this table name an arm, this one does not", func(r *result.Result) string { return r.Arm })
	}
	toldApart(items)
}

// tablesOf gathers the results of each table, in order.
func tablesOf(items []*item) [][]*item {
	var tables [][]*item
	at := map[string]int{}
	for _, it := range items {
		if it.res.Table == "" {
			continue
		}
		i, ok := at[it.res.Table]
		if !ok {
			i = len(tables)
			at[it.res.Table] = i
			tables = append(tables, nil)
		}
		tables[i] = append(tables[i], it)
	}
	return tables
}

// lacking flags the results of a table that lack a word most of the others have.
func lacking(table []*item, flag, detail string, word func(*result.Result) string) {
	have := 0
	for _, it := range table {
		if word(it.res) != "" {
			have++
		}
	}
	if have == len(table) || 3*have < len(table) {
		return
	}
	for _, it := range table {
		if word(it.res) == "" {
			it.raise(flag, detail)
		}
	}
}

// sizesMissing flags a result without n: in a table where others have one it was
// probably not found.
func sizesMissing(table []*item) {
	have := false
	for _, it := range table {
		have = have || it.res.N > 0
	}
	for _, it := range table {
		switch {
		case it.res.N > 0:
		case have:
			it.raise("n-missing-here", "other results of this table have an n")
		default:
			it.raise("n-missing", "no sample size is printed for this result")
		}
	}
}

// headingWords are words of a heading that belong to one statistic each.
func headingWords() map[string][]result.Statistic {
	differences := []result.Statistic{result.MeanDifference, result.RiskDifference, result.Other, result.Coefficient, result.MeanChange}
	return map[string][]result.Statistic{
		"difference": differences,
		"odds":       {result.Ratio, result.Other},
		"hazard":     {result.Ratio, result.Other},
		"median":     {result.Median, result.Other},
	}
}

// againstHeading flags a statistic that a word of the printed heading contradicts.
func againstHeading(it *item) {
	for _, word := range strings.FieldsFunc(strings.ToLower(it.res.Heading), func(r rune) bool { return !unicode.IsLetter(r) }) {
		word = strings.TrimSuffix(word, "s")
		// A footnote's mark may be glued to it: "differencea".
		for known, statistics := range headingWords() {
			if (word == known || len(word) == len(known)+1 && strings.HasPrefix(word, known)) && !slices.Contains(statistics, it.res.Statistic) {
				it.raise("statistic-against-heading", fmt.Sprintf("the heading says %q, the statistic read is %s", known, it.res.Statistic))
				return
			}
		}
	}
}

// wordsOfOutcome flags an outcome that is only an abbreviation, and one whose row
// group carries a unit of its own: then the group above is another outcome.
func wordsOfOutcome(it *item) {
	longest, run := 0, 0
	for _, r := range it.res.Outcome {
		if unicode.IsLower(r) {
			run++
			longest = max(longest, run)
		} else {
			run = 0
		}
	}
	if it.res.Outcome != "" && longest < 4 {
		it.raise("outcome-abbreviated", it.res.Outcome)
	}
	parts := strings.Split(it.res.Heading, " | ")
	units := 0
	for _, p := range parts {
		if strings.Contains(it.res.Outcome, p) && hasUnit(p) {
			units++
		}
	}
	if units > 1 {
		it.raise("outcome-stacked", "the row group above is named with a unit of its own")
	}
}

// hasUnit reports a bracket or a percent sign that looks like a unit.
func hasUnit(s string) bool {
	if strings.Contains(s, "%") {
		return true
	}
	open := strings.LastIndexByte(s, '(')
	if open < 0 || !strings.HasSuffix(strings.TrimSpace(s), ")") {
		return false
	}
	inside := strings.TrimSuffix(strings.TrimSpace(s[open+1:]), ")")
	return inside != "" && !strings.ContainsAny(inside, "= ") && strings.ContainsAny(inside, "/°²³")
}

// toldApart flags results of one table (or of the running text) that are described
// by the same words and print different values: at least one description lacks
// something.
func toldApart(items []*item) {
	type words struct {
		table, statistic, measure, arm, arm2, time, subgroup, outcome, unit, adjusted, givenAs string
	}
	first := map[words]*item{}
	for _, it := range items {
		r := it.res
		k := words{r.Table, string(r.Statistic), r.Measure, r.Arm, r.Arm2, r.Time, r.Subgroup, r.Outcome, r.Unit, r.Adjusted, string(r.GivenAs)}
		before, ok := first[k]
		if !ok {
			first[k] = it
			continue
		}
		if before.res.Estimate == r.Estimate && before.res.Lower == r.Lower && before.res.Upper == r.Upper && before.res.GivenValue == r.GivenValue {
			continue
		}
		it.raise("described-alike", fmt.Sprintf("%s is described by the same words as %s", r.Estimate, before.res.Estimate))
		before.raise("described-alike", fmt.Sprintf("%s is described by the same words as %s", before.res.Estimate, r.Estimate))
	}
}
