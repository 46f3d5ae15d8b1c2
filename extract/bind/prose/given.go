package prose

import (
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

// byConvention explains a bare bracketed interval by what the paper declares
// for its statistic; a named ratio or difference without a declaration is read
// as a confidence interval, with a flag.
func (p *para) byConvention(k int, c *cand) bool {
	st := p.statistic(c)
	if st.at == (grammar.Span{}) {
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
	if st.statistic == result.Ratio && c.est.Start-st.at.End < 30 {
		c.given = result.CI
		c.flags = append(c.flags, result.Flag{Name: "interval-unnamed", Detail: "nothing says that these bounds are a confidence interval"})
		return true
	}
	return false
}

// repeats settles what an unexplained ± means where the same paper prints the
// same two numbers elsewhere with a word for the spread: "56 ± 6" in the results
// is the abstract's "56 (SD 6)".
func (f *finder) repeats() {
	for i := range f.out {
		r := &f.out[i]
		if r.GivenAs != result.Unstated {
			continue
		}
		for j := range f.out {
			o := &f.out[j]
			if o.Estimate != r.Estimate || o.GivenValue != r.GivenValue || o.GivenAs != result.SD && o.GivenAs != result.SE {
				continue
			}
			for _, s := range o.Sources {
				if s.Field == "given_as" {
					s.From = "the same numbers elsewhere in the text"
					r.GivenAs = o.GivenAs
					r.Sources = append(r.Sources, s)
					break
				}
			}
			break
		}
	}
}
