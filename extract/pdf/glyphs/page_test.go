package glyphs

import (
	"fmt"
	"strings"
	"testing"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/pdftest"
)

func readFirst(t *testing.T, doc pdftest.Doc) *Page {
	t.Helper()
	d, err := Open(doc.Bytes())
	if err != nil {
		t.Fatal(err)
	}
	p, err := d.Page(1)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func textOf(p *Page) string {
	var b strings.Builder
	for _, g := range p.Glyphs {
		b.WriteString(g.Text)
	}
	return b.String()
}

// toUnicode is a character map with the given sections.
func toUnicode(body string) string {
	return pdftest.Stream("", "/CIDInit /ProcSet findresource begin begincmap 1 begincodespacerange <00> <FFFF> endcodespacerange "+body+" endcmap")
}

const first = "5 0 R" // the first of Doc.Objects

func simpleFont(more string) string {
	return "<< /Type /Font /Subtype /Type1 /BaseFont /ABCDEF+Apis " + more + " >>"
}

func TestText(t *testing.T) {
	show := func(s string) []pdftest.Page { return []pdftest.Page{{Content: "BT /F1 10 Tf 72 700 Td " + s + " ET"}} }
	with := func(font string) map[string]string { return map[string]string{"F1": font} }
	cases := []struct {
		name string
		doc  pdftest.Doc
		want string
	}{
		{"plain", pdftest.Doc{Pages: show("(12.4 kg) Tj")}, "12.4 kg"},
		{"array with kerning", pdftest.Doc{Pages: show("[(12) -20 (.4)] TJ")}, "12.4"},
		{"quote operators", pdftest.Doc{Pages: show("12 TL (a) Tj (b) ' 1 2 (c) \"")}, "abc"},
		{"escapes", pdftest.Doc{Pages: show(`(\(12\) \061\62\n) Tj`)}, "(12) 12\n"},
		{"hexadecimal", pdftest.Doc{Pages: show("<31 322E3> Tj")}, "12.0"},
		{"parts split between operands", pdftest.Doc{Pages: []pdftest.Page{{Content: "BT /F1 10 Tf 72 700 Td [(12", Parts: []string{".4)] TJ ET"}}}}, "12\n.4"},
		{"array over two parts", pdftest.Doc{Pages: []pdftest.Page{{Content: "BT /F1 10 Tf 72 700 Td [(12)", Parts: []string{"(.4)] TJ ET"}}}}, "12.4"},
		{"inline image is passed over", pdftest.Doc{Pages: []pdftest.Page{{Content: "BI /W 2 /H 2 /BPC 8 /CS /G ID \x01EI\x02\xff EI BT /F1 10 Tf 72 700 Td (9) Tj ET"}}}, "9"},
		{"differences", pdftest.Doc{Pages: show("<0102030405> Tj"), Fonts: with(simpleFont("/Encoding << /Differences [1 /minus /plusminus /uni2264 /one.tnum /f_i] >>"))}, "−±≤1fi"},
		{"old names", pdftest.Doc{Pages: show("<01020304> Tj"), Fonts: with(simpleFont("/Encoding << /Differences [1 /threeoldstyle /Asmall /equals /u1D45B] >>"))}, "3A=𝑛"},
		{"map before names", pdftest.Doc{Pages: show("<01> Tj"), Objects: []string{toUnicode("1 beginbfchar <01> <2212> endbfchar")},
			Fonts: with(simpleFont("/ToUnicode " + first + " /Encoding << /Differences [1 /zero] >>"))}, "−"},
		{"name before a map that cannot be printed", pdftest.Doc{Pages: show("<01> Tj"), Objects: []string{toUnicode("1 beginbfchar <01> <0002> endbfchar")},
			Fonts: with(simpleFont("/ToUnicode " + first + " /Encoding << /Differences [1 /minus] >>"))}, "−"},
		{"map behind an encoding that is a dictionary", pdftest.Doc{Pages: show("(A) Tj"), Objects: []string{toUnicode("1 beginbfchar <41> <00B1> endbfchar")},
			Fonts: with(simpleFont("/ToUnicode " + first + " /Encoding << /BaseEncoding /WinAnsiEncoding >>"))}, "±"},
		{"base encoding under differences", pdftest.Doc{Pages: show("(\261A) Tj"), Fonts: with(simpleFont("/Encoding << /BaseEncoding /WinAnsiEncoding /Differences [65 /B] >>"))}, "±B"},
		{"Symbol", pdftest.Doc{Pages: show("<B12DA3> Tj"), Fonts: with("<< /Type /Font /Subtype /Type1 /BaseFont /Symbol >>")}, "±−≤"},
		{"Mac Roman", pdftest.Doc{Pages: show("<B1D0> Tj"), Fonts: with(simpleFont("/Encoding /MacRomanEncoding"))}, "±–"},
		{"standard encoding", pdftest.Doc{Pages: show("<2DB1AE> Tj"), Fonts: with(simpleFont(""))}, "-–ﬁ"},
		{"glyphs named by number, as wide as TeX's", pdftest.Doc{Pages: show("<000206> Tj"),
			Fonts: with(simpleFont("/FirstChar 0 /Widths [770 0 770 0 0 0 770] /Encoding << /Differences [0 /C0 /C1 /C2 /C3 /C4 /C5 /C6] >>"))}, "−×±"},
		{"glyphs named by number, of other widths", pdftest.Doc{Pages: show("<02> Tj"),
			Fonts: with(simpleFont("/FirstChar 0 /Widths [500 0 500] /Encoding << /Differences [0 /C0 /C1 /C2] >>"))}, "\x02"},
		{"glyphs named by number, as wide as Symbol's", pdftest.Doc{Pages: show("<03> Tj"),
			Fonts: with(simpleFont("/FirstChar 3 /Widths [395] /Encoding << /Differences [3 /C176] >>"))}, "°"},
		{"encoding inside a Type 1 program", pdftest.Doc{Pages: show("<0030> Tj"),
			Objects: []string{pdftest.Stream("", "%!PS-AdobeFont\n/Encoding 256 array\n0 1 255 {1 index exch /.notdef put} for\ndup 0 /minus put\ndup 48 /prime put\nreadonly def\ncurrentfile eexec")},
			Fonts:   with(simpleFont("/FontDescriptor << /Type /FontDescriptor /Flags 4 /FontFile " + first + " >>"))}, "−′"},
		{"composite, identity", pdftest.Doc{Pages: show("<00010002> Tj"), Objects: []string{toUnicode("1 beginbfrange <0001> <0002> <0031> endbfrange")},
			Fonts: with("<< /Type /Font /Subtype /Type0 /BaseFont /Apis /Encoding /Identity-H /ToUnicode " + first + " /DescendantFonts [<< /Type /Font /Subtype /CIDFontType2 /BaseFont /Apis >>] >>")}, "12"},
		{"composite, codes of one and two bytes", pdftest.Doc{Pages: show("<3132818233> Tj"),
			Objects: []string{pdftest.Stream("/Type /CMap", "begincmap 2 begincodespacerange <00> <80> <8100> <FFFF> endcodespacerange 1 begincidrange <00> <7F> 1 endcidrange endcmap"),
				toUnicode("2 beginbfrange <30> <39> <0030> <8182> <8182> [<2212>] endbfrange")},
			Fonts: with("<< /Type /Font /Subtype /Type0 /BaseFont /Apis /Encoding 5 0 R /ToUnicode 6 0 R /DescendantFonts [<< /Type /Font /Subtype /CIDFontType0 /BaseFont /Apis >>] >>")}, "12−3"},
		{"ActualText of one glyph", pdftest.Doc{Pages: show("/Span << /ActualText <FEFF2264> >> BDC (x) Tj EMC")}, "≤"},
		{"ActualText from the properties", pdftest.Doc{Pages: show("/Span /P1 BDC (x) Tj EMC"), Properties: map[string]string{"P1": "<< /ActualText (\\261) >>"}}, "±"},
		{"ActualText never replaces digits", pdftest.Doc{Pages: show("/Span << /ActualText (99) >> BDC (12) Tj EMC")}, "12"},
		{"ActualText never replaces white space", pdftest.Doc{Pages: show("/Span << /ActualText <FEFF00AD> >> BDC ( ) Tj EMC")}, " "},
		{"overprinted for bold", pdftest.Doc{Pages: show("(12.4) Tj 0.2 0 Td (12.4) Tj")}, "12.4"},
		{"the same digit twice in small print", pdftest.Doc{Pages: show("/F1 2 Tf (1) Tj (1) Tj")}, "11"},
		{"unknown operators and rubbish", pdftest.Doc{Pages: show("1 2 xyzzy ) ] >> > (9) Tj << /A [1 (x) >>")}, "9"},
		{"text state survives no form", pdftest.Doc{Pages: show("(1) Tj /X1 Do (3) Tj"), XObjects: map[string]string{"X1": first},
			Objects: []string{pdftest.Stream("/Type /XObject /Subtype /Form /BBox [0 0 600 800]", "q BT /F1 5 Tf 1 1 Td (2) Tj ET")}}, "123"},
		{"form inside itself", pdftest.Doc{Pages: show("(1) Tj /X1 Do"), XObjects: map[string]string{"X1": first},
			Objects: []string{pdftest.Stream("/Type /XObject /Subtype /Form /Resources 3 0 R", "/X1 Do")}}, "1"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if got := textOf(readFirst(t, c.doc)); got != c.want {
				t.Errorf("got %q, want %q", got, c.want)
			}
		})
	}
}

func TestPlaces(t *testing.T) {
	cases := []struct {
		name, content string
		at            int // which glyph
		want          paper.Glyph
	}{
		{"first", "BT /F1 10 Tf 72 700 Td (12) Tj ET", 0, paper.Glyph{Text: "1", Box: paper.Box{X0: 7200, Y0: 69750, X1: 7756, Y1: 70750}, Origin: paper.Point{X: 7200, Y: 70000}, Size: 1000}},
		{"second, by the standard font's width", "BT /F1 10 Tf 72 700 Td (12) Tj ET", 1, paper.Glyph{Text: "2", Box: paper.Box{X0: 7756, Y0: 69750, X1: 8312, Y1: 70750}, Origin: paper.Point{X: 7756, Y: 70000}, Size: 1000}},
		{"character spacing and scaling", "BT /F1 10 Tf 1 Tc 50 Tz 72 700 Td (12) Tj ET", 1, paper.Glyph{Text: "2", Box: paper.Box{X0: 7528, Y0: 69750, X1: 7806, Y1: 70750}, Origin: paper.Point{X: 7528, Y: 70000}, Size: 1000}},
		{"word spacing", "BT /F1 10 Tf 4 Tw 72 700 Td ( 2) Tj ET", 1, paper.Glyph{Text: "2", Box: paper.Box{X0: 7878, Y0: 69750, X1: 8434, Y1: 70750}, Origin: paper.Point{X: 7878, Y: 70000}, Size: 1000}},
		{"kerning", "BT /F1 10 Tf 72 700 Td [(1) -1000 (2)] TJ ET", 1, paper.Glyph{Text: "2", Box: paper.Box{X0: 8756, Y0: 69750, X1: 9312, Y1: 70750}, Origin: paper.Point{X: 8756, Y: 70000}, Size: 1000}},
		{"rise", "BT /F1 10 Tf 3 Ts 72 700 Td (1) Tj ET", 0, paper.Glyph{Text: "1", Box: paper.Box{X0: 7200, Y0: 70050, X1: 7756, Y1: 71050}, Origin: paper.Point{X: 7200, Y: 70300}, Size: 1000}},
		{"scaled by matrices", "2 0 0 2 10 10 cm BT /F1 1 Tf 5 0 0 5 31 345 Tm (1) Tj ET", 0, paper.Glyph{Text: "1", Box: paper.Box{X0: 7200, Y0: 69750, X1: 7756, Y1: 70750}, Origin: paper.Point{X: 7200, Y: 70000}, Size: 1000}},
		{"turned", "BT /F1 10 Tf 0 1 -1 0 100 100 Tm (1) Tj ET", 0, paper.Glyph{Text: "1", Box: paper.Box{X0: 9250, Y0: 10000, X1: 10250, Y1: 10556}, Origin: paper.Point{X: 10000, Y: 10000}, Size: 1000, Angle: 90}},
		{"invisible", "BT 3 Tr /F1 10 Tf 72 700 Td (1) Tj ET", 0, paper.Glyph{Text: "1", Box: paper.Box{X0: 7200, Y0: 69750, X1: 7756, Y1: 70750}, Origin: paper.Point{X: 7200, Y: 70000}, Size: 1000, Invisible: true}},
		{"clipped away", "0 0 50 50 re W n BT /F1 10 Tf 72 700 Td (1) Tj ET", 0, paper.Glyph{Text: "1", Box: paper.Box{X0: 7200, Y0: 69750, X1: 7756, Y1: 70750}, Origin: paper.Point{X: 7200, Y: 70000}, Size: 1000, Invisible: true}},
		{"clip undone", "q 0 0 50 50 re W n Q BT /F1 10 Tf 72 700 Td (1) Tj ET", 0, paper.Glyph{Text: "1", Box: paper.Box{X0: 7200, Y0: 69750, X1: 7756, Y1: 70750}, Origin: paper.Point{X: 7200, Y: 70000}, Size: 1000}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			p := readFirst(t, pdftest.Doc{Pages: []pdftest.Page{{Content: c.content}}})
			if len(p.Glyphs) <= c.at {
				t.Fatalf("got %d glyphs", len(p.Glyphs))
			}
			if got := p.Glyphs[c.at]; got != c.want {
				t.Errorf("got  %+v\nwant %+v", got, c.want)
			}
		})
	}
}

func TestDrawings(t *testing.T) {
	cases := []struct{ name, content, want string }{
		{"stroke", "72 690 m 300 690 l S", "[{7200 69000 30000 69000}] []"},
		{"thin rectangle", "72 600 200 1 re f", "[{7200 60000 27200 60100}] []"},
		{"area", "72 500 100 40 re f", "[] []"},
		{"box around a cell", "72 500 100 40 re S", "[{7200 50000 17200 50000} {17200 50000 17200 54000} {7200 54000 17200 54000} {7200 50000 7200 54000}] []"},
		{"curve", "72 500 m 100 500 200 500 300 500 c f", "[] []"},
		{"not painted", "72 690 m 300 690 l n", "[] []"},
		{"clipped away", "0 0 10 10 re W n 72 690 m 300 690 l S", "[] []"},
		{"image", "q 100 0 0 50 72 600 cm /X1 Do Q", "[] [{7200 60000 17200 65000}]"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			p := readFirst(t, pdftest.Doc{Pages: []pdftest.Page{{Content: c.content}}, XObjects: map[string]string{"X1": first},
				Objects: []string{pdftest.Stream("/Type /XObject /Subtype /Image /Width 1 /Height 1 /BitsPerComponent 8 /ColorSpace /DeviceGray", "x")}})
			if got := fmt.Sprint(p.Rules, p.Images); got != c.want {
				t.Errorf("got  %s\nwant %s", got, c.want)
			}
		})
	}
}

func TestPageBox(t *testing.T) {
	p := readFirst(t, pdftest.Doc{Pages: []pdftest.Page{{Content: " ", Rotate: -90, Crop: [4]int{50, -50, 550, 750}}}})
	want := paper.Page{Number: 1, Reader: "own", Box: paper.Box{X0: 5000, Y0: 0, X1: 55000, Y1: 75000}, Rotate: 270}
	if p.Page != want {
		t.Errorf("got %+v, want %+v", p.Page, want)
	}
}
