package grid

import (
	"slices"
	"strings"
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
	bands := rd.headBands(boxes)
	for i := len(bands) - 2; i >= 0; i-- {
		rd.shareColumns(bands[:i+1], nearest(bands[i+1:], len(boxes)), boxes)
	}
	statisticOver(bands, len(boxes))
	for _, row := range bands {
		level := statisticBand(row)
		for k := range row {
			p := row[k]
			if b := rd.above(out, &p.piece, row); b >= 0 && !(level && isStatistic(p.text)) {
				out[b].box = out[b].box.union(p.box)
				out[b].pieces = append(out[b].pieces, p.piece)
				out[b].c0, out[b].c1 = min(out[b].c0, p.c0), max(out[b].c1, p.c1)
				continue
			}
			out = append(out, block{box: p.box, pieces: []piece{p.piece}, c0: p.c0, c1: p.c1, fixed: p.fixed})
		}
	}
	rd.headStubs(out)
	for i := range out {
		for k := range i {
			if out[k].c0 <= out[i].c1 && out[i].c0 <= out[k].c1 {
				out[i].level = max(out[i].level, out[k].level+1)
			}
		}
	}
	return out
}

// statisticBand reports whether a band names the statistic of several columns:
// a level of its own, however close below the arms it stands.
func statisticBand(row []headPiece) bool {
	for i := range row {
		if isStatistic(row[i].text) && count(row, row[i].text) > 1 {
			return true
		}
	}
	return false
}

// nearest gives the topmost piece of the bands in each column, without
// repeats, from left to right.
func nearest(bands [][]headPiece, cols int) []headPiece {
	under := make([]*headPiece, cols)
	for _, band := range bands {
		for k := range band {
			p := &band[k]
			for c := p.c0; c <= p.c1; c++ {
				if under[c] == nil {
					under[c] = p
				}
			}
		}
	}
	var out []headPiece
	for c, p := range under {
		if p != nil && (c == 0 || under[c-1] != p) {
			out = append(out, *p)
		}
	}
	return out
}

// statisticOver lets "n (%)" that stands once under several arms with sample
// sizes count for all of them.
func statisticOver(bands [][]headPiece, cols int) {
	if len(bands) < 2 {
		return
	}
	last, before := bands[len(bands)-1], bands[len(bands)-2]
	at := make([]bool, cols)
	arm := make([]bool, cols)
	for k := range last {
		for c := last[k].c0; c <= last[k].c1; c++ {
			at[c] = true
		}
	}
	for k := range before {
		if p := &before[k]; p.c0 == p.c1 && strings.Contains(strings.ToLower(strings.ReplaceAll(p.text, " ", "")), "n=") {
			arm[p.c0] = true
		}
	}
	for k := range last {
		p := &last[k]
		if p.c0 == 0 || !arm[p.c0] || !strings.Contains(p.text, "(") && !strings.Contains(p.text, "±") {
			continue
		}
		for p.c1+1 < cols && arm[p.c1+1] && !at[p.c1+1] {
			p.c1++
		}
	}
}

// headStubs lets the heading of the stub reach over further columns of row
// headings that have none of their own.
func (rd *reader) headStubs(blocks []block) {
	reach := 0
	for c := 1; c < len(rd.cs) && rd.labels(c); c++ {
		for i := range blocks {
			if blocks[i].c0 <= c && c <= blocks[i].c1 {
				c = len(rd.cs)
				break
			}
		}
		if c < len(rd.cs) {
			reach = c
		}
	}
	for i := range blocks {
		if b := &blocks[i]; b.c0 == 0 && b.c1 == 0 {
			b.c1 = reach
		}
	}
}

// labels reports whether column c holds row headings rather than data.
func (rd *reader) labels(c int) bool { return rd.wordShare(c) >= 30 }

// wordShare is how many in a hundred of a column's cells are words.
func (rd *reader) wordShare(c int) int {
	words, all := 0, 0
	for i := rd.head; i < len(rd.lines); i++ {
		for k := range rd.cells[i] {
			if p := &rd.cells[i][k]; p.c0 == c {
				all++
				if (!p.figure || hasUnit(p.text)) && !isSize(p.text) && !isStatistic(p.text) {
					words++
				}
			}
		}
	}
	return words * 100 / max(all, 1)
}

// columnBoxes gives the sides of what stands in each column of the body.
func (rd *reader) columnBoxes() []box {
	out := make([]box, len(rd.cs)+1)
	for i := rd.head; i < len(rd.lines); i++ {
		for k := range rd.cells[i] {
			if p := &rd.cells[i][k]; p.c0 == p.c1 && len(rd.cells[i]) > 1 {
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

// headBands gives the pieces of the heading by height: lines that stand a little
// higher or lower beside one another, as where one cell is centred beside two
// lines of another, are one band. The
// columns of each piece are told by the upright rules beside it or by the rule
// under it, where they are drawn.
func (rd *reader) headBands(boxes []box) [][]headPiece {
	var out [][]headPiece
	for i := range rd.head {
		var row []headPiece
		for _, p := range rd.cells[i] {
			row = append(row, headPiece{piece: p})
		}
		if n := len(out); n > 0 && (rd.lines[i].base-rd.lines[i-1].base)*10 < rd.em*8 && beside(out[n-1], row) {
			out[n-1] = append(out[n-1], row...)
			continue
		}
		out = append(out, row)
	}
	for _, row := range out {
		for k := range row {
			p := &row[k]
			if x0, x1, ok := rd.sidesAt(p.run.mid(), &rd.lines[p.line]); ok {
				p.c0, p.c1, p.fixed = within(boxes, x0, x1, p.c0, p.c1)
			} else if c0, c1, ok := rd.ruleUnder(p, row, boxes); ok {
				p.c0, p.c1, p.fixed = c0, c1, true
			}
		}
	}
	return out
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
	for _, u := range rd.uprights {
		if u.top > y || u.bot < y {
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

// beside reports whether no piece of a line stands over or under one of a band.
func beside(band, row []headPiece) bool {
	for i := range band {
		for k := range row {
			if band[i].x0 < row[k].x1 && row[k].x0 < band[i].x1 {
				return false
			}
		}
	}
	return true
}

// ruleUnder gives the rule drawn under a heading piece and under no other piece
// of its band.
func (rd *reader) ruleUnder(p *headPiece, band []headPiece, boxes []box) (c0, c1 int, ok bool) {
	ln := &rd.lines[p.line]
	x, bot := p.run.mid(), ln.base+ln.size*14/10
	for i := p.line + 1; i < len(rd.lines); i++ {
		if rd.lines[i].base-ln.base >= rd.em*8/10 {
			bot = min(bot, rd.lines[i].base-rd.lines[i].size/3)
			break
		}
	}
	var raw, joined rule
	for _, d := range rulesIn(rd.s.drawn, box{rd.area.x0, ln.base, rd.area.x1, bot}) {
		if d.x0 <= x && x <= d.x1 && d.x1-d.x0 > raw.x1-raw.x0 {
			raw = d
		}
	}
	if raw.x1 == 0 {
		return 0, 0, false
	}
	joined = raw
	for again := true; again; {
		again = false
		for _, d := range rulesIn(rd.s.drawn, box{rd.area.x0, raw.y - sameY, rd.area.x1, raw.y + sameY}) {
			if d.x0 <= joined.x1+100 && d.x1 >= joined.x0-100 && (d.x0 < joined.x0 || d.x1 > joined.x1) {
				joined.x0, joined.x1, again = min(joined.x0, d.x0), max(joined.x1, d.x1), true
			}
		}
	}
	for _, r := range []rule{joined, raw} {
		if rd.full(r) || coversOthers(r, p, band) {
			continue
		}
		// A rule under one column only may be a part of a longer one.
		if c0, c1, ok = within(boxes, r.x0, r.x1, p.c0, p.c1); ok && c1 > c0 {
			return c0, c1, true
		}
	}
	return 0, 0, false
}

// coversOthers reports whether the rule r runs under another piece than p.
func coversOthers(r rule, p *headPiece, band []headPiece) bool {
	for i := range band {
		if q := &band[i]; q.x0 != p.x0 && q.run.mid() > r.x0 && q.run.mid() < r.x1 {
			return true
		}
	}
	return false
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
		case k.c0 <= p.c0 && p.c1 <= k.c1 && alone(k, p, row) && !k.fixed && rd.inLine(&k.pieces[len(k.pieces)-1], p):
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
