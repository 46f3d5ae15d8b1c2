package table

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// note is one footnote, or a remark in the caption that a mark leads to.
type note struct {
	mark string
	run  *paper.TextRun
	from string // in words: "footnote a", "note", "caption"
}

// notes are the notes of one table.
type notes struct {
	list  []note
	known map[string]bool
	vocab *vocabulary
}

func newNotes(t *paper.Table, v *vocabulary) *notes {
	n := &notes{known: map[string]bool{}, vocab: v}
	for i := range t.Notes {
		fn := &t.Notes[i]
		mark := strings.Trim(clean(fn.Mark), " .:)(")
		from := "note below the table"
		if mark != "" {
			from = "footnote " + mark
			n.known[mark] = true
		}
		if mark == "" {
			n.splitMarked(&fn.Text)
			continue
		}
		own, rest := splitGeneral(&fn.Text)
		n.list = append(n.list, note{mark, own, from})
		if rest != nil {
			n.list = append(n.list, note{"", rest, "note below the table"})
		}
	}
	if mark, run := captionNote(&t.Caption); mark != "" {
		n.list = append(n.list, note{mark, run, "caption"})
		n.known[mark] = true
	}
	return n
}

var generalSentence = pattern.MustCompile(`[.;]\s+((?:All )?(?:[Dd]ata|[Vv]alues|[Rr]esults|[Nn]umbers|[Ff]igures)\s+(?:are|were|is)\b[^.;]*\b(?:unless|except|otherwise|n ?\(%\)|frequenc|numbers? \(|percent))`)

// splitGeneral parts "*Median. Values are mean ± SD unless otherwise stated",
// where only the first sentence belongs to the mark.
func splitGeneral(t *paper.TextRun) (*paper.TextRun, *paper.TextRun) {
	m := generalSentence.FindStringSubmatchIndex(t.S)
	if m == nil {
		return t, nil
	}
	own, rest := slice(t, 0, m[2]), slice(t, m[2], len(t.S))
	return &own, &rest
}

var markEquals = pattern.MustCompile(`^\s*([a-z]|[*†‡§#¶]{1,3})\s*(?:=|:)\s+`)

// splitMarked parts a note that holds others: "Values are means. a = adjusted".
func (n *notes) splitMarked(t *paper.TextRun) {
	var cuts []grammar.Span
	var marks []string
	for _, sp := range segments(t.S) {
		if m := markEquals.FindStringSubmatch(t.S[sp.Start:sp.End]); m != nil {
			cuts = append(cuts, sp)
			marks = append(marks, m[1])
			n.known[m[1]] = true
		}
	}
	if len(cuts) == 0 {
		n.list = append(n.list, note{"", t, "note below the table"})
		return
	}
	if cuts[0].Start > 0 {
		head := slice(t, 0, cuts[0].Start)
		n.list = append(n.list, note{"", &head, "note below the table"})
	}
	for i, c := range cuts {
		end := len(t.S)
		if i+1 < len(cuts) {
			end = cuts[i+1].Start
		}
		part := slice(t, c.Start, end)
		n.list = append(n.list, note{marks[i], &part, "footnote " + marks[i]})
	}
}

// captionNote finds a remark with a mark in a caption: "(* values are mean ± SD)".
func captionNote(c *paper.TextRun) (string, *paper.TextRun) {
	for _, m := range []string{"*", "†", "‡", "§"} {
		for _, open := range []string{"(" + m, "[" + m, ". " + m, "; " + m} {
			if i := strings.Index(c.S, open); i >= 0 && i+len(open) < len(c.S) {
				run := slice(c, i+len(open), len(c.S))
				return m, &run
			}
		}
	}
	return "", nil
}

// slice cuts bytes [i, j) out of a text, with their places.
func slice(t *paper.TextRun, i, j int) paper.TextRun {
	out := paper.TextRun{S: t.S[i:j]}
	for _, r := range t.Runs {
		s, e := max(r.Start, i), min(r.End, j)
		if s >= e {
			continue
		}
		p := t.At(s)
		out.Runs = append(out.Runs, paper.Run{Start: s - i, End: e - i, Place: p})
	}
	for _, st := range t.Styles {
		s, e := max(st.Start, i), min(st.End, j)
		if s < e {
			out.Styles = append(out.Styles, paper.Style{Start: s - i, End: e - i, Kind: st.Kind})
		}
	}
	return out
}

// marked gives the notes that the mark leads to.
func (n *notes) marked(mark string) []note {
	var out []note
	for _, x := range n.list {
		if x.mark != "" && x.mark == mark {
			out = append(out, x)
		}
	}
	return out
}

// general gives the notes that no mark leads to.
func (n *notes) general() []note {
	var out []note
	for _, x := range n.list {
		if x.mark == "" {
			out = append(out, x)
		}
	}
	return out
}

// unitsBefore are letters after which a raised digit is a power.
var unitsBefore = map[string]bool{"m": true, "cm": true, "mm": true, "dm": true, "km": true, "s": true, "min": true, "h": true,
	"x10": true, "10": true, "in": true, "ft": true, "µm": true, "μm": true, "r": true, "chi": true, "χ": true, "x": true, "i": true, "t": true}

// split takes the marks that lead to notes out of a text.
func (n *notes) split(t *paper.TextRun) (string, []string) {
	var b strings.Builder
	var marks []string
	s := t.S
	for i := 0; i < len(s); {
		if t.Styled(i, paper.Raised) {
			end := i
			for end < len(s) && t.Styled(end, paper.Raised) {
				end++
			}
			raised := clean(s[i:end])
			if ms := n.raisedMarks(raised, b.String()); ms != nil {
				marks = append(marks, ms...)
			} else {
				b.WriteString(s[i:end])
			}
			i = end
			continue
		}
		r, size := utf8.DecodeRuneInString(s[i:])
		if strings.ContainsRune(markSigns, r) && r != '#' && r != '$' && r != '^' || r == '#' && (b.Len() > 0 || n.known["#"]) && !nextDigit(s[i+size:]) {
			end := i + size
			for end < len(s) {
				r2, size2 := utf8.DecodeRuneInString(s[end:])
				if !strings.ContainsRune(markSigns, r2) || r2 == '$' {
					break
				}
				end += size2
			}
			if r == '*' && end < len(s) && b.Len() > 0 && nextLetter(s[end:]) && !n.known[s[i:end]] && s[i-1] != ' ' {
				b.WriteString(s[i:end]) // kg*m: a product
			} else {
				marks = append(marks, s[i:end])
			}
			i = end
			continue
		}
		if i > 0 && t.Styled(i-1, paper.Lowered) && !t.Styled(i, paper.Lowered) && lettersAhead(s[i:]) {
			b.WriteByte(' ') // AUC with its subscript runs into the next word
		}
		b.WriteString(s[i : i+size])
		i += size
	}
	text := clean(b.String())
	if m := n.gluedMark(text); m != "" {
		marks = append(marks, m)
		text = strings.TrimSpace(text[:len(text)-len(m)])
	}
	return text, marks
}

// lettersAhead reports that a word of two or more letters begins here.
func lettersAhead(s string) bool {
	k := 0
	for _, r := range s {
		if !unicode.IsLetter(r) {
			break
		}
		if k++; k >= 2 {
			return true
		}
	}
	return false
}

func nextDigit(s string) bool { return s != "" && s[0] >= '0' && s[0] <= '9' }

func nextLetter(s string) bool {
	r, _ := utf8.DecodeRuneInString(s)
	return unicode.IsLetter(r)
}

// raisedMarks reads a superscript as marks; nil where it is a power, an ordinal
// ending or a citation of no note.
func (n *notes) raisedMarks(raised, before string) []string {
	parts := strings.FieldsFunc(raised, func(r rune) bool { return r == ',' || r == ' ' || r == ';' })
	if len(parts) == 0 {
		return []string{}
	}
	tail := strings.ToLower(before)
	if k := strings.LastIndexFunc(tail, func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsDigit(r) }); k >= 0 {
		_, size := utf8.DecodeRuneInString(tail[k:])
		tail = tail[k+size:]
	}
	digits := true
	for _, p := range parts {
		if !hasDigit(p) || hasLetter(p) {
			digits = false
		}
		known := n.known[p]
		symbol := strings.Trim(p, markSigns+"∥•∆Δ♦") == ""
		letter := utf8.RuneCountInString(p) == 1 && hasLetter(p)
		if !known && !symbol && !letter && !n.knownLetters(p) {
			return nil
		}
	}
	if digits && unitsBefore[tail] {
		return nil
	}
	return parts
}

// knownLetters reports that every letter of p is a mark: "ab" for a and b.
func (n *notes) knownLetters(p string) bool {
	for _, r := range p {
		if !n.known[string(r)] {
			return false
		}
	}
	return p != ""
}

// gluedMark finds a letter or digit at the end of a heading that is a mark whose
// raising was lost on the way: "Main analysisa" where the paper's text knows
// "analysis" but no "analysisa".
func (n *notes) gluedMark(text string) string {
	if text == "" || n.vocab == nil {
		return ""
	}
	r, size := utf8.DecodeLastRuneInString(text)
	m := string(r)
	if !n.known[m] || !unicode.IsLetter(r) && !unicode.IsDigit(r) {
		return ""
	}
	before := text[:len(text)-size]
	last, _ := utf8.DecodeLastRuneInString(before)
	switch {
	case last == ')' || last == ']' || last == '%':
		return m
	case !unicode.IsLetter(last):
		return ""
	}
	ws := words(text)
	if len(ws) == 0 {
		return ""
	}
	word := ws[len(ws)-1]
	stem := strings.TrimSuffix(word, strings.ToLower(m))
	if stem != word && n.vocab.knows(stem) && !n.vocab.knows(word) {
		return m
	}
	return ""
}
