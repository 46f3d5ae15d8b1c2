package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"halfspan/report/export"
	"halfspan/report/ledger"
	"halfspan/report/review"
)

type exportOptions struct {
	ledger   string
	checkers []string
	settled  string
	out      string
	jsonl    bool
	evidence string
	marked   string
}

func newExport(s *streams) *cobra.Command {
	var opt exportOptions
	cmd := &cobra.Command{
		Use:   "export [PATH]",
		Short: "the confirmed and amended values as CSV, with a codebook",
		Long: `Write the confirmed and amended results, one row a result, as they were decided:
CSV as RFC 4180 says, in UTF-8, and beside it a codebook (Frictionless Table
Schema) with a description and unit of each column. The same decisions give the
same bytes.

With two checkers only results are exported on which both agree, or which a third
has settled (--settled); the others are listed.

` + cautionsHelp,
		Example: `  halfspan export papers                          into halfspan-results.csv
  halfspan export papers --out tables/mass.csv
  halfspan export papers --checker AB,CD --settled EF
  halfspan export --out - > results.csv           without a codebook
  halfspan export papers --evidence evidence --marked marked`,
		Args: cobra.MaximumNArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			return exportResults(cmd.Context(), s, args, &opt)
		},
	}
	cmd.Flags().StringVar(&opt.ledger, "ledger", "", "the ledger file (default: halfspan.ledger in PATH, here, or in the one folder here that has one)")
	cmd.Flags().StringSliceVar(&opt.checkers, "checker", nil, "whose decisions; two, parted by a comma, for what both agree on")
	cmd.Flags().StringVar(&opt.settled, "settled", "", "who has settled what two checkers did not agree on")
	cmd.Flags().StringVar(&opt.out, "out", "", "the file to write; - for standard output (default halfspan-results.csv, or .jsonl)")
	cmd.Flags().BoolVar(&opt.jsonl, "jsonl", false, "JSON Lines instead of CSV")
	cmd.Flags().StringVar(&opt.evidence, "evidence", "", "also write a cut-out of the page for every exported result, named by its id, into this folder")
	cmd.Flags().StringVar(&opt.marked, "marked", "", "also write copies of the PDFs with the exported results highlighted into this folder")
	return cmd
}

// chosen is what is to be exported, and whose decisions it rests on.
type chosen struct {
	rows      []export.Row
	unsettled []string          // results on which two checkers do not agree, in words
	sums      map[string]string // SHA-256 over the decisions, by checker
}

func exportResults(ctx context.Context, s *streams, args []string, opt *exportOptions) error {
	var what *chosen
	var err error
	if len(opt.checkers) > 1 || opt.settled != "" {
		what, err = chooseAgreed(args, opt)
	} else {
		what, err = chooseOne(args, opt)
	}
	if err != nil {
		return err
	}
	out := opt.out
	if out == "" {
		out = "halfspan-results.csv"
		if opt.jsonl {
			out = "halfspan-results.jsonl"
		}
	}
	write := func(w io.Writer) error { return export.CSV(w, what.rows) }
	if opt.jsonl {
		write = func(w io.Writer) error { return export.JSONLines(w, what.rows) }
	}
	if out == "-" {
		if err := write(s.out); err != nil {
			return err
		}
		if err := writeEvidence(ctx, s, args, opt, what.rows); err != nil {
			return err
		}
		return reportExport(s.err, what, "")
	}
	if err := writeFile(out, write); err != nil {
		return err
	}
	wrote := out
	if !opt.jsonl {
		codebook := strings.TrimSuffix(out, filepath.Ext(out)) + ".codebook.json"
		about := export.About{Program: "halfspan " + version, Results: len(what.rows), Decisions: what.sums}
		if err := writeFile(codebook, func(w io.Writer) error { return export.Codebook(w, about) }); err != nil {
			return err
		}
		wrote += ", explained in " + codebook
	}
	if err := writeEvidence(ctx, s, args, opt, what.rows); err != nil {
		return err
	}
	return reportExport(s.out, what, wrote)
}

// chooseOne takes the decisions of one checker.
func chooseOne(args []string, opt *exportOptions) (*chosen, error) {
	flags := ledgerFlags{ledger: opt.ledger}
	if len(opt.checkers) == 1 {
		flags.checker = opt.checkers[0]
	}
	book, err := flags.look(args)
	if err != nil {
		return nil, err
	}
	defer book.Close()
	rows, err := book.Rows()
	if err != nil {
		return nil, err
	}
	what := &chosen{rows: export.Confirmed(rows), sums: map[string]string{}}
	return what, what.vouch(book)
}

// vouch notes the sum of a book's decisions.
func (c *chosen) vouch(book *ledger.Book) error {
	if book.Decisions() == nil {
		return nil
	}
	sum, err := book.Decisions().Sum()
	if err != nil {
		return err
	}
	c.sums[book.Decisions().Checker()] = sum
	return nil
}

// chooseAgreed takes what two checkers agree on, and what a third settled.
func chooseAgreed(args []string, opt *exportOptions) (*chosen, error) {
	if len(opt.checkers) != 2 {
		return nil, usageError("--settled goes with two checkers: --checker AB,CD")
	}
	a, b, err := openPair(opt.ledger, args, opt.checkers[0], opt.checkers[1])
	if err != nil {
		return nil, err
	}
	defer a.Close()
	defer b.Close()
	comparison, err := review.Compare(a, b)
	if err != nil {
		return nil, err
	}
	what := &chosen{sums: map[string]string{}}
	if err := errors.Join(what.vouch(a), what.vouch(b)); err != nil {
		return nil, err
	}
	settled := map[string]ledger.Row{}
	if opt.settled != "" {
		flags := ledgerFlags{ledger: opt.ledger, checker: opt.settled}
		book, err := flags.look(args)
		if err != nil {
			return nil, err
		}
		defer book.Close()
		rows, err := book.Rows()
		if err != nil {
			return nil, err
		}
		for _, r := range rows {
			settled[r.ID()] = r
		}
		if err := what.vouch(book); err != nil {
			return nil, err
		}
	}
	var rows []ledger.Row
	for _, p := range comparison.Pairs {
		if p.Agreed() {
			rows = append(rows, p.A)
			continue
		}
		if r, ok := settled[p.ID()]; ok && r.Decision != nil && r.Decision.Verdict != ledger.Queried {
			rows = append(rows, r)
			continue
		}
		what.unsettled = append(what.unsettled, p.Words())
	}
	what.rows = export.Confirmed(rows)
	return what, nil
}

// reportExport says what was written, and what was not.
func reportExport(w io.Writer, what *chosen, wrote string) error {
	var b strings.Builder
	if len(what.rows) == 0 {
		b.WriteString("Nothing is confirmed or amended yet: only the line of column names was written")
	} else {
		fmt.Fprintf(&b, "Exported %s", review.Count(len(what.rows), "result"))
	}
	if wrote != "" {
		fmt.Fprintf(&b, ": %s", wrote)
	}
	b.WriteString(".\n")
	for i := range what.rows {
		r := &what.rows[i]
		switch {
		case r.State == ledger.StateDiffering:
			fmt.Fprintf(&b, "  %s was read differently since it was %s (%s): exported as decided, look again\n", r.ID(), r.Decision.Verdict, strings.Join(r.Differs, ", "))
		case r.Gone != "":
			fmt.Fprintf(&b, "  %s is exported as decided: %s\n", r.ID(), r.Gone)
		}
		if len(r.Twice) > 0 {
			fmt.Fprintf(&b, "  %s prints the same as %s\n", r.ID(), strings.Join(r.Twice, ", "))
		}
	}
	if len(what.unsettled) > 0 {
		fmt.Fprintf(&b, "Not exported, to be settled: %s\n", review.Count(len(what.unsettled), "result"))
		for _, words := range what.unsettled {
			fmt.Fprintf(&b, "  %s\n", words)
		}
	}
	fmt.Fprintln(&b, review.Cautions)
	_, err := io.WriteString(w, b.String())
	return err
}
