package jats

import (
	"bytes"
	"html"
	"sort"
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/source"
)

// builder collects a TextRun from character data: white space is normalised,
// references are resolved, every byte keeps its place.
type builder struct {
	src    *source.Text
	known  map[string]string // entities
	s      []byte
	runs   []paper.Run
	styles []paper.Style
	space  int  // offset in src.B of white space not yet written, -1 none
	cell   bool // line breaks are kept
	floats []*node
	cites  bool // a citation mark was written
}

// citation stands in the text for a citation mark until it is cut out; no XML
// file can hold this character.
const citation = "\uFFFF"

func (b *builder) put(s []byte, off int) {
	for len(s) > 0 {
		n := b.src.Break(off, off+len(s)) - off
		b.append(s[:n], b.src.Offset(off))
		s, off = s[n:], off+n
	}
}

// append adds bytes that run in step with the file from file offset at.
func (b *builder) append(s []byte, at int) {
	k := len(b.runs) - 1
	if k >= 0 && b.runs[k].End == len(b.s) && b.runs[k].Place.Offset+b.runs[k].End-b.runs[k].Start == at {
		b.runs[k].End += len(s)
	} else {
		b.runs = append(b.runs, paper.Run{Start: len(b.s), End: len(b.s) + len(s), Place: paper.Place{Offset: at}})
	}
	b.s = append(b.s, s...)
}

// flush writes the white space that is due, none at the start of a line.
func (b *builder) flush() {
	if b.space >= 0 && len(b.s) > 0 && b.s[len(b.s)-1] != '\n' {
		b.put([]byte(" "), b.space)
	}
	b.space = -1
}

// lineBreak parts two lines of a cell, or two words of other text.
func (b *builder) lineBreak() {
	if len(b.s) == 0 {
		return
	}
	b.space = -1
	last := b.s[len(b.s)-1]
	switch {
	case last == '\n' || last == ' ':
	case b.cell:
		b.s = append(b.s, '\n')
	default:
		b.s = append(b.s, ' ')
	}
}

// word makes sure that what comes next does not touch what stands before.
func (b *builder) word() {
	if n := len(b.s); n > 0 && b.space < 0 && b.s[n-1] != ' ' && b.s[n-1] != '\n' {
		b.s = append(b.s, ' ')
	}
}

// chars reads the character data [start, end) of the decoded file.
func (b *builder) chars(start, end int) {
	raw := b.src.B[start:end]
	if bytes.HasPrefix(raw, []byte("<![CDATA[")) {
		const open, shut = len("<![CDATA["), len("]]>")
		b.plain(raw[open:len(raw)-shut], start+open)
		return
	}
	for len(raw) > 0 {
		k := bytes.IndexByte(raw, '&')
		if k < 0 {
			k = len(raw)
		}
		b.plain(raw[:k], start)
		raw, start = raw[k:], start+k
		if len(raw) == 0 {
			return
		}
		k = bytes.IndexByte(raw, ';') + 1
		b.reference(string(raw[:k]), start)
		raw, start = raw[k:], start+k
	}
}

// plain adds bytes without references.
func (b *builder) plain(raw []byte, off int) {
	for len(raw) > 0 {
		k := bytes.IndexAny(raw, " \t\r\n")
		if k < 0 {
			k = len(raw)
		}
		if k > 0 {
			b.flush()
			b.put(raw[:k], off)
		}
		if k < len(raw) && b.space < 0 {
			b.space = off + k
		}
		for k < len(raw) && strings.IndexByte(" \t\r\n", raw[k]) >= 0 {
			k++
		}
		raw, off = raw[k:], off+k
	}
}

// reference adds what the reference "&...;" at off stands for.
func (b *builder) reference(ref string, off int) {
	name := strings.Trim(ref, "&;")
	s, ok := b.known[name]
	if !ok || strings.HasPrefix(name, "#") {
		s = html.UnescapeString(ref)
	}
	if strings.Trim(s, " \t\r\n") == "" {
		if b.space < 0 {
			b.space = off
		}
		return
	}
	b.flush()
	b.append([]byte(s), b.src.Offset(off))
}

// styled runs f and marks what it wrote.
func (b *builder) styled(kind paper.StyleKind, f func()) {
	b.flushBefore()
	start := len(b.s)
	f()
	if len(b.s) > start {
		b.styles = append(b.styles, paper.Style{Start: start, End: len(b.s), Kind: kind})
	}
}

// flushBefore writes due white space before a style begins, so that the style
// holds the printed characters only.
func (b *builder) flushBefore() {
	if b.space >= 0 && len(b.s) > 0 {
		b.flush()
	}
}

// run hands out what was collected, with space at the ends, citation marks and
// stray line ends cut off.
func (b *builder) run() paper.TextRun {
	sort.SliceStable(b.styles, func(i, j int) bool { return b.styles[i].Start < b.styles[j].Start })
	t := paper.TextRun{S: string(b.s), Runs: b.runs, Styles: b.styles}
	if b.cites {
		t = cutCitations(t)
	}
	return trim(t)
}

// trim cuts white space, no-break and other spaces included, from both ends.
func trim(t paper.TextRun) paper.TextRun {
	left := len(t.S) - len(strings.TrimLeftFunc(t.S, layoutSpace))
	right := len(strings.TrimRightFunc(t.S, layoutSpace))
	if left >= right {
		return paper.TextRun{}
	}
	return slice(t, left, right)
}

// layoutSpace tells white space and characters without width or ink.
func layoutSpace(r rune) bool {
	return unicode.IsSpace(r) || r == '\u200B' || r == '\u200E' || r == '\u2060' || r == '\uFEFF'
}

// slice is the part [i, j) of t.
func slice(t paper.TextRun, i, j int) paper.TextRun {
	if i == 0 && j == len(t.S) {
		return t
	}
	return drop(t, [][2]int{{0, i}, {j, len(t.S)}})
}

// drop cuts the ascending, disjoint stretches out of t.
func drop(t paper.TextRun, cuts [][2]int) paper.TextRun {
	// at moves an offset of the old text to the new one.
	at := func(i int) int {
		gone := 0
		for _, c := range cuts {
			if i <= c[0] {
				break
			}
			gone += min(i, c[1]) - c[0]
		}
		return i - gone
	}
	var out paper.TextRun
	var s strings.Builder
	last := 0
	for _, c := range cuts {
		s.WriteString(t.S[last:c[0]])
		last = c[1]
	}
	s.WriteString(t.S[last:])
	out.S = s.String()
	keep := kept(cuts, len(t.S))
	for _, r := range t.Runs {
		for _, k := range keep {
			a, z := max(r.Start, k[0]), min(r.End, k[1])
			if a >= z {
				continue
			}
			p := r.Place
			p.Offset += a - r.Start
			out.Runs = append(out.Runs, paper.Run{Start: at(a), End: at(z), Place: p})
		}
	}
	for _, st := range t.Styles {
		if a, z := at(st.Start), at(st.End); a < z {
			out.Styles = append(out.Styles, paper.Style{Start: a, End: z, Kind: st.Kind})
		}
	}
	return out
}

// kept gives what the cuts leave of [0, n).
func kept(cuts [][2]int, n int) [][2]int {
	var keep [][2]int
	last := 0
	for _, c := range cuts {
		if c[0] > last {
			keep = append(keep, [2]int{last, c[0]})
		}
		last = max(last, c[1])
	}
	if last < n {
		keep = append(keep, [2]int{last, n})
	}
	return keep
}

// firstRune is the first character of s, 0 of an empty one.
func firstRune(s string) rune {
	if s == "" {
		return 0
	}
	r, _ := utf8.DecodeRuneInString(s)
	return r
}
