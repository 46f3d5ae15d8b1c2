package glyphs

import (
	"bytes"

	lib "github.com/ledongthuc/pdf"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/geom"
	"halfspan/extract/pdf/lines"
)

// operand is one value before an operator.
type operand struct {
	kind  tokKind
	num   float64
	b     []byte
	items []operand // of an array, or of a dictionary: key, value, key, value
}

// state is the graphics state, as far as text and lines need it.
type state struct {
	ctm                     geom.Matrix
	font                    *Font
	size, char, word, horiz float64 // horiz: horizontal scaling, 1 is plain
	leading, rise           float64
	mode                    int       // text rendering mode
	clip                    paper.Box // nothing shows outside it
}

// form is a form XObject, read once per paper.
type form struct {
	content   []byte
	resources *dict // nil: those of the page
	matrix    geom.Matrix
	box       *[4]float64 // what it shows, in its own space; nil: all
	image     bool
	short     bool
	running   bool // a form that shows itself is not run again
}

// interpreter runs the content of one page.
type interpreter struct {
	doc   *Document
	page  *Page
	home  *dict // the page's resources
	res   *dict // the present ones
	fonts *dict // of res
	xobj  *dict

	state
	saved      []state
	text, line geom.Matrix // text matrix, text line matrix

	operands []operand
	items    []operand // of the present operator's arrays, reused
	path     lines.Finder
	pending  bool      // the path has segments
	outline  paper.Box // around the path
	clipping bool      // the path will narrow the clip
	fontIdx  map[*Font]int32
	actual   actualText
	overlaid map[glyphKey]bool
	depth    int // of form XObjects
}

func newInterpreter(d *Document, p *Page) *interpreter {
	return &interpreter{
		doc: d, page: p, state: state{ctm: geom.Identity, horiz: 1, clip: p.Page.Box},
		text: geom.Identity, line: geom.Identity,
		fontIdx: map[*Font]int32{}, overlaid: map[glyphKey]bool{},
	}
}

// finish ends the page.
func (in *interpreter) finish() { in.actual.flush(in.page) }

// use makes res the present resources and gives a function that goes back.
func (in *interpreter) use(res *dict) (back func()) {
	old, fonts, xobj := in.res, in.fonts, in.xobj
	if in.home == nil {
		in.home = res
	}
	in.res = res
	in.fonts = res.sub("Font")
	in.xobj = res.sub("XObject")
	return func() { in.res, in.fonts, in.xobj = old, fonts, xobj }
}

// resource looks up a named resource: the present ones first, then the page's,
// as viewers do.
func (in *interpreter) resource(kind, name string) lib.Value {
	v := in.doc.key(in.res.key(kind), name)
	if v.IsNull() && in.home != in.res {
		v = in.doc.key(in.home.key(kind), name)
	}
	return v
}

// fontNamed gives a font of the resources. Text in a font that is not there is
// printed all the same, in a standard one.
func (in *interpreter) fontNamed(name string) *Font {
	if f := in.doc.fontNamed(in.fonts, name); f != nil {
		return f
	}
	if in.home != in.res {
		if f := in.doc.fontNamed(in.home.sub("Font"), name); f != nil {
			return f
		}
	}
	return in.doc.standIn()
}

// run runs a content stream.
func (in *interpreter) run(content []byte, res *dict) {
	defer in.use(res)()
	burn(&in.doc.fuel.content, len(content), fuelContent, "content")
	l := &lexer{b: content}
	base := len(in.saved)
	first := len(in.operands)
	for {
		t := l.next()
		if t.kind == tokEOF {
			break
		}
		if t.kind != tokWord {
			if len(in.operands) == first {
				in.items = in.items[:0]
			}
			if v, ok := in.operand(l, t, 0); ok && len(in.operands)-first < maxOperands {
				in.operands = append(in.operands, v)
			}
			continue
		}
		burn(&in.doc.fuel.operators, 1, fuelOperators, "operators")
		if string(t.b) == "BI" {
			in.inlineImage(l)
		} else {
			in.operator(t.b, in.operands[first:], base)
		}
		in.operands = in.operands[:first]
	}
	in.operands = in.operands[:first]
	if len(in.saved) > base { // unbalanced q: the state at the start returns
		in.state = in.saved[base]
		in.saved = in.saved[:base]
	}
}

// operand reads one value that begins with t.
func (in *interpreter) operand(l *lexer, t token, depth int) (operand, bool) {
	v := operand{kind: t.kind, num: t.num, b: t.b}
	var end tokKind
	switch t.kind {
	case tokArrayOpen:
		end = tokArrayClose
	case tokDictOpen:
		end = tokDictClose
	case tokArrayClose, tokDictClose:
		return v, false
	default:
		return v, true
	}
	// The items of an outermost array lie behind each other in one store.
	var nested []operand
	store := &nested
	if depth == 0 {
		store = &in.items
	}
	start := len(*store)
	for {
		t := l.next()
		if t.kind == end || t.kind == tokEOF {
			v.items = (*store)[start:len(*store):len(*store)]
			return v, true
		}
		burn(&in.doc.fuel.operators, 1, fuelOperators, "operands")
		if depth >= maxNesting {
			continue
		}
		if item, ok := in.operand(l, t, depth+1); ok {
			*store = append(*store, item)
		}
	}
}

// nums copies the last len(to) operands, which must be numbers.
func nums(args []operand, to []float64) bool {
	if len(args) < len(to) {
		return false
	}
	for i, a := range args[len(args)-len(to):] {
		if a.kind != tokNumber {
			return false
		}
		to[i] = a.num
	}
	return true
}

func (in *interpreter) operator(op []byte, args []operand, base int) {
	var n [6]float64
	switch string(op) {
	case "q":
		if len(in.saved)-base < maxStack {
			in.saved = append(in.saved, in.state)
		}
	case "Q":
		if k := len(in.saved); k > base {
			in.state = in.saved[k-1]
			in.saved = in.saved[:k-1]
		}
	case "cm":
		if nums(args, n[:6]) {
			in.ctm = geom.Matrix(n).Mul(in.ctm)
		}
	case "Do":
		if len(args) > 0 && args[len(args)-1].kind == tokName {
			in.xobject(string(args[len(args)-1].b))
		}
	case "BDC":
		in.beginMarked(args)
	case "BMC":
		in.actual.begin(in.page, "", false)
	case "EMC":
		in.actual.end(in.page)
	case "gs":
		in.extState(args)
	default:
		if !in.textOperator(op, args, n[:]) {
			in.pathOperator(op, args, n[:])
		}
	}
}

// pathOperator runs the operators that build and paint paths.
func (in *interpreter) pathOperator(op []byte, args []operand, n []float64) {
	switch string(op) {
	case "m":
		if nums(args, n[:2]) {
			in.path.Move(in.reach(n[0], n[1]))
		}
	case "l":
		if nums(args, n[:2]) {
			in.path.Line(in.reach(n[0], n[1]))
		}
	case "c":
		if nums(args, n[:6]) {
			in.reach(n[0], n[1])
			in.reach(n[2], n[3])
			in.path.Curve(in.reach(n[4], n[5]))
		}
	case "v", "y":
		if nums(args, n[:4]) {
			in.reach(n[0], n[1])
			in.path.Curve(in.reach(n[2], n[3]))
		}
	case "h":
		in.path.Close()
	case "re":
		if nums(args, n[:4]) {
			x, y, w, h := n[0], n[1], n[2], n[3]
			in.path.Move(in.reach(x, y))
			in.path.Line(in.reach(x+w, y))
			in.path.Line(in.reach(x+w, y+h))
			in.path.Line(in.reach(x, y+h))
			in.path.Close()
		}
	case "W", "W*":
		in.clipping = true
	case "S":
		in.paint(false, true)
	case "s":
		in.path.Close()
		in.paint(false, true)
	case "f", "F", "f*":
		in.paint(true, false)
	case "B", "B*":
		in.paint(true, true)
	case "b", "b*":
		in.path.Close()
		in.paint(true, true)
	case "n":
		in.paint(false, false)
	}
}

// reach transforms a point of the path and notes how far the path reaches.
func (in *interpreter) reach(x, y float64) paper.Point {
	p := in.ctm.Point(x, y)
	if !in.pending {
		in.outline = paper.Box{X0: p.X, Y0: p.Y, X1: p.X, Y1: p.Y}
	}
	o := &in.outline
	o.X0, o.Y0, o.X1, o.Y1 = min(o.X0, p.X), min(o.Y0, p.Y), max(o.X1, p.X), max(o.Y1, p.Y)
	in.pending = true
	return p
}

// paint ends the path and keeps its lines. A path that clips narrows the clip
// to the box around it, which is never too narrow.
func (in *interpreter) paint(fill, stroke bool) {
	if in.clipping {
		if !in.pending {
			in.outline = paper.Box{}
		}
		in.clip = intersect(in.clip, in.outline)
	}
	if in.pending && (fill || stroke) && len(in.page.Rules) < maxRules {
		for _, r := range in.path.Rules(fill, stroke) {
			if in.shows(r) {
				in.page.Rules = append(in.page.Rules, r)
			}
		}
	}
	in.path.Reset()
	in.pending, in.clipping = false, false
}

// intersect gives the common part of two boxes; where there is none a box
// without area.
func intersect(a, b paper.Box) paper.Box {
	x0, y0 := max(a.X0, b.X0), max(a.Y0, b.Y0)
	return paper.Box{X0: x0, Y0: y0, X1: max(x0, min(a.X1, b.X1)), Y1: max(y0, min(a.Y1, b.Y1))}
}

// shows reports whether the middle of b lies inside the clip, give or take a
// point.
func (in *interpreter) shows(b paper.Box) bool {
	const slack = 100
	x, y, c := b.X0+(b.X1-b.X0)/2, b.Y0+(b.Y1-b.Y0)/2, &in.clip
	return x >= c.X0-slack && x <= c.X1+slack && y >= c.Y0-slack && y <= c.Y1+slack
}

// extState takes the font that a graphics state dictionary may set.
func (in *interpreter) extState(args []operand) {
	if len(args) == 0 || args[len(args)-1].kind != tokName {
		return
	}
	gs := in.resource("ExtGState", string(args[len(args)-1].b))
	if gs.Kind() != lib.Dict {
		return
	}
	if f := in.doc.key(gs, "Font"); f.Len() == 2 {
		in.font = in.doc.font(f.Index(0))
		in.size = f.Index(1).Float64()
	}
}

// xobject shows a form or an image.
func (in *interpreter) xobject(name string) {
	f := in.doc.form(in.xobj, name)
	if f == nil && in.home != in.res {
		f = in.doc.form(in.home.sub("XObject"), name)
	}
	if f == nil {
		return
	}
	if f.image {
		if box := in.ctm.Box(0, 0, 1, 1); in.shows(box) {
			in.page.Images = append(in.page.Images, box)
		}
		return
	}
	if in.depth >= maxForms || f.running {
		return
	}
	burn(&in.doc.fuel.forms, 1, fuelForms, "forms")
	in.page.Short = in.page.Short || f.short
	outer, text, line, res := in.state, in.text, in.line, in.res
	in.depth++
	f.running = true
	in.ctm = f.matrix.Mul(in.ctm)
	if b := f.box; b != nil {
		in.clip = intersect(in.clip, in.ctm.Box(b[0], b[1], b[2], b[3]))
	}
	if f.resources != nil {
		res = f.resources
	}
	in.run(f.content, res)
	in.depth--
	f.running = false
	in.state, in.text, in.line = outer, text, line
}

// form reads a form XObject, or notes that it is an image.
func (d *Document) form(xobj *dict, name string) *form {
	r, there := ref(0), false
	if xobj != nil {
		r, there = xobj.refs[name]
	}
	if !there {
		return nil
	}
	if f, ok := d.forms[r]; ok && r != 0 {
		return f
	}
	v := xobj.key(name)
	var f *form
	switch d.key(v, "Subtype").Name() {
	case "Image":
		f = &form{image: true}
	case "Form":
		f = &form{matrix: geom.Identity, resources: d.resources(d.key(v, "Resources"))}
		f.content, f.short = d.stream(v)
		if m := d.key(v, "Matrix"); m.Len() == 6 {
			for i := range f.matrix {
				f.matrix[i] = m.Index(i).Float64()
			}
		}
		if b := d.key(v, "BBox"); b.Len() == 4 {
			f.box = &[4]float64{b.Index(0).Float64(), b.Index(1).Float64(), b.Index(2).Float64(), b.Index(3).Float64()}
		}
	}
	if f == nil || len(f.content) <= keepForm {
		d.forms[r] = f
	}
	return f
}

// inlineImage passes over an image in the stream and notes its place.
func (in *interpreter) inlineImage(l *lexer) {
	in.page.Images = append(in.page.Images, in.ctm.Box(0, 0, 1, 1))
	for {
		t := l.next()
		if t.kind == tokEOF {
			return
		}
		if t.kind == tokWord && string(t.b) == "ID" {
			break
		}
		burn(&in.doc.fuel.operators, 1, fuelOperators, "operands")
	}
	l.pos = endOfImage(l.b, min(l.pos+1, len(l.b)))
}

// endOfImage finds where the data that begin at i end: at an EI between
// spaces behind which the stream goes on in plain letters.
func endOfImage(b []byte, i int) int {
	for {
		k := bytes.Index(b[i:], []byte("EI"))
		if k < 0 {
			return len(b)
		}
		end := i + k + 2
		before := i+k == 0 || classes[b[i+k-1]] == space
		after := end == len(b) || classes[b[end]] == space
		if before && after && plain(b[end:min(end+24, len(b))]) {
			return end
		}
		i = end
	}
}

func plain(b []byte) bool {
	for _, c := range b {
		if c >= 0x7F || c < ' ' && classes[c] != space {
			return false
		}
	}
	return true
}
