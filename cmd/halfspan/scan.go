package main

import (
	"encoding/json"
	"fmt"
	"os"

	"github.com/spf13/cobra"

	"halfspan/convert/working"
	"halfspan/extract"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

func newScan(s *streams) *cobra.Command {
	var jsonl bool
	var ledgerPath string
	cmd := &cobra.Command{
		Use:   "scan PATH...",
		Short: "read papers, find their results and keep them in the ledger",
		Args:  cobra.MinimumNArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			return scan(s, args)
		},
	}
	cmd.Flags().BoolVar(&jsonl, "jsonl", false, "write the records to standard output, one JSON object a line")
	cmd.Flags().StringVar(&ledgerPath, "ledger", "", "the ledger file; empty keeps nothing")
	return cmd
}

func scan(s *streams, paths []string) error {
	g, err := gather(paths)
	if err != nil {
		return err
	}
	failed := g.failed
	enc := json.NewEncoder(s.out)
	enc.SetEscapeHTML(false)
	for _, f := range g.papers {
		content, err := os.ReadFile(f.path)
		if err != nil {
			failed = append(failed, unread{f.name, err.Error()})
			continue
		}
		doc, err := extract.Read(f.path, content, extract.Options{})
		if err != nil {
			failed = append(failed, unread{f.name, err.Error()})
			continue
		}
		doc.Path = f.name
		for _, p := range doc.Problems {
			fmt.Fprintf(s.err, "%s: page %d: %s: %s\n", f.name, p.Page, p.Kind, p.Text)
		}
		for _, r := range plainRecords(doc, extract.Find(doc)) {
			if err := enc.Encode(r); err != nil {
				return err
			}
		}
	}
	for _, u := range failed {
		fmt.Fprintf(s.err, "%s: %s\n", u.name, u.reason)
	}
	if len(failed) > 0 {
		return &statusError{status: statusPartial}
	}
	return nil
}

// plainRecords writes results as records without any working.
func plainRecords(doc *paper.Document, results []result.Result) []working.Record {
	records := make([]working.Record, 0, len(results))
	str := func(s string) *string {
		if s == "" {
			return nil
		}
		return &s
	}
	num := func(n int) *int {
		if n == 0 {
			return nil
		}
		return &n
	}
	for _, r := range results {
		rec := working.Record{
			ID: r.Anchor.Name(doc.SHA256), Paper: doc.Path, PaperSHA256: doc.SHA256, Page: num(r.Page),
			Section: str(r.Section), Table: str(r.Table), Snippet: r.Snippet,
			Statistic: str(string(r.Statistic)), Measure: str(r.Measure), GivenAs: str(string(r.GivenAs)),
			Estimate: str(r.Estimate), Lower: str(r.Lower), Upper: str(r.Upper), GivenValue: str(r.GivenValue),
			N: num(r.N), N2: num(r.N2), NFrom: str(r.NFrom), NKind: str(r.NKind), Arm: str(r.Arm), Arm2: str(r.Arm2),
			Time: str(r.Time), Subgroup: str(r.Subgroup), Outcome: str(r.Outcome), Unit: str(r.Unit),
			Heading: str(r.Heading), Adjusted: str(r.Adjusted), P: str(r.P), T: str(r.T), F: str(r.F), DF: str(r.DF),
			Use: "withheld", Reading: "look", Flags: []string{}, Mates: []string{}, Places: []working.Place{},
		}
		if r.Level > 0 {
			rec.Level = &r.Level
		}
		for _, f := range r.Flags {
			rec.Flags = append(rec.Flags, f.Name)
		}
		records = append(records, rec)
	}
	return records
}
