package plain

import (
	"halfspan/extract/pattern"
)

// groupWord is what a heading over several columns often says: whom they are
// about, or when.
var groupWord = pattern.MustCompile(`(?i)\b(?:groups?|arms?|treatments?|weeks?|months?|days?|years?|baseline|follow-?up|visit)\b`)

// wideScore says how well a heading suits being over several columns that have
// headings of their own.
func (s *headSearch) wideScore(level int, c *headCell, from, width int) int {
	score := -20 * width * width / s.cols // groups are about as wide as one another
	switch {
	case c.kind == empty:
		score -= 150
	case c.p && c.suitsAll(from, width) < 60:
		score -= 150
	default:
		if c.single || c.total {
			score -= 40
		} else {
			score += c.suitsAll(from, width)
		}
		if c.group {
			score += 20
		}
		if width == 2 && c.limits && s.body[from].bare() && s.body[from+1].bare() {
			score += 80 // the two ends of an interval have a column each
		}
	}
	if level > 0 {
		score -= 40
	}
	score += s.edge(from) + s.edge(from+width)
	if s.body[from].mostly(textual) && !s.body[from+width-1].mostly(textual) {
		score -= 60 // the stub is not grouped with values
		if width < s.cols {
			score -= 90
		}
	}
	return score
}

// reachesDown favours headings over several rows at the edges: the stub's and
// the p value's.
func reachesDown(col, cols int) int {
	switch col {
	case 0:
		return 30
	case cols - 1:
		return 20
	}
	return 0
}

// edge says how well a group begins or ends at column c: where the columns
// hold another kind of value.
func (s *headSearch) edge(c int) int {
	const change = 12
	if c == 0 || c == s.cols || s.body[c-1].usual() == s.body[c].usual() {
		return 0
	}
	return change
}

// groupScore looks at the headings below one that is over columns [from,
// from+width): those of the next row and those of the last row, whichever tell
// more. before and after are the cells used in each row without and with the
// group's.
func (s *headSearch) groupScore(head *headCell, level, from, width int, before, after headIndex) int {
	if after[level]-before[level] == 1 {
		if s.rows[level][before[level]].size {
			return 20
		}
		return -20 // the same columns named twice
	}
	score := s.likeOthers(level, before, after, true)
	if last := len(s.rows) - 1; last > level && int(after[last]-before[last]) == width {
		score = max(score, s.likeOthers(last, before, after, false))
	}
	return score + s.nameless(head, level, from, width, before, after)
}

// nameless says how far columns without a heading of their own, or with a
// sample size that the group has too, speak against a group.
func (s *headSearch) nameless(head *headCell, level, from, width int, before, after headIndex) int {
	cells := s.rows[level][before[level]:after[level]]
	named, sizes, pairs, alone := 0, 0, 0, 0
	for _, c := range cells {
		if c.size {
			alone++
		}
		if c.pair {
			pairs++
		}
		if c.size || c.sized && head.sized {
			sizes++
		}
		if c.kind != empty {
			named++
		}
	}
	switch {
	case len(cells) < 2:
	case pairs == len(cells) && head.p:
		return 60 // p values of comparisons
	case sizes == len(cells):
		return -60 // a sample size belongs to a heading of its own
	case alone > 0:
		return -30
	case named == 0 && from == 0:
		return 10 // a stub of several columns, named above
	case named == 0:
	case cells[0].kind == empty:
		return -60 // a group does not begin with a nameless column
	case cells[len(cells)-1].kind == empty && !s.body[from+width-1].mostly(pvalue):
		return -40 // nor does it end with one, unless it needs no name
	}
	return 0
}

// likeOthers says how well the cells of one row make a group: that another
// group has the same is good, the same word twice within is bad in the next row.
func (s *headSearch) likeOthers(level int, before, after headIndex, next bool) int {
	row := s.rows[level]
	first, n := int(before[level]), int(after[level])-int(before[level])
	if n < 2 {
		return 0
	}
	score := 0
	distinct := map[string]bool{}
	for _, c := range row[first : first+n] {
		distinct[c.label] = true
	}
	if len(distinct) > 1 {
		score += neighbour(row, first, n)
	}
	if next && len(distinct) > 1 && len(distinct) < n {
		score -= 80
	}
	for k, c := range row[first : first+n] {
		if c.p || c.total {
			if k == n-1 {
				score += 30 // a p value or a total closes its group
			} else {
				score -= 30
			}
		}
	}
	return score
}

// neighbour looks for the same n headings next to those from first on, at most
// two headings of single columns between. The more headings come again, the
// surer the group.
func neighbour(row []headCell, first, n int) int {
	for gap, price := range []int{0, 20, 50} {
		for _, other := range []int{first - n - gap, first + n + gap} {
			if other < 0 || max(other, first)+n > len(row) {
				continue
			}
			if sameLabels(row, other, first, n) {
				return 40 + 30*n - price
			}
			if gap < 2 && sameShapes(row, other, first, n) {
				return 20 + 20*n - price
			}
		}
	}
	return 0
}

func sameLabels(row []headCell, a, b, n int) bool {
	if max(a, b)+n > len(row) {
		return false
	}
	for k := 0; k < n; k++ {
		if !sameLabel(row[a+k].label, row[b+k].label) {
			return false
		}
	}
	return true
}

// sameShapes compares n headings of columns but for the numbers in them: "p 1"
// and "p 2". Headings that differ by their numbers alone are no group.
func sameShapes(row []headCell, a, b, n int) bool {
	distinct := map[string]bool{}
	for k := range n {
		if row[a+k].shape == "" || row[a+k].shape != row[b+k].shape {
			return false
		}
		distinct[row[a+k].shape] = true
	}
	return len(distinct) > 1
}

// sameLabel compares two bare headings but for a mark, at the end or inside
// ("ord95ci", "or95ci").
func sameLabel(a, b string) bool {
	if len(a) > len(b) {
		a, b = b, a
	}
	if a == b {
		return true
	}
	const fewest = 3
	more := len(b) - len(a)
	if len(a) < fewest || more > 2 {
		return false
	}
	k := 0
	for k < len(a) && a[k] == b[k] {
		k++
	}
	if k == len(a) {
		return true
	}
	for _, c := range b[k : k+more] {
		if c < 'a' || c > 'f' {
			return false
		}
	}
	return k > 1 && a[k:] == b[k+more:]
}

// overStub reports whether a heading stands over the first columns alone and
// these hold words: the stub is often wider than one column, with one heading
// or none.
func (s *headSearch) overStub(level, cell, from, width int) bool {
	if from != 0 || cell != 0 || width > 2 || width >= s.cols {
		return false
	}
	for k := range width {
		if !s.body[k].words() && (k > 0 || s.body[0].usual() != empty) {
			return false
		}
	}
	return s.rows[level][cell].kind == empty
}

// intervalWord is a heading that names an interval and nothing else.
var intervalWord = pattern.MustCompile(`(?i)^\W*(?:(?:9[059]|80)\s*%\s*)?(?:CI|confidence (?:interval|limit)s?|IQR|range|interquartile range)\W*$`)

// placeStatements places a row below a full row of headings that says what
// their values are: "mean (SD)" of two groups stands there once, over both. The
// stub may reach down beside it. False if the cells fit nowhere.
func placeStatements(spots []spot, row []rowCell, cols int, body []profile) bool {
	type state struct {
		score, width int
		ok           bool
	}
	cells := known([][]rowCell{row}, cols, body)[0]
	n := len(cells)
	at := make([][]state, cols+1) // at[c][k]: k cells cover the columns before c
	for c := range at {
		at[c] = make([]state, n+1)
	}
	at[0][0].ok = true
	for c := range cols {
		for k := range min(n, c) + 1 {
			if !at[c][k].ok {
				continue
			}
			gap := 40 // a heading above reaches down
			if c == 0 && cells[0].kind != empty {
				gap = 0 // the stub does
			}
			if to := &at[c+1][k]; !to.ok || at[c][k].score-gap > to.score {
				*to = state{at[c][k].score - gap, 0, true}
			}
			if k == n {
				continue
			}
			for w := 1; c+w <= cols; w++ {
				score := at[c][k].score + statementScore(&cells[k], body, c, w)
				if to := &at[c+w][k+1]; !to.ok || score > to.score {
					*to = state{score, w, true}
				}
			}
		}
	}
	if !at[cols][n].ok {
		return false
	}
	for c, k := cols, n; k > 0; {
		w := at[c][k].width
		if w == 0 {
			c--
			continue
		}
		c -= w
		k--
		spots[k] = spot{c, w, 1}
	}
	return true
}

// statementScore says how well a statement suits columns [from, from+width).
func statementScore(c *headCell, body []profile, from, width int) int {
	score := 0
	for k := from; k < from+width; k++ {
		score += c.suits[k]
		if body[k].usual() != body[from].usual() {
			score -= 100
		}
	}
	switch {
	case width == 1:
	case c.kind == empty:
		score = -60 * width
	case c.says:
		score -= 30
	default:
		score = -100
	}
	return score
}
