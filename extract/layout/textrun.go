package layout

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/layout/words"
	"halfspan/extract/paper"
)

// writer builds a TextRun line by line.
type writer struct {
	s      []byte
	runs   []paper.Run
	styles []paper.Style
	open   [paper.Italic + 1]int // 1 + index in styles of a stretch that still grows
}

// line appends a printed line. dict decides whether a hyphen at the end of the
// line before belongs to the word.
func (w *writer) line(l *line, dict map[string]bool) {
	if len(l.words) == 0 {
		return
	}
	if len(w.s) > 0 {
		switch lineEnd(w.s, l.words[0].Text, dict) {
		case drop:
			w.dropLast()
		case space:
			w.s = append(w.s, ' ')
		}
	}
	for i, word := range l.words {
		if i > 0 && !word.Glued {
			w.s = append(w.s, ' ')
		}
		w.word(l, word)
	}
}

func (w *writer) word(l *line, word *words.Word) {
	for i := range word.Glyphs {
		g := &word.Glyphs[i]
		start := len(w.s)
		w.s = append(w.s, g.Text...)
		if len(w.s) == start {
			continue
		}
		w.runs = append(w.runs, paper.Run{Start: start, End: len(w.s),
			Place: paper.Place{Page: l.page, Line: l.no, Box: g.Box, Origin: g.Origin}})
		w.style(paper.Raised, word.Shift == paper.Raised, start)
		w.style(paper.Lowered, word.Shift == paper.Lowered, start)
		w.style(paper.Bold, g.Bold, start)
		w.style(paper.Italic, g.Italic, start)
	}
}

// style notes that the bytes from start on are or are not printed in a style.
// Bold and italic go on over a space; raised and lowered end with their word.
func (w *writer) style(kind paper.StyleKind, on bool, start int) {
	if !on {
		w.open[kind] = 0
		return
	}
	if k := w.open[kind] - 1; k >= 0 {
		gap := start - w.styles[k].End
		if gap == 0 || gap == 1 && (kind == paper.Bold || kind == paper.Italic) {
			w.styles[k].End = len(w.s)
			return
		}
	}
	w.styles = append(w.styles, paper.Style{Start: start, End: len(w.s), Kind: kind})
	w.open[kind] = len(w.styles)
}

// dropLast takes back the hyphen at the end.
func (w *writer) dropLast() {
	_, n := utf8.DecodeLastRune(w.s)
	w.s = w.s[:len(w.s)-n]
	if k := len(w.runs) - 1; k >= 0 && w.runs[k].End > len(w.s) {
		w.runs[k].End = len(w.s)
		if w.runs[k].Start >= w.runs[k].End {
			w.runs = w.runs[:k]
		}
	}
	for i := range w.styles {
		w.styles[i].End = min(w.styles[i].End, len(w.s))
	}
}

func (w *writer) run() paper.TextRun {
	styles := w.styles[:0]
	for _, s := range w.styles {
		if s.Start < s.End {
			styles = append(styles, s)
		}
	}
	return paper.TextRun{S: string(w.s), Runs: w.runs, Styles: styles}
}

// What becomes of the end of a line when the next one is joined to it.
const (
	space = iota // a space is put in
	keep         // joined as it is
	drop         // joined without its hyphen
)

// lineEnd decides how a text that ends a line is joined to the next line,
// which begins with the word next. A hyphen between letters goes unless the
// paper itself prints the word with it; beside a digit it stays, and a dash
// after a number joins a range.
func lineEnd(text []byte, next string, dict map[string]bool) int {
	last, n := utf8.DecodeLastRune(text)
	before, _ := utf8.DecodeLastRune(text[:len(text)-n])
	first, _ := utf8.DecodeRuneInString(next)
	if !isHyphen(last) && !isDash(last) || before == utf8.RuneError || unicode.IsSpace(before) {
		return space
	}
	if last == '\u00AD' {
		return drop
	}
	if isDash(last) {
		if unicode.IsDigit(before) || before == '%' || unicode.IsLetter(before) {
			return keep
		}
		return space
	}
	if !unicode.IsLetter(before) || !unicode.IsLower(first) {
		return keep
	}
	head := lastWord(text[:len(text)-n])
	next, _, _ = strings.Cut(next, " ")
	tail := plainWord(next)
	switch {
	case dict[head+tail]:
		return drop
	case dict[head+"-"+tail], dict[head] && dict[tail] && len(head) > 2 && len(tail) > 2:
		return keep
	}
	return drop
}

func isHyphen(r rune) bool { return r == '-' || r == '\u2010' || r == '\u00AD' || r == '\u2011' }

func isDash(r rune) bool { return r >= '\u2012' && r <= '\u2014' || r == '\u2212' }

func lastWord(text []byte) string {
	i := len(text)
	for i > 0 {
		r, n := utf8.DecodeLastRune(text[:i])
		if !unicode.IsLetter(r) {
			break
		}
		i -= n
	}
	return strings.ToLower(string(text[i:]))
}

// plainWord is a word in lower case without what stands round its letters.
func plainWord(s string) string {
	return strings.ToLower(strings.TrimFunc(s, func(r rune) bool { return !unicode.IsLetter(r) }))
}

// learnWords collects the words that the paper prints inside its lines.
func (a *arranger) learnWords() {
	a.dict = map[string]bool{}
	for p := range a.pages {
		broken := false
		for _, l := range a.pages[p].Lines {
			for i, w := range l.Words {
				whole := i > 0 || !broken
				if i == len(l.Words)-1 {
					last, _ := utf8.DecodeLastRuneInString(w.Text)
					broken = isHyphen(last)
					whole = whole && !broken
				}
				if p := plainWord(w.Text); whole && p != "" && len(p) <= 40 {
					a.dict[p] = true
				}
			}
		}
	}
}
