package plain

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

var (
	captionStart = pattern.MustCompile(`^\s*((?:Table|TABLE|Tab\.|Supplementary Table|Appendix Table|eTable)[\s\x{00A0}-]*(?:S|A|E)?(?:\d{1,3}|[IVX]{1,5}|[A-Z])(?:\.\d+|[a-z])?)(?:[.:|\s\x{00A0}\x{2003}]|$)`)
	figureStart  = pattern.MustCompile(`^\s*(?:Figure|FIGURE|Fig\.|FIG\.|Fig|Scheme|Box)[\s\x{00A0}]*(?:S|A)?\d{1,3}[a-z]?(?:[.:|\s\x{00A0}]|$)`)
	// refersTo is how a sentence about a table goes on, a caption does not.
	refersTo = pattern.MustCompile(`^[\s\x{00A0}]*(?:[,;)]|and\b|also\b|shows?\b|presents?\b|summari[sz]es?\b|lists?\b|gives?\b|reports?\b|displays?\b|provides?\b|compares?\b|describes?\b|contains?\b|demonstrates?\b|illustrates?\b|depicts?\b|details?\b|includes?\b|outlines?\b|indicates?\b|reveals?\b|is\b|are\b|were\b|was\b|has\b)`)
)

// isCaption reports whether a line begins the caption of a table.
func isCaption(s string) bool {
	m := captionStart.FindStringSubmatchIndex(s)
	return m != nil && !refersTo.MatchString(s[m[3]:])
}

// findFront looks for the line "Abstract" near the start: what stands before it
// is title, authors and addresses.
func (r *reader) findFront() {
	const within, fewest = 120, 15 // lines; letters of a title
	for i, l := range r.lines[:min(len(r.lines), within)] {
		s := r.text(l)
		if len(s) > 40 {
			continue
		}
		if z, sure := paper.ZoneOf(s); !sure || z != paper.Abstract {
			continue
		}
		r.front = i
		for _, l := range r.lines[:i] {
			s := strings.TrimSpace(r.text(l))
			if len(s) >= fewest && len(strings.Fields(s)) > 3 && !frontLine.MatchString(s) && !citationLine.MatchString(s) {
				r.doc.Title = s
				return
			}
		}
		return
	}
}

// citationLine is the line that says where a paper was published.
var citationLine = pattern.MustCompile(`(?i)\bdoi\b|\b(?:19|20)\d\d\s*[;:]|\bvol(?:ume|\.)`)

// read goes through the lines and makes the blocks.
func (r *reader) read() {
	for i := 0; i < len(r.lines); {
		l := r.lines[i]
		switch {
		case l.running:
			r.emit(paper.Furniture, i, i+1)
			i++
		case l.blank:
			i++
		default:
			if next := r.tableAt(i); next > i {
				i = next
				continue
			}
			end := r.chunk(i)
			r.paragraphs(i, end)
			i = end
		}
	}
}

// chunk gives the line after the last one of the text that begins at i: a blank
// line, a table or a caption ends it.
func (r *reader) chunk(i int) int {
	k := i + 1
	for k < len(r.lines) && !r.lines[k].blank && !r.lines[k].running && !isCaption(r.text(r.lines[k])) && !r.startsTable(k) {
		k++
	}
	return k
}

// startsTable reports whether the rows of a table begin at line k.
func (r *reader) startsTable(k int) bool {
	if !r.tabbed(k) && !r.piped(k) && !gridRule.MatchString(r.text(r.lines[k])) {
		return false
	}
	_, ok := r.regionAt(k, false)
	return ok
}

// regionAt reads the table whose rows begin at line i, in any of the forms.
func (r *reader) regionAt(i int, captioned bool) (region, bool) {
	if r.lines[i].blank || r.lines[i].running {
		return region{}, false
	}
	if g, ok := r.regions[i]; ok {
		return g, len(g.rows) > 0
	}
	g, ok := r.findRegion(i, captioned)
	if ok || !captioned {
		r.regions[i] = g
	}
	return g, ok
}

func (r *reader) findRegion(i int, captioned bool) (region, bool) {
	if gridRule.MatchString(r.text(r.lines[i])) && i+1 < len(r.lines) && r.piped(i+1) {
		if g, ok := r.pipeRegion(i + 1); ok {
			g.from = i
			return g, true
		}
	}
	if r.tabbed(i) || len(r.text(r.lines[i])) < longLine && r.rowsBelow(i+1) {
		if g, ok := r.tabRegion(i); ok {
			return g, true
		}
	}
	if r.piped(i) {
		if g, ok := r.pipeRegion(i); ok {
			return g, true
		}
	}
	return r.alignedRegion(i, captioned)
}

// tableAt reads the table that begins at line i with its caption, rows and
// notes, and gives the line after it; i if none begins there.
func (r *reader) tableAt(i int) int {
	if isCaption(r.text(r.lines[i])) {
		end := r.captionEnd(i)
		k := r.skipBlank(end)
		if k < len(r.lines) {
			if g, ok := r.regionAt(k, true); ok {
				return r.emitTable(g, i, end)
			}
		}
		if t := r.uncaptioned(); t != nil {
			r.setCaption(t, i, end)
			return r.notes(t, end)
		}
		r.emit(paper.Caption, i, end)
		return end
	}
	if g, ok := r.regionAt(i, false); ok {
		return r.emitTable(g, i, i)
	}
	return i
}

// captionEnd gives the line after a caption's last: the rows may follow without
// a blank line.
func (r *reader) captionEnd(i int) int {
	k := i + 1
	for k < len(r.lines) && !r.lines[k].blank && !r.startsTable(k) && !isCaption(r.text(r.lines[k])) {
		if len(r.text(r.lines[k-1])) > longLine || r.rowsBelow(k+1) && !r.wrapped(k-1) {
			break // one line a paragraph; or the first row has one cell only
		}
		if _, ok := r.alignedRegion(k, true); ok {
			break
		}
		k++
	}
	return k
}

// wrapped reports whether line k looks as if its text went on in the next.
func (r *reader) wrapped(k int) bool {
	s := strings.TrimSpace(r.text(r.lines[k]))
	return len(s) > 50 && !strings.HasSuffix(s, ".")
}

func (r *reader) skipBlank(k int) int {
	for k < len(r.lines) && (r.lines[k].blank || r.lines[k].running) {
		k++
	}
	return k
}

// uncaptioned is the table read last, if nothing but it stands right before and
// it has no caption yet.
func (r *reader) uncaptioned() *paper.Table {
	n := len(r.doc.Blocks)
	if n == 0 || r.doc.Blocks[n-1].Kind != paper.TableBlock {
		return nil
	}
	if t := r.doc.Blocks[n-1].Table; t.Label == "" {
		return t
	}
	return nil
}

func (r *reader) emitTable(g region, captionFrom, captionTo int) int {
	t := r.table(g)
	if captionTo > captionFrom {
		r.setCaption(t, captionFrom, captionTo)
	}
	if r.paged {
		t.Page = r.lines[g.from].page
	}
	if z := r.sections.zone; z == paper.References || z == paper.BackMatter {
		// tables of a manuscript stand after its references
		r.sections.zone = paper.BackMatter
	}
	r.add(paper.Block{Kind: paper.TableBlock, Table: t}, g.from)
	return r.notes(t, g.to)
}

func (r *reader) setCaption(t *paper.Table, from, to int) {
	run := r.run(from, to)
	m := captionStart.FindStringSubmatchIndex(run.S)
	t.Label = strings.Join(strings.FieldsFunc(run.S[m[2]:m[3]], unicode.IsSpace), " ")
	t.Caption = after(run, m[3])
}

// add appends a block with its zone, section and page.
func (r *reader) add(b paper.Block, line int) {
	b.Zone, b.Section = r.sections.zone, r.sections.title
	if r.paged {
		b.Page = r.lines[line].page
	}
	r.doc.Blocks = append(r.doc.Blocks, b)
}

func (r *reader) emit(kind paper.BlockKind, from, to int) {
	run := r.run(from, to)
	if run.S == "" {
		return
	}
	r.add(paper.Block{Kind: kind, Text: run}, from)
}

// paragraphs reads lines [from, to), which no blank line parts: one paragraph
// over many lines, or one on each.
func (r *reader) paragraphs(from, to int) {
	for from < to {
		end := r.paragraphEnd(from, to)
		r.paragraph(from, end)
		from = end
	}
}

// paragraphEnd tells where the paragraph that begins at line from ends: at its
// line's end if the line is longer than a printed one, or is a heading, or the
// next begins an entry of a list.
func (r *reader) paragraphEnd(from, to int) int {
	const printed = 160 // no line of a typeset page has more characters
	widest := 0
	for k := from; k < to; k++ {
		widest = max(widest, utf8.RuneCountInString(r.text(r.lines[k])))
	}
	if widest > printed || to-from == 1 || r.tabbed(from) || r.tabbed(from+1) {
		return from + 1
	}
	if to-from > 1 && r.headingLine(from) && !r.continues(from, widest) {
		return from + 1
	}
	k := from + 1
	for k < to && !entryStart.MatchString(r.text(r.lines[k])) && !figureStart.MatchString(r.text(r.lines[k])) {
		if r.headingLine(k) && !r.continues(k-1, widest) {
			break
		}
		k++
	}
	return k
}

// continues reports whether line k is as full as the lines around it, so that
// its text goes on in the next.
func (r *reader) continues(k, widest int) bool {
	return 10*utf8.RuneCountInString(strings.TrimSpace(r.text(r.lines[k]))) > 7*widest
}

// entryStart begins an entry of a numbered list or reference list.
var entryStart = pattern.MustCompile(`^\s*(?:\[\d{1,3}\]|\d{1,3}\.|\(\d{1,3}\)|[•·▪–])\s+\S`)

// paragraph reads lines [from, to) as a heading or as one paragraph.
func (r *reader) paragraph(from, to int) {
	s := strings.TrimFunc(r.run(from, to).S, unicode.IsSpace)
	if from < r.front {
		r.emit(paper.Furniture, from, to)
		return
	}
	if to-from <= 2 && !r.tabbed(from) && r.sections.heading(s, r.lines, to) {
		r.emit(paper.Heading, from, to)
		return
	}
	r.emit(r.kindOfText(s), from, to)
	r.sections.sawText(s)
}

func (r *reader) kindOfText(s string) paper.BlockKind {
	switch {
	case r.sections.zone == paper.References:
		return paper.Reference
	case figureStart.MatchString(s) && !refersTo.MatchString(figureStart.ReplaceAllString(s, "")):
		return paper.Caption
	case frontLine.MatchString(s):
		return paper.Furniture
	}
	return paper.Paragraph
}

// frontLine is a line of the front matter or of a page's foot.
var frontLine = pattern.MustCompile(`^(?:Key ?words?\b|Received:? |Accepted:? |Published:? |Correspondence\b|©|Copyright\b|E-?mail:|https?://|doi:|Funding: |This (?:is an open|article is distributed|work is licensed)|\d{1,4}$)`)

func (r *reader) headingLine(k int) bool {
	s := strings.TrimSpace(r.text(r.lines[k]))
	_, sure := paper.ZoneOf(s)
	return looksHeading(s) && (sure || numberedHeading.MatchString(s) || s == strings.ToUpper(s))
}
