package grid

import (
	"slices"
	"strings"
	"unicode"
)

// shareColumns widens the pieces of the last of the heading bands that stand
// over several cells of the next one with nothing drawn between them.
func (rd *reader) shareColumns(bands [][]headPiece, next []headPiece, boxes []box) {
	row := bands[len(bands)-1]
	rd.goesOver(row, next)
	under := make([]*headPiece, len(boxes))
	n := 0
	for k := range next {
		p := &next[k]
		if p.c0 == 0 {
			continue
		}
		for c := p.c0; c <= p.c1; c++ {
			under[c] = p
		}
		n++
	}
	st := stretcher{rd: rd, boxes: slices.Clone(boxes), under: under, taken: make([]bool, len(boxes)), next: next, upper: bands[:len(bands)-1]}
	for c, p := range under {
		if p != nil && p.c0 == p.c1 {
			st.boxes[c] = st.boxes[c].union(p.box)
		}
	}
	if len(bands) > 1 {
		// A cell whose lines stand a little higher has its column to itself.
		for _, p := range bands[len(bands)-2] {
			if p.c0 == p.c1 && (row[0].top-p.top)*100 <= 135*rd.em {
				st.taken[p.c0] = true
			}
		}
	}
	spans, left, centred := 0, 0, 0
	for k := range row {
		p := &row[k]
		for c := p.c0; c <= p.c1; c++ {
			st.taken[c] = true
		}
		if p.c0 == 0 {
			continue
		}
		spans++
		if q := under[p.c0]; q != nil && !p.fixed {
			if abs(p.x0-q.x0)*10 < rd.em*4 {
				left++
			}
			if abs(p.run.mid()-q.run.mid())*10 < rd.em*4 {
				centred++
			}
		}
	}
	if spans == 0 || n == 0 {
		return
	}
	first := slices.MinFunc(next, func(a, b headPiece) int { return a.top - b.top })
	tight := (first.top-row[0].top)*100 <= 135*rd.em && !rd.anyRule(&row[0], &first)
	if rd.byPattern(bands, next, tight) {
		for k := range row {
			for c := row[k].c0; row[k].c0 > 0 && c <= row[k].c1; c++ {
				st.taken[c] = true
			}
		}
	}
	st.left = left*2 > spans && left >= centred
	if n <= spans {
		return
	}
	for k := range row {
		p := &row[k]
		if p.fixed || p.c0 == 0 {
			continue
		}
		if rd.sameCell(p, under[p.c0]) && !st.overAlike(p) {
			continue
		}
		st.stretch(p)
	}
}

// overAlike reports whether p stands over one of several free subheadings that
// differ in their numbers only.
func (st *stretcher) overAlike(p *headPiece) bool {
	own := st.under[p.c0]
	for _, c := range []int{p.c0 - 1, p.c0 + 1} {
		if own != nil && st.free(p, c) && alike(own.text, st.under[c].text) {
			return true
		}
	}
	return false
}

// sameCell reports whether q, the piece under p, is rather the next line of the
// same heading than a heading of its own: close below, in line with p, nothing
// drawn between.
func (rd *reader) sameCell(p, q *headPiece) bool {
	if q == nil || q.c1 > q.c0 {
		return false
	}
	return (q.top-p.top)*100 <= 135*rd.em && rd.aligned(p, q) && !rd.anyRule(p, q)
}

// byPattern shares the columns of the next band where its texts repeat, as
// "mean, SD" under each of two arms, and every repeat has one heading over it.
// Lines that are tight may be lines of one heading: then every heading must have
// its repeat.
func (rd *reader) byPattern(bands [][]headPiece, next []headPiece, tight bool) bool {
	row := bands[len(bands)-1]
	subs, heads := next, 0
	for len(subs) > 0 && subs[0].c0 == 0 {
		subs = subs[1:]
	}
	for k := range row {
		if row[k].c0 > 0 {
			heads++
		}
	}
	for start := range min(len(subs), 8) {
		for period := 2; period <= 6; period++ {
			n := repeats(subs[start:], period, false)
			if loose := repeats(subs[start:], period, true); n < 2 && loose == heads && loose == count(subs, subs[start].text) {
				n = loose
			}
			if n < 2 || n != heads && (tight || n != count(subs, subs[start].text)) {
				continue
			}
			if rd.overGroups(bands, subs[start:], period, n) {
				return true
			}
		}
	}
	return false
}

// count tells how many pieces have a text.
func count(row []headPiece, text string) int {
	n := 0
	for i := range row {
		if row[i].text == text {
			n++
		}
	}
	return n
}

// repeats counts how often the first period texts stand one after another, by
// all of them or (loose) by the first of each; 0 where the first comes again
// among them.
func repeats(subs []headPiece, period int, loose bool) int {
	for i := 1; i < period && i < len(subs); i++ {
		if subs[i].text == subs[0].text {
			return 0
		}
	}
	n := 0
	for (n+1)*period <= len(subs) {
		for i := range period {
			if (i == 0 || !loose) && subs[n*period+i].text != subs[i].text {
				return n
			}
		}
		n++
	}
	return n
}

// overGroups gives each group of subheadings the pieces that stand over it.
func (rd *reader) overGroups(bands [][]headPiece, subs []headPiece, period, n int) bool {
	row := bands[len(bands)-1]
	any := false
	of := make([]int, len(row)) // 1 + group of each piece
	for g := range n {
		first, last := &subs[g*period], &subs[(g+1)*period-1]
		var over *headPiece
		for k := range row {
			p := &row[k]
			if m := p.run.mid(); p.c0 == 0 || p.c0 < first.c0-1 || p.c1 > last.c1+1 || m < first.x0-rd.em || m > last.x1+rd.em {
				continue
			}
			if over != nil && !rd.aligned(over, p) {
				return false // two headings over one group
			}
			of[k], over = g+1, p
		}
		if over == nil && !rd.higher(bands[:len(bands)-1], first, last) {
			return false
		}
		any = any || over != nil
	}
	if !any {
		return false
	}
	for k, g := range of {
		if g > 0 {
			row[k].c0, row[k].c1, row[k].fixed = subs[(g-1)*period].c0, subs[g*period-1].c1, true
		}
	}
	return true
}

// higher reports whether one of the bands has a piece over the columns from
// first to last.
func (rd *reader) higher(bands [][]headPiece, first, last *headPiece) bool {
	for _, band := range bands {
		for k := range band {
			if m := band[k].run.mid(); band[k].c0 > 0 && m > first.x0-rd.em && m < last.x1+rd.em {
				return true
			}
		}
	}
	return false
}

// goesOver gives a piece that stands flush or centred over one spanning piece of
// the next band the columns of that one: two lines of one heading.
func (rd *reader) goesOver(row, next []headPiece) {
	over := map[int]int{} // piece of row -> spanning piece of next
	spanning := 0
	for j := range next {
		q := &next[j]
		if q.c1 == q.c0 || q.c0 == 0 {
			continue
		}
		spanning++
		for k := range row {
			p := &row[k]
			if !p.fixed && q.c0 <= p.c0 && p.c1 <= q.c1 && rd.aligned(p, q) {
				over[k] = j
				break
			}
		}
	}
	if len(over) < spanning {
		return // some have nothing over them: row is a level of its own
	}
	for k, j := range over {
		row[k].c0, row[k].c1, row[k].fixed = next[j].c0, next[j].c1, true
	}
}

// aligned reports whether two pieces are flush left or centred on one another.
func (rd *reader) aligned(p, q *headPiece) bool { return rd.inLine(&p.piece, &q.piece) }

func (rd *reader) inLine(p, q *piece) bool {
	return abs(p.x0-q.x0)*10 < rd.em*4 || abs(p.run.mid()-q.run.mid())*10 < rd.em*4
}

// stretcher lets heading pieces reach over free neighbouring columns.
type stretcher struct {
	rd    *reader
	boxes []box
	under []*headPiece // the piece of the next band in each column
	next  []headPiece
	upper [][]headPiece // the bands above
	taken []bool
	left  bool // headings flush left with their first column
}

// free reports whether column c may come under the heading p.
func (st *stretcher) free(p *headPiece, c int) bool {
	if c <= 0 || c >= len(st.boxes) || st.taken[c] || st.under[c] == nil {
		return false
	}
	q, own := st.under[c], st.under[p.c0]
	if q.c1 > q.c0 && (q.top-p.top)*100 <= 135*st.rd.em {
		return false // a heading of p's own level, set a little lower
	}
	again := count(st.next, q.text) > 1
	if st.left && isTestHead(q.text) && !again {
		return false
	}
	return own == nil || isSize(own.text) == isSize(q.text)
}

// stretch widens p: flush left, up to the next heading; else to the columns
// whose middle is nearest to its own, the widest of those that are as near.
func (st *stretcher) stretch(p *headPiece) {
	lo, hi := p.c0, p.c1
	for st.free(p, lo-1) {
		lo--
	}
	for st.free(p, hi+1) {
		hi++
	}
	if st.left {
		lo, hi = p.c0, min(hi, st.before(p)-1)
	}
	if lo >= hi {
		return
	}
	b0, b1 := p.c0, hi
	if !st.left {
		b0, b1 = st.centred(p, lo, hi)
	}
	p.c0, p.c1 = b0, b1
	for c := b0; c <= b1; c++ {
		st.taken[c] = true
	}
}

// before is the first column right of p that a heading of a higher band begins
// with.
func (st *stretcher) before(p *headPiece) int {
	next := len(st.boxes)
	for _, band := range st.upper {
		for k := range band {
			if c := band[k].c0; c > p.c0 {
				next = min(next, max(c, p.c1+1))
			}
		}
	}
	return next
}

// centred gives the columns between lo and hi that p is centred over.
func (st *stretcher) centred(p *headPiece, lo, hi int) (b0, b1 int) {
	b0, b1 = p.c0, p.c1
	own := st.rd.offCentre(p, b0, b1, st.boxes)
	best := own - st.rd.em/2
	near := false
	for a := lo; a <= p.c0; a++ {
		for b := p.c1; b <= hi; b++ {
			d := st.rd.offCentre(p, a, b, st.boxes)
			both := a < p.c0 && b > p.c1
			switch {
			case d*10 <= st.rd.em*6 && (both || own*10 > st.rd.em*6 && b-a > 0):
				if !near || b-a > b1-b0 {
					b0, b1, near = a, b, true
				}
			case !near && d < best:
				b0, b1, best = a, b, d
			}
		}
	}
	return b0, b1
}

// alike reports whether two subheadings differ in their numbers only: "Week 3"
// and "Week 6", "19.5 mg/ml" and "39 mg/ml".
func alike(a, b string) bool {
	shape := func(s string) string {
		digits := false
		return strings.Map(func(r rune) rune {
			if unicode.IsDigit(r) || digits && (r == '.' || r == ',') {
				if digits {
					return -1
				}
				digits = true
				return '#'
			}
			digits = false
			return r
		}, s)
	}
	return a != b && shape(a) == shape(b)
}

// isTestHead reports whether a heading names a test, not a group's statistic.
func isTestHead(t string) bool {
	low := strings.ToLower(strings.Trim(t, "*†‡ ."))
	low = strings.NewReplacer("-", "", " ", "", "value", "", "values", "").Replace(low)
	switch strings.TrimRight(low, "*†‡§abcs") {
	case "p", "t", "f", "z", "u", "χ2", "x2", "statistic", "difference", "test", "ptrend":
		return true
	}
	return false
}

// anyRule reports whether something is drawn between two heights of the heading.
func (rd *reader) anyRule(up, down *headPiece) bool {
	return len(rulesIn(rd.rules, box{rd.area.x0, up.bot - rd.em/4, rd.area.x1, down.bot - rd.em/2})) > 0
}

// offCentre tells how far the middle of p is from the middle of columns a to b,
// by their cells or by the corridors round them, whichever is nearer.
func (rd *reader) offCentre(p *headPiece, a, b int, boxes []box) int {
	x0, x1 := boxes[a].x0, boxes[b].x1
	d := abs(x0+x1-p.x0-p.x1) / 2
	if a > 0 {
		x0 = rd.cs[a-1].mid()
	}
	if b < len(rd.cs) {
		x1 = rd.cs[b].mid()
	} else {
		x1 = rd.area.x1
	}
	return min(d, abs(x0+x1-p.x0-p.x1)/2)
}
