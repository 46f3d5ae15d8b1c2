package table

import (
	"bufio"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"halfspan/extract/bind/background"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

var update = flag.Bool("update", false, "write what is found into the case files as expected")

// oneCase is one numbered case of a file in testdata/cases; README.txt there
// says how they are written.
type oneCase struct {
	name     string
	line     int
	lines    []string // as written, without the expected results
	expected []string
	doc      *paper.Document
}

// parseCases reads the cases of one file, and what stands before the first.
func parseCases(text string) (head []string, cases []*oneCase) {
	var now *oneCase
	sc := bufio.NewScanner(strings.NewReader(text))
	sc.Buffer(nil, 1<<20)
	for n := 1; sc.Scan(); n++ {
		s := sc.Text()
		switch {
		case strings.HasPrefix(s, "== "):
			now = &oneCase{name: strings.TrimPrefix(s, "== "), line: n}
			cases = append(cases, now)
			now.lines = append(now.lines, s)
		case now == nil:
			head = append(head, s)
		case strings.HasPrefix(s, "=>"):
			now.expected = append(now.expected, strings.TrimSpace(strings.TrimPrefix(s, "=>")))
		default:
			now.lines = append(now.lines, s)
		}
	}
	for _, c := range cases {
		for len(c.lines) > 0 && strings.TrimSpace(c.lines[len(c.lines)-1]) == "" {
			c.lines = c.lines[:len(c.lines)-1]
		}
		c.doc = buildDocument(c.lines[1:])
	}
	return head, cases
}

// builder makes a document of the lines of a case, with byte offsets.
type builder struct {
	doc    *paper.Document
	offset int
	table  *paper.Table
	open   map[int]int // column -> first row in which it is free again
}

func buildDocument(lines []string) *paper.Document {
	b := &builder{doc: &paper.Document{Format: paper.Text}}
	zones := map[string]paper.Zone{"methods": paper.Methods, "results": paper.Results, "abstract": paper.Abstract}
	for _, s := range lines {
		key, rest, _ := strings.Cut(s, ":")
		zone, isZone := zones[key]
		switch {
		case strings.HasPrefix(s, "|"):
			b.row(s)
		case key == "caption":
			b.endTable()
			b.newTable(strings.TrimSpace(rest))
		case key == "note":
			mark, text := "", strings.TrimSpace(rest)
			if m := noteMark.FindStringSubmatch(text); m != nil {
				mark, text = m[1], m[2]
			}
			b.table.Notes = append(b.table.Notes, paper.FootNote{Mark: mark, Text: b.run(text)})
		case isZone:
			b.endTable()
			b.doc.Blocks = append(b.doc.Blocks, paper.Block{Kind: paper.Paragraph, Zone: zone, Text: b.run(strings.TrimSpace(rest))})
		}
		b.offset++
	}
	b.endTable()
	return b.doc
}

var (
	noteMark   = regexp.MustCompile(`^\[(\S{1,3})\] (.*)$`)
	tableLabel = regexp.MustCompile(`^(Table \S+?)[.:] *(.*)$`)
	spanMark   = regexp.MustCompile(`\{(r?)(\d+)\}$`)
	raisedRun  = regexp.MustCompile(`\^\{([^}]*)\}`)
)

func (b *builder) newTable(caption string) {
	b.table = &paper.Table{}
	b.open = map[int]int{}
	if m := tableLabel.FindStringSubmatch(caption); m != nil {
		b.table.Label, caption = m[1], m[2]
	}
	b.table.Caption = b.run(caption)
}

func (b *builder) endTable() {
	if b.table != nil {
		b.doc.Blocks = append(b.doc.Blocks, paper.Block{Kind: paper.TableBlock, Zone: paper.Results, Section: "Results", Table: b.table})
		b.table = nil
	}
}

// row adds a row of cells; "|--" ends the headings.
func (b *builder) row(s string) {
	t := b.table
	if strings.HasPrefix(s, "|--") {
		t.HeadRows = t.Rows
		return
	}
	cells := strings.Split(strings.Trim(strings.TrimSpace(s), "|"), "|")
	col := 0
	for _, c := range cells {
		c = strings.TrimSpace(c)
		for b.open[col] > t.Rows {
			col++
		}
		cell := paper.Cell{Row: t.Rows, Col: col, RowSpan: 1, ColSpan: 1}
		for {
			m := spanMark.FindStringSubmatch(c)
			if m == nil {
				break
			}
			k, _ := strconv.Atoi(m[2])
			if m[1] == "r" {
				cell.RowSpan = k
			} else {
				cell.ColSpan = k
			}
			c = strings.TrimSpace(strings.TrimSuffix(c, m[0]))
		}
		for strings.HasPrefix(c, "~") {
			cell.Indent++
			c = c[1:]
		}
		bold := strings.HasPrefix(c, "**")
		if bold {
			c = strings.TrimSuffix(strings.TrimPrefix(c, "**"), "**")
		}
		cell.Text = b.run(c)
		if bold {
			cell.Text.Styles = append(cell.Text.Styles, paper.Style{Start: 0, End: len(cell.Text.S), Kind: paper.Bold})
		}
		for k := col; k < col+cell.ColSpan; k++ {
			b.open[k] = t.Rows + cell.RowSpan
		}
		t.Cells = append(t.Cells, cell)
		col += cell.ColSpan
		t.Cols = max(t.Cols, col)
	}
	t.Rows++
}

// run makes a text with places; "^{a}" is printed raised, "\n" is a line break.
func (b *builder) run(s string) paper.TextRun {
	s = strings.ReplaceAll(s, `\n`, "\n")
	var t paper.TextRun
	last := 0
	var out strings.Builder
	for _, m := range raisedRun.FindAllStringSubmatchIndex(s, -1) {
		out.WriteString(s[last:m[0]])
		start := out.Len()
		out.WriteString(s[m[2]:m[3]])
		t.Styles = append(t.Styles, paper.Style{Start: start, End: out.Len(), Kind: paper.Raised})
		last = m[1]
	}
	out.WriteString(s[last:])
	t.S = out.String()
	t.Runs = []paper.Run{{Start: 0, End: len(t.S), Place: paper.Place{Offset: b.offset}}}
	b.offset += len(t.S) + 1
	return t
}

// written gives a result as the case files do.
func written(r *result.Result) string {
	spread := r.GivenValue
	if r.Lower != "" || r.Upper != "" {
		spread = r.Lower + ".." + r.Upper
	}
	out := []string{fmt.Sprintf("%s %s %s", r.Estimate, r.GivenAs, spread)}
	add := func(key, value string) {
		if value != "" && value != "0" {
			out = append(out, key+" "+value)
		}
	}
	if r.Level > 0 {
		add("level", strconv.FormatFloat(r.Level, 'g', -1, 64))
	}
	add("is", string(r.Statistic))
	add("measure", r.Measure)
	add("n", strconv.Itoa(r.N))
	add("n2", strconv.Itoa(r.N2))
	add("from", r.NFrom)
	add("arm", r.Arm)
	add("against", r.Arm2)
	add("time", r.Time)
	add("subgroup", r.Subgroup)
	add("outcome", r.Outcome)
	add("unit", r.Unit)
	add("adjusted", r.Adjusted)
	add("p", r.P)
	add("t", r.T)
	add("F", r.F)
	add("df", r.DF)
	add("row p", r.Evidence.RowP)
	for _, m := range r.Mates {
		add("mate", strconv.Itoa(m+1))
	}
	for _, f := range r.Flags {
		add("flag", f.Name)
	}
	return strings.Join(out, "; ")
}

// unmet gives the parts of an expected line that the found line does not have.
func unmet(want, got string) []string {
	have := map[string]int{}
	for _, p := range strings.Split(got, ";") {
		have[strings.TrimSpace(p)]++
	}
	var out []string
	for _, p := range strings.Split(want, ";") {
		p = strings.TrimSpace(p)
		if no, ok := strings.CutPrefix(p, "no "); ok {
			for h := range have {
				if h == no || strings.HasPrefix(h, no+" ") {
					out = append(out, p)
				}
			}
			continue
		}
		if have[p] == 0 {
			out = append(out, p)
			continue
		}
		have[p]--
	}
	return out
}

// TestCases reads the tables of testdata/cases and compares what is found with
// the lines that begin with "=>". With -update the lines are written anew.
func TestCases(t *testing.T) {
	files, err := filepath.Glob("testdata/cases/*.txt")
	if err != nil || len(files) == 0 {
		t.Fatal("no case files", err)
	}
	total := 0
	for _, file := range files {
		if filepath.Base(file) == "README.txt" {
			continue
		}
		content, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		head, cases := parseCases(string(content))
		total += len(cases)
		for _, c := range cases {
			t.Run(strings.TrimSuffix(filepath.Base(file), ".txt")+"/"+c.name, func(t *testing.T) { c.check(t, file) })
		}
		if *update {
			writeCases(t, file, head, cases)
		}
	}
	if total < 40 {
		t.Errorf("only %d cases were read", total)
	}
}

func (c *oneCase) check(t *testing.T, file string) {
	found := Find(c.doc, background.Of(c.doc))
	var got []string
	for i := range found {
		got = append(got, written(&found[i]))
		checkSources(t, &found[i])
	}
	if len(got) == 0 {
		got = []string{"none"}
	}
	if *update {
		c.expected = got
		return
	}
	if len(got) != len(c.expected) {
		t.Errorf("%s:%d: found %d results, expected %d:\n  %s", file, c.line, len(got), len(c.expected), strings.Join(got, "\n  "))
		return
	}
	for i := range got {
		if u := unmet(c.expected[i], got[i]); len(u) > 0 {
			t.Errorf("%s:%d: result %d lacks %q\n  found %s", file, c.line, i+1, u, got[i])
		}
	}
}

// checkSources demands that every bound field says where it was read.
func checkSources(t *testing.T, r *result.Result) {
	t.Helper()
	has := map[string]bool{}
	for _, s := range r.Sources {
		has[s.Field] = true
	}
	for field, set := range map[string]bool{"estimate": true, "lower": r.Lower != "", "given_value": r.GivenValue != "", "n": r.N > 0, "n2": r.N2 > 0,
		"given_as": r.GivenAs != result.Unstated, "arm": r.Arm != "", "time": r.Time != "", "outcome": r.Outcome != "", "unit": r.Unit != ""} {
		if set && !has[field] {
			t.Errorf("%s: no source for %s", r.Estimate, field)
		}
	}
	if r.Anchor.Digits == "" {
		t.Errorf("%s: no anchor", r.Estimate)
	}
}

func writeCases(t *testing.T, file string, head []string, cases []*oneCase) {
	t.Helper()
	var b strings.Builder
	for _, s := range head {
		b.WriteString(s + "\n")
	}
	for _, c := range cases {
		for _, s := range c.lines {
			b.WriteString(s + "\n")
		}
		for _, s := range c.expected {
			b.WriteString("=> " + s + "\n")
		}
		b.WriteString("\n")
	}
	if err := os.WriteFile(file, []byte(strings.TrimRight(b.String(), "\n")+"\n"), 0o644); err != nil {
		t.Fatal(err)
	}
}

// caseDocuments gives the documents of all cases, as seeds and for timing.
func caseDocuments(t testing.TB) []*paper.Document {
	files, _ := filepath.Glob("testdata/cases/*.txt")
	var out []*paper.Document
	for _, file := range files {
		content, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		_, cases := parseCases(string(content))
		for _, c := range cases {
			out = append(out, c.doc)
		}
	}
	return out
}

// TestSame finds the same results twice, in the same order.
func TestSame(t *testing.T) {
	for _, doc := range caseDocuments(t) {
		a, b := fmt.Sprint(Find(doc, background.Of(doc))), fmt.Sprint(Find(doc, background.Of(doc)))
		if a != b {
			t.Fatalf("two readings differ:\n%s\n%s", a, b)
		}
	}
}

// FuzzFind reads tables written in the form of the case files: whatever the
// cells hold, nothing panics and every result has an estimate and a spread.
func FuzzFind(f *testing.F) {
	files, _ := filepath.Glob("testdata/cases/*.txt")
	seeds := 0
	for _, file := range files {
		content, err := os.ReadFile(file)
		if err != nil {
			f.Fatal(err)
		}
		_, cases := parseCases(string(content))
		for _, c := range cases {
			f.Add(strings.Join(c.lines[1:], "\n"))
			seeds++
		}
	}
	if seeds == 0 {
		f.Fatal("no seeds were loaded")
	}
	f.Fuzz(func(t *testing.T, s string) {
		if len(s) > 4000 || !strings.HasPrefix(s, "caption:") || strings.Count(s, "|") > 400 || strings.Contains(s, "{") && bigSpan.MatchString(s) {
			t.Skip()
		}
		var lines []string
		for _, l := range strings.Split(s, "\n") {
			if !strings.HasPrefix(l, "methods:") && !strings.HasPrefix(l, "results:") && !strings.HasPrefix(l, "abstract:") {
				lines = append(lines, l)
			}
		}
		for _, l := range lines[1:] {
			if strings.HasPrefix(l, "caption:") {
				t.Skip()
			}
		}
		doc := buildDocument(lines)
		for _, r := range Find(doc, background.Of(doc)) {
			if r.Estimate == "" || r.GivenValue == "" && r.Lower == "" && r.Upper == "" {
				t.Errorf("a result without estimate or spread: %+v", r)
			}
		}
	})
}

var bigSpan = regexp.MustCompile(`\{r?(?:\d{3,}|0)\}`)

func BenchmarkFind(b *testing.B) {
	docs := caseDocuments(b)
	b.ReportAllocs()
	for i := 0; i < b.N; i++ {
		for _, d := range docs {
			Find(d, background.Of(d))
		}
	}
}
