package table

import (
	"strings"

	"halfspan/extract/pattern"
)

// findCrossed looks for two heading rows that cross: the same names below each
// heading of the upper row, as arms below times or conditions below outcomes.
func (f *frame) findCrossed() {
	f.crossTime, f.crossSub = map[int]bool{}, map[int]bool{}
	for r := 0; r+1 < f.head; r++ {
		upper, lower := f.crossing(r)
		if len(upper) < 2 || len(lower) < 2 {
			continue
		}
		times, arms := 0, 0
		for _, l := range upper {
			switch p := f.partOf(l); {
			case p.kind == partTime && !f.lex.change(l.text):
				times++
			case onlyArmWord.MatchString(p.name):
				arms++
			case p.kind == partArm:
				times = -len(upper)
			}
		}
		if times > 0 && times+arms == len(upper) && arms > 0 && f.noTimes(lower) {
			f.crossTime[r] = true // "Before feeding" and "Intervention" over the same arms
		}
		if f.conditions(lower) {
			f.crossSub[lower[0].cell.Row] = true
		}
	}
}

// crossing gives the headings of row r that span columns, and the lowest names
// below each of them, where these are the same below all.
func (f *frame) crossing(r int) (upper, lower []label) {
	var want []string
	for c := f.stub; c < f.tab.Cols; {
		cell := f.cellAt(r, c)
		if cell == nil || isBlankText(cell.Text.S) || f.pColumn(c) {
			c++
			continue
		}
		if cell.ColSpan < 2 {
			return nil, nil
		}
		var names []string
		var ls []label
		for k := c; k < min(c+cell.ColSpan, f.tab.Cols); k++ {
			low := f.lowestNamed(r, k)
			if low.empty() {
				continue
			}
			name := fold(f.lex.name(low.text))
			if len(names) > 0 && names[len(names)-1] == name {
				continue
			}
			names, ls = append(names, name), append(ls, low)
		}
		if upper == nil {
			want, lower = names, ls
		} else if strings.Join(names, "|") != strings.Join(want, "|") {
			return nil, nil
		}
		upper = append(upper, f.label(cell))
		c += cell.ColSpan
	}
	return upper, lower
}

// lowestNamed gives the lowest heading below row r over column c that names
// something.
func (f *frame) lowestNamed(r, c int) label {
	for k := f.head - 1; k > r; k-- {
		cell := f.grid[k][c]
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		if l := f.label(cell); f.lex.name(l.text) != "" {
			return l
		}
	}
	return label{}
}

func (f *frame) noTimes(ls []label) bool {
	for _, l := range ls {
		if f.partOf(l).kind == partTime {
			return false
		}
	}
	return true
}

// condition is a name that says with or without what.
var condition = pattern.MustCompile(`(?i)^(?:([+])|([−–-])|(with) |(without) |(no) )\s?([\pL\d][\pL\d /-]{0,30})$`)

// conditions reports that the names are one thing with and without another.
func (f *frame) conditions(ls []label) bool {
	with, without, what := false, false, ""
	for _, l := range ls {
		m := condition.FindStringSubmatch(f.rawName(l))
		if m == nil || what != "" && !strings.EqualFold(m[6], what) {
			return false
		}
		what = m[6]
		with = with || m[1] != "" || m[3] != ""
		without = without || m[2] != "" || m[4] != "" || m[5] != ""
	}
	return with && without
}

// rawName is the name of a heading with a sign in front kept.
func (f *frame) rawName(l label) string {
	if t := clean(l.text); condition.MatchString(t) {
		return t
	}
	return f.lex.name(l.text)
}

// conditionRow reports a row label that says with or without what, where another
// label of the rows says the opposite.
func (f *frame) conditionRow(l label) bool {
	if !condition.MatchString(f.rawName(l)) {
		return false
	}
	if f.conditionLabels == nil {
		f.conditionLabels = []label{}
		for r := f.head; r < f.tab.Rows; r++ {
			if ln := &f.lines[r]; ln.kind == lineData && len(ln.labels) > 0 {
				if o := ln.labels[len(ln.labels)-1]; condition.MatchString(f.rawName(o)) {
					f.conditionLabels = append(f.conditionLabels, o)
				}
			}
		}
	}
	for _, o := range f.conditionLabels {
		if f.conditions([]label{l, o}) {
			return true
		}
	}
	return false
}
