package working

import (
	"fmt"

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
