package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"halfspan/extract/paper"
)

func newText(s *streams) *cobra.Command {
	var out string
	var page int
	var boxes, ocr bool
	cmd := &cobra.Command{
		Use:   "text FILE...",
		Short: "what the program reads in a paper, page by page",
		Long: `Write the text of a paper in reading order, as the program reads it, with a form
feed between pages. With --boxes each word is written with the place it was read
from, one JSON object a line: its box in points of the unrotated page, y upwards,
or its byte offset in a file without pages; and which reader the page is from
(both, own, pdfium, ocr).`,
		Example: `  halfspan text paper.pdf | less
  halfspan text --page 3 --boxes paper.pdf
  halfspan text --out texts papers/*.pdf`,
		Args: cobra.MinimumNArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			if page < 0 {
				return usageError("--page %d: pages are counted from 1", page)
			}
			show := showing{task: "text", ending: ".txt", out: out, page: page, ocr: ocr}
			if boxes {
				show.form, show.ending = "boxes", ".jsonl"
			}
			return show.run(cmd, s, args)
		},
	}
	cmd.Flags().StringVar(&out, "out", "", "write one file for each paper into this folder")
	cmd.Flags().IntVar(&page, "page", 0, "only this page")
	cmd.Flags().BoolVar(&boxes, "boxes", false, "each word with its place, as JSON Lines")
	cmd.Flags().BoolVar(&ocr, "ocr", false, "read page pictures without text with tesseract, if it is installed")
	return cmd
}

// showing is a command that shows what is read in papers: text or tables.
type showing struct {
	task   string // of the worker
	form   string
	ending string // of the files written into out
	out    string // folder; empty for standard output
	page   int
	ocr    bool
}

// shown is what a worker gives for such a task.
type shown struct {
	Text     string
	Problems []paper.Problem
}

func (w *showing) run(cmd *cobra.Command, s *streams, files []string) error {
	g, err := gather(files)
	if err != nil {
		return err
	}
	if len(g.papers) == 0 {
		return noPapers(files, g)
	}
	if w.out != "" {
		if err := os.MkdirAll(w.out, 0o777); err != nil {
			return fmt.Errorf("making the folder: %w", err)
		}
	}
	jobs := make([]job, len(g.papers))
	for i, f := range g.papers {
		jobs[i] = job{Task: w.task, Path: f.path, Name: f.name, Page: w.page, Form: w.form, OCR: w.ocr}
	}
	pool := newPool(0)
	defer pool.Close()
	trouble := len(g.failed) > 0
	for _, u := range g.failed {
		fmt.Fprintf(s.err, "halfspan: %s: %s\n", u.name, u.reason)
	}
	var names outNames
	err = runInOrder(cmd.Context(), pool, jobs, silent{}, func(i int, a answer) error {
		if a.err != nil {
			trouble = true
			fmt.Fprintf(s.err, "halfspan: %s: %v\n", jobs[i].Name, a.err)
			return nil
		}
		var made shown
		if err := json.Unmarshal(a.body, &made); err != nil {
			return fmt.Errorf("%s: reading the worker's answer: %w", jobs[i].Name, err)
		}
		for _, p := range made.Problems {
			if p.Lost && (w.page == 0 || p.Page == 0 || p.Page == w.page) {
				trouble = true
				fmt.Fprintf(s.err, "halfspan: %s: %s\n", jobs[i].Name, p.Text)
			}
		}
		if w.out == "" {
			_, err := io.WriteString(s.out, made.Text)
			return err
		}
		return os.WriteFile(filepath.Join(w.out, names.of(jobs[i].Name, w.ending)), []byte(made.Text), 0o666)
	})
	switch {
	case err != nil:
		return err
	case trouble:
		return &statusError{status: statusPartial}
	}
	return nil
}

// outNames gives files in one folder names of their own.
type outNames struct {
	taken map[string]bool
}

func (o *outNames) of(name, ending string) string {
	if o.taken == nil {
		o.taken = map[string]bool{}
	}
	base := filepath.Base(filepath.FromSlash(name))
	stem := strings.TrimSuffix(base, filepath.Ext(base))
	out := stem + ending
	// Two papers of one name, or one name with two endings.
	for _, other := range []string{base + ending, strings.ReplaceAll(name, "/", "_") + ending} {
		if o.taken[out] {
			out = other
		}
	}
	o.taken[out] = true
	return out
}

// showText writes the text of a document, in the worker.
func showText(j *job, doc *paper.Document) (any, error) {
	if j.Page > 0 && j.Page > max(1, len(doc.Pages)) {
		return nil, fmt.Errorf("there is no page %d: it has %d", j.Page, len(doc.Pages))
	}
	if j.Page > 0 && len(doc.Pages) == 0 {
		return nil, errors.New("this kind of file has no pages")
	}
	made := shown{Problems: doc.Problems}
	var err error
	if j.Form == "boxes" {
		made.Text, err = boxLines(doc, j.Page)
	} else {
		made.Text = pageText(doc, j.Page)
	}
	return made, err
}

// pageText writes the text of a document as it is printed, with a form feed
// where a page begins; formats that keep no printed pages are written block by
// block.
func pageText(doc *paper.Document, only int) string {
	switch {
	case len(doc.Printed) == 0:
		return blockText(doc, only)
	case only > 0:
		return doc.Printed[only-1]
	}
	return strings.Join(doc.Printed, "\f")
}

// blockText writes the pages as they are printed or, for a paper without pages,
// the blocks of a document one below the other, a table as
// lines of cells with tabs between them, and a form feed where a page begins.
func blockText(doc *paper.Document, only int) string {
	if len(doc.Printed) > 0 {
		if only > 0 {
			return doc.Printed[only-1]
		}
		return strings.Join(doc.Printed, "\f")
	}
	var b strings.Builder
	page := 1
	for i := range doc.Blocks {
		block := &doc.Blocks[i]
		for ; only == 0 && block.Page > page; page++ {
			b.WriteString("\f")
		}
		if only > 0 && block.Page != only {
			continue
		}
		if block.Table == nil {
			b.WriteString(block.Text.S + "\n\n")
			continue
		}
		writeTable(&b, block.Table)
	}
	for ; only == 0 && page < len(doc.Pages); page++ {
		b.WriteString("\f")
	}
	return b.String()
}

func writeTable(b *strings.Builder, t *paper.Table) {
	if title := strings.TrimSpace(t.Label + " " + t.Caption.S); title != "" {
		b.WriteString(title + "\n")
	}
	for r, row := range t.Grid() {
		var cells []string
		for c, cell := range row {
			text := ""
			if cell != nil && cell.Row == r && cell.Col == c {
				text = cell.Text.S
			}
			cells = append(cells, text)
		}
		b.WriteString(strings.TrimRight(strings.Join(cells, "\t"), "\t") + "\n")
	}
	for _, note := range t.Notes {
		b.WriteString(strings.TrimSpace(note.Mark+" "+note.Text.S) + "\n")
	}
	b.WriteString("\n")
}

// boxLine is one word with the place it was read from.
type boxLine struct {
	Page   *int        `json:"page"`
	Box    *[4]float64 `json:"box"`
	Offset *int        `json:"byte_offset"`
	In     string      `json:"in"`     // kind of block
	Reader *string     `json:"reader"` // who read the page; null where the format has no pages
	Text   string      `json:"text"`
}

func boxLines(doc *paper.Document, only int) (string, error) {
	var b strings.Builder
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	readers := map[int]*string{}
	for i := range doc.Pages {
		readers[doc.Pages[i].Number] = &doc.Pages[i].Reader
	}
	write := func(kind string, t *paper.TextRun) error {
		if len(t.Runs) == 0 {
			return nil // a word of the program's own
		}
		for from, word := range wordsOf(t.S) {
			p := t.Between(from, from+len(word))
			if only > 0 && p.Page != only {
				continue
			}
			line := boxLine{In: kind, Text: word}
			if p.Page > 0 {
				line.Page, line.Reader = &p.Page, readers[p.Page]
				line.Box = &[4]float64{points(p.Box.X0), points(p.Box.Y0), points(p.Box.X1), points(p.Box.Y1)}
			} else {
				line.Offset = &p.Offset
			}
			if err := enc.Encode(line); err != nil {
				return err
			}
		}
		return nil
	}
	for i := range doc.Blocks {
		block := &doc.Blocks[i]
		if err := write(blockName(block.Kind), &block.Text); err != nil {
			return "", err
		}
		if block.Table == nil {
			continue
		}
		texts := []*paper.TextRun{&block.Table.Caption}
		for k := range block.Table.Cells {
			texts = append(texts, &block.Table.Cells[k].Text)
		}
		for k := range block.Table.Notes {
			texts = append(texts, &block.Table.Notes[k].Text)
		}
		for _, t := range texts {
			if err := write("table", t); err != nil {
				return "", err
			}
		}
	}
	return b.String(), nil
}

func points(v int32) float64 { return float64(v) / 100 }

func blockName(k paper.BlockKind) string {
	switch k {
	case paper.Heading:
		return "heading"
	case paper.Paragraph:
		return "paragraph"
	case paper.TableBlock:
		return "table"
	case paper.Caption:
		return "caption"
	case paper.Note:
		return "note"
	case paper.Reference:
		return "reference"
	case paper.Furniture:
		return "furniture"
	}
	return "other"
}
