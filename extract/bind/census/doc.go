// Package census reads out of a paper's running text how many took part: the
// whole sample, as enrolled and as analysed, and the size of each group where
// all are alike. Tables and sentences that print no n of their own fall back on
// it.
//
// It gives a number only where the paper's own counts agree; a paper that
// enrolled 31 and lost some without saying how many were analysed gives 31 for
// the start of the study and nothing for later times.
package census
