package grammar

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"golang.org/x/text/unicode/norm"
)

// Lex cuts the text into tokens. White space, zero-width characters and soft
// hyphens stand in no token; every other byte does, so the tokens and the
// skipped space rebuild the text.
func Lex(in Text) []Token {
	l := lexer{in: in, s: in.S, comma: in.DecimalComma || leavesNoChoice(in.S)}
	l.mixed = !l.comma && commasBesidePoints(in.S)
	l.toks = make([]Token, 0, len(in.S)/4+4)
	for l.pos < len(l.s) {
		l.next()
	}
	return l.toks
}

type lexer struct {
	in     Text
	s      string
	pos    int
	spaced bool // space was skipped since the last token
	comma  bool // a comma between digits is a decimal mark
	mixed  bool // one may be, beside points
	raised int  // index of the first raised span that may still come
	low    int
	toks   []Token
}

// isBlank reports white space and characters of no width. U+0085 and line
// separators count as breaks, not here.
func isBlank(r rune) bool {
	switch r {
	case '\n', '\u2028', '\u2029':
		return false
	case '\u200b', '\u200c', '\u200d', '\u200e', '\u200f', '\u2060', '\ufeff', '\u00ad':
		return true
	}
	return unicode.IsSpace(r)
}

// dashes are the code points that papers print for a minus or a range dash.
const dashes = "-\u00ad\u2010\u2011\u2012\u2013\u2014\u2015\u2212\ufe58\ufe63\uff0d\uf02d\u02d7"

func isDash(r rune) bool { return r != '\u00ad' && strings.ContainsRune(dashes, r) }

// points are the marks that papers print for a decimal point.
const points = ".\u00b7\u2219\u2022\u02d9\u22c5\uff0e"

func isPoint(r rune) bool { return strings.ContainsRune(points, r) }

func isDigit(r rune) bool { return r >= '0' && r <= '9' }

var single = map[rune]TokenKind{
	'+': TokPlus, '±': TokPlusMinus, '\uf0b1': TokPlusMinus, '∓': TokPlusMinus, '\u02d8': TokPlusMinus,
	'~': TokTilde, '∼': TokTilde, '÷': TokTilde, '～': TokTilde,
	'(': TokOpen, '[': TokOpen, '{': TokOpen, '（': TokOpen, '［': TokOpen,
	')': TokClose, ']': TokClose, '}': TokClose, '）': TokClose, '］': TokClose,
	',': TokComma, '，': TokComma, ';': TokSemicolon, '；': TokSemicolon, ':': TokColon, '：': TokColon, '∶': TokColon,
	'.': TokPeriod, '。': TokPeriod, '/': TokSlash, '∕': TokSlash, '⁄': TokSlash,
	'%': TokPercent, '‰': TokPercent, '٪': TokPercent, '％': TokPercent,
	'=': TokEquals, '\u00bc': TokEquals, '\uf03d': TokEquals, '＝': TokEquals,
	'<': TokLess, '≤': TokLess, '⩽': TokLess, '＜': TokLess, '≦': TokLess,
	'>': TokGreater, '≥': TokGreater, '⩾': TokGreater, '＞': TokGreater, '≧': TokGreater,
	'≈': TokApprox, '≅': TokApprox, '≃': TokApprox,
	'×': TokTimes, '∙': TokOther,
	'°': TokDegree, '℃': TokDegree, '˚': TokDegree, 'º': TokDegree, '∘': TokDegree,
	'∞': TokInfinity,
	'$': TokCurrency, '£': TokCurrency, '€': TokCurrency, '¥': TokCurrency,
	'*': TokMark, '†': TokMark, '‡': TokMark, '§': TokMark, '¶': TokMark, '#': TokMark, '∗': TokMark, '‖': TokMark,
	'\n': TokBreak, '\u2028': TokBreak, '\u2029': TokBreak,
}

// next reads one token or one stretch of blanks.
func (l *lexer) next() {
	r, size := utf8.DecodeRuneInString(l.s[l.pos:])
	if isBlank(r) {
		l.pos += size
		l.spaced = l.spaced || unicode.IsSpace(r)
		return
	}
	if end := l.raisedEnd(); end > l.pos {
		l.emit(TokRaised, end, strings.TrimSpace(l.s[l.pos:end]))
		return
	}
	if middleDot(r) && len(l.toks) > 0 && l.toks[len(l.toks)-1].Kind == TokNumber && tenPower(l.s, l.pos+size, l.stop(), false) {
		l.emit(TokTimes, l.pos+size, "×")
		return
	}
	if isDigit(r) || isPoint(r) && l.digitAt(l.pos+size) && !l.afterDigit() {
		l.number()
		return
	}
	if unicode.IsLetter(r) {
		l.word()
		return
	}
	for _, pm := range [...]string{"+/-", "+/−", "+/–", "+-", "+−", "+–"} {
		if strings.HasPrefix(l.s[l.pos:], pm) {
			l.emit(TokPlusMinus, l.pos+len(pm), "±")
			return
		}
	}
	kind, ok := single[r]
	switch {
	case isDash(r):
		kind = TokDash
	case !ok:
		kind = TokOther
	}
	l.emit(kind, l.pos+size, l.s[l.pos:l.pos+size])
}

func (l *lexer) emit(kind TokenKind, end int, value string) {
	t := Token{Kind: kind, Span: Span{l.pos, end}, Value: value, Spaced: l.spaced || len(l.toks) == 0}
	for l.low < len(l.in.Lowered) && l.in.Lowered[l.low].End <= l.pos {
		l.low++
	}
	t.Lowered = l.low < len(l.in.Lowered) && l.in.Lowered[l.low].Start <= l.pos
	l.toks = append(l.toks, t)
	l.pos, l.spaced = end, false
}

// raisedEnd gives the end of the superscript that holds the present byte, or 0.
// Superscript signs of the plain font (¹²³) count as raised too.
func (l *lexer) raisedEnd() int {
	for l.raised < len(l.in.Raised) && l.in.Raised[l.raised].End <= l.pos {
		l.raised++
	}
	if l.raised < len(l.in.Raised) && l.in.Raised[l.raised].Start <= l.pos {
		return min(l.in.Raised[l.raised].End, len(l.s))
	}
	end := l.pos
	for end < len(l.s) {
		r, size := utf8.DecodeRuneInString(l.s[end:])
		if !strings.ContainsRune("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", r) {
			break
		}
		end += size
	}
	return end
}

// stop is where a token must end at the latest: the next superscript.
func (l *lexer) stop() int {
	for _, r := range l.in.Raised[l.raised:] {
		if r.Start > l.pos {
			return min(r.Start, len(l.s))
		}
	}
	return len(l.s)
}

func (l *lexer) digitAt(i int) bool { return i < len(l.s) && isDigit(rune(l.s[i])) }

func (l *lexer) afterDigit() bool {
	return len(l.toks) > 0 && !l.spaced && l.toks[len(l.toks)-1].Kind == TokNumber
}

// splitWords are the words that papers glue to the number they introduce:
// n42, p0.05, CI0.9, SD1.3.
var splitWords = map[string]bool{
	"n": true, "p": true, "ci": true, "sd": true, "se": true, "sem": true, "iqr": true, "md": true,
	"range": true, "or": true, "rr": true, "hr": true, "po": true, "to": true, "of": true, "and": true, "is": true, "was": true,
}

// word reads letters; abbreviations with points (S.D.) are one word, and digits
// glued inside a name (HbA1c, T2) stay in it.
func (l *lexer) word() {
	stop, end := l.stop(), l.pos
	end = l.letters(end, stop)
	for end < stop && l.s[end] == '.' && l.singleLetters(end) {
		next := l.letters(end+1, stop)
		if next == end+1 {
			end++
			break
		}
		end = next
	}
	lower := fold(l.s[l.pos:end])
	if l.digitAt(end) && end < stop && !splitWords[lower] && !l.decimalAt(end, stop) && !((lower == "t" || lower == "f") && l.loweredAt(end)) {
		for end < stop {
			r, size := utf8.DecodeRuneInString(l.s[end:])
			if !unicode.IsLetter(r) && !isDigit(r) {
				break
			}
			end += size
		}
		lower = fold(l.s[l.pos:end])
	}
	l.emit(TokWord, end, lower)
}

// singleLetters reports whether the letters before the point at i, back to the
// word's beginning or the last point, are one letter: s.d. but not vs.
func (l *lexer) singleLetters(i int) bool {
	k := strings.LastIndexByte(l.s[l.pos:i], '.') + 1
	if utf8.RuneCountInString(l.s[l.pos+k:i]) != 1 {
		return false
	}
	r, size := utf8.DecodeRuneInString(l.s[i+1:])
	if !unicode.IsLetter(r) {
		return k > 0 // the closing point of s.d.
	}
	after, _ := utf8.DecodeRuneInString(l.s[i+1+size:])
	return !unicode.IsLetter(after)
}

// loweredAt reports that a subscript begins at byte i.
func (l *lexer) loweredAt(i int) bool {
	for _, s := range l.in.Lowered {
		if s.Start >= i {
			return s.Start == i
		}
	}
	return false
}

func (l *lexer) letters(i, stop int) int {
	for i < stop {
		r, size := utf8.DecodeRuneInString(l.s[i:])
		if !unicode.IsLetter(r) && !unicode.Is(unicode.Mn, r) && r != '\u00ad' {
			break
		}
		i += size
	}
	return i
}

// decimalAt reports whether a number with a decimal mark begins at i.
func (l *lexer) decimalAt(i, stop int) bool {
	for l.digitAt(i) && i < stop {
		i++
	}
	r, size := utf8.DecodeRuneInString(l.s[i:])
	return i < stop && isPoint(r) && l.digitAt(i+size)
}

// fold gives the lower-case letters of a word, ligatures and mathematical
// letters resolved, soft hyphens taken out.
func fold(s string) string {
	ascii := true
	for i := 0; i < len(s) && ascii; i++ {
		ascii = s[i] < utf8.RuneSelf
	}
	if !ascii {
		s = strings.ReplaceAll(norm.NFKC.String(s), "\u00ad", "")
	}
	return strings.ToLower(s)
}
