package prose

import (
	"math"

	"halfspan/extract/bind/convention"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// conventionSource is the paper's own statement that explained a spread.
type conventionSource struct {
	convention.Statement
}

func zoneName(s convention.Statement) string {
	switch {
	case s.Scope == convention.Figures:
		return "a figure's caption"
	case s.Zone == paper.Methods:
		return "the methods"
	}
	return "elsewhere in the text"
}

// signConvention looks a bare ± up in the paper's conventions; unstated where
// the paper never says.
func (p *para) signConvention(c *cand) {
	scope := convention.Prose
	if p.block.Kind == paper.Caption {
		scope = convention.Figures
	}
	a, ok := p.f.conv.PlusMinus(scope)
	if !ok {
		c.given = result.Unstated
		return
	}
	c.given = a.Spread
	c.conv = &conventionSource{a.Statement}
	if a.Conflict {
		c.flags = append(c.flags, result.Flag{Name: "conventions-differ", Detail: "the paper declares more than one meaning of its spreads"})
	}
}

// ratioLike reports positive bounds with decimals.
func (p *para) ratioLike(c *cand) bool {
	lo, ok := c.lower.Float()
	return ok && lo > 0 && decimals(c.lower.Value) > 0 && decimals(c.upper.Value) > 0 && c.est.Start-p.statistic(c).at.End < 250
}

// evenly reports that the estimate stands in the middle of its bounds, on the
// raw or on the logarithmic scale, as closely as the printed digits can tell:
// so stand the bounds of a confidence interval, hardly those of anything else.
// Only numbers with decimals can tell.
func (p *para) evenly(c *cand) bool {
	e, ok1 := c.est.Float()
	lo, ok2 := c.lower.Float()
	hi, ok3 := c.upper.Float()
	d := min(decimals(c.est.Value), decimals(c.lower.Value), decimals(c.upper.Value))
	if !ok1 || !ok2 || !ok3 || d < 1 || lo >= hi || p.block.Zone == paper.Methods || p.block.Zone == paper.Introduction {
		return false
	}
	half := 0.5 * math.Pow(10, -float64(d))
	if hi-lo < 12*half {
		return false // too few digits to tell
	}
	if math.Abs((lo+hi)/2-e) <= 2*half {
		return true
	}
	if lo <= half || e <= 2*half {
		return false
	}
	low := math.Sqrt((lo - half) * (hi - half))
	high := math.Sqrt((lo + half) * (hi + half))
	return e >= low-half && e <= high+half
}

// byConvention explains a bare bracketed interval by what the paper declares
// for its statistic; a named ratio or difference without a declaration is read
// as a confidence interval, with a flag.
func (p *para) byConvention(k int, c *cand) bool {
	st := p.statistic(c)
	if st.at == (grammar.Span{}) && !p.evenly(c) {
		return false
	}
	scope := convention.Prose
	if p.block.Kind == paper.Caption {
		scope = convention.Figures
	}
	if a, ok := p.f.conv.Bounds(scope, st.statistic); ok {
		c.given, c.conv = a.Spread, &conventionSource{a.Statement}
		return true
	}
	_, known := p.f.conv.Level()
	if st.statistic == result.Ratio && known && p.ratioLike(c) || p.evenly(c) && known {
		c.given = result.CI
		c.flags = append(c.flags, result.Flag{Name: "interval-unnamed", Detail: "nothing says that these bounds are a confidence interval"})
		return true
	}
	return false
}

// repeats settles what an unexplained ± means where the same paper prints the
// same two numbers elsewhere with a word for the spread: "34 ± 5" in the results
// is the abstract's "34 (SD 5)".
func (f *finder) repeats() {
	type pair struct{ estimate, value string }
	explained := map[pair]result.Source{}
	kind := map[pair]result.GivenAs{}
	for i := range f.out {
		r := &f.out[i]
		k := pair{r.Estimate, r.GivenValue}
		if r.GivenAs != result.SD && r.GivenAs != result.SE || kind[k] != "" {
			continue
		}
		for _, s := range r.Sources {
			if s.Field == "given_as" {
				s.From = "the same numbers elsewhere in the text"
				explained[k], kind[k] = s, r.GivenAs
				break
			}
		}
	}
	for i := range f.out {
		r := &f.out[i]
		k := pair{r.Estimate, r.GivenValue}
		if r.GivenAs == result.Unstated && kind[k] != "" {
			r.GivenAs = kind[k]
			r.Sources = append(r.Sources, explained[k])
		}
	}
}
