package convert

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mathext"
)

// Quantiles are printed quantiles of a sample: the median and the quartiles, the
// extremes, or both.
type Quantiles struct {
	Min, Q1, Median, Q3, Max float64
	HasQuartiles             bool     // Q1 and Q3 are printed
	HasRange                 bool     // Min and Max are printed
	Limits                   *Bounded // of the outcome by its nature; nil where none are known
}

// points gives the printed quantiles and their probabilities for n values, the
// extremes at 1/n and 1-1/n.
func (q Quantiles) points(n int) (p, x []float64, err error) {
	add := func(prob, value float64) { p, x = append(p, prob), append(x, value) }
	f := float64(n)
	if q.HasRange {
		add(1/f, q.Min)
	}
	if q.HasQuartiles {
		add(0.25, q.Q1)
	}
	add(0.5, q.Median)
	if q.HasQuartiles {
		add(0.75, q.Q3)
	}
	if q.HasRange {
		add(1-1/f, q.Max)
	}
	if len(x) < 3 {
		return nil, nil, fmt.Errorf("%w: a median alone", ErrSize)
	}
	return p, x, quantiles(n, 5, x...)
}

// LogNormalFromQuartiles is mean and SD from the median and quartiles of values
// whose logarithms are near normal.
//
// Formula: on the logarithms the mean of LuoMeanFromQuartiles and the SD of
// WanFromQuartiles, then LogNormalToRaw.
// Arguments: in the units of the outcome, q1 > 0; n ≥ 3.
// Assumes: values near lognormal; explodes where they are not (gamma of shape 1:
// SD too large by 120% and more).
// Errors: ErrDomain for q1 ≤ 0; those of LuoMeanFromQuartiles.
// Limits: narrow quartiles give nearly the normal methods' values.
// Rounding: not carried through.
// Source: Higgins, White & Anzures-Cabrera 2008 with Wan 2014 and Luo 2018
// (recalled from memory).
// Checked: against R; error by simulation.
func LogNormalFromQuartiles(q1, median, q3 float64, n int) (MeanSD, error) {
	if !(q1 > 0) {
		return MeanSD{}, fmt.Errorf("%w: the logarithm of %v", ErrDomain, q1)
	}
	l1, l2, l3 := math.Log(q1), math.Log(median), math.Log(q3)
	mean, err := LuoMeanFromQuartiles(l1, l2, l3, n)
	if err != nil {
		return MeanSD{}, err
	}
	return LogNormalToRaw(math.Exp(mean), (l3-l1)/quartilesFactor(n))
}

// LogNormalFromFive is mean and SD from minimum, quartiles, median and maximum of
// values whose logarithms are near normal.
//
// Formula: on the logarithms the mean of LuoMeanFromFive and the SD of
// ShiSDFromFive, then LogNormalToRaw.
// Arguments: in the units of the outcome, minimum > 0; n ≥ 3.
// Assumes: values near lognormal; explodes where they are not.
// Errors: ErrDomain for minimum ≤ 0; those of LuoMeanFromFive.
// Limits: none.
// Rounding: not carried through.
// Source: as LogNormalFromQuartiles, with Shi 2020 (recalled from memory).
// Checked: error by simulation.
func LogNormalFromFive(minimum, q1, median, q3, maximum float64, n int) (MeanSD, error) {
	if !(minimum > 0) {
		return MeanSD{}, fmt.Errorf("%w: the logarithm of %v", ErrDomain, minimum)
	}
	a, b, c, d, e := math.Log(minimum), math.Log(q1), math.Log(median), math.Log(q3), math.Log(maximum)
	mean, err := LuoMeanFromFive(a, b, c, d, e, n)
	if err != nil {
		return MeanSD{}, err
	}
	sd, err := ShiSDFromFive(a, b, d, e, n)
	if err != nil {
		return MeanSD{}, err
	}
	return LogNormalToRaw(math.Exp(mean), sd)
}

// Fit is one law fitted to printed quantiles.
type Fit struct {
	Family   string  // normal, lognormal, gamma, Weibull, beta
	MeanSD           // of the fitted law
	Residual float64 // sum of squared differences between fitted and printed quantiles
}

// QuantileEstimation fits a normal, lognormal, gamma and Weibull law, and between
// known limits a beta law, to printed quantiles and gives all fits, the closest
// first.
//
// Formula: least squares of fitted minus printed quantiles at 1/n, 1/4, 1/2, 3/4
// and 1 - 1/n (those printed).
// Arguments: q in the units of the outcome; n ≥ 5. Lognormal, gamma and Weibull need
// positive values, beta needs q.Limits that hold all of them.
// Assumes: one of the laws holds. With three numbers one degree of freedom is
// left, so the choice of the law is weak.
// Errors: ErrSize, ErrOrder, ErrSpread, ErrNotFinite.
// Limits: errors of 50% and more at n = 25 when the law is wrong.
// Rounding: not carried through.
// Source: McGrath, Zhao, Steele, Thombs & Benedetti 2020 (recalled from memory; the
// beta law there on 0 to 1, here between any limits).
// Checked: the lognormal and the beta fit against R; error by simulation without
// limits.
func QuantileEstimation(q Quantiles, n int) ([]Fit, error) {
	p, x, err := q.points(n)
	if err != nil {
		return nil, err
	}
	fits := []Fit{fitNormal(p, x)}
	if err := finite(fits[0].Mean, fits[0].SD, fits[0].Residual); err != nil {
		return nil, fmt.Errorf("the values are too large to fit: %w", err)
	}
	if x[0] > 0 {
		for _, law := range []struct {
			name   string
			curve  func(shape float64) ([]float64, bool)
			moment func(shape, scale float64) MeanSD
		}{
			{"lognormal", logCurve(p, normalScore), func(s, scale float64) MeanSD { return lognormal(scale, s) }},
			{"gamma", gammaCurve(p), func(s, scale float64) MeanSD {
				k := 1 / (s * s)
				return MeanSD{k * scale, math.Sqrt(k) * scale}
			}},
			{"Weibull", logCurve(p, gumbelScore), weibullMoments},
		} {
			if f, ok := fitShape(law.curve, x); ok {
				m := law.moment(f.shape, f.scale)
				if _, err := m.checked(); err == nil {
					fits = append(fits, Fit{law.name, m, f.residual})
				}
			}
		}
	}
	if q.Limits != nil {
		if f, ok := fitBeta(p, x, *q.Limits); ok {
			fits = append(fits, f)
		}
	}
	for i := 1; i < len(fits); i++ { // insertion: five at most, ties keep their order
		for k := i; k > 0 && fits[k].Residual < fits[k-1].Residual; k-- {
			fits[k], fits[k-1] = fits[k-1], fits[k]
		}
	}
	return fits, nil
}

func normalScore(p float64) float64 { z, _ := NormalUpper(1 - p); return z }
func gumbelScore(p float64) float64 { return math.Log(-math.Log(1 - p)) }

func weibullMoments(s, scale float64) MeanSD {
	g1, g2 := math.Gamma(1+s), math.Gamma(1+2*s)
	return MeanSD{scale * g1, scale * math.Sqrt(math.Max(g2-g1*g1, 0))}
}

// fitNormal is the straight line through the normal scores.
func fitNormal(p, x []float64) Fit {
	var sz, sx, szz, szx float64
	k := float64(len(p))
	for i := range p {
		z := normalScore(p[i])
		sz, sx, szz, szx = sz+z, sx+x[i], szz+z*z, szx+z*x[i]
	}
	sd := (k*szx - sz*sx) / (k*szz - sz*sz)
	mean := (sx - sd*sz) / k
	f := Fit{Family: "normal", MeanSD: MeanSD{mean, sd}}
	for i := range p {
		d := mean + sd*normalScore(p[i]) - x[i]
		f.Residual += d * d
	}
	return f
}

// logCurve gives the quantiles exp(s·score(p)) of a law whose logarithm is a
// location-scale family, for scale 1.
func logCurve(p []float64, score func(float64) float64) func(float64) ([]float64, bool) {
	return func(s float64) ([]float64, bool) {
		out := make([]float64, len(p))
		for i := range p {
			out[i] = math.Exp(s * score(p[i]))
		}
		return out, finite(out...) == nil
	}
}

// gammaCurve gives the quantiles of a gamma law of coefficient of variation s, for
// scale 1.
func gammaCurve(p []float64) func(float64) ([]float64, bool) {
	return func(s float64) ([]float64, bool) {
		out := make([]float64, len(p))
		for i := range p {
			out[i] = mathext.GammaIncRegInv(1/(s*s), p[i])
		}
		return out, finite(out...) == nil
	}
}

type shapeFit struct{ shape, scale, residual float64 }

// fitShape finds the shape with the least residual; the scale for a given shape is
// linear least squares. A grid finds the valley, golden sections its floor.
func fitShape(curve func(float64) ([]float64, bool), x []float64) (shapeFit, bool) {
	at := func(logShape float64) shapeFit {
		s := math.Exp(logShape)
		e, ok := curve(s)
		if !ok {
			return shapeFit{residual: math.Inf(1)}
		}
		var ex, ee float64
		for i := range x {
			ex, ee = ex+e[i]*x[i], ee+e[i]*e[i]
		}
		f := shapeFit{shape: s, scale: ex / ee}
		for i := range x {
			d := f.scale*e[i] - x[i]
			f.residual += d * d
		}
		if math.IsNaN(f.residual) {
			f.residual = math.Inf(1)
		}
		return f
	}
	const low, high, steps = -6.0, 1.5, 60
	best, where := at(low), low
	for i := 1; i <= steps; i++ {
		l := low + (high-low)*float64(i)/steps
		if f := at(l); f.residual < best.residual {
			best, where = f, l
		}
	}
	if math.IsInf(best.residual, 1) {
		return best, false
	}
	a, b := where-(high-low)/steps, where+(high-low)/steps
	const golden = 0.6180339887498949
	c, d := b-golden*(b-a), a+golden*(b-a)
	fc, fd := at(c), at(d)
	for i := 0; i < 60; i++ {
		if fc.residual < fd.residual {
			b, d, fd = d, c, fc
			c = b - golden*(b-a)
			fc = at(c)
		} else {
			a, c, fc = c, d, fd
			d = a + golden*(b-a)
			fd = at(d)
		}
	}
	if fc.residual < fd.residual {
		return fc, true
	}
	return fd, true
}

// BoxCoxPower is the power that makes a printed summary symmetric about its
// median.
//
// Formula: solves f(low) + f(high) = 2·f(median), f(x) = (x^k - 1)/k, ln x at
// k = 0.
// Arguments: low, median, high in the units of the outcome, 0 < low < median <
// high.
// Assumes: some power makes the law near normal.
// Errors: ErrDomain for low ≤ 0; ErrOrder; ErrNoSolution outside powers -9 to 9.
// Limits: low·high = median² gives 0, the lognormal case; (low + high)/2 = median
// gives 1.
// Rounding: not carried through.
// Source: Box & Cox 1964; McGrath et al. 2020 (recalled from memory).
// Checked: against R.
func BoxCoxPower(low, median, high float64) (float64, error) {
	if err := finite(low, median, high); err != nil {
		return 0, err
	}
	if low <= 0 {
		return 0, fmt.Errorf("%w: a power of %v", ErrDomain, low)
	}
	if !(low < median && median < high) {
		return 0, fmt.Errorf("%w: %v, %v, %v", ErrOrder, low, median, high)
	}
	// In units of the median, so that high powers neither overflow nor vanish.
	a, b := math.Log(low/median), math.Log(high/median)
	return root(func(k float64) float64 {
		if math.Abs(k) < 1e-7 {
			return a + b + k*(a*a+b*b)/2
		}
		return (math.Expm1(k*a) + math.Expm1(k*b)) / k
	}, -9, 9)
}

// BoxCoxFromQuartiles is mean and SD from the median and the quartiles through the
// power that makes them symmetric.
//
// Formula: k from BoxCoxPower; on (x^k - 1)/k the mean of LuoMeanFromQuartiles and
// the SD of WanFromQuartiles; back through the normal law by integration.
// Arguments: in the units of the outcome, q1 > 0; n ≥ 3.
// Assumes: that power makes the law near normal.
// Errors: those of BoxCoxPower and LuoMeanFromQuartiles; ErrNoSolution when the
// normal law reaches where the power cannot be undone (edge nearer than 3.1 SDs;
// for negative powers, whose law is cut at 4 SDs, 5).
// Limits: power 0 gives LogNormalFromQuartiles, power 1 the normal methods.
// Rounding: not carried through.
// Source: McGrath et al. 2020 (recalled from memory).
// Checked: the power against R; powers 0 and 1 against the other methods.
func BoxCoxFromQuartiles(q1, median, q3 float64, n int) (MeanSD, error) {
	k, err := BoxCoxPower(q1, median, q3)
	if err != nil {
		return MeanSD{}, err
	}
	if math.Abs(k) < 1e-9 {
		return LogNormalFromQuartiles(q1, median, q3, n)
	}
	f := func(x float64) float64 { return math.Expm1(k*math.Log(x/median)) / k }
	lo, hi := f(q1), f(q3)
	if err := quantiles(n, 3, lo, 0, hi); err != nil {
		return MeanSD{}, err
	}
	centre, err := LuoMeanFromQuartiles(lo, 0, hi, n)
	if err != nil {
		return MeanSD{}, err
	}
	spread := (hi - lo) / quartilesFactor(n)
	// 1 + k·y must stay above 0: edge is how far away that ends, in SDs. For a
	// negative power the moments would be infinite if the law were followed to
	// the edge, so it is cut at 4 SDs, and the edge must lie beyond.
	edge := 1/(math.Abs(k)*spread) + math.Copysign(1, k)*centre/spread
	low, high, least := -math.Min(edge, 8), 8.0, 3.1
	if k < 0 {
		low, high, least = -4, 4, 5
	}
	if edge < least {
		return MeanSD{}, fmt.Errorf("%w: power %v cannot be undone for all of the normal law", ErrNoSolution, k)
	}
	moment := func(power float64) float64 {
		return quad.Fixed(func(z float64) float64 {
			y := 1 + k*(centre+spread*z)
			return math.Pow(math.Max(y, 0), power/k) * math.Exp(-z*z/2) / math.Sqrt(2*math.Pi)
		}, low, high, 400, nil, 0)
	}
	mass, m1, m2 := moment(0), moment(1), moment(2)
	mean := m1 / mass
	return MeanSD{median * mean, median * math.Sqrt(math.Max(m2/mass-mean*mean, 0))}.checked()
}
