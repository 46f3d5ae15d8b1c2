package evidence

import (
	"errors"
	"image"
	"image/color"
	"image/draw"
)

// ErrNoPlace is the cause where a result has no place on the page.
var ErrNoPlace = errors.New("no place on the page is known")

var (
	outline = color.RGBA{0x8a, 0x1f, 0x4d, 0xff}
	around  = color.RGBA{0x12, 0x59, 0x5b, 0xff}
)

// CutOut cuts the place of a result out of the picture of its page: the whole
// width of the page, from margin pixels above the result to margin below it, with
// the result's own numbers outlined and other places (n, arm, the meaning of the
// spread) outlined by dashes where they lie inside. scale is pixels a point, for
// the width of the lines. page is not changed.
func CutOut(page image.Image, own, others []image.Rectangle, margin int, scale float64) (image.Image, error) {
	var all image.Rectangle
	for _, r := range own {
		all = all.Union(r.Canon().Intersect(page.Bounds()))
	}
	if all.Empty() {
		return nil, ErrNoPlace
	}
	b := page.Bounds()
	window := image.Rect(b.Min.X, all.Min.Y-margin, b.Max.X, all.Max.Y+margin).Intersect(b)
	out := image.NewRGBA(window)
	draw.Draw(out, window, page, window.Min, draw.Src)
	pad, pen := int(2*scale)+1, max(1, int(1.2*scale))
	for _, r := range others {
		if r = r.Canon(); !r.Intersect(window).Empty() {
			frame(out, r.Inset(-pad), max(1, pen/2), around, int(4*scale)+2)
		}
	}
	for _, r := range own {
		frame(out, r.Canon().Inset(-pad), pen, outline, 0)
	}
	return out, nil
}

// frame draws a rectangle; dash is the length of a dash and of the gap after it,
// 0 for a whole line.
func frame(dst *image.RGBA, r image.Rectangle, pen int, c color.Color, dash int) {
	for y := r.Min.Y; y < r.Max.Y; y++ {
		for x := r.Min.X; x < r.Max.X; x++ {
			side := x < r.Min.X+pen || x >= r.Max.X-pen
			top := y < r.Min.Y+pen || y >= r.Max.Y-pen
			if !side && !top {
				x = r.Max.X - pen - 1 // nothing to draw inside
				continue
			}
			along := x - r.Min.X
			if side && !top {
				along = y - r.Min.Y
			}
			if dash > 0 && along/dash%2 == 1 {
				continue
			}
			if (image.Point{X: x, Y: y}).In(dst.Bounds()) {
				dst.Set(x, y, c)
			}
		}
	}
}
