package table

import (
	"strings"

	"halfspan/extract/paper"
)

// frame is a table laid out for reading. Rows [0, head) are column headings,
// columns [0, stub) hold the labels of the rows.
type frame struct {
	tab  *paper.Table
	num  int // ordinal of the table in the document, from 1
	grid [][]*paper.Cell
	head int
	stub int

	notes       *notes
	reads       map[*paper.Cell]*cellReading
	heads       [][]label // column headings from the top, by column; without repeats
	lines       []line    // one per grid row; heading rows and empty rows have kind lineNone
	mid         []midHead // headings repeated inside the body, in order
	vocab       *vocabulary
	lex         *lexicon
	memo        memo
	whole       []statement        // what caption and notes say for all
	counts      map[int]countGrade // by row, once weighed
	armRows     bool               // row labels name the arms
	colArms     bool               // column headings name the arms
	rowArms     map[string]bool    // row labels found to be arms by repetition
	outcomeCols bool               // column headings name outcomes
	modelCols   bool               // they are the outcomes of models, and rows name predictors
	outerSub    bool               // group labels name analyses or subgroups of the same outcomes
	timeRow     map[int]bool       // heading rows that name times
	armRow      map[int]bool       // heading rows that name arms
	crossTime   map[int]bool       // heading rows of times over the same arms, whatever their words
	crossSub    map[int]bool       // heading rows of conditions, with and without, below each outcome
	armList     []string

	conditionLabels []label // innermost row labels that say with or without something
}

// newFrame lays out a table; nil where it has no cells to read.
func newFrame(t *paper.Table, num int, v *vocabulary) *frame {
	if t.Picture || len(t.Cells) == 0 || t.Rows < 1 || t.Cols < 1 {
		return nil
	}
	f := &frame{tab: t, num: num, grid: t.Grid(), vocab: v, lex: v.lex, memo: newMemo(), reads: map[*paper.Cell]*cellReading{}, counts: map[int]countGrade{}}
	f.notes = newNotes(t, v)
	for i := range t.Cells {
		f.reads[&t.Cells[i]] = readCell(&t.Cells[i])
	}
	f.findHead()
	f.findStub()
	f.findHeads()
	f.findLines()
	f.memo = newMemo() // what was asked before the rows were known may not hold
	return f
}

// cellAt gives the cell whose top left corner is (r, c), nil elsewhere.
func (f *frame) cellAt(r, c int) *paper.Cell {
	cell := f.grid[r][c]
	if cell == nil || cell.Row != r || cell.Col != c {
		return nil
	}
	return cell
}

// blank reports that nothing is printed at (r, c).
func (f *frame) blank(r, c int) bool {
	cell := f.grid[r][c]
	return cell == nil || isBlankText(cell.Text.S)
}

// findHead settles how many rows are headings: what the reader found, and the
// rows below that only go on with them (n = 42, Mean (SD), Baseline), or, where
// nothing is marked, the rows above the first row with a number in its data.
func (f *frame) findHead() {
	f.head = min(f.tab.HeadRows, f.tab.Rows)
	if f.head == f.tab.Rows && f.head > 1 {
		f.head = 1
	}
	if f.head <= 1 && f.countsFirst() {
		f.head = 0 // nothing stands over the columns
		return
	}
	for f.head < f.tab.Rows-1 && f.headLike(f.head) {
		f.head++
	}
	// A row of data among the marked heading rows ends them.
	for r := 0; r < f.head; r++ {
		if f.labelled(r) && (f.dataCells(r) >= 2 && r > 0 || f.spreadCells(r) > 0) {
			f.head = r
			return
		}
	}
}

// countsFirst reports that the first row is one of sample sizes: "N", and whole
// numbers beside it.
func (f *frame) countsFirst() bool {
	first := f.cellAt(0, 0)
	if first == nil || strings.Trim(fold(first.Text.S), " .:=") != "n" {
		return false
	}
	found := 0
	for c := 1; c < f.tab.Cols; c++ {
		cell := f.cellAt(0, c)
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		vs := f.reads[cell].cell.Values
		if len(vs) != 1 || len(vs[0].Parts) > 0 || !isWhole(vs[0].Estimate.Value) {
			return false
		}
		found++
	}
	return found > 0
}

// labelled reports that the row has a label of its own: not one that reaches down
// from a heading row above.
func (f *frame) labelled(r int) bool { return f.cellAt(r, 0) != nil && !f.blank(r, 0) }

// headLike reports a row just below the headings that goes on with them: its
// stub is blank or repeats nothing new, and its cells hold no data.
func (f *frame) headLike(r int) bool {
	filled, fit := 0, 0
	for c := 1; c < f.tab.Cols; c++ {
		cell := f.cellAt(r, c)
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		filled++
		if f.reads[cell].headingLike {
			fit++
		}
	}
	if f.head == 0 {
		return r == 0 || filled > 0 && fit == filled && f.dataCells(r) == 0
	}
	if filled == 0 {
		return f.rowBlank(r) && r == f.head && f.head < f.tab.HeadRows
	}
	if fit < filled {
		return false
	}
	if f.blank(r, 0) {
		return true
	}
	return filled >= 2 && f.allStatOrN(r)
}

// allStatOrN reports that every filled data cell of the row is a phrase that
// only announces statistics or sample sizes.
func (f *frame) allStatOrN(r int) bool {
	some := false
	for c := 1; c < f.tab.Cols; c++ {
		cell := f.cellAt(r, c)
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		p := f.reads[cell].phrase
		if !p.onlyTerms && !p.onlyN {
			return false
		}
		some = true
	}
	return some
}

func (f *frame) rowBlank(r int) bool {
	for c := 0; c < f.tab.Cols; c++ {
		if !f.blank(r, c) {
			return false
		}
	}
	return true
}

// dataCells counts the cells of row r, right of the first column, that print
// numbers as data.
func (f *frame) dataCells(r int) int {
	n := 0
	for c := 1; c < f.tab.Cols; c++ {
		if cell := f.cellAt(r, c); cell != nil && f.reads[cell].isData() {
			n++
		}
	}
	return n
}

// spreadCells counts the cells of row r that print an estimate with its spread.
func (f *frame) spreadCells(r int) int {
	n := 0
	for c := 1; c < f.tab.Cols; c++ {
		cell := f.cellAt(r, c)
		if cell == nil {
			continue
		}
		rd := f.reads[cell]
		if rd.hasSpread() && rd.cell.Letters == 0 && len(rd.cell.Terms) == 0 && !rd.phrase.hasN {
			n++
		}
	}
	return n
}

// findStub settles how many leading columns label the rows.
func (f *frame) findStub() {
	f.stub = 1
	if f.tab.Cols == 1 {
		return
	}
	for f.stub < f.tab.Cols-1 && f.stubLike(f.stub) {
		f.stub++
	}
}

// stubLike reports a column that labels rows: mostly words, and not headed by a
// statistic, an n or a p.
func (f *frame) stubLike(c int) bool {
	text, other := 0, 0
	for r := f.head; r < f.tab.Rows; r++ {
		cell := f.grid[r][c]
		if cell == nil || cell.Row != r || cell.Col < c && cell.Col > 0 {
			continue
		}
		if cell.Col == 0 && cell.ColSpan > 1 {
			continue // a group label over the stub
		}
		if isBlankText(cell.Text.S) {
			continue
		}
		if f.reads[cell].isLabel() {
			text++
		} else {
			other++
		}
	}
	if text == 0 {
		return false
	}
	for r := 0; r < f.head; r++ {
		cell := f.grid[r][c]
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		p := f.reads[cell].phrase
		if cell.Col == c && (p.isP || p.onlyN) {
			return false
		}
		if generalTime[strings.Trim(fold(cell.Text.S), " .:()")] && !f.anySpread(c) {
			return true // Week: 0, 6, 12
		}
	}
	return text >= 2*other || text >= other && f.spannedStub(c-1)
}

func (f *frame) findSpread(c int) bool {
	for r := f.head; r < f.tab.Rows; r++ {
		if cell := f.cellAt(r, c); cell != nil && f.reads[cell].hasSpread() {
			return true
		}
	}
	return false
}

// spannedStub reports that labels of column c span several rows, so that the
// next column must tell those rows apart.
func (f *frame) spannedStub(c int) bool {
	for r := f.head; r < f.tab.Rows; r++ {
		if cell := f.cellAt(r, c); cell != nil && cell.RowSpan > 1 {
			return true
		}
	}
	return false
}

// findHeads gathers the headings over every column.
func (f *frame) findHeads() {
	f.heads = make([][]label, f.tab.Cols)
	for c := range f.heads {
		var last *paper.Cell
		for r := 0; r < f.head; r++ {
			cell := f.headCell(r, c)
			if cell == nil || cell == last || isBlankText(cell.Text.S) {
				continue
			}
			last = cell
			f.heads[c] = append(f.heads[c], f.label(cell))
		}
	}
}

// goesOn reports that a span is marked one column short: a time stands below the
// blank cell as one does below the span, and another span of the row begins with the
// same sub-heading.
func (f *frame) goesOn(r, c int, left *paper.Cell) bool {
	sub := func(k int) string {
		if cell := f.grid[r+1][k]; cell != nil {
			return fold(cell.Text.S)
		}
		return ""
	}
	timed := false
	for k := left.Col; k < min(left.Col+left.ColSpan, f.tab.Cols); k++ {
		timed = timed || f.lex.isTime(sub(k))
	}
	if !timed || !f.lex.isTime(sub(c)) || sub(left.Col) == "" {
		return false
	}
	for k := f.stub; k < f.tab.Cols; k++ {
		if o := f.cellAt(r, k); o != nil && o != left && o.ColSpan > 1 && !isBlankText(o.Text.S) && sub(k) == sub(left.Col) {
			return true
		}
	}
	return false
}

// headCell gives the heading cell that stands over column c in row r. Where a
// heading row has no spans marked but blank cells under which the next row goes
// on, the heading to the left stands over them too.
func (f *frame) headCell(r, c int) *paper.Cell {
	cell := f.grid[r][c]
	if cell != nil && !isBlankText(cell.Text.S) || r+1 >= f.head || c < f.stub {
		return cell
	}
	if f.blank(r+1, c) && !f.headBelow(r+1, c) {
		return cell
	}
	alone := f.standsAlone(r+1, c)
	for k := c - 1; k >= f.stub; k-- {
		left := f.grid[r][k]
		if left == nil || isBlankText(left.Text.S) {
			continue
		}
		if alone && !f.standsAlone(r+1, k) {
			return cell
		}
		if left.ColSpan > 1 && (f.aloneInRow(r, left) || f.goesOn(r, c, left)) {
			return left
		}
		if left.ColSpan > 1 || left.RowSpan > 1 || f.soleHead(r, k) {
			return cell
		}
		return left
	}
	return cell
}

// standsAlone reports that the heading below a blank one is of a comparison or
// of p values, which belongs to none of the arms beside it.
func (f *frame) standsAlone(r, c int) bool {
	for ; r < f.head; r++ {
		cell := f.grid[r][c]
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		low := fold(cell.Text.S)
		return isPHeading(low) || f.lex.compares(cell.Text.S) || isContrast(low)
	}
	return false
}

// aloneInRow reports that a heading is the only one over the data columns in
// its row and begins with the first of them: it heads them all, whatever its
// marked span.
func (f *frame) aloneInRow(r int, cell *paper.Cell) bool {
	if cell.Col != f.stub {
		return false
	}
	for c := f.stub; c < f.tab.Cols; c++ {
		if o := f.grid[r][c]; o != nil && o != cell && !isBlankText(o.Text.S) {
			return false
		}
		if !f.headBelow(r+1, c) {
			return false
		}
	}
	return true
}

// headBelow reports a filled heading cell in column c at row r or below.
func (f *frame) headBelow(r, c int) bool {
	for ; r < f.head; r++ {
		if !f.blank(r, c) {
			return true
		}
	}
	return false
}

// soleHead reports that nothing stands below the heading at (r, c), so that it
// heads its own column only.
func (f *frame) soleHead(r, c int) bool { return !f.headBelow(r+1, c) }

func (f *frame) findLabel(cell *paper.Cell) label {
	text, marks := f.notes.split(&cell.Text)
	return label{text: text, raw: clean(cell.Text.S), marks: marks, cell: cell}
}
