package prose

import (
	"sort"
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// setContext fills arm, time and outcome from the sentence where they are
// plain.
func (p *para) setContext(r *result.Result, c *cand) {
	p.setTime(r, c)
	p.setOutcome(r, c)
	p.setArms(r, c)
}

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
		a, b, ok := twoArms(all)
		if ok {
			p.setArm(r, "arm", a)
			p.setArm(r, "arm2", b)
		}
		return
	}
	if m, ok := p.armOf(c, all, from, to); ok {
		p.setArm(r, "arm", m)
	}
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

var doses = pattern.MustCompile(`(?i)\b(?:doses?|consumption) of\b`)

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

// twoArms gives the two arms of a sentence that names exactly two.
func twoArms(all []mention) (a, b mention, ok bool) {
	a = all[0]
	for _, m := range all[1:] {
		switch {
		case m.arm == a.arm || ok && m.arm == b.arm:
		case ok:
			return a, b, false
		default:
			b, ok = m, true
		}
	}
	return a, b, ok
}

// armOf chooses the arm of a single group's result: by order where the sentence
// says "respectively", else the one named right behind it, else the last one
// named before it and behind the result before, else the only one.
func (p *para) armOf(c *cand, all []mention, from, to int) (mention, bool) {
	if m, ok := p.byOrder(c, all, from, to); ok {
		return m, true
	}
	it := &p.r.Items[c.item]
	end := it.End
	if it.Bracket > 0 {
		end = max(end, p.r.Brackets[it.Bracket-1].End)
	}
	previous := from
	for k, last := p.found(from, to); k < last; k++ {
		if o := &p.cands[k]; o.est.Start < c.est.Start && o.est.Start >= from {
			previous = max(previous, min(p.r.Items[o.item].End, c.est.Start))
		}
	}
	if m, ok := p.alternate(c, all, from, previous); ok {
		return m, true
	}
	for _, m := range all {
		if m.start >= end && m.start-end < 60 && linked.MatchString(p.s[end:m.start]) && !contrast.MatchString(p.s[end:m.start]) && !strings.Contains(p.s[end:m.start], " and ") {
			return m, true
		}
	}
	best, ok := mention{}, false
	for _, m := range all {
		if m.end <= c.est.Start && m.start >= previous && !(previous > from && p.claimed(m, previous)) && !p.shut(m.start, c.est.Start) {
			best, ok = m, true
		}
	}
	if ok && best.arm == all[0].arm && contrast.MatchString(p.s[max(from, best.start-30):best.start]) {
		return mention{}, false // "lower than in the water group (12.4 vs 11.1)": the other arm has no name here
	}
	if ok {
		return best, true
	}
	for _, m := range all[1:] {
		if m.arm != all[0].arm {
			return mention{}, false
		}
	}
	if previous > from && contrast.MatchString(p.s[previous:c.est.Start]) {
		return mention{}, false // "12.4 with syrup vs 11.1": the other arm's
	}
	return all[0], all[0].start < c.est.Start
}

// alternate reads "lower with syrup than with water at week 1 (12.4 vs 13.1) and
// at week 2 (11.1 vs 12.0)": two arms are set against each other before all
// results, which then take turns.
func (p *para) alternate(c *cand, all []mention, from, previous int) (mention, bool) {
	first := from + len(p.beforeFirst(c, from))
	var two []mention
	for _, m := range all {
		if m.end <= first && (len(two) == 0 || two[len(two)-1].arm != m.arm) {
			two = append(two, m)
		}
	}
	if len(two) != 2 || len(two) != len(all) || !contrast.MatchString(p.s[two[0].end:two[1].start]) {
		return mention{}, false
	}
	if previous > from && contrast.MatchString(p.s[previous:c.est.Start]) {
		return two[1], true
	}
	return two[0], true
}

// shut reports that byte a stands in a bracket that is closed before byte b.
func (p *para) shut(a, b int) bool {
	from, _ := p.sentence(a)
	for k := sort.Search(len(p.r.Brackets), func(k int) bool { return p.r.Brackets[k].Start >= a }) - 1; k >= 0; k-- {
		br := p.r.Brackets[k]
		if br.Start < from {
			break
		}
		if a < br.End && br.End <= b {
			return true
		}
	}
	return false
}

// claimed reports that arm m belongs to the result that ends at byte end: it
// follows it at once, "12.4 kg (SD 1.3) in the syrup arm vs".
func (p *para) claimed(m mention, end int) bool {
	return m.start >= end && m.start-end < 60 && linked.MatchString(strings.TrimLeft(p.s[end:m.start], ")]")) && !contrast.MatchString(p.s[end:m.start])
}

// linked is what may stand between a result and its arm's name behind it.
var linked = pattern.MustCompile(`(?i)^[^0-9;.]{0,25}?\b(?:in|for|with|among|on|under|at)\b(?:\s+(?:the|those|patients|participants|women|subjects|on|receiving|given|taking|assigned|to|\w+'s))*\s*$`)

// byOrder pairs the results of a sentence with its arms where there are as many
// of either and all arms stand before all results or behind them: "lower with
// syrup than with water (12.4 ± 1.3 vs 11.1 ± 1.2)", "12.4 ± 1.3 and 11.1 ± 1.2
// with syrup and water, respectively".
func (p *para) byOrder(c *cand, all []mention, from, to int) (mention, bool) {
	var mine []int
	at := -1
	for k, last := p.found(from, to); k < last; k++ {
		o := &p.cands[k]
		if o.est.Start < from || o.est.Start >= to {
			continue
		}
		if n := len(mine); n == 0 || !o.quartile && p.cands[mine[n-1]].est.Start != o.est.Start {
			mine = append(mine, k)
		}
		if o.item == c.item {
			at = len(mine) - 1
		}
	}
	if !p.says(c.est.Start, inOrder) && !p.joined(mine) {
		return mention{}, false
	}
	var distinct []mention
	for _, m := range all {
		known := false
		for _, d := range distinct {
			known = known || d.arm == m.arm
		}
		if !known {
			distinct = append(distinct, m)
		}
	}
	if at < 0 || len(distinct) != len(mine) || len(mine) < 2 {
		return mention{}, false
	}
	first, last := p.cands[mine[0]].est.Start, p.r.Items[p.cands[mine[len(mine)-1]].item].End
	if distinct[len(distinct)-1].end > first && all[0].start < last {
		return mention{}, false
	}
	return distinct[at], true
}

// joined reports that the results follow one another with only a joining word
// between: "12.4 ± 1.3 vs 11.1 ± 1.2".
func (p *para) joined(list []int) bool {
	for i := 1; i < len(list); i++ {
		a, b := p.r.Items[p.cands[list[i-1]].item].End, p.cands[list[i]].est.Start
		if a > b || !joining.MatchString(p.s[a:b]) {
			return false
		}
	}
	return true
}

const count = `(?:[0-9]+(?:\.[0-9]+)?|one|two|three|four|five|six|eight|nine|ten|twelve)`

var (
	inOrder   = pattern.MustCompile(`(?i)\brespectively\b|\bresp\.`)
	joining   = pattern.MustCompile(`(?i)^[)\]%]?\s*(?:[\p{L}/%²]+\s*)?[)\]]?\s*(?:vs\.?|versus|and|compared (?:with|to)|,|;|to)\s*\(?$`)
	timeWords = pattern.MustCompile(`(?i)\b(?:(?:at|after|by|over|during|within|until)\s+(?:the\s+)?)?(?:` +
		`(?:week|month|day|year|hour|visit|cycle|session)s?\s+[0-9]+(?:\s*(?:-|–|to)\s*(?:week|month|day|year)?\s?[0-9]+)?` +
		`|baseline|follow-?up|pre-?test|post-?test|(?:pre|post)-?(?:treatment|intervention|operative(?:ly)?)|(?:the )?end of (?:the )?(?:study|trial|treatment|intervention))\b` +
		`|\b(?:at|after|by|over|during|within|until)\s+(?:the\s+)?` + count + `[ \x{a0}-](?:weeks?|months?|days?|years?|hours?|h|min|minutes)\b(?:\s+(?:follow-?up|post\w*|after \w+))?` +
		`|\b(?:at\s+(?:the\s+)?|after\s+(?:the\s+)?)?` + count + `-(?:week|month|day|year|hour)s?\b(?:\s+(?:follow-?up|visit|time point))?`)
	timeAfter = pattern.MustCompile(`(?i)^[^.;,()0-9]{0,50}$`)
)

// setTime names the time point: the one right behind the result, else the last
// before it in the sentence. "From baseline" names no time of a value.
func (p *para) setTime(r *result.Result, c *cand) {
	it := &p.r.Items[c.item]
	_, to := p.sentence(it.Start)
	end := it.End
	if it.Bracket > 0 {
		end = min(to, max(end, p.r.Brackets[it.Bracket-1].End))
	}
	all := p.matches(it.Start, timeWords)
	for _, m := range all {
		if m[0] < end {
			continue
		}
		if between := p.s[end:m[0]]; len(between) < 50 && timeAfter.MatchString(between) && !strings.Contains(between, " and ") && !strings.HasSuffix(p.s[:m[0]], "from ") {
			p.setTimeAt(r, m[0], m[1])
			return
		}
		break
	}
	for k := len(all) - 1; k >= 0; k-- {
		a, b := all[k][0], all[k][1]
		if b <= c.est.Start && !strings.HasSuffix(p.s[:a], "from ") && !p.inSpread(a, b) {
			p.setTimeAt(r, a, b)
			return
		}
	}
}

func (p *para) setTimeAt(r *result.Result, a, b int) {
	r.Time = p.s[a:b]
	p.source(r, "time", grammar.Span{Start: a, End: b})
}

// inSpread reports that a stretch holds the estimate of a result: "35 min" is
// then no time point.
func (p *para) inSpread(a, b int) bool {
	from, to := p.sentence(a)
	for k, last := p.found(from, to); k < last; k++ {
		if e := p.cands[k].est; e.Start < b && e.End > a {
			return true
		}
	}
	return false
}

var (
	leadWords  = pattern.MustCompile(`(?i)^(?:kg|mg|min|the|a|an|and|or|but|while|whereas|in|of|for|on|with|by|was|were|is|are|that|there|had|has|have|also|both|then|however|overall|similarly|moreover|average|mean|median|respectively|to|from|than|at|as|i\.e)\s+`)
	trailWords = pattern.MustCompile(`(?i)\s+(?:was|were|is|are|of|by|to|from|averaged|approximately|about|had|has|have|an?|the|at|in|for|with|and|or|than|vs|versus|mean|median|average|significantly|statistically|only|=|:|OR|HR|RR|M|MD|score of)$`)
	// what is no outcome by itself
	emptyWords = pattern.MustCompile(`(?i)^(?:[^\p{L}]*|(?:mean|median|average|adjusted|unadjusted|odds ratio|hazard ratio|relative risk|risk ratio|rate ratio|difference|mean difference|change|mean change|OR|HR|RR|MD|aOR|range|p|n|95|CI|confidence interval|and|or|vs|versus|than|compared with|compared to|respectively|in|for|the|group|arm|at|baseline|to|from|M|SD|β|B|b|risk difference|effect size|years?|age range|was|were|is|are|modelled|model|modeled|between|means|groups?|no|significant|significantly|differences|similar trends|respective|we|observed|it|this|there|estimated|estimate|values?|decrease|increase|reduction|treatment|effect|by|on average|of|that|kg|months?|weeks?)[\s=:,.]*)+$`)
)

// setOutcome takes the words before the estimate, back to a mark or to the
// result before, as what was measured. A result that is only joined to the one
// before ("12.4 kg with syrup and 11.1 kg with water") is about the same.
func (p *para) setOutcome(r *result.Result, c *cand) {
	from, _ := p.sentence(c.est.Start)
	previous, k := p.previous(c, from)
	if k >= 0 && c.quartile || k >= 0 && previous < c.est.Start && sameOutcome.MatchString(p.s[previous:c.est.Start]) {
		p.inherit(r, &p.cands[k])
		return
	}
	if k >= 0 && p.cands[k].est.Start == c.est.Start {
		p.inherit(r, &p.cands[k])
		return
	}
	from = max(from, min(previous, c.est.Start))
	if at, ok := p.nounBefore(from, c.est.Start); ok {
		r.Outcome = p.s[at.Start:at.End]
		p.source(r, "outcome", at)
	}
}

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

// subject is what stands before the verb of a stretch: "Mass was higher in".
var subject = pattern.MustCompile(`(?i)^(.*?)\s(?:was|were|is|are|rose|fell|(?:significantly |also )?(?:decreased|increased|improved|declined|dropped|differed|changed|reduced)|remained|did|had|has|showed)\b`)

// wholeList takes the names before "protein and flight time" in, which a
// "respectively" sentence shares out: "mass, protein and flight time".
func wholeList(stretch string, start int, part string) (string, int) {
	end := start + len(part)
	for start > 0 {
		i := strings.LastIndexAny(strings.TrimRight(stretch[:start], ", "), ",;:()[]")
		piece := strings.TrimSpace(stretch[i+1 : start])
		if !strings.HasSuffix(piece, ",") || len(strings.Fields(piece)) > 6 || strings.ContainsAny(piece, "0123456789") {
			break
		}
		start = i + 1 + len(stretch[i+1:start]) - len(strings.TrimLeft(stretch[i+1:start], " "))
	}
	return stretch[start:end], start
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

var comparing = pattern.MustCompile(`(?i)^(?:compared|versus|vs|than|relative to|as opposed)\b`)

// onlyArm reports that a stretch is nothing but an arm's name.
func (p *para) onlyArm(a, b int) bool {
	for _, m := range p.mentions(a, b) {
		if m.start-a < 5 && b-m.end < 3 {
			return true
		}
	}
	return false
}

// nounBefore finds the last stretch between two bytes that names something:
// between marks, without words of statistics, verbs and joining words at its
// ends.
func (p *para) nounBefore(from, to int) (grammar.Span, bool) {
	stretch := p.s[from:to]
	end := len(stretch)
	for end > 0 {
		i := strings.LastIndexAny(stretch[:end], ",;:()[]")
		part := stretch[i+1 : end]
		start := i + 1 + len(part) - len(strings.TrimLeft(part, " \u00a0"))
		part = strings.TrimSpace(part)
		for {
			short := leadWords.ReplaceAllString(part, "")
			start += len(part) - len(short)
			short = trailWords.ReplaceAllString(short, "")
			short = strings.TrimRight(short, " =:\u00a0")
			if short == part {
				break
			}
			part = short
		}
		if m := subject.FindStringSubmatch(part); m != nil && len(m[1]) > 2 && !groupWord.MatchString(m[1]) && !emptyWords.MatchString(m[1]) {
			part = strings.TrimSpace(m[1])
		}
		if len(part) > 2 && !emptyWords.MatchString(part) && !strings.ContainsAny(part, "±<=") && !comparing.MatchString(part) && !p.onlyArm(from+start, from+start+len(part)) && !p.holdsSpread(from+start, from+start+len(part)) {
			if strings.Contains(part, " and ") && inOrder.MatchString(p.s[to:min(len(p.s), to+250)]) {
				part, start = wholeList(stretch, start, part)
			}
			const most = 90
			for len(part) > most {
				cut := strings.IndexByte(part, ' ')
				if cut < 0 {
					break
				}
				part, start = part[cut+1:], start+cut+1
			}
			return grammar.Span{Start: from + start, End: from + start + len(part)}, true
		}
		end = max(i, 0)
	}
	return grammar.Span{}, false
}
