package words

import (
	"cmp"
	"slices"

	"halfspan/extract/paper"
)

// maxHosts is how many chunks above and below a chunk are looked at: a page has
// some ten within reach, a figure made of letters thousands.
const maxHosts = 300

// attachShifted finds the chunks that are superscripts or subscripts of a line
// and moves them into its row.
//
// A host is a chunk with larger glyphs (or of any size for one to three glyphs
// that hang clear of the baseline) whose baseline is near and that has a glyph
// ending where the shifted chunk begins, or beginning where it ends.
func attachShifted(chunks []chunk) {
	byBase := make([]int, len(chunks))
	for i := range byBase {
		byBase[i] = i
	}
	slices.SortStableFunc(byBase, func(a, b int) int { return cmp.Compare(chunks[a].base, chunks[b].base) })
	host := make([]int, len(chunks))
	for at, i := range byBase {
		c := &chunks[i]
		best, bestCost := -1, 0
		consider := func(j int) bool {
			h := &chunks[j]
			// No host is more than 3 times as large.
			if abs(h.base-c.base) > 3*c.size {
				return false
			}
			if h.row == c.row || shiftOf(c, h) == 0 {
				return true
			}
			if cost, ok := beside(c, h); ok {
				if cost = cost*4 + abs(c.base-h.base); best < 0 || cost < bestCost || cost == bestCost && j < best {
					best, bestCost = j, cost
				}
			}
			return true
		}
		for k := at - 1; k >= 0 && k >= at-maxHosts && consider(byBase[k]); k-- {
		}
		for k := at + 1; k < len(byBase) && k <= at+maxHosts && consider(byBase[k]); k++ {
		}
		host[i] = best
	}
	for i := range chunks {
		if host[i] < 0 {
			continue
		}
		chunks[i].shift = shiftOf(&chunks[i], &chunks[host[i]])
		// A mark on a mark goes where its host goes.
		h := host[i]
		for steps := 0; host[h] >= 0 && steps < 3; steps++ {
			h = host[h]
		}
		chunks[i].row = chunks[h].row
	}
}

// shiftOf says how chunk c would be shifted against host h, 0 for not at all.
func shiftOf(c, h *chunk) paper.StyleKind {
	smaller := c.size*100 <= h.size*88
	short := len(c.items) <= 3 && c.size <= h.size && len(h.items) > len(c.items)
	if !smaller && !short || h.size > 3*c.size {
		return 0
	}
	switch d := (c.base - h.base) * 100 / h.size; {
	case smaller && d >= 10 && d <= 75, short && d >= 20 && d <= 60:
		return paper.Raised
	case smaller && d <= -6 && d >= -45, short && d <= -15 && d >= -35:
		return paper.Lowered
	}
	return 0
}

// beside tells whether c stands directly after or before a glyph of h, and how
// far off.
func beside(c, h *chunk) (int, bool) {
	near, tuck := h.size*45/100, h.size*30/100
	if c.x0 > h.x1+near || c.x1 < h.x0-near {
		return 0, false
	}
	// The first glyph of h that begins right of c's left edge.
	k, _ := slices.BinarySearchFunc(h.items, c.x0+1, func(it item, x int) int { return cmp.Compare(it.x0, x) })
	best, ok := 0, false
	try := func(gap int) {
		if gap < -tuck || gap > near {
			return
		}
		if gap = abs(gap); !ok || gap < best {
			best, ok = gap, true
		}
	}
	if k > 0 {
		try(c.x0 - h.items[k-1].x1)
	}
	if k < len(h.items) {
		if k > 0 && h.items[k].x0 < c.x1-tuck {
			// c stands over the next glyph: printed above the line, not in it.
			return 0, false
		}
		try(h.items[k].x0 - c.x1)
	}
	return best, ok
}
