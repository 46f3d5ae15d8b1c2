package plain

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// Space-aligned tables, as text extractors write them: cells stand below one
// another, parted by gaps of two or more spaces. Columns are the stretches of
// character positions that hold text in many rows, parted by positions that are
// blank in nearly all.

// piece is a stretch of a line without a gap, by character positions.
type piece struct{ from, to, start, end int }

// pieces parts a line at gaps of two spaces or more.
func (r *reader) pieces(l line) []piece {
	var out []piece
	col, gap := 0, 2
	for i := l.start; i < l.end; {
		c, w := utf8.DecodeRune(r.src.B[i:l.end])
		switch {
		case c == '\t':
			gap = 2
			col += 7 - col%8
		case c == ' ' || c == '\u00A0' || c == '\u2003':
			gap++
		default:
			if gap >= 2 || len(out) == 0 {
				out = append(out, piece{from: col, start: i})
			}
			gap = 0
			out[len(out)-1].to, out[len(out)-1].end = col+1, i+w
		}
		i += w
		col++
	}
	return out
}

const (
	fewestRows   = 3  // rows with gaps that make an aligned table
	widestColumn = 60 // characters; more is a column of running text
)

// alignedRegion reads the space-aligned table that begins at line i. Without a
// caption above it takes more to be one.
func (r *reader) alignedRegion(i int, captioned bool) (region, bool) {
	if !r.gapped(i) && !captioned {
		return region{}, false
	}
	end, rows, numbers := i, 0, 0
	var all [][]piece
	for k := i; k < len(r.lines); k++ {
		l := r.lines[k]
		if l.running {
			break
		}
		if l.blank {
			if next := r.skipBlank(k); next-k > 2 || next >= len(r.lines) || !r.gapped(next) || isCaption(r.text(r.lines[next])) {
				break
			}
			continue
		}
		p := r.pieces(l)
		if len(p) == 1 && (isCaption(r.text(l)) || p[0].to-p[0].from > widestColumn || !r.gappedWithin(k+1, 3)) {
			break
		}
		if len(p) > 1 {
			rows++
			for _, c := range p[1:] {
				if kindOf(string(r.src.B[c.start:c.end])).numeric() {
					numbers++
					break
				}
			}
		}
		all = append(all, p)
		end = k + 1
	}
	if rows < fewestRows || numbers < 2 || !captioned && 2*numbers < rows {
		return region{}, false
	}
	cuts := columnCuts(all)
	if len(cuts) == 0 {
		return region{}, false
	}
	g := region{from: i, to: end, fixed: true}
	for _, p := range all {
		g.rows = append(g.rows, r.alignRow(p, cuts))
	}
	spanHeads(g.rows, all)
	g.rows = joinWrapped(g.rows)
	return g, true
}

// gapped reports whether line k has two pieces or more, none of which is a
// column of running text.
func (r *reader) gapped(k int) bool {
	if k >= len(r.lines) || r.lines[k].blank || r.lines[k].running {
		return false
	}
	p := r.pieces(r.lines[k])
	for _, c := range p {
		if c.to-c.from > widestColumn {
			return false
		}
	}
	return len(p) > 1
}

func (r *reader) gappedWithin(k, n int) bool {
	for ; n > 0; k, n = k+1, n-1 {
		if r.gapped(k) {
			return true
		}
	}
	return false
}

// columnCuts finds the positions that part columns: the middles of the
// stretches that are blank in all rows but one in twelve.
func columnCuts(rows [][]piece) []int {
	wide := 0
	for _, p := range rows {
		for _, c := range p {
			wide = max(wide, c.to)
		}
	}
	const widest = 4000
	if wide > widest {
		return nil
	}
	inked := make([]int, wide+1)
	counted := 0
	for _, p := range rows {
		if len(p) < 2 {
			continue // a text over all columns says nothing of them
		}
		counted++
		for _, c := range p {
			for k := c.from; k < c.to; k++ {
				inked[k]++
			}
		}
	}
	const spare = 12
	most := counted / spare
	var cuts []int
	for k := 0; k < wide; {
		if inked[k] > most {
			k++
			continue
		}
		from := k
		for k < wide && inked[k] <= most {
			k++
		}
		if from > 0 && k < wide {
			cuts = append(cuts, (from+k)/2)
		}
	}
	return cuts
}

// alignRow puts the pieces of a line into columns by where they begin.
func (r *reader) alignRow(p []piece, cuts []int) []rowCell {
	row := make([]rowCell, len(cuts)+1)
	for _, c := range p {
		k := 0
		for k < len(cuts) && (c.from+min(c.to, c.from+3))/2 >= cuts[k] {
			k++
		}
		if row[k].label != "" {
			row[k] = r.rowCell(row[k].start, c.end)
			continue
		}
		row[k] = r.rowCell(c.start, c.end)
		if k == 0 {
			row[k].indent = 2 * c.from
		}
	}
	return row
}

// spanHeads finds what each heading above other headings spans: the columns
// round its own that it stands over the middle of.
func spanHeads(rows [][]rowCell, all [][]piece) {
	ink := columnInk(rows, all)
	head := headings(rows, len(ink))
	for i := 0; i+1 < head; i++ {
		row := rows[i]
		for k := 1; k < len(row); k++ {
			if row[k].label == "" {
				continue
			}
			first, last := k, k
			for first > 1 && row[first-1].label == "" && row[first-1].over == 0 {
				first--
			}
			for last+1 < len(row) && row[last+1].label == "" {
				last++
			}
			from, to := centred(ink, k, first, last, twiceMiddle(all[i], row[k].start))
			row[from], row[k] = row[k], row[from]
			row[from].over = to - from + 1
			for c := from + 1; c <= to; c++ {
				row[c] = rowCell{over: -1}
			}
			k = to
		}
	}
}

// columnInk gives the stretch of positions that each column's cells take, by
// the rows that fill at least half of the columns.
func columnInk(rows [][]rowCell, all [][]piece) []piece {
	ink := make([]piece, len(rows[0]))
	for i, row := range rows {
		filled := 0
		for _, c := range row {
			if c.label != "" {
				filled++
			}
		}
		if 2*filled < len(row) {
			continue
		}
		for k, c := range row {
			for _, p := range all[i] {
				if c.label == "" || p.start != c.start {
					continue
				}
				if ink[k].to == 0 {
					ink[k] = p
				}
				ink[k].from, ink[k].to = min(ink[k].from, p.from), max(ink[k].to, p.to)
			}
		}
	}
	return ink
}

// twiceMiddle is twice the middle of the piece of a line that begins at byte
// start.
func twiceMiddle(line []piece, start int) int {
	for _, p := range line {
		if p.start == start {
			return p.from + p.to
		}
	}
	return 0
}

// centred picks the columns [from, to] within [first, last] that hold column k
// and whose middle is nearest to a heading's; of equals the most.
func centred(ink []piece, k, first, last, twice int) (from, to int) {
	from, to = k, k
	best := -1
	for a := first; a <= k; a++ {
		for z := k; z <= last; z++ {
			off := ink[a].from + ink[z].to - twice
			off = max(off, -off)
			if best < 0 || off < best || off == best && z-a > to-from {
				best, from, to = off, a, z
			}
		}
	}
	return from, to
}

// joinWrapped joins the lines of a label that is wrapped round its values: a
// first part without values, values without a label, an end without values.
func joinWrapped(rows [][]rowCell) [][]rowCell {
	var out [][]rowCell
	for i, row := range rows {
		if n := len(out); n > 0 && i > 1 {
			above := out[n-1]
			switch {
			case labelOnly(above, len(above)) && row[0].label == "" && hasValues(row):
				row[0] = above[0]
				out[n-1] = row
				continue
			case labelOnly(above, len(above)) && hasValues(row) && goesOn(above[0].label, row[0].label):
				row[0] = joinLabels(above[0], row[0])
				out[n-1] = row
				continue
			case hasValues(above) && labelOnly(row, len(row)) && closes(row[0].label):
				above[0] = joinLabels(above[0], row[0])
				continue
			}
		}
		out = append(out, row)
	}
	return out
}

func hasValues(row []rowCell) bool {
	data, _ := dataRow(row)
	return data
}

// goesOn reports whether a label is the beginning of the one below it.
func goesOn(above, below string) bool {
	first, _ := utf8.DecodeRuneInString(below)
	return strings.HasSuffix(above, ",") || strings.HasSuffix(above, "-") || unicode.IsLower(first) || strings.HasPrefix(below, "(")
}

// closes reports whether a label is the end of the one above it.
func closes(label string) bool {
	first, _ := utf8.DecodeRuneInString(label)
	return unicode.IsLower(first) || strings.HasPrefix(label, "(")
}

func joinLabels(a, b rowCell) rowCell {
	a.label += " " + b.label
	a.more = append(append(a.more[:len(a.more):len(a.more)], piece{start: b.start, end: b.end}), b.more...)
	return a
}
