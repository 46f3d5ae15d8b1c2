package engine

import (
	"math"
	"strings"
	"unicode/utf16"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/facename"
	"halfspan/extract/pdf/geom"
)

// maxChars is the most characters of one page that are read; printed pages
// hold 3,000 to 15,000.
const maxChars = 400_000

// Page reads one page, 1-based, with its drawn lines and pictures or without.
// Of some glyphs the library knows no more than the code: see [CodeOnly].
// A page with more than maxChars characters is cut there and comes back with
// cut set.
func (d *Document) Page(number int, drawings bool) (g paper.GlyphPage, cut bool, err error) {
	page, err := d.loadPage(number)
	if err != nil {
		return g, false, err
	}
	r := d.r
	defer func() {
		r.call("FPDF_ClosePage", page)
		if err == nil {
			err = r.err
		}
	}()
	g.Page = d.facts(page, number)
	text := r.call("FPDFText_LoadPage", page)
	if text != 0 {
		t := textReader{r: r, text: text, fonts: map[string]int32{}, page: &g}
		cut = t.read()
		r.call("FPDFText_ClosePage", text)
	}
	if drawings {
		o := objectReader{r: r, page: &g}
		o.read(page)
	}
	return g, cut, r.err
}

// Facts gives the visible box and the rotation of a page, 1-based, without
// reading what stands on it.
func (d *Document) Facts(number int) (paper.Page, error) {
	page, err := d.loadPage(number)
	if err != nil {
		return paper.Page{}, err
	}
	defer d.r.call("FPDF_ClosePage", page)
	facts := d.facts(page, number)
	return facts, d.r.err
}

// facts reads the page's visible box and its turn.
func (d *Document) facts(page uint64, number int) paper.Page {
	r := d.r
	p := paper.Page{Number: number, Reader: "pdfium"}
	r.call("FPDF_GetPageBoundingBox", page, r.scratch)
	b := r.bytes(r.scratch, 16)
	p.Box = geom.Box(float32At(b, 0), float32At(b, 3), float32At(b, 2), float32At(b, 1))
	p.Rotate = 90 * (r.int("FPDFPage_GetRotation", page) & 3)
	return p
}

// textReader reads the characters of a page.
type textReader struct {
	r     *raw
	text  uint64
	page  *paper.GlyphPage
	fonts map[string]int32 // by name

	object uint64      // the text object of the last character
	style  paper.Glyph // what all its characters share
	high   rune        // first half of a character that comes in two
}

func (t *textReader) read() (cut bool) {
	r := t.r
	n := r.int("FPDFText_CountChars", t.text)
	if n > maxChars {
		n, cut = maxChars, true
	}
	t.page.Glyphs = make([]paper.Glyph, 0, max(n, 0))
	for i := 0; i < n && r.err == nil; i++ {
		t.char(uint64(i))
	}
	return cut
}

// char reads one character. Characters that the library made up (spaces and
// line ends between words) are left out: the layout sees the gaps itself.
func (t *textReader) char(i uint64) {
	r := t.r
	code := rune(uint32(r.call("FPDFText_GetUnicode", t.text, i)))
	switch code {
	case ' ', '\r', '\n':
		if r.int("FPDFText_IsGenerated", t.text, i) == 1 {
			return
		}
	case 2: // the library's mark for a hyphen at the end of a line
		if r.int("FPDFText_IsHyphen", t.text, i) == 1 && r.int("FPDFText_HasUnicodeMapError", t.text, i) == 0 {
			code = '-'
		}
	}
	object := r.call("FPDFText_GetTextObject", t.text, i)
	if object == 0 {
		return
	}
	if code, ok := t.whole(code, i); ok {
		t.add(code, object, i)
	}
}

// whole puts the two halves of a character together, and marks what is only a
// code of the font, not a character.
func (t *textReader) whole(code rune, i uint64) (rune, bool) {
	high := t.high
	t.high = 0
	switch {
	case code >= 0xD800 && code < 0xDC00:
		t.high = code
		return 0, false
	case code >= 0xDC00 && code < 0xE000:
		return utf16.DecodeRune(high, code), true
	case code == 0 || code > 0x10FFFF:
		return '\uFFFD', true
	case code != ' ' && code < 0x100 && t.r.int("FPDFText_HasUnicodeMapError", t.text, i) == 1:
		return codeOnly + code, true
	}
	return code, true
}

// codeOnly is where the characters begin, behind all that are assigned, by
// which codes go that mean no character.
const codeOnly = 0x10F000

// CodeOnly reports whether a glyph's text is only a code of its font, of which
// the library does not know what it means, and gives the code.
func CodeOnly(text string) (code byte, ok bool) {
	r, n := utf8.DecodeRuneInString(text)
	if r > codeOnly && r < codeOnly+0x100 && n == len(text) {
		return byte(r - codeOnly), true
	}
	return 0, false
}

// add keeps one character. Several in the same place are the parts of one
// glyph: a ligature, or a text given for a whole stretch of glyphs.
func (t *textReader) add(code rune, object, i uint64) {
	r := t.r
	same := object == t.object
	if !same {
		t.object = object
		t.style = t.readStyle(object, i)
	}
	g := t.style
	r.call("FPDFText_GetLooseCharBox", t.text, i, r.scratch)
	r.call("FPDFText_GetCharOrigin", t.text, i, r.scratch+16, r.scratch+24)
	b := r.bytes(r.scratch, 32)
	g.Box = geom.Box(float32At(b, 0), float32At(b, 3), float32At(b, 2), float32At(b, 1))
	g.Origin = paper.Point{X: geom.Hundredth(float64At(b, 2)), Y: geom.Hundredth(float64At(b, 3))}
	g.Box = fontHeight(&g)
	if n := len(t.page.Glyphs); same && n > 0 {
		if last := &t.page.Glyphs[n-1]; last.Origin == g.Origin && last.Box == g.Box {
			last.Text += string(code)
			return
		}
	}
	g.Text = string(code)
	t.page.Glyphs = append(t.page.Glyphs, g)
}

// fontHeight gives the box of a glyph by its advance and its size. The
// library's own box is as high as the font says it is, or, where the font says
// nothing, as the drawn shape.
func fontHeight(g *paper.Glyph) paper.Box {
	b, o := g.Box, g.Origin
	up, down := int32(float64(g.Size)*geom.Ascent), int32(float64(g.Size)*geom.Descent)
	switch g.Angle {
	case 0:
		return paper.Box{X0: o.X, Y0: o.Y + down, X1: max(b.X1, o.X), Y1: o.Y + up}
	case 90:
		return paper.Box{X0: o.X - up, Y0: o.Y, X1: o.X - down, Y1: max(b.Y1, o.Y)}
	case 180:
		return paper.Box{X0: min(b.X0, o.X), Y0: o.Y - up, X1: o.X, Y1: o.Y - down}
	case 270:
		return paper.Box{X0: o.X + down, Y0: min(b.Y0, o.Y), X1: o.X + up, Y1: o.Y}
	}
	return b
}

// readStyle reads what the characters of one text object share.
func (t *textReader) readStyle(object, i uint64) paper.Glyph {
	r := t.r
	size := math.Float64frombits(r.call("FPDFText_GetFontSize", t.text, i))
	var g paper.Glyph
	if r.int("FPDFText_GetMatrix", t.text, i, r.scratch) == 1 {
		b := r.bytes(r.scratch, 24)
		g.Angle = geom.Angle(float32At(b, 0), float32At(b, 1))
		size *= math.Hypot(float32At(b, 2), float32At(b, 3))
	}
	g.Size = geom.Hundredth(math.Abs(size))
	n := r.int("FPDFText_GetFontInfo", t.text, i, r.scratch+64, scratchSize-64, r.scratch)
	name := ""
	if n > 0 && n <= scratchSize-64 {
		name = facename.Plain(strings.TrimRight(string(r.bytes(r.scratch+64, n)), "\x00"))
	}
	flags := r.bytes(r.scratch, 4)
	g.Bold = flags[2]&4 != 0 || facename.Bold(name) // ForceBold is bit 19
	g.Italic = flags[0]&64 != 0 || facename.Italic(name)
	mode := r.int("FPDFTextObj_GetTextRenderMode", object)
	g.Invisible = mode == 3 || mode == 7
	g.Font = t.font(name)
	return g
}

func (t *textReader) font(name string) int32 {
	k, ok := t.fonts[name]
	if !ok {
		k = int32(len(t.page.Fonts))
		t.fonts[name] = k
		t.page.Fonts = append(t.page.Fonts, name)
	}
	return k
}
