// Package pdf turns a PDF into pages of glyphs with their boxes, read by two
// unrelated readers: go-pdfium in its sandbox, and our own glyph reader on the
// objects of github.com/ledongthuc/pdf. Where their digits differ it says so.
//
// It knows no words, lines or tables (extract/layout) and no results.
package pdf
