package working

import (
	"fmt"
	"regexp"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/result"
)

// compareContexts raises the flags that say whether the words of a result tell it
// apart: what it is about is the likeliest thing to be read wrongly.
func compareContexts(items []*item) {
	for _, it := range items {
		if it.res.Table != "" {
			continue
		}
		if !it.res.HasFlag("from-the-table") {
			it.raise("in-running-text", "read from a sentence alone")
		}
		if it.res.N == 0 {
			it.sizeMissing()
			it.raise("sentence-without-n", "the sentence gives no n and no arm whose n is known")
		}
		if it.res.Arm == "" {
			it.raise("arm-not-named", "the sentence names no arm that the program knows")
		}
	}
	for _, table := range tablesOf(items) {
		sizesMissing(table)
		for _, it := range table {
			againstHeading(it)
			wordsOfContext(it)
		}
		lostLabels(table)
		lacking(table, "time-missing-here", "other results of this table name a time, this one does not", func(r *result.Result) string { return r.Time })
		lacking(table, "arm-missing-here", "other results of this table name an arm, this one does not", func(r *result.Result) string { return r.Arm })
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
		case it.res.N > 0 || it.has("n-at-baseline"):
		case have:
			it.raise("n-missing-here", "other results of this table have an n")
		default:
			it.sizeMissing()
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

// inBrackets, stackedUnit and cutArm are how words of a context look that are not
// the whole or the right ones.
var (
	inBrackets  = regexp.MustCompile(`\([^)]*\)`)
	lowerRun    = regexp.MustCompile(`\p{Ll}{4,}|(?i)\b(?:age|mass|time|size|dose|body|pain|load|gain|loss|rate|mood|diet)\b`)
	stackedUnit = regexp.MustCompile(`(\([^)]*[/%°][^)]*\)|,\s*%),`)
	cutShort    = regexp.MustCompile(`\b(or|and|of|the|with|to|for|in|a|versus|vs)$`)
)

// longestArm is how many letters the name of an arm has at most; a longer one is a
// phrase with words of the outcome in it.
const longestArm = 45

// wordsOfContext flags words that say too little: an outcome that is only an
// abbreviation, that starts in the middle of a phrase, that is more than a name or
// whose row group is another outcome (it has a unit of its own), and an arm that
// breaks off.
func wordsOfContext(it *item) {
	o := it.res.Outcome
	if o != "" && !lowerRun.MatchString(inBrackets.ReplaceAllString(o, "")) {
		it.raise("outcome-abbreviated", o)
	}
	if stackedUnit.MatchString(o) {
		it.raise("outcome-stacked", "the row group above is named with a unit of its own")
	}
	if r, _ := utf8.DecodeRuneInString(o); unicode.IsLower(r) {
		it.raise("outcome-unclear", "the outcome starts in the middle of a phrase")
	}
	if strings.Contains(o, ":") {
		it.raise("outcome-unclear", "the outcome holds a colon: more than a name")
	}
	if cutShort.MatchString(it.res.Arm) {
		it.raise("arm-cut-short", it.res.Arm)
	}
	if utf8.RuneCountInString(it.res.Arm) > longestArm {
		it.raise("arm-a-phrase", it.res.Arm)
	}
}

// lostLabels flags an outcome that only names the group of other outcomes of the
// table: its own label was not found, as happens behind a page break.
func lostLabels(table []*item) {
	groups := map[string]bool{}
	for _, it := range table {
		for i, r := range it.res.Outcome {
			if r == ',' {
				groups[it.res.Outcome[:i]] = true
			}
		}
	}
	for _, it := range table {
		if groups[it.res.Outcome] {
			it.raise("outcome-unclear", "other outcomes of the table stand in a group of this name: a label may be lost")
		}
	}
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
