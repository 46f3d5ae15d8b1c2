// Package grid finds the tables of a paper and reads their grid.
//
// [FindAll] takes the upright words of every page and direction (words.Frame)
// and gives the table regions of each: which words are caption, body and notes.
// [Region.Read] turns a region into a paper.Table; a table that goes on in the
// next column or on the next page is read with its first region.
//
// A table is found by its label ("Table 2"), above it, below it or in a narrow
// column left of it, or by being plainly one: rules of one width with rows of
// figures between them. Its sides come from the rules drawn around it or, where
// there are none, from the prose beside it; its end from the last rule, from
// notes in smaller type, from prose. The columns come from the white corridors
// through all rows of the body together, each corridor voted on by the lines
// that have words on both sides of it; the rows from rules, line pitch and what
// the lines say; the tree of column headings from rules, from what repeats
// below a heading and from where its middle or left edge stands.
//
// A phrase, a number or a column is never judged here for what it means in the
// paper; only for what can stand in one cell.
//
// Everything is compared as integers of 1/100 point. Inside the package y grows
// downwards from the top of the page, so that rows and lines sort as read.
package grid
