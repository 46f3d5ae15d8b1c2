// Package result is what halfspan finds in a paper: a Result is one printed
// estimate with one interval or one spread, in the context it was read in, with
// the Place of everything that was read and the Evidence that the working may
// use to judge it.
//
// Values are kept as printed (strings, minus as '-', decimal mark '.', no
// thousands marks). What the paper does not say stays empty. The package
// imports extract/paper only; it computes nothing.
package result
