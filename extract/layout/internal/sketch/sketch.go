// Package sketch draws invented pages for tests: it sets lines of text as the
// glyphs a PDF reader would hand over.
//
// A drawing starts from New; Text sets one line at a baseline. In the text,
// ^{...} is raised and _{...} lowered (at two thirds of the size). Letters are
// half an em wide, narrow ones a quarter, spaces a quarter and in the glyph
// stream as most PDF files have them.
package sketch

import (
	"strings"

	"halfspan/extract/paper"
)

// Page is a page being drawn; lengths are in points.
type Page struct {
	paper.GlyphPage
	Size   int // font size of the next text, points
	Bold   bool
	Italic bool
	Angle  int16 // 0, 90, 180 or 270: direction of the next text
	Spread int   // space put in after each letter, hundredths of an em
}

// New is an empty page of width by height points with 10 point text.
func New(number, width, height int) *Page {
	p := &Page{Size: 10}
	p.GlyphPage.Page = paper.Page{Number: number, Box: paper.Box{X1: int32(width) * 100, Y1: int32(height) * 100}}
	p.Fonts = []string{"Sketch"}
	return p
}

// Text sets one line whose first glyph has its origin at x, y (points, page
// space) and returns where it ends along its direction, in points.
func (p *Page) Text(x, y int, text string) int {
	at, shift, size := 0, 0, p.Size*100
	for i := 0; i < len(text); {
		switch {
		case strings.HasPrefix(text[i:], "^{"):
			shift, size, i = p.Size*100*2/5, p.Size*100*2/3, i+2
			continue
		case strings.HasPrefix(text[i:], "_{"):
			shift, size, i = -p.Size*100/5, p.Size*100*2/3, i+2
			continue
		case text[i] == '}' && shift != 0:
			shift, size, i = 0, p.Size*100, i+1
			continue
		}
		r := []rune(text[i:])[0]
		i += len(string(r))
		w := Width(r) * size / 100
		p.glyph(x*100, y*100, at, shift, w, size, string(r))
		at += w + p.Spread*size/100
	}
	return x + at/100
}

// Lines sets several lines, each leading points below the one before.
func (p *Page) Lines(x, y, leading int, lines ...string) int {
	for _, l := range lines {
		p.Text(x, y, l)
		y -= leading
	}
	return y
}

// Rule draws a horizontal line half a point thick.
func (p *Page) Rule(x0, x1, y int) {
	p.Rules = append(p.Rules, paper.Box{X0: int32(x0) * 100, Y0: int32(y)*100 - 25, X1: int32(x1) * 100, Y1: int32(y)*100 + 25})
}

// UprightRule draws a vertical line half a point thick.
func (p *Page) UprightRule(y0, y1, x int) {
	p.Rules = append(p.Rules, paper.Box{X0: int32(x)*100 - 25, Y0: int32(y0) * 100, X1: int32(x)*100 + 25, Y1: int32(y1) * 100})
}

// Measure is the length of a line of text in points, shifts not counted.
func (p *Page) Measure(text string) int {
	n := 0
	for _, r := range text {
		n += Width(r)
	}
	return n * p.Size / 100
}

// Width of a letter in hundredths of an em.
func Width(r rune) int {
	if r == ' ' || strings.ContainsRune("iljtf.,;:'|!()[]I", r) {
		return 25
	}
	return 50
}

func (p *Page) glyph(x, y, at, shift, w, size int, text string) {
	// Upright: from (at, shift), w long, from a fifth of the size below to four fifths above.
	box := func(a0, b0, a1, b1 int) paper.Box {
		return paper.Box{X0: int32(a0), Y0: int32(b0), X1: int32(a1), Y1: int32(b1)}
	}
	lo, hi := shift-size/5, shift+size*4/5
	g := paper.Glyph{Text: text, Size: int32(size), Bold: p.Bold, Italic: p.Italic, Angle: p.Angle}
	switch p.Angle {
	case 90:
		g.Box, g.Origin = box(x-hi, y+at, x-lo, y+at+w), paper.Point{X: int32(x - shift), Y: int32(y + at)}
	case 180:
		g.Box, g.Origin = box(x-at-w, y-hi, x-at, y-lo), paper.Point{X: int32(x - at), Y: int32(y - shift)}
	case 270:
		g.Box, g.Origin = box(x+lo, y-at-w, x+hi, y-at), paper.Point{X: int32(x + shift), Y: int32(y - at)}
	default:
		g.Box, g.Origin = box(x+at, y+lo, x+at+w, y+hi), paper.Point{X: int32(x + at), Y: int32(y + shift)}
	}
	p.Glyphs = append(p.Glyphs, g)
}
