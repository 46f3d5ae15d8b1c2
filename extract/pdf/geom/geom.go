// Package geom turns the floating-point geometry of PDF pages into the
// integers of extract/paper: points into 1/100 point, matrices, directions.
// Both PDF readers use it, so that they round alike.
package geom

import (
	"math"

	"halfspan/extract/paper"
)

// The box of a glyph reaches this far above and below the baseline, in em. What
// fonts say of their own height differs too much to compare lines by.
const (
	Ascent  = 0.75
	Descent = -0.25
)

// Matrix is a PDF transformation: x' = a x + c y + e, y' = b x + d y + f, as
// a, b, c, d, e, f.
type Matrix [6]float64

// Identity leaves everything in its place.
var Identity = Matrix{1, 0, 0, 1, 0, 0}

// Mul is first m, then n.
func (m Matrix) Mul(n Matrix) Matrix {
	return Matrix{
		m[0]*n[0] + m[1]*n[2], m[0]*n[1] + m[1]*n[3],
		m[2]*n[0] + m[3]*n[2], m[2]*n[1] + m[3]*n[3],
		m[4]*n[0] + m[5]*n[2] + n[4], m[4]*n[1] + m[5]*n[3] + n[5],
	}
}

// Apply transforms a point.
func (m Matrix) Apply(x, y float64) (float64, float64) {
	return m[0]*x + m[2]*y + m[4], m[1]*x + m[3]*y + m[5]
}

// Point transforms a point and rounds it.
func (m Matrix) Point(x, y float64) paper.Point {
	x, y = m.Apply(x, y)
	return paper.Point{X: Hundredth(x), Y: Hundredth(y)}
}

// Box is the axis-parallel box around the transformed rectangle.
func (m Matrix) Box(x0, y0, x1, y1 float64) paper.Box {
	ax, ay := m.Apply(x0, y0)
	bx, by := m.Apply(x1, y1)
	if m[1] == 0 && m[2] == 0 {
		return Box(ax, ay, bx, by)
	}
	cx, cy := m.Apply(x0, y1)
	dx, dy := m.Apply(x1, y0)
	return Box(min(ax, bx, cx, dx), min(ay, by, cy, dy), max(ax, bx, cx, dx), max(ay, by, cy, dy))
}

// Hundredth turns points into 1/100 point; what does not fit becomes the
// nearest that does, and no number becomes 0.
func Hundredth(v float64) int32 {
	v = math.Round(v * 100)
	switch {
	case v != v:
		return 0
	case v > 1e9:
		return 1e9
	case v < -1e9:
		return -1e9
	}
	return int32(v)
}

// Box turns two opposite corners into a box.
func Box(x0, y0, x1, y1 float64) paper.Box {
	a, b, c, d := Hundredth(x0), Hundredth(y0), Hundredth(x1), Hundredth(y1)
	return paper.Box{X0: min(a, c), Y0: min(b, d), X1: max(a, c), Y1: max(b, d)}
}

// Angle gives the direction of the vector (x, y) in whole degrees
// counter-clockwise, 0 to 359; within two degrees of an axis it is the axis.
func Angle(x, y float64) int16 {
	if y == 0 && x > 0 || x == 0 && y == 0 || x != x || y != y {
		return 0
	}
	deg := math.Mod(math.Atan2(y, x)*180/math.Pi+360, 360)
	if near := math.Round(deg/90) * 90; math.Abs(deg-near) < 2 {
		deg = near
	}
	return int16(math.Round(deg)) % 360
}
