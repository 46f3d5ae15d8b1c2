package engine

import (
	"errors"
	"image"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/pdftest"
)

func open(t *testing.T, content []byte) *Document {
	t.Helper()
	e, err := Shared(nil)
	if err != nil {
		t.Fatal(err)
	}
	d, err := e.Open(content)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(d.Close)
	return d
}

func textOf(g paper.GlyphPage) string {
	var b strings.Builder
	for _, c := range g.Glyphs {
		b.WriteString(c.Text)
	}
	return b.String()
}

func TestPage(t *testing.T) {
	doc := pdftest.Doc{Pages: []pdftest.Page{
		{Content: "BT /F1 10 Tf 72 700 Td (mass 12.4 kg) Tj ET 0.5 w 72 690 m 300 690 l S 72 500 100 40 re f 72 600 200 1 re f"},
		{Content: "BT /F1 10 Tf 0 1 -1 0 100 100 Tm (turned 8) Tj ET BT 3 Tr /F1 10 Tf 72 72 Td (hidden) Tj ET", Rotate: 90},
	}}
	d := open(t, doc.Bytes())
	if got := d.NumPage(); got != 2 {
		t.Fatalf("got %d pages, want 2", got)
	}
	g, cut, err := d.Page(1, true)
	if err != nil || cut {
		t.Fatal(err, cut)
	}
	if got, want := textOf(g), "mass 12.4 kg"; got != want {
		t.Errorf("got text %q, want %q", got, want)
	}
	if got, want := g.Glyphs[0].Origin, (paper.Point{X: 7200, Y: 70000}); got != want {
		t.Errorf("got origin %v, want %v", got, want)
	}
	if got, want := g.Glyphs[0].Size, int32(1000); got != want {
		t.Errorf("got size %d, want %d", got, want)
	}
	if len(g.Rules) != 2 {
		t.Errorf("got rules %v, want the stroke and the thin rectangle", g.Rules)
	}
	g, _, err = d.Page(2, true)
	if err != nil {
		t.Fatal(err)
	}
	if g.Page.Rotate != 90 || g.Glyphs[0].Angle != 90 || g.Glyphs[0].Invisible || !g.Glyphs[len(g.Glyphs)-1].Invisible {
		t.Errorf("got turn %d, first %+v, last %+v", g.Page.Rotate, g.Glyphs[0], g.Glyphs[len(g.Glyphs)-1])
	}
	if _, _, err := d.Page(3, true); err == nil {
		t.Error("page 3 of 2: got no error")
	}
}

func TestOpenErrors(t *testing.T) {
	e, err := Shared(nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name    string
		content []byte
		want    error
	}{
		{"rubbish", []byte(strings.Repeat("no PDF ", 100)), ErrFormat},
		{"header only", []byte("%PDF-1.4\n"), ErrFormat},
	} {
		if _, err := e.Open(c.content); !errors.Is(err, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, err, c.want)
		}
	}
}

func TestRender(t *testing.T) {
	for _, turn := range []int{0, 90, 180, 270} {
		doc := pdftest.Doc{Pages: []pdftest.Page{{Content: "1 0 0 rg 100 600 50 20 re f", Rotate: turn, Crop: [4]int{50, 50, 550, 750}}}}
		d := open(t, doc.Bytes())
		img, err := d.Render(1, 1)
		if err != nil {
			t.Fatal(err)
		}
		want := image.Pt(500, 700)
		if turn%180 == 90 {
			want = image.Pt(700, 500)
		}
		if got := img.Bounds().Size(); got != want {
			t.Errorf("turn %d: got size %v, want %v", turn, got, want)
		}
		wide, err := d.RenderWide(1, 333)
		if err != nil || wide.Bounds().Dx() != 333 {
			t.Errorf("turn %d: a picture 333 pixels wide: got %v, %v", turn, wide.Bounds(), err)
		}
		page := paper.Page{Box: paper.Box{X0: 5000, Y0: 5000, X1: 55000, Y1: 75000}, Rotate: turn}
		box := paper.Box{X0: 10000, Y0: 60000, X1: 15000, Y1: 62000}
		at := OnPicture(page, 1, box)
		if got := red(img); got != at {
			t.Errorf("turn %d: got the red box at %v, want %v", turn, got, at)
		}
		if got := FromPicture(page, 1, at); got != box {
			t.Errorf("turn %d: got back %v, want %v", turn, got, box)
		}
		if _, err := d.Render(1, 1000); !errors.Is(err, ErrTooLarge) {
			t.Errorf("a picture of 500,000 pixels a side: got %v", err)
		}
	}
}

// red gives the box around the red pixels.
func red(img *image.RGBA) (box image.Rectangle) {
	for y := range img.Bounds().Dy() {
		for x := range img.Bounds().Dx() {
			if c := img.RGBAAt(x, y); c.R > 200 && c.G < 60 && c.B < 60 {
				box = box.Union(image.Rect(x, y, x+1, y+1))
			}
		}
	}
	return box
}

// TestInstances reads more pages than one instance may, and several documents
// by the same instance.
func TestInstances(t *testing.T) {
	doc := pdftest.Doc{Pages: []pdftest.Page{{Content: "BT /F1 10 Tf 72 700 Td (12.4) Tj ET"}}}
	d := open(t, doc.Bytes())
	for i := range pagesPerInstance + 20 {
		g, _, err := d.Page(1, true)
		if err != nil || textOf(g) != "12.4" {
			t.Fatalf("reading %d: got %q, %v", i, textOf(g), err)
		}
	}
}

// TestCold starts an engine with an empty cache folder, then with the filled
// one. It compiles the library, which takes some seconds.
func TestCold(t *testing.T) {
	if testing.Short() {
		t.Skip("compiles the library")
	}
	dir := filepath.Join(t.TempDir(), "cache")
	for i, want := range []int{1, 0} {
		said := 0
		e, err := New(Config{CacheDir: dir, Cold: func() { said++ }})
		if err != nil {
			t.Fatal(err)
		}
		if said != want {
			t.Errorf("start %d: said %d times that it compiles, want %d", i+1, said, want)
		}
		if err := e.Close(); err != nil {
			t.Error(err)
		}
	}
	info, err := os.Stat(dir)
	if err != nil {
		t.Fatal(err)
	}
	if runtime.GOOS != "windows" && info.Mode().Perm() != 0o700 {
		t.Errorf("got a cache folder with mode %v, want 0700", info.Mode().Perm())
	}
}
