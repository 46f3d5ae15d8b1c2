package grid

import (
	"strings"

	"halfspan/extract/layout/words"
)

// Sheet is one direction of one page, as [FindAll] takes it.
type Sheet struct {
	Page  int // 1-based
	Frame *words.Frame
}

// FindAll gives the table regions of a whole paper, one slice for each sheet.
// A table that goes on on a later page has one region a page: the first reads
// all of it, the others are marked Joined and are not to be read.
func FindAll(sheets []Sheet, bodySize int32) [][]Region {
	out := make([][]Region, len(sheets))
	known := learn(sheets)
	for i := range sheets {
		if sheets[i].Frame.Oblique {
			continue
		}
		s := newSheet(sheets[i].Frame, int(bodySize))
		s.page, s.words = sheets[i].Page, known
		prev := openBefore(sheets, out, i)
		out[i] = s.find(prev)
	}
	joinAll(sheets, out)
	return out
}

// openBefore is the region of the page before, in the same direction, that
// reaches its foot without an end.
func openBefore(sheets []Sheet, out [][]Region, i int) *Region {
	for k := i - 1; k >= 0 && sheets[k].Page >= sheets[i].Page-1; k-- {
		if sheets[k].Page != sheets[i].Page-1 || sheets[k].Frame.Angle != sheets[i].Frame.Angle {
			continue
		}
		for n := len(out[k]) - 1; n >= 0; n-- {
			if out[k][n].Open {
				return &out[k][n]
			}
		}
	}
	return nil
}

// goesOnAt finds the rest of an open table at the top of the sheet, between the
// given sides.
func (s *sheet) goesOnAt(open *Region, labels []label, sides box) (Region, bool) {
	limit := s.bounds.bot
	if len(s.segs) == 0 {
		return Region{}, false
	}
	lines := s.linesIn(box{sides.x0 - s.bodySize, s.bounds.top, sides.x1 + s.bodySize, s.bounds.bot})
	if len(lines) == 0 {
		return Region{}, false
	}
	k := 0
	for k < len(lines) && k < 3 && !s.isTabular(&lines[k]) {
		// A running head, or a row group that the page begins with.
		if k+1 < len(lines) && lines[k+1].top-lines[k].bot > 2*s.bodySize {
			lines = lines[k+1:]
			k = 0
			continue
		}
		k++
	}
	if len(lines) == 0 {
		return Region{}, false
	}
	top := lines[0].top - 1
	for i := range labels {
		if o := &labels[i]; o.box.x0 <= sides.x1 && sides.x0 <= o.box.x1 {
			limit = min(limit, o.box.top-1)
		}
	}
	tabular := 0
	for i := 0; i < len(lines) && i < 6 && lines[i].bot < limit; i++ {
		if s.isTabular(&lines[i]) {
			tabular++
		}
	}
	if tabular < 2 && !(tabular == 1 && len(lines) < 4) {
		return Region{}, false
	}
	body, isOpen, ok := s.bodyBelow(sides, top, limit, open.label.size)
	if !ok {
		return Region{}, false
	}
	r := Region{Label: open.Label, Continued: true, Open: isOpen, sheet: s, body: body, sides: sides, label: open.label}
	r.noteLns = s.notesBelow(body, limit)
	if len(r.noteLns) > 0 {
		r.Open = false
	}
	r.area = s.areaOf(&r)
	return r, true
}

// continues finds the rest of a table of the page before: in the same place, or in
// the first column of the page.
func (s *sheet) continues(open *Region, labels []label) (Region, bool) {
	if r, ok := s.goesOnAt(open, labels, open.sides); ok {
		return r, true
	}
	left := s.bounds.x1
	for i := range s.segs {
		if s.segs[i].chars >= 20 {
			left = min(left, s.segs[i].x0)
		}
	}
	if left >= open.sides.x0-open.label.size {
		return Region{}, false
	}
	return s.goesOnAt(open, labels, box{x0: left, x1: left + open.sides.width()})
}

// nextColumn finds the rest of a table that reaches the foot of one column of
// the page at the top of the next column.
func (s *sheet) nextColumn(open *Region, labels []label) (Region, bool) {
	left := s.bounds.x1
	for i := range s.segs {
		g := &s.segs[i]
		if g.x0 > open.sides.x1 && g.top < open.body.top && g.n > 1 {
			left = min(left, g.x0)
		}
	}
	if left+open.sides.width()*9/10 > s.bounds.x1 {
		return Region{}, false
	}
	return s.goesOnAt(open, labels, box{x0: left, x1: left + open.sides.width()})
}

// joinAll ties the regions that go on from an earlier page to the first one.
func joinAll(sheets []Sheet, out [][]Region) {
	for i := range out {
		for k := range out[i] {
			r := &out[i][k]
			if r.Joined || r.Picture {
				continue
			}
			last := r
			for j := i; j < len(out); j++ {
				if sheets[j].Page > last.sheet.page+1 {
					break
				}
				for n := range out[j] {
					if o := &out[j][n]; o != r && !o.Joined && follows(r, last, o) {
						o.Joined = true
						r.parts = append(r.parts, o)
						last = o
					}
				}
			}
		}
	}
}

// follows reports whether region o is the next part of the table that begins
// with r and whose part before is last.
func follows(r, last, o *Region) bool {
	if o.Picture || o.Label != r.Label || r.Label == "" || o.sheet.frame.Angle != r.sheet.frame.Angle {
		return false
	}
	return o.Continued || last.Open && sameStart(r, o)
}

// sameStart reports whether two captions begin alike.
func sameStart(a, b *Region) bool {
	if len(a.caption) == 0 || len(b.caption) == 0 {
		return false
	}
	ta, tb := a.sheet.join(a.caption[0].toks), b.sheet.join(b.caption[0].toks)
	return ta == tb || strings.HasPrefix(ta, tb) || strings.HasPrefix(tb, ta)
}

// whole gives the sheet and the box that hold the body of all parts, one below
// the other; without parts that is the region's own.
func (r *Region) whole() (*sheet, box) {
	if len(r.parts) == 0 {
		return r.sheet, r.body
	}
	m := &sheet{frame: r.sheet.frame, bodySize: r.sheet.bodySize, bounds: r.sheet.bounds, page: r.sheet.page, words: r.sheet.words}
	first := r.sheet.linesIn(r.body)
	m.addPart(r.sheet, first, r.body, 0, 0)
	bottom := r.body.bot
	for _, p := range r.parts {
		lines := withoutHead(p.sheet, p.sheet.linesIn(p.body), r.sheet, first)
		if len(lines) == 0 {
			continue
		}
		body := p.body
		body.top = lines[0].top - 1
		dy := bottom - body.top + 2*r.sheet.bodySize
		m.addPart(p.sheet, lines, body, r.body.x0-p.body.x0, dy)
		bottom = body.bot + dy
	}
	return m, box{r.body.x0, r.body.top, r.body.x1, bottom}
}

// addPart copies the lines and rules of a part, moved by dx and dy.
func (s *sheet) addPart(from *sheet, lines []line, body box, dx, dy int) {
	for i := range lines {
		l := &lines[i]
		g := segment{base: l.base + dy, size: l.size, first: len(s.toks), n: len(l.toks)}
		g.box = box{l.x0 + dx, l.top + dy, l.x1 + dx, l.bot + dy}
		for _, k := range l.toks {
			t := from.toks[k]
			t.page = int32(from.page)
			t.x0, t.x1, t.top, t.bot, t.base = t.x0+dx, t.x1+dx, t.top+dy, t.bot+dy, g.base
			s.toks = append(s.toks, t)
		}
		s.segs = append(s.segs, g)
	}
	move := func(rs []rule) []rule {
		var out []rule
		for _, r := range rulesIn(rs, box{body.x0, body.top - 1, body.x1, body.bot + from.bodySize}) {
			out = append(out, rule{r.x0 + dx, r.x1 + dx, r.y + dy})
		}
		return out
	}
	s.rules = append(s.rules, move(from.rules)...)
	s.drawn = append(s.drawn, move(from.drawn)...)
	for _, u := range from.uprights {
		if u.top < body.bot && body.top < u.bot {
			s.uprights = append(s.uprights, box{u.x0 + dx, u.top + dy, u.x1 + dx, u.bot + dy})
		}
	}
}

// withoutHead drops the lines at the start of a later part that repeat the
// lines at the start of the first.
func withoutHead(s *sheet, lines []line, first *sheet, head []line) []line {
	n := 0
	for n < len(lines) && n < len(head) && n < 12 && s.join(lines[n].toks) == first.join(head[n].toks) {
		n++
	}
	return lines[n:]
}
