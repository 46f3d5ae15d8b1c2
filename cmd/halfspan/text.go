package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"halfspan/extract"
	"halfspan/extract/paper"
)

func newText(s *streams) *cobra.Command {
	var out string
	cmd := &cobra.Command{
		Use:   "text FILE...",
		Short: "what the program reads in a file, page by page",
		Args:  cobra.MinimumNArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			return text(s, args, out)
		},
	}
	cmd.Flags().StringVar(&out, "out", "", "write FILE.txt for each file into this folder")
	return cmd
}

func text(s *streams, files []string, out string) error {
	status := statusDone
	for _, file := range files {
		content, err := os.ReadFile(file)
		if err != nil {
			return pathError(file, err)
		}
		doc, err := extract.Read(file, content, extract.Options{})
		if err != nil {
			fmt.Fprintln(s.err, err)
			status = statusPartial
			continue
		}
		body := blockText(doc)
		if out == "" {
			fmt.Fprint(s.out, body)
			continue
		}
		name := strings.TrimSuffix(filepath.Base(file), filepath.Ext(file)) + ".txt"
		if err := os.WriteFile(filepath.Join(out, name), []byte(body), 0o644); err != nil {
			return err
		}
	}
	if status != statusDone {
		return &statusError{status: status}
	}
	return nil
}

// blockText writes the blocks of a document one below the other, with a form
// feed where a new page begins.
func blockText(doc *paper.Document) string {
	var b strings.Builder
	page := 1
	for _, block := range doc.Blocks {
		for ; block.Page > page; page++ {
			b.WriteString("\f")
		}
		if block.Table == nil {
			b.WriteString(block.Text.S + "\n")
			continue
		}
		b.WriteString(block.Table.Label + " " + block.Table.Caption.S + "\n")
		grid := block.Table.Grid()
		for r, row := range grid {
			var cells []string
			for c, cell := range row {
				if cell != nil && cell.Row == r && cell.Col == c {
					cells = append(cells, cell.Text.S)
				}
			}
			b.WriteString(strings.Join(cells, "\t") + "\n")
		}
		for _, note := range block.Table.Notes {
			b.WriteString(note.Mark + " " + note.Text.S + "\n")
		}
	}
	return b.String()
}
