// Command halfspan reads a folder of papers, finds the results printed with an
// interval or a spread, works out the SD behind them where that is legitimate,
// lets a person check each against the page and exports what was confirmed.
package main

import "os"

func main() {
	os.Exit(run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
}
