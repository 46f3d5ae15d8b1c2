package grid

import "strings"

// sidesBelow tells how far to the left and right the table under a label
// reaches (as a box of which only the sides count), and the height of the rule
// over its first row, 0 where none is drawn.
func (s *sheet) sidesBelow(l *label, labels []label) (box, int) {
	left, right := s.barriers(l, labels)
	near := box{l.box.x0 - l.size, l.box.top + l.size/2, l.box.x1 + l.size, l.box.bot + 20*l.size}
	for _, r := range rulesIn(s.rules, near) {
		if r.x1-r.x0 < 6*l.size || r.y < l.box.bot-l.size/3 {
			continue
		}
		sides := box{x0: max(r.x0, left), x1: min(r.x1, right)}
		sides.x0, sides.x1 = min(sides.x0, r.x1), max(sides.x1, r.x0)
		if sides.width() < 6*l.size || !s.captionLike(l, sides, r.y) {
			break
		}
		return s.widened(l, sides, r.y, left, right), r.y
	}
	return s.sidesByWords(l, left, right), 0
}

// captionLike reports whether between a label and height y stand only lines
// that a caption may have.
func (s *sheet) captionLike(l *label, sides box, y int) bool {
	lines := s.linesIn(box{min(sides.x0, l.box.x0), l.box.bot, max(sides.x1, l.box.x1), y})
	for i := range lines {
		rs := s.runs(&lines[i], 120)
		figures := 0
		for k := range rs {
			if isFigure(s.join(rs[k].toks)) {
				figures++
			}
		}
		if figures >= 2 || len(rs) >= 4 {
			return false
		}
	}
	return len(lines) <= 16
}

// widened takes a later, wider rule of the same table for its sides, where the
// first one is only drawn under a spanning heading.
func (s *sheet) widened(l *label, sides box, y, left, right int) box {
	if sides.width()*10 >= (right-left)*4 {
		return sides
	}
	for _, r := range rulesIn(s.rules, box{sides.x0, y + 1, sides.x1, y + 12*l.size}) {
		if r.x0 <= sides.x0+sameY && r.x1 >= sides.x1-sameY && r.x0 >= left-sameY && r.x1 <= right+sameY {
			sides.x0, sides.x1 = min(sides.x0, r.x0), max(sides.x1, r.x1)
		}
	}
	return sides
}

// barriers are the nearest heights of running text or of another caption left
// and right of a label.
func (s *sheet) barriers(l *label, labels []label) (left, right int) {
	left, right = s.bounds.x0, s.bounds.x1
	for i := range labels {
		o := &labels[i]
		if o.tok == l.tok || abs(o.box.top-l.box.top) > 6*l.size || o.figure && o.box.bot <= l.box.top {
			continue
		}
		if o.box.x0 > l.box.x0+6*l.size {
			right = min(right, o.box.x0-1)
		}
		if o.box.x0 < l.box.x0-6*l.size {
			left = max(left, min(o.box.x1, l.box.x0-1))
		}
	}
	return left, right
}

// sidesByWords finds the sides where no rule is drawn: from the prose beside
// the first lines of the table.
func (s *sheet) sidesByWords(l *label, left, right int) box {
	lines := s.linesIn(box{left, l.box.top, right, l.box.bot + 10*l.size})
	x0, x1 := left, right
	for i := range lines {
		rs := s.runs(&lines[i], 100)
		for k := range rs {
			r := &rs[k]
			if !s.isProse(r) {
				continue
			}
			switch {
			case r.x0 > l.box.x0+6*l.size && r.x0 >= l.box.x1:
				x1 = min(x1, r.x0-1)
			case r.x1 < l.box.x0:
				x0 = max(x0, r.x1+1)
			}
		}
	}
	sides := box{x0: l.box.x0, x1: l.box.x1}
	for i := range lines {
		rs := s.runs(&lines[i], 100)
		for k := range rs {
			if r := &rs[k]; r.x0 >= x0 && r.x1 <= x1 {
				sides.x0, sides.x1 = min(sides.x0, r.x0), max(sides.x1, r.x1)
			}
		}
	}
	return sides
}

// captionLines gives the lines of a caption: the label's and those that go on
// from it. top is the height of the table's first rule, 0 where none is drawn.
func (s *sheet) captionLines(l *label, sides box, top int) []line {
	end := top
	if top == 0 {
		end = l.box.bot + 16*l.size
	}
	area := box{min(sides.x0, l.box.x0) - l.size, l.box.top, max(sides.x1, l.box.x1), end}
	lines := s.linesFrom(area)
	var out []line
	for i := range lines {
		ln := lines[i]
		if len(out) == 0 {
			if ln.bot < l.box.top || !containsTok(ln.toks, l.tok) {
				continue
			}
			out = append(out, s.fromLabel(ln, l))
			continue
		}
		prev := &out[len(out)-1]
		if top != 0 {
			out = append(out, ln)
			continue
		}
		if !s.captionGoesOn(l, prev, &ln, sides, len(out)) {
			break
		}
		out = append(out, ln)
	}
	return out
}

// fromLabel drops the tokens of a line before its label.
func (s *sheet) fromLabel(ln line, l *label) line {
	kept := ln.toks[:0:0]
	for _, t := range ln.toks {
		if s.toks[t].x0 >= s.toks[l.tok].x0 {
			kept = append(kept, t)
		}
	}
	ln.toks = kept
	ln.x0 = s.toks[l.tok].x0
	return ln
}

func containsTok(toks []int, t int) bool {
	for _, k := range toks {
		if k == t {
			return true
		}
	}
	return false
}

// captionGoesOn reports whether line ln belongs to the caption whose last line
// is prev, where no rule ends it.
func (s *sheet) captionGoesOn(l *label, prev, ln *line, sides box, have int) bool {
	gap := ln.top - prev.bot
	labelOnly := have == 1 && l.alone
	switch {
	case gap*10 > 9*l.size && !labelOnly, gap > 2*l.size:
		return false
	case len(s.runs(ln, 120)) > 1:
		return false
	case !labelOnly && abs(ln.size-prev.size)*100 > 8*prev.size:
		return false
	case isFigure(s.join(ln.toks)):
		return false
	}
	if labelOnly {
		return true
	}
	// A caption breaks a line only where the next word had no room.
	first := &s.toks[ln.toks[0]]
	if prev.x1+(first.x1-first.x0)+ln.size/4 < sides.x1-ln.size && !strings.HasSuffix(s.toks[prev.toks[len(prev.toks)-1]].text, "-") {
		return false
	}
	return true
}
