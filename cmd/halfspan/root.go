package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"strings"
	"syscall"

	"github.com/spf13/cobra"
)

// The exit statuses of the program.
const (
	statusDone    = 0
	statusFailed  = 1 // the command failed
	statusUsage   = 2 // wrong usage
	statusPartial = 3 // done, but some papers could not be read whole
)

// statusError is an error that asks for an exit status of its own. An empty
// message means that everything has been said already.
type statusError struct {
	status  int
	message string
}

func (e *statusError) Error() string { return e.message }

func usageError(format string, args ...any) error {
	return &statusError{statusUsage, fmt.Sprintf(format, args...)}
}

// streams are where a command reads and writes.
type streams struct {
	in       io.Reader
	out, err io.Writer
}

// run is the program without the process: arguments and streams in, exit status
// out.
func run(args []string, in io.Reader, out, errOut io.Writer) int {
	s := &streams{in: in, out: out, err: errOut}
	root := newRoot(s)
	root.SetArgs(textArguments(args))
	root.SetIn(in)
	root.SetOut(out)
	root.SetErr(errOut)
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	// A second signal ends the program even where it waits for the system.
	context.AfterFunc(ctx, stop)
	err := root.ExecuteContext(ctx)
	if err == nil {
		return statusDone
	}
	status := statusFailed
	var se *statusError
	if errors.As(err, &se) {
		status = se.status
	} else if isUsage(err) {
		status = statusUsage
	}
	if message := err.Error(); message != "" {
		fmt.Fprintf(errOut, "halfspan: %s\n", message)
	}
	return status
}

// isUsage tells cobra's own complaints about the command line, which carry no
// type, from failures of a command.
func isUsage(err error) bool {
	for _, start := range []string{"unknown command", "unknown flag", "unknown shorthand", "flag needs an argument",
		"invalid argument", "accepts ", "requires at least", "required flag", "bad flag syntax"} {
		if strings.HasPrefix(err.Error(), start) {
			return true
		}
	}
	return false
}

func newRoot(s *streams) *cobra.Command {
	root := &cobra.Command{
		Use:   "halfspan",
		Short: "mean, SD and n out of published papers, checked by a person against the page",
		Long: `Read a folder of papers, find every result that is printed with an interval or a
spread, work out the SD behind it where that is legitimate, and say how sure the
reading is and why. A person checks each result against the page; only what was
confirmed is exported, with the evidence.

` + cautionsHelp,
		Example: `  halfspan scan papers     read them and print the review table
  halfspan check papers    decide result by result
  halfspan export papers   the confirmed values as CSV, with a codebook`,
		Version:       version,
		SilenceErrors: true,
		SilenceUsage:  true,
	}
	root.SetVersionTemplate(versionText())
	root.AddCommand(newDesk(s), newScan(s), newList(s), newCheck(s), newSheet(s), newAgree(s), newExport(s), newText(s), newTables(s),
		newConvert(s), newMethods(s), newFlags(s))
	return root
}
