package table

import (
	"strconv"
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// size is a sample size with where it was read.
type size struct {
	n      int
	from   string // the record's n_from
	words  string // in words
	text   string // as printed
	place  paper.Place
	shared bool // from one column of n's for all arms of the row
	total  bool // it may be the total of several arms
	counts bool // it is the denominator of counts
	told   bool // it is a count of the text that names neither this table nor this time
}

// number reads an n as printed.
func number(n grammar.Number) int {
	v, err := strconv.Atoi(strings.ReplaceAll(n.Value, ",", ""))
	if err != nil || v < 1 {
		return 0
	}
	return v
}

// lastN gives the last n = 42 of a label.
func (x *lexicon) lastN(l label) (int, bool) {
	if nBySex.MatchString(l.raw) {
		return 0, false // two numbers
	}
	p := x.phrase(l.raw)
	for i := len(p.ns) - 1; i >= 0; i-- {
		if end := p.ns[i].End; end < len(l.raw) && (l.raw[end] == 'M' || l.raw[end] == 'F') {
			return 0, false // 4M, 13F: two numbers
		}
		if n := number(p.ns[i].Value); n > 0 {
			return n, true
		}
	}
	if n, ok := bareN(l.raw); ok {
		return n, true
	}
	return 0, false
}

var (
	worded = pattern.MustCompile(`(?i)[(\[]\s*(?:n|no\.?)?\s*(\d[\d,]*)\s*(?:patients|subjects|participants|women|men|children|colonies|persons|people|individuals)\s*[)\]]`)
)

// bareN reads "Syrup (42 colonies)".
func bareN(s string) (int, bool) {
	if m := worded.FindStringSubmatch(s); m != nil {
		v, err := strconv.Atoi(strings.ReplaceAll(m[1], ",", ""))
		return v, err == nil && v > 0
	}
	return 0, false
}

// headingN gives the n in the headings over (r, c), the lowest first.
func (f *frame) headingN(r, c int) (int, label, bool) {
	path := f.path(r, c)
	for i := len(path) - 1; i >= 0; i-- {
		if n, ok := f.lex.lastN(path[i]); ok {
			return n, path[i], true
		}
	}
	return 0, label{}, false
}

func sizeOfLabel(n int, l label, from, words string) size {
	s := size{n: n, from: from, words: words, text: l.raw}
	if l.cell != nil {
		s.place = l.cell.Text.Between(0, len(l.cell.Text.S))
	}
	return s
}

// nearSize finds the n of an estimate inside its own table.
func (f *frame) nearSize(e *estimate, x *context) (size, bool) {
	for _, find := range []func(*estimate, *context) (size, bool){
		f.cellSize, f.columnSize, f.labelSize, f.rowNote, f.rowSize, f.markSize, f.sexSize, f.headSize, f.noteSize, f.captionSize, f.loneSize, f.declaredSize, f.shareSize,
	} {
		if s, ok := find(e, x); ok {
			return s, true
		}
	}
	return size{}, false
}

// cellSize reads an n printed beside the estimate, or in a note that a mark
// behind it leads to.
func (f *frame) cellSize(e *estimate, _ *context) (size, bool) {
	for _, it := range e.parts {
		if it.Kind == grammar.KindSampleSize {
			if n := number(it.Value); n > 0 {
				return size{n: n, from: result.NBeside, words: "the cell", text: e.cell.Text.S[it.Start:it.End], place: e.cell.Text.Between(it.Start, it.End)}, true
			}
		}
	}
	for _, it := range e.extra {
		if f.bracketIsN(e) && it.Value.Value != "" {
			if n := number(it.Value); n > 0 {
				return size{n: n, from: result.NBeside, words: "the cell", text: it.Value.Value, place: e.cell.Text.Between(it.Start, it.End)}, true
			}
		}
	}
	for _, m := range e.marks {
		for _, nt := range f.notes.marked(m) {
			p := parsePhrase(textOf(nt.run))
			if len(p.ns) == 1 {
				if n := number(p.ns[0].Value); n > 0 {
					return size{n: n, from: result.NHeading, words: nt.from, text: clean(nt.run.S), place: nt.run.At(0)}, true
				}
			}
		}
	}
	return size{}, false
}

var nInBracket = pattern.MustCompile(`(?i)[(\[]\s*(?:n|no\.?|number)\s*[)\]]`)

// bracketIsN reports that a heading, caption or note says that a bracket holds
// the n: "mean ± SD (n)".
func (f *frame) bracketIsN(e *estimate) bool {
	for _, l := range append(append([]label{}, f.path(e.row, e.col)...), f.lines[e.row].labels...) {
		if nInBracket.MatchString(l.text) {
			return true
		}
	}
	for _, g := range f.lines[e.row].groups {
		for _, l := range f.lines[g].labels {
			if nInBracket.MatchString(l.text) {
				return true
			}
		}
	}
	if nInBracket.MatchString(f.tab.Caption.S) {
		return true
	}
	for _, n := range f.notes.list {
		if nInBracket.MatchString(n.run.S) {
			return true
		}
	}
	return false
}

// columnSize reads a column of n's in the same row: under the same outer
// heading, or the only one of the table.
func (f *frame) columnSize(e *estimate, x *context) (size, bool) {
	path := f.path(e.row, e.col)
	var nCols []int
	for c := f.stub; c < f.tab.Cols; c++ {
		if (f.columnRole(e.row, c).kind == roleN || f.analysedColumn(c)) && !f.eventColumn(c) {
			nCols = append(nCols, c)
		}
	}
	if len(nCols) == 0 {
		return size{}, false
	}
	pick, best := -1, -1
	for _, c := range nCols {
		other := f.path(e.row, c)
		shared := 0
		for i := 0; i < min(len(path), len(other)-1) && path[i].cell == other[i].cell; i++ {
			shared++
		}
		switch {
		case len(other) > 1 && shared == 0 && (len(path) > 1 || f.overNames(other[0])):
			continue
		case shared > best || shared == best && c < e.col:
			pick, best = c, shared
		}
	}
	if pick < 0 || len(nCols) > 1 && best == 0 && pick > e.col {
		return size{}, false
	}
	if x.contrast && best == 0 && len(nCols) > 1 {
		return size{}, false
	}
	cell := f.grid[e.row][pick]
	if cell == nil {
		return size{}, false
	}
	vals := f.reads[cell].cell.Values
	k := 0
	if e.stacked > 1 && len(vals) == e.stacked {
		k = e.ordinal
	}
	if len(vals) <= k || vals[k].Estimate.IsZero() {
		return size{}, false
	}
	n := number(vals[k].Estimate)
	if n == 0 {
		return size{}, false
	}
	return size{n: n, from: result.NBeside, words: f.columnName(pick) + " of the same row", text: clean(cell.Text.S), place: cell.Text.Between(vals[k].Start, vals[k].End), total: x.contrast,
		shared: len(nCols) == 1 && best == 0 && len(f.armNames()) > 1}, true
}

// ofEvents is a heading over numbers of events, which are no sample sizes.
var ofEvents = pattern.MustCompile(`(?i)^\W*(?:(?:no\.?|number|n) of )?(?:events?|deaths?|died|dead|cases|losses|ref(?:erence)?|failures|relapses)\b`)

// eventColumn reports that a column counts events.
func (f *frame) eventColumn(c int) bool {
	return len(f.heads[c]) > 0 && ofEvents.MatchString(f.heads[c][len(f.heads[c])-1].text)
}

// analysedN is a heading over the numbers of those analysed in a row, with or
// without their share.
var analysedN = pattern.MustCompile(`(?i)^\W*(?:(?:no\.?|number|n) (?:of )?)?(?:(?:patients|subjects|participants|colonies|cases|observations)\s+)?(?:analy[sz]ed|evaluated|assessed|measured|included|with data|completed)\b[^(]{0,20}(?:\bn\b)?\s*(?:[,;]?\s*n?\s*\(\s*%?\s*\))?\W*$`)

// analysedColumn reports that a column is headed as the number of those analysed.
func (f *frame) analysedColumn(c int) bool {
	if len(f.heads[c]) == 0 {
		return false
	}
	text := f.heads[c][len(f.heads[c])-1].text
	return analysedN.MatchString(text) && (strings.Contains(text, "n") || strings.Contains(text, "N"))
}

// overNames reports that a heading names a group of its own.
func (f *frame) overNames(l label) bool {
	k := f.partOf(l).kind
	return k == partArm || k == partOther
}

// labelSize reads an n in the labels of the row.
func (f *frame) labelSize(e *estimate, x *context) (size, bool) {
	ln := &f.lines[e.row]
	for i := len(ln.labels) - 1; i >= 0; i-- {
		if n, ok := f.lex.lastN(ln.labels[i]); ok {
			s := sizeOfLabel(n, ln.labels[i], result.NBeside, "row label")
			if _, _, inHead := f.headingN(e.row, e.col); inHead && f.armsInColumns() {
				continue // a total beside arms with n's of their own
			}
			if f.armRows && i < len(ln.labels)-1 && f.rowPart(ln.labels[len(ln.labels)-1]).kind == partArm {
				continue // of all arms in the rows of one outcome
			}
			s.total = x.contrast || f.armsInColumns()
			return s, true
		}
		if s, ok := f.markedN(ln.labels[i].marks, x); ok {
			return s, true
		}
	}
	return size{}, false
}

// rowSize reads a row of n's or a note on n's: in the same block, at the label
// of its group, then of the groups around it, then for the whole table.
func (f *frame) rowSize(e *estimate, x *context) (size, bool) {
	ln := &f.lines[e.row]
	for d := len(ln.groups); d >= 0; d-- {
		if s, ok := f.nRow(e, ln.groups[:d]); ok {
			return s, true
		}
		if d == 0 {
			break
		}
		g := ln.groups[d-1]
		for _, l := range f.lines[g].labels {
			if s, ok := f.markedN(l.marks, x); ok {
				return s, true
			}
		}
		if cell := f.grid[g][e.col]; cell != nil && f.reads[cell].phrase.onlyN {
			if s, ok := f.nCell(max(g, f.midN(e)), e.col); ok {
				return s, true
			}
		}
	}
	if r := f.midN(e); r >= 0 {
		if s, ok := f.nCell(r, e.col); ok {
			return s, true
		}
	}
	if s, ok := f.keptN(e); ok {
		return s, true
	}
	return f.blockN(e)
}

// blockN reads the n's of the last row above that holds nothing else: they open
// a block, "Colonies fed to the end | n = 31 | n = 29", and replace those of the
// headings down to the next such row: past the next group only where the block
// has the same rows as the one before it.
func (f *frame) blockN(e *estimate) (size, bool) {
	past := false
	for r := e.row - 1; r >= f.head; r-- {
		switch {
		case !f.onlyNs(r):
			past = past || f.lines[r].kind == lineGroup
		case past && !f.rowAbove(r, f.lines[e.row].labels):
			return size{}, false
		default:
			return f.nCell(r, e.col)
		}
	}
	return size{}, false
}

// rowAbove reports that a row above r is labelled the same.
func (f *frame) rowAbove(r int, labels []label) bool {
	for k := f.head; k < r; k++ {
		own := f.lines[k].labels
		if len(own) > 0 && len(labels) > 0 && own[len(own)-1].text == labels[len(labels)-1].text {
			return true
		}
	}
	return false
}

// onlyNs reports a row with a label whose cells, two or more, all print n = ...
func (f *frame) onlyNs(r int) bool {
	count := 0
	for c := f.stub; c < f.tab.Cols; c++ {
		cell := f.cellAt(r, c)
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		if p := f.reads[cell].phrase; !p.onlyN || len(p.ns) == 0 {
			return false
		}
		count++
	}
	return count >= 2 && len(f.lines[r].labels) > 0
}

// midN is the last heading row inside the body, above the estimate, that prints
// nothing but n's; -1 where there is none.
func (f *frame) midN(e *estimate) int {
	for i := len(f.mid) - 1; i >= 0; i-- {
		m := f.mid[i]
		if m.row < e.row && m.cells[e.col].cell != nil && f.reads[m.cells[e.col].cell].phrase.onlyN {
			return m.row
		}
	}
	return -1
}

// nRow finds the row of n's under exactly these groups: the nearest above, or,
// inside a block, below.
func (f *frame) nRow(e *estimate, groups []int) (size, bool) {
	fit := func(r int) bool {
		o := &f.lines[r]
		return o.kind == lineData && len(o.groups) == len(groups) && prefix(o.groups, groups) && f.rowRole(r).kind == roleN
	}
	for r := e.row - 1; r >= f.head; r-- {
		if fit(r) {
			if s, ok := f.nCell(r, e.col); ok {
				return s, true
			}
		}
	}
	for r := e.row + 1; r < f.tab.Rows; r++ {
		if fit(r) {
			if s, ok := f.nCell(r, e.col); ok {
				return s, true
			}
		}
	}
	return size{}, false
}

// keptN goes on with the n's printed at an earlier group label of the same
// depth or less, where no heading gives any.
func (f *frame) keptN(e *estimate) (size, bool) {
	if _, _, ok := f.headingN(e.row, e.col); ok {
		return size{}, false
	}
	ln := &f.lines[e.row]
	for r := e.row - 1; r >= f.head; r-- {
		o := &f.lines[r]
		if o.kind != lineGroup || len(o.groups) > len(ln.groups) || !prefix(o.groups, ln.groups) {
			continue
		}
		if cell := f.grid[r][e.col]; cell != nil && f.reads[cell].phrase.onlyN {
			return f.nCell(r, e.col)
		}
	}
	return size{}, false
}

// nCell reads an n out of a cell of a row of n's.
func (f *frame) nCell(r, c int) (size, bool) {
	cell := f.grid[r][c]
	if cell == nil {
		return size{}, false
	}
	rd := f.reads[cell]
	if len(rd.phrase.ns) > 0 && rd.phrase.onlyN {
		if n := number(rd.phrase.ns[0].Value); n > 0 {
			return size{n: n, from: result.NHeading, words: "row of sample sizes above", text: clean(cell.Text.S), place: cell.Text.At(0)}, true
		}
	}
	if len(rd.cell.Values) == 1 && !rd.cell.Values[0].Estimate.IsZero() {
		if n := number(rd.cell.Values[0].Estimate); n > 0 && isWhole(rd.cell.Values[0].Estimate.Value) {
			return size{n: n, from: result.NHeading, words: "row of sample sizes", text: clean(cell.Text.S), place: cell.Text.At(0)}, true
		}
	}
	return size{}, false
}

// prefix reports that every group of a is also over b.
func prefix(a, b []int) bool {
	if len(a) > len(b) {
		return false
	}
	for i := range a {
		if a[i] != b[i] {
			return false
		}
	}
	return true
}

// markSize reads the notes that the marks of the groups and headings lead to.
func (f *frame) markSize(e *estimate, x *context) (size, bool) {
	ln := &f.lines[e.row]
	for i := len(ln.groups) - 1; i >= 0; i-- {
		for _, l := range f.lines[ln.groups[i]].labels {
			if s, ok := f.markedN(l.marks, x); ok {
				return s, true
			}
		}
	}
	for i := len(ln.groups) - 1; i >= 0; i-- {
		for _, l := range f.lines[ln.groups[i]].labels {
			if n, ok := f.lex.lastN(l); ok && !f.armsInColumns() {
				return sizeOfLabel(n, l, result.NHeading, "label of the row group"), true
			}
		}
	}
	return size{}, false
}

// headSize reads the n in the column's headings: the one for the row's own time
// where a heading gives several, and none where the group of the row has fewer than
// the heading says.
func (f *frame) headSize(e *estimate, x *context) (size, bool) {
	n, l, ok := f.headingN(e.row, e.col)
	if !ok || x.contrast {
		return size{}, false
	}
	if ns := nByTime.FindAllStringSubmatch(l.raw, -1); len(ns) > 1 {
		return f.timedSize(ns, e, x, l)
	}
	if f.fewerInGroup(e) {
		return size{}, false
	}
	return sizeOfLabel(n, l, result.NHeading, f.columnName(e.col)), true
}

// fewerInGroup reports that the group of the row has fewer than the arm over the
// column: "Flight (n = 23)" under arms of 54 and 51, of which each arm's part is not
// printed.
func (f *frame) fewerInGroup(e *estimate) bool {
	n, _, ok := f.headingN(e.row, e.col)
	if !ok || !f.armsInColumns() {
		return false
	}
	for _, g := range f.lines[e.row].groups {
		for _, own := range f.lines[g].labels {
			if part, has := f.lex.lastN(own); has && part < n {
				return true
			}
		}
	}
	return false
}

// nByTime is one of several sizes in a heading: "(Outcome, n = 45; Follow-up, n = 42)".
var nByTime = pattern.MustCompile(`(?i)([\pL][\pL\d -]*?)\s*[,:]?\s*\bn\s*=\s*([0-9]{1,6})\b`)

// timedSize picks the size that a heading gives for the time or label of the row.
func (f *frame) timedSize(ns [][]string, e *estimate, x *context, l label) (size, bool) {
	own := []string{x.time}
	for _, r := range f.lines[e.row].labels {
		own = append(own, r.text)
	}
	for _, m := range ns {
		for _, o := range own {
			if n, ok := census.Number(m[2]); ok && o != "" && fold(o) == fold(m[1]) {
				return sizeOfLabel(n, l, result.NHeading, f.columnName(e.col)), true
			}
		}
	}
	return size{}, false
}
