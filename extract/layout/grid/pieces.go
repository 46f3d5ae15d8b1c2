package grid

// piece is what a cell has on one line.
type piece struct {
	run
	c0, c1 int // first and last column it stands in
	line   int
	text   string
	figure bool
}

// column is the number of the column that x stands in.
func column(cs []corridor, x int) int {
	for k := range cs {
		if x < cs[k].mid() {
			return k
		}
	}
	return len(cs)
}

// pieces cuts a line into cells at the corridors.
// In a heading line numbers part no cells: "n = 42" stands in one.
func (s *sheet) pieces(ln *line, at int, cs []corridor, em int, head bool) []piece {
	whole := !head && s.crossesInWord(ln, cs) && len(s.atoms(ln)) == 1
	var out []piece
	for k, i := range ln.toks {
		t := &s.toks[i]
		cut := k == 0
		if k > 0 && !whole {
			cut = s.cutBetween(ln.toks[k-1], i, cs, em, head)
		}
		if cut {
			out = append(out, piece{run: run{box: box{t.x0, ln.top, t.x1, ln.bot}}, line: at})
		}
		p := &out[len(out)-1]
		p.toks, p.x1 = append(p.toks, i), max(p.x1, t.x1)
	}
	for k := range out {
		p := &out[k]
		p.text = s.join(p.toks)
		p.figure = isFigure(p.text)
		p.c0 = column(cs, p.x0)
		p.c1 = max(p.c0, column(cs, p.x1))
		for p.c0 < p.c1 && cs[p.c0].x0-p.x0 < em/4 {
			p.c0++
		}
		for p.c1 > p.c0 && p.x1-cs[p.c1-1].x1 < em/4 {
			p.c1--
		}
	}
	return out
}

// crossesInWord reports whether a word of the line stands in a corridor, as
// where a long row heading runs on over empty cells.
func (s *sheet) crossesInWord(ln *line, cs []corridor) bool {
	for _, i := range ln.toks {
		t := &s.toks[i]
		for k := range cs {
			if m := cs[k].mid(); t.x0 < m && m < t.x1 {
				return true
			}
		}
	}
	return false
}

// cutBetween reports whether a cell ends between the neighbouring words a and b.
func (s *sheet) cutBetween(a, b int, cs []corridor, em int, head bool) bool {
	ta, tb := &s.toks[a], &s.toks[b]
	gap := (tb.x0 - ta.x1) * 100
	ca, cb := column(cs, ta.mid()), column(cs, tb.mid())
	if ca == cb {
		return false
	}
	c := cs[ca]
	switch {
	case gap >= wideGap*em:
		return true
	case tb.glued && gap < 5*em:
		return false
	case head && gap < wordGap*em && !(c.tight && ta.x1 <= c.x0+em/10 && tb.x0 >= c.x1-em/10):
		return false
	case !head && figuresMeet(ta.text, tb.text, false) || isFigure(tb.text) && !isFigure(ta.text) && gap >= atomGap*em:
		return !clings(ta.text, tb.text)
	case clings(ta.text, tb.text) && gap < wordGap*em:
		return false
	case c.tight && gap < wordGap*em:
		return ta.x1 <= c.x0+em/10 && tb.x0 >= c.x1-em/10
	}
	return gap >= wordGap*em || ta.x1 <= c.x0 && tb.x0 >= c.x1 && gap >= 35*em
}
