package grammar

// Kind is the kind of an item.
type Kind uint8

// The kinds of item.
const (
	KindNumber     Kind = iota + 1 // a number by itself; alone in its bracket where Alone
	KindInterval                   // two bounds
	KindPlusMinus                  // ± and its value, with the number before it where there is one
	KindSpread                     // a word for a spread and its value: SD 1.3, SE = 0.2, IQR 14
	KindSampleSize                 // n = 42
	KindPValue                     // p < 0.001
	KindTest                       // t(41) = 2.3, F(1, 81) = 4.2, χ2 = 3.8
	KindDF                         // df = 58
	KindFraction                   // 12/45
	KindTerm                       // a term of the trade without a value of its own: "95% CI", "mean", "OR"
)

var kindNames = [...]string{
	KindNumber: "number", KindInterval: "interval", KindPlusMinus: "plus-minus", KindSpread: "spread",
	KindSampleSize: "n", KindPValue: "p", KindTest: "test", KindDF: "df", KindFraction: "fraction", KindTerm: "term",
}

// String is the kind's name in lower case.
func (k Kind) String() string {
	if int(k) < len(kindNames) && kindNames[k] != "" {
		return kindNames[k]
	}
	return "none"
}

// Number is one printed number. The zero Number stands for none.
type Number struct {
	Span
	Value   string // as printed, normalised: "-0.4", "1234", ".45"; empty for a bound that is no number
	Word    string // of such a bound its print: "NE", "∞", "not reached"
	Rel     string // "<" or ">" printed before it
	Percent bool
	Power   string // of "2.1 × 10^5" the factor "10^5"; also one that stands once for several numbers
	PowerAt Span   // where that factor is printed
	Mended  bool   // printed with a slip (1..42, 0. 92)
	Plus    bool   // printed with a plus sign
}

// IsZero reports that no number was printed.
func (n Number) IsZero() bool { return n.Span == Span{} && n.Value == "" }

// Item is one thing that is printed, with its place.
type Item struct {
	Kind Kind
	Span

	Value Number // of KindNumber, KindPlusMinus and KindSpread the value; n, p, test statistic, df, numerator
	Of    Number // KindPlusMinus: the number before the sign; KindFraction: the denominator

	Lower, Upper Number // KindInterval, as printed: Lower is the first
	Sep          string // KindInterval: "to", "-", ",", ";", ":", "/", "and"
	Apart        bool   // the sign of Upper and the separator could be told only by position: "−4.0 −0.7"

	Meaning         // of the words printed with it
	WordAt   Span   // those words
	Level    string // of an interval as printed, "95"; empty where none is said
	LevelAt  Span
	Name     string // KindTest: "t", "F", "χ2", "z", "r"; KindTerm: the words, lower case
	DF       string // KindTest: as printed, "1, 81"
	Bracket  int    // 1-based index into Reading.Brackets of the innermost bracket; 0 none
	Alone    bool   // nothing else stands in that bracket
	Follows  bool   // an interval of a list: it shares the words of the one before
	OneSided bool   // one-sided limit or interval
}

// Bracket is one pair of brackets.
type Bracket struct {
	Span        // with the brackets; to the end of the text where it is never closed
	Open   byte // '(', '[' or '{'
	Parent int  // 1-based index of the bracket around it; 0 none
}

// Reading is everything that Read found, in the order of print.
type Reading struct {
	Items    []Item
	Brackets []Bracket
	Tokens   []Token
	Cut      bool // the text was longer than the fuel; the rest was not read
}
