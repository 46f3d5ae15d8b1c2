package extract

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"sort"
	"strings"
	"testing"

	"halfspan/extract/paper"
	"halfspan/extract/result"
)

var survey = flag.Bool("survey", false, "survey the tables of many real papers")

// realFolder is a folder of real papers for measuring, which is not part of the
// project; what needs it is skipped where it is absent.
func realFolder(t *testing.T, parts ...string) string {
	dir := filepath.Join(append([]string{"../../shared/papers"}, parts...)...)
	if _, err := os.Stat(dir); err != nil {
		t.Skip("the folder of real papers is not here: ../shared/papers")
	}
	return dir
}

func readPaper(t *testing.T, path string) *paper.Document {
	t.Helper()
	content, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	doc, err := Read(filepath.Base(path), content, Options{})
	if err != nil {
		t.Fatal(err)
	}
	return doc
}

// formKey tells results of the same print: table and numbers.
func formKey(r *result.Result) string {
	return strings.Join([]string{bareWords(r.Table), r.Estimate, r.Lower, r.Upper, r.GivenValue}, "|")
}

// bareWords drops what forms differ in: case, white space, marks.
func bareWords(s string) string {
	return strings.Map(func(c rune) rune {
		if c == ' ' || c == '\n' || c == '\u00a0' || c == '\u2009' || c == '*' {
			return -1
		}
		return c
	}, strings.ToLower(s))
}

// formFields are the fields that must agree between two forms of a paper.
var formFields = []struct {
	name string
	get  func(*result.Result) string
}{
	{"statistic", func(r *result.Result) string { return string(r.Statistic) }},
	{"given_as", func(r *result.Result) string { return string(r.GivenAs) }},
	{"level", func(r *result.Result) string { return fmt.Sprint(r.Level) }},
	{"n", func(r *result.Result) string { return fmt.Sprint(r.N, r.N2) }},
	{"arm", func(r *result.Result) string { return bareWords(r.Arm + "|" + r.Arm2) }},
	{"time", func(r *result.Result) string { return bareWords(r.Time) }},
	{"outcome", func(r *result.Result) string { return bareWords(r.Outcome) }},
	{"unit", func(r *result.Result) string { return bareWords(r.Unit) }},
	{"adjusted", func(r *result.Result) string { return r.Adjusted }},
}

// TestFormsAgree reads the same trials as XML and as text: nearly all results
// must be found in both and read alike. It needs no labels.
func TestFormsAgree(t *testing.T) {
	if testing.Short() {
		t.Skip("reads many papers")
	}
	dir := realFolder(t, "labelled")
	files, err := filepath.Glob(filepath.Join(dir, "xml", "*.xml"))
	if err != nil || len(files) == 0 {
		t.Fatal("no papers", err)
	}
	both, onlyXML, onlyText := 0, 0, 0
	differ := map[string]int{}
	for _, path := range files {
		stem := strings.TrimSuffix(filepath.Base(path), ".xml")
		fromXML := Find(readPaper(t, path))
		fromText := Find(readPaper(t, filepath.Join(dir, "txt", stem+".txt")))
		waiting := map[string][]*result.Result{}
		for i := range fromXML {
			k := formKey(&fromXML[i])
			waiting[k] = append(waiting[k], &fromXML[i])
		}
		for i := range fromText {
			k := formKey(&fromText[i])
			if len(waiting[k]) == 0 {
				onlyText++
				continue
			}
			a, b := waiting[k][0], &fromText[i]
			waiting[k] = waiting[k][1:]
			both++
			for _, f := range formFields {
				if f.get(a) != f.get(b) {
					differ[f.name]++
				}
			}
		}
		for _, left := range waiting {
			onlyXML += len(left)
		}
	}
	fields := 0
	for _, f := range formFields {
		fields += differ[f.name]
		t.Logf("%-10s differs in %d of %d results", f.name, differ[f.name], both)
	}
	t.Logf("in both forms %d, only in XML %d, only in text %d", both, onlyXML, onlyText)
	if all := both + onlyXML + onlyText; both*100 < all*98 {
		t.Errorf("%d of %d results are found in one form only", all-both, all)
	}
	if fields*100 > both*len(formFields)*2 {
		t.Errorf("%d fields of %d differ", fields, both*len(formFields))
	}
}

// TestGridsAgree compares the grids of the same tables read from XML, where
// spans are marked up, and from text, where they are found again.
func TestGridsAgree(t *testing.T) {
	dir := realFolder(t, "labelled")
	files, err := filepath.Glob(filepath.Join(dir, "xml", "*.xml"))
	if err != nil || len(files) == 0 {
		t.Fatal("no papers", err)
	}
	tables, same, cells, wrong := 0, 0, 0, 0
	for _, path := range files {
		stem := strings.TrimSuffix(filepath.Base(path), ".xml")
		texts := labelledTables(readPaper(t, filepath.Join(dir, "txt", stem+".txt")))
		for label, a := range labelledTables(readPaper(t, path)) {
			b := texts[label]
			tables++
			if b == nil {
				t.Errorf("%s %s: no such table in the text", stem, label)
				continue
			}
			bad := 0
			ga, gb := a.Grid(), b.Grid()
			for r := range ga {
				for c := range ga[r] {
					cells++
					if gridText(ga, r, c) != gridText(gb, r, c) {
						bad++
					}
				}
			}
			wrong += bad
			if bad == 0 && a.Rows == b.Rows && a.Cols == b.Cols && a.HeadRows == b.HeadRows {
				same++
			}
		}
	}
	t.Logf("%d tables, %d the same throughout; %d of %d grid positions differ", tables, same, wrong, cells)
	if wrong*100 > cells {
		t.Errorf("%d of %d grid positions differ", wrong, cells)
	}
}

func labelledTables(doc *paper.Document) map[string]*paper.Table {
	out := map[string]*paper.Table{}
	for _, b := range doc.Blocks {
		if b.Table != nil && b.Table.Label != "" && !b.Table.Picture {
			out[bareWords(b.Table.Label)] = b.Table
		}
	}
	return out
}

// gridText is what stands at a grid position; the text of a row that holds one
// text only counts at its first position, since forms differ in its span.
func gridText(grid [][]*paper.Cell, r, c int) string {
	if r >= len(grid) || c >= len(grid[r]) || grid[r][c] == nil {
		return ""
	}
	cell := grid[r][c]
	if cell.Col < c {
		alone := true
		for _, other := range grid[r] {
			alone = alone && (other == nil || other == cell || other.Text.S == "")
		}
		if alone {
			return ""
		}
	}
	s := citationMark.ReplaceAllString(cell.Text.S, "")
	return bareWords(s)
}

// TestSurveyTables counts, over the papers kept for surveys, the tables seen,
// those with at least one result, and the headings that are commonest in the
// others. It prints; it fails only where nothing is found.
func TestSurveyTables(t *testing.T) {
	if !*survey {
		t.Skip("asked for with -survey; it takes a minute")
	}
	files, err := filepath.Glob(filepath.Join(realFolder(t, "more", "xml"), "*.xml"))
	if err != nil || len(files) == 0 {
		t.Fatal("no papers", err)
	}
	seen, pictures, read, numbers := 0, 0, 0, 0
	headings := map[string]int{}
	why := map[string]int{}
	for _, path := range files {
		doc := readPaper(t, path)
		with := map[string]bool{}
		for _, r := range Find(doc) {
			with[r.Table] = true
		}
		for _, b := range doc.Blocks {
			if b.Table == nil {
				continue
			}
			seen++
			switch {
			case b.Table.Picture:
				pictures++
			case with[b.Table.Label]:
				read++
			default:
				reason := unread(b.Table)
				why[reason]++
				if reason == spreadUnread {
					numbers++
					headings[headingPattern(b.Table)]++
				}
			}
		}
	}
	t.Logf("tables seen %d, pictures %d, with a result %d", seen, pictures, read)
	for _, line := range commonest(why, 10) {
		t.Log("without a result: " + line)
	}
	for _, line := range commonest(headings, 20) {
		t.Log("heading not understood: " + line)
	}
	if read == 0 {
		t.Error("no table gave a result")
	}
}

var (
	citationMark = regexp.MustCompile(`\s*\[\d{1,3}(?:\s*[,;–-]\s*\d{1,3})*\]`)
	countCell    = regexp.MustCompile(`^\d+\s*(?:/\s*\d+\s*)?\(\s*\d+(?:\.\d+)?\s*%?\s*\)$`)
	spreadCell   = regexp.MustCompile(`\d\s*(?:±|\+/?-)\s*\d|\d\s*[(\[]\s*[-−–]?\s*\d`)
	anyNumber    = regexp.MustCompile(`\d+(?:[.,·]\d+)*`)
)

const spreadUnread = "cells like a spread or an interval, none read"

// unread says what a table without results holds.
func unread(t *paper.Table) string {
	spread, count, number := 0, 0, 0
	for _, c := range t.Cells {
		if c.Row < t.HeadRows {
			continue
		}
		switch s := c.Text.S; {
		case countCell.MatchString(s):
			count++
		case spreadCell.MatchString(s):
			spread++
		case strings.ContainsAny(s, "0123456789"):
			number++
		}
	}
	switch {
	case spread > 2 && spread >= count:
		return spreadUnread
	case count > 0:
		return "counts with percentages"
	case number > 0:
		return "numbers without a spread"
	}
	return "words only"
}

// headingPattern writes the headings of a table with numbers as #.
func headingPattern(t *paper.Table) string {
	var parts []string
	for _, c := range t.Cells {
		if c.Row >= t.HeadRows || c.Text.S == "" {
			continue
		}
		parts = append(parts, strings.Join(strings.Fields(anyNumber.ReplaceAllString(c.Text.S, "#")), " "))
	}
	s := []rune(strings.Join(parts, " | "))
	const most = 100
	return string(s[:min(len(s), most)])
}

// commonest lists the n keys counted most, each with its count.
func commonest(counts map[string]int, n int) []string {
	var keys []string
	for k := range counts {
		keys = append(keys, k)
	}
	sort.Slice(keys, func(i, j int) bool {
		if counts[keys[i]] != counts[keys[j]] {
			return counts[keys[i]] > counts[keys[j]]
		}
		return keys[i] < keys[j]
	})
	var out []string
	for _, k := range keys[:min(len(keys), n)] {
		out = append(out, fmt.Sprintf("%3d  %s", counts[k], k))
	}
	return out
}
