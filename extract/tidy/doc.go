// Package tidy does what every reader of tables has to do once the cells stand
// in their grid: find the heading rows, take out blank rows, turn closing rows
// into notes, part a paragraph into the notes it holds, rank indentation. It
// knows nothing of the format a table was read from, nor of results.
package tidy
