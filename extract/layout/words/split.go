package words

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"golang.org/x/text/unicode/norm"

	"halfspan/extract/paper"
)

// segments cuts one row into lines at gaps wider than an em, and those into words.
func (m *maker) segments(row []item) []Line {
	row = single(m.page, row)
	var out []Line
	start, right := 0, 0
	for i := range row {
		if i > start && row[i].x0-right > max(row[i].size, row[i-1].size) {
			out = append(out, m.segment(row[start:i]))
			start = i
		}
		if i == start {
			right = row[i].x1
		}
		right = max(right, row[i].x1)
	}
	if start < len(row) {
		out = append(out, m.segment(row[start:]))
	}
	return out
}

// single drops the second of two equal glyphs printed on the same spot.
func single(p *paper.GlyphPage, row []item) []item {
	kept := row[:0]
	for _, it := range row {
		again := false
		for k := len(kept) - 1; k >= 0 && k >= len(kept)-3 && !again; k-- {
			o := &kept[k]
			again = (it.x0-o.x0)*8 <= it.size && abs(it.base-o.base)*8 <= it.size && abs(it.size-o.size)*10 <= it.size &&
				(it.x0-o.x0)*2 <= it.x1-it.x0 && twins(p, o, &it)
		}
		if !again {
			kept = append(kept, it)
		}
	}
	return kept
}

// twins reports whether two items on one spot are the same glyph printed
// twice. The two letters of a ligature (ff) share a spot, too, but follow one
// another in the content.
func twins(p *paper.GlyphPage, a, b *item) bool {
	if p.Glyphs[a.glyph].Text != p.Glyphs[b.glyph].Text {
		return false
	}
	r, _ := utf8.DecodeRuneInString(p.Glyphs[a.glyph].Text)
	return b.glyph != a.glyph+1 || a.x0 != b.x0 || !unicode.IsLetter(r)
}

func (m *maker) segment(items []item) Line {
	right := items[0].x1
	track := m.tracking(items)
	m.ends, m.gaps = m.ends[:0], m.gaps[:0]
	for i := 1; i < len(items); i++ {
		gap := apart(&items[i-1], &items[i], right, track)
		if gap || items[i].shift != items[i-1].shift {
			m.ends, m.gaps = append(m.ends, i), append(m.gaps, gap)
		}
		right = max(right, items[i].x1)
	}
	l := Line{Words: make([]Word, 0, len(m.ends)+1)}
	start := 0
	for k, end := range append(m.ends, len(items)) {
		l.Words = append(l.Words, m.word(items[start:end], k > 0 && !m.gaps[k-1]))
		start = end
	}
	finish(&l, items)
	return l
}

// finish sets the line's box, baseline and size.
func finish(l *Line, items []item) {
	for i := range l.Words {
		l.Box = l.Box.Union(l.Words[i].Box)
	}
	best := -1
	for i := range items {
		if items[i].shift == 0 && (best < 0 || items[i].size > items[best].size) {
			best = i
		}
	}
	l.Base, l.Size = int32(items[max(best, 0)].base), int32(items[max(best, 0)].size)
}

// apart tells whether a space is printed between two neighbours: by the gap
// against the font size, with a space in the content stream tipping the balance.
func apart(a, b *item, right, track int) bool {
	size := min(a.size, b.size)
	if a.shift == b.shift {
		size = max(a.size, b.size)
	}
	gap := (b.x0-right)*100/size - track
	if b.space && b.glyph > a.glyph {
		return gap >= 4
	}
	if a.hangs {
		gap += 4
	}
	return gap >= 10
}

// tracking is the letter spacing of a line of letters, in hundredths of an em:
// the median of its gaps, since letters outnumber spaces. In lines of digits a
// gap may part one number from the next, however regular it is: there none is
// taken away.
func (m *maker) tracking(items []item) int {
	if len(items) < 6 {
		return 0
	}
	var hist [100]int
	letters := 0
	for i := range items {
		if r, _ := utf8.DecodeRuneInString(m.page.Glyphs[items[i].glyph].Text); unicode.IsLetter(r) {
			letters++
		}
		if i > 0 {
			g := (items[i].x0 - items[i-1].x1) * 100 / items[i].size
			hist[min(max(g, 0), 99)]++
		}
	}
	if letters*10 < len(items)*7 {
		return 0
	}
	seen := 0
	for g, c := range hist {
		if seen += c; seen*2 >= len(items)-1 {
			if g < 2 || g > 40 {
				return 0
			}
			return g
		}
	}
	return 0
}

// maker makes the words of one frame. Their glyphs stand in one slice and
// their texts in one string, since a page has a thousand words.
type maker struct {
	page   *paper.GlyphPage
	glyphs []paper.Glyph
	texts  []byte
	spans  [][2]int // of each word in texts, as the words were made
	ends   []int    // scratch of segment
	gaps   []bool
}

func newMaker(p *paper.GlyphPage, items int) *maker {
	return &maker{page: p, glyphs: make([]paper.Glyph, 0, items), texts: make([]byte, 0, items+items/8), spans: make([][2]int, 0, items/4)}
}

func (m *maker) word(items []item, glued bool) Word {
	w := Word{Glued: glued, Shift: items[0].shift, Base: int32(items[0].base), Bold: true, Italic: true, Invisible: true}
	first, start := len(m.glyphs), len(m.texts)
	for _, it := range items {
		g := m.page.Glyphs[it.glyph]
		g.Text = Spell(g.Text)
		m.glyphs, m.texts = append(m.glyphs, g), append(m.texts, g.Text...)
		w.Box = w.Box.Union(paper.Box{X0: int32(it.x0), Y0: int32(it.y0), X1: int32(it.x1), Y1: int32(it.y1)})
		w.Size = max(w.Size, int32(it.size))
		w.Bold, w.Italic, w.Invisible = w.Bold && g.Bold, w.Italic && g.Italic, w.Invisible && g.Invisible
	}
	w.Glyphs = m.glyphs[first:len(m.glyphs):len(m.glyphs)]
	m.spans = append(m.spans, [2]int{start, len(m.texts)})
	return w
}

// write gives the words of the lines, in the order they were made, their texts.
func (m *maker) write(lines []Line) {
	all, n := string(m.texts), 0
	for i := range lines {
		for k := range lines[i].Words {
			lines[i].Words[k].Text = all[m.spans[n][0]:m.spans[n][1]]
			n++
		}
	}
}

// oblique makes one line of each run of text that keeps its odd angle.
func oblique(p *paper.GlyphPage, items []item) []Line {
	m := newMaker(p, len(items))
	var out []Line
	var l Line
	start := 0
	for i := 1; i <= len(items); i++ {
		if i < len(items) && !items[i].space && near(&items[i-1], &items[i]) {
			continue
		}
		l.Words = append(l.Words, m.word(items[start:i], false))
		start = i
		if i == len(items) || !near(&items[i-1], &items[i]) {
			finish(&l, items[i-1:i])
			out = append(out, l)
			l = Line{}
		}
	}
	m.write(out)
	return out
}

func near(a, b *item) bool {
	return abs(a.x0-b.x0) <= 2*a.size && abs(a.y0-b.y0) <= 2*a.size
}

// blank reports whether a glyph's text prints nothing: spaces, and characters
// of no width that PDF writers put into words.
func blank(s string) bool {
	for _, r := range s {
		if !unicode.IsSpace(r) && !unprinted(r) {
			return false
		}
	}
	return true
}

func unprinted(r rune) bool {
	return r >= 0x200B && r <= 0x200F || r == 0x2060 || r == 0xFEFF || r >= 0x2028 && r <= 0x202E
}

// Spell writes a glyph's text in the letters a reader would type: ligatures
// and mathematical letters by their plain ones. Digits, marks and superscript
// characters stay as they are.
func Spell(s string) string {
	if len(s) == 1 && s[0] < utf8.RuneSelf {
		return s
	}
	plain := true
	for _, r := range s {
		if r >= 0xFB00 && r <= 0xFB06 || r >= 0x1D400 && r <= 0x1D7FF || unicode.IsSpace(r) || unprinted(r) {
			plain = false
		}
	}
	if plain {
		return s
	}
	var b strings.Builder
	for _, r := range s {
		switch {
		case r >= 0xFB00 && r <= 0xFB06, r >= 0x1D400 && r <= 0x1D7FF:
			b.WriteString(norm.NFKC.String(string(r)))
		case unicode.IsSpace(r), unprinted(r):
		default:
			b.WriteRune(r)
		}
	}
	return b.String()
}
