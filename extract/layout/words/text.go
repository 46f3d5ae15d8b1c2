package words

import (
	"slices"
	"unicode/utf8"

	"halfspan/extract/paper"
)

// Text grows a TextRun word by word. What stands between words is for the caller to
// append to S.
type Text struct {
	S      []byte // what has been written
	runs   []paper.Run
	styles []paper.Style
	open   [paper.Italic + 1]int // 1 + index in styles of a stretch that still grows
}

// Grow makes room for as many bytes and glyphs.
func (t *Text) Grow(bytes, glyphs int) {
	t.S, t.runs = slices.Grow(t.S, bytes), slices.Grow(t.runs, glyphs)
}

// Word appends the glyphs of a word on a line of a page, both counted from 1.
func (t *Text) Word(w *Word, page, line int) {
	for i := range w.Glyphs {
		g := &w.Glyphs[i]
		start := len(t.S)
		t.S = append(t.S, g.Text...)
		if len(t.S) == start {
			continue
		}
		t.runs = append(t.runs, paper.Run{Start: start, End: len(t.S),
			Place: paper.Place{Page: page, Line: line, Box: g.Box, Origin: g.Origin}})
		t.style(paper.Raised, w.Shift == paper.Raised, start)
		t.style(paper.Lowered, w.Shift == paper.Lowered, start)
		t.style(paper.Bold, g.Bold, start)
		t.style(paper.Italic, g.Italic, start)
	}
}

// style notes that the bytes from start on are or are not printed in a style.
// Bold and italic go on over a space; raised and lowered end with their word.
func (t *Text) style(kind paper.StyleKind, on bool, start int) {
	if !on {
		t.open[kind] = 0
		return
	}
	if k := t.open[kind] - 1; k >= 0 {
		gap := start - t.styles[k].End
		if gap == 0 || gap == 1 && (kind == paper.Bold || kind == paper.Italic) {
			t.styles[k].End = len(t.S)
			return
		}
	}
	t.styles = append(t.styles, paper.Style{Start: start, End: len(t.S), Kind: kind})
	t.open[kind] = len(t.styles)
}

// DropLast takes back the last character: the hyphen of a line's end.
func (t *Text) DropLast() {
	_, n := utf8.DecodeLastRune(t.S)
	t.S = t.S[:len(t.S)-n]
	if k := len(t.runs) - 1; k >= 0 && t.runs[k].End > len(t.S) {
		t.runs[k].End = len(t.S)
		if t.runs[k].Start >= t.runs[k].End {
			t.runs = t.runs[:k]
		}
	}
	for i := range t.styles {
		t.styles[i].End = min(t.styles[i].End, len(t.S))
	}
}

// Run is the text with the place and style of each part.
func (t *Text) Run() paper.TextRun {
	styles := t.styles[:0]
	for _, s := range t.styles {
		if s.Start < s.End {
			styles = append(styles, s)
		}
	}
	return paper.TextRun{S: string(t.S), Runs: t.runs, Styles: styles}
}
