package plain

import (
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/source"
	"halfspan/extract/tidy"
)

// rowCell is one cell of a row as written, before it has its columns.
type rowCell struct {
	start, end int // in the decoded text
	indent     int
	kind       kind
	label      string  // its text
	more       []piece // further lines of it
	over       int     // how many columns it spans, where the form tells; 0: not told; -1: none, a cell before it covers it
}

// region is the lines of one table.
type region struct {
	from, to int // lines
	rows     [][]rowCell
	fixed    bool // the form tells where cells stand: each row has a cell for every column
	head     int  // heading rows that the form marks (a rule of a pipe table); 0 none
}

// tabbed reports whether line i is a row with cells parted by tabs.
func (r *reader) tabbed(i int) bool {
	l := r.lines[i]
	if l.blank || l.running {
		return false
	}
	s := r.text(l)
	k := strings.IndexByte(s, '\t')
	if k < 0 {
		return false
	}
	// a tab in front of a paragraph only indents it
	return strings.TrimLeft(s, " ")[0] != '\t' || strings.Contains(strings.TrimLeft(s, "\t "), "\t") || len(s) < longLine
}

// longLine is longer than a row of one cell.
const longLine = 200

// tabRegion reads the table of tab-separated rows that begins at line i. A line
// without tabs between its rows is a row of one cell that spans all columns.
func (r *reader) tabRegion(i int) (region, bool) {
	end := r.tabLines(i)
	g := region{from: i, to: end}
	most := 0
	for k := i; k < end; k++ {
		if r.lines[k].blank || r.lines[k].running {
			continue
		}
		row := r.splitTabs(r.lines[k])
		most = max(most, len(row))
		g.rows = append(g.rows, row)
	}
	if len(g.rows) < 2 || most < 2 || isList(g.rows) {
		return region{}, false
	}
	return g, true
}

// tabLines gives the line after the last one of the table that begins at i.
func (r *reader) tabLines(i int) int {
	end := i
	for k := i; k < len(r.lines); k++ {
		switch {
		case r.lines[k].blank || r.lines[k].running:
			if !r.tableGoesOn(k) {
				return end
			}
		case r.tabbed(k):
			end = k + 1
		default:
			// one text over all columns, if rows go on right below
			if k+1 >= len(r.lines) || isCaption(r.text(r.lines[k])) || !r.rowsBelow(k+1) {
				return end
			}
		}
	}
	return end
}

// rowsBelow reports whether, without a blank line, a row with tabs follows.
func (r *reader) rowsBelow(k int) bool {
	const groups = 3 // row groups that may stand above one another
	for n := 0; k < len(r.lines) && n < groups; k, n = k+1, n+1 {
		if r.lines[k].blank || isCaption(r.text(r.lines[k])) {
			return false
		}
		if r.tabbed(k) {
			return true
		}
	}
	return false
}

// tableGoesOn reports whether rows follow the blank line k: a row without any
// content is written as a blank line.
func (r *reader) tableGoesOn(k int) bool {
	const blanks = 2
	for n := 0; k < len(r.lines) && (r.lines[k].blank || r.lines[k].running); k++ {
		if !r.lines[k].running {
			n++
		}
		if n > blanks {
			return false
		}
	}
	if k >= len(r.lines) || isCaption(r.text(r.lines[k])) {
		return false
	}
	if r.tabbed(k) {
		return !isAbbreviation(r.splitTabs(r.lines[k]))
	}
	return len(r.text(r.lines[k])) < longLine && r.rowsBelow(k+1)
}

// splitTabs parts a line into its cells.
func (r *reader) splitTabs(l line) []rowCell {
	var row []rowCell
	start := l.start
	for i := l.start; i <= l.end; i++ {
		if i == l.end || r.src.B[i] == '\t' {
			row = append(row, r.rowCell(start, i))
			start = i + 1
		}
	}
	return row
}

// rowCell trims the cell [start, end); what is trimmed in front is its
// indentation.
func (r *reader) rowCell(start, end int) rowCell {
	s := string(r.src.B[start:end])
	trimmed := strings.TrimLeftFunc(s, source.Blank)
	indent := tidy.LeadingWidth(s) + 2*strings.Count(s[:len(s)-len(trimmed)], " ")
	start = end - len(trimmed)
	label := strings.TrimRightFunc(trimmed, source.Blank)
	return rowCell{start: start, end: start + len(label), indent: indent, kind: kindOf(label), label: strings.TrimSpace(specialSpace.Replace(label))}
}

// isAbbreviation tells an entry of a list of abbreviations from a table row.
func isAbbreviation(row []rowCell) bool {
	return len(row) == 2 && row[0].kind == textual && row[1].kind == textual && len(row[0].label) <= 15 &&
		!strings.ContainsAny(row[1].label, "0123456789")
}

var itemMark = pattern.MustCompile(`^(?:[\[(]?\d{1,3}[\]).]?|[•·*–-]|[a-z][.)])$`)

// isList tells a list (numbers or bullets, a tab, running text) and a list of
// abbreviations from a table.
func isList(rows [][]rowCell) bool {
	items, abbreviations := 0, 0
	for _, row := range rows {
		if len(row) != 2 {
			continue
		}
		if itemMark.MatchString(row[0].label) && len(row[1].label) > 30 {
			items++
		}
		if isAbbreviation(row) {
			abbreviations++
		}
	}
	return items*10 >= len(rows)*8 || abbreviations*10 >= len(rows)*9
}

var (
	pipeRule = pattern.MustCompile(`^\s*\|?\s*:?-{2,}:?\s*(?:[|+]\s*:?-{2,}:?\s*)*\|?\s*$`)
	gridRule = pattern.MustCompile(`^\s*\+(?:[-=]+\+)+\s*$`)
)

func (r *reader) piped(i int) bool {
	return !r.lines[i].blank && strings.Contains(strings.Trim(r.text(r.lines[i]), " \t"), "|")
}

// pipeRegion reads the table whose cells are parted by pipes that begins at
// line i; rules of dashes between rows are left out, the first one ends the
// headings.
func (r *reader) pipeRegion(i int) (region, bool) {
	g := region{from: i}
	k, wide := i, 0
	for ; k < len(r.lines) && !r.lines[k].blank; k++ {
		s := r.text(r.lines[k])
		switch {
		case pipeRule.MatchString(s) && strings.ContainsAny(s, "|+"), gridRule.MatchString(s):
			if g.head == 0 {
				g.head = len(g.rows)
			}
		case r.piped(k):
			row := r.splitPipes(r.lines[k])
			if len(row) > 1 {
				wide++
			}
			g.rows = append(g.rows, row)
		default:
			if k == i {
				return region{}, false
			}
			g.to = k
			return g, len(g.rows) >= 2 && wide >= 2
		}
	}
	g.to = k
	return g, len(g.rows) >= 2 && wide >= 2
}

func (r *reader) splitPipes(l line) []rowCell {
	start, end := l.start, l.end
	for start < end && (r.src.B[start] == ' ' || r.src.B[start] == '\t') {
		start++
	}
	for end > start && (r.src.B[end-1] == ' ' || r.src.B[end-1] == '\t') {
		end--
	}
	if start < end && r.src.B[start] == '|' {
		start++
	}
	if start < end && r.src.B[end-1] == '|' && (end-2 < start || r.src.B[end-2] != '\\') {
		end--
	}
	var row []rowCell
	for i := start; i <= end; i++ {
		if i == end || r.src.B[i] == '|' && r.src.B[i-1] != '\\' {
			row = append(row, r.rowCell(start, i))
			start = i + 1
		}
	}
	return row
}

// columnsWhy is the doubt about what stands below headings whose columns the
// text leaves open.
const columnsWhy = "text does not say which columns a heading over several of them reaches over, and here it can be read in two ways"

// table lays the rows of a region out as a grid.
func (r *reader) table(g region) *paper.Table {
	var lay layoutOf
	if g.fixed {
		lay = asTold(g.rows)
	} else {
		lay = layOut(g.rows, g.head)
	}
	t := &paper.Table{Rows: len(g.rows), Cols: lay.cols, HeadRows: lay.head}
	for i, row := range g.rows {
		for k, c := range row {
			at := lay.rows[i][k]
			if at.width == 0 {
				continue
			}
			b := &source.Builder{Src: r.src}
			r.spaced(b, c.start, c.end)
			for _, p := range c.more {
				b.Space(p.start)
				r.spaced(b, p.start, p.end)
			}
			if i >= lay.head && lay.doubt != nil && lay.doubt[at.col] && c.kind.numeric() {
				r.doc.Doubts = append(r.doc.Doubts, paper.Doubt{From: r.src.Offset(c.start), To: r.src.Offset(c.end), Kind: "columns-unclear", Text: columnsWhy})
			}
			t.Cells = append(t.Cells, paper.Cell{Row: i, Col: at.col, RowSpan: at.height, ColSpan: at.width, Indent: c.indent, Head: i < lay.head, Text: b.Run()})
		}
	}
	parts := make([]tidy.Part, t.Rows)
	for i := range parts {
		if i < lay.head {
			parts[i] = tidy.Head
		}
	}
	parts = tidy.DropBlankRows(t, parts)
	parts = tidy.NotesFromRows(t, parts)
	t.HeadRows = tidy.HeadRows(t, parts)
	for i := range t.Cells {
		if t.Cells[i].Row < t.HeadRows {
			t.Cells[i].Head = true
		}
	}
	tidy.RankIndents(t)
	return t
}
