package plain

// headRow is a heading row with its places.
type headRow struct {
	cells []rowCell
	spots []spot
}

func newBodyPlacer(lay *layoutOf, rows [][]rowCell, body []profile) *bodyPlacer {
	p := &bodyPlacer{cols: lay.cols, body: body, stub: 1}
	for i := range lay.head {
		if lay.rows[i] != nil {
			p.heads = append(p.heads, headRow{rows[i], lay.rows[i]})
		}
	}
	if len(p.heads) > 1 {
		p.groups = p.heads[0].spots
	}
	const widest = 3
	for p.stub < widest && p.stub < p.cols-1 && (body[0].words() || body[0].usual() == empty) && body[p.stub].words() {
		p.stub++
	}
	for _, row := range rows[lay.head:] {
		p.named = p.named || len(row) == p.cols && row[0].kind == empty && !labelOnly(row, p.cols)
	}
	return p
}

// bodyPlacer places the rows below the headings, top to bottom.
type bodyPlacer struct {
	cols   int
	body   []profile
	groups []spot // heading cells over several columns, as units that body cells may span too
	heads  []headRow
	stub   int     // how many columns at the left hold words
	named  bool    // empty cells stand in the stub where a name goes on, so that a cell left out spans none
	above  []*spot // the cell that covers each column in the row before
	filled []bool  // whether that cell has text
	kinds  []kind  // and of what kind it is
}

func (p *bodyPlacer) row(row []rowCell) []spot {
	spots := make([]spot, len(row))
	switch {
	case p.headAgain(row, spots):
	case labelOnly(row, p.cols):
		spots = labelRow(row, p.cols)
	case len(row) >= p.cols:
		for k := range row {
			if k < p.cols {
				spots[k] = spot{k, 1, 1}
			}
		}
	case p.underEstimates(row, spots), p.perGroup(row, spots):
	case row[0].kind == empty && states(row) && placeStatements(spots, row, p.cols, p.body):
	default:
		p.short(row, spots)
	}
	p.below(row, spots)
	return spots
}

// headAgain places a row that repeats a heading row of the table's top.
func (p *bodyPlacer) headAgain(row []rowCell, spots []spot) bool {
	for _, h := range p.heads {
		if len(h.cells) != len(row) || len(row) < 2 {
			continue
		}
		same, named := true, 0
		for k := range row {
			same = same && row[k].label == h.cells[k].label
			if row[k].kind != empty {
				named++
			}
		}
		if same && named > 1 {
			for k, s := range h.spots {
				spots[k] = spot{s.col, s.width, min(s.width, 1)}
			}
			return true
		}
	}
	return false
}

// perGroup places a row with one value for each group of columns that a heading
// row makes, or with two where the last column of every group has its own.
func (p *bodyPlacer) perGroup(row []rowCell, spots []spot) bool {
	if row[0].kind != textual {
		return false
	}
	for _, h := range p.heads {
		units, wide := p.units(h)
		if wide < 2 {
			continue
		}
		if len(units) == len(row)-1 && valuesOnly(row[1:]) && len(row) < p.cols {
			spots[0] = spot{0, units[0].col, 1}
			copy(spots[1:], units)
			return true
		}
		if wide == len(units) && 2*len(units) == len(row)-1 && pairsWithBlank(row[1:]) {
			spots[0] = spot{0, units[0].col, 1}
			for k, u := range units {
				spots[1+2*k] = spot{u.col, u.width - 1, 1}
				spots[2+2*k] = spot{u.col + u.width - 1, 1, 1}
			}
			return true
		}
	}
	return false
}

// units are the headings of a row over the columns right of the stub, if they
// cover these without a gap, and how many of them are over several columns.
func (p *bodyPlacer) units(h headRow) (units []spot, wide int) {
	next := -1
	for k, s := range h.spots {
		if s.width == 0 || s.col < p.stub && k == 0 {
			continue
		}
		if next >= 0 && s.col != next || s.col == 0 {
			return nil, 0
		}
		next = s.col + s.width
		if s.width > 1 {
			wide++
		}
		units = append(units, spot{s.col, s.width, 1})
	}
	if next != p.cols || len(units) < 2 || units[0].col > p.stub {
		return nil, 0
	}
	return units, wide
}

func valuesOnly(cells []rowCell) bool {
	values := 0
	for _, c := range cells {
		if c.kind.numeric() {
			values++
		} else if c.kind == textual || c.kind == quantity {
			return false
		}
	}
	return 2*values > len(cells)
}

// pairsWithBlank reports whether values and cells without one take turns.
func pairsWithBlank(cells []rowCell) bool {
	for k, c := range cells {
		if k%2 == 0 && !c.kind.numeric() || k%2 == 1 && c.kind != wild && c.kind != empty {
			return false
		}
	}
	return true
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
	if p.above != nil && !labelOnly(row, p.cols) && len(row) > 1 {
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
	costInnerP    = 40  // in between, below a p value
	costNoAbove   = 150 // nothing there to reach down
	scoreWide     = 60  // a cell over all columns of one heading
	spanPrice     = 60  // a name or an empty cell over columns with headings of their own
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
			if w, score := p.spans(row, c, k); w > 1 {
				for ; w > 1; w-- {
					if c+w <= cols {
						reach(c+w, k+1, s.score+score, w)
					}
				}
			}
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

// spans gives the most columns that the k-th cell may span from column c on,
// if it is one that often spans some, and the score for it: the name of a row
// over a wide stub, or over columns that the row leaves free; empty cells.
func (p *bodyPlacer) spans(row []rowCell, c, k int) (width, score int) {
	switch {
	case k == 0 && c == 0 && row[0].kind == textual && p.stub > 1:
		score = 100
		if !p.named && p.above != nil && p.above[0] != nil && p.filled[0] && p.above[0].width == 1 {
			score = 0 // it may as well be a second name under the one above
		}
		return p.stub, score
	case k == 0 && c == 0 && row[0].kind == textual:
		return p.cols - 1, -2 * spanPrice
	case k > 0 && row[k].kind == empty:
		return p.cols - 1, -spanPrice
	}
	return 0, 0
}

// gapCost is the price of leaving column c out after k of n cells.
func (p *bodyPlacer) gapCost(c, k, n int, goesOn bool) int {
	cost := 0
	if p.above == nil || p.above[c] == nil || !p.filled[c] || c < p.stub && p.above[c].width > 1 {
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
	case p.above != nil && p.above[c] != nil && p.kinds[c] == pvalue:
		cost += costInnerP
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
