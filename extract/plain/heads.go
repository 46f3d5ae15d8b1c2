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
//
// It gives the columns about whose headings the rows leave a doubt: there is
// another way to read them that is nearly as good.
func placeHeads(spots [][]spot, rows [][]rowCell, cols int, body []profile) (doubtful []bool) {
	for i := range rows {
		spots[i] = make([]spot, len(rows[i]))
	}
	if n := len(rows) - 1; n > 0 && len(rows[n-1]) >= cols && len(rows[n]) < cols && (rows[n][0].kind == empty || len(rows[n]) == 1) && states(rows[n]) {
		doubtful = placeHeads(spots[:n], rows[:n], cols, body)
		if placeStatements(spots[n], rows[n], cols, body) {
			return doubtful
		}
	}
	wide := len(rows) == 1
	best := searchHeads(rows, cols, body, wide)
	if best == nil {
		wide = true
		best = searchHeads(rows, cols, body, wide)
	}
	if best == nil {
		leftAlign(spots, rows, cols)
		return everyColumn(rows, cols)
	}
	best.places.put(spots)
	return rivals(best, rows, cols, body, wide)
}

// everyColumn is the doubt about headings that were not placed at all; none
// where they leave no choice.
func everyColumn(rows [][]rowCell, cols int) []bool {
	all := make([]bool, cols)
	for _, row := range rows {
		for c := range all {
			all[c] = all[c] || len(row) != cols
		}
	}
	return all
}

// near is how much worse another reading may score and still leave a doubt.
const nearScore = 25

// rivals looks for another way to place the headings that is nearly as good as
// the best, and tells the columns whose headings differ.
func rivals(best *headWay, rows [][]rowCell, cols int, body []profile, wide bool) []bool {
	const most = 6 // headings over several columns that are tried elsewhere
	doubtful := make([]bool, cols)
	s := headSearch{rows: known(rows, cols, body), cols: cols, body: body, wide: wide}
	tried := 0
	for p := best.places; p != nil && tried < most; p = p.rest {
		if p.at.width == 1 || p.at.width == cols {
			continue
		}
		tried++
		s.not = p
		other := s.best(rows)
		if other == nil || other.score < best.score-nearScore {
			continue
		}
		a, b := covers(best, rows, cols), covers(other, rows, cols)
		for c := range doubtful {
			doubtful[c] = doubtful[c] || a[c] != b[c]
		}
	}
	return doubtful
}

// covers gives, for each column, the headings above it: bit k of entry r is
// heading k of row r.
func covers(w *headWay, rows [][]rowCell, cols int) [][maxHeadRows]uint64 {
	spots := make([][]spot, len(rows))
	for i := range rows {
		spots[i] = make([]spot, len(rows[i]))
	}
	w.places.put(spots)
	out := make([][maxHeadRows]uint64, cols)
	for i := range spots {
		for k, at := range spots[i] {
			if rows[i][k].kind == empty {
				continue
			}
			for c := at.col; c < at.col+at.width; c++ {
				out[c][i] |= 1 << k
			}
		}
	}
	return out
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
	s := headSearch{rows: known(rows, cols, body), cols: cols, body: body, wide: wide}
	return s.best(rows)
}

// best gives the best complete way, nil if there is none.
func (s *headSearch) best(rows [][]rowCell) *headWay {
	s.memo, s.steps = map[headKey][]headWay{}, 0
	var start headIndex
	var best *headWay
	for _, w := range s.tile(0, 0, s.cols, start) {
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
	mostWays    = 96      // ways kept for a stretch of columns
	headFuel    = 400_000 // steps of the search for one table
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
	limits   bool   // names an interval
	shape    string // the label without its numbers
	size     bool   // gives a sample size only
	sized    bool   // gives a sample size
	pair     bool   // compares two groups
	total    bool   // names all groups together
	single   bool   // names one statistic
	says     bool   // says what the values below are, or gives a sample size
	suits    []int  // for each column
}

// known asks of every heading what the search needs.
func known(rows [][]rowCell, cols int, body []profile) [][]headCell {
	out := make([][]headCell, len(rows))
	for i, row := range rows {
		for _, c := range row {
			h := headCell{
				kind: c.kind, label: bare.ReplaceAllString(strings.ToLower(c.label), ""), shape: digits.ReplaceAllString(c.label, "#"),
				p: pWord.MatchString(c.label), group: groupWord.MatchString(c.label), limits: intervalWord.MatchString(c.label),
				size: sizeWord.MatchString(c.label), sized: hasSize.MatchString(c.label), total: totalWord.MatchString(c.label),
				pair: pairWord.MatchString(c.label), single: singleWord.MatchString(c.label), says: statement.MatchString(c.label), suits: make([]int, cols),
			}
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
	not   *placed // a place that is not to be used, to see what else there is
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
				if level+height == len(s.rows) && width > 1 && !s.wide && level > 0 && !s.overStub(level, cell, from, width) {
					continue
				}
				if s.not != nil && s.not.row == level && s.not.cell == cell && s.not.at == (spot{from, width, height}) {
					continue
				}
				if s.steps++; s.steps > headFuel {
					return nil
				}
				score := s.score(level, cell, from, width, height)
				if under := level + height; width == 1 && under < len(s.rows) && int(after[under]) < len(s.rows[under]) && s.rows[under][after[under]].size {
					score += 15 // a heading with its sample size below
				}
				for _, below := range s.tile(level+height, from, from+width, after) {
					group := 0
					if width > 1 && level+height < len(s.rows) {
						group = s.groupScore(&s.rows[level][cell], level+height, from, width, used, below.used)
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
		if s.overStub(level, cell, from, width) || from == 0 && s.body[width-1].mostly(textual) && (s.body[0].mostly(textual) || s.body[0].usual() == empty) {
			score += 100 // but a stub of two columns is often named once
		}
		if width == 2 && c.limits && s.body[from].bare() && s.body[from+1].bare() {
			score += 130 // the two ends of an interval have a column each
		}
	case width > 1 && s.overStub(level, cell, from, width):
		score = 30
	case width == 1 && c.kind == empty:
		score = 10
	case width == 1:
		if c.p || c.single {
			score = max(c.suits[from], 0) / 2
		}
	default:
		score = s.wideScore(level, c, from, width)
	}
	if height > 1 && width == 1 {
		score += reachesDown(from, s.cols)
	}
	if height > 1 && !lowest {
		score -= 10
		if width > 1 {
			score -= 80
		}
	}
	return score
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
	if sizeWord.MatchString(label) && p.mostly(pvalue) {
		return -60 // nobody counts in a column of p values
	}
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

var (
	// totalWord is the heading of all groups together.
	totalWord = pattern.MustCompile(`(?i)^(?:total|all|overall|combined)\b`)
	// singleWord is the heading of one statistic in a column of its own.
	singleWord = pattern.MustCompile(`(?i)^\W*(?:SDs?|SEM?|s\.d\.|s\.e\.m?\.|n|t|F|df|z|B|β|Wald)\W*$`)
	pairWord   = pattern.MustCompile(`(?i)\b(?:versus|vs)\b`)
)

// sizeWord is a heading that only gives a sample size.
var sizeWord = pattern.MustCompile(`^\(?[nN]\s*=\s*[\d, ]+\)?$`)

// hasSize is a heading with a sample size.
var hasSize = pattern.MustCompile(`\b[nN]\s*=\s*\d`)

// trailingMark is a footnote mark behind a heading.
var trailingMark = pattern.MustCompile(`[\s\x{00A0}]*(?:[*†‡§¶#]+|[\s\x{00A0}][a-e])$`)
