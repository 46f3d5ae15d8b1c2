package jats

import (
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/source"
)

// inline is how an element inside a stretch of text is read.
type inline uint8

const (
	through inline = iota // its content counts, the element does not
	raised                // superscript
	lowered               // subscript
	bold
	italic
	newline   // an empty element that ends a line
	paragraph // its content stands on lines of its own
	float     // read after the text it stands in
	crossref
	formula
	alternative // one thing in several forms
	nothing
)

var inlines = map[string]inline{
	"sup": raised, "sub": lowered, "bold": bold, "italic": italic,
	"break": newline, "hr": newline,
	"p": paragraph, "list": paragraph, "list-item": paragraph, "def-list": paragraph, "def-item": paragraph,
	"title": paragraph, "disp-quote": paragraph, "verse-line": paragraph, "label": paragraph,
	"table-wrap": float, "fig": float, "boxed-text": float, "supplementary-material": float,
	"media": float, "fn": float, "table-wrap-group": float, "fig-group": float, "array": float,
	"xref":           crossref,
	"inline-formula": formula, "disp-formula": formula, "math": formula, "tex-math": formula, "chem-struct": nothing,
	"alternatives": alternative,
	"graphic":      nothing, "inline-graphic": nothing, "object-id": nothing, "private-char": nothing,
	"target": nothing, "x": through, "index-term": nothing, "alt-text": nothing, "long-desc": nothing,
}

// content adds what stands inside n.
func (r *reader) content(b *builder, n *node) {
	for _, k := range n.kids {
		if k.name == "" {
			b.chars(k.start, k.end)
			continue
		}
		r.element(b, k)
	}
}

func (r *reader) element(b *builder, n *node) {
	inside := func() { r.content(b, n) }
	switch inlines[n.name] {
	case through:
		inside()
	case raised:
		b.Styled(paper.Raised, inside)
	case lowered:
		b.Styled(paper.Lowered, inside)
	case bold:
		b.Styled(paper.Bold, inside)
	case italic:
		b.Styled(paper.Italic, inside)
	case newline:
		b.lineBreak()
	case paragraph:
		b.lineBreak()
		inside()
		b.lineBreak()
	case float:
		b.floats = append(b.floats, n)
	case crossref:
		r.crossref(b, n)
	case formula:
		r.formula(b, n)
	case alternative:
		r.alternatives(b, n)
	case nothing:
		if n.name == "inline-graphic" || n.name == "graphic" || n.name == "private-char" {
			r.pictures++
		}
	}
}

// markRefs are the kinds of cross-reference that are printed as a raised mark.
var markRefs = map[string]bool{"table-fn": true, "fn": true, "author-notes": true}

// citationNumber is what the mark of a numbered citation looks like.
var citationNumber = pattern.MustCompile(`^[\[(]?(?:[Rr]efs?\.?\s*)?[SRs]?[0-9]{1,3}[a-z]?(?:\s*[,;–—‐‑−-]\s*[SRs]?[0-9]{1,3}[a-z]?)*[\])]?[,;.]?$`)

func (r *reader) crossref(b *builder, n *node) {
	kind := n.get("ref-type")
	if kind == "bibr" || kind == "" && r.refs[n.get("rid")] {
		inner := r.text(n)
		if citationNumber.MatchString(strings.TrimSpace(inner.S)) {
			b.Insert(citation)
			b.cites = true
			return
		}
	}
	if markRefs[kind] {
		b.Styled(paper.Raised, func() { r.content(b, n) })
		return
	}
	r.content(b, n)
}

// alternatives takes the form that can be read as text, a picture last.
func (r *reader) alternatives(b *builder, n *node) {
	for _, name := range []string{"math", "tex-math", "textual-form"} {
		if k := n.child(name); k != nil {
			before := len(b.S)
			r.element(b, k)
			if len(b.S) > before {
				return
			}
		}
	}
	for _, k := range n.kids {
		if k.name != "" && k.name != "math" && k.name != "tex-math" && k.name != "textual-form" {
			r.element(b, k)
			return
		}
	}
}

var (
	cite         = citation
	citeCluster  = cite + `(?:[\s\x{00A0}\x{2009}]*(?:[,;–—‐‑−-]|and|&|to)?[\s\x{00A0}\x{2009}]*` + cite + `)*`
	citeBrackets = pattern.MustCompile(`[\s\x{00A0}\x{2009}]*(?:\[\s*(?:see\s+)?` + citeCluster + `\s*[.,;]?\s*\]|\(\s*(?:see\s+)?` + citeCluster + `\s*\))|` + citeCluster)
)

// cutCitations removes the marks of numbered citations with the brackets and
// separators that hold nothing else, so that "1.2 kg [4,5]" ends in its unit.
func cutCitations(t paper.TextRun) paper.TextRun {
	var cuts [][2]int
	for _, m := range citeBrackets.FindAllStringIndex(t.S, -1) {
		rest := strings.TrimLeft(t.S[m[1]:], " ")
		if rest == "" || strings.ContainsAny(rest[:1], ".,;:)]") || len(rest) < len(t.S)-m[1] {
			for m[0] > 0 && t.S[m[0]-1] == ' ' {
				m[0]--
			}
		}
		cuts = append(cuts, [2]int{m[0], m[1]})
	}
	return source.Drop(t, cuts)
}

// text reads the content of n as one stretch of running text.
func (r *reader) text(n *node) paper.TextRun {
	t, _ := r.textAndFloats(n)
	return t
}

func (r *reader) textAndFloats(n *node) (paper.TextRun, []*node) {
	b := r.builder()
	if n != nil {
		r.content(b, n)
	}
	return b.run(), b.floats
}

func (r *reader) builder() *builder {
	return &builder{Builder: source.Builder{Src: r.src}, known: r.known}
}
