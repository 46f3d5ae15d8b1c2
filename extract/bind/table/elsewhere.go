package table

import (
	"strconv"
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// armSize is the n that a table's heading gives an arm.
type armSize struct {
	name  string // armWords of the arm
	n     int
	table int
	l     label
}

// findArmSizes gathers the arms with an n in the headings of all tables.
func (b *binder) findArmSizes() {
	for i, f := range b.frames {
		if f == nil {
			continue
		}
		seen := map[string]bool{}
		for c := f.stub; c < f.tab.Cols; c++ {
			n, l, ok := f.headingN(f.tab.Rows, c)
			if !ok {
				continue
			}
			name := armWords(f.armOfColumn(f.head, c))
			if name == "" {
				name = armWords(nameOf(l.text))
			}
			key := name + strconv.Itoa(n)
			if name == "" || seen[key] {
				continue
			}
			seen[key] = true
			b.arms = append(b.arms, armSize{name: name, n: n, table: i, l: l})
		}
	}
}

// size gives a result its n: from its own table, else by the arm's name from
// another table of the paper.
func (b *binder) size(r *result.Result, i int, f *frame, e *estimate, x *context) {
	if x.contrast && x.arm2 != "" {
		b.contrastSize(r, i, f, e, x)
		return
	}
	if x.contrast && b.categorySize(r, f, e, x) {
		return
	}
	s, ok := f.nearSize(e, x)
	if ok && s.from == result.NHeading && f.baselineN(b) && !atBaseline(x) {
		return // the paper says that these are the numbers at baseline
	}
	if ok && s.shared && f.colArms {
		// One column of n's beside several arms: of all of them together, unless
		// every arm has the same subjects.
		if o, known := b.otherSize(i, x.arm); known && 4*s.n > 5*o.n {
			s = o
		} else {
			r.Raise(FlagNTotal, "one column of n's stands beside several arms")
		}
	}
	if !ok {
		s, ok = b.flowSize(i, f, x)
	}
	if !ok {
		s, ok = b.otherSize(i, x.arm)
		if !ok {
			return
		}
	}
	b.setN(r, s, f, x)
}

func (b *binder) setN(r *result.Result, s size, f *frame, x *context) {
	r.N, r.NFrom, r.NKind = s.n, s.from, kindOfN(s.text+" "+f.tab.Caption.S)
	r.Sources = append(r.Sources, result.Source{Field: "n", Place: s.place, Text: shorten(s.text, 200), From: s.words})
	if s.from == result.NElsewhere {
		r.Raise(FlagNElsewhere, "read from "+s.words)
	}
	if s.total && x.contrast {
		r.Raise(FlagNTotal, "the n may be that of both arms together")
	}
	if r.NKind == result.NUnclear && (s.from == result.NHeading || s.from == result.NElsewhere) && !atBaseline(x) && x.time != "" {
		r.Raise(FlagNKind, "the n in the heading may be that at baseline")
	}
}

func kindOfN(s string) string {
	low := fold(s)
	switch {
	case strings.Contains(low, "randomi"):
		return result.NRandomised
	case strings.Contains(low, "complet"):
		return result.NCompleters
	case strings.Contains(low, "analy"):
		return result.NAnalysed
	}
	return result.NUnclear
}

// atBaseline reports that a result is about the time before treatment.
func atBaseline(x *context) bool {
	low := fold(x.time)
	return low == "" && !x.change || strings.Contains(low, "baseline") && !strings.Contains(low, "change") && !strings.Contains(low, " to ") || strings.HasPrefix(low, "pre") || strings.HasPrefix(low, "before") || strings.Contains(low, "screening") || strings.Contains(low, "week 0")
}

// baselineN reports that a note says the headings' n's are those at baseline:
// of this table, or of an earlier one whose caption begins alike.
func (f *frame) baselineN(b *binder) bool {
	if f.saysBaselineN() {
		return true
	}
	for _, g := range b.frames {
		if g == nil || g.num >= f.num {
			continue
		}
		if g.saysBaselineN() && sameOpening(g.tab.Caption.S, f.tab.Caption.S) {
			return true
		}
	}
	return false
}

func (f *frame) saysBaselineN() bool {
	for _, n := range f.notes.list {
		low := fold(n.run.S)
		if k := strings.Index(low, "baseline"); k >= 0 {
			from := max(0, k-60)
			around := " " + low[from:k]
			if (strings.Contains(around, " n for ") || strings.Contains(around, " n at ") || strings.Contains(around, " n is ") || strings.Contains(around, " n's ") || strings.Contains(around, " n = ") && strings.Contains(around, "number of")) && !strings.Contains(around, ".") {
				return true
			}
		}
	}
	return false
}

// sameOpening reports that two captions begin with the same four words.
func sameOpening(a, b string) bool {
	wa, wb := words(a), words(b)
	if len(wa) < 4 || len(wb) < 4 {
		return false
	}
	for i := 0; i < 4; i++ {
		if wa[i] != wb[i] {
			return false
		}
	}
	return true
}

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
			if armWords(nameOf(l.text)) != want || !prefix(f.lines[e.row].groups, ln.groups) && len(f.lines[e.row].groups) > 0 {
				continue
			}
			if n, ok := lastN(l); ok {
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

// otherSize finds the n of an arm in the headings of the paper's other tables;
// the nearest table before, then after. Tables that disagree give the first
// with a flag by the caller.
func (b *binder) otherSize(i int, arm string) (size, bool) {
	want := armWords(arm)
	if want == "" {
		return size{}, false
	}
	best, dist := -1, 1<<30
	for k, a := range b.arms {
		if a.table == i {
			continue
		}
		d := i - a.table
		if d < 0 {
			d = -d + 1000
		}
		switch {
		case a.name == want:
		case sameArm(a.name, want):
			d += 10
		case within(want, a.name) && b.only(a.table, want):
			d += 2000
		default:
			continue
		}
		if d < dist {
			best, dist = k, d
		}
	}
	if best < 0 {
		return size{}, false
	}
	a := b.arms[best]
	return sizeOfLabel(a.n, a.l, result.NElsewhere, "heading in "+tableName(b.frames[a.table])), true
}

// within reports that all words of the short name stand in the long one.
func within(short, long string) bool {
	have := map[string]bool{}
	for _, w := range words(long) {
		have[w] = true
	}
	ws := words(short)
	some := false
	for _, w := range ws {
		if !have[w] && !generalWord[w] {
			return false
		}
		some = some || have[w]
	}
	return some
}

var generalWord = map[string]bool{"dose": true, "group": true, "arm": true, "treatment": true, "regimen": true, "groups": true, "therapy": true, "the": true}

// only reports that one arm alone of the table has all words of the name.
func (b *binder) only(table int, name string) bool {
	n := 0
	for _, a := range b.arms {
		if a.table == table && within(name, a.name) {
			n++
		}
	}
	return n == 1
}

// sameArm reports that one name is the other with more words: "placebo" and
// "placebo group 50 mg" are not the same, "chemotherapy" and "chemotherapy arm"
// are.
func sameArm(a, b string) bool {
	strip := func(s string) string {
		s = strings.NewReplacer(" group", "", " arm", "", "group ", "", "the ", "", "-", " ", ".", "").Replace(s)
		return strings.TrimSpace(s)
	}
	return strip(a) == strip(b) && strip(a) != ""
}

var _ = paper.Bold

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
	b.setN(r, s, f, x)
	for q := f.head; q < f.tab.Rows; q++ {
		ln := &f.lines[q]
		if q == e.row || ln.kind != lineData || len(ln.groups) != len(f.lines[e.row].groups) || !prefix(ln.groups, f.lines[e.row].groups) {
			continue
		}
		cell := f.grid[q][e.col]
		if cell == nil || !isReference(f.reads[cell]) {
			continue
		}
		if n2, s2 := f.countAt(q, col); n2 > 0 {
			r.N2 = n2
			r.Sources = append(r.Sources, result.Source{Field: "n2", Place: s2.place, Text: s2.text, From: "the reference row"})
		}
		break
	}
	return true
}

func joinLabels(ls []label) string {
	var out []string
	for _, l := range ls {
		out = append(out, l.text)
	}
	return strings.Join(out, " ")
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
