package tidy

import (
	"sort"

	"halfspan/extract/paper"
)

// SpaceWidth gives the width of spaces that are used to indent.
var SpaceWidth = map[rune]int{
	'\u00A0': 2, '\u2000': 4, '\u2001': 8, '\u2002': 4, '\u2003': 8, '\u2004': 3, '\u2005': 2,
	'\u2006': 2, '\u2007': 4, '\u2008': 2, '\u2009': 2, '\u200A': 1, '\u202F': 2, '\u3000': 8,
}

// LeadingWidth adds up the special spaces that s begins with.
func LeadingWidth(s string) int {
	width := 0
	for _, r := range s {
		w, ok := SpaceWidth[r]
		if !ok && r != ' ' && r != '\n' {
			break
		}
		width += w
	}
	return width
}

// RankIndents turns widths of indentation into steps, for the stub alone:
// numbers are moved by spaces to line up.
func RankIndents(t *paper.Table) {
	seen := map[int]bool{}
	for i := range t.Cells {
		c := &t.Cells[i]
		if c.Col == 0 && c.Row >= t.HeadRows && c.Text.S != "" {
			seen[c.Indent] = true
		}
	}
	var widths []int
	for w := range seen {
		widths = append(widths, w)
	}
	sort.Ints(widths)
	for i := range t.Cells {
		c := &t.Cells[i]
		if c.Col != 0 || c.Row < t.HeadRows || c.Text.S == "" {
			c.Indent = 0
			continue
		}
		c.Indent = sort.SearchInts(widths, c.Indent)
	}
}
