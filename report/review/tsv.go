package review

import (
	"fmt"
	"io"
	"strings"

	"halfspan/report/ledger"
)

// TSV writes the review table at full width, tabs between the columns and one
// line of titles: for other programs.
func TSV(w io.Writer, rows []ledger.Row) error {
	titles := []string{"id", "paper"}
	all := columns()[1:]
	for _, c := range all {
		titles = append(titles, strings.ReplaceAll(c.title, " ", "_"))
	}
	if _, err := fmt.Fprintln(w, strings.Join(titles, "\t")); err != nil {
		return err
	}
	for i := range rows {
		line := []string{rows[i].ID(), oneLine(rows[i].Working.Record.Paper)}
		for _, c := range all {
			line = append(line, oneLine(c.value(&rows[i], 10)))
		}
		if _, err := fmt.Fprintln(w, strings.Join(line, "\t")); err != nil {
			return err
		}
	}
	return nil
}
