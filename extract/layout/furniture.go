package layout

import (
	"cmp"
	"slices"
	"strings"

	"halfspan/extract/layout/words"
)

// margin is a line that stands near the edge of its frame.
type margin struct {
	page, line int
	key        string // its text with every number as '#'
	base       int
	x0         int
}

const (
	edgeRows = 4   // rows looked at from the top and from the foot of a page
	sameSpot = 300 // how far a repeated line may move, 1/100 point
)

// markFurniture marks what repeats from page to page at the edges: running
// heads, page numbers, download lines.
func markFurniture(pages [][]sheet) {
	for dir := range 5 {
		repeated(pages, dir)
	}
	for p := range pages {
		for i := range pages[p] {
			pages[p][i].markLineNumbers()
		}
	}
}

// repeated works on the sheets of one direction, row by row inwards.
func repeated(pages [][]sheet, dir int) {
	rows := make([][][]int, len(pages)) // of each page: rows of line indices, from the top
	at := make([]*sheet, len(pages))
	for p := range pages {
		for i := range pages[p] {
			if s := &pages[p][i]; dirOf(&s.frame) == dir {
				at[p], rows[p] = s, s.rows()
			}
		}
	}
	for _, fromTop := range []bool{true, false} {
		open := make([]bool, len(pages))
		for p := range open {
			open[p] = at[p] != nil
		}
		for depth := range edgeRows {
			var all []margin
			for p := range pages {
				if at[p] == nil || depth >= len(rows[p]) {
					continue
				}
				for _, li := range rows[p][rowAt(fromTop, depth, len(rows[p]))] {
					l := &at[p].lines[li]
					all = append(all, margin{p, li, keyOf(l.text()), l.base, l.x0})
				}
				// The same head may stand one row deeper on another page.
				for d := range edgeRows {
					if d == depth || d >= len(rows[p]) {
						continue
					}
					for _, li := range rows[p][rowAt(fromTop, d, len(rows[p]))] {
						l := &at[p].lines[li]
						all = append(all, margin{p, -1, keyOf(l.text()), l.base, l.x0})
					}
				}
			}
			markRepeats(at, all, open, len(pages))
			for p := range pages {
				if open[p] && depth < len(rows[p]) {
					open[p] = at[p].settleRow(rows[p][rowAt(fromTop, depth, len(rows[p]))])
				}
			}
		}
	}
}

// settleRow keeps the marks of a row only where they cover a good part of it:
// a short word of running text may come back on the same spot, too. It reports
// whether the whole row is furniture.
func (s *sheet) settleRow(row []int) bool {
	marked, all := 0, 0
	for _, i := range row {
		all += s.lines[i].glyphs
		if s.lines[i].furniture {
			marked += s.lines[i].glyphs
		}
	}
	if marked*10 < all*4 {
		for _, i := range row {
			s.lines[i].furniture = false
		}
		return false
	}
	return marked == all
}

func rowAt(fromTop bool, depth, n int) int {
	if fromTop {
		return depth
	}
	return n - 1 - depth
}

// markRepeats marks the margins (with a line index) whose key comes back at
// the same height on enough other pages.
func markRepeats(at []*sheet, all []margin, open []bool, pages int) {
	slices.SortStableFunc(all, func(a, b margin) int {
		return cmp.Or(cmp.Compare(a.key, b.key), cmp.Compare(a.base, b.base), cmp.Compare(a.page, b.page))
	})
	for i := range all {
		m := &all[i]
		if m.line < 0 || !open[m.page] || at[m.page].lines[m.line].furniture || reports(m.key) {
			continue
		}
		need := 2
		if pages >= 10 || m.key == "#" && pages > 4 {
			need = 3
		}
		seen := []int{m.page}
		add := func(page int) {
			if !slices.Contains(seen, page) {
				seen = append(seen, page)
			}
		}
		for k := i - 1; k >= 0 && len(seen) < need && all[k].key == m.key && m.base-all[k].base <= sameSpot; k-- {
			add(all[k].page)
		}
		for k := i + 1; k < len(all) && len(seen) < need && all[k].key == m.key && all[k].base-m.base <= sameSpot; k++ {
			add(all[k].page)
		}
		if len(seen) >= need {
			at[m.page].lines[m.line].furniture = true
		}
	}
}

// reports reports whether a text (in lower case) may be of a table or hold a
// result: such lines repeat, too, where one layout of table comes again and again.
func reports(key string) bool {
	return strings.HasPrefix(key, "table") || strings.ContainsAny(key, "±<=") && !strings.Contains(key, "http") ||
		strings.Contains(key, "mean") || strings.Contains(key, "95%") || strings.Contains(key, "# (#") ||
		strings.Contains(key, "#(#") && strings.Trim(key, "#()%.,-–− ") == ""
}

// rows groups the lines of a sheet by baseline, from the top.
func (s *sheet) rows() [][]int {
	idx := make([]int, len(s.lines))
	for i := range idx {
		idx[i] = i
	}
	slices.SortStableFunc(idx, func(a, b int) int { return cmp.Compare(s.lines[a].base, s.lines[b].base) })
	var out [][]int
	base := 0
	for _, i := range idx {
		l := &s.lines[i]
		if len(out) == 0 || l.base-base > max(l.size/4, cell) {
			out, base = append(out, nil), l.base
		}
		out[len(out)-1] = append(out[len(out)-1], i)
	}
	return out
}

// keyOf is a text in lower case with each run of digits as '#'.
func keyOf(text string) string {
	var b strings.Builder
	b.Grow(len(text))
	digits := false
	for _, r := range strings.ToLower(text) {
		d := r >= '0' && r <= '9'
		if d && !digits {
			b.WriteByte('#')
		}
		if !d {
			b.WriteRune(r)
		}
		digits = d
	}
	return strings.TrimSpace(b.String())
}

func dirOf(f *words.Frame) int {
	if f.Oblique {
		return 4
	}
	return int(f.Angle / 90)
}

// markLineNumbers marks the numbers that manuscripts print beside each line or
// each fifth one: whole numbers in one upright column at the side, rising by a
// fixed step.
func (s *sheet) markLineNumbers() {
	type num struct{ line, value int }
	byRight := map[int][]num{}
	var rights []int
	for i := range s.lines {
		l := &s.lines[i]
		v, ok := wholeNumber(l)
		if !ok {
			continue
		}
		k := l.x1 / 300
		if byRight[k] == nil {
			rights = append(rights, k)
		}
		byRight[k] = append(byRight[k], num{i, v})
	}
	slices.Sort(rights)
	for _, k := range rights {
		nums := slices.Concat(byRight[k], byRight[k+1])
		if len(nums) < 8 {
			continue
		}
		slices.SortStableFunc(nums, func(a, b num) int { return cmp.Compare(s.lines[a.line].base, s.lines[b.line].base) })
		step, even := nums[1].value-nums[0].value, 0
		for i := 1; i < len(nums); i++ {
			if nums[i].value-nums[i-1].value == step {
				even++
			}
		}
		if step < 1 || step > 10 || even*10 < (len(nums)-1)*9 || !s.outermost(nums[0].line) {
			continue
		}
		for _, n := range nums {
			s.lines[n.line].furniture, s.lines[n.line].lineNumber = true, true
		}
	}
}

func wholeNumber(l *line) (int, bool) {
	if len(l.words) != 1 || len(l.words[0].Text) > 5 {
		return 0, false
	}
	v := 0
	for _, r := range l.words[0].Text {
		if r < '0' || r > '9' {
			return 0, false
		}
		v = v*10 + int(r-'0')
	}
	return v, true
}

// outermost reports whether nothing that is no number stands further out than
// the line on its side.
func (s *sheet) outermost(i int) bool {
	l := &s.lines[i]
	leftOut, rightOut := true, true
	for k := range s.lines {
		o := &s.lines[k]
		if _, ok := wholeNumber(o); ok || o.furniture {
			continue
		}
		leftOut, rightOut = leftOut && o.x0 > l.x1, rightOut && o.x1 < l.x0
	}
	return leftOut || rightOut
}
