package main

import (
	"image"
	"image/color"
)

// thinBits are how many bits of each colour a thinned picture keeps, the finest
// first: the eye does not tell the smoothed edges of print apart.
var thinBits = []int{5, 4}

// maxColors is how many colours a picture with a palette can have.
const maxColors = 256

// thin turns a picture of few colours into one with a palette. Nearly every
// printed page is one: a quarter of the bytes are packed and sent, and they pack
// several times as fast, which is most of the time that a page takes. A page
// with a photograph stays as it is.
func thin(picture *image.RGBA) image.Image {
	for _, bits := range thinBits {
		if out := thinTo(picture, bits); out != nil {
			return out
		}
	}
	return picture
}

// thinTo keeps so many bits of each colour; nil where too many colours are left.
func thinTo(picture *image.RGBA, bits int) *image.Paletted {
	shift := 8 - bits
	// White must stay white: what is left is spread over the whole range.
	spread := func(v uint8) uint8 { return uint8(int(v>>shift) * 255 / (1<<bits - 1)) }
	index := make([]int16, 1<<(3*bits)) // of a colour in the palette, from 1
	out := image.NewPaletted(picture.Bounds(), nil)
	for i := range out.Pix {
		p := picture.Pix[4*i : 4*i+3 : 4*i+3]
		key := int(p[0]>>shift)<<(2*bits) | int(p[1]>>shift)<<bits | int(p[2]>>shift)
		if index[key] == 0 {
			if len(out.Palette) == maxColors {
				return nil
			}
			out.Palette = append(out.Palette, color.RGBA{spread(p[0]), spread(p[1]), spread(p[2]), 255})
			index[key] = int16(len(out.Palette))
		}
		out.Pix[i] = uint8(index[key] - 1)
	}
	return out
}
