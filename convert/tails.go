package convert

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mathext"
)

// This file is the only one that computes normal and t probabilities and
// quantiles. The library's (gonum's distuv) are not good enough in the tails: its
// normal upper tail is one minus the lower one, 0 from z = 9 on where the true
// value is 1.13e-19; its t tail keeps seven digits at 10^8 degrees of freedom, and
// its t quantile is off by more than its own size at a probability of 1e-15 and
// 10^5 degrees of freedom (TestTailsWhereTheLibraryFails). So tails are computed as
// tails, from the complementary error function and the incomplete beta function,
// and quantiles by solving them.

// NormalTail is the probability that a standard normal value exceeds z.
//
// Formula: P(Z > z) = erfc(z/√2)/2.
// Arguments: z in standard deviations; any number.
// Assumes: nothing beyond the standard normal law.
// Errors: none; infinite z gives 0 or 1, a z that is not a number gives 1 (the
// most cautious p value).
// Limits: z above 38.5 underflows to 0.
// Rounding: relative error below 1e-14 down to 1e-300.
// Source: definition of erfc; Abramowitz & Stegun 1964, 26.2.29.
// Checked: against R's pnorm(lower.tail=FALSE) at 17 digits, 1e-12 relative.
func NormalTail(z float64) float64 {
	if math.IsNaN(z) {
		return 1
	}
	return math.Erfc(z/math.Sqrt2) / 2
}

// NormalUpper is the z that a standard normal value exceeds with probability q.
//
// Formula: solves P(Z > z) = q.
// Arguments: q a probability, 0 < q < 1; small q keep their digits.
// Assumes: nothing beyond the standard normal law.
// Errors: ErrDomain outside 0 < q < 1.
// Limits: q = 1e-300 gives 37.05.
// Rounding: relative error below 1e-14.
// Source: inverse of NormalTail; start from gonum's normal quantile, then one
// Newton step on the logarithm of the tail.
// Checked: against R's qnorm(lower.tail=FALSE), 1e-12 relative.
func NormalUpper(q float64) (float64, error) {
	if !(q > 0 && q < 1) {
		return 0, fmt.Errorf("%w: probability %v, needed between 0 and 1", ErrDomain, q)
	}
	if q == 0.5 {
		return 0, nil
	}
	if q > 0.5 {
		z, err := NormalUpper(1 - q)
		return -z, err
	}
	z := -mathext.NormalQuantile(q)
	density := math.Exp(-z*z/2) / math.Sqrt(2*math.Pi)
	if density > 0 {
		tail := NormalTail(z)
		z += tail / density * math.Log(tail/q)
	}
	return z, nil
}

// TTail is the probability that a t distributed value with df degrees of
// freedom exceeds t.
//
// Formula: P(T > t) = I(df/(df+t²); df/2, 1/2)/2 for t ≥ 0, by symmetry below 0;
// I is the regularised incomplete beta function.
// Arguments: t any number; df > 0, need not be whole; df = +Inf is the normal law.
// Assumes: nothing beyond Student's law.
// Errors: ErrDF when df is not positive; ErrNotFinite when t is not a number.
// Limits: df → ∞ gives NormalTail(t); above 1e7 the normal tail with Fisher's
// first two correction terms is used.
// Rounding: relative error below 1e-11 for df up to 1e5, tails down to 1e-200.
// Source: Student 1908; Abramowitz & Stegun 1964, 26.7.1.
// Checked: against R's pt(lower.tail=FALSE), 1e-9 relative.
func TTail(t, df float64) (float64, error) {
	switch {
	case math.IsNaN(t):
		return 0, fmt.Errorf("%w: t", ErrNotFinite)
	case !(df > 0):
		return 0, fmt.Errorf("%w: %v", ErrDF, df)
	case t < 0:
		q, err := TTail(-t, df)
		return 1 - q, err
	case math.IsInf(t, 1):
		return 0, nil
	case math.IsInf(df, 1):
		return NormalTail(t), nil
	case df > 1e7:
		// Fisher 1925: the normal tail plus φ(t) times a series in 1/df.
		s := t * t
		terms := t*(s+1)/(4*df) + t*(((3*s-7)*s-5)*s-3)/(96*df*df)
		return NormalTail(t) + math.Exp(-s/2)/math.Sqrt(2*math.Pi)*terms, nil
	}
	if t < 1 {
		// Near the middle the other argument is the accurate one.
		return 0.5 - mathext.RegIncBeta(0.5, df/2, t*t/(df+t*t))/2, nil
	}
	return mathext.RegIncBeta(df/2, 0.5, df/(df+t*t)) / 2, nil
}

// TUpper is the t that a t distributed value with df degrees of freedom exceeds
// with probability q.
//
// Formula: solves P(T > t) = q.
// Arguments: q a probability, 0 < q < 1; df > 0, +Inf for the normal law.
// Assumes: nothing beyond Student's law.
// Errors: ErrDomain for q, ErrDF for df, ErrNoSolution when the search fails.
// Limits: df = 1: cot(πq); df = 2: closed form; df = +Inf: NormalUpper(q).
// Rounding: relative error below 1e-11 for q from 1e-15 to 1/2.
// Source: Student 1908; bisection and Newton steps on the logarithm of TTail.
// Checked: against R's qt to 1e-9 relative, the closed forms for 1 and 2 degrees
// of freedom, and the printed three-decimal tables for 90, 95 and 99%.
func TUpper(q, df float64) (float64, error) {
	switch {
	case !(q > 0 && q < 1):
		return 0, fmt.Errorf("%w: probability %v, needed between 0 and 1", ErrDomain, q)
	case !(df > 0):
		return 0, fmt.Errorf("%w: %v", ErrDF, df)
	case math.IsInf(df, 1):
		return NormalUpper(q)
	case q == 0.5:
		return 0, nil
	case q > 0.5:
		t, err := TUpper(1-q, df)
		return -t, err
	case df == 1:
		return 1 / math.Tan(math.Pi*q), nil
	case df == 2:
		return (1 - 2*q) / math.Sqrt(2*q*(1-q)), nil
	}
	return searchT(q, df)
}

// searchT brackets the quantile and closes in on it: bisection until the bracket
// is narrow, which cannot fail, then a secant on the logarithm of the tail.
func searchT(q, df float64) (float64, error) {
	low, _ := NormalUpper(q) // t quantiles lie above the normal one
	low *= 0.999
	high := low + 1
	for i := 0; ; i++ {
		tail, err := TTail(high, df)
		if err != nil {
			return 0, err
		}
		if tail <= q {
			break
		}
		if i == 400 {
			return 0, fmt.Errorf("%w: t quantile at %v with %v degrees of freedom", ErrNoSolution, q, df)
		}
		low, high = high, high*2
	}
	excess := func(t float64) float64 {
		tail, _ := TTail(t, df)
		return math.Log(tail / q)
	}
	return root(excess, low, high)
}

// root finds where f, which changes sign once between low and high, is 0:
// bisection safeguards a secant (the Illinois rule), to the last bits of a
// float64.
func root(f func(float64) float64, low, high float64) (float64, error) {
	flow, fhigh := f(low), f(high)
	switch {
	case math.IsNaN(flow) || math.IsNaN(fhigh) || flow*fhigh > 0:
		return 0, fmt.Errorf("%w between %v and %v", ErrNoSolution, low, high)
	case flow == 0:
		return low, nil
	case fhigh == 0:
		return high, nil
	}
	for i := 0; i < 300; i++ {
		width := high - low
		if width <= 4e-16*math.Max(math.Abs(low), math.Abs(high)) {
			break
		}
		mid := (low + high) / 2
		if i%3 != 2 {
			if s := high - fhigh*(high-low)/(fhigh-flow); s > low && s < high {
				mid = s
			}
		}
		fmid := f(mid)
		switch {
		case fmid == 0:
			return mid, nil
		case math.IsNaN(fmid):
			return 0, fmt.Errorf("%w: not a number at %v", ErrNoSolution, mid)
		case (fmid > 0) == (flow > 0):
			low, flow = mid, fmid
			fhigh /= 2
		default:
			high, fhigh = mid, fmid
			flow /= 2
		}
	}
	return (low + high) / 2, nil
}

// TwoSided is the factor of a two-sided interval: margin = factor · SE.
//
// Formula: the t quantile at (1 + level/100)/2 with df degrees of freedom.
// Arguments: percent, the level, 0 < percent < 100; df > 0, +Inf for z.
// Assumes: equal tails.
// Errors: ErrLevel, ErrDF.
// Limits: 95% and df = +Inf give 1.95996.
// Rounding: the printed level is taken as exact.
// Source: Student 1908; Handbook for Systematic Reviews of Interventions 6.5.2.2.
// Checked: the whole table of methods section J, six decimals.
func TwoSided(percent, df float64) (float64, error) {
	if err := level(percent); err != nil {
		return 0, err
	}
	return TUpper((1-percent/100)/2, df)
}

// Normal stands for infinite degrees of freedom: the factor is z, not t.
var Normal = math.Inf(1)
