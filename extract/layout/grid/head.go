package grid

import (
	"slices"
)

// block is one heading cell: pieces below one another.
type block struct {
	box
	pieces []piece
	c0, c1 int
	level  int
	fixed  bool // its columns are told by rules
}

// headBlocks joins the pieces of the heading lines into heading cells and finds
// the columns that each spans and the level it stands on.
func (rd *reader) headBlocks() []block {
	var out []block
	boxes := rd.columnBoxes()
	for i := range rd.head {
		row := rd.spanned(i, boxes)
		for k := range row {
			p := row[k]
			if b := rd.above(out, &p.piece, row); b >= 0 {
				out[b].box = out[b].box.union(p.box)
				out[b].pieces = append(out[b].pieces, p.piece)
				out[b].c0, out[b].c1 = min(out[b].c0, p.c0), max(out[b].c1, p.c1)
				continue
			}
			out = append(out, block{box: p.box, pieces: []piece{p.piece}, c0: p.c0, c1: p.c1, fixed: p.fixed})
		}
	}
	for i := range out {
		for k := range i {
			if out[k].c0 <= out[i].c1 && out[i].c0 <= out[k].c1 {
				out[i].level = max(out[i].level, out[k].level+1)
			}
		}
	}
	return out
}

// columnBoxes gives the sides of what stands in each column of the body.
func (rd *reader) columnBoxes() []box {
	out := make([]box, len(rd.cs)+1)
	for i := rd.head; i < len(rd.lines); i++ {
		for k := range rd.cells[i] {
			if p := &rd.cells[i][k]; p.c0 == p.c1 && (p.c0 > 0 || len(rd.cells[i]) > 1) {
				out[p.c0] = out[p.c0].union(p.box)
			}
		}
	}
	for c := range out {
		if out[c] == (box{}) {
			out[c].x0, out[c].x1 = rd.strip(c)
		}
	}
	return out
}

// strip gives the sides of a column, from corridor to corridor.
func (rd *reader) strip(c int) (x0, x1 int) {
	x0, x1 = rd.area.x0, rd.area.x1
	if c > 0 {
		x0 = rd.cs[c-1].x1
	}
	if c < len(rd.cs) {
		x1 = rd.cs[c].x0
	}
	return x0, max(x1, x0)
}

// headPiece is a piece of a heading line with the columns it spans.
type headPiece struct {
	piece
	fixed bool
}

// spanned finds the columns that the pieces of heading line i span: by the
// upright rules beside them, by the rule under them, by where they stand over
// the cells of the next line.
func (rd *reader) spanned(i int, boxes []box) []headPiece {
	row := make([]headPiece, len(rd.cells[i]))
	for k := range row {
		row[k].piece = rd.cells[i][k]
		p := &row[k]
		if x0, x1, ok := rd.sidesAt(p.mid(), &rd.lines[i]); ok {
			p.c0, p.c1, p.fixed = within(boxes, x0, x1, p.c0, p.c1)
			p.fixed = true
		} else if r, ok := rd.ruleUnder(i, p.mid()); ok {
			if c0, c1, ok := within(boxes, r.x0, r.x1, p.c0, p.c1); ok {
				p.c0, p.c1, p.fixed = c0, c1, true
			}
		}
	}
	rd.shareColumns(i, row, boxes)
	return row
}

func (r *run) mid() int { return (r.x0 + r.x1) / 2 }

// within gives the columns whose middle lies between x0 and x1.
func within(boxes []box, x0, x1, d0, d1 int) (c0, c1 int, ok bool) {
	c0, c1 = -1, -1
	for c, b := range boxes {
		if m := (b.x0 + b.x1) / 2; m >= x0 && m <= x1 {
			if c0 < 0 {
				c0 = c
			}
			c1 = c
		}
	}
	if c0 < 0 {
		return d0, d1, false
	}
	return c0, c1, true
}

// sidesAt gives the upright rules left and right of x on a line.
func (rd *reader) sidesAt(x int, ln *line) (x0, x1 int, ok bool) {
	x0, x1 = -1<<30, 1<<30
	y := ln.base - ln.size/3
	n := 0
	for _, u := range rd.s.uprights {
		if u.top > y || u.bot < y || u.x1 < rd.area.x0-rd.em || u.x0 > rd.area.x1+rd.em {
			continue
		}
		n++
		if u.x1 <= x {
			x0 = max(x0, u.x1)
		}
		if u.x0 >= x {
			x1 = min(x1, u.x0)
		}
	}
	return x0, x1, n >= 2 && x0 > -1<<30 && x1 < 1<<30
}

// ruleUnder gives the rule drawn under heading line i at x, if it is not the
// rule of the whole heading.
func (rd *reader) ruleUnder(i, x int) (rule, bool) {
	bot := rd.lines[i].base + rd.lines[i].size*12/10
	if i+1 < len(rd.lines) {
		bot = min(bot, rd.lines[i+1].base-rd.lines[i+1].size/3)
	}
	var cur rule
	for _, p := range rulesIn(rd.s.drawn, box{rd.area.x0, rd.lines[i].base, rd.area.x1, bot}) {
		if cur.x1 > 0 && abs(p.y-cur.y) <= sameY && p.x0 <= cur.x1+100 {
			cur.x1 = max(cur.x1, p.x1)
		} else {
			if cur.x0 <= x && x <= cur.x1 && cur.x1 > cur.x0 {
				break
			}
			cur = p
		}
	}
	if cur.x0 <= x && x <= cur.x1 && !rd.full(cur) {
		return cur, true
	}
	return rule{}, false
}

// shareColumns widens the pieces of a heading line that stand over several
// cells of the next line with nothing drawn between them.
func (rd *reader) shareColumns(i int, row []headPiece, boxes []box) {
	if i+1 >= rd.head || len(row) == 0 {
		return
	}
	under := make([]bool, len(boxes))
	n := 0
	for k := range rd.cells[i+1] {
		p := &rd.cells[i+1][k]
		if p.c0 == p.c1 && p.c0 > 0 {
			under[p.c0] = true
			n++
		}
	}
	taken := make([]bool, len(boxes))
	spans := 0
	for k := range row {
		if row[k].c0 > 0 {
			spans++
		}
		for c := row[k].c0; c <= row[k].c1; c++ {
			taken[c] = true
		}
	}
	if spans == 0 || n <= spans {
		return
	}
	for k := range row {
		p := &row[k]
		if p.fixed || p.c0 == 0 {
			continue
		}
		rd.stretch(p, taken, under, boxes)
	}
}

// stretch lets one heading piece reach over free neighbouring columns as long
// as that brings it nearer to the middle of what it spans, or, if it is flush
// left with its first column, to the next heading.
func (rd *reader) stretch(p *headPiece, taken, under []bool, boxes []box) {
	free := func(c int) bool { return c > 0 && c < len(boxes) && !taken[c] && under[c] }
	lo, hi := p.c0, p.c1
	for free(lo - 1) {
		lo--
	}
	for free(hi + 1) {
		hi++
	}
	if lo == hi {
		return
	}
	b0, b1, best := p.c0, p.c1, 1<<30
	for a := lo; a <= p.c0; a++ {
		for b := p.c1; b <= hi; b++ {
			if d := abs(boxes[a].x0 + boxes[b].x1 - p.x0 - p.x1); d < best {
				b0, b1, best = a, b, d
			}
		}
	}
	left := abs(p.x0 - boxes[p.c0].x0)
	if left*10 < rd.em*4 && left*2 < best && hi > p.c1 {
		b0, b1 = p.c0, hi
	}
	p.c0, p.c1 = b0, b1
	for c := b0; c <= b1; c++ {
		taken[c] = true
	}
}

// above gives the block that piece p of a heading line goes on from, or -1.
func (rd *reader) above(blocks []block, p *piece, row []headPiece) int {
	for b := len(blocks) - 1; b >= 0; b-- {
		k := &blocks[b]
		if k.c0 > p.c1 || p.c0 > k.c1 {
			continue
		}
		switch {
		case p.top-k.bot > rd.em:
			return -1
		case k.c0 == p.c0 && k.c1 == p.c1:
		case k.c0 <= p.c0 && p.c1 <= k.c1 && alone(k, p, row) && !k.fixed:
		case p.c0 <= k.c0 && k.c1 <= p.c1 && p.c1-p.c0 < 2 && onlyOver(blocks, k, p):
		default:
			return -1
		}
		if rd.ruleCuts(k, p) {
			return -1
		}
		return b
	}
	return -1
}

// alone reports whether p is the only piece of its line under block k.
func alone(k *block, p *piece, row []headPiece) bool {
	for i := range row {
		if q := &row[i]; q.x0 != p.x0 && q.c0 <= k.c1 && k.c0 <= q.c1 {
			return false
		}
	}
	return true
}

// onlyOver reports whether k is the only block over p on its height.
func onlyOver(blocks []block, k *block, p *piece) bool {
	for i := range blocks {
		if o := &blocks[i]; o.x0 != k.x0 && o.c0 <= p.c1 && p.c0 <= o.c1 && o.bot > k.top {
			return false
		}
	}
	return true
}

// ruleCuts reports whether a rule is drawn between block k and the piece p
// below it.
func (rd *reader) ruleCuts(k *block, p *piece) bool {
	from := k.pieces[len(k.pieces)-1].bot - rd.em/4
	to := p.bot - rd.em*6/10
	for _, r := range rulesIn(rd.s.drawn, box{max(k.x0, p.x0), from, max(min(k.x1, p.x1), max(k.x0, p.x0)+1), to}) {
		if r.y > from {
			return true
		}
	}
	return false
}

// headRows is the number of heading rows of the blocks.
func headRows(blocks []block) int {
	n := 0
	for i := range blocks {
		n = max(n, blocks[i].level+1)
	}
	return n
}

// settle gives the blocks their place in the grid: each leaf reaches down to
// the last heading row.
func settle(blocks []block, rows int) []int {
	span := make([]int, len(blocks))
	for i := range blocks {
		leaf := true
		next := rows
		for k := i + 1; k < len(blocks); k++ {
			if blocks[k].c0 <= blocks[i].c1 && blocks[i].c0 <= blocks[k].c1 {
				leaf = false
				next = min(next, blocks[k].level)
			}
		}
		span[i] = 1
		if leaf {
			span[i] = rows - blocks[i].level
		} else if next > blocks[i].level {
			span[i] = next - blocks[i].level
		}
	}
	return span
}

// disjoint makes the column ranges of the blocks of one level not overlap.
func disjoint(blocks []block) {
	order := make([]int, len(blocks))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		if blocks[a].level != blocks[b].level {
			return blocks[a].level - blocks[b].level
		}
		return blocks[a].c0 - blocks[b].c0
	})
	for k := 1; k < len(order); k++ {
		p, b := &blocks[order[k-1]], &blocks[order[k]]
		if p.level == b.level && b.c0 <= p.c1 {
			if p.c1 > p.c0 {
				p.c1 = max(p.c0, b.c0-1)
			}
			if b.c0 <= p.c1 {
				b.c0 = min(b.c1, p.c1+1)
			}
		}
	}
}
