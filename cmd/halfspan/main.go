// Command halfspan reads a folder of papers, finds the results printed with an
// interval or a spread, works out the SD behind them where that is legitimate,
// lets a person check each against the page and exports what was confirmed.
//
// One file holds one command: it parses flags, calls one function of the
// packages below and prints. The program also starts itself as worker processes
// (see halfspan/extract/worker), in which all papers are read.
package main

import (
	"os"

	"halfspan/extract/worker"
)

func main() {
	worker.Serve(work)
	os.Exit(run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
}
