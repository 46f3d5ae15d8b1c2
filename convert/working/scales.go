package working

import (
	"fmt"
	"math"
	"strings"

	"halfspan/convert"
	"halfspan/extract/result"
)

// lopsideReason says in words why the interval is not that of a plain mean.
func (it *item) lopsideReason() string {
	switch {
	case it.outsideInterval():
		return "the estimate lies outside its interval"
	case !it.interval():
		return "the interval cannot be read as two numbers"
	}
	return "the interval is not symmetric about the estimate, even allowing for rounding"
}

// explainLopside shows side by side what a lopsided interval may be: an interval
// symmetric on another scale, quartiles, or a range.
func (it *item) explainLopside() {
	if !it.interval() || it.est == nil || it.outsideInterval() || it.flipped {
		return
	}
	low, high := it.bounds()
	scales, err := convert.Scales(*it.est, low, high)
	if err == nil && len(scales) == 0 {
		it.note("symmetric on neither the raw, the log nor the logit scale: an exact, profile or bootstrap interval, numbers that do not belong together, or a misprint")
	}
	if err == nil {
		for _, s := range scales {
			switch s {
			case convert.Log:
				it.offerLog(low, high)
			case convert.Logit:
				it.offer(Alternative{Name: "symmetric on the logit scale", Note: "a proportion"})
			}
		}
	}
	n := it.res.N
	if n < 3 {
		it.offer(Alternative{Name: "quartiles or a range", Note: "the estimate would more likely be a median"})
		return
	}
	it.offerQuantiles(low, high, n)
}

// offerQuantiles shows what the bounds give as quartiles and as extremes.
func (it *item) offerQuantiles(low, high convert.Printed, n int) {
	if m, err := convert.WanFromQuartiles(low.Value, it.est.Value, high.Value, n); err == nil {
		it.offer(Alternative{Name: "if the bounds are quartiles of a median", Mean: number(m.Mean), SD: number(m.SD), Note: "by wan-quartiles"})
	}
	if m, err := convert.WanFromRange(low.Value, it.est.Value, high.Value, n); err == nil {
		it.offer(Alternative{Name: "if the bounds are minimum and maximum", Mean: number(m.Mean), SD: number(m.SD), Note: "by wan-range"})
	}
}

// offerLog shows mean and SD if the interval belongs to a geometric mean.
func (it *item) offerLog(low, high convert.Printed) {
	a := Alternative{Name: "symmetric on the log scale", Note: "a geometric mean, or a mean analysed as logarithms"}
	if n, level := it.res.N, it.res.Level; n > 1 && level > 0 {
		if s, err := convert.LogSDFromInterval(low.Value, high.Value, level, n, float64(n-1)); err == nil {
			if m, err := convert.LogNormalToRaw(it.est.Value, s); err == nil {
				a.Mean, a.SD = number(m.Mean), number(m.SD)
				a.Note += fmt.Sprintf("; SD of the logarithms %s, lognormal law", short(s))
			}
		}
	}
	it.offer(a)
}

// ownScaleRaw gives the SE of a difference or coefficient on its own scale.
func ownScaleRaw(it *item) {
	it.withhold(fmt.Sprintf("a %s: its SE is given, the SD of the outcome is not behind it", it.res.Statistic))
	blocked(it)
	switch {
	case it.res.GivenAs == result.SE && it.val != nil && it.val.Value > 0:
		it.rec().SE, it.rec().Scale = number(it.val.Value), text("raw")
		it.method("printed-se")
		it.step("SE = %s as printed", it.res.GivenValue)
		it.offerPooled(it.val.Value, convert.Range{Low: math.Max(it.val.Low(), 0), High: it.val.High()})
	case it.res.GivenAs == result.SE:
		it.raise("spread-not-positive", "SE "+it.res.GivenValue)
	case it.res.GivenAs != result.CI:
	case it.lopside != nil:
		it.withhold(it.lopsideReason())
		it.explainLopside()
	case it.res.Level == 0:
		it.raise("level-missing", "the level of the interval is not printed")
	case it.halfWidth() <= 0:
		it.raise("spread-not-positive", "the interval has no width")
	default:
		it.seOfDifference()
	}
}

// seOfDifference gives the SE behind the interval of a difference or coefficient:
// by t where it is an unadjusted difference of two means of known size.
func (it *item) seOfDifference() {
	width, level := it.halfWidth(), it.res.Level
	df, name := convert.Normal, "z"
	if it.twoMeans() {
		df = float64(it.res.N + it.res.N2 - 2)
		name = fmt.Sprintf("t with n₁ + n₂ − 2 = %.0f degrees of freedom", df)
	}
	factor, err := convert.TwoSided(level, df)
	if err != nil {
		it.note("no SE: %v", err)
		return
	}
	it.stepMargin(width)
	it.step("SE = margin/factor = %s/%s = %s, by %s for %s%%", short(width), short(factor), short(width/factor), name, short(level))
	it.rec().SE, it.rec().Scale = number(width/factor), text("raw")
	it.method("se-from-ci")
	it.offerPooled(width/factor, it.margin.Times(1/factor))
}

// twoMeans reports whether the result is a plain difference of two independent
// means of known size.
func (it *item) twoMeans() bool {
	e := it.res.Evidence
	return it.res.Statistic == result.MeanDifference && !strings.Contains(it.res.Measure, "standardi") && it.res.N > 1 && it.res.N2 > 1 &&
		it.res.Adjusted != "yes" && it.res.Adjusted != "unclear" && len(e.Design) == 0 && len(e.Model) == 0
}

// offerPooled shows the pooled SD behind the SE of a difference; none is taken.
func (it *item) offerPooled(se float64, span convert.Range) {
	if !it.twoMeans() {
		return
	}
	sd, err := convert.PooledSDFromSE(se, it.res.N, it.res.N2)
	if err != nil {
		return
	}
	factor := sd / se
	it.step("pooled SD = SE/√(1/n₁ + 1/n₂) = %s/√(1/%d + 1/%d) = %s", short(se), it.res.N, it.res.N2, short(sd))
	it.offer(Alternative{Name: "pooled SD of the two arms", SD: number(sd), SE: number(se), Low: down(span.Low * factor), High: up(span.High * factor),
		Note: "if it is an unadjusted difference of two independent means"})
}

// ownScaleLog gives the SE of the logarithm of a ratio or geometric mean.
func ownScaleLog(it *item) {
	it.withhold(fmt.Sprintf("a %s: its SE on the log scale is given, the SD of the outcome is not behind it", it.res.Statistic))
	if it.res.GivenAs != result.CI || !it.interval() {
		return
	}
	low, high := it.bounds()
	if low.Value <= 0 {
		it.raise("bounds-not-positive", "a ratio needs bounds above 0")
		return
	}
	if it.res.Level == 0 {
		it.raise("level-missing", "the level of the interval is not printed")
		for _, level := range usualLevels {
			if se, err := convert.LogSEFromInterval(low.Value, high.Value, level, convert.Normal); err == nil {
				it.offer(Alternative{Name: fmt.Sprintf("if the level is %s%%", short(level)), SE: number(se), Note: "SE of the logarithm, by z"})
			}
		}
		return
	}
	df, symbol := convert.Normal, "z"
	ofMeans := it.res.Statistic == result.Ratio && it.res.Measure == "ratio of means" && it.res.N > 1 && it.res.N2 > 1
	switch {
	case it.res.Statistic == result.GeometricMean && it.res.N > 1:
		df, symbol = float64(it.res.N-1), "t"
	case ofMeans:
		df, symbol = float64(it.res.N+it.res.N2-2), "t"
	}
	factor, err := convert.TwoSided(it.res.Level, df)
	if err != nil {
		it.note("no SE: %v", err)
		return
	}
	se, err := convert.LogSEFromInterval(low.Value, high.Value, it.res.Level, df)
	if err != nil {
		it.raise("spread-not-positive", "the interval has no width")
		return
	}
	it.step("SE of the logarithm = (ln upper − ln lower)/(2·%s) = (ln %s − ln %s)/(2·%s) = %s",
		symbol, short(high.Value), short(low.Value), short(factor), short(se))
	it.rec().SE, it.rec().Scale = number(se), text("log")
	it.method("log-se-from-ci")
	if span, err := convert.Margin(low, high, nil, convert.Log); err == nil {
		it.step("the printed digits allow %s to %s", short(span.Low/factor), short(span.High/factor))
	}
	if it.est != nil {
		if _, err := convert.Margin(low, high, it.est, convert.Log); err != nil {
			it.note("not symmetric on the log scale (an exact, profile, bootstrap or Bayesian interval, or a misprint): the SE is an approximation")
		}
	}
	if it.res.Statistic == result.GeometricMean && it.res.N > 1 && it.est != nil {
		it.offerLog(low, high)
	}
	if pooled, err := convert.PooledSDFromSE(se, it.res.N, it.res.N2); ofMeans && err == nil {
		it.offer(Alternative{Name: "pooled SD of the logarithms of the two arms", SD: number(pooled), SE: number(se), Note: "if it is an unadjusted ratio of two geometric means, by t with n₁ + n₂ − 2 degrees of freedom"})
	}
}

// geometricSD shows what a number called SD beside a geometric mean or a ratio may be:
// a factor, or the SD of the logarithms. It is not an SD of the outcome.
func geometricSD(it *item) {
	it.withhold(fmt.Sprintf("the SD beside a %s is a factor or belongs to the logarithms: it is not the SD of the outcome", it.res.Statistic))
	if it.val == nil || it.est == nil || it.res.Statistic != result.GeometricMean || it.est.Value <= 0 {
		return
	}
	it.offerLogSD("if it is a geometric SD, a factor", it.val.Value, convert.LogSDFromGSD)
	it.offerLogSD("if it is the SD of natural logarithms", it.val.Value, func(s float64) (float64, error) { return s, nil })
}

func (it *item) offerLogSD(name string, v float64, of func(float64) (float64, error)) {
	s, err := of(v)
	if err != nil || s <= 0 {
		return
	}
	m, err := convert.LogNormalToRaw(it.est.Value, s)
	if err != nil {
		return
	}
	it.offer(Alternative{Name: name, Mean: number(m.Mean), SD: number(m.SD), Note: fmt.Sprintf("SD of the logarithms %s, lognormal law", short(s))})
}

// ownScaleProportion gives the SE of a proportion or rate on the raw scale where
// the interval is symmetric there.
func ownScaleProportion(it *item) {
	it.withhold(fmt.Sprintf("a %s: its interval leads to its SE, not to an SD", it.res.Statistic))
	if it.res.GivenAs == result.SE && it.val != nil && it.val.Value > 0 {
		it.rec().SE, it.rec().Scale = number(it.val.Value), text("raw")
		it.method("printed-se")
		it.step("SE = %s as printed", it.res.GivenValue)
		return
	}
	if it.res.GivenAs != result.CI || it.res.Level == 0 || !it.interval() {
		return
	}
	low, high := it.bounds()
	switch it.res.Statistic {
	case result.Proportion:
		it.nameProportion(low, high)
	case result.Rate:
		it.countEvents(low, high)
	}
	z, err := convert.TwoSided(it.res.Level, convert.Normal)
	if err != nil {
		return
	}
	switch {
	case it.lopside == nil && it.halfWidth() > 0:
		it.stepMargin(it.halfWidth())
		it.rec().SE, it.rec().Scale = number(it.halfWidth()/z), text("raw")
		it.step("SE = margin/z = %s/%s = %s", short(it.halfWidth()), short(z), short(it.halfWidth()/z))
		it.method("se-from-ci")
	case it.res.Statistic == result.Proportion:
		it.logitSE(low, high, z)
	case it.est != nil && low.Value > 0 && high.Value > low.Value && !it.outsideInterval():
		if _, err := convert.Margin(low, high, it.est, convert.Log); err != nil {
			return
		}
		se := math.Log(high.Value/low.Value) / (2 * z)
		it.step("SE of the logarithm = (ln %s − ln %s)/(2·%s) = %s", short(high.Value), short(low.Value), short(z), short(se))
		it.rec().SE, it.rec().Scale = number(se), text("log")
		it.method("log-se-from-ci")
	}
}

// logitSE gives the SE of the log odds behind the interval of a percentage that is
// symmetric on the logit scale.
func (it *item) logitSE(low, high convert.Printed, z float64) {
	if it.est == nil || it.res.Unit != "%" || low.Low() <= 0 || high.High() >= 100 || it.outsideInterval() {
		return
	}
	share := func(p convert.Printed) convert.Printed {
		return convert.Printed{Value: p.Value / 100, Half: p.Half / 100}
	}
	est := share(*it.est)
	if _, err := convert.Margin(share(low), share(high), &est, convert.Logit); err != nil {
		return
	}
	se, err := convert.LogitSEFromInterval(low.Value/100, high.Value/100, it.res.Level)
	if err != nil {
		return
	}
	it.step("symmetric on the logit scale: SE of the log odds = (logit %s%% − logit %s%%)/(2·%s) = %s", short(high.Value), short(low.Value), short(z), short(se))
	it.rec().SE, it.rec().Scale = number(se), text("logit")
	it.method("logit-se-from-ci")
}

// countEvents notes how many events the interval of a rate belongs to, if it is a
// Poisson interval made in either usual way.
func (it *item) countEvents(low, high convert.Printed) {
	if low.Low() <= 0 || high.Low() <= low.High() {
		return
	}
	for _, way := range []struct {
		exact bool
		name  string
	}{{false, "made on the log scale"}, {true, "exact"}} {
		least, err1 := convert.CountFromRateInterval(low.Low(), high.High(), it.res.Level, way.exact)
		most, err2 := convert.CountFromRateInterval(low.High(), high.Low(), it.res.Level, way.exact)
		if err1 != nil || err2 != nil {
			continue
		}
		if first, last := math.Ceil(least), math.Floor(most); first <= last {
			it.note("as a Poisson interval, %s, it belongs to %s", way.name, countText(first, last))
		} else {
			it.note("as a Poisson interval, %s, it belongs to no whole number of events", way.name)
		}
	}
}

func countText(first, last float64) string {
	if first == last {
		return fmt.Sprintf("%.0f events", first)
	}
	return fmt.Sprintf("%.0f to %.0f events", first, last)
}

// nameProportion says by which method the interval of a percentage was made, and
// the SD of the 0/1 variable where n is known.
func (it *item) nameProportion(low, high convert.Printed) {
	n := it.res.N
	if it.est == nil || n < 2 || n > 1e6 || it.res.Unit != "%" {
		return
	}
	counts, err := convert.CountsFromProportion(*it.est, low, high, it.res.Level, n, n,
		[]string{"wald", "wilson", "exact", "waldcc", "wilsoncc", "logit", "agresti", "jeffreys"})
	if err != nil {
		return
	}
	for _, c := range counts {
		it.note("%d of %d prints like this by: %s", c.X, c.N, strings.Join(c.Methods, ", "))
		if sd, err := convert.SDOfBinary(c.X, c.N); err == nil {
			it.offer(Alternative{Name: "SD of the 0/1 variable", Mean: number(float64(c.X) / float64(c.N)), SD: number(sd), Note: fmt.Sprintf("%d of %d, as a fraction", c.X, c.N)})
		}
	}
	if len(counts) == 0 {
		it.note("no usual method makes this interval from a whole count of %d: adjusted, another level or another n", n)
	}
}
