package working

import (
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"

	"halfspan/extract/result"
)

func TestFlagsTable(t *testing.T) {
	name := regexp.MustCompile(`^[a-z]+(-[a-z]+)*$`)
	seen := map[string]bool{}
	for _, f := range Flags() {
		if !name.MatchString(f.Name) || f.Meaning == "" || f.Do == "" || f.Effect < None || f.Effect >= effectEnd {
			t.Errorf("%+v: a name in lower case with hyphens, a meaning, something to do and an effect are needed", f)
		}
		if seen[f.Name] {
			t.Errorf("%s stands twice", f.Name)
		}
		seen[f.Name] = true
	}
}

// raising are the ways in which the code names a flag that it raises.
var raising = []*regexp.Regexp{
	regexp.MustCompile(`[Rr]aise\("([a-z-]+)"`),
	regexp.MustCompile(`Flag\{(?:Name: )?"([a-z-]+)"`),
	regexp.MustCompile(`Flag[A-Z][A-Za-z]*\s*=\s*"([a-z-]+)"`),
	regexp.MustCompile(`Doubt\{[^}]*Kind:\s*"([a-z-]+)"`),
	regexp.MustCompile(`(?m)^\s*\{"([a-z-]+)", (?:func\(|design\(|decimalSlip|meanImpossible|"[^"]*", (?:func|design))`),
	regexp.MustCompile(`lacking\(table, "([a-z-]+)"`),
}

// Every flag that reading or working raises is in the table, and every flag of the
// table is raised somewhere.
func TestEveryRaisedFlagIsExplained(t *testing.T) {
	raised := map[string]string{}
	files := 0
	for _, root := range []string{".", "../../extract"} {
		err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
			if err != nil || d.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") || filepath.Base(path) == "flags.go" && root == "." {
				return err
			}
			files++
			source, err := os.ReadFile(path)
			if err != nil {
				return err
			}
			for _, r := range raising {
				for _, m := range r.FindAllStringSubmatch(string(source), -1) {
					raised[m[1]] = path
				}
			}
			return nil
		})
		if err != nil {
			t.Fatal(err)
		}
	}
	if files < 40 || len(raised) < 50 {
		t.Fatalf("only %d flags found in %d files", len(raised), files)
	}
	for name, path := range raised {
		if _, ok := ExplainFlag(name); !ok {
			t.Errorf("%s raises %s, which the table of flags does not explain", path, name)
		}
	}
	for _, f := range Flags() {
		if raised[f.Name] == "" {
			t.Errorf("%s is explained but raised nowhere", f.Name)
		}
	}
}

// raisedByWorking shows for each flag of the working invented results that raise it.
func raisedByWorking() map[string][]result.Result {
	ci := func(est, low, high string, change func(*result.Result)) result.Result {
		r := result.Result{Statistic: result.Mean, GivenAs: result.CI, Estimate: est, Lower: low, Upper: high, Level: 95, N: 42, Table: "Table 2", Arm: "syrup", Time: "week 6", Outcome: "colony mass"}
		if change != nil {
			change(&r)
		}
		return r
	}
	sd := func(est, value, arm string, n int) result.Result {
		return result.Result{Statistic: result.Mean, GivenAs: result.SD, Estimate: est, GivenValue: value, N: n, Table: "Table 2", Row: "1", Arm: arm, Time: "week 6", Outcome: "colony mass"}
	}
	as := func(r result.Result, change func(*result.Result)) result.Result { change(&r); return r }
	design := func(word string) []result.Result {
		return []result.Result{ci("12.4", "11.2", "13.6", func(r *result.Result) { r.Evidence.Design = []string{word} })}
	}
	one := func(r result.Result) []result.Result { return []result.Result{r} }
	plain := ci("12.4", "11.2", "13.6", nil)
	se := as(sd("12.4", "0.20", "syrup", 40), func(r *result.Result) { r.GivenAs = result.SE; r.Mates = []int{0} })
	return map[string][]result.Result{
		"n-missing":                 one(as(plain, func(r *result.Result) { r.N = 0 })),
		"n-missing-here":            {plain, as(plain, func(r *result.Result) { r.N = 0; r.Arm = "water" })},
		"n-elsewhere":               one(as(plain, func(r *result.Result) { r.NFrom = result.NElsewhere })),
		"n-randomised":              one(as(plain, func(r *result.Result) { r.NKind = result.NRandomised })),
		"small-n":                   one(as(plain, func(r *result.Result) { r.N = 4 })),
		"spread-unstated":           one(as(sd("12.4", "1.3", "syrup", 20), func(r *result.Result) { r.GivenAs = result.Unstated })),
		"spread-not-positive":       one(sd("12.4", "-1.3", "syrup", 20)),
		"se-as-sd":                  {sd("12.4", "8.6", "syrup", 40), sd("12.1", "1.4", "water", 40)},
		"sd-as-se":                  {as(sd("12.4", "8.6", "syrup", 40), asSE), as(sd("12.1", "1.4", "water", 40), asSE)},
		"no-reading-fits":           {unstatedWith("24.6", "3.1", "syrup"), unstatedWith("22.8", "3.4", "water")},
		"level-missing":             one(as(plain, func(r *result.Result) { r.Level = 0 })),
		"bounds-reversed":           one(ci("12.4", "13.6", "11.2", nil)),
		"estimate-outside":          one(ci("12.4", "13.6", "14.2", nil)),
		"sign-flip":                 one(ci("12.4", "-13.6", "-11.2", nil)),
		"asymmetric-interval":       one(ci("12.4", "11.9", "13.6", nil)),
		"barely-symmetric":          one(ci("12.7", "11.7", "13.9", nil)),
		"decimal-slip":              one(ci("-0.4", "-0.5", "-3", nil)),
		"t-or-z":                    one(plain),
		"coarse-digits":             one(ci("12", "11", "13", nil)),
		"p-disagrees":               one(ci("4.2", "0.9", "7.5", func(r *result.Result) { r.Statistic, r.N2, r.P = result.MeanDifference, 40, "0.40" })),
		"t-and-p-disagree":          one(as(plain, func(r *result.Result) { r.T, r.DF, r.P = "2.31", "40", "0.500" })),
		"df-above-n":                one(ci("4.2", "0.9", "7.5", func(r *result.Result) { r.Statistic, r.N2, r.T, r.DF = result.MeanDifference, 40, "2.53", "162" })),
		"mates-disagree":            {as(sd("12.4", "8.6", "syrup", 40), func(r *result.Result) { r.Mates = []int{1} }), se},
		"repeated-values":           {sd("12.43", "1.31", "syrup", 40), sd("12.43", "1.31", "water", 40)},
		"statistic-unclear":         one(as(plain, func(r *result.Result) { r.Statistic = "" })),
		"statistic-against-heading": one(as(plain, func(r *result.Result) { r.Heading = "Adjusted difference | syrup" })),
		"adjusted":                  one(as(plain, func(r *result.Result) { r.Adjusted = "yes" })),
		"adjusted-baseline":         one(as(plain, func(r *result.Result) { r.Adjusted = "yes"; r.Evidence.Baseline = true })),
		"adjusted-unclear":          one(as(plain, func(r *result.Result) { r.Adjusted = "unclear" })),
		"model-based":               one(as(plain, func(r *result.Result) { r.Evidence.Model = []string{"least-squares"} })),
		"model-stated":              one(as(plain, func(r *result.Result) { r.Evidence.Tests = []string{"ancova"} })),
		"statistic-assumed":         one(as(plain, func(r *result.Result) { r.Raise("statistic-assumed", "") })),
		"n-total":                   one(as(plain, func(r *result.Result) { r.Raise("n-total", "") })),
		"spread-conflict":           one(as(plain, func(r *result.Result) { r.Raise("spread-conflict", "") })),
		"spread-ambiguous":          one(as(plain, func(r *result.Result) { r.Raise("spread-ambiguous", "") })),
		"clustered":                 design("clustered"),
		"crossover":                 design("crossover"),
		"bootstrap-interval":        design("bootstrap"),
		"bayesian-interval":         design("bayesian"),
		"simultaneous-interval":     design("simultaneous"),
		"one-sided":                 design("one-sided"),
		"other-interval":            one(ci("12.4", "8.2", "16.6", func(r *result.Result) { r.Heading = "Mean (95% prediction interval)" })),
		"back-transformed":          design("back-transformed"),
		"log-scale":                 design("log-scale"),
		"skewed":                    one(sd("1.2", "1.9", "syrup", 20)),
		"large-converted-sd":        one(as(sd("14.4", "1.22", "syrup", 98), asSE)),
		"skewed-summary": one(as(plain, func(r *result.Result) {
			r.Statistic, r.GivenAs, r.Estimate, r.Lower, r.Upper = result.Median, result.Range, "12", "4", "31"
		})),
		"count-data":          one(as(plain, func(r *result.Result) { r.Evidence.Integer = true })),
		"mean-impossible":     one(as(sd("5.19", "1.10", "syrup", 28), func(r *result.Result) { r.Evidence.Integer = true })),
		"sd-impossible":       one(as(sd("8.1", "6.9", "syrup", 28), func(r *result.Result) { r.Evidence.ScaleLow, r.Evidence.ScaleHigh = "0", "10" })),
		"bounds-not-positive": one(ci("1.4", "-0.2", "3.1", func(r *result.Result) { r.Statistic = result.Ratio })),
		"described-alike":     {plain, ci("12.6", "11.4", "13.8", nil)},
		"sentence-without-n":  one(as(plain, func(r *result.Result) { r.Table, r.N = "", 0 })),
		"outcome-unclear":     {plain, ci("12.6", "11.4", "13.8", func(r *result.Result) { r.Outcome = "colony mass, Queens" })},
		"arm-cut-short":       one(as(plain, func(r *result.Result) { r.Arm = "syrup or" })),
		"arm-a-phrase":        one(as(plain, func(r *result.Result) { r.Arm = "colonies that were weighed again in spring in the syrup group" })),
		"in-running-text":     one(as(plain, func(r *result.Result) { r.Table = "" })),
		"arm-not-named":       one(as(plain, func(r *result.Result) { r.Table, r.Arm = "", "" })),
		"arm-missing-here":    {plain, ci("12.6", "11.4", "13.8", func(r *result.Result) { r.Arm = "" })},
		"time-missing-here":   {plain, ci("12.6", "11.4", "13.8", func(r *result.Result) { r.Time = "" })},
		"outcome-abbreviated": one(as(plain, func(r *result.Result) { r.Outcome = "CM (kg)" })),
		"outcome-stacked": one(as(plain, func(r *result.Result) {
			r.Outcome, r.Heading = "Protein (mg/mL), Density (g/mL)", "Syrup | Protein (mg/mL) | Density (g/mL)"
		})),
		"quoted":   one(as(plain, func(r *result.Result) { r.Evidence.Quoted = true })),
		"repaired": one(as(plain, func(r *result.Result) { r.Evidence.Repairs = []string{"a box read as a minus"} })),
	}
}

func asSE(r *result.Result) { r.GivenAs = result.SE }

func unstatedWith(est, value, arm string) result.Result {
	return result.Result{Statistic: result.Mean, GivenAs: result.Unstated, Estimate: est, GivenValue: value, N: 30, Table: "Table 2", Row: "1", Arm: arm,
		Outcome: "flight time", Evidence: result.Evidence{Tests: []string{"t test"}, RowP: "0.0011"}}
}

// byReading are the flags that reading raises and the working passes on; the
// program's own test shows invented print for each (cmd/halfspan).
var byReading = []string{"n-kind-unclear", "n-conflict", "spread-from-methods", "spread-from-rows", "count-or-spread", "level-assumed", "level-elsewhere",
	"open-bound", "bound-not-a-number", "row-shape-odd", "in-methods", "misprint", "readers-differ", "sign-differs", "ocr", "arm-unclear", "time-unclear", "unknown-sign",
	"conventions-differ", "interval-unnamed", "scale-differs", "power-of-ten", "from-the-table", "n-from-counts", "n-at-baseline", "n-from-text", "columns-unclear"}

// Every flag of the table that the working raises is raised by invented results.
func TestEveryFlagOfTheWorkingCanBeRaised(t *testing.T) {
	cases := raisedByWorking()
	for _, f := range Flags() {
		results, ok := cases[f.Name]
		if !ok {
			if !slices.Contains(byReading, f.Name) {
				t.Errorf("no invented result raises %s", f.Name)
			}
			continue
		}
		raised := false
		for _, w := range Work(Facts{Path: "hives.txt"}, results) {
			raised = raised || slices.Contains(w.Record.Flags, f.Name)
		}
		if !raised {
			t.Errorf("%s is not raised by its invented result", f.Name)
		}
	}
	for name := range cases {
		if _, ok := ExplainFlag(name); !ok {
			t.Errorf("%s is not in the table", name)
		}
	}
}

// A reading is as good as its worst flag, and an unknown flag asks for a look.
func TestRating(t *testing.T) {
	effects := map[string]Effect{"a": None, "b": AsksLook, "c": MakesIt}
	for _, c := range []struct {
		flags []string
		want  string
	}{{nil, Clear}, {[]string{"a"}, Clear}, {[]string{"a", "b"}, Look}, {[]string{"b", "c", "a"}, Doubtful}, {[]string{"never-heard-of"}, Look}} {
		it := &item{w: &Working{}}
		for _, f := range c.flags {
			it.raise(f, "")
		}
		if got := rate(it, effects); got != c.want {
			t.Errorf("%v: got %s, want %s", c.flags, got, c.want)
		}
	}
}
