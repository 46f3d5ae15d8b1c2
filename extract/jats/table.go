package jats

import (
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/source"
	"halfspan/extract/tidy"
)

// Limits of one table; the largest printed ones have some thousand cells.
const (
	maxCols  = 512
	maxRows  = 20_000
	maxCells = 400_000 // grid positions
)

// rawCell is a cell as marked up, before it has a column.
type rawCell struct {
	node             *node
	head             bool
	rowSpan, colSpan int
	text             paper.TextRun
	indent           int // width of its indentation, in no unit
}

// rawRow is a row of cells with the part of the table it stands in.
type rawRow struct {
	cells []rawCell
	part  int // rows of one part may share cells that span rows
	in    tidy.Part
}

// tableWrap reads a table with its caption and notes. A wrap that holds several
// tables gives several blocks under one label; parts of equal width without
// headings of their own are put below one another.
func (r *reader) tableWrap(n *node) {
	label := strings.TrimRight(strings.Join(strings.Fields(r.text(n.child("label")).S), " "), " .:")
	caption, floats := r.caption(n)
	var tables []*paper.Table
	n.each(func(k *node) bool {
		if k.name == "table" || k.name == "array" {
			if t := r.grid(k); t != nil {
				tables = appendTable(tables, t)
			}
			return false
		}
		return k.name != "caption" && k.name != "table-wrap-foot"
	})
	if n.name == "array" {
		if t := r.grid(n); t != nil {
			tables = append(tables, t)
		}
	}
	notes := r.footNotes(n) // with those that stand in cells
	if len(tables) == 0 {
		r.pictureTable(label, caption, notes, n)
	}
	for _, t := range tables {
		t.Label, t.Caption = label, caption
		t.Notes = append(t.Notes, notes...)
		r.emitTable(t)
	}
	for _, f := range floats {
		r.block(f)
	}
}

func (r *reader) emitTable(t *paper.Table) {
	r.doc.Blocks = append(r.doc.Blocks, paper.Block{Kind: paper.TableBlock, Zone: r.zone, Section: r.section, Table: t})
}

// pictureTable keeps the caption and notes of a table that is only a picture,
// and says so.
func (r *reader) pictureTable(label string, caption paper.TextRun, notes []paper.FootNote, n *node) {
	if n.find("graphic", "media") == nil {
		if label == "" && caption.S == "" {
			return
		}
		r.problem("empty-table", fmt.Sprintf("%s (%s) has a caption but no cells", name(label), clip(caption.S)), true)
	} else {
		r.problem("picture-table", fmt.Sprintf("%s (%s) is only a picture in this file; read it in the PDF or take its numbers by hand", name(label), clip(caption.S)), true)
	}
	r.emitTable(&paper.Table{Label: label, Caption: caption, Notes: notes, Picture: true})
}

func name(label string) string {
	if label == "" {
		return "a table without a label"
	}
	return label
}

// clip shortens a caption for a message.
func clip(s string) string {
	const most = 120
	if utf8.RuneCountInString(s) <= most {
		return s
	}
	return string([]rune(s)[:most]) + "…"
}

// appendTable adds t, or its rows to the table before it where t continues that
// one.
func appendTable(tables []*paper.Table, t *paper.Table) []*paper.Table {
	if len(tables) == 0 {
		return append(tables, t)
	}
	last := tables[len(tables)-1]
	if t.HeadRows > 0 || t.Cols != last.Cols {
		return append(tables, t)
	}
	for _, c := range t.Cells {
		c.Row += last.Rows
		last.Cells = append(last.Cells, c)
	}
	last.Rows += t.Rows
	last.Notes = append(last.Notes, t.Notes...)
	return tables
}

// grid reads a <table> (or <array>) element; nil if it has no cells.
func (r *reader) grid(n *node) *paper.Table {
	rows := r.rawRows(n)
	t := &paper.Table{}
	parts := place(t, rows)
	if len(t.Cells) == 0 {
		return nil
	}
	if t.Rows >= maxRows || t.Rows*t.Cols > maxCells {
		r.problem("cut-short", fmt.Sprintf("a table of %d rows and %d columns is too large; only its beginning was read", t.Rows, t.Cols), true)
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

// rawRows collects the rows of all parts of the table in printed order.
func (r *reader) rawRows(n *node) []rawRow {
	var rows []rawRow
	part := 0
	add := func(tr *node, in tidy.Part) {
		row := rawRow{part: part, in: in}
		for _, c := range tr.kids {
			if c.name == "td" || c.name == "th" {
				row.cells = append(row.cells, r.rawCell(c))
			}
		}
		rows = append(rows, row)
	}
	var foot []*node
	for _, k := range n.kids {
		switch k.name {
		case "tr":
			add(k, tidy.Body)
		case "tfoot":
			foot = append(foot, k)
		case "thead", "tbody":
			part++
			for _, tr := range k.kids {
				if tr.name == "tr" {
					add(tr, tidy.Part(k.name))
				}
			}
			part++
		}
	}
	for _, k := range foot {
		part++
		for _, tr := range k.kids {
			if tr.name == "tr" {
				add(tr, tidy.Foot)
			}
		}
	}
	return rows
}

func (r *reader) rawCell(n *node) rawCell {
	b := r.builder()
	b.cell = true
	r.content(b, n)
	width := tidy.LeadingWidth(string(b.S)) + styleIndent(n.get("style")) + r.markedIndent(n)
	text := tidyLines(b.run())
	c := rawCell{node: n, head: n.name == "th", text: text, indent: width,
		rowSpan: span(n.get("rowspan")), colSpan: min(span(n.get("colspan")), maxCols)}
	for _, f := range b.floats { // a footnote written where its mark stands
		if f.name == "fn" {
			r.cellNotes = append(r.cellNotes, r.footNote(f)...)
		}
	}
	return c
}

func span(s string) int {
	k, err := strconv.Atoi(strings.TrimSpace(s))
	if err != nil || k < 0 {
		return 1
	}
	return k // 0: to the end of the part
}

// tidyLines cuts the spaces round line ends and empty lines from a cell's text.
func tidyLines(t paper.TextRun) paper.TextRun {
	if !strings.Contains(t.S, "\n") {
		return t
	}
	var cuts [][2]int
	for _, m := range lineEnd.FindAllStringIndex(t.S, -1) {
		k := m[0] + strings.IndexByte(t.S[m[0]:m[1]], '\n')
		if m[0] < k {
			cuts = append(cuts, [2]int{m[0], k})
		}
		if k+1 < m[1] {
			cuts = append(cuts, [2]int{k + 1, m[1]})
		}
	}
	return source.Drop(t, cuts)
}

var lineEnd = pattern.MustCompile(`[\s\x{00A0}\x{2000}-\x{200B}\x{202F}]*\n[\s\x{00A0}\x{2000}-\x{200B}\x{202F}]*`)

// place gives every cell its row and column as a browser does: cells fill the
// free positions of their row from the left, a spanning cell keeps positions in
// the rows below of the same part. It returns the part each row stands in.
func place(t *paper.Table, rows []rawRow) []tidy.Part {
	if len(rows) > maxRows {
		rows = rows[:maxRows]
	}
	partEnd := make([]int, len(rows))
	for i := len(rows) - 1; i >= 0; i-- {
		partEnd[i] = i + 1
		if i+1 < len(rows) && rows[i+1].part == rows[i].part {
			partEnd[i] = partEnd[i+1]
		}
	}
	var until []int // for each column, the first row in which it is free again
	for i, row := range rows {
		col := 0
		for _, c := range row.cells {
			for col < len(until) && until[col] > i {
				col++
			}
			if col >= maxCols {
				break
			}
			wide := 1
			for wide < max(c.colSpan, 1) && col+wide < maxCols && (col+wide >= len(until) || until[col+wide] <= i) {
				wide++
			}
			tall := c.rowSpan
			if tall == 0 || i+tall > partEnd[i] {
				tall = partEnd[i] - i
			}
			for len(until) < col+wide {
				until = append(until, 0)
			}
			for k := col; k < col+wide; k++ {
				until[k] = i + tall
			}
			t.Cells = append(t.Cells, paper.Cell{Row: i, Col: col, RowSpan: tall, ColSpan: wide, Head: c.head || row.in == tidy.Head, Indent: c.indent, Text: c.text})
			col += wide
		}
		if (i+1)*len(until) > maxCells {
			rows = rows[:i+1]
			break
		}
	}
	t.Rows, t.Cols = len(rows), len(until)
	for i := range t.Cells {
		t.Cells[i].RowSpan = min(t.Cells[i].RowSpan, t.Rows-t.Cells[i].Row)
	}
	parts := make([]tidy.Part, len(rows))
	for i, row := range rows {
		parts[i] = row.in
	}
	return parts
}
