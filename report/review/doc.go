// Package review is what a person sees of a ledger in the terminal: the review
// table ([Table]), the summary of a scan ([Summary]), the checking session
// ([Session]) and the comparison of two checkers ([Compare]).
//
// Rows come in from report/ledger and are put into words here; every decision
// goes back through ledger.Book.Decide. The package knows no files and no
// terminal: it writes to an io.Writer of a width that it is told, and reads keys
// from whoever gives them.
package review
