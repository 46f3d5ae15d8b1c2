package glyphs

import (
	"strings"

	lib "github.com/ledongthuc/pdf"
)

func (d *Document) readComposite(f *Font, v lib.Value) {
	f.comp = map[uint32]*glyph{}
	f.widths = map[uint32]float64{}
	enc := d.key(v, "Encoding")
	switch {
	case enc.Kind() == lib.Stream:
		b, _ := d.stream(enc)
		f.encoding = readCMap(b, &d.fuel)
		if use := d.key(enc, "UseCMap"); use.Kind() == lib.Name {
			f.encoding.uses = use.Name()
		}
		f.vertical = f.encoding.wmode == 1
	case enc.Name() == "Identity-H":
	case enc.Name() == "Identity-V":
		f.vertical = true
	case strings.Contains(enc.Name(), "UCS2") || strings.Contains(enc.Name(), "UTF16"):
		f.ucs2 = true
		f.vertical = strings.HasSuffix(enc.Name(), "-V")
	default:
		panic(&Error{What: "a font with the predefined character map " + enc.Name()})
	}
	child := d.key(v, "DescendantFonts").Index(0)
	desc := d.key(child, "FontDescriptor")
	d.describe(f, desc)
	f.missing = 1
	if dw := d.key(child, "DW"); !dw.IsNull() {
		f.missing = dw.Float64() / 1000
	}
	d.readWidths(f, d.key(child, "W"))
}

// maxWidths bounds the widths that one font may list.
const maxWidths = 70_000

// readWidths reads "c [w1 w2 …]" and "first last w".
func (d *Document) readWidths(f *Font, w lib.Value) {
	for i := 0; i+1 < w.Len() && len(f.widths) < maxWidths; {
		first := uint32(max(0, d.number(w, i)))
		burn(&d.fuel.objects, 1, fuelObjects*64, "objects")
		list := w.Index(i + 1)
		if list.Kind() == lib.Array {
			for k := 0; k < list.Len() && len(f.widths) < maxWidths; k++ {
				f.widths[first+uint32(k)] = d.number(list, k) / 1000
			}
			i += 2
			continue
		}
		last, width := uint32(max(0, list.Float64())), d.number(w, i+2)/1000
		for c := first; c <= last && c-first < maxWidths && len(f.widths) < maxWidths; c++ {
			f.widths[c] = width
		}
		i += 3
	}
}

// readGlyph looks a code of a composite font up.
func (f *Font) readGlyph(code uint32) *glyph {
	cid := code
	if f.encoding != nil && len(f.encoding.cids) > 0 {
		cid = f.encoding.cid(code)
	}
	g := &glyph{width: f.missing, text: unknown, way: ofComposite}
	if w, ok := f.widths[cid]; ok {
		g.width = w
	}
	switch t, ok := f.toText[code]; {
	case ok && t != "":
		g.text, g.way = t, ofComposite|byMap
	case f.ucs2:
		g.text, g.way = string(rune(code)), ofComposite|byEncoding
	}
	return g
}
