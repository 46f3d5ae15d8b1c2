package table

import "halfspan/extract/paper"

// memo keeps what a frame was asked before. Parts depend on what is known of
// the arms, so they are forgotten whenever that changes.
type memo struct {
	long    map[string][]string // what an arm's abbreviation stands for
	parts   map[partKey]part
	roles   map[spot]role
	rows    map[int]role
	paths   map[spot][]label
	spreads map[int]bool
	arms    map[spot]string
	labels  map[*paper.Cell]label
}

type partKey struct {
	cell *paper.Cell
	text string
}

func newMemo() memo {
	return memo{long: map[string][]string{}, parts: map[partKey]part{}, roles: map[spot]role{}, rows: map[int]role{}, paths: map[spot][]label{}, spreads: map[int]bool{}, arms: map[spot]string{}, labels: map[*paper.Cell]label{}}
}

// forgetParts is called when what is known of the arms has changed.
func (f *frame) forgetParts() {
	f.memo.parts = map[partKey]part{}
	f.memo.arms = map[spot]string{}
}

// columnRole gives the role of column c at row r, from the lowest heading that
// announces one.
func (f *frame) columnRole(r, c int) role {
	ro, ok := f.memo.roles[spot{r, c}]
	if !ok {
		ro = f.findColumnRole(r, c)
		f.memo.roles[spot{r, c}] = ro
	}
	return ro
}

// rowRole gives the role of row r from its innermost own label, where that
// names a statistic and nothing else.
func (f *frame) rowRole(r int) role {
	ro, ok := f.memo.rows[r]
	if !ok {
		ro = f.findRowRole(r)
		f.memo.rows[r] = ro
	}
	return ro
}

// path gives the headings over (r, c), the outermost first: those of the
// table's head, with headings repeated in the body in place of or after them.
func (f *frame) path(r, c int) []label {
	p, ok := f.memo.paths[spot{r, c}]
	if !ok {
		p = f.findPath(r, c)
		p = p[:len(p):len(p)] // appending makes a copy
		f.memo.paths[spot{r, c}] = p
	}
	return p
}

// anySpread reports a cell of column c that prints an estimate with its spread.
func (f *frame) anySpread(c int) bool {
	a, ok := f.memo.spreads[c]
	if !ok {
		a = f.findSpread(c)
		f.memo.spreads[c] = a
	}
	return a
}

// armOfColumn joins the headings over a column that name its arm.
func (f *frame) armOfColumn(r, c int) string {
	a, ok := f.memo.arms[spot{r, c}]
	if !ok {
		a = f.findArm(r, c)
		f.memo.arms[spot{r, c}] = a
	}
	return a
}

// label gives the words of a heading cell and the marks printed with them.
func (f *frame) label(cell *paper.Cell) label {
	l, ok := f.memo.labels[cell]
	if !ok {
		l = f.findLabel(cell)
		f.memo.labels[cell] = l
	}
	return l
}
