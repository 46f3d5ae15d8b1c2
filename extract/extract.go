package extract

import (
	"bytes"
	"cmp"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"path/filepath"
	"slices"
	"strings"

	"halfspan/extract/bind/background"
	"halfspan/extract/bind/prose"
	"halfspan/extract/bind/scale"
	"halfspan/extract/bind/table"
	"halfspan/extract/jats"
	"halfspan/extract/layout"
	"halfspan/extract/paper"
	"halfspan/extract/pdf"
	"halfspan/extract/plain"
	"halfspan/extract/result"
)

// Options say how a paper is to be read.
type Options struct {
	OCR       bool      // read page images without text through tesseract, where it is on PATH
	OneReader bool      // read a PDF by the sandboxed engine alone: for one over which a process was lost
	Progress  func(int) // called after each page with its number, may be nil: the sign of life

	Preparing   func()    // called once if the PDF reader must first be compiled (some seconds), may be nil
	Recognising func(int) // called with the number of a page before tesseract reads it (up to two minutes), may be nil
}

// xmlEndings are the file name endings of article XML.
var xmlEndings = []string{".xml", ".nxml"}

// Read turns the content of the file at path into a Document. The format is
// told by content, not by name. An error says what is wrong with the file and
// what to do; what could be read in part comes back with Document.Problems.
func Read(path string, content []byte, opt Options) (*paper.Document, error) {
	switch {
	case pdf.IsPDF(content), strings.EqualFold(filepath.Ext(path), ".pdf"):
		// What only its name calls a PDF is told so by the PDF reader.
		return readPDF(path, content, opt)
	case jats.Is(content), bytes.HasPrefix(content, []byte("<?xml")), len(content) > 0 && slices.Contains(xmlEndings, strings.ToLower(filepath.Ext(path))):
		// XML that is no article, or XML by its name only, is told so by the
		// article reader.
		return jats.Read(path, content)
	}
	return plain.Read(path, content)
}

// readPDF reads the glyphs of a PDF and lays them out.
func readPDF(path string, content []byte, opt Options) (*paper.Document, error) {
	glyphs, err := pdf.Read(content, pdf.Options{OCR: opt.OCR, OneReader: opt.OneReader, Progress: opt.Progress, Preparing: opt.Preparing, Recognising: opt.Recognising})
	if err != nil {
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	arranged := layout.Arrange(glyphs.Pages)
	sum := sha256.Sum256(content)
	doc := &paper.Document{
		Path: path, SHA256: hex.EncodeToString(sum[:]), Format: paper.PDF, Title: cmp.Or(arranged.Title, glyphs.Title),
		Blocks: arranged.Blocks, Problems: glyphs.Problems,
	}
	for i := range glyphs.Pages {
		doc.Pages = append(doc.Pages, glyphs.Pages[i].Page)
		doc.Doubts = append(doc.Doubts, glyphs.Pages[i].Doubts...)
	}
	for i := range arranged.Pages {
		doc.Printed = append(doc.Printed, arranged.Pages[i].Text())
	}
	return doc, nil
}

// Find gives every result that is printed in the document, in reading order.
func Find(doc *paper.Document) []result.Result {
	back := background.Of(doc)
	tables := table.Find(doc, back)
	found := merge(prose.Find(doc, back, tables), tables)
	echoes(found)
	scale.Set(doc, found)
	raiseDoubts(doc, found)
	return found
}
