package grid

import (
	"slices"
	"strings"
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
	st := stretcher{rd: rd, boxes: slices.Clone(boxes), under: under, taken: make([]bool, len(boxes)), next: next}
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
	if spans == 0 || n <= spans {
		return
	}
	if rd.byPattern(row, next) {
		return
	}
	st.left = left*2 > spans && left >= centred
	first := slices.MinFunc(next, func(a, b headPiece) int { return a.top - b.top })
	tight := (first.top-row[0].top)*100 <= 135*rd.em && !rd.anyRule(&row[0], &first)
	if tight && (left > 0 || centred > 0) {
		return // lines of one heading rather than levels
	}
	for k := range row {
		if p := &row[k]; !p.fixed && p.c0 > 0 {
			st.stretch(p)
		}
	}
}

// byPattern shares the columns of the next band where its texts repeat as often
// as there are headings above: "mean, SD" under each of two arms.
func (rd *reader) byPattern(row, next []headPiece) bool {
	var heads []*headPiece
	for k := range row {
		if row[k].c0 > 0 {
			heads = append(heads, &row[k])
		}
	}
	subs := slices.Clone(next)
	slices.SortStableFunc(subs, func(a, b headPiece) int { return a.c0 - b.c0 })
	for len(subs) > 0 && subs[0].c0 < heads[0].c0-1 || len(subs) > 0 && subs[0].c0 == 0 {
		subs = subs[1:]
	}
	for skip := 0; skip < 2 && skip < len(subs); skip++ {
		var starts []int
		for k := skip; k < len(subs); k++ {
			if subs[k].text == subs[skip].text {
				starts = append(starts, k)
			}
		}
		if len(starts) != len(heads) || len(starts) < 2 || starts[1]-starts[0] < 2 {
			continue
		}
		period := starts[1] - starts[0]
		ok := starts[len(starts)-1]+period <= len(subs)
		for k := range starts {
			ok = ok && starts[k] == starts[0]+k*period
			if ok {
				first, last := &subs[starts[k]], &subs[starts[k]+period-1]
				ok = heads[k].run.mid() > first.x0-rd.em && heads[k].run.mid() < last.x1+rd.em
			}
		}
		if !ok {
			continue
		}
		for k := range starts {
			heads[k].c0, heads[k].c1 = subs[starts[k]].c0, subs[starts[k]+period-1].c1
		}
		return true
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
			aligned := abs(p.x0-q.x0)*10 < rd.em*4 || abs(p.run.mid()-q.run.mid())*10 < rd.em*4
			if !p.fixed && q.c0 <= p.c0 && p.c1 <= q.c1 && aligned {
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

// stretcher lets heading pieces reach over free neighbouring columns.
type stretcher struct {
	rd    *reader
	boxes []box
	under []*headPiece // the piece of the next band in each column
	next  []headPiece
	taken []bool
	left  bool // headings flush left with their first column
}

// free reports whether column c may come under the heading p.
func (st *stretcher) free(p *headPiece, c int) bool {
	if c <= 0 || c >= len(st.boxes) || st.taken[c] || st.under[c] == nil {
		return false
	}
	q, own := st.under[c], st.under[p.c0]
	again := repeated(st.next, q.text)
	if st.left && isTestHead(q.text) && !again {
		return false
	}
	return own == nil || isSize(own.text) == isSize(q.text)
}

// stretch widens p: flush left, up to the next heading; else to the columns
// whose middle is nearest to its own.
func (st *stretcher) stretch(p *headPiece) {
	lo, hi := p.c0, p.c1
	for st.free(p, lo-1) {
		lo--
	}
	for st.free(p, hi+1) {
		hi++
	}
	if st.left {
		lo = p.c0
	}
	if lo == hi {
		return
	}
	b0, b1 := p.c0, hi
	if !st.left {
		b1 = p.c1
		best := st.rd.offCentre(p, b0, b1, st.boxes) - st.rd.em/2
		for a := lo; a <= p.c0; a++ {
			for b := p.c1; b <= hi; b++ {
				if d := st.rd.offCentre(p, a, b, st.boxes); d < best {
					b0, b1, best = a, b, d
				}
			}
		}
	}
	p.c0, p.c1 = b0, b1
	for c := b0; c <= b1; c++ {
		st.taken[c] = true
	}
}

// repeated reports whether a text stands twice in a band, as subheadings do.
func repeated(row []headPiece, text string) bool {
	n := 0
	for i := range row {
		if row[i].text == text {
			n++
		}
	}
	return n > 1
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
