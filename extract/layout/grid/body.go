package grid

import (
	"strings"
	"unicode"
)

// bodyBelow finds the body of a table between height top and limit, within
// sides. open says that it reaches the foot of the page without an end.
func (s *sheet) bodyBelow(sides box, top, limit, size int) (body box, open, ok bool) {
	sides = s.stickOut(sides, top, limit, size)
	area := box{sides.x0 - size/2, top, sides.x1 + size/2, limit}
	lines := s.linesIn(area)
	if len(lines) == 0 || lines[0].top-top > 5*size {
		return box{}, false, false
	}
	end := s.lastRule(lines, sides, top, limit, size)
	ruled := end != noRule
	last := -1
	tabular := 0
	for i := range lines {
		ln := &lines[i]
		if ln.base <= end {
			last = i
			if s.isTabular(ln) {
				tabular++
			}
			continue
		}
		if !s.goesOn(lines, i, last, max(end, top), sides, limit) {
			break
		}
		last = i
		tabular++
	}
	if last < 0 || !ruled && (tabular == 0 || !s.hasRows(lines[:last+1])) {
		return box{}, false, false
	}
	if n := s.notesInside(lines[:last+1], sides); n > 0 && n <= last {
		last = n - 1
		end = min(end, lines[last].bot)
	}
	body = box{area.x0, top, area.x1, max(lines[last].bot, end)}
	open = end < lines[last].base && lines[last].bot > s.footTop()-4*size || end > s.footTop()-4*size
	return body, open, tabular > 0
}

// stickOut widens the sides of a table by what little its lines stick out of
// its rules to the right.
func (s *sheet) stickOut(sides box, top, limit, size int) box {
	x1 := sides.x1
	for i := range s.segs {
		g := &s.segs[i]
		if g.base > top && g.base < min(limit, top+40*size) && g.x0 < sides.x1 && g.x1 > sides.x1 && g.x1 < sides.x1+8*size && g.x0 > sides.x0 && g.n < 5 {
			x1 = max(x1, g.x1)
		}
	}
	sides.x1 = x1
	return sides
}

// notesInside gives the index of the first of the lines at a body's end that are
// notes although a rule is drawn below them, or len(lines).
func (s *sheet) notesInside(lines []line, sides box) int {
	n := len(lines)
	for n > 1 {
		ln := &lines[n-1]
		text := s.join(ln.toks)
		wide := ln.x1-ln.x0 >= sides.width()/2 && len(ln.toks) >= 7
		if len(s.runs(ln, 90)) > 1 || s.figuresAtEnd(ln) >= 3 || !wide && !s.isNoteStart(ln) && !strings.HasPrefix(text, "http") && !strings.HasPrefix(text, "doi") {
			break
		}
		n--
	}
	// The last short line of such a note was passed over where it stands above a wide one only.
	return n
}

// footTop is the height of the lowest line that is not a running foot.
func (s *sheet) footTop() int {
	n := len(s.segs)
	if n == 0 {
		return s.bounds.bot
	}
	i := n - 1
	for ; i > 0 && n-i < 8; i-- {
		if s.segs[i].base-s.segs[i-1].base > 2*s.bodySize {
			return s.segs[i-1].bot
		}
	}
	return s.segs[n-1].bot
}

// noRule is above everything that can be printed.
const noRule = -1 << 30

// lastRule is the height of the last rule that belongs to the table, noRule
// where there is none: rules of the table's width, with no prose between them.
func (s *sheet) lastRule(lines []line, sides box, top, limit, size int) int {
	end, k := noRule, 0
	for _, r := range rulesIn(s.rules, box{sides.x0, top - size, sides.x1, limit}) {
		full := abs(r.x0-sides.x0) <= 3*size && abs(r.x1-sides.x1) <= 3*size
		part := r.x0 >= sides.x0-size && r.x1 <= sides.x1+size
		if !full && !part {
			continue
		}
		prose, plain, bare := 0, 0, 0
		start := k
		for ; k < len(lines) && lines[k].base < r.y; k++ {
			if s.isText(&lines[k]) {
				prose++
			} else {
				plain++
			}
			if k > 0 && lines[k].top-lines[k-1].bot > 5*size {
				bare++
			}
		}
		if prose > 1 && prose*2 > plain || bare > 0 && end != noRule || k == start && r.y-max(end, top) > 4*size {
			break
		}
		if full || k > start {
			end = r.y
		}
	}
	return end
}

// isText reports whether most of a line is running text in the page's size.
func (s *sheet) isText(ln *line) bool {
	rs := s.runs(ln, 100)
	words, prose := 0, 0
	for i := range rs {
		words += len(rs[i].toks)
		if s.isProse(&rs[i]) {
			prose += len(rs[i].toks)
		}
	}
	return prose*3 > words*2
}

// isTabular reports whether a line has cells, not prose: at least two runs, or
// figures that follow one another a space apart.
func (s *sheet) isTabular(ln *line) bool {
	return (len(s.runs(ln, 90)) >= 2 || s.figuresAtEnd(ln) >= 3) && !s.isText(ln)
}

// figuresAtEnd counts the figures that a line ends with.
func (s *sheet) figuresAtEnd(ln *line) int {
	cells := s.atoms(ln)
	n := 0
	for n < len(cells) && isFigure(s.join(cells[len(cells)-1-n].toks)) {
		n++
	}
	return n
}

// goesOn reports whether line i, below the last rule, still belongs to the
// table whose last line is lines[last].
func (s *sheet) goesOn(lines []line, i, last, end int, sides box, limit int) bool {
	ln := &lines[i]
	if last >= 0 && end > lines[last].base && s.closed(sides, lines[0].top, end) && !s.figuresIn(ln) {
		return false
	}
	if s.isText(ln) || s.isNoteStart(ln) && !s.isTabular(ln) && !s.cellsFollow(lines, i) {
		return false
	}
	prevBot := end
	size := ln.size
	if last >= 0 {
		prevBot = max(end, lines[last].bot)
		size = lines[last].size
		if abs(ln.size-size)*100 > 12*size {
			return false
		}
	}
	if ln.top-prevBot > 3*size {
		return false
	}
	if s.isTabular(ln) {
		return true
	}
	if s.cellsFollow(lines, i) {
		return true
	}
	// The first words of a row at the foot of the page, whose rest stands on the next.
	foot := limit >= s.bounds.bot && len(lines)-i <= 2 && end < prevBot && ln.top-prevBot < size
	return foot && !s.isNoteStart(ln) && ln.x1-ln.x0 < sides.width()/2 && len(s.runs(ln, 90)) == 1
}

// closed reports whether three or more rules of the table's width end at height
// end, the last of them under its body.
func (s *sheet) closed(sides box, top, end int) bool {
	n := 0
	for _, r := range rulesIn(s.rules, box{sides.x0, top - 2*s.bodySize, sides.x1, end}) {
		if abs(r.x0-sides.x0) <= 3*s.bodySize && abs(r.x1-sides.x1) <= 3*s.bodySize {
			n++
		}
	}
	return n >= 3
}

// hasRows reports whether at least two lines have figures in cells beside their
// first, as a table without any rule must.
func (s *sheet) hasRows(lines []line) bool {
	n := 0
	for i := range lines {
		if s.figuresIn(&lines[i]) {
			n++
		}
	}
	return n >= 2
}

// figuresIn reports whether a line has a figure in a cell other than its first.
func (s *sheet) figuresIn(ln *line) bool {
	rs := s.runs(ln, 90)
	for k := 1; k < len(rs); k++ {
		if isFigure(s.join(rs[k].toks)) {
			return true
		}
	}
	return s.figuresAtEnd(ln) >= 3
}

// cellsFollow reports whether after line i, which stands by itself (a row group,
// a wrapped label), come lines with cells.
func (s *sheet) cellsFollow(lines []line, i int) bool {
	size := lines[i].size
	for k := i + 1; k < len(lines) && k <= i+4; k++ {
		if lines[k].top-lines[k-1].bot > 3*size || s.isText(&lines[k]) || abs(lines[k].size-size)*100 > 12*size {
			return false
		}
		if s.isTabular(&lines[k]) {
			return true
		}
	}
	return false
}

// noteWords begin a note under a table.
var noteWords = []string{
	"note", "abbreviation", "data are", "data is", "data were", "values are", "values were", "value are", "key:", "legend",
	"source:", "all values", "results are", "plus-minus", "unless", "figures are", "numbers are",
	"values expressed", "values represent", "values shown", "values given", "values presented", "values reported", "values in ",
	"value represent", "values with", "data expressed", "data represent", "data shown", "data presented", "data given",
	"results expressed", "results represent", "results shown", "results were", "each value", "expressed as", "presented as",
	"statistical significance", "statistically significant", "significant at",
	"*", "†", "‡", "§", "¶", "#", "||", "‖",
}

// isNoteStart reports whether a line begins as a note does: with a mark, or in
// words that notes begin with.
func (s *sheet) isNoteStart(ln *line) bool {
	t := &s.toks[ln.toks[0]]
	if t.shift != 0 {
		return true
	}
	low := strings.ToLower(s.join(ln.toks))
	for _, w := range noteWords {
		if strings.HasPrefix(low, w) {
			return true
		}
	}
	// "CI, confidence interval", "BMI: body mass index", "SD = standard deviation".
	first := s.toks[ln.toks[0]].text
	if len(ln.toks) < 3 || !strings.ContainsAny(low, ",:=") {
		return false
	}
	short := strings.TrimRight(first, ",:=")
	return len(short) >= 2 && len(short) <= 8 && strings.ToUpper(short) == short && isLetters(short) &&
		(short != first || s.toks[ln.toks[1]].text == "=")
}

func isLetters(t string) bool {
	for _, r := range t {
		if !unicode.IsLetter(r) && r != '-' {
			return false
		}
	}
	return true
}

// notesBelow gives the note lines under a body.
func (s *sheet) notesBelow(body box, limit int) []line {
	lines := s.linesFrom(box{body.x0, body.bot, body.x1, limit})
	var out []line
	for i := range lines {
		ln := &lines[i]
		small := ln.size*100 <= 96*s.bodySize
		start := s.isNoteStart(ln)
		rs := s.runs(ln, 150)
		if len(rs) > 1 && s.isText(ln) {
			break
		}
		if len(out) == 0 {
			if ln.top-body.bot > 3*ln.size || !small && !start {
				break
			}
			out = append(out, *ln)
			continue
		}
		prev := &out[len(out)-1]
		if abs(ln.size-out[0].size)*100 > 8*out[0].size {
			break
		}
		gap := ln.top - prev.bot
		if gap > 2*ln.size || gap*10 > 7*ln.size && !start && !(small && gap <= ln.size) {
			break
		}
		if !small && !start && s.endsNote(prev, body) {
			break
		}
		if s.isHeadingLine(ln) && !start && gap*10 > 4*ln.size {
			break
		}
		out = append(out, *ln)
	}
	return out
}

// endsNote reports whether a note line ends so short that a new paragraph
// follows it.
func (s *sheet) endsNote(ln *line, body box) bool {
	last := s.toks[ln.toks[len(ln.toks)-1]].text
	return strings.HasSuffix(last, ".") && ln.x1 < body.x1-4*ln.size
}

// isHeadingLine reports whether a line is bold throughout: a heading that
// follows the table.
func (s *sheet) isHeadingLine(ln *line) bool {
	letters := 0
	for _, i := range ln.toks {
		t := &s.toks[i]
		if !t.bold {
			return false
		}
		for _, c := range t.text {
			if unicode.IsLetter(c) {
				letters++
			}
		}
	}
	return letters > 3
}

// bodyAbove finds the body of a table whose caption stands below it.
func (s *sheet) bodyAbove(l *label, labels []label, k int, taken []box) (body box, caption []line, ok bool) {
	top := s.bounds.top
	for i := range labels {
		if o := &labels[i]; i != k && o.box.bot < l.box.top && o.box.x0 <= l.box.x1 && l.box.x0 <= o.box.x1 {
			top = max(top, o.box.bot)
		}
	}
	for _, t := range taken {
		if t.bot < l.box.top && t.x0 <= l.box.x1 && l.box.x0 <= t.x1 {
			top = max(top, t.bot)
		}
	}
	left, right := s.barriers(l, labels)
	sides := box{x0: l.box.x0, x1: l.box.x1}
	for _, r := range rulesIn(s.rules, box{l.box.x0, l.box.top - 6*l.size, l.box.x1, l.box.top}) {
		if r.x1-r.x0 >= 6*l.size {
			sides = box{x0: max(r.x0, left), x1: min(r.x1, right)}
		}
	}
	lines := s.linesIn(box{sides.x0 - l.size/2, top, sides.x1 + l.size/2, l.box.top - 1})
	first, tabular := len(lines), 0
	below := l.box.top
	for i := len(lines) - 1; i >= 0; i-- {
		ln := &lines[i]
		if below-ln.bot > 4*l.size || s.isText(ln) {
			break
		}
		if s.isTabular(ln) {
			tabular++
		}
		first, below = i, ln.top
	}
	if tabular < 2 {
		return box{}, nil, false
	}
	body = box{sides.x0 - l.size/2, lines[first].top - l.size/2, sides.x1 + l.size/2, lines[len(lines)-1].bot}
	caption = s.captionLines(l, sides, 0)
	return body, caption, true
}
