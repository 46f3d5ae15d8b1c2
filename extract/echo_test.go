package extract

import (
	"fmt"
	"testing"

	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// TestEchoes: a sentence's result takes what it does not say from the one result
// of the tables with its numbers, and nothing where the sentence speaks against it.
func TestEchoes(t *testing.T) {
	inTable := result.Result{Table: "Table 2", Statistic: result.Mean, GivenAs: result.SD, Estimate: "12.4", GivenValue: "1.3", N: 42, NFrom: result.NHeading,
		Arm: "Syrup", Time: "week 6", Outcome: "Colony mass", Unit: "kg",
		Sources: []result.Source{{Field: "n", Place: paper.Place{Offset: 77}, Text: "n = 42"}, {Field: "arm", Place: paper.Place{Offset: 71}, Text: "Syrup"}}}
	sentence := result.Result{Statistic: result.Mean, GivenAs: result.SD, Estimate: "12.4", GivenValue: "1.3", Snippet: "Mass with syrup was 12.4 ± 1.3 kg, with water less."}
	with := func(r result.Result, change func(*result.Result)) result.Result {
		r.Sources = append([]result.Source(nil), r.Sources...)
		change(&r)
		return r
	}
	fall := func(r *result.Result) {
		r.Statistic, r.GivenAs, r.GivenValue = result.MeanChange, result.CI, ""
		r.Estimate, r.Lower, r.Upper, r.Level = "-1.24", "-1.96", "-0.52", 95
	}
	fell := func(r *result.Result) {
		fall(r)
		r.Estimate, r.Lower, r.Upper = "1.24", "0.52", "1.96"
	}
	cases := []struct {
		name   string
		tables []result.Result
		text   result.Result
		want   string
	}{
		{"all that lacks", []result.Result{inTable}, sentence, "Syrup|week 6|Colony mass|kg|42 elsewhere|true"},
		{"what the sentence says stays", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.N, r.NFrom, r.Outcome = 42, result.NBeside, "mass" }), "Syrup|week 6|mass|kg|42 beside|true"},
		{"another n beside", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.N, r.NFrom = 40, result.NBeside }), "||||40 beside|false"},
		{"an n of the arm gives way", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.N, r.NFrom = 45, result.NElsewhere }), "Syrup|week 6|Colony mass|kg|42 elsewhere|true"},
		{"another arm", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.Arm, r.Snippet = "pollen", "Mass with pollen was 12.4 ± 1.3 kg." }), "pollen||||0 |false"},
		{"both arms in the sentence", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.Arm = "water" }), "Syrup|week 6|Colony mass|kg|42 elsewhere|true"},
		{"initials", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.Arm, r.Snippet = "SG", "Mass in the SG was 12.4 ± 1.3 kg." }), "SG|week 6|Colony mass|kg|42 elsewhere|true"},
		{"another spread", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.GivenAs = result.SE }), "||||0 |false"},
		{"an unexplained spread", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.GivenAs = result.Unstated }), "Syrup|week 6|Colony mass|kg|42 elsewhere|true"},
		{"two that differ", []result.Result{inTable, with(inTable, func(r *result.Result) { r.Time = "week 9" })}, sentence, "||||0 |false"},
		{"two that agree", []result.Result{inTable, with(inTable, func(r *result.Result) { r.Table = "Table 3" })}, sentence, "Syrup|week 6|Colony mass|kg|42 elsewhere|true"},
		{"few digits and other words", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.Snippet = "Homing took 12.4 ± 1.3 min." }), "||||0 |false"},
		{"too few digits", []result.Result{with(inTable, func(r *result.Result) { r.Estimate, r.GivenValue = "12", "1" })}, with(sentence, func(r *result.Result) { r.Estimate, r.GivenValue = "12", "1" }), "||||0 |false"},
		{"a fall printed as a negative change", []result.Result{with(inTable, fall)}, with(sentence, fell), "Syrup|week 6|Colony mass|kg|42 elsewhere|true"},
		{"a difference is no mean", []result.Result{with(inTable, func(r *result.Result) { r.Statistic = result.MeanDifference })}, sentence, "||||0 |false"},
		{"another study's", []result.Result{inTable}, with(sentence, func(r *result.Result) { r.Evidence.Quoted = true }), "||||0 |false"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			found := append([]result.Result{c.text}, c.tables...)
			echoes(found)
			r := &found[0]
			if got := fmt.Sprintf("%s|%s|%s|%s|%d %s|%v", r.Arm, r.Time, r.Outcome, r.Unit, r.N, r.NFrom, r.HasFlag("from-the-table")); got != c.want {
				t.Errorf("got %s, want %s", got, c.want)
			}
			for _, s := range r.Sources {
				if s.Field == "n" && r.HasFlag("from-the-table") && r.NFrom == result.NElsewhere && (s.Place.Offset != 77 || s.From != "the same numbers in Table 2") {
					t.Errorf("the source of n is %+v", s)
				}
			}
		})
	}
}
