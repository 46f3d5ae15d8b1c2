package glyphs

import (
	"fmt"
	"strings"
	"testing"
)

func dump(s string) string {
	l := lexer{b: []byte(s)}
	var out []string
	for t := l.next(); t.kind != tokEOF; t = l.next() {
		switch t.kind {
		case tokNumber:
			out = append(out, fmt.Sprintf("%v", t.num))
		case tokName:
			out = append(out, fmt.Sprintf("/%s", t.b))
		case tokString:
			out = append(out, fmt.Sprintf("(%q)", t.b))
		case tokWord:
			out = append(out, string(t.b))
		default:
			out = append(out, map[tokKind]string{tokArrayOpen: "[", tokArrayClose: "]", tokDictOpen: "<<", tokDictClose: ">>"}[t.kind])
		}
	}
	return strings.Join(out, " ")
}

func TestLexer(t *testing.T) {
	for _, c := range []struct{ in, want string }{
		{"", ""},
		{"1 -2 +3 4.5 -.5 .5 5. 0.25", "1 -2 3 4.5 -0.5 0.5 5 0.25"},
		{"--5 5-3 1.2.3 -", "-5 5 1.2 -0"},
		{"1e5 12abc -x", "1e5 12abc -x"},
		{"/Name /A#20B /#zz /", "/Name /A B /#zz /"},
		{"(plain) () (a(b)c) (open", `("plain") ("") ("a(b)c") ("open")`},
		{`(\n\r\t\b\f\(\)\\\x)`, `("\n\r\t\b\f()\\x")`},
		{`(\0611\8\53)`, `("118+")`},
		{"(a\\\nb\\\r\nc\rd\r\ne)", `("abc\nd\ne")`},
		{"<4142> <4 1 4> <> <zz41", `("AB") ("A@") ("") ("A")`},
		{"[1 [2] ]] << /A 1 >> >", "[ 1 [ 2 ] ] ] << /A 1 >> "},
		{"q% comment\nQ %end", "q Q"},
		{"T*'\"W*", `T*'"W*`},
		{") } {", ") } {"},
		{">>>>> 1", ">> >>  1"},
	} {
		if got := dump(c.in); got != c.want {
			t.Errorf("%q: got %s, want %s", c.in, got, c.want)
		}
	}
}

func TestCMap(t *testing.T) {
	m := readCMap([]byte(`/CMapName /Test def /WMode 1 def /Identity-H usecmap
2 begincodespacerange <00> <7F> <8000> <FFFF> endcodespacerange
3 beginbfchar <01> <2212> <02> <D835DC5B> <03> /plusminus endbfchar
2 beginbfrange <10> <12> <0030> <20> <21> [<0041> <00420043>] endbfrange
1 begincidrange <8000> <8010> 100 endcidrange
1 begincidchar <05> 7 endcidchar`), nil)
	for code, want := range map[uint32]string{1: "−", 2: "𝑛", 3: "±", 0x10: "0", 0x12: "2", 0x20: "A", 0x21: "BC", 0x22: ""} {
		if got := m.text[code]; got != want {
			t.Errorf("code %x: got %q, want %q", code, got, want)
		}
	}
	if m.wmode != 1 || m.uses != "Identity-H" {
		t.Errorf("got mode %d, uses %q", m.wmode, m.uses)
	}
	for code, want := range map[uint32]uint32{0x8000: 100, 0x8010: 116, 5: 7, 6: 0} {
		if got := m.cid(code); got != want {
			t.Errorf("glyph of %x: got %d, want %d", code, got, want)
		}
	}
	for in, want := range map[string]int{"\x01\x02": 1, "\x80\x01": 2, "\x80": 1, "\x7F": 1} {
		if got := m.length([]byte(in)); got != want {
			t.Errorf("length of %q: got %d, want %d", in, got, want)
		}
	}
}

func TestCMapIsBounded(t *testing.T) {
	var b strings.Builder
	for i := range 100 {
		fmt.Fprintf(&b, "1 beginbfrange <%04X0000> <%04XFFFF> <0041> endbfrange\n", i, i)
	}
	b.WriteString("1 beginbfrange <FFFFFFF0> <FFFFFFFF> <0041> endbfrange")
	if n := len(readCMap([]byte(b.String()), &fuel{}).text); n > maxMapText {
		t.Errorf("got %d entries, want at most %d", n, maxMapText)
	}
}

func TestNames(t *testing.T) {
	if !sortedSections("names", "Helvetica", "Helvetica-Bold", "Times-Roman", "Times-Bold", "Times-Italic", "Times-BoldItalic", "Symbol", "ZapfDingbats") {
		t.Error("tables.txt is not sorted, look-ups will miss")
	}
	for name, want := range map[string]string{
		"minus": "−", "plusminus": "±", "zero": "0", "A": "A", "hyphen": "-", "endash": "–", "one.tnum": "1", "f_f_i": "ffi",
		"uni2212": "−", "uni00310032": "12", "u1D45B": "𝑛", "uniXYZW": "", "Asmall": "A", "nineoldstyle": "9", "foursuperior": "⁴",
		"": "", ".notdef": "", "C12": "", "g34": "", "prime": "′", "lessequal": "≤",
	} {
		if got := nameText(name); got != want {
			t.Errorf("%s: got %q, want %q", name, got, want)
		}
	}
	if n := len(cffStrings()); n != 347 {
		t.Errorf("got %d standard strings, want 347 (0 to 346)", n)
	}
	for sid, want := range map[int]string{0: ".notdef", 1: "space", 17: "zero", 149: "germandbls", 150: "onesuperior", 156: "plusminus", 166: "minus", 228: "zcaron", 266: "ff", 346: "commainferior", 390: ""} {
		if got := cffStandardName(sid); got != want {
			t.Errorf("standard string %d: got %q, want %q", sid, got, want)
		}
	}
}

func TestStandardFont(t *testing.T) {
	for _, c := range []struct {
		name         string
		bold, italic bool
		want         string
	}{
		{"Arial,Bold", true, false, "Helvetica-Bold"}, {"TimesNewRoman", false, false, "Times-Roman"}, {"Times-BoldItalic", true, true, "Times-BoldItalic"},
		{"CourierNew", false, false, "Courier"}, {"Symbol", false, false, "Symbol"}, {"Wingdings", false, false, ""},
	} {
		if got := standardFont(c.name, c.bold, c.italic); got != c.want {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
	if w, ok := standardWidth("Helvetica", "one"); !ok || w != 556 {
		t.Errorf("got %v %v", w, ok)
	}
}

// cffFont is a compact font program with one glyph, minus, at code 5.
func cffFont() []byte {
	index := func(items ...string) string {
		if len(items) == 0 {
			return "\x00\x00"
		}
		out := string([]byte{byte(len(items) >> 8), byte(len(items)), 1, 1})
		at := 1
		for _, s := range items {
			at += len(s)
			out += string([]byte{byte(at)})
		}
		return out + strings.Join(items, "")
	}
	head := "\x01\x00\x04\x01" + index("Apis")
	num := func(v int) string { return string([]byte{28, byte(v >> 8), byte(v)}) }
	top := func(charset, encoding, glyphs int) string {
		return num(charset) + "\x0f" + num(encoding) + "\x10" + num(glyphs) + "\x11"
	}
	rest := index("Apis1") + index() // one own string, no subroutines
	start := len(head) + len(index(top(0, 0, 0))) + len(rest)
	charset, encoding := "\x00\x00\xa6\x01\x87", "\x00\x02\x05\x06" // minus (166), own string (391)
	return []byte(head + index(top(start, start+len(charset), start+len(charset)+len(encoding))) + rest + charset + encoding + index("\x0e", "\x0e", "\x0e"))
}

func TestCFF(t *testing.T) {
	var names [256]string
	cffEncoding(cffFont(), &names)
	if names[5] != "minus" || names[6] != "Apis1" {
		t.Errorf("got %q %q", names[5], names[6])
	}
	for n := range cffFont() {
		cffEncoding(cffFont()[:n], &names) // cut short anywhere: no panic
	}
}
