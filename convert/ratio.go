package convert

import (
	"fmt"
	"math"
)

// LogSEFromInterval is the standard error of the natural logarithm of a ratio
// (odds, risk, hazard, rate ratio, ratio of geometric means).
//
// Formula: (ln upper - ln lower)/(2·z).
// Arguments: bounds > 0, as ratios; percent the level; df Normal, or n1+n2-2 for
// a ratio of geometric means.
// Assumes: Wald interval on the log scale: √(lower·upper) equals the ratio within
// rounding (Margin with Log). For exact, profile, mid-p, bootstrap and Bayesian
// intervals it is an approximation. It is never the SD of an outcome.
// Errors: ErrDomain for bounds not above 0; those of SEFromInterval.
// Limits: none.
// Rounding: Margin with Log over z.
// Source: Handbook for Systematic Reviews of Interventions 6.3; Altman & Bland
// 2011.
// Checked: against R to 1e-9; Altman & Bland 2011, p = 0.005 (recalled from
// memory).
func LogSEFromInterval(lower, upper, percent, df float64) (float64, error) {
	if err := finite(lower, upper); err != nil {
		return 0, err
	}
	if lower <= 0 || upper <= 0 {
		return 0, fmt.Errorf("%w: the logarithm of %v", ErrDomain, math.Min(lower, upper))
	}
	return SEFromInterval(math.Log(lower), math.Log(upper), percent, df)
}

// RatioFromPercentChange turns a percent change into a ratio.
//
// Formula: 1 + c/100; a reduction of c percent is a change of -c.
// Arguments: c in percent, > -100. Bounds of a reduction change places.
// Assumes: change relative to the comparator.
// Errors: ErrDomain.
// Limits: 0 gives 1.
// Rounding: h/100.
// Source: definition.
// Checked: against R.
func RatioFromPercentChange(c float64) (float64, error) {
	if !(c > -100) || math.IsInf(c, 0) {
		return 0, fmt.Errorf("%w: a change of %v%% leaves no ratio", ErrDomain, c)
	}
	return 1 + c/100, nil
}

// LogSEFromP is the standard error of the logarithm of a ratio behind its p value.
//
// Formula: |ln ratio|/z, z the normal quantile at 1 - p/2.
// Arguments: ratio > 0, not 1; p two-sided, in (0, 1).
// Assumes: Wald or score test of ratio = 1; for a hazard ratio near 1 and a
// log-rank or Cox p.
// Errors: ErrDomain.
// Limits: hopeless near ratio 1.
// Rounding: give both ends of ratio and p.
// Source: Parmar, Torri & Stewart 1998; Tierney et al. 2007; Altman & Bland 2011.
// Checked: against R to 1e-9.
func LogSEFromP(ratio, p float64) (float64, error) {
	if err := positive("ratio", ratio, ErrDomain); err != nil {
		return 0, err
	}
	z, err := TFromP(p, 2, Normal)
	if err != nil {
		return 0, err
	}
	return SEFromT(math.Log(ratio), z)
}

// LogOddsRatioSE is the standard error of a log odds ratio from the four counts.
//
// Formula: √(1/a + 1/b + 1/c + 1/d).
// Arguments: with and without the event in each arm, all ≥ 1.
// Assumes: independent units. With a zero count there is none: adding 1/2 is a
// choice of the reader, not made here.
// Errors: ErrSize for a count below 1.
// Limits: none.
// Rounding: counts have none.
// Source: Woolf 1955.
// Checked: against R to 1e-9; Bland & Altman 2000, 0.103 (recalled from memory).
func LogOddsRatioSE(a, b, c, d int) (float64, error) {
	var sum float64
	for _, k := range []int{a, b, c, d} {
		if k < 1 {
			return 0, fmt.Errorf("%w: a count of %d", ErrSize, k)
		}
		sum += 1 / float64(k)
	}
	return math.Sqrt(sum), nil
}

// LogRiskRatioSE is the standard error of a log risk ratio from counts.
//
// Formula: √(1/a - 1/n1 + 1/c - 1/n2).
// Arguments: events a of n1 and c of n2; a, c ≥ 1.
// Assumes: independent units.
// Errors: ErrSize for events below 1; ErrOrder for more events than units.
// Limits: all with the event gives 0.
// Rounding: counts have none.
// Source: Katz, Baptista, Azen & Pike 1978.
// Checked: against R to 1e-9.
func LogRiskRatioSE(a, n1, c, n2 int) (float64, error) {
	for _, k := range [][2]int{{a, n1}, {c, n2}} {
		if k[0] < 1 {
			return 0, fmt.Errorf("%w: %d events", ErrSize, k[0])
		}
		if k[0] > k[1] {
			return 0, fmt.Errorf("%w: %d events of %d", ErrOrder, k[0], k[1])
		}
	}
	return math.Sqrt(1/float64(a) - 1/float64(n1) + 1/float64(c) - 1/float64(n2)), nil
}

// LogRateRatioSE is the standard error of a log rate ratio from event counts.
//
// Formula: √(1/a + 1/c).
// Arguments: events in each arm, ≥ 1.
// Assumes: Poisson counts; more variable counts have a larger one.
// Errors: ErrSize.
// Limits: none.
// Rounding: counts have none.
// Source: Handbook for Systematic Reviews of Interventions 6.7.
// Checked: against R to 1e-9.
func LogRateRatioSE(a, c int) (float64, error) {
	for _, k := range []int{a, c} {
		if k < 1 {
			return 0, fmt.Errorf("%w: %d events", ErrSize, k)
		}
	}
	return math.Sqrt(1/float64(a) + 1/float64(c)), nil
}

// LogHazardRatioSE is the standard error of a log hazard ratio from the number of
// events.
//
// Formula: 1/√V, V = O·r1·r2/(r1 + r2)².
// Arguments: events O in both arms, ≥ 1; r1 and r2 the allocation (1 and 1, or
// numbers randomised), > 0.
// Assumes: hazard ratio near 1, log-rank or Cox estimate.
// Errors: ErrSize, ErrDomain.
// Limits: 1:1 gives 2/√O.
// Rounding: counts have none.
// Source: Parmar, Torri & Stewart 1998; Tierney et al. 2007.
// Checked: against R to 1e-9.
func LogHazardRatioSE(events int, r1, r2 float64) (float64, error) {
	if err := size(events, 1); err != nil {
		return 0, err
	}
	for _, r := range []float64{r1, r2} {
		if err := positive("allocation", r, ErrDomain); err != nil {
			return 0, err
		}
	}
	share := r1 / (r1 + r2)
	return result(1 / math.Sqrt(float64(events)*share*(1-share)))
}
