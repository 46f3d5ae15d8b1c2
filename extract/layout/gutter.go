package layout

import (
	"cmp"
	"math/bits"
	"slices"

	"halfspan/extract/layout/words"
)

const (
	cell     = 200  // width and height of a raster cell, 1/100 point
	maxCells = 1024 // of a raster in each direction; a page of 8 metres is cut there
)

// raster marks what is printed on a sheet, one bit a cell, column by column.
type raster struct {
	x, y   int // of its top left corner
	nx, ny int
	cols   [][]uint64 // cols[x] has a bit for each cell of the column
}

func newRaster(x0, top, x1, bot int) *raster {
	r := &raster{x: x0, y: top}
	r.nx = min(max((x1-x0)/cell+1, 1), maxCells)
	r.ny = min(max((bot-top)/cell+1, 1), maxCells)
	n := (r.ny + 63) / 64
	flat := make([]uint64, r.nx*n)
	r.cols = make([][]uint64, r.nx)
	for i := range r.cols {
		r.cols[i] = flat[i*n : (i+1)*n]
	}
	return r
}

// fill marks a box, cells touched in part included.
func (r *raster) fill(x0, top, x1, bot int) {
	cx0, cx1 := max((x0-r.x)/cell, 0), min((x1-r.x)/cell, r.nx-1)
	cy0, cy1 := max((top-r.y)/cell, 0), min((bot-r.y)/cell, r.ny-1)
	if cx0 > cx1 || cy0 > cy1 {
		return
	}
	from, to := cy0>>6, cy1>>6
	for w := from; w <= to; w++ {
		mask := ^uint64(0)
		if w == from {
			mask &= ^uint64(0) << (cy0 & 63)
		}
		if w == to {
			mask &= ^uint64(0) >> (63 - cy1&63)
		}
		for x := cx0; x <= cx1; x++ {
			r.cols[x][w] |= mask
		}
	}
}

// stripe is a run of empty cells in two neighbouring columns of a raster.
type stripe struct{ col, top, bot int } // cells

// stripes finds the runs of at least least cells that are empty in a column
// and the one to its right.
func (r *raster) stripes(least int) []stripe {
	var out []stripe
	for x := 0; x+1 < r.nx; x++ {
		start := 0
		for w, word := range r.cols[x] {
			both := word | r.cols[x+1][w]
			for ; both != 0; both &= both - 1 {
				y := w*64 + bits.TrailingZeros64(both)
				if y-start >= least {
					out = append(out, stripe{x, start, y - 1})
				}
				start = y + 1
			}
		}
		if r.ny-start >= least {
			out = append(out, stripe{x, start, r.ny - 1})
		}
	}
	return out
}

// candidate is a stripe with the running text beside it counted.
type candidate struct {
	g           gutter
	left, right int  // lines of running text close by on each side
	crossed     int  // lines that run on over it with no more than a word space
	beside      bool // a list of short lines (dates, keywords) stands beside the text
}

// weighStripes finds the white stripes of a sheet and counts the text beside
// them.
func (s *sheet) weighStripes(bodySize int) {
	if len(s.lines) == 0 {
		return
	}
	x0, x1, top, bot := s.lines[0].x0, s.lines[0].x1, s.lines[0].top, s.lines[0].bot
	for i := range s.lines {
		l := &s.lines[i]
		x0, x1, top, bot = min(x0, l.x0), max(x1, l.x1), min(top, l.top), max(bot, l.bot)
	}
	r := newRaster(x0, top, x1, bot)
	s.raster = r
	for i := range s.lines {
		l := &s.lines[i]
		if l.furniture {
			continue
		}
		if l.table != nil {
			r.fill(l.x0, l.top, l.x1, l.bot)
			continue
		}
		for _, w := range l.words {
			r.fill(int(w.Box.X0), l.top, int(w.Box.X1), l.bot)
		}
	}
	// A line drawn across parts what is above from what is below.
	for _, rule := range s.frame.Rules {
		if h := int(rule.Y1) - int(rule.Y0); h <= 2*cell && int(rule.X1)-int(rule.X0) >= 8*bodySize {
			r.fill(int(rule.X0), -int(rule.Y1), int(rule.X1), -int(rule.Y0))
		}
	}
	for _, st := range r.stripes(max(4*bodySize/cell, 2)) {
		c := candidate{g: gutter{r.x + st.col*cell, r.x + (st.col+2)*cell, r.y + st.top*cell, r.y + (st.bot+1)*cell}}
		s.weigh(&c, bodySize)
		if max(c.left, c.right) >= 2 && c.crossed*4 <= c.left+c.right {
			c.beside = c.crossed == 0 && max(c.left, c.right) >= 6 && s.listBeside(&c)
			s.stripes = append(s.stripes, c)
		}
	}
	slices.SortStableFunc(s.stripes, func(a, b candidate) int {
		return cmp.Or(cmp.Compare(b.left+b.right, a.left+a.right), cmp.Compare(b.g.bot-b.g.top, a.g.bot-a.g.top))
	})
}

// known is a gutter that the paper has on some page: its middle and the left
// edge of the column right of it.
type known struct{ mid, edge int }

// edgeOf is the left edge of the column right of a gutter.
func (s *sheet) edgeOf(g *gutter) int {
	var lefts []int
	for i := range s.lines {
		if l := &s.lines[i]; !l.furniture && l.table == nil && l.x0 >= g.x0 && l.x0-g.x0 <= 6*l.size && g.covers(l.mid()) {
			lefts = append(lefts, l.x0)
		}
	}
	if len(lefts) == 0 {
		return g.x1
	}
	slices.Sort(lefts)
	return commonEdge(lefts)
}

// addKnown adds gutters of a line or two, between a title or table above and
// another below: nothing stands in the known gutter there, and a line begins
// where the column right of it does.
func (s *sheet) addKnown(prior []known, bodySize int) {
	if s.raster == nil {
		return
	}
	for _, p := range prior {
		for _, g := range s.raster.gaps(p.mid, max(bodySize*8/10, cell)) {
			if slices.ContainsFunc(s.gutters, func(o gutter) bool { return clash(&o, &g, bodySize) }) {
				continue
			}
			left, right := 0, 0
			for i := range s.lines {
				l := &s.lines[i]
				switch {
				case l.furniture || l.table != nil || !g.covers(l.mid()):
				case l.x1 <= p.mid && l.x1-l.x0 >= 6*l.size:
					left++
				case abs(l.x0-p.edge)*2 <= l.size && l.x1-l.x0 >= 2*l.size:
					right++
				}
			}
			if left > 0 && right > 0 {
				s.gutters = append(s.gutters, g)
			}
		}
	}
	slices.SortStableFunc(s.gutters, func(a, b gutter) int {
		return cmp.Or(cmp.Compare(a.x0, b.x0), cmp.Compare(a.top, b.top))
	})
}

// gaps are the empty runs of a raster's column at x that are at least least
// high.
func (r *raster) gaps(x, least int) []gutter {
	c := (x - r.x) / cell
	if x < r.x || c >= r.nx {
		return nil
	}
	var out []gutter
	start := 0
	for y := 0; y <= r.ny; y++ {
		if y < r.ny && r.cols[c][y>>6]>>(y&63)&1 == 0 {
			continue
		}
		if (y-start)*cell >= least {
			out = append(out, gutter{x - cell, x + cell, r.y + start*cell, r.y + y*cell})
		}
		start = y + 1
	}
	return out
}

// chooseGutters takes the stripes that part columns of running text. prior are
// the gutters that other pages of the paper have: there less text is needed.
func (s *sheet) chooseGutters(prior []known, bodySize int) []candidate {
	var out []candidate
	for _, c := range s.stripes {
		seen := slices.ContainsFunc(prior, func(k known) bool { return abs(k.mid-(c.g.x0+cell)) <= bodySize })
		if !seen && !c.beside && (c.left < 3 || c.right < 3 || c.left+c.right < 8) || c.left+c.right < 4 {
			continue
		}
		if !slices.ContainsFunc(out, func(o candidate) bool { return clash(&o.g, &c.g, bodySize) }) {
			out = append(out, c)
		}
	}
	slices.SortStableFunc(out, func(a, b candidate) int {
		return cmp.Or(cmp.Compare(a.g.x0, b.g.x0), cmp.Compare(a.g.top, b.g.top))
	})
	return out
}

// clash reports whether two gutters stand so near that no column fits between.
func clash(a, b *gutter, size int) bool {
	return a.top < b.bot && b.top < a.bot && abs(a.x0-b.x0) < 8*size
}

// weigh counts the lines of running text that end or begin close to c.
func (s *sheet) weigh(c *candidate, bodySize int) {
	mid := (c.g.x0 + c.g.x1) / 2
	for i := range s.lines {
		l := &s.lines[i]
		if l.furniture || l.table != nil || !c.g.covers(l.mid()) {
			continue
		}
		long, close := 10*l.size, 6*max(bodySize, l.size)
		switch {
		case l.x1 <= mid:
			if mid-l.x1 <= close && l.x1-l.x0 >= long {
				c.left++
			}
		case l.x0 >= mid:
			if l.x0-mid <= close && l.x1-l.x0 >= long {
				c.right++
			}
		default: // a segment that reaches over a narrow gutter
			if k := l.wordAfter(mid); k > 0 && int(l.words[k].Box.X0-l.words[k-1].Box.X1)*2 < l.size {
				c.crossed++
				continue
			}
			if mid-l.x0 >= long {
				c.left++
			}
			if l.x1-mid >= long {
				c.right++
			}
		}
	}
}

// listBeside reports whether on one side of c stands running text, begun at one
// edge, and on the other a column of short lines that are no labels of its
// lines: the dates and keywords that stand beside an abstract. Labels, numbers
// of entries and the cells of tables stand on the baselines of the other side.
func (s *sheet) listBeside(c *candidate) bool {
	mid := (c.g.x0 + c.g.x1) / 2
	var left, right []*line
	for i := range s.lines {
		l := &s.lines[i]
		if l.furniture || l.table != nil || !c.g.covers(l.mid()) || l.x1-l.x0 < 2*l.size {
			continue
		}
		if l.x1 <= mid {
			left = append(left, l)
		} else {
			right = append(right, l)
		}
	}
	text, list := right, left
	if c.left > c.right {
		text, list = left, right
	}
	if len(list) < 4 || len(text) < 6 || len(text)*2 < len(list) {
		return false
	}
	var lefts []int
	for _, l := range right {
		lefts = append(lefts, l.x0)
	}
	slices.Sort(lefts)
	edge, same := commonEdge(lefts), 0
	for _, l := range right {
		if abs(l.x0-edge)*2 <= l.size {
			same++
		}
	}
	level := 0
	for _, l := range list {
		if slices.ContainsFunc(text, func(o *line) bool { return abs(o.base-l.base)*6 <= l.size }) {
			level++
		}
	}
	return same*10 >= len(right)*6 && level*2 < len(list)
}

// wordAfter is the first word that begins right of x, or -1.
func (l *line) wordAfter(x int) int {
	return slices.IndexFunc(l.words, func(w *words.Word) bool { return int(w.Box.X0) >= x })
}
