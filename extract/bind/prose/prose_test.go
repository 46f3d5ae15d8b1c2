package prose

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"halfspan/extract/bind/background"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

var update = flag.Bool("update", false, "write the dumps that the case files expect")

// textCase is one numbered case of a file in testdata:
//
//	== 12 title
//	@Methods a paragraph of the methods (any zone's name may stand there)
//	the paragraph under test, in the results unless it begins with @Zone
//	--
//	expected results, one a line; "nothing" where there are none
//
// A title that begins with "refused" is a look-alike.
type textCase struct {
	number, title string
	lines         []string
	want          string
}

func readCases(t testing.TB, path string) []textCase {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	var out []textCase
	seen := map[string]bool{}
	for _, part := range strings.Split("\n"+string(data), "\n== ")[1:] {
		head, body, ok := strings.Cut(part, "\n")
		number, title, ok2 := strings.Cut(head, " ")
		input, want, ok3 := strings.Cut(body, "\n--\n")
		if !ok || !ok2 || !ok3 {
			t.Fatalf("%s: case %q has not the form \"== number title / text / -- / results\"", path, head)
		}
		if seen[number] {
			t.Fatalf("%s: case %s stands there twice", path, number)
		}
		seen[number] = true
		out = append(out, textCase{number, title, strings.Split(input, "\n"), strings.TrimSpace(want)})
	}
	if len(out) == 0 {
		t.Fatalf("%s: no cases", path)
	}
	return out
}

var zones = map[string]paper.Zone{"Abstract": paper.Abstract, "Introduction": paper.Introduction, "Methods": paper.Methods,
	"Results": paper.Results, "Discussion": paper.Discussion, "References": paper.References, "Caption": paper.Results}

// document makes a paper of the lines, each a paragraph; ^{…} is raised.
func document(lines []string) *paper.Document {
	doc := &paper.Document{Path: "bees.txt", Format: paper.Text}
	offset := 0
	for _, line := range lines {
		zone, kind := paper.Results, paper.Paragraph
		if strings.HasPrefix(line, "@") {
			name, rest, _ := strings.Cut(line[1:], " ")
			zone, line = zones[name], rest
			if name == "Caption" {
				kind = paper.Caption
			}
		}
		run := paper.TextRun{}
		for line != "" {
			before, after, ok := strings.Cut(line, "^{")
			run.S += before
			if !ok {
				break
			}
			raised, rest, _ := strings.Cut(after, "}")
			run.Styles = append(run.Styles, paper.Style{Start: len(run.S), End: len(run.S) + len(raised), Kind: paper.Raised})
			run.S += raised
			line = rest
		}
		run.Runs = []paper.Run{{Start: 0, End: len(run.S), Place: paper.Place{Offset: offset}}}
		offset += len(run.S) + 1
		doc.Blocks = append(doc.Blocks, paper.Block{Kind: kind, Zone: zone, Section: "Results", Text: run})
	}
	return doc
}

func dump(r *result.Result) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s %s", r.Estimate, r.GivenAs)
	if r.Level > 0 {
		fmt.Fprintf(&b, " %g%%", r.Level)
	}
	if r.GivenValue != "" {
		fmt.Fprintf(&b, " %s", r.GivenValue)
	} else {
		fmt.Fprintf(&b, " %s to %s", r.Lower, r.Upper)
	}
	fmt.Fprintf(&b, ", %s", r.Statistic)
	if r.Measure != "" {
		fmt.Fprintf(&b, " (%s)", r.Measure)
	}
	for _, f := range []struct{ name, value string }{{"arm", r.Arm}, {"arm2", r.Arm2}, {"time", r.Time}, {"outcome", r.Outcome},
		{"unit", r.Unit}, {"p", r.P}, {"t", r.T}, {"f", r.F}, {"df", r.DF}, {"adjusted", r.Adjusted}} {
		if f.value != "" {
			fmt.Fprintf(&b, "; %s %s", f.name, f.value)
		}
	}
	if r.N > 0 {
		fmt.Fprintf(&b, "; n %d %s", r.N, r.NFrom)
	}
	if r.Evidence.ScaleHigh != "" {
		fmt.Fprintf(&b, "; scale %s to %s", r.Evidence.ScaleLow, r.Evidence.ScaleHigh)
	}
	if r.N2 > 0 {
		fmt.Fprintf(&b, "; n2 %d", r.N2)
	}
	if r.Evidence.Quoted {
		b.WriteString("; quoted")
	}
	if len(r.Mates) > 0 {
		b.WriteString("; has mates")
	}
	for _, f := range r.Flags {
		b.WriteString("; !" + f.Name)
	}
	return b.String()
}

func findAll(lines []string) string {
	doc := document(lines)
	var out []string
	for _, r := range Find(doc, background.Of(doc), nil) {
		out = append(out, dump(&r))
	}
	if len(out) == 0 {
		return "nothing"
	}
	return strings.Join(out, "\n")
}

func TestFind(t *testing.T) {
	files, err := filepath.Glob("testdata/*.txt")
	if err != nil || len(files) < 3 {
		t.Fatalf("case files: %v, %v", files, err)
	}
	for _, path := range files {
		t.Run(filepath.Base(path), func(t *testing.T) {
			var b strings.Builder
			refused, taken := 0, 0
			for _, c := range readCases(t, path) {
				got := findAll(c.lines)
				fmt.Fprintf(&b, "== %s %s\n%s\n--\n%s\n", c.number, c.title, strings.Join(c.lines, "\n"), got)
				if strings.HasPrefix(c.title, "refused") {
					refused++
					if got != "nothing" {
						t.Errorf("case %s (%s) is refused by its title, got\n%s", c.number, c.title, got)
					}
				} else {
					taken++
				}
				t.Run(c.number, func(t *testing.T) {
					if got != c.want && !*update {
						t.Errorf("%s\n%s\ngot\n%s\nwant\n%s", c.title, strings.Join(c.lines, "\n"), got, c.want)
					}
				})
			}
			if *update {
				if err := os.WriteFile(path, []byte(b.String()), 0o644); err != nil {
					t.Fatal(err)
				}
			}
		})
	}
}

// TestSources: every field that was read has its place, and the text there is
// what is printed at that place.
func TestSources(t *testing.T) {
	lines := []string{"In the syrup group (n = 42) colony mass fell by 1.2 kg (95% CI −1.9 to −0.5, p = 0.003) at week 6."}
	doc := document(lines)
	found := Find(doc, background.Of(doc), nil)
	if len(found) != 1 {
		t.Fatalf("got %d results, want 1", len(found))
	}
	r := found[0]
	want := map[string]string{"estimate": "1.2", "lower": "−1.9", "upper": "−0.5", "given_as": "95% CI", "level": "95", "n": "n = 42",
		"unit": "kg", "p": "p = 0.003", "arm": "syrup group", "time": "week 6"}
	for field, text := range want {
		ok := false
		for _, s := range r.Sources {
			if s.Field == field && s.Text == text {
				ok = true
				if got := lines[0][s.Place.Offset : s.Place.Offset+len(text)]; got != text {
					t.Errorf("%s: at its place stands %q, want %q", field, got, text)
				}
			}
		}
		if !ok {
			t.Errorf("no source of %s with the text %q: %+v", field, text, r.Sources)
		}
	}
	if r.Anchor.Digits != "-1.9,-0.5" || lines[0][r.Anchor.Offset] != '1' {
		t.Errorf("anchor %+v stands not at the first digit of the spread", r.Anchor)
	}
	if len(r.Snippet) > 300 || !strings.Contains(r.Snippet, "−1.9") {
		t.Errorf("snippet %q", r.Snippet)
	}
}

func TestReferencesAreNotSearched(t *testing.T) {
	doc := document([]string{"@References 1. Mass of hives was 12.4 ± 1.3 kg in all of the apiaries."})
	doc.Blocks = append(doc.Blocks, paper.Block{Kind: paper.Furniture, Text: paper.TextRun{S: "The hives of the station had 12.4 ± 1.3 kg"}})
	if found := Find(doc, background.Of(doc), nil); len(found) != 0 {
		t.Errorf("got %d results from references and page furniture", len(found))
	}
}

func BenchmarkFind(b *testing.B) {
	line := "Colony mass rose by 1.84 kg (95% CI 0.92 to 2.76; p = 0.003) with syrup and was 12.4 ± 1.3 kg at week 6. "
	doc := document([]string{strings.Repeat(line, 10), strings.Repeat(line, 10)})
	for b.Loop() {
		if len(Find(doc, background.Of(doc), nil)) != 40 {
			b.Fatal("results lost")
		}
	}
}

// FuzzFind: no text can crash the binding, and every place lies in the text.
func FuzzFind(f *testing.F) {
	files, _ := filepath.Glob("testdata/*.txt")
	seeds := 0
	for _, path := range files {
		for _, c := range readCases(f, path) {
			f.Add(strings.Join(c.lines, "\n"))
			seeds++
		}
	}
	if seeds < 40 {
		f.Fatalf("only %d seeds", seeds)
	}
	f.Fuzz(func(t *testing.T, s string) {
		doc := &paper.Document{Blocks: []paper.Block{{Kind: paper.Paragraph, Zone: paper.Results,
			Text: paper.TextRun{S: s, Runs: []paper.Run{{Start: 0, End: len(s)}}}}}}
		for _, r := range Find(doc, background.Of(doc), nil) {
			if r.Estimate == "" || len(r.Snippet) > 300 {
				t.Fatalf("%q: result %+v", s, r)
			}
			for _, src := range r.Sources {
				if src.Place.Offset < 0 || src.Place.Offset > len(s) {
					t.Fatalf("%q: %s stands at %d", s, src.Field, src.Place.Offset)
				}
			}
		}
	})
}
