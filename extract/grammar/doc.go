// Package grammar reads one stretch of printed text and returns what is printed
// there: numbers exactly as printed, intervals with or without a level, spreads,
// sample sizes, p values and test statistics, each with its byte positions.
//
// It is a lexer and a recursive-descent parser. It never sees a page, a table or
// a document, and never guesses what a ± means.
package grammar
