package grid

import "strings"

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
	depth := 0
	for k, i := range ln.toks {
		t := &s.toks[i]
		cut := k == 0
		if k > 0 && !whole {
			prev := &s.toks[ln.toks[k-1]]
			near := (t.x0-prev.x1)*100 < wideGap*em
			switch {
			case depth > 0 && near && opensAgain(prev.text, t.text):
				cut = column(cs, prev.mid()) != column(cs, t.mid())
			case depth > 0 && near:
			case near && bracketsMeet(s.toks[out[len(out)-1].toks[0]].text, prev.text, t.text):
				cut = column(cs, prev.mid()) != column(cs, t.mid())
			default:
				cut = s.cutBetween(ln.toks[k-1], i, cs, em, head)
			}
		}
		if cut {
			out = append(out, piece{run: run{box: box{t.x0, ln.top, t.x1, ln.bot}}, line: at})
			depth = 0
		}
		depth += bracketDepth(t.text)
		p := &out[len(out)-1]
		p.toks, p.x1 = append(p.toks, i), max(p.x1, t.x1)
	}
	for k := range out {
		p := &out[k]
		p.text = s.join(p.toks)
		p.figure = isFigure(p.text)
		p.c0, p.c1 = columnsOf(cs, p.x0, p.x1, em)
	}
	if !head && len(out) == 1 && out[0].c0 == 0 && !out[0].figure {
		out[0].c1 = 0 // a row heading runs on over empty cells
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

// opensAgain reports whether word b opens a bracket where word a breaks off
// inside one, as intervals do that go on in the next line of narrow cells.
func opensAgain(a, b string) bool {
	return b[0] == '(' && (strings.HasSuffix(a, "–") || strings.HasSuffix(a, "-") || strings.HasSuffix(a, ",") || a == "to")
}

// bracketsMeet reports whether a piece that begins with a bracket and has come
// to its end at word a is followed by another bracket, as intervals on a line
// of their own are.
func bracketsMeet(first, a, b string) bool {
	return strings.HasPrefix(first, "(") && strings.HasSuffix(a, ")") && strings.HasPrefix(b, "(")
}

// bracketDepth is how many brackets a word leaves open.
func bracketDepth(t string) int {
	return strings.Count(t, "(") + strings.Count(t, "[") - strings.Count(t, ")") - strings.Count(t, "]")
}

// columnsOf gives the first and last column that x0..x1 stands in: those whose
// cells it overlaps, or the nearest one.
func columnsOf(cs []corridor, x0, x1, em int) (c0, c1 int) {
	c0, c1 = -1, -1
	for c := 0; c <= len(cs); c++ {
		lo, hi := -1<<30, 1<<30
		if c > 0 {
			lo = cs[c-1].x1
		}
		if c < len(cs) {
			hi = cs[c].x0
		}
		if min(x1, hi)-max(x0, lo) > min(em/4, (x1-x0)/3) {
			if c0 < 0 {
				c0 = c
			}
			c1 = c
		}
	}
	if c0 < 0 {
		c0 = column(cs, (x0+x1)/2)
		c1 = c0
	}
	return c0, c1
}

// cutBetween reports whether a cell ends between the neighbouring words a and b.
func (s *sheet) cutBetween(a, b int, cs []corridor, em int, head bool) bool {
	ta, tb := &s.toks[a], &s.toks[b]
	gap := (tb.x0 - ta.x1) * 100
	k := -1
	for i := range cs {
		if max(ta.x1, cs[i].x0)-em/10 <= min(tb.x0, cs[i].x1) && ta.mid() < cs[i].x1 && tb.mid() > cs[i].x0 {
			k = i
			break
		}
	}
	if k < 0 {
		return false
	}
	c := cs[k]
	inside := ta.x1 <= c.x0+em/10 && tb.x0 >= c.x1-em/10
	switch {
	case gap >= wideGap*em:
		return true
	case tb.glued && gap < 5*em:
		return false
	case head && gap < wordGap*em:
		return c.tight && inside
	case !head && (figuresMeet(ta.text, tb.text, false) || isFigure(tb.text) && !isFigure(ta.text) && gap >= atomGap*em && tb.x0 >= c.x1-em/2):
		return !clings(ta.text, tb.text)
	case clings(ta.text, tb.text) && gap < wordGap*em:
		return false
	case c.tight && gap < wordGap*em:
		return inside
	}
	return gap >= wordGap*em || inside && gap >= 35*em
}
