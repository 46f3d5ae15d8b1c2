package table

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// spot is a position in the grid.
type spot struct{ r, c int }

// assembly joins the estimates of a table with the spreads that stand in other
// cells: the next column, the row below.
type assembly struct {
	f    *frame
	at   map[spot][]*estimate
	list []*estimate
	lost []spread // spreads that no estimate was found for
	rows []role
}

// assemble reads all body cells of the frame in order.
func (f *frame) assemble() *assembly {
	a := &assembly{f: f, at: map[spot][]*estimate{}, rows: make([]role, f.tab.Rows)}
	var orphans []spread
	for r := f.head; r < f.tab.Rows; r++ {
		k := f.lines[r].kind
		if k == lineNone || k == lineHead {
			continue
		}
		a.rows[r] = f.rowRole(r)
		if rk := a.rows[r].kind; rk == roleP || rk == roleTest || rk == roleN {
			continue
		}
		for c := f.stub; c < f.tab.Cols; c++ {
			orphans = append(orphans, a.read(r, c)...)
		}
	}
	for i := range orphans {
		a.attach(orphans[i])
	}
	return a
}

// read takes the estimates of one cell; numbers in a column or row that holds
// only spreads come back as spreads without an estimate.
func (a *assembly) read(r, c int) []spread {
	f := a.f
	if f.cellAt(r, c) == nil {
		return nil
	}
	col := f.columnRole(r, c)
	switch col.kind {
	case roleP, roleTest, roleN:
		return nil
	}
	ests, orphans := f.estimatesIn(r, c)
	own := a.rows[r]
	if own.kind != roleSpread && own.kind != roleBound {
		own = role{}
		if col.kind == roleSpread || col.kind == roleBound {
			own = col
		}
	}
	if own.kind == roleSpread && own.label.cell == col.label.cell && own.wantsInterval() && a.intervalBelow(r, c) {
		own = role{} // "GMC" over "(95% CI)": estimates and intervals take turns
	}
	if own.kind == roleSpread && len(ests) == 2 && len(ests[0].spreads)+len(ests[1].spreads) == 0 && own.wantsInterval() {
		orphans = append(orphans, spread{shape: shapeInterval, lower: ests[0].value, upper: ests[1].value,
			item: grammar.Item{Kind: grammar.KindInterval}, cell: ests[0].cell, row: r, col: c})
		ests = nil
	}
	for i := range orphans {
		orphans[i].own = own
	}
	for _, e := range ests {
		if own.kind != roleNone && len(e.spreads) == 0 {
			orphans = append(orphans, spread{shape: shapePlain, value: e.value, item: grammar.Item{Kind: grammar.KindNumber, Span: e.value.Span, Value: e.value},
				cell: e.cell, row: r, col: c, own: own})
			continue
		}
		a.at[spot{r, c}] = append(a.at[spot{r, c}], e)
		a.list = append(a.list, e)
	}
	return orphans
}

// wantsInterval reports that a column or row holds intervals.
func (r *role) wantsInterval() bool {
	for _, q := range r.pairs {
		switch q.Spread {
		case grammar.SpreadCI, grammar.SpreadIQR, grammar.SpreadRange:
			return true
		}
	}
	return false
}

// attach finds the estimate of a spread that stands in a cell of its own.
func (a *assembly) attach(sp spread) {
	f := a.f
	inRow := a.rows[sp.row].kind == roleSpread || a.rows[sp.row].kind == roleBound
	switch {
	case inRow:
		if e := a.above(sp); e != nil {
			a.join(e, sp)
			return
		}
	case f.lines[sp.row].kind == lineContinue:
		if e := a.left(sp); e != nil && len(e.spreads) == 0 {
			a.join(e, sp)
			return
		}
		if e := a.under(sp, f.lines[sp.row].above); e != nil {
			a.join(e, sp)
			return
		}
	default:
		if e := a.left(sp); e != nil {
			a.join(e, sp)
			return
		}
		if e := a.under(sp, f.stubTop(sp.row)); e != nil && sp.shape != shapePlain {
			a.join(e, sp)
			return
		}
	}
	a.lost = append(a.lost, sp)
}

// join hangs the spread on the estimate; a lower and an upper bound in columns
// of their own make one interval.
func (a *assembly) join(e *estimate, sp spread) {
	if sp.shape == shapePlain && (sp.own.kind == roleBound || a.pairOfBounds(sp)) || sp.shape == shapeBracket && a.pairOfBounds(sp) {
		for i := range e.spreads {
			o := &e.spreads[i]
			if o.shape == shapeInterval && o.own.label.cell == sp.own.label.cell && o.upper.IsZero() || o.own.kind == roleBound && o.upper.IsZero() && o.shape == shapeInterval {
				o.upper = sp.value
				return
			}
		}
		sp.shape, sp.lower = shapeInterval, sp.value
		e.spreads = append(e.spreads, sp)
		return
	}
	e.spreads = append(e.spreads, sp)
}

// parted reports that a heading spans two bounds and a column of the word or dash
// between them: "0.95 | to | 1.32".
func (a *assembly) parted(head *paper.Cell, row int) bool {
	if head.ColSpan != 3 || head.Col+1 >= a.f.tab.Cols {
		return false
	}
	middle := a.f.cellAt(row, head.Col+1)
	if middle == nil {
		return false
	}
	switch fold(strings.TrimSpace(middle.Text.S)) {
	case "to", "-", "–", "—", "−", "‐", ",", ";":
		return true
	}
	return false
}

// pairOfBounds reports that one heading of an interval spans the column of the
// spread and a neighbour with single numbers.
func (a *assembly) pairOfBounds(sp spread) bool {
	cell := sp.own.label.cell
	if cell == nil || len(sp.own.pairs) == 0 || cell.ColSpan != 2 && !a.parted(cell, sp.row) {
		return false
	}
	switch sp.own.pairs[0].Spread {
	case grammar.SpreadCI, grammar.SpreadIQR, grammar.SpreadRange:
		return true
	}
	return false
}

// left finds the estimate that a spread in its own column belongs to: the
// nearest to the left under the same outer headings.
func (a *assembly) left(sp spread) *estimate {
	f := a.f
	path := f.path(sp.row, sp.col)
	for c := sp.col - 1; c >= f.stub; c-- {
		r := sp.row
		if cell := f.grid[r][c]; cell != nil && cell.Row != r {
			r = cell.Row
		}
		ests := a.at[spot{r, c}]
		if len(ests) == 0 {
			if k := f.columnRole(r, c).kind; k == roleN || k == roleP || k == roleTest || k == roleSpread || k == roleBound || k == rolePercent || f.blank(r, c) {
				continue
			}
			return nil
		}
		e := ests[0]
		if !sameOuter(path, f.path(r, c)) {
			return nil
		}
		if a.accepts(e, sp) {
			return e
		}
		return nil
	}
	return nil
}

// sameOuter reports that two column paths agree in all but their lowest
// heading, as far as both have outer headings.
func sameOuter(a, b []label) bool {
	n := min(len(a), len(b)) - 1
	for i := 0; i < n; i++ {
		if a[i].cell != b[i].cell && a[i].text != b[i].text {
			return false
		}
	}
	return true
}

// accepts reports that the estimate may own the spread: its column is headed by
// a statistic, or it has no spread yet and the bounds hold it.
func (a *assembly) accepts(e *estimate, sp spread) bool {
	f := a.f
	col := f.columnRole(e.row, e.col)
	path := f.path(e.row, e.col)
	statistic := (col.kind == roleEstimate || col.kind == roleBoth) && (len(path) == 0 || col.label.cell == path[len(path)-1].cell || len(e.spreads) == 0)
	row := a.rows[e.row]
	if row.kind == roleEstimate || row.kind == roleBoth {
		statistic = statistic || len(e.spreads) == 0
	}
	if sp.shape == shapeInterval {
		if len(e.spreads) > 0 && !statistic || sp.own.kind == roleNone && !a.announced(sp) {
			return false
		}
		return statistic || holds(sp.lower, sp.upper, e.value)
	}
	if sp.own.kind == roleNone && (sp.shape == shapeBracket || sp.shape == shapeSign) && !sameHeading(f.path(sp.row, sp.col), path) {
		return false // a bracket in a column of its own may be a reference
	}
	if sp.shape == shapePlain && sp.own.kind != roleSpread && sp.own.kind != roleBound {
		return false
	}
	return statistic || len(e.spreads) == 0 || sp.own.kind == roleBound
}

// sameHeading reports that one heading stands lowest over both columns.
func sameHeading(a, b []label) bool {
	return len(a) > 0 && len(b) > 0 && a[len(a)-1].cell != nil && a[len(a)-1].cell == b[len(b)-1].cell
}

// announced reports that a heading over the interval, or its row label, speaks
// of intervals: position alone joins nothing.
func (a *assembly) announced(sp spread) bool {
	if sp.item.Spread != "" {
		return true
	}
	f := a.f
	ls := append(append([]label{}, f.path(sp.row, sp.col)...), f.lines[sp.row].labels...)
	for _, l := range ls {
		p := a.f.lex.phrase(l.text)
		r := role{pairs: p.pairs}
		if r.wantsInterval() {
			return true
		}
	}
	return false
}

// holds reports that the bounds hold the estimate, whichever stands first.
func holds(lower, upper, est grammar.Number) bool {
	l, ok1 := lower.Float()
	u, ok2 := upper.Float()
	v, ok3 := est.Float()
	if !ok3 || !ok1 && !ok2 {
		return false
	}
	if !ok1 {
		return v <= u
	}
	if !ok2 {
		return v >= l
	}
	return min(l, u) <= v && v <= max(l, u)
}

// above finds the estimate for a spread in a row of its own: in the same column
// and block, the nearest; quartiles and ranges prefer a median.
func (a *assembly) above(sp spread) *estimate {
	f := a.f
	var near *estimate
	wantMedian := false
	if ps := a.rows[sp.row].pairs; len(ps) > 0 {
		wantMedian = ps[0].Spread == grammar.SpreadRange || ps[0].Spread == grammar.SpreadIQR
	}
	for r := sp.row - 1; r >= f.head; r-- {
		ln := &f.lines[r]
		if ln.kind == lineNone {
			continue
		}
		if ln.kind == lineHead || !sameGroups(ln, &f.lines[sp.row], r) {
			break
		}
		if ln.kind == lineGroup {
			break
		}
		c := sp.col
		if cell := f.grid[r][c]; cell != nil {
			c = cell.Col
		}
		for _, e := range a.at[spot{r, c}] {
			if near == nil {
				near = e
			}
			if wantMedian && a.rowStatistic(r) == string(result.Median) {
				return e
			}
		}
		if near != nil && (!wantMedian || a.rows[r].kind == roleNone) {
			break
		}
	}
	return near
}

func (a *assembly) rowStatistic(r int) string {
	for _, p := range a.rows[r].pairs {
		if p.Statistic != "" {
			return p.Statistic
		}
	}
	return ""
}

// sameGroups reports that row r stands under the same group labels as the row
// of x, or is itself the row that x's row is set under.
func sameGroups(y, x *line, r int) bool {
	if len(x.groups) > 0 && x.groups[len(x.groups)-1] == r {
		return true
	}
	if len(y.groups) != len(x.groups) {
		return false
	}
	for i := range y.groups {
		if y.groups[i] != x.groups[i] {
			return false
		}
	}
	return true
}

// under finds the estimate in the same column of the rows, from top on, that
// the row of the spread goes on with.
func (a *assembly) under(sp spread, top int) *estimate {
	for r := sp.row - 1; r >= top; r-- {
		for _, e := range a.at[spot{r, sp.col}] {
			if len(e.spreads) == 0 {
				return e
			}
		}
	}
	return nil
}

// stubTop gives the first of the rows that the labels of row r span; r itself
// where it has a label of its own.
func (f *frame) stubTop(r int) int {
	for c := 0; c < f.stub; c++ {
		if f.cellAt(r, c) != nil && !f.blank(r, c) {
			return r
		}
	}
	if cell := f.grid[r][f.stub-1]; cell != nil {
		return cell.Row
	}
	return r
}

// intervalBelow reports that the cell holds one bare number and the cell below
// it, under the same label, nothing but an interval.
func (a *assembly) intervalBelow(r, c int) bool {
	f := a.f
	if r+1 >= f.tab.Rows || f.cellAt(r+1, c) == nil || f.stubTop(r+1) != r && f.lines[r+1].kind != lineContinue {
		return false
	}
	up, low := f.reads[f.grid[r][c]].cell.Values, f.reads[f.grid[r+1][c]].cell.Values
	return len(up) == 1 && len(up[0].Parts) == 0 && len(low) == 1 && low[0].Estimate.IsZero() && low[0].Part(grammar.KindInterval) != nil
}
