package table

import (
	"math"
	"strconv"
	"strings"

	"halfspan/extract/pattern"
)

// countGrade says how well "a (b)" fits a count with its percentage.
type countGrade uint8

const (
	countNever      countGrade = iota // a is no whole number, or b no percentage
	countImpossible                   // a is a larger share of n than b says
	countUnlikely                     // whole, but 100·a/n is not b where n is known
	countOpen                         // nothing speaks for or against
	countLikely                       // b = 100·a/n within 1 in the whole row
	countSure                         // printed with a percent sign or a denominator
)

// countEvidence weighs by arithmetic whether the row of an "a (b)" cell holds
// counts with percentages: b = 100·a/n within 1 (measured: holds for 88% of
// them where n stands in the heading, and hardly ever for a mean and its SD).
func (f *frame) countEvidence(e *estimate, sp *spread) countGrade {
	if sp.shape == shapeInterval && sp.lower.Value != "" && !strings.ContainsAny(sp.lower.Value+sp.upper.Value, ".") && sp.item.Sep == "," && f.percentWithCount(e) {
		return countSure // a thousands comma: 41.7 (12,508)
	}
	if sp.shape != shapeBracket || sp.cell != e.cell {
		return countNever
	}
	if !e.of.IsZero() {
		return countSure
	}
	if sp.value.Percent && !e.value.Percent {
		return countSure
	}
	if e.value.Percent && !sp.value.Percent && isWhole(sp.value.Value) && f.headsCount(e) {
		return countSure // 27% (12)
	}
	if f.percentWithCount(e) {
		return countSure
	}
	if v, err := strconv.ParseFloat(sp.value.Value, 64); err == nil && v <= 1 && isWhole(e.value.Value) && f.headsCount(e) {
		return countSure // headed n (%) with the share as a fraction: 138 (0.97)
	}
	if labels := f.lines[e.row].labels; len(labels) > 0 && yesOrNo.MatchString(labels[len(labels)-1].text) && f.sharesNearN(e.row) {
		return countSure
	}
	if g, ok := f.counts[e.row]; ok {
		return g
	}
	g := f.rowEvidence(e.row)
	f.counts[e.row] = g
	return g
}

var percentThenN = pattern.MustCompile(`(?i)(?:%|\bper ?cent(?:age)?)[^(\[]{0,20}[(\[]\s*(?:n|no\.?|number)\s*[)\]]|^\s*%[^(\[]{1,80}[(\[]\s*(?:n|no\.?|number)\s*[)\]]|\bn\s*[(\[]\s*rate\b`)

// percentWithCount reports a heading, label, caption or note that announces a
// percentage with its count in brackets: "% (n)".
func (f *frame) percentWithCount(e *estimate) bool {
	for _, l := range append(append([]label{}, f.path(e.row, e.col)...), f.lines[e.row].labels...) {
		if percentThenN.MatchString(l.text) {
			return true
		}
	}
	ln := &f.lines[e.row]
	for _, g := range ln.groups {
		for _, l := range f.lines[g].labels {
			if percentThenN.MatchString(l.text) || numberOf.MatchString(l.text) {
				return true
			}
		}
	}
	return false
}

// yesOrNo labels a row of those who are or have something.
var yesOrNo = pattern.MustCompile(`(?i)^\W*(?:yes|no|present|absent)\W*$`)

// sharesNearN reports whole numbers whose percentages are of nearly the column's n:
// a few values are missing, or a digit is misprinted.
func (f *frame) sharesNearN(r int) bool {
	cells, whole := f.pairsOf(r)
	for _, p := range cells {
		if p.n == 0 || p.b <= 0 || p.b > 100 {
			return false
		}
		if of := 100 * p.a / p.b; of > 1.02*float64(p.n) || of < 0.85*float64(p.n) {
			return false
		}
	}
	return whole && len(cells) > 0
}

// numberOf is the label of a group of counts: "No of attempts (%)".
var numberOf = pattern.MustCompile(`(?i)^\W*(?:no\.?|nr\.?|number|frequency) of\b.*[(\[,;]\s*%\s*[)\]]?\W*$`)

// headsCount reports a heading or label that announces numbers of subjects.
func (f *frame) headsCount(e *estimate) bool {
	for _, l := range append(append([]label{}, f.path(e.row, e.col)...), f.lines[e.row].labels...) {
		for _, q := range f.lex.phrase(l.text).pairs {
			if q.Count {
				return true
			}
		}
	}
	return false
}

func isWhole(v string) bool { return v != "" && !strings.ContainsAny(v, ".-") }

// pairCell is one "a (b)" of a row.
type pairCell struct {
	a, b float64
	n    int // of its column; 0 unknown
	aDec int // decimals printed in a
	bDec int // decimals printed in b
}

// rowEvidence weighs all "a (b)" cells of a row together.
func (f *frame) rowEvidence(r int) countGrade {
	cells, whole := f.pairsOf(r)
	if len(cells) == 0 {
		return countOpen
	}
	if sharesOf(cells) {
		return countSure
	}
	if !whole {
		return countNever // small means with small SDs fit by chance
	}
	sum := 0.0
	fit, miss, known := 0, 0, 0
	for _, p := range cells {
		if p.b < 0 || p.b > 100.5 {
			return countNever
		}
		sum += p.a
		if p.n == 0 {
			continue
		}
		known++
		within := 1.0
		if p.bDec > 0 {
			within = 0.3
		}
		if math.Abs(100*p.a/float64(p.n)-p.b) <= within {
			fit++
		} else {
			miss++
		}
	}
	if known > 0 && fit > 0 && miss <= (known-1)/3 {
		return countLikely
	}
	if fit > 0 && miss > 0 && f.sameDenominator(cells) {
		return countLikely // some values are missing in one column
	}
	if len(cells) > 1 && sum > 0 && (rowPercents(cells, sum) || oneTotal(cells)) {
		return countLikely
	}
	if known > 0 && miss == known {
		// A denominator smaller than n (missing values) gives a larger b, never
		// a smaller one.
		for _, p := range cells {
			if p.n > 0 && p.b < 100*p.a/float64(p.n)-1 {
				return countImpossible
			}
		}
		if f.sameDenominator(cells) {
			return countLikely
		}
		return countUnlikely
	}
	if known == 0 && f.columnsAgree(r, cells) {
		return countLikely
	}
	return countOpen
}

// sharesOf reports percentages with their counts, "61.8 (21)": every b is whole
// and every a is its share of the column's n to the last digit printed.
func sharesOf(cells []pairCell) bool {
	some := false
	for _, p := range cells {
		if p.n == 0 || p.bDec > 0 || p.aDec == 0 && p.a != 0 || p.b > float64(p.n) || math.Abs(100*p.b/float64(p.n)-p.a) > 0.51*math.Pow(10, -float64(p.aDec)) {
			return false
		}
		some = some || p.a > 0 && p.a < 100
	}
	return some && len(cells) > 1
}

// pairsOf gathers the "a (b)" cells of a row, and whether every a is whole.
func (f *frame) pairsOf(r int) (cells []pairCell, whole bool) {
	whole = true
	for c := f.stub; c < f.tab.Cols; c++ {
		if f.cellAt(r, c) == nil {
			continue
		}
		ests, _ := f.estimatesIn(r, c)
		for _, e := range ests {
			if len(e.spreads) != 1 || e.spreads[0].shape != shapeBracket {
				continue
			}
			a, ok1 := e.value.Float()
			b, ok2 := e.spreads[0].value.Float()
			if !ok1 || !ok2 {
				continue
			}
			if !isWhole(e.value.Value) {
				whole = false
			}
			p := pairCell{a: a, b: b}
			p.n = f.denominator(e)
			if _, frac, ok := strings.Cut(e.value.Value, "."); ok {
				p.aDec = len(frac)
			}
			if _, frac, ok := strings.Cut(e.spreads[0].value.Value, "."); ok {
				p.bDec = len(frac)
			}
			cells = append(cells, p)
		}
	}
	return cells, whole
}

// denominator gives the n that a percentage in the cell would be of; 0 unknown.
func (f *frame) denominator(e *estimate) int {
	x := &context{}
	for _, find := range []func(*estimate, *context) (size, bool){f.columnSize, f.rowSize} {
		if s, ok := find(e, x); ok {
			return s.n
		}
	}
	n, _, _ := f.headingN(e.row, e.col)
	return n
}

// rowPercents reports that the b's are the shares of the row's total.
func rowPercents(cells []pairCell, sum float64) bool {
	for _, p := range cells {
		if math.Abs(100*p.a/sum-p.b) > 1 {
			return false
		}
	}
	return true
}

// oneTotal reports that all cells are shares of one and the same whole number,
// as percentages across the row are.
func oneTotal(cells []pairCell) bool {
	lo, hi, seen := 0.0, math.Inf(1), 0
	for _, p := range cells {
		if p.a == 0 || p.b == 0 {
			continue
		}
		l, h := impliedN(p)
		lo, hi = math.Max(lo, l), math.Min(hi, h)
		seen++
	}
	for _, p := range cells {
		if p.bDec == 0 && seen < 3 {
			return false // whole percentages of two cells leave too much room
		}
	}
	return seen > 1 && lo <= hi && math.Floor(hi) >= math.Ceil(lo)
}

// sameDenominator reports that each a and b imply a whole denominator no larger
// than the column's n, within what the printed digits allow.
func (f *frame) sameDenominator(cells []pairCell) bool {
	for _, p := range cells {
		if p.n == 0 || p.b == 0 {
			continue
		}
		half := 0.51 * math.Pow(10, -float64(p.bDec)) // 46.049 is printed as 46.1 too
		lo, hi := 100*p.a/(p.b+half), 100*p.a/math.Max(p.b-half, 1e-9)
		if lo > float64(p.n)+0.5 || math.Floor(hi) < math.Ceil(lo) || lo < 0.75*float64(p.n) {
			return false
		}
	}
	return true
}

// columnsAgree reports that, where no n is printed, every a and b of the row
// imply the same n as some other row of the same column does.
func (f *frame) columnsAgree(r int, cells []pairCell) bool {
	agree := 0
	for q := f.head; q < f.tab.Rows; q++ {
		if q == r || f.lines[q].kind != lineData {
			continue
		}
		other, whole := f.pairsOf(q)
		if !whole || len(other) != len(cells) {
			continue
		}
		all := true
		for i := range cells {
			if !sameN(cells[i], other[i]) {
				all = false
				break
			}
		}
		if all {
			agree++
		}
	}
	return agree > 0
}

// sameN reports that two counts with percentages can share a denominator.
func sameN(p, q pairCell) bool {
	if p.a == 0 || q.a == 0 || p.b == 0 || q.b == 0 {
		return p.a == 0 && p.b == 0 || q.a == 0 && q.b == 0
	}
	l1, h1 := impliedN(p)
	l2, h2 := impliedN(q)
	return l1 <= h2 && l2 <= h1
}

func impliedN(p pairCell) (float64, float64) {
	half := 0.5 * math.Pow(10, -float64(p.bDec))
	return 100 * p.a / (p.b + half), 100 * p.a / math.Max(p.b-half, 1e-9)
}

// countStatement reports whether a statement announces counts with percentages,
// and whether it is more than a bare percent sign.
func countStatement(s *statement) (is, strong bool) {
	for _, q := range s.pairs {
		if q.Percent && q.Spread == "" {
			is = true
			strong = strong || q.Count
		}
	}
	if !is && s.rank <= rankGroup {
		low := fold(s.text)
		if strings.HasSuffix(low, "(%)") || strings.HasSuffix(low, ", %") || strings.HasSuffix(low, "[%]") {
			is = true
		}
	}
	if countWords.MatchString(s.text) && s.rank <= rankGroup {
		return true, true
	}
	if !is && len(s.pairs) > 0 {
		low := fold(s.text)
		if strings.Contains(low, "number") && strings.Contains(low, "percent") || strings.Contains(low, "n (%)") {
			return true, true
		}
	}
	return is, strong
}

var countWords = pattern.MustCompile(`(?i)\b(?:no\.?|n|number|nr\.?|frequency|count)\s*[,;:]?\s*[(\[]\s*(?:%|percent)|\b(?:no\.?|n|number|frequency)\s*(?:,|;|and|/)\s*(?:%|percent)`)
