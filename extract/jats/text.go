package jats

import (
	"bytes"
	"html"
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/source"
)

// builder collects a TextRun from character data: white space is normalised,
// references are resolved, every byte keeps its place.
type builder struct {
	source.Builder
	known  map[string]string // entities
	cell   bool              // line breaks are kept
	floats []*node
	cites  bool // a citation mark was written
}

// citation stands in the text for a citation mark until it is cut out; no XML
// file can hold this character.
const citation = "\uFFFF"

// lineBreak parts two lines of a cell, or two words of other text.
func (b *builder) lineBreak() {
	if b.cell {
		b.Break("\n")
		return
	}
	b.Break(" ")
}

// chars reads the character data [start, end) of the decoded file.
func (b *builder) chars(start, end int) {
	raw := b.Src.B[start:end]
	if bytes.HasPrefix(raw, []byte("<![CDATA[")) {
		const open, shut = len("<![CDATA["), len("]]>")
		b.plain(raw[open:len(raw)-shut], start+open)
		return
	}
	for len(raw) > 0 {
		k := bytes.IndexByte(raw, '&')
		if k < 0 {
			k = len(raw)
		}
		b.plain(raw[:k], start)
		raw, start = raw[k:], start+k
		if len(raw) == 0 {
			return
		}
		k = bytes.IndexByte(raw, ';') + 1
		b.reference(string(raw[:k]), start)
		raw, start = raw[k:], start+k
	}
}

// plain adds bytes without references.
func (b *builder) plain(raw []byte, off int) {
	for len(raw) > 0 {
		k := bytes.IndexAny(raw, " \t\r\n")
		if k < 0 {
			k = len(raw)
		}
		if k > 0 {
			b.Put(raw[:k], off)
		}
		if k < len(raw) {
			b.Space(off + k)
		}
		for k < len(raw) && strings.IndexByte(" \t\r\n", raw[k]) >= 0 {
			k++
		}
		raw, off = raw[k:], off+k
	}
}

// reference adds what the reference "&...;" at off stands for.
func (b *builder) reference(ref string, off int) {
	name := strings.Trim(ref, "&;")
	s, ok := b.known[name]
	if !ok || strings.HasPrefix(name, "#") {
		s = html.UnescapeString(ref)
	}
	if strings.Trim(s, " \t\r\n") == "" {
		b.Space(off)
		return
	}
	b.PutAs([]byte(s), off)
}

// run hands out what was collected, with space at the ends, citation marks and
// stray line ends cut off.
func (b *builder) run() paper.TextRun {
	t := b.Run()
	if b.cites {
		t = cutCitations(t)
	}
	return source.Trim(t)
}
