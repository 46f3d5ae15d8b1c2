package convert

import (
	"errors"
	"math"
	"testing"
)

// Impossible input gives the error that says what is wrong, never a value.
func TestImpossibleInput(t *testing.T) {
	p := func(s string) Printed { return printed(t, s) }
	nan, inf := math.NaN(), math.Inf(1)
	one := func(_ float64, err error) error { return err }
	pair := func(_ MeanSD, err error) error { return err }
	both := func(_ Range, err error) error { return err }
	g := Group{20, 12.4, 1.3}
	cases := []struct {
		name string
		err  error
		want error
	}{
		{"n 1", one(SDFromInterval(1, 2, 95, 1, 10)), ErrSize},
		{"n 0", one(SDFromSE(1, 0)), ErrSize},
		{"n negative", one(SDFromSE(1, -4)), ErrSize},
		{"bounds descend", one(SEFromInterval(2, 1, 95, 10)), ErrOrder},
		{"no width", one(SEFromInterval(2, 2, 95, 10)), ErrSpread},
		{"negative SE", one(SDFromSE(-1, 10)), ErrSpread},
		{"level 0", one(SEFromInterval(1, 2, 0, 10)), ErrLevel},
		{"level 100", one(SEFromInterval(1, 2, 100, 10)), ErrLevel},
		{"level not a number", one(SEFromInterval(1, 2, nan, 10)), ErrLevel},
		{"no degrees of freedom", one(SEFromInterval(1, 2, 95, 0)), ErrDF},
		{"bound not a number", one(SEFromInterval(nan, 2, 95, 10)), ErrNotFinite},
		{"bound infinite", one(SEFromInterval(1, inf, 95, 10)), ErrNotFinite},
		{"overflow", one(SDFromSE(math.MaxFloat64, 1000)), ErrNotFinite},
		{"probability 0", one(NormalUpper(0)), ErrDomain},
		{"probability 1", one(TUpper(1, 5)), ErrDomain},
		{"t not a number", one(TTail(nan, 5)), ErrNotFinite},
		{"degrees of freedom not a number", one(TTail(1, nan)), ErrDF},
		{"not a number printed", func() error { _, err := ReadPrinted("1.2.3"); return err }(), ErrNotFinite},
		{"margin: bounds descend", both(Margin(p("2"), p("1"), nil, Raw)), ErrOrder},
		{"margin: no logarithm", both(Margin(p("-1"), p("2"), nil, Log)), ErrDomain},
		{"margin: no logit", both(Margin(p("0.5"), p("1.0"), nil, Logit)), ErrDomain},
		{"margin: lopsided", both(Margin(p("26.5"), p("30.1"), &Printed{28.0, .05}, Raw)), ErrInconsistent},
		{"t of 0", one(SEFromT(1.5, 0)), ErrDomain},
		{"difference of 0", one(SEFromT(0, 2)), ErrDomain},
		{"negative F", one(TFromF(-1)), ErrDomain},
		{"three-sided test", one(TFromP(.03, 3, 10)), ErrDomain},
		{"p above 1", one(TFromP(1.2, 2, 10)), ErrDomain},
		{"p that is none", func() error { _, err := ReadP("p = 12"); return err }(), ErrDomain},
		{"arms of one each", one(PooledSDFromSE(1, 1, 1)), ErrSize},
		{"difference may be 0", both(PooledSDFromP(p("0.0"), PValue{Range{.01, .02}, true}, 2, 10, 10)), ErrDomain},
		{"one group", one(PooledSDFromANOVA([]float64{1}, []int{3}, 2)), ErrSize},
		{"means without sizes", one(PooledSDFromANOVA([]float64{1, 2}, []int{3}, 2)), ErrSize},
		{"equal means", one(PooledSDFromANOVA([]float64{2, 2}, []int{3, 3}, 2)), ErrSpread},
		{"no such correlation", one(Correlation(1, 1, 3)), ErrInconsistent},
		{"correlation 2", one(ChangeSD(1, 1, 2)), ErrDomain},
		{"no SD after", func() error { _, err := FinalSD(6.4, 2, .2); return err }(), ErrInconsistent},
		{"correlation 1", one(ArmSDFromDifferences(1, 1)), ErrDomain},
		{"no n fits", func() error { _, _, err := NFromSDAndInterval(p("0.1"), Range{5, 6}, 95, false); return err }(), ErrNoSolution},
		{"SE may be 0", both(NFromSDAndSE(p("3.1"), p("0.0"))), ErrSpread},
		{"no df fits", func() error {
			_, _, err := DFFromTAndP(p("2.31"), PValue{Range{.0175, .0185}, true}, 2000)
			return err
		}(), ErrNoSolution},
		{"quartiles out of order", pair(WanFromQuartiles(3, 2, 4, 20)), ErrOrder},
		{"median above maximum", pair(WanFromRange(1, 9, 4, 20)), ErrOrder},
		{"no spread", pair(WanFromQuartiles(2, 2, 2, 20)), ErrSpread},
		{"two values have no quartiles", pair(WanFromQuartiles(1, 2, 3, 2)), ErrSize},
		{"logarithm of 0", pair(LogNormalFromQuartiles(0, 2, 3, 20)), ErrDomain},
		{"power of a negative", one(BoxCoxPower(-1, 2, 3)), ErrDomain},
		{"log odds of 0", func() error { _, err := LogitSEFromInterval(0, .2, 95); return err }(), ErrDomain},
		{"log odds of 1", func() error { _, err := LogitSEFromInterval(.8, 1, 95); return err }(), ErrDomain},
		{"median alone", func() error { _, err := QuantileEstimation(Quantiles{Median: 2}, 20); return err }(), ErrSize},
		{"ratio with a bound of 0", one(LogSEFromInterval(0, 2, 95, Normal)), ErrDomain},
		{"reduction by 100%", one(RatioFromPercentChange(-100)), ErrDomain},
		{"zero cell", one(LogOddsRatioSE(0, 1, 2, 3)), ErrSize},
		{"more events than units", one(LogRiskRatioSE(11, 10, 2, 30)), ErrOrder},
		{"no allocation", one(LogHazardRatioSE(10, 0, 1)), ErrDomain},
		{"more of them than there are", func() error { _, err := MatchProportion(21, 20, p("1"), p("2"), 95); return err }(), ErrOrder},
		{"151 percent", func() error {
			_, err := CountsFromProportion(p("151"), p("1"), p("2"), 95, 1, 9, nil)
			return err
		}(), ErrDomain},
		{"negative count", both(PoissonInterval(-1, 95)), ErrDomain},
		{"rate with a bound of 0", one(CountFromRateInterval(0, 2, 95, true)), ErrDomain},
		{"geometric SD of 1", one(LogSDFromGSD(1)), ErrDomain},
		{"negative geometric mean", pair(LogNormalToRaw(-1, .2)), ErrDomain},
		{"lognormal overflow", pair(LogNormalToRaw(1, 40)), ErrNotFinite},
		{"union of one", func() error { _, err := Combine(g); return err }(), ErrSize},
		{"negative SD", func() error { _, err := Combine(g, Group{3, 1, -1}); return err }(), ErrSpread},
		{"part larger than the whole", func() error { _, err := Split(g, Group{30, 12, 1}); return err }(), ErrSize},
		{"part that is none", func() error { _, err := Split(g, Group{10, 99, 1}); return err }(), ErrInconsistent},
		{"range of 0", both(SDBoundsFromRange(0, 10)), ErrSpread},
		{"range of 26 values", func() error { _, _, err := SDFromRangeSmall(3, 26); return err }(), ErrDomain},
		{"no spread at all", func() error { _, err := Welch(Group{5, 1, 0}, Group{5, 2, 0}, 95); return err }(), ErrSpread},
		{"one degree of freedom", one(SmallSampleFactor(1)), ErrDF},
		{"mean off the scale", one(GreatestSD(11, 0, 10, 20)), ErrOrder},
		{"scale upside down", func() error { _, err := AttainableOnScale(p("3"), p("1"), 10, 5, 1, 95); return err }(), ErrOrder},
		{"scale too large to list", func() error { _, err := AttainableOnScale(p("3"), p("1"), 900, 0, 900, 95); return err }(), ErrDomain},
		{"impossible SD", func() error { _, err := SkewOfPositive(p("1.0"), p("9.0"), 4); return err }(), ErrInconsistent},
		{"two coefficients of variation", func() error { _, err := CVLogLikelihoods(1, 1, 9, []float64{.1, .2}, 95); return err }(), ErrSize},
		{"one-sided level of 50", one(SEFromOneSided(1, 2, 50, 10)), ErrLevel},
		{"no such simulation", func() error { _, err := TypicalErrors("sd-from-ci", 10); return err }(), ErrDomain},
	}
	reached := map[error]bool{}
	for _, c := range cases {
		if !errors.Is(c.err, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, c.err, c.want)
		}
		reached[c.want] = true
	}
	for _, e := range []error{ErrNotFinite, ErrSize, ErrLevel, ErrOrder, ErrSpread, ErrDomain, ErrDF, ErrInconsistent, ErrNoSolution} {
		if !reached[e] {
			t.Errorf("no case reaches %q", e)
		}
	}
}

// What is read as a number, and what is not.
func TestReadPrinted(t *testing.T) {
	for text, want := range map[string]Printed{
		"5": {5, .5}, "5.0": {5, .05}, "-0.40": {-.4, .005}, ".45": {.45, .005}, "+3.1": {3.1, .05}, "12%": {12, .5}, "2.1e5": {2.1e5, 5e3}, "7.": {7, .5},
	} {
		got, err := ReadPrinted(text)
		if err != nil || !near(got.Value, want.Value, 1e-12) || !near(got.Half, want.Half, 1e-12) {
			t.Errorf("%q: got %v, %v, want %v", text, got, err, want)
		}
	}
	for _, text := range []string{"", ".", "-", "1,5", "1 5", "abc", "NaN", "Inf", "0x10", "1e", "1e999", "--1", "1_0"} {
		if got, err := ReadPrinted(text); err == nil {
			t.Errorf("%q was read as %v", text, got)
		}
	}
}

func TestReadP(t *testing.T) {
	for text, want := range map[string]PValue{
		"0.03": {Range{.025, .035}, true}, "p = .031": {Range{.0305, .0315}, true}, "<0.05": {Range{0, .05}, false}, "P < 0.001": {Range{0, .001}, false},
		"> 0.05": {Range{.05, 1}, false}, "≥0.2": {Range{.2, 1}, false}, "0.000": {Range{0, .0005}, true}, "n.s.": {Range{.05, 1}, false}, "NS": {Range{.05, 1}, false}, "1.0": {Range{.95, 1}, true},
	} {
		got, err := ReadP(text)
		if err != nil || got.Exact != want.Exact || math.Abs(got.Low-want.Low) > 1e-12 || math.Abs(got.High-want.High) > 1e-12 {
			t.Errorf("%q: got %v, %v, want %v", text, got, err, want)
		}
	}
}

func TestSkewOfPositive(t *testing.T) {
	for _, c := range []struct {
		mean, sd string
		want     int
	}{{"12.4", "1.3", 0}, {"2.0", "1.0", 0}, {"2.0", "1.2", 1}, {"1.0", "1.4", 2}, {"2.0", "1.02", 0}} {
		got, err := SkewOfPositive(printed(t, c.mean), printed(t, c.sd), 30)
		if err != nil || got != c.want {
			t.Errorf("mean %s, SD %s: got %d, %v, want %d", c.mean, c.sd, got, err, c.want)
		}
	}
}

// FuzzNumbers: whatever goes in, out comes an error or finite values in order.
func FuzzNumbers(f *testing.F) {
	seeds := 0
	for _, s := range [][5]float64{{11.2, 12.4, 13.6, 95, 42}, {0, 0, 0, 0, 0}, {-1e308, 1, 1e308, 99.9, 2}, {1e-300, 2e-300, 3e-300, 50, 1e6}, {math.NaN(), 1, math.Inf(1), -5, -3}, {17, 24, 31, 95, 40}, {-2e307, 8, 1e308, 99.9, 9}, {-1e308, 72, 1e308, 99.9, 1}} {
		f.Add(s[0], s[1], s[2], s[3], int(s[4]))
		seeds++
	}
	if seeds < 8 {
		f.Fatalf("only %d seeds", seeds)
	}
	f.Fuzz(func(t *testing.T, low, mid, high, level float64, n int) {
		one := func(name string, v float64, err error) {
			if err == nil && finite(v) != nil {
				t.Errorf("%s(%v, %v, %v, %v, %d) = %v", name, low, mid, high, level, n, v)
			}
		}
		pair := func(name string, m MeanSD, err error) {
			one(name+" mean", m.Mean, err)
			one(name+" SD", m.SD, err)
			if err == nil && m.SD < 0 {
				t.Errorf("%s: SD %v", name, m.SD)
			}
		}
		v, err := SDFromInterval(low, high, level, n, float64(n-1))
		one("SDFromInterval", v, err)
		v, err = LogSEFromInterval(low, high, level, Normal)
		one("LogSEFromInterval", v, err)
		v, err = TUpper(mid, float64(n))
		one("TUpper", v, err)
		v, err = TTail(mid, high)
		one("TTail", v, err)
		m, err := WanFromQuartiles(low, mid, high, n)
		pair("WanFromQuartiles", m, err)
		m, err = WanFromRange(low, mid, high, n)
		pair("WanFromRange", m, err)
		m, err = LogNormalFromQuartiles(low, mid, high, n)
		pair("LogNormalFromQuartiles", m, err)
		m, err = BoxCoxFromQuartiles(low, mid, high, n)
		pair("BoxCoxFromQuartiles", m, err)
		fits, err := QuantileEstimation(Quantiles{Q1: low, Median: mid, Q3: high, HasQuartiles: true}, n)
		for _, fit := range fits {
			pair(fit.Family, fit.MeanSD, err)
		}
		if limits := (Bounded{math.Floor(low), math.Ceil(high) + level}); finite(limits.High-limits.Low) == nil {
			fits, err = QuantileEstimation(Quantiles{Q1: low, Median: mid, Q3: high, HasQuartiles: true, Limits: &limits}, n)
			for _, fit := range fits {
				pair(fit.Family, fit.MeanSD, err)
				if slack := 1e-9 * (limits.High - limits.Low); fit.Family == "beta" && (fit.Mean < limits.Low-slack || fit.Mean > limits.High+slack || fit.SD > (limits.High-limits.Low)/2+slack) {
					t.Errorf("beta between %v: %+v", limits, fit)
				}
			}
		}
		g, err := Combine(Group{n, low, high}, Group{3, mid, 1})
		one("Combine", g.SD, err)
		g, err = Split(Group{n, low, high}, Group{3, mid, 1})
		one("Split", g.SD, err)
		c, err := Welch(Group{n, low, high}, Group{5, mid, 1}, level)
		one("Welch", c.P, err)
		h, err := Hedges(Group{n, low, high}, Group{5, mid, 1})
		one("Hedges", h.SEExact, err)
		v, err = CountFromRateInterval(low, high, level, true)
		one("CountFromRateInterval", v, err)
		r, err := PoissonInterval(math.Abs(mid), level)
		one("PoissonInterval", r.High, err)
		r, err = Margin(Printed{low, .05}, Printed{high, .05}, &Printed{mid, .05}, Log)
		one("Margin", r.High-r.Low, err)
		if err == nil && r.Low > r.High {
			t.Errorf("margin %v", r)
		}
	})
}
