package prose

import (
	"strings"
	"unicode/utf8"

	"halfspan/extract/bind/census"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

var (
	// parting are the marks and verbs that part the pieces of a clause.
	parting = pattern.MustCompile(`(?i)[,;:()\[\]]|\b(?:was|were|is|are|be|been|rose|fell|had|has|have|show(?:ed|s)|shown|did|does|do|can|could|would|will|may|might|must|differed|remained|averaged|reached|` +
		`increas(?:ed|es)|decreas(?:ed|es)|improved|declined|dropped|reduc(?:ed|es)|chang(?:ed|es)|reveal(?:ed|s)|demonstrat(?:ed|es)|indicat(?:ed|es)|suggest(?:ed|s)|contain(?:ed|s)|compris(?:ed|es)|resulted|led|gave|gained|lost|peaked|ranged|we|there|means?|medians?|averages?|that|which|who|while|whereas|but|although|when)\b`)
	leadWords = pattern.MustCompile(`(?i)^(?:though|although|because|since|within|among|during|regarding|concerning|less|more|fewer|worse|better|large|small|marked|strong|alike|equal|(?:±|\+/-)\s*(?:SD|SEM?|standard deviation|standard error)|kg|mg|min|the|a|an|and|or|but|in|of|for|on|with|by|to|from|than|at|as|not|no|there|also|both|then|however|similarly|moreover|furthermore|i\.e|we|it|this|these|those|their|its|our|` +
		`average|mean|median|means|medians|adjusted|unadjusted|respectively|significant|significantly|statistically|slightly|higher|lower|greater|smaller|largest|larger|level of|levels of|value of|values of|terms of|` +
		`associated with|associated to|related to|described as|accompanied by|experienced by|identified with|found|observed|noted|seen|increas(?:e|es|ing|ed)|decreas(?:e|es|ing|ed)|reduc(?:e|tion|tions|ed)|improv(?:e|ement|ements|ed)|difference|differences|changes?|declines?|rise|fall|drop in|` +
		`primary|secondary|outcome measure|outcome measures|outcome|outcomes|end ?points?|evidence of|trend|effect on|effects on|amounts? of|similar|comparable|patients|participants|subjects|women|men)\s+`)
	trailWords = pattern.MustCompile(`(?i)(?:^|\s+)(?:of|by|to|from|approximately|about|on|an?|the|at|in|for|with|and|or|than|vs|versus|mean|median|average|averages?|significantly|statistically|only|also|=|:|OR|M|MD|AOR|CI|score of|until|as|not|no|between|among|respectively|compared)$`)
	// saysNothing are the words that are no outcome, alone or together.
	saysNothing = map[string]bool{}
	comparing   = pattern.MustCompile(`(?i)^(?:compared|versus|vs|than|relative to|as opposed)\b`)
	// listMarks part the names of a list: "mass, protein and flight time".
	listMarks = pattern.MustCompile(`(?i)\s*,\s*(?:and\s+)?|\s+and\s+`)
)

func init() {
	for _, w := range strings.Fields(`mean means median medians average adjusted unadjusted odds hazard relative risk ratio ratios rate difference differences change changes changed or hr rr md aor rd ci p n sd se sem iqr range
		confidence interval compared respectively group groups arm arms baseline standard deviation effect size effects year years range no not significant significantly values value decrease decreased increase increased
		reduction reduced treatment trends trend respective observed estimated estimate estimates we it this there similar similarly equal comparable higher lower greater less more fewer larger smaller largest smallest high low
		analysis analyses multivariate multivariable univariate bivariate regression model models modelled modeled unadjusted crude results result data study trial findings table figure fig post-hoc intention intention-to-treat per-protocol itt treat test tests kaplan-meier curves
		based principle showing shows both all overall total patients participants subjects women men children people individuals whole sample least square squares ls least-squares received given those who that which what
		statistic statistics statistical statistically absolute mm cm kg g mg ml min h s days day weeks week months month gm times points point percentage percent units unit b β beta interaction evidence increments
		associated according about around approximately only even still again first second third also main coefficient slope intercept however furthermore moreover only main described reached reaching value values current previous
		favour favor large small marked strong two three four five include includes included addition contrast general kcals gm pre post receiving given taking randomized randomised assigned allocated male males female females experienced reported described seen noted found antagonistic greatest pronounced`) {
		saysNothing[w] = true
	}
}

// setOutcome takes the words before the estimate, back to a mark or to the
// result before, as what was measured. A result that is only joined to the one
// before ("12.4 kg with syrup and 11.1 kg with water") is about the same; so is
// one whose own words name nothing, and one of a sentence that goes on about the
// sentence before.
func (p *para) setOutcome(r *result.Result, c *cand) {
	from, _ := p.sentence(c.est.Start)
	previous, k := p.previous(c, from)
	if k >= 0 && (c.quartile || p.cands[k].est.Start == c.est.Start) {
		p.inherit(r, &p.cands[k])
		return
	}
	if at, ok := p.fromList(r, c, from); ok {
		p.outcomeAt(r, at)
		return
	}
	if at, ok := p.forWhat(r, c); ok {
		p.outcomeAt(r, at)
		return
	}
	if at, ok := p.nounBehind(r, c); ok && ofNumber.MatchString(p.s[from:c.est.Start]) {
		p.outcomeAt(r, at)
		return
	}
	if k >= 0 && previous < c.est.Start && sameOutcome.MatchString(p.s[previous:c.est.Start]) {
		p.inherit(r, &p.cands[k])
		return
	}
	if at, ok := p.nounBefore(r, max(from, min(previous, c.est.Start)), c.est.Start); ok {
		p.outcomeAt(r, at)
		return
	}
	if at, ok := p.nounBehind(r, c); ok {
		p.outcomeAt(r, at)
		return
	}
	if k >= 0 {
		p.inherit(r, &p.cands[k])
	}
	if r.Outcome == "" && from > 0 {
		p.goesOn(r, from)
	}
}

func (p *para) outcomeAt(r *result.Result, at grammar.Span) {
	r.Outcome = p.s[at.Start:at.End]
	p.source(r, "outcome", at)
}

// goesOn takes the outcome of the last result in the sentence before.
func (p *para) goesOn(r *result.Result, from int) {
	before, _ := p.sentence(from - 1)
	if _, last := p.found(before, from); last > 0 && p.cands[last-1].est.Start >= before {
		p.inherit(r, &p.cands[last-1])
	}
}

// nounBefore finds the last piece between two bytes that names something: between
// marks and verbs, without words of statistics and joining words at its ends and
// without the arms and times that stand there. What only says how something was
// ("was higher with syrup", "fell in the winter") names nothing.
func (p *para) nounBefore(r *result.Result, from, to int) (grammar.Span, bool) {
	marks := reversed(parting.FindAllStringIndex(p.s[from:to], -1))
	for _, how := range []bool{false, true} { // at last what says how: "the groups fell in flight time"
		end := to
		for _, m := range marks {
			a, b := from+m[0], from+m[1]
			piece := p.s[b:end]
			says := intransitive.MatchString(p.s[a:b]) && (adverbial.MatchString(piece) || linkedTo.MatchString(piece) && !linkedChange.MatchString(piece))
			if (!says || how && inWhat.MatchString(piece)) && !p.shut(b, to) {
				if at, ok := p.noun(r, b, end); ok {
					return p.wholeList(from, at), true
				}
			}
			end = a
		}
		if at, ok := p.noun(r, from, end); ok {
			return at, true
		}
	}
	return grammar.Span{}, false
}

var (
	intransitive = pattern.MustCompile(`(?i)^(?:was|were|is|are|be|been|rose|fell|differed|remained|increased|decreased|improved|declined|dropped|changed|reduced|peaked|ranged|did|does|do|who|gained|lost)$`)
	// "loss was associated with cold" is about loss, "syrup was associated with a
	// reduction in loss" too.
	linkedTo     = pattern.MustCompile(`(?i)^[^,;()]{0,20}\b(?:associated|related|correlated|linked) (?:with|to)\b`)
	linkedChange = pattern.MustCompile(`(?i)^[^,;()]{0,20}\b(?:associated|related|correlated|linked) (?:with|to)\s+(?:an?\s+|the\s+)?(?:\w+ly\s+)?(?:significant\s+|large\s+|small\s+)?(?:increas|decreas|reduc|higher|lower|greater|improve|change|risk|more|less|fewer)`)
	inWhat       = pattern.MustCompile(`(?i)^\s*(?:\w+ly\s+)?in\s`)
	// adverbial is how a piece begins that says how, where or when.
	adverbial = pattern.MustCompile(`(?i)^\s*(?:(?:also|not|no|only|significantly|statistically|slightly|then|further|more|less|most|least|similarly|much|all|both)\s+)*` +
		`(?:(?:in|at|during|after|before|with|by|from|to|on|for|among|under|over|until|between|within|than|vs|versus|compared)\b|` +
		`(?:higher|lower|greater|more|less|longer|shorter|larger|smaller|better|worse|younger|older|heavier|lighter|faster|slower|different|similar|equal|comparable|high|low)\s*(?:$|(?:in|at|with|for|among|than|vs|versus|compared|between|after|from|to|by|and|but)\b)|` +
		`(?:the|an?) (?:most|only|main|best|first)\b|[\p{L}-]+(?:\s+[\p{L}-]+)?\s*$|(?:described|administered|used|given|measured|performed|removed|reported|reached|achieved|obtained|calculated|estimated|required|received|treated|included|assessed|evaluated|detected|identified|predicted)\b)`)
)

// wholeList takes the names before "protein and flight time" in, which a
// "respectively" sentence shares out: "mass, protein and flight time".
func (p *para) wholeList(from int, at grammar.Span) grammar.Span {
	const most = 6 // words of one name
	if !strings.Contains(p.s[at.Start:at.End], " and ") || !p.says(at.Start, inOrder) {
		return at
	}
	for at.Start > from {
		head := strings.TrimRight(p.s[from:at.Start], " ")
		if !strings.HasSuffix(head, ",") {
			break
		}
		i := strings.LastIndexAny(head[:len(head)-1], ",;:()[]") + 1
		piece := strings.TrimSpace(head[i : len(head)-1])
		if len(strings.Fields(piece)) > most || strings.ContainsAny(piece, "0123456789") {
			break
		}
		at.Start = from + i + len(head[i:]) - len(strings.TrimLeft(head[i:], " "))
	}
	return at
}

func reversed(list [][]int) [][]int {
	out := make([][]int, len(list))
	for i, m := range list {
		out[len(list)-1-i] = m
	}
	return out
}

// noun is what a piece names: without what stands at its ends; false where
// nothing is left.
func (p *para) noun(r *result.Result, a, b int) (grammar.Span, bool) {
	const most = 90
	a, b = p.trimWords(a, b)
	for {
		x, y := p.trimArms(a, b)
		x, y = p.trimTimes(x, y)
		x, y = p.trimWords(x, y)
		if x == a && y == b {
			break
		}
		a, b = x, y
	}
	for b-a > most {
		cut := strings.IndexByte(p.s[a:b], ' ')
		if cut < 0 {
			break
		}
		a += cut + 1
	}
	if s := p.s[a:b]; subjectsOnly.MatchString(s) || longUnit.FindString(s) == s {
		return grammar.Span{}, false
	}
	if b-a < 2 || strings.ContainsAny(p.s[a:b], "±<=") || comparing.MatchString(p.s[a:b]) || p.holdsSpread(a, b) || !p.namesSomething(r, a, b) {
		return grammar.Span{}, false
	}
	return grammar.Span{Start: a, End: b}, true
}

func (p *para) trimWords(a, b int) (int, int) {
	const blank = " \u00a0\u2009\n-–—‘’\"“”"
	for a < b {
		x, y := a, b
		x += len(p.s[x:y]) - len(strings.TrimLeft(p.s[x:y], blank+"=:"))
		y -= len(p.s[x:y]) - len(strings.TrimRight(p.s[x:y], blank+"=:."))
		if m := leadWords.FindStringIndex(p.s[x:y]); m != nil {
			x += m[1]
		}
		if m := trailWords.FindStringIndex(p.s[x:y]); m != nil {
			y = x + m[0]
		}
		if x == a && y == b {
			break
		}
		a, b = x, max(x, y)
	}
	return a, b
}

// trimArms takes arms off both ends: "mass in the syrup group", "syrup group the
// median age".
func (p *para) trimArms(a, b int) (int, int) {
	for _, m := range p.mentions(p.sentence(a)) {
		switch {
		case m.start < a || m.end > b || m.start == a && m.end == b:
		case b-m.end < 2 && groupWord.MatchString(p.s[m.start:m.end]):
			b = m.start
		case m.start == a && groupWord.MatchString(p.s[m.start:m.end]):
			a = m.end
		}
	}
	return a, b
}

// trimTimes takes times off both ends.
func (p *para) trimTimes(a, b int) (int, int) {
	for _, m := range p.matches(a, timeWords) {
		switch {
		case m[0] < a || m[1] > b || m[0] == a && m[1] == b:
		case m[1] == b && !strings.HasSuffix(strings.TrimRight(p.s[a:m[0]], " "), " of"): // "duration of follow-up"
			b = m[0]
		case m[0] == a:
			a = m[1]
		}
	}
	return a, b
}

// namesSomething reports that a word of a piece is neither an arm, nor a time, nor
// one that says nothing of what was measured.
func (p *para) namesSomething(r *result.Result, a, b int) bool {
	arms, times := p.mentions(p.sentence(a)), p.matches(a, timeWords)
	for i := p.token(a); i < len(p.r.Tokens) && p.r.Tokens[i].Start < b; i++ {
		t := p.r.Tokens[i]
		if t.Kind != grammar.TokWord || saysNothing[t.Value] && !(ratioName[t.Value] && r.Statistic != result.Ratio) || functionWords[t.Value] || weakName[t.Value] || utf8.RuneCountInString(t.Value) < 2 {
			continue
		}
		if printed := p.s[t.Start:t.End]; unitWords[t.Value] && !countWords[t.Value] && !(ratioName[t.Value] && printed == strings.ToUpper(printed)) {
			continue
		}
		known := false
		for _, m := range arms {
			known = known || m.start <= t.Start && t.End <= m.end
		}
		for _, m := range times {
			known = known || m[0] <= t.Start && t.End <= m[1] && !(m[0] == a && m[1] == b) // "median follow-up"
		}
		if !known {
			return true
		}
	}
	return false
}

// subjectsOnly is a count of subjects and nothing else.
var subjectsOnly = pattern.MustCompile(`(?i)^(?:[0-9,]+|` + census.Words + `)\s+(?:\w+\s+)?` + census.Subjects + `$`)

// ratioName are names of ratios that name something else where there is none: HR
// is a heart rate.
var ratioName = map[string]bool{"hr": true, "rr": true}

// ofNumber is what stands before a number of things: "a mean of 3.5 visits".
var ofNumber = pattern.MustCompile(`(?i)\b(?:mean|median|average|total)s?\s*(?:\([^()]*\)\s*)?of\s*$`)

// countWords are units that are themselves what is counted.
var countWords = map[string]bool{"colonies": true, "visits": true, "sessions": true, "cells": true, "points": true, "beats": true, "bpm": true}

var countedNoun = pattern.MustCompile(`^[)\]]?\s+((?:[\p{L}-]+ ){0,3}?[\p{L}-]{3,}(?:\s+per\s+[\p{L}-]+)?)\s*(?:[,;.)(]|\b(?:in|per|for|from|at|was|were|and|on|of|to|with|the|during)\b)`)

// nounBehind is what is counted: "a mean of 4.2 (1.7) visits per colony".
func (p *para) nounBehind(r *result.Result, c *cand) (grammar.Span, bool) {
	_, to := p.sentence(c.est.Start)
	units, at := p.unitsOf(c, c.est.Start, to)
	if at < 0 {
		return grammar.Span{}, false
	}
	m := countedNoun.FindStringSubmatchIndex(p.stretch(units[at].end, to))
	if m == nil || p.block.Zone == paper.Methods || functionWords[firstWord(p.s[units[at].end+m[2]:])] {
		return grammar.Span{}, false
	}
	return p.noun(r, units[at].end+m[2], units[at].end+m[3])
}

var forBehind = pattern.MustCompile(`(?i)^[)\]]?\s*(?:[\p{L}/%]+\s+)?for\s+([^,;.()0-9]{3,70}?)\s*(?:[,;.()]|\band\b|$)`)

// forWhat reads "12.4 ± 1.3 for mass and 8.1 ± 1.0 for protein", where at least
// two results of the sentence are told apart so.
func (p *para) forWhat(r *result.Result, c *cand) (grammar.Span, bool) {
	from, to := p.sentence(c.est.Start)
	units, at := p.unitsOf(c, from, to)
	alike := 0
	var mine []int
	for i, u := range units {
		m := forBehind.FindStringSubmatchIndex(p.stretch(u.end, to))
		if m == nil {
			continue
		}
		alike++
		if i == at {
			mine = []int{u.end + m[2], u.end + m[3]}
		}
	}
	if alike < 2 || mine == nil {
		return grammar.Span{}, false
	}
	return p.noun(r, mine[0], mine[1])
}

func firstWord(s string) string {
	w, _, _ := strings.Cut(strings.ToLower(s), " ")
	return w
}

// fromList shares out a list of names among as many results that follow one
// another: "mass, protein and flight time were 12.4 ± 1.3, 8.1 ± 1.0 and 24 ± 3,
// respectively".
func (p *para) fromList(r *result.Result, c *cand, from int) (grammar.Span, bool) {
	_, to := p.sentence(c.est.Start)
	if !p.says(c.est.Start, inOrder) {
		return grammar.Span{}, false
	}
	units, at := p.unitsOf(c, from, to)
	if at < 0 {
		return grammar.Span{}, false
	}
	first, last := p.runOf(units, at)
	if first > 0 {
		from = units[first-1].end
	}
	run := units[first:last]
	if _, ok := p.byOrder(run, at-first, p.mentions(p.sentence(c.est.Start))); ok || len(run) < 2 {
		return grammar.Span{}, false
	}
	verbs := listVerb.FindAllStringIndex(p.stretch(from, run[0].start), -1)
	if len(verbs) == 0 {
		return grammar.Span{}, false
	}
	a, b := p.trimWords(from, from+verbs[len(verbs)-1][0])
	marks := listMarks.FindAllStringIndex(p.s[a:b], -1)
	spare := len(marks) - (len(run) - 1) // marks before the list
	if spare < 0 {
		return grammar.Span{}, false
	}
	x, y := a, b
	if k := spare + at - first - 1; k >= 0 {
		x = a + marks[k][1]
	}
	if k := spare + at - first; k < len(marks) {
		y = a + marks[k][0]
	}
	return p.noun(r, x, y)
}

var listVerb = pattern.MustCompile(`(?i)\b(?:was|were|averaged|rose|fell|increased|decreased)\b`)

// previous gives the end of the last result before the candidate in its
// sentence, and its index; -1 where it is the first.
func (p *para) previous(c *cand, from int) (end, index int) {
	end, index = from, -1
	_, to := p.sentence(c.est.Start)
	for k, last := p.found(from, to); k < last; k++ {
		o := &p.cands[k]
		if o.item == c.item || o.est.Start > c.est.Start || o.est.Start < from || o.item > c.item {
			continue
		}
		if e := p.r.Items[o.item].End; e >= end {
			end, index = e, k
		}
	}
	return end, index
}

// sameOutcome is what stands between two results of one outcome: a unit, an
// arm or a time behind the first, a joining word, nothing of its own.
var sameOutcome = pattern.MustCompile(`(?i)^[)\]%]*(?:[^.;()\[\]]|\(n ?= ?[0-9]+\)){0,70}?(?:,|\band|\bvs\.?|\bversus|\bto|\bcompared (?:with|to)|\bthan|&)\s*(?:(?:in|with|for|from|at|by|to|the|a)\s+)*[(\[]?$`)

// inherit copies the outcome of another candidate's result.
func (p *para) inherit(r *result.Result, o *cand) {
	at := p.run.Between(o.est.Start, o.est.End)
	for i := len(p.f.out) - 1; i >= 0 && i > len(p.f.out)-30; i-- {
		if place(&p.f.out[i], "estimate") != at {
			continue
		}
		r.Outcome = p.f.out[i].Outcome
		for _, s := range p.f.out[i].Sources {
			if s.Field == "outcome" {
				r.Sources = append(r.Sources, s)
			}
		}
		return
	}
}

// holdsSpread reports that words of an interval or spread stand in a stretch.
func (p *para) holdsSpread(a, b int) bool {
	from, _ := p.sentence(a)
	for k, last := p.items(from, b); k < last; k++ {
		if it := &p.r.Items[k]; it.Spread != "" && it.Start < b && it.End > a {
			return true
		}
	}
	return false
}
