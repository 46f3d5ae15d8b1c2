package grid

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// label is where a line says "Table 2" (or "Figure 2") as a caption may.
type label struct {
	seg       int // segment it stands in
	tok       int // its first token
	n         int // tokens of the label
	text      string
	figure    bool
	continued bool
	box       box // of the line from the label on
	size      int
	score     int
	alone     bool // nothing after the label on its line
}

const maxLabels = 60 // captions looked at on one page

// labels finds the captions of tables and figures on the sheet.
func (s *sheet) labels() []label {
	var out []label
	for gi := range s.segs {
		g := &s.segs[gi]
		for i := g.first; i < g.first+g.n && len(out) < maxLabels; i++ {
			if i > g.first && s.toks[i].x0-s.toks[i-1].x1 < g.size*6/10 {
				continue
			}
			l, ok := s.labelAt(i, g.first+g.n)
			if !ok {
				continue
			}
			l.seg = gi
			l.size = s.toks[i].size
			last := g.first + g.n - 1
			l.box = box{s.toks[i].x0, g.top, s.toks[last].x1, g.bot}
			s.judge(&l, g)
			if l.score >= 3 {
				out = append(out, l)
			}
			break
		}
	}
	return out
}

// prefixes are words that may stand before "Table" in a caption's label.
var prefixes = map[string]bool{
	"Supplementary": true, "Supplemental": true, "SUPPLEMENTARY": true, "SUPPLEMENTAL": true, "Appendix": true, "APPENDIX": true,
	"Additional": true, "Online": true, "Web": true, "Extended": true, "Data": true,
}

// labelAt reads a label that begins at token i, before token end: "Table 2",
// also "Supplementary Table 2".
func (s *sheet) labelAt(i, end int) (label, bool) {
	k := i
	for k < end && k < i+2 && prefixes[s.toks[k].text] {
		k++
	}
	l, ok := s.plainLabel(k, end)
	if ok && k > i {
		l.text = s.textOf(i, k) + " " + l.text
		l.tok, l.n = i, l.n+k-i
	}
	return l, ok
}

// plainLabel reads a label that begins with "Table" or "Figure" at token i.
func (s *sheet) plainLabel(i, end int) (label, bool) {
	word, k := "", i
	for k < end && k < i+4 {
		word += s.toks[k].text
		k++
		if k < end && s.toks[k].shift == 0 && (s.toks[k].glued || word == "T" && strings.HasPrefix(s.toks[k].text, "ABLE")) {
			continue
		}
		break
	}
	upper := strings.ToUpper(word)
	l := label{tok: i}
	rest := ""
	switch {
	case strings.HasPrefix(upper, "TABLE"):
		rest = word[len("TABLE"):]
	case upper == "TAB.":
	case strings.HasPrefix(upper, "FIGURE"):
		l.figure, rest = true, word[len("FIGURE"):]
	case upper == "FIG.", upper == "FIG":
		l.figure = true
	case strings.HasPrefix(upper, "FIG."):
		l.figure, rest = true, word[len("FIG."):]
	default:
		return l, false
	}
	if strings.ToLower(word[:1]) == word[:1] {
		return l, false
	}
	num := rest
	if num == "" {
		if k >= end {
			return l, false
		}
		num = s.toks[k].text
		k++
	}
	for k < end && s.toks[k].glued && s.toks[k].shift == 0 {
		num += s.toks[k].text
		k++
	}
	trimmed := strings.TrimRight(num, ".:|—–-")
	if strings.ContainsAny(num, ",;)") || !isLabelNumber(trimmed) {
		return l, false
	}
	if trimmed != num {
		l.score += 2
	}
	if k < end && (s.toks[k].text == "|" || s.toks[k].text == ":" || s.toks[k].text == ".") {
		k++
		l.score += 2
	}
	l.n, l.text = k-i, "Table "+trimmed
	l.alone = k >= end
	return l, true
}

// isLabelNumber accepts 2, 2a, S1, A1, A.1, 3.1, II.
func isLabelNumber(t string) bool {
	if t == "" || len(t) > 7 {
		return false
	}
	roman := strings.Trim(t, "IVXL") == ""
	digits, letters := 0, 0
	for _, r := range t {
		switch {
		case r >= '0' && r <= '9':
			digits++
		case unicode.IsLetter(r):
			letters++
		case r != '.' && r != '-':
			return false
		}
	}
	return roman || digits >= 1 && digits <= 4 && letters <= 2
}

// mentions are words that follow a label in a sentence, not in a caption.
var mentions = map[string]bool{
	"shows": true, "show": true, "showed": true, "presents": true, "present": true, "presented": true,
	"summarizes": true, "summarises": true, "summarized": true, "summarised": true, "lists": true, "listed": true,
	"gives": true, "provides": true, "reports": true, "describes": true, "displays": true, "displayed": true,
	"contains": true, "compares": true, "illustrates": true, "indicates": true, "demonstrates": true, "details": true,
	"and": true, "or": true, "for": true, "is": true, "are": true, "was": true, "were": true, "in": true, "to": true,
	"of": true, "below": true, "above": true, "with": true, "also": true, "reveals": true, "outlines": true,
	"as": true, "we": true, "depicts": true, "has": true, "represents": true, "summarize": true, "on": true,
	"which": true, "that": true, "suggests": true, "includes": true, "but": true, "by": true, "the": true,
}

// judge weighs whether the label begins a caption.
func (s *sheet) judge(l *label, g *segment) {
	first := &s.toks[l.tok]
	bold := true
	for i := l.tok; i < l.tok+l.n; i++ {
		bold = bold && s.toks[i].bold
	}
	if bold {
		l.score += 3
	}
	if l.alone {
		l.score += 3
	}
	next := l.tok + l.n
	if !l.alone {
		n := &s.toks[next]
		w := strings.TrimRight(n.text, ".,;:")
		low := strings.ToLower(w)
		if gap := n.x0 - s.toks[next-1].x1; gap*10 >= g.size*5 {
			l.score += 2
		}
		r, _ := utf8.DecodeRuneInString(n.text)
		switch {
		case strings.HasPrefix(strings.Trim(low, "()"), "cont"):
			l.score += 2
			l.continued = true
		case mentions[low] && w == low:
			l.score -= 5
		case unicode.IsUpper(r) || unicode.IsDigit(r):
			l.score++
		case n.text[0] == '(' || n.text[0] == ')':
			l.score -= 3
		case unicode.IsLower(r):
			l.score -= 2
		}
	} else {
		// "in" at the end of the line before: a sentence that happens to break here.
		if l.tok+l.n-1 > g.first && l.tok > g.first {
			l.score--
		}
	}
	if abs(first.size-s.bodySize)*100 > 4*s.bodySize {
		l.score++
	}
	if s.inParagraph(l, g) {
		l.score -= 4
	} else {
		l.score++
	}
	if strings.Contains(strings.ToLower(s.textOf(l.tok, g.first+g.n)), "(continued)") {
		l.continued = true
	}
}

// inParagraph reports whether the line before ends so close above, in the same
// size and at the same left edge, that the label's line goes on from it.
func (s *sheet) inParagraph(l *label, g *segment) bool {
	for gi := l.seg - 1; gi >= 0 && gi >= l.seg-12; gi-- {
		p := &s.segs[gi]
		if g.base-p.base > 2*g.size {
			return false
		}
		if g.base-p.base < g.size*6/10 || p.x1 <= l.box.x0 || p.x0 >= l.box.x1 {
			continue
		}
		if abs(p.size-l.size)*100 > 4*l.size || g.base-p.base > l.size*16/10 {
			return false
		}
		last := s.toks[p.first+p.n-1].text
		full := p.x1-p.x0 >= 12*l.size && p.n >= 4 && abs(p.x0-l.box.x0) <= 2*l.size
		return full && !strings.HasSuffix(last, ".")
	}
	return false
}

// textOf joins tokens [i, j) for looking at their words.
func (s *sheet) textOf(i, j int) string {
	var b strings.Builder
	for ; i < j; i++ {
		if b.Len() > 0 && !s.toks[i].glued {
			b.WriteByte(' ')
		}
		b.WriteString(s.toks[i].text)
	}
	return b.String()
}

func abs(x int) int {
	if x < 0 {
		return -x
	}
	return x
}
