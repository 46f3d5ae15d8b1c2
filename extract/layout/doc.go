// Package layout turns the glyphs of a paper's pages into words, lines, columns,
// blocks and tables in reading order.
//
// It compares coordinates as integers, so that the same glyphs give the same
// blocks everywhere. It does not know who read the glyphs, and nothing of what
// the numbers in a table mean.
package layout
