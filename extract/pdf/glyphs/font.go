package glyphs

import (
	"unicode"
	"unicode/utf8"

	lib "github.com/ledongthuc/pdf"

	"halfspan/extract/pdf/facename"
)

// Font is one font of a paper.
type Font struct {
	Name         string // without the tag of a subset
	Bold, Italic bool
	// Repairs lists the codes that are read against what the file says of them.
	Repairs []Repair

	simple   [256]*glyph
	comp     map[uint32]*glyph
	encoding *cmap // of a composite font; nil: two bytes are a glyph number
	toText   map[uint32]string
	widths   map[uint32]float64 // of a composite font, in em
	missing  float64            // width of other glyphs, in em
	ucs2     bool               // the codes are UTF-16
	vertical bool
	scale    float64 // of a Type 3 font: its em, where others have 1
}

// Repair is a code that is read against what the file says of it.
type Repair struct {
	Code       uint32
	From, Text string // what the file says, what is read
	Why        string // the evidence, as the end of a sentence
}

// glyph is what one code shows.
type glyph struct {
	text     string
	width    float64 // in em
	repaired bool
	way      Way
}

// Way is the way by which the text of a code is found: the kind of font and
// the source in it. Two fonts read in the same way are read by the same steps.
type Way uint8

// The sources of a code's text; a composite or Type 3 font adds its kind.
const (
	byNothing   Way = iota
	byMap           // the font's own map to Unicode
	byName          // the name of its glyph
	byEncoding      // a named encoding
	byLayout        // the layout of a mathematics font
	ofComposite Way = 8
	ofType3     Way = 16
)

// unknown stands for what cannot be told from the file.
const unknown = "\uFFFD"

// fontKey is where a font is described: in an object of its own, or under a name
// in a dictionary.
type fontKey struct {
	r    ref
	in   *dict
	name string
}

// fontNamed gives a font of the present resources; nil if there is none. It is
// read once per paper.
func (d *Document) fontNamed(fonts *dict, name string) *Font {
	if fonts == nil {
		return nil
	}
	r, there := fonts.refs[name]
	if !there {
		return nil
	}
	key := fontKey{r: r}
	if r == 0 {
		key = fontKey{in: fonts, name: name}
	}
	return d.fontAt(key, func() lib.Value { return fonts.key(name) })
}

// font gives the font that v describes.
func (d *Document) font(v lib.Value) *Font {
	return d.fontAt(fontKey{r: refOf(v), name: v.String()}, func() lib.Value { return v })
}

func (d *Document) fontAt(key fontKey, load func() lib.Value) *Font {
	f, ok := d.fonts[key]
	if !ok {
		if v := load(); v.Kind() == lib.Dict {
			f = d.readFont(v)
		}
		d.fonts[key] = f
	}
	return f
}

// standIn is the font for text whose own font is missing.
func (d *Document) standIn() *Font {
	key := fontKey{name: "stand-in"}
	f, ok := d.fonts[key]
	if !ok {
		f = &Font{Name: "Helvetica", scale: 1}
		enc := &simpleEncoding{base: "WinAnsiEncoding"}
		for c := range 256 {
			g := &glyph{width: 0.5, text: enc.baseText(byte(c)), way: byNothing}
			if w, ok := standardWidth("Helvetica", enc.widthName(byte(c))); ok {
				g.width = w / 1000
			}
			f.simple[c] = g
		}
		d.fonts[key] = f
	}
	return f
}

func (d *Document) readFont(v lib.Value) *Font {
	full := d.key(v, "BaseFont").Name()
	f := &Font{Name: facename.Plain(full), scale: 1}
	if tu := d.key(v, "ToUnicode"); tu.Kind() == lib.Stream {
		f.toText = d.toUnicode(tu)
	}
	kind := d.key(v, "Subtype").Name()
	if kind == "Type0" {
		d.readComposite(f, v)
		return f
	}
	desc := d.key(v, "FontDescriptor")
	d.describe(f, desc)
	if kind == "Type3" {
		d.readType3(f, v)
		return f
	}
	d.readSimple(f, v, desc, kind)
	return f
}

func (d *Document) toUnicode(v lib.Value) map[uint32]string {
	b, _ := d.stream(v)
	return readCMap(b, &d.fuel).text
}

// describe takes the style from a font's descriptor.
func (d *Document) describe(f *Font, desc lib.Value) {
	flags := d.key(desc, "Flags").Int64()
	f.Bold = flags&(1<<18) != 0 || facename.Bold(f.Name)
	f.Italic = flags&(1<<6) != 0 || facename.Italic(f.Name)
}

// next splits the next code from a string.
func (f *Font) next(b []byte) (code uint32, n int) {
	if f.comp == nil {
		return uint32(b[0]), 1
	}
	n = min(2, len(b))
	if f.encoding != nil {
		n = f.encoding.length(b)
	}
	return codeOf(b[:n]), n
}

func (f *Font) glyph(code uint32) *glyph {
	if f.comp == nil {
		return f.simple[code&0xFF]
	}
	g, ok := f.comp[code]
	if !ok {
		g = f.readGlyph(code)
		f.comp[code] = g
	}
	return g
}

// sane reports whether a font's own map gives something that can be printed.
func sane(text string) bool {
	if text == "" || !utf8.ValidString(text) {
		return false
	}
	for _, r := range text {
		if unicode.IsControl(r) && r != '\t' || unicode.Is(unicode.Co, r) || r == utf8.RuneError || r == 0xFFFE || r == 0xFFFF {
			return false
		}
	}
	return true
}
