package plain

import (
	"sort"
	"strings"

	"halfspan/extract/pattern"
)

// placeHeads finds the spans of the heading rows: a tiling of the columns in
// which every heading stands over columns that hold what it names, headings
// over several columns stand over like groups, and the last row has a cell for
// every column that no heading above reaches down to.
func placeHeads(spots [][]spot, rows [][]rowCell, cols int, body []profile) {
	for i := range rows {
		spots[i] = make([]spot, len(rows[i]))
	}
	best := searchHeads(rows, cols, body, len(rows) == 1)
	if best == nil {
		best = searchHeads(rows, cols, body, true)
	}
	if best == nil {
		leftAlign(spots, rows, cols)
		return
	}
	best.places.put(spots)
}

// put writes the places into the spots.
func (p *placed) put(spots [][]spot) {
	for ; p != nil; p = p.rest {
		spots[p.row][p.cell] = p.at
		p.below.put(spots)
	}
}

// searchHeads finds the best tiling, nil if there is none. Cells of the last
// row are over one column each unless wide says otherwise: that is rare, and
// costs a long search.
func searchHeads(rows [][]rowCell, cols int, body []profile, wide bool) *headWay {
	if len(rows) > maxHeadRows || cols > maxHeadCols {
		return nil
	}
	s := headSearch{rows: known(rows, cols, body), cols: cols, body: body, wide: wide, memo: map[headKey][]headWay{}}
	var start headIndex
	var best *headWay
	for _, w := range s.tile(0, 0, cols, start) {
		if w.complete(rows) && (best == nil || w.score > best.score) {
			best = &w
		}
	}
	return best
}

// leftAlign is the fallback: cells as they come, a single cell over all.
func leftAlign(spots [][]spot, rows [][]rowCell, cols int) {
	for i, row := range rows {
		for k := range row {
			if k < cols {
				spots[i][k] = spot{k, 1, 1}
			}
		}
		if len(row) == 1 {
			spots[i][0] = spot{0, cols, 1}
		}
	}
}

const (
	maxHeadRows = 4
	maxHeadCols = 40      // wider tables are not printed; their headings stand as they come
	mostWays    = 48      // ways kept for a stretch of columns
	headFuel    = 150_000 // steps of the search for one table
)

// headIndex counts the cells used in each heading row.
type headIndex [maxHeadRows]uint8

type headKey struct {
	level, from, to int
	used            headIndex
}

// headWay is one way to fill columns with headings: the cells used so far, how
// well they suit, and their places.
type headWay struct {
	used   headIndex
	score  int
	places *placed
}

type placed struct {
	row, cell int
	at        spot
	below     *placed // headings under it
	rest      *placed // headings to its right
}

func (w *headWay) complete(rows [][]rowCell) bool {
	for i, row := range rows {
		if int(w.used[i]) != len(row) {
			return false
		}
	}
	return true
}

// headCell is a heading with what the search asks of it again and again.
type headCell struct {
	kind     kind
	label    string // bare: for comparing
	p, group bool   // names a p value; speaks of groups or times
	suits    []int  // for each column
}

// known asks of every heading what the search needs.
func known(rows [][]rowCell, cols int, body []profile) [][]headCell {
	out := make([][]headCell, len(rows))
	for i, row := range rows {
		for _, c := range row {
			h := headCell{kind: c.kind, label: bare.ReplaceAllString(strings.ToLower(c.label), ""), p: pWord.MatchString(c.label), group: groupWord.MatchString(c.label), suits: make([]int, cols)}
			for k := range h.suits {
				h.suits[k] = suits(c.label, &body[k])
			}
			out[i] = append(out[i], h)
		}
	}
	return out
}

type headSearch struct {
	rows  [][]headCell
	cols  int
	body  []profile
	wide  bool // cells of the last row may be over several columns
	memo  map[headKey][]headWay
	steps int
}

// tile gives the best way for each count of cells used to fill columns
// [from, to) with the heading rows from level down.
func (s *headSearch) tile(level, from, to int, used headIndex) []headWay {
	for i, row := range s.rows {
		if len(row)-int(used[i]) > s.cols-from {
			return nil // more cells left than columns
		}
	}
	if from == to || level == len(s.rows) {
		return []headWay{{used: used}}
	}
	key := headKey{level, from, to, used}
	if ways, ok := s.memo[key]; ok {
		return ways
	}
	var ways []headWay
	cell := int(used[level])
	if left := len(s.rows[level]) - cell; left > 0 && (level > 0 || left <= to-from) {
		after := used
		after[level]++
		last := to
		if level == 0 { // the first row has a cell for every column left
			last = to - left + 1
		}
		for width := 1; from+width <= last; width++ {
			for height := 1; level+height <= len(s.rows); height++ {
				if level+height == len(s.rows) && width > 1 && !s.wide && level > 0 {
					continue
				}
				if s.steps++; s.steps > headFuel {
					return nil
				}
				score := s.score(level, cell, from, width, height)
				for _, below := range s.tile(level+height, from, from+width, after) {
					group := 0
					if width > 1 && level+height < len(s.rows) {
						group = s.groupScore(level+height, width, used, below.used)
					}
					for _, rest := range s.tile(level, from+width, to, below.used) {
						s.steps++
						total := score + group + below.score + rest.score
						if w := better(&ways, rest.used, total); w != nil {
							w.places = &placed{level, cell, spot{from, width, height}, below.places, rest.places}
						}
					}
				}
			}
		}
	}
	if len(ways) > mostWays {
		sort.SliceStable(ways, func(i, j int) bool { return ways[i].score > ways[j].score })
		ways = ways[:mostWays]
	}
	s.memo[key] = ways
	return ways
}

// better gives the way that is to be filled in for a score: a new one, or the
// one with the same cells used if its score is lower; nil if it is not.
func better(ways *[]headWay, used headIndex, score int) *headWay {
	for i := range *ways {
		w := &(*ways)[i]
		if w.used != used {
			continue
		}
		if score <= w.score {
			return nil
		}
		w.score = score
		return w
	}
	*ways = append(*ways, headWay{used: used, score: score})
	return &(*ways)[len(*ways)-1]
}

// score says how well a heading suits the columns [from, from+width).
// Hundredths of a full likeness.
func (s *headSearch) score(level, cell, from, width, height int) int {
	c := &s.rows[level][cell]
	lowest := level+height == len(s.rows)
	score := 0
	switch {
	case lowest && width == 1:
		score = c.suits[from]
		if level == 0 && c.kind != empty && score == 0 && s.body[from].mostly(textual) {
			score = 40 // a column of words has its name at the top
		}
	case lowest:
		for k := from; k < from+width; k++ {
			score += min(c.suits[k], 40)
		}
		score -= 100 // a heading over several columns without headings of their own
		if from == 0 && s.body[width-1].mostly(textual) && s.body[0].mostly(textual) {
			score += 100 // but a stub of two columns is often named once
		}
	case width == 1 && c.kind == empty:
		score = 10
	case width == 1:
		if c.p {
			score = c.suits[from] / 2
		}
	default:
		score = s.wideScore(level, c, from, width)
	}
	if height > 1 && width == 1 {
		score += reachesDown(from, s.cols)
	}
	if height > 1 && !lowest {
		score -= 10 + 20*(width-1)
	}
	return score
}

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
	case c.p:
		score -= 80
	default:
		score += c.suitsAll(from, width)
		if c.group {
			score += 20
		}
	}
	if level > 0 {
		score -= 40
	}
	if s.body[from].mostly(textual) && !s.body[from+width-1].mostly(textual) {
		score -= 60 // the stub is not grouped with values
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

// groupScore looks at the headings below a wide one: those of the next row and
// those of the last row, whichever tell more. before and after are the cells
// used in each row without and with the group's.
func (s *headSearch) groupScore(level, width int, before, after headIndex) int {
	score := s.likeOthers(level, before, after)
	if last := len(s.rows) - 1; last > level && int(after[last]-before[last]) == width {
		score = max(score, s.likeOthers(last, before, after))
	}
	return score
}

// likeOthers says how well the cells of one row make a group: that another
// group has the same is good, the same word twice within is bad.
func (s *headSearch) likeOthers(level int, before, after headIndex) int {
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
	if len(distinct) > 1 && len(distinct) < n {
		score -= 80
	}
	for k, c := range row[first : first+n] {
		if c.p {
			if k == n-1 {
				score += 30 // a p value closes its group
			} else {
				score -= 30
			}
		}
	}
	if row[first].kind == empty {
		score -= 60 // a group does not begin with a nameless column
	}
	return score
}

// neighbour looks for the same n headings next to those from first on, at most
// two headings of single columns between.
func neighbour(row []headCell, first, n int) int {
	for gap, score := range []int{100, 90, 60} {
		for _, other := range []int{first - n - gap, first + n + gap} {
			if other >= 0 && sameLabels(row, other, first, n) {
				return score
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

// sameLabel compares two bare headings but for a mark at the end.
func sameLabel(a, b string) bool {
	if len(a) > len(b) {
		a, b = b, a
	}
	return a == b || len(a) > 2 && len(b)-len(a) <= 2 && strings.HasPrefix(b, a)
}

var bare = pattern.MustCompile(`[^\pL\pN]+`)

var pWord = pattern.MustCompile(`(?i)^\W*p[a-d]?\b|\bp[- ]?values?|^sig(?:nificance|\.)?$|^statistics?$`)

// headWords tie words of a heading to what its column holds.
var headWords = []struct {
	word  *pattern.Pattern
	kinds []kind
}{
	{pWord, []kind{pvalue}},
	{pattern.MustCompile(`±|\+/-`), []kind{spread}},
	{pattern.MustCompile(`(?i)\([^)]*(?:CI|IQR|range|quartile|confidence)[^)]*\)|\w.*\d\d\s*%\s*CI`), []kind{estimate}},
	{pattern.MustCompile(`(?i)^\W*(?:\d\d\s*%\s*)?(?:CI|confidence interval|IQR|range)\W*$`), []kind{interval}},
	{pattern.MustCompile(`(?i)^(?:mean|median|n|no\.?|number).*\((?:±\s*)?(?:SDs?|s\.d\.|SEM?|s\.e\.|%|IQR|standard)[^)]*\)|\w\s*\(\s*(?:±\s*)?(?:SDs?|s\.d\.|SEM?|s\.e\.)\s*\)`), []kind{bracket, estimate}},
	{pattern.MustCompile(`(?i)\((?:n|no\.?)\)$`), []kind{whole}},
	{pattern.MustCompile(`(?i)^\W*(?:total\s+)?(?:n|no\.?|number)\W*$`), []kind{whole}},
	{pattern.MustCompile(`(?i)^\W*(?:mean|SD|s\.d\.|SEM?|s\.e\.|%|median|B|β|t|F|z|χ2|OR|RR|HR|MD|effect size|cohen.?s d)\W*$`), []kind{decimal, whole, percent, pvalue}},
}

// suits says how well a heading names what a column holds.
func suits(label string, p *profile) int {
	if label == "" {
		if p.mostly(textual) {
			return 50
		}
		return -30
	}
	label = trailingMark.ReplaceAllString(label, "")
	for _, h := range headWords {
		if !h.word.MatchString(label) {
			continue
		}
		if p.mostly(h.kinds...) {
			return 100
		}
		if p.mostly(textual) {
			return -60
		}
		return -20
	}
	return 0
}

// suitsAll is the mean of suits over several columns; a heading that says
// nothing of their content counts 0.
func (c *headCell) suitsAll(from, width int) int {
	total := 0
	for _, v := range c.suits[from : from+width] {
		total += v
	}
	return max(total/width, 0)
}

// trailingMark is a footnote mark behind a heading.
var trailingMark = pattern.MustCompile(`[\s\x{00A0}]*(?:[*†‡§¶#]+|[\s\x{00A0}][a-e])$`)
