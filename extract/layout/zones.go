package layout

import (
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// zoner walks the blocks in reading order and keeps the zone and section that
// the headings open.
type zoner struct {
	body, titleSize int
	zone            paper.Zone
	section         string
	abstractSize    int             // font size of the heading that opened the abstract
	parts           map[string]bool // headings met inside the abstract
	ahead           map[string]int  // headings still to come, by plain title
	done            bool            // the abstract is behind
	numbered        bool            // the main headings carry numbers
}

var keywords = pattern.MustCompile(`(?i)^(?:key ?words?|index terms|keywords and phrases|mesh)\b`)

// floating is the zone of a table or figure: of the text it is met in.
func (z *zoner) floating() paper.Zone {
	if z.zone == paper.References || z.zone == paper.BackMatter {
		return paper.Elsewhere
	}
	return z.zone
}

// blocks makes the blocks of one draft.
func (z *zoner) blocks(d *draft, run paper.TextRun) []paper.Block {
	switch d.kind {
	case paper.Heading:
		if keywords.MatchString(run.S) {
			z.endAbstract()
		}
		return []paper.Block{z.heading(d, run)}
	case paper.Caption:
		return []paper.Block{{Kind: d.kind, Page: d.page, Text: run, Zone: z.floating(), Section: z.section}}
	case paper.Furniture, paper.Note:
		if keywords.MatchString(run.S) {
			z.endAbstract()
		}
		b := paper.Block{Kind: d.kind, Page: d.page, Text: run, Zone: z.zone, Section: z.section}
		if d.kind == paper.Furniture {
			b.Zone, b.Section = paper.Elsewhere, ""
		}
		return []paper.Block{b}
	}
	if keywords.MatchString(run.S) && d.page <= 2 {
		z.endAbstract()
		return []paper.Block{{Kind: paper.Furniture, Page: d.page, Text: run}}
	}
	if z.zone == paper.References {
		return []paper.Block{{Kind: paper.Reference, Zone: z.zone, Section: z.section, Page: d.page, Text: run}}
	}
	if z.zone == paper.Elsewhere && !z.done && d.page <= 2 && (runInHeading(run.S) != "" || isProse(run.S)) {
		z.zone, z.section = paper.Abstract, "Abstract"
	}
	if z.zone == paper.Abstract && d.page <= 2 {
		return z.abstract(d, run)
	}
	if z.zone == paper.Abstract {
		z.endAbstract()
	}
	section := z.section
	if title := styledStart(&run); title != "" {
		section = title
		zone, sure := paper.ZoneOf(title)
		if sure && zone != paper.Abstract && zone != paper.References || z.mayTake(zone) {
			z.zone, z.section = zone, title
		}
	}
	return []paper.Block{{Kind: paper.Paragraph, Zone: z.zone, Section: section, Page: d.page, Text: run}}
}

func (z *zoner) endAbstract() {
	if z.zone == paper.Abstract || z.zone == paper.Elsewhere {
		z.zone, z.section = paper.Introduction, ""
	}
	z.done = true
}

// mayTake reports whether a zone guessed from a word in a heading is believed:
// where nothing surer has been said.
func (z *zoner) mayTake(zone paper.Zone) bool {
	return (z.zone == paper.Elsewhere || z.zone == paper.Introduction) &&
		(zone == paper.Methods || zone == paper.Results || zone == paper.Discussion)
}

// heading takes a heading and the zone it opens.
func (z *zoner) heading(d *draft, run paper.TextRun) paper.Block {
	b := paper.Block{Kind: paper.Heading, Page: d.page, Text: run, Level: level(d, run.S, z.body)}
	if d.page <= 1 && d.size == z.titleSize {
		b.Level = 1
		return b
	}
	title := strings.TrimSpace(run.S)
	zone, sure := paper.ZoneOf(title)
	z.ahead[paper.PlainTitle(title)]--
	switch {
	case z.inAbstract(d, title, zone, sure):
		z.section = title
	case sure:
		z.take(d, title, zone)
	case z.zone == paper.References:
	case topNumber.MatchString(title) && z.numbered && zone != paper.Elsewhere:
		z.take(d, title, zone)
	case z.zone == paper.BackMatter:
		z.section = title
	case z.mayTake(zone):
		z.zone, z.section, z.done = zone, title, true
	default:
		z.section = title
	}
	b.Zone, b.Section = z.zone, z.section
	return b
}

// inAbstract reports whether a heading is a part of a structured abstract.
func (z *zoner) inAbstract(d *draft, title string, zone paper.Zone, sure bool) bool {
	if z.zone != paper.Abstract || d.page > 2 || z.done {
		return false
	}
	plain := paper.PlainTitle(title)
	if sure && z.ahead[plain] > 0 && !z.parts[plain] {
		// The same heading comes again: this one is of the abstract.
		z.parts[plain] = true
		return true
	}
	if sure && (zone == paper.References || plain == "introduction" || numbered.MatchString(title)) {
		return false
	}
	if sure && (zone == paper.Methods || zone == paper.Results) && d.size >= z.abstractSize && !z.comes(zone) {
		return false // the paper's own methods or results: no other heading of them follows
	}
	if z.parts[plain] || d.size*100 > z.abstractSize*108 && z.abstractSize > 0 && sure {
		return false
	}
	z.parts[plain] = true
	return zone != paper.BackMatter || plain == "trial registration" || plain == "funding"
}

// comes reports that a heading that surely opens the zone is still ahead.
func (z *zoner) comes(zone paper.Zone) bool {
	for title, n := range z.ahead {
		if got, sure := paper.ZoneOf(title); n > 0 && sure && got == zone {
			return true
		}
	}
	return false
}

func (z *zoner) take(d *draft, title string, zone paper.Zone) {
	z.zone, z.section = zone, title
	if zone == paper.Abstract {
		z.abstractSize, z.parts, z.done = d.size, map[string]bool{}, false
		return
	}
	z.done = true
	z.numbered = z.numbered || topNumber.MatchString(title)
}

// level of a heading: by its number, else by its print.
func level(d *draft, text string, body int) int {
	if m := headNumber.FindString(text); m != "" {
		return 1 + strings.Count(strings.TrimRight(m, ". "), ".")
	}
	if zone, sure := paper.ZoneOf(text); sure && zone != paper.Elsewhere {
		return 1
	}
	switch {
	case d.size*100 >= body*115:
		return 1
	case d.lines[0].bold || allCaps(text):
		return 2
	}
	return 3
}

var (
	topNumber  = pattern.MustCompile(`^(?:[0-9]{1,2}|[IVX]{1,4})\.?\s+\p{Lu}`)
	headNumber = pattern.MustCompile(`^[0-9]{1,2}(?:\.[0-9]{1,2})*\.?\s`)
)

// abstract cuts a paragraph of the abstract where its parts begin.
func (z *zoner) abstract(d *draft, run paper.TextRun) []paper.Block {
	var out []paper.Block
	add := func(from, to int) {
		if part := sliceRun(&run, from, to); part.S != "" {
			out = append(out, paper.Block{Kind: paper.Paragraph, Zone: paper.Abstract, Section: z.section, Page: part.At(0).Page, Text: part})
		}
	}
	start := 0
	for _, p := range partStarts(&run) {
		add(start, p.at)
		start = p.at
		z.section = p.title
		z.parts[paper.PlainTitle(p.title)] = true
	}
	add(start, len(run.S))
	return out
}

type part struct {
	at    int
	title string
}

// partStarts finds where a labelled part begins: at the start of the text or
// after a sentence, printed apart (bold, italic, capitals) or with a colon.
func partStarts(run *paper.TextRun) []part {
	var out []part
	for i := 0; i < len(run.S); i++ {
		if i > 0 && (run.S[i-1] != ' ' || !ended(run.S[max(0, i-12):i-1])) {
			continue
		}
		title := runInHeading(run.S[i:])
		if title == "" {
			if title = boldLabel(run, i); title != "" {
				out = append(out, part{i, title})
			}
			continue
		}
		at := i + strings.Index(run.S[i:], title)
		end := at + len(title)
		colon := end < len(run.S) && run.S[end] == ':'
		if colon || run.Styled(at, paper.Bold) || run.Styled(at, paper.Italic) || allCaps(title) || i == 0 {
			out = append(out, part{i, title})
		}
	}
	return out
}

// boldLabel is a known label that is printed in bold at i and goes over into
// the text without a stop.
func boldLabel(run *paper.TextRun, i int) string {
	for _, s := range run.Styles {
		if s.Kind == paper.Bold && s.Start == i {
			if title := strings.TrimSpace(run.S[s.Start:s.End]); runInHeading(title+": x") == title {
				return title
			}
		}
	}
	return ""
}

// styledStart is the heading that a paragraph begins with: a bold or italic
// stretch that ends as a heading does.
func styledStart(run *paper.TextRun) string {
	for _, s := range run.Styles {
		if s.Start > 6 {
			break
		}
		if s.Kind != paper.Bold && s.Kind != paper.Italic || s.End-s.Start < 4 || s.End > 110 {
			continue
		}
		title := strings.TrimSpace(run.S[:s.End])
		next := strings.TrimSpace(run.S[s.End:min(len(run.S), s.End+3)])
		if strings.HasSuffix(title, ".") || strings.HasSuffix(title, ":") || strings.HasPrefix(next, ":") || strings.HasPrefix(next, ".") {
			return strings.TrimRight(title, ".: ")
		}
		if s.Kind == paper.Bold && s.Start == 0 && startsUpper(title) && startsUpper(next) && letterShare(title) >= 85 {
			return title
		}
	}
	return ""
}

// isProse reports whether a text is a paragraph of sentences, not a list of
// names and places.
func isProse(s string) bool {
	words := strings.Fields(s)
	lower := 0
	for _, w := range words {
		if w[0] >= 'a' && w[0] <= 'z' {
			lower++
		}
	}
	return len(words) >= 50 && lower*2 > len(words) && ended(s)
}

// sliceRun is the part [from, to) of a run, without spaces at its ends.
func sliceRun(run *paper.TextRun, from, to int) paper.TextRun {
	for from < to && run.S[from] == ' ' {
		from++
	}
	for to > from && run.S[to-1] == ' ' {
		to--
	}
	out := paper.TextRun{S: run.S[from:to]}
	for _, r := range run.Runs {
		if r.Start >= from && r.End <= to {
			r.Start, r.End = r.Start-from, r.End-from
			out.Runs = append(out.Runs, r)
		}
	}
	for _, s := range run.Styles {
		if s.Start < to && s.End > from {
			s.Start, s.End = max(s.Start, from)-from, min(s.End, to)-from
			out.Styles = append(out.Styles, s)
		}
	}
	return out
}
