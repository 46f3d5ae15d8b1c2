package engine

import (
	"errors"
	"fmt"
	"image"
	"math"

	"halfspan/extract/paper"
)

// maxPixels bounds a picture: an A4 page at 400 dots an inch.
const maxPixels = 16 << 20

// ErrTooLarge is the cause where a picture would have more than maxPixels.
var ErrTooLarge = errors.New("the picture would be too large: ask for a smaller scale")

// Render draws a page, 1-based, as a viewer shows it (turned, only its visible
// box), with scale pixels a point. White is the ground.
func (d *Document) Render(number int, scale float64) (*image.RGBA, error) {
	if !(scale > 0) {
		return nil, fmt.Errorf("scale %v: must be above 0", scale)
	}
	return d.render(number, func(float64) float64 { return scale })
}

// RenderWide draws a page as [Document.Render] does, width pixels wide.
func (d *Document) RenderWide(number, width int) (*image.RGBA, error) {
	if width < 1 {
		return nil, fmt.Errorf("width %d: must be above 0", width)
	}
	return d.render(number, func(points float64) float64 { return float64(width) / points })
}

// render draws a page at the scale that fits its width in points.
func (d *Document) render(number int, scaleOf func(points float64) float64) (*image.RGBA, error) {
	page, err := d.loadPage(number)
	if err != nil {
		return nil, err
	}
	r := d.r
	defer r.call("FPDF_ClosePage", page)
	width := float64(math.Float32frombits(uint32(r.call("FPDF_GetPageWidthF", page))))
	height := float64(math.Float32frombits(uint32(r.call("FPDF_GetPageHeightF", page))))
	if r.err != nil {
		return nil, r.err
	}
	if !(width > 0 && height > 0) {
		return nil, fmt.Errorf("page %d has no width or no height", number)
	}
	// A width asked for in whole pixels must not become one more by rounding.
	scale := scaleOf(width)
	w, h := int(math.Ceil(width*scale-1e-6)), int(math.Ceil(height*scale-1e-6))
	if w < 1 || h < 1 || w > maxPixels/h {
		return nil, fmt.Errorf("page %d at scale %v: %w", number, scale, ErrTooLarge)
	}
	const bgra = 4
	bitmap := r.call("FPDFBitmap_CreateEx", uint64(w), uint64(h), bgra, 0, 0)
	if bitmap == 0 {
		return nil, fmt.Errorf("page %d at scale %v: %w", number, scale, ErrTooLarge)
	}
	defer r.call("FPDFBitmap_Destroy", bitmap)
	r.call("FPDFBitmap_FillRect", bitmap, 0, 0, uint64(w), uint64(h), 0xFFFFFFFF)
	const annotations, redFirst = 0x01, 0x10
	r.call("FPDF_RenderPageBitmap", bitmap, page, 0, 0, uint64(w), uint64(h), 0, annotations|redFirst)
	stride := r.int("FPDFBitmap_GetStride", bitmap)
	buffer := r.call("FPDFBitmap_GetBuffer", bitmap)
	if r.err != nil {
		return nil, r.err
	}
	img := image.NewRGBA(image.Rect(0, 0, w, h))
	b := r.bytes(buffer, stride*h)
	if r.err != nil || stride < 4*w {
		return nil, errors.Join(fmt.Errorf("page %d cannot be drawn", number), r.err)
	}
	for y := range h {
		copy(img.Pix[y*img.Stride:y*img.Stride+4*w], b[y*stride:])
	}
	return img, nil
}

// OnPicture gives where a box of a page stands in the picture that Render
// draws of it at the scale.
func OnPicture(p paper.Page, scale float64, b paper.Box) image.Rectangle {
	x0, y0 := onPicture(p, scale, b.X0, b.Y0)
	x1, y1 := onPicture(p, scale, b.X1, b.Y1)
	return image.Rect(int(math.Floor(min(x0, x1))), int(math.Floor(min(y0, y1))), int(math.Ceil(max(x0, x1))), int(math.Ceil(max(y0, y1))))
}

func onPicture(p paper.Page, scale float64, x, y int32) (px, py float64) {
	left, bottom := float64(x-p.Box.X0)/100, float64(y-p.Box.Y0)/100
	right, top := float64(p.Box.X1-x)/100, float64(p.Box.Y1-y)/100
	switch p.Rotate {
	case 90:
		return bottom * scale, left * scale
	case 180:
		return right * scale, bottom * scale
	case 270:
		return top * scale, right * scale
	}
	return left * scale, top * scale
}

// FromPicture is the way back: the box on the page under a box in the picture.
func FromPicture(p paper.Page, scale float64, r image.Rectangle) paper.Box {
	x0, y0 := fromPicture(p, scale, float64(r.Min.X), float64(r.Min.Y))
	x1, y1 := fromPicture(p, scale, float64(r.Max.X), float64(r.Max.Y))
	return paper.Box{X0: min(x0, x1), Y0: min(y0, y1), X1: max(x0, x1), Y1: max(y0, y1)}
}

func fromPicture(p paper.Page, scale, px, py float64) (x, y int32) {
	h, v := int32(math.Round(px/scale*100)), int32(math.Round(py/scale*100))
	switch p.Rotate {
	case 90:
		return p.Box.X0 + v, p.Box.Y0 + h
	case 180:
		return p.Box.X1 - h, p.Box.Y0 + v
	case 270:
		return p.Box.X1 - v, p.Box.Y1 - h
	}
	return p.Box.X0 + h, p.Box.Y1 - v
}
