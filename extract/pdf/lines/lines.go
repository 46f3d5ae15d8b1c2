// Package lines finds the straight horizontal and vertical lines in a drawn
// path: strokes along an axis, and filled rectangles so thin that they are
// printed as lines. Both PDF readers use it, so that they call the same
// drawing the same line.
//
// It knows nothing of pages or tables. Start with [Finder].
package lines

import "halfspan/extract/paper"

// Thin is the greatest thickness of a line, in 1/100 point.
const Thin = 250

// minLength is the least length of a line: dots and the strokes of drawn
// letters are none.
const minLength = 2 * Thin

// maxFound bounds what one path can give.
const maxFound = 4_000

// Finder takes the segments of one path, in page space and 1/100 point, and
// gives its lines. The zero value is ready.
type Finder struct {
	start, at paper.Point
	sub       paper.Box // around the present sub-path
	curved    bool
	points    int
	strokes   []paper.Box // lines if the path is stroked
	fills     []paper.Box // lines if it is filled
}

// Reset begins a new path.
func (f *Finder) Reset() { *f = Finder{strokes: f.strokes[:0], fills: f.fills[:0]} }

// Move begins a new sub-path at p.
func (f *Finder) Move(p paper.Point) {
	f.endSub()
	f.start, f.at = p, p
	f.sub = paper.Box{X0: p.X, Y0: p.Y, X1: p.X, Y1: p.Y}
	f.points = 1
}

// Line draws a straight segment to p.
func (f *Finder) Line(p paper.Point) {
	if f.points == 0 {
		f.Move(p)
		return
	}
	if b := span(f.at, p); Along(b) && len(f.strokes) < maxFound {
		f.strokes = append(f.strokes, b)
	}
	f.grow(p)
}

// Curve ends a curved segment in p.
func (f *Finder) Curve(p paper.Point) {
	if f.points == 0 {
		f.Move(p)
		return
	}
	f.curved = true
	f.grow(p)
}

// Close draws the segment back to where the sub-path began.
func (f *Finder) Close() {
	if f.points > 0 && f.at != f.start {
		f.Line(f.start)
	}
}

// Rules ends the path and gives its lines, in the order drawn. A path that is
// stroked gives its sides, one that is only filled its thin rectangles.
func (f *Finder) Rules(fill, stroke bool) []paper.Box {
	f.endSub()
	switch {
	case stroke:
		return f.strokes
	case fill:
		return f.fills
	}
	return nil
}

func (f *Finder) grow(p paper.Point) {
	f.sub = paper.Box{X0: min(f.sub.X0, p.X), Y0: min(f.sub.Y0, p.Y), X1: max(f.sub.X1, p.X), Y1: max(f.sub.Y1, p.Y)}
	f.at = p
	f.points++
}

func (f *Finder) endSub() {
	if !f.curved && f.points >= 2 && Along(f.sub) && len(f.fills) < maxFound {
		f.fills = append(f.fills, f.sub)
	}
	f.points, f.curved = 0, false
}

func span(a, b paper.Point) paper.Box {
	return paper.Box{X0: min(a.X, b.X), Y0: min(a.Y, b.Y), X1: max(a.X, b.X), Y1: max(a.Y, b.Y)}
}

// Along reports whether b is long in one direction and thin in the other: a
// line.
func Along(b paper.Box) bool {
	w, h := b.X1-b.X0, b.Y1-b.Y0
	return min(w, h) <= Thin && max(w, h) > minLength
}
