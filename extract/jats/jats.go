package jats

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"fmt"

	"halfspan/extract/paper"
	"halfspan/extract/source"
)

// reader holds one file while it is read.
type reader struct {
	path      string
	src       *source.Text
	known     map[string]string // meaning of named entities
	refs      map[string]bool   // ids of the entries of the reference list
	doc       *paper.Document
	pictures  int              // symbols and formulas given as pictures only
	cellNotes []paper.FootNote // notes written inside the cells of the table being read

	zone    paper.Zone
	section string
	level   int
}

// Is reports whether the content looks like article XML: an <article> element
// near its start, in whatever encoding.
func Is(content []byte) bool {
	const look = 64 << 10
	head := bytes.ReplaceAll(content[:min(len(content), look)], []byte{0}, nil)
	head = bytes.TrimLeft(head, "\xEF\xBB\xBF\xFF\xFE \t\r\n")
	return bytes.HasPrefix(head, []byte("<")) && (bytes.Contains(head, []byte("<article ")) ||
		bytes.Contains(head, []byte("<article>")) || bytes.Contains(head, []byte(":article ")))
}

// isWebPage tells HTML, which publishers' sites hand out under any name.
func isWebPage(content []byte) bool {
	head := bytes.ToLower(bytes.TrimLeft(content[:min(len(content), 1024)], "\xEF\xBB\xBF \t\r\n"))
	return bytes.HasPrefix(head, []byte("<!doctype html")) || bytes.HasPrefix(head, []byte("<html")) ||
		bytes.HasPrefix(head, []byte("<?xml")) && (bytes.Contains(head, []byte("<!doctype html")) || bytes.Contains(head, []byte("<html")))
}

// Read turns the article XML in content, the file at path, into a Document:
// title, abstracts, sections with their zones, lists, boxes, captions,
// footnotes, and tables wherever they stand. References are kept as blocks of
// their own kind. Marks of numbered citations, which look like values, are cut
// out of the text. Every byte of a text is tied to its byte offset in the file.
//
// An error names the line of the file where the XML breaks off or is refused.
// What is a picture only is named in Document.Problems.
func Read(path string, content []byte) (*paper.Document, error) {
	if len(content) > maxBytes {
		return nil, fmt.Errorf("%s: %d MB of XML; files above %d MB are not read", path, len(content)>>20, maxBytes>>20)
	}
	if isWebPage(content) {
		return nil, fmt.Errorf("%s: not article XML but a web page (HTML), whatever its name; get the article XML or the PDF", path)
	}
	src := decode(content)
	r := &reader{path: path, src: src, known: entities(src.B), refs: map[string]bool{}}
	root, err := parse(path, src, r.known)
	if err != nil {
		return nil, err
	}
	article := root.find("article")
	if article == nil {
		return nil, fmt.Errorf("%s: not article XML: it holds no <article> element, so it is no article in JATS form; get the article XML or the PDF", path)
	}
	sum := sha256.Sum256(content)
	r.doc = &paper.Document{Path: path, SHA256: hex.EncodeToString(sum[:]), Format: paper.JATS}
	r.collectRefs(article)
	r.front(article.child("front"))
	r.body(article.child("body"))
	r.enter(paper.Elsewhere, "", func() { r.children(article.child("floats-group")) })
	r.back(article.child("back"))
	for _, k := range article.kids {
		if k.name == "sub-article" || k.name == "response" {
			r.furniture(k)
		}
	}
	r.closingProblems()
	return r.doc, nil
}

func (r *reader) collectRefs(article *node) {
	article.each(func(n *node) bool {
		if n.name == "ref" && n.get("id") != "" {
			r.refs[n.get("id")] = true
		}
		return true
	})
}

func (r *reader) closingProblems() {
	if r.src.Bad > 0 {
		r.problem("bad-characters", fmt.Sprintf("%d characters are not valid in the file's encoding (%s) and were read as the replacement character", r.src.Bad, r.src.Encoding), true)
	}
	if r.src.Guessed {
		r.problem("encoding-guessed", "the file is not in the encoding it declares; it was read as "+r.src.Encoding, false)
	}
	if r.pictures > 0 {
		r.problem("picture-symbol", fmt.Sprintf("%d symbols or formulas in the text are pictures and could not be read", r.pictures), false)
	}
	if len(r.doc.Blocks) == 0 {
		r.problem("no-text", "the article XML holds no text", true)
	}
}

func (r *reader) problem(kind, text string, lost bool) {
	r.doc.Problems = append(r.doc.Problems, paper.Problem{Kind: kind, Text: text, Lost: lost})
}

// front reads the title and the abstracts; who wrote the paper is not kept.
func (r *reader) front(front *node) {
	meta := front.child("article-meta")
	if meta == nil {
		return
	}
	if t := r.text(meta.child("title-group").child("article-title")); t.S != "" {
		r.doc.Title = t.S
		r.emit(paper.Heading, 1, t)
	}
	for _, k := range meta.kids {
		switch k.name {
		case "abstract":
			r.abstract(k)
		case "trans-abstract":
			r.furniture(k)
		}
	}
}

func (r *reader) abstract(n *node) {
	r.enter(paper.Abstract, "Abstract", func() {
		if n.child("title") == nil {
			r.emit(paper.Heading, 1, paper.TextRun{S: "Abstract"})
		}
		r.children(n)
	})
}

func (r *reader) body(body *node) {
	r.enter(paper.Elsewhere, "", func() { r.children(body) })
}

func (r *reader) back(back *node) {
	r.enter(paper.BackMatter, "", func() { r.children(back) })
}

// enter reads a part of the paper in a zone of its own and comes back.
func (r *reader) enter(z paper.Zone, section string, f func()) {
	zone, old, level := r.zone, r.section, r.level
	r.zone, r.section, r.level = z, section, level+1
	f()
	r.zone, r.section, r.level = zone, old, level
}

// children reads the elements in n as blocks, in order.
func (r *reader) children(n *node) {
	if n == nil {
		return
	}
	for _, k := range n.kids {
		r.block(k)
	}
}

// block reads one element that stands between paragraphs.
func (r *reader) block(n *node) {
	switch n.name {
	case "", "ref", "label", "object-id", "permissions", "graphic", "alt-text", "alternatives", "kwd-group", "sec-meta":
	case "title":
		r.emit(paper.Heading, r.level, r.text(n))
	case "sec", "ack", "app", "notes", "glossary", "app-group", "bio":
		r.sec(n)
	case "ref-list":
		r.refList(n)
	case "list", "def-list":
		r.list(n)
	case "table-wrap", "array":
		r.tableWrap(n)
	case "fig":
		r.figure(n)
	case "boxed-text":
		r.box(n)
	case "fn-group", "fig-group", "table-wrap-group", "floats-group":
		r.children(n)
	case "fn":
		r.emit(paper.Note, 0, r.text(n))
	case "supplementary-material", "media":
		r.labelled(n, paper.Paragraph)
	default:
		r.paragraph(n, paper.Paragraph)
	}
}

// zoneTypes are the values of sec-type, or parts of them, that tell a zone.
var zoneTypes = map[string]paper.Zone{
	"intro": paper.Introduction, "introduction": paper.Introduction, "background": paper.Introduction,
	"methods": paper.Methods, "materials": paper.Methods, "subjects": paper.Methods, "patients": paper.Methods,
	"cases": paper.Methods, "results": paper.Results, "discussion": paper.Discussion,
	"conclusions": paper.Discussion, "conclusion": paper.Discussion, "supplementary-material": paper.BackMatter,
}

func (r *reader) sec(n *node) {
	title := r.text(n.child("title"))
	zone, section := r.zone, r.section
	if title.S != "" {
		section = title.S
	}
	if zone != paper.Abstract {
		zone = zoneOf(n, title.S, zone)
	}
	label := n.child("label")
	r.enter(zone, section, func() {
		for _, k := range n.kids {
			if k.name == "title" {
				r.emit(paper.Heading, r.level-1, source.Join(r.text(label), title))
				continue
			}
			r.block(k)
		}
	})
}

// zoneOf tells the zone of a section: by a title that names one, by its
// sec-type, by a word in its title where no section around it has a zone.
func zoneOf(n *node, title string, outer paper.Zone) paper.Zone {
	byTitle, sure := paper.ZoneOf(title)
	if sure && byTitle != paper.Abstract {
		return byTitle
	}
	var found []paper.Zone
	for _, part := range bytes.FieldsFunc([]byte(n.get("sec-type")), func(c rune) bool { return c == '|' || c == ' ' }) {
		if z, ok := zoneTypes[string(part)]; ok {
			found = append(found, z)
		}
	}
	switch {
	case len(found) > 0 && outer == paper.Elsewhere:
		for _, z := range found {
			if z == paper.Results { // "results|discussion": the results are what is looked for
				return z
			}
		}
		return found[0]
	case outer == paper.Elsewhere && byTitle != paper.Elsewhere && byTitle != paper.Abstract:
		return byTitle
	}
	return outer
}

// emit adds a block, none without text.
func (r *reader) emit(kind paper.BlockKind, level int, t paper.TextRun) {
	if t.S == "" {
		return
	}
	r.doc.Blocks = append(r.doc.Blocks, paper.Block{Kind: kind, Zone: r.zone, Section: r.section, Level: level, Text: t})
}

// paragraph reads n as text; lists, tables and figures that stand in it follow
// it, as they do on paper.
func (r *reader) paragraph(n *node, kind paper.BlockKind) {
	part := &node{name: n.name, attr: n.attr}
	var floats []*node
	finish := func() {
		t, f := r.textAndFloats(part)
		r.emit(kind, 0, t)
		floats = append(floats, f...)
		part.kids = nil
	}
	for _, k := range n.kids {
		if k.name == "list" || k.name == "def-list" || k.name == "p" || k.name == "sec" {
			finish()
			r.block(k)
			continue
		}
		part.kids = append(part.kids, k)
	}
	finish()
	for _, f := range floats {
		r.block(f)
	}
}

// list reads each item as a paragraph that begins with its label.
func (r *reader) list(n *node) {
	for _, item := range n.kids {
		switch item.name {
		case "list-item":
			label := item.child("label")
			for _, k := range item.kids {
				if k.name == "p" && label != nil {
					t, floats := r.textAndFloats(k)
					r.emit(paper.Paragraph, 0, source.Join(r.text(label), t))
					label = nil
					for _, f := range floats {
						r.block(f)
					}
					continue
				}
				r.block(k)
			}
		case "def-item":
			t, floats := r.textAndFloats(item.child("def"))
			r.emit(paper.Paragraph, 0, source.Join(r.text(item.child("term")), t))
			for _, f := range floats {
				r.block(f)
			}
		case "title":
			r.emit(paper.Heading, r.level, r.text(item))
		}
	}
}

func (r *reader) figure(n *node) { r.labelled(n, paper.Caption) }

// labelled reads the label and caption of a figure or an additional file.
func (r *reader) labelled(n *node, kind paper.BlockKind) {
	t, floats := r.caption(n)
	r.emit(kind, 0, source.Join(r.text(n.child("label")), t))
	for _, k := range n.kids {
		if k.name == "p" || k.name == "media" || k.name == "table-wrap" {
			r.block(k)
		}
	}
	for _, f := range floats {
		r.block(f)
	}
}

// caption joins title and paragraphs of n's caption.
func (r *reader) caption(n *node) (paper.TextRun, []*node) {
	var all paper.TextRun
	var floats []*node
	if c := n.child("caption"); c != nil {
		for _, k := range c.kids {
			if k.name == "" {
				continue
			}
			t, f := r.textAndFloats(k)
			all = source.Join(all, t)
			floats = append(floats, f...)
		}
	}
	return all, floats
}

// box reads a text box: its title as a heading, its paragraphs as notes.
func (r *reader) box(n *node) {
	title, _ := r.caption(n)
	r.emit(paper.Heading, r.level, source.Join(r.text(n.child("label")), title))
	for _, k := range n.kids {
		switch k.name {
		case "p":
			r.paragraph(k, paper.Note)
		case "caption":
		default:
			r.block(k)
		}
	}
}

func (r *reader) refList(n *node) {
	r.enter(paper.References, "References", func() {
		for _, k := range n.kids {
			switch k.name {
			case "title":
				r.emit(paper.Heading, 1, r.text(k))
			case "ref":
				r.emit(paper.Reference, 0, r.spaced(k))
			case "ref-list":
				r.refList(k)
			}
		}
	})
}

// spaced reads n with a space between elements: the parts of a reference are
// marked up without the punctuation that is printed between them.
func (r *reader) spaced(n *node) paper.TextRun {
	b := r.builder()
	var walk func(*node)
	walk = func(n *node) {
		for _, k := range n.kids {
			if k.name == "" {
				b.chars(k.start, k.end)
				continue
			}
			if k.name != "italic" && k.name != "bold" && k.name != "sup" && k.name != "sub" {
				b.Word()
			}
			walk(k)
		}
	}
	walk(n)
	return b.run()
}

// furniture keeps text that is not searched: translations, letters, reviews.
func (r *reader) furniture(n *node) {
	r.enter(paper.BackMatter, "", func() {
		n.each(func(k *node) bool {
			switch k.name {
			case "p", "title", "article-title":
				r.emit(paper.Furniture, 0, r.text(k))
				return false
			case "ref-list", "journal-meta":
				return false
			}
			return true
		})
	})
}
