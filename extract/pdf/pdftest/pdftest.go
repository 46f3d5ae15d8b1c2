// Package pdftest makes small PDFs for tests: pages from content streams, with
// whatever fonts and objects a case needs. It is no general writer; it writes
// what the tests say, sound or not.
package pdftest

import (
	"bytes"
	"fmt"
	"maps"
	"slices"
)

// Doc is a PDF to be written.
type Doc struct {
	Pages []Page
	// Fonts are font dictionaries by name; F1 is Helvetica in WinAnsiEncoding
	// where nothing else is said.
	Fonts map[string]string
	// XObjects are references or objects by name, for the resources.
	XObjects map[string]string
	// Properties are property lists by name, for the resources.
	Properties map[string]string
	// Objects are further objects; the first gets number [FirstObject].
	Objects []string
	// Trailer is put into the trailer dictionary.
	Trailer string
	// Info is the document's description dictionary.
	Info string
}

// Page is one page of a Doc.
type Page struct {
	Content  string
	Parts    []string // further content streams
	Rotate   int
	Crop     [4]int
	MediaBox string // "[0 0 612 792]" where empty
}

// FirstObject is the number of the first of Doc.Objects.
const FirstObject = 5

// Stream gives an object with a stream.
func Stream(dict, data string) string {
	return fmt.Sprintf("<< %s /Length %d >>\nstream\n%s\nendstream", dict, len(data), data)
}

// Bytes writes the PDF.
func (d *Doc) Bytes() []byte {
	objects := []string{"<< /Type /Catalog /Pages 2 0 R >>", "", d.resources(), "<< " + d.Info + " >>"}
	objects = append(objects, d.Objects...)
	kids := ""
	for _, p := range d.Pages {
		refs := ""
		for _, c := range append([]string{p.Content}, p.Parts...) {
			objects = append(objects, Stream("", c))
			refs += fmt.Sprintf("%d 0 R ", len(objects))
		}
		box := p.MediaBox
		if box == "" {
			box = "[0 0 612 792]"
		}
		page := fmt.Sprintf("<< /Type /Page /Parent 2 0 R /MediaBox %s /Resources 3 0 R /Contents [%s] /Rotate %d", box, refs, p.Rotate)
		if p.Crop != ([4]int{}) {
			page += fmt.Sprintf(" /CropBox [%d %d %d %d]", p.Crop[0], p.Crop[1], p.Crop[2], p.Crop[3])
		}
		objects = append(objects, page+" >>")
		kids += fmt.Sprintf("%d 0 R ", len(objects))
	}
	objects[1] = fmt.Sprintf("<< /Type /Pages /Kids [%s] /Count %d >>", kids, len(d.Pages))
	return Write(objects, d.Trailer+" /Info 4 0 R")
}

func (d *Doc) resources() string {
	fonts := map[string]string{"F1": "<< /Type /Font /Subtype /Type1 /BaseFont /Helvetica /Encoding /WinAnsiEncoding >>"}
	for name, f := range d.Fonts {
		fonts[name] = f
	}
	return "<< /Font " + dict(fonts) + " /XObject " + dict(d.XObjects) + " /Properties " + dict(d.Properties) + " >>"
}

func dict(entries map[string]string) string {
	keys := slices.Sorted(maps.Keys(entries))
	out := "<<"
	for _, k := range keys {
		out += " /" + k + " " + entries[k]
	}
	return out + " >>"
}

// Write writes objects, numbered from 1, with a cross-reference table. The
// first is the catalog.
func Write(objects []string, trailer string) []byte {
	var b bytes.Buffer
	b.WriteString("%PDF-1.7\n%\xE2\xE3\xCF\xD3\n")
	var offsets []int
	for i, o := range objects {
		offsets = append(offsets, b.Len())
		fmt.Fprintf(&b, "%d 0 obj\n%s\nendobj\n", i+1, o)
	}
	start := b.Len()
	fmt.Fprintf(&b, "xref\n0 %d\n0000000000 65535 f \n", len(objects)+1)
	for _, o := range offsets {
		fmt.Fprintf(&b, "%010d 00000 n \n", o)
	}
	fmt.Fprintf(&b, "trailer\n<< /Size %d /Root 1 0 R %s >>\nstartxref\n%d\n%%%%EOF\n", len(objects)+1, trailer, start)
	return b.Bytes()
}
