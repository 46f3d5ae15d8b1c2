package convert

import (
	"fmt"
	"math"
	"strings"
)

// SEFromT is the standard error behind a t (or z) statistic.
//
// Formula: SE = |estimate|/|t|.
// Arguments: estimate in its own units (the logarithm of a ratio); t as printed,
// sign ignored.
// Assumes: t tests the estimate against 0.
// Errors: ErrNotFinite; ErrDomain when estimate or t is 0.
// Limits: none.
// Rounding: relative error of estimate plus that of t; hopeless near 0.
// Source: definition; Handbook for Systematic Reviews of Interventions 6.5.2.3.
// Checked: against R to 1e-9.
func SEFromT(estimate, t float64) (float64, error) {
	if err := finite(estimate, t); err != nil {
		return 0, err
	}
	if estimate == 0 || t == 0 {
		return 0, fmt.Errorf("%w: estimate %v with t %v has no SE", ErrDomain, estimate, t)
	}
	return result(math.Abs(estimate) / math.Abs(t))
}

// TFromF is the t statistic behind an F with 1 and df degrees of freedom.
//
// Formula: t = √F.
// Arguments: f > 0, of a comparison with one numerator degree of freedom.
// Assumes: exactly two groups (or one contrast).
// Errors: ErrDomain when f is not above 0.
// Limits: none.
// Rounding: half the relative error of f.
// Source: identity of F(1, df) and t².
// Checked: against R to 1e-9.
func TFromF(f float64) (float64, error) {
	if err := positive("F", f, ErrDomain); err != nil {
		return 0, err
	}
	return math.Sqrt(f), nil
}

// TFromP is the size of the t statistic behind a p value.
//
// Formula: t = t quantile at 1 - p/sides with df degrees of freedom.
// Arguments: p in (0, 1); sides 1 or 2; df, Normal for z.
// Assumes: p comes from a t test (z test) with these degrees of freedom.
// Errors: ErrDomain for p or sides; ErrDF.
// Limits: a one-sided p read as two-sided gives a t that is too large.
// Rounding: give both ends of what the printed p allows.
// Source: Handbook for Systematic Reviews of Interventions 6.5.2.3.
// Checked: against R to 1e-9; the Handbook's 2.78 (recalled from memory).
func TFromP(p float64, sides int, df float64) (float64, error) {
	if sides != 1 && sides != 2 {
		return 0, fmt.Errorf("%w: a test has one or two sides, not %d", ErrDomain, sides)
	}
	if !(p > 0 && p < 1) {
		return 0, fmt.Errorf("%w: p is %v, needed between 0 and 1", ErrDomain, p)
	}
	t, err := TUpper(p/float64(sides), df)
	return math.Abs(t), err
}

// PooledSDFromSE is the pooled SD of two independent arms behind the standard
// error of the difference of their means.
//
// Formula: SD = SE/√(1/n1 + 1/n2).
// Arguments: se in the units of the outcome; arm sizes ≥ 1, together ≥ 3.
// Assumes: unadjusted difference of two raw means by the pooled t test. From
// Welch's test the same formula gives √((n2·s1² + n1·s2²)/(n1 + n2)), the pooled
// SD where n1 = n2. Too small by about √(1-r²) after adjustment for a covariate.
// Errors: ErrSpread, ErrSize.
// Limits: none.
// Rounding: proportional to SE.
// Source: Handbook for Systematic Reviews of Interventions 6.5.2.3.
// Checked: against R to 1e-9; the Handbook's 4.69 from the rounded SE, and
// Gardner & Altman 1986 (recalled from memory).
func PooledSDFromSE(se float64, n1, n2 int) (float64, error) {
	if err := positive("SE", se, ErrSpread); err != nil {
		return 0, err
	}
	if err := arms(n1, n2); err != nil {
		return 0, err
	}
	return result(se / math.Sqrt(1/float64(n1)+1/float64(n2)))
}

func arms(n1, n2 int) error {
	if err := size(n1, 1); err != nil {
		return err
	}
	if err := size(n2, 1); err != nil {
		return err
	}
	return size(n1+n2, 3)
}

// PooledSDFromInterval is the pooled SD behind the interval of a difference of
// two independent means.
//
// Formula: SD = (upper - lower)/(2·t)/√(1/n1 + 1/n2).
// Arguments: bounds in the units of the outcome; percent the level; arm sizes;
// df usually n1+n2-2, Normal for z.
// Assumes: as PooledSDFromSE.
// Errors: those of SEFromInterval and PooledSDFromSE.
// Limits: df → ∞ gives the value by z.
// Rounding: Margin divided by t and √(1/n1 + 1/n2).
// Source: Handbook for Systematic Reviews of Interventions 6.5.2.3.
// Checked: against R to 1e-9; Gardner & Altman 1986: 17.7 lies inside the range
// of the printed digits (recalled from memory).
func PooledSDFromInterval(lower, upper, percent float64, n1, n2 int, df float64) (float64, error) {
	if err := arms(n1, n2); err != nil {
		return 0, err
	}
	se, err := SEFromInterval(lower, upper, percent, df)
	if err != nil {
		return 0, err
	}
	return PooledSDFromSE(se, n1, n2)
}

// PValue is what a printed p value says: p lies between Low and High.
type PValue struct {
	Range
	Exact bool // a number was printed, not an inequality
}

// ReadP reads a printed p value: "0.03", ".03", "<0.05", "≤ 0.05", ">0.05",
// "0.000", "ns".
//
// Formula: a number x with half unit h gives [x-h, x+h] within [0, 1]; "<x" gives
// [0, x]; ">x" gives [x, 1]; "ns" gives [0.05, 1]; a p of only zeros gives [0, h].
// Arguments: text as printed, decimal mark '.'; a leading "p" and "=" are allowed.
// Assumes: rounded to the nearest; "ns" means not significant at 5%.
// Errors: ErrDomain when it is not a p value.
// Limits: none.
// Rounding: this is its statement.
// Source: elementary; methods section B3.
// Checked: table of cases.
func ReadP(text string) (PValue, error) {
	s := strings.ToLower(strings.ReplaceAll(strings.TrimSpace(text), " ", ""))
	s = strings.TrimLeft(strings.TrimPrefix(s, "p"), "=")
	switch strings.Trim(s, ".") {
	case "ns", "n.s":
		return PValue{Range: Range{0.05, 1}}, nil
	}
	sign := ""
	for _, mark := range []string{"<=", ">=", "<", ">", "≤", "≥", "⩽", "⩾"} {
		if strings.HasPrefix(s, mark) {
			sign, s = mark, strings.TrimPrefix(s, mark)
			break
		}
	}
	x, err := ReadPrinted(s)
	if err != nil || x.Value < 0 || x.Value > 1 {
		return PValue{}, fmt.Errorf("%w: %q is not a p value", ErrDomain, text)
	}
	switch sign {
	case "<", "<=", "≤", "⩽":
		return PValue{Range: Range{0, x.Value}}, nil
	case ">", ">=", "≥", "⩾":
		return PValue{Range: Range{x.Value, 1}}, nil
	}
	return PValue{Range: Range{math.Max(x.Low(), 0), math.Min(x.High(), 1)}, Exact: true}, nil
}

// PooledSDFromP is the set of pooled SDs that a printed difference with its
// printed p value allows.
//
// Formula: SD = |d|/t/√(1/n1 + 1/n2), t = t quantile at 1 - p/sides with n1+n2-2
// degrees of freedom, at both ends of d and p.
// Arguments: difference as printed; p from ReadP; sides 1 or 2; arm sizes.
// Assumes: as PooledSDFromSE, and p from a t test.
// Errors: ErrDomain when the difference may be 0 or p leaves nothing open;
// ErrSize.
// Limits: "p < x" gives an upper limit only (Low is 0); "p > x" or "ns" a lower
// limit only (High is +Inf: no upper limit).
// Rounding: exact for the printed digits of difference and p.
// Source: Handbook for Systematic Reviews of Interventions 6.5.2.3, which takes p
// at the limit, that is High for "p < x".
// Checked: against R to 1e-9.
func PooledSDFromP(difference Printed, p PValue, sides, n1, n2 int) (Range, error) {
	if err := difference.check(); err != nil {
		return Range{}, err
	}
	if err := arms(n1, n2); err != nil {
		return Range{}, err
	}
	if sides != 1 && sides != 2 {
		return Range{}, fmt.Errorf("%w: a test has one or two sides, not %d", ErrDomain, sides)
	}
	d := math.Abs(difference.Value)
	if d <= difference.Half {
		return Range{}, fmt.Errorf("%w: the difference may be 0, so its p value says nothing of the SD", ErrDomain)
	}
	if !(p.Low >= 0 && p.High <= 1 && p.Low <= p.High && p.High > 0) || p.Low >= 1 {
		return Range{}, fmt.Errorf("%w: p between %v and %v", ErrDomain, p.Low, p.High)
	}
	factor := math.Sqrt(1/float64(n1) + 1/float64(n2))
	df := float64(n1 + n2 - 2)
	out := Range{High: math.Inf(1)}
	if p.Low > 0 {
		t, err := TFromP(p.Low, sides, df)
		if err != nil {
			return Range{}, err
		}
		out.Low = (d - difference.Half) / t / factor
	}
	// A one-sided p of a half or more gives t of 0 or less: no upper limit.
	if p.High/float64(sides) < 0.5 {
		t, err := TFromP(p.High, sides, df)
		if err != nil {
			return Range{}, err
		}
		out.High = (d + difference.Half) / t / factor
	}
	return out, nil
}

// PooledSDFromANOVA is the pooled SD behind the F of a one-way analysis of
// variance and the means of its groups.
//
// Formula: SD = √(MSB/F), MSB = Σ nᵢ(mᵢ - M)²/(k - 1), M the weighted grand mean.
// Arguments: means and sizes of all k ≥ 2 groups in the same order; f > 0.
// Assumes: unadjusted one-way F over exactly these groups; residual df = N - k.
// Errors: ErrSize; ErrNotFinite; ErrDomain for f; ErrSpread when the means do not
// differ.
// Limits: two groups give PooledSDFromSE with t = √F.
// Rounding: the means' rounding weighs most where they differ little.
// Source: definition of F (Fisher 1925).
// Checked: against R to 1e-9; R's PlantGrowth, 0.6234 (recalled from memory).
func PooledSDFromANOVA(means []float64, sizes []int, f float64) (float64, error) {
	if len(means) < 2 || len(means) != len(sizes) {
		return 0, fmt.Errorf("%w: %d means with %d sizes", ErrSize, len(means), len(sizes))
	}
	if err := finite(means...); err != nil {
		return 0, err
	}
	if err := positive("F", f, ErrDomain); err != nil {
		return 0, err
	}
	var total, sum float64
	for i, n := range sizes {
		if err := size(n, 1); err != nil {
			return 0, err
		}
		total += float64(n)
		sum += float64(n) * means[i]
	}
	grand, between := sum/total, 0.0
	for i, n := range sizes {
		between += float64(n) * (means[i] - grand) * (means[i] - grand)
	}
	if err := positive("sum of squares between the means", between, ErrSpread); err != nil {
		return 0, err
	}
	return result(math.Sqrt(between / float64(len(means)-1) / f))
}
