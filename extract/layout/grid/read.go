package grid

import (
	"strconv"
	"strings"

	"halfspan/extract/paper"
)

// reader holds the state of reading one region.
type reader struct {
	s     *sheet
	em    int
	area  box
	lines []line
	cs    []corridor
	cells [][]piece // by line
	rules []rule    // across, inside the body
	head  int       // lines of the heading

	uprights []box // inside the body
}

const (
	maxBody     = 8000 // words of one region's grid; more is no table
	maxUprights = 2000 // upright rules of one table looked at
)

// Read reads the grid of a region. page is the 1-based number for places.
func (r *Region) Read(page int) paper.Table {
	t := paper.Table{Label: r.Label, Page: page, Picture: r.Picture}
	t.Box = r.sheet.toPage(r.area)
	t.Turned = r.sheet.frame.Angle != 0
	own := writer{sheet: r.sheet, page: page}
	t.Caption = own.caption(r)
	t.Notes = own.notes(r.noteLns)
	for _, p := range r.parts {
		w := writer{sheet: p.sheet, page: page}
		t.Notes = append(t.Notes, w.notes(p.noteLns)...)
	}
	if r.Picture {
		return t
	}
	whole, body := r.whole()
	if rd := newReader(whole, body); rd != nil {
		rd.write(&t, &writer{sheet: whole, page: page})
	}
	return t
}

func newReader(s *sheet, body box) *reader {
	rd := &reader{s: s, area: body, lines: s.linesIn(body)}
	n := 0
	sizes := map[int]int{}
	for i := range rd.lines {
		n += len(rd.lines[i].toks)
		sizes[rd.lines[i].size/10] += len(rd.lines[i].toks)
	}
	if n == 0 || n > maxBody {
		return nil
	}
	rd.em = max(commonest(sizes)*10, 10)
	rd.rules = rulesIn(s.rules, box{body.x0, body.top - rd.em, body.x1, body.bot + rd.em})
	for _, u := range s.uprights {
		if u.top < body.bot && body.top < u.bot && u.x1 > body.x0-rd.em && u.x0 < body.x1+rd.em && len(rd.uprights) < maxUprights {
			rd.uprights = append(rd.uprights, u)
		}
	}
	rd.head = rd.headLines()
	for rd.head > 0 && rd.head+1 < len(rd.lines) && (rd.statisticLine(rd.head) || rd.stepsLine(rd.head)) {
		rd.head++
	}
	rd.cs = s.findColumns(rd.lines[rd.head:], rd.lines[:rd.head], rd.em)
	rd.ownStub()
	rd.cells = make([][]piece, len(rd.lines))
	for i := range rd.lines {
		rd.cells[i] = s.pieces(&rd.lines[i], i, rd.cs, rd.em, i < rd.head)
	}
	rd.boxed()
	return rd
}

// full reports whether a rule runs over nearly the whole width of the table.
func (rd *reader) full(r rule) bool {
	return (min(r.x1, rd.area.x1)-max(r.x0, rd.area.x0))*10 >= rd.area.width()*8
}

// fullBetween reports whether the table's lines i-1 and i are parted by rules
// that together run over its width.
func (rd *reader) fullBetween(i int) bool {
	lo := rd.area.top - rd.em
	if i > 0 {
		lo = rd.lines[i-1].base - rd.em/4
	}
	hi := rd.lines[i].base - rd.em/4
	var spans []rule
	for _, r := range rd.rules {
		// The lower border of a cell beside the line may run just above its baseline.
		if r.y > lo && r.y <= hi || r.y <= lo && r.y > lo-rd.em/2 && i > 0 && rd.clear(i-1, r) {
			spans = append(spans, r)
		}
	}
	if len(spans) == 0 {
		return false
	}
	sum := 0
	for _, r := range joinRules(spans) {
		sum += max(0, min(r.x1, rd.area.x1)-max(r.x0, rd.area.x0))
	}
	return sum*10 >= rd.area.width()*8
}

// statisticLine reports whether a line below the rule of the heading still
// belongs to it: no row heading, no figures, several cells ("n (%)", "p").
func (rd *reader) statisticLine(i int) bool {
	rs := rd.s.runs(&rd.lines[i], wideGap)
	if len(rs) < 2 || rs[0].x0 < rd.area.x0+rd.area.width()/6 {
		return false
	}
	for k := range rs {
		if t := rd.s.join(rs[k].toks); isFigure(t) && !isHeadFigure(t) || len(t) > 40 {
			return false
		}
	}
	return true
}

// stepsLine reports whether a line below the rule of the heading gives the steps
// of a scale that the heading names, as "24 48 72" under "Hours": no row heading,
// bare numbers that grow, over cells that hold more than one number.
func (rd *reader) stepsLine(i int) bool {
	rs := rd.s.runs(&rd.lines[i], wideGap)
	if len(rs) < 2 || rs[0].x0 < rd.area.x0+rd.area.width()/6 {
		return false
	}
	last := -1.0
	for k := range rs {
		v, err := strconv.ParseFloat(rd.s.join(rs[k].toks), 64)
		if err != nil || v <= last {
			return false
		}
		last = v
	}
	for n := i + 1; n < len(rd.lines) && n <= i+4; n++ {
		down, more := rd.s.runs(&rd.lines[n], wideGap), 0
		for k := range down {
			if t := rd.s.join(down[k].toks); down[k].x1 > rs[0].x0 && isFigure(t) && strings.ContainsAny(t, "±([") {
				more++
			}
		}
		if more >= len(rs) {
			return true
		}
	}
	return false
}

// boldLines counts the lines at the top that are bold throughout, if others
// follow that are not.
func (rd *reader) boldLines() int {
	for i := range rd.lines {
		l := &rd.lines[i]
		if rd.s.boldRun(&run{toks: l.toks}) {
			continue
		}
		for i > 1 && rd.stubOnly(i-1) && !rd.allSingle(0, i-1) {
			i--
		}
		if i > 8 {
			return 0
		}
		return i
	}
	return 0
}

// clear reports whether rule r runs under no word of line i.
func (rd *reader) clear(i int, r rule) bool {
	for _, t := range rd.lines[i].toks {
		if w := &rd.s.toks[t]; w.x0 < r.x1 && r.x0 < w.x1 {
			return false
		}
	}
	return true
}

// isData reports whether a line holds figures in cells right of its first run.
func (rd *reader) isData(i int) bool {
	if rd.lines[i].size*100 < 80*rd.em {
		return false // raised marks that found no host
	}
	rs := rd.s.atoms(&rd.lines[i])
	figures, others := 0, 0
	for k := range rs {
		t := rd.s.join(rs[k].toks)
		switch {
		case k == 0 && rs[k].x0 <= rd.area.x0+rd.area.width()/4:
		case isFigure(t) && !isHeadFigure(t) && !isBlankMark(t) && !hasUnit(t) && !rd.goesOnAbove(i, &rs[k]):
			figures++
		default:
			others++
		}
	}
	return figures > 0 && figures*2 >= others
}

// goesOnAbove reports whether run r of line i finishes what the line above
// begins over it: "n =" over "42".
func (rd *reader) goesOnAbove(i int, r *run) bool {
	if i == 0 {
		return false
	}
	up := rd.s.runs(&rd.lines[i-1], 60)
	for k := range up {
		if up[k].x0 < r.x1 && r.x0 < up[k].x1 {
			t := rd.s.join(up[k].toks)
			return strings.HasSuffix(t, "=") || strings.HasSuffix(t, "(") || strings.HasSuffix(t, "-") || strings.HasSuffix(t, "–")
		}
	}
	return false
}

// stubOnly reports whether a line has only one run, at the left edge.
func (rd *reader) stubOnly(i int) bool {
	rs := rd.s.runs(&rd.lines[i], 100)
	return len(rs) == 1 && rs[0].x0 < rd.area.x0+rd.area.width()/4 && !rd.wordPerColumn(i)
}

// wordPerColumn reports whether the words of line i stand one over each of the
// cells of a line below it, as narrow headings a space apart do: "n Mean SD n
// Mean SD".
func (rd *reader) wordPerColumn(i int) bool {
	toks := rd.lines[i].toks
	if len(toks) < 3 {
		return false
	}
	for k := i + 1; k < len(rd.lines) && k <= i+3; k++ {
		cells := rd.s.atoms(&rd.lines[k])
		if len(cells) < len(toks) || !rd.isData(k) {
			continue
		}
		c, over := 0, 0
		for _, t := range toks {
			w := &rd.s.toks[t]
			for c < len(cells) && cells[c].x1 <= w.x0 {
				c++
			}
			if c == len(cells) {
				break
			}
			if cells[c].x0 < w.x1 {
				over++
				c++
			}
		}
		return over == len(toks)
	}
	return false
}

// headLines counts the lines of the column headings: down to the last rule of
// the table's width above the first row of data, or, without rules, to that row.
func (rd *reader) headLines() int {
	n := len(rd.lines)
	data := n
	for i := 0; i < n; i++ {
		if rd.isData(i) {
			data = i
			break
		}
	}
	full := []int{}
	for i := 1; i < n; i++ {
		if rd.fullBetween(i) {
			full = append(full, i)
		}
	}
	ruled := len(full)*2 > n && len(full) > 3
	if len(full) > 0 && len(full) <= 4 && full[0] <= min(6, n/2) && data == 0 && full[0] < n && (len(full) == 1 || len(full)*4 <= n) {
		data = full[0] // numbers above the one rule under the heading: times, doses, years
	}
	if len(full) > 0 && (full[0] > data && full[0] <= 8 && rd.fewFigures(full[0]) || !ruled && full[0] <= data) {
		// Rules: the head ends at the last rule above the data that has column heads above it.
		end := full[0]
		for _, f := range full[1:] {
			if f-end > 4 || data == n || rd.anyDataIn(end, f) || rd.allSingle(end, f) {
				break
			}
			end = f
		}
		return end
	}
	if b := rd.boldLines(); b > 0 && len(full) == 0 {
		return b
	}
	if data == n {
		if len(full) > 0 {
			return min(full[0], n-1)
		}
		return min(1, n-1)
	}
	// Row groups just above the first data belong to the body.
	end := data
	for end > 1 && (rd.stubOnly(end-1) || ruled && rd.allSingle(end-1, end)) && (!ruled || rd.fullBetween(end)) && !rd.allSingle(0, end-1) {
		end--
	}
	if end == 0 {
		return data
	}
	return end
}

// anyDataIn reports whether one of the lines [i, j) holds data.
func (rd *reader) anyDataIn(i, j int) bool {
	for ; i < j; i++ {
		if rd.isData(i) {
			return true
		}
	}
	return false
}

// allSingle reports whether lines [i, j) are row groups: one run each.
func (rd *reader) allSingle(i, j int) bool {
	for ; i < j; i++ {
		if len(rd.s.runs(&rd.lines[i], 100)) > 1 {
			return false
		}
	}
	return true
}

// fewFigures reports whether the lines above line n read as headings although
// some of their cells are figures ("10-14" weeks, a year).
func (rd *reader) fewFigures(n int) bool {
	for i := range n {
		if rd.lines[i].size*100 < 80*rd.em {
			continue
		}
		figures := 0
		rs := rd.s.runs(&rd.lines[i], 60)
		for k := range rs {
			if t := rd.s.join(rs[k].toks); isFigure(t) && !isHeadFigure(t) && !rd.goesOnAbove(i, &rs[k]) && !rd.wordsBelow(i, n, &rs[k]) {
				figures++
			}
		}
		if figures >= 2 && figures*2 > len(rs) {
			return false
		}
	}
	return true
}

// wordsBelow reports whether words stand under run r of line i, above line n:
// then it is a number in a heading.
func (rd *reader) wordsBelow(i, n int, r *run) bool {
	for k := i + 1; k < n; k++ {
		down := rd.s.runs(&rd.lines[k], 60)
		for j := range down {
			if down[j].x0 < r.x1 && r.x0 < down[j].x1 && !isFigure(rd.s.join(down[j].toks)) {
				return true
			}
		}
	}
	return false
}

// boxed gives the cells of the body that stand between upright rules all the
// columns between these.
func (rd *reader) boxed() {
	if len(rd.uprights) == 0 {
		return
	}
	boxes := rd.columnBoxes()
	for i := rd.head; i < len(rd.lines); i++ {
		for k := range rd.cells[i] {
			p := &rd.cells[i][k]
			x0, x1, ok := rd.sidesAt(p.run.mid(), &rd.lines[i])
			if !ok {
				continue
			}
			c0, c1, ok := within(boxes, x0, x1, p.c0, p.c1)
			if ok && c0 <= p.c0 && p.c1 <= c1 && (k == 0 || rd.cells[i][k-1].c1 < c0) && (k+1 >= len(rd.cells[i]) || rd.cells[i][k+1].c0 > c1) {
				p.c0, p.c1 = c0, c1
			}
		}
	}
}

// ownStub adds a column for row headings where these stand only on lines of
// their own, further left than the figures below them.
func (rd *reader) ownStub() {
	edge := rd.area.x1
	if len(rd.cs) > 0 {
		edge = rd.cs[0].mid()
	}
	left, figures, cells, labels := 1<<30, 0, 0, 0
	for i := rd.head; i < len(rd.lines); i++ {
		rs := rd.s.atoms(&rd.lines[i])
		if len(rs) < 2 || rs[0].x0 >= edge {
			continue
		}
		cells++
		if t := rd.s.join(rs[0].toks); isFigure(t) && strings.ContainsAny(t, "(±[.") {
			figures++
		}
		left = min(left, rs[0].x0)
	}
	if figures < 2 || figures*10 < cells*9 {
		return
	}
	for i := rd.head; i < len(rd.lines); i++ {
		rs := rd.s.runs(&rd.lines[i], wideGap)
		if len(rs) == 1 && rs[0].x0 < left-rd.em/2 && !isFigure(rd.s.join(rs[0].toks)) {
			labels++
		}
	}
	if labels >= 2 {
		rd.cs = append([]corridor{{x0: left - rd.em/2, x1: left}}, rd.cs...)
	}
}
