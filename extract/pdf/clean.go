package pdf

import (
	"strings"
	"unicode"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/glyphs"
)

// clean makes the glyphs of both readers alike: what prints nothing is
// dropped, what stands outside the visible page too; ligatures become letters,
// all spaces one kind, the soft hyphen a hyphen. marks, where not nil, keep
// step with the glyphs.
func clean(p *paper.GlyphPage, marks []glyphs.Mark) []glyphs.Mark {
	n := 0
	for i, g := range p.Glyphs {
		if g.Text = plainText(g.Text); g.Text == "" || outside(g.Box, p.Page.Box) {
			continue
		}
		p.Glyphs[n] = g
		if marks != nil {
			marks[n] = marks[i]
		}
		n++
	}
	p.Glyphs = p.Glyphs[:n]
	if marks != nil {
		marks = marks[:n]
	}
	return marks
}

// outside reports whether the middle of b lies outside the page.
func outside(b, page paper.Box) bool {
	x, y := b.X0+(b.X1-b.X0)/2, b.Y0+(b.Y1-b.Y0)/2
	return x < page.X0 || x > page.X1 || y < page.Y0 || y > page.Y1
}

// plainText gives a glyph's text as the rest of the program wants it; "" for
// what prints nothing.
func plainText(s string) string {
	if len(s) == 1 && s[0] >= ' ' && s[0] < 0x7F {
		return s
	}
	var out strings.Builder
	blank := false
	for _, r := range s {
		switch {
		case r == '\u00AD':
			out.WriteByte('-')
		case r >= 0xFB00 && r <= 0xFB06:
			out.WriteString(ligatures[r-0xFB00])
		case r == 0:
			out.WriteRune(unicode.ReplacementChar)
		case unicode.IsSpace(r):
			blank = true
		case unicode.Is(unicode.Cf, r):
		default:
			out.WriteRune(r)
		}
	}
	if out.Len() == 0 && blank {
		return " "
	}
	return out.String()
}

var ligatures = [...]string{"ff", "fi", "fl", "ffi", "ffl", "st", "st"}
