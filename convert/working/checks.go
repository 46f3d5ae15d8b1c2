package working

import (
	"fmt"

	"halfspan/extract/result"
)

// examine raises the flags that one result by itself gives cause for.
func examine(it *item) {
	for _, c := range checks() {
		if detail, yes := c.found(it); yes {
			it.raise(c.flag, detail)
		}
	}
}

// check is one cause to look: the flag it raises and when.
type check struct {
	flag  string
	found func(*item) (detail string, yes bool)
}

func checks() []check {
	return []check{
		{"bounds-descending", func(it *item) (string, bool) {
			return fmt.Sprintf("%s stands before %s", it.res.Lower, it.res.Upper), it.swapped
		}},
		{"sign-flip", func(it *item) (string, bool) {
			return fmt.Sprintf("%s lies in the interval only with the other sign", it.res.Estimate), it.flipped
		}},
		{"estimate-outside", func(it *item) (string, bool) {
			if !it.interval() || it.est == nil || it.flipped {
				return "", false
			}
			low, high := it.bounds()
			return fmt.Sprintf("%s is not between %s and %s", it.res.Estimate, it.res.Lower, it.res.Upper), outside(*it.est, low, high)
		}},
		{"asymmetric-interval", func(it *item) (string, bool) {
			plain := isStatistic(result.Mean, result.MeanChange, result.MeanDifference, result.RiskDifference, result.Coefficient)
			return "not symmetric about the estimate, even allowing for rounding",
				it.lopside != nil && it.res.GivenAs == result.CI && plain(it) && it.interval()
		}},
		{"n-from-elsewhere", func(it *item) (string, bool) {
			return "n was read away from the result", it.res.N > 0 && it.res.NFrom == result.NElsewhere
		}},
		{"n-kind-unclear", func(it *item) (string, bool) {
			return "whether n counts those analysed is not said", it.res.N > 0 && it.res.NKind == result.NUnclear
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
		{"repaired-characters", func(it *item) (string, bool) {
			if len(it.res.Evidence.Repairs) == 0 {
				return "", false
			}
			return it.res.Evidence.Repairs[0], true
		}},
	}
}

// compare raises the flags that results give cause for together.
func compare(items []*item) {}
