// Package glyphs is halfspan's own reader of PDF pages, on the objects,
// streams and decryption of github.com/ledongthuc/pdf. Content streams, fonts
// and character maps are read here; the library's own text functions ignore
// what most papers need.
//
// In goes the content of one file, out come pages of glyphs, each with the
// font and character code it was shown by. Start with [Open]. What the library
// or this package cannot read is an error of this reader, not of the paper:
// the other reader (extract/pdf/engine) may well read it. [Error] says which
// part failed.
//
// Foreign bytes can neither crash nor exhaust it: panics of the library are
// turned into errors, and every loop over foreign data burns fuel (fuel.go),
// the library's own loops included, since they must read the file through us.
// Two things remain for the process around it: single allocations that the
// library makes on a file's word are refused beforehand (scan.go) as far as
// they are known.
package glyphs

//go:generate go run gen/main.go
