package grammar

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

var update = flag.Bool("update", false, "write the dumps that the case files expect")

// testCase is one numbered case of a file in testdata:
//
//	== 12 title
//	input (^{…} raised, _{…} lowered, ⏎ a line break)
//	--
//	expected dump
//
// A title that begins with "refused" is a look-alike.
type testCase struct {
	number, title, input, want string
}

type fataler interface {
	Fatalf(string, ...any)
	Helper()
}

func parseCases(t fataler, name, data string) []testCase {
	t.Helper()
	var out []testCase
	seen := map[string]bool{}
	for _, part := range strings.Split("\n"+data, "\n== ")[1:] {
		head, body, ok := strings.Cut(part, "\n")
		number, title, ok2 := strings.Cut(head, " ")
		input, want, ok3 := strings.Cut(body, "\n--\n")
		if !ok || !ok2 || !ok3 {
			t.Fatalf("%s: case %q has not the form \"== number title / input / -- / dump\"", name, head)
		}
		if seen[number] {
			t.Fatalf("%s: case %s stands there twice", name, number)
		}
		seen[number] = true
		out = append(out, testCase{number, title, strings.ReplaceAll(input, "⏎", "\n"), strings.TrimRight(want, "\n")})
	}
	if len(out) == 0 {
		t.Fatalf("%s: no cases", name)
	}
	return out
}

func dumpRead(in Text) string {
	var b strings.Builder
	for _, it := range Read(in).Items {
		fmt.Fprintln(&b, it)
	}
	if b.Len() == 0 {
		return "nothing"
	}
	return strings.TrimRight(b.String(), "\n")
}

func runCases(t *testing.T, name string, dump func(Text) string) {
	path := filepath.Join("testdata", name)
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	cases := parseCases(t, path, string(data))
	var out strings.Builder
	for _, c := range cases {
		got := strings.TrimRight(dump(mark(c.input)), "\n")
		fmt.Fprintf(&out, "== %s %s\n%s\n--\n%s\n", c.number, c.title, strings.ReplaceAll(c.input, "\n", "⏎"), got)
		t.Run(c.number, func(t *testing.T) {
			if got != c.want && !*update {
				t.Errorf("%s\n%s\ngot\n%s\nwant\n%s", c.title, c.input, got, c.want)
			}
		})
	}
	if *update {
		if err := os.WriteFile(path, []byte(out.String()), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

func TestReadIntervals(t *testing.T) { runCases(t, "interval.txt", dumpRead) }
func TestReadSpreads(t *testing.T)   { runCases(t, "spread.txt", dumpRead) }
func TestReadOthers(t *testing.T)    { runCases(t, "other.txt", dumpRead) }
func TestParseCell(t *testing.T) {
	runCases(t, "cell.txt", func(in Text) string { return ParseCell(in).String() })
}
func TestParsePhrase(t *testing.T) {
	runCases(t, "phrase.txt", func(in Text) string { return ParsePhrase(in).String() })
}

// TestBrackets: depth costs no more than length.
func TestBrackets(t *testing.T) {
	for _, s := range []string{"(", "[", "B (", "(95% CI (", "1 (", "(1 ± ", "-", "1 to ", "95% ", "SD (", "95% CI ", "n = ", "1.2 and "} {
		text := strings.Repeat(s, 50_000)
		start := time.Now()
		r := Read(Text{S: text})
		if d := time.Since(start); d > 20*time.Second {
			t.Errorf("50,000 times %q took %v", s, d)
		}
		if len(r.Tokens) == 0 {
			t.Errorf("%q: no tokens", s)
		}
	}
}

func TestFuel(t *testing.T) {
	if r := Read(Text{S: strings.Repeat("1 ", fuelPerText+1)}); !r.Cut {
		t.Error("a text longer than its fuel is not marked as cut")
	}
	if r := Read(Text{S: strings.Repeat("1 ", 10)}); r.Cut {
		t.Error("a short text is marked as cut")
	}
}

// FuzzGrammar: reading ends, every span lies inside the text, and items come in
// the order of print.
func FuzzGrammar(f *testing.F) {
	for _, s := range seeds(f) {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		in := mark2(s)
		r := Read(in)
		inside := func(sp Span) bool { return sp.Start >= 0 && sp.Start <= sp.End && sp.End <= len(in.S) }
		last := 0
		for _, it := range r.Items {
			for _, sp := range []Span{it.Span, it.Value.Span, it.Of.Span, it.Lower.Span, it.Upper.Span, it.WordAt, it.LevelAt} {
				if !inside(sp) {
					t.Fatalf("%q: %v of %s lies outside", in.S, sp, it)
				}
			}
			if it.Start < last {
				t.Fatalf("%q: %s comes before the item before it", in.S, it)
			}
			last = it.Start
			if it.Bracket < 0 || it.Bracket > len(r.Brackets) {
				t.Fatalf("%q: bracket %d of %d", in.S, it.Bracket, len(r.Brackets))
			}
		}
		for _, v := range ParseCell(in).Values {
			if !inside(v.Span) || !inside(v.Estimate.Span) {
				t.Fatalf("%q: value %v lies outside", in.S, v.Span)
			}
		}
		for _, p := range ParsePhrase(in).Pairs {
			if !inside(p.Span) || !inside(p.SpreadAt) || !inside(p.StatisticAt) {
				t.Fatalf("%q: pair %v lies outside", in.S, p.Span)
			}
		}
	})
}

// mark2 is mark for inputs that may be malformed.
func mark2(s string) Text {
	if strings.Count(s, "{") != strings.Count(s, "}") || strings.Contains(s, "^{") && strings.Index(s, "}") < strings.Index(s, "^{") {
		return Text{S: s}
	}
	for i := 0; i < len(s); i++ {
		if (s[i] == '^' || s[i] == '_') && i+1 < len(s) && s[i+1] == '{' && strings.IndexByte(s[i:], '}') < 0 {
			return Text{S: s}
		}
	}
	return mark(s)
}

func ExampleRead() {
	for _, it := range Read(Text{S: "fell by 1.2 kg (95% CI −1.9 to −0.5)"}).Items {
		fmt.Println(it)
	}
	// Output:
	// 8:11 number 1.2
	// 16:39 interval -1.9 to -0.5 ci 95 in brackets alone
}

func ExampleParseCell() {
	fmt.Print(ParseCell(Text{S: "24 ± 5 (11–41)"}))
	// Output:
	// value 24
	//   0:7 plus-minus 24 ± 5
	//   9:16 interval 11 - 41 in brackets alone
}

func BenchmarkRead(b *testing.B) {
	s := strings.Repeat("Mass rose by 1.84 kg (95% CI 0.92 to 2.76; p = 0.003) with syrup and by 0.6 ± 0.3 kg with water. ", 100)
	b.SetBytes(int64(len(s)))
	for b.Loop() {
		if len(Read(Text{S: s}).Items) != 400 {
			b.Fatal("items lost")
		}
	}
}

func BenchmarkParseCell(b *testing.B) {
	for b.Loop() {
		if len(ParseCell(Text{S: "1.84 (0.92 to 2.76)***"}).Values) != 1 {
			b.Fatal("value lost")
		}
	}
}
