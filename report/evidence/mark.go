package evidence

import (
	"bytes"
	"fmt"

	"github.com/pdfcpu/pdfcpu/pkg/api"
	"github.com/pdfcpu/pdfcpu/pkg/pdfcpu/color"
	"github.com/pdfcpu/pdfcpu/pkg/pdfcpu/model"
	"github.com/pdfcpu/pdfcpu/pkg/pdfcpu/types"

	"halfspan/extract/paper"
)

// Note is what a highlighted result says.
type Note struct {
	ID    string // of the result
	Page  int    // 1-based
	Boxes []paper.Box
	Text  string // what was confirmed and how the value was reached
	By    string // who confirmed it
}

// Mark gives a copy of a PDF with the boxes of each note highlighted and its text
// in the annotation. The copy is a new file: pages and fonts are those of the
// original. The error says why a file cannot be written anew; its original is
// untouched.
func Mark(pdf []byte, notes []Note) (out []byte, err error) {
	defer func() {
		// The library may panic on a damaged file.
		if p := recover(); p != nil {
			out, err = nil, fmt.Errorf("the PDF cannot be written anew: %v", p)
		}
	}()
	api.DisableConfigDir()
	byPage := map[int][]model.AnnotationRenderer{}
	for _, n := range notes {
		var all paper.Box
		var quads types.QuadPoints
		for _, b := range n.Boxes {
			if b.IsZero() {
				continue
			}
			all = all.Union(b)
			quads.AddQuadLiteral(quad(b))
		}
		if all.IsZero() {
			continue
		}
		ink := color.SimpleColor{R: 1, G: 0.86, B: 0.45}
		a := model.NewHighlightAnnotation(rectangle(all), 0, n.Text, n.ID, "", model.AnnPrint, &ink, 0, 0, 0, n.By, nil, nil, "", "halfspan "+n.ID, quads)
		byPage[n.Page] = append(byPage[n.Page], a)
	}
	if len(byPage) == 0 {
		return nil, ErrNoPlace
	}
	conf := model.NewDefaultConfiguration()
	conf.ValidationMode = model.ValidationRelaxed
	var b bytes.Buffer
	if err := api.AddAnnotationsMap(bytes.NewReader(pdf), &b, byPage, conf); err != nil {
		return nil, fmt.Errorf("the PDF cannot be written anew: %w", err)
	}
	return b.Bytes(), nil
}

func rectangle(b paper.Box) types.Rectangle {
	return *types.NewRectangle(float64(b.X0)/100, float64(b.Y0)/100, float64(b.X1)/100, float64(b.Y1)/100)
}

// quad gives the corners in the order that viewers expect, which is not the order
// of the standard: upper left, upper right, lower left, lower right.
func quad(b paper.Box) types.QuadLiteral {
	p := func(x, y int32) types.Point { return types.Point{X: float64(x) / 100, Y: float64(y) / 100} }
	return types.QuadLiteral{P1: p(b.X0, b.Y1), P2: p(b.X1, b.Y1), P3: p(b.X0, b.Y0), P4: p(b.X1, b.Y0)}
}
