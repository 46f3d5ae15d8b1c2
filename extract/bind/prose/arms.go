package prose

import (
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// between reports that the result compares two arms.
func between(r *result.Result) bool {
	switch r.Statistic {
	case result.MeanDifference, result.RiskDifference, result.Ratio:
		return true
	}
	return false
}

// setArms names the arm, or the two arms of a comparison.
func (p *para) setArms(r *result.Result, c *cand) {
	it := &p.r.Items[c.item]
	from, to := p.sentence(it.Start)
	all := p.mentions(from, to)
	if len(all) == 0 {
		return
	}
	if between(r) {
		if m, ok := p.oneEach(c, all, from, to); ok {
			p.setArm(r, "arm", m)
			return
		}
		if a, b, ok := p.twoArms(c, all, from); ok {
			p.setArm(r, "arm", a)
			p.setArm(r, "arm2", b)
		}
		return
	}
	if m, ok := p.armOf(c, all, from, to); ok {
		p.setArm(r, "arm", m)
	}
}

// oneEach gives the arm of a comparison that the sentence lists for one arm after
// the other: "1.2 kg and 0.9 kg less than the controls with syrup and pollen,
// respectively"; and of one whose contrast is in its name, "a water-corrected mass
// of 1.2 kg with syrup".
func (p *para) oneEach(c *cand, all []mention, from, to int) (mention, bool) {
	units, at := p.unitsOf(c, from, to)
	if at < 0 || len(units) < 2 {
		return mention{}, false
	}
	for _, m := range all {
		if against.MatchString(p.s[from:m.start]) {
			return mention{}, false // "higher with syrup than with water by 1.2 and 0.9 kg, respectively"
		}
	}
	if p.says(c.est.Start, inOrder) {
		return p.byOrder(units, at, all)
	}
	if doubled.MatchString(p.s[from:units[0].start]) {
		return p.justBehind(units[at], all)
	}
	return mention{}, false
}

func (p *para) setArm(r *result.Result, field string, m mention) {
	text := p.s[m.start:m.end]
	if n, name := &r.N, "n"; field == "arm" && r.N == 0 || field == "arm2" && r.N2 == 0 {
		if field == "arm2" {
			n, name = &r.N2, "n2"
		}
		if s, ok := p.besideName(m); ok {
			*n = s.n
			if name == "n" {
				r.NFrom, r.NKind = result.NBeside, result.NUnclear
			}
			p.source(r, name, s.at)
		} else if s, ok := p.f.cast.sized(m.arm, ask(r)); ok && sizeTold(r) && p.wholeArm(m) {
			p.elsewhere(r, name, n, s)
		}
	}
	if field == "arm" {
		r.Arm = text
	} else {
		r.Arm2 = text
	}
	p.source(r, field, grammar.Span{Start: m.start, End: m.end})
}

// sizeTold reports whether an arm's size, stated elsewhere, is the n behind the
// result: coefficients and rates have their own.
func sizeTold(r *result.Result) bool {
	switch r.Statistic {
	case result.Coefficient, result.Rate, result.Other, "":
		return false
	}
	return !r.Evidence.Quoted && !doses.MatchString(r.Outcome)
}

var doses = pattern.MustCompile(`(?i)\bdoses? of\b`)

func ask(r *result.Result) asked {
	q := asked{baseline: r.Evidence.Baseline || startTime.MatchString(r.Time), outcome: r.Outcome}
	switch r.Statistic {
	case result.Ratio, result.RiskDifference, result.Proportion:
		q.events = true
	}
	return q
}

var part = pattern.MustCompile(`(?i)\b(?:drop-?outs?|adherers|completers|survivors|non-?survivors|(?:non-?)?responders|subgroups?|subset|smokers|males?|females?|of whom|per[- ]protocol|stratum|strata)\b`)

// wholeArm reports that the sentence speaks of a whole arm and gives no count of
// its own, so that the arm's size stated elsewhere may stand for it.
func (p *para) wholeArm(m mention) bool {
	_, to := p.sentence(m.start)
	rest := strings.TrimLeft(p.s[m.end:to], " ")
	for _, w := range [...]string{"with ", "who ", "without ", "whose "} {
		if strings.HasPrefix(rest, w) {
			return false
		}
	}
	return p.block.Zone != paper.Methods && p.block.Zone != paper.Discussion && !p.says(m.start, part) && !p.says(m.start, counted)
}

// besideName reads the n printed with an arm's name, there or where the sentence
// names the arm once more: "Syrup (n = 42)", "42 colonies in the syrup group".
func (p *para) besideName(m mention) (size, bool) {
	if s, ok := p.behindName(m); ok {
		return s, true
	}
	from, to := p.sentence(m.start)
	var found []size
	for _, o := range p.mentions(from, to) {
		if o.arm == m.arm {
			if s, ok := p.beforeName(from, o); ok {
				found = append(found, s)
			}
		}
	}
	return agreed(found)
}

// behindName reads the n printed right behind an arm's name: "Syrup (n = 42)".
func (p *para) behindName(m mention) (size, bool) {
	i, j := p.items(m.end, m.end+4)
	for k := i; k < j; k++ {
		e := &p.r.Items[k]
		if e.Start >= m.end && e.Start-m.end < 4 && e.Kind == grammar.KindSampleSize {
			return p.sized(e)
		}
	}
	return size{}, false
}

var countBefore = pattern.MustCompile(`(?i)(?:^|[^\w.,–/-])([0-9]{1,5}|` + census.Words + `)\s+(?:` + census.Subjects + `\s+)?` + intoGroup + `(?:the\s+)?$`)

// beforeName reads the count right before an arm's name: "42 colonies in the
// syrup group". Who was lost from it is no size.
func (p *para) beforeName(from int, m mention) (size, bool) {
	at := countBefore.FindStringSubmatchIndex(p.s[from:m.start])
	if at == nil || lost.MatchString(around(p.s, m.start)) {
		return size{}, false
	}
	n, ok := census.Number(p.s[from+at[2] : from+at[3]])
	return size{n: n, at: grammar.Span{Start: from + at[2], End: m.end}, text: p.s[from+at[2] : m.end]}, ok && n > 3
}
