package layout

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/layout/words"
)

// writer builds a TextRun line by line.
type writer struct{ words.Text }

// line appends a printed line. dict decides whether a hyphen at the end of the
// line before belongs to the word.
func (w *writer) line(l *line, dict map[string]bool) {
	if len(l.words) == 0 {
		return
	}
	if len(w.S) > 0 {
		switch lineEnd(w.S, l.words[0].Text, dict) {
		case drop:
			w.DropLast()
		case space:
			w.S = append(w.S, ' ')
		}
	}
	for i, word := range l.words {
		if i > 0 && !word.Glued {
			w.S = append(w.S, ' ')
		}
		w.Word(word, l.page, l.no)
	}
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
