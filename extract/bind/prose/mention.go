package prose

import (
	"sort"
	"strings"

	"halfspan/extract/grammar"
)

// mention is an arm named in a sentence.
type mention struct {
	arm        int
	start, end int
}

// mentions finds the arms named between two bytes, the longest name first, in
// order of place.
func (p *para) mentions(from, to int) []mention {
	if start, end := p.sentence(from); start == from && end == to {
		if got, ok := p.arms[from]; ok {
			return got
		}
		got := p.mentionsIn(from, to)
		p.arms[from] = got
		return got
	}
	return p.mentionsIn(from, to)
}

func (p *para) mentionsIn(from, to int) []mention {
	toks := p.r.Tokens
	var out []mention
	for i := p.token(from); i < len(toks) && toks[i].Start < to; i++ {
		if toks[i].Kind != grammar.TokWord && toks[i].Kind != grammar.TokNumber {
			continue
		}
		if a, ok := p.sharedDose(i); ok {
			out = append(out, mention{a, toks[i].Start, toks[i].End})
			continue
		}
		best, bestEnd, bestLen := -1, i, 0
		for _, k := range p.f.cast.first[toks[i].Value] {
			name := p.f.cast.names[k]
			arm := &p.f.cast.arms[name.arm]
			if len(name.key) <= bestLen {
				continue
			}
			if end, ok := p.named(i, name.key, arm); ok && (arm.seen > 1 || len(arm.sizes) > 0 || groupNoun[p.r.Tokens[end-1].Value]) {
				best, bestEnd, bestLen = name.arm, end, len(name.key)
			}
		}
		if best >= 0 {
			out = append(out, mention{best, toks[i].Start, toks[bestEnd-1].End})
			i = bestEnd - 1
		}
	}
	sort.SliceStable(out, func(a, b int) bool { return out[a].start < out[b].start })
	return out
}

var groupNoun = map[string]bool{"group": true, "groups": true, "arm": true, "arms": true}

// named reports whether the arm's words begin at token i. A single word must be
// followed by "group" or "arm", or be a name that is printed with its size or
// in capitals.
func (p *para) named(i int, key []string, a *arm) (int, bool) {
	toks := p.r.Tokens
	k := i
	for _, w := range key {
		for k < len(toks) && k > i && (toks[k].Kind == grammar.TokDash || toks[k].Kind == grammar.TokSlash || weakName[toks[k].Value] || toks[k].Value == "and" || toks[k].Kind == grammar.TokPlus) {
			k++
		}
		if k >= len(toks) || toks[k].Value != w {
			return i, false
		}
		k++
	}
	if k < len(toks) && (weakName[toks[k].Value]) {
		return k + 1, true
	}
	if len(key) > 1 || len(a.sizes) > 0 && a.group && !ofGroup[key[0]] {
		return k, true
	}
	if ofGroup[key[0]] {
		return k, p.groupAhead(k)
	}
	if k+1 < len(toks) && toks[k].Kind == grammar.TokOpen && toks[k+1].Value == "n" {
		return k, true // "syrup (n = 42)"
	}
	printed := p.s[toks[i].Start:toks[i].End]
	return k, strings.ToUpper(printed) == printed && len(printed) > 1
}

func isNumber(t grammar.Token) bool { return t.Kind == grammar.TokNumber }

// sharedDose reads the first of "the 10- and 15-mg groups": a dose whose unit
// stands behind the next one.
func (p *para) sharedDose(i int) (arm int, ok bool) {
	toks := p.r.Tokens
	if !isNumber(toks[i]) {
		return 0, false
	}
	const far = 8
	for k := i + 1; k < len(toks) && k < i+far; k++ {
		switch t := toks[k]; {
		case isNumber(t), t.Kind == grammar.TokDash, t.Kind == grammar.TokComma, t.Value == "and", t.Value == "or":
		case t.Kind == grammar.TokWord && unitWords[t.Value] && k > i+2:
			a, ok := p.f.cast.names[toks[i].Value+" "+t.Value]
			return a.arm, ok
		default:
			return 0, false
		}
	}
	return 0, false
}

// groupAhead reports that the word group follows within a list of names: "the
// study and control groups", "treatment vs. control arms".
func (p *para) groupAhead(k int) bool {
	const far = 6
	for i := k; i < len(p.r.Tokens) && i < k+far; i++ {
		switch t := p.r.Tokens[i]; {
		case groupNoun[t.Value]:
			return true
		case t.Kind == grammar.TokNumber, t.Kind == grammar.TokPeriod, t.Value == "in", t.Value == "of", t.Value == "the", t.Value == "with", t.Value == "by", t.Value == "to":
			return false
		}
	}
	return false
}
