package grid

import (
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"
)

// rows groups the body lines into rows.
func (rd *reader) rows() [][]int {
	var out [][]int
	pitch := rd.rowPitch()
	ruled := rd.ruledRows()
	var cur []int
	for _, unit := range rd.units() {
		if len(cur) > 0 && rd.joins(cur, unit, pitch, ruled) {
			cur = append(cur, unit...)
			continue
		}
		if len(cur) > 0 {
			out = append(out, cur)
		}
		cur = slices.Clone(unit)
	}
	if len(cur) > 0 {
		out = append(out, cur)
	}
	return out
}

// units groups body lines that overlap in height, as where one cell is centred
// beside two lines of another.
func (rd *reader) units() [][]int {
	var out [][]int
	for i := rd.head; i < len(rd.lines); i++ {
		n := len(out) - 1
		if n >= 0 && !rd.fullBetween(i) {
			step := rd.lines[i].base - rd.lines[i-1].base
			if step*10 < rd.em*8 && !rd.clash(rd.gather(out[n]), []int{i}) {
				out[n] = append(out[n], i)
				continue
			}
		}
		out = append(out, []int{i})
	}
	return out
}

// ruledRows reports whether rules part most rows of the body, so that lines
// without one between them belong together.
func (rd *reader) ruledRows() bool {
	rules, lines := 0, 0
	for i := rd.head + 1; i < len(rd.lines); i++ {
		if rd.hasStub(i) && rd.hasData(i) && rd.hasData(i-1) {
			lines++
			if rd.fullBetween(i) {
				rules++
			}
		}
	}
	return rules >= 2 && rules*10 >= lines*7
}

func (rd *reader) hasStub(i int) bool {
	return len(rd.cells[i]) > 0 && rd.cells[i][0].c0 == 0
}

// hasData reports whether a line has anything right of the stub.
func (rd *reader) hasData(i int) bool {
	n := len(rd.cells[i])
	return n > 0 && rd.cells[i][n-1].c0 > 0
}

// rowPitch is the usual distance between the baselines of two rows of one line:
// the lower fifth of the distances between lines that both have a row heading
// and figures in one column; 0 where there are none.
func (rd *reader) rowPitch() int {
	var all []int
	for i := rd.head + 1; i < len(rd.lines); i++ {
		if rd.hasStub(i) && rd.hasStub(i-1) && rd.figuresShared(i-1, i) {
			all = append(all, rd.lines[i].base-rd.lines[i-1].base)
		}
	}
	if len(all) == 0 {
		return 0
	}
	slices.Sort(all)
	return all[len(all)/5]
}

// uniform reports whether the body lines stand at one distance throughout, so
// that it says nothing about which belong together.
func (rd *reader) uniform() bool {
	lo, hi := 1<<30, 0
	for i := rd.head + 1; i < len(rd.lines); i++ {
		step := rd.lines[i].base - rd.lines[i-1].base
		lo, hi = min(lo, step), max(hi, step)
	}
	return hi*92 <= lo*100
}

// figuresShared reports whether two lines have complete figures in one column.
func (rd *reader) figuresShared(a, b int) bool {
	for k := range rd.cells[b] {
		q := &rd.cells[b][k]
		if q.c0 == 0 || !q.figure || goesOnFigure(q.text) {
			continue
		}
		for j := range rd.cells[a] {
			if p := &rd.cells[a][j]; p.c0 == q.c0 && p.figure && !unfinished(p.text) {
				return true
			}
		}
	}
	return false
}

// joins reports whether the lines of unit belong to the row of the lines cur.
func (rd *reader) joins(cur, unit []int, pitch int, ruled bool) bool {
	i, last := unit[0], cur[len(cur)-1]
	step := rd.lines[i].base - rd.lines[last].base
	if rd.fullBetween(i) {
		return false
	}
	above := rd.gather(cur)
	if ruled {
		return step < 3*rd.em && !rd.clash(above, unit)
	}
	uniform := pitch == 0 && rd.uniform()
	tight := pitch > 0 && step*100 <= pitch*92 && step*10 <= rd.em*16 || pitch == 0 && !uniform && step*10 <= rd.em*13
	if pitch > 0 && step*10 > pitch*15 && step*10 > rd.em*16 {
		return false
	}
	if rd.headsOnly(unit) {
		// Below other headings they go on; below figures they begin a heading row.
		return rd.anyData(cur) && rd.wordsOnly(cur) && (!rd.headsOnly(cur) || !rd.shares(above, unit))
	}
	stubUp, stub := above[0], rd.stubPiece(unit)
	dataUp, data := rd.anyData(cur), rd.anyData(unit)
	if stub == nil {
		return data && rd.dataGoesOn(above, unit, stubUp != nil, dataUp, tight)
	}
	if stubUp == nil {
		return data && tight && !rd.clash(above, unit)
	}
	unfinished := unfinishedLabel(stubUp.text, stub.text)
	same := sameWeight(rd.s, stubUp, stub)
	deeper := rd.indentedMore(stub, stubUp)
	switch {
	case !data && dataUp:
		return unfinished || !deeper && rd.labelGoesOn(stubUp, stub, tight)
	case !data:
		return unfinished || tight && same && !(deeper && !startsLow(stub.text))
	case !dataUp:
		return unfinished || !deeper && tight && same && startsLow(stub.text)
	}
	return !rd.clash(above, unit) && (unfinished || same && startsLow(stub.text) && (tight || rd.allGoOn(above, unit)))
}

// allGoOn reports whether everything right of the stub in the lines is the
// second part of a figure above it.
func (rd *reader) allGoOn(above map[int]*piece, lines []int) bool {
	for _, i := range lines {
		for k := range rd.cells[i] {
			q := &rd.cells[i][k]
			p := above[q.c0]
			if q.c0 > 0 && (p == nil || !goesOnFigure(q.text) && !unfinished(p.text)) {
				return false
			}
		}
	}
	return true
}

// headsOnly reports whether the lines hold nothing right of the stub but sample
// sizes and names of statistics: a second heading inside the body.
func (rd *reader) headsOnly(lines []int) bool {
	n := 0
	for _, i := range lines {
		for k := range rd.cells[i] {
			if p := &rd.cells[i][k]; p.c0 > 0 {
				if !isSize(p.text) && !isStatistic(p.text) {
					return false
				}
				n++
			}
		}
	}
	return n > 1
}

// shares reports whether the lines have something in a column right of the stub
// where the row above has something too.
func (rd *reader) shares(above map[int]*piece, lines []int) bool {
	for _, i := range lines {
		for k := range rd.cells[i] {
			if c := rd.cells[i][k].c0; c > 0 && above[c] != nil {
				return true
			}
		}
	}
	return false
}

// wordsOnly reports whether no line holds a figure right of the stub.
func (rd *reader) wordsOnly(lines []int) bool {
	for _, i := range lines {
		for k := range rd.cells[i] {
			if p := &rd.cells[i][k]; p.c0 > 0 && p.figure && !isSize(p.text) {
				return false
			}
		}
	}
	return true
}

// anyData reports whether one of the lines has anything right of the stub.
func (rd *reader) anyData(lines []int) bool {
	for _, i := range lines {
		if rd.hasData(i) {
			return true
		}
	}
	return false
}

// gather is the last piece in each column of a row's lines.
func (rd *reader) gather(cur []int) map[int]*piece {
	out := map[int]*piece{}
	for _, i := range cur {
		for k := range rd.cells[i] {
			out[rd.cells[i][k].c0] = &rd.cells[i][k]
		}
	}
	return out
}

// stubPiece is the first piece of the stub in the lines, nil where there is none.
func (rd *reader) stubPiece(lines []int) *piece {
	for _, i := range lines {
		if rd.hasStub(i) {
			return &rd.cells[i][0]
		}
	}
	return nil
}

// clash reports whether the lines have a figure that begins anew in a column
// where the row above already has a finished one.
func (rd *reader) clash(above map[int]*piece, lines []int) bool {
	seen := map[int]bool{}
	for _, i := range lines {
		for k := range rd.cells[i] {
			q := &rd.cells[i][k]
			p := above[q.c0]
			if p == nil || q.c0 == 0 || seen[q.c0] {
				continue
			}
			seen[q.c0] = true
			if p.figure && q.figure && !goesOnFigure(q.text) && !unfinished(p.text) {
				return true
			}
		}
	}
	return false
}

// dataGoesOn reports whether lines without a row heading go on the row above.
func (rd *reader) dataGoesOn(above map[int]*piece, unit []int, stubUp, dataUp, tight bool) bool {
	if !dataUp {
		// A heading whose values stand on the next line.
		return stubUp
	}
	on, anew, beside := 0, 0, 0
	for _, i := range unit {
		for k := range rd.cells[i] {
			q := &rd.cells[i][k]
			p := above[q.c0]
			switch {
			case p == nil:
				beside++
			case goesOnFigure(q.text) || unfinished(p.text):
				on++
			case p.figure && q.figure:
				anew++
			case tight || startsLow(q.text):
				on++
			default:
				anew++
			}
		}
	}
	return anew == 0 && (on > 0 && beside == 0 || tight)
}

// goesOnFigure reports whether a text is the second part of a figure broken
// over two lines: "(0.92 to 2.76)", "to 2.76)", "± 1.3", or its p value.
func goesOnFigure(t string) bool {
	r, _ := utf8.DecodeRuneInString(t)
	switch {
	case strings.ContainsRune("([±)]", r):
		return true
	case strings.HasPrefix(t, "to "), strings.HasPrefix(t, "– "), isP(t):
		return true
	}
	open := strings.Count(t, "(") - strings.Count(t, ")") + strings.Count(t, "[") - strings.Count(t, "]")
	return open < 0
}

// unfinished reports whether a figure must go on: an open bracket, a dash or
// "to" at its end.
func unfinished(t string) bool {
	if strings.Count(t, "(") > strings.Count(t, ")") || strings.Count(t, "[") > strings.Count(t, "]") {
		return true
	}
	for _, end := range []string{" to", "±", ",", "–", "-", "−", ";", "=", "+", "<", ">"} {
		if strings.HasSuffix(t, end) && t != end {
			return true
		}
	}
	return false
}

// isP reports whether a text is a p value that says so.
func isP(t string) bool {
	rest, ok := strings.CutPrefix(strings.ToLower(t), "p")
	return ok && strings.IndexAny(strings.TrimLeft(rest, " "), "=<>≤≥") == 0
}

func startsLow(t string) bool {
	r, _ := utf8.DecodeRuneInString(t)
	return unicode.IsLower(r) || strings.ContainsRune("(%[/±", r)
}

// linkWords end a label that is not at its end.
var linkWords = map[string]bool{
	"of": true, "and": true, "or": true, "the": true, "for": true, "with": true, "in": true, "to": true, "at": true,
	"from": true, "by": true, "on": true, "per": true, "than": true, "vs": true, "vs.": true, "a": true, "an": true,
	"between": true, "versus": true, "&": true, "/": true, "mean": false,
}

// unfinishedLabel reports whether the row heading a, broken at its end, goes on
// with b.
func unfinishedLabel(a, b string) bool {
	if strings.Count(a, "(") > strings.Count(a, ")") || strings.Count(a, "[") > strings.Count(a, "]") {
		return true
	}
	if strings.HasPrefix(b, "(") && !strings.HasPrefix(b, "(n") {
		return true
	}
	f := strings.Fields(a)
	if len(f) == 0 {
		return false
	}
	last := strings.ToLower(f[len(f)-1])
	if linkWords[last] || strings.HasSuffix(last, "-") || strings.HasSuffix(last, "/") {
		return true
	}
	return strings.HasSuffix(last, ",") && startsLow(b)
}

// labelGoesOn reports whether stub text below a finished row of data is the
// rest of that row's heading and not a heading of the next rows.
func (rd *reader) labelGoesOn(up, stub *piece, tight bool) bool {
	if !sameWeight(rd.s, up, stub) {
		return false
	}
	return tight || startsLow(stub.text) && rd.noRoom(up, stub)
}

// noRoom reports whether the stub line up ends where the first word of the next
// line had no room.
func (rd *reader) noRoom(up, next *piece) bool {
	limit := 0
	for i := rd.head; i < len(rd.lines); i++ {
		if rd.hasStub(i) && rd.hasData(i) {
			limit = max(limit, rd.cells[i][0].x1)
		}
	}
	first := &rd.s.toks[next.toks[0]]
	return up.x1+first.x1-first.x0+rd.em/4 > limit
}

func (rd *reader) indentedMore(p, than *piece) bool {
	return p.x0-than.x0 > rd.em*4/10
}

// sameWeight reports whether both pieces are bold or both not.
func sameWeight(s *sheet, a, b *piece) bool {
	return s.boldRun(&a.run) == s.boldRun(&b.run)
}

func (s *sheet) boldRun(r *run) bool {
	for _, i := range r.toks {
		if !s.toks[i].bold && s.toks[i].shift == 0 {
			return false
		}
	}
	return true
}
