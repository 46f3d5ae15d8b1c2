package glyphs

import (
	"math"
	"unicode/utf8"

	lib "github.com/ledongthuc/pdf"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/geom"
)

// textOperator runs the text operators; false if op is none.
func (in *interpreter) textOperator(op []byte, args []operand, n []float64) bool {
	switch string(op) {
	case "BT":
		in.text, in.line = geom.Identity, geom.Identity
	case "ET":
	case "Tf":
		if len(args) >= 2 && args[len(args)-2].kind == tokName && nums(args, n[:1]) {
			in.font, in.size = in.fontNamed(string(args[len(args)-2].b)), n[0]
		}
	case "Tm":
		if nums(args, n[:6]) {
			in.line = geom.Matrix(n[:6])
			in.text = in.line
		}
	case "Td":
		if nums(args, n[:2]) {
			in.move(n[0], n[1])
		}
	case "TD":
		if nums(args, n[:2]) {
			in.leading = -n[1]
			in.move(n[0], n[1])
		}
	case "T*":
		in.move(0, -in.leading)
	case "Tj":
		in.showLast(args)
	case "'":
		in.move(0, -in.leading)
		in.showLast(args)
	case "\"":
		if len(args) >= 3 && nums(args[:len(args)-1], n[:2]) {
			in.word, in.char = n[0], n[1]
		}
		in.move(0, -in.leading)
		in.showLast(args)
	case "TJ":
		in.showArray(args)
	default:
		return in.textState(op, args, n)
	}
	return true
}

// textState runs the operators that set one number of the text state.
func (in *interpreter) textState(op []byte, args []operand, n []float64) bool {
	var to *float64
	switch string(op) {
	case "Tc":
		to = &in.char
	case "Tw":
		to = &in.word
	case "TL":
		to = &in.leading
	case "Ts":
		to = &in.rise
	case "Tz":
		if nums(args, n[:1]) {
			in.horiz = n[0] / 100
		}
		return true
	case "Tr":
		if nums(args, n[:1]) {
			in.mode = int(n[0])
		}
		return true
	default:
		return false
	}
	if nums(args, n[:1]) {
		*to = n[0]
	}
	return true
}

// move goes to the start of another line.
func (in *interpreter) move(x, y float64) {
	in.line = geom.Matrix{1, 0, 0, 1, x, y}.Mul(in.line)
	in.text = in.line
}

func (in *interpreter) showLast(args []operand) {
	if len(args) > 0 && args[len(args)-1].kind == tokString {
		in.show(args[len(args)-1].b)
	}
}

func (in *interpreter) showArray(args []operand) {
	if len(args) == 0 {
		return
	}
	for _, item := range args[len(args)-1].items {
		switch item.kind {
		case tokString:
			in.show(item.b)
		case tokNumber:
			if in.font != nil && in.font.vertical {
				in.advance(0, -item.num/1000*in.size)
			} else {
				in.advance(-item.num/1000*in.size*in.horiz, 0)
			}
		}
	}
}

func (in *interpreter) advance(x, y float64) {
	in.text[4] += x*in.text[0] + y*in.text[2]
	in.text[5] += x*in.text[1] + y*in.text[3]
}

// glyphKey finds strings that are printed twice in the same place, which is
// how some programs make bold.
type glyphKey struct {
	font *Font
	x, y int32  // in whole points
	text uint64 // a hash of the codes
}

// show shows one string.
func (in *interpreter) show(b []byte) {
	f := in.font
	if f == nil || len(b) == 0 {
		return
	}
	p := in.page
	m := geom.Matrix{in.size * in.horiz, 0, 0, in.size, 0, in.rise}.Mul(in.text).Mul(in.ctm)
	hidden := in.overprinted(f, b, m)
	dir := in.text.Mul(in.ctm)
	style := paper.Glyph{
		Size: geom.Hundredth(math.Abs(in.size*f.scale) * math.Hypot(dir[2], dir[3])), Font: in.fontIndex(f),
		Angle: geom.Angle(m[0], m[1]), Bold: f.Bold, Italic: f.Italic, Invisible: in.mode == 3 || in.mode == 7,
	}
	if f.vertical {
		style.Angle = geom.Angle(-m[2], -m[3])
	}
	burn(&in.doc.fuel.glyphs, len(b), fuelGlyphs, "glyphs")
	for len(b) > 0 {
		code, n := f.next(b)
		g := f.glyph(code)
		if !hidden && len(p.Glyphs) < maxPageGlyphs {
			out := style
			out.Text, out.Repaired = g.text, g.repaired
			if out.Text == "" {
				out.Text = unknown // printed, but the file does not say what it is
			}
			out.Origin = paper.Point{X: geom.Hundredth(m[4]), Y: geom.Hundredth(m[5])}
			out.Box = m.Box(0, geom.Descent*f.scale, g.width, geom.Ascent*f.scale)
			out.Invisible = out.Invisible || !in.shows(out.Box)
			p.Glyphs = append(p.Glyphs, out)
			p.Marks = append(p.Marks, Mark{Font: f, Code: code, Way: g.way})
		}
		space := in.char
		if n == 1 && b[0] == ' ' {
			space += in.word
		}
		x, y := (g.width*in.size+space)*in.horiz, 0.0
		if f.vertical {
			x, y = 0, -in.size+space
		}
		in.advance(x, y)
		m[4] += x*dir[0] + y*dir[2]
		m[5] += x*dir[1] + y*dir[3]
		b = b[n:]
	}
}

// overprinted reports whether this string already stands here.
func (in *interpreter) overprinted(f *Font, b []byte, m geom.Matrix) bool {
	if len(b) == 1 && b[0] == ' ' {
		return false
	}
	x, y := geom.Hundredth(m[4])/100, geom.Hundredth(m[5])/100
	key := glyphKey{font: f, x: x, y: y, text: hash(b)}
	if in.overlaid[key] {
		return true
	}
	in.overlaid[key] = true
	if _, n := f.next(b); n == len(b) { // two narrow letters of small print may stand in neighbouring points
		return false
	}
	for _, dx := range [2]int32{-1, 1} {
		key.x = x + dx
		if in.overlaid[key] {
			return true
		}
	}
	return false
}

// hash is FNV-1a.
func hash(b []byte) uint64 {
	h := uint64(14695981039346656037)
	for _, c := range b {
		h = (h ^ uint64(c)) * 1099511628211
	}
	return h
}

func (in *interpreter) fontIndex(f *Font) int32 {
	k, ok := in.fontIdx[f]
	if !ok {
		k = int32(len(in.page.Fonts))
		in.fontIdx[f] = k
		in.page.Fonts = append(in.page.Fonts, f.Name)
	}
	return k
}

// beginMarked begins marked content that may carry the text it stands for.
func (in *interpreter) beginMarked(args []operand) {
	if len(args) < 2 {
		in.actual.begin(in.page, "", false)
		return
	}
	props := args[len(args)-1]
	switch props.kind {
	case tokDictOpen:
		for i := 0; i+1 < len(props.items); i += 2 {
			if string(props.items[i].b) == "ActualText" && props.items[i+1].kind == tokString {
				in.actual.begin(in.page, textString(props.items[i+1].b), true)
				return
			}
		}
	case tokName:
		if v := in.doc.key(in.resource("Properties", string(props.b)), "ActualText"); v.Kind() == lib.String {
			in.actual.begin(in.page, textString([]byte(v.RawString())), true)
			return
		}
	}
	in.actual.begin(in.page, "", false)
}

// textString decodes a PDF text string: UTF-16 or UTF-8 with a mark, else
// bytes, of which only the plain ones are taken.
func textString(b []byte) string {
	if len(b) >= 2 && b[0] == 0xFE && b[1] == 0xFF {
		return utf16be(b[2:])
	}
	if len(b) >= 3 && b[0] == 0xEF && b[1] == 0xBB && b[2] == 0xBF && utf8.Valid(b[3:]) {
		return string(b[3:])
	}
	out := make([]rune, 0, len(b))
	for _, c := range b {
		out = append(out, winAnsi(c))
	}
	return string(out)
}
