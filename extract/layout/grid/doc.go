// Package grid finds the tables on a page and reads their grid.
//
// [Find] takes the upright words of one page direction (words.Frame) and gives
// its table regions: which words are caption, body and notes. [Region.Read]
// turns a region into a paper.Table, and [Join] puts together what is
// continued on the next page.
//
// A table is found by its label ("Table 2"), above or below, or by being
// plainly one: several rows whose numbers stand in columns. Its sides come from
// the rules drawn around it or, where there are none, from the prose beside
// it; its end from the last rule, from notes in smaller type, from prose. The
// columns come from the white corridors through all rows of the body together;
// rows from rules, line pitch and what the lines say; the tree of column
// headings from the extent of the head cells.
//
// Everything is compared as integers of 1/100 point. Inside the package y grows
// downwards from the top of the page, so that rows and lines sort as read.
package grid
