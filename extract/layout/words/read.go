package words

import (
	"cmp"
	"slices"
	"strings"

	"halfspan/extract/paper"
)

const (
	farthest  = 1 << 28 // coordinates beyond are drawn in to it, so that sums never overflow
	largest   = 1 << 20 // font sizes beyond are drawn in to it
	levelDeg  = 8       // degrees by which a direction may miss a right angle
	obliqueID = 4
)

// item is one glyph in the upright space of its direction.
type item struct {
	x0, x1, y0, y1 int
	base, size     int
	glyph          int32 // index into the page's glyphs
	space          bool  // a space stands before it in the content stream
	hangs          bool  // an f, whose ink may hang over its advance
	shift          paper.StyleKind
}

// chunk is a stretch of items that follow one another in the content stream
// along one baseline.
type chunk struct {
	items  []item
	x0, x1 int
	base   int
	size   int
	row    int
	shift  paper.StyleKind
}

// Read gives the frames of a page, the one with the most glyphs first. A page
// without glyphs has none.
func Read(p *paper.GlyphPage) []Frame {
	var byDir [obliqueID + 1][]item
	var count [obliqueID + 1]int
	for i := range p.Glyphs {
		count[direction(p.Glyphs[i].Angle)]++
	}
	for d := range byDir {
		byDir[d] = make([]item, 0, count[d])
	}
	var space [obliqueID + 1]bool
	for i := range p.Glyphs {
		g := &p.Glyphs[i]
		d := direction(g.Angle)
		if blank(g.Text) {
			space[d] = space[d] || g.Text != ""
			continue
		}
		it := upright(g, d)
		it.glyph, it.space = int32(i), space[d]
		space[d] = false
		byDir[d] = append(byDir[d], it)
	}
	var frames []Frame
	for d, items := range byDir {
		if len(items) == 0 {
			continue
		}
		f := Frame{Bounds: p.Page.Box, Rules: p.Rules, Images: p.Images, Glyphs: len(items)}
		if d == obliqueID {
			f.Oblique = true
			f.Lines = oblique(p, items)
		} else {
			f.Angle = int16(d * 90)
			f.Lines = lines(p, items)
			f.turnAll()
		}
		frames = append(frames, f)
	}
	slices.SortStableFunc(frames, func(a, b Frame) int { return cmp.Compare(b.Glyphs, a.Glyphs) })
	return frames
}

// turnAll turns what was taken over from the page.
func (f *Frame) turnAll() {
	f.Bounds = f.Upright(f.Bounds)
	if f.Angle == 0 {
		return
	}
	rules, images := make([]paper.Box, len(f.Rules)), make([]paper.Box, len(f.Images))
	for i, r := range f.Rules {
		rules[i] = f.Upright(r)
	}
	for i, m := range f.Images {
		images[i] = f.Upright(m)
	}
	f.Rules, f.Images = rules, images
}

// direction is the number of quarter turns of an angle, or obliqueID.
func direction(angle int16) int {
	a := (int(angle)%360 + 360) % 360
	q := (a + 45) / 90
	if d := a - q*90; d < -levelDeg || d > levelDeg {
		return obliqueID
	}
	return q % 4
}

func upright(g *paper.Glyph, dir int) item {
	b := paper.Box{X0: draw(g.Box.X0), Y0: draw(g.Box.Y0), X1: draw(g.Box.X1), Y1: draw(g.Box.Y1)}
	o := paper.Point{X: draw(g.Origin.X), Y: draw(g.Origin.Y)}
	size := min(max(int(g.Size), 1), largest)
	left, base := o.X, o.Y
	if dir < obliqueID {
		b = turn(b, int16(dir*90))
		left = [4]int32{o.X, o.Y, -o.X, -o.Y}[dir]
		base = [4]int32{o.Y, -o.X, -o.Y, o.X}[dir]
	}
	x0, x1 := int(min(b.X0, b.X1)), int(max(b.X0, b.X1))
	y0, y1 := int(min(b.Y0, b.Y1)), int(max(b.Y0, b.Y1))
	it := item{y0: y0, y1: y1, base: int(base), size: size, hangs: strings.HasSuffix(g.Text, "f")}
	// Some boxes hold the ink as well as the advance. An f that hangs over on
	// the left does so on the right: without this the space after an italic f
	// would vanish.
	if over := int(left) - x0; over > 0 && over*3 < size && x1-over > int(left) {
		x0 = int(left)
		if it.hangs {
			x1 -= over
		}
	}
	it.x0, it.x1 = x0, x1
	return it
}

func draw(v int32) int32 { return min(max(v, -farthest), farthest) }

// lines turns the items of one direction into line segments.
func lines(p *paper.GlyphPage, items []item) []Line {
	chunks := chunked(items)
	assignRows(chunks)
	attachShifted(chunks)
	m := newMaker(p, len(items))
	var out []Line
	for _, row := range rowsOf(p, chunks) {
		out = append(out, m.segments(row)...)
	}
	m.write(out)
	slices.SortStableFunc(out, func(a, b Line) int {
		return cmp.Or(cmp.Compare(b.Base, a.Base), cmp.Compare(a.Box.X0, b.Box.X0))
	})
	return out
}

// chunked cuts the items where the content stream leaves the baseline or jumps.
func chunked(items []item) []chunk {
	if len(items) == 0 {
		return nil
	}
	var out []chunk
	start := 0
	for i := 1; i <= len(items); i++ {
		if i < len(items) && follows(&items[i-1], &items[i]) {
			continue
		}
		c := chunk{items: items[start:i], x0: items[start].x0, base: items[start].base, row: -1}
		c.x1 = c.items[0].x1
		for _, it := range c.items {
			c.x0, c.x1, c.size = min(c.x0, it.x0), max(c.x1, it.x1), max(c.size, it.size)
		}
		out = append(out, c)
		start = i
	}
	return out
}

func follows(a, b *item) bool {
	size := max(a.size, b.size)
	d, gap := b.base-a.base, b.x0-a.x1
	return abs(d)*25 <= size && gap <= size && gap*2 >= -size && b.x0 >= a.x0-size/4
}

// assignRows numbers the chunks by baseline, from the top.
func assignRows(chunks []chunk) {
	order := make([]int, len(chunks))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(chunks[b].base, chunks[a].base) })
	row, rowBase := -1, 0
	for _, i := range order {
		c := &chunks[i]
		if row < 0 || (rowBase-c.base)*10 > c.size {
			row, rowBase = row+1, c.base
		}
		c.row = row
	}
}

// rowsOf gathers the items of each row, from left to right. Chunks that were
// attached to another row come with it. What is printed over other text of its
// row makes a row of its own, so that the two do not mix; a second copy of the
// same glyphs on the same spot is dropped.
func rowsOf(p *paper.GlyphPage, chunks []chunk) [][]item {
	n := 0
	for i := range chunks {
		n = max(n, chunks[i].row+1)
	}
	members := make([][]int, n)
	for i := range chunks {
		members[chunks[i].row] = append(members[chunks[i].row], i)
	}
	rows := make([][]item, 0, n)
	for _, m := range members {
		for _, layer := range layers(p, chunks, m) {
			n := 0
			for _, i := range layer {
				n += len(chunks[i].items)
			}
			r := make([]item, 0, n)
			for _, i := range layer {
				for _, it := range chunks[i].items {
					it.shift = chunks[i].shift
					r = append(r, it)
				}
			}
			slices.SortStableFunc(r, func(a, b item) int { return cmp.Compare(a.x0, b.x0) })
			if len(r) > 0 {
				rows = append(rows, r)
			}
		}
	}
	return rows
}

const maxLayers = 8

// layers parts the chunks of a row so that none stands over another of its
// layer.
func layers(p *paper.GlyphPage, chunks []chunk, members []int) [][]int {
	out := [][]int{nil}
	for _, i := range members {
		c := &chunks[i]
		k := 0
		for ; k < min(len(out), maxLayers) && len(c.items) > 2; k++ {
			over := slices.IndexFunc(out[k], func(o int) bool { return covers(&chunks[o], c) })
			if over < 0 {
				break
			}
			c.items = without(p, c.items, chunks[out[k][over]].items)
			if len(c.items) <= 2 {
				break
			}
		}
		if k == len(out) && k < maxLayers {
			out = append(out, nil)
		}
		k = min(k, maxLayers-1)
		out[k] = append(out[k], i)
	}
	return out
}

// covers reports whether two chunks stand over one another for more than half
// of the shorter one.
func covers(a, b *chunk) bool {
	return len(a.items) > 2 && (min(a.x1, b.x1)-max(a.x0, b.x0))*2 > min(a.x1-a.x0, b.x1-b.x0)
}

// without gives the items that are no copy of one in other on the same spot,
// provided that nearly all are copies; else all of them.
func without(p *paper.GlyphPage, items, other []item) []item {
	var own []item
	k := 0
	for _, it := range items {
		for k < len(other) && other[k].x0 < it.x0-it.size/8 {
			k++
		}
		twin := false
		for j := k; j < len(other) && other[j].x0 <= it.x0+it.size/8; j++ {
			twin = twin || twins(p, &other[j], &it)
		}
		if !twin {
			own = append(own, it)
		}
	}
	if len(own)*10 > len(items) {
		return items
	}
	return own
}

func abs(x int) int {
	if x < 0 {
		return -x
	}
	return x
}
