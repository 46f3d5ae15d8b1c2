// Package grammar reads one stretch of printed text and returns what is printed
// there: numbers exactly as printed, intervals with or without a level, spreads,
// sample sizes, p values and test statistics, each with its byte positions.
//
// A text goes in as a string with its raised and lowered ranges ([Text]). [Lex]
// cuts it into tokens; [Read] gives everything that running text prints, in
// order; [ParseCell] what one table cell holds; [ParsePhrase] what a heading,
// label or note says of the values it is about. What cannot be told from the
// print alone stays open: a single number in brackets is just that.
//
// It is a lexer and a recursive-descent parser, one method a rule, each with its
// production and an example, with bounded look-ahead and a limit on tokens, so
// that the time is linear in the text. It never sees a page, a table or a
// document, and never guesses what a ± means. To add a printed form: a row in
// vocab.go for new words, a rule or an alternative in rules.go or bounds.go for a
// new shape, and numbered cases in testdata, with look-alikes that must be refused.
package grammar
