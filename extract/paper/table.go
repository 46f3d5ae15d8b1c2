package paper

// Table is one table as read, a grid of Rows by Cols. Each cell is stored once,
// at its top left corner, with its spans; every grid position is covered by at
// most one cell.
type Table struct {
	Label    string  // "Table 2"; empty when it has none
	Caption  TextRun // without the label
	Rows     int
	Cols     int
	HeadRows int        // the first HeadRows rows are column headings
	Cells    []Cell     // ordered by Row, then Col
	Notes    []FootNote // below the table, in order
	Page     int        // first page; 0 where there are none
	Box      Box        // on that page
	Turned   bool       // printed along another direction than the page's text
	Picture  bool       // only a picture of a table: no cells
}

// Cell is one cell of a Table.
type Cell struct {
	Row, Col         int  // of its top left grid position, 0-based
	RowSpan, ColSpan int  // at least 1
	Head             bool // marked up or found to be a heading cell (column heading, or row heading in the stub)
	Indent           int  // steps of indentation of a row heading, 0 the outermost
	Text             TextRun
}

// FootNote is one note of a table with the mark that leads to it.
type FootNote struct {
	Mark string // "a", "*", "†"; empty for a general note
	Text TextRun
}

// Grid gives the cell that covers each position, nil where none does.
func (t *Table) Grid() [][]*Cell {
	grid := make([][]*Cell, t.Rows)
	for r := range grid {
		grid[r] = make([]*Cell, t.Cols)
	}
	for i := range t.Cells {
		c := &t.Cells[i]
		for r := max(c.Row, 0); r < min(c.Row+c.RowSpan, t.Rows); r++ {
			for k := max(c.Col, 0); k < min(c.Col+c.ColSpan, t.Cols); k++ {
				if grid[r][k] == nil {
					grid[r][k] = c
				}
			}
		}
	}
	return grid
}
