package prose

import (
	"strconv"
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

var counted = pattern.MustCompile(`(?i)(?:^|[^\w.,])([0-9]{1,3}(?:,[0-9]{3})+|[0-9]{1,6}|` + census.Words + `)\s+(?:(?:[a-z-]+)\s+){0,3}?` + census.Subjects + `\b`)

// beside finds the n printed with the result: n = … in its own bracket, right
// behind the bracket, or the one count of subjects in the sentence where the
// sentence holds one group only.
func (p *para) beside(c *cand) (size, bool) {
	if s, ok := p.wholeGroup(c); ok {
		return s, true
	}
	it := &p.r.Items[c.item]
	var only, same *grammar.Item
	count := 0
	from, to := p.sentence(it.Start)
	for k, last := p.items(from, to); k < last; k++ {
		e := &p.r.Items[k]
		if e.Kind != grammar.KindSampleSize {
			continue
		}
		if it.Bracket > 0 && e.Bracket == it.Bracket {
			if same == nil || e.Start < it.Start { // of several the nearest before
				same = e
			}
			continue
		}
		if e.Start > it.End && e.Start-it.End < 8 {
			return p.sized(e)
		}
		count++
		only = e
	}
	if same != nil {
		return p.sized(same)
	}
	if s, ok := p.inEach(from, to); ok && count == 0 {
		return s, true
	}
	if c.meaning.Spread == grammar.SpreadCI && p.statistic(c).statistic == result.Ratio {
		return size{}, false // a ratio's n is seldom the one count of its sentence
	}
	if p.alone(it.Start) && count == 1 && only.Start < it.Start && it.Start-only.End < 80 {
		return p.sized(only)
	}
	if count == 0 && p.alone(it.Start) {
		return p.countedIn(from, it.Start)
	}
	return size{}, false
}

// wholeGroup reads a count of subjects that leads straight to the result: "the
// 61 colonies had a mass of 12.4 ± 1.3 kg", "Forty-two colonies (mean mass ...".
func (p *para) wholeGroup(c *cand) (size, bool) {
	const near = 120
	from, _ := p.sentence(c.est.Start)
	s, ok := p.countedIn(from, c.est.Start)
	if !ok || groupWord.MatchString(p.s[from:c.est.Start]) || contrast.MatchString(p.s[from:c.est.Start]) || s.at.End > c.est.Start || p.statistic(c).statistic == result.Ratio || c.est.Start-s.at.End > near || strings.ContainsAny(p.s[s.at.End:c.est.Start], ";") {
		return size{}, false
	}
	return s, true
}

var inEach = pattern.MustCompile(`(?i)\b([0-9]{1,5})\s+` + census.Subjects + `\s+(?:per|in\s+(?:each|either|every)|for\s+each)\s+(?:arm|group)\b`)

// inEach reads "21 colonies per arm" where the sentence says it once: it is the n
// of each group's results there.
func (p *para) inEach(from, to int) (size, bool) {
	found := p.matches(from, inEach)
	if len(found) != 1 || found[0][1] > to {
		return size{}, false
	}
	m := found[0]
	n, err := strconv.Atoi(p.s[m[2]:m[3]])
	return size{n: n, at: grammar.Span{Start: m[0], End: m[1]}, text: p.s[m[0]:m[1]]}, err == nil && n > 0
}

func (p *para) sized(e *grammar.Item) (size, bool) {
	n, err := strconv.Atoi(e.Value.Value)
	return size{n: n, at: e.Span, text: p.s[e.Start:e.End]}, err == nil && n > 0
}

// alone reports that all results of the sentence are about one group: nothing
// in it contrasts groups.
func (p *para) alone(b int) bool {
	return !p.says(b, contrast) && !p.says(b, groupWord)
}

var groupWord = pattern.MustCompile(`(?i)\b(?:groups?|arms?|controls?|placebo|intervention|respectively|both|each)\b`)

// countedIn reads "the 47 included subjects", "Forty-two colonies" where it is
// the only count before the result.
func (p *para) countedIn(from, to int) (size, bool) {
	var found [][]int
	for _, m := range p.matches(from, counted) {
		if m[1] <= to && (len(found) == 0 || !p.shut(m[2], to)) { // "sixteen colonies (12 strong, 4 weak)"
			found = append(found, m)
		}
	}
	if len(found) != 1 {
		return size{}, false
	}
	a, b := found[0][2], found[0][3]
	if !p.wholeCount(from, a, found[0][1]) {
		return size{}, false
	}
	n, ok := census.Number(p.s[a:b])
	if !ok || n < 2 {
		return size{}, false
	}
	return size{n: n, at: grammar.Span{Start: a, End: found[0][1]}, text: p.s[a:found[0][1]]}, true
}

var (
	otherCount = pattern.MustCompile(`(?i)(?:\band\s+|[-–/]|[0-9]\s+)$|\b(?:male|female|men|women|boys|girls)s?\b[^.;]*\band\s*$`)
	loose      = pattern.MustCompile(`(?i)\s(?:of|in|to|at|among|for|with|by|from|and|or|mo|months?|weeks?|wk|days?|years?|hours?|h|min|mg|ml|g|kg|percent|the|were|was|had|per)\s`)
)

// wholeCount refuses counts that are only part of a group ("35 male and 19
// female subjects"), part of a word ("under-five children") or joined to their
// noun by other words ("12 mo among infants").
func (p *para) wholeCount(from, a, end int) bool {
	return !otherCount.MatchString(p.s[from:a]) && !loose.MatchString(p.s[a:end])
}

// setSize fills the result's n.
func (p *para) setSize(r *result.Result, c *cand) {
	if s, ok := p.beside(c); ok {
		r.N, r.NFrom, r.NKind = s.n, result.NBeside, result.NUnclear
		r.Sources = append(r.Sources, result.Source{Field: "n", Place: p.run.Between(s.at.Start, s.at.End), Text: s.text})
	}
}

var sampleOf = pattern.MustCompile(`(?i)\b(?:participants|patients|subjects|sample|women|men|children|colonies|respondents|all|overall|age|aged|BMI)\b`)

// wholeSample gives the number of all subjects to a mean or median that names no
// arm and is about all of them at the start, and to any in a study that has the
// same subjects under every condition.
func (p *para) wholeSample(r *result.Result, c *cand) {
	if r.N > 0 || !sizeTold(r) && r.GivenAs != result.Range || between(r) || p.block.Zone != paper.Results && p.block.Zone != paper.Abstract || methodsPart.MatchString(p.block.Section) {
		return
	}
	from, to := p.sentence(c.est.Start)
	if !p.f.back.Census.Within {
		switch {
		case r.Arm != "" || r.Statistic == result.MeanChange:
			return
		case p.says(c.est.Start, groupWord) || p.says(c.est.Start, contrast) || len(p.mentions(from, to)) > 0:
			return
		case p.says(c.est.Start, counted):
			return
		case !ageLike.MatchString(p.s[from:c.est.Start]), !sampleOf.MatchString(p.s[from:c.est.Start]) && !startPart.MatchString(p.block.Section):
			return
		}
	} else if p.says(c.est.Start, counted) {
		return
	}
	if n, ok := p.f.back.Census.Whole(p.f.back.Census.Within && !r.Evidence.Baseline); ok {
		r.N, r.NFrom, r.NKind = n.N, result.NElsewhere, result.NUnclear
		r.Raise("n-elsewhere", "the sample size is that of all who took part, not stated beside the result")
		r.Sources = append(r.Sources, result.Source{Field: "n", Place: n.Place, Text: n.Text, From: "the text's count of those who took part"})
	} else if s, ok := p.f.cast.together(); ok && !p.f.back.Census.Within {
		p.elsewhere(r, "n", &r.N, s)
	}
}

// methodsPart are headings of parts, of an abstract too, that report no results.
var methodsPart = pattern.MustCompile(`(?i)\b(?:methods?|design|interventions?|exposure|procedures?|background|setting)\b`)

// startPart are headings of parts that describe the sample at the start.
var startPart = pattern.MustCompile(`(?i)\b(?:baseline|demographics?|sample|participant|patient|subject) (?:data|characteristics|description)\b|^(?:[0-9.]+\s*)?(?:participants?|subjects|sample|patients)\b|\bcharacteristics (?:of|at)\b`)

var ageLike = pattern.MustCompile(`(?i)\b(?:age|aged|BMI|body mass index|baseline|duration of (?:the )?(?:symptoms|disease|illness|diabetes|pain|disorder|condition)|at (?:inclusion|enrol\w+|entry|study entry))\b`)

// elsewhere fills an n that is stated away from the result.
func (p *para) elsewhere(r *result.Result, field string, n *int, s size) {
	*n = s.n
	if field == "n" {
		r.NFrom, r.NKind = result.NElsewhere, result.NUnclear
		r.Raise("n-elsewhere", "the sample size is stated "+s.from+", not beside the result")
	}
	r.Sources = append(r.Sources, result.Source{Field: field, Place: s.place, Text: s.text, From: s.from})
}
