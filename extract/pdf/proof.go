package pdf

import (
	"unicode"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/engine"
	"halfspan/extract/pdf/glyphs"
)

// What has been read alike by both readers proves our reader. A code of a font
// is proved when it was seen alike. A way of reading (the kind of font and the
// source of its text) is proved when enough glyphs of this paper, all ten
// digits among them, were read alike in that way and none with a fault: the
// next font that is read in the same way goes through the same steps, with data
// that the other reader would take from the same place. Where the codes are
// ASCII's own, half of the digits are enough. Letters, which no comparison
// counts, are proved with the paper. A font with a fault is never proved again.
const (
	enoughAlike  = 100
	enoughDigits = 5
	enoughPaper  = 1500
)

// proof is what both readers have shown of one paper.
type proof struct {
	fonts map[*glyphs.Font]*fontProof
	ways  map[glyphs.Way]*wayProof
	alike int
	fault bool
}

type fontProof struct {
	failed bool
	codes  map[uint32]bool // seen alike
}

type wayProof struct {
	alike  int
	digits [10]bool
	failed bool
}

func newProof() *proof {
	return &proof{fonts: map[*glyphs.Font]*fontProof{}, ways: map[glyphs.Way]*wayProof{}}
}

func (p *proof) of(m glyphs.Mark) (*fontProof, *wayProof) {
	f, w := p.fonts[m.Font], p.ways[m.Way]
	if f == nil {
		f = &fontProof{codes: map[uint32]bool{}}
		p.fonts[m.Font] = f
	}
	if w == nil {
		w = &wayProof{}
		p.ways[m.Way] = w
	}
	return f, w
}

// learn takes a page that both readers read.
func (p *proof) learn(m *matching, marks []glyphs.Mark) {
	for i, j := range m.toB {
		f, w := p.of(marks[i])
		ours := m.a[i].Text
		if j >= 0 {
			// Only one of the two knows what this is. That the other sees it in
			// the same place, and nothing else in it, is all it can say.
			if _, code := engine.CodeOnly(m.b[j].Text); code || m.a[i].Repaired {
				f.codes[marks[i].Code] = code || telling(m.b[j].Text) == ""
				continue
			}
		}
		switch {
		case j >= 0 && ours == m.b[j].Text:
			f.codes[marks[i].Code] = true
			w.alike++
			p.alike++
			if len(ours) == 1 && ours[0] >= '0' && ours[0] <= '9' {
				w.digits[ours[0]-'0'] = true
			}
		case j >= 0 && alike(ours, m.b[j].Text):
		case telling(ours) != "" || j >= 0 && telling(m.b[j].Text) != "":
			f.failed, w.failed, p.fault = true, true, true
		}
	}
}

// holds reports whether a page that our reader read needs no second reading.
func (p *proof) holds(page *glyphs.Page) bool {
	if page.Short || len(page.Glyphs) == 0 {
		return false
	}
	for i, m := range page.Marks {
		if !p.proved(m, &page.Glyphs[i]) {
			return false
		}
	}
	return true
}

func (p *proof) proved(m glyphs.Mark, g *paper.Glyph) bool {
	f, w := p.fonts[m.Font], p.ways[m.Way]
	if f != nil && (f.failed || f.codes[m.Code]) {
		return !f.failed
	}
	if !printable(g.Text) {
		return false
	}
	if telling(g.Text) == "" {
		return p.alike >= enoughPaper && !p.fault
	}
	if w == nil || w.failed || g.Repaired || w.alike < enoughAlike {
		return false
	}
	seen := 0
	for _, d := range w.digits {
		if d {
			seen++
		}
	}
	ascii := len(g.Text) == 1 && uint32(g.Text[0]) == m.Code
	return seen == 10 || ascii && seen >= enoughDigits
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

// lend gives the other reading of a page what only ours can know: what a code
// means, signs read against a lying font, and what is clipped away.
func lend(m *matching) {
	for i, j := range m.toB {
		if j < 0 {
			continue
		}
		if _, code := engine.CodeOnly(m.b[j].Text); code || m.a[i].Repaired {
			m.b[j].Text, m.b[j].Repaired = m.a[i].Text, m.a[i].Repaired
		}
		m.b[j].Invisible = m.b[j].Invisible || m.a[i].Invisible
	}
}

// settle makes unknown what is only a code. Control codes stay as they are:
// their use may show what they are.
func settle(all []paper.Glyph) {
	for i := range all {
		if code, ok := engine.CodeOnly(all[i].Text); ok {
			all[i].Text = string(unicode.ReplacementChar)
			if code < ' ' {
				all[i].Text = string(rune(code))
			}
		}
	}
}
