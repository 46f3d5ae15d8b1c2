package working

import (
	"fmt"
	"math"

	"halfspan/convert"
	"halfspan/extract/result"
)

// check is one cause to look: the flag it raises and when.
type check struct {
	flag  string
	found func(*item) (detail string, yes bool)
}

// run raises the flags of the checks that find something.
func run(list []check, it *item) {
	for _, c := range list {
		if detail, yes := c.found(it); yes {
			it.raise(c.flag, detail)
		}
	}
}

// checksOfReading look at what was read, before anything is worked out.
func checksOfReading() []check {
	return []check{
		{"bounds-reversed", func(it *item) (string, bool) {
			return fmt.Sprintf("%s stands before %s", it.res.Lower, it.res.Upper), it.swapped
		}},
		{"sign-flip", func(it *item) (string, bool) {
			return fmt.Sprintf("%s lies in the interval only with the other sign", it.res.Estimate), it.flipped
		}},
		{"estimate-outside", func(it *item) (string, bool) {
			return fmt.Sprintf("%s is not between %s and %s", it.res.Estimate, it.res.Lower, it.res.Upper), it.outsideInterval()
		}},
		{"asymmetric-interval", func(it *item) (string, bool) {
			return "not symmetric about the estimate, even allowing for rounding",
				it.lopside != nil && it.res.GivenAs == result.CI && plainScale(it) && it.interval() && it.est != nil && !it.outsideInterval()
		}},
		{"barely-symmetric", func(it *item) (string, bool) {
			return "all three numbers would have to be rounded from the middle", it.tied && it.res.GivenAs == result.CI && plainScale(it)
		}},
		{"decimal-slip", decimalSlip},
		{"n-elsewhere", func(it *item) (string, bool) {
			return "n was read away from the result", it.res.N > 0 && it.res.NFrom == result.NElsewhere
		}},
		{"n-randomised", func(it *item) (string, bool) {
			return "n counts those randomised; fewer may have been analysed", it.res.N > 0 && it.res.NKind == result.NRandomised
		}},
		{"small-n", func(it *item) (string, bool) {
			return fmt.Sprintf("n is %d", it.res.N), it.res.N > 0 && it.res.N < 5
		}},
		{"quoted", func(it *item) (string, bool) {
			return "seems to quote another study or to repeat", it.res.Evidence.Quoted
		}},
		{"repaired", func(it *item) (string, bool) {
			if len(it.res.Evidence.Repairs) == 0 {
				return "", false
			}
			return it.res.Evidence.Repairs[0], true
		}},
		{"adjusted-baseline", func(it *item) (string, bool) {
			return "a baseline value is called adjusted: the word may belong to other columns",
				it.res.Evidence.Baseline && it.res.Adjusted == "yes" && isStatistic(result.Mean, result.MeanChange)(it)
		}},
		{"count-data", func(it *item) (string, bool) {
			return "", it.res.Evidence.Integer
		}},
		{"mean-impossible", meanImpossible},
	}
}

// plainScale reports that an interval of this statistic is expected to be symmetric
// as printed.
func plainScale(it *item) bool {
	return isStatistic(result.Mean, result.MeanChange, result.MeanDifference, result.RiskDifference, result.Coefficient)(it)
}

// checksOfWorking look at what was worked out.
func checksOfWorking() []check {
	return []check{
		{"coarse-digits", func(it *item) (string, bool) {
			rec := it.rec()
			if rec.SD == nil || rec.SDLow == nil || rec.SDHigh == nil || *rec.SD <= 0 {
				return "", false
			}
			open := 100 * float64(*rec.SDHigh-*rec.SDLow) / float64(*rec.SD)
			return fmt.Sprintf("the digits leave the SD open from %s to %s (%.0f%%)", short(float64(*rec.SDLow)), short(float64(*rec.SDHigh)), open), open > 10
		}},
		{"skewed", func(it *item) (string, bool) {
			rec := it.rec()
			if rec.SD == nil || rec.SDLow == nil || it.est == nil || it.res.Statistic != result.Mean || it.est.Low() <= 0 {
				return "", false
			}
			low := float64(*rec.SDLow)
			strong := ""
			if it.est.High() < low {
				strong = ", strongly"
			}
			return fmt.Sprintf("mean %s with an SD of %s: skewed%s, if the values cannot be negative; this does not touch the SD", it.res.Estimate, short(float64(*rec.SD)), strong),
				it.est.High() < 2*low
		}},
		{"large-converted-sd", func(it *item) (string, bool) {
			rec := it.rec()
			if rec.Use != useConverted || it.est == nil || it.res.Statistic != result.Mean || it.est.Low() <= 0 {
				return "", false
			}
			return fmt.Sprintf("an SD of %s worked out beside a mean of %s", short(float64(*rec.SD)), it.res.Estimate),
				it.est.High() < 2*float64(*rec.SDLow)
		}},
		{"sd-impossible", func(it *item) (string, bool) {
			rec := it.rec()
			if rec.SDLow == nil || it.est == nil || it.res.N < 2 {
				return "", false
			}
			low := float64(*rec.SDLow)
			return fmt.Sprintf("an SD of %s with mean %s and n %d", short(float64(*rec.SD)), it.res.Estimate, it.res.N),
				it.tooWide(low, it.res.N) || it.negative(low, it.res.N)
		}},
	}
}

func (it *item) outsideInterval() bool {
	if !it.interval() || it.est == nil || it.flipped {
		return false
	}
	low, high := it.bounds()
	return outside(*it.est, low, high)
}

// decimalSlip looks for a bound that lost its decimal point: a whole number beside
// an estimate and a bound with the same decimals, far away from both.
func decimalSlip(it *item) (string, bool) {
	if !it.interval() || it.est == nil || it.res.GivenAs != result.CI || it.lopside == nil {
		return "", false
	}
	low, high := it.bounds()
	if low.Half == high.Half {
		return "", false
	}
	near, far := math.Abs(it.est.Value-low.Value), math.Abs(high.Value-it.est.Value)
	if near > far {
		near, far = far, near
	}
	return fmt.Sprintf("%s and %s have different decimals and lie at very different distances", it.res.Lower, it.res.Upper), far > 8*near
}

// meanImpossible asks whether whole numbers can have the printed mean.
func meanImpossible(it *item) (string, bool) {
	if !it.res.Evidence.Integer || it.est == nil || it.res.N < 1 || it.res.Statistic != result.Mean {
		return "", false
	}
	ok, err := convert.MeanAttainable(*it.est, it.res.N, 1)
	return fmt.Sprintf("no %d whole numbers have the mean %s", it.res.N, it.res.Estimate), err == nil && !ok
}
