package layout

import (
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// blocks classifies the drafts, joins what belongs together and writes the
// blocks with their zones.
func (a *arranger) blocks() []paper.Block {
	a.classify()
	a.clearFigures()
	a.findPlainHeadings()
	a.join()
	z := &zoner{body: a.body, titleSize: a.titleSize(), parts: map[string]bool{}, ahead: a.headings()}
	var out []paper.Block
	for i := range a.drafts {
		d := &a.drafts[i]
		if d.kind == paper.TableBlock {
			if d.lines[0].table.joined {
				continue
			}
			t := d.lines[0].table.table
			out = append(out, paper.Block{Kind: paper.TableBlock, Page: d.page, Table: &t, Zone: z.floating(), Section: z.section})
			continue
		}
		parts := []draft{*d}
		if z.zone == paper.References && d.kind == paper.Paragraph {
			parts = entries(d)
		}
		for k := range parts {
			if run := a.run(&parts[k]); run.S != "" {
				out = append(out, z.blocks(&parts[k], run)...)
			}
		}
	}
	return out
}

var entryStart = pattern.MustCompile(`^(?:\[[0-9]{1,3}\]|[0-9]{1,3}[.)]?)\s+[\p{L}“"]`)

// entries cuts a stretch of the reference list where a numbered entry begins.
func entries(d *draft) []draft {
	var out []draft
	start := 0
	for i := 1; i <= len(d.lines); i++ {
		if i == len(d.lines) || entryStart.MatchString(d.lines[i].text()) {
			e := *d
			e.lines = d.lines[start:i]
			e.page = e.lines[0].page
			out = append(out, e)
			start = i
		}
	}
	return out
}

// headings counts the headings of the paper by plain title.
func (a *arranger) headings() map[string]int {
	out := map[string]int{}
	for i := range a.drafts {
		if d := &a.drafts[i]; d.kind == paper.Heading {
			out[paper.PlainTitle(d.text())]++
		}
	}
	return out
}

// run writes the text of a draft.
func (a *arranger) run(d *draft) paper.TextRun {
	var w writer
	glyphs, bytes := 0, 0
	for i := range d.lines {
		glyphs, bytes = glyphs+d.lines[i].glyphs, bytes+len(d.lines[i].text())+1
	}
	w.Grow(bytes, glyphs)
	for i := range d.lines {
		w.line(&d.lines[i], a.dict)
	}
	return w.Run()
}

// What the lines about a paper begin with or hold: dates, licence, addresses.
var (
	aboutStarts = []string{"correspond", "*correspond", "* correspond", "received", "accepted:", "copyright", "doi:", "http://", "https://",
		"academic editor", "edited by", "reviewed by", "specialty section", "citation:", "to cite", "how to cite", "e-mail", "email", "funding:",
		"data availability", "competing interests", "editor:", "issn", "publisher", "keyword", "key word"}
	aboutHolds = []string{"@", "correspondence to", "correspondence should", "©", "creative commons", "all rights reserved"}
	addresses  = []string{"department", "universit", "hospital", "institute", "school of", "faculty", "college", "division of", "center for", "centre for"}
	resultLike = pattern.MustCompile(`±|[0-9]\s?%|\bCI\b|\bSD\b|\bp\s?[<=]`)
)

// classify gives each draft its kind.
func (a *arranger) classify() {
	title := a.titleSize()
	abstractSeen := false
	for i := range a.drafts {
		d := &a.drafts[i]
		if d.kind != paper.Paragraph {
			continue
		}
		text := d.text()
		switch {
		case startsLabel(text):
			d.kind = paper.Caption
		case d.side:
			d.kind = paper.Note
		case d.page <= 1 && d.size == title && len(d.lines) <= 8, a.isHeading(d):
			d.kind = paper.Heading
		case a.isFigureText(d, text):
			d.kind = paper.Furniture
		case d.page <= 2 && a.isFrontMatter(d, text, abstractSeen):
			d.kind = paper.Furniture
		case a.isFootNote(d, text):
			d.kind = paper.Note
		}
		if d.kind == paper.Heading && d.size < title {
			z, _ := paper.ZoneOf(text)
			abstractSeen = abstractSeen || z != paper.Elsewhere
		}
		abstractSeen = abstractSeen || runInHeading(text) != ""
	}
}

// clearFigures takes the lettering of a figure, printed above its caption, out
// of the text: short pieces that are neither sentences nor known headings.
func (a *arranger) clearFigures() {
	for i := range a.drafts {
		if c := &a.drafts[i]; c.kind != paper.Caption || !figureLabel.MatchString(c.text()) {
			continue
		}
		for k := i - 1; k >= 0 && a.drafts[k].page == a.drafts[i].page; k-- {
			d := &a.drafts[k]
			if d.kind != paper.Heading && d.kind != paper.Paragraph {
				break
			}
			text := d.text()
			if ended(text) || knownTitle(text) || numbered.MatchString(text) || strings.ContainsRune(text, '±') ||
				len(strings.Fields(text)) > 8*len(d.lines) || d.kind == paper.Paragraph && d.size*100 >= a.body*97 {
				break
			}
			d.kind = paper.Furniture
		}
	}
}

// findPlainHeadings makes headings of the short lines that stand alone above a
// paragraph and are printed as the text is: capital first, no stop, not part of
// a list.
func (a *arranger) findPlainHeadings() {
	for i := 0; i+1 < len(a.drafts); i++ {
		d, next := &a.drafts[i], &a.drafts[i+1]
		if d.kind != paper.Paragraph || len(d.lines) > 2 || next.kind != paper.Paragraph || len(next.lines) < 3 || next.page != d.page ||
			abs(d.size-a.body)*100 > 12*a.body || !d.last().short() || i > 0 && !settled(&a.drafts[i-1]) {
			continue
		}
		text := d.text()
		words := strings.Count(text, " ") + 1
		if words > 14 || words < 2 && len(text) < 5 || ended(text) || !startsUpper(text) || numbered.MatchString(text) || letterShare(text) < 85 ||
			strings.ContainsAny(text, ":;,=<>±@") || bullet(text) || text[0] <= '9' || bullet(next.first().text()) || !startsUpper(next.first().text()) {
			continue
		}
		d.kind = paper.Heading
	}
}

// settled reports whether what stands before a heading has come to its end.
func settled(d *draft) bool { return d.kind != paper.Paragraph || ended(d.last().text()) }

// isFigureText reports whether a draft is the lettering of a figure: small
// print in scattered pieces.
func (a *arranger) isFigureText(d *draft, text string) bool {
	if len(d.lines) > 0 && d.page > 0 && !d.oblique() && d.size*100 >= a.body*96 {
		return false
	}
	words := len(strings.Fields(text))
	return d.oblique() || words <= 4*len(d.lines) && !ended(text) && !strings.Contains(text, "±")
}

func (d *draft) oblique() bool {
	if len(d.lines[0].words) == 0 {
		return false
	}
	g := d.lines[0].words[0].Glyphs
	return len(g) > 0 && g[0].Angle%90 != 0
}

func (a *arranger) isFrontMatter(d *draft, text string, abstractSeen bool) bool {
	if len(text) > 300 && resultLike.MatchString(text) {
		return false
	}
	lower := strings.ToLower(text[:min(len(text), 1500)])
	starts := func(p string) bool { return strings.HasPrefix(lower, p) }
	holds := func(p string) bool { return strings.Contains(lower, p) }
	if (slices.ContainsFunc(aboutStarts, starts) || slices.ContainsFunc(aboutHolds, holds) || lower == "open access") && (len(text) < 900 || d.size*100 < a.body*95) {
		return true
	}
	return !abstractSeen && d.page == 1 && slices.ContainsFunc(addresses, holds) && len(text) < 1500 && strings.Count(text, ". ")*120 < len(text)
}

// isFootNote reports whether a draft is a note in small print that begins with
// a mark.
func (a *arranger) isFootNote(d *draft, text string) bool {
	if len(text) > 500 || d.size*100 >= a.body*94 || len(d.lines[0].words) == 0 {
		return false
	}
	w := d.lines[0].words[0]
	r, _ := utf8.DecodeRuneInString(w.Text)
	return w.Shift == paper.Raised || strings.ContainsRune("*†‡§¶∗#", r)
}

// join puts paragraphs together that go on in the next column, on the next
// page or after a float: the first does not end a sentence, the second begins
// inside one.
func (a *arranger) join() {
	gone := make([]bool, len(a.drafts))
	// What follows directly first, so that nobody takes it from further up.
	for _, within := range []int{1, maxBetween} {
		for i := range a.drafts {
			d := &a.drafts[i]
			for d.kind == paper.Paragraph && !gone[i] {
				k := a.continuation(i, within, gone)
				if k < 0 {
					break
				}
				d.lines = append(d.lines[:len(d.lines):len(d.lines)], a.drafts[k].lines...)
				gone[k] = true
			}
		}
	}
	kept := a.drafts[:0]
	for i := range a.drafts {
		if !gone[i] {
			kept = append(kept, a.drafts[i])
		}
	}
	a.drafts = kept
}

// Between the two parts of a paragraph may stand whole pages of tables.
const (
	maxBetween = 60 // blocks
	maxPages   = 8
)

// continuation is the draft, no more than within blocks further on, that goes
// on with the sentence at the end of draft i, or -1.
func (a *arranger) continuation(i, within int, gone []bool) int {
	d := &a.drafts[i]
	prev := d.last().text()
	if ended(prev) {
		return -1
	}
	page := d.last().page
	for k := i + 1; k < len(a.drafts) && k <= i+within; k++ {
		e := &a.drafts[k]
		if gone[k] {
			continue
		}
		if e.page > page+maxPages {
			return -1
		}
		switch e.kind {
		case paper.Heading:
			if k == i+1 && e.page == d.page {
				return -1
			}
			if zone, sure := paper.ZoneOf(e.text()); sure && zone != paper.Elsewhere {
				return -1
			}
			continue
		case paper.Paragraph:
		default:
			continue
		}
		if abs(e.size-d.size)*100 > 4*d.size {
			continue
		}
		next := e.first().text()
		if k != i+1 {
			switch {
			case bullet(d.first().text()):
				return -1
			case bullet(next): // a box with a list
				continue
			}
			if text := e.text(); strings.Count(text, " ") < 3 && !ended(text) { // a piece of a figure
				continue
			}
		}
		if goesOn(prev, next) || !opensBlock(next) && runsOver(d, e) {
			return k
		}
		return -1
	}
	return -1
}

// goesOn reports whether a line that begins a block plainly goes on from prev.
func goesOn(prev, next string) bool {
	r, _ := utf8.DecodeRuneInString(strings.TrimLeft(next, "([“\"'"))
	last, n := utf8.DecodeLastRuneInString(prev)
	before, _ := utf8.DecodeLastRuneInString(prev[:len(prev)-n])
	switch {
	case bullet(next), startsLabel(next):
		return false
	case unicode.IsLower(r):
		return true
	case isHyphen(last) && unicode.IsLetter(before), last == ',', last == '(', last == '=', last == ';', isDash(last):
		return true
	case unicode.IsDigit(r), strings.ContainsRune("<>=±−%", r):
		return !numbered.MatchString(next)
	}
	return endsOpen(prev) || strings.Count(prev, "(") > strings.Count(prev, ")")
}

// runsOver reports whether paragraph d, which ends without a stop, fills its
// column to the end and e begins at the edge of another one.
func runsOver(d, e *draft) bool {
	p, q := d.last(), e.first()
	if p.full() && q.full() {
		return true
	}
	moved := p.page != q.page || q.base < p.base || q.edge > p.edge+p.width/2
	return moved && len(d.lines) >= 3 && !p.short() && q.x0 <= q.edge+q.size/2 && len(q.words) > 2
}

// opensBlock reports whether a line begins something of its own, whatever
// stands before it.
func opensBlock(next string) bool {
	return bullet(next) || startsLabel(next) || numbered.MatchString(next) || runInHeading(next) != ""
}

// titleSize is the font size of the paper's title: the largest print of some
// words on its first page.
func (a *arranger) titleSize() int {
	best := 0
	for i := range a.drafts {
		d := &a.drafts[i]
		if d.page > 1 || d.kind == paper.Furniture || d.kind == paper.TableBlock || d.size <= best {
			continue
		}
		if text := d.text(); len(strings.Fields(text)) >= 4 && letterShare(text) > 70 {
			best = d.size
		}
	}
	if best*100 < a.body*112 {
		return 1 << 30
	}
	return best
}

// title is the text in the size of the title.
func (a *arranger) title() string {
	size := a.titleSize()
	for i := range a.drafts {
		if d := &a.drafts[i]; d.page <= 1 && d.size == size && len(strings.Fields(d.text())) >= 4 {
			return a.run(d).S
		}
	}
	return ""
}
