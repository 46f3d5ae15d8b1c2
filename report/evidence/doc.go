// Package evidence shows where exported results stand: a cut-out of the page with
// the printed result outlined ([CutOut]), and a copy of a PDF with the results
// highlighted and a note on each ([Mark]), which ordinary PDF viewers show.
//
// It draws on pictures and files that it is given; it reads no page, opens no
// ledger and knows no statistics.
package evidence
