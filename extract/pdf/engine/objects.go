package engine

import (
	"encoding/binary"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/geom"
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
		o.object(o.r.call("FPDFPage_GetObject", page, uint64(i)), geom.Identity, 0)
	}
}

func (o *objectReader) object(obj uint64, m geom.Matrix, depth int) {
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
		inner := o.matrix(obj).Mul(m)
		n := o.r.int("FPDFFormObj_CountObjects", obj)
		for i := 0; i < n && o.seen <= maxObjects; i++ {
			o.object(o.r.call("FPDFFormObj_GetObject", obj, uint64(i)), inner, depth+1)
		}
	}
}

func (o *objectReader) bounds(obj uint64, m geom.Matrix) paper.Box {
	s := o.r.scratch
	o.r.call("FPDFPageObj_GetBounds", obj, s, s+4, s+8, s+12)
	b := o.r.bytes(s, 16)
	return m.Box(float32At(b, 0), float32At(b, 1), float32At(b, 2), float32At(b, 3))
}

func (o *objectReader) matrix(obj uint64) geom.Matrix {
	if o.r.int("FPDFPageObj_GetMatrix", obj, o.r.scratch) != 1 {
		return geom.Identity
	}
	b := o.r.bytes(o.r.scratch, 24)
	var m geom.Matrix
	for i := range m {
		m[i] = float32At(b, i)
	}
	return m
}

// path adds the straight lines of one path: a thin shape as a whole, else the
// axis-parallel strokes and the thin filled rectangles in it.
func (o *objectReader) path(obj uint64, m geom.Matrix) {
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
	var l lines.Finder
	at := o.matrix(obj).Mul(m)
	for i := 0; i < n && r.err == nil; i++ {
		seg := r.call("FPDFPath_GetPathSegment", obj, uint64(i))
		r.call("FPDFPathSegment_GetPoint", seg, s, s+4)
		b := r.bytes(s, 8)
		p := at.Point(float32At(b, 0), float32At(b, 1))
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
	o.page.Rules = append(o.page.Rules, l.Rules(fill, stroke)...)
}

func isDot(b paper.Box) bool { return b.X1-b.X0 <= lines.Thin && b.Y1-b.Y0 <= lines.Thin }
