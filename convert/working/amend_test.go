package working

import (
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"halfspan/extract/paper"
	"halfspan/extract/result"
)

func colonyMass() result.Result {
	return result.Result{
		Statistic: result.Mean, GivenAs: result.CI, Estimate: "12.4", Lower: "11.8", Upper: "13.0", Level: 95,
		N: 42, NFrom: result.NHeading, Arm: "syrup", Outcome: "colony mass", Unit: "kg", Adjusted: "no",
		Anchor: result.Anchor{Offset: 120, Digits: "11.8,13.0"},
	}
}

func TestAmendWorksTheResultThroughAgain(t *testing.T) {
	r := colonyMass()
	w := Work(Facts{Path: "colonies.txt", SHA256: "ab"}, []result.Result{r})[0]
	if w.Record.SD == nil {
		t.Fatalf("no SD to begin with: %s", w.Record.Reason)
	}
	_, same, err := Amend(r, w, nil, "")
	if err != nil {
		t.Fatal(err)
	}
	if *same.Record.SD != *w.Record.SD || same.Record.ID != w.Record.ID || len(same.Flags) != len(w.Flags) {
		t.Errorf("nothing amended, yet %+v became %+v", w.Record, same.Record)
	}
	_, fewer, err := Amend(r, w, map[string]string{"n": "21"}, "")
	if err != nil {
		t.Fatal(err)
	}
	if !(*fewer.Record.SD < *w.Record.SD) {
		t.Errorf("SD with n 21 is %v, with n 42 %v: it must be smaller", *fewer.Record.SD, *w.Record.SD)
	}
	bare, none, err := Amend(r, w, map[string]string{"n": ""}, "")
	if err != nil {
		t.Fatal(err)
	}
	if none.Record.SD != nil || none.Record.SE == nil {
		t.Errorf("without n: SD %v, SE %v; want no SD and an SE", none.Record.SD, none.Record.SE)
	}
	_, back, err := Amend(bare, none, map[string]string{"n": "42"}, "")
	if err != nil {
		t.Fatal(err)
	}
	if *back.Record.SD != *w.Record.SD || strings.Join(back.Record.Flags, " ") != strings.Join(w.Record.Flags, " ") {
		t.Errorf("n taken away and put back: SD %v flags %v, want %v %v", *back.Record.SD, back.Record.Flags, *w.Record.SD, w.Record.Flags)
	}
}

// What a person gives is marked as such: where the old value was read and what was
// said of it is no longer true.
func TestAmendMarksWhatAPersonGave(t *testing.T) {
	r := colonyMass()
	r.NKind = result.NRandomised
	r.Raise("n-total", "the n may be that of both arms")
	r.Raise("level-assumed", "from the other intervals")
	r.Sources = []result.Source{
		{Field: "n", Place: paper.Place{Offset: 40, Line: 3}, Text: "n = 42", From: "heading of column 2"},
		{Field: "lower", Place: paper.Place{Offset: 120, Line: 9}, Text: "11.8"},
		{Field: "arm", Place: paper.Place{Offset: 30}, Text: "syrup"},
	}
	w := Work(Facts{Path: "colonies.txt", SHA256: "ab"}, []result.Result{r})[0]
	if w.Record.SD != nil {
		t.Fatal("an n that may be that of both arms gave an SD")
	}
	amended, got, err := Amend(r, w, map[string]string{"n": "21", "lower": "11.9", "upper": "12.9"}, "")
	if err != nil {
		t.Fatal(err)
	}
	rec := got.Record
	if rec.SD == nil || slices.Contains(rec.Flags, "n-total") || !slices.Contains(rec.Flags, "level-assumed") {
		t.Errorf("SD %v, flags %v: the doubt of n is settled, that of the level is not", rec.SD, rec.Flags)
	}
	if rec.NFrom == nil || *rec.NFrom != result.NPerson || rec.NKind != nil {
		t.Errorf("n_from %v, n_kind %v", rec.NFrom, rec.NKind)
	}
	want := []Place{
		{Field: "arm", Offset: &r.Sources[2].Place.Offset, Text: "syrup"},
		{Field: "lower", Offset: &r.Sources[1].Place.Offset, Text: "11.9", From: `a person; the program read "11.8" (byte 120)`},
		{Field: "n", Text: "21", From: `a person; the program read "n = 42" (heading of column 2, byte 40)`},
		{Field: "upper", Text: "12.9", From: "a person"},
	}
	if diff := cmp.Diff(want, rec.Places); diff != "" {
		t.Errorf("places (-want +got):\n%s", diff)
	}
	if len(r.Sources) != 3 || r.Sources[0].Text != "n = 42" || len(r.Flags) != 2 {
		t.Errorf("the result that was read was changed: %+v", r)
	}
	_, cleared, err := Amend(amended, got, map[string]string{"n": ""}, "")
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range cleared.Record.Places {
		if p.Field == "n" {
			t.Errorf("n was taken away, its place is still %+v", p)
		}
	}
	if cleared.Record.NFrom != nil {
		t.Errorf("n was taken away, n_from is %s", *cleared.Record.NFrom)
	}
}

// What the other results of the row say against a spread stands until a number that
// went into it is changed.
func TestAmendKeepsWhatOthersSay(t *testing.T) {
	spread := func(kind result.GivenAs, value string, mate int) result.Result {
		r := colonyMass()
		r.GivenAs, r.Lower, r.Upper, r.Level, r.GivenValue, r.Table, r.Mates = kind, "", "", 0, value, "Table 2", []int{mate}
		return r
	}
	results := []result.Result{spread(result.SE, "0.40", 1), spread(result.SD, "3.9", 0)}
	w := Work(Facts{Path: "colonies.txt"}, results)[0]
	for _, c := range []struct {
		field, value string
		given        bool
	}{{"arm", "water", false}, {"n", "95", true}, {"given_value", "0.60", true}} {
		_, got, err := Amend(results[0], w, map[string]string{c.field: c.value}, "")
		if err != nil || (got.Record.SD != nil) != c.given || slices.Contains(got.Record.Flags, "mates-disagree") == c.given {
			t.Errorf("%s = %s: SD %v, flags %v, %v", c.field, c.value, got.Record.SD, got.Record.Flags, err)
		}
	}
}

// Saying that a mean is not adjusted ends what the words around it said of a model.
func TestAmendNotAdjusted(t *testing.T) {
	r := colonyMass()
	r.Adjusted, r.Evidence.Model, r.Evidence.Tests = "yes", []string{"least-squares"}, []string{"ancova", "t test"}
	w := Work(Facts{Path: "colonies.txt"}, []result.Result{r})[0]
	_, got, err := Amend(r, w, map[string]string{"adjusted": "no"}, "")
	if err != nil {
		t.Fatal(err)
	}
	if w.Record.SD != nil || got.Record.SD == nil {
		t.Errorf("SD %v before, %v after: %s", w.Record.SD, got.Record.SD, got.Record.Reason)
	}
	if len(r.Evidence.Model) != 1 || len(r.Evidence.Tests) != 2 {
		t.Error("the result that was read was changed")
	}
}

func TestAmendRefuses(t *testing.T) {
	r := colonyMass()
	w := Work(Facts{Path: "colonies.txt"}, []result.Result{r})[0]
	for _, c := range []struct{ field, value, want string }{
		{"n", "many", "not a sample size"},
		{"n", "0", "not a sample size"},
		{"lower", "11,8x", "not a number"},
		{"level", "100", "not a level"},
		{"level", "nan", "not a level"},
		{"statistic", "average", "none of"},
		{"given_as", "sem", "none of"},
		{"snippet", "x", "cannot be amended"},
	} {
		if _, _, err := Amend(r, w, map[string]string{c.field: c.value}, ""); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s = %q: error %v, want one with %q", c.field, c.value, err, c.want)
		}
	}
	if _, _, err := Amend(r, w, nil, "no such proposal"); err == nil {
		t.Error("a proposal that is not there was taken")
	}
}

func TestAmendTakesAProposal(t *testing.T) {
	r := result.Result{Statistic: result.Median, GivenAs: result.IQR, Estimate: "24", Lower: "17", Upper: "31", N: 42,
		Arm: "syrup", Outcome: "homing time", Unit: "min", Anchor: result.Anchor{Offset: 3, Digits: "17,31"}}
	w := Work(Facts{Path: "homing.txt"}, []result.Result{r})[0]
	if w.Record.SD != nil || len(w.Trail.Alternatives) == 0 {
		t.Fatalf("a median gives proposals and no SD; got SD %v and %d proposals", w.Record.SD, len(w.Trail.Alternatives))
	}
	for _, a := range w.Trail.Alternatives {
		if a.Struck || a.SD == nil {
			continue
		}
		_, got, err := Amend(r, w, nil, a.Name)
		if err != nil {
			t.Fatal(err)
		}
		if got.Record.SD == nil || *got.Record.SD != *a.SD || got.Record.Use != useConverted {
			t.Errorf("%s taken: SD %v, use %s", a.Name, got.Record.SD, got.Record.Use)
		}
		return
	}
	t.Error("no proposal with an SD")
}
