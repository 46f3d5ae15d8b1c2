package glyphs

import (
	_ "embed"
	"sort"
	"strconv"
	"strings"
	"sync"
	"unicode/utf16"
)

//go:embed tables.txt
var tablesText string

// sections are the parts of tables.txt by name.
var sections = sync.OnceValue(func() map[string]string {
	all := map[string]string{}
	for part := range strings.SplitSeq(tablesText, "\n[") {
		name, body, _ := strings.Cut(part, "]\n")
		all[name] = body
	}
	return all
})

// section gives the lines of one part of tables.txt.
func section(name string) string { return sections()[name] }

// lookUp finds the line "key value" in a section whose lines are sorted.
func lookUp(section, key string) (string, bool) {
	lo, hi := 0, len(section)
	for lo < hi {
		mid := lo + (hi-lo)/2
		start := strings.LastIndexByte(section[:mid], '\n') + 1
		end := len(section)
		if i := strings.IndexByte(section[start:], '\n'); i >= 0 {
			end = start + i
		}
		name, value, _ := strings.Cut(section[start:end], " ")
		switch {
		case name == key:
			return value, true
		case name < key:
			lo = end + 1
		default:
			hi = start
		}
	}
	return "", false
}

// nameText gives the text that a glyph's name stands for, or "": names of the
// Adobe Glyph List, uniXXXX and uXXXXX, parts joined by '_', variants behind a
// dot, and the old names for small capitals and old-style digits.
func nameText(name string) string {
	if name == "" || name == ".notdef" {
		return ""
	}
	if i := strings.IndexByte(name, '.'); i > 0 {
		name = name[:i]
	}
	if strings.IndexByte(name, '_') > 0 {
		var all strings.Builder
		for _, part := range strings.Split(name, "_") {
			t := partText(part)
			if t == "" {
				return ""
			}
			all.WriteString(t)
		}
		return all.String()
	}
	return partText(name)
}

func partText(name string) string {
	if t := alias(name); t != "" {
		return t
	}
	if hex, ok := lookUp(section("names"), name); ok {
		v, _ := strconv.ParseUint(hex, 16, 32)
		if v < 0xE000 || v > 0xF8FF {
			return string(rune(v))
		}
	}
	for _, tail := range []string{"oldstyle", "small", "superior", "inferior", "fitted", "lining", "tabular"} {
		if base, ok := strings.CutSuffix(name, tail); ok && base != "" {
			if t := partText(base); t != "" {
				return t
			}
		}
	}
	return hexName(name)
}

// alias gives names that the list lacks and fonts use.
func alias(name string) string {
	switch name {
	case "prime":
		return "′"
	case "equals":
		return "="
	case "times":
		return "×"
	case "plusorminus":
		return "±"
	case "lessequalslant", "lessorequalslant":
		return "⩽"
	case "greaterequalslant", "greaterorequalslant":
		return "⩾"
	case "asteriskcentered":
		return "∗"
	case "similarequal":
		return "≃"
	}
	return ""
}

func hexName(name string) string {
	digits, ok := strings.CutPrefix(name, "uni")
	if ok && len(digits) >= 4 && len(digits)%4 == 0 {
		var units []uint16
		for i := 0; i < len(digits); i += 4 {
			v, err := strconv.ParseUint(digits[i:i+4], 16, 16)
			if err != nil {
				return ""
			}
			units = append(units, uint16(v))
		}
		return string(utf16.Decode(units))
	}
	if digits, ok := strings.CutPrefix(name, "u"); ok && len(digits) >= 4 && len(digits) <= 6 {
		if v, err := strconv.ParseUint(digits, 16, 32); err == nil && v <= 0x10FFFF {
			return string(rune(v))
		}
	}
	return ""
}

// encodingNames are the glyph names by code of an encoding in tables.txt.
func encodingNames(name string) *[256]string {
	var out [256]string
	for line := range strings.SplitSeq(section(name), "\n") {
		code, glyph, _ := strings.Cut(line, " ")
		if c, err := strconv.Atoi(code); err == nil && c >= 0 && c < 256 {
			out[c] = glyph
		}
	}
	return &out
}

var (
	standardNames = sync.OnceValue(func() *[256]string { return encodingNames("StandardEncoding") })
	symbolNames   = sync.OnceValue(func() *[256]string { return encodingNames("SymbolEncoding") })
	dingbatNames  = sync.OnceValue(func() *[256]string { return encodingNames("ZapfDingbatsEncoding") })
)

// standardFont gives the section of widths for a font that a file need not
// describe, by its name; "" if it is none of those. Arial and the like stand
// in for Helvetica and Times.
func standardFont(name string, bold, italic bool) string {
	s := strings.ToLower(name)
	style := ""
	switch {
	case strings.Contains(s, "symbol"):
		return "Symbol"
	case strings.Contains(s, "dingbats"):
		return "ZapfDingbats"
	case strings.Contains(s, "courier"):
		return "Courier"
	case strings.Contains(s, "helvetica"), strings.Contains(s, "arial"):
		if bold {
			return "Helvetica-Bold"
		}
		return "Helvetica"
	case strings.Contains(s, "times"):
		switch {
		case bold && italic:
			style = "-BoldItalic"
		case bold:
			style = "-Bold"
		case italic:
			style = "-Italic"
		default:
			style = "-Roman"
		}
		return "Times" + style
	}
	return ""
}

// standardWidth gives the width of a glyph by name in 1/1000 em.
func standardWidth(font, glyph string) (float64, bool) {
	if font == "" {
		return 0, false
	}
	if font == "Courier" {
		return 600, true
	}
	s, ok := lookUp(section(font), glyph)
	if !ok {
		return 0, false
	}
	w, err := strconv.Atoi(s)
	return float64(w), err == nil
}

// sortedSections is what lookUp relies on; the tests hold it.
func sortedSections(names ...string) bool {
	for _, n := range names {
		if !sort.StringsAreSorted(strings.Split(section(n), "\n")) {
			return false
		}
	}
	return true
}
