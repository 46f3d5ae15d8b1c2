package working

import (
	"strings"
	"testing"

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
