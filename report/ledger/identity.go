package ledger

import (
	"cmp"
	"fmt"
	"slices"

	"halfspan/extract/result"
)

// known is a result whose id is given already.
type known struct {
	id     string
	anchor result.Anchor
}

// match pairs anchors of one paper's content: for each of news the index of the
// old it is the same result as, or -1. Of several that meet, the nearest pair
// first, then in order.
func match(olds, news []result.Anchor) []int {
	type pair struct {
		distance int64
		old, new int
	}
	type shelf struct {
		page, offset int
		digits       string
	}
	shelfOf := func(a result.Anchor) shelf {
		if a.Page == 0 {
			return shelf{offset: a.Offset}
		}
		return shelf{page: a.Page, digits: a.Digits}
	}
	shelves := map[shelf][]int{}
	for i, a := range olds {
		shelves[shelfOf(a)] = append(shelves[shelfOf(a)], i)
	}
	var pairs []pair
	for k, a := range news {
		for _, i := range shelves[shelfOf(a)] {
			if d, ok := a.Meets(olds[i]); ok {
				pairs = append(pairs, pair{d, i, k})
			}
		}
	}
	slices.SortFunc(pairs, func(a, b pair) int {
		return cmp.Or(cmp.Compare(a.distance, b.distance), a.new-b.new, a.old-b.old)
	})
	matched := make([]int, len(news))
	for k := range matched {
		matched[k] = -1
	}
	taken := make([]bool, len(olds))
	for _, p := range pairs {
		if matched[p.new] < 0 && !taken[p.old] {
			matched[p.new], taken[p.old] = p.old, true
		}
	}
	return matched
}

// withKeptIDs returns the items of one paper with the ids of the known results
// they are; a result that is new keeps the id it came with, or gets another
// where that is taken. Mates are renamed along.
func withKeptIDs(sha256 string, items []Item, olds []known) []Item {
	oldAnchors := make([]result.Anchor, len(olds))
	for i, k := range olds {
		oldAnchors[i] = k.anchor
	}
	anchors := make([]result.Anchor, len(items))
	for i := range items {
		anchors[i] = items[i].Working.Anchor
	}
	taken := map[string]bool{}
	ids := make([]string, len(items))
	matched := match(oldAnchors, anchors)
	for i, m := range matched {
		if m >= 0 {
			ids[i] = olds[m].id
			taken[ids[i]] = true
		}
	}
	renamed := map[string]string{}
	for i := range items {
		came := items[i].Working.Record.ID
		if ids[i] == "" {
			ids[i] = came
			for k := 2; ids[i] == "" || taken[ids[i]]; k++ {
				ids[i] = anchors[i].Name(fmt.Sprintf("%s#%d", sha256, k))
			}
			taken[ids[i]] = true
		}
		renamed[came] = ids[i]
	}
	out := slices.Clone(items)
	for i := range out {
		r := &out[i].Working.Record
		r.ID = ids[i]
		r.Mates = slices.Clone(r.Mates)
		for k, m := range r.Mates {
			if to, ok := renamed[m]; ok {
				r.Mates[k] = to
			}
		}
	}
	return out
}
