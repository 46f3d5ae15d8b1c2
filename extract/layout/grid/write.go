package grid

import (
	"slices"
	"strings"

	"halfspan/extract/paper"
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
		x0, x1 int
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
				parts = append(parts, part{c0: p.c0, c1: p.c1, figure: p.figure, x0: p.x0, x1: p.x1})
				at = len(parts) - 1
			} else if q := &parts[at]; p.c1-p.c0 < q.c1-q.c0 {
				q.c0, q.c1 = p.c0, p.c1
			}
			parts[at].toks = append(parts[at].toks, p.toks)
			parts[at].figure = parts[at].figure || p.figure
		}
	}
	figures := 0
	for _, p := range parts[1:] {
		if p.figure {
			figures++
		}
	}
	group := false // set in the middle, with its p value or those of a few comparisons
	if p := &parts[0]; !p.figure && figures > 0 && figures == len(parts)-1 && (figures == 1 || figures*3 <= len(rd.cs)+1) && rd.offStub(p.c0, p.x0, parts[1].c0) {
		p.c0, p.c1, group = 0, parts[1].c0-1, true
	}
	label := len(parts) == 1 && !parts[0].figure
	heading := rd.headingRow(lines)
	for _, p := range parts {
		c := paper.Cell{Row: row, Col: p.c0, RowSpan: 1, ColSpan: p.c1 - p.c0 + 1, Head: heading || p.c0 == 0}
		if group && p.c0 == 0 {
			c.Head = true
		} else if label {
			c.Head = true
			if rd.groupInMiddle(p.c0, p.c1, p.x0, p.x1) {
				c.Col, c.ColSpan = 0, len(rd.cs)+1
			} else if p.c0 == 0 {
				c.ColSpan = 1
			}
		} else if p.c0 == 0 && p.c1 > 0 {
			c.ColSpan = 1
		}
		g.put(c, p.toks)
	}
}

// offStub reports whether words that begin at x, in column c, with a figure in
// column next, stand right of the row headings.
func (rd *reader) offStub(c, x, next int) bool {
	return c > 0 && rd.wordShare(c) < 50 || c == 0 && next > 2 && x >= rd.cs[0].x0
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

// groupInMiddle reports whether words that stand alone in their row, in columns
// c0 to c1 and from x0 to x1, are a row group over the whole table: centred on
// it, or right of the stub and not flush with a column.
func (rd *reader) groupInMiddle(c0, c1, x0, x1 int) bool {
	left := rd.area.x1
	for i := rd.head; i < len(rd.lines); i++ {
		if rd.hasStub(i) {
			left = min(left, rd.cells[i][0].x0)
		}
	}
	if x0-left < 3*rd.em {
		return false
	}
	if abs(x0+x1-rd.area.x0-rd.area.x1) <= 4*rd.em || c0 == 0 && c1 == len(rd.cs) {
		return true
	}
	if c0 == 0 {
		return false
	}
	lo, _ := rd.strip(c0)
	return abs(x0-lo)*10 > rd.em*4 && x0 > rd.area.x0+rd.area.width()/5
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
