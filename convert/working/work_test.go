package working

import (
	"encoding/json"
	"testing"

	"halfspan/extract/result"
)

// The ordinary policy on invented results: what is converted, what is withheld.
func TestWorkPolicy(t *testing.T) {
	cases := []struct {
		name   string
		in     result.Result
		use    string
		sd, se string // as written; empty for null
		flags  []string
	}{
		{"printed SD", result.Result{Statistic: result.Mean, GivenAs: result.SD, Estimate: "12.4", GivenValue: "1.3", N: 42},
			"printed", "1.3", "0.200594355", nil},
		{"mean with interval", result.Result{Statistic: result.Mean, GivenAs: result.CI, Estimate: "32.1", Lower: "30.0", Upper: "34.2", Level: 95, N: 25},
			"converted", "5.08745933", "1.01749187", []string{"t-or-z"}},
		{"mean with SE", result.Result{Statistic: result.Mean, GivenAs: result.SE, Estimate: "32.1", GivenValue: "1.37", N: 25},
			"converted", "6.85", "1.37", nil},
		{"n missing", result.Result{Statistic: result.Mean, GivenAs: result.CI, Estimate: "32.1", Lower: "30.0", Upper: "34.2", Level: 95},
			"withheld", "", "1.07144826", []string{"n-missing"}},
		{"adjusted", result.Result{Statistic: result.Mean, GivenAs: result.CI, Estimate: "32.1", Lower: "30.0", Upper: "34.2", Level: 95, N: 25, Adjusted: "yes"},
			"withheld", "", "", []string{"adjusted"}},
		{"lopsided", result.Result{Statistic: result.Mean, GivenAs: result.CI, Estimate: "31.5", Lower: "30.0", Upper: "34.2", Level: 95, N: 25},
			"withheld", "", "", []string{"asymmetric-interval"}},
		{"median", result.Result{Statistic: result.Median, GivenAs: result.IQR, Estimate: "24", Lower: "17", Upper: "31", N: 40},
			"withheld", "", "", nil},
		{"ratio", result.Result{Statistic: result.Ratio, GivenAs: result.CI, Estimate: "0.81", Lower: "0.70", Upper: "0.94", Level: 95},
			"withheld", "", "0.0752053463", nil},
		{"unstated", result.Result{Statistic: result.Mean, GivenAs: result.Unstated, Estimate: "24.6", GivenValue: "3.1", N: 30},
			"withheld", "", "", []string{"spread-unstated"}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			w := Work(Facts{Path: "hive.txt", SHA256: "00"}, []result.Result{c.in})[0]
			rec := w.Record
			if rec.Use != c.use {
				t.Errorf("use: got %q, want %q (%s)", rec.Use, c.use, rec.Reason)
			}
			if got := written(rec.SD); got != c.sd {
				t.Errorf("sd: got %q, want %q", got, c.sd)
			}
			if got := written(rec.SE); got != c.se {
				t.Errorf("se: got %q, want %q", got, c.se)
			}
			for _, f := range c.flags {
				if !contains(rec.Flags, f) {
					t.Errorf("flag %s not raised: %v", f, rec.Flags)
				}
			}
			if (rec.Use == useWithheld) != (rec.Reason != "") {
				t.Errorf("use %q with reason %q", rec.Use, rec.Reason)
			}
			if _, err := json.Marshal(w); err != nil {
				t.Error(err)
			}
		})
	}
}

func written(n *Number) string {
	if n == nil {
		return ""
	}
	return n.String()
}

func contains(list []string, s string) bool {
	for _, x := range list {
		if x == s {
			return true
		}
	}
	return false
}

func TestNamesAreUniqueAndStable(t *testing.T) {
	a := result.Result{Anchor: result.Anchor{Page: 2, X: 10010, Y: 20010, Digits: "1.3"}, Estimate: "12.4"}
	b := result.Result{Anchor: result.Anchor{Page: 2, X: 10020, Y: 20020, Digits: "1.1"}, Estimate: "11.1"}
	one := names("ff", []result.Result{a})
	two := names("ff", []result.Result{a, b, b})
	if one[0] != two[0] {
		t.Errorf("the first id changed from %s to %s", one[0], two[0])
	}
	if two[0] == two[1] || two[1] == two[2] {
		t.Errorf("ids repeat: %v", two)
	}
}
