package grammar

import (
	"halfspan/extract/pattern"
	"strings"
	"unicode"
	"unicode/utf8"
)

// number reads one unsigned number: digits, thousands groups, one decimal mark,
// an exponent. Two misprints that are common are read and marked as mended: a
// doubled point and a space after the point of "0. 92".
func (l *lexer) number() {
	n := numberReader{s: l.s, pos: l.pos, stop: l.stop(), comma: l.comma, mixed: l.mixed && !l.inList()}
	kind := n.read(len(l.toks) == 0 || l.spaced)
	l.emit(kind, n.pos, n.value.String())
	l.toks[len(l.toks)-1].Mended = n.mended
}

type numberReader struct {
	s         string
	pos, stop int
	comma     bool
	mixed     bool
	value     strings.Builder
	mended    bool
}

func (n *numberReader) digitAt(i int) bool { return i < n.stop && isDigit(rune(n.s[i])) }

// digits copies a run of digits; characters of no width inside it are skipped.
func (n *numberReader) digits() int {
	count := 0
	for n.pos < n.stop {
		if n.digitAt(n.pos) {
			n.value.WriteByte(n.s[n.pos])
			n.pos++
			count++
			continue
		}
		r, size := utf8.DecodeRuneInString(n.s[n.pos:])
		if (r == '\u200b' || r == '\u00ad') && count > 0 && n.digitAt(n.pos+size) {
			n.pos += size
			continue
		}
		break
	}
	return count
}

func (n *numberReader) read(spaced bool) TokenKind {
	whole := n.digits()
	if whole >= 1 && whole <= 3 && n.value.String() != "0" {
		n.thousands()
	}
	if !n.fraction() && n.value.String() == "0" && spaced {
		n.spacedFraction()
	}
	if n.another() {
		for n.another() {
			_, size := utf8.DecodeRuneInString(n.s[n.pos:])
			n.pos += size
			n.digits()
		}
		n.value.Reset()
		return TokCode
	}
	n.exponent()
	return TokNumber
}

// group reports whether exactly three digits begin at i.
func (n *numberReader) group(i int) bool {
	return n.digitAt(i) && n.digitAt(i+1) && n.digitAt(i+2) && !n.digitAt(i+3)
}

// thousands joins 1,234,567 and, with a thin or no-break space, 23 815.
func (n *numberReader) thousands() {
	var mark rune
	for {
		r, size := utf8.DecodeRuneInString(n.s[n.pos:])
		if n.pos >= n.stop || !n.group(n.pos+size) || mark != 0 && r != mark {
			return
		}
		switch r {
		case ',':
			if n.comma && mark == 0 {
				return
			}
		case '\u2009', '\u202f', '\u200a', '\u2008', '\'', '’':
		default:
			return
		}
		mark = r
		n.pos += size
		n.digits()
	}
}

func (n *numberReader) fraction() bool {
	if n.pos >= n.stop {
		return false
	}
	r, size := utf8.DecodeRuneInString(n.s[n.pos:])
	switch {
	case middleDot(r) && tenPower(n.s, n.pos+size, n.stop, true):
		return false
	case isPoint(r) && n.digitAt(n.pos+size):
	case r == ',' && n.comma && n.digitAt(n.pos+size):
	case r == ',' && n.mixed && n.loneFraction(n.pos+size):
		n.mended = true
	case isPoint(r) && n.value.Len() > 0 && strings.HasPrefix(n.s[n.pos+size:], string(r)) && n.digitAt(n.pos+2*size):
		size *= 2
		n.mended = true
	default:
		return false
	}
	n.pos += size
	n.value.WriteByte('.')
	n.digits()
	return true
}

// spacedFraction reads "0. 92", where a sentence can hardly end.
func (n *numberReader) spacedFraction() {
	rest := n.s[n.pos:n.stop]
	if !strings.HasPrefix(rest, ". ") || !n.digitAt(n.pos+2) {
		return
	}
	n.pos += 2
	n.value.WriteByte('.')
	n.digits()
	n.mended = true
}

// another reports a further point and digit: 1.2.3 is a version or a date.
func (n *numberReader) another() bool {
	if n.pos >= n.stop || !strings.ContainsRune(n.value.String(), '.') && n.value.Len() > 0 {
		return false
	}
	r, size := utf8.DecodeRuneInString(n.s[n.pos:])
	return isPoint(r) && n.digitAt(n.pos+size) && !(middleDot(r) && tenPower(n.s, n.pos+size, n.stop, false))
}

// exponent reads E-notation: 2.1E-5.
func (n *numberReader) exponent() {
	i := n.pos
	if i >= n.stop || n.s[i] != 'E' && n.s[i] != 'e' {
		return
	}
	i++
	sign := ""
	if r, size := utf8.DecodeRuneInString(n.s[i:]); i < n.stop && (isDash(r) || r == '+') {
		i += size
		if r != '+' {
			sign = "-"
		}
	}
	if !n.digitAt(i) {
		return
	}
	end := i
	for n.digitAt(end) {
		end++
	}
	if r, _ := utf8.DecodeRuneInString(n.s[end:]); end < n.stop && unicode.IsLetter(r) {
		return
	}
	n.value.WriteString("e" + sign + n.s[i:end])
	n.pos = end
}

// leavesNoChoice reports whether the text must print decimal commas: it has
// numbers with a comma outside all brackets, none with a point, and a spread or
// bracket beside them ("1,2 (0,9; 1,6)", "12,4 ± 1,3").
func leavesNoChoice(s string) bool {
	depth, outside, spread := 0, 0, false
	for i := 0; i < len(s); i++ {
		switch c := s[i]; {
		case c == '(' || c == '[':
			depth++
			spread = true
		case c == ')' || c == ']':
			depth--
		case c == 0xb1: // second byte of ±
			spread = true
		case (c == '.' || c == 0xb7) && i+1 < len(s) && isDigit(rune(s[i+1])):
			return false
		case c == ',' && i > 0 && isDigit(rune(s[i-1])) && i+1 < len(s) && isDigit(rune(s[i+1])):
			if depth == 0 && (!threeDigits(s[i+1:]) || s[i-1] == '0' && (i == 1 || !isDigit(rune(s[i-2])))) {
				outside++
			}
		}
	}
	return outside > 0 && spread
}

// besides is a value with a decimal comma and one more in the spread behind it:
// "8,1 mg/mL (95% CI 7,2 to 9,0", "8,1 ± 1,3".
var besides = pattern.MustCompile(`(?:^|[\s=])[0-9]{1,3},[0-9]{1,2}(?:\s?[A-Za-zµμ%°]+(?:/[A-Za-z]+)?)?\s*(?:±\s*|[(\[](?:[^()\[\]]{0,30}[^()\[\],.0-9])?)[0-9]{1,3},[0-9]{1,2}(?:[^0-9,.]|[,.](?:\s|$)|$)`)

// commasBesidePoints reports that a text prints decimal commas though it has
// decimal points too.
func commasBesidePoints(s string) bool {
	for i := 1; i+1 < len(s); i++ {
		if s[i] == ',' && isDigit(rune(s[i-1])) && isDigit(rune(s[i+1])) && !threeDigits(s[i+1:]) {
			return besides.MatchString(s)
		}
	}
	return false
}

// inList reports that the number to come is a further one of a list without
// spaces, or the degrees of freedom of a test: "12,14,17", "F(2,58)".
func (l *lexer) inList() bool {
	k := len(l.toks) - 1
	if k < 0 || l.spaced {
		return false
	}
	switch l.toks[k].Kind {
	case TokComma:
		return true
	case TokOpen:
		return k > 0 && l.toks[k-1].Kind == TokWord && len(l.toks[k-1].Value) == 1
	}
	return false
}

// loneFraction reports one or two digits at i that end the number, and no list.
func (n *numberReader) loneFraction(i int) bool {
	if n.value.Len() > 3 || strings.Contains(n.value.String(), ".") || !n.digitAt(i) {
		return false
	}
	for i++; n.digitAt(i); i++ {
		if n.digitAt(i - 2) {
			return false
		}
	}
	return !(i+1 < n.stop && (n.s[i] == ',' || n.s[i] == '.') && n.digitAt(i+1))
}

func threeDigits(s string) bool {
	n := 0
	for n < len(s) && isDigit(rune(s[n])) {
		n++
	}
	return n == 3
}

// DecimalMarks counts the numbers of s that have a comma, and those that have a
// point, where only a decimal mark can stand; a reader of a whole paper sets
// Text.DecimalComma where commas clearly prevail.
func DecimalMarks(s string) (commas, points int) {
	for i := 1; i+1 < len(s); i++ {
		if !isDigit(rune(s[i-1])) || !isDigit(rune(s[i+1])) {
			continue
		}
		switch s[i] {
		case ',':
			if !threeDigits(s[i+1:]) {
				commas++
			}
		case '.':
			points++
		}
	}
	return commas, points
}
