package grid

// unlabelled finds tables without a caption that are plainly tables: at least
// three rules of one width with rows of figures between them, in no table yet.
func (s *sheet) unlabelled(taken []Region) []Region {
	var out []Region
	used := 0 // rules up to here belong to a table found
	for i := range s.rules {
		r := s.rules[i]
		if i < used || r.x1-r.x0 < 15*s.bodySize || len(out) >= maxUnlabelled {
			continue
		}
		sides := box{x0: r.x0, x1: r.x1}
		last, n := i, 1
		for k := i + 1; k < len(s.rules) && k < i+60; k++ {
			o := s.rules[k]
			if abs(o.x0-r.x0) > sameY || abs(o.x1-r.x1) > sameY {
				continue
			}
			if !s.rowsBetween(sides, s.rules[last].y, o.y) {
				break
			}
			last, n = k, n+1
		}
		if n < 3 {
			continue
		}
		area := box{r.x0, r.y, r.x1, s.rules[last].y}
		if overlapsAny(area, taken) || overlapsAny(area, out) || !s.hasRows(s.linesIn(area)) {
			continue
		}
		used = last + 1
		reg := Region{sheet: s, sides: sides, label: label{size: s.bodySize}}
		reg.body = box{r.x0 - s.bodySize/2, r.y, r.x1 + s.bodySize/2, area.bot}
		reg.noteLns = s.notesBelow(reg.body, s.bounds.bot)
		reg.area = s.areaOf(&reg)
		out = append(out, reg)
	}
	return out
}

const maxUnlabelled = 20 // on one page

// rowsBetween reports whether between two heights stand lines of cells, no
// running text and no gap.
func (s *sheet) rowsBetween(sides box, from, to int) bool {
	if to-from < s.bodySize/2 {
		return true
	}
	lines := s.linesIn(box{sides.x0, from, sides.x1, to})
	cells := 0
	bottom := from
	for i := range lines {
		if s.isText(&lines[i]) || lines[i].top-bottom > 4*s.bodySize {
			return false
		}
		bottom = lines[i].bot
		if s.isTabular(&lines[i]) {
			cells++
		}
	}
	return cells > 0 && cells*2 >= len(lines) && to-bottom < 4*s.bodySize
}
