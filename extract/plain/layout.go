package plain

// Rows of text say which cells follow one another, not which columns they
// cover: a cell that spans columns is written once, a cell that spans rows is
// missing in the rows below. layOut finds the spans that make all rows as wide
// as the widest and put cells where their like stand.

// spot is where a cell of a row stands in the grid.
type spot struct{ col, width, height int }

// layoutOf is the grid found for a table.
type layoutOf struct {
	cols int
	head int
	rows [][]spot
}

// layOut places the cells of all rows. head is the number of heading rows where
// the form says it, else 0.
func layOut(rows [][]rowCell, head int) layoutOf {
	lay := layoutOf{rows: make([][]spot, len(rows)), cols: columns(rows)}
	if head == 0 {
		head = headings(rows, lay.cols)
	}
	lay.head = head
	body := profiles(rows[head:], lay.cols)
	first := bodyPlacer{cols: lay.cols, body: body}
	for i := head; i < len(rows); i++ {
		lay.rows[i] = first.row(rows[i])
	}
	body = lay.profiles(rows)
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
	var groups []spot // heading cells over several columns, as units that body cells may span too
	if lay.head > 0 {
		placeHeads(lay.rows[:lay.head], rows[:lay.head], lay.cols, body)
	}
	if lay.head > 1 {
		groups = lay.rows[0]
	}
	place := bodyPlacer{cols: lay.cols, body: body, groups: groups}
	for i := lay.head; i < len(rows); i++ {
		lay.rows[i] = place.row(rows[i])
	}
}

// profiles collects what the placed rows hold in each column.
func (lay *layoutOf) profiles(rows [][]rowCell) []profile {
	body := make([]profile, lay.cols)
	for i := lay.head; i < len(rows); i++ {
		if labelOnly(rows[i]) {
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

// profiles collects what the full rows hold in each column.
func profiles(rows [][]rowCell, cols int) []profile {
	body := make([]profile, cols)
	for _, row := range rows {
		if len(row) != cols || labelOnly(row) {
			continue
		}
		for k, c := range row {
			body[k].add(c.kind)
		}
	}
	return body
}

// labelOnly reports whether a row holds one text alone: the heading of the rows
// below it. The text may stand in the second cell, where the first is covered.
func labelOnly(row []rowCell) bool {
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
	return at == 0 || at == 1 && row[at].kind == textual && len(row) > 2
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
		data, telling := dataRow(row)
		full, stub := len(row) >= cols, row[0].kind != empty
		if labelOnly(row) || data && (telling || stub && full) || full && stub && named {
			break
		}
		named = named || full && stub
	}
	if n == len(rows) {
		return 1
	}
	return n
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

// bodyPlacer places the rows below the headings, top to bottom.
type bodyPlacer struct {
	cols   int
	body   []profile
	groups []spot
	above  []*spot // the cell that covers each column in the row before
	filled []bool  // whether that cell has text
	kinds  []kind  // and of what kind it is
}

func (p *bodyPlacer) row(row []rowCell) []spot {
	spots := make([]spot, len(row))
	switch {
	case labelOnly(row):
		spots = labelRow(row, p.cols)
	case len(row) >= p.cols:
		for k := range row {
			if k < p.cols {
				spots[k] = spot{k, 1, 1}
			}
		}
	case p.underEstimates(row, spots):
	default:
		p.short(row, spots)
	}
	p.below(row, spots)
	return spots
}

// underEstimates places a row of intervals alone below the estimates of the row
// above: "58 | 93.1 | 2.16" over "(83.6 – 98.1) | (1.87 – 2.50)". Columns that
// hold nothing but whole numbers are counts, which have no interval.
func (p *bodyPlacer) underEstimates(row []rowCell, spots []spot) bool {
	for _, c := range row {
		if c.kind != interval {
			return false
		}
	}
	var under []int
	for c := 1; p.above != nil && c < p.cols; c++ {
		if p.above[c] == nil || p.above[c].width != 1 {
			continue
		}
		body := &p.body[c]
		if k := p.kinds[c]; (k == whole || k == decimal || k == percent || k == pvalue) && body[decimal]+body[percent]+body[pvalue] > 0 {
			under = append(under, c)
		}
	}
	if len(row) == 0 || len(under) != len(row) {
		return false
	}
	for k, c := range under {
		spots[k] = spot{c, 1, 1}
	}
	return true
}

// below lets the cells of the row above reach down over the columns that this
// row leaves free, and keeps what covers each column now.
func (p *bodyPlacer) below(row []rowCell, spots []spot) {
	above, filled, ofKind := make([]*spot, p.cols), make([]bool, p.cols), make([]kind, p.cols)
	complement := true // values stand where the row above has none
	for k := range spots {
		for c := spots[k].col; c < spots[k].col+spots[k].width; c++ {
			above[c], filled[c], ofKind[c] = &spots[k], row[k].kind != empty, row[k].kind
			if row[k].kind.numeric() && p.above != nil && p.filled[c] {
				complement = false
			}
		}
	}
	if p.above != nil && !labelOnly(row) && len(row) > 1 {
		for c := 0; c < p.cols; c++ {
			up := p.above[c]
			if above[c] != nil || up == nil || !p.filled[c] || c > up.col || !complement && plainValue[p.kinds[c]] {
				continue
			}
			free := true
			for k := c; k < c+up.width; k++ {
				free = free && above[k] == nil
			}
			if !free {
				continue
			}
			up.height++
			for k := c; k < c+up.width; k++ {
				above[k], filled[k], ofKind[k] = up, true, p.kinds[c]
			}
		}
	}
	p.above, p.filled, p.kinds = above, filled, ofKind
}

// plainValue marks values that are about their own row only. A p value, a
// comparison or a text may be about several.
var plainValue = map[kind]bool{whole: true, decimal: true, bracket: true, spread: true, percent: true}

// Costs, in hundredths of a full likeness.
const (
	costEdgeLeft  = 20  // columns at the left are covered from above: a stub over several rows
	costEdgeRight = 30  // at the right: a p value for several rows
	costInner     = 150 // in between
	costNoAbove   = 150 // nothing there to reach down
	scoreWide     = 60  // a cell over all columns of one heading
)

// short places a row with fewer cells than columns: the columns it leaves out
// are covered from above, or its cells span the columns of a wide heading.
func (p *bodyPlacer) short(row []rowCell, spots []spot) {
	type state struct {
		score int
		from  int // width of the cell that ends here; 0: the column is left out
		ok    bool
	}
	n, cols := len(row), p.cols
	at := make([][]state, cols+1) // at[c][k]: k cells fill the columns before c
	for c := range at {
		at[c] = make([]state, n+1)
	}
	at[0][0].ok = true
	reach := func(c, k, score, from int) {
		s := &at[c][k]
		if !s.ok || score > s.score {
			*s = state{score, from, true}
		}
	}
	for c := 0; c < cols; c++ {
		for k := 0; k <= n && k <= c; k++ {
			s := at[c][k]
			if !s.ok {
				continue
			}
			reach(c+1, k, s.score-p.gapCost(c, k, n, c > 0 && s.from == 0), 0)
			if k == n {
				continue
			}
			reach(c+1, k+1, s.score+p.body[c].fit(row[k].kind, c == 0), 1)
			if w := p.groupAt(c); w > 1 && row[k].kind != textual {
				reach(c+w, k+1, s.score+scoreWide, w)
			}
		}
	}
	for c, k := cols, n; c > 0; {
		w := at[c][k].from
		if w == 0 {
			c--
			continue
		}
		k--
		c -= w
		spots[k] = spot{c, w, 1}
	}
}

// gapCost is the price of leaving column c out after k of n cells.
func (p *bodyPlacer) gapCost(c, k, n int, goesOn bool) int {
	cost := 0
	if p.above == nil || p.above[c] == nil || !p.filled[c] {
		cost += costNoAbove
		if k == n {
			// a row cut off after its last filled cell is nothing unusual
			cost = costEdgeRight / 3
		}
	}
	switch {
	case goesOn:
	case k == 0:
		cost += costEdgeLeft
	case k == n:
		cost += costEdgeRight
	default:
		cost += costInner
	}
	return cost
}

// groupAt is the width of the heading that begins at column c.
func (p *bodyPlacer) groupAt(c int) int {
	for _, g := range p.groups {
		if g.col == c && g.height == 1 {
			return g.width
		}
	}
	return 1
}
