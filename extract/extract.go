package extract

import (
	"bytes"
	"fmt"

	"halfspan/extract/bind/prose"
	"halfspan/extract/bind/table"
	"halfspan/extract/jats"
	"halfspan/extract/paper"
	"halfspan/extract/plain"
	"halfspan/extract/result"
)

// Options say how a paper is to be read.
type Options struct {
	OCR      bool      // read page images without text through tesseract, where it is on PATH
	Progress func(int) // called after each page with its number, may be nil: the sign of life

	Preparing func() // called once if the PDF reader must first be compiled (some seconds), may be nil
}

// Read turns the content of the file at path into a Document. The format is
// told by content, not by name. An error says what is wrong with the file and
// what to do; what could be read in part comes back with Document.Problems.
func Read(path string, content []byte, opt Options) (*paper.Document, error) {
	switch {
	case isPDF(content):
		return nil, fmt.Errorf("%s: no reader for this kind of file", path)
	case jats.Is(content):
		return jats.Read(path, content)
	}
	return plain.Read(path, content)
}

// isPDF looks for the header of a PDF, which may stand behind other bytes.
func isPDF(content []byte) bool {
	const look = 1024
	return bytes.Contains(content[:min(len(content), look)], []byte("%PDF-"))
}

// Find gives every result that is printed in the document, in reading order.
func Find(doc *paper.Document) []result.Result {
	return merge(prose.Find(doc), table.Find(doc))
}
