package prose

import (
	"sort"
	"strings"

	"halfspan/extract/pattern"
)

var (
	inOrder = pattern.MustCompile(`(?i)\brespectively\b|\bresp\.`)
	joining = pattern.MustCompile(`(?i)^[)\]%]?\s*(?:[\p{L}/%²]+\s*)?[)\]]?\s*(?:vs\.?|versus|,?\s*and|&|compared (?:with|to)|,|;)\s*\(?$`)
	// linked is what may stand between a result and its arm's name behind it.
	linked = pattern.MustCompile(`(?i)^[^0-9;.]{0,25}?\b(?:in|for|with|among|on|under|at|after)\b(?:\s+(?:the|those|patients|participants|women|subjects|on|receiving|given|taking|assigned|to|\w+'s))*\s*$`)
	// longUnit is a unit that has digits: "mL/min/1.73 m2".
	longUnit = pattern.MustCompile(`^\s*[\p{L}µμ%][^\s,;()]*/[^\s,;()]*[0-9²³][^\s,;()]*(?:\s?m[2²](?:/[\p{L}]+)?)?`)
	// atOnceArm is what may stand between an arm's name and its result.
	atOnceArm = pattern.MustCompile(`^\s?[,:=(–-]?\s*[(]?$`)
	ofAll     = pattern.MustCompile(`(?i)^[)\]]?\s*(?:overall|in total|in all|altogether)\b`)
	ofOthers  = pattern.MustCompile(`(?i)\b(?:in|for|with|among|on|under)\s+(?:the|those|all)\b`)
	inGroup   = pattern.MustCompile(`(?i)\b(?:in|for|with|among|on|under|at)\s+(?:the\s+)?$`)
	// inBracket is the same for a name in brackets: "12.4 ± 1.3 kg (syrup group)".
	inBracket = pattern.MustCompile(`^[^0-9;.,()]{0,14}\((?:the )?$`)
	// toNext joins the two values of one arm: "from 12.4 ± 1.3 to 13.1 ± 1.2".
	toNext = pattern.MustCompile(`(?i)^[)\]%]?[^;.()]{0,40}?\bto\s*\(?$|^[)\]%]?\s*\([^()0-9]{3,30}\)\s*(?:versus|vs\.?|and|to)\s*$`)
	// against is what stands before the arm that a result is set against.
	against = pattern.MustCompile(`(?i)\b(?:than|vs\.?|versus|relative to|compared (?:with|to)|over|against|from)\s+(?:(?:that|those|the|in|of|with|for|on|receiving|given|randomi[sz]ed|assigned|to|a|patients|participants|women|subjects|values|rates?)\s+)*$`)
)

// twoArms gives the two arms that a comparison is about: the two that the
// sentence names; of more, the last one named before the result that is set
// against another ("relative to water"), and the one named nearest to the result.
func (p *para) twoArms(c *cand, all []mention, from int) (a, b mention, ok bool) {
	distinct := distinctArms(all)
	if len(distinct) == 2 {
		a, b = distinct[0], distinct[1]
		if against.MatchString(p.s[from:a.start]) && !against.MatchString(p.s[from:b.start]) {
			a, b = b, a
		}
		return a, b, true
	}
	if len(distinct) < 2 {
		return a, b, false
	}
	foundA, foundB := false, false
	for k := len(all) - 1; k >= 0; k-- {
		m := all[k]
		switch {
		case m.end > c.est.Start:
		case !foundB && against.MatchString(p.s[from:m.start]):
			b, foundB = m, true
		case !foundA && !(foundB && m.arm == b.arm):
			a, foundA = m, true
		}
	}
	return a, b, foundA && foundB && a.arm != b.arm
}

// distinctArms gives the first mention of every arm.
func distinctArms(all []mention) []mention {
	var out []mention
	for _, m := range all {
		known := false
		for _, d := range out {
			known = known || d.arm == m.arm
		}
		if !known {
			out = append(out, m)
		}
	}
	return out
}

// unit is one estimate of a sentence with all its spreads.
type unit struct{ start, end, number int } // number: where the estimate itself ends

// unitsOf gives the estimates of a sentence in order, and which of them is the
// candidate's.
func (p *para) unitsOf(c *cand, from, to int) (list []unit, at int) {
	at = -1
	for k, last := p.found(from, to); k < last; k++ {
		o := &p.cands[k]
		if o.est.Start < from || o.est.Start >= to {
			continue
		}
		it := &p.r.Items[o.item]
		end := max(it.End, o.est.End)
		if b := it.Bracket; b > 0 && p.r.Brackets[b-1].Start >= o.est.End {
			end = max(end, p.r.Brackets[b-1].End) // the spread's own bracket
		}
		if m := longUnit.FindStringIndex(p.stretch(end, to)); m != nil {
			end += m[1]
		}
		if n := len(list); n > 0 && (list[n-1].start == o.est.Start || o.quartile && o.est.Start < list[n-1].end) {
			list[n-1].end = max(list[n-1].end, end)
		} else {
			list = append(list, unit{o.est.Start, end, o.est.End})
		}
		if o.est.Start == c.est.Start || o.item == c.item {
			at = len(list) - 1
		}
	}
	for i := 1; i < len(list); i++ {
		if list[i-1].end > list[i].start { // its interval stands behind the next estimate
			list[i-1].end = min(list[i-1].number, list[i].start)
		}
	}
	return list, at
}

// armOf chooses the arm of a single group's result.
func (p *para) armOf(c *cand, all []mention, from, to int) (mention, bool) {
	if a, b := p.segment(c, from, to); a > from || b < to {
		if part := within(all, a, b); len(part) > 0 {
			all, from, to = part, a, b
		}
	}
	units, at := p.unitsOf(c, from, to)
	if at < 0 {
		return mention{}, false
	}
	if m, ok := p.byOrder(units, at, all); ok {
		return m, true
	}
	if m, ok := p.alternate(units, at, all); ok {
		return m, true
	}
	return p.nearest(units, at, all, from)
}

// segment is the part of a sentence between semicolons that holds a candidate;
// semicolons in brackets part nothing.
func (p *para) segment(c *cand, from, to int) (a, b int) {
	a, b = from, to
	depth := 0
	for i := from; i < to; i++ {
		switch p.s[i] {
		case '(', '[':
			depth++
		case ')', ']':
			depth = max(0, depth-1)
		case ';':
			if depth > 0 {
				continue
			}
			if i < c.est.Start {
				a = i + 1
			} else {
				return a, i
			}
		}
	}
	return a, b
}

func within(all []mention, a, b int) []mention {
	var out []mention
	for _, m := range all {
		if m.start >= a && m.end <= b {
			out = append(out, m)
		}
	}
	return out
}

// byOrder pairs the results of a sentence with its arms where there are as many
// of either: results that follow one another with the arms named behind them or
// before them, "12.4 ± 1.3 and 11.1 ± 1.2 with syrup and water, respectively",
// "lower with syrup than with water (12.4 ± 1.3 vs 11.1 ± 1.2)"; later pairs of a
// sentence take the arms in the order in which it named them.
func (p *para) byOrder(units []unit, at int, all []mention) (mention, bool) {
	first, last := p.runOf(units, at)
	if last-first < 2 && p.says(units[at].start, inOrder) {
		first, last = 0, len(units)
	}
	if last-first < 2 {
		return mention{}, false
	}
	var near, behind, earlier []mention
	for _, m := range all {
		switch {
		case first > 0 && m.end <= units[first-1].end || m.end <= units[first].start && first > 0 && m.start < units[first-1].end:
			earlier = append(earlier, m)
		case m.end <= units[first].start:
			near = append(near, m)
		case m.start < units[last-1].end:
			return mention{}, false
		case last == len(units) || m.start < units[last].start:
			behind = append(behind, m)
		}
	}
	// Those behind the results are nearer to them than what the sentence began with.
	for _, list := range [][]mention{behind, near} {
		if d := distinctArms(list); len(d) == last-first {
			return d[at-first], true
		}
	}
	if d := distinctArms(earlier); len(near) == 0 && len(behind) == 0 && len(d) == last-first {
		return d[at-first], true
	}
	return mention{}, false
}

// runOf gives the results [first, last) that follow one another with the given
// one among them.
func (p *para) runOf(units []unit, at int) (first, last int) {
	first, last = at, at+1
	for first > 0 && p.joined(units[first-1:first+1]) {
		first--
	}
	for last < len(units) && p.joined(units[last-1:last+1]) {
		last++
	}
	return first, last
}

// joined reports that the results follow one another with only a joining word
// between: "12.4 ± 1.3 vs 11.1 ± 1.2".
func (p *para) joined(units []unit) bool {
	for i := 1; i < len(units); i++ {
		a, b := units[i-1].end, units[i].start
		if a > b || !joining.MatchString(p.s[a:b]) {
			return false
		}
	}
	return true
}

// alternate reads "lower with syrup than with water at week 1 (12.4 vs 13.1) and
// at week 2 (11.1 vs 12.0)": two arms are set against each other before all
// results, which then take turns.
func (p *para) alternate(units []unit, at int, all []mention) (mention, bool) {
	var two []mention
	for _, m := range all {
		if m.end <= units[0].start && (len(two) == 0 || two[len(two)-1].arm != m.arm) {
			two = append(two, m)
		}
	}
	if len(two) != 2 || len(two) != len(all) || !contrast.MatchString(p.stretch(two[0].end, two[1].start)) {
		return mention{}, false
	}
	if at > 0 && contrast.MatchString(p.stretch(units[at-1].end, units[at].start)) {
		return two[1], true
	}
	return two[0], true
}

// nearest gives the arm named right behind a result; else the last one named
// between it and the result before; else, for the first of two values joined by
// "to", the second one's; else that of the result before, where the sentence goes
// on about it; else the only one.
func (p *para) nearest(units []unit, at int, all []mention, from int) (mention, bool) {
	u := units[at]
	previous := from
	if at > 0 {
		previous = max(previous, min(units[at-1].end, u.start))
	}
	for _, m := range all {
		if m.start > u.start && m.end < u.end && inGroup.MatchString(p.stretch(u.start, m.start)) {
			return m, true // "12.4 ± 1.3 kg in the syrup group (range 10 to 15)"
		}
	}
	if ofAll.MatchString(p.s[min(u.end, len(p.s)):]) {
		return mention{}, false // "(12.9 ± 1.4 overall)"
	}
	for _, m := range all {
		if m.end <= u.start && atOnceArm.MatchString(p.stretch(m.end, u.start)) && !(previous > from && p.claimed(m, previous)) {
			return m, true // "(syrup, 12.4 ± 1.3; water, 11.1 ± 1.2)"
		}
	}
	if m, ok := p.justBehind(u, all); ok {
		return m, true
	}
	best, ok := mention{}, false
	for _, m := range all {
		if m.end <= u.start && m.start >= previous && !(previous > from && p.claimed(m, previous)) && !p.shut(m.start, u.start) {
			best, ok = m, true
		}
	}
	if ok && best.arm == all[0].arm && len(units) > 1 && contrast.MatchString(p.s[max(from, best.start-30):best.start]) {
		return mention{}, false // "lower than in the water group (12.4 vs 11.1)": the other arm has no name here
	}
	if ok {
		return best, true
	}
	if at+1 < len(units) && u.end <= units[at+1].start && toNext.MatchString(p.stretch(u.end, units[at+1].start)) {
		if m, ok := p.justBehind(units[at+1], all); ok {
			return m, true
		}
	}
	if at > 0 && !contrast.MatchString(p.stretch(previous, u.start)) {
		if m, ok := p.nearest(units, at-1, all, from); ok && m.end <= units[at-1].start {
			return m, true
		}
	}
	if len(distinctArms(all)) > 1 || at > 0 && contrast.MatchString(p.stretch(previous, u.start)) {
		return mention{}, false // "12.4 with syrup vs 11.1": the other arm's
	}
	if all[0].start < u.start {
		return all[0], true
	}
	next := all[0].start
	if at+1 < len(units) {
		next = min(next, units[at+1].start)
	}
	return all[0], inGroup.MatchString(p.stretch(u.end, all[0].start)) && (at+1 == len(units) || !ofOthers.MatchString(p.stretch(u.end, next)))
}

// justBehind gives the arm named right behind a result: "12.4 kg in the syrup group",
// "12.4 kg (syrup group)"; not "12.4 kg (water 11.1 kg)", which names the next.
func (p *para) justBehind(u unit, all []mention) (mention, bool) {
	for _, m := range all {
		if m.start < u.end || m.start-u.end >= 60 {
			continue
		}
		if gap := p.stretch(u.end, m.start); linked.MatchString(gap) && !contrast.MatchString(gap) && !strings.Contains(gap, " and ") || inBracket.MatchString(gap) && !p.valueBehind(m) {
			return m, true
		}
	}
	return mention{}, false
}

// valueBehind reports that a number stands right behind an arm's name.
func (p *para) valueBehind(m mention) bool {
	i := p.token(m.end)
	for i < len(p.r.Tokens) && p.r.Tokens[i].Start < m.end+3 && !isNumber(p.r.Tokens[i]) {
		i++
	}
	return i < len(p.r.Tokens) && p.r.Tokens[i].Start < m.end+4 && isNumber(p.r.Tokens[i])
}

// claimed reports that arm m belongs to the result that ends at byte end: it
// follows it at once, "12.4 kg (SD 1.3) in the syrup arm vs".
func (p *para) claimed(m mention, end int) bool {
	if m.start < end || m.start-end >= 60 {
		return false
	}
	gap := strings.TrimLeft(p.stretch(end, m.start), ")]")
	return linked.MatchString(gap) && !contrast.MatchString(gap) || inBracket.MatchString(gap) && !p.valueBehind(m)
}

// stretch is the text between two bytes; none where they stand the other way round.
func (p *para) stretch(a, b int) string { return p.s[min(a, b):b] }

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
