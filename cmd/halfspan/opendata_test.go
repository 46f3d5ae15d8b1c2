package main

import (
	"bufio"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"halfspan/convert"
	"halfspan/convert/working"
)

// openGroup is one group of an open data set (base R's), as R summarises it.
type openGroup struct {
	name                 string
	n                    int
	mean, sd, se, lo, hi float64
	quantiles            [5]float64
}

// openGroups reads the summaries that convert/testdata/reference.R wrote.
func openGroups(t *testing.T) []openGroup {
	t.Helper()
	f, err := os.Open("../../convert/testdata/reference.tsv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	var out []openGroup
	lines := bufio.NewScanner(f)
	for lines.Scan() {
		cells := strings.Split(lines.Text(), "\t")
		if !strings.HasPrefix(cells[0], "k-") || len(cells) != 14 {
			continue
		}
		v := make([]float64, 13)
		for i := range v {
			if v[i], err = strconv.ParseFloat(cells[i+1], 64); err != nil {
				t.Fatal(err)
			}
		}
		g := openGroup{name: strings.TrimPrefix(cells[0], "k-"), n: int(v[0]), mean: v[1], sd: v[2], se: v[3], lo: v[4], hi: v[5]}
		copy(g.quantiles[:], v[6:11])
		out = append(out, g)
	}
	if err := lines.Err(); err != nil {
		t.Fatal(err)
	}
	if len(out) != 20 {
		t.Fatalf("%d groups, want 20", len(out))
	}
	return out
}

// TestOpenDataEndToEnd prints the groups of open data sets as papers would and lets
// the program read them: the raw data's SD lies in the range it gives, each time.
func TestOpenDataEndToEnd(t *testing.T) {
	for _, g := range openGroups(t) {
		// As many decimals as make the SE two digits, at least none.
		d := max(0, 1-int(math.Floor(math.Log10(g.se))))
		num := func(v float64, decimals int) string { return strconv.FormatFloat(v, 'f', decimals, 64) }
		cases := []struct{ how, text, use string }{
			{"interval", fmt.Sprintf("mean %s (95%% CI %s to %s), n = %d", num(g.mean, d), num(g.lo, d), num(g.hi, d), g.n), "converted"},
			{"interval, coarse", fmt.Sprintf("mean %s (95%% CI %s to %s), n = %d", num(g.mean, max(d-1, 0)), num(g.lo, max(d-1, 0)), num(g.hi, max(d-1, 0)), g.n), "converted"},
			{"± SE", fmt.Sprintf("mean ± SE %s ± %s, n = %d", num(g.mean, d), num(g.se, d), g.n), "converted"},
			{"± SD", fmt.Sprintf("mean ± SD %s ± %s, n = %d", num(g.mean, d), num(g.sd, d), g.n), "printed"},
			{"(SD)", fmt.Sprintf("%s (SD %s), n = %d", num(g.mean, d), num(g.sd, d), g.n), "printed"},
		}
		for _, c := range cases {
			t.Run(g.name+"/"+c.how, func(t *testing.T) {
				found, err := understand(c.text, convertOptions{})
				if err != nil {
					t.Fatal(err)
				}
				if len(found) != 1 {
					t.Fatalf("%s: %d results", c.text, len(found))
				}
				r := found[0].Record
				if r.Use != c.use || r.SD == nil || r.SDLow == nil || r.SDHigh == nil {
					t.Fatalf("%s: %s, %s", c.text, r.Use, r.Reason)
				}
				if g.sd < float64(*r.SDLow) || g.sd > float64(*r.SDHigh) {
					t.Errorf("%s: SD from %v to %v, the raw data's is %v", c.text, *r.SDLow, *r.SDHigh, g.sd)
				}
			})
		}
		t.Run(g.name+"/median", func(t *testing.T) { medianEndToEnd(t, g) })
	}
}

// medianEndToEnd prints median and quartiles, and median and range: the SD of the
// raw data lies within the bounds that any sample with that range has, and the
// proposals are there, none taken.
func medianEndToEnd(t *testing.T, g openGroup) {
	q := g.quantiles
	quartiles := fmt.Sprintf("median %v (IQR %v to %v), n = %d", q[2], q[1], q[3], g.n)
	extremes := fmt.Sprintf("median %v (range %v to %v), n = %d", q[2], q[0], q[4], g.n)
	for text, preferred := range map[string]string{quartiles: "luo-quartiles with wan-quartiles", extremes: "luo-range with wan-range"} {
		found, err := understand(text, convertOptions{})
		if err != nil {
			t.Fatal(err)
		}
		r := found[0].Record
		if len(found) != 1 || r.SD != nil || r.Mean != nil || r.Use != "withheld" {
			t.Fatalf("%s: %d results, %+v", text, len(found), r)
		}
		var proposed *working.Alternative
		for i, a := range found[0].Trail.Alternatives {
			if a.Name == preferred {
				proposed = &found[0].Trail.Alternatives[i]
			}
		}
		if proposed == nil || proposed.SD == nil || proposed.Mean == nil {
			t.Fatalf("%s: %s is not proposed", text, preferred)
		}
		// Far off only where the data are far from normal, and never by half.
		if off := math.Abs(float64(*proposed.SD)/g.sd - 1); off > 0.5 {
			t.Errorf("%s: proposed SD %v, the raw data's is %v", text, *proposed.SD, g.sd)
		}
	}
	bounds, err := convert.SDBoundsFromRange(q[4]-q[0], g.n)
	if err != nil || !bounds.Holds(g.sd) {
		t.Errorf("range %v to %v, n %d: bounds %v do not hold %v, %v", q[0], q[4], g.n, bounds, g.sd, err)
	}
}
