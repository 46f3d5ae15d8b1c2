package glyphs

import (
	"math"
	"strconv"
	"strings"
)

// Publishers' mathematics fonts often name their glyphs by number: C0, C1, C2
// … The numbers are codes of the layout the font was made from: TeX's
// mathematical symbols, or Adobe's Symbol. Which one, and that it is one at
// all, shows in the widths of the glyphs, which the file must give.

// texSymbols are the glyphs of TeX's layout for mathematical symbols, by code,
// with their widths in 1/1000 em (Knuth, Computer Modern Typefaces, cmsy10).
// Text is empty where no character is meant that matters here.
var texSymbols = [64]struct {
	text  string
	width float64
}{
	{"−", 778}, {"·", 278}, {"×", 778}, {"∗", 500}, {"÷", 778}, {"⋄", 500}, {"±", 778}, {"∓", 778},
	{"⊕", 778}, {"⊖", 778}, {"⊗", 778}, {"⊘", 778}, {"⊙", 778}, {"◯", 1000}, {"∘", 500}, {"•", 500},
	{"≍", 778}, {"≡", 778}, {"⊆", 778}, {"⊇", 778}, {"≤", 778}, {"≥", 778}, {"≼", 778}, {"≽", 778},
	{"∼", 778}, {"≈", 778}, {"⊂", 778}, {"⊃", 778}, {"≪", 1000}, {"≫", 1000}, {"≺", 778}, {"≻", 778},
	{"←", 1000}, {"→", 1000}, {"↑", 500}, {"↓", 500}, {"↔", 1000}, {"↗", 1000}, {"↘", 1000}, {"≃", 778},
	{"⇐", 1000}, {"⇒", 1000}, {"⇑", 611}, {"⇓", 611}, {"⇔", 1000}, {"↖", 1000}, {"↙", 1000}, {"∝", 778},
	{"′", 275}, {"∞", 1000}, {"∈", 667}, {"∋", 667}, {"△", 889}, {"▽", 889}, {"", 0}, {"", 0},
	{"∀", 556}, {"∃", 556}, {"¬", 667}, {"∅", 500}, {"ℜ", 722}, {"ℑ", 722}, {"⊤", 778}, {"⊥", 778},
}

// nearWidth: fonts scaled for a publisher differ this much from the original.
const nearWidth = 0.03

func sameWidth(a, b float64) bool {
	return b > 0 && math.Abs(a-b) <= nearWidth*b
}

// mathLayout gives the text of each code of a font whose glyphs are named by
// number, and why; nil where the font is none, or its widths do not fit.
// widths are in 1/1000 em, 0 where the font has no such glyph.
func mathLayout(names *[256]string, widths *[256]float64) (text map[uint32]string, why string) {
	tex, symbol := map[uint32]string{}, map[uint32]string{}
	whole := wholeTeX(widths)
	numbered := 0
	for c, name := range names {
		digits, ok := strings.CutPrefix(name, "C")
		n, err := strconv.Atoi(digits)
		if !ok || err != nil || n < 0 || n > 255 {
			continue
		}
		if widths[c] == 0 {
			if whole && n < len(texSymbols) && texSymbols[n].text != "" {
				tex[uint32(c)] = texSymbols[n].text
			}
			continue
		}
		numbered++
		if n < len(texSymbols) && texSymbols[n].text != "" && sameWidth(widths[c], texSymbols[n].width) {
			tex[uint32(c)] = texSymbols[n].text
		}
		glyph := symbolNames()[n]
		if w, ok := standardWidth("Symbol", glyph); ok && glyph != "" && sameWidth(widths[c], w) {
			symbol[uint32(c)] = nameText(glyph)
		}
	}
	switch {
	case numbered == 0:
		return nil, ""
	case len(tex)*10 >= numbered*9 && len(tex) >= len(symbol):
		if whole {
			for c := 32; c < len(texSymbols); c++ {
				if t := texSymbols[c]; t.text != "" && widths[c] > 0 {
					tex[uint32(c)] = t.text
				}
			}
		}
		return tex, "its glyphs are named by number and as wide as those of TeX's symbol font at these numbers"
	case len(symbol)*10 >= numbered*9:
		return symbol, "its glyphs are named by number and as wide as those of the Symbol font at these numbers"
	}
	return nil, ""
}

// wholeTeX reports whether the codes behind the numbered ones follow TeX's
// layout too, whatever Latin names they carry: there the prime is called zero.
func wholeTeX(widths *[256]float64) bool {
	fit, all := 0, 0
	for c := 32; c < len(texSymbols); c++ {
		if texSymbols[c].width == 0 || widths[c] == 0 {
			continue
		}
		all++
		if sameWidth(widths[c], texSymbols[c].width) {
			fit++
		}
	}
	return all >= 8 && fit*10 >= all*9
}
