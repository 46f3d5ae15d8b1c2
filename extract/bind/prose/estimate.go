package prose

import (
	"math"
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/result"
)

// farthest is how many bytes before its spread an estimate may stand.
const farthest = 260

// estimate finds the number that the candidate's spread is about. Of the
// numbers before it in the sentence the one wins that lies within the bounds,
// stands near, and has the bounds' decimals; numbers of a time or a count stand
// back. Where none fits, a number directly before is taken with a flag: papers
// misprint. Where none stands before, one behind it in the bracket may.
func (p *para) estimate(c *cand) {
	it := &p.r.Items[c.item]
	from, _ := p.sentence(it.Start)
	best, cost := -1, 8.0
	rank := 0
	var number grammar.Number
	for k := c.item - 1; k >= 0 && rank < 6; k-- {
		e := &p.r.Items[k]
		if e.Start < from || it.Start-e.Start > farthest {
			break
		}
		n, ok := p.estimable(k)
		if !ok {
			continue
		}
		w := 1.3*float64(rank) + p.misfit(c, n) + p.aside(k, c.item) + timeLike(p, k) + float64(max(0, it.Start-n.End-60))/60
		if w < cost {
			best, cost, number = k, w, n
		}
		if !p.closedBefore(k, c.item) {
			rank++
		}
	}
	if best >= 0 {
		c.est, c.estItem = number, best
		p.note(c)
		return
	}
	p.estimateBehind(c)
}

// estimable gives the number of an item that can be an estimate.
func (p *para) estimable(k int) (grammar.Number, bool) {
	e := &p.r.Items[k]
	switch {
	case p.used[k]:
		return grammar.Number{}, false
	case e.Kind == grammar.KindNumber:
		return e.Value, e.Value.Value != "" && !e.Alone || e.Alone && !p.looksCited(k)
	case e.Kind == grammar.KindPlusMinus && !e.Of.IsZero():
		return e.Of, true
	}
	return grammar.Number{}, false
}

// looksCited reports a whole number alone in square brackets.
func (p *para) looksCited(k int) bool {
	e := &p.r.Items[k]
	return e.Bracket > 0 && p.r.Brackets[e.Bracket-1].Open == '[' && !strings.Contains(e.Value.Value, ".")
}

// misfit weighs how badly number n fits the candidate's spread.
func (p *para) misfit(c *cand, n grammar.Number) float64 {
	e, ok := n.Float()
	if !ok {
		return 9
	}
	w := 0.0
	if c.value.Value != "" {
		if n.Rel != "" {
			w += 4
		}
		if whole(n.Value) && decimals(c.value.Value) > 1 {
			w += 0.7
		}
		return w
	}
	if n.Rel != "" {
		w += 3
	}
	if decimals(n.Value) < max(decimals(c.lower.Value), decimals(c.upper.Value)) {
		w += 0.8
	}
	switch p.within(c, e) {
	case inside:
	case flipped:
		w += 2.5
	case scaled:
		w += 3
	case outside:
		w += 9
		switch {
		case p.gap(c, n) && n.Percent && c.lower.Percent && p.r.Items[c.item].Bracket > 0:
			w = 1 // "7.8% (95% CI 68.4% to 87.2%)": a slip, kept as printed
		case p.gap(c, n):
			w -= 6
		}
	}
	return w
}

type fit uint8

const (
	inside fit = iota
	flipped
	scaled
	outside
)

// within says how value e lies to the bounds; an open bound holds everything on
// its side.
func (p *para) within(c *cand, e float64) fit {
	lo, okLo := c.lower.Float()
	hi, okHi := c.upper.Float()
	if !okLo {
		lo = math.Inf(-1)
	}
	if !okHi {
		hi = math.Inf(1)
	}
	if lo > hi {
		lo, hi = hi, lo
	}
	slack := 1e-9
	in := func(v float64) bool { return v >= lo-slack && v <= hi+slack }
	switch {
	case in(e):
		return inside
	case in(-e):
		return flipped
	case math.Abs(e) > 1 && in(e/100) && lo >= 0 && hi <= 1, math.Abs(e) < 1 && in(e*100) && lo >= 0 && hi > 1 && hi <= 100:
		return scaled
	}
	return outside
}

// gap reports that the spread follows the number at once: only a unit, a
// bracket, a comma and the interval's own words stand between.
func (p *para) gap(c *cand, n grammar.Number) bool {
	it := &p.r.Items[c.item]
	if n.End > it.Start {
		return false
	}
	between := strings.Trim(p.s[n.End:it.Start], " ,;:([%\u00a0\u2009=")
	return len(between) <= 12 && !strings.ContainsAny(between, "0123456789)]") && len(strings.Fields(between)) <= 2
}

// nextTo reports that the estimate stands directly before the bracket.
func (p *para) nextTo(c *cand) bool { return p.gap(c, c.est) }

// aside weighs an item in a bracket that was closed before the spread.
func (p *para) aside(k, spread int) float64 {
	if p.closedBefore(k, spread) {
		return 3
	}
	return 0
}

// closedBefore reports that item k stands in a bracket that is closed before
// item j begins.
func (p *para) closedBefore(k, j int) bool {
	b := p.r.Items[k].Bracket
	return b > 0 && p.r.Brackets[b-1].End <= p.r.Items[j].Start
}

var timeUnits = map[string]bool{
	"week": true, "weeks": true, "day": true, "days": true, "month": true, "months": true, "year": true, "years": true,
	"hour": true, "hours": true, "h": true, "min": true, "minutes": true, "wk": true, "wks": true, "mo": true, "yr": true, "yrs": true,
}

var beforeTime = map[string]bool{
	"at": true, "after": true, "week": true, "weeks": true, "day": true, "days": true, "month": true, "months": true, "year": true, "within": true, "over": true,
	"for": true, "visit": true, "table": true, "figure": true, "fig": true, "grade": true, "stage": true, "phase": true, "group": true,
	"than": true, "every": true, "hour": true, "version": true, "aged": true, "model": true, "type": true, "last": true, "first": true, "during": true,
}

// timeLike weighs a number that names a time, a table or a group.
func timeLike(p *para, k int) float64 {
	e := &p.r.Items[k]
	i := p.token(e.Start)
	w := 0.0
	if i > 0 && beforeTime[p.r.Tokens[i-1].Value] {
		switch p.r.Tokens[i-1].Value {
		case "week", "weeks", "day", "days", "month", "months", "year", "visit", "table", "figure", "fig", "grade", "stage", "phase", "hour", "version", "model", "type":
			w += 5
		case "at", "after", "within", "over", "for", "during", "last", "first", "every", "aged":
			if j := p.token(e.End); j < len(p.r.Tokens) && (timeUnits[p.r.Tokens[j].Value] || p.r.Tokens[j].Kind == grammar.TokDash) {
				w += 4
			}
		case "than":
			w += 1
		}
	}
	if j := p.token(e.End); j < len(p.r.Tokens) {
		t := p.r.Tokens[j]
		if t.Kind == grammar.TokDash && !t.Spaced && j+1 < len(p.r.Tokens) && p.r.Tokens[j+1].Kind == grammar.TokWord && !p.r.Tokens[j+1].Spaced {
			w += 3 // 12-week
		}
	}
	return w
}

// token gives the index of the first token that starts at or behind byte b.
func (p *para) token(b int) int {
	lo, hi := 0, len(p.r.Tokens)
	for lo < hi {
		mid := (lo + hi) / 2
		if p.r.Tokens[mid].Start < b {
			lo = mid + 1
		} else {
			hi = mid
		}
	}
	return lo
}

// note flags what is odd about an estimate that was taken all the same.
func (p *para) note(c *cand) {
	e, ok := c.est.Float()
	if !ok || c.value.Value != "" {
		return
	}
	switch p.within(c, e) {
	case flipped:
		c.flags = append(c.flags, result.Flag{Name: "sign-differs", Detail: "the estimate has the other sign than its bounds"})
	case scaled:
		c.flags = append(c.flags, result.Flag{Name: "scale-differs", Detail: "the estimate fits its bounds only as a percentage"})
	case outside:
		c.flags = append(c.flags, result.Flag{Name: "estimate-outside", Detail: "the estimate lies outside its bounds, as printed"})
	}
}

// estimateBehind looks for an estimate printed after its interval: "(95% CI
// 0.92 to 2.76; mean difference 1.84 kg)", "ranged from 6 to 21 d, with a mean
// of 12". A statistic's name must introduce it.
func (p *para) estimateBehind(c *cand) {
	it := &p.r.Items[c.item]
	_, to := p.sentence(it.Start)
	named := false
	for k := c.item + 1; k < len(p.r.Items) && k < c.item+6; k++ {
		e := &p.r.Items[k]
		if e.Start >= to || e.Start-it.End > 120 {
			return
		}
		switch {
		case e.Kind == grammar.KindTerm && e.Statistic != "":
			named = true
			continue
		case e.Kind == grammar.KindInterval || e.Kind == grammar.KindSpread:
			return
		}
		n, ok := e.Value, e.Kind == grammar.KindNumber && e.Value.Value != ""
		if e.Kind == grammar.KindPlusMinus && !e.Of.IsZero() {
			n, ok = e.Of, true
		}
		if !ok {
			continue
		}
		f, ok := n.Float()
		if !named || !ok || c.value.Value != "" || p.within(c, f) != inside || it.Bracket > 0 && e.Bracket != it.Bracket {
			return
		}
		c.est, c.estItem = n, k
		return
	}
}

func whole(v string) bool { return v != "" && !strings.ContainsAny(v, ".e") }

// decimals counts the printed decimals.
func decimals(v string) int {
	_, frac, _ := strings.Cut(v, ".")
	return len(frac)
}
