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

// Finder takes the segments of one path, in page space and 1/100 point, and
// gives its lines.
type Finder struct {
	Fill, Stroke bool

	start, at paper.Point
	sub       paper.Box // around the present sub-path
	curved    bool
	points    int
	found     []paper.Box
}

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
	b := span(f.at, p)
	if f.Stroke && Along(b) {
		f.found = append(f.found, b)
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

// Rules ends the path and gives its lines.
func (f *Finder) Rules() []paper.Box {
	f.endSub()
	return f.found
}

func (f *Finder) grow(p paper.Point) {
	f.sub = paper.Box{X0: min(f.sub.X0, p.X), Y0: min(f.sub.Y0, p.Y), X1: max(f.sub.X1, p.X), Y1: max(f.sub.Y1, p.Y)}
	f.at = p
	f.points++
}

// endSub takes a thin filled sub-path as one line. One that is stroked as well
// has given its sides already.
func (f *Finder) endSub() {
	if f.Fill && !f.Stroke && !f.curved && f.points >= 2 && Along(f.sub) {
		f.found = append(f.found, f.sub)
	}
	f.points, f.curved = 0, false
}

func span(a, b paper.Point) paper.Box {
	return paper.Box{X0: min(a.X, b.X), Y0: min(a.Y, b.Y), X1: max(a.X, b.X), Y1: max(a.Y, b.Y)}
}

// Along reports whether b is long in one direction and thin in the other: a line.
func Along(b paper.Box) bool {
	w, h := b.X1-b.X0, b.Y1-b.Y0
	return min(w, h) <= Thin && max(w, h) > minLength
}
