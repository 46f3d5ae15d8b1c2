package convert

import (
	"bufio"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// checkCase is one check of the statistics: what the package computes beside what
// R computes (testdata/reference.tsv, written by reference.R), the figures that
// the methods were described with, and values printed in the literature.
type checkCase struct {
	name      string
	got       func(v *values)
	figures   string   // nine digits, to half a unit in the last place; "-" skips one
	published string   // recalled from memory, to the printed digits; "-" skips one
	source    string   // of the published values
	misses    []string // published values that do not come out, each with the reason
	tolerance float64  // relative, 0: 1e-9
}

// values collects what a case computes; an error ends the case.
type values struct {
	t    *testing.T
	list []float64
}

func (v *values) add(x float64, err error) {
	v.t.Helper()
	if err != nil {
		v.t.Fatal(err)
	}
	v.list = append(v.list, x)
}

func (v *values) both(r Range, err error) {
	v.t.Helper()
	v.add(r.Low, err)
	v.add(r.High, err)
}

func (v *values) pair(m MeanSD, err error) {
	v.t.Helper()
	v.add(m.Mean, err)
	v.add(m.SD, err)
}

func (v *values) truth(b bool, err error) {
	v.t.Helper()
	x := 0.0
	if b {
		x = 1
	}
	v.add(x, err)
}

func printed(t testing.TB, text string) Printed {
	t.Helper()
	p, err := ReadPrinted(text)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func readReference(t *testing.T) map[string][]float64 {
	t.Helper()
	f, err := os.Open("testdata/reference.tsv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	out := map[string][]float64{}
	lines := bufio.NewScanner(f)
	lines.Buffer(nil, 1<<20)
	for lines.Scan() {
		if strings.HasPrefix(lines.Text(), "#") {
			continue
		}
		cells := strings.Split(lines.Text(), "\t")
		for _, c := range cells[1:] {
			x, err := strconv.ParseFloat(c, 64)
			if err != nil {
				t.Fatalf("%s: %v", cells[0], err)
			}
			out[cells[0]] = append(out[cells[0]], x)
		}
	}
	if err := lines.Err(); err != nil {
		t.Fatal(err)
	}
	return out
}

// TestReference computes every case of reference.tsv and compares. A case in the
// file that no table here computes fails, and the reverse.
func TestReference(t *testing.T) {
	reference := readReference(t)
	done := map[string]bool{}
	var all []checkCase
	for _, part := range [][]checkCase{tailCases(), intervalCases(), testCases(), medianCases(), ratioCases(), groupCases(), readingCases(), rawDataCases(t, reference)} {
		all = append(all, part...)
	}
	for _, c := range all {
		if done[c.name] {
			t.Errorf("%s stands twice in the tables", c.name)
		}
		done[c.name] = true
		t.Run(c.name, func(t *testing.T) {
			want, ok := reference[c.name]
			if !ok {
				t.Fatal("not in reference.tsv: add it to reference.R and run that")
			}
			v := &values{t: t}
			c.got(v)
			if len(v.list) != len(want) {
				t.Fatalf("got %d values %v, want %d %v", len(v.list), v.list, len(want), want)
			}
			tolerance := c.tolerance
			if tolerance == 0 {
				tolerance = 1e-9
			}
			for i := range want {
				if !near(v.list[i], want[i], tolerance) {
					t.Errorf("value %d: got %.17g, R has %.17g", i+1, v.list[i], want[i])
				}
			}
			compareDigits(t, "figure", c.figures, v.list, nil)
			compareDigits(t, "published value ("+c.source+")", c.published, v.list, c.misses)
		})
	}
	for name := range reference {
		if !done[name] {
			t.Errorf("%s of reference.tsv is computed nowhere", name)
		}
	}
}

func near(got, want, tolerance float64) bool {
	return math.Abs(got-want) <= tolerance*math.Abs(want)+1e-300
}

// compareDigits compares values with printed ones to half a unit in their last
// place. A value named in misses must not come out: the reason stands there.
func compareDigits(t *testing.T, what, text string, got []float64, misses []string) {
	t.Helper()
	fields := strings.Fields(text)
	if len(fields) > len(got) {
		t.Fatalf("%d %ss for %d values", len(fields), what, len(got))
	}
	for i, f := range fields {
		if f == "-" {
			continue
		}
		p := printed(t, f)
		fits := math.Abs(got[i]-p.Value) <= p.Half*(1+1e-6)
		missed := false
		for _, m := range misses {
			missed = missed || strings.HasPrefix(m, f+":")
		}
		if fits == missed {
			t.Errorf("%s %s: computed %.12g, expected to agree: %v", what, f, got[i], !missed)
		}
	}
}

func tailCases() []checkCase {
	cases := []checkCase{
		{name: "normal-tail", tolerance: 1e-12, got: func(v *values) {
			for _, z := range []float64{-3, 0, 1, 1.959963984540054, 5, 9, 20, 37} {
				v.add(NormalTail(z), nil)
			}
		}},
		{name: "normal-upper", tolerance: 1e-12, got: func(v *values) {
			for _, q := range []float64{.5, .4, .1, .05, .025, .01, .005, .001, .0005, 1e-6, 1e-15, 1e-100, 1e-300, .975} {
				v.add(NormalUpper(q))
			}
		}},
		{name: "j-normal", figures: "1.281552 1.644854 1.959964 2.326348 2.575829 3.090232 3.290527", got: func(v *values) {
			for _, p := range []float64{.1, .05, .025, .01, .005, .001, .0005} {
				v.add(NormalUpper(p))
			}
		}},
		{name: "j-t-999", figures: "318.308839 22.3271248 10.2145319 7.17318222 5.89342953 5.20762624 4.78528963 4.50079093 4.29680566 4.14370049 4.02470104 3.92963326",
			published: "318.313 22.327 10.215 7.173 5.893 5.208 4.782 4.499 4.296 4.143 4.024 3.929",
			source:    "NIST/SEMATECH e-Handbook, column .999, recalled from memory",
			misses: []string{"318.313: the column as recalled is off by up to 0.005; use no printed table for .999",
				"4.782: as above", "4.499: as above", "4.296: as above", "4.143: as above", "4.024: as above", "3.929: as above"},
			got: func(v *values) {
				for df := 1.0; df <= 12; df++ {
					v.add(TUpper(.001, df))
				}
			}},
	}
	for _, df := range []float64{1, 2, 2.5, 3, 7, 30, 123.4, 1e3, 1e5, 1e8} {
		name := strconv.FormatFloat(df, 'f', -1, 64)
		cases = append(cases,
			checkCase{name: "t-tail-" + name, got: func(v *values) {
				for _, t := range []float64{.001, .1, .5, 1, 2, 5, 12, 40} {
					v.add(TTail(t, df))
				}
			}},
			checkCase{name: "t-upper-" + name, got: func(v *values) {
				for _, q := range []float64{.49, .25, .05, .025, .005, .0005, 1e-8, 1e-15} {
					v.add(TUpper(q, df))
				}
			}})
	}
	return append(cases, tTable()...)
}

// tTable is the whole table of two-sided critical values at 90, 95 and 99%: six
// decimals, and the three decimals printed in most textbooks (recalled from
// memory).
func tTable() []checkCase {
	figures := `6.313752 12.706205 63.656741|2.919986 4.302653 9.924843|2.353363 3.182446 5.840909|2.131847 2.776445 4.604095|2.015048 2.570582 4.032143|1.943180 2.446912 3.707428|1.894579 2.364624 3.499483|1.859548 2.306004 3.355387|1.833113 2.262157 3.249836|1.812461 2.228139 3.169273|1.795885 2.200985 3.105807|1.782288 2.178813 3.054540|1.770933 2.160369 3.012276|1.761310 2.144787 2.976843|1.753050 2.131450 2.946713|1.745884 2.119905 2.920782|1.739607 2.109816 2.898231|1.734064 2.100922 2.878440|1.729133 2.093024 2.860935|1.724718 2.085963 2.845340|1.720743 2.079614 2.831360|1.717144 2.073873 2.818756|1.713872 2.068658 2.807336|1.710882 2.063899 2.796940|1.708141 2.059539 2.787436|1.705618 2.055529 2.778715|1.703288 2.051831 2.770683|1.701131 2.048407 2.763262|1.699127 2.045230 2.756386|1.697261 2.042272 2.749996|1.695519 2.039513 2.744042|1.693889 2.036933 2.738481|1.692360 2.034515 2.733277|1.690924 2.032245 2.728394|1.689572 2.030108 2.723806|1.688298 2.028094 2.719485|1.687094 2.026192 2.715409|1.685954 2.024394 2.711558|1.684875 2.022691 2.707913|1.683851 2.021075 2.704459|1.675905 2.008559 2.677793|1.670649 2.000298 2.660283|1.664125 1.990063 2.638691|1.660234 1.983972 2.625891|1.657651 1.979930 2.617421|1.644854 1.959964 2.575829`
	books := [3]string{
		"6.314 2.920 2.353 2.132 2.015 1.943 1.895 1.860 1.833 1.812 1.796 1.782 1.771 1.761 1.753 1.746 1.740 1.734 1.729 1.725 1.721 1.717 1.714 1.711 1.708 1.706 1.703 1.701 1.699 1.697 1.696 1.694 1.692 1.691 1.690 1.688 1.687 1.686 1.685 1.684 - - - - - -",
		"12.706 4.303 3.182 2.776 2.571 2.447 2.365 2.306 2.262 2.228 2.201 2.179 2.160 2.145 2.131 2.120 2.110 2.101 2.093 2.086 2.080 2.074 2.069 2.064 2.060 2.056 2.052 2.048 2.045 2.042 2.040 2.037 2.035 2.032 2.030 2.028 2.026 2.024 2.023 2.021 2.009 2.000 1.990 1.984 1.980 1.960",
		"63.657 9.925 5.841 4.604 4.032 3.707 3.499 3.355 3.250 3.169 3.106 3.055 3.012 2.977 2.947 2.921 2.898 2.878 2.861 2.845 2.831 2.819 2.807 2.797 2.787 2.779 2.771 2.763 2.756 2.750 2.744 2.738 2.733 2.728 2.724 2.719 2.715 2.712 2.708 2.704 - - - - - -",
	}
	var columns [3][]string
	for k := range books {
		columns[k] = strings.Fields(books[k])
	}
	var cases []checkCase
	for i, row := range strings.Split(figures, "|") {
		df, name := float64(i+1), strconv.Itoa(i+1)
		if i >= 40 {
			df = []float64{50, 60, 80, 100, 120, math.Inf(1)}[i-40]
			name = []string{"50", "60", "80", "100", "120", "Inf"}[i-40]
		}
		cases = append(cases, checkCase{
			name: "j-t-" + name, figures: row,
			published: columns[0][i] + " " + columns[1][i] + " " + columns[2][i],
			source:    "printed t tables, three decimals, recalled from memory",
			got: func(v *values) {
				for _, level := range []float64{90, 95, 99} {
					v.add(TwoSided(level, df))
				}
			},
		})
	}
	return cases
}
