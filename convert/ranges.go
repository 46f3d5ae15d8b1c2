package convert

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// SDBoundsFromRange is the set of SDs that any sample with this range may have.
//
// Formula: R/√(2·(n-1)) ≤ s ≤ (R/2)·√(n/(n-1)) for even n, (R/2)·√((n+1)/n) for
// odd n.
// Arguments: width R = max - min > 0; n ≥ 2.
// Assumes: nothing.
// Errors: ErrSpread, ErrSize.
// Limits: n = 2 gives R/√2 twice.
// Rounding: take the low end from R-2h, the high end from R+2h.
// Source: Thomson 1955.
// Checked: against R, and all multisets of 0 to 6 with n = 6.
func SDBoundsFromRange(width float64, n int) (Range, error) {
	if err := positive("range", width, ErrSpread); err != nil {
		return Range{}, err
	}
	if err := size(n, 2); err != nil {
		return Range{}, err
	}
	f := float64(n)
	r := Range{Low: width / math.Sqrt(2*(f-1)), High: width / 2 * math.Sqrt(f/(f-1))}
	if n%2 == 1 {
		r.High = width / 2 * math.Sqrt((f+1)/f)
	}
	return r, finite(r.High)
}

const (
	quadPoints = 300
	quadReach  = 12 // normal tails beyond are below 1e-32
)

// ExpectedRange is the expected range of n standard normal values, the control
// chart constant d2.
//
// Formula: d2 = ∫ 1 - Φ(x)ⁿ - (1 - Φ(x))ⁿ dx.
// Arguments: n from 2 to 100,000.
// Assumes: normal values.
// Errors: ErrSize; ErrDomain above 100,000.
// Limits: n = 2: 2/√π.
// Rounding: none.
// Source: Tippett 1925.
// Checked: against R and the printed d2 table, n = 2 to 25 (recalled from memory).
func ExpectedRange(n int) (float64, error) {
	if err := size(n, 2); err != nil {
		return 0, err
	}
	if n > 100_000 {
		return 0, fmt.Errorf("%w: n %d, at most 100,000", ErrDomain, n)
	}
	f := float64(n)
	half := quad.Fixed(func(x float64) float64 {
		upper := NormalTail(x)
		return -math.Expm1(f*math.Log1p(-upper)) - math.Pow(upper, f)
	}, 0, quadReach, quadPoints, nil, 0)
	return result(2 * half)
}

// SDOfRange is the SD of the range of n standard normal values, the control chart
// constant d3.
//
// Formula: d3² = ∫ 2r·(1 - F(r)) dr - d2², F the law of the range.
// Arguments: n from 2 to 1000.
// Assumes: normal values.
// Errors: ErrSize; ErrDomain above 1000.
// Limits: n = 2: √(2 - 4/π).
// Rounding: none.
// Source: Tippett 1925; Pearson 1932.
// Checked: against R and the printed d3 table (recalled from memory).
func SDOfRange(n int) (float64, error) {
	d2, err := ExpectedRange(n)
	if err != nil {
		return 0, err
	}
	if n > 1000 {
		return 0, fmt.Errorf("%w: n %d, at most 1000", ErrDomain, n)
	}
	f := float64(n)
	density := func(x float64) float64 { return math.Exp(-x*x/2) / math.Sqrt(2*math.Pi) }
	below := func(r float64) float64 {
		return f * quad.Fixed(func(x float64) float64 {
			return density(x) * math.Pow(NormalTail(-x-r)-NormalTail(-x), f-1)
		}, -quadReach, quadReach, quadPoints, nil, 0)
	}
	square := quad.Fixed(func(r float64) float64 {
		return 2 * r * math.Max(1-below(r), 0)
	}, 0, 2*quadReach, quadPoints, nil, 0)
	return result(math.Sqrt(math.Max(square-d2*d2, 0)))
}

// SDFromRangeSmall is the SD from the range of a small normal sample, with the SD
// of its relative error.
//
// Formula: SD = R/d2(n); relative SE = d3(n)/d2(n).
// Arguments: width R = max - min > 0; n from 2 to 25.
// Assumes: normal values; for others see WanFromRange and its errors.
// Errors: ErrSpread; ErrSize; ErrDomain for n above 25.
// Limits: none.
// Rounding: R's over d2.
// Source: Tippett 1925.
// Checked: against R; printed d2 and d3 tables (recalled from memory).
func SDFromRangeSmall(width float64, n int) (sd, relativeSE float64, err error) {
	if err := positive("range", width, ErrSpread); err != nil {
		return 0, 0, err
	}
	if n > 25 {
		return 0, 0, fmt.Errorf("%w: n %d, at most 25", ErrDomain, n)
	}
	d2, err := ExpectedRange(n)
	if err != nil {
		return 0, 0, err
	}
	d3, err := SDOfRange(n)
	if err != nil {
		return 0, 0, err
	}
	sd, err = result(width / d2)
	return sd, d3 / d2, err
}
