package jats

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"html"
	"io"
	"strings"
	"unicode/utf8"

	"golang.org/x/net/html/charset"
	"golang.org/x/text/encoding/charmap"

	"halfspan/extract/pattern"
	"halfspan/extract/source"
)

// Limits of what is read; a paper is far below them.
const (
	maxBytes = 64 << 20
	maxNodes = 2_000_000
	maxDepth = 256
)

// node is an element, or a stretch of character data where name is empty.
type node struct {
	name       string // local name
	attr       []xml.Attr
	kids       []*node
	start, end int // of character data, in the decoded file
}

func (n *node) get(name string) string {
	for _, a := range n.attr {
		if a.Name.Local == name {
			return a.Value
		}
	}
	return ""
}

// child is the first child element of that name, nil without one.
func (n *node) child(name string) *node {
	if n == nil {
		return nil
	}
	for _, k := range n.kids {
		if k.name == name {
			return k
		}
	}
	return nil
}

// find is the first element of one of the names below n, in document order.
func (n *node) find(names ...string) *node {
	if n == nil {
		return nil
	}
	for _, k := range n.kids {
		for _, name := range names {
			if k.name == name {
				return k
			}
		}
		if f := k.find(names...); f != nil {
			return f
		}
	}
	return nil
}

// each calls f for every element below n in document order; f says whether to
// look inside it.
func (n *node) each(f func(*node) bool) {
	for _, k := range n.kids {
		if k.name != "" && f(k) {
			k.each(f)
		}
	}
}

var (
	declared   = pattern.MustCompile(`^\s*<\?xml[^>]*?\sencoding\s*=\s*["']([A-Za-z0-9._:-]+)["']`)
	version11  = pattern.MustCompile(`^\s*<\?xml\s+version\s*=\s*["']1\.1["']`)
	entityName = pattern.MustCompile(`&([A-Za-z][A-Za-z0-9._-]*);`)
	entityDecl = pattern.MustCompile(`<!ENTITY\s+([A-Za-z][A-Za-z0-9._-]*)\s+(?:"([^"]*)"|'([^']*)')\s*>`)
)

// decode brings the file into UTF-8 by its byte order mark, else by its
// declared encoding, else as UTF-8; bytes that are no UTF-8 are then read as
// windows-1252.
func decode(content []byte) *source.Text {
	if enc, name, skip := source.BOM(content); enc != nil {
		if name == "UTF-8" && utf8.Valid(content[skip:]) {
			return source.UTF8(content, skip)
		}
		if name != "UTF-8" {
			return source.Decode(content, skip, enc, name)
		}
	}
	if m := declared.FindSubmatch(content[:min(len(content), 1024)]); m != nil {
		enc, name := charset.Lookup(string(m[1]))
		if enc != nil && name != "utf-8" && !strings.HasPrefix(name, "utf-16") {
			return source.Decode(content, 0, enc, name)
		}
	}
	if utf8.Valid(content) {
		return source.UTF8(content, 0)
	}
	t := source.Decode(content, 0, charmap.Windows1252, "windows-1252")
	t.Guessed = true
	return t
}

// entities gives the meaning of every named entity in the file: those that the
// file declares as plain text, else the names of HTML, which hold nearly all
// that article DTDs declare. No DTD is fetched. Entities built from other
// entities are left out, so that none can blow up; using one is an error.
func entities(b []byte) map[string]string {
	known := map[string]string{}
	for _, m := range entityName.FindAllSubmatch(b, -1) {
		name := string(m[1])
		if _, ok := known[name]; ok {
			continue
		}
		if s := html.UnescapeString("&" + name + ";"); !strings.HasPrefix(s, "&") || name == "amp" {
			known[name] = s
		}
	}
	head := b[:min(len(b), 64<<10)]
	if k := bytes.Index(head, []byte("<article")); k >= 0 {
		head = head[:k]
	}
	for _, m := range entityDecl.FindAllSubmatch(head, -1) {
		value := string(m[2]) + string(m[3])
		if strings.ContainsAny(value, "<%") || entityName.MatchString(value) {
			continue
		}
		known[string(m[1])] = html.UnescapeString(value)
	}
	return known
}

// parse makes the tree of a decoded file. The root it returns holds the
// document element.
func parse(path string, t *source.Text, known map[string]string) (*node, error) {
	if m := version11.FindIndex(t.B); m != nil {
		t.B = bytes.Clone(t.B)
		copy(t.B[m[0]:m[1]], bytes.Replace(t.B[m[0]:m[1]], []byte("1.1"), []byte("1.0"), 1))
	}
	d := xml.NewDecoder(bytes.NewReader(t.B))
	d.Entity = known
	d.CharsetReader = func(_ string, in io.Reader) (io.Reader, error) { return in, nil } // already decoded
	root := &node{name: "#root"}
	stack := []*node{root}
	for nodes := 0; ; nodes++ {
		start := int(d.InputOffset())
		tok, err := d.Token()
		if err == io.EOF {
			return root, nil
		}
		if err != nil {
			return nil, syntaxError(path, err)
		}
		if nodes > maxNodes {
			return nil, fmt.Errorf("%s: line %d: more than %d pieces of XML; this is too large for a paper", path, lineAt(t.B, start), maxNodes)
		}
		top := stack[len(stack)-1]
		switch tok := tok.(type) {
		case xml.StartElement:
			if len(stack) > maxDepth {
				return nil, fmt.Errorf("%s: line %d: elements nested more than %d deep; this is no article", path, lineAt(t.B, start), maxDepth)
			}
			n := &node{name: tok.Name.Local, attr: tok.Copy().Attr}
			top.kids = append(top.kids, n)
			stack = append(stack, n)
		case xml.EndElement:
			stack = stack[:len(stack)-1]
		case xml.CharData:
			top.kids = append(top.kids, &node{start: start, end: int(d.InputOffset())})
		}
	}
}

func syntaxError(path string, err error) error {
	var s *xml.SyntaxError
	if errors.As(err, &s) {
		return fmt.Errorf("%s: line %d: the XML is not well-formed: %s; download the file again or mend this line", path, s.Line, s.Msg)
	}
	return fmt.Errorf("%s: the XML cannot be read: %w", path, err)
}

func lineAt(b []byte, offset int) int {
	return 1 + bytes.Count(b[:min(offset, len(b))], []byte("\n"))
}
