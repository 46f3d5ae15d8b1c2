// Package words turns the glyphs of one page into words and line segments.
//
// [Read] is the only entry point. It sorts the glyphs of a page by the
// direction they are printed in and gives each direction a [Frame] of its own,
// in which the text stands upright: lines run to the right (+x) and follow one
// another downwards (falling y). In a Frame everything (words, lines, rules,
// images) is in that upright space; [Frame.ToPage] leads back to the page. The
// glyphs inside a Word keep their page coordinates.
//
// A [Line] is a segment: words on one baseline with no gap wider than one em
// between them. The cells of a table row, and the two columns of a page, are
// therefore separate Lines with the same Base; who needs whole rows groups the
// words by Base. Words are cut at gaps measured against the font size; a space
// in the content stream only tips the balance where the gap is narrow.
//
// Superscripts and subscripts stand in the line they belong to as words of
// their own with Shift set and Glued true where no space is printed before
// them: "12.3" followed by a glued Raised "a" is 12.3 with a mark.
//
// Invariants: every glyph that prints something is in exactly one Word, except
// a second copy of the same glyph on the same spot, which fonts without a bold
// face use to look bold. All lengths are integers of 1/100 point.
package words
