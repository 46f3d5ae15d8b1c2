package pdf

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
)

// use is one place where a sign in question stands, with the print around it
// on its line.
type use struct {
	page, glyph int    // index of the page and of the glyph on it
	left, right string // up to contextGlyphs glyphs, gaps as one space; the sign itself is [mark] wherever it recurs
}

// contextGlyphs is how far around a sign its line is looked at.
const contextGlyphs = 28

// mark stands for the sign in question in the print around it.
const mark = "\uE000"

// around gives the print around glyph i; text gives what to print for each
// glyph.
func around(all []paper.Glyph, i int, text func(k int) string) (left, right string) {
	var parts []string
	from := i
	for from > 0 && i-from < contextGlyphs && sameLine(all[from-1], all[from]) {
		from--
	}
	for k := from; k < i; k++ {
		parts = append(parts, text(k), space(all[k], all[k+1]))
	}
	left = strings.Join(parts, "")
	var b strings.Builder
	for k := i + 1; k < len(all) && k-i <= contextGlyphs && sameLine(all[k-1], all[k]); k++ {
		b.WriteString(space(all[k-1], all[k]))
		b.WriteString(text(k))
	}
	return left, b.String()
}

// sameLine reports whether b goes on with the line of a.
func sameLine(a, b paper.Glyph) bool {
	if a.Angle != b.Angle {
		return false
	}
	across := b.Origin.Y - a.Origin.Y
	along := b.Box.X0 - a.Box.X1
	if a.Angle == 90 || a.Angle == 270 {
		across = b.Origin.X - a.Origin.X
		along = max(b.Box.Y0-a.Box.Y1, a.Box.Y0-b.Box.Y1)
	}
	size := max(a.Size, b.Size, 1)
	return across <= size/2 && across >= -size/2 && along <= 3*size && along >= -40*size
}

// space gives a space where there is a gap between two glyphs.
func space(a, b paper.Glyph) string {
	if a.Text == " " || b.Text == " " || joined(a, b) {
		return ""
	}
	return " "
}

// before splits what stands before a sign: the last word or number, and
// whether a space separates it from the sign.
func before(left string) (word string, gap bool) {
	trimmed := strings.TrimRight(left, " ")
	gap = len(trimmed) < len(left)
	k := len(trimmed)
	for k > 0 {
		r, n := utf8.DecodeLastRuneInString(trimmed[:k])
		if !unicode.IsLetter(r) && !unicode.IsDigit(r) && r != '.' && r != '·' {
			break
		}
		k -= n
	}
	return trimmed[k:], gap
}

func lastRune(s string) rune {
	r, n := utf8.DecodeLastRuneInString(s)
	if n == 0 {
		return 0
	}
	return r
}

func firstRune(s string) rune {
	r, n := utf8.DecodeRuneInString(s)
	if n == 0 {
		return 0
	}
	return r
}

func isDigit(r rune) bool { return r >= '0' && r <= '9' }

// startsNumber reports whether s begins with a number, a leading point or a
// sign allowed.
func startsNumber(s string) bool {
	s = strings.TrimLeft(s, " ")
	for _, sign := range []string{"-", "−", "–", mark} {
		s = strings.TrimPrefix(s, sign)
	}
	s = strings.TrimLeft(s, " ")
	if r := firstRune(s); r == '.' || r == '·' {
		s = s[utf8.RuneLen(r):]
	}
	return isDigit(firstRune(s))
}

// endsNumber reports whether s ends with a digit, or a digit and a percent
// sign or a closing unit space.
func endsNumber(s string) bool {
	s = strings.TrimRight(s, " %")
	return isDigit(lastRune(s))
}
