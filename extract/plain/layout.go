package plain

import "halfspan/extract/pattern"

// Rows of text say which cells follow one another, not which columns they
// cover: a cell that spans columns is written once, a cell that spans rows is
// missing in the rows below. layOut finds the spans that make all rows as wide
// as the widest and put cells where their like stand.

// spot is where a cell of a row stands in the grid.
type spot struct{ col, width, height int }

// layoutOf is the grid found for a table.
type layoutOf struct {
	cols  int
	head  int
	rows  [][]spot
	doubt []bool // columns about whose headings the text leaves a doubt; nil: none
}

// layOut places the cells of all rows. head is the number of heading rows where
// the form says it, else 0.
func layOut(rows [][]rowCell, head int) layoutOf {
	lay := layoutOf{rows: make([][]spot, len(rows)), cols: columns(rows)}
	if head == 0 {
		head = headings(rows, lay.cols)
	}
	lay.head = head
	body, full := profiles(rows[head:], lay.cols)
	first := newBodyPlacer(&lay, rows, body)
	for i := head; i < len(rows); i++ {
		lay.rows[i] = first.row(rows[i])
	}
	placed := lay.profiles(rows)
	for c := range body {
		if full < 2 || body[c].usual() == empty {
			body[c] = placed[c]
		}
	}
	// What the short rows hold is known only once they are placed; it may move
	// the headings, and these the rows: twice is enough in practice.
	for range 2 {
		lay.place(rows, body)
		body = lay.profiles(rows)
	}
	return lay
}

// asTold takes rows with a cell for every column as they are.
func asTold(rows [][]rowCell) layoutOf {
	lay := layoutOf{cols: columns(rows), rows: make([][]spot, len(rows))}
	lay.head = headings(rows, lay.cols)
	for i, row := range rows {
		lay.rows[i] = make([]spot, len(row))
		for k, c := range row {
			if c.over >= 0 && k < lay.cols {
				lay.rows[i][k] = spot{k, min(max(c.over, 1), lay.cols-k), 1}
			}
		}
	}
	return lay
}

// place finds the spots of all cells by what the columns hold.
func (lay *layoutOf) place(rows [][]rowCell, body []profile) {
	if lay.head > 0 {
		lay.doubt = placeHeads(lay.rows[:lay.head], rows[:lay.head], lay.cols, body)
	}
	place := newBodyPlacer(lay, rows, body)
	for i := lay.head; i < len(rows); i++ {
		lay.rows[i] = place.row(rows[i])
	}
}

// profiles collects what the placed rows hold in each column.
func (lay *layoutOf) profiles(rows [][]rowCell) []profile {
	body := make([]profile, lay.cols)
	for i := lay.head; i < len(rows); i++ {
		if labelOnly(rows[i], lay.cols) {
			continue
		}
		for k, s := range lay.rows[i] {
			if s.width == 1 {
				body[s.col].add(rows[i][k].kind)
			}
		}
	}
	return body
}

// columns is the width of the table: that of its widest row, trailing empty
// cells of a single row left aside.
func columns(rows [][]rowCell) int {
	widest, times := 0, 0
	for _, row := range rows {
		switch n := len(row); {
		case n > widest:
			widest, times = n, 1
		case n == widest:
			times++
		}
	}
	if times > 1 || len(rows) < 3 {
		return widest
	}
	filled := 0
	for _, row := range rows {
		n := len(row)
		for n > 0 && row[n-1].kind == empty && len(row) == widest {
			n--
		}
		filled = max(filled, n)
	}
	return filled
}

// profiles collects what the full rows hold in each column, and counts them.
func profiles(rows [][]rowCell, cols int) (body []profile, full int) {
	body = make([]profile, cols)
	for _, row := range rows {
		if len(row) != cols || labelOnly(row, cols) {
			continue
		}
		full++
		for k, c := range row {
			body[k].add(c.kind)
		}
	}
	return body, full
}

// labelOnly reports whether a row holds one text alone: the heading of the rows
// below it. The text may stand in the second cell, where the first is covered.
func labelOnly(row []rowCell, cols int) bool {
	at := -1
	for i, c := range row {
		if c.kind == empty {
			continue
		}
		if at >= 0 {
			return false
		}
		at = i
	}
	return at == 0 || at == 1 && row[at].kind == textual && cols > 2
}

// labelRow places a row of one text: what the row is short of, the text spans.
func labelRow(row []rowCell, cols int) []spot {
	spots := make([]spot, len(row))
	col := 0
	for k, c := range row {
		width := 1
		if c.kind != empty && len(row) > 1 {
			width += max(cols-len(row), 0)
		} else if len(row) == 1 {
			width = cols
		}
		if col+width > cols {
			break
		}
		spots[k] = spot{col, width, 1}
		col += width
	}
	return spots
}

// dataRow reports whether a row prints values: more than half of its filled
// cells after the first are numbers. telling: one is more than a whole number,
// which a heading may print too.
func dataRow(row []rowCell) (data, telling bool) {
	filled, numbers := 0, 0
	for i, c := range row {
		if i == 0 && len(row) > 1 || c.kind == empty || c.kind == wild {
			continue
		}
		filled++
		if c.kind.numeric() {
			numbers++
			telling = telling || c.kind != whole
		}
	}
	return filled > 0 && 2*numbers > filled, telling
}

// headings tells how many rows at the top are column headings. The first is one
// unless it prints values. A row below is one too if it prints none and cannot
// be the first of the body: it is short, as only a row below wide or tall
// headings is there, or has no stub, or names the stub that no row named yet.
func headings(rows [][]rowCell, cols int) int {
	const most = 5
	if data, telling := dataRow(rows[0]); data && telling {
		return 0
	}
	named := rows[0][0].kind != empty || allNamed(rows[0], cols) // the stub has its heading, or will have none
	n := 1
	for ; n < len(rows) && n < most; n++ {
		row := rows[n]
		if statementRow(row) || yearRow(row, len(rows[n-1]) < cols) {
			continue
		}
		data, telling := dataRow(row)
		full, stub := len(row) >= cols, row[0].kind != empty
		if !stub && !full && len(rows[n-1]) < cols && !measured(row) {
			continue // the middle of three rows of headings
		}
		if labelOnly(row, cols) || data && (telling || stub && full) || full && stub && named || data && countWord.MatchString(row[0].label) {
			break
		}
		named = named || full && stub
	}
	if n == len(rows) {
		return 1
	}
	return n
}

var (
	// countWord is the stub of a row of sample sizes.
	countWord = pattern.MustCompile(`(?i)^(?:n|no\.?|number)$`)
	// statement is a cell below a heading that gives the heading's sample size
	// or says what the values are.
	statement = pattern.MustCompile(`(?i)^\(?(?:n\s*=\s*[\d, ]+|(?:n|no\.?|number|mean|median|%|±|\+/-|or|SDs?|SEM?|s\.d\.|s\.e\.m?\.|IQR|range|(?:95\s*%\s*)?CI|[\s(),;/[\]])+)\)?[\s*†‡§¶#a-f]{0,2}$`)
)

// statementRow reports whether every cell of a row is a statement about the
// headings above; the stub may have its name there if the others are sample
// sizes.
func statementRow(row []rowCell) bool {
	found, named := false, false
	for k, c := range row {
		switch {
		case c.kind == empty:
		case k == 0 && len(row) > 1:
			named = true
		case !statement.MatchString(c.label) || named && !sizeWord.MatchString(c.label):
			return false
		default:
			found = true
		}
	}
	return found
}

// states reports whether a cell of a row says what the values are.
func states(row []rowCell) bool {
	for _, c := range row {
		if c.kind != empty && statement.MatchString(c.label) && !sizeWord.MatchString(c.label) {
			return true
		}
	}
	return false
}

var (
	aYear   = pattern.MustCompile(`^(?:19|20)\d\d$`)
	aChange = pattern.MustCompile(`(?i)^(?:Δ|change|difference|p)\W*$`)
)

// yearRow reports whether a row names years, and changes between them, below
// headings that are over several columns each.
func yearRow(row []rowCell, below bool) bool {
	years := 0
	for _, c := range row[1:] {
		switch {
		case aYear.MatchString(c.label):
			years++
		case c.kind != empty && !aChange.MatchString(c.label):
			return false
		}
	}
	return below && years > 1
}

// measured reports whether a row holds values that no heading has.
func measured(row []rowCell) bool {
	for _, c := range row {
		if c.kind == spread || c.kind == estimate || c.kind == bracket || c.kind == interval {
			return true
		}
	}
	return false
}

// allNamed reports whether every column but the first has a heading in the row.
func allNamed(row []rowCell, cols int) bool {
	if len(row) < cols {
		return false
	}
	for _, c := range row[1:] {
		if c.kind == empty {
			return false
		}
	}
	return true
}
