package grammar

import (
	"fmt"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"unicode/utf8"
)

// tokensOf prints tokens as "Kind:value", one after the other.
func tokensOf(toks []Token) string {
	var out []string
	for _, t := range toks {
		s := t.Kind.String() + ":" + t.Value
		if t.Mended {
			s += "!"
		}
		if t.Lowered {
			s += "_"
		}
		out = append(out, s)
	}
	return strings.Join(out, " ")
}

// mark turns ^{…} and _{…} of a test input into raised and lowered spans.
func mark(s string) Text {
	var t Text
	var b strings.Builder
	for i := 0; i < len(s); {
		if i+1 < len(s) && (s[i] == '^' || s[i] == '_') && s[i+1] == '{' {
			end := strings.IndexByte(s[i:], '}')
			start := b.Len()
			b.WriteString(s[i+2 : i+end])
			span := Span{start, b.Len()}
			if s[i] == '^' {
				t.Raised = append(t.Raised, span)
			} else {
				t.Lowered = append(t.Lowered, span)
			}
			i += end + 1
			continue
		}
		b.WriteByte(s[i])
		i++
	}
	t.S = b.String()
	return t
}

var lexCases = []struct{ in, want string }{
	{"12.4", "Number:12.4"},
	{"12.4 kg", "Number:12.4 Word:kg"},
	{"1,234", "Number:1234"},
	{"1,234,567.8", "Number:1234567.8"},
	{"23\u2009815", "Number:23815"},
	{"23 815", "Number:23 Number:815"},
	{"12,34", "Number:12 Comma:, Number:34"},
	{"0.92,2.76", "Number:0.92 Comma:, Number:2.76"},
	{"1,2 (0,9; 1,6)", "Number:1.2 Open:( Number:0.9 Semicolon:; Number:1.6 Close:)"},
	{"12,4 ± 1,3", "Number:12.4 PlusMinus:± Number:1.3"},
	{".45", "Number:.45"},
	{"= .45", "Equals:= Number:.45"},
	{"0·83", "Number:0.83"},
	{"·83", "Number:.83"},
	{"0∙83", "Number:0.83"},
	{"0˙83", "Number:0.83"},
	{"1..42", "Number:1.42!"},
	{"P = 0. 92", "Word:p Equals:= Number:0.92!"},
	{"was 24. 12 hives", "Word:was Number:24 Period:. Number:12 Word:hives"},
	{"1.2.3", "Code:"},
	{"12.03.2015", "Code:"},
	{"2.1E-5", "Number:2.1e-5"},
	{"2.1e5", "Number:2.1e5"},
	{"2.1 eggs", "Number:2.1 Word:eggs"},
	{"12\u200b.\u200b4", "Number:12 Period:. Number:4"},
	{"1\u200b2.4", "Number:12.4"},
	{"−0.4", "Dash:− Number:0.4"},
	{"-0.4", "Dash:- Number:0.4"},
	{"–0.4", "Dash:– Number:0.4"},
	{"‐0.4", "Dash:‐ Number:0.4"},
	{"‑0.4", "Dash:‑ Number:0.4"},
	{"+0.4", "Plus:+ Number:0.4"},
	{"0.9–2.8", "Number:0.9 Dash:– Number:2.8"},
	{"0.9~2.8", "Number:0.9 Tilde:~ Number:2.8"},
	{"3 ÷ 10", "Number:3 Tilde:÷ Number:10"},
	{"12.4±1.3", "Number:12.4 PlusMinus:± Number:1.3"},
	{"12.4 +/- 1.3", "Number:12.4 PlusMinus:± Number:1.3"},
	{"12.4 +/− 1.3", "Number:12.4 PlusMinus:± Number:1.3"},
	{"12.4 +- 1.3", "Number:12.4 PlusMinus:± Number:1.3"},
	{"12.4 ˘ 1.3", "Number:12.4 PlusMinus:˘ Number:1.3"},
	{"(0.9; 2.8)", "Open:( Number:0.9 Semicolon:; Number:2.8 Close:)"},
	{"[0.9, 2.8]", "Open:[ Number:0.9 Comma:, Number:2.8 Close:]"},
	{"{0.9}", "Open:{ Number:0.9 Close:}"},
	{"62%", "Number:62 Percent:%"},
	{"62 %", "Number:62 Percent:%"},
	{"n=42", "Word:n Equals:= Number:42"},
	{"n¼42", "Word:n Equals:¼ Number:42"},
	{"n42", "Word:n Number:42"},
	{"p<0.05", "Word:p Less:< Number:0.05"},
	{"p ≤ 0.05", "Word:p Less:≤ Number:0.05"},
	{"p>.05", "Word:p Greater:> Number:.05"},
	{"CI0.9", "Word:ci Number:0.9"},
	{"95%CI", "Number:95 Percent:% Word:ci"},
	{"95\u2009% CI", "Number:95 Percent:% Word:ci"},
	{"SD1.3", "Word:sd Number:1.3"},
	{"S.D. 1.3", "Word:s.d. Number:1.3"},
	{"s.e.m. 0.3", "Word:s.e.m. Number:0.3"},
	{"vs. 11", "Word:vs Period:. Number:11"},
	{"HbA1c", "Word:hba1c"},
	{"T2 hives", "Word:t2 Word:hives"},
	{"conﬁdence", "Word:confidence"},
	{"𝑛 = 33", "Word:n Equals:= Number:33"},
	{"confi\u00addence", "Word:confidence"},
	{"8.1 ± 1.0^{a}", "Number:8.1 PlusMinus:± Number:1.0 Raised:a"},
	{"0.81^{2,3}", "Number:0.81 Raised:2,3"},
	{"2.1 × 10^{5}", "Number:2.1 Times:× Number:10 Raised:5"},
	{"10²", "Number:10 Raised:²"},
	{"t_{41} = 2.3", "Word:t Number:41_ Equals:= Number:2.3"},
	{"8.1a", "Number:8.1 Word:a"},
	{"1.84***", "Number:1.84 Mark:* Mark:* Mark:*"},
	{"0.88‡", "Number:0.88 Mark:‡"},
	{"12/45", "Number:12 Slash:/ Number:45"},
	{"24 °C", "Number:24 Degree:° Word:c"},
	{"(5 to ∞)", "Open:( Number:5 Word:to Infinity:∞ Close:)"},
	{"−£18", "Dash:− Currency:£ Number:18"},
	{"1:40", "Number:1 Colon:: Number:40"},
	{"24 (5)\n19 (6)", "Number:24 Open:( Number:5 Close:) Break:\n Number:19 Open:( Number:6 Close:)"},
	{"≈ 12", "Approx:≈ Number:12"},
	{"a_b", "Word:a Other:_ Word:b"},
	{"\x01 12", "Other:\x01 Number:12"},
	{"25th–75th", "Number:25 Word:th Dash:– Number:75 Word:th"},
	{"", ""},
}

func TestLex(t *testing.T) {
	seen := map[TokenKind]bool{}
	for _, c := range lexCases {
		text := mark(c.in)
		toks := Lex(text)
		if got := tokensOf(toks); got != c.want {
			t.Errorf("%q:\ngot  %s\nwant %s", c.in, got, c.want)
		}
		checkTokens(t, text, toks)
		for _, tok := range toks {
			seen[tok.Kind] = true
		}
	}
	for k := TokNumber; k <= TokOther; k++ {
		if !seen[k] {
			t.Errorf("no case holds a token of kind %s", k)
		}
	}
}

// checkTokens demands that the tokens and the skipped blanks rebuild the text,
// and that every number can be parsed.
func checkTokens(t *testing.T, in Text, toks []Token) {
	t.Helper()
	pos := 0
	for _, tok := range toks {
		if tok.Start < pos || tok.End <= tok.Start || tok.End > len(in.S) {
			t.Fatalf("%q: token %v at %d:%d after %d", in.S, tok.Kind, tok.Start, tok.End, pos)
		}
		onlyBlank(t, in.S, pos, tok.Start)
		pos = tok.End
		if tok.Kind == TokNumber {
			if _, err := strconv.ParseFloat(tok.Value, 64); err != nil && !strings.Contains(err.Error(), "range") {
				t.Fatalf("%q: number %q: %v", in.S, tok.Value, err)
			}
		}
	}
	onlyBlank(t, in.S, pos, len(in.S))
}

func onlyBlank(t *testing.T, s string, from, to int) {
	t.Helper()
	for from < to {
		r, size := utf8.DecodeRuneInString(s[from:])
		if !isBlank(r) {
			t.Fatalf("%q: %q at %d stands in no token", s, r, from)
		}
		from += size
	}
}

func TestDecimalMarks(t *testing.T) {
	for _, c := range []struct {
		in             string
		commas, points int
	}{{"1,2 and 0,93", 2, 0}, {"1.2 and 1,234", 0, 1}, {"", 0, 0}, {"12, 13", 0, 0}} {
		if commas, points := DecimalMarks(c.in); commas != c.commas || points != c.points {
			t.Errorf("%q: got %d, %d, want %d, %d", c.in, commas, points, c.commas, c.points)
		}
	}
	if got := tokensOf(Lex(Text{S: "1,2 to 1,6", DecimalComma: true})); got != "Number:1.2 Word:to Number:1.6" {
		t.Errorf("decimal commas of the paper: got %s", got)
	}
}

// seeds are the inputs of all case files, for the fuzz targets.
func seeds(f *testing.F) []string {
	files, err := filepath.Glob("testdata/*.txt")
	if err != nil {
		f.Fatal(err)
	}
	var out []string
	for _, name := range files {
		data, err := os.ReadFile(name)
		if err != nil {
			f.Fatal(err)
		}
		for _, c := range parseCases(f, name, string(data)) {
			out = append(out, c.input)
		}
	}
	for _, c := range lexCases {
		out = append(out, c.in)
	}
	if len(out) < len(lexCases)+40 {
		f.Fatalf("only %d seeds: the case files were not read", len(out))
	}
	return out
}

// FuzzLexer: the lexer ends, and its tokens with the blanks rebuild the text.
func FuzzLexer(f *testing.F) {
	for _, s := range seeds(f) {
		f.Add(s, 0, 0, false)
	}
	f.Fuzz(func(t *testing.T, s string, a, b int, comma bool) {
		in := Text{S: s, DecimalComma: comma}
		if a >= 0 && a < b && b <= len(s) {
			in.Raised = []Span{{a, b}}
		}
		checkTokens(t, in, Lex(in))
	})
}

func ExampleLex() {
	for _, t := range Lex(Text{S: "−0.4 (95% CI −0.9–0.1)"}) {
		fmt.Print(t.Kind, " ")
	}
	// Output: Dash Number Open Number Percent Word Dash Number Dash Number Close
}

func BenchmarkLex(b *testing.B) {
	s := strings.Repeat("Mass rose by 1.84 kg (95% CI 0.92 to 2.76; p = 0.003) with syrup, n = 42. ", 100)
	b.SetBytes(int64(len(s)))
	for b.Loop() {
		if len(Lex(Text{S: s})) != 2500 {
			b.Fatal("tokens lost")
		}
	}
}
