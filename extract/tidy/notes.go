package tidy

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/source"
)

// NotesFromRows moves rows at the end that hold one text over the whole width
// to the notes: there is nothing below that they could be the heading of.
func NotesFromRows(t *paper.Table, rows []Part) []Part {
	cells := rowCells(t)
	end := t.Rows
	for end > 1 && noteRow(cells[end-1], t.Cols, rows[end-1]) {
		end--
	}
	for i := end; i < t.Rows; i++ {
		t.Notes = append(t.Notes, SplitNotes(cells[i][0].Text)...)
	}
	return DropRows(t, rows, func(row int) bool { return row >= end })
}

func noteRow(row []*paper.Cell, cols int, in Part) bool {
	if in == Head || !labelOnly(row) || row[0].Col != 0 {
		return false
	}
	const long = 80 // longer than a row label without values
	return cols > 1 && row[0].ColSpan == cols || in == Foot || cols > 2 && len(row[0].Text.S) > long
}

// symbolMark is a mark that can be nothing else where a note begins.
var symbolMark = pattern.MustCompile(`^(?:\*{1,4}|[†‡§¶#‖∥⁎∗•∆Δ♦¥€$^]{1,3})`)

// SplitNotes parts a paragraph below a table into its notes. A note begins at a
// raised letter, digit or symbol, or at a symbol, that stands at the start or
// after a full stop or semicolon.
func SplitNotes(t paper.TextRun) []paper.FootNote {
	if t.S == "" {
		return nil
	}
	type begin struct{ at, end int } // mark [at, end)
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
		notes = append(notes, paper.FootNote{Text: source.Trim(source.Slice(t, 0, end))})
	}
	for k, b := range begins {
		end := len(t.S)
		if k+1 < len(begins) {
			end = begins[k+1].at
		}
		mark := strings.Trim(t.S[b.at:b.end], " .:()[],\u00A0")
		text := source.Trim(source.Slice(t, b.end, end))
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
