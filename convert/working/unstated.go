package working

import (
	"fmt"
	"math"
	"slices"

	"halfspan/convert"
	"halfspan/extract/result"
)

// readingNames are the meanings of an unexplained ±, in the order of
// convert.Reading.
var readingNames = [...]string{"as an SD", "as an SE", "as the half-width of a 95% interval"}

// readingLevel is the level of the half-width when the ± is read as one.
const readingLevel = 95

// weighReadings shows what a ± means as SD, SE and half-width of a 95% interval,
// with what strikes a reading out; none is taken.
func weighReadings(it *item) {
	it.raise("spread-unstated", "the paper does not say what stands after the ± or in the bracket")
	it.withhold("the paper does not say whether the spread is an SD, an SE or the half-width of an interval")
	if it.val == nil && it.interval() {
		it.withhold("the paper does not say whether the bounds are an interval, quartiles or a range")
		it.weighBounds()
		return
	}
	if it.val == nil || it.val.Value <= 0 {
		it.raise("spread-not-positive", "spread "+it.res.GivenValue)
		return
	}
	n := it.res.N
	if n < 2 {
		it.sizeMissing()
		it.offer(Alternative{Name: readingNames[convert.AsSD], SD: number(it.val.Value), Low: down(math.Max(it.val.Low(), 0)), High: up(it.val.High()),
			Note: "the other readings need n"})
		return
	}
	sds, err := convert.SDsOfReadings(it.val.Value, n, readingLevel)
	if err != nil {
		it.note("the readings cannot be worked out: %v", err)
		return
	}
	it.stepReadings(sds, n)
	struck := it.strikeReadings(sds)
	for r, sd := range sds {
		factor := sd / it.val.Value
		a := Alternative{Name: readingNames[r], SD: number(sd), SE: number(sd / math.Sqrt(float64(n))),
			Low: down(math.Max(it.val.Low(), 0) * factor), High: up(it.val.High() * factor)}
		if it.est != nil {
			a.Mean = number(it.est.Value)
			if it.est.Value != 0 {
				a.Note = fmt.Sprintf("coefficient of variation %.0f%%", 100*sd/math.Abs(it.est.Value))
			}
		}
		if struck[r] != "" {
			a.Struck, a.Note = true, struck[r]
		}
		it.offer(a)
	}
	it.assume("nothing: the readings are shown side by side and none is applied")
}

// weighBounds shows what two unexplained bounds would mean as an interval, as
// quartiles and as a range.
func (it *item) weighBounds() {
	n := it.res.N
	if n < 3 {
		it.sizeMissing()
		if z, err := convert.TwoSided(readingLevel, convert.Normal); err == nil && it.lopside == nil && it.halfWidth() > 0 && it.est != nil {
			it.offer(Alternative{Name: "as a 95% interval", Mean: number(it.est.Value), SE: number(it.halfWidth() / z), Note: "SE by z; the other readings need n"})
		}
		return
	}
	if it.outsideInterval() || it.est == nil {
		return
	}
	if it.lopside == nil && it.halfWidth() > 0 {
		if sd, err := convert.SDFromInterval(-it.halfWidth(), it.halfWidth(), readingLevel, n, float64(n-1)); err == nil {
			factor := sd / it.halfWidth()
			it.offer(Alternative{Name: "as a 95% interval of a mean", Mean: number(it.est.Value), SD: number(sd), Low: down(it.margin.Low * factor), High: up(it.margin.High * factor)})
		}
	} else {
		it.offer(Alternative{Name: "as a 95% interval of a mean", Struck: true, Note: "impossible: not symmetric about the estimate, even allowing for rounding"})
	}
	low, high := it.bounds()
	it.offerQuantiles(low, high, n)
}

func (it *item) stepReadings(sds [3]float64, n int) {
	x := it.res.GivenValue
	t := sds[convert.AsSE] / sds[convert.AsHalfWidth]
	it.step("as an SD: %s", x)
	it.step("as an SE: SD = %s·√%d = %s", x, n, short(sds[convert.AsSE]))
	it.step("as the half-width of a 95%% interval: SD = %s·√%d/%s = %s", x, n, short(t), short(sds[convert.AsHalfWidth]))
}

// strikeReadings gives for each reading why it is impossible, or "". Everything is
// taken at the end of the rounding that favours the reading.
func (it *item) strikeReadings(sds [3]float64) (why [3]string) {
	if it.est == nil {
		return why
	}
	n := it.res.N
	for r, sd := range sds {
		factor := sd / it.val.Value
		least, greatest := math.Max(it.val.Low(), 0)*factor, it.val.High()*factor
		switch {
		case it.tooWide(least, n):
			why[r] = fmt.Sprintf("impossible: an SD of %s or more does not fit on the scale from %s to %s with mean %s", short(least), it.res.Evidence.ScaleLow, it.res.Evidence.ScaleHigh, it.res.Estimate)
		case it.negative(least, n):
			why[r] = fmt.Sprintf("impossible: values of %s or more with mean %s have an SD of at most mean·√n", it.res.Evidence.ScaleLow, it.res.Estimate)
		case it.rangeRefutes(least, greatest, n) != "":
			why[r] = it.rangeRefutes(least, greatest, n)
		}
	}
	if !it.res.Evidence.Integer {
		return why
	}
	// What whole numbers can have hangs on n and on the mean: neither may be in doubt.
	if _, no := meanImpossible(it); no || it.res.NFrom == result.NElsewhere {
		it.note("the readings are not held against what whole numbers can have: n or the mean is in doubt")
		return why
	}
	fits, scale := it.attainable(sds)
	for r, fit := range fits {
		if why[r] == "" && !fit {
			why[r] = fmt.Sprintf("impossible: no %d whole numbers%s have this mean and SD", n, scale)
		}
	}
	return why
}

// scale gives the printed limits of the outcome's scale; for a change from minus
// to plus its width.
func (it *item) scale() (low, high float64, ok bool) {
	a, b := read(it.res.Evidence.ScaleLow), read(it.res.Evidence.ScaleHigh)
	if a == nil || b == nil || a.Value >= b.Value {
		return 0, 0, false
	}
	if it.res.Statistic == result.MeanChange || it.res.Statistic == result.MeanDifference {
		return a.Value - b.Value, b.Value - a.Value, true
	}
	return a.Value, b.Value, true
}

func (it *item) tooWide(sd float64, n int) bool {
	low, high, ok := it.scale()
	if !ok || it.est.High() < low || it.est.Low() > high {
		return false
	}
	// The greatest possible SD over the rounding of the mean lies nearest the middle.
	mean := math.Min(math.Max((low+high)/2, it.est.Low()), it.est.High())
	most, err := convert.GreatestSD(math.Min(math.Max(mean, low), high), low, high, n)
	return err == nil && sd > most*(1+1e-12)
}

// negative reports an SD that values with a lower limit only cannot have.
func (it *item) negative(sd float64, n int) bool {
	low := read(it.res.Evidence.ScaleLow)
	if low == nil || it.res.Statistic != result.Mean || it.est.High() < low.Value {
		return false
	}
	return sd > (it.est.High()-low.Value)*math.Sqrt(float64(n))*(1+1e-12)
}

// rangeRefutes compares with minimum and maximum printed beside.
func (it *item) rangeRefutes(least, greatest float64, n int) string {
	for _, m := range it.mates {
		if m.res.GivenAs != result.Range || !m.interval() || n < 3 {
			continue
		}
		a, b := m.bounds()
		if it.est.Low() < a.Value || it.est.High() > b.Value {
			continue
		}
		bounds, err := convert.SDBoundsFromRange(b.High()-a.Low(), n)
		if err != nil {
			continue
		}
		if least > bounds.High {
			return fmt.Sprintf("impossible: with a range of %s to %s the SD is at most %s", m.res.Lower, m.res.Upper, short(bounds.High))
		}
		inner, err := convert.SDBoundsFromRange(math.Max(b.Low()-a.High(), 1e-12), n)
		if err == nil && greatest < inner.Low {
			return fmt.Sprintf("impossible: with a range of %s to %s the SD is at least %s", m.res.Lower, m.res.Upper, short(inner.Low))
		}
	}
	return ""
}

// attainable asks which readings whole numbers can have: on the printed scale
// exactly, without one by the necessary condition.
func (it *item) attainable(sds [3]float64) (fits [3]bool, scale string) {
	n := it.res.N
	if low, high, ok := it.scale(); ok && low == math.Trunc(low) && high == math.Trunc(high) && math.Abs(low) < 1e6 && math.Abs(high) < 1e6 {
		fits, err := convert.AttainableOnScale(*it.est, *it.val, n, int(low), int(high), readingLevel)
		if err == nil {
			return fits, fmt.Sprintf(" from %s to %s", short(low), short(high))
		}
	}
	for r, sd := range sds {
		factor := sd / it.val.Value
		ok, err := convert.SDAttainable(*it.est, convert.Range{Low: math.Max(it.val.Low(), 0) * factor, High: it.val.High() * factor}, n)
		fits[r] = err != nil || ok
	}
	return fits, ""
}

// supportReading names the reading that the paper's own p value or interval of the
// difference fits: only where a t test is stated, the row compares exactly two arms
// in this form, and exactly one reading fits. It is never applied.
func supportReading(row []*item) {
	pair, difference := comparedArms(row)
	if len(pair) != 2 {
		return
	}
	a, b := pair[0], pair[1]
	stated := func(x *item) bool { return slices.Contains(x.res.Evidence.Tests, "t test") }
	if !stated(a) && !stated(b) {
		return
	}
	fits, evidence, ok := fittingByP(a, b)
	if !ok && difference != nil {
		fits, evidence, ok = fittingByInterval(a, b, difference)
	}
	if !ok {
		return
	}
	fitting, count := 0, 0
	for r, fit := range fits {
		if fit {
			fitting = r
			count++
		}
	}
	for _, it := range pair {
		switch count {
		case 0:
			it.raise("no-reading-fits", evidence+" fits no reading of the ± by a t test")
		case 1:
			it.note("%s fits only the reading %s, by a t test of the two arms; it is not applied", evidence, readingNames[fitting])
		}
	}
}

// comparedArms finds the two arms of a row with an unexplained spread, at one time,
// and the row's difference with its interval, if it has one.
func comparedArms(row []*item) (pair []*item, difference *item) {
	for _, it := range row {
		switch {
		case it.res.GivenAs == result.Unstated && it.res.Statistic == result.Mean && it.est != nil && it.val != nil && it.res.N > 1:
			pair = append(pair, it)
		case it.res.GivenAs == result.CI && it.res.Statistic == result.MeanDifference && it.res.Level > 0 && it.lopside == nil && it.margin.High > 0:
			difference = it
		}
	}
	if len(pair) != 2 || pair[0].res.Arm == pair[1].res.Arm || pair[0].res.Time != pair[1].res.Time || pair[0].res.Outcome != pair[1].res.Outcome {
		return nil, nil
	}
	return pair, difference
}

func fittingByP(a, b *item) (fits [3]bool, evidence string, ok bool) {
	printed := rowP(a, b)
	p, err := convert.ReadP(printed)
	if printed == "" || err != nil {
		return fits, "", false
	}
	arm := func(x *item) convert.PrintedArm {
		return convert.PrintedArm{Mean: *x.est, Spread: *x.val, N: x.res.N}
	}
	ranges, err := convert.PUnderReadings(arm(a), arm(b), readingLevel)
	if err != nil {
		return fits, "", false
	}
	for r, q := range ranges {
		fits[r] = q.Meets(p.Range)
	}
	return fits, "the paper's p value " + printed, true
}

// fittingByInterval compares the SE behind the interval of the difference with the
// one that each reading gives; it works where the difference is near 0 too.
func fittingByInterval(a, b, difference *item) (fits [3]bool, evidence string, ok bool) {
	t, err := convert.TwoSided(difference.res.Level, float64(a.res.N+b.res.N-2))
	if err != nil {
		return fits, "", false
	}
	se := difference.margin.Times(1 / t)
	for r := range fits {
		span := convert.Range{Low: math.Inf(1)}
		for _, side := range []float64{-1, 1} {
			var g [2]convert.Group
			for i, x := range []*item{a, b} {
				spread := x.val.Value + side*x.val.Half
				sds, err := convert.SDsOfReadings(spread, x.res.N, readingLevel)
				if err != nil {
					return fits, "", false
				}
				g[i] = convert.Group{N: x.res.N, SD: sds[r]}
			}
			for _, test := range []func(convert.Group, convert.Group, float64) (convert.Comparison, error){convert.Pooled, convert.Welch} {
				c, err := test(g[0], g[1], difference.res.Level)
				if err != nil {
					return fits, "", false
				}
				span.Low, span.High = math.Min(span.Low, c.SE), math.Max(span.High, c.SE)
			}
		}
		fits[r] = se.Meets(span)
	}
	return fits, fmt.Sprintf("the interval of the difference, %s to %s,", difference.res.Lower, difference.res.Upper), true
}

func rowP(items ...*item) string {
	for _, it := range items {
		if it.res.Evidence.RowP != "" {
			return it.res.Evidence.RowP
		}
		if it.res.P != "" {
			return it.res.P
		}
	}
	return ""
}
