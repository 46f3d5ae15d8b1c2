package table

import (
	"strings"
	"unicode"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// lineKind says what a body row of a table is.
type lineKind uint8

const (
	lineNone     lineKind = iota // a heading row, a blank row
	lineData                     // a row with values
	lineGroup                    // a label over the rows below, with at most a p value or n's beside it
	lineHead                     // column headings repeated inside the body
	lineContinue                 // values under a blank stub: they belong to the row above
)

// line is one body row: what it is and the labels before it.
type line struct {
	kind   lineKind
	labels []label // its own, from the outer to the inner stub column
	groups []int   // rows of the group labels over it, outermost first
	above  int     // of a lineContinue: the row that it goes on with
	level  int     // of its label, for the nesting of groups
}

// midHead is a row of column headings inside the body.
type midHead struct {
	row   int
	cells []label // by column; empty where the row says nothing new
}

// findLines classifies every body row and nests the groups.
func (f *frame) findLines() {
	f.lines = make([]line, f.tab.Rows)
	var carried, byCol []label
	lastData := -1
	for r := f.head; r < f.tab.Rows; r++ {
		if f.rowBlank(r) {
			continue
		}
		ln := &f.lines[r]
		own := f.ownLabels(r)
		ln.kind = f.kindOf(r, own)
		if lastData >= 0 && f.spreadsUnder(r, lastData, own) {
			f.joinLabel(lastData, own[0])
			ln.kind, ln.above, ln.labels = lineContinue, lastData, f.lines[lastData].labels
			continue
		}
		if lastData >= 0 && f.wraps(r, lastData, own) {
			f.joinLabel(lastData, own[0])
			ln.kind = lineNone
			continue
		}
		if ln.kind == lineHead {
			f.addMidHead(r)
			if len(own) > 0 && !(len(own) == 1 && overLabels.MatchString(own[0].text)) {
				ln.labels = own
			}
			lastData = -1
			continue
		}
		if len(own) > 1 {
			own[0] = f.outerLabel(r, own[0], carried)
		}
		switch {
		case len(own) == 0 && ln.kind == lineData && lastData >= 0:
			ln.kind, ln.above = lineContinue, lastData
			ln.labels = f.lines[lastData].labels
		case f.stub > 1 && len(own) > 0 && f.blank(r, 0) && len(carried) > 0:
			ln.labels = append(append([]label{}, carried[0]), own...)
		default:
			ln.labels = own
		}
		if f.stub > 2 && ln.kind == lineData && len(own) > 0 {
			ln.labels, byCol = f.deepLabels(r, own, byCol)
		}
		if ln.kind == lineData {
			lastData = r
		} else if ln.kind == lineGroup {
			lastData = -1
		}
		if len(own) > 0 && !f.blank(r, 0) && (ln.kind == lineData || f.stub > 1) {
			carried = ln.labels[:1]
		}
		if ln.kind == lineGroup && !f.blank(r, 0) {
			carried = nil
			if f.stub > 1 && f.grid[r][0] != nil && f.grid[r][0].ColSpan < f.tab.Cols && f.innerLabelsBelow(r) {
				carried = nil
			}
		}
	}
	f.nest()
}

// deepLabels gives the labels of row r in a table with three columns of them or
// more: what is blank in front of its own goes on from the rows above, and an
// outer label that closes the bracket of the one above is its second piece. It
// also gives the labels by column, for the next row.
func (f *frame) deepLabels(r int, own, above []label) (labels, byCol []label) {
	byCol = make([]label, f.stub)
	last, k := -1, 0
	var seen *paper.Cell
	for c := 0; c < f.stub && k < len(own); c++ {
		if cell := f.grid[r][c]; cell != nil && cell != seen && !isBlankText(cell.Text.S) {
			byCol[c], seen, last = own[k], cell, c
			k++
		}
	}
	if above != nil && !byCol[0].empty() {
		switch a, l := above[0].text, byCol[0].text; {
		case a == l:
		case strings.Count(a, "(") > strings.Count(a, ")") && strings.Count(l, ")") > strings.Count(l, "("):
			byCol[0] = joinTwo(above[0], byCol[0])
		default:
			above = nil // a new outer label
		}
	}
	for c := 0; c <= last; c++ {
		if byCol[c].empty() && above != nil {
			byCol[c] = above[c]
		}
		if !byCol[c].empty() {
			labels = append(labels, byCol[c])
		}
	}
	return labels, byCol
}

// overLabels is a heading over the labels of the rows.
var overLabels = pattern.MustCompile(`(?i)^(?:outcomes?|variables?|characteristics?|parameters?|items?|factors?|measures?|interventions?|treatments?|groups?|arms?)(?: variables?| measures?)?:?$`)

// unitAlone is the second line of a label that holds only its unit: "(mg/mL)".
var unitAlone = pattern.MustCompile(`^[(\[][^()\[\]]{1,20}[)\]]$`)

// outerLabel completes the label of several rows that is printed in their first
// column piece by piece: "Protein" over "(mg/mL)", "All colonies" over "(N = 42)".
func (f *frame) outerLabel(r int, l label, carried []label) label {
	if len(carried) > 0 && unitAlone.MatchString(l.text) {
		if strings.HasSuffix(carried[0].text, l.text) {
			return carried[0]
		}
		return joinTwo(carried[0], l)
	}
	if next := f.pieceBelow(r); next != nil {
		return joinTwo(l, f.label(next))
	}
	return l
}

func joinTwo(a, b label) label {
	a.text, a.raw = clean(a.text+" "+b.text), clean(a.raw+" "+b.raw)
	return a
}

// pieceBelow gives the cell below the outer label of row r where it only adds a
// unit or an n in brackets.
func (f *frame) pieceBelow(r int) *paper.Cell {
	if r+1 >= f.tab.Rows || f.cellAt(r, 0) == nil || f.cellAt(r, 0).RowSpan > 1 || f.blank(r+1, 1) {
		return nil
	}
	if below := f.cellAt(r+1, 0); below != nil && unitAlone.MatchString(f.label(below).text) {
		return below
	}
	return nil
}

// spreadsUnder reports that row r prints, under a label that goes on with the
// one above, only the spreads of the row above: "Flight time," over "12.4",
// "min" over "(11.8 to 13.0)".
func (f *frame) spreadsUnder(r, above int, own []label) bool {
	if above != r-1 || len(own) != 1 || len(f.lines[above].labels) == 0 {
		return false
	}
	if !goesOn(own[0].text) {
		return false
	}
	found := 0
	for c := f.stub; c < f.tab.Cols; c++ {
		cell := f.cellAt(r, c)
		if cell == nil || isBlankText(cell.Text.S) || f.pColumn(c) {
			continue
		}
		up := f.cellAt(above, c)
		vs := f.reads[cell].cell.Values
		if len(vs) != 1 || !vs[0].Estimate.IsZero() || up == nil {
			return false
		}
		if us := f.reads[up].cell.Values; len(us) != 1 || len(us[0].Parts) > 0 || us[0].Estimate.IsZero() {
			return false
		}
		found++
	}
	return found > 0
}

// goesOn reports a text that begins in the middle of a sentence, and not with a
// name such as pO2 or mRNA.
func goesOn(s string) bool {
	first := []rune(s)
	return len(first) > 0 && unicode.IsLower(first[0]) && (len(first) < 2 || !unicode.IsUpper(first[1]) && !unicode.IsDigit(first[1]))
}

// wraps reports that row r only goes on with the label of the row above, beside
// second lines of its p values.
func (f *frame) wraps(r, above int, own []label) bool {
	if len(own) != 1 || len(f.lines[above].labels) == 0 || f.grid[r][0] == nil || f.grid[r][0].Head && f.grid[r][0].RowSpan > 1 {
		return false
	}
	if above != r-1 {
		return false
	}
	for c := f.stub; c < f.tab.Cols; c++ {
		if cell := f.cellAt(r, c); cell != nil && !isBlankText(cell.Text.S) && f.columnRole(r, c).kind != roleP && !f.pColumn(c) && !f.reads[cell].pLike() && !f.underP(c) {
			return false
		}
	}
	last := f.lines[above].labels[len(f.lines[above].labels)-1].text
	return goesOn(own[0].text) && f.grid[r][0].ColSpan <= f.stub || strings.HasSuffix(last, ",") || strings.HasSuffix(last, "-")
}

// underP reports that the column beside p values, under their heading or next
// to them, holds p values by what is printed.
func (f *frame) underP(c int) bool {
	small, all := 0, 0
	for r := f.head; r < f.tab.Rows; r++ {
		cell := f.cellAt(r, c)
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		all++
		vs := f.reads[cell].cell.Values
		if len(vs) == 1 && len(vs[0].Parts) == 0 {
			if v, ok := vs[0].Estimate.Float(); ok && v >= 0 && v <= 1 && strings.Contains(vs[0].Estimate.Value, ".") {
				small++
			}
		}
	}
	return all > 2 && 10*small >= 9*all && f.pColumn(min(c+1, f.tab.Cols-1))
}

// joinLabel puts the second line of a wrapped label behind the first.
func (f *frame) joinLabel(r int, more label) {
	ls := append([]label{}, f.lines[r].labels...)
	l := &ls[len(ls)-1]
	l.text = clean(l.text + " " + more.text)
	l.raw = clean(l.raw + " " + more.raw)
	l.marks = append(append([]string{}, l.marks...), more.marks...)
	f.lines[r].labels = ls
}

// innerLabelsBelow reports that the next filled row labels only its inner stub.
func (f *frame) innerLabelsBelow(r int) bool {
	for r++; r < f.tab.Rows; r++ {
		if !f.rowBlank(r) {
			return f.blank(r, 0) && !f.blank(r, 1)
		}
	}
	return false
}

// ownLabels gives the labels printed in (or spanning into) the stub of row r.
func (f *frame) ownLabels(r int) []label {
	var out []label
	var last *paper.Cell
	for c := 0; c < f.stub; c++ {
		cell := f.grid[r][c]
		if cell == nil || cell == last || isBlankText(cell.Text.S) {
			continue
		}
		last = cell
		out = append(out, f.label(cell))
	}
	return out
}

// kindOf says what row r is, by what stands in its data columns.
func (f *frame) kindOf(r int, own []label) lineKind {
	filled, headings, ns, bare := 0, 0, 0, 0
	for c := f.stub; c < f.tab.Cols; c++ {
		cell := f.cellAt(r, c)
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		if cell.RowSpan > 1 || f.pColumn(c) && (len(own) > 0 || !f.reads[cell].headingLike) {
			continue // it belongs to several rows, or is the p value of a group
		}
		filled++
		rd := f.reads[cell]
		switch {
		case rd.phrase.onlyN:
			ns++
		case len(own) == 0 && bareP(rd):
			bare++
		case rd.headingLike && !rd.isData():
			headings++
		}
	}
	switch {
	case filled == 0 && len(own) > 0:
		if f.spansOnly(r) && f.allRowSpansData(r) {
			return lineData
		}
		return lineGroup
	case filled == 0:
		return lineNone
	case bare == 1 && ns >= 2 && ns+bare == filled:
		return lineHead // n's with the p value of the row below
	case len(own) > 0 && ns == filled:
		return lineGroup
	case headings+ns == filled && (filled >= 2 || f.tab.Cols-f.stub <= 2) && f.realHeading(r, own):
		return lineHead
	case headings == 1 && filled == 1 && len(own) == 1 && f.armsBelow(r, own[0]):
		return lineHead
	}
	return lineData
}

// armsBelow reports a row "Intervention | Syrup" whose one name stands over all
// data columns of the headings in the next row.
func (f *frame) armsBelow(r int, own label) bool {
	cell := f.grid[r][f.stub]
	if cell == nil || cell.Row != r || cell.ColSpan < 2 || !onlyArmWord.MatchString(own.text) || r+1 >= f.tab.Rows {
		return false
	}
	return f.kindOf(r+1, f.ownLabels(r+1)) == lineHead
}

// bareP reports a cell that can be a p value: one number of at most 1.
func bareP(rd *cellReading) bool {
	if len(rd.cell.Values) != 1 || len(rd.cell.Values[0].Parts) > 0 {
		return false
	}
	v, ok := rd.cell.Values[0].Estimate.Float()
	return ok && v >= 0 && v <= 1
}

// spansOnly reports that a filled cell of the row spans several rows.
func (f *frame) spansOnly(r int) bool {
	for c := f.stub; c < f.tab.Cols; c++ {
		if cell := f.cellAt(r, c); cell != nil && cell.RowSpan > 1 && !isBlankText(cell.Text.S) && !f.pColumn(c) {
			return true
		}
	}
	return false
}

// allRowSpansData reports that the label spans as many rows as its cells, so
// that the row is one row of data printed high.
func (f *frame) allRowSpansData(r int) bool {
	stub := f.grid[r][0]
	if stub == nil || stub.RowSpan < 2 {
		return false
	}
	for c := f.stub; c < f.tab.Cols; c++ {
		if cell := f.cellAt(r, c); cell != nil && !isBlankText(cell.Text.S) && cell.RowSpan != stub.RowSpan {
			return false
		}
	}
	return true
}

// headsP is a heading over p values, whatever test it names.
var headsP = pattern.MustCompile(`(?i)^\W*p[- \x{2010}\x{2011}]?values?\b`)

// realHeading keeps words in the body (yes, none, ns) from being taken for
// headings: a heading row announces a statistic, an n or a time.
func (f *frame) realHeading(r int, own []label) bool {
	terms, times := 0, 0
	for c := f.stub; c < f.tab.Cols; c++ {
		cell := f.cellAt(r, c)
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		p := f.reads[cell].phrase
		switch {
		case p.onlyTerms || p.onlyN || p.terms > 0 || p.armLike || headsP.MatchString(cell.Text.S):
			terms++
		case f.lex.isTime(fold(cell.Text.S)):
			times++
		}
	}
	if len(own) == 0 {
		return terms > 0 || times >= 2
	}
	return terms >= 2 || times >= 2 || terms == 1 && f.tab.Cols-f.stub <= 2
}

func (f *frame) addMidHead(r int) {
	m := midHead{row: r, cells: make([]label, f.tab.Cols)}
	for c := f.stub; c < f.tab.Cols; c++ {
		if cell := f.grid[r][c]; cell != nil && cell.Row == r && !isBlankText(cell.Text.S) && !bareP(f.reads[cell]) {
			m.cells[c] = f.label(cell)
		}
	}
	f.mid = append(f.mid, m)
}

func (f *frame) findPath(r, c int) []label {
	path := f.heads[c]
	if cell := f.grid[r%f.tab.Rows][c]; r < f.tab.Rows && cell != nil && cell.ColSpan > 1 && cell.Row == r && cell.Col >= f.stub {
		path = covering(path, cell)
	}
	for i, m := range f.mid {
		if m.row > r {
			break
		}
		if m.cells[c].empty() && len(m.cells[c].marks) == 0 {
			continue
		}
		if f.onlyN(m.cells[c]) {
			if k := len(path) - 1; k >= 0 && f.onlyN(path[k]) {
				path = path[:k]
			}
			path = append(append([]label{}, path...), m.cells[c]) // below what the columns hold
			continue
		}
		last := label{}
		if i > 0 && f.mid[i-1].row == m.row-1 {
			last = f.mid[i-1].cells[c]
		}
		if !last.empty() && !f.onlyN(last) {
			path = []label{last, m.cells[c]} // a whole new head
			continue
		}
		path = f.overlay(f.heads[c], m.cells[c])
		if !last.empty() {
			path = append(path, last)
		}
	}
	return path
}

// onlyN reports a heading that gives a sample size and nothing else.
func (f *frame) onlyN(l label) bool { return l.cell != nil && f.reads[l.cell].phrase.onlyN }

// covering keeps the headings that stand over all columns of a wide cell.
func covering(path []label, cell *paper.Cell) []label {
	var out []label
	for _, l := range path {
		if l.cell == nil || l.cell.Col <= cell.Col && l.cell.Col+l.cell.ColSpan >= cell.Col+cell.ColSpan {
			out = append(out, l)
		}
	}
	if len(out) == 0 {
		return path
	}
	return out
}

// overlay puts a heading repeated in the body in place of the lowest heading
// where both announce a statistic, and below it otherwise.
func (f *frame) overlay(base []label, l label) []label {
	out := append([]label{}, base...)
	if k := len(out) - 1; k >= 0 {
		p := f.lex.phrase(out[k].text)
		if p.onlyTerms || p.terms > 0 && !p.hasN && !p.armLike || fold(out[k].text) == fold(l.text) {
			out = out[:k]
		}
	}
	return append(out, l)
}
