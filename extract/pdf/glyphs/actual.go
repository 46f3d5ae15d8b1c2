package glyphs

import (
	"strings"
	"unicode"
)

// actualText keeps the marked content that is open, and puts the text that a
// producer gave for a stretch of glyphs (ActualText) in their place.
type actualText struct {
	open []marked
}

type marked struct {
	text  string
	given bool
	from  int // the first glyph
}

// maxActual is the most glyphs that one given text may replace as a whole.
const maxActual = 4

func (a *actualText) begin(p *Page, text string, given bool) {
	if len(a.open) < maxNesting {
		a.open = append(a.open, marked{text, given, len(p.Glyphs)})
	} else {
		a.open = append(a.open[:maxNesting-1], marked{from: len(p.Glyphs)})
	}
}

func (a *actualText) end(p *Page) {
	if len(a.open) == 0 {
		return
	}
	m := a.open[len(a.open)-1]
	a.open = a.open[:len(a.open)-1]
	if m.given {
		replace(p, m)
	}
}

// flush ends what the page left open.
func (a *actualText) flush(p *Page) {
	for len(a.open) > 0 {
		a.end(p)
	}
}

// replace puts m's text in the place of the glyphs shown since. One rune a
// glyph is put in one by one; a few glyphs become one. Digits that are shown
// are never replaced by others, and longer stretches stay as they are: what is
// printed counts. So does white space, by which some producers mark the end of
// a divided word.
func replace(p *Page, m marked) {
	glyphs := p.Glyphs[min(m.from, len(p.Glyphs)):]
	text := strings.TrimSpace(strings.ReplaceAll(m.text, "\u00AD", "-"))
	runes := []rune(text)
	if len(glyphs) == 0 || len(runes) == 0 {
		return
	}
	var shown strings.Builder
	for _, g := range glyphs {
		shown.WriteString(g.Text)
	}
	if strings.TrimSpace(shown.String()) == "" || strings.IndexFunc(shown.String(), unicode.IsDigit) >= 0 || !sane(text) {
		return
	}
	if len(runes) == len(glyphs) {
		for i := range glyphs {
			glyphs[i].Text = string(runes[i])
		}
		return
	}
	if len(glyphs) > maxActual {
		return
	}
	glyphs[0].Text = text
	for _, g := range glyphs[1:] {
		glyphs[0].Box = glyphs[0].Box.Union(g.Box)
	}
	p.Glyphs = p.Glyphs[:m.from+1]
	p.Marks = p.Marks[:m.from+1]
}
