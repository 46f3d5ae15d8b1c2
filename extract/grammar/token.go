package grammar

// Span is a range of bytes [Start, End) of the text that was read.
type Span struct {
	Start, End int
}

// Text is one stretch of print: a table cell, a heading, a paragraph. Raised
// and Lowered are the superscripts and subscripts in it, ascending; line breaks
// that matter (values stacked in a cell) are '\n' in S.
type Text struct {
	S               string
	Raised, Lowered []Span
	// DecimalComma says that this paper prints 1,2 for 1.2. Where it is false, a
	// comma is still read as a decimal mark if the text itself leaves no choice.
	DecimalComma bool
}

// TokenKind is the kind of a lexical token.
type TokenKind uint8

// The kinds of token. What is none of the others is TokOther: nothing that is
// printed is dropped.
const (
	TokNumber    TokenKind = iota + 1 // 12.4, 1,234, .45, 0·83
	TokCode                           // 1.2.3: a version, date or section, no number
	TokWord                           // letters, with glued digits where they are part of a name: HbA1c
	TokRaised                         // a whole superscript: a mark, a citation or a power
	TokDash                           // any code point that may be a minus or a range dash
	TokPlus                           // +
	TokPlusMinus                      // ±, +/-, +-
	TokTilde                          // ~ or ÷, in a few papers a range mark
	TokOpen                           // ( [ {
	TokClose                          // ) ] }
	TokComma
	TokSemicolon
	TokColon
	TokPeriod // full stop that belongs to no number or abbreviation
	TokSlash
	TokPercent  // % or ‰
	TokEquals   // = and what broken fonts print for it
	TokLess     // < ≤
	TokGreater  // > ≥
	TokApprox   // ≈ ~ in front of a number is TokTilde
	TokTimes    // × ∗ between numbers
	TokDegree   // ° ℃
	TokInfinity // ∞
	TokCurrency // $ £ € ¥
	TokMark     // * † ‡ § ¶ #
	TokBreak    // a line break inside a cell
	TokOther
)

var tokenNames = [...]string{
	TokNumber: "Number", TokCode: "Code", TokWord: "Word", TokRaised: "Raised", TokDash: "Dash",
	TokPlus: "Plus", TokPlusMinus: "PlusMinus", TokTilde: "Tilde", TokOpen: "Open", TokClose: "Close",
	TokComma: "Comma", TokSemicolon: "Semicolon", TokColon: "Colon", TokPeriod: "Period", TokSlash: "Slash",
	TokPercent: "Percent", TokEquals: "Equals", TokLess: "Less", TokGreater: "Greater", TokApprox: "Approx",
	TokTimes: "Times", TokDegree: "Degree", TokInfinity: "Infinity", TokCurrency: "Currency", TokMark: "Mark",
	TokBreak: "Break", TokOther: "Other",
}

// String is the kind's name without the prefix.
func (k TokenKind) String() string {
	if int(k) < len(tokenNames) && tokenNames[k] != "" {
		return tokenNames[k]
	}
	return "None"
}

// Token is one lexical token.
type Token struct {
	Kind TokenKind
	Span
	// Value is the normalised text: of a number its digits with '.' as decimal
	// mark, without thousands marks and sign; of a word its lower-case letters
	// with ligatures and mathematical letters resolved; of others the text.
	Value   string
	Spaced  bool // white space or the beginning stands before it
	Lowered bool // printed as a subscript
	Mended  bool // a number with a misprint in it: 1..42, 0. 92
}
