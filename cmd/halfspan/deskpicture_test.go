package main

import (
	"image"
	"image/color"
	"testing"
)

func TestThinnedPictures(t *testing.T) {
	const side = 64
	draw := func(at func(x, y int) color.RGBA) *image.RGBA {
		p := image.NewRGBA(image.Rect(0, 0, side, side))
		for y := range side {
			for x := range side {
				p.SetRGBA(x, y, at(x, y))
			}
		}
		return p
	}
	for _, c := range []struct {
		name    string
		at      func(x, y int) color.RGBA
		palette bool
		off     int // how far a colour may move, of 255
	}{
		{"black on white", func(x, _ int) color.RGBA { v := uint8(255 * (x % 2)); return color.RGBA{v, v, v, 255} }, true, 0},
		{"smoothed grey", func(x, y int) color.RGBA { v := uint8(4 * x); return color.RGBA{v, v, v, 255} }, true, 7},
		{"a coloured chart", func(x, y int) color.RGBA { return color.RGBA{uint8(17 * (x / 4)), uint8(17 * (y / 4)), 255, 255} }, true, 15},
		{"a photograph", func(x, y int) color.RGBA { return color.RGBA{uint8(4 * x), uint8(4 * y), uint8(2 * (x + y)), 255} }, false, 0},
	} {
		picture := draw(c.at)
		got := thin(picture)
		if _, is := got.(*image.Paletted); is != c.palette {
			t.Errorf("%s: became a %T", c.name, got)
		}
		for y := range side {
			for x := range side {
				a, b := picture.RGBAAt(x, y), color.RGBAModel.Convert(got.At(x, y)).(color.RGBA)
				for i, d := range []int{int(a.R) - int(b.R), int(a.G) - int(b.G), int(a.B) - int(b.B)} {
					if max(d, -d) > c.off {
						t.Fatalf("%s at %d, %d: colour %d moved by %d", c.name, x, y, i, d)
					}
				}
			}
		}
	}
}
