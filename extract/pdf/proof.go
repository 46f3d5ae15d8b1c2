package pdf

import (
	"unicode"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/glyphs"
)

// What has been read alike by both readers proves our reader's way of reading a
// font. A digit or sign is proved if it was itself seen alike; or if the font
// was read alike over enough glyphs without a fault, for a digit also by others
// whose codes lie as far apart as the digits do. Letters are proved with their
// font, or by a paper of which enough was read without a fault.
const (
	enoughForSigns   = 200
	enoughForDigits  = 100
	enoughDigits     = 3
	enoughForLetters = 60
	enoughOfPaper    = 1500
)

// proof is what both readers have shown of one paper.
type proof struct {
	fonts  map[*glyphs.Font]*fontProof
	alike  int
	failed bool // a digit or sign differed once
}

type fontProof struct {
	alike  int
	failed bool
	codes  map[uint32]bool // seen alike
	digits map[uint32]int  // seen alike, by code less digit
}

func newProof() *proof { return &proof{fonts: map[*glyphs.Font]*fontProof{}} }

// learn takes a page that both readers read.
func (p *proof) learn(m *matching, marks []glyphs.Mark) {
	for i, j := range m.toB {
		mark, ours := marks[i], m.a[i].Text
		f := p.fonts[mark.Font]
		if f == nil {
			f = &fontProof{codes: map[uint32]bool{}, digits: map[uint32]int{}}
			p.fonts[mark.Font] = f
		}
		switch {
		case j >= 0 && ours == m.b[j].Text:
			f.alike++
			p.alike++
			if !f.codes[mark.Code] {
				f.codes[mark.Code] = true
				if d, ok := digit(ours); ok {
					f.digits[mark.Code-d]++
				}
			}
		case j >= 0 && alike(ours, m.b[j].Text):
		case telling(ours) != "" || j >= 0 && telling(m.b[j].Text) != "":
			f.failed, p.failed = true, true
		}
	}
}

func digit(s string) (uint32, bool) {
	if len(s) == 1 && s[0] >= '0' && s[0] <= '9' {
		return uint32(s[0] - '0'), true
	}
	return 0, false
}

// holds reports whether a page that our reader read needs no second reading.
func (p *proof) holds(page *glyphs.Page) bool {
	if page.Short || len(page.Glyphs) == 0 {
		return false
	}
	for i := range page.Marks {
		if !p.proved(page.Marks[i], &page.Glyphs[i]) {
			return false
		}
	}
	return true
}

func (p *proof) proved(m glyphs.Mark, g *paper.Glyph) bool {
	f := p.fonts[m.Font]
	if f != nil && (f.failed || f.codes[m.Code]) {
		return !f.failed
	}
	if !printable(g.Text) {
		return false
	}
	if telling(g.Text) == "" {
		return f != nil && f.alike >= enoughForLetters || p.alike >= enoughOfPaper && !p.failed
	}
	if f == nil || g.Repaired {
		return false
	}
	if d, ok := digit(g.Text); ok {
		return f.alike >= enoughForDigits && f.digits[m.Code-d] >= enoughDigits
	}
	return f.alike >= enoughForSigns
}

// printable reports whether a text says what is printed.
func printable(s string) bool {
	for _, r := range s {
		if r == unicode.ReplacementChar || unicode.IsControl(r) || unicode.Is(unicode.Co, r) {
			return false
		}
	}
	return true
}

// lend gives the other reading of a page what only ours can know: signs read
// against a lying font, and what is clipped away.
func lend(m *matching) {
	for i, j := range m.toB {
		if j < 0 {
			continue
		}
		if m.a[i].Repaired {
			m.b[j].Text, m.b[j].Repaired = m.a[i].Text, true
		}
		m.b[j].Invisible = m.b[j].Invisible || m.a[i].Invisible
	}
}
