package pdf

import (
	"fmt"
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/glyphs"
)

// repairKey is a sign that one font of the paper prints and the file calls by
// another name.
type repairKey struct {
	font       string
	from, text string
}

// repaired is how often and on what evidence a sign was read against the file.
type repaired struct {
	why   string
	uses  int
	page  int // the first
	pages int
	last  int
}

// noteRepairs counts the glyphs of a page that are read against the file and
// gives each a doubt.
func (r *reading) noteRepairs(p *paper.GlyphPage, marks []glyphs.Mark) {
	for i, g := range p.Glyphs {
		if !g.Repaired {
			continue
		}
		key, why := repairKey{font: p.Fonts[g.Font], text: g.Text}, ""
		if marks != nil {
			for _, rep := range marks[i].Font.Repairs {
				if rep.Code == marks[i].Code {
					key.from, why = rep.From, rep.Why
				}
			}
		}
		r.doubtRepair(p, &p.Glyphs[i], key, why)
	}
}

// doubtRepair counts a repaired glyph and gives it a doubt.
func (r *reading) doubtRepair(p *paper.GlyphPage, g *paper.Glyph, key repairKey, why string) {
	r.count(key, why, p.Page.Number)
	p.Doubts = append(p.Doubts, paper.Doubt{Page: p.Page.Number, Box: g.Box, Kind: "repaired",
		Text: fmt.Sprintf("The font %s says %s here; read as %s, since %s.", key.font, sign(key.from), sign(g.Text), why)})
}

func (r *reading) count(key repairKey, why string, page int) {
	c := r.repairs[key]
	if c == nil {
		c = &repaired{why: why, page: page}
		r.repairs[key] = c
		r.order = append(r.order, key)
	}
	c.uses++
	if c.last != page {
		c.last = page
		c.pages++
	}
}

// reportRepairs says which signs of the paper were read against the file.
func (r *reading) reportRepairs() {
	for _, key := range r.order {
		c := r.repairs[key]
		r.problem(c.page, "repaired", false, fmt.Sprintf("The font %s says %s where %s is printed (%d times on %d pages); read so, since %s.",
			key.font, sign(key.from), sign(key.text), c.uses, c.pages, c.why))
	}
}

// sign shows a character in a message.
func sign(s string) string {
	if printable(s) && s != "" {
		return "'" + s + "'"
	}
	out := ""
	for _, r := range s {
		out += fmt.Sprintf("U+%04X", r)
	}
	if out == "" {
		return "nothing"
	}
	return out
}

// unknownSigns points to the signs beside numbers of which nobody could tell
// what they are: one may be a minus.
func (r *reading) unknownSigns() {
	for p := range r.out.Pages {
		page := &r.out.Pages[p]
		var box paper.Box
		n := 0
		for i := range page.Glyphs {
			g := &page.Glyphs[i]
			if g.Invisible || !doubtful(page.Glyphs, i) {
				continue
			}
			if n++; n == 1 {
				box = g.Box
			}
			page.Doubts = append(page.Doubts, paper.Doubt{Page: page.Page.Number, Box: g.Box, Kind: "unknown-sign",
				Text: "The file does not say which sign is printed here, and its use does not show it."})
		}
		if n > 0 {
			r.problem(page.Page.Number, "unknown-sign", false, fmt.Sprintf("Page %d prints %d signs beside numbers that the file does not name, the first at %.0f, %.0f pt: look at them, one may be a minus.",
				page.Page.Number, n, float64(box.X0)/100, float64(box.Y0)/100))
		}
	}
}

// doubtful reports whether glyph i is a sign beside a number that nobody could
// tell, or one that has no business there.
func doubtful(all []paper.Glyph, i int) bool {
	text := all[i].Text
	odd := text == "´" || text == "˘" || text == "¼"
	if printable(text) && !odd || all[i].Repaired {
		return false
	}
	left, right := around(all, i, func(k int) string { return all[k].Text })
	if odd {
		word, gap := before(left)
		return startsNumber(right) && (gap || word == "") && !strings.HasPrefix(right, " ") == (text != "¼")
	}
	return startsNumber(right) || endsNumber(left)
}
