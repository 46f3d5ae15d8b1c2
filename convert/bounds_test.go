package convert

import (
	"math"
	"math/rand/v2"
	"testing"
)

// Every sample of six whole numbers from 0 to 6 (924 of them) respects the bounds
// of the SD and passes the tests for whole numbers.
func TestBoundsOverAllSmallSamples(t *testing.T) {
	const n, top = 6, 6
	x := make([]float64, n)
	samples := 0
	attained := 0
	var fill func(k, from int)
	fill = func(k, from int) {
		if k < n {
			for v := from; v <= top; v++ {
				x[k] = float64(v)
				fill(k+1, v)
			}
			return
		}
		samples++
		m := sample(x)
		most, err := GreatestSD(m.Mean, 0, top, n)
		if err != nil || m.SD > most*(1+1e-12) {
			t.Fatalf("%v: SD %v above %v, %v", x, m.SD, most, err)
		}
		if math.Abs(m.SD-most) < 1e-12 {
			attained++
		}
		if a, b := x[0], x[n-1]; a < b {
			least, err := LeastSD(m.Mean, a, b, n)
			if err != nil || m.SD < least*(1-1e-12) {
				t.Fatalf("%v: SD %v below %v, %v", x, m.SD, least, err)
			}
			within, err := SDBoundsFromRange(b-a, n)
			if err != nil || m.SD < within.Low*(1-1e-12) || m.SD > within.High*(1+1e-12) {
				t.Fatalf("%v: SD %v outside %v, %v", x, m.SD, within, err)
			}
		}
		mean, sd := asPrinted(t, m.Mean, 2), asPrinted(t, m.SD, 2)
		if ok, err := MeanAttainable(mean, n, 1); err != nil || !ok {
			t.Fatalf("%v: mean %v refuted, %v", x, mean.Value, err)
		}
		if ok, err := SDAttainable(mean, Range{math.Max(sd.Low(), 0), sd.High()}, n); err != nil || !ok {
			t.Fatalf("%v: SD %v refuted, %v", x, sd.Value, err)
		}
		if samples%10 == 0 && sd.Value > 0 {
			fits, err := AttainableOnScale(mean, sd, n, 0, top, 95)
			if err != nil || !fits[AsSD] {
				t.Fatalf("%v: SD %v refuted on the scale, %v", x, sd.Value, err)
			}
		}
	}
	fill(0, 0)
	if samples != 924 {
		t.Errorf("%d samples, want 924", samples)
	}
	if attained == 0 {
		t.Error("the upper bound is never attained")
	}
}

// Margin against brute force: the extremes over random intervals that print like
// this come near both ends and never pass them.
func TestMarginAgainstBruteForce(t *testing.T) {
	low, high, est := printed(t, "30.0"), printed(t, "34.2"), printed(t, "32.14")
	want, err := Margin(low, high, &est, Raw)
	if err != nil {
		t.Fatal(err)
	}
	got := Range{math.Inf(1), 0}
	const steps = 2000
	for i := range steps {
		m := est.Low() + (est.High()-est.Low())*(float64(i)+.5)/steps
		for k := range steps {
			w := 2 + 0.2*(float64(k)+.5)/steps
			if math.Abs(m-w-low.Value) <= low.Half && math.Abs(m+w-high.Value) <= high.Half {
				got.Low, got.High = math.Min(got.Low, w), math.Max(got.High, w)
			}
		}
	}
	if got.Low < want.Low-1e-12 || got.High > want.High+1e-12 || got.Low > want.Low+2e-4 || got.High < want.High-2e-4 {
		t.Errorf("brute force gives %v, the formula %v", got, want)
	}
}

// Box-Cox with power 1 and 0 are the plain and the lognormal method.
func TestBoxCoxMeetsItsNeighbours(t *testing.T) {
	got, err := BoxCoxFromQuartiles(62, 70, 78, 120)
	if err != nil {
		t.Fatal(err)
	}
	mean, _ := LuoMeanFromQuartiles(62, 70, 78, 120)
	plain, _ := WanFromQuartiles(62, 70, 78, 120)
	if !near(got.Mean, mean, 1e-4) || !near(got.SD, plain.SD, 1e-3) {
		t.Errorf("power 1: got %v, want %v, %v", got, mean, plain.SD)
	}
	got, err = BoxCoxFromQuartiles(9, 12, 16.0000001, 40)
	if err != nil {
		t.Fatal(err)
	}
	logs, _ := LogNormalFromQuartiles(9, 12, 16, 40)
	if !near(got.Mean, logs.Mean, 1e-3) || !near(got.SD, logs.SD, 1e-2) {
		t.Errorf("power 0: got %v, want %v", got, logs)
	}
}

// A million simulated lognormal values have nearly the mean and SD of the formula.
func TestLogNormalAgainstSimulation(t *testing.T) {
	r := rand.New(rand.NewPCG(randomSeed, 8))
	const count = 1_000_000
	var sum, squares float64
	for range count {
		x := math.Exp(1 + 0.6*r.NormFloat64())
		sum, squares = sum+x, squares+x*x
	}
	mean := sum / count
	sd := math.Sqrt(squares/count - mean*mean)
	want, err := LogNormalToRaw(math.E, 0.6)
	if err != nil || !near(mean, want.Mean, 0.005) || !near(sd, want.SD, 0.01) {
		t.Errorf("simulated %v, %v; formula %v, %v", mean, sd, want, err)
	}
}

// The same values in another unit give the same result in that unit.
func TestUnitsDoNotMatter(t *testing.T) {
	for _, unit := range []float64{1e-6, 0.45, 1000} {
		a, err := SDFromInterval(11.2*unit, 13.6*unit, 95, 42, 41)
		b, _ := SDFromInterval(11.2, 13.6, 95, 42, 41)
		if err != nil || !near(a, b*unit, 1e-12) {
			t.Errorf("interval in unit %v: %v against %v, %v", unit, a, b*unit, err)
		}
		for _, level := range []float64{80, 90, 99} {
			f, _ := TwoSided(level, 41)
			c, err := SDFromInterval(12.4-f*.6, 12.4+f*.6, level, 42, 41)
			if err != nil || !near(c, .6*math.Sqrt(42), 1e-9) {
				t.Errorf("level %v: %v, %v", level, c, err)
			}
		}
		m, err := ShiSDFromFive(4*unit, 9*unit, 16*unit, 31*unit, 40)
		k, _ := ShiSDFromFive(4, 9, 16, 31, 40)
		if err != nil || !near(m, k*unit, 1e-12) {
			t.Errorf("five numbers in unit %v: %v against %v, %v", unit, m, k*unit, err)
		}
	}
}
