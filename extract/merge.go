package extract

import (
	"sort"

	"halfspan/extract/result"
)

// merge brings the results of the text and of the tables into reading order:
// by page, and by byte offset where the format has no pages. Mates keep
// pointing at the same results.
func merge(parts ...[]result.Result) []result.Result {
	var all []result.Result
	for _, p := range parts {
		base := len(all)
		for _, r := range p {
			mates := make([]int, len(r.Mates))
			for k, m := range r.Mates {
				mates[k] = m + base
			}
			r.Mates = mates
			all = append(all, r)
		}
	}
	order := make([]int, len(all))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(i, k int) bool {
		a, b := &all[order[i]], &all[order[k]]
		if a.Page != b.Page {
			return a.Page < b.Page
		}
		return a.Page == 0 && a.Anchor.Offset < b.Anchor.Offset
	})
	at := make([]int, len(all))
	for now, was := range order {
		at[was] = now
	}
	out := make([]result.Result, len(all))
	for now, was := range order {
		out[now] = all[was]
		for k, m := range out[now].Mates {
			out[now].Mates[k] = at[m]
		}
		sort.Ints(out[now].Mates)
	}
	return out
}
