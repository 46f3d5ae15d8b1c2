package grid

import "slices"

// Ref points to a word of a frame.
type Ref struct{ Line, Word int32 }

// Region is one table found on a page, or its part on this page.
type Region struct {
	Label     string // "Table 2"; empty when none is printed
	Continued bool   // goes on from an earlier page: said so, or begins without a caption at the page's top
	Open      bool   // reaches the foot of the page without an end: may go on on the next
	Picture   bool   // a caption over a picture, no words
	Joined    bool   // a later part of a table: read with its first part, not by itself
	Caption   []Ref  // label and caption
	Body      []Ref
	Notes     []Ref

	sheet            *sheet
	area             box // caption, body and notes
	body             box
	sides            box
	label            label
	caption, noteLns []line
	parts            []*Region
}

// find gives the regions of the sheet; open is a table of the page before that
// may go on here.
func (s *sheet) find(open *Region) []Region {
	labels := s.labels()
	var out []Region
	taken := []box{}
	if open != nil {
		if r, ok := s.continues(open, labels); ok {
			taken = append(taken, r.area)
			out = append(out, r)
		}
	}
	for i := range labels {
		if labels[i].figure {
			continue
		}
		r, ok := s.regionOf(labels, i, taken)
		if !ok {
			continue
		}
		taken = append(taken, r.area)
		out = append(out, r)
	}
	for i := range out {
		if !out[i].Open {
			continue
		}
		if r, ok := s.nextColumn(&out[i], labels); ok && !overlapsAny(r.area, out) {
			out = append(out, r)
		}
	}
	out = append(out, s.unlabelled(out)...)
	for i := range out {
		out[i].collect()
	}
	slices.SortStableFunc(out, func(a, b Region) int { return a.area.top - b.area.top })
	return out
}

func overlapsAny(a box, regions []Region) bool {
	for i := range regions {
		b := regions[i].area
		if a.x0 < b.x1 && b.x0 < a.x1 && a.top < b.bot && b.top < a.bot {
			return true
		}
	}
	return false
}

// collect lists the words of the region.
func (r *Region) collect() {
	refs := func(lines []line) []Ref {
		var out []Ref
		for i := range lines {
			for _, t := range lines[i].toks {
				out = append(out, Ref{r.sheet.toks[t].line, r.sheet.toks[t].word})
			}
		}
		return out
	}
	r.Caption, r.Notes = refs(r.caption), refs(r.noteLns)
	r.Body = refs(r.sheet.linesIn(r.body))
}

// regionOf finds what belongs to label k.
func (s *sheet) regionOf(labels []label, k int, taken []box) (Region, bool) {
	l := labels[k]
	r := Region{Label: l.text, Continued: l.continued, sheet: s, label: l}
	sides, top := s.sidesBelow(&l, labels)
	caption := s.captionLines(&l, sides, top)
	bottom := l.box.bot
	if n := len(caption); n > 0 {
		bottom = caption[n-1].bot
	}
	if its, y, lines, ok := s.captionBeside(&l, labels); ok {
		sides, caption, bottom = its, lines, y
	}
	limit := s.floor(labels, k, sides, bottom)
	body, open, ok := s.bodyBelow(sides, bottom, limit, l.size)
	if !ok {
		above, its, ok := s.bodyAbove(&l, labels, k, taken)
		if !ok {
			return s.pictured(r, caption, sides, bottom)
		}
		r.caption, r.body = its, above
		r.area = s.areaOf(&r)
		return r, true
	}
	r.caption, r.body, r.Open, r.sides = caption, body, open, sides
	r.noteLns = s.notesBelow(body, limit)
	if len(r.noteLns) > 0 {
		r.Open = false
	}
	r.area = s.areaOf(&r)
	return r, true
}

func (s *sheet) areaOf(r *Region) box {
	a := r.body
	for _, ls := range [][]line{r.caption, r.noteLns} {
		for i := range ls {
			a = a.union(ls[i].box)
		}
	}
	return a
}

// pictured makes a Picture region where a caption stands at an image.
func (s *sheet) pictured(r Region, caption []line, sides box, bottom int) (Region, bool) {
	for _, m := range s.images {
		near := m.top-bottom < 6*r.label.size && m.top >= r.label.box.top-6*r.label.size ||
			r.label.box.top-m.bot < 4*r.label.size && r.label.box.top >= m.bot-r.label.size
		if near && m.x0 < sides.x1 && sides.x0 < m.x1 && m.width() > 8*r.label.size && m.bot-m.top > 4*r.label.size {
			r.Picture, r.caption, r.body = true, caption, m
			r.area = s.areaOf(&r)
			return r, true
		}
	}
	// A picture that the reader of the file did not see leaves a hole.
	next := s.bounds.bot
	if lines := s.linesIn(box{sides.x0, bottom, sides.x1, s.bounds.bot}); len(lines) > 0 {
		next = lines[0].top
	}
	drawn := len(rulesIn(s.rules, box{sides.x0, bottom, sides.x1, next}))
	if (r.label.score >= 5 || drawn >= 3) && next-bottom > 8*r.label.size && next < s.bounds.bot {
		r.Picture, r.caption, r.body = true, caption, box{sides.x0, bottom, sides.x1, next}
		r.area = s.areaOf(&r)
		return r, true
	}
	return r, false
}

// floor is the height where the next caption that shares the table's sides
// begins, or the foot of the page.
func (s *sheet) floor(labels []label, k int, sides box, from int) int {
	limit := s.bounds.bot
	for i := range labels {
		o := &labels[i]
		if i == k || o.box.top <= from || o.box.x0 > sides.x1 || o.box.x1 < sides.x0 {
			continue
		}
		limit = min(limit, o.box.top-1)
	}
	return limit
}
