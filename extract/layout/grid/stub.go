package grid

import "slices"

// spanStubs lets a row heading reach over the rows that have none, where the
// next column holds row headings too: down from its row or, where headings are
// set in the middle of their rows, both ways.
func (rd *reader) spanStubs(g *cellGrid, rows [][]int, head int) {
	if len(rd.cs) < 2 || !rd.labels(1) && !rd.cycle(1) {
		return
	}
	var stubs, open []int // cells of the stub; rows without one
	flush := func() {
		if len(open) > 0 && len(stubs) > 0 {
			rd.spanMiddle(g, stubs, open, rows, head)
		}
		stubs, open = nil, nil
	}
	gaps := false // rows without a heading of their own
	filled := func(k int) bool {
		for col := 1; col <= len(rd.cs); col++ {
			if _, ok := g.at[[2]int{head + k, col}]; ok {
				return true
			}
		}
		return false
	}
	for k := range rows {
		beside := filled(k)
		_, own := g.at[[2]int{head + k, 0}]
		gaps = gaps || beside && !own
	}
	for k := range rows {
		if !filled(k) {
			flush() // a row group of its own
			continue
		}
		if c, ok := g.at[[2]int{head + k, 0}]; ok {
			n := len(stubs)
			if n > 0 && gaps && g.cells[stubs[n-1]].Row == head+k-1 && rd.sameStub(&g.cells[stubs[n-1]], &g.cells[c]) {
				up := &g.cells[stubs[n-1]]
				up.toks = append(up.toks, g.cells[c].toks...)
				g.cells[c].toks = nil
				delete(g.at, [2]int{head + k, 0})
			} else {
				stubs = append(stubs, c)
			}
		}
		open = append(open, k)
	}
	flush()
}

// cycle reports whether the cells of column c come again in the same order, as
// "Mean ± SD, 25%, 75%" or the same doses beside each of several row headings.
func (rd *reader) cycle(c int) bool {
	var texts []string
	for i := rd.head; i < len(rd.lines); i++ {
		for k := range rd.cells[i] {
			if p := &rd.cells[i][k]; p.c0 == c {
				texts = append(texts, p.text)
			}
		}
	}
	for period := 2; period <= 6 && len(texts) >= 2*period; period++ {
		same, plain := 0, 0
		for i := period; i < len(texts); i++ {
			if texts[i] != texts[i-1] && texts[i] == texts[i-period] && !isBlankMark(texts[i]) {
				same++
			}
			if texts[i] == texts[i-1] {
				plain++
			}
		}
		if n := len(texts) - period; same*10 >= n*7 && plain*10 <= n {
			return true
		}
	}
	return false
}

// sameStub reports whether two row headings below one another are one that is
// set beside several rows.
func (rd *reader) sameStub(up, down *gridCell) bool {
	a, b := rd.s.join(up.toks[len(up.toks)-1]), rd.s.join(down.toks[0])
	return unfinishedLabel(a, b) || startsLow(b) && b[0] != '%'
}

// spanMiddle shares the rows of one stretch among its row headings: each has
// the rows that it stands in the middle of or, where that does not come out
// even, those from its own down.
func (rd *reader) spanMiddle(g *cellGrid, stubs, stretch []int, rows [][]int, head int) {
	from, ok := rd.rounds(g, stubs, stretch, head)
	if !ok {
		from, ok = rd.middles(g, stubs, stretch, rows, head)
	}
	if !ok {
		from = nil
		for _, c := range stubs {
			from = append(from, g.cells[c].Row-head)
		}
	}
	for n, c := range stubs {
		cell := &g.cells[c]
		to := stretch[len(stretch)-1]
		if n+1 < len(stubs) {
			to = from[n+1] - 1
		}
		for k := from[n]; k <= to; k++ {
			g.at[[2]int{head + k, 0}] = c
		}
		cell.Row, cell.RowSpan = head+from[n], to-from[n]+1
	}
}

// rounds gives the first row of each row heading where the cells beside come
// again in the same order: each round begins with the same text and has one
// heading, wherever beside its rows that stands.
func (rd *reader) rounds(g *cellGrid, stubs, stretch []int, head int) (from []int, ok bool) {
	text := func(k int) string {
		if c, ok := g.at[[2]int{head + k, 1}]; ok {
			return rd.s.joinLines(g.cells[c].toks)
		}
		return ""
	}
	if len(stubs) < 2 {
		return nil, false
	}
	for _, start := range stretch {
		if start > g.cells[stubs[0]].Row-head {
			break
		}
		first := text(start)
		if first == "" || isBlankMark(first) {
			continue
		}
		from = from[:0]
		for _, k := range stretch {
			if k >= start && text(k) == first {
				from = append(from, k)
			}
		}
		if len(from) == len(stubs) && rd.oneEach(g, stubs, from, head) {
			return from, true
		}
	}
	return nil, false
}

// oneEach reports whether row heading n stands in round n, and every round has
// two rows or more.
func (rd *reader) oneEach(g *cellGrid, stubs, from []int, head int) bool {
	for n, c := range stubs {
		k := g.cells[c].Row - head
		if k < from[n] || n+1 < len(from) && (k >= from[n+1] || from[n+1]-from[n] < 2) {
			return false
		}
	}
	return true
}

// middles gives the first row of each row heading if all of them stand in the
// middle of their rows and not beside the first.
func (rd *reader) middles(g *cellGrid, stubs, stretch []int, rows [][]int, head int) (from []int, ok bool) {
	height := func(k int) int { // of a row, by its second column
		for _, i := range rows[k] {
			for _, p := range rd.cells[i] {
				if p.c0 == 1 {
					return rd.lines[i].base
				}
			}
		}
		return rd.lines[rows[k][0]].base
	}
	// The first rows may have no heading at all.
	for start := stretch[0]; start <= g.cells[stubs[0]].Row-head; start++ {
		if from, ok := rd.middlesFrom(start, g, stubs, stretch[len(stretch)-1], head, height); ok {
			return from, true
		}
	}
	return nil, false
}

// middlesFrom is middles with the first heading's rows beginning at start.
func (rd *reader) middlesFrom(start int, g *cellGrid, stubs []int, last, head int, height func(int) int) (from []int, ok bool) {
	off := false
	for n, c := range stubs {
		cell := &g.cells[c]
		own, next := cell.Row-head, last+1
		if n+1 < len(stubs) {
			next = g.cells[stubs[n+1]].Row - head
		}
		y := 0
		for _, toks := range cell.toks {
			y += rd.s.toks[toks[0]].base
		}
		y /= len(cell.toks)
		off = off || abs(y-height(own))*5 > rd.em || n == 0 && start < own
		best, to := 1<<30, own
		for e := max(own, start); e < next; e++ {
			if d := abs((height(start)+height(e))/2 - y); d < best {
				best, to = d, e
			}
		}
		if best*10 > rd.em*4 {
			return nil, false
		}
		from = append(from, start)
		start = to + 1
	}
	return from, off && start == last+1
}

// indents gives the row headings their steps of indentation. Headings that are
// centred have none, or one below those that are flush left.
func (rd *reader) indents(cells []gridCell, headRows int) {
	var own []*gridCell
	for i := range cells {
		if c := &cells[i]; c.Row >= headRows && c.Col == 0 && c.ColSpan == 1 {
			own = append(own, c)
		}
	}
	if len(own) == 0 {
		return
	}
	xs := make([]int, len(own))
	for i, c := range own {
		xs[i] = rd.left(c)
	}
	slices.Sort(xs)
	steps := []int{xs[0]}
	for _, x := range xs {
		if x-steps[len(steps)-1] > rd.em*35/100 {
			steps = append(steps, x)
		}
	}
	if len(steps) > 1 {
		flush := func(c *gridCell) bool { return rd.left(c)-xs[0] <= rd.em*35/100 }
		inner := slices.DeleteFunc(slices.Clone(own), flush)
		switch {
		case rd.centred(own) == len(own) && len(own) >= 3:
			return
		case len(steps) > 2 && len(inner) >= 3 && rd.centred(inner)*10 >= len(inner)*8:
			if flushed := len(own) - len(inner); flushed == 1 && rd.centred(own)*10 >= len(own)*8 {
				return // the longest of them
			}
			for _, c := range inner {
				c.Indent = 1
			}
			return
		case len(steps) > 6:
			return // ragged: the left edge says nothing
		}
	}
	for _, c := range own {
		for k := range steps {
			if rd.left(c) >= steps[k] {
				c.Indent = k
			}
		}
	}
}

// left is where the text of a cell begins.
func (rd *reader) left(c *gridCell) int { return rd.s.toks[c.toks[0][0]].x0 }

// centred counts the cells that share the most usual middle.
func (rd *reader) centred(cells []*gridCell) int {
	mids := make([]int, len(cells))
	for i, c := range cells {
		first := c.toks[0]
		mids[i] = (rd.left(c) + rd.s.toks[first[len(first)-1]].x1) / 2
	}
	slices.Sort(mids)
	n := 0
	for _, m := range mids {
		if abs(m-mids[len(mids)/2])*10 <= rd.em*3 {
			n++
		}
	}
	return n
}
