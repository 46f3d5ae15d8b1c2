package glyphs

import (
	"strings"
	"unicode/utf16"
)

// cmap is a character map: codes to text (ToUnicode), or codes to glyph
// numbers (the encoding of a composite font).
type cmap struct {
	spaces []codeSpace
	text   map[uint32]string
	cids   []cidRange
	wmode  int
	uses   string // name of the map that this one builds on
}

type codeSpace struct {
	n      int // bytes of a code
	lo, hi uint32
}

type cidRange struct {
	lo, hi, cid uint32
}

const (
	maxMapText   = 200_000 // entries of one map
	maxMapRanges = 100_000
)

// readCMap reads a character map. Like the lexer it never fails: what makes no
// sense is passed over.
func readCMap(b []byte, f *fuel) *cmap {
	m := &cmap{text: map[uint32]string{}}
	r := cmapReader{l: lexer{b: b}, m: m, fuel: f, left: maxMapText}
	var last token
	for t := r.next(); t.kind != tokEOF; t = r.next() {
		if t.kind == tokWord {
			switch string(t.b) {
			case "begincodespacerange":
				r.spaces()
			case "beginbfchar":
				r.bfchar()
			case "beginbfrange":
				r.bfrange()
			case "begincidrange":
				r.cidrange()
			case "begincidchar":
				r.cidchar()
			case "usecmap":
				if last.kind == tokName {
					m.uses = string(last.b)
				}
			}
		}
		if last.kind == tokName && string(last.b) == "WMode" && t.kind == tokNumber {
			m.wmode = int(t.num)
		}
		last = t
	}
	return m
}

type cmapReader struct {
	l    lexer
	left int // entries of text that may still be written
	m    *cmap
	fuel *fuel
}

func (r *cmapReader) next() token {
	if r.fuel != nil {
		burn(&r.fuel.operators, 1, fuelOperators, "entries of character maps")
	}
	return r.l.next()
}

// item reads the next token of a section; ok is false at its end.
func (r *cmapReader) item() (token, bool) {
	t := r.next()
	if t.kind == tokEOF || t.kind == tokWord && strings.HasPrefix(string(t.b), "end") {
		return t, false
	}
	return t, true
}

func codeOf(b []byte) uint32 {
	var v uint32
	for _, c := range b[:min(len(b), 4)] {
		v = v<<8 | uint32(c)
	}
	return v
}

func (r *cmapReader) spaces() {
	for {
		lo, ok := r.item()
		if !ok {
			return
		}
		hi, ok := r.item()
		if !ok {
			return
		}
		if n := len(lo.b); n >= 1 && n <= 4 && len(r.m.spaces) < 100 {
			r.m.spaces = append(r.m.spaces, codeSpace{n, codeOf(lo.b), codeOf(hi.b)})
		}
	}
}

func (r *cmapReader) bfchar() {
	for {
		code, ok := r.item()
		if !ok {
			return
		}
		to, ok := r.item()
		if !ok {
			return
		}
		r.add(codeOf(code.b), destination(to))
	}
}

func (r *cmapReader) add(code uint32, text string) {
	if r.left > 0 {
		r.left--
		r.m.text[code] = text
	}
}

// destination is the text of a bfchar: UTF-16 as a string, or a glyph name.
func destination(t token) string {
	if t.kind == tokName {
		return nameText(string(t.b))
	}
	if len(t.b) == 1 {
		return string(rune(t.b[0]))
	}
	return utf16be(t.b)
}

func utf16be(b []byte) string {
	u := make([]uint16, len(b)/2)
	for i := range u {
		u[i] = uint16(b[2*i])<<8 | uint16(b[2*i+1])
	}
	return string(utf16.Decode(u))
}

func (r *cmapReader) bfrange() {
	for {
		lo, ok := r.item()
		if !ok {
			return
		}
		hi, ok := r.item()
		if !ok {
			return
		}
		to, ok := r.item()
		if !ok {
			return
		}
		first, last := codeOf(lo.b), codeOf(hi.b)
		if to.kind == tokArrayOpen {
			for code := first; ; code++ {
				t, ok := r.item()
				if !ok {
					return
				}
				if t.kind == tokArrayClose {
					break
				}
				if code <= last {
					r.add(code, destination(t))
				}
			}
			continue
		}
		r.run(first, last, destination(to))
	}
}

// run adds a range of codes that stand for successive characters.
func (r *cmapReader) run(first, last uint32, text string) {
	runes := []rune(text)
	if len(runes) == 0 || last < first {
		return
	}
	last = min(last, first+0xFFFF)
	for code := first; code <= last && r.left > 0; code++ {
		r.add(code, string(runes))
		runes[len(runes)-1]++
		if code == 0xFFFFFFFF {
			return
		}
	}
}

func (r *cmapReader) cidrange() {
	for {
		lo, ok := r.item()
		if !ok {
			return
		}
		hi, ok := r.item()
		if !ok {
			return
		}
		cid, ok := r.item()
		if !ok {
			return
		}
		if len(r.m.cids) < maxMapRanges && cid.num >= 0 {
			r.m.cids = append(r.m.cids, cidRange{codeOf(lo.b), codeOf(hi.b), uint32(cid.num)})
		}
	}
}

func (r *cmapReader) cidchar() {
	for {
		code, ok := r.item()
		if !ok {
			return
		}
		cid, ok := r.item()
		if !ok {
			return
		}
		if c := codeOf(code.b); len(r.m.cids) < maxMapRanges && cid.num >= 0 {
			r.m.cids = append(r.m.cids, cidRange{c, c, uint32(cid.num)})
		}
	}
}

// cid gives the glyph number of a code.
func (m *cmap) cid(code uint32) uint32 {
	for _, r := range m.cids {
		if code >= r.lo && code <= r.hi {
			return r.cid + code - r.lo
		}
	}
	return 0
}

// length gives how many bytes the next code takes.
func (m *cmap) length(b []byte) int {
	var v uint32
	for n := 1; n <= min(4, len(b)); n++ {
		v = v<<8 | uint32(b[n-1])
		for _, s := range m.spaces {
			if s.n == n && v >= s.lo && v <= s.hi {
				return n
			}
		}
	}
	if len(m.spaces) > 0 {
		return min(m.spaces[0].n, len(b))
	}
	return min(2, len(b))
}
