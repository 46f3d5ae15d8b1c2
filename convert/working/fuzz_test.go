package working

import (
	"encoding/json"
	"maps"
	"math"
	"slices"
	"strings"
	"testing"

	"halfspan/extract/result"
)

// FuzzWork: whatever stands in the fields of a result, the working is made, holds
// only finite numbers in order, and says why where it gives no SD.
func FuzzWork(f *testing.F) {
	seeds := 0
	add := func(statistic, given, est, low, high, value, level string, n, n2 int, p, extra string) {
		f.Add(statistic, given, est, low, high, value, level, n, n2, p, extra)
		seeds++
	}
	cases := raisedByWorking()
	for _, name := range slices.Sorted(maps.Keys(cases)) {
		for _, r := range cases[name] {
			add(string(r.Statistic), string(r.GivenAs), r.Estimate, r.Lower, r.Upper, r.GivenValue, "95", r.N, r.N2, r.P, r.Outcome)
		}
	}
	add("mean", "ci", "1e300", "-1e300", "1e308", "", "99.999999", 2, 0, "0.000", "")
	add("median", "range", "0", "0", "0", "", "0", 1<<40, -4, "ns", "x")
	add("ratio", "ci", "0.0", "0.0", "0.1", "", "95", 0, 0, "", "")
	add("proportion", "ci", "100", "99", "100", "", "95", 12, 0, "", "%")
	add("mean", "unstated", "3", "", "", "0.00001", "", 999, 3, "<0.05", "1")
	if seeds < 60 {
		f.Fatalf("only %d seeds", seeds)
	}
	f.Fuzz(func(t *testing.T, statistic, given, est, low, high, value, level string, n, n2 int, p, extra string) {
		lv := 0.0
		if x := read(level); x != nil {
			lv = x.Value
		}
		r := result.Result{Statistic: result.Statistic(statistic), GivenAs: result.GivenAs(given), Estimate: est, Lower: low, Upper: high, GivenValue: value,
			Level: lv, N: n, N2: n2, P: p, T: value, DF: level, Unit: extra, Outcome: extra, Heading: extra, Table: "Table 2", Row: "1", Mates: []int{1, -3, 99}}
		r.Evidence = result.Evidence{ScaleLow: low, ScaleHigh: extra, Integer: n%2 == 0, Tests: []string{"t test"}, RowP: p}
		other := r
		other.GivenAs, other.Arm, other.GivenValue, other.Mates = result.SE, "water", high, []int{0}
		all := Work(Facts{Path: "hives.txt", SHA256: "00"}, []result.Result{r, other, r})
		for _, changed := range []map[string]string{{"n": "7", "arm": extra}, {"given_as": "sd", "given_value": "1.30"}, {"n": "", "level": "90", "adjusted": "no"}} {
			if _, w, err := Amend(r, all[0], changed, ""); err == nil {
				all = append(all, w)
			}
		}
		for _, w := range all {
			if _, err := json.Marshal(w); err != nil {
				t.Fatalf("%+v: %v", r, err)
			}
			finiteRecord(t, w)
			if (w.Record.Use == useWithheld) != (w.Record.Reason != "") || w.Record.Use == useWithheld && w.Record.SD != nil || w.Record.Use != useWithheld && w.Record.SD == nil {
				t.Errorf("use %s, reason %q, SD %v", w.Record.Use, w.Record.Reason, w.Record.SD)
			}
			if text := strings.Join(w.Trail.Steps, "\n"); strings.Contains(text, "NaN") || strings.Contains(text, "Inf") {
				t.Errorf("steps: %s", text)
			}
		}
	})
}

func finiteRecord(t *testing.T, w Working) {
	t.Helper()
	numbers := []*Number{w.Record.Mean, w.Record.SD, w.Record.SE, w.Record.SDLow, w.Record.SDHigh, w.Record.SDNormal}
	for _, a := range w.Trail.Alternatives {
		numbers = append(numbers, a.Mean, a.SD, a.SE, a.Low, a.High)
		if a.Low != nil && a.High != nil && *a.Low > *a.High {
			t.Errorf("%s: from %v to %v", a.Name, *a.Low, *a.High)
		}
	}
	for _, n := range numbers {
		if n != nil && (math.IsNaN(float64(*n)) || math.IsInf(float64(*n), 0)) {
			t.Errorf("a number is %v: %+v", *n, w)
		}
	}
	if r := w.Record; r.SD != nil && r.SDLow != nil && r.SDHigh != nil && (*r.SDLow > *r.SD || *r.SD > *r.SDHigh) {
		t.Errorf("SD %v outside %v to %v", *r.SD, *r.SDLow, *r.SDHigh)
	}
}
