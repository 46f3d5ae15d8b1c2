package source

import (
	"sort"
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
)

// Builder collects a TextRun from stretches of a Text, each byte with its place
// in the file. White space is put in by the caller or by [Builder.Space].
type Builder struct {
	Src  *Text
	S    []byte
	Runs []paper.Run
	// Styles may be added in any order; Run sorts them.
	Styles []paper.Style

	space    int // offset in Src.B of white space not yet written
	hasSpace bool
}

// Put adds bytes of Src.B that begin at offset off, after white space that is
// due.
func (b *Builder) Put(s []byte, off int) {
	b.Flush()
	b.put(s, off)
}

func (b *Builder) put(s []byte, off int) {
	for len(s) > 0 {
		n := b.Src.Break(off, off+len(s)) - off
		b.add(s[:n], b.Src.Offset(off))
		s, off = s[n:], off+n
	}
}

// PutAs adds bytes that stand for what is written at offset off in other bytes,
// as an entity is.
func (b *Builder) PutAs(s []byte, off int) {
	b.Flush()
	at := b.Src.Offset(off)
	for len(s) > 0 { // each character stands where the whole does
		_, n := utf8.DecodeRune(s)
		b.add(s[:n], at)
		s = s[n:]
	}
}

// add adds bytes that run in step with the file from file offset at.
func (b *Builder) add(s []byte, at int) {
	k := len(b.Runs) - 1
	if k >= 0 && b.Runs[k].End == len(b.S) && b.Runs[k].Place.Offset+b.Runs[k].End-b.Runs[k].Start == at {
		b.Runs[k].End += len(s)
	} else {
		b.Runs = append(b.Runs, paper.Run{Start: len(b.S), End: len(b.S) + len(s), Place: paper.Place{Offset: at}})
	}
	b.S = append(b.S, s...)
}

// Insert adds bytes that stand nowhere in the file.
func (b *Builder) Insert(s string) {
	b.Flush()
	b.S = append(b.S, s...)
}

// Space notes white space at offset off: one space will part what stands before
// it from what comes next. None is written at the start of a line.
func (b *Builder) Space(off int) {
	if !b.hasSpace {
		b.space, b.hasSpace = off, true
	}
}

// Flush writes the white space that is due.
func (b *Builder) Flush() {
	if b.hasSpace && len(b.S) > 0 && b.S[len(b.S)-1] != '\n' {
		b.put([]byte(" "), b.space)
	}
	b.hasSpace = false
}

// Break ends a line: sep ("\n" or " ") parts what stands before from what comes
// next, whatever white space there is.
func (b *Builder) Break(sep string) {
	b.hasSpace = false
	if n := len(b.S); n > 0 && b.S[n-1] != '\n' && b.S[n-1] != ' ' {
		b.S = append(b.S, sep...)
	}
}

// Word makes sure that what comes next does not touch what stands before.
func (b *Builder) Word() {
	if !b.hasSpace {
		b.Break(" ")
	}
}

// Styled runs f and marks what it wrote.
func (b *Builder) Styled(kind paper.StyleKind, f func()) {
	b.Flush()
	start := len(b.S)
	f()
	if len(b.S) > start {
		b.Styles = append(b.Styles, paper.Style{Start: start, End: len(b.S), Kind: kind})
	}
}

// Run hands out what was collected.
func (b *Builder) Run() paper.TextRun {
	sort.SliceStable(b.Styles, func(i, j int) bool { return b.Styles[i].Start < b.Styles[j].Start })
	return paper.TextRun{S: string(b.S), Runs: b.Runs, Styles: b.Styles}
}

// Trim cuts white space, no-break and other spaces included, from both ends.
func Trim(t paper.TextRun) paper.TextRun {
	left := len(t.S) - len(strings.TrimLeftFunc(t.S, Blank))
	right := len(strings.TrimRightFunc(t.S, Blank))
	if left >= right {
		return paper.TextRun{}
	}
	return Slice(t, left, right)
}

// Blank tells white space and characters without width or ink.
func Blank(r rune) bool {
	return unicode.IsSpace(r) || r == '\u200B' || r == '\u200E' || r == '\u2060' || r == '\uFEFF'
}

// Slice is the part [i, j) of t.
func Slice(t paper.TextRun, i, j int) paper.TextRun {
	if i == 0 && j == len(t.S) {
		return t
	}
	return Drop(t, [][2]int{{0, i}, {j, len(t.S)}})
}

// Drop cuts the ascending, disjoint stretches out of t.
func Drop(t paper.TextRun, cuts [][2]int) paper.TextRun {
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

// Join puts b after a, one space between.
func Join(a, b paper.TextRun) paper.TextRun {
	switch {
	case a.S == "":
		return b
	case b.S == "":
		return a
	}
	shift := len(a.S) + 1
	t := paper.TextRun{S: a.S + " " + b.S}
	t.Runs = append(t.Runs, a.Runs...)
	t.Styles = append(t.Styles, a.Styles...)
	for _, x := range b.Runs {
		t.Runs = append(t.Runs, paper.Run{Start: x.Start + shift, End: x.End + shift, Place: x.Place})
	}
	for _, x := range b.Styles {
		t.Styles = append(t.Styles, paper.Style{Start: x.Start + shift, End: x.End + shift, Kind: x.Kind})
	}
	return t
}
