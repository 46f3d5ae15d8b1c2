// Package export writes what was decided for use elsewhere: the confirmed values
// as CSV with a codebook or as JSON Lines ([CSV], [JSONLines], [Codebook]), and
// all results as a spreadsheet in which a person can decide ([WriteSheet],
// [ReadSheet]).
//
// Only confirmed and amended results are exported ([Confirmed]), as they were
// when they were decided. The same decisions give the same bytes. Text that a
// spreadsheet program would run as a formula is made harmless; numbers stay as
// they are printed. The package writes to an io.Writer; it opens no ledger and
// takes no decision: what is read from a sheet comes back as drafts.
package export
