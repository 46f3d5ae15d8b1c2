package glyphs

import "golang.org/x/text/encoding/charmap"

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

// dingbat stands in for the ornaments, which carry no number.
func dingbat(name string) string {
	switch name {
	case "":
		return ""
	case "space":
		return " "
	}
	return "\u2022"
}

// SymbolText gives what a code stands for in the Symbol font; "" if nothing.
func SymbolText(c byte) string { return nameText(symbolNames()[c]) }
