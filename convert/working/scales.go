package working

import (
	"fmt"
	"math"

	"halfspan/convert"
	"halfspan/extract/result"
)

// lopsideReason says in words why the interval is not that of a plain mean.
func (it *item) lopsideReason() string {
	if it.interval() && it.est != nil {
		low, high := it.bounds()
		if outside(*it.est, low, high) && !it.flipped {
			return "the estimate lies outside its interval"
		}
	}
	return "the interval is not symmetric about the estimate, even allowing for rounding"
}

// explainLopside shows on which other scale the interval would be symmetric.
func (it *item) explainLopside() {
	if !it.interval() || it.est == nil {
		return
	}
	low, high := it.bounds()
	if outside(*it.est, low, high) {
		return
	}
	if low.Value > 0 {
		if _, err := convert.Margin(low, high, it.est, convert.Log); err == nil {
			it.offer(Alternative{Name: "symmetric on the log scale", Note: "a geometric mean, or a mean analysed as logarithms"})
		}
	}
	it.offer(Alternative{Name: "quartiles or a range", Note: "if the bounds are quartiles or the extremes, the estimate is more likely a median"})
}

// ownScaleRaw gives the SE of a difference or coefficient on its own scale.
func ownScaleRaw(it *item) {
	it.withhold(fmt.Sprintf("a %s: its SE is given, the SD of the outcome is not behind it", it.res.Statistic))
	if it.res.GivenAs == result.SE {
		if it.val != nil && it.val.Value > 0 {
			it.rec().SE, it.rec().Scale = number(it.val.Value), text("raw")
			it.method("printed-se")
			it.step("SE = %s as printed", it.res.GivenValue)
		}
		return
	}
	if it.res.GivenAs != result.CI {
		return
	}
	width, level := it.halfWidth(), it.res.Level
	if level == 0 {
		it.raise("level-missing", "the level of the interval is not printed")
		return
	}
	if it.lopside != nil || width <= 0 {
		return
	}
	df := convert.Normal
	name := "z"
	if it.res.Statistic == result.MeanDifference && it.res.N > 1 && it.res.N2 > 1 && it.res.Adjusted != "yes" {
		df, name = float64(it.res.N+it.res.N2-2), fmt.Sprintf("t with n₁ + n₂ − 2 = %d degrees of freedom", it.res.N+it.res.N2-2)
	}
	factor, err := convert.TwoSided(level, df)
	if err != nil {
		return
	}
	it.stepMargin(width)
	it.step("SE = margin/factor = %s/%s = %s, by %s for %s%%", short(width), short(factor), short(width/factor), name, short(level))
	it.rec().SE, it.rec().Scale = number(width/factor), text("raw")
	it.method("se-from-ci")
}

// ownScaleLog gives the SE of the logarithm of a ratio or geometric mean.
func ownScaleLog(it *item) {
	it.withhold(fmt.Sprintf("a %s: its SE on the log scale is given, the SD of the outcome is not behind it", it.res.Statistic))
	if it.res.GivenAs != result.CI || !it.interval() {
		return
	}
	if it.res.Level == 0 {
		it.raise("level-missing", "the level of the interval is not printed")
		return
	}
	low, high := it.bounds()
	if low.Value <= 0 || high.Value <= low.Value {
		it.raise("bounds-not-positive", "a ratio needs bounds above 0")
		return
	}
	z, err := convert.TwoSided(it.res.Level, convert.Normal)
	if err != nil {
		return
	}
	se := math.Log(high.Value/low.Value) / (2 * z)
	it.step("SE of the logarithm = (ln upper − ln lower)/(2·z) = (ln %s − ln %s)/(2·%s) = %s",
		short(high.Value), short(low.Value), short(z), short(se))
	it.rec().SE, it.rec().Scale = number(se), text("log")
	it.method("log-se-from-ci")
}

// ownScaleProportion gives the SE of a proportion or rate on the raw scale where
// the interval is symmetric there.
func ownScaleProportion(it *item) {
	it.withhold(fmt.Sprintf("a %s: its interval leads to its SE, not to an SD", it.res.Statistic))
	if it.res.GivenAs == result.SE && it.val != nil && it.val.Value > 0 {
		it.rec().SE, it.rec().Scale = number(it.val.Value), text("raw")
		it.method("printed-se")
		return
	}
	if it.res.GivenAs != result.CI || it.res.Level == 0 || it.lopside != nil || it.halfWidth() <= 0 {
		return
	}
	z, err := convert.TwoSided(it.res.Level, convert.Normal)
	if err != nil {
		return
	}
	it.stepMargin(it.halfWidth())
	it.rec().SE, it.rec().Scale = number(it.halfWidth()/z), text("raw")
	it.step("SE = margin/z = %s/%s = %s", short(it.halfWidth()), short(z), short(it.halfWidth()/z))
	it.method("se-from-ci")
}
