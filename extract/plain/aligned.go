package plain

import (
	"strings"
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
	g := region{from: i, to: end}
	for _, p := range all {
		g.rows = append(g.rows, r.alignRow(p, cuts))
	}
	g.joinWrapped()
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

// alignRow puts the pieces of a line into columns; a piece over a cut stays in
// the column that holds its beginning and leaves the next ones empty.
func (r *reader) alignRow(p []piece, cuts []int) []rowCell {
	row := make([]rowCell, len(cuts)+1)
	for _, c := range p {
		k := 0
		for k < len(cuts) && (c.from+min(c.to, c.from+3))/2 >= cuts[k] {
			k++
		}
		if len(p) > 1 && k < len(cuts) && c.to > cuts[k] && row[k].label == "" {
			// a heading set in the middle of its columns
			row[k] = r.rowCell(c.start, c.end)
			continue
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
	if len(p) == 1 && row[0].label != "" && strings.TrimSpace(row[0].label) != "" {
		return row
	}
	return row
}

// joinWrapped is a hook for rows broken over lines; see wrap.go.
func (g *region) joinWrapped() {}
