package grid

import (
	"bytes"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"halfspan/extract/layout/words"
	"halfspan/extract/paper"
)

var update = flag.Bool("update", false, "rewrite the expected grids in testdata")

// The pictures in testdata/*.txt are pages set in a fixed pitch. A case is
//
//	=== 7 what it shows
//	the picture, one line of the file a printed line
//	---
//	the tables as read
//
// The first two columns of a picture's line say how it is printed, the text
// begins in the third: "- " half a line below the line before, "+ " after a
// gap, "s " in small type, "b " bold, "m " small and half a line below. A line
// of dashes only (in runs of three or more) is drawn as rules between the
// lines, ^x raises the letter x, | is an upright rule of one line's height, and
// %%page begins a new page.
const (
	pitchX   = 400  // width of a letter
	fontSize = 1200 // a space is a third of an em
	leading  = 1440
	topEdge  = 80000
)

type picture struct {
	pages []paper.GlyphPage
	y     int
}

func drawPicture(text string) []paper.GlyphPage {
	p := &picture{}
	p.newPage()
	for _, l := range strings.Split(strings.TrimRight(text, "\n"), "\n") {
		p.line(l)
	}
	return p.pages
}

func (p *picture) newPage() {
	n := len(p.pages) + 1
	p.pages = append(p.pages, paper.GlyphPage{
		Page:  paper.Page{Number: n, Box: paper.Box{X1: 60000, Y1: 84000}},
		Fonts: []string{"Sketch"},
	})
	p.y = topEdge
}

func (p *picture) line(l string) {
	page := &p.pages[len(p.pages)-1]
	if strings.TrimSpace(l) == "%%page" {
		p.newPage()
		return
	}
	if len(l) < 3 {
		p.y -= leading
		return
	}
	mode, text := l[:2], l[2:]
	if strings.Trim(text, "- ") == "" && strings.Contains(text, "---") {
		p.rules(page, text)
		return
	}
	if strings.Contains(text, "-----") {
		// Rules on the left, the text of another column on the right.
		text = p.rulesBeside(page, text)
	}
	size := fontSize
	switch mode[0] {
	case '-':
		p.y += leading / 2
	case '+':
		p.y -= leading
	case 'm':
		size = fontSize * 8 / 10
		p.y += leading / 2
	case 's':
		size = fontSize * 8 / 10
	}
	p.letters(page, text, size, mode[0] == 'b')
	p.y -= leading
}

func (p *picture) letters(page *paper.GlyphPage, text string, size int, bold bool) {
	x, raised := 5000, false
	for _, r := range text {
		switch {
		case r == '^' && !raised:
			raised = true
			continue
		case r == '|':
			page.Rules = append(page.Rules, paper.Box{X0: int32(x), Y0: int32(p.y - 400), X1: int32(x + 30), Y1: int32(p.y + 1040)})
		case r != ' ':
			y, s := p.y, size
			if raised {
				y, s = p.y+size/3, size*6/10
			}
			page.Glyphs = append(page.Glyphs, paper.Glyph{
				Text: string(r), Size: int32(s), Bold: bold, Origin: paper.Point{X: int32(x), Y: int32(y)},
				Box: paper.Box{X0: int32(x), Y0: int32(y - s/4), X1: int32(x + pitchX), Y1: int32(y + s*3/4)},
			})
		}
		raised = false
		x += pitchX
	}
}

// rules draws the runs of dashes between the line above and the one below.
func (p *picture) rules(page *paper.GlyphPage, text string) {
	y := p.y + leading - fontSize*35/100
	start := -1
	for i := 0; i <= len(text); i++ {
		if i < len(text) && text[i] == '-' {
			if start < 0 {
				start = i
			}
			continue
		}
		if start >= 0 {
			page.Rules = append(page.Rules, paper.Box{X0: int32(5000 + start*pitchX), Y0: int32(y), X1: int32(5000 + i*pitchX), Y1: int32(y + 50)})
			start = -1
		}
	}
}

// rulesBeside draws the long runs of dashes of a line that also holds text, in
// the middle of its height, and gives the rest.
func (p *picture) rulesBeside(page *paper.GlyphPage, text string) string {
	rest := []byte(text)
	for i := 0; i < len(text); i++ {
		n := len(text[i:]) - len(strings.TrimLeft(text[i:], "-"))
		if n < 5 {
			continue
		}
		y := int32(p.y + 400)
		page.Rules = append(page.Rules, paper.Box{X0: int32(5000 + i*pitchX), Y0: y, X1: int32(5000 + (i+n)*pitchX), Y1: y + 50})
		copy(rest[i:], strings.Repeat(" ", n))
		i += n
	}
	return string(rest)
}

// readPages finds and reads the tables of drawn pages.
func readPages(pages []paper.GlyphPage) []paper.Table {
	var sheets []Sheet
	for i := range pages {
		frames := words.Read(&pages[i])
		for k := range frames {
			sheets = append(sheets, Sheet{Page: pages[i].Page.Number, Frame: &frames[k]})
		}
	}
	var out []paper.Table
	for i, regions := range FindAll(sheets, fontSize) {
		for k := range regions {
			if !regions[k].Joined {
				out = append(out, regions[k].Read(sheets[i].Page))
			}
		}
	}
	return out
}

// printTable writes a table as the cases expect it: H marks heading rows, · is
// a blank position, << and ^^ belong to the cell to the left or above, > is a
// step of indentation, h a heading row inside the body.
func printTable(t *paper.Table) string {
	var b strings.Builder
	fmt.Fprintf(&b, "# %s | %s\n", t.Label, t.Caption.S)
	if t.Picture {
		b.WriteString("(picture)\n")
	}
	for r, row := range t.Grid() {
		mark := "  "
		if r < t.HeadRows {
			mark = "H "
		} else if n := len(row); n > 1 && row[n-1] != nil && row[n-1].Head && row[n-1].Col > 0 {
			mark = "h "
		}
		b.WriteString(mark)
		for c, x := range row {
			if c > 0 {
				b.WriteString(" | ")
			}
			switch {
			case x == nil:
				b.WriteString("·")
			case x.Row < r:
				b.WriteString("^^")
			case x.Col < c:
				b.WriteString("<<")
			default:
				b.WriteString(strings.Repeat("> ", x.Indent) + x.Text.S)
			}
		}
		b.WriteString("\n")
	}
	for _, n := range t.Notes {
		fmt.Fprintf(&b, "[%s] %s\n", n.Mark, n.Text.S)
	}
	return b.String()
}

func printAll(tables []paper.Table) string {
	var b strings.Builder
	for i := range tables {
		b.WriteString(printTable(&tables[i]))
	}
	if b.Len() == 0 {
		return "(none)\n"
	}
	return b.String()
}

// quarterTurned turns pages so that their text runs upwards. Heights in the
// upright frame then have the other sign: nothing may depend on it.
func quarterTurned(pages []paper.GlyphPage) []paper.GlyphPage {
	f := words.Frame{Angle: 90}
	turn := func(b paper.Box) paper.Box {
		b = f.ToPage(b)
		b.X0, b.X1 = b.X0+84000, b.X1+84000
		return b
	}
	out := slices.Clone(pages)
	for i := range out {
		p := &out[i]
		p.Page.Box = turn(p.Page.Box)
		p.Glyphs, p.Rules, p.Images = slices.Clone(p.Glyphs), slices.Clone(p.Rules), slices.Clone(p.Images)
		for k := range p.Glyphs {
			g := &p.Glyphs[k]
			o := turn(paper.Box{X0: g.Origin.X, Y0: g.Origin.Y, X1: g.Origin.X, Y1: g.Origin.Y})
			g.Box, g.Origin, g.Angle = turn(g.Box), paper.Point{X: o.X0, Y: o.Y0}, 90
		}
		for k := range p.Rules {
			p.Rules[k] = turn(p.Rules[k])
		}
		for k := range p.Images {
			p.Images[k] = turn(p.Images[k])
		}
	}
	return out
}

type gridCase struct{ head, picture, want string }

func readCases(t testing.TB, path string) []gridCase {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	var out []gridCase
	for _, part := range strings.Split("\n"+string(data), "\n=== ")[1:] {
		head, rest, _ := strings.Cut(part, "\n")
		pic, want, ok := strings.Cut(rest, "\n---\n")
		if !ok {
			t.Fatalf("%s: case %q has no line --- before what is expected", path, head)
		}
		out = append(out, gridCase{head, pic, strings.TrimRight(want, "\n") + "\n"})
	}
	if len(out) == 0 {
		t.Fatalf("%s holds no cases", path)
	}
	return out
}

func caseFiles(t testing.TB) []string {
	files, err := filepath.Glob("testdata/*.txt")
	if err != nil || len(files) < 5 {
		t.Fatalf("the case files are missing: found %v, %v", files, err)
	}
	return files
}

func TestPictures(t *testing.T) {
	for _, file := range caseFiles(t) {
		cases := readCases(t, file)
		var out bytes.Buffer
		seen := map[string]bool{}
		for _, c := range cases {
			number, _, _ := strings.Cut(c.head, " ")
			if seen[number] {
				t.Errorf("%s: number %s stands twice", file, number)
			}
			seen[number] = true
			pages := drawPicture(c.picture)
			tables := readPages(pages)
			for i := range tables {
				checkTable(t, &tables[i])
			}
			got := printAll(tables)
			turned := printAll(readPages(quarterTurned(pages)))
			fmt.Fprintf(&out, "=== %s\n%s\n---\n%s\n", c.head, c.picture, got)
			if *update {
				continue
			}
			t.Run(filepath.Base(file)+"/"+number, func(t *testing.T) {
				if diff := cmp.Diff(c.want, got); diff != "" {
					t.Errorf("%s\n%s\n%s", c.head, c.picture, diff)
				}
				if diff := cmp.Diff(c.want, turned); diff != "" {
					t.Errorf("%s, printed upwards\n%s\n%s", c.head, c.picture, diff)
				}
			})
		}
		if *update {
			if err := os.WriteFile(file, out.Bytes(), 0o666); err != nil {
				t.Fatal(err)
			}
		}
	}
}

// checkTable tests what must hold for every table: cells in order, inside the
// grid, none over another; texts whose runs ascend and have places.
func checkTable(t testing.TB, table *paper.Table) {
	t.Helper()
	taken := map[[2]int]bool{}
	ordered := slices.IsSortedFunc(table.Cells, func(a, b paper.Cell) int {
		if a.Row != b.Row {
			return a.Row - b.Row
		}
		return a.Col - b.Col
	})
	if !ordered {
		t.Error("cells are not in order")
	}
	if table.HeadRows > table.Rows {
		t.Errorf("%d heading rows of %d", table.HeadRows, table.Rows)
	}
	for i := range table.Cells {
		c := &table.Cells[i]
		if c.Row < 0 || c.Col < 0 || c.RowSpan < 1 || c.ColSpan < 1 || c.Row+c.RowSpan > table.Rows || c.Col+c.ColSpan > table.Cols {
			t.Errorf("cell %q at %d,%d spans %d by %d in a grid of %d by %d", c.Text.S, c.Row, c.Col, c.RowSpan, c.ColSpan, table.Rows, table.Cols)
			continue
		}
		for r := c.Row; r < c.Row+c.RowSpan; r++ {
			for k := c.Col; k < c.Col+c.ColSpan; k++ {
				if taken[[2]int{r, k}] {
					t.Errorf("two cells at %d,%d", r, k)
				}
				taken[[2]int{r, k}] = true
			}
		}
		checkText(t, &c.Text)
	}
	checkText(t, &table.Caption)
	for i := range table.Notes {
		checkText(t, &table.Notes[i].Text)
	}
}

func checkText(t testing.TB, text *paper.TextRun) {
	t.Helper()
	end := 0
	for _, r := range text.Runs {
		if r.Start < end || r.End <= r.Start || r.End > len(text.S) {
			t.Errorf("%q: run %d..%d after %d", text.S, r.Start, r.End, end)
		}
		end = r.End
		if r.Place.Page == 0 || r.Place.Box.IsZero() {
			t.Errorf("%q: no place for %d..%d", text.S, r.Start, r.End)
		}
	}
	for _, s := range text.Styles {
		if s.Start < 0 || s.End < s.Start || s.End > len(text.S) {
			t.Errorf("%q: style %d..%d", text.S, s.Start, s.End)
		}
	}
}
