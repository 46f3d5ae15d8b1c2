package jats

import (
	"strconv"
	"strings"

	"halfspan/extract/pattern"
	"halfspan/extract/tidy"
)

var paddingStyle = pattern.MustCompile(`(?:padding-left|text-indent|margin-left)\s*:\s*([0-9]+(?:\.[0-9]+)?)\s*(em|pt|px|mm|cm|%)?`)

// styleIndent reads an indentation from a style attribute, in the measure of
// tidy.SpaceWidth (8 to the em).
func styleIndent(style string) int {
	m := paddingStyle.FindStringSubmatch(style)
	if m == nil {
		return 0
	}
	v, err := strconv.ParseFloat(m[1], 64)
	if err != nil || v > 1000 {
		return 0
	}
	unit := map[string]float64{"em": 8, "": 0.6, "pt": 0.7, "px": 0.6, "mm": 2, "cm": 20, "%": 1}[m[2]]
	return int(v * unit)
}

// markedIndent is the indentation that an element inside the cell asks for.
func (r *reader) markedIndent(n *node) int {
	for _, k := range n.kids {
		if k.name == "" {
			if strings.TrimSpace(string(r.src.B[k.start:k.end])) != "" {
				return 0
			}
			continue
		}
		width := styleIndent(k.get("style"))
		if k.name == "list" || strings.Contains(k.get("content-type"), "indent") || strings.Contains(k.get("style-type"), "indent") {
			width += tidy.SpaceWidth['\u2003']
		}
		if width > 0 {
			return width
		}
		return r.markedIndent(k)
	}
	return 0
}
