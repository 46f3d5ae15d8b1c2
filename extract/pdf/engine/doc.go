// Package engine reads and draws PDF pages by go-pdfium: the PDF library of a
// widely used browser, compiled to WebAssembly and run in a sandbox that sees
// no file, no network and no more than a fixed amount of memory.
//
// In goes the content of one file, out come paper.GlyphPage values and page
// pictures. Start with [Engine.Open]. The engine mends nothing and compares
// nothing; extract/pdf does.
//
// The engine calls the functions of the compiled library directly (raw.go):
// go-pdfium's own methods allocate and free inside the sandbox for each of
// several values per character, which makes a page four times slower.
package engine
