package jats

import (
	"regexp"
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
)

// footNotes reads the notes below a table: <fn> with a label or with a raised
// mark in front, plain paragraphs, and paragraphs that hold several notes.
func (r *reader) footNotes(wrap *node) []paper.FootNote {
	var notes []paper.FootNote
	var read func(*node)
	read = func(n *node) {
		switch n.name {
		case "", "permissions":
		case "fn":
			notes = append(notes, r.footNote(n)...)
		case "table-wrap-foot", "fn-group":
			for _, k := range n.kids {
				read(k)
			}
		default:
			t, floats := r.textAndFloats(n)
			notes = append(notes, splitNotes(t)...)
			for _, f := range floats {
				read(f)
			}
		}
	}
	for _, k := range wrap.kids {
		switch k.name {
		case "table-wrap-foot", "attrib", "p", "fn-group":
			read(k)
		}
	}
	notes = append(notes, r.cellNotes...)
	r.cellNotes = nil
	return notes
}

// footNote reads one <fn>: several paragraphs may be several notes.
func (r *reader) footNote(n *node) []paper.FootNote {
	mark := strings.Trim(r.text(n.child("label")).S, " .:()[]")
	if mark == "" {
		mark = n.get("symbol")
	}
	var notes []paper.FootNote
	rest := &node{name: "fn"}
	for _, k := range n.kids {
		switch k.name {
		case "label":
		case "p":
			notes = append(notes, splitNotes(r.text(k))...)
		default:
			rest.kids = append(rest.kids, k)
		}
	}
	notes = append(notes, splitNotes(r.text(rest))...)
	if mark != "" && len(notes) > 0 && notes[0].Mark == "" {
		notes[0].Mark = mark
	}
	return notes
}

// symbolMark is a mark that can be nothing else where a note begins.
var symbolMark = regexp.MustCompile(`^(?:\*{1,4}|[†‡§¶#‖∥⁎∗•∆Δ♦¥€$^]{1,3})`)

// splitNotes parts a paragraph below a table into its notes. A note begins at a
// raised letter, digit or symbol, or at a symbol, that stands at the start or
// after a full stop or semicolon.
func splitNotes(t paper.TextRun) []paper.FootNote {
	if t.S == "" {
		return nil
	}
	type begin struct{ at, text, end int } // mark [at, end), note from text on
	var begins []begin
	for i := 0; i < len(t.S); {
		if i == 0 || noteMayBegin(t.S[:i]) {
			if end := markEnd(&t, i); end > i {
				begins = append(begins, begin{at: i, end: end})
				i = end
				continue
			}
		}
		_, w := utf8.DecodeRuneInString(t.S[i:])
		i += w
	}
	var notes []paper.FootNote
	if len(begins) == 0 || begins[0].at > 0 {
		end := len(t.S)
		if len(begins) > 0 {
			end = begins[0].at
		}
		notes = append(notes, paper.FootNote{Text: trim(slice(t, 0, end))})
	}
	for k, b := range begins {
		end := len(t.S)
		if k+1 < len(begins) {
			end = begins[k+1].at
		}
		mark := strings.Trim(t.S[b.at:b.end], " .:()[],\u00A0")
		text := trim(slice(t, b.end, end))
		if text.S == "" && k+1 < len(begins) {
			continue
		}
		notes = append(notes, paper.FootNote{Mark: mark, Text: text})
	}
	return notes
}

// noteMayBegin reports whether a new note may stand after this text.
func noteMayBegin(before string) bool {
	trimmed := strings.TrimRightFunc(before, unicode.IsSpace)
	if trimmed == "" || strings.HasSuffix(before, "\n") {
		return true
	}
	return len(trimmed) < len(before) && strings.ContainsAny(trimmed[len(trimmed)-1:], ".;:,")
}

// markEnd gives the end of the footnote mark that begins at i, i if none does.
func markEnd(t *paper.TextRun, i int) int {
	if t.Styled(i, paper.Raised) {
		end := i
		for end < len(t.S) && (t.Styled(end, paper.Raised) || end > i && t.S[end] == ',') {
			end++
		}
		for end > i && !utf8.RuneStart(t.S[min(end, len(t.S)-1)]) && end < len(t.S) {
			end++
		}
		if utf8.RuneCountInString(t.S[i:end]) <= 4 {
			return end
		}
		return i
	}
	if loc := symbolMark.FindStringIndex(t.S[i:]); loc != nil {
		return i + loc[1]
	}
	return i
}
