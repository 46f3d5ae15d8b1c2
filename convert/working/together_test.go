package working

import (
	"encoding/json"
	"strings"
	"testing"

	"halfspan/convert"
	"halfspan/extract/result"
)

// trail is everything that a person reads of a working, on one string.
func trail(t *testing.T, w Working) string {
	t.Helper()
	b, err := json.Marshal(w)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// What several results of one paper say together, and what a lone one says beside.
func TestTogether(t *testing.T) {
	mean := func(est, low, high string, n int, mates ...int) result.Result {
		return result.Result{Statistic: result.Mean, GivenAs: result.CI, Estimate: est, Lower: low, Upper: high, Level: 95, N: n, Table: "Table 2", Row: "1", Arm: "syrup", Outcome: "colony mass", Mates: mates}
	}
	spread := func(kind result.GivenAs, est, value, arm string, n int, mates ...int) result.Result {
		return result.Result{Statistic: result.Mean, GivenAs: kind, Estimate: est, GivenValue: value, N: n, Table: "Table 2", Row: "1", Arm: arm, Outcome: "colony mass", Mates: mates}
	}
	median := func(kind result.GivenAs, low, high string, n int, mates ...int) result.Result {
		return result.Result{Statistic: result.Median, GivenAs: kind, Estimate: "12", Lower: low, Upper: high, N: n, Table: "Table 2", Row: "1", Arm: "syrup", Outcome: "flight time", Mates: mates}
	}
	tested := func(r result.Result, p string) result.Result {
		r.Evidence.Tests, r.Evidence.RowP = []string{"t test"}, p
		return r
	}
	scaled := func(r result.Result, low, high string) result.Result {
		r.Evidence.ScaleLow, r.Evidence.ScaleHigh = low, high
		return r
	}
	unclear := func(r result.Result) result.Result {
		r.Adjusted = "unclear"
		return r
	}
	difference := result.Result{Statistic: result.MeanDifference, GivenAs: result.CI, Estimate: "1.8", Lower: "0.1", Upper: "3.5", Level: 95, N: 30, N2: 28, Table: "Table 2", Row: "1", Outcome: "colony mass"}
	cases := []struct {
		name    string
		results []result.Result
		want    []string // in the first working
		not     []string
	}{
		// 1.96·0.612 = 1.20 while t(9)·0.612 = 1.38
		{"an SE beside settles z", []result.Result{mean("12.40", "11.20", "13.60", 10, 1), spread(result.SE, "12.40", "0.612", "syrup", 10, 0)},
			[]string{`made with z`, `"method":"sd-from-ci-normal"`, `"sd":1.93`, `"sd_normal":null`}, []string{"t-or-z"}},
		{"an SE beside settles t", []result.Result{mean("12.40", "11.20", "13.60", 10, 1), spread(result.SE, "12.40", "0.530", "syrup", 10, 0)},
			[]string{`made with t`, `"method":"sd-from-ci"`}, []string{`"t-or-z"`}},
		{"an SE that fits neither", []result.Result{mean("12.40", "11.20", "13.60", 10, 1), spread(result.SE, "12.40", "0.90", "syrup", 10, 0)},
			[]string{`mates-disagree`}, nil},
		// 1.20/0.71 = 1.69: t(42) at 90% is 1.68.
		{"an SE that fits another level", []result.Result{mean("12.40", "11.20", "13.60", 42, 1), spread(result.SE, "12.40", "0.713", "syrup", 42, 0)},
			[]string{`mates-disagree`, "an interval of 90% would fit"}, nil},
		{"an SE beside an interval without a level", []result.Result{func() result.Result { r := mean("12.40", "11.20", "13.60", 42, 1); r.Level = 0; return r }(), spread(result.SE, "12.40", "0.594", "syrup", 42, 0)},
			[]string{"SE 0.594 beside it fits an interval of 95%"}, []string{"90% or"}},
		{"SD and SE say what n is", []result.Result{spread(result.SE, "12.4", "1.39", "syrup", 0, 1), spread(result.SD, "12.4", "8.6", "syrup", 0, 0)},
			[]string{"belong to n from 38 to 39", `"use":"withheld"`}, nil},
		{"SD and interval say what n is", []result.Result{mean("32.1", "30.0", "34.2", 0, 1), spread(result.SD, "32.1", "5.09", "syrup", 0, 0)},
			[]string{"belong to n from 24 to 26, by t"}, nil},
		// 1.2·√20/t(19) = 2.56
		{"an SD beside shows a plain interval", []result.Result{unclear(mean("12.40", "11.20", "13.60", 20, 1)), spread(result.SD, "12.40", "2.56", "syrup", 20, 0)},
			[]string{`plain interval of the mean`, `"use":"converted"`}, []string{"adjusted-unclear"}},
		{"an SD beside that does not fit leaves it open", []result.Result{unclear(mean("12.40", "11.20", "13.60", 20, 1)), spread(result.SD, "12.40", "3.10", "syrup", 20, 0)},
			[]string{`adjusted-unclear`, `"use":"withheld"`}, nil},
		{"quartiles and range are five numbers", []result.Result{median(result.IQR, "9", "16", 40, 1), median(result.Range, "4", "31", 40, 0)},
			[]string{"luo-five with shi-five", `"mean":12.9709748,"sd":5.91783357`, "bland-five", "read from the result printed beside", `"sd":null`}, []string{"luo-quartiles with"}},
		{"quartiles alone", []result.Result{median(result.IQR, "9", "16", 40)},
			[]string{"luo-quartiles with wan-quartiles", `"mean":12.354875,"sd":5.38250931`, "preferred in the literature", "typical error at n 50", "skewness 0.142857"}, nil},
		{"quartiles on a scale", []result.Result{scaled(median(result.IQR, "7.5", "12.8", 40), "0", "13")},
			[]string{"closest law: beta between the limits of the scale, 0 and 13"}, nil},
		{"quartiles beyond the scale", []result.Result{scaled(median(result.IQR, "9", "16", 40), "0", "10")},
			[]string{"closest law: "}, []string{"beta"}},
		{"a median with an interval", []result.Result{func() result.Result { r := median(result.CI, "9", "16", 40); r.Level = 95; return r }()},
			[]string{"no published method leads from it"}, []string{"luo"}},
		{"the p value fits one reading", []result.Result{tested(spread(result.Unstated, "24.6", "3.1", "syrup", 30), "0.04"), spread(result.Unstated, "22.8", "3.4", "water", 28)},
			[]string{"fits only the reading as an SD", "it is not applied", `"use":"withheld"`, `"sd":null`}, nil},
		{"the p value fits two readings", []result.Result{tested(spread(result.Unstated, "14.2", "1.5", "syrup", 6), "0.04"), spread(result.Unstated, "12.0", "1.7", "water", 6)},
			nil, []string{"fits only"}},
		{"no test stated, nothing said", []result.Result{func() result.Result {
			r := spread(result.Unstated, "24.6", "3.1", "syrup", 30)
			r.Evidence.RowP = "0.04"
			return r
		}(), spread(result.Unstated, "22.8", "3.4", "water", 28)}, nil, []string{"fits only"}},
		{"the interval of the difference fits one reading", []result.Result{tested(spread(result.Unstated, "24.6", "3.1", "syrup", 30), ""), spread(result.Unstated, "22.8", "3.4", "water", 28), difference},
			[]string{"the interval of the difference, 0.1 to 3.5, fits only the reading as an SD"}, nil},
		{"the scale strikes readings out", []result.Result{scaled(spread(result.Unstated, "8.1", "0.9", "syrup", 40), "0", "10")},
			[]string{"does not fit on the scale from 0 to 10", `"name":"as an SE"`, `"struck":true`}, nil},
		{"printed extremes strike readings out", []result.Result{spread(result.Unstated, "40.2", "1.9", "syrup", 30, 1), func() result.Result {
			r := spread(result.Range, "40.2", "", "syrup", 30, 0)
			r.Lower, r.Upper = "21", "64"
			return r
		}()}, []string{"with a range of 21 to 64 the SD is at least"}, nil},
		{"whole numbers strike readings out", []result.Result{func() result.Result {
			r := scaled(spread(result.Unstated, "2.93", "1.10", "syrup", 15), "1", "5")
			r.Evidence.Integer = true
			return r
		}()}, []string{"no 15 whole numbers from 1 to 5 have this mean and SD"}, nil},
		// The log-likelihoods are those of the reference file: -9.29, -0.98, -5.36.
		{"known coefficients of variation weigh the readings", func() []result.Result {
			all := []result.Result{spread(result.Unstated, "50.2", "2.1", "syrup", 30)}
			for i, sd := range []string{"10.5", "12.5", "9.5", "14.0", "11.5"} {
				r := spread(result.SD, "50.0", sd, "station "+sd, 20+i)
				r.Row = "other"
				all = append(all, r)
			}
			return all
		}(), []string{"coefficient of variation 4%; log-likelihood -9.3", "log-likelihood -1.0", "log-likelihood -5.4", "as an SE is the likelier reading", "it leads by 4.4", "it is not applied", `"sd":null`}, nil},
		{"a varied outcome decides nothing", func() []result.Result {
			all := []result.Result{spread(result.Unstated, "50.2", "9.0", "syrup", 4)}
			for i, sd := range []string{"7.5", "17.5", "11.0", "24.0", "13.5"} {
				all = append(all, spread(result.SD, "50.0", sd, "station "+sd, 20+i))
			}
			return all
		}(), []string{"log-likelihood -1.4", "log-likelihood -1.2", "log-likelihood -2.5", "undecided by the coefficient of variation"}, []string{"likelier"}},
		{"spreads that fall with n are no SDs", []result.Result{spread(result.Unstated, "24.6", "2.6", "syrup", 12), spread(result.Unstated, "24.9", "1.3", "water", 50), spread(result.Unstated, "25.2", "0.8", "pollen", 140)},
			[]string{"log-likelihood -7.6", "log-likelihood -0.0", "how the spreads of 3 arms go with their n, 12 to 140", `it speaks against \"as an SD\", which is behind by 7.6`}, []string{"likelier"}},
		{"spreads that do not fall with n are SDs", []result.Result{spread(result.Unstated, "24.6", "8.1", "syrup", 12), spread(result.Unstated, "24.9", "8.9", "water", 50), spread(result.Unstated, "25.2", "7.7", "pollen", 140)},
			[]string{"as an SD is the likelier reading", "it is not applied"}, nil},
		{"sizes too near to tell", []result.Result{spread(result.Unstated, "24.6", "1.9", "syrup", 20), spread(result.Unstated, "24.9", "2.1", "water", 22), spread(result.Unstated, "25.2", "2.0", "pollen", 19)},
			nil, []string{"log-likelihood"}},
		{"nothing fits", func() []result.Result {
			all := []result.Result{spread(result.Unstated, "50.2", "0.01", "syrup", 30)}
			for i, sd := range []string{"10.5", "12.5", "9.5", "14.0", "11.5", "11.9", "10.9", "12.1", "10.1", "11.3", "11.2", "12.2", "10.3"} {
				all = append(all, spread(result.SD, "50.0", sd, "station "+sd, 20+i))
			}
			return all
		}(), []string{"no reading fits what is known by the coefficient of variation"}, nil},
		{"a lopsided interval is explained", []result.Result{mean("1.62", "1.12", "2.35", 30)},
			[]string{"symmetric on the log scale", "if the bounds are quartiles of a median", `"use":"withheld"`, "not symmetric about the estimate"}, nil},
		{"no level", []result.Result{func() result.Result { r := mean("12.4", "11.2", "13.6", 42); r.Level = 0; return r }()},
			[]string{"if the level is 95%", "if the level is 90%", `"use":"withheld"`}, nil},
		{"a difference of two means", []result.Result{difference},
			[]string{"n₁ + n₂ − 2 = 56", "pooled SD of the two arms", `"sd":null`, `"method":"se-from-ci"`}, nil},
		{"a proportion", []result.Result{{Statistic: result.Proportion, GivenAs: result.CI, Estimate: "22.5", Lower: "9.6", Upper: "35.4", Level: 95, N: 40, Unit: "%", Table: "Table 2"}},
			[]string{"9 of 40 prints like this by: wald"}, nil},
		{"a lopsided interval that no scale explains", []result.Result{mean("12.4", "11.9", "13.6", 42)}, []string{"symmetric on neither the raw, the log nor the logit scale"}, nil},
		{"equal margins of all arms", func() []result.Result {
			all := []result.Result{mean("12.43", "11.22", "13.64", 20), mean("14.10", "12.89", "15.31", 20), mean("11.75", "10.54", "12.96", 20)}
			all[1].Arm, all[2].Arm = "pollen", "water"
			return all
		}(), []string{"equally wide", `"use":"converted"`}, nil},
		{"unequal margins", func() []result.Result {
			all := []result.Result{mean("12.43", "11.22", "13.64", 20), mean("14.10", "12.89", "15.31", 20), mean("11.75", "10.44", "13.06", 20)}
			all[1].Arm, all[2].Arm = "pollen", "water"
			return all
		}(), nil, []string{"equally wide"}},
		{"a percentage symmetric on the logit scale", []result.Result{{Statistic: result.Proportion, GivenAs: result.CI, Estimate: "8.3", Lower: "4.5", Upper: "14.8", Level: 95, N: 120, Unit: "%", Table: "Table 2"}},
			[]string{`"scale":"logit"`, "SE of the log odds"}, nil},
		{"a rate says its events", []result.Result{{Statistic: result.Rate, GivenAs: result.CI, Estimate: "4.9", Lower: "3.2", Upper: "7.3", Level: 95, Table: "Table 2"}},
			[]string{"made on the log scale, it belongs to 22 to 23 events", "exact, it belongs to 24 to 26 events"}, nil},
		{"a ratio without a level", []result.Result{{Statistic: result.Ratio, GivenAs: result.CI, Estimate: "1.8", Lower: "1.1", Upper: "2.9", Table: "Table 2"}},
			[]string{"level-missing", "if the level is 95%", "SE of the logarithm, by z"}, nil},
		{"a ratio of geometric means", []result.Result{{Statistic: result.Ratio, Measure: "ratio of means", GivenAs: result.CI, Estimate: "1.30", Lower: "1.05", Upper: "1.62", Level: 95, N: 24, N2: 22, Table: "Table 2"}},
			[]string{"pooled SD of the logarithms of the two arms", `"sd":0.364484528`}, nil},
		{"a standardised difference has no pooled SD", []result.Result{func() result.Result { r := difference; r.Measure = "standardised difference"; return r }()}, []string{`"se"`}, []string{"pooled SD"}},
		{"an impossible mean strikes out nothing", []result.Result{func() result.Result {
			r := spread(result.Unstated, "5.19", "1.10", "syrup", 28)
			r.Evidence.Integer = true
			return r
		}()},
			[]string{"mean-impossible", "n or the mean is in doubt"}, []string{"struck"}},
		{"bounds unexplained, n not known", []result.Result{func() result.Result {
			r := mean("12.4", "11.2", "13.6", 0)
			r.GivenAs, r.Level = result.Unstated, 0
			return r
		}()},
			[]string{"as a 95% interval", "SE by z"}, nil},
		{"a prediction interval", []result.Result{func() result.Result {
			r := mean("12.4", "8.2", "16.6", 42)
			r.Snippet = "12.4 (95% prediction interval 8.2 to 16.6)"
			return r
		}()},
			[]string{`"use":"withheld"`, "single values"}, nil},
		{"a geometric SD", []result.Result{func() result.Result {
			r := spread(result.SD, "10.02", "1.7686", "syrup", 30)
			r.Statistic = result.GeometricMean
			return r
		}(),
		}, []string{`"sd":null`, "if it is a geometric SD, a factor", `"mean":11.78`, "if it is the SD of natural logarithms"}, nil},
		{"a geometric mean", []result.Result{{Statistic: result.GeometricMean, GivenAs: result.CI, Estimate: "10.0", Lower: "8.1", Upper: "12.4", Level: 95, N: 30, Table: "Table 2"}},
			[]string{"lognormal law", "SD of the logarithms 0.5702", `"scale":"log"`}, nil},
		{"a table that tells adjusted from plain", func() []result.Result {
			change := mean("3.1", "2.3", "3.9", 24)
			change.Statistic, change.Adjusted = result.MeanChange, "unclear"
			adjusted := difference
			adjusted.Estimate, adjusted.Lower, adjusted.Upper, adjusted.Adjusted = "1.7", "0.1", "3.3", "yes"
			return []result.Result{change, difference, adjusted}
		}(), []string{`"use":"converted"`, "in a column of its own"}, nil},
		{"adjustment left open", func() []result.Result {
			change := mean("3.1", "2.3", "3.9", 24)
			change.Statistic, change.Adjusted = result.MeanChange, "unclear"
			return []result.Result{change, difference}
		}(), []string{`"use":"withheld"`, "adjusted-unclear"}, nil},
		{"a small mean has a small SD", []result.Result{spread(result.SD, "0.18", "0.56", "syrup", 74), spread(result.SD, "1.62", "4.60", "water", 69)}, nil, []string{"se-as-sd"}},
		{"a small SD of the same mean", []result.Result{spread(result.SD, "1.58", "0.56", "syrup", 74), spread(result.SD, "1.62", "4.60", "water", 69)}, []string{"se-as-sd"}, nil},
		{"an SE that must be an SD", []result.Result{spread(result.SE, "0.36", "0.40", "syrup", 178)},
			[]string{`sd-as-se`, `"use":"withheld"`, `"sd":null`}, nil},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got := trail(t, Work(Facts{Path: "hives.txt", SHA256: "00"}, c.results)[0])
			for _, want := range c.want {
				if !strings.Contains(got, want) {
					t.Errorf("no %q in %s", want, got)
				}
			}
			for _, not := range c.not {
				if strings.Contains(got, not) {
					t.Errorf("%q in %s", not, got)
				}
			}
		})
	}
}

// Working the same results again gives the same bytes, and changes none of them.
func TestWorkIsRepeatable(t *testing.T) {
	var results []result.Result
	for _, name := range []string{"t-or-z", "se-as-sd", "skewed-summary", "described-alike", "mates-disagree", "no-reading-fits"} {
		for _, r := range raisedByWorking()[name] {
			r.Mates = nil
			results = append(results, r)
		}
	}
	before, err := json.Marshal(results)
	if err != nil {
		t.Fatal(err)
	}
	first, err := json.Marshal(Work(Facts{Path: "hives.txt", SHA256: "00"}, results))
	if err != nil {
		t.Fatal(err)
	}
	for range 20 {
		again, err := json.Marshal(Work(Facts{Path: "hives.txt", SHA256: "00"}, results))
		if err != nil || string(again) != string(first) {
			t.Fatalf("another working of the same results, %v", err)
		}
	}
	after, err := json.Marshal(results)
	if err != nil || string(after) != string(before) {
		t.Errorf("the results were changed, %v", err)
	}
}

// Every method that a record or a proposal names is in the table of methods.
func TestMethodNamesAreExplained(t *testing.T) {
	known := map[string]bool{}
	for _, m := range convert.Methods() {
		known[m.Name] = true
	}
	check := func(names string) {
		for _, n := range strings.Split(names, " with ") {
			if !known[n] {
				t.Errorf("%q is not in the table of methods", n)
			}
		}
	}
	var all []Working
	for _, results := range raisedByWorking() {
		all = append(all, Work(Facts{}, results)...)
	}
	all = append(all, Work(Facts{}, []result.Result{
		{Statistic: result.Median, GivenAs: result.IQR, Estimate: "12", Lower: "9", Upper: "16", N: 20},
		{Statistic: result.Median, GivenAs: result.Range, Estimate: "12", GivenValue: "14.2", N: 8},
		{Statistic: result.Ratio, GivenAs: result.CI, Estimate: "0.81", Lower: "0.70", Upper: "0.94", Level: 95},
	})...)
	proposals := 0
	for _, w := range all {
		if w.Record.Method != nil {
			check(*w.Record.Method)
		}
		if w.Record.Statistic != nil && *w.Record.Statistic == "median" {
			for _, a := range w.Trail.Alternatives {
				check(a.Name)
				proposals++
			}
		}
	}
	if proposals < 8 {
		t.Errorf("only %d proposals seen", proposals)
	}
}
