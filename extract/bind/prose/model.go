package prose

import (
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// setAdjusted says whether a mean or difference is adjusted: by the words of
// its sentence, else left open where the methods speak of a model that such
// intervals come from.
func (p *para) setAdjusted(r *result.Result, s string) {
	switch r.Statistic {
	case result.Mean, result.MeanChange, result.MeanDifference, result.GeometricMean:
	default:
		return
	}
	switch {
	case len(r.Evidence.Model) > 0:
		r.Adjusted = "yes"
		return
	case plainWords.MatchString(s):
		r.Adjusted = "no"
		return
	}
	if r.GivenAs != result.SD {
		for _, d := range p.f.back.Designs {
			addOnce(&r.Evidence.Design, d)
		}
	}
	m := p.f.back.Model
	if r.GivenAs == result.SE || r.GivenAs == result.Unstated {
		m = p.f.back.LeastMeans
	}
	if m == nil || r.GivenAs == result.SD {
		return
	}
	r.Adjusted = "unclear"
	r.Sources = append(r.Sources, m.Source("adjusted"))
}

var plainWords = pattern.MustCompile(`(?i)\bunadjusted\b|\bcrude\b|\braw means?\b|\bobserved means?\b`)
