package main

import (
	"context"
	"errors"
	"fmt"
	"html"
	"os"
	"os/exec"
	"os/signal"
	"path/filepath"
	"runtime"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"halfspan/convert/working"
	"halfspan/extract"
	"halfspan/report/desk"
	"halfspan/report/ledger"
)

type deskFlags struct {
	ledgerFlags
	filter    desk.Filter
	noOpen    bool
	typeFirst bool
	typeTenth bool
	settle    string
}

func newDesk(s *streams) *cobra.Command {
	var f deskFlags
	cmd := &cobra.Command{
		Use:   "desk [PATH]",
		Short: "check the results in the browser, beside the page",
		Long: `Open the checking desk in the browser: the page of the paper with the result
outlined, what was read in each field, how the SD was reached, and one key to
decide. It runs on this machine only and sends nothing anywhere; the address works
once, in one browser. Ctrl-C ends it, or "Close desk" in the page. Every decision
is in the ledger before the page says so.

Results that do not fit --outcome, --arm, --time or --section, baseline values and
results quoted from other studies are set aside: counted, and one key away.

` + cautionsHelp,
		Example: `  halfspan desk papers --checker AB
  halfspan desk --outcome "colony mass" --time "week 6"
  halfspan desk --type-first                 type what you see before it is shown
  halfspan desk --settle AB,CD --checker EF  settle what two checkers see differently`,
		Args: cobra.MaximumNArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error { return runDesk(cmd.Context(), s, args, &f) },
	}
	f.add(cmd)
	flags := cmd.Flags()
	flags.StringVar(&f.filter.Outcome, "outcome", "", "put results of this outcome first")
	flags.StringVar(&f.filter.Arm, "arm", "", "put results of this arm first")
	flags.StringVar(&f.filter.Time, "time", "", "put results of this time first")
	flags.StringVar(&f.filter.Section, "section", "", "put results of this section or table first")
	flags.BoolVar(&f.noOpen, "no-open", false, "print the address and open no browser")
	flags.BoolVar(&f.typeFirst, "type-first", false, "hide every value until you have typed what you see")
	flags.BoolVar(&f.typeTenth, "type-tenth", false, "the same for a random tenth of the results")
	flags.StringVar(&f.settle, "settle", "", "settle the differences between two checkers, such as AB,CD")
	cmd.MarkFlagsMutuallyExclusive("type-first", "type-tenth", "settle")
	return cmd
}

func runDesk(ctx context.Context, s *streams, args []string, f *deskFlags) error {
	book, err := f.decide(args, nil)
	if err != nil {
		return err
	}
	defer book.Close()
	if err := book.Decisions().Writable(); err != nil {
		return err
	}
	pool := newPool(2)
	defer pool.Close()
	opt := desk.Options{Book: book, Papers: &deskPapers{pool: pool}, ReadTyped: readTyped, Flags: flagMeanings(), Filter: f.filter}
	switch {
	case f.typeFirst:
		opt.TypeFirst = 1
	case f.typeTenth:
		opt.TypeFirst = 0.1
	case f.settle != "":
		if err := openSides(&opt, book.Ledger().Path(), f.settle); err != nil {
			return err
		}
		defer opt.Sides[0].Close()
		defer opt.Sides[1].Close()
	}
	d, err := desk.New(opt)
	if err != nil {
		return err
	}
	listener, err := desk.Listen()
	if err != nil {
		return err
	}
	address := d.Prepare(listener)
	if f.noOpen {
		fmt.Fprintf(s.out, "%s\n", address)
	} else {
		remove, err := openBrowser(address)
		if err != nil {
			fmt.Fprintf(s.err, "halfspan: %v\nOpen this address yourself; it works once:\n", err)
			fmt.Fprintf(s.out, "%s\n", address)
		}
		defer remove()
	}
	fmt.Fprintln(s.err, "The desk is open. Ctrl-C ends it.")
	ctx, stop := signal.NotifyContext(ctx, os.Interrupt)
	defer stop()
	return d.Serve(ctx, listener)
}

func openSides(opt *desk.Options, path, settle string) error {
	names := strings.Split(settle, ",")
	if len(names) != 2 {
		return usageError("--settle takes the initials of two checkers, such as AB,CD")
	}
	checkers, err := ledger.Checkers(path)
	if err != nil {
		return err
	}
	for i, name := range names {
		initials, err := ledger.Initials(name)
		if err != nil {
			return usageError("%v", err)
		}
		if !slices.Contains(checkers, initials) {
			return usageError("%s has decided nothing here: there are decisions of %s", initials, strings.Join(checkers, ", "))
		}
		opt.Settle[i] = initials
	}
	if opt.Settle[0] == opt.Settle[1] {
		return usageError("--settle takes two different checkers")
	}
	for i, initials := range opt.Settle {
		file, err := ledger.OpenDecisions(path, initials)
		if err != nil {
			if i == 1 {
				opt.Sides[0].Close()
			}
			return err
		}
		opt.Sides[i] = file
	}
	return nil
}

// openBrowser opens the address through a private file that leads there: on the
// command line of a browser, any user of the machine could read it. remove takes
// the file away.
func openBrowser(address string) (remove func(), err error) {
	dir, err := os.MkdirTemp("", "halfspan-desk-")
	if err != nil {
		return func() {}, fmt.Errorf("the browser cannot be opened: %w", err)
	}
	remove = func() { _ = os.RemoveAll(dir) }
	file := filepath.Join(dir, "desk.html")
	page := `<!DOCTYPE html><meta charset="utf-8"><meta http-equiv="refresh" content="0;url=` + html.EscapeString(address) + `"><title>halfspan desk</title>`
	if err := os.WriteFile(file, []byte(page), 0o600); err != nil {
		return remove, fmt.Errorf("the browser cannot be opened: %w", err)
	}
	var command []string
	switch runtime.GOOS {
	case "darwin":
		command = []string{"open", file}
	case "windows":
		command = []string{"rundll32", "url.dll,FileProtocolHandler", file}
	default:
		command = []string{"xdg-open", file}
	}
	if _, err := exec.LookPath(command[0]); err != nil {
		return remove, errors.New("no program that opens a browser is found")
	}
	if err := exec.Command(command[0], command[1:]...).Start(); err != nil {
		return remove, fmt.Errorf("the browser cannot be opened: %w", err)
	}
	return remove, nil
}

// readTyped reads one result typed as papers print it.
func readTyped(text string) (ledger.Item, error) {
	doc, err := extract.Read("typed", []byte(text+"\n"), extract.Options{})
	if err != nil {
		return ledger.Item{}, fmt.Errorf("%q cannot be read: %w", text, err)
	}
	found := extract.Find(doc)
	if len(found) == 0 {
		return ledger.Item{}, fmt.Errorf("no result is seen in %q: write it as papers do, such as 12.4 (95%% CI 11.8 to 13.0), n = 42", text)
	}
	if len(found) > 1 {
		return ledger.Item{}, fmt.Errorf("%q holds %d results: type one", text, len(found))
	}
	found[0].Mates = nil
	return ledger.Item{Result: found[0], Working: working.Work(working.Facts{}, found)[0]}, nil
}

// flagMeanings explains the flags to the person at the desk.
func flagMeanings() map[string]desk.Meaning {
	out := map[string]desk.Meaning{}
	for _, f := range working.Flags() {
		out[f.Name] = desk.Meaning{Meaning: f.Meaning, Todo: f.Do}
	}
	return out
}
