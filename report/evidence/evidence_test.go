package evidence

import (
	"bytes"
	"errors"
	"image"
	"image/color"
	"image/draw"
	"os"
	"path/filepath"
	"testing"

	"github.com/pdfcpu/pdfcpu/pkg/api"
	"github.com/pdfcpu/pdfcpu/pkg/pdfcpu/model"

	"halfspan/extract/paper"
)

func TestCutOut(t *testing.T) {
	page := image.NewRGBA(image.Rect(0, 0, 600, 800))
	draw.Draw(page, page.Bounds(), image.White, image.Point{}, draw.Src)
	before := bytes.Clone(page.Pix)
	own := []image.Rectangle{image.Rect(100, 300, 160, 312), image.Rect(170, 300, 240, 312)}
	got, err := CutOut(page, own, []image.Rectangle{image.Rect(100, 250, 130, 262), image.Rect(0, 700, 50, 712)}, 80, 1)
	if err != nil {
		t.Fatal(err)
	}
	if want := image.Rect(0, 220, 600, 392); got.Bounds() != want {
		t.Errorf("cut out %v, want %v", got.Bounds(), want)
	}
	if got.At(97, 306) != outline || got.At(130, 306) != (color.RGBA{255, 255, 255, 255}) {
		t.Errorf("the outline is not round the number: %v at its side, %v inside", got.At(97, 306), got.At(130, 306))
	}
	if got.At(97, 250) != around {
		t.Errorf("the place of n is not outlined: %v", got.At(97, 250))
	}
	if !bytes.Equal(before, page.Pix) {
		t.Error("the page itself was drawn on")
	}
	// At the edges of the page.
	if _, err := CutOut(page, []image.Rectangle{image.Rect(-5, -5, 20, 10)}, nil, 80, 3); err != nil {
		t.Error(err)
	}
	for _, none := range [][]image.Rectangle{nil, {image.Rect(700, 900, 720, 910)}} {
		if _, err := CutOut(page, none, nil, 80, 1); !errors.Is(err, ErrNoPlace) {
			t.Errorf("%v: %v, want ErrNoPlace", none, err)
		}
	}
}

func TestMark(t *testing.T) {
	pdf, err := os.ReadFile(filepath.Join("..", "..", "testdata", "papers", "syrup-feeding.pdf"))
	if err != nil {
		t.Fatal(err)
	}
	notes := []Note{
		{ID: "q1", Page: 1, Boxes: []paper.Box{{X0: 10000, Y0: 60000, X1: 14000, Y1: 61000}}, Text: "3.1 (95% CI 2.3 to 3.9): SD 1.89", By: "AB"},
		{ID: "q2", Page: 2, Boxes: []paper.Box{{X0: 20000, Y0: 60000, X1: 24000, Y1: 61000}, {X0: 20000, Y0: 59000, X1: 24000, Y1: 60000}}, Text: "11.8 (SD 2.1)", By: "AB"},
		{ID: "q3", Page: 2, Text: "no place"},
	}
	out, err := Mark(pdf, notes)
	if err != nil {
		t.Fatal(err)
	}
	marked, err := api.Annotations(bytes.NewReader(out), nil, model.NewDefaultConfiguration())
	if err != nil {
		t.Fatal(err)
	}
	n := 0
	for _, kinds := range marked {
		n += len(kinds[model.AnnHighLight].Map)
	}
	if n != 2 {
		t.Errorf("%d highlights, want 2", n)
	}
	if _, err := Mark(pdf, notes[2:]); !errors.Is(err, ErrNoPlace) {
		t.Errorf("nothing to mark: %v", err)
	}
	for _, broken := range [][]byte{nil, []byte("%PDF-1.7\nno more"), pdf[:len(pdf)/2]} {
		if _, err := Mark(broken, notes); err == nil {
			t.Errorf("%d bytes of a broken PDF were marked", len(broken))
		}
	}
}
