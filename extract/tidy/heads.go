package tidy

import (
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// mostHeadRows is how many heading rows are looked for where none are marked.
const mostHeadRows = 5

var (
	// dataCell is a cell that prints a value: a number with nothing but marks,
	// a spread or an interval after it.
	dataCell = pattern.MustCompile(`^[(\[]?\s*[<>≤≥=~+–−‐-]?\s*[$£€]?[0-9.][0-9.,·\s\x{00A0}\x{2009}]*%?\s*(?:[\*†‡§¶#a-d]{0,3}|(?:±|\+/|\(|\[|–|−|‐|-|/|to\b|,|;|\n\s*[(\[±0-9−–-]).*)$`)
	// plainWhole is a number that a heading may print too: a week, a dose, a year.
	plainWhole = pattern.MustCompile(`^\(?[0-9]{1,4}\)?%?$`)
	// headWord is what a second heading row prints under the first.
	headWord = pattern.MustCompile(`(?i)^\W*(?:n|no\.?|p|%|sd|se|sem|ci|mean|median|iqr|range|value|\W*p[ -]?values?)\W*$|\bn\s*=|\bmean\b|\bmedian\b|\bSD\b|\bSE\b|\bSEM\b|\bCI\b|%|\bp[ -]values?\b`)
)

// isData reports whether row r prints values. Whole numbers alone do not tell.
func isData(cells []*paper.Cell) bool {
	data, filled, telling := 0, 0, 0
	for i, c := range cells {
		if i == 0 && len(cells) > 1 || c.Text.S == "" {
			continue
		}
		filled++
		if dataCell.MatchString(c.Text.S) {
			data++
			if !plainWhole.MatchString(c.Text.S) {
				telling++
			}
		}
	}
	return telling > 0 && 2*data >= filled
}

// rowCells gives the cells that begin in each row, by column.
func rowCells(t *paper.Table) [][]*paper.Cell {
	rows := make([][]*paper.Cell, t.Rows)
	for i := range t.Cells {
		c := &t.Cells[i]
		rows[c.Row] = append(rows[c.Row], c)
	}
	return rows
}

// labelOnly reports whether a row holds one text only, in its first cell.
func labelOnly(cells []*paper.Cell) bool {
	for i, c := range cells {
		if (i == 0) != (c.Text.S != "") {
			return false
		}
	}
	return len(cells) > 0
}

// HeadRows tells how many rows at the top are column headings: those of the
// <thead>, as long as they print no values; without one, rows marked as
// headings, else bold rows, else the rows above the first one with values.
func HeadRows(t *paper.Table, parts []Part) int {
	cells := rowCells(t)
	marked := 0
	for marked < t.Rows && parts[marked] == Head {
		marked++
	}
	n := marked
	for i := 1; i < marked; i++ {
		if isData(cells[i]) {
			n = i
			break
		}
	}
	if n == 0 || n == t.Rows && t.Rows > 1 {
		n = findHeads(t, cells)
	}
	for n > 0 && n < t.Rows-1 && n < mostHeadRows && continuesHead(cells[n]) {
		n++
	}
	return n
}

// findHeads finds the heading rows of a table without a usable <thead>.
func findHeads(t *paper.Table, cells [][]*paper.Cell) int {
	for _, is := range []func(*paper.Cell) bool{
		func(c *paper.Cell) bool { return c.Head },
		func(c *paper.Cell) bool { return allBold(&c.Text) },
	} {
		if n := leading(cells, is); n > 0 && n < t.Rows && n <= mostHeadRows {
			return n
		}
	}
	for i, row := range cells {
		if i > mostHeadRows {
			break
		}
		if !isData(row) {
			continue
		}
		for i > 1 && labelOnly(cells[i-1]) { // the first row group, not a heading
			i--
		}
		return i
	}
	if t.Rows > 1 && t.Cols > 1 {
		return 1
	}
	return 0
}

// leading counts the rows at the top whose filled cells are all so.
func leading(rows [][]*paper.Cell, is func(*paper.Cell) bool) int {
	for i, row := range rows {
		filled := 0
		for _, c := range row {
			if c.Text.S == "" {
				continue
			}
			filled++
			if !is(c) {
				return i
			}
		}
		if i > 0 && filled < 2 {
			return i
		}
	}
	return len(rows)
}

func allBold(t *paper.TextRun) bool {
	covered := 0
	for _, s := range t.Styles {
		if s.Kind == paper.Bold {
			covered += s.End - s.Start
		}
	}
	return covered > 0 && covered >= len(strings.ReplaceAll(t.S, "\n", ""))-1
}

// continuesHead reports whether a row of the body, right below the headings,
// is one more heading row: its stub is empty and it names statistics or n's.
func continuesHead(row []*paper.Cell) bool {
	if len(row) < 2 || row[0].Col != 0 || row[0].Text.S != "" {
		return false
	}
	filled, words := 0, 0
	for _, c := range row[1:] {
		if c.Text.S == "" {
			continue
		}
		filled++
		if headWord.MatchString(c.Text.S) && !dataCell.MatchString(c.Text.S) {
			words++
		}
	}
	return filled > 0 && words == filled
}
