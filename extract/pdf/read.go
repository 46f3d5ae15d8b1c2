package pdf

import (
	"errors"
	"fmt"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/engine"
)

// What a file may turn out to be instead of a readable PDF; test with
// errors.Is. The messages say what to do.
var (
	ErrEmpty    = errors.New("the file is empty: download it again")
	ErrNotPDF   = errors.New("this is not a PDF, whatever its name: look at it in a text editor, it may be a web page saved under the wrong name")
	ErrDamaged  = errors.New("the PDF is damaged, perhaps cut short: download it again, or open it in a PDF viewer and save it anew")
	ErrPassword = errors.New("the PDF is encrypted and asks for a password: save a copy without one and scan that")
	ErrNoPages  = errors.New("the PDF has no pages")
)

// Options say how a PDF is to be read.
type Options struct {
	OCR       bool      // read page images without text through tesseract, where it is on PATH
	Progress  func(int) // called after each page with its number, may be nil
	Preparing func()    // called once if the PDF reader must first be compiled (some seconds), may be nil
}

// Glyphs is what a PDF says, page by page.
type Glyphs struct {
	Title    string
	Pages    []paper.GlyphPage // every page of the file, in order, also those that nobody could read
	Problems []paper.Problem
}

// Read reads the content of a PDF. An error means that nothing could be read
// and says why; what could not be read of single pages stands in Problems.
func Read(content []byte, opt Options) (*Glyphs, error) {
	if err := looksLikePDF(content); err != nil {
		return nil, err
	}
	eng, err := engine.Shared(opt.Preparing)
	if err != nil {
		return nil, err
	}
	doc, err := eng.Open(content)
	if err != nil {
		return nil, fileError(err)
	}
	defer doc.Close()
	if doc.NumPage() == 0 {
		return nil, ErrNoPages
	}
	out := &Glyphs{Title: doc.Title()}
	for n := 1; n <= doc.NumPage(); n++ {
		page, cut, err := doc.Page(n)
		if err != nil {
			page = paper.GlyphPage{Page: paper.Page{Number: n}}
			out.Problems = append(out.Problems, paper.Problem{Page: n, Kind: "page-unreadable", Lost: true,
				Text: fmt.Sprintf("Page %d could not be read (%v): look at it in a PDF viewer.", n, err)})
		}
		if cut {
			out.Problems = append(out.Problems, paper.Problem{Page: n, Kind: "cut-short", Lost: true,
				Text: fmt.Sprintf("Page %d holds more characters than a printed page can; the rest was not read.", n)})
		}
		out.Pages = append(out.Pages, page)
		if opt.Progress != nil {
			opt.Progress(n)
		}
	}
	return out, nil
}

func fileError(err error) error {
	switch {
	case errors.Is(err, engine.ErrPassword), errors.Is(err, engine.ErrSecurity):
		return ErrPassword
	case errors.Is(err, engine.ErrFormat):
		return ErrDamaged
	}
	return err
}
