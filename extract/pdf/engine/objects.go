package engine

import (
	"encoding/binary"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/lines"
)

// Limits on the drawings of one page; a figure can hold a million points.
const (
	maxObjects  = 60_000
	maxSegments = 4_000 // of one path
	maxNesting  = 12
	maxRules    = 20_000
)

// Types of page objects and path segments in the library.
const (
	objPath, objImage, objForm  = 2, 3, 5
	segLine, segBezier, segMove = 0, 1, 2
)

// objectReader finds the straight lines and pictures of a page, those inside
// form objects included.
type objectReader struct {
	r    *raw
	page *paper.GlyphPage
	seen int
}

func (o *objectReader) read(page uint64) {
	n := o.r.int("FPDFPage_CountObjects", page)
	for i := 0; i < n; i++ {
		o.object(o.r.call("FPDFPage_GetObject", page, uint64(i)), identity, 0)
	}
}

func (o *objectReader) object(obj uint64, m matrix, depth int) {
	o.seen++
	if obj == 0 || o.r.err != nil || o.seen > maxObjects || len(o.page.Rules) > maxRules {
		return
	}
	switch o.r.int("FPDFPageObj_GetType", obj) {
	case objPath:
		o.path(obj, m)
	case objImage:
		o.page.Images = append(o.page.Images, o.bounds(obj, m))
	case objForm:
		if depth == maxNesting {
			return
		}
		inner := o.matrix(obj).mul(m)
		n := o.r.int("FPDFFormObj_CountObjects", obj)
		for i := 0; i < n && o.seen <= maxObjects; i++ {
			o.object(o.r.call("FPDFFormObj_GetObject", obj, uint64(i)), inner, depth+1)
		}
	}
}

func (o *objectReader) bounds(obj uint64, m matrix) paper.Box {
	s := o.r.scratch
	o.r.call("FPDFPageObj_GetBounds", obj, s, s+4, s+8, s+12)
	b := o.r.bytes(s, 16)
	return m.box(float32At(b, 0), float32At(b, 1), float32At(b, 2), float32At(b, 3))
}

func (o *objectReader) matrix(obj uint64) matrix {
	if o.r.int("FPDFPageObj_GetMatrix", obj, o.r.scratch) != 1 {
		return identity
	}
	b := o.r.bytes(o.r.scratch, 24)
	var m matrix
	for i := range m {
		m[i] = float32At(b, i)
	}
	return m
}

// path adds the straight lines of one path: a thin shape as a whole, else the
// axis-parallel strokes and the thin filled rectangles in it.
func (o *objectReader) path(obj uint64, m matrix) {
	r, s := o.r, o.r.scratch
	r.call("FPDFPath_GetDrawMode", obj, s, s+4)
	mode := r.bytes(s, 8)
	fill, stroke := binary.LittleEndian.Uint32(mode) != 0, binary.LittleEndian.Uint32(mode[4:]) != 0
	if !fill && !stroke {
		return
	}
	whole := o.bounds(obj, m)
	n := r.int("FPDFPath_CountSegments", obj)
	if lines.Along(whole) && n <= 6 {
		o.page.Rules = append(o.page.Rules, whole)
		return
	}
	if n > maxSegments || n > 6 && isDot(whole) {
		return
	}
	l := lines.Finder{Fill: fill, Stroke: stroke}
	at := o.matrix(obj).mul(m)
	for i := 0; i < n && r.err == nil; i++ {
		seg := r.call("FPDFPath_GetPathSegment", obj, uint64(i))
		r.call("FPDFPathSegment_GetPoint", seg, s, s+4)
		b := r.bytes(s, 8)
		x, y := at.apply(float32At(b, 0), float32At(b, 1))
		p := paper.Point{X: hundredth(x), Y: hundredth(y)}
		switch r.int("FPDFPathSegment_GetType", seg) {
		case segMove:
			l.Move(p)
		case segLine:
			l.Line(p)
		case segBezier:
			l.Curve(p)
		}
		if r.int("FPDFPathSegment_GetClose", seg) == 1 {
			l.Close()
		}
	}
	o.page.Rules = append(o.page.Rules, l.Rules()...)
}

func isDot(b paper.Box) bool { return b.X1-b.X0 <= lines.Thin && b.Y1-b.Y0 <= lines.Thin }

// matrix is a PDF transformation: x' = a x + c y + e, y' = b x + d y + f.
type matrix [6]float64

var identity = matrix{1, 0, 0, 1, 0, 0}

// mul is first m, then n.
func (m matrix) mul(n matrix) matrix {
	return matrix{
		m[0]*n[0] + m[1]*n[2], m[0]*n[1] + m[1]*n[3],
		m[2]*n[0] + m[3]*n[2], m[2]*n[1] + m[3]*n[3],
		m[4]*n[0] + m[5]*n[2] + n[4], m[4]*n[1] + m[5]*n[3] + n[5],
	}
}

func (m matrix) apply(x, y float64) (float64, float64) {
	return m[0]*x + m[2]*y + m[4], m[1]*x + m[3]*y + m[5]
}

// box is the axis-parallel box around the transformed rectangle.
func (m matrix) box(x0, y0, x1, y1 float64) paper.Box {
	ax, ay := m.apply(x0, y0)
	bx, by := m.apply(x1, y1)
	cx, cy := m.apply(x0, y1)
	dx, dy := m.apply(x1, y0)
	return boxOf(ax, ay, bx, by).Union(boxOf(cx, cy, dx, dy))
}
