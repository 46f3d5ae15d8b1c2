package table

import "halfspan/extract/result"

// onlyLater gives adjusted means and differences that name no time the one later
// time of their table, where it has a baseline and nothing else: an adjustment for
// baseline is of what came after it. It is an inference, and flagged as one.
func onlyLater(rs []result.Result) {
	var later *result.Result
	start := false
	for i := range rs {
		r := &rs[i]
		switch {
		case r.Time == "":
		case atBaseline(&context{time: r.Time}):
			start = true
		case r.Statistic == result.MeanChange || later != nil && later.Time != r.Time:
			return
		default:
			later = r
		}
	}
	if later == nil || !start {
		return
	}
	for i := range rs {
		r := &rs[i]
		if r.Time != "" || r.Adjusted != "yes" || r.Statistic != result.Mean && r.Statistic != result.MeanDifference {
			continue
		}
		r.Time = later.Time
		for _, s := range later.Sources {
			if s.Field == "time" {
				r.Sources = append(r.Sources, s)
			}
		}
		r.Raise(FlagTimeUnclear, "the only time after baseline that the table names")
	}
}
