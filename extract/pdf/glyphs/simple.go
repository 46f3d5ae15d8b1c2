package glyphs

import (
	"strings"
	"sync"

	lib "github.com/ledongthuc/pdf"
)

// simpleEncoding is what a simple font's codes stand for, from the worst
// source to the best.
type simpleEncoding struct {
	base        string      // name of the base encoding
	builtin     [256]string // glyph names in the font program
	differences [256]string // glyph names that the file gives
}

func (d *Document) readSimple(f *Font, v, desc lib.Value, kind string) {
	enc := d.simpleEncoding(f, v, desc, kind)
	first := int(d.key(v, "FirstChar").Int64())
	widths := d.key(v, "Widths")
	missing := d.key(desc, "MissingWidth").Float64()
	standard := standardFont(f.Name, f.Bold, f.Italic)
	var names [256]string
	var given [256]float64
	for c := range 256 {
		names[c] = enc.name(byte(c))
		g := &glyph{width: missing / 1000}
		if i := c - first; i >= 0 && i < widths.Len() {
			given[c] = d.number(widths, i)
			g.width = given[c] / 1000
		} else if widths.Len() == 0 {
			if w, ok := standardWidth(standard, enc.widthName(byte(c))); ok {
				g.width = w / 1000
			} else if missing == 0 {
				g.width = 0.5
			}
		}
		f.simple[c] = g
	}
	math, why := mathLayout(&names, &given)
	for c, g := range f.simple {
		g.text, g.way, g.repaired = f.text(uint32(c), names[c], enc.baseText(byte(c)))
		if t, ok := math[uint32(c)]; ok && t != g.text {
			f.Repairs = append(f.Repairs, Repair{uint32(c), g.text, t, why})
			g.text, g.way, g.repaired = t, byLayout, true
		}
	}
}

// number looks up a number in an array, which may be an object of its own.
func (d *Document) number(array lib.Value, i int) float64 {
	burn(&d.fuel.objects, 1, fuelObjects*64, "objects")
	return array.Index(i).Float64()
}

// text chooses what a code stands for: the font's own map where it can be
// printed, else the glyph's name, else the encoding, else the code itself if
// it is a control code (so that its use can be studied), else unknown. It is a
// repair where the map says something that cannot be printed.
func (f *Font) text(code uint32, name, base string) (text string, way Way, repaired bool) {
	mapped := f.toText[code]
	if sane(mapped) {
		return mapped, byMap, false
	}
	if t := nameText(name); t != "" {
		if mapped == "" || mapped == t || t == " " || !sane(t) {
			return t, byName, false
		}
		f.Repairs = append(f.Repairs, Repair{code, mapped, t, "its glyph is named " + name})
		return t, byName, true
	}
	switch {
	case mapped != "":
		return mapped, byMap, false
	case name == "" && base != "":
		return base, byEncoding, false
	case code < ' ':
		return string(rune(code)), byNothing, false
	}
	return unknown, byNothing, false
}

func (d *Document) simpleEncoding(f *Font, v, desc lib.Value, kind string) *simpleEncoding {
	e := &simpleEncoding{}
	flags := d.key(desc, "Flags").Int64()
	enc := d.key(v, "Encoding")
	if enc.Kind() == lib.Name {
		e.base = enc.Name()
	}
	if enc.Kind() == lib.Dict {
		e.base = d.key(enc, "BaseEncoding").Name()
		diff := d.key(enc, "Differences")
		code := 0
		for i := range diff.Len() {
			burn(&d.fuel.objects, 1, fuelObjects*64, "objects")
			item := diff.Index(i)
			if item.Kind() == lib.Name {
				if code >= 0 && code < 256 {
					e.differences[code] = item.Name()
				}
				code++
				continue
			}
			code = int(item.Float64())
		}
	}
	lower := strings.ToLower(f.Name)
	switch {
	case strings.HasPrefix(lower, "symbol") && e.base == "":
		e.base = "Symbol"
	case strings.Contains(lower, "dingbats") && e.base == "":
		e.base = "ZapfDingbats"
	case e.base == "" && kind == "TrueType" && flags&4 == 0:
		e.base = "WinAnsiEncoding"
	case e.base == "":
		d.builtin(e, desc)
	}
	return e
}

// name is the glyph's name for a code, where one is given.
func (e *simpleEncoding) name(c byte) string {
	if n := e.differences[c]; n != "" {
		return n
	}
	return e.builtin[c]
}

func (e *simpleEncoding) baseText(c byte) string { return baseText(e.base, c) }

// widthName is the name to look a standard font's width up by.
func (e *simpleEncoding) widthName(c byte) string {
	if n := e.name(c); n != "" {
		return n
	}
	switch e.base {
	case "Symbol":
		return symbolNames()[c]
	case "ZapfDingbats":
		return dingbatNames()[c]
	}
	return runeName(e.baseText(c), c)
}

// runeName names the glyph of a character in a Latin encoding, as the standard
// encoding does.
func runeName(text string, c byte) string {
	if n := standardNames()[c]; n != "" && nameText(n) == text {
		return n
	}
	return standardByText()[text]
}

// standardByText gives the names of the standard encoding by what they mean.
var standardByText = sync.OnceValue(func() map[string]string {
	names := map[string]string{}
	for _, n := range standardNames() {
		if t := nameText(n); t != "" && names[t] == "" {
			names[t] = n
		}
	}
	return names
})

// builtin reads the encoding inside an embedded Type 1 font, whose first part
// is plain text: "dup 45 /minus put".
func (d *Document) builtin(e *simpleEncoding, desc lib.Value) {
	prog := d.key(desc, "FontFile")
	if prog.Kind() == lib.Stream {
		b, _ := d.stream(prog)
		type1Encoding(upTo(b, "eexec", 64<<10), &e.builtin)
		return
	}
	if prog := d.key(desc, "FontFile3"); prog.Kind() == lib.Stream {
		b, _ := d.stream(prog)
		cffEncoding(b, &e.builtin)
	}
}

func type1Encoding(b []byte, to *[256]string) {
	l := lexer{b: b}
	for t := l.next(); t.kind != tokEOF; t = l.next() {
		if t.kind != tokWord || string(t.b) != "dup" {
			continue
		}
		code, name := l.next(), l.next()
		if code.kind == tokNumber && name.kind == tokName && code.num >= 0 && code.num < 256 {
			to[int(code.num)] = string(name.b)
		}
	}
}

// readType3 reads a font whose glyphs are drawings: only its codes, widths and
// names matter here.
func (d *Document) readType3(f *Font, v lib.Value) {
	m := d.key(v, "FontMatrix")
	sx, sy := 0.001, 0.001
	if m.Len() == 6 {
		sx, sy = m.Index(0).Float64(), m.Index(3).Float64()
	}
	if sy < 0 {
		sy = -sy
	}
	if box := d.key(v, "FontBBox"); box.Len() == 4 {
		if h := (box.Index(3).Float64() - box.Index(1).Float64()) * sy; h > 0 {
			f.scale = min(h, 4)
		}
	}
	enc := d.simpleEncoding(f, v, lib.Value{}, "Type3")
	first := int(d.key(v, "FirstChar").Int64())
	widths := d.key(v, "Widths")
	for c := range 256 {
		g := &glyph{}
		g.text, g.way, g.repaired = f.text(uint32(c), enc.name(byte(c)), "")
		if t := codeName(enc.name(byte(c)), uint32(c)); t != "" && !sane(f.toText[uint32(c)]) {
			g.text, g.way = t, byName
		}
		g.way |= ofType3
		if i := c - first; i >= 0 && i < widths.Len() {
			g.width = d.number(widths, i) * sx
		}
		f.simple[c] = g
	}
}
