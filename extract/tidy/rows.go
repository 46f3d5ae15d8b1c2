package tidy

import (
	"sort"

	"halfspan/extract/paper"
)

// Part says in which part of a marked-up table a row stands.
type Part string

// The parts of a table. Unmarked is a row of a form that marks up nothing.
const (
	Head     Part = "thead"
	Body     Part = "tbody"
	Foot     Part = "tfoot"
	Unmarked Part = ""
)

// DropBlankRows takes out rows that print nothing, rules drawn as cells above
// all; the spans of cells that cross them shrink.
func DropBlankRows(t *paper.Table, rows []Part) []Part {
	filled := make([]bool, t.Rows)
	for _, c := range t.Cells {
		if c.Text.S != "" {
			filled[c.Row] = true
		}
	}
	return DropRows(t, rows, func(row int) bool { return !filled[row] })
}

// DropRows takes out the rows that gone names, with the cells that begin there
// and do not reach further.
func DropRows(t *paper.Table, rows []Part, gone func(int) bool) []Part {
	at := make([]int, t.Rows+1) // new number of each row
	var left []Part
	for i := 0; i < t.Rows; i++ {
		at[i+1] = at[i]
		if !gone(i) {
			at[i+1]++
			left = append(left, rows[i])
		}
	}
	cells := t.Cells[:0]
	for _, c := range t.Cells {
		from, to := at[c.Row], at[c.Row+c.RowSpan]
		if from == to {
			continue
		}
		c.Row, c.RowSpan = from, to-from
		cells = append(cells, c)
	}
	sort.SliceStable(cells, func(i, j int) bool {
		if cells[i].Row != cells[j].Row {
			return cells[i].Row < cells[j].Row
		}
		return cells[i].Col < cells[j].Col
	})
	t.Cells, t.Rows = cells, len(left)
	return left
}
