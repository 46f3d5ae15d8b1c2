// Package desk is the checking desk: a server on this machine only that shows,
// in the person's own browser, each result beside the very place on the page it
// was read from, and takes decisions into the checker's ledger.
//
// It reads and writes ledgers through report/ledger, has pages drawn and papers
// read through [Papers] (in worker processes: a PDF is foreign bytes) and works
// typed values through [Work]. It finds no results and converts nothing itself.
// Start with [New].
package desk
