package main

import (
	"fmt"
	"os"

	"github.com/spf13/cobra"

	"halfspan/report/ledger"
	"halfspan/report/review"
)

// cautionsHelp stands in the help of the commands that give values: the cautions
// of the review table, broken into lines.
const cautionsHelp = `A converted SD is an estimate under stated assumptions: have a second person
check it against the page, and use it under your review's protocol and your own
judgement.`

func newList(s *streams) *cobra.Command {
	var flags ledgerFlags
	var filter review.Filter
	var tsv bool
	cmd := &cobra.Command{
		Use:   "list [PATH]",
		Short: "the review table, filtered",
		Long: `Print the review table: what was printed, the SD behind it, how sure the
reading is, and what was decided. PATH is the scanned folder or its ledger.

The table fits the terminal by leaving columns out; --tsv writes all of them.
Several words for one filter are parted by commas and pick each.

` + cautionsHelp,
		Example: `  halfspan list
  halfspan list papers --reading look,doubtful --state open
  halfspan list --paper 'winter*' --outcome mass
  halfspan list --tsv > results.tsv`,
		Args: cobra.MaximumNArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			if err := filter.Check(); err != nil {
				return usageError("%v", err)
			}
			return list(s, args, &flags, &filter, tsv)
		},
	}
	flags.add(cmd)
	addFilter(cmd, &filter)
	cmd.Flags().BoolVar(&tsv, "tsv", false, "all columns at full width, parted by tabs")
	return cmd
}

func addFilter(cmd *cobra.Command, f *review.Filter) {
	cmd.Flags().StringVar(&f.Reading, "reading", "", "clear, look or doubtful")
	cmd.Flags().StringVar(&f.State, "state", "", "open, confirmed, amended, dropped, queried, read differently since")
	cmd.Flags().StringVar(&f.Paper, "paper", "", "part of the paper's name, or a pattern with * and ?")
	cmd.Flags().StringVar(&f.Outcome, "outcome", "", "part of the outcome")
	cmd.Flags().StringVar(&f.Arm, "arm", "", "part of the arm")
	cmd.Flags().StringVar(&f.Time, "time", "", "part of the time point")
	cmd.Flags().StringVar(&f.Statistic, "statistic", "", "mean, mean difference, median, ratio, ...")
	cmd.Flags().StringVar(&f.Use, "use", "", "printed, converted or withheld")
	for flag, words := range review.FilterWords() {
		complete(cmd, flag, words)
	}
}

// complete offers words for a flag to the shell.
func complete(cmd *cobra.Command, flag string, words []string) {
	// It fails only for a flag that the command does not have.
	if err := cmd.RegisterFlagCompletionFunc(flag, cobra.FixedCompletions(words, cobra.ShellCompDirectiveNoFileComp)); err != nil {
		panic(err)
	}
}

func list(s *streams, args []string, flags *ledgerFlags, filter *review.Filter, tsv bool) error {
	book, err := flags.look(args)
	if err != nil {
		return err
	}
	defer book.Close()
	all, err := book.Rows()
	if err != nil {
		return err
	}
	rows := filter.Apply(all)
	if err := printTable(s, rows, tsv); err != nil {
		return err
	}
	if tsv {
		return nil
	}
	switch {
	case len(all) == 0:
		fmt.Fprintln(s.err, "halfspan: no results were found in these papers")
	case len(rows) == 0:
		fmt.Fprintf(s.err, "halfspan: none of %s is picked by these filters\n", review.Count(len(all), "result"))
	case len(rows) < len(all):
		fmt.Fprintf(s.out, "\n%d of %s.\n", len(rows), review.Count(len(all), "result"))
	}
	return nil
}

// printTable writes the review table for whoever reads standard output.
func printTable(s *streams, rows []ledger.Row, tsv bool) error {
	if tsv {
		return review.TSV(s.out, rows)
	}
	opt := review.TableOptions{Width: terminalWidth(s.out)}
	opt.Colour = isTerminal(s.out) && os.Getenv("NO_COLOR") == "" && os.Getenv("TERM") != "dumb"
	return review.Table(s.out, rows, opt)
}
