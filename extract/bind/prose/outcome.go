package prose

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

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
