// Package readtest is what the tests of the readers share: files of numbered
// cases, a Document written as text, and the check that every digit of a
// Document stands in the file where its place says. Only tests import it.
package readtest

import (
	"fmt"
	"os"
	"strings"
	"testing"

	"halfspan/extract/paper"
)

// Case is one numbered case of a case file.
type Case struct{ Number, Title, Input, Want string }

// Cases reads a file of cases of the form
//
//	== number title
//	input, over many lines
//	--
//	expected output
//
// and fails if it holds none or a number twice. ␌ stands for a form feed.
func Cases(t testing.TB, path string) []Case {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	var out []Case
	seen := map[string]bool{}
	for _, part := range strings.Split("\n"+string(data), "\n== ")[1:] {
		head, body, ok := strings.Cut(part, "\n")
		number, title, ok2 := strings.Cut(head, " ")
		input, want, ok3 := strings.Cut(body+"\n", "\n--\n")
		if !ok || !ok2 || !ok3 {
			t.Fatalf("%s: case %q has not the form \"== number title / input / -- / output\"", path, head)
		}
		if seen[number] {
			t.Fatalf("%s: case %s stands there twice", path, number)
		}
		seen[number] = true
		out = append(out, Case{number, title, strings.ReplaceAll(input, "␌", "\f"), strings.TrimRight(want, "\n")})
	}
	if len(out) == 0 {
		t.Fatalf("%s: no cases", path)
	}
	return out
}

// Run runs each case of the file as a subtest; update writes what came out.
func Run(t *testing.T, path string, update bool, output func(testing.TB, string) string) {
	var file strings.Builder
	for _, c := range Cases(t, path) {
		t.Run(c.Number, func(t *testing.T) {
			got := c.Want
			defer func() { // also where output fails the test
				fmt.Fprintf(&file, "== %s %s\n%s\n--\n%s\n", c.Number, c.Title, strings.ReplaceAll(c.Input, "\f", "␌"), got)
			}()
			got = strings.TrimRight(output(t, c.Input), "\n")
			if got != c.Want && !update {
				t.Errorf("%s\n%s\n--- got\n%s\n--- want\n%s", c.Title, c.Input, got, c.Want)
			}
		})
	}
	if update {
		if err := os.WriteFile(path, []byte(file.String()), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

var (
	kindNames = map[paper.BlockKind]string{paper.Heading: "heading", paper.Paragraph: "text", paper.TableBlock: "table",
		paper.Caption: "figure", paper.Note: "note", paper.Reference: "reference", paper.Furniture: "furniture"}
	zoneNames = map[paper.Zone]string{paper.Elsewhere: "-", paper.Abstract: "abstract", paper.Introduction: "introduction",
		paper.Methods: "methods", paper.Results: "results", paper.Discussion: "discussion", paper.References: "references", paper.BackMatter: "back"}
	styleMarks = map[paper.StyleKind]string{paper.Raised: "^", paper.Lowered: "_", paper.Bold: "*", paper.Italic: "/"}
)

// Dump writes a document as text, one line a block: kind, zone, text; tables as
// grids. {2x1} stands before a cell of two rows and one column, » before each
// step of indentation, ^…^ round what is raised, _…_ round what is lowered, ⏎
// for a line end inside a cell; a rule closes the heading rows.
func Dump(d *paper.Document) string {
	var b strings.Builder
	if d.Title != "" {
		fmt.Fprintf(&b, "title %s\n", d.Title)
	}
	for _, p := range d.Problems {
		fmt.Fprintf(&b, "problem %s: %s\n", p.Kind, p.Text)
	}
	for _, bl := range d.Blocks {
		page := ""
		if bl.Page > 0 {
			page = fmt.Sprintf(" p%d", bl.Page)
		}
		if bl.Kind != paper.TableBlock {
			fmt.Fprintf(&b, "%s %s%s: %s\n", kindNames[bl.Kind], zoneNames[bl.Zone], page, Text(&bl.Text))
			continue
		}
		fmt.Fprintf(&b, "table %s%s: %s. %s\n%s", zoneNames[bl.Zone], page, bl.Table.Label, Text(&bl.Table.Caption), Table(bl.Table))
	}
	return b.String()
}

// Table writes a table's grid and notes.
func Table(t *paper.Table) string {
	var b strings.Builder
	row := 0
	for i, c := range t.Cells {
		if i == 0 || c.Row > row {
			if i > 0 {
				b.WriteByte('\n')
			}
			if t.HeadRows > 0 && c.Row >= t.HeadRows && (i == 0 || row < t.HeadRows) {
				b.WriteString("  ----\n")
			}
			row = c.Row
			b.WriteString("  ")
		}
		span := ""
		if c.RowSpan > 1 || c.ColSpan > 1 {
			span = fmt.Sprintf("{%dx%d}", c.RowSpan, c.ColSpan)
		}
		fmt.Fprintf(&b, "|%s%s%s", strings.Repeat("»", c.Indent), span, Text(&c.Text))
	}
	if len(t.Cells) > 0 {
		b.WriteByte('\n')
	}
	for _, n := range t.Notes {
		fmt.Fprintf(&b, "  note [%s] %s\n", n.Mark, Text(&n.Text))
	}
	return b.String()
}

// Text writes a run with its raised and lowered stretches marked.
func Text(t *paper.TextRun) string {
	var b strings.Builder
	for i := 0; i <= len(t.S); i++ {
		for _, s := range t.Styles {
			if (s.Kind == paper.Raised || s.Kind == paper.Lowered) && (s.Start == i || s.End == i) {
				b.WriteString(styleMarks[s.Kind])
			}
		}
		if i < len(t.S) {
			b.WriteByte(t.S[i])
		}
	}
	return strings.ReplaceAll(b.String(), "\n", "⏎")
}

// Runs gives every text of a document.
func Runs(d *paper.Document) []*paper.TextRun {
	var all []*paper.TextRun
	for i := range d.Blocks {
		all = append(all, &d.Blocks[i].Text)
		t := d.Blocks[i].Table
		if t == nil {
			continue
		}
		all = append(all, &t.Caption)
		for k := range t.Cells {
			all = append(all, &t.Cells[k].Text)
		}
		for k := range t.Notes {
			all = append(all, &t.Notes[k].Text)
		}
	}
	return all
}

// CheckPlaces fails unless every digit of the document has a place, and at asks
// the file which character stands there: the same digit, or a reference ("&")
// that means it.
func CheckPlaces(t testing.TB, d *paper.Document, at func(offset int) byte) {
	t.Helper()
	for _, run := range Runs(d) {
		end := 0
		for _, r := range run.Runs {
			if r.Start < end || r.End <= r.Start || r.End > len(run.S) {
				t.Fatalf("runs of %q out of order: %+v", run.S, run.Runs)
			}
			end = r.End
		}
		for _, s := range run.Styles {
			if s.Start < 0 || s.End <= s.Start || s.End > len(run.S) {
				t.Fatalf("style outside of %q: %+v", run.S, s)
			}
		}
		for i := range len(run.S) {
			c := run.S[i]
			if c < '0' || c > '9' {
				continue
			}
			if !covered(run, i) {
				t.Fatalf("the digit at %d of %q has no place", i, run.S)
			}
			if got := at(run.At(i).Offset); got != c && got != '&' {
				t.Fatalf("the digit %c at %d of %q should stand at byte %d; there is %q", c, i, run.S, run.At(i).Offset, got)
			}
		}
	}
}

func covered(run *paper.TextRun, i int) bool {
	for _, r := range run.Runs {
		if r.Start <= i && i < r.End {
			return true
		}
	}
	return false
}

// CheckTables fails unless every table of the document is sound: cells inside
// the grid, in order, none over another, heading rows inside it.
func CheckTables(t testing.TB, d *paper.Document) {
	t.Helper()
	for _, b := range d.Blocks {
		tab := b.Table
		if tab == nil {
			continue
		}
		if tab.HeadRows < 0 || tab.HeadRows > tab.Rows {
			t.Fatalf("%s: %d heading rows of %d", tab.Label, tab.HeadRows, tab.Rows)
		}
		used := map[[2]int]bool{}
		lastRow, lastCol := -1, -1
		for _, c := range tab.Cells {
			if c.Row < lastRow || c.Row == lastRow && c.Col <= lastCol {
				t.Fatalf("%s: cell %d,%d out of order", tab.Label, c.Row, c.Col)
			}
			lastRow, lastCol = c.Row, c.Col
			if c.RowSpan < 1 || c.ColSpan < 1 || c.Row+c.RowSpan > tab.Rows || c.Col+c.ColSpan > tab.Cols {
				t.Fatalf("%s: cell %d,%d of %dx%d leaves the grid of %dx%d", tab.Label, c.Row, c.Col, c.RowSpan, c.ColSpan, tab.Rows, tab.Cols)
			}
			for r := c.Row; r < c.Row+c.RowSpan; r++ {
				for k := c.Col; k < c.Col+c.ColSpan; k++ {
					if used[[2]int{r, k}] {
						t.Fatalf("%s: two cells at %d,%d", tab.Label, r, k)
					}
					used[[2]int{r, k}] = true
				}
			}
		}
	}
}
