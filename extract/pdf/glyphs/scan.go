package glyphs

import (
	"bytes"
	"strconv"
)

// The library believes what a file says about its cross-reference table: it
// allocates a row for every object number that is named and follows the chain
// of older tables without end. Both are looked at here first.
const (
	maxObjectNumber = 500_000
	maxChain        = 400
)

// prepare gives the content in the form that the library wants, or says why
// it could not read it: the header in the first bytes and of a version it
// knows, nothing behind the end mark.
func prepare(content []byte) ([]byte, error) {
	start := bytes.Index(content[:min(len(content), 1024)], []byte("%PDF-"))
	if start != 0 || len(content) < 32 {
		return nil, &Error{What: "the header does not stand at the very beginning"}
	}
	end := bytes.LastIndex(content, []byte("%%EOF"))
	if end < 0 {
		return nil, &Error{What: "the end mark is missing"}
	}
	content = content[:end+5]
	if !plainHeader(content) {
		patched := bytes.Clone(content)
		copy(patched, "%PDF-1.7\n")
		content = patched
	}
	return content, checkChain(content)
}

func plainHeader(b []byte) bool {
	return bytes.HasPrefix(b, []byte("%PDF-1.")) && b[7] >= '0' && b[7] <= '7' && (b[8] == '\r' || b[8] == '\n')
}

// checkChain walks the chain of cross-reference sections as the library would.
func checkChain(b []byte) error {
	at := bytes.LastIndex(b, []byte("startxref"))
	if at < 0 {
		return &Error{What: "the cross-reference table is missing"}
	}
	offset, ok := intAfter(b[at+len("startxref"):])
	seen := map[int]bool{}
	for ok {
		if offset < 0 || offset >= len(b) || seen[offset] || len(seen) > maxChain {
			return &Error{What: "the chain of cross-reference tables is broken or endless"}
		}
		seen[offset] = true
		head, err := sectionHead(b[offset:])
		if err != nil {
			return err
		}
		offset, ok = intFor(head, "/Prev")
	}
	return nil
}

// sectionHead finds the dictionary of one section and checks the object
// numbers that the section names.
func sectionHead(b []byte) ([]byte, error) {
	tooBig := &Error{What: "the cross-reference table names object numbers beyond all measure"}
	if bytes.HasPrefix(bytes.TrimLeft(b[:min(len(b), 32)], "\x00\t\n\f\r "), []byte("xref")) {
		l := lexer{b: b}
		l.next()
		for {
			t := l.next()
			if t.kind == tokWord && string(t.b) == "trailer" {
				return upTo(b[l.pos:], "startxref", 1<<16), nil
			}
			n := l.next()
			if t.kind != tokNumber || n.kind != tokNumber || t.num < 0 || n.num < 0 || t.num+n.num > maxObjectNumber {
				return nil, tooBig
			}
			for range 3 * int(n.num) {
				if l.next().kind == tokEOF {
					return nil, &Error{What: "the cross-reference table is cut short"}
				}
			}
		}
	}
	head := upTo(b, "stream", 1<<16)
	size, ok := intFor(head, "/Size")
	if !ok || size > maxObjectNumber {
		return nil, tooBig
	}
	if i := bytes.Index(head, []byte("/Index")); i >= 0 {
		l := lexer{b: head[i:]}
		for t := l.next(); t.kind != tokEOF && t.kind != tokArrayClose; t = l.next() {
			if t.kind == tokNumber && t.num > maxObjectNumber {
				return nil, tooBig
			}
		}
	}
	return head, nil
}

// upTo cuts b before mark, or after limit bytes.
func upTo(b []byte, mark string, limit int) []byte {
	b = b[:min(len(b), limit)]
	if i := bytes.Index(b, []byte(mark)); i >= 0 {
		return b[:i]
	}
	return b
}

func intAfter(b []byte) (int, bool) {
	b = bytes.TrimLeft(b, "\x00\t\n\f\r ")
	n := 0
	for n < len(b) && n < 12 && b[n] >= '0' && b[n] <= '9' {
		n++
	}
	v, err := strconv.Atoi(string(b[:n]))
	return v, err == nil
}

func intFor(b []byte, key string) (int, bool) {
	i := bytes.Index(b, []byte(key))
	if i < 0 {
		return 0, false
	}
	return intAfter(b[i+len(key):])
}
