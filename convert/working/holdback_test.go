package working

import (
	"slices"
	"strings"
	"testing"

	"halfspan/extract/result"
)

// An SD that rests on a guess is withheld with the reason, and stays beside as a
// proposal that a person may take.
func TestGuessesAreHeldBack(t *testing.T) {
	sentence := func(kind result.GivenAs, from string) result.Result {
		return result.Result{Statistic: result.Mean, GivenAs: kind, Estimate: "12.4", GivenValue: "1.30", N: 20, Arm: "syrup", Outcome: "colony mass",
			Sources: []result.Source{{Field: "given_as", Text: "values are means ± SEM", From: from}}}
	}
	raised := func(r result.Result, flag string) result.Result { r.Raise(flag, ""); return r }
	armless := func(r result.Result) result.Result { r.Arm = ""; return r }
	row := func(kind result.GivenAs, value string, mate int) result.Result {
		return result.Result{Statistic: result.Mean, GivenAs: kind, Estimate: "12.4", GivenValue: value, N: 20, Table: "Table 2", Row: "1", Arm: "syrup", Outcome: "colony mass", Mates: []int{mate}}
	}
	baseline := func(note string) result.Result {
		r := sentence(result.SE, "footnote a")
		r.Table, r.Heading, r.Adjusted, r.Evidence.Baseline, r.Sources[0].Text = "Table 2", "Syrup", "yes", true, note
		return r
	}
	for _, c := range []struct {
		name    string
		results []result.Result
		reason  string // part of it; empty: the SD stands
	}{
		{"several meanings, SD", []result.Result{raised(sentence(result.SD, "the methods"), "conventions-differ")}, "more than one meaning"},
		{"several meanings, SE", []result.Result{raised(sentence(result.SE, "the methods"), "conventions-differ")}, "more than one meaning"},
		{"general statement, no arm", []result.Result{armless(sentence(result.SE, "the methods"))}, "rests on a general statement"},
		{"general statement, arm named", []result.Result{sentence(result.SE, "the methods")}, ""},
		{"said beside, no arm", []result.Result{armless(sentence(result.SE, ""))}, ""},
		{"said by a person, no arm", []result.Result{armless(sentence(result.SE, result.FromPerson))}, ""},
		{"printed SD, no arm", []result.Result{armless(sentence(result.SD, "the methods"))}, ""},
		{"n in two versions", []result.Result{raised(sentence(result.SE, ""), "n-conflict")}, "different n"},
		{"SE and SD of another n", []result.Result{row(result.SE, "0.40", 1), row(result.SD, "3.9", 0)}, "do not belong to one n"},
		{"baseline, adjusted by its own footnote", []result.Result{baseline("Adjusted means, apiary as a covariate (SE)")}, "adjusted"},
		{"baseline, not adjusted by its own footnote", []result.Result{baseline("Unadjusted means (SE)")}, ""},
		{"SE and SD of this n", []result.Result{row(result.SE, "0.87", 1), row(result.SD, "3.9", 0)}, ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			w := Work(Facts{Path: "hives.txt"}, c.results)[0]
			if c.reason == "" {
				if w.Record.SD == nil {
					t.Fatalf("withheld: %s", w.Record.Reason)
				}
				return
			}
			if w.Record.SD != nil || w.Record.Use != useWithheld || !strings.Contains(w.Record.Reason, c.reason) || w.Record.Method != nil {
				t.Fatalf("SD %v, use %s, reason %q", w.Record.SD, w.Record.Use, w.Record.Reason)
			}
			if c.results[0].Adjusted == "yes" {
				return // refused before an SD was worked out
			}
			i := slices.IndexFunc(w.Trail.Alternatives, func(a Alternative) bool { return strings.HasPrefix(a.Name, "if it is an") })
			if i < 0 {
				t.Fatalf("no proposal among %+v", w.Trail.Alternatives)
			}
			_, taken, err := Amend(c.results[0], w, nil, w.Trail.Alternatives[i].Name)
			if err != nil || taken.Record.SD == nil || *taken.Record.SD != *w.Trail.Alternatives[i].SD {
				t.Errorf("taking %q: %v, %v", w.Trail.Alternatives[i].Name, taken.Record.SD, err)
			}
		})
	}
}
