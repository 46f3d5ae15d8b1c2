package paper

import "sort"

// TextRun is a stretch of text whose places are known: S with the runs that
// say where each part stands. Hyphenated line ends are already joined, lines
// are joined by one space.
type TextRun struct {
	S      string
	Runs   []Run   // ascending, not overlapping; bytes between runs were put in by the reader (a joining space)
	Styles []Style // ascending by Start; raised, lowered, bold, italic stretches
}

// Run ties the bytes [Start, End) of a TextRun's S to the file.
type Run struct {
	Start, End int
	Place      Place // of byte Start. For text and XML the later bytes follow at Place.Offset+1, +2, ...
}

// StyleKind is a way in which a stretch of text is printed.
type StyleKind uint8

// The styles that matter for reading numbers and headings.
const (
	Raised  StyleKind = iota + 1 // superscript: a mark, a citation or a power
	Lowered                      // subscript
	Bold
	Italic
)

// Style marks the bytes [Start, End) of a TextRun's S.
type Style struct {
	Start, End int
	Kind       StyleKind
}

// At gives the place of the byte at offset i of S, or the nearest one before it.
func (t *TextRun) At(i int) Place {
	k := sort.Search(len(t.Runs), func(k int) bool { return t.Runs[k].Start > i }) - 1
	if k < 0 {
		if len(t.Runs) == 0 {
			return Place{}
		}
		return t.Runs[0].Place
	}
	r := t.Runs[k]
	p := r.Place
	if p.Page == 0 {
		p.Offset += min(i, r.End) - r.Start
	}
	return p
}

// Between gives the place of the bytes [i, j) of S: the first byte's place with
// the union of the boxes on the first byte's page (and line, where known).
func (t *TextRun) Between(i, j int) Place {
	p := t.At(i)
	if p.Page == 0 {
		return p
	}
	k := sort.Search(len(t.Runs), func(k int) bool { return t.Runs[k].End > i })
	for ; k < len(t.Runs) && t.Runs[k].Start < j; k++ {
		q := t.Runs[k].Place
		if q.Page == p.Page && (p.Line == 0 || q.Line == p.Line) {
			p.Box = p.Box.Union(q.Box)
		}
	}
	return p
}

// Styled reports whether the byte at offset i is printed in the style kind.
func (t *TextRun) Styled(i int, kind StyleKind) bool {
	for _, s := range t.Styles {
		if s.Start > i {
			break
		}
		if s.Kind == kind && i < s.End {
			return true
		}
	}
	return false
}
