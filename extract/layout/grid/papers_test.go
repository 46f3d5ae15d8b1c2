package grid_test

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode"

	"halfspan/extract/jats"
	"halfspan/extract/layout"
	"halfspan/extract/paper"
	"halfspan/extract/pdf"
)

// Real papers that are there as XML and printed to PDF: the tables of the XML
// are what the grids of the PDF must say.
const papers = "../../../../shared/papers/labelled"

// TestPrintedPapers holds the share of the body cells of all tables that are
// read with their text, their row heading and their column headings. Where the
// XML leaves a row heading blank because the one above counts, any will do.
func TestPrintedPapers(t *testing.T) {
	files, _ := filepath.Glob(filepath.Join(papers, "print", "*.pdf"))
	if len(files) == 0 {
		t.Skip("the papers to measure with are not here")
	}
	if testing.Short() {
		t.Skip("takes some seconds")
	}
	var sum share
	for _, file := range files {
		name := strings.TrimSuffix(filepath.Base(file), ".pdf")
		got := printed(t, file)
		want := marked(t, filepath.Join(papers, "xml", name+".xml"))
		var s share
		for label, cells := range want {
			s.add(compare(cells, got[label]))
		}
		t.Logf("%s: %d cells, text %d, row heading %d, column headings %d", name, s.cells, s.text, s.row, s.col)
		sum.add(s)
	}
	for _, c := range []struct {
		what      string
		got, want int
	}{{"text", sum.text, 990}, {"row heading", sum.row, 930}, {"column headings", sum.col, 960}} {
		if c.got*1000 < c.want*sum.cells {
			t.Errorf("%s: %d of %d cells, fewer than %d in a thousand", c.what, c.got, sum.cells, c.want)
		}
	}
}

type share struct{ cells, text, row, col int }

func (s *share) add(o share) {
	s.cells, s.text, s.row, s.col = s.cells+o.cells, s.text+o.text, s.row+o.row, s.col+o.col
}

type bodyCell struct{ text, row, col string }

func printed(t *testing.T, file string) map[string][]bodyCell {
	content, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	glyphs, err := pdf.Read(content, pdf.Options{})
	if err != nil {
		t.Fatalf("%s: %v", file, err)
	}
	return cells(layout.Arrange(glyphs.Pages).Blocks)
}

func marked(t *testing.T, file string) map[string][]bodyCell {
	content, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	doc, err := jats.Read(file, content)
	if err != nil {
		t.Fatalf("%s: %v", file, err)
	}
	return cells(doc.Blocks)
}

// cells gives the body cells right of the stub, by the label of their table.
func cells(blocks []paper.Block) map[string][]bodyCell {
	out := map[string][]bodyCell{}
	for i := range blocks {
		table := blocks[i].Table
		if table == nil {
			continue
		}
		label := plain(strings.TrimRight(strings.TrimSpace(table.Label), ".:"))
		grid := table.Grid()
		for r := table.HeadRows; r < table.Rows; r++ {
			for c := 1; c < table.Cols; c++ {
				x := grid[r][c]
				if x == nil || x.Row != r || x.Col != c || plain(x.Text.S) == "" {
					continue
				}
				cell := bodyCell{text: plain(x.Text.S)}
				if stub := grid[r][0]; stub != nil && stub != x {
					cell.row = plain(stub.Text.S)
				}
				var last *paper.Cell
				for h := range table.HeadRows {
					if y := grid[h][c]; y != nil && y != last {
						cell.col += plain(y.Text.S)
						last = y
					}
				}
				out[label] = append(out[label], cell)
			}
		}
	}
	return out
}

// plain drops spaces and hyphens: where lines break is not what is compared.
func plain(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsSpace(r) || r == '-' || r == '\u2010' || r == '\u2011' || r == '\u00AD' || r == '\u200B' {
			return -1
		}
		return r
	}, s)
}

func compare(want, got []bodyCell) share {
	s := share{cells: len(want)}
	used := make([]bool, len(got))
	for _, w := range want {
		best, score := -1, 0
		for k, g := range got {
			if used[k] || g.text != w.text {
				continue
			}
			n := 1
			if g.row == w.row {
				n += 2
			}
			if g.col == w.col {
				n++
			}
			if n > score {
				best, score = k, n
			}
		}
		if best < 0 {
			continue
		}
		used[best] = true
		s.text++
		if got[best].row == w.row || w.row == "" {
			s.row++
		}
		if got[best].col == w.col {
			s.col++
		}
	}
	return s
}
