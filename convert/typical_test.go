package convert

import (
	"flag"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strings"
	"testing"
)

var simulateAll = flag.Bool("simulate", false, "make the table of typical errors anew: minutes")

// law makes one random value.
type law struct {
	name string
	draw func(r *rand.Rand) float64
}

func laws() []law {
	gamma := func(shape int) func(*rand.Rand) float64 {
		return func(r *rand.Rand) float64 {
			sum := 0.0
			for range shape {
				sum += r.ExpFloat64()
			}
			return sum
		}
	}
	return []law{
		// Away from 0, so that the methods for positive values can be tried too.
		{"normal", func(r *rand.Rand) float64 { return 5 + r.NormFloat64() }},
		{"gamma shape 4", gamma(4)},
		{"gamma shape 1", gamma(1)},
		{"lognormal s=0.5", func(r *rand.Rand) float64 { return math.Exp(r.NormFloat64() / 2) }},
		{"lognormal s=1", func(r *rand.Rand) float64 { return math.Exp(r.NormFloat64()) }},
	}
}

// quartile is a quantile by linear interpolation of ranks 1 to n (R's type 7) of
// sorted values.
func quartile(x []float64, p float64) float64 {
	h := p * float64(len(x)-1)
	i := int(h)
	if i+1 >= len(x) {
		return x[len(x)-1]
	}
	return x[i] + (h-float64(i))*(x[i+1]-x[i])
}

// simulated are the methods of the table: quick ones for all samples, slow ones
// for one in twenty and not at n = 10 and 50.
type simulated struct {
	name string
	slow bool
	from func(a, q1, m, q3, b float64, n int) (MeanSD, error)
}

func simulatedMethods() []simulated {
	only := func(mean float64, err error) (MeanSD, error) { return MeanSD{Mean: mean}, err }
	best := func(q Quantiles, n int) (MeanSD, error) {
		fits, err := QuantileEstimation(q, n)
		if err != nil {
			return MeanSD{}, err
		}
		return fits[0].MeanSD, nil
	}
	return []simulated{
		{"hozo-range", false, func(a, _, m, _, b float64, n int) (MeanSD, error) { return HozoFromRange(a, m, b, n) }},
		{"wan-range", false, func(a, _, m, _, b float64, n int) (MeanSD, error) { return WanFromRange(a, m, b, n) }},
		{"wan-quartiles", false, func(_, q1, m, q3, _ float64, n int) (MeanSD, error) { return WanFromQuartiles(q1, m, q3, n) }},
		{"wan-five", false, WanFromFive},
		{"bland-five", false, BlandFromFive},
		{"luo-range", false, func(a, _, m, _, b float64, n int) (MeanSD, error) { return only(LuoMeanFromRange(a, m, b, n)) }},
		{"luo-quartiles", false, func(_, q1, m, q3, _ float64, n int) (MeanSD, error) { return only(LuoMeanFromQuartiles(q1, m, q3, n)) }},
		{"luo-five", false, func(a, q1, m, q3, b float64, n int) (MeanSD, error) { return only(LuoMeanFromFive(a, q1, m, q3, b, n)) }},
		{"shi-five", false, func(a, q1, _, q3, b float64, n int) (MeanSD, error) {
			sd, err := ShiSDFromFive(a, q1, q3, b, n)
			return MeanSD{SD: sd}, err
		}},
		{"quantile-estimation-quartiles", true, func(_, q1, m, q3, _ float64, n int) (MeanSD, error) {
			return best(Quantiles{Q1: q1, Median: m, Q3: q3, HasQuartiles: true}, n)
		}},
		{"quantile-estimation-five", true, func(a, q1, m, q3, b float64, n int) (MeanSD, error) {
			return best(Quantiles{a, q1, m, q3, b, true, true, nil}, n)
		}},
		{"lognormal-quartiles", true, func(_, q1, m, q3, _ float64, n int) (MeanSD, error) {
			return LogNormalFromQuartiles(q1, m, q3, n)
		}},
		{"lognormal-five", true, LogNormalFromFive},
	}
}

// simulate gives the rows of one law and sample size.
func simulate(l law, n, samples int, seed uint64) []typicalRow {
	r := rand.New(rand.NewPCG(seed, uint64(n)))
	methods := simulatedMethods()
	sums := make([][4]float64, len(methods))
	counts := make([]float64, len(methods))
	x := make([]float64, n)
	for i := range samples {
		for k := range x {
			x[k] = l.draw(r)
		}
		truth := sample(x)
		slices.Sort(x)
		a, q1, m, q3, b := x[0], quartile(x, .25), quartile(x, .5), quartile(x, .75), x[n-1]
		for k, method := range methods {
			if method.slow && (i%20 != 0 || n == 10 || n == 50) || method.name[:3] == "log" && a <= 0 {
				continue
			}
			got, err := method.from(a, q1, m, q3, b, n)
			if err != nil {
				continue
			}
			dm, ds := (got.Mean-truth.Mean)/truth.SD, got.SD/truth.SD-1
			sums[k][0], sums[k][1] = sums[k][0]+dm, sums[k][1]+dm*dm
			sums[k][2], sums[k][3] = sums[k][2]+ds, sums[k][3]+ds*ds
			counts[k]++
		}
	}
	var rows []typicalRow
	for k, method := range methods {
		if counts[k] == 0 {
			continue
		}
		row := typicalRow{law: l.name, n: n, method: method.name}
		for i := range row.errors {
			row.errors[i] = 100 * sums[k][i] / counts[k]
			if i%2 == 1 {
				row.errors[i] = 100 * math.Sqrt(sums[k][i]/counts[k])
			}
		}
		if strings.HasPrefix(method.name, "luo") {
			row.errors[2], row.errors[3] = 0, 0
		}
		if method.name == "shi-five" {
			row.errors[0], row.errors[1] = 0, 0
		}
		rows = append(rows, row)
	}
	return rows
}

const typicalSeed = 20261201

var typicalSizes = []int{10, 25, 50, 100, 500}

// TestTypicalErrors makes the table of typical errors (-simulate: whole, 20,000
// samples a row) or makes a part of it again and compares.
func TestTypicalErrors(t *testing.T) {
	if *simulateAll {
		var b strings.Builder
		b.WriteString("# written by go test ./convert -run TestTypicalErrors -simulate (make errors); do not edit\n")
		b.WriteString("# law\tn\tmethod\tmean bias\tmean RMSE\tSD bias\tSD RMSE (percent; mean in SDs)\n")
		for i, l := range laws() {
			for _, n := range typicalSizes {
				for _, r := range simulate(l, n, 20000, typicalSeed+uint64(i)) {
					fmt.Fprintf(&b, "%s\t%d\t%s\t%.1f\t%.1f\t%.1f\t%.1f\n", r.law, r.n, r.method, r.errors[0], r.errors[1], r.errors[2], r.errors[3])
				}
			}
		}
		if err := os.WriteFile("typical.tsv", []byte(b.String()), 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	kept := map[string]typicalRow{}
	for _, r := range typicalRows() {
		kept[fmt.Sprint(r.law, r.n, r.method)] = r
	}
	if want := 5 * (5*9 + 3*4); len(kept) != want {
		t.Errorf("typical.tsv has %d rows, want %d", len(kept), want)
	}
	for i, l := range laws() {
		for _, n := range []int{10, 50} {
			for _, r := range simulate(l, n, 2000, 7+uint64(i)) {
				k, ok := kept[fmt.Sprint(r.law, r.n, r.method)]
				if !ok {
					t.Errorf("typical.tsv lacks %s, n %d, %s", r.law, r.n, r.method)
					continue
				}
				for j := range r.errors {
					// Four standard errors of a bias, and some for the smaller sample of RMSE.
					if allowed := 4*k.errors[j|1]/math.Sqrt(2000) + 0.12*k.errors[j|1] + 0.3; math.Abs(r.errors[j]-k.errors[j]) > allowed {
						t.Errorf("%s, n %d, %s, column %d: made again %.1f, kept %.1f", r.law, r.n, r.method, j+1, r.errors[j], k.errors[j])
					}
				}
			}
		}
	}
}

// TestTypicalErrorsAsFirstMeasured compares with the figures that another program
// (in R, other seeds) measured: bias/RMSE in percent.
func TestTypicalErrorsAsFirstMeasured(t *testing.T) {
	cases := []struct {
		law, method          string
		n                    int
		meanB, meanR, sB, sR float64
	}{
		{"normal", "luo-range", 50, 0, 8, 0, 0}, {"normal", "luo-quartiles", 50, 0, 6, 0, 0}, {"normal", "luo-five", 50, 0, 4, 0, 0},
		{"normal", "wan-range", 25, 0, 14, 1, 11}, {"normal", "wan-quartiles", 50, 0, 6, 1, 13}, {"normal", "wan-five", 50, 0, 6, 1, 6},
		{"normal", "shi-five", 50, 0, 0, 1, 6}, {"normal", "bland-five", 100, 0, 6, 15, 17}, {"normal", "hozo-range", 100, 0, 7, -16, 18},
		{"lognormal s=0.5", "wan-quartiles", 50, -15, 16, -12, 20}, {"lognormal s=0.5", "luo-quartiles", 50, -15, 16, 0, 0},
		{"lognormal s=1", "hozo-range", 100, -32, 32, 6, 22}, {"lognormal s=1", "wan-quartiles", 500, -23, 23, -48, 49},
		{"lognormal s=1", "shi-five", 500, 0, 0, -18, 20}, {"gamma shape 1", "wan-quartiles", 100, -20, 21, -17, 21},
		{"gamma shape 4", "luo-five", 500, -8, 8, 0, 0}, {"gamma shape 4", "wan-five", 25, 4, 8, -1, 9},
		{"lognormal s=0.5", "lognormal-quartiles", 100, 1, 6, 3, 17}, {"normal", "quantile-estimation-five", 100, 0, 6, 8, 13},
	}
	for _, c := range cases {
		errors, err := TypicalErrors(c.method, c.n)
		if err != nil {
			t.Error(err)
			continue
		}
		i := slices.IndexFunc(errors, func(e TypicalError) bool { return e.Law == c.law })
		if i < 0 {
			t.Errorf("no row for %s, %s", c.law, c.method)
			continue
		}
		e := errors[i]
		got := [4]float64{e.MeanBias, e.MeanRM, e.SDBias, e.SDRM}
		for j, want := range [4]float64{c.meanB, c.meanR, c.sB, c.sR} {
			known := want != 0 || j%2 == 0
			if known && math.Abs(got[j]-want) > 1.6+0.05*math.Abs(want) {
				t.Errorf("%s, n %d, %s, column %d: got %.1f, first measured %g", c.law, c.n, c.method, j+1, got[j], want)
			}
		}
	}
}
