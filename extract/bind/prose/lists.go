package prose

import (
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// lists pairs the intervals of a list with the estimates of the list before it:
// "81% and 64% (95% CI 70–89 and 52–75, respectively)".
func (p *para) lists() {
	for i := 0; i < len(p.cands); i++ {
		j := i + 1
		for j < len(p.cands) && (p.r.Items[p.cands[j].item].Follows || p.inOneBracket(&p.cands[i], &p.cands[j])) {
			j++
		}
		if j-i > 1 {
			p.pair(p.cands[i:j])
		}
		i = j - 1
	}
}

var setAgainst = pattern.MustCompile(`(?i)^\s*[,;]?\s*(?:versus|vs\.?|and)\s*$`)

// inOneBracket reports two intervals that one bracket sets against each other,
// "(95% CI −1.9 to −0.5 versus 95% CI −1.2 to 0.3)": they belong to two estimates
// before it.
func (p *para) inOneBracket(a, b *cand) bool {
	x, y := &p.r.Items[a.item], &p.r.Items[b.item]
	return a.given == result.CI && b.given == result.CI && x.Bracket > 0 && x.Bracket == y.Bracket && x.End <= y.Start &&
		p.r.Brackets[x.Bracket-1].Start >= a.est.End && setAgainst.MatchString(p.s[x.End:y.Start])
}

// pair gives the last numbers before the list to its intervals, in order, where
// each then lies in its bounds.
func (p *para) pair(list []cand) {
	from, _ := p.sentence(p.r.Items[list[0].item].Start)
	at := len(list) - 1
	picked := make([]int, len(list))
	for k := list[0].item - 1; k >= 0 && at >= 0 && p.r.Items[k].Start >= from; k-- {
		if _, ok := p.estimable(k); ok && timeLike(p, k) < 3 {
			picked[at] = k
			at--
		}
	}
	if at >= 0 {
		return
	}
	var fits [outside + 1]int
	for i := range list {
		n, _ := p.estimable(picked[i])
		if f, ok := n.Float(); ok {
			fits[p.within(&list[i], f)]++
		}
	}
	if fits[inside] < len(list) && fits[flipped] < len(list) { // "fell by 1.2 and 0.9 (95% CI −1.9 to −0.5 and …)"
		return
	}
	for i := range list {
		list[i].est, _ = p.estimable(picked[i])
		list[i].estItem, list[i].flags = picked[i], nil
		p.note(&list[i])
	}
}
