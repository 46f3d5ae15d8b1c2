package convert

import "math"

// SEFromInterval is the standard error behind a two-sided interval of a mean,
// difference or coefficient.
//
// Formula: SE = (upper - lower) / (2·t), t the two-sided factor for the level.
// Arguments: bounds in the units of the estimate (logarithms for a ratio);
// percent the level; df the degrees of freedom, Normal for z.
// Assumes: interval made as estimate ± t·SE on this scale.
// Errors: ErrNotFinite; ErrOrder when lower > upper; ErrSpread when they are
// equal; ErrLevel; ErrDF.
// Limits: df → ∞ gives the value by z.
// Rounding: use Margin for the range of the printed digits and divide by t.
// Source: Student 1908; Handbook for Systematic Reviews of Interventions 6.5.2.2.
// Checked: against R to 1e-9, and the Handbook's printed example (recalled from
// memory).
func SEFromInterval(lower, upper, percent, df float64) (float64, error) {
	if err := finite(lower, upper); err != nil {
		return 0, err
	}
	if err := ordered("interval", lower, upper); err != nil {
		return 0, err
	}
	if err := positive("width of the interval", upper-lower, ErrSpread); err != nil {
		return 0, err
	}
	t, err := TwoSided(percent, df)
	if err != nil {
		return 0, err
	}
	return result((upper - lower) / (2 * t))
}

// SDFromSE is the sample SD behind the standard error of one mean.
//
// Formula: SD = SE·√n.
// Arguments: se in the units of the mean, > 0; n values behind it, ≥ 2.
// Assumes: n independent values, SE = SD/√n; not the SE of a model or difference.
// Errors: ErrNotFinite, ErrSpread, ErrSize.
// Limits: none.
// Rounding: an SE printed to h gives (SE ± h)·√n.
// Source: definition; Handbook for Systematic Reviews of Interventions 6.5.2.2.
// Checked: against R; NIST/SEMATECH e-Handbook two-sample example (recalled from
// memory).
func SDFromSE(se float64, n int) (float64, error) {
	if err := positive("SE", se, ErrSpread); err != nil {
		return 0, err
	}
	if err := size(n, 2); err != nil {
		return 0, err
	}
	return result(se * math.Sqrt(float64(n)))
}

// SDFromInterval is the sample SD behind the two-sided interval of one mean.
//
// Formula: SD = √n·(upper - lower)/(2·t).
// Arguments: bounds in the units of the mean; percent the level; n ≥ 2 values
// analysed in that row; df usually n-1, N-k where the interval was made from a
// pooled SD of k groups, Normal where it was made with z.
// Assumes: raw arithmetic mean of n independent values, interval mean ± t·SE.
// Fails for adjusted, least-squares and marginal means, clustered or weighted
// data, bootstrap, back-transformed, simultaneous and one-sided intervals.
// Errors: ErrSize, and those of SEFromInterval.
// Limits: z in place of t is larger by t/z: 15.42% at n = 10, 1.24% at 100.
// Rounding: Margin·√n/t is the exact range of the printed digits.
// Source: Student 1908; Handbook for Systematic Reviews of Interventions 6.5.2.2.
// Checked: against R to 1e-9; the Handbook's printed examples 5.09 and 4.06 and
// Gardner & Altman 1986 (recalled from memory).
func SDFromInterval(lower, upper, percent float64, n int, df float64) (float64, error) {
	if err := size(n, 2); err != nil {
		return 0, err
	}
	se, err := SEFromInterval(lower, upper, percent, df)
	if err != nil {
		return 0, err
	}
	return SDFromSE(se, n)
}
