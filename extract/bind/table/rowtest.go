package table

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// rowTests keeps p, t, F and df of the row, and p printed in the cell.
func (f *frame) rowTests(r *result.Result, e *estimate) {
	for _, it := range e.parts {
		switch it.Kind {
		case grammar.KindPValue:
			r.P = it.Value.Rel + it.Value.Value
			r.P = strings.TrimPrefix(r.P, "=")
		case grammar.KindTest:
			switch it.Name {
			case "t":
				r.T, r.DF = it.Value.Value, it.DF
			case "F":
				r.F, r.DF = it.Value.Value, it.DF
			}
		}
	}
	for c := f.stub; c < f.tab.Cols; c++ {
		cell := f.grid[e.row][c]
		if cell == nil || isBlankText(cell.Text.S) || cell == e.cell {
			continue
		}
		role := f.columnRole(e.row, c)
		switch role.kind {
		case roleP:
			if p := pText(f.reads[cell], cell); p != "" {
				if r.Evidence.RowP == "" {
					r.Evidence.RowP = p
				}
				if r.P == "" && c > e.col && f.ownsTest(e, c) && f.testOf(r, e, c) {
					r.P = p
				}
			}
		case roleTest:
			v := clean(cell.Text.S)
			if c <= e.col || !f.ownsTest(e, c) || !f.testOf(r, e, c) || !hasDigit(v) {
				continue
			}
			v, _ = f.notes.split(&cell.Text)
			if vs := f.reads[cell].cell.Values; len(vs) == 1 && !vs[0].Estimate.IsZero() {
				v = vs[0].Estimate.Value
			}
			switch role.test {
			case "t":
				r.T = v
			case "F":
				r.F = v
			case "df":
				r.DF = v
			}
		}
	}
}

// testOf reports that a test beside an estimate can be about it alone: the
// estimate is a comparison, or the only one of its row, or every estimate of the
// row has a test of its own. A p behind two arms is the comparison's, not the
// second arm's.
func (f *frame) testOf(r *result.Result, e *estimate, c int) bool {
	switch r.Statistic {
	case result.MeanDifference, result.RiskDifference, result.Ratio, result.Coefficient:
		return true
	}
	kind := f.columnRole(e.row, c).kind
	ests, tests := 0, 0
	for k := f.stub; k < f.tab.Cols; k++ {
		cell := f.cellAt(e.row, k)
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		switch role := f.columnRole(e.row, k).kind; role {
		case kind:
			tests++
		case roleP, roleTest, roleN, roleSpread, roleBound, rolePercent:
		default:
			if f.reads[cell].isData() {
				ests++
			}
		}
	}
	return ests <= 1 || tests >= ests
}

// ownsTest reports that the test in column c is about this estimate alone: no
// other estimate stands between them.
func (f *frame) ownsTest(e *estimate, c int) bool {
	for k := e.col + 1; k < c; k++ {
		switch f.columnRole(e.row, k).kind {
		case roleP, roleTest, roleN, roleSpread, roleBound:
			continue
		}
		if cell := f.grid[e.row][k]; cell != nil && cell != e.cell && f.reads[cell].isData() {
			return false
		}
	}
	return true
}

func pText(rd *cellReading, cell *paper.Cell) string {
	for i := range rd.cell.Values {
		v := &rd.cell.Values[i]
		if it := v.Part(grammar.KindPValue); it != nil {
			return strings.TrimPrefix(it.Value.Rel+it.Value.Value, "=")
		}
		if !v.Estimate.IsZero() {
			return v.Estimate.Rel + v.Estimate.Value
		}
	}
	s := fold(cell.Text.S)
	if s == "ns" || s == "n.s." || s == "n.s" {
		return "ns"
	}
	return ""
}
