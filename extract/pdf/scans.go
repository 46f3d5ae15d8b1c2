package pdf

import (
	"fmt"

	"halfspan/extract/paper"
)

// A page that is mostly a picture, with hardly a glyph: a scan.
const (
	fewGlyphs = 100 // a stamp or a running head over the picture
	manyRules = 60  // drawings that may be letters turned into shapes
)

// pictures looks at the pages that carry pictures in place of text: says so,
// and reads them through tesseract where that was asked for.
func (r *reading) pictures() {
	var scans []int
	for i := range r.out.Pages {
		p := &r.out.Pages[i]
		visible, hidden := countGlyphs(p)
		covered := coverage(p)
		switch {
		case p.Page.Reader == "":
		case visible < fewGlyphs && hidden >= fewGlyphs && covered >= 60:
			r.problem(p.Page.Number, "text-layer", false, fmt.Sprintf(
				"Page %d is a picture with a hidden layer of text, probably made by a text recogniser: look at every number on it.", p.Page.Number))
		case visible+hidden < fewGlyphs && covered >= 60, visible+hidden == 0 && (covered > 0 || len(p.Rules) > manyRules):
			scans = append(scans, i)
		}
	}
	if len(scans) == 0 {
		return
	}
	ocr, err := newRecogniser(r.opt.OCR)
	for _, i := range scans {
		p := &r.out.Pages[i]
		n := p.Page.Number
		if ocr == nil {
			r.problem(n, "no-text", true, fmt.Sprintf("Page %d is a picture without text: %s.", n, err))
			continue
		}
		if r.opt.Recognising != nil {
			r.opt.Recognising(n)
		}
		read, err := ocr.page(r.doc, p.Page)
		if err != nil {
			r.problem(n, "no-text", true, fmt.Sprintf("Page %d is a picture without text, and tesseract could not read it: %v.", n, err))
			continue
		}
		read.Rules, read.Images = p.Rules, p.Images
		*p, r.marks[i] = read, nil
		r.problem(n, "ocr", false, fmt.Sprintf("Page %d is a picture; its text was recognised by tesseract: look at every number on it.", n))
		if r.opt.Progress != nil {
			r.opt.Progress(n)
		}
	}
}

func countGlyphs(p *paper.GlyphPage) (visible, hidden int) {
	for i := range p.Glyphs {
		switch g := &p.Glyphs[i]; {
		case g.Text == " ":
		case g.Invisible:
			hidden++
		default:
			visible++
		}
	}
	return visible, hidden
}

// coverage is the share of the page, in percent, that the largest picture on it
// covers.
func coverage(p *paper.GlyphPage) int64 {
	area := func(b paper.Box) int64 {
		return int64(max(0, b.X1-b.X0)) * int64(max(0, b.Y1-b.Y0))
	}
	whole := max(area(p.Page.Box), 1)
	most := int64(0)
	for _, b := range p.Images {
		in := paper.Box{X0: max(b.X0, p.Page.Box.X0), Y0: max(b.Y0, p.Page.Box.Y0), X1: min(b.X1, p.Page.Box.X1), Y1: min(b.Y1, p.Page.Box.Y1)}
		most = max(most, area(in))
	}
	return most * 100 / whole
}
