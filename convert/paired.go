package convert

import (
	"fmt"
	"math"
)

// SDOfDifferences is the SD of the n paired differences behind a paired t.
//
// Formula: SD = |d|/|t|·√n.
// Arguments: mean difference d in the units of the outcome; t; n ≥ 2 pairs.
// Assumes: paired t test, df = n-1. It is not an arm's SD.
// Errors: those of SEFromT and SDFromSE.
// Limits: none.
// Rounding: relative errors of d and t add.
// Source: Student 1908; Handbook for Systematic Reviews of Interventions 6.5.2.8.
// Checked: against R to 1e-9 and R's sleep data.
func SDOfDifferences(difference, t float64, n int) (float64, error) {
	se, err := SEFromT(difference, t)
	if err != nil {
		return 0, err
	}
	return SDFromSE(se, n)
}

// Correlation is the correlation between two measurements of the same units,
// from their SDs and the SD of the differences.
//
// Formula: r = (s1² + s2² - sd²)/(2·s1·s2).
// Arguments: the three SDs in one unit, > 0.
// Assumes: the same units at both times, all three SDs with divisor n-1.
// Errors: ErrSpread; ErrInconsistent when r leaves -1 to 1: one of the three is an
// SE, or the design is not paired (see CorrelationRange for rounding).
// Limits: sd = |s1-s2| gives 1, sd = s1+s2 gives -1.
// Rounding: see CorrelationRange.
// Source: variance of a difference; Handbook for Systematic Reviews of
// Interventions 6.5.2.8.
// Checked: against R to 1e-9; the Handbook's 0.78 and 0.82 (recalled from memory).
func Correlation(s1, s2, sd float64) (float64, error) {
	for _, s := range []float64{s1, s2, sd} {
		if err := positive("SD", s, ErrSpread); err != nil {
			return 0, err
		}
	}
	r, err := result((s1*s1 + s2*s2 - sd*sd) / (2 * s1 * s2))
	if err != nil {
		return 0, err
	}
	if r < -1 || r > 1 {
		return 0, fmt.Errorf("%w: SDs %v, %v and %v of the differences give a correlation of %v", ErrInconsistent, s1, s2, sd, r)
	}
	return r, nil
}

// CorrelationRange is the set of correlations that three printed SDs allow.
//
// Formula: as Correlation; r falls in sd, and in s1 and s2 its extremes lie at
// the ends of their rounding or where s1² = s2² - sd² (s2² = s1² - sd²).
// Arguments: the three SDs as printed.
// Assumes: as Correlation.
// Errors: ErrSpread; ErrInconsistent when no correlation from -1 to 1 fits.
// Limits: none.
// Rounding: this is its statement; cut to -1 to 1.
// Source: as Correlation.
// Checked: against a grid search.
func CorrelationRange(s1, s2, sd Printed) (Range, error) {
	for _, p := range []Printed{s1, s2, sd} {
		if err := p.check(); err != nil {
			return Range{}, err
		}
		if err := positive("SD", p.Low(), ErrSpread); err != nil {
			return Range{}, err
		}
	}
	out := Range{math.Inf(1), math.Inf(-1)}
	at := func(a, b, d float64) {
		r := (a*a + b*b - d*d) / (2 * a * b)
		out.Low, out.High = math.Min(out.Low, r), math.Max(out.High, r)
	}
	for _, d := range []float64{sd.Low(), sd.High()} {
		for _, a := range turningPoints(s1, s2, d) {
			for _, b := range turningPoints(s2, s1, d) {
				at(a, b, d)
			}
		}
	}
	if out.Low > 1 || out.High < -1 {
		return Range{}, fmt.Errorf("%w: SDs %v, %v and %v of the differences fit no correlation", ErrInconsistent, s1.Value, s2.Value, sd.Value)
	}
	return Range{math.Max(out.Low, -1), math.Min(out.High, 1)}, nil
}

// turningPoints are the values of one SD where the correlation may be extreme.
func turningPoints(s, other Printed, d float64) []float64 {
	points := []float64{s.Low(), s.High()}
	for _, o := range []float64{other.Low(), other.High()} {
		if v := o*o - d*d; v > 0 {
			if root := math.Sqrt(v); s.Low() < root && root < s.High() {
				points = append(points, root)
			}
		}
	}
	return points
}

func correlation(r float64) error {
	if !(r >= -1 && r <= 1) {
		return fmt.Errorf("%w: correlation %v, needed from -1 to 1", ErrDomain, r)
	}
	return nil
}

// ChangeSD is the SD of the changes from the SDs before and after.
//
// Formula: SD = √(s0² + s1² - 2·r·s0·s1).
// Arguments: s0 and s1 in one unit, > 0; r the correlation between the two.
// Assumes: the same units at both times. r taken from another arm or study is an
// imputation: give the result for r-0.2 and r+0.2 too.
// Errors: ErrSpread; ErrDomain for r.
// Limits: between |s0-s1| and s0+s1.
// Rounding: grows as r nears 1.
// Source: variance of a difference; Handbook for Systematic Reviews of
// Interventions 6.5.2.8.
// Checked: against R to 1e-9.
func ChangeSD(s0, s1, r float64) (float64, error) {
	if err := positive("SD before", s0, ErrSpread); err != nil {
		return 0, err
	}
	if err := positive("SD after", s1, ErrSpread); err != nil {
		return 0, err
	}
	if err := correlation(r); err != nil {
		return 0, err
	}
	// Written without cancellation: (s0-s1)² + 2·(1-r)·s0·s1.
	return result(math.Sqrt((s0-s1)*(s0-s1) + 2*(1-r)*s0*s1))
}

// FinalSD is the SD after, from the SD before and the SD of the changes. Where
// two values fit, both are given, the smaller first.
//
// Formula: s1 = r·s0 ± √(sd² - s0²·(1 - r²)), those above 0.
// Arguments: s0 and sd in one unit, > 0; r the correlation between before and
// after.
// Assumes: as ChangeSD.
// Errors: ErrSpread; ErrDomain for r; ErrInconsistent when no value fits.
// Limits: r = 0: √(sd² - s0²).
// Rounding: not carried through; large where the root is near 0.
// Source: ChangeSD solved for s1.
// Checked: there and back through ChangeSD, and against R.
func FinalSD(s0, sd, r float64) ([]float64, error) {
	if err := positive("SD before", s0, ErrSpread); err != nil {
		return nil, err
	}
	if err := positive("SD of the changes", sd, ErrSpread); err != nil {
		return nil, err
	}
	if err := correlation(r); err != nil {
		return nil, err
	}
	under := sd*sd - s0*s0*(1-r*r)
	if under < 0 && under > -1e-12*sd*sd {
		under = 0
	}
	var out []float64
	if under >= 0 {
		root := math.Sqrt(under)
		for _, s := range []float64{r*s0 - root, r*s0 + root} {
			if s > 1e-12*s0 && (len(out) == 0 || s > out[0]) {
				out = append(out, s)
			}
		}
	}
	if len(out) == 0 {
		return nil, fmt.Errorf("%w: SD before %v and of the changes %v fit no SD after with correlation %v", ErrInconsistent, s0, sd, r)
	}
	return out, nil
}

// ArmSDFromDifferences is the common SD of both times (or both periods of a
// crossover) from the SD of the differences.
//
// Formula: s = sd/√(2·(1 - r)).
// Arguments: sd > 0; r the correlation, < 1.
// Assumes: equal SDs at both times.
// Errors: ErrSpread; ErrDomain for r.
// Limits: r = 1/2 gives sd itself.
// Rounding: grows without limit as r nears 1.
// Source: ChangeSD with s0 = s1.
// Checked: against R to 1e-9.
func ArmSDFromDifferences(sd, r float64) (float64, error) {
	if err := positive("SD of the differences", sd, ErrSpread); err != nil {
		return 0, err
	}
	if err := correlation(r); err != nil {
		return 0, err
	}
	if r == 1 {
		return 0, fmt.Errorf("%w: a correlation of 1 leaves the SD open", ErrDomain)
	}
	return result(sd / math.Sqrt(2*(1-r)))
}
