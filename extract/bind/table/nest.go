package table

import (
	"halfspan/extract/paper"
)

// weight gives the nesting level that the print of row r's label shows: its
// indentation, and bold type where the table mixes bold and plain labels.
func (f *frame) weight(r int, mixed bool) int {
	cell := f.grid[r][0]
	inner := 0
	if f.stub > 1 && (cell == nil || isBlankText(cell.Text.S)) {
		cell = f.grid[r][1]
		inner = 1
	}
	if cell == nil {
		return 0
	}
	w := 2 * (cell.Indent + 4*inner)
	if mixed && !bold(cell) {
		w++
	}
	return w
}

func bold(cell *paper.Cell) bool {
	for i, r := range cell.Text.S {
		if r > ' ' {
			return cell.Text.Styled(i, paper.Bold)
		}
	}
	return false
}

// mixedBold reports that some labels of the first column are bold and some not.
func (f *frame) mixedBold() bool {
	b, plain := 0, 0
	for r := f.head; r < f.tab.Rows; r++ {
		cell := f.cellAt(r, 0)
		if cell == nil || isBlankText(cell.Text.S) {
			continue
		}
		if bold(cell) {
			b++
		} else {
			plain++
		}
	}
	return b > 0 && plain > 0
}

// repeats finds labels of rows that come again and again under others that come
// once: "Mass" with its first values, then "Syrup", "Water"; "Time" with its
// values, then "Syrup", "Water". It returns the row of the outer label for each
// such row.
func (f *frame) repeats() map[int]int {
	count := map[string]int{}
	for r := f.head; r < f.tab.Rows; r++ {
		if ln := &f.lines[r]; ln.kind == lineData && len(ln.labels) == 1 && len(ln.groups) == 0 {
			count[fold(ln.labels[0].text)]++
		} else if ln.kind == lineGroup {
			return nil
		}
	}
	out := map[int]int{}
	outer, outers := -1, 0
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind != lineData || len(ln.labels) != 1 {
			continue
		}
		if count[fold(ln.labels[0].text)] == 1 {
			outer = r
			outers++
			continue
		}
		if outer < 0 || f.rowRole(r).kind != roleNone {
			return nil
		}
		out[r] = outer
	}
	if outers < 2 || len(out) < outers {
		return nil
	}
	return out
}

// nest gives every row the group labels over it. Levels come in fours for each
// step of indentation: a group with groups of the same step right below it
// (+0), a group with rows of the same step (+1), a row (+2).
func (f *frame) nest() {
	mixed := f.mixedBold()
	if under := f.repeats(); under != nil {
		for r, g := range under {
			f.lines[r].groups = []int{g}
		}
		return
	}
	var stack []int
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		switch ln.kind {
		case lineNone:
			continue
		case lineHead:
			if len(ln.labels) == 0 {
				continue
			}
		case lineContinue:
			ln.groups = f.lines[ln.above].groups
			continue
		}
		w := f.weight(r, mixed)
		popFrom := 4*w + 2
		ln.level = 4*w + 2
		if ln.kind != lineData {
			next := f.nextLine(r)
			popFrom = 4*w + 1
			switch {
			case next < 0:
			case f.lines[next].kind == lineGroup && f.weight(next, mixed) == w:
				ln.level, popFrom = 4*w, 4*w
			case f.weight(next, mixed) <= w:
				ln.level = 4*w + 1
			}
			if f.analysisBlock(r) {
				ln.level = 4*w - 1
				if f.countsBesideLabel(r) {
					ln.level = -1 // subjects of its own: whatever stands above it has ended
				}
				popFrom = ln.level
			}
		}
		for len(stack) > 0 && f.lines[stack[len(stack)-1]].level >= popFrom {
			stack = stack[:len(stack)-1]
		}
		for _, g := range stack {
			if f.otherUnit(g, r) {
				continue
			}
			if f.lines[g].kind == lineData && f.grid[g][0] != nil && f.grid[r][0] != nil && f.grid[g][0].Indent >= f.grid[r][0].Indent {
				continue
			}
			ln.groups = append(ln.groups, g)
		}
		stack = append(stack, r)
	}
}

// otherUnit reports that g and r are rows of data of which each has a unit of
// its own: "Mass (kg)" is no group for "Flight time (min)" printed further in.
func (f *frame) otherUnit(g, r int) bool {
	if f.lines[g].kind != lineData || len(f.lines[g].labels) != 1 || len(f.lines[r].labels) != 1 {
		return false
	}
	u, v := f.lex.unit(f.lines[g].labels[0].text), f.lex.unit(f.lines[r].labels[0].text)
	return u != "" && v != "" && u != v && v != "%" && u != "%"
}

func (f *frame) nextLine(r int) int {
	for r++; r < f.tab.Rows; r++ {
		if f.lines[r].kind != lineNone {
			return r
		}
	}
	return -1
}
