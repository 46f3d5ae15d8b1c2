package glyphs

import (
	"fmt"

	lib "github.com/ledongthuc/pdf"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/geom"
)

// Document is one paper open for this reader. It is not safe for use by
// several goroutines at once.
type Document struct {
	fuel  fuel
	r     *lib.Reader
	pages []pageNode
	fonts map[fontKey]*Font
	forms map[ref]*form
	dicts map[ref]*dict
}

// pageNode is a page with what it inherits from the tree above it.
type pageNode struct {
	v         lib.Value
	resources lib.Value
	media     lib.Value
	crop      lib.Value
	rotate    lib.Value
}

// Open loads a PDF from its content, which must not change afterwards. Every
// error is an [*Error].
func Open(content []byte) (d *Document, err error) {
	defer caught("the file's structure", &err)
	ready, err := prepare(content)
	if err != nil {
		return nil, err
	}
	d = &Document{fonts: map[fontKey]*Font{}, forms: map[ref]*form{}, dicts: map[ref]*dict{}}
	d.r, err = lib.NewReader(&file{content: ready, fuel: &d.fuel}, int64(len(ready)))
	if err != nil {
		return nil, &Error{What: "the file's structure", Err: err}
	}
	root := d.key(d.r.Trailer(), "Root")
	tree := d.key(root, "Pages")
	if tree.Kind() != lib.Dict {
		return nil, &Error{What: "the page tree is missing"}
	}
	d.collect(tree, pageNode{}, 0)
	if len(d.pages) == 0 {
		return nil, &Error{What: "the page tree is empty"}
	}
	return d, nil
}

// collect walks the page tree.
func (d *Document) collect(node lib.Value, above pageNode, depth int) {
	if depth > maxTree || len(d.pages) > maxPages {
		panic(&Error{What: "the page tree is endless", Err: ErrFuel})
	}
	above.v = node
	for _, in := range []struct {
		name string
		to   *lib.Value
	}{{"Resources", &above.resources}, {"MediaBox", &above.media}, {"CropBox", &above.crop}, {"Rotate", &above.rotate}} {
		if v := d.key(node, in.name); !v.IsNull() {
			*in.to = v
		}
	}
	kids := d.key(node, "Kids")
	if kids.Kind() != lib.Array {
		if node.Kind() == lib.Dict {
			d.pages = append(d.pages, above)
		}
		return
	}
	for i := range kids.Len() {
		burn(&d.fuel.objects, 1, fuelObjects, "objects")
		d.collect(kids.Index(i), above, depth+1)
	}
}

// NumPage is the number of pages.
func (d *Document) NumPage() int { return len(d.pages) }

// Page is one page as this reader sees it.
type Page struct {
	paper.GlyphPage
	Marks []Mark // one per glyph
	// Short is set where a stream broke off and the page may lack content.
	Short bool
}

// Mark says by which font and code a glyph was shown, and how that was read.
type Mark struct {
	Font *Font
	Code uint32
	Way  Way
}

// Page reads one page, 1-based. Every error is an [*Error].
func (d *Document) Page(number int) (p *Page, err error) {
	if number < 1 || number > len(d.pages) {
		return nil, &Error{What: fmt.Sprintf("page %d is not in the page tree", number)}
	}
	defer caught("its content or a font", &err)
	node := d.pages[number-1]
	p = &Page{}
	p.GlyphPage.Page = paper.Page{Number: number, Reader: "own", Box: d.visible(node), Rotate: rotation(node.rotate)}
	content, short := d.content(node.v)
	p.Short = short
	likely := min(len(content)/6+64, maxPageGlyphs/8)
	p.Glyphs, p.Marks = make([]paper.Glyph, 0, likely), make([]Mark, 0, likely)
	in := newInterpreter(d, p)
	in.run(content, d.resources(node.resources))
	in.finish()
	return p, nil
}

// content joins the parts of a page's content with a space: a token never
// reaches across parts, an array may.
func (d *Document) content(page lib.Value) (b []byte, short bool) {
	c := d.key(page, "Contents")
	if c.Kind() != lib.Array {
		if c.IsNull() {
			return nil, false
		}
		return d.stream(c)
	}
	for i := range c.Len() {
		part, cut := d.stream(c.Index(i))
		b, short = append(append(b, part...), '\n'), short || cut
	}
	return b, short
}

// resources gives a resource dictionary with a cache behind it, the same one
// for all pages that share it.
func (d *Document) resources(v lib.Value) *dict {
	if v.Kind() != lib.Dict {
		return nil
	}
	r := refOf(v)
	got, ok := d.dicts[r]
	if !ok || got.v.String() != v.String() {
		got = d.dict(v)
		d.dicts[r] = got
	}
	return got
}

// visible is the crop box within the media box.
func (d *Document) visible(node pageNode) paper.Box {
	media := rectangle(node.media)
	if media.IsZero() {
		media = paper.Box{X1: 61200, Y1: 79200} // US letter, the format's default
	}
	crop := rectangle(node.crop)
	if crop.IsZero() || !crop.Overlaps(media) {
		return media
	}
	return paper.Box{X0: max(crop.X0, media.X0), Y0: max(crop.Y0, media.Y0), X1: min(crop.X1, media.X1), Y1: min(crop.Y1, media.Y1)}
}

func rectangle(v lib.Value) paper.Box {
	if v.Len() != 4 {
		return paper.Box{}
	}
	return geom.Box(v.Index(0).Float64(), v.Index(1).Float64(), v.Index(2).Float64(), v.Index(3).Float64())
}

func rotation(v lib.Value) int {
	turn := int(v.Int64()) % 360
	if turn < 0 {
		turn += 360
	}
	return turn / 90 * 90
}
