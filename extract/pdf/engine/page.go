package engine

import (
	"math"
	"strings"

	"halfspan/extract/paper"
)

// maxChars is the most characters of one page that are read; printed pages
// hold 3,000 to 15,000.
const maxChars = 400_000

// Page reads one page, 1-based. A page with more than maxChars characters is
// cut there and comes back with cut set.
func (d *Document) Page(number int) (g paper.GlyphPage, cut bool, err error) {
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
	o := objectReader{r: r, page: &g}
	o.read(page)
	return g, cut, r.err
}

// facts reads the page's visible box and its turn.
func (d *Document) facts(page uint64, number int) paper.Page {
	r := d.r
	p := paper.Page{Number: number, Reader: "pdfium"}
	r.call("FPDF_GetPageBoundingBox", page, r.scratch)
	b := r.bytes(r.scratch, 16)
	p.Box = boxOf(float32At(b, 0), float32At(b, 3), float32At(b, 2), float32At(b, 1))
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
		if r.int("FPDFText_IsHyphen", t.text, i) == 1 {
			code = '-'
		}
	}
	object := r.call("FPDFText_GetTextObject", t.text, i)
	if object == 0 {
		return
	}
	if object != t.object {
		t.object = object
		t.style = t.readStyle(object, i)
	}
	g := t.style
	g.Text = charText(code)
	r.call("FPDFText_GetLooseCharBox", t.text, i, r.scratch)
	r.call("FPDFText_GetCharOrigin", t.text, i, r.scratch+16, r.scratch+24)
	b := r.bytes(r.scratch, 32)
	g.Box = boxOf(float32At(b, 0), float32At(b, 3), float32At(b, 2), float32At(b, 1))
	g.Origin = paper.Point{X: hundredth(float64At(b, 2)), Y: hundredth(float64At(b, 3))}
	t.page.Glyphs = append(t.page.Glyphs, g)
}

func charText(code rune) string {
	if code == 0 || code > 0x10FFFF || code >= 0xD800 && code < 0xE000 {
		return "\uFFFD"
	}
	return string(code)
}

// readStyle reads what the characters of one text object share.
func (t *textReader) readStyle(object, i uint64) paper.Glyph {
	r := t.r
	size := math.Float64frombits(r.call("FPDFText_GetFontSize", t.text, i))
	var g paper.Glyph
	if r.int("FPDFText_GetMatrix", t.text, i, r.scratch) == 1 {
		b := r.bytes(r.scratch, 24)
		m0, m1, m2, m3 := float32At(b, 0), float32At(b, 1), float32At(b, 2), float32At(b, 3)
		g.Angle = angleOf(m0, m1)
		size *= math.Hypot(m2, m3)
	}
	g.Size = hundredth(math.Abs(size))
	n := r.int("FPDFText_GetFontInfo", t.text, i, r.scratch+64, scratchSize-64, r.scratch)
	name := ""
	if n > 0 && n <= scratchSize-64 {
		name = strings.TrimRight(string(r.bytes(r.scratch+64, n)), "\x00")
	}
	flags := r.bytes(r.scratch, 4)
	g.Bold = flags[2]&4 != 0 || boldName(name) // ForceBold is bit 19
	g.Italic = flags[0]&64 != 0 || italicName(name)
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

func boldName(name string) bool {
	s := strings.ToLower(name)
	for _, w := range []string{"bold", "black", "heavy", "-bd", "demi"} {
		if strings.Contains(s, w) {
			return true
		}
	}
	return false
}

func italicName(name string) bool {
	s := strings.ToLower(name)
	return strings.Contains(s, "italic") || strings.Contains(s, "oblique") || strings.HasSuffix(s, "-it")
}

// angleOf gives the direction of the vector (x, y) in whole degrees; those
// within two degrees of an axis count as along it.
func angleOf(x, y float64) int16 {
	if x == 0 && y == 0 {
		return 0
	}
	deg := math.Mod(math.Atan2(y, x)*180/math.Pi+360, 360)
	if near := math.Round(deg/90) * 90; math.Abs(deg-near) < 2 {
		deg = near
	}
	return int16(math.Round(deg)) % 360
}

// hundredth turns points into 1/100 point, clamped to what fits.
func hundredth(v float64) int32 {
	v = math.Round(v * 100)
	switch {
	case v != v:
		return 0
	case v > 1e9:
		return 1e9
	case v < -1e9:
		return -1e9
	}
	return int32(v)
}

func boxOf(x0, y0, x1, y1 float64) paper.Box {
	a, b, c, d := hundredth(x0), hundredth(y0), hundredth(x1), hundredth(y1)
	return paper.Box{X0: min(a, c), Y0: min(b, d), X1: max(a, c), Y1: max(b, d)}
}
