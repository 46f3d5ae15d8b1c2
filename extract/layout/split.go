package layout

import (
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
)

// draft is a block in the making: lines that belong together.
type draft struct {
	kind  paper.BlockKind
	lines []line
	page  int
	side  bool // stands in a narrow side column
	size  int  // of most of its glyphs
}

func (d *draft) first() *line { return &d.lines[0] }
func (d *draft) last() *line  { return &d.lines[len(d.lines)-1] }

// text is the draft's text with the lines simply joined; for looking at words.
func (d *draft) text() string {
	parts := make([]string, len(d.lines))
	for i := range d.lines {
		parts[i] = d.lines[i].text()
	}
	return strings.Join(parts, " ")
}

// split cuts a stack into drafts.
func (a *arranger) split(s *sheet, st *stack) []draft {
	if len(st.lines) == 0 {
		return nil
	}
	st.measure()
	var out []draft
	start := 0
	flush := func(end int) {
		if end > start {
			d := draft{kind: paper.Paragraph, lines: st.lines[start:end], page: s.page, side: st.side}
			sizes := map[int]int{}
			for i := range d.lines {
				sizes[d.lines[i].size] += d.lines[i].glyphs
			}
			d.size = commonest(sizes)
			if d.lines[0].table != nil {
				d.kind = paper.TableBlock
			}
			out = append(out, d)
		}
		start = end
	}
	for i := 1; i < len(st.lines); i++ {
		if a.breaks(st.lines[start:i], &st.lines[i]) {
			flush(i)
		}
	}
	flush(len(st.lines))
	return out
}

// measure notes the usual edges and distance of the stack's lines in each line.
func (st *stack) measure() {
	var steps, lefts, rights []int
	for i := range st.lines {
		l := &st.lines[i]
		if l.table != nil {
			continue
		}
		if n := len(st.lines); i+1 < n && st.lines[i+1].table == nil {
			steps = append(steps, st.lines[i+1].base-l.base)
		}
		lefts, rights = append(lefts, l.x0), append(rights, l.x1)
	}
	leading, left, right := 0, 0, 0
	if len(lefts) > 0 {
		slices.Sort(lefts)
		slices.Sort(rights)
		left, right = commonEdge(lefts), rights[len(rights)*9/10]
	}
	if len(steps) > 0 {
		slices.Sort(steps)
		leading = steps[len(steps)*2/5]
	}
	for i := range st.lines {
		l := &st.lines[i]
		l.leading, l.edge, l.width = leading, left, max(right-left, 1)
	}
}

// commonEdge is the left edge at which most lines of a column begin; of two
// that are about as common the one further left.
func commonEdge(sorted []int) int {
	best, count := sorted[0], 0
	for i := 0; i < len(sorted); {
		k := i
		for k < len(sorted) && sorted[k]-sorted[i] <= cell {
			k++
		}
		if (k-i)*2 > count*3 {
			best, count = sorted[i], k-i
		}
		i = k
	}
	return best
}

// breaks reports whether a new block begins with line l, after the lines of
// block b.
func (a *arranger) breaks(b []line, l *line) bool {
	p := &b[len(b)-1]
	if p.table != nil || l.table != nil {
		return true
	}
	size := max(min(p.size, l.size), 1)
	step := l.base - p.base
	usual := max(min(l.leading, 2*size), size)
	switch {
	case step*100 > usual*140 && step*100 > 125*size:
		return true
	case abs(p.size-l.size)*100 > 8*max(p.size, l.size) && min(p.glyphs, l.glyphs) > 3:
		return true
	case len(b) >= 2 && step*100 > (p.base-b[len(b)-2].base)*125 && step*100 > 125*size:
		return true
	}
	if a.apart(p) != a.apart(l) && p.font != l.font && (p.short() || l.short()) {
		return true
	}
	text := l.text()
	prev := p.text()
	switch {
	case startsLabel(text) && !endsOpen(prev):
		return true
	case a.headingLine(p) != a.headingLine(l) && !(l.bold == p.bold && len(b) > 1):
		return true
	case bullet(text), p.short() && knownTitle(prev) && startsUpper(text), numberedDeep.MatchString(text) && a.headingLine(p):
		return true
	}
	indent, before := l.x0-l.edge, p.x0-p.edge
	full := p.x1 >= p.edge+p.width-2*size
	// A first line set in or, in a list with hanging lines, set out.
	if indent >= size*7/10 && indent <= 5*size && before < size/2 && (ended(prev) || !full) {
		return true
	}
	if before >= size*7/10 && indent < size/2 && len(b) > 1 && b[len(b)-2].x0-p.edge >= size*7/10 && (ended(prev) || !full) {
		return true
	}
	return p.x1 < p.edge+p.width*3/4 && ended(prev) && startsUpper(text)
}

// startsUpper reports whether a text begins with a capital or a digit.
func startsUpper(text string) bool {
	r, _ := utf8.DecodeRuneInString(text)
	return unicode.IsUpper(r) || unicode.IsDigit(r)
}

// apart reports whether a line is printed in another font than the running
// text.
func (a *arranger) apart(l *line) bool { return l.font >= 0 && l.font != a.font }

// full reports whether a line reaches from edge to edge of its column.
func (l *line) full() bool {
	return l.x1 >= l.edge+l.width-2*l.size && l.x0 <= l.edge+l.size/2 && len(l.words) > 2
}

// short reports whether a line ends well before its column does.
func (l *line) short() bool { return l.x1 < l.edge+l.width*85/100 }

const closers = `)]"”’'*†‡§¶`

// ended reports whether a text ends as a sentence does: with a stop, after
// which a bracket or quote may close and a mark or citation numbers stand.
// Digits right after a stop that follows a digit are decimals.
func ended(text string) bool {
	t := strings.TrimRight(text, closers)
	if t == "" {
		return false
	}
	if strings.IndexByte(".?!:", t[len(t)-1]) >= 0 {
		return true
	}
	if strings.HasSuffix(text, "]") {
		if i := strings.LastIndexByte(text, '['); i > 0 && strings.Trim(text[i:], "[]0123456789, –-") == "" {
			t = strings.TrimRight(text[:i], " ")
			return t != "" && strings.IndexByte(".?!", t[len(t)-1]) >= 0
		}
	}
	cut := strings.TrimRight(t, "0123456789,–-")
	if len(cut) == len(t) || strings.IndexByte("0123456789", t[len(cut)]) < 0 {
		return false
	}
	cut = strings.TrimRight(cut, `)]"”’'`)
	if len(cut) < 2 || strings.IndexByte(".?!", cut[len(cut)-1]) < 0 {
		return false
	}
	return strings.IndexByte("0123456789 ", cut[len(cut)-2]) < 0
}

// endsOpen reports whether a text ends where a sentence cannot.
func endsOpen(text string) bool {
	i := strings.LastIndexByte(text, ' ')
	switch strings.ToLower(text[i+1:]) {
	case "in", "see", "and", "the", "of", "to", "(see", "(in", "with", "as", "from", "by", "for":
		return true
	}
	return strings.HasSuffix(text, ",") || strings.HasSuffix(text, "(")
}

func bullet(text string) bool {
	r, n := utf8.DecodeRuneInString(text)
	switch r {
	case '•', '●', '►', '▪', '■', '◆', '➢', '\uF0B7', '◦', '‣', '▸':
		return len(text) > n
	}
	return false
}
