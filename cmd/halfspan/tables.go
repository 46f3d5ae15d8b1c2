package main

import (
	"encoding/json"
	"fmt"
	"strings"

	"github.com/mattn/go-runewidth"
	"github.com/spf13/cobra"

	"halfspan/extract/paper"
)

func newTables(s *streams) *cobra.Command {
	show := showing{task: "tables", ending: ".txt"}
	var jsonl bool
	cmd := &cobra.Command{
		Use:   "tables FILE...",
		Short: "the tables of a paper as the program reads them",
		Long: `Write every table of a paper as the grid that the program reads: label, caption,
heading rows above a line, and notes. A cell that spans others stands at its top
left, and '"' marks what it covers. Tables that are only pictures are named.`,
		Example: `  halfspan tables paper.pdf | less -S
  halfspan tables --page 4 paper.pdf
  halfspan tables --jsonl paper.xml       cells with their spans and places`,
		Args: cobra.MinimumNArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			if show.page < 0 {
				return usageError("--page %d: pages are counted from 1", show.page)
			}
			if jsonl {
				show.form, show.ending = "jsonl", ".jsonl"
			}
			return show.run(cmd, s, args)
		},
	}
	cmd.Flags().StringVar(&show.out, "out", "", "write one file for each paper into this folder")
	cmd.Flags().IntVar(&show.page, "page", 0, "only the tables of this page")
	cmd.Flags().BoolVar(&jsonl, "jsonl", false, "one JSON object a table, with spans and places of the cells")
	return cmd
}

// showTables writes the tables of a document, in the worker.
func showTables(j *job, doc *paper.Document) (any, error) {
	made := shown{Problems: doc.Problems}
	var b strings.Builder
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	found := 0
	for i := range doc.Blocks {
		t := doc.Blocks[i].Table
		if t == nil || j.Page > 0 && t.Page != j.Page {
			continue
		}
		found++
		if j.Form != "jsonl" {
			writeGrid(&b, t)
			continue
		}
		if err := enc.Encode(tableLine(doc.Path, t)); err != nil {
			return nil, fmt.Errorf("writing %s: %w", t.Label, err)
		}
	}
	if found == 0 && j.Form != "jsonl" {
		b.WriteString("No table was found.\n")
	}
	made.Text = b.String()
	return made, nil
}

// writeGrid draws one table with lines of characters.
func writeGrid(b *strings.Builder, t *paper.Table) {
	title := strings.TrimSpace(t.Label + " " + t.Caption.S)
	if t.Page > 0 {
		title += fmt.Sprintf(" [page %d]", t.Page)
	}
	if t.Turned {
		title += " [turned]"
	}
	fmt.Fprintln(b, strings.TrimSpace(title))
	if t.Picture {
		b.WriteString("(only a picture: its cells cannot be read)\n\n")
		return
	}
	const widest = 40
	texts := make([][]string, t.Rows)
	widths := make([]int, t.Cols)
	for r, row := range t.Grid() {
		texts[r] = make([]string, t.Cols)
		for c, cell := range row {
			switch {
			case cell == nil:
			case cell.Row == r && cell.Col == c:
				texts[r][c] = strings.Repeat("  ", cell.Indent) + strings.Join(strings.Fields(cell.Text.S), " ")
			default:
				texts[r][c] = `"`
			}
			texts[r][c] = runewidth.Truncate(texts[r][c], widest, "…")
			widths[c] = max(widths[c], runewidth.StringWidth(texts[r][c]))
		}
	}
	for r, row := range texts {
		if r == t.HeadRows && r > 0 {
			var rule []string
			for _, w := range widths {
				rule = append(rule, strings.Repeat("-", w))
			}
			fmt.Fprintln(b, strings.Join(rule, "-+-"))
		}
		for c := range row {
			row[c] = runewidth.FillRight(row[c], widths[c])
		}
		fmt.Fprintln(b, strings.TrimRight(strings.Join(row, " | "), " "))
	}
	for _, note := range t.Notes {
		fmt.Fprintln(b, strings.TrimSpace(note.Mark+" "+note.Text.S))
	}
	b.WriteString("\n")
}

// tableJSON is one table in JSON Lines.
type tableJSON struct {
	Paper    string      `json:"paper"`
	Page     *int        `json:"page"`
	Label    string      `json:"label"`
	Caption  string      `json:"caption"`
	Rows     int         `json:"rows"`
	Cols     int         `json:"cols"`
	HeadRows int         `json:"head_rows"`
	Turned   bool        `json:"turned"`
	Picture  bool        `json:"picture"`
	Cells    []cellJSON  `json:"cells"`
	Notes    [][2]string `json:"notes"` // mark and text
}

type cellJSON struct {
	Row     int         `json:"row"`
	Col     int         `json:"col"`
	RowSpan int         `json:"row_span"`
	ColSpan int         `json:"col_span"`
	Head    bool        `json:"head"`
	Indent  int         `json:"indent"`
	Text    string      `json:"text"`
	Box     *[4]float64 `json:"box"` // points of the unrotated page
	Offset  *int        `json:"byte_offset"`
}

func tableLine(name string, t *paper.Table) tableJSON {
	out := tableJSON{Paper: name, Label: t.Label, Caption: t.Caption.S, Rows: t.Rows, Cols: t.Cols, HeadRows: t.HeadRows,
		Turned: t.Turned, Picture: t.Picture, Cells: []cellJSON{}, Notes: [][2]string{}}
	if t.Page > 0 {
		out.Page = &t.Page
	}
	for i := range t.Cells {
		c := &t.Cells[i]
		line := cellJSON{Row: c.Row, Col: c.Col, RowSpan: c.RowSpan, ColSpan: c.ColSpan, Head: c.Head, Indent: c.Indent, Text: c.Text.S}
		if p := c.Text.Between(0, len(c.Text.S)); len(c.Text.Runs) > 0 {
			if p.Page > 0 {
				line.Box = &[4]float64{points(p.Box.X0), points(p.Box.Y0), points(p.Box.X1), points(p.Box.Y1)}
			} else {
				line.Offset = &p.Offset
			}
		}
		out.Cells = append(out.Cells, line)
	}
	for _, n := range t.Notes {
		out.Notes = append(out.Notes, [2]string{n.Mark, n.Text.S})
	}
	return out
}
