package table

import (
	"strconv"
	"strings"

	"halfspan/extract/pattern"
)

// findArmRows marks the heading rows in which some heading names an arm by its
// words: its neighbours then name arms too.
func (f *frame) findArmRows() {
	rows := map[int]bool{}
	for i := range f.tab.Cells {
		c := &f.tab.Cells[i]
		if c.Row >= f.head || c.Col < f.stub || isBlankText(c.Text.S) {
			continue
		}
		if p := f.partOf(f.label(c)); p.kind == partArm && f.isArm(fold(p.name)) {
			rows[c.Row] = true
		}
	}
	f.armRow = rows
	f.forgetParts()
	f.timeRow = map[int]bool{}
	for r := 0; r < f.head; r++ {
		times, all := 0, 0
		for c := f.stub; c < f.tab.Cols; c++ {
			cell := f.cellAt(r, c)
			if cell == nil || isBlankText(cell.Text.S) {
				continue
			}
			switch f.partOf(f.label(cell)).kind {
			case partTime:
				times++
				all++
			case partOther, partArm:
				all++
			}
		}
		f.timeRow[r] = times >= 2 && 2*times >= all && !rows[r]
	}
	f.forgetParts()
}

// axes settles which of rows and columns name the arms.
func (f *frame) findAxes() {
	defer f.forgetParts()
	f.findCrossed()
	f.forgetParts()
	f.findArmRows()
	arms, rows := 0, 0
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind != lineData || len(ln.labels) == 0 || f.rowRole(r).kind == roleP {
			continue
		}
		rows++
		if f.namesArm(r) {
			arms++
		}
	}
	stubArm, stubCol := false, -1
	for c := 0; c < f.stub; c++ {
		for _, l := range f.heads[c] {
			switch strings.Trim(fold(l.text), " s:") {
			case "group", "treatment group", "treatment", "arm", "study arm", "study group", "intervention", "allocation", "regimen", "treatment arm":
				stubArm, stubCol = true, c
			}
		}
	}
	colArm := false
	for c := f.stub; c < f.tab.Cols; c++ {
		for _, l := range f.heads[c] {
			if f.partOf(l).kind == partArm {
				colArm = true
			}
		}
	}
	if 2*arms < rows {
		if n := f.repeatedLabels(); !colArm {
			arms = n
		}
	}
	f.armRows = rows > 0 && (2*arms >= rows || stubArm && !colArm)
	if colArm && f.armRows && 10*arms < 8*rows {
		f.armRows = false
	}
	if f.armRows && stubArm && stubCol == f.stub-1 {
		f.nameRows(true)
	}
	f.modelCols = !colArm && !f.armRows && f.modelColumns()
	f.outcomeCols = f.modelCols || !colArm && !f.armRows && (rows > 0 && 5*f.timeRows() >= 4*rows && !f.measuredGroups() || f.unitColumns()) && !f.measuredHead() && !f.doseColumns()
	if f.outcomeCols {
		if 5*f.timeRows() < 4*rows && !f.modelCols {
			f.nameRows(false)
			f.armRows = len(f.rowArms) > 0
		}
		return
	}
	f.colArms = !f.armRows && (colArm || f.namedColumns() >= 2)
}

// measuredGroups reports that the labels over the rows name what was measured,
// with its unit, so that the columns do not.
func (f *frame) measuredGroups() bool {
	for r := f.head; r < f.tab.Rows; r++ {
		if ln := &f.lines[r]; ln.kind == lineGroup && len(ln.labels) > 0 && f.lex.unit(ln.labels[0].text) != "" {
			return true
		}
	}
	return false
}

// timeRows counts the data rows that a time labels and nothing else.
func (f *frame) timeRows() int {
	n := 0
	for r := f.head; r < f.tab.Rows; r++ {
		if ln := &f.lines[r]; ln.kind == lineData && len(ln.labels) == 1 && f.rowPart(ln.labels[0]).kind == partTime {
			n++
		}
	}
	return n
}

// unitColumns reports that the data columns are headed by outcomes: most names
// over them carry a unit, and the row labels carry none.
func (f *frame) unitColumns() bool {
	with, all := 0, 0
	for c := f.stub; c < f.tab.Cols; c++ {
		if f.pColumn(c) {
			continue
		}
		for _, l := range f.heads[c] {
			if f.partOf(l).kind == partOther {
				all++
				if u := f.lex.unit(l.text); u != "" && u != "%" || strings.Contains(l.text, "(%)") {
					with++
				}
			}
		}
	}
	if all < 2 || 5*with < 3*all {
		return false
	}
	for r := f.head; r < f.tab.Rows; r++ {
		for _, l := range f.lines[r].labels {
			if u := f.lex.unit(l.text); u != "" && u != "%" {
				return false
			}
		}
	}
	return true
}

// nameRows takes the innermost labels of the data rows for arms; bare numbers
// too where a heading over them says that they are groups.
func (f *frame) nameRows(numbers bool) {
	f.rowArms = map[string]bool{}
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind != lineData || len(ln.labels) == 0 {
			continue
		}
		p := f.partOf(ln.labels[len(ln.labels)-1])
		if p.kind == partOther && (!subgroupName.MatchString(p.name) || numbers && isWhole(p.name)) && f.rowRole(r).kind == roleNone {
			f.rowArms[fold(p.name)] = true
		}
	}
	f.forgetParts()
}

// repeatedLabels finds arms by repetition: the same few names in every block,
// that are no times, statistics or categories. It returns the rows they label.
func (f *frame) repeatedLabels() int {
	blocks := map[string]map[string]bool{}
	rows := map[string]int{}
	var order []string
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind != lineData || len(ln.labels) == 0 {
			continue
		}
		outer := ""
		if len(ln.labels) > 1 {
			outer = ln.labels[0].text
		} else if len(ln.groups) > 0 {
			outer = strconv.Itoa(ln.groups[len(ln.groups)-1])
		} else {
			continue
		}
		l := ln.labels[len(ln.labels)-1]
		p := f.partOf(l)
		low := fold(p.name)
		if p.kind == partTime || p.kind == partEmpty || p.kind == partContrast || subgroupName.MatchString(low) || f.rowRole(r).kind != roleNone || f.lex.unit(l.text) != "" {
			continue
		}
		if blocks[low] == nil {
			blocks[low] = map[string]bool{}
			order = append(order, low)
		}
		blocks[low][outer] = true
		rows[low]++
	}
	n := 0
	var names []string
	for _, name := range order {
		if len(blocks[name]) >= 2 {
			n += rows[name]
			names = append(names, name)
		}
	}
	if len(names) < 2 || f.outerArms() {
		return 0
	}
	outers := map[string]bool{}
	for _, name := range names {
		for o := range blocks[name] {
			outers[o] = true // only counted
		}
	}
	if len(outers) <= 4 && len(outers) < len(names) {
		f.outerSub = true // the blocks are analyses or subgroups of the same outcomes
		return 0
	}
	if len(names) > 5 || f.comparing() {
		return 0
	}
	f.rowArms = map[string]bool{}
	for _, name := range names {
		f.rowArms[name] = true
	}
	f.forgetParts()
	return n
}

// comparing reports that a column holds comparisons between arms.
func (f *frame) comparing() bool {
	for c := f.stub; c < f.tab.Cols; c++ {
		for _, l := range f.heads[c] {
			if f.lex.compares(l.text) {
				return true
			}
		}
	}
	return false
}

// outerArms reports that the group labels name arms, so that the rows under
// them do not.
func (f *frame) outerArms() bool {
	arms, all := 0, 0
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind == lineGroup && len(ln.labels) > 0 {
			all++
			if f.isArm(fold(f.lex.name(ln.labels[0].text))) {
				arms++
			}
		}
	}
	return all > 0 && 2*arms >= all
}

// namesArm reports that the innermost label of row r names an arm: by its words,
// or by an n where no row beside it is for all arms together.
func (f *frame) namesArm(r int) bool {
	ln := &f.lines[r]
	l := ln.labels[len(ln.labels)-1]
	p := f.partOf(l)
	if p.kind != partArm {
		return false
	}
	if f.isArm(fold(p.name)) {
		return true
	}
	for q := f.head; q < f.tab.Rows; q++ {
		o := &f.lines[q]
		if o.kind == lineData && len(o.labels) > 0 && len(o.groups) == len(ln.groups) && prefix(o.groups, ln.groups) && totals[fold(f.lex.name(o.labels[len(o.labels)-1].text))] {
			return false
		}
	}
	return len(ln.groups) > 0 || len(ln.labels) > 1
}

// namedColumns counts the different names over data columns that are neither
// times nor contrasts.
func (f *frame) namedColumns() int {
	seen := map[string]bool{}
	for c := f.stub; c < f.tab.Cols; c++ {
		if f.pColumn(c) {
			continue
		}
		for _, l := range f.heads[c] {
			if p := f.partOf(l); p.kind == partOther || p.kind == partArm {
				seen[fold(p.name)] = true
			}
		}
	}
	return len(seen)
}

// armsInColumns reports that column headings name the arms.
func (f *frame) armsInColumns() bool { return f.colArms }

// otherArms gives the folded names of the table's arms other than arm.
func (f *frame) otherArms(arm string) []string {
	var out []string
	for _, a := range f.armNames() {
		if w := armWords(a); w != armWords(arm) {
			out = append(out, w)
		}
	}
	return out
}

// armNames gives the names of the arms in the order of print.
func (f *frame) armNames() []string {
	if f.armList != nil {
		return f.armList
	}
	seen := map[string]bool{}
	out := []string{}
	add := func(name string) {
		k := armWords(name)
		if k != "" && !seen[k] {
			seen[k] = true
			out = append(out, name)
		}
	}
	if f.colArms {
		for c := f.stub; c < f.tab.Cols; c++ {
			if name := f.armOfColumn(f.head, c); name != "" && !f.pColumn(c) {
				add(name)
			}
		}
	}
	if f.armRows {
		for r := f.head; r < f.tab.Rows; r++ {
			if ln := &f.lines[r]; ln.kind == lineData && len(ln.labels) > 0 {
				if p := f.partOf(ln.labels[len(ln.labels)-1]); p.kind == partArm {
					add(p.name)
				}
			}
		}
	}
	f.armList = out
	return out
}

var generic = map[string]bool{"treatment group": true, "treatment groups": true, "study group": true, "study groups": true, "group": true, "groups": true, "treatment": true,
	"between groups": true, "group assignment": true, "treatment arm": true, "arm": true, "arms": true, "study arm": true, "intervention groups": true, "randomised group": true, "randomized group": true, "allocation": true, "treatment allocation": true, "treatments": true}

// general reports a heading over several columns that only says that arms
// stand below it.
func (f *frame) general(p part) bool {
	if f.onlyOver(p) {
		return true
	}
	return generic[fold(p.name)] && (p.l.cell == nil || p.l.cell.ColSpan > 1 || p.l.cell.Col < f.stub)
}

// kindOfArm says what kind of arms the headings below name: "Feeding condition".
var kindOfArm = pattern.MustCompile(`(?i)^(?:[\w-]+ ){1,2}(?:conditions|condition|treatments?|groups|arms|regimens?|diets)$`)

// onlyOver reports a general word that alone spans several columns with names of
// their own: "Intervention" over "Syrup", "Pollen", "Water".
func (f *frame) onlyOver(p part) bool {
	cell := p.l.cell
	if cell == nil || cell.ColSpan < 2 || cell.Row >= f.head-1 || !onlyArmWord.MatchString(p.name) && (!kindOfArm.MatchString(p.name) || controls.MatchString(p.name)) {
		return false
	}
	names := 0
	for c := f.stub; c < f.tab.Cols; c++ {
		if o := f.cellAt(cell.Row, c); o != nil && o != cell && o.ColSpan > 1 && !isBlankText(o.Text.S) {
			return false
		}
		if o := f.cellAt(cell.Row+1, c); o != nil && c >= cell.Col && c < cell.Col+cell.ColSpan && o.ColSpan == 1 {
			if k := f.partOf(f.label(o)).kind; k == partArm || k == partOther {
				names++
			}
		}
	}
	return names >= 2 && names == cell.ColSpan
}

func (f *frame) findArm(r, c int) string {
	var names, known []string
	for _, l := range f.path(r, c) {
		p := f.partOf(l)
		if p.kind == partArm || p.kind == partOther {
			if f.general(p) || p.kind == partOther && (modelHead.MatchString(p.name) || analysisName.MatchString(p.name)) {
				continue
			}
			names = append(names, p.name)
			if p.kind == partArm {
				known = append(known, p.name)
			}
		}
		if p.kind == partContrast {
			return ""
		}
	}
	if len(known) > 0 {
		names = known
	} else if m := f.measured(names); len(m) < len(names) {
		names = without(names, m)
	}
	return joinPath(names, ", ")
}
