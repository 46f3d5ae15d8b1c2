package convert

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mathext"
)

// PoissonInterval is the exact interval of a Poisson mean from a count.
//
// Formula: χ²(α/2; 2x)/2 to χ²(1 - α/2; 2x + 2)/2; divide by the exposure for a
// rate.
// Arguments: x ≥ 0 events, need not be whole (for inversion); percent the level.
// Assumes: Poisson count.
// Errors: ErrDomain for negative x; ErrLevel.
// Limits: x = 0 gives 0 to -ln(α/2).
// Rounding: counts have none.
// Source: Garwood 1936.
// Checked: against R to 1e-9; printed Poisson limits (recalled from memory).
func PoissonInterval(x, percent float64) (Range, error) {
	if !(x >= 0) || math.IsInf(x, 0) {
		return Range{}, fmt.Errorf("%w: %v events", ErrDomain, x)
	}
	if err := level(percent); err != nil {
		return Range{}, err
	}
	tail := (1 - percent/100) / 2
	r := Range{High: gammaUpper(x+1, tail)}
	if x > 0 {
		r.Low = gammaLower(x, tail)
	}
	return r, finite(r.Low, r.High)
}

// gammaLower and gammaUpper are quantiles of a gamma law of scale 1: the library's
// value, then Newton steps, since it stops at about eight digits.
func gammaLower(shape, p float64) float64 {
	return polishGamma(mathext.GammaIncRegInv(shape, p), shape, func(x float64) float64 {
		return mathext.GammaIncReg(shape, x) - p
	})
}

func gammaUpper(shape, q float64) float64 {
	return polishGamma(mathext.GammaIncRegCompInv(shape, q), shape, func(x float64) float64 {
		return q - mathext.GammaIncRegComp(shape, x)
	})
}

func polishGamma(x, shape float64, excess func(float64) float64) float64 {
	for i := 0; i < 4; i++ {
		lg, _ := math.Lgamma(shape)
		density := math.Exp((shape-1)*math.Log(x) - x - lg)
		if !(density > 0) {
			break
		}
		step := excess(x) / density
		if !(math.Abs(step) < x/2) {
			break
		}
		x -= step
	}
	return x
}

// CountFromRateInterval is the number of events behind the interval of a rate.
//
// Formula: exact: solves upper/lower of PoissonInterval for x, a function of x
// alone; log-normal: x = (2·z/ln(upper/lower))². The exposure is x/rate.
// Arguments: bounds > 0 of the rate, in any unit; percent the level; exact or not.
// Assumes: Poisson count, and that the interval was made in this way: only the
// matching way returns the true count.
// Errors: ErrDomain for bounds not above 0; ErrOrder; ErrLevel; ErrNoSolution.
// Limits: the exact interval is longer below on the log scale.
// Rounding: give widest and narrowest bounds; a true count is whole within it.
// Source: Garwood 1936 inverted.
// Checked: against R.
func CountFromRateInterval(lower, upper, percent float64, exact bool) (float64, error) {
	if err := finite(lower, upper); err != nil {
		return 0, err
	}
	if lower <= 0 {
		return 0, fmt.Errorf("%w: lower bound %v", ErrDomain, lower)
	}
	if !(lower < upper) {
		return 0, fmt.Errorf("%w: interval: %v stands before %v", ErrOrder, lower, upper)
	}
	z, err := TwoSided(percent, Normal)
	if err != nil {
		return 0, err
	}
	want := math.Log(upper / lower)
	if !exact {
		return result(math.Pow(2*z/want, 2))
	}
	return root(func(x float64) float64 {
		r, err := PoissonInterval(x, percent)
		if err != nil {
			return math.NaN()
		}
		return math.Log(r.High/r.Low) - want
	}, 0.5, 1e5)
}

// RateSE is the standard error of the logarithm of a rate from its count.
//
// Formula: 1/√x.
// Arguments: x ≥ 1 events.
// Assumes: Poisson count.
// Errors: ErrSize.
// Limits: none.
// Rounding: counts have none.
// Source: delta method; Breslow & Day 1987.
// Checked: against R.
func RateSE(x int) (float64, error) {
	if err := size(x, 1); err != nil {
		return 0, err
	}
	return 1 / math.Sqrt(float64(x)), nil
}
