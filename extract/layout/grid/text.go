package grid

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/layout/words"
	"halfspan/extract/paper"
	"halfspan/extract/tidy"
)

// writer makes TextRuns with places.
type writer struct {
	sheet *sheet
	page  int
}

// pageOf is the page of a token: its sheet's, where that is known.
func (w *writer) pageOf(t *tok) int {
	if t.page != 0 {
		return int(t.page)
	}
	return w.page
}

// caption is the caption's text without its label.
func (w *writer) caption(r *Region) paper.TextRun {
	var toks [][]int
	for i := range r.caption {
		ts := r.caption[i].toks
		if i == 0 {
			kept := ts[:0:0]
			for _, t := range ts {
				if t < r.label.tok || t >= r.label.tok+r.label.n {
					kept = append(kept, t)
				}
			}
			ts = kept
		}
		if len(ts) > 0 {
			toks = append(toks, ts)
		}
	}
	return w.text(toks)
}

// notes cuts the note lines into notes by their marks.
func (w *writer) notes(lines []line) []paper.FootNote {
	var out []paper.FootNote
	var cur [][]int
	flush := func() {
		if len(cur) > 0 {
			out = append(out, tidy.SplitNotes(w.text(cur))...)
		}
		cur = nil
	}
	for i := range lines {
		first := &w.sheet.toks[lines[i].toks[0]]
		if first.shift == paper.Raised || strings.Trim(first.text, "*†‡§¶#‖|∗") == "" {
			flush()
		}
		cur = append(cur, lines[i].toks)
	}
	flush()
	return out
}

// text makes a TextRun of tokens by line: words joined by one space where they
// are not glued, hyphenated line ends joined.
func (w *writer) text(lines [][]int) paper.TextRun {
	b := textBuilder{dict: w.sheet.words}
	for li, toks := range lines {
		for k, i := range toks {
			t := &w.sheet.toks[i]
			switch {
			case len(b.S) == 0:
			case k == 0 && li > 0:
				b.lineEnd(t.text)
			case k > 0 && !t.glued:
				b.S = append(b.S, ' ')
			}
			b.Word(t.w, w.pageOf(t), int(t.line)+1)
		}
	}
	return b.Run()
}

// textBuilder grows a TextRun line by line.
type textBuilder struct {
	words.Text
	dict map[string]bool // the paper's words, in lower case
}

// lineEnd joins the text to its next line, which begins with the word next: by
// a space, or directly after the dash of a range and after a hyphen. A hyphen
// between letters is kept where the paper prints its parts as words of their
// own, and taken back where it prints the whole as one.
func (b *textBuilder) lineEnd(next string) {
	last, n := utf8.DecodeLastRune(b.S)
	body := b.S[:len(b.S)-n]
	before, _ := utf8.DecodeLastRune(body)
	first := firstRune(next)
	dash := last >= '\u2012' && last <= '\u2014' || last == '\u2212'
	hyphen := last == '-' || last == '\u2010' || last == '\u2011' || last == '\u00AD'
	switch {
	case len(body) == 0 || before == ' ' || !dash && !hyphen:
		b.S = append(b.S, ' ')
	case last == '\u00AD':
		b.DropLast()
	case unicode.IsDigit(before) && unicode.IsDigit(first), before == '%':
	case dash && unicode.IsLetter(before) && unicode.IsLetter(first):
	case !hyphen || !unicode.IsLetter(before):
		b.S = append(b.S, ' ')
	case !unicode.IsLower(first):
	case b.oneWord(string(body), next):
		b.DropLast()
	}
}

// oneWord reports whether a word that a hyphen breaks is printed without one.
func (b *textBuilder) oneWord(body, next string) bool {
	k := strings.LastIndexFunc(body, func(r rune) bool { return !unicode.IsLetter(r) })
	head, tail := strings.ToLower(body[k+1:]), plainWord(next)
	if b.dict[head+tail] {
		return true
	}
	return !(b.dict[head] && len(head) > 2 && b.dict[tail] && len(tail) > 2)
}

// plainWord is a word in lower case without what stands round its letters.
func plainWord(s string) string {
	return strings.ToLower(strings.TrimFunc(s, func(r rune) bool { return !unicode.IsLetter(r) }))
}

// learn collects the words that the sheets print whole.
func learn(sheets []Sheet) map[string]bool {
	out := map[string]bool{}
	for i := range sheets {
		for li := range sheets[i].Frame.Lines {
			ws := sheets[i].Frame.Lines[li].Words
			for k := range ws {
				if p := plainWord(ws[k].Text); p != "" && len(p) <= 40 && (k > 0 || len(p) > 4) && !(k == len(ws)-1 && lastRune(ws[k].Text) == '-') {
					out[p] = true
				}
			}
		}
	}
	return out
}
