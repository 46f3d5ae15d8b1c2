package pdf

import (
	"image"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/engine"
)

// Pictures draws the pages of one PDF. It is not safe for use by several
// goroutines at once, and holds some 50 MB while it is open; each call's memory
// is bounded whatever the page.
type Pictures struct{ doc *engine.Document }

// OpenPictures opens a PDF for drawing. The content must not change while it
// is open. Close it.
func OpenPictures(content []byte) (*Pictures, error) {
	if err := looksLikePDF(content); err != nil {
		return nil, err
	}
	eng, err := engine.Shared(nil)
	if err != nil {
		return nil, err
	}
	doc, err := eng.Open(content)
	if err != nil {
		return nil, fileError(err)
	}
	return &Pictures{doc}, nil
}

// Close frees the PDF.
func (p *Pictures) Close() { p.doc.Close() }

// NumPage is the number of pages.
func (p *Pictures) NumPage() int { return p.doc.NumPage() }

// Facts gives the visible box and the rotation of a page, 1-based.
func (p *Pictures) Facts(number int) (paper.Page, error) { return p.doc.Facts(number) }

// Page draws a page, 1-based, as a viewer shows it, with scale pixels a point
// (2 is 144 dots an inch). A picture of more than 16 million pixels is refused.
func (p *Pictures) Page(number int, scale float64) (*image.RGBA, error) {
	return p.doc.Render(number, scale)
}

// PageWide draws a page as [Pictures.Page] does, width pixels wide. The page is
// parsed once: asking [Pictures.Facts] for the scale would parse it twice.
func (p *Pictures) PageWide(number, width int) (*image.RGBA, error) {
	return p.doc.RenderWide(number, width)
}

// OnPicture gives where a box of a page stands in the picture that
// [Pictures.Page] draws of it at the scale.
func OnPicture(page paper.Page, scale float64, b paper.Box) image.Rectangle {
	return engine.OnPicture(page, scale, b)
}
