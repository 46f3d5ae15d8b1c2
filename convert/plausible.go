package convert

import (
	"fmt"
	"math"
)

// Scales names the scales on which an interval is symmetric within rounding.
//
// Formula: Margin on raw, log and logit.
// Arguments: estimate and bounds as printed; for logit as fractions.
// Assumes: rounded to the nearest.
// Errors: ErrNotFinite, ErrOrder. A scale that does not apply is left out.
// Limits: only log: geometric mean or ratio. Only logit: proportion. Several: too
// narrow to tell. None: exact, bootstrap or misprint.
// Rounding: this is its statement.
// Source: methods sections G and I2.
// Checked: against R.
func Scales(estimate, lower, upper Printed) ([]Scale, error) {
	if _, err := Margin(lower, upper, nil, Raw); err != nil {
		return nil, err
	}
	if err := estimate.check(); err != nil {
		return nil, err
	}
	var out []Scale
	for _, s := range []Scale{Raw, Log, Logit} {
		if s != Raw && lower.Low() <= 0 || s == Logit && upper.High() >= 1 {
			continue
		}
		if _, err := Margin(lower, upper, &estimate, s); err == nil {
			out = append(out, s)
		}
	}
	return out, nil
}

// SkewOfPositive says what mean and SD of a quantity that cannot be negative tell
// of its skew: 0 nothing, 1 suggested, 2 strong.
//
// Formula: 1 where mean + hm < 2·(SD - hs), 2 where mean + hm < SD - hs.
// Arguments: mean and SD as printed, of a quantity that cannot be negative.
// Assumes: that it cannot.
// Errors: ErrNotFinite; ErrInconsistent for SD > mean·√n beyond rounding, which is
// impossible (n 0: not checked).
// Limits: skew does not touch the way from interval to SD; it does touch medians.
// Rounding: taken in favour of no skew.
// Source: Altman & Bland 1996.
// Checked: table of cases.
func SkewOfPositive(mean, sd Printed, n int) (int, error) {
	if err := mean.check(); err != nil {
		return 0, err
	}
	if err := sd.check(); err != nil {
		return 0, err
	}
	if n > 0 && sd.Low() > mean.High()*math.Sqrt(float64(n)) {
		return 2, fmt.Errorf("%w: an SD of %v is impossible for %d values of 0 or more with mean %v", ErrInconsistent, sd.Value, n, mean.Value)
	}
	switch {
	case mean.High() < sd.Low():
		return 2, nil
	case mean.High() < 2*sd.Low():
		return 1, nil
	}
	return 0, nil
}

// SEAsSD weighs whether one of two arms prints an SE where the other prints an SD.
//
// Formula: log-likelihood ratio of N(½·ln n, v) against N(0, v) for |ln(s1/s2)|,
// n that of the smaller spread, v = 1/(2(n1-1)) + 1/(2(n2-1)) + 0.15².
// Arguments: spreads > 0 of two arms of one outcome; sizes ≥ 2.
// Assumes: arms' true SDs differ by about 15%.
// Errors: ErrSpread, ErrSize.
// Limits: above 3: the smaller is an SE; n below 10 cannot tell.
// Rounding: not carried through.
// Source: methods section I4.
// Checked: against R.
func SEAsSD(s1 float64, n1 int, s2 float64, n2 int) (float64, error) {
	if err := positive("spread", s1, ErrSpread); err != nil {
		return 0, err
	}
	if err := positive("spread", s2, ErrSpread); err != nil {
		return 0, err
	}
	if err := size(min(n1, n2), 2); err != nil {
		return 0, err
	}
	v := 1/(2*float64(n1-1)) + 1/(2*float64(n2-1)) + 0.15*0.15
	n := n2
	if s1 < s2 {
		n = n1
	}
	a, b := math.Abs(math.Log(s1/s2)), math.Log(float64(n))/2
	return result((a*a - (a-b)*(a-b)) / (2 * v))
}

// ImpliedLevel is the set of levels, in percent, at which the interval of a
// difference belongs to its p value.
//
// Formula: 100·(2·P(T ≤ W/SE) - 1), SE = |d|/t(p).
// Arguments: difference as printed; margin from Margin; p from ReadP, two-sided;
// df, Normal for z.
// Assumes: interval and p from one test.
// Errors: ErrDomain when the difference may be 0 or p is no number.
// Limits: none.
// Rounding: this is its statement.
// Source: methods section I5.
// Checked: against R.
func ImpliedLevel(difference Printed, margin Range, p PValue, df float64) (Range, error) {
	d := math.Abs(difference.Value)
	if !(d > difference.Half) || !p.Exact || p.Low <= 0 || p.High >= 1 {
		return Range{}, fmt.Errorf("%w: difference %v with p %v to %v", ErrDomain, difference.Value, p.Low, p.High)
	}
	high, err := TFromP(p.Low, 2, df)
	if err != nil {
		return Range{}, err
	}
	low, err := TFromP(p.High, 2, df)
	if err != nil {
		return Range{}, err
	}
	at := func(t float64) (float64, error) {
		tail, err := TTail(t, df)
		return 100 * (1 - 2*tail), err
	}
	a, err := at(margin.Low / (d + difference.Half) * low)
	if err != nil {
		return Range{}, err
	}
	b, err := at(margin.High / (d - difference.Half) * high)
	return Range{a, b}, err
}

// SEFromOneSided is the standard error behind a one-sided limit.
//
// Formula: |estimate - bound|/t at the one-sided level.
// Arguments: estimate and bound in one unit; percent the one-sided level (95
// one-sided is 90 two-sided); df, Normal for z.
// Assumes: limit made as estimate ± t·SE.
// Errors: ErrNotFinite, ErrSpread, ErrLevel (50 or below has no margin), ErrDF.
// Limits: none.
// Rounding: both numbers' over t.
// Source: definition; methods section I6.
// Checked: against R to 1e-9.
func SEFromOneSided(estimate, bound, percent, df float64) (float64, error) {
	if err := finite(estimate, bound); err != nil {
		return 0, err
	}
	if !(percent > 50 && percent < 100) {
		return 0, fmt.Errorf("%w: one-sided %v", ErrLevel, percent)
	}
	if err := positive("distance of the bound", math.Abs(estimate-bound), ErrSpread); err != nil {
		return 0, err
	}
	t, err := TUpper(1-percent/100, df)
	if err != nil {
		return 0, err
	}
	return result(math.Abs(estimate-bound) / t)
}
