package table

import "halfspan/extract/bind/convention"

// markHabit takes what notes say of the same form where only some values carry
// the mark that leads there, as long as all such notes agree.
func (f *frame) markHabit(sp *spread, hint string) (pair, label, bool) {
	var found pair
	var from label
	for i := range f.tab.Cells {
		c := &f.tab.Cells[i]
		for _, v := range f.reads[c].cell.Values {
			for _, m := range v.Marks {
				for _, mk := range f.cellMarks(c.Text.S[m.Start:m.End]) {
					for _, nt := range f.notes.marked(mk) {
						for _, st := range f.lex.noteStatements(nt, rankCaption) {
							for _, q := range st.pairs {
								if q.Spread == "" || !fitsShape(q.Spread, sp) || hint != "" && q.Statistic != "" && q.Statistic != hint {
									continue
								}
								if found.Spread != "" && found.Spread != q.Spread {
									return pair{}, label{}, false
								}
								found, from = q, label{text: clean(nt.run.S), raw: clean(nt.run.S)}
							}
						}
					}
				}
			}
		}
	}
	return found, from, found.Spread != ""
}

// habit takes what the other rows of the table say of the same form, where all
// that say anything agree: a table that labels some rows "mean ± SD" means SD in
// the rest.
func (f *frame) habit(sp *spread, hint string) (reading, bool) {
	var found pair
	var from label
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind != lineData && ln.kind != lineGroup || len(ln.labels) == 0 {
			continue
		}
		l := ln.labels[len(ln.labels)-1]
		for _, q := range f.lex.phrase(l.text).pairs {
			if q.Spread == "" || q.Statistic == "" || !fitsShape(q.Spread, sp) || sp.shape == shapeSign != q.Sign {
				continue
			}
			if hint != "" && q.Statistic != hint {
				continue
			}
			if found.Spread != "" && found.Spread != q.Spread {
				return reading{}, false
			}
			found, from = q, l
		}
	}
	if found.Spread == "" {
		if q, l, ok := f.markHabit(sp, hint); ok && sp.shape != shapeBracket {
			found, from = q, l
		}
	}
	if found.Spread == "" || sp.shape == shapeBracket {
		return reading{}, false
	}
	s := f.lex.labelStatement(from, rankNote, "label of another row")
	return reading{given: convention.GivenAs(found.Spread), pair: found, at: s, level: level(found.Level), habit: true}, true
}
