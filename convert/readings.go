package convert

import (
	"fmt"
	"math"
)

// Reading is one meaning of the number after an unexplained ±.
type Reading int

// The meanings of an unexplained ±.
const (
	AsSD        Reading = iota // standard deviation
	AsSE                       // standard error
	AsHalfWidth                // half-width of a confidence interval
	readings    = 3
)

// SDsOfReadings gives the SD that an unexplained ± means under each Reading.
//
// Formula: x; x·√n; x·√n/t with n-1 degrees of freedom.
// Arguments: x > 0 in the units of the mean; n ≥ 2; percent the level of the
// half-width.
// Assumes: one mean of n independent values.
// Errors: ErrSpread, ErrSize, ErrLevel.
// Limits: as SD and as half-width nearly agree at n = 6 and 7 (95%): there nothing
// in the numbers tells them apart.
// Rounding: proportional to x.
// Source: definitions; methods section H.
// Checked: against R.
func SDsOfReadings(x float64, n int, percent float64) ([readings]float64, error) {
	se, err := SDFromSE(x, n)
	if err != nil {
		return [readings]float64{}, err
	}
	t, err := TwoSided(percent, float64(n-1))
	if err != nil {
		return [readings]float64{}, err
	}
	return [readings]float64{x, se, se / t}, nil
}

// PrintedArm is mean ± spread and size of one arm as printed.
type PrintedArm struct {
	Mean   Printed
	Spread Printed
	N      int
}

// PUnderReadings recomputes the p value of the difference of two arms under each
// Reading of their ±, with the extremes that rounding allows, by the pooled and by
// Welch's t test.
//
// Formula: Pooled and Welch at |d| + 2h with the least spreads and at |d| - 2h with
// the greatest; the range spans both tests.
// Arguments: two independent arms, n ≥ 2; percent the level of a half-width.
// Assumes: the paper's p comes from a t test of these two means. Where a rank test
// was used the only fitting reading was right in 37% at n = 30 and wrong in 4%: a
// fit decides nothing unless a t test is stated.
// Errors: ErrSize, ErrSpread, ErrLevel.
// Limits: blind where p is near 1, and below 0.001 under every reading.
// Rounding: this is its statement.
// Source: methods section H1.
// Checked: against R.
func PUnderReadings(a, b PrintedArm, percent float64) ([readings]Range, error) {
	var out [readings]Range
	d := math.Abs(a.Mean.Value - b.Mean.Value)
	slack := a.Mean.Half + b.Mean.Half
	for r := range out {
		out[r] = Range{1, 0}
		for _, side := range []float64{-1, 1} {
			groups := [2]Group{}
			for i, arm := range []PrintedArm{a, b} {
				x := arm.Spread.Value + side*arm.Spread.Half
				if side < 0 && x <= 0 {
					x = arm.Spread.Half * 1e-9 // a spread printed as 0.0 may be next to nothing
				}
				sds, err := SDsOfReadings(x, arm.N, percent)
				if err != nil {
					return out, err
				}
				groups[i] = Group{arm.N, 0, sds[r]}
			}
			groups[0].Mean = math.Max(d-side*slack, 0)
			for _, test := range []func(Group, Group, float64) (Comparison, error){Pooled, Welch} {
				c, err := test(groups[0], groups[1], percent)
				if err != nil {
					return out, err
				}
				if side < 0 {
					out[r].Low = math.Min(out[r].Low, c.P)
				} else {
					out[r].High = math.Max(out[r].High, c.P)
				}
			}
		}
	}
	return out, nil
}

// CVLogLikelihoods weighs each Reading of a ± by the coefficients of variation of
// arms of the same outcome that say what they print.
//
// Formula: log density of t(k-1) at (ln CV - mean)/(sd·√(1 + 1/k)) of the k
// logarithms.
// Arguments: mean > 0, x > 0, n ≥ 2 of the undeclared arm; cvs, three or more
// declared coefficients of variation > 0; percent the level of a half-width.
// Assumes: same outcome, units and kind of units studied; means away from 0.
// Errors: ErrSize for fewer than three; ErrDomain; ErrSpread when all cvs are equal.
// Limits: a lead below ln 20 = 3.0 decides nothing.
// Rounding: not carried through.
// Source: methods section H2.
// Checked: against R.
func CVLogLikelihoods(mean, x float64, n int, cvs []float64, percent float64) ([readings]float64, error) {
	var out [readings]float64
	if len(cvs) < 3 {
		return out, fmt.Errorf("%w: %d coefficients of variation, three or more needed", ErrSize, len(cvs))
	}
	if err := positive("mean", mean, ErrDomain); err != nil {
		return out, err
	}
	k := float64(len(cvs))
	var sum, squares float64
	for _, cv := range cvs {
		if err := positive("coefficient of variation", cv, ErrDomain); err != nil {
			return out, err
		}
		sum += math.Log(cv)
	}
	for _, cv := range cvs {
		squares += math.Pow(math.Log(cv)-sum/k, 2)
	}
	scale := math.Sqrt(squares/(k-1)) * math.Sqrt(1+1/k)
	if err := positive("spread of the coefficients of variation", scale, ErrSpread); err != nil {
		return out, err
	}
	sds, err := SDsOfReadings(x, n, percent)
	if err != nil {
		return out, err
	}
	for r, sd := range sds {
		out[r] = logT((math.Log(sd/mean)-sum/k)/scale, k-1)
	}
	return out, nil
}

// logT is the logarithm of the density of t with df degrees of freedom.
func logT(t, df float64) float64 {
	a, _ := math.Lgamma((df + 1) / 2)
	b, _ := math.Lgamma(df / 2)
	return a - b - math.Log(df*math.Pi)/2 - (df+1)/2*math.Log1p(t*t/df)
}

// UnequalSizeLogLikelihoods weighs each Reading by how the printed spreads of one
// table's arms go with their sizes: an SD does not depend on n, an SE falls as
// 1/√n.
//
// Formula: weighted sum of squares of ln SD about its mean, weights
// 1/(1/(2(n-1)) + 0.15²), times -1/2.
// Arguments: spreads > 0 and sizes ≥ 2 of two or more arms; percent the level of a
// half-width.
// Assumes: true SDs differ by about 15% between arms.
// Errors: ErrSize, ErrSpread, ErrLevel.
// Limits: tells SD from the others, never SE from half-width; sizes must differ
// four times or more.
// Rounding: not carried through.
// Source: methods section H5.
// Checked: against R.
func UnequalSizeLogLikelihoods(spreads []float64, sizes []int, percent float64) ([readings]float64, error) {
	var out [readings]float64
	if len(spreads) < 2 || len(spreads) != len(sizes) {
		return out, fmt.Errorf("%w: %d spreads with %d sizes", ErrSize, len(spreads), len(sizes))
	}
	for r := range out {
		var sw, swy, swyy float64
		for i, x := range spreads {
			sds, err := SDsOfReadings(x, sizes[i], percent)
			if err != nil {
				return out, err
			}
			w := 1 / (1/(2*float64(sizes[i]-1)) + 0.15*0.15)
			y := math.Log(sds[r] / spreads[0])
			sw, swy, swyy = sw+w, swy+w*y, swyy+w*y*y
		}
		out[r] = -math.Max(swyy-swy*swy/sw, 0) / 2
	}
	return out, nil
}

// GreatestSD is the greatest SD that n values between low and high with this mean
// can have.
//
// Formula: √(n/(n-1)·(mean - low)·(high - mean)).
// Arguments: low ≤ mean ≤ high in one unit; n ≥ 2.
// Assumes: nothing but the limits (of a scale, or printed extremes).
// Errors: ErrOrder, ErrSize, ErrNotFinite.
// Limits: a mean at a limit gives 0.
// Rounding: take mean and spread at the ends that favour the reading.
// Source: Bhatia & Davis 2000.
// Checked: against R; all multisets of 0 to 6 with n = 6.
func GreatestSD(mean, low, high float64, n int) (float64, error) {
	if err := finite(mean, low, high); err != nil {
		return 0, err
	}
	if err := size(n, 2); err != nil {
		return 0, err
	}
	if err := ordered("lower limit, mean, upper limit", low, mean, high); err != nil {
		return 0, err
	}
	return result(math.Sqrt(float64(n) / float64(n-1) * (mean - low) * (high - mean)))
}

// LeastSD is the least SD that n values with this mean and these extremes can have.
//
// Formula: √(((m-a)² + (b-m)² + (2m-a-b)²/(n-2))/(n-1)).
// Arguments: a ≤ mean ≤ b, both attained; n ≥ 3.
// Assumes: a and b are values of the sample.
// Errors: ErrOrder, ErrSize, ErrNotFinite.
// Limits: mean in the middle: (b-a)/√(2(n-1)).
// Rounding: take mean and extremes at the ends that favour the reading.
// Source: elementary: all other values equal; methods section H3.
// Checked: against R; all multisets of 0 to 6 with n = 6.
func LeastSD(mean, a, b float64, n int) (float64, error) {
	if err := finite(mean, a, b); err != nil {
		return 0, err
	}
	if err := size(n, 3); err != nil {
		return 0, err
	}
	if err := ordered("minimum, mean, maximum", a, mean, b); err != nil {
		return 0, err
	}
	f := float64(n)
	rest := 2*mean - a - b
	return result(math.Sqrt(((mean-a)*(mean-a) + (b-mean)*(b-mean) + rest*rest/(f-2)) / (f - 1)))
}

// MeanAttainable reports whether some whole-number data have this printed mean.
//
// Formula: some whole S with S/(n·items) within rounding of the mean.
// Arguments: mean as printed; n ≥ 1; items averaged per unit (1 for a single
// whole-number item).
// Assumes: whole-number data; the printed n.
// Errors: ErrSize, ErrNotFinite.
// Limits: always true where n·items ≥ 10^decimals.
// Rounding: this is its statement; ties either way.
// Source: Brown & Heathers 2017.
// Checked: against R; their example 5.19 with n = 28 (recalled from memory).
func MeanAttainable(mean Printed, n, items int) (bool, error) {
	if err := mean.check(); err != nil {
		return false, err
	}
	if err := size(min(n, items), 1); err != nil {
		return false, err
	}
	f := float64(n) * float64(items)
	s := math.Round(mean.Value * f)
	return math.Abs(s/f-mean.Value) <= mean.Half+1e-9, nil
}

// SDAttainable reports whether some whole-number data may have this mean and an SD
// in this range. It is necessary, not sufficient.
//
// Formula: for some whole S printing as the mean, (n-1)·s² + S²/n takes a whole
// value Q of the parity of S, with s² at least n·f·(1-f)/(n-1), f the fraction of
// the mean.
// Arguments: mean as printed; the SDs to test; n ≥ 2.
// Assumes: whole-number data; the printed n.
// Errors: ErrSize, ErrNotFinite; ErrSpread for a negative SD.
// Limits: coarse for large n or wide ranges: nearly always true.
// Rounding: this is its statement.
// Source: Brown & Heathers 2017; Anaya 2016 (recalled from memory).
// Checked: all multisets of 0 to 6 with n = 6: no attainable pair fails.
func SDAttainable(mean Printed, sd Range, n int) (bool, error) {
	if err := mean.check(); err != nil {
		return false, err
	}
	if err := finite(sd.Low, sd.High); err != nil {
		return false, err
	}
	if err := size(n, 2); err != nil {
		return false, err
	}
	if sd.High < 0 || sd.Low > sd.High {
		return false, fmt.Errorf("%w: SD from %v to %v", ErrSpread, sd.Low, sd.High)
	}
	f := float64(n)
	low := math.Max(sd.Low, 0)
	for s := math.Ceil((mean.Low() - 1e-9) * f); s <= (mean.High()+1e-9)*f; s++ {
		frac := s/f - math.Floor(s/f)
		least := f * frac * (1 - frac) / (f - 1)
		if sd.High*sd.High < least-1e-9 {
			continue
		}
		from := math.Ceil((f-1)*math.Max(low*low, least) + s*s/f - 1e-7)
		to := (f-1)*sd.High*sd.High + s*s/f + 1e-7
		if math.Mod(math.Abs(from), 2) != math.Mod(math.Abs(s), 2) {
			from++
		}
		if from <= to {
			return true, nil
		}
	}
	return false, nil
}

// mostSums bounds the work of AttainableOnScale.
const mostSums = 60_000_000

// AttainableOnScale reports for each Reading whether n whole numbers from low to
// high exist with this printed mean and the SD that the printed spread then means.
//
// Formula: lists all sums and sums of squares of n whole numbers from low to high.
// Arguments: mean and spread as printed; n ≥ 2; low < high the limits of the
// scale; percent the level of a half-width.
// Assumes: whole-number data on that scale; the printed n.
// Errors: ErrSize, ErrOrder, ErrSpread; ErrDomain when scale and n are too large to
// list.
// Limits: a pass by chance is common: at n = 40, two decimals, about half.
// Rounding: this is its statement.
// Source: exact form of Anaya 2016; methods section H4.
// Checked: against R.
func AttainableOnScale(mean, spread Printed, n, low, high int, percent float64) ([readings]bool, error) {
	var out [readings]bool
	if err := mean.check(); err != nil {
		return out, err
	}
	if err := size(n, 2); err != nil {
		return out, err
	}
	if low >= high {
		return out, fmt.Errorf("%w: scale from %d to %d", ErrOrder, low, high)
	}
	width := high - low
	if width > 1000 || n > 1000 {
		return out, fmt.Errorf("%w: a scale of %d steps with %d values", ErrDomain, width, n)
	}
	words := n*width*width/64 + 1
	if words*(n*width+1) > mostSums/(n*(width+1)) {
		return out, fmt.Errorf("%w: a scale of %d steps with %d values is too much to list", ErrDomain, width, n)
	}
	least, err := SDsOfReadings(math.Max(spread.Low(), spread.Half*1e-9), n, percent)
	if err != nil {
		return out, err
	}
	greatest, err := SDsOfReadings(spread.High(), n, percent)
	if err != nil {
		return out, err
	}
	f := float64(n)
	for sum, squares := range sumsOfSquares(n, width, words) {
		if math.Abs(float64(sum)/f+float64(low)-mean.Value) > mean.Half+1e-9 {
			continue
		}
		for q := range 64 * words {
			if squares[q/64]>>(q%64)&1 == 0 {
				continue
			}
			sd := math.Sqrt(math.Max(float64(q)-float64(sum)*float64(sum)/f, 0) / (f - 1))
			for r := range out {
				if sd >= least[r]-1e-9 && sd <= greatest[r]+1e-9 {
					out[r] = true
				}
			}
		}
	}
	return out, nil
}

// sumsOfSquares gives, for each sum of n whole numbers from 0 to width, the set of
// their sums of squares as bits.
func sumsOfSquares(n, width, words int) [][]uint64 {
	table := func() [][]uint64 {
		t := make([][]uint64, n*width+1)
		bits := make([]uint64, len(t)*words)
		for i := range t {
			t[i] = bits[i*words : (i+1)*words]
		}
		return t
	}
	now, next := table(), table()
	now[0][0] = 1
	for k := 1; k <= n; k++ {
		for _, row := range next {
			clear(row)
		}
		for sum := 0; sum <= (k-1)*width; sum++ {
			for v := 0; v <= width; v++ {
				orShifted(next[sum+v], now[sum], v*v)
			}
		}
		now, next = next, now
	}
	return now
}

func orShifted(dst, src []uint64, shift int) {
	words, bits := shift/64, shift%64
	for i, w := range src {
		if w == 0 {
			continue
		}
		if i+words < len(dst) {
			dst[i+words] |= w << bits
		}
		if bits > 0 && i+words+1 < len(dst) {
			dst[i+words+1] |= w >> (64 - bits)
		}
	}
}
