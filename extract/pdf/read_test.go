package pdf

import (
	"bytes"
	"errors"
	"fmt"
	"image"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/engine"
	"halfspan/extract/pdf/pdftest"
)

func TestReadErrors(t *testing.T) {
	sound := (&pdftest.Doc{Pages: lines("12.4 kg")}).Bytes()
	locked := (&pdftest.Doc{Pages: lines("12.4 kg"), Trailer: "/Encrypt << /Filter /Standard /V 2 /R 3 /Length 128 /P -4 /O (01234567890123456789012345678901) /U (01234567890123456789012345678901) >> /ID [(0123456789012345) (0123456789012345)]"}).Bytes()
	for _, c := range []struct {
		name    string
		content []byte
		want    error
	}{
		{"empty", nil, ErrEmpty},
		{"a web page", []byte("<html><body>Sign in to read on</body></html>"), ErrNotPDF},
		{"cut to its header", sound[:40], ErrDamaged},
		{"a password", locked, ErrPassword},
	} {
		if _, err := Read(c.content, Options{}); !errors.Is(err, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, err, c.want)
		}
	}
}

func kinds(g *Glyphs) string {
	var out []string
	for _, p := range g.Problems {
		out = append(out, p.Kind)
	}
	return strings.Join(out, " ")
}

func readers(g *Glyphs) string {
	var out []string
	for _, p := range g.Pages {
		out = append(out, p.Page.Reader)
	}
	return strings.Join(out, " ")
}

// TestWhoReads follows a paper of several pages: two readings, then one.
func TestWhoReads(t *testing.T) {
	var page []string
	for i := range 40 {
		page = append(page, fmt.Sprintf("in week %d the mass was 12.%d kg (n = %d)", i, 9-i%10, 345678-i))
	}
	doc := pdftest.Doc{Info: "/Title (Bees)"}
	for range 4 {
		doc.Pages = append(doc.Pages, lines(page...)...)
	}
	var seen []int
	got, err := Read(doc.Bytes(), Options{Progress: func(n int) { seen = append(seen, n) }})
	if err != nil {
		t.Fatal(err)
	}
	if r := readers(got); r != "both own own own" {
		t.Errorf("got readers %q", r)
	}
	if got.Title != "Bees" || len(got.Problems) != 0 || fmt.Sprint(seen) != "[1 2 3 4]" {
		t.Errorf("got title %q, problems %v, pages %v", got.Title, got.Problems, seen)
	}
	one, err := Read(doc.Bytes(), Options{OneReader: true})
	if err != nil {
		t.Fatal(err)
	}
	if r := readers(one); r != "pdfium pdfium pdfium pdfium" || kinds(one) != "one-reader" {
		t.Errorf("one reader: got readers %q, problems %q", r, kinds(one))
	}
	for i := range got.Pages {
		if a, b := textOf(&got.Pages[i]), textOf(&one.Pages[i]); a != b {
			t.Errorf("page %d: the readers differ:\n%s\n%s", i+1, a, b)
		}
	}
}

// TestReadersDiffer sets readings against each other that are not the same.
func TestReadersDiffer(t *testing.T) {
	a := []paper.Glyph{glyphAt("1", 0), glyphAt("2", 600), glyphAt(".", 1200), glyphAt("4", 1500)}
	cases := []struct {
		name string
		b    []paper.Glyph
		want string
	}{
		{"alike", a, ""},
		{"moved by less than the readers ever differ", []paper.Glyph{glyphAt("1", 90), glyphAt("2", 690), glyphAt(".", 1290), glyphAt("4", 1590)}, ""},
		{"another digit", []paper.Glyph{a[0], glyphAt("7", 600), a[2], a[3]}, "12.4/17.4"},
		{"a lost digit", []paper.Glyph{a[0], a[2], a[3]}, "12.4/"},
		{"a digit more", append([]paper.Glyph{glyphAt("9", 5000)}, a...), "/9"},
		{"another dash", []paper.Glyph{glyphAt("−", -600), a[0], a[1], a[2], a[3]}, "/−12.4"},
		{"a letter is nothing", append([]paper.Glyph{glyphAt("x", 5000)}, a...), ""},
		{"a digit printed twice", append([]paper.Glyph{glyphAt("1", 20)}, a...), ""},
		{"the same numbers elsewhere", []paper.Glyph{glyphAt("1", 9000), glyphAt("2", 9600), glyphAt(".", 10200), glyphAt("4", 10500)}, ""},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got := ""
			for _, d := range match(a, c.b).disputes() {
				got += d.ours + "/" + d.engine
			}
			if got != c.want {
				t.Errorf("got %q, want %q", got, c.want)
			}
		})
	}
}

func glyphAt(text string, x int32) paper.Glyph {
	return paper.Glyph{Text: text, Origin: paper.Point{X: x}, Box: paper.Box{X0: x, Y0: -250, X1: x + 580, Y1: 750}, Size: 1000}
}

// TestPageOfOneReader has a page that only the engine can read: its content is
// compressed in a way that our reader's library does not know.
func TestPageOfOneReader(t *testing.T) {
	doc := pdftest.Doc{Pages: []pdftest.Page{{Content: "/X1 Do BT /F1 10 Tf 72 700 Td (12.4) Tj ET"}}, XObjects: map[string]string{"X1": "5 0 R"},
		Objects: []string{pdftest.Stream("/Type /XObject /Subtype /Form /BBox [0 0 600 800] /Filter /LZWDecode", "\x80\x0b\x60\x50\x22\x0c\x0c\x85\x01")}}
	got, err := Read(doc.Bytes(), Options{})
	if err != nil {
		t.Fatal(err)
	}
	if readers(got) != "pdfium" || kinds(got) != "one-reader" || textOf(&got.Pages[0]) != "12.4" {
		t.Errorf("got readers %q, problems %v, text %q", readers(got), got.Problems, textOf(&got.Pages[0]))
	}
}

// scan is a page that is one picture.
func scan(hidden string) pdftest.Doc {
	return pdftest.Doc{
		Pages:    []pdftest.Page{{Content: "q 600 0 0 780 6 6 cm /X1 Do Q " + hidden}},
		XObjects: map[string]string{"X1": "5 0 R"},
		Objects:  []string{pdftest.Stream("/Type /XObject /Subtype /Image /Width 2 /Height 2 /BitsPerComponent 8 /ColorSpace /DeviceGray", "\x00\xff\xff\x00")},
	}
}

func TestPictures(t *testing.T) {
	t.Setenv("PATH", t.TempDir())
	layer := "BT 3 Tr /F1 2 Tf 72 700 Td (" + strings.Repeat("12.4 kg ", 40) + ") Tj ET"
	for _, c := range []struct {
		name string
		doc  pdftest.Doc
		want string
		lost bool
	}{
		{"scan", scan(""), "no-text", true},
		{"scan with a stamp", scan("BT /F1 10 Tf 72 20 Td (Downloaded) Tj ET"), "no-text", true},
		{"scan with a layer of text", scan(layer), "text-layer", false},
		{"picture with a text", scan(strings.Replace(layer, "3 Tr", "", 1)), "", false},
		{"empty page", pdftest.Doc{Pages: []pdftest.Page{{}}}, "", false},
	} {
		got, err := Read(c.doc.Bytes(), Options{})
		if err != nil {
			t.Fatal(err)
		}
		if k := kinds(got); k != c.want {
			t.Errorf("%s: got problems %q, want %q", c.name, k, c.want)
		}
		if len(got.Problems) > 0 && got.Problems[0].Lost != c.lost {
			t.Errorf("%s: got lost %v", c.name, got.Problems[0].Lost)
		}
	}
}

// TestOCR puts a program called tesseract on PATH that always recognises the
// same words.
func TestOCR(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("the stand-in for tesseract is a shell script")
	}
	dir := t.TempDir()
	table := "level\tpage_num\tblock_num\tpar_num\tline_num\tword_num\tleft\ttop\twidth\theight\tconf\ttext\n" +
		"4\t1\t1\t1\t1\t0\t300\t300\t500\t50\t-1\t\n" +
		"5\t1\t1\t1\t1\t1\t300\t300\t200\t50\t96.1\t12.4\n" +
		"5\t1\t1\t1\t1\t2\t550\t300\t100\t50\t90.0\tkg\n"
	script := "#!/bin/sh\n/bin/cat > /dev/null\n/bin/cat <<'EOF'\n" + table + "EOF\n"
	if err := os.WriteFile(filepath.Join(dir, "tesseract"), []byte(script), 0o755); err != nil {
		t.Fatal(err)
	}
	t.Setenv("PATH", dir)
	doc := scan("")
	got, err := Read(doc.Bytes(), Options{OCR: true})
	if err != nil {
		t.Fatal(err)
	}
	if readers(got) != "ocr" || kinds(got) != "ocr" || textOf(&got.Pages[0]) != "12.4kg" {
		t.Fatalf("got readers %q, problems %v, text %q", readers(got), got.Problems, textOf(&got.Pages[0]))
	}
	g := got.Pages[0].Glyphs[0]
	// 300 of 3300 pixels from the top at 300 dots an inch: 72 points below 792.
	want := paper.Glyph{Text: "1", Box: paper.Box{X0: 7200, Y0: 70800, X1: 8400, Y1: 72000}, Origin: paper.Point{X: 7200, Y: 71100}, Size: 1200}
	if g != want {
		t.Errorf("got  %+v\nwant %+v", g, want)
	}
}

func TestRecognisedErrors(t *testing.T) {
	for _, table := range []string{"", "nonsense", "level" + strings.Repeat("\tx", 11) + "\n5\ta" + strings.Repeat("\t1", 10)} {
		if _, err := recognised(table, paper.Page{}); err == nil {
			t.Errorf("%q: got no error", table)
		}
	}
}

func TestOCRTurned(t *testing.T) {
	// On a turned page the words come back along the turn.
	page := paper.Page{Box: paper.Box{X1: 61200, Y1: 79200}, Rotate: 90}
	box := image.Rect(300, 300, 500, 350)
	g := word("12", box, box, page)
	if len(g) != 2 || g[0].Angle != 90 || g[1].Origin.Y <= g[0].Origin.Y || g[0].Origin.X != g[1].Origin.X {
		t.Fatalf("got %+v", g)
	}
	if back := engine.OnPicture(page, ocrScale, g[0].Box.Union(g[1].Box)); !back.In(box.Inset(-2)) {
		t.Errorf("got back %v, want %v", back, box)
	}
}

func TestPicturesForTheDesk(t *testing.T) {
	doc := pdftest.Doc{Pages: lines("12.4 kg")}
	p, err := OpenPictures(doc.Bytes())
	if err != nil {
		t.Fatal(err)
	}
	defer p.Close()
	a, err := p.Page(1, 1)
	if err != nil {
		t.Fatal(err)
	}
	b, err := p.Page(1, 1)
	if err != nil {
		t.Fatal(err)
	}
	if a.Bounds() != image.Rect(0, 0, 612, 792) || !bytes.Equal(a.Pix, b.Pix) {
		t.Errorf("got %v, and the same page twice is the same: %v", a.Bounds(), bytes.Equal(a.Pix, b.Pix))
	}
}
