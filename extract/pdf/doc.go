// Package pdf turns a PDF into pages of glyphs with their boxes, read by two
// unrelated readers: go-pdfium in its sandbox (engine), and our own glyph
// reader on the objects of github.com/ledongthuc/pdf (glyphs).
//
// In goes the content of one file; out come [Glyphs]: every page with its
// glyphs in content order, its drawn lines and pictures, the places whose
// reading is not beyond doubt, and the problems that a person must be told. A
// file that cannot be read at all is refused by one of the errors of this
// package, each saying what to do. Start with [Read]; [OpenPictures] draws
// pages for the checking desk.
//
// Invariants:
//   - Every digit and sign is read by both readers until the way of reading it
//     is proved (proof.go); where they differ the engine's reading stands, and
//     the place carries a doubt with both readings (agree.go).
//   - What the file calls a sign is changed only on evidence: from the font
//     (glyphs/mathfont.go), or from the use of the sign in this paper
//     (learn.go). Each change is a doubt and a problem of kind "repaired".
//   - What prints nothing is dropped, ligatures become letters, spaces in the
//     stream stay glyphs of text " " (clean.go). Glyphs that a viewer does not
//     show are marked invisible, not dropped.
//   - A problem is marked lost only where print may be missing: an unreadable
//     page, a page cut short, a picture without text.
//
// The same content gives the same result, whatever the load. The package knows
// no words, lines or tables (extract/layout) and no results.
package pdf
