package glyphs

import (
	"strconv"
	"strings"

	"golang.org/x/text/encoding/charmap"
)

// winAnsi gives the rune of a code in WinAnsiEncoding, which is Windows code
// page 1252 with bullets in its gaps.
func winAnsi(c byte) rune {
	r := charmap.Windows1252.DecodeByte(c)
	switch {
	case c >= 0x80 && (r == '\uFFFD' || r == rune(c) && c < 0xA0):
		return '\u2022'
	case c == 0xAD:
		return '-'
	case c == 0xA0:
		return ' '
	}
	return r
}

// macRoman gives the rune of a code in MacRomanEncoding.
func macRoman(c byte) rune {
	if c == 0xCA {
		return ' '
	}
	return charmap.Macintosh.DecodeByte(c)
}

// baseText gives what a code stands for in a named encoding; "" if nothing.
func baseText(encoding string, c byte) string {
	switch encoding {
	case "WinAnsiEncoding":
		if c < ' ' {
			return ""
		}
		return string(winAnsi(c))
	case "MacRomanEncoding":
		if c < ' ' {
			return ""
		}
		return string(macRoman(c))
	case "Symbol":
		return nameText(symbolNames()[c])
	case "ZapfDingbats":
		return dingbat(dingbatNames()[c])
	}
	return nameText(standardNames()[c])
}

// dingbat gives the numbers in circles; a bullet stands in for the ornaments,
// which carry no number.
func dingbat(name string) string {
	switch name {
	case "":
		return ""
	case "space":
		return " "
	}
	n, err := strconv.Atoi(strings.TrimPrefix(name, "a"))
	if err != nil || n < 120 || n > 159 {
		return "\u2022"
	}
	return string([4]rune{'①', '❶', '➀', '➊'}[(n-120)/10] + rune((n-120)%10))
}

// SymbolText gives what a code stands for in the Symbol font; "" if nothing.
func SymbolText(c byte) string { return nameText(symbolNames()[c]) }

// codeName gives what a glyph means that is named by its own code ("a65" at 65),
// as the pixel fonts of TeX are: their codes are ASCII's, with ligatures and
// dashes in places of their own.
func codeName(name string, code uint32) string {
	digits := strings.TrimLeft(name, "acgCGhr")
	if n, err := strconv.Atoi(digits); err != nil || digits == name || uint32(n) != code {
		return ""
	}
	switch {
	case code >= 11 && code <= 15:
		return [5]string{"ff", "fi", "fl", "ffi", "ffl"}[code-11]
	case code >= 27 && code <= 31:
		return [5]string{"ff", "fi", "fl", "ffi", "ffl"}[code-27]
	case code == 21, code == 123:
		return "–"
	case code == 22, code == 124:
		return "—"
	case code == 127:
		return "-"
	case code > ' ' && code < 127:
		return string(rune(code))
	}
	return ""
}
