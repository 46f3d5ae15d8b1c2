package convert

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mathext"
)

// ProportionMethod is one way of making an interval of a proportion.
type ProportionMethod struct {
	Name     string // "wald", "wilson", ...
	Title    string // in words, with source
	Interval func(x, n int, percent float64) (Range, error)
}

// ProportionMethods are the intervals of a proportion that papers print.
//
// Formula: see each; z the normal quantile, p = x/n.
// wald p ± z·√(p(1-p)/n); wilson (p + z²/2n ± z·√(p(1-p)/n + z²/4n²))/(1 + z²/n);
// exact: beta quantiles; waldcc wald ± 1/2n; wilsoncc Wilson with p ± 1/2n; logit
// wald on the logit; agresti wald about (x + z²/2)/(n + z²); jeffreys quantiles of
// Beta(x + 1/2, n - x + 1/2).
// Arguments: x of n with the event; percent the level. Results are fractions,
// not cut to 0..1.
// Assumes: independent units.
// Errors: of each Interval: ErrSize, ErrOrder, ErrLevel; logit ErrDomain at 0 and n.
// Limits: exact is 0 at x = 0 and 1 at x = n.
// Rounding: compare with MatchProportion.
// Source: Wilson 1927; Clopper & Pearson 1934; Agresti & Coull 1998; Newcombe 1998.
// Checked: against R to 1e-9; Newcombe 1998 (recalled from memory).
func ProportionMethods() []ProportionMethod {
	return []ProportionMethod{
		{"wald", "normal approximation (Wald)", checkedInterval(wald)},
		{"wilson", "score interval (Wilson 1927)", checkedInterval(wilson)},
		{"exact", "exact (Clopper & Pearson 1934)", checkedInterval(clopperPearson)},
		{"waldcc", "normal approximation with continuity correction", checkedInterval(waldCorrected)},
		{"wilsoncc", "score interval with continuity correction", checkedInterval(wilsonCorrected)},
		{"logit", "normal approximation on the logit", checkedInterval(logitWald)},
		{"agresti", "adjusted normal approximation (Agresti & Coull 1998)", checkedInterval(agrestiCoull)},
		{"jeffreys", "Bayesian with Jeffreys' prior", checkedInterval(jeffreys)},
	}
}

// checkedInterval puts the checks of x, n and level before a formula, which gets
// them with z and the tail probability.
func checkedInterval(f func(x, n, z, tail float64) (Range, error)) func(int, int, float64) (Range, error) {
	return func(x, n int, percent float64) (Range, error) {
		if err := size(n, 1); err != nil {
			return Range{}, err
		}
		if x < 0 || x > n {
			return Range{}, fmt.Errorf("%w: %d of %d", ErrOrder, x, n)
		}
		z, err := TwoSided(percent, Normal)
		if err != nil {
			return Range{}, err
		}
		r, err := f(float64(x), float64(n), z, (1-percent/100)/2)
		if err != nil {
			return Range{}, err
		}
		return r, finite(r.Low, r.High)
	}
}

func wald(x, n, z, _ float64) (Range, error) {
	p := x / n
	w := z * math.Sqrt(p*(1-p)/n)
	return Range{p - w, p + w}, nil
}

func waldCorrected(x, n, z, tail float64) (Range, error) {
	r, _ := wald(x, n, z, tail)
	return Range{r.Low - 0.5/n, r.High + 0.5/n}, nil
}

func wilsonAt(p, n, z float64, side float64) float64 {
	return (p + z*z/(2*n) + side*z*math.Sqrt(p*(1-p)/n+z*z/(4*n*n))) / (1 + z*z/n)
}

func wilson(x, n, z, _ float64) (Range, error) {
	p := x / n
	return Range{math.Max(wilsonAt(p, n, z, -1), 0), wilsonAt(p, n, z, 1)}, nil
}

func wilsonCorrected(x, n, z, _ float64) (Range, error) {
	r := Range{0, 1}
	if p := (x - 0.5) / n; p > 0 {
		r.Low = math.Max(wilsonAt(p, n, z, -1), 0)
	}
	if p := (x + 0.5) / n; p < 1 {
		r.High = math.Min(wilsonAt(p, n, z, 1), 1)
	}
	return r, nil
}

func clopperPearson(x, n, _, tail float64) (Range, error) {
	r := Range{0, 1}
	if x > 0 {
		r.Low = mathext.InvRegIncBeta(x, n-x+1, tail)
	}
	if x < n {
		r.High = 1 - mathext.InvRegIncBeta(n-x, x+1, tail)
	}
	return r, nil
}

func jeffreys(x, n, _, tail float64) (Range, error) {
	return Range{mathext.InvRegIncBeta(x+0.5, n-x+0.5, tail), 1 - mathext.InvRegIncBeta(n-x+0.5, x+0.5, tail)}, nil
}

func agrestiCoull(x, n, z, tail float64) (Range, error) {
	m := n + z*z
	return wald(m*((x+z*z/2)/m), m, z, tail)
}

func logitWald(x, n, z, _ float64) (Range, error) {
	if x == 0 || x == n {
		return Range{}, fmt.Errorf("%w: no logit at %v of %v", ErrDomain, x, n)
	}
	centre, w := math.Log(x/(n-x)), z*math.Sqrt(1/x+1/(n-x))
	back := func(l float64) float64 { return 1 / (1 + math.Exp(-l)) }
	return Range{back(centre - w), back(centre + w)}, nil
}

// LogitSEFromInterval is the standard error of the log odds of a proportion from its
// interval.
//
// Formula: (logit upper - logit lower)/(2·z), logit p = ln(p/(1 - p)).
// Arguments: bounds as fractions in (0, 1); percent the level.
// Assumes: Wald interval on the logit scale: its centre there is the logit of the
// proportion within rounding (Margin with Logit). For Wilson, exact and other
// intervals it is an approximation. It is never the SD of an outcome.
// Errors: ErrDomain for bounds outside (0, 1); those of SEFromInterval.
// Limits: none.
// Rounding: Margin with Logit over z.
// Source: definition; the logit interval of methods section D3.
// Checked: against R to 1e-9.
func LogitSEFromInterval(lower, upper, percent float64) (float64, error) {
	for _, p := range []float64{lower, upper} {
		if !(p > 0 && p < 1) {
			return 0, fmt.Errorf("%w: the log odds of %v", ErrDomain, p)
		}
	}
	return SEFromInterval(math.Log(lower)-math.Log1p(-lower), math.Log(upper)-math.Log1p(-upper), percent, Normal)
}

// SDOfBinary is the sample SD of a 0/1 variable.
//
// Formula: √(p·(1 - p)·n/(n - 1)), p = x/n.
// Arguments: x of n with the event, n ≥ 2.
// Assumes: nothing; no interval is needed.
// Errors: ErrSize, ErrOrder.
// Limits: 0 at x = 0 and x = n.
// Rounding: counts have none.
// Source: definition.
// Checked: against R to 1e-9.
func SDOfBinary(x, n int) (float64, error) {
	if err := size(n, 2); err != nil {
		return 0, err
	}
	if x < 0 || x > n {
		return 0, fmt.Errorf("%w: %d of %d", ErrOrder, x, n)
	}
	f, k := float64(n), float64(x)
	return math.Sqrt(k * (f - k) / (f * (f - 1))), nil
}

// MatchProportion names the methods whose interval prints as the one given.
//
// Formula: all of ProportionMethods, cut to 0..100%, equal to both bounds within
// rounding.
// Arguments: x of n; lower and upper as printed in percent; percent the level.
// Assumes: rounded to the nearest.
// Errors: those of the intervals, except where one method has none.
// Limits: several may fit: then they agree to the printed digits. None may fit:
// adjusted, another level or another n.
// Rounding: this is its statement.
// Source: Newcombe 1998 for the comparison.
// Checked: against R.
func MatchProportion(x, n int, lower, upper Printed, percent float64) ([]string, error) {
	var names []string
	for _, m := range ProportionMethods() {
		r, err := m.Interval(x, n, percent)
		if err != nil {
			if m.Name == "logit" && (x == 0 || x == n) {
				continue
			}
			return nil, err
		}
		if prints(100*cut(r.Low), lower) && prints(100*cut(r.High), upper) {
			names = append(names, m.Name)
		}
	}
	return names, nil
}

func cut(p float64) float64 { return math.Min(math.Max(p, 0), 1) }

// prints reports whether v may be printed as p; ties either way.
func prints(v float64, p Printed) bool { return math.Abs(v-p.Value) <= p.Half+1e-9 }

// Counts is one (events, size) that a printed percentage with its interval allows.
type Counts struct {
	X, N    int
	Methods []string
}

// CountsFromProportion finds the counts behind a percentage with its interval.
//
// Formula: for each n the whole x with 100·x/n printing as the percentage, kept
// where one of the methods prints the interval.
// Arguments: estimate, lower, upper as printed in percent; percent the level; n
// from least to most; methods to consider (nil: wald, wilson, exact).
// Assumes: rounded to the nearest.
// Errors: ErrDomain for an estimate outside 0 to 100 or an empty span of n;
// ErrLevel.
// Limits: coarse digits leave many solutions: all are given, in order of n.
// Rounding: this is its statement.
// Source: elementary; methods section D4.
// Checked: against R.
func CountsFromProportion(estimate, lower, upper Printed, percent float64, least, most int, methods []string) ([]Counts, error) {
	if estimate.Value < 0 || estimate.Value > 100 || least < 1 || most < least {
		return nil, fmt.Errorf("%w: %v%% with n from %d to %d", ErrDomain, estimate.Value, least, most)
	}
	if methods == nil {
		methods = []string{"wald", "wilson", "exact"}
	}
	var out []Counts
	for n := least; n <= most; n++ {
		first := int(math.Ceil((estimate.Low()-1e-9)*float64(n)/100 - 1e-9))
		last := int(math.Floor((estimate.High()+1e-9)*float64(n)/100 + 1e-9))
		for x := max(first, 0); x <= min(last, n); x++ {
			if !prints(100*float64(x)/float64(n), estimate) {
				continue
			}
			fit, err := MatchProportion(x, n, lower, upper, percent)
			if err != nil {
				return nil, err
			}
			var kept []string
			for _, m := range methods {
				for _, f := range fit {
					if f == m {
						kept = append(kept, m)
					}
				}
			}
			if kept != nil {
				out = append(out, Counts{x, n, kept})
			}
		}
	}
	return out, nil
}
