package convert

import (
	"fmt"
	"math"
)

// mostN is the largest sample size looked for.
const mostN = 1_000_000_000

// NFromSDAndInterval is the set of sample sizes for which an interval of this
// half-width belongs to this SD.
//
// Formula: √n/t(n-1) = SD/margin, solved for n at both ends of the rounding.
// Arguments: sd as printed; margin, the half-widths the printed bounds allow
// (Margin); percent the level; normal true for z in place of t.
// Assumes: one mean, interval mean ± t·SD/√n.
// Errors: ErrSpread; ErrLevel; ErrNoSolution when no n of 2 or more fits.
// Limits: monotone in n, so the set has no gaps.
// Rounding: this is its statement.
// Source: Student 1908 solved for n.
// Checked: against R.
func NFromSDAndInterval(sd Printed, margin Range, percent float64, normal bool) (low, high int, err error) {
	if err := positive("SD", sd.High(), ErrSpread); err != nil {
		return 0, 0, err
	}
	if err := positive("margin", margin.High, ErrSpread); err != nil {
		return 0, 0, err
	}
	if err := level(percent); err != nil {
		return 0, 0, err
	}
	ratio := func(n int) float64 {
		df := float64(n - 1)
		if normal {
			df = Normal
		}
		t, err := TwoSided(percent, df)
		if err != nil {
			return math.NaN()
		}
		return math.Sqrt(float64(n)) / t
	}
	// The SD that n implies grows with n: sd.Low ≤ ratio·margin.High and
	// ratio·margin.Low ≤ sd.High.
	low = firstN(func(n int) bool { return ratio(n)*margin.High >= sd.Low() })
	high = firstN(func(n int) bool { return ratio(n)*margin.Low > sd.High() }) - 1
	if low > high || high < 2 {
		return 0, 0, fmt.Errorf("%w: no sample size makes SD %v and a margin of %v to %v agree", ErrNoSolution, sd.Value, margin.Low, margin.High)
	}
	return low, high, nil
}

// firstN is the least n of 2 or more for which ok, which stays true once true.
func firstN(ok func(int) bool) int {
	if ok(2) {
		return 2
	}
	high := 4
	for !ok(high) {
		if high >= mostN {
			return mostN
		}
		high *= 2
	}
	low := high / 2
	for high-low > 1 {
		if mid := low + (high-low)/2; ok(mid) {
			high = mid
		} else {
			low = mid
		}
	}
	return high
}

// NFromSDAndSE is the set of sample sizes for which this SE belongs to this SD.
//
// Formula: n = (SD/SE)².
// Arguments: both as printed, in one unit.
// Assumes: one mean, SE = SD/√n.
// Errors: ErrSpread when one may be 0 or is negative.
// Limits: SD = SE gives 1.
// Rounding: this is its statement; the ends are not rounded to whole numbers.
// Source: definition.
// Checked: against R.
func NFromSDAndSE(sd, se Printed) (Range, error) {
	if err := positive("SD", sd.Low(), ErrSpread); err != nil {
		return Range{}, err
	}
	if err := positive("SE", se.Low(), ErrSpread); err != nil {
		return Range{}, err
	}
	low, high := sd.Low()/se.High(), sd.High()/se.Low()
	return Range{low * low, high * high}, nil
}

// DFFromTAndP is the span of whole degrees of freedom for which a printed t
// belongs to a printed two-sided p.
//
// Formula: all df from 1 to most with P(|T| > t) in the range of p.
// Arguments: t as printed, sign ignored; p from ReadP; most, where to stop.
// Assumes: two-sided t test.
// Errors: ErrNoSolution when none fits (misprint, or another test); ErrNotFinite;
// ErrDomain for most below 1.
// Limits: for large df the p value no longer changes: high may be most.
// Rounding: that of t and p is carried through.
// Source: Student 1908.
// Checked: against R.
func DFFromTAndP(t Printed, p PValue, most int) (low, high int, err error) {
	if err := t.check(); err != nil {
		return 0, 0, err
	}
	if most < 1 {
		return 0, 0, fmt.Errorf("%w: no degrees of freedom up to %d", ErrDomain, most)
	}
	size := math.Abs(t.Value)
	for df := 1; df <= most; df++ {
		least, err := TTail(size+t.Half, float64(df))
		if err != nil {
			return 0, 0, err
		}
		greatest, err := TTail(math.Max(size-t.Half, 0), float64(df))
		if err != nil {
			return 0, 0, err
		}
		if 2*least <= p.High && 2*greatest >= p.Low {
			if low == 0 {
				low = df
			}
			high = df
		}
	}
	if low == 0 {
		return 0, 0, fmt.Errorf("%w: no degrees of freedom up to %d make t %v and p %v to %v agree", ErrNoSolution, most, t.Value, p.Low, p.High)
	}
	return low, high, nil
}
