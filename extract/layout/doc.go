// Package layout turns the glyphs of a paper's pages into words, lines, columns,
// blocks and tables in reading order.
//
// [Arrange] is the entry point: pages of glyphs go in, the blocks of the paper
// and the plain text of each page come out. It works in this order, each step
// in a file of its own:
//
//   - words (package words): glyphs to words and line segments, one upright
//     frame for each direction that text is printed in;
//   - furniture: running heads, page numbers, download lines and line numbers,
//     known by their repetition over the pages;
//   - tables (package grid): their words leave the flow, the table stands where
//     it was met;
//   - gutters: tall white stripes with running text on both sides;
//   - columns: what stands between the same gutters, in reading order;
//   - blocks: headings, paragraphs, captions, notes, references;
//   - joins: a paragraph that goes on in the next column or on the next page;
//   - zones: abstract, methods, results and so on, by the headings.
//
// It compares coordinates as integers, so that the same glyphs give the same
// blocks everywhere. It does not know who read the glyphs, and nothing of what
// the numbers in a table mean. Nothing that is printed is dropped: what is not
// searched for results is a block of kind Furniture or Reference.
package layout
