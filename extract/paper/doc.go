// Package paper is the model of one paper as halfspan reads it: a Document of
// pages and of blocks in reading order, every piece of text with the Place it
// was read from, every table as a grid of cells.
//
// Readers (extract/pdf with extract/layout, extract/plain, extract/jats) fill
// the model; extract/bind reads it; the checking desk draws from it. The
// package holds data and small look-ups only. It imports nothing of the
// project and may not know where a document came from, what a number means or
// what will be done with it.
//
// Coordinates are integers of 1/100 point in the page's own, unrotated PDF user
// space (x to the right, y upwards), so that comparing and sorting them gives
// the same answer on every machine. Text offsets are byte offsets.
package paper
