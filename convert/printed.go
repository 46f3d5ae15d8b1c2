package convert

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Printed is a number as printed: its value and half a unit in its last place.
// The true value lies within Half of Value.
type Printed struct {
	Value float64
	Half  float64
}

// Range is a set of values from Low to High, both possible.
type Range struct {
	Low  float64
	High float64
}

// ReadPrinted reads a printed number: an optional '-', digits, '.', digits,
// optionally an exponent ("2.1e5").
//
// Formula: Half = 0.5·10^(exponent - decimals).
// Arguments: text as printed, decimal mark '.', no thousands marks, no unit.
// Assumes: rounded to the nearest, not cut off; a trailing zero was not dropped.
// Errors: ErrNotFinite when it is not such a number.
// Limits: "5" has Half 0.5, "5.0" has 0.05.
// Rounding: none; it states the rounding.
// Source: the meaning of a rounded decimal.
// Checked: table of cases.
func ReadPrinted(text string) (Printed, error) {
	s := strings.TrimSuffix(strings.TrimSpace(text), "%")
	mantissa, exponent := s, 0
	if i := strings.IndexAny(s, "eE"); i >= 0 {
		mantissa = s[:i]
		e, err := strconv.Atoi(s[i+1:])
		if err != nil || e < -300 || e > 300 {
			return Printed{}, fmt.Errorf("%w: %q", ErrNotFinite, text)
		}
		exponent = e
	}
	digits := strings.TrimPrefix(strings.TrimPrefix(mantissa, "-"), "+")
	if digits == "" || strings.Trim(digits, "0123456789.") != "" || strings.Count(digits, ".") > 1 || digits == "." {
		return Printed{}, fmt.Errorf("%w: %q", ErrNotFinite, text)
	}
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		return Printed{}, fmt.Errorf("%w: %q", ErrNotFinite, text)
	}
	decimals := 0
	if i := strings.IndexByte(digits, '.'); i >= 0 {
		decimals = len(digits) - i - 1
	}
	half := 0.5 * math.Pow(10, float64(exponent-decimals))
	if math.IsInf(half, 0) || half == 0 {
		return Printed{}, fmt.Errorf("%w: %q", ErrNotFinite, text)
	}
	return Printed{v, half}, nil
}

// Low is the least value that prints as p.
func (p Printed) Low() float64 { return p.Value - p.Half }

// High is the greatest value that prints as p.
func (p Printed) High() float64 { return p.Value + p.Half }

func (p Printed) check() error {
	if err := finite(p.Value, p.Half); err != nil {
		return err
	}
	if p.Half < 0 {
		return fmt.Errorf("%w: half a unit is %v", ErrDomain, p.Half)
	}
	return nil
}

// Scale is the scale on which an interval is symmetric.
type Scale string

// The scales of an interval.
const (
	Raw   Scale = "raw"
	Log   Scale = "log"
	Logit Scale = "logit"
)

// To puts v, a value on the raw scale, on the scale s. Below the scale's domain
// it is minus infinity, above it plus infinity.
func (s Scale) To(v float64) float64 {
	switch s {
	case Log:
		if v <= 0 {
			return math.Inf(-1)
		}
		return math.Log(v)
	case Logit:
		if v <= 0 {
			return math.Inf(-1)
		}
		if v >= 1 {
			return math.Inf(1)
		}
		return math.Log(v / (1 - v))
	}
	return v
}

// Margin is the set of half-widths that a symmetric interval may have which
// prints with these bounds and, where it is given, this estimate.
//
// Formula: with L, U and M the images of the rounding intervals on the scale,
// the margin is at most min((U₂-L₁)/2, U₂-M₁, M₂-L₁) and at least
// max((U₁-L₂)/2, U₁-M₂, M₁-L₂, 0); on the raw scale with equal rounding this is
// W ± min(h, h+hm-|δ|), W = (u-l)/2, δ = (l+u)/2 - m.
// Arguments: lower and upper bound as printed; estimate nil where none is
// printed; all in the units of the raw scale (proportions as fractions for
// Logit). The result is in units of scale.
// Assumes: interval symmetric about the estimate on the scale; all rounded to
// the nearest.
// Errors: ErrNotFinite; ErrOrder when lower > upper; ErrDomain when a bound may lie
// outside the scale (a lower bound of 0.04 printed as 0.0 has no logarithm); ErrInconsistent when no symmetric interval on this scale
// prints like this (then it is not symmetric there).
// Limits: bounds without rounding give one value.
// Rounding: this is the exact set (Fourier-Motzkin elimination of the estimate).
// Source: elementary; methods section G.
// Checked: against R and against brute force over 4 million random intervals.
func Margin(lower, upper Printed, estimate *Printed, scale Scale) (Range, error) {
	for _, p := range []*Printed{&lower, &upper, estimate} {
		if p == nil {
			continue
		}
		if err := p.check(); err != nil {
			return Range{}, err
		}
	}
	if lower.Value > upper.Value {
		return Range{}, fmt.Errorf("%w: lower bound %v above upper bound %v", ErrOrder, lower.Value, upper.Value)
	}
	if scale != Raw && (lower.Low() <= 0 || scale == Logit && upper.High() >= 1) {
		return Range{}, fmt.Errorf("%w: bounds %v and %v have no %s", ErrDomain, lower.Value, upper.Value, scale)
	}
	l1, l2 := scale.To(lower.Low()), scale.To(lower.High())
	u1, u2 := scale.To(upper.Low()), scale.To(upper.High())
	w := Range{Low: math.Max((u1-l2)/2, 0), High: (u2 - l1) / 2}
	if estimate != nil {
		m1, m2 := scale.To(estimate.Low()), scale.To(estimate.High())
		w.Low = math.Max(w.Low, math.Max(u1-m2, m1-l2))
		w.High = math.Min(w.High, math.Min(u2-m1, m2-l1))
	}
	if math.IsNaN(w.Low) || math.IsNaN(w.High) {
		return Range{}, fmt.Errorf("%w: bounds %v and %v have no %s", ErrDomain, lower.Value, upper.Value, scale)
	}
	// A hair's breadth is the computer's rounding, not the paper's.
	if slack := 1e-9 * (upper.Half + lower.Half); scale == Raw && w.Low > w.High && w.Low-w.High <= slack {
		mid := (w.Low + w.High) / 2
		w = Range{mid, mid}
	}
	if w.Low > w.High {
		return Range{}, fmt.Errorf("%w: no interval symmetric on the %s scale prints as %v (%v to %v)",
			ErrInconsistent, scale, estimate.Value, lower.Value, upper.Value)
	}
	return w, nil
}

// Times is r with both ends multiplied by a positive factor.
func (r Range) Times(factor float64) Range { return Range{r.Low * factor, r.High * factor} }

// Holds reports whether v lies in r.
func (r Range) Holds(v float64) bool { return r.Low <= v && v <= r.High }

// Meets reports whether r and o share a value.
func (r Range) Meets(o Range) bool { return r.Low <= o.High && o.Low <= r.High }

// Union is the smallest range that holds r and o.
func (r Range) Union(o Range) Range { return Range{math.Min(r.Low, o.Low), math.Max(r.High, o.High)} }

// Decimals is the number of decimals that a value with this range of digits
// deserves; negative where not even the units are settled.
//
// Formula: ceiling(-log10(High-Low)).
// Arguments: the range, in the units of the value.
// Assumes: nothing.
// Errors: none; a range of no width deserves 9 decimals.
// Limits: between -15 and 9.
// Rounding: rounding the value to so many decimals adds at most what the range
// already leaves open.
// Source: methods section G.
// Checked: against R.
func (r Range) Decimals() int {
	width := r.High - r.Low
	if !(width > 0) || math.IsInf(width, 0) {
		return 9
	}
	return min(max(int(math.Ceil(-math.Log10(width))), -15), 9)
}
