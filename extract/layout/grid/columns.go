package grid

import (
	"cmp"
	"slices"
	"strings"
	"unicode"
)

// corridor is a white strip between two columns.
type corridor struct {
	x0, x1 int
	tight  bool // in most lines no wider than a space between words
}

func (c corridor) mid() int { return (c.x0 + c.x1) / 2 }

// em hundredths: a gap of wideGap always parts cells, one under wordGap may be
// the space between two words.
const (
	wideGap = 80
	wordGap = 45
	atomGap = 15
)

// atoms cuts a line at wide gaps, and at narrow ones where a complete figure
// ends and another begins.
func (s *sheet) atoms(l *line) []run {
	var out []run
	depth := 0
	for k, i := range l.toks {
		t := &s.toks[i]
		cut := k == 0
		if k > 0 {
			p := &s.toks[l.toks[k-1]]
			gap := (t.x0 - p.x1) * 100
			cut = gap >= wideGap*l.size || gap >= atomGap*l.size && !t.glued && depth <= 0 && (figuresMeet(p.text, t.text, gap < 35*l.size) || bracketsMeet(s.toks[out[len(out)-1].toks[0]].text, p.text, t.text))
		}
		if cut {
			out = append(out, run{box: box{t.x0, l.top, t.x1, l.bot}})
			depth = 0
		}
		depth += bracketDepth(t.text)
		r := &out[len(out)-1]
		r.toks, r.x1 = append(r.toks, i), max(r.x1, t.x1)
	}
	return out
}

// figuresMeet reports whether word a ends a complete figure and word b begins
// another one. near: the gap is a space, so that "12 345" stays one number.
func figuresMeet(a, b string, near bool) bool {
	if a == "" || b == "" {
		return false
	}
	digitIn := strings.IndexFunc(a, unicode.IsDigit) >= 0
	ra := []rune(a)
	last := ra[len(ra)-1]
	endsFigure := unicode.IsDigit(last) || digitIn && strings.ContainsRune(")]%*†‡§", last) || isBlankMark(a) ||
		digitIn && len(ra) > 1 && unicode.IsLower(last) && unicode.IsDigit(ra[len(ra)-2])
	if last == ')' && !digitIn {
		endsFigure = false
	}
	if !endsFigure {
		return false
	}
	if a == "−" || a == "-" || a == "–" {
		if r := firstRune(b); near && (unicode.IsDigit(r) || r == '.') {
			return false // a sign set apart from its number
		}
	}
	rb := []rune(b)
	k := 0
	for k < len(rb) && strings.ContainsRune("-–−<>≤≥=", rb[k]) {
		k++
	}
	if isBlankMark(b) && (len(rb) > 1 || isBlankMark(a)) {
		return true
	}
	if k >= len(rb) || !unicode.IsDigit(rb[k]) && !(rb[k] == '.' && k+1 < len(rb) && unicode.IsDigit(rb[k+1])) {
		return false
	}
	if near && len(rb) == 3 && k == 0 && allDigits(a) && len(a) <= 3 && allDigits(b) {
		return false
	}
	// "2 to 3", "-0.4 -0.1" stay to the corridor's vote; a lone dash is a separator.
	return true
}

func isBlankMark(t string) bool {
	switch strings.ToUpper(t) {
	case "NA", "N/A", "NR", "NS", "ND", "NE", "–", "—", "-", "−":
		return true
	}
	return false
}

func allDigits(t string) bool {
	return t != "" && strings.Trim(t, "0123456789") == ""
}

// findColumns gives the corridors between the columns of the body lines. The
// heading lines only say where "12.4 (1.3)" is two columns.
func (s *sheet) findColumns(lines, head []line, em int) []corridor {
	atoms := make([][]run, len(lines))
	for i := range lines {
		atoms[i] = s.atoms(&lines[i])
	}
	figures := s.figureColumns(atoms)
	type span struct{ x0, x1 int }
	var spans []span
	left := 1 << 30
	for i := range lines {
		left = min(left, lines[i].x0)
	}
	kept := make([][]int, 0, len(lines))
	for i := range lines {
		var toks []int
		for k := range atoms[i] {
			a := &atoms[i][k]
			figure := isFigure(s.join(a.toks))
			centred := k == 0 && len(atoms[i]) == 2 && a.x0 > left+3*em // a row group with its p value
			if !figure && (len(atoms[i]) == 1 || centred || overflows(a, figures)) {
				continue
			}
			toks = append(toks, a.toks...)
		}
		for _, t := range toks {
			spans = append(spans, span{s.toks[t].x0, s.toks[t].x1})
		}
		if len(toks) > 0 {
			kept = append(kept, toks)
		}
	}
	for _, toks := range s.besides(lines, atoms, em) {
		for _, t := range toks {
			spans = append(spans, span{s.toks[t].x0, s.toks[t].x1})
		}
	}
	slices.SortFunc(spans, func(a, b span) int { return cmp.Compare(a.x0, b.x0) })
	var cs []corridor
	right := 0
	for k, sp := range spans {
		if k > 0 && sp.x0-right >= em*atomGap/100 {
			cs = append(cs, corridor{x0: right, x1: sp.x0})
		}
		if k == 0 {
			right = sp.x1
		}
		right = max(right, sp.x1)
	}
	return s.votes(s.hidden(s.votes(cs, kept, head, em), kept, em), kept, head, em)
}

// besides gives the tokens of the lines of one run that stand between two lines
// in height and left of both, as a row heading set in the middle of its rows.
func (s *sheet) besides(lines []line, atoms [][]run, em int) [][]int {
	var out [][]int
	for i := range lines {
		if len(atoms[i]) != 1 || isFigure(s.join(lines[i].toks)) {
			continue
		}
		for _, k := range []int{i - 1, i + 1} {
			if k < 0 || k >= len(lines) || len(atoms[k]) < 2 {
				continue
			}
			if abs(lines[k].base-lines[i].base)*10 < em*8 && lines[i].x1 <= lines[k].x0 {
				out = append(out, lines[i].toks)
				break
			}
		}
	}
	return out
}

// figureColumns clusters the figures of all lines by the width they share.
func (s *sheet) figureColumns(atoms [][]run) []box {
	var all []box
	for i := range atoms {
		for k := range atoms[i] {
			if isFigure(s.join(atoms[i][k].toks)) {
				all = append(all, atoms[i][k].box)
			}
		}
	}
	slices.SortStableFunc(all, func(a, b box) int { return cmp.Compare(a.x0, b.x0) })
	var out []box
	for _, b := range all {
		if n := len(out); n > 0 && b.x0 <= out[n-1].x1 {
			out[n-1].x1 = max(out[n-1].x1, b.x1)
			out[n-1].bot++ // counts its members
			continue
		}
		out = append(out, box{b.x0, 0, b.x1, 1})
	}
	kept := out[:0]
	for _, b := range out {
		if b.bot >= 2 {
			kept = append(kept, b)
		}
	}
	return kept
}

// overflows reports whether a text reaches into or across columns of figures.
func overflows(a *run, figures []box) bool {
	n := 0
	for _, f := range figures {
		if min(a.x1, f.x1)-max(a.x0, f.x0) > 0 {
			n++
			if a.x0 < f.x0 && (f.bot >= 3 || a.x1 > f.x1) {
				return true
			}
		}
	}
	return n >= 2
}

// votes drops the corridors that are only spaces between the words of a cell:
// each line with words on both sides says how wide its gap is and whether two
// cells can meet there.
func (s *sheet) votes(cs []corridor, kept [][]int, head []line, em int) []corridor {
	for again := true; again; {
		again = false
		for k := 0; k < len(cs); k++ {
			lo, hi := -1<<30, 1<<30
			if k > 0 {
				lo = cs[k-1].mid()
			}
			if k+1 < len(cs) {
				hi = cs[k+1].mid()
			}
			ok, tight := s.vote(cs[k], lo, hi, kept, head, em)
			cs[k].tight = tight
			if !ok {
				cs = slices.Delete(cs, k, k+1)
				k--
				again = true
			}
		}
	}
	return cs
}

func (s *sheet) vote(c corridor, lo, hi int, kept [][]int, head []line, em int) (ok, tight bool) {
	n, wide, narrow, meet, glue := 0, 0, 0, 0, 0
	for _, toks := range kept {
		a, b := -1, -1
		for _, t := range toks {
			switch m := s.toks[t].mid(); {
			case m > lo && m < c.mid():
				a = t
			case m > c.mid() && m < hi && b < 0:
				b = t
			}
		}
		if a < 0 || b < 0 {
			continue
		}
		n++
		ta, tb := &s.toks[a], &s.toks[b]
		gap := (tb.x0 - ta.x1) * 100
		switch {
		case gap >= wideGap*em:
			wide++
		case gap < wordGap*em:
			narrow++
		}
		if figuresMeet(ta.text, tb.text, gap < 35*em) {
			meet++
		}
		if clings(ta.text, tb.text) && !bracketsMeet(s.toks[firstIn(toks, s, lo)].text, ta.text, tb.text) && !(isBlankMark(tb.text) && gap >= 60*em) {
			glue++
		}
	}
	switch {
	case n == 0:
		return true, false
	case glue*10 >= n*8:
		// "12.4 ± 1.3" set in three columns is one cell; "12.4" and "(1.3)" far apart are two.
		if s.pmBetween(c, kept) {
			return false, false
		}
		return s.headParts(c, lo, hi, head, em) || wide*10 >= n*8 && (c.x1-c.x0)*100 >= 150*em, false
	case wide*2 >= n:
		return true, false
	case narrow*2 >= n:
		return meet*10 >= n*8 && n >= 3 || wide*4 >= n && meet*10 >= n*5, true
	}
	return true, true
}

// firstIn is the first of the tokens right of x.
func firstIn(toks []int, s *sheet, x int) int {
	for _, t := range toks {
		if s.toks[t].mid() > x {
			return t
		}
	}
	return toks[0]
}

// clings reports whether two words belong to one cell: a bracket or ± after a
// number, a word after ±, "to" or a dash.
func clings(a, b string) bool {
	if isBlankMark(a) && isBlankMark(b) {
		return false
	}
	switch b[0] {
	case '(', '[':
		return true
	}
	if strings.HasPrefix(b, "±") || strings.HasSuffix(a, "±") || b == "to" || a == "to" || b == "–" || a == "–" || b == "-" || a == "-" || a == "−" || a == "<" || a == "=" {
		return true
	}
	return strings.HasSuffix(a, ",") || strings.HasSuffix(a, "(") || strings.HasSuffix(a, "[")
}

// pmBetween reports whether a word beside a corridor ends or begins with ±.
func (s *sheet) pmBetween(c corridor, kept [][]int) bool {
	for _, toks := range kept {
		for k := 1; k < len(toks); k++ {
			a, b := &s.toks[toks[k-1]], &s.toks[toks[k]]
			if a.mid() < c.mid() && b.mid() > c.mid() && (strings.HasSuffix(a.text, "±") || strings.HasPrefix(b.text, "±")) {
				return true
			}
		}
	}
	return false
}

// headParts reports whether a heading line has a cell on either side of a
// corridor, between the neighbouring ones, with a wide gap between.
func (s *sheet) headParts(c corridor, lo, hi int, head []line, em int) bool {
	for i := range head {
		toks := head[i].toks
		for k := 1; k < len(toks); k++ {
			a, b := &s.toks[toks[k-1]], &s.toks[toks[k]]
			if a.mid() > lo && a.mid() < c.mid() && b.mid() > c.mid() && b.mid() < hi && (b.x0-a.x1)*100 >= wideGap*em {
				return true
			}
		}
	}
	return false
}

// hidden adds corridors that a few lines cross: where most lines of a column
// have a wide gap inside it.
func (s *sheet) hidden(cs []corridor, kept [][]int, em int) []corridor {
	edges := []int{-1 << 30}
	for _, c := range cs {
		edges = append(edges, c.mid())
	}
	edges = append(edges, 1<<30)
	out := slices.Clone(cs)
	for k := 0; k+1 < len(edges); k++ {
		if c, ok := s.hiddenIn(edges[k], edges[k+1], kept, em); ok {
			out = append(out, c)
		}
	}
	slices.SortFunc(out, func(a, b corridor) int { return cmp.Compare(a.x0, b.x0) })
	return out
}

func (s *sheet) hiddenIn(lo, hi int, kept [][]int, em int) (corridor, bool) {
	type edge struct{ x, d int }
	var gaps []edge
	n, split := 0, 0
	for _, toks := range kept {
		prev, inside, wide := -1, false, false
		for _, t := range toks {
			if m := s.toks[t].mid(); m <= lo || m >= hi {
				continue
			}
			if prev >= 0 && (s.toks[t].x0-s.toks[prev].x1)*100 >= 90*em {
				gaps = append(gaps, edge{s.toks[prev].x1, 1}, edge{s.toks[t].x0, -1})
				wide = true
			}
			prev, inside = t, true
		}
		if inside {
			n++
		}
		if wide {
			split++
		}
	}
	if split < 3 || split*2 < n {
		return corridor{}, false
	}
	// The place that the most gaps share.
	slices.SortFunc(gaps, func(a, b edge) int { return cmp.Or(cmp.Compare(a.x, b.x), cmp.Compare(a.d, b.d)) })
	depth, best := 0, 0
	var c corridor
	for i, g := range gaps {
		depth += g.d
		if depth > best && i+1 < len(gaps) {
			best, c = depth, corridor{x0: g.x, x1: gaps[i+1].x}
		}
	}
	return c, best*10 >= split*7 && c.x1 > c.x0
}
