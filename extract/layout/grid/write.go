package grid

import (
	"slices"
	"strings"
	"unicode"

	"halfspan/extract/paper"
	"halfspan/extract/tidy"
)

// write fills the table's grid from the reader's pieces.
func (rd *reader) write(t *paper.Table, w *writer) {
	t.Cols = len(rd.cs) + 1
	blocks := rd.headBlocks()
	disjoint(blocks)
	t.HeadRows = headRows(blocks)
	spans := settle(blocks, t.HeadRows)
	g := cellGrid{at: map[[2]int]int{}}
	for i := range blocks {
		b := &blocks[i]
		var toks [][]int
		for k := range b.pieces {
			toks = append(toks, b.pieces[k].toks)
		}
		g.put(paper.Cell{Row: b.level, Col: b.c0, RowSpan: spans[i], ColSpan: b.c1 - b.c0 + 1, Head: true}, toks)
	}
	rows := rd.rows()
	for k, lines := range rows {
		rd.writeRow(&g, t.HeadRows+k, lines)
	}
	t.Rows = t.HeadRows + len(rows)
	rd.finishFigures(&g, t.HeadRows, t.Rows)
	rd.spanStubs(&g, rows, t.HeadRows)
	g.cells = slices.DeleteFunc(g.cells, func(c gridCell) bool { return len(c.toks) == 0 })
	slices.SortStableFunc(g.cells, func(a, b gridCell) int {
		if a.Row != b.Row {
			return a.Row - b.Row
		}
		return a.Col - b.Col
	})
	rd.indents(g.cells, t.HeadRows)
	t.Cells = make([]paper.Cell, len(g.cells))
	for i := range g.cells {
		t.Cells[i] = g.cells[i].Cell
		t.Cells[i].Text = w.text(g.cells[i].toks)
	}
}

// gridCell is a cell before its text is made.
type gridCell struct {
	paper.Cell
	toks [][]int // by line
}

// cellGrid keeps cells from overlapping.
type cellGrid struct {
	cells []gridCell
	at    map[[2]int]int // position -> index into cells
}

// put adds a cell; where its first position is taken the text joins the cell
// there, and its spans end before other taken positions.
func (g *cellGrid) put(c paper.Cell, toks [][]int) {
	if k, ok := g.at[[2]int{c.Row, c.Col}]; ok {
		g.cells[k].toks = append(g.cells[k].toks, toks...)
		return
	}
	for col := c.Col + 1; col < c.Col+c.ColSpan; col++ {
		if _, ok := g.at[[2]int{c.Row, col}]; ok {
			c.ColSpan = col - c.Col
		}
	}
	for row := c.Row + 1; row < c.Row+c.RowSpan; row++ {
		for col := c.Col; col < c.Col+c.ColSpan; col++ {
			if _, ok := g.at[[2]int{row, col}]; ok {
				c.RowSpan = min(c.RowSpan, row-c.Row)
			}
		}
	}
	for row := c.Row; row < c.Row+c.RowSpan; row++ {
		for col := c.Col; col < c.Col+c.ColSpan; col++ {
			g.at[[2]int{row, col}] = len(g.cells)
		}
	}
	g.cells = append(g.cells, gridCell{Cell: c, toks: toks})
}

// writeRow puts the cells of one body row.
func (rd *reader) writeRow(g *cellGrid, row int, lines []int) {
	type part struct {
		c0, c1 int
		toks   [][]int
		figure bool
		x0     int
	}
	var parts []part
	for _, i := range lines {
		for k := range rd.cells[i] {
			p := &rd.cells[i][k]
			at := -1
			for j := range parts {
				if parts[j].c0 <= p.c1 && p.c0 <= parts[j].c1 {
					at = j
					break
				}
			}
			if at < 0 {
				parts = append(parts, part{c0: p.c0, c1: p.c1, figure: p.figure, x0: p.x0})
				at = len(parts) - 1
			} else if q := &parts[at]; p.c1-p.c0 < q.c1-q.c0 {
				q.c0, q.c1 = p.c0, p.c1
			}
			parts[at].toks = append(parts[at].toks, p.toks)
			parts[at].figure = parts[at].figure || p.figure
		}
	}
	if p := &parts[0]; len(parts) == 2 && p.c0 > 0 && !p.figure && parts[1].figure && rd.wordShare(p.c0) < 50 {
		p.c0 = 0 // a row group set in the middle, with its p value
	}
	label := len(parts) == 1 && !parts[0].figure
	heading := rd.headingRow(lines)
	for _, p := range parts {
		c := paper.Cell{Row: row, Col: p.c0, RowSpan: 1, ColSpan: p.c1 - p.c0 + 1, Head: heading || p.c0 == 0}
		if label {
			c.Head = true
			if p.c0 > 0 && p.x0 > rd.area.x0+rd.area.width()/5 {
				c.Col, c.ColSpan = 0, len(rd.cs)+1 // a centred row group
			} else if p.c0 == 0 {
				c.ColSpan = 1
			}
		} else if p.c0 == 0 && p.c1 > 0 {
			c.ColSpan = 1
		}
		g.put(c, p.toks)
	}
}

// finishFigures takes the second part of a figure that a cell breaks over two
// rows back to its first: "1.84 (0.92" over "to 2.76)".
func (rd *reader) finishFigures(g *cellGrid, from, to int) {
	for row := from + 1; row < to; row++ {
		for col := 1; col <= len(rd.cs); col++ {
			k, ok := g.at[[2]int{row, col}]
			up, upOk := g.at[[2]int{row - 1, col}]
			if !ok || !upOk || g.cells[k].Col != col || g.cells[up].Col != col || g.cells[up].RowSpan > 1 {
				continue
			}
			a, b := rd.s.joinLines(g.cells[up].toks), rd.s.joinLines(g.cells[k].toks)
			if !isFigure(a) || !unfinished(a) || !(goesOnFigure(b) || strings.HasSuffix(a, "(") || strings.Contains(b, ")") && strings.Count(a, "(") > strings.Count(a, ")")) {
				continue
			}
			g.cells[up].toks = append(g.cells[up].toks, g.cells[k].toks...)
			g.cells[k].toks = nil
			delete(g.at, [2]int{row, col})
		}
	}
}

// spanStubs lets a row heading reach over the rows that have none, where the
// next column holds row headings too: down from its row or, where headings are
// set in the middle of their rows, both ways.
func (rd *reader) spanStubs(g *cellGrid, rows [][]int, head int) {
	if len(rd.cs) < 2 || !rd.labels(1) {
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
	for k := range rows {
		_, beside := g.at[[2]int{head + k, 1}]
		_, own := g.at[[2]int{head + k, 0}]
		gaps = gaps || beside && !own
	}
	for k := range rows {
		_, beside := g.at[[2]int{head + k, 1}]
		if !beside {
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

// sameStub reports whether two row headings below one another are one that is
// set beside several rows.
func (rd *reader) sameStub(up, down *gridCell) bool {
	a, b := rd.s.join(up.toks[len(up.toks)-1]), rd.s.join(down.toks[0])
	return unfinishedLabel(a, b) || startsLow(b) && b[0] != '%'
}

// spanMiddle shares the rows of one stretch among its row headings.
func (rd *reader) spanMiddle(g *cellGrid, stubs, stretch []int, rows [][]int, head int) {
	height := func(k int) int { // of the middle of a row, by its second column
		for _, i := range rows[k] {
			for _, p := range rd.cells[i] {
				if p.c0 == 1 {
					return rd.lines[i].base
				}
			}
		}
		return rd.lines[rows[k][0]].base
	}
	middle := g.cells[stubs[0]].Row > head+stretch[0]
	from := stretch[0]
	last := stretch[len(stretch)-1]
	for n, c := range stubs {
		cell := &g.cells[c]
		own, next := cell.Row-head, last+1
		if n+1 < len(stubs) {
			next = g.cells[stubs[n+1]].Row - head
		}
		to := next - 1
		if middle {
			y := 0
			for _, toks := range cell.toks {
				y += rd.s.toks[toks[0]].base
			}
			y /= len(cell.toks)
			best := 1 << 30
			for e := own; e < next; e++ {
				if d := abs((height(from)+height(e))/2 - y); d < best {
					best, to = d, e
				}
			}
			if n == len(stubs)-1 {
				to = last
			}
		} else {
			from = own
		}
		for k := from; k <= to; k++ {
			g.at[[2]int{head + k, 0}] = c
		}
		cell.Row, cell.RowSpan = head+from, to-from+1
		from = to + 1
	}
}

// headingRow reports whether a body row is a second row of column headings:
// several cells beside the stub, none of them data.
func (rd *reader) headingRow(lines []int) bool {
	n, heads, bold := 0, 0, 0
	for _, i := range lines {
		for k := range rd.cells[i] {
			p := &rd.cells[i][k]
			if p.c0 == 0 {
				continue
			}
			n++
			switch {
			case isHeadFigure(p.text):
				heads++
			case p.figure:
				return false
			case rd.s.boldRun(&p.run):
				bold++
			}
		}
	}
	return n >= 2 && (heads == n || bold+heads == n)
}

// indents gives the row headings their steps of indentation.
func (rd *reader) indents(cells []gridCell, headRows int) {
	var xs []int
	left := func(c *gridCell) int { return rd.s.toks[c.toks[0][0]].x0 }
	for i := range cells {
		if c := &cells[i]; c.Row >= headRows && c.Col == 0 && c.ColSpan == 1 {
			xs = append(xs, left(c))
		}
	}
	if len(xs) == 0 {
		return
	}
	slices.Sort(xs)
	steps := []int{xs[0]}
	for _, x := range xs {
		if x-steps[len(steps)-1] > rd.em*35/100 {
			steps = append(steps, x)
		}
	}
	if len(steps) > 6 {
		return // centred or ragged: the left edge says nothing
	}
	for i := range cells {
		c := &cells[i]
		if c.Row < headRows || c.Col != 0 || c.ColSpan != 1 {
			continue
		}
		for k := range steps {
			if left(c) >= steps[k] {
				c.Indent = k
			}
		}
	}
}

// writer makes TextRuns with places.
type writer struct {
	sheet *sheet
	page  int
}

// pageOf is the page of a token: its sheet's, where that is known.
func (w *writer) pageOf(t *tok) int {
	if t.page != 0 {
		return int(t.page)
	}
	return w.page
}

// caption is the caption's text without its label.
func (w *writer) caption(r *Region) paper.TextRun {
	var toks [][]int
	for i := range r.caption {
		ts := r.caption[i].toks
		if i == 0 {
			kept := ts[:0:0]
			for _, t := range ts {
				if t < r.label.tok || t >= r.label.tok+r.label.n {
					kept = append(kept, t)
				}
			}
			ts = kept
		}
		if len(ts) > 0 {
			toks = append(toks, ts)
		}
	}
	return w.text(toks)
}

// notes cuts the note lines into notes by their marks.
func (w *writer) notes(lines []line) []paper.FootNote {
	var out []paper.FootNote
	var cur [][]int
	flush := func() {
		if len(cur) > 0 {
			out = append(out, tidy.SplitNotes(w.text(cur))...)
		}
		cur = nil
	}
	for i := range lines {
		first := &w.sheet.toks[lines[i].toks[0]]
		if first.shift == paper.Raised || strings.Trim(first.text, "*†‡§¶#‖|∗") == "" {
			flush()
		}
		cur = append(cur, lines[i].toks)
	}
	flush()
	return out
}

// text makes a TextRun of tokens by line: words joined by one space where they
// are not glued, hyphenated line ends joined.
func (w *writer) text(lines [][]int) paper.TextRun {
	var run paper.TextRun
	var b strings.Builder
	for li, toks := range lines {
		for k, i := range toks {
			t := &w.sheet.toks[i]
			word := t.w
			if b.Len() > 0 {
				switch {
				case k == 0 && li > 0:
					if !w.unhyphen(&b, &run, t.text) && !rangeGoesOn(b.String(), t.text) {
						b.WriteByte(' ')
					}
				case k > 0 && !t.glued:
					b.WriteByte(' ')
				}
			}
			start := b.Len()
			for gi := range word.Glyphs {
				g := &word.Glyphs[gi]
				from := b.Len()
				b.WriteString(g.Text)
				if b.Len() > from {
					run.Runs = append(run.Runs, paper.Run{Start: from, End: b.Len(), Place: paper.Place{
						Page: w.pageOf(t), Line: int(t.line) + 1, Box: g.Box, Origin: g.Origin,
					}})
				}
			}
			w.styles(&run, start, b.Len(), t, word.Italic)
		}
	}
	run.S = b.String()
	return run
}

// rangeGoesOn reports whether a line ends with the dash of a range whose second
// number the next line begins with.
func rangeGoesOn(before, next string) bool {
	body := strings.TrimRight(before, "–—-−")
	return body != before && body != "" && (unicode.IsDigit(lastRune(body)) || lastRune(body) == '%') && unicode.IsDigit(firstRune(next))
}

// unhyphen takes back a hyphen at a line's end where the word goes on in lower
// case, and reports whether the lines are to be joined without a space.
func (w *writer) unhyphen(b *strings.Builder, run *paper.TextRun, next string) bool {
	s := b.String()
	if !strings.HasSuffix(s, "-") && !strings.HasSuffix(s, "\u2010") && !strings.HasSuffix(s, "\u00ad") {
		return false
	}
	body := strings.TrimRight(s, "-\u2010\u00ad")
	if body == "" || !lowerLetter(lastRune(body)) || !lowerLetter(firstRune(next)) {
		return false
	}
	n := len(run.Runs)
	if n == 0 || run.Runs[n-1].End != b.Len() {
		return false
	}
	cut := run.Runs[n-1].Start
	if s[cut:] != "-" && s[cut:] != "\u2010" && s[cut:] != "\u00ad" {
		return true
	}
	b.Reset()
	b.WriteString(s[:cut])
	run.Runs = run.Runs[:n-1]
	for k := range run.Styles {
		run.Styles[k].End = min(run.Styles[k].End, cut)
	}
	return true
}

// styles adds the styles of one word, joined to the same style before it.
func (w *writer) styles(run *paper.TextRun, start, end int, t *tok, italic bool) {
	add := func(kind paper.StyleKind) {
		for k := len(run.Styles) - 1; k >= 0 && k >= len(run.Styles)-4; k-- {
			if s := &run.Styles[k]; s.Kind == kind && s.End >= start-1 {
				s.End = end
				return
			}
		}
		run.Styles = append(run.Styles, paper.Style{Start: start, End: end, Kind: kind})
	}
	if t.shift != 0 {
		run.Styles = append(run.Styles, paper.Style{Start: start, End: end, Kind: t.shift})
	}
	if t.bold {
		add(paper.Bold)
	}
	if italic {
		add(paper.Italic)
	}
}
