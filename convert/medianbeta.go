package convert

import (
	"math"

	"gonum.org/v1/gonum/mathext"
	"gonum.org/v1/gonum/optimize"
)

// Bounded says between which limits the outcome lies by its nature: 0 and 1 for a
// proportion, the ends of a scale for a score.
type Bounded struct{ Low, High float64 }

// fitBeta finds the beta law between the limits whose quantiles lie closest to x;
// ok is false where they do not hold x or no law is found. The search goes over the
// logarithms of both shapes, from those with the mean and SD of the straight line
// through the normal scores.
func fitBeta(p, x []float64, limits Bounded) (f Fit, ok bool) {
	width := limits.High - limits.Low
	if !(width > 0) || finite(width) != nil || x[0] < limits.Low || x[len(x)-1] > limits.High {
		return Fit{}, false
	}
	y := make([]float64, len(x))
	for i := range x {
		y[i] = (x[i] - limits.Low) / width
	}
	// Shapes beyond these are a point or two points, no law of values.
	const least, most = -4, 12
	residual := func(log []float64) float64 {
		if min(log[0], log[1]) < least || max(log[0], log[1]) > most {
			return math.Inf(1)
		}
		a, b := math.Exp(log[0]), math.Exp(log[1])
		sum := 0.0
		for i := range y {
			d := mathext.InvRegIncBeta(a, b, p[i]) - y[i]
			sum += d * d
		}
		if math.IsNaN(sum) {
			return math.Inf(1)
		}
		return sum
	}
	at := betaStart(fitNormal(p, y).MeanSD)
	for range 3 { // a simplex that has collapsed is opened anew
		r, err := optimize.Minimize(optimize.Problem{Func: residual}, at, &optimize.Settings{
			FuncEvaluations: 2000, Converger: &optimize.FunctionConverge{Absolute: 1e-16, Iterations: 60}}, &optimize.NelderMead{})
		if r == nil || err != nil && len(r.X) != len(at) {
			return Fit{}, false
		}
		at = r.X
	}
	found := residual(at)
	a, b := math.Exp(at[0]), math.Exp(at[1])
	m := MeanSD{limits.Low + width*a/(a+b), width * math.Sqrt(a*b/(a+b+1)) / (a + b)}
	if math.IsInf(found, 1) || finite(m.Mean, m.SD) != nil {
		return Fit{}, false
	}
	return Fit{"beta", m, found * width * width}, true
}

// betaStart gives the logarithms of the shapes of the beta law with this mean and
// SD, or of a flat one where there is none.
func betaStart(m MeanSD) []float64 {
	k := m.Mean*(1-m.Mean)/(m.SD*m.SD) - 1
	a, b := m.Mean*k, (1-m.Mean)*k
	if !(a > 0.05 && b > 0.05 && a < 1e5 && b < 1e5) {
		return []float64{0, 0}
	}
	return []float64{math.Log(a), math.Log(b)}
}
