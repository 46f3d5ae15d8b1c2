package main

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"halfspan/report/ledger"
)

// checkerVariable names the environment variable with the checker's initials.
const checkerVariable = "HALFSPAN_CHECKER"

// ledgerFlags are those of the commands that work on a ledger.
type ledgerFlags struct {
	ledger  string
	checker string
}

func (f *ledgerFlags) add(cmd *cobra.Command) {
	cmd.Flags().StringVar(&f.ledger, "ledger", "", "the ledger file (default: halfspan.ledger in PATH, here, or in the one folder here that has one)")
	cmd.Flags().StringVar(&f.checker, "checker", "", "initials of the person who decides (default: $"+checkerVariable+")")
}

// find settles which ledger is meant: the one named, that of the folder given,
// the one here, or the only one in a folder here.
func (f *ledgerFlags) find(args []string) (string, error) {
	if f.ledger != "" {
		return f.ledger, nil
	}
	if len(args) > 0 {
		info, err := os.Stat(args[0])
		switch {
		case err != nil:
			return "", pathError(args[0], err)
		case info.IsDir():
			return filepath.Join(args[0], ledger.FileName), nil
		default:
			return args[0], nil
		}
	}
	if exists(ledger.FileName) {
		return ledger.FileName, nil
	}
	entries, err := os.ReadDir(".")
	if err != nil {
		return "", fmt.Errorf("looking for a ledger: %w", err)
	}
	var found []string
	for _, e := range entries {
		if path := filepath.Join(e.Name(), ledger.FileName); e.IsDir() && exists(path) {
			found = append(found, path)
		}
	}
	switch len(found) {
	case 0:
		return "", errors.New("there is no ledger here: run 'halfspan scan FOLDER' first, or name the ledger with --ledger")
	case 1:
		return found[0], nil
	}
	return "", usageError("there are several ledgers here (%s): name one with --ledger", strings.Join(found, ", "))
}

func exists(path string) bool {
	_, err := os.Stat(path)
	return err == nil
}

// namedChecker is who was named to decide; empty if nobody was.
func (f *ledgerFlags) namedChecker() (string, error) {
	name := f.checker
	if name == "" {
		name = os.Getenv(checkerVariable)
	}
	if name == "" {
		return "", nil
	}
	initials, err := ledger.Initials(name)
	if err != nil {
		return "", usageError("%v", err)
	}
	return initials, nil
}

// onlyChecker is the one checker who has decided anything beside the ledger at
// path, or who was named in the environment; empty where that is not settled.
func onlyChecker(path string) (string, error) {
	var none ledgerFlags
	if named, err := none.namedChecker(); named != "" || err != nil {
		return named, err
	}
	checkers, err := ledger.Checkers(path)
	if err != nil || len(checkers) != 1 {
		return "", err
	}
	return checkers[0], nil
}

// look opens the book to look at it: with the decisions of the checker named, or
// of the only one there is.
func (f *ledgerFlags) look(args []string) (*ledger.Book, error) {
	path, err := f.find(args)
	if err != nil {
		return nil, err
	}
	checker, err := f.namedChecker()
	if err != nil {
		return nil, err
	}
	checkers, err := ledger.Checkers(path)
	if err != nil && !errors.Is(err, os.ErrNotExist) {
		return nil, err
	}
	switch {
	case f.checker != "" && len(checkers) > 0 && !slices.Contains(checkers, checker):
		// Who is named in the environment may just not have begun.
		return nil, usageError("%s has decided nothing here: there are decisions of %s", checker, strings.Join(checkers, ", "))
	case checker == "" && len(checkers) > 1:
		return nil, usageError("several people have decided here: name one of %s with --checker", strings.Join(checkers, ", "))
	case checker == "" && len(checkers) == 1:
		checker = checkers[0]
	}
	return ledger.OpenBook(path, ledger.Options{Checker: checker, Version: version})
}

// decide opens the book for a person who decides. Where nobody is named and ask
// is given, it is asked.
func (f *ledgerFlags) decide(args []string, ask func() (string, error)) (*ledger.Book, error) {
	path, err := f.find(args)
	if err != nil {
		return nil, err
	}
	checker, err := f.namedChecker()
	if err != nil {
		return nil, err
	}
	if checker == "" {
		if ask == nil {
			return nil, usageError("who decides? give initials with --checker or in %s", checkerVariable)
		}
		if checker, err = ask(); err != nil {
			return nil, err
		}
	}
	return ledger.OpenBook(path, ledger.Options{Checker: checker, Version: version})
}
