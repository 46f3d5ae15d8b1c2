package convert

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/stat/distuv"
)

// The reason for tails.go: beside R's values (reference.tsv) the library's normal
// tail is one minus the lower tail, 0 from z = 9 on; its t tail keeps seven digits
// at 10^8 degrees of freedom; its t quantile is off by more than its own size at a
// probability of 1e-15 and 10^5 degrees of freedom. Ours agree to 1e-9 everywhere.
func TestTailsWhereTheLibraryFails(t *testing.T) {
	reference := readReference(t)
	off := func(got, want float64) float64 { return math.Abs(got/want - 1) }
	for i, z := range []float64{-3, 0, 1, 1.959963984540054, 5, 9, 20, 37} {
		want := reference["normal-tail"][i]
		library := off(distuv.UnitNormal.Survival(z), want)
		if z >= 9 && library < 0.5 {
			t.Errorf("the library's normal tail at %v is now good to %.1g: look whether tails.go is still needed", z, library)
		}
		if ours := off(NormalTail(z), want); ours > 1e-12 {
			t.Errorf("normal tail at %v is off by %.1g", z, ours)
		}
	}
	worst := func(name string, args []float64, f func(float64) float64) float64 {
		w := 0.0
		for i, x := range args {
			if want := reference[name][i]; want > 0 {
				w = math.Max(w, off(f(x), want))
			}
		}
		return w
	}
	tails := []float64{.001, .1, .5, 1, 2, 5, 12, 40}
	quantiles := []float64{.49, .25, .05, .025, .005, .0005, 1e-8, 1e-15}
	far := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: 1e8}
	near := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: 1e5}
	if w := worst("t-tail-100000000", tails, far.Survival); w < 1e-9 {
		t.Errorf("the library's t tail at 1e8 degrees of freedom is now good to %.1g", w)
	}
	if w := worst("t-upper-100000", quantiles, func(q float64) float64 { return -near.Quantile(q) }); w < 1e-9 {
		t.Errorf("the library's t quantile at 1e5 degrees of freedom is now good to %.1g", w)
	}
	for name, df := range map[string]float64{"100000000": 1e8, "100000": 1e5} {
		tail := worst("t-tail-"+name, tails, func(x float64) float64 { q, _ := TTail(x, df); return q })
		quantile := worst("t-upper-"+name, quantiles, func(q float64) float64 { x, _ := TUpper(q, df); return x })
		if tail > 1e-9 || quantile > 1e-9 {
			t.Errorf("%v degrees of freedom: tail off by %.1g, quantile by %.1g", df, tail, quantile)
		}
	}
}

// The t law with 1 and 2 degrees of freedom has closed forms.
func TestTClosedForms(t *testing.T) {
	for _, x := range []float64{0.01, 0.3, 1, 2.7, 12, 300} {
		one, err := TTail(x, 1)
		if err != nil {
			t.Fatal(err)
		}
		if want := math.Atan(1/x) / math.Pi; !near(one, want, 1e-12) {
			t.Errorf("1 degree of freedom, t %v: got %.17g, want %.17g", x, one, want)
		}
		two, err := TTail(x, 2)
		if err != nil {
			t.Fatal(err)
		}
		root := math.Sqrt(2 + x*x)
		if want := 1 / (root * (root + x)); !near(two, want, 1e-12) {
			t.Errorf("2 degrees of freedom, t %v: got %.17g, want %.17g", x, two, want)
		}
	}
}

// Quantile and tail undo each other, also where degrees of freedom are no whole
// number, and t falls towards z as they grow.
func TestQuantilesUndoTails(t *testing.T) {
	for _, df := range []float64{1, 1.3, 2, 2.5, 3, 5, 17.2, 60, 999, 1e5, 1e8, Normal} {
		before := math.Inf(1)
		for _, q := range []float64{1e-14, 1e-9, 1e-5, .001, .025, .1, .3, .4999, .7, .999} {
			x, err := TUpper(q, df)
			if err != nil {
				t.Fatal(err)
			}
			back, err := TTail(x, df)
			if err != nil {
				t.Fatal(err)
			}
			if !near(back, q, 1e-10) {
				t.Errorf("df %v: tail of the quantile at %v is %.17g", df, q, back)
			}
			if x >= before {
				t.Errorf("df %v: quantiles do not fall at %v", df, q)
			}
			before = x
		}
	}
	last := math.Inf(1)
	for n := 2; n < 3000; n++ {
		x, err := TwoSided(95, float64(n-1))
		if err != nil {
			t.Fatal(err)
		}
		if x >= last || x < 1.9599 {
			t.Fatalf("t at n %d is %v, before it %v", n, x, last)
		}
		last = x
	}
}
