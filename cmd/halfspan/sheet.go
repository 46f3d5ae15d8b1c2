package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"halfspan/report/export"
	"halfspan/report/ledger"
	"halfspan/report/review"
)

func newSheet(s *streams) *cobra.Command {
	cmd := &cobra.Command{
		Use:   "sheet",
		Short: "decide in a spreadsheet: out, edit, back in",
		Long: `Write the results as a spreadsheet, decide in it, and read the decisions back.

The ending of FILE says which kind: .xlsx, where every cell is text, so that 1-2
becomes no date and 2.10 keeps its zero, or .csv. In the column decision write
confirmed, amended, dropped or queried; amended and dropped need a decision_reason.
Fields are amended in their own columns, and the SD is worked out anew when the
sheet is read.`,
		Example: `  halfspan sheet write results.xlsx papers
  halfspan sheet read results.xlsx papers --checker AB`,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usageError("sheet %s: say 'sheet write' or 'sheet read'", args[0])
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, _ []string) error { return cmd.Help() },
	}
	cmd.AddCommand(newSheetWrite(s), newSheetRead(s))
	return cmd
}

func newSheetWrite(s *streams) *cobra.Command {
	var flags ledgerFlags
	var filter review.Filter
	cmd := &cobra.Command{
		Use:   "write FILE [PATH]",
		Short: "write the results as a spreadsheet to decide in",
		Example: `  halfspan sheet write results.xlsx papers
  halfspan sheet write doubtful.csv --reading doubtful,look --state open`,
		Args: cobra.RangeArgs(1, 2),
		RunE: func(_ *cobra.Command, args []string) error {
			if err := filter.Check(); err != nil {
				return usageError("%v", err)
			}
			format, err := sheetFormat(args[0])
			if err != nil {
				return err
			}
			book, err := flags.forSheet(args[1:])
			if err != nil {
				return err
			}
			defer book.Close()
			all, err := book.Rows()
			if err != nil {
				return err
			}
			rows := filter.Apply(all)
			if err := writeFile(args[0], func(w io.Writer) error { return export.WriteSheet(w, format, rows) }); err != nil {
				return err
			}
			fmt.Fprintf(s.out, "Wrote %s to %s.\n", review.Count(len(rows), "result"), args[0])
			return nil
		},
	}
	flags.add(cmd)
	addFilter(cmd, &filter)
	return cmd
}

// forSheet opens the book as the checker named, who may not have decided anything
// yet, or as the only one there is.
func (f *ledgerFlags) forSheet(args []string) (*ledger.Book, error) {
	if named, err := f.namedChecker(); named != "" || err != nil {
		return f.decide(args, nil)
	}
	return f.look(args)
}

func newSheetRead(s *streams) *cobra.Command {
	var flags ledgerFlags
	cmd := &cobra.Command{
		Use:   "read FILE [PATH]",
		Short: "take the decisions of a spreadsheet: all of them, or none",
		Long: `Take the decisions of a spreadsheet that 'halfspan sheet write' wrote. Every
changed cell is looked at; if one cannot be taken, it is named with its row and
column, and nothing of the sheet is taken. What a spreadsheet program did by itself
(dates made of ranges, decimal commas, lost zeros) is recognised and said.`,
		Example: `  halfspan sheet read results.xlsx papers --checker AB`,
		Args:    cobra.RangeArgs(1, 2),
		RunE: func(_ *cobra.Command, args []string) error {
			return readSheet(s, args, &flags)
		},
	}
	flags.add(cmd)
	return cmd
}

func sheetFormat(path string) (string, error) {
	format := strings.ToLower(filepath.Ext(path))
	if !slices.Contains(export.SheetFormats(), format) {
		return "", usageError("%s: a sheet ends in %s", path, strings.Join(export.SheetFormats(), " or "))
	}
	return format, nil
}

func readSheet(s *streams, args []string, flags *ledgerFlags) error {
	format, err := sheetFormat(args[0])
	if err != nil {
		return err
	}
	content, err := os.ReadFile(args[0])
	if err != nil {
		return pathError(args[0], err)
	}
	sheet, err := export.ReadSheet(format, content)
	if err != nil {
		return fmt.Errorf("%s: %w", args[0], err)
	}
	book, err := flags.decide(args[1:], nil)
	if err != nil {
		return err
	}
	defer book.Close()
	rows, err := book.Rows()
	if err != nil {
		return err
	}
	drafts, notes, wrong := export.Drafts(sheet, rows)
	for _, note := range notes {
		fmt.Fprintf(s.err, "halfspan: %s: %s\n", args[0], note)
	}
	if len(wrong) > 0 {
		for _, w := range wrong {
			fmt.Fprintf(s.err, "halfspan: %s: %v\n", args[0], w)
		}
		return fmt.Errorf("%s: nothing was taken: put %s right and read it again", args[0], review.Count(len(wrong), "cell"))
	}
	if len(drafts) == 0 {
		fmt.Fprintf(s.out, "No new decision in %s.\n", args[0])
		return nil
	}
	if _, err := book.Decide(drafts...); err != nil {
		var de *ledger.DraftError
		if errors.As(err, &de) {
			return fmt.Errorf("%s: nothing was taken: %w", args[0], err)
		}
		return err
	}
	count := map[ledger.Verdict]int{}
	for _, d := range drafts {
		count[d.Verdict]++
	}
	var parts []string
	for _, v := range []ledger.Verdict{ledger.Confirmed, ledger.Amended, ledger.Dropped, ledger.Queried} {
		if count[v] > 0 {
			parts = append(parts, fmt.Sprintf("%d %s", count[v], v))
		}
	}
	fmt.Fprintf(s.out, "Took %s of %s: %s.\n", review.Count(len(drafts), "decision"), book.Decisions().Checker(), strings.Join(parts, ", "))
	return nil
}
