package layout

import (
	"cmp"
	"slices"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/layout/words"
)

// stack is what stands in one column between the same gutters, from top to
// bottom.
type stack struct {
	lines       []line
	x0, x1      int // of the column: from gutter to gutter where there are any
	top, bot    int
	side        bool // a narrow side column
	left, right int
}

// columns cuts the lines of a sheet at its gutters, joins what stands on one
// baseline of one column and gives the stacks in reading order.
func (s *sheet) columns() []stack {
	s.cutAtGutters()
	s.dropCaps()
	s.place()
	s.joinRows()
	stacks := s.stacks()
	markSides(stacks)
	ordered := order(stacks)
	// Side notes are read after the page's text.
	slices.SortStableFunc(ordered, func(a, b stack) int {
		switch {
		case a.side == b.side:
			return 0
		case a.side:
			return 1
		}
		return -1
	})
	return ordered
}

// markSides marks the narrow columns in smaller print beside the text: notes
// on how to cite a paper, its dates and editors.
func markSides(stacks []stack) {
	for i := range stacks {
		a := &stacks[i]
		width, size, table := a.extent()
		if a.left >= 0 && a.right >= 0 || a.left < 0 && a.right < 0 || len(a.lines) < 3 || table {
			continue
		}
		for k := range stacks {
			b := &stacks[k]
			w, z, _ := b.extent()
			if i != k && a.top < b.bot && b.top < a.bot && w*10 >= width*15 && size*100 <= z*94 && len(b.lines) >= len(a.lines)/2 {
				a.side = true
				break
			}
		}
	}
}

// extent is the printed width of a stack and its usual font size; table says
// that a table stands in it.
func (st *stack) extent() (width, size int, table bool) {
	x0, x1 := st.lines[0].x0, st.lines[0].x1
	sizes := map[int]int{}
	for i := range st.lines {
		l := &st.lines[i]
		x0, x1 = min(x0, l.x0), max(x1, l.x1)
		sizes[l.size] += l.glyphs
		table = table || l.table != nil
	}
	return x1 - x0, commonest(sizes), table
}

// dropCaps puts the large first letter of a text, which reaches down over
// several lines, before the rest of its word.
func (s *sheet) dropCaps() {
	kept := s.lines[:0]
	for i := range s.lines {
		c := s.lines[i]
		if host := s.capHost(&c); host != nil {
			if r, _ := utf8.DecodeRuneInString(host.words[0].Text); unicode.IsLower(r) || unicode.IsUpper(r) && len(host.words[0].Text) > 1 {
				host.words[0].Glued = true
			}
			l := s.line(append(slices.Clone(c.words), host.words...))
			l.base, l.size, l.top, l.bot, l.furniture = host.base, host.size, host.top, host.bot, host.furniture
			l.x0 = host.x0 // the line begins where its letters do, so that it is not set in
			*host = l
			continue
		}
		kept = append(kept, c)
	}
	s.lines = kept
}

// capHost is the line that a drop cap belongs to, nil where c is none.
func (s *sheet) capHost(c *line) *line {
	if c.table != nil || c.furniture || len(c.words) != 1 || c.glyphs != 1 {
		return nil
	}
	if r, _ := utf8.DecodeRuneInString(c.words[0].Text); !unicode.IsUpper(r) {
		return nil
	}
	for i := range s.lines {
		h := &s.lines[i]
		near := h.x0 >= c.x1-h.size/2 && h.x0-c.x1 <= h.size
		// Its foot stands on the second or third baseline; its head is level with the first line.
		if h.table == nil && !h.furniture && len(h.words) > 2 && near && c.size*10 >= h.size*18 &&
			h.base < c.base && c.base-h.base <= 4*h.size && abs((c.base-c.size*7/10)-(h.base-h.size*7/10)) <= h.size*6/10 {
			return h
		}
	}
	return nil
}

// cutAtGutters splits lines that reach over a gutter.
func (s *sheet) cutAtGutters() {
	var out []line
	for _, l := range s.lines {
		rest := l
		for gi := range s.gutters {
			g := &s.gutters[gi]
			if l.table != nil || !g.covers(l.mid()) || g.x1 <= rest.x0 || g.x0 >= rest.x1 {
				continue
			}
			k := slices.IndexFunc(rest.words, func(w *words.Word) bool { return int(w.Box.X0) >= g.x0+cell/2 })
			if k <= 0 || int(rest.words[k-1].Box.X1) > g.x1 {
				continue
			}
			a, b := s.line(rest.words[:k]), s.line(rest.words[k:])
			a.furniture, b.furniture = l.furniture, l.furniture
			out = append(out, a)
			rest = b
		}
		out = append(out, rest)
	}
	s.lines = out
}

// place notes the gutters that stand beside each line.
func (s *sheet) place() {
	for i := range s.lines {
		l := &s.lines[i]
		l.left, l.right = -1, -1
		for gi := range s.gutters {
			g := &s.gutters[gi]
			if !g.covers(l.mid()) && !(l.table != nil && g.top < l.bot && l.top < g.bot) {
				continue
			}
			switch mid := (g.x0 + g.x1) / 2; {
			case mid <= l.x0+cell && (l.left < 0 || g.x0 > s.gutters[l.left].x0):
				l.left = gi
			case mid >= l.x1-cell && (l.right < 0 || g.x0 < s.gutters[l.right].x0):
				l.right = gi
			}
		}
	}
}

// joinRows joins the lines that stand on one baseline between the same gutters.
func (s *sheet) joinRows() {
	slices.SortStableFunc(s.lines, func(a, b line) int {
		return cmp.Or(cmp.Compare(a.base, b.base), cmp.Compare(a.x0, b.x0))
	})
	gone := make([]bool, len(s.lines))
	for i := range s.lines {
		if gone[i] || s.lines[i].table != nil {
			continue
		}
		a := &s.lines[i]
		var parts []int
		for k := i + 1; k < len(s.lines); k++ {
			b := &s.lines[k]
			if (b.base-a.base)*5 > min(a.size, b.size) {
				break
			}
			if !gone[k] && b.table == nil && a.left == b.left && a.right == b.right && a.furniture == b.furniture && s.clear(b, i, parts) {
				parts = append(parts, k)
			}
		}
		if len(parts) == 0 {
			continue
		}
		ws := slices.Clone(a.words)
		for _, k := range parts {
			ws, gone[k] = append(ws, s.lines[k].words...), true
		}
		slices.SortStableFunc(ws, func(a, b *words.Word) int { return cmp.Compare(a.Box.X0, b.Box.X0) })
		n := s.line(ws)
		n.furniture, n.left, n.right = a.furniture, a.left, a.right
		s.lines[i] = n
	}
	kept := s.lines[:0]
	for i := range s.lines {
		if !gone[i] {
			kept = append(kept, s.lines[i])
		}
	}
	s.lines = kept
}

// clear reports whether b is printed beside, not over, line i and the parts
// already joined to it.
func (s *sheet) clear(b *line, i int, parts []int) bool {
	over := func(o *line) bool { return min(o.x1, b.x1)-max(o.x0, b.x0) > b.size }
	return !over(&s.lines[i]) && !slices.ContainsFunc(parts, func(k int) bool { return over(&s.lines[k]) })
}

// stacks groups the lines by the gutters beside them and cuts a group where
// lines of another one come between.
func (s *sheet) stacks() []stack {
	type key struct{ left, right int }
	var keys []key
	groups := map[key][]int{}
	for i := range s.lines {
		k := key{s.lines[i].left, s.lines[i].right}
		if _, ok := groups[k]; !ok {
			keys = append(keys, k)
		}
		groups[k] = append(groups[k], i)
	}
	var out []stack
	for _, k := range keys {
		var cur *stack
		for _, i := range groups[k] {
			l := s.lines[i]
			if cur != nil && s.between(cur, &l) {
				out = append(out, *cur)
				cur = nil
			}
			if cur == nil {
				cur = &stack{x0: l.x0, x1: l.x1, top: l.top, bot: l.bot, left: k.left, right: k.right}
			}
			cur.lines = append(cur.lines, l)
			cur.x0, cur.x1 = min(cur.x0, l.x0), max(cur.x1, l.x1)
			cur.top, cur.bot = min(cur.top, l.top), max(cur.bot, l.bot)
		}
		if cur != nil {
			out = append(out, *cur)
		}
	}
	for i := range out {
		st := &out[i]
		if st.left >= 0 {
			st.x0 = (s.gutters[st.left].x0 + s.gutters[st.left].x1) / 2
		}
		if st.right >= 0 {
			st.x1 = (s.gutters[st.right].x0 + s.gutters[st.right].x1) / 2
		}
	}
	return out
}

// between reports whether a line of another group stands below the stack and
// above l, over or under them.
func (s *sheet) between(st *stack, l *line) bool {
	x0, x1 := min(st.x0, l.x0), max(st.x1, l.x1)
	last := st.lines[len(st.lines)-1].base
	lo, _ := slices.BinarySearchFunc(s.lines, last, func(o line, y int) int { return cmp.Compare(o.base, y) })
	for i := lo; i < len(s.lines) && s.lines[i].base <= l.base; i++ {
		o := &s.lines[i]
		if (o.left != l.left || o.right != l.right) && o.x0 < x1 && x0 < o.x1 && o.base > last && o.base < l.base {
			return true
		}
	}
	return false
}

const maxStacks = 160 // ordered by rule; more are only sorted, a figure made of words

// order sorts stacks as they are read: what stands above first where two share
// a width, what stands left first where nothing over both comes between.
func order(in []stack) []stack {
	slices.SortStableFunc(in, func(a, b stack) int {
		return cmp.Or(cmp.Compare(a.top, b.top), cmp.Compare(a.x0, b.x0))
	})
	n := len(in)
	if n < 2 || n > maxStacks {
		return in
	}
	before := make([][]bool, n)
	for i := range before {
		before[i] = make([]bool, n)
		for j := range in {
			before[i][j] = i != j && precedes(in, i, j)
		}
	}
	out := make([]stack, 0, n)
	done := make([]bool, n)
	for len(out) < n {
		pick := -1
		for i := 0; i < n && pick < 0; i++ {
			if done[i] {
				continue
			}
			pick = i
			for j := range in {
				if !done[j] && before[j][i] {
					pick = -1
					break
				}
			}
		}
		if pick < 0 { // a ring: the topmost goes first
			pick = slices.Index(done, false)
		}
		done[pick] = true
		out = append(out, in[pick])
	}
	return out
}

func precedes(in []stack, i, j int) bool {
	a, b := &in[i], &in[j]
	if share(a, b) {
		return a.top < b.top || a.top == b.top && i < j
	}
	if a.x0 >= b.x0 {
		return false
	}
	// a is left of b: first, unless something over or under both lies between.
	top, bot := min(a.bot, b.bot), max(a.top, b.top)
	if a.top < b.bot && b.top < a.bot {
		return true
	}
	for k := range in {
		if c := &in[k]; k != i && k != j && c.top < bot && c.bot > top && share(a, c) && share(b, c) {
			return a.top < b.top
		}
	}
	return true
}

// share reports whether two stacks share a stretch of width worth the name.
func share(a, b *stack) bool {
	return min(a.x1, b.x1)-max(a.x0, b.x0) > 3*cell/2
}
