package main

import (
	"fmt"
	"os"

	"github.com/spf13/cobra"

	"halfspan/report/ledger"
	"halfspan/report/review"
)

func newAgree(s *streams) *cobra.Command {
	var path string
	cmd := &cobra.Command{
		Use:   "agree A B [PATH]",
		Short: "two checkers' decisions side by side, and the list to settle",
		Long: `Put the decisions of two checkers side by side: how often they keep the same
results, how often they give the same value for each field, and the list of what
they have to settle. Results are matched by where they stand in the paper.`,
		Example: `  halfspan agree AB CD papers`,
		Args:    cobra.RangeArgs(2, 3),
		RunE: func(_ *cobra.Command, args []string) error {
			a, b, err := openPair(path, args[2:], args[0], args[1])
			if err != nil {
				return err
			}
			defer a.Close()
			defer b.Close()
			comparison, err := review.Compare(a, b)
			if err != nil {
				return err
			}
			return comparison.Write(s.out)
		},
	}
	cmd.Flags().StringVar(&path, "ledger", "", "the ledger file (default: halfspan.ledger in PATH, here, or in the one folder here that has one)")
	return cmd
}

// openPair opens the books of two checkers who have decided something.
func openPair(path string, args []string, first, second string) (a, b *ledger.Book, err error) {
	flags := ledgerFlags{ledger: path}
	if path, err = flags.find(args); err != nil {
		return nil, nil, err
	}
	var names [2]string
	for i, name := range []string{first, second} {
		if names[i], err = ledger.Initials(name); err != nil {
			return nil, nil, usageError("%v", err)
		}
		if _, err := os.Stat(ledger.CheckerPath(path, names[i])); err != nil {
			return nil, nil, fmt.Errorf("%s: %s has decided nothing here", ledger.CheckerPath(path, names[i]), names[i])
		}
	}
	if names[0] == names[1] {
		return nil, nil, usageError("%s and %s are the same checker", first, second)
	}
	if a, err = ledger.OpenBook(path, ledger.Options{Checker: names[0], Version: version}); err != nil {
		return nil, nil, err
	}
	if b, err = ledger.OpenBook(path, ledger.Options{Checker: names[1], Version: version}); err != nil {
		a.Close()
		return nil, nil, err
	}
	return a, b, nil
}
