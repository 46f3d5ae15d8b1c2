package table

import (
	"strings"
	"unicode"

	"halfspan/extract/paper"
)

// clean gives printed text for comparing and for records: every kind of space
// and line break becomes one plain space, characters of no width vanish.
func clean(s string) string {
	if isClean(s) {
		return s
	}
	var b strings.Builder
	b.Grow(len(s))
	gap := false
	for _, r := range s {
		switch {
		case r >= '\u200b' && r <= '\u200f' || r == '\u00ad' || r == '\ufeff' || r == '\u2060':
			continue
		case unicode.IsSpace(r):
			gap = b.Len() > 0
			continue
		}
		if gap {
			b.WriteByte(' ')
			gap = false
		}
		b.WriteRune(r)
	}
	return b.String()
}

// isClean reports plain text in which single spaces part the words.
func isClean(s string) bool {
	space := true
	for i := 0; i < len(s); i++ {
		c := s[i]
		switch {
		case c == ' ':
			if space {
				return false
			}
			space = true
		case c < ' ' || c >= 0x80:
			return false
		default:
			space = false
		}
	}
	return !space || s == ""
}

// fold is clean in lower case, with typographic variants that carry no meaning
// made alike: for looking words up.
func fold(s string) string {
	return strings.Map(func(r rune) rune {
		switch r {
		case '‐', '‑', '‒', '–', '—', '−':
			return '-'
		case '’', '‘':
			return '\''
		case '“', '”':
			return '"'
		}
		return unicode.ToLower(r)
	}, clean(s))
}

// words cuts text into lower-case words of letters and digits.
func words(s string) []string {
	return strings.FieldsFunc(fold(s), func(r rune) bool {
		return !unicode.IsLetter(r) && !unicode.IsDigit(r)
	})
}

const markSigns = "*†‡§¶#∗‖$^"

// label is the text of a heading cell without the marks that lead to notes.
type label struct {
	text  string // cleaned, marks taken out
	raw   string // cleaned, as printed
	marks []string
	cell  *paper.Cell
}

func (l label) empty() bool { return l.text == "" }

// isBlankText reports a cell that is left blank: nothing, or a lone dot put in
// as a filler. A dash says that there is no value and is not blank.
func isBlankText(s string) bool {
	switch clean(s) {
	case "", ".", "…", "...", "&nbsp;", "_":
		return true
	}
	return false
}

// hasLetter reports whether s holds any letter.
func hasLetter(s string) bool { return strings.IndexFunc(s, unicode.IsLetter) >= 0 }

// hasDigit reports whether s holds any digit.
func hasDigit(s string) bool { return strings.IndexFunc(s, unicode.IsDigit) >= 0 }

// joinPath joins the parts of a heading path, leaving out repeats.
func joinPath(parts []string, sep string) string {
	var out []string
	for _, p := range parts {
		if p == "" || len(out) > 0 && strings.EqualFold(out[len(out)-1], p) {
			continue
		}
		out = append(out, p)
	}
	return strings.Join(out, sep)
}

// shorten cuts s to at most n bytes at a rune boundary.
func shorten(s string, n int) string {
	if len(s) <= n {
		return s
	}
	for n > 0 && s[n]&0xc0 == 0x80 {
		n--
	}
	return s[:n]
}
