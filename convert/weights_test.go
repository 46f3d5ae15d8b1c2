package convert

import (
	"math"
	"math/rand/v2"
	"sort"
	"testing"
)

// The weights of Luo and the divisors of Shi are recalled from memory. Their papers
// chose them to come near the best estimate from a normal sample; here that best is
// found by simulation, from the covariances of what the methods combine. A constant
// recalled wrongly by a tenth or more would show; its last digit cannot.
func TestRecalledConstantsAreNearTheBest(t *testing.T) {
	const samples = 20000
	for _, n := range []int{25, 100, 400} {
		r := rand.New(rand.NewPCG(7, uint64(n)))
		var ends, hinges, medians, ranges, iqrs []float64
		x := make([]float64, n)
		for range samples {
			for i := range x {
				x[i] = r.NormFloat64()
			}
			sort.Float64s(x)
			at := func(p float64) float64 { // type 7
				h := p * float64(n-1)
				i := int(h)
				if i+1 == n {
					return x[i]
				}
				return x[i] + (h-float64(i))*(x[i+1]-x[i])
			}
			a, q1, m, q3, b := x[0], at(.25), at(.5), at(.75), x[n-1]
			ends, hinges, medians = append(ends, (a+b)/2), append(hinges, (q1+q3)/2), append(medians, m)
			ranges, iqrs = append(ranges, b-a), append(iqrs, q3-q1)
		}
		f := float64(n)
		near := func(what string, got, want, within float64) {
			t.Helper()
			t.Logf("n %d: %s: recalled %.3f, best %.3f", n, what, got, want)
			if math.Abs(got-want) > within {
				t.Errorf("n %d: %s: recalled %.3f, the best by simulation is %.3f", n, what, got, want)
			}
		}
		// Two estimates: the weight of the first that gives the least variance.
		best2 := func(u, v []float64) float64 {
			c := covariance(u, v)
			return (covariance(v, v) - c) / (covariance(u, u) + covariance(v, v) - 2*c)
		}
		near("luo-range", 4/(4+math.Pow(f, .75)), best2(ends, medians), 0.03)
		near("luo-quartiles", .7+.39/f, best2(hinges, medians), 0.03)
		w1, w2 := best3(ends, hinges, medians)
		near("luo-five, ends", 2.2/(2.2+math.Pow(f, .75)), w1, 0.03)
		near("luo-five, hinges", .7-.72/math.Pow(f, .55), w2, 0.04)
		// The SD from range and quartiles: both made unbiased, then weighed alike.
		scale := func(v []float64) []float64 {
			m := mean(v)
			out := make([]float64, len(v))
			for i := range v {
				out[i] = v[i] / m
			}
			return out
		}
		zr, zq := mustUpper(t, 1-(f-.375)/(f+.25)), mustUpper(t, 1-(.75*f-.125)/(f+.25))
		recalled := mean(ranges) / ((2 + .14*math.Pow(f, .6)) * zr)
		near("shi-five, the share of the range", recalled, best2(scale(ranges), scale(iqrs)), 0.03)
		whole := recalled + mean(iqrs)/((2+2/(.07*math.Pow(f, .6)))*zq)
		near("shi-five, the sum of both for SD 1", whole, 1, 0.01)
	}
}

func mustUpper(t *testing.T, tail float64) float64 {
	t.Helper()
	z, err := NormalUpper(tail)
	if err != nil {
		t.Fatal(err)
	}
	return z
}

func mean(v []float64) float64 {
	sum := 0.0
	for _, x := range v {
		sum += x
	}
	return sum / float64(len(v))
}

func covariance(u, v []float64) float64 {
	mu, mv, sum := mean(u), mean(v), 0.0
	for i := range u {
		sum += (u[i] - mu) * (v[i] - mv)
	}
	return sum / float64(len(u)-1)
}

// best3 gives the weights of the first two of three unbiased estimates that give the
// least variance, the third having the rest.
func best3(a, b, c []float64) (w1, w2 float64) {
	d1, d2 := make([]float64, len(a)), make([]float64, len(a))
	for i := range a {
		d1[i], d2[i] = a[i]-c[i], b[i]-c[i]
	}
	v11, v22, v12 := covariance(d1, d1), covariance(d2, d2), covariance(d1, d2)
	r1, r2 := -covariance(d1, c), -covariance(d2, c)
	det := v11*v22 - v12*v12
	return (r1*v22 - r2*v12) / det, (r2*v11 - r1*v12) / det
}
