package table

import (
	"strings"

	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// contrastSize gives a result between arms the n of each.
func (b *binder) contrastSize(r *result.Result, i int, f *frame, e *estimate, x *context) {
	one := func(arm string) (size, bool) {
		if s, ok := f.armSizeIn(e, arm); ok {
			return s, true
		}
		y := *x
		y.arm = arm
		if s, ok := b.flowSize(i, f, &y); ok {
			return s, true
		}
		return b.otherSize(i, arm)
	}
	if f.colArms && f.manyNs(e, armWords(x.arm)) {
		r.Raise(FlagNConflict, "the headings give the arm a different n at each time")
		return
	}
	s1, ok1 := one(x.arm)
	s2, ok2 := one(x.arm2)
	if total, ok := f.columnSize(e, x); ok && !f.armRows {
		if !ok1 || !ok2 || total.n != s1.n+s2.n {
			b.setN(r, total, f, x)
			return
		}
	}
	if f.baselineN(b) && !atBaseline(x) {
		r.Raise(FlagNBaseline, "the n of the arms are those at baseline")
		return
	}
	if ok1 {
		b.setN(r, s1, f, x)
	}
	if ok2 {
		r.N2 = s2.n
		r.Sources = append(r.Sources, result.Source{Field: "n2", Place: s2.place, Text: shorten(s2.text, 200), From: s2.words})
	}
	if ok1 {
		return
	}
	if s, ok := f.nearSize(e, x); ok {
		b.setN(r, s, f, x)
	}
}

// armSizeIn finds the n of a named arm for the row of an estimate: in the
// column of that arm, in its row of n's, or in caption and notes.
func (f *frame) armSizeIn(e *estimate, arm string) (size, bool) {
	want := armWords(arm)
	if f.colArms && f.manyNs(e, want) {
		return size{}, false // a different n at each time, and none is said to be the comparison's
	}
	if f.colArms {
		for c := f.stub; c < f.tab.Cols; c++ {
			name := armWords(f.armOfColumn(e.row, c))
			if name == "" || name != want || f.pColumn(c) || c == e.col {
				continue
			}
			o := &estimate{row: e.row, col: c, cell: f.grid[e.row][c]}
			x := &context{arm: arm}
			if f.columnRole(e.row, c).kind == roleN {
				if cell := f.grid[e.row][c]; cell != nil {
					if vs := f.reads[cell].cell.Values; len(vs) == 1 {
						if n := number(vs[0].Estimate); n > 0 {
							return size{n: n, from: result.NBeside, words: f.columnName(c) + " of the same row", text: clean(cell.Text.S), place: cell.Text.At(0)}, true
						}
					}
				}
			}
			if o.cell != nil {
				for _, v := range f.reads[o.cell].cell.Values {
					if !v.Of.IsZero() {
						if n := number(v.Of); n > 0 {
							return size{n: n, from: result.NBeside, words: "denominator in the same row", text: clean(o.cell.Text.S), place: o.cell.Text.Between(v.Of.Start, v.Of.End)}, true
						}
					}
				}
			}
			for _, find := range []func(*estimate, *context) (size, bool){f.columnSize, f.rowSize, f.markSize, f.headSize} {
				if s, ok := find(o, x); ok {
					return s, true
				}
			}
		}
	}
	if f.armRows {
		for r := f.head; r < f.tab.Rows; r++ {
			ln := &f.lines[r]
			if ln.kind != lineData || len(ln.labels) == 0 {
				continue
			}
			l := ln.labels[len(ln.labels)-1]
			if armWords(f.lex.name(l.text)) != want || !prefix(f.lines[e.row].groups, ln.groups) && len(f.lines[e.row].groups) > 0 {
				continue
			}
			if n, ok := f.lex.lastN(l); ok {
				return sizeOfLabel(n, l, result.NBeside, "row label"), true
			}
			o := &estimate{row: r, col: e.col, cell: f.grid[r][e.col]}
			if s, ok := f.columnSize(o, &context{}); ok && (len(ln.labels) < 2 || sameFirst(ln, &f.lines[e.row])) {
				return s, true
			}
		}
	}
	x := &context{arm: arm}
	if s, ok := f.noteSize(e, x); ok {
		return s, true
	}
	return f.captionSize(e, x)
}

// manyNs reports that the headings give the arm different n's, at different
// times.
func (f *frame) manyNs(e *estimate, arm string) bool {
	seen := 0
	for c := f.stub; c < f.tab.Cols; c++ {
		if f.pColumn(c) || c == e.col || armWords(f.armOfColumn(e.row, c)) != arm {
			continue
		}
		n, _, ok := f.headingN(e.row, c)
		switch {
		case !ok:
		case seen == 0:
			seen = n
		case seen != n:
			return true
		}
	}
	return false
}

func sameFirst(a, b *line) bool {
	return len(a.labels) > 0 && len(b.labels) > 0 && a.labels[0].text == b.labels[0].text
}

var wholeColumn = pattern.MustCompile(`(?i)\b(?:total|tested|all|overall|sample|participants|patients|subjects|population|colonies|examined|screened|respondents)\b`)

// categorySize reads the n's of a ratio that compares categories in rows: the
// count beside it in the column for all subjects, and that of the reference row
// of its group.
func (b *binder) categorySize(r *result.Result, f *frame, e *estimate, x *context) bool {
	if r.Statistic != result.Ratio || x.arm2 != "" {
		return false
	}
	col := -1
	for c := f.stub; c < f.tab.Cols; c++ {
		k := f.columnRole(e.row, c).kind
		if k != rolePercent && k != roleN || !wholeColumn.MatchString(joinLabels(f.path(e.row, c))) {
			continue
		}
		if col >= 0 {
			return false
		}
		col = c
	}
	if col < 0 {
		return false
	}
	n, s := f.countAt(e.row, col)
	if n == 0 {
		return false
	}
	ref := f.referenceRow(e)
	if ref < 0 {
		return false // counts of events, not of the compared
	}
	b.setN(r, s, f, x)
	if n2, s2 := f.countAt(ref, col); n2 > 0 {
		r.N2 = n2
		r.Sources = append(r.Sources, result.Source{Field: "n2", Place: s2.place, Text: s2.text, From: "the reference row"})
	}
	return true
}

// referenceRow finds the row that the categories of an estimate's group are
// compared with; -1 where there is none.
func (f *frame) referenceRow(e *estimate) int {
	for q := f.head; q < f.tab.Rows; q++ {
		ln := &f.lines[q]
		if q == e.row || ln.kind != lineData || len(ln.groups) != len(f.lines[e.row].groups) || !prefix(ln.groups, f.lines[e.row].groups) {
			continue
		}
		if cell := f.grid[q][e.col]; cell != nil && isReference(f.reads[cell]) {
			return q
		}
	}
	return -1
}

// countAt reads a count, alone or with its percentage, from a cell.
func (f *frame) countAt(r, c int) (int, size) {
	cell := f.grid[r][c]
	if cell == nil {
		return 0, size{}
	}
	vs := f.reads[cell].cell.Values
	if len(vs) != 1 || vs[0].Estimate.IsZero() || !isWhole(vs[0].Estimate.Value) {
		return 0, size{}
	}
	n := number(vs[0].Estimate)
	return n, size{n: n, from: result.NBeside, words: f.columnName(c) + " of the same row", text: clean(cell.Text.S), place: cell.Text.At(0)}
}

// isReference reports the reference cell of a column of ratios.
func isReference(rd *cellReading) bool {
	if rd.cell.Reference {
		return true
	}
	vs := rd.cell.Values
	if len(vs) != 1 || len(vs[0].Parts) > 0 {
		return false
	}
	v, ok := vs[0].Estimate.Float()
	return ok && v == 1
}

func joinLabels(ls []label) string {
	var out []string
	for _, l := range ls {
		out = append(out, l.text)
	}
	return strings.Join(out, " ")
}
