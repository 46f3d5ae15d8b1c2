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

// remembered is what known holds for a key, found once.
func remembered[K comparable, V any](known map[K]V, key K, find func() V) V {
	v, ok := known[key]
	if !ok {
		v = find()
		known[key] = v
	}
	return v
}

// forgetParts is called when what is known of the arms has changed.
func (f *frame) forgetParts() {
	f.memo.parts = map[partKey]part{}
	f.memo.arms = map[spot]string{}
}

// columnRole gives the role of column c at row r, from the lowest heading that
// announces one.
func (f *frame) columnRole(r, c int) role {
	return remembered(f.memo.roles, spot{r, c}, func() role { return f.findColumnRole(r, c) })
}

// rowRole gives the role of row r from its innermost own label, where that
// names a statistic and nothing else.
func (f *frame) rowRole(r int) role {
	return remembered(f.memo.rows, r, func() role { return f.findRowRole(r) })
}

// path gives the headings over (r, c), the outermost first: those of the
// table's head, with headings repeated in the body in place of or after them.
func (f *frame) path(r, c int) []label {
	return remembered(f.memo.paths, spot{r, c}, func() []label {
		p := f.findPath(r, c)
		return p[:len(p):len(p)] // appending makes a copy
	})
}

// anySpread reports a cell of column c that prints an estimate with its spread.
func (f *frame) anySpread(c int) bool {
	return remembered(f.memo.spreads, c, func() bool { return f.findSpread(c) })
}

// armOfColumn joins the headings over a column that name its arm.
func (f *frame) armOfColumn(r, c int) string {
	return remembered(f.memo.arms, spot{r, c}, func() string { return f.findArm(r, c) })
}

// label gives the words of a heading cell and the marks printed with them.
func (f *frame) label(cell *paper.Cell) label {
	return remembered(f.memo.labels, cell, func() label { return f.findLabel(cell) })
}
