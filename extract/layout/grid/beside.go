package grid

// captionBeside finds the table of a label that stands left of it, as in a
// narrow column of its own: rules of one width begin right of the label at its
// height, with no caption of their own. It gives the table's sides, the height
// of its first rule and the lines of the caption.
func (s *sheet) captionBeside(l *label, labels []label) (sides box, top int, caption []line, ok bool) {
	width := s.bounds.width()
	near := box{l.box.x1, l.box.top - 2*l.size, s.bounds.x1, l.box.bot + l.size/2}
	for _, r := range rulesIn(s.rules, near) {
		left := r.x0 - l.box.x0
		if r.x0 < l.box.x1+l.size || r.x1-r.x0 < 12*l.size || left*10 > width*4 || s.labelled(r, l, labels) {
			continue
		}
		bottom := 0
		for _, o := range rulesIn(s.rules, box{r.x0, r.y + l.size, r.x1, r.y + 90*l.size}) {
			if abs(o.x0-r.x0) <= sameY && abs(o.x1-r.x1) <= sameY {
				bottom = o.y
			}
			if o.x0 < r.x0-l.size {
				break // a wider rule: another table, or a frame
			}
		}
		if bottom == 0 {
			continue
		}
		for _, ln := range s.linesIn(box{l.box.x0 - l.size, l.box.top, r.x0 - l.size/2, bottom}) {
			if n := len(caption); n > 0 && (ln.top-caption[n-1].bot > l.size || abs(ln.size-caption[n-1].size)*100 > 8*ln.size) {
				break
			}
			caption = append(caption, ln)
		}
		if len(caption) == 0 || !containsTok(caption[0].toks, l.tok) {
			return box{}, 0, nil, false
		}
		return box{x0: r.x0, x1: r.x1}, r.y, caption, true
	}
	return box{}, 0, nil, false
}

// labelled reports whether a rule has another caption over it.
func (s *sheet) labelled(r rule, l *label, labels []label) bool {
	for i := range labels {
		o := &labels[i]
		if o.tok != l.tok && o.box.x1 > r.x0 && o.box.x0 < r.x1 && o.box.bot <= r.y+o.size && r.y-o.box.bot < 8*o.size {
			return true
		}
	}
	return false
}
