package prose

import (
	"sort"

	"halfspan/extract/pattern"
)

// longest is how many bytes a sentence may have; a longer one is cut between
// tokens. Sentences of papers stay far below, and all looking around is bounded
// by it.
const longest = 2500

// items gives the indices [i, j) of the items that begin between two bytes.
func (p *para) items(from, to int) (i, j int) {
	i = sort.Search(len(p.r.Items), func(k int) bool { return p.r.Items[k].Start >= from })
	j = i + sort.Search(len(p.r.Items)-i, func(k int) bool { return p.r.Items[i+k].Start >= to })
	return i, j
}

// found gives the indices [i, j) of the candidates whose spread begins between
// two bytes.
func (p *para) found(from, to int) (i, j int) {
	at := func(k int) int { return p.r.Items[p.cands[k].item].Start }
	i = sort.Search(len(p.cands), func(k int) bool { return at(k) >= from })
	j = i + sort.Search(len(p.cands)-i, func(k int) bool { return at(i+k) >= to })
	return i, j
}

// cutLong adds ends where a sentence is longer than may be.
func (p *para) cutLong() {
	var out []int
	start := 0
	for _, end := range p.ends {
		for end-start > longest {
			i := p.token(start + longest)
			if i >= len(p.r.Tokens) || p.r.Tokens[i].Start >= end {
				break
			}
			start = p.r.Tokens[i].Start
			out = append(out, start)
		}
		out = append(out, end)
		start = end
	}
	p.ends = out
}

// fact is one pattern asked of one sentence, by where it starts.
type fact struct {
	from int
	what *pattern.Pattern
}

// says reports whether the sentence that holds byte b matches a pattern. Each
// sentence is asked once, however many results stand in it.
func (p *para) says(b int, what *pattern.Pattern) bool {
	from, to := p.sentence(b)
	got, known := p.facts[fact{from, what}]
	if !known {
		got = what.MatchString(p.s[from:to])
		p.facts[fact{from, what}] = got
	}
	return got
}

// matches gives the places of a pattern in the sentence that holds byte b, each
// as the standard library gives submatches, from the block's beginning.
func (p *para) matches(b int, what *pattern.Pattern) [][]int {
	from, to := p.sentence(b)
	got, known := p.places[fact{from, what}]
	if !known {
		got = what.FindAllStringSubmatchIndex(p.s[from:to], -1)
		for _, m := range got {
			for i := range m {
				if m[i] >= 0 {
					m[i] += from
				}
			}
		}
		p.places[fact{from, what}] = got
	}
	return got
}
