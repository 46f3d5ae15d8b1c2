package export

import (
	"fmt"
	"io"
	"slices"
	"strings"

	"github.com/xuri/excelize/v2"

	"halfspan/convert/working"
	"halfspan/report/ledger"
	"halfspan/report/review"
)

// The columns of a sheet that say what is decided.
const (
	colDecision = "decision"
	colReason   = "decision_reason"
	colNote     = "decision_note"
	colTake     = "take"
	colID       = "id"
	colSeen     = "seen"
)

// sheetColumn is one column of a sheet.
type sheetColumn struct {
	name  string
	width float64
	field bool // a field of the record that may be amended
	text  func(r *ledger.Row) string
}

// amendable lists the fields of a sheet that may be amended, in the order in
// which they stand there.
var amendable = []string{"estimate", "lower", "upper", "given_value", "given_as", "level", "statistic", "measure", "n", "n2",
	"arm", "arm2", "time", "subgroup", "outcome", "unit", "adjusted"}

// sheetColumns lists the columns: the decision, what it is about, what may be
// amended, and what to know about it.
func sheetColumns() []sheetColumn {
	decision := func(get func(d *ledger.Decision) string) func(r *ledger.Row) string {
		return func(r *ledger.Row) string {
			if r.Decision == nil {
				return ""
			}
			return get(r.Decision)
		}
	}
	shown := func(name string) func(r *ledger.Row) string {
		return func(r *ledger.Row) string {
			text, _ := review.Field(&r.Current().Working.Record, name)
			return text
		}
	}
	columns := []sheetColumn{
		{name: colDecision, width: 12, text: decision(func(d *ledger.Decision) string { return string(d.Verdict) })},
		{name: colReason, width: 16, text: decision(func(d *ledger.Decision) string { return d.Reason })},
		{name: colNote, width: 20, text: decision(func(d *ledger.Decision) string { return d.Note })},
		{name: "paper", width: 24, text: shown("paper")},
		{name: "page", width: 6, text: shown("page")},
		{name: "table", width: 10, text: shown("table")},
		{name: "snippet", width: 60, text: shown("snippet")},
		{name: "printed", width: 28, text: func(r *ledger.Row) string { return review.Printed(&r.Working.Record) }},
	}
	for _, name := range amendable {
		columns = append(columns, sheetColumn{name: name, width: 11, field: true, text: shown(name)})
	}
	columns = append(columns, sheetColumn{name: colTake, width: 14, text: func(*ledger.Row) string { return "" }})
	columns = append(columns, sheetColumn{name: "proposals", width: 40, text: func(r *ledger.Row) string { return proposals(&r.Working) }})
	for _, name := range []string{"mean", "sd", "sd_digits_low", "sd_digits_high", "se", "scale", "method", "use", "reason", "reading", "flags"} {
		columns = append(columns, sheetColumn{name: name, width: 11, text: shown(name)})
	}
	return append(columns,
		sheetColumn{name: "state", width: 12, text: func(r *ledger.Row) string { return string(r.State) }},
		sheetColumn{name: colID, width: 12, text: shown(colID)},
		sheetColumn{name: colSeen, width: 18, text: func(r *ledger.Row) string { return r.Token() }})
}

// proposals lists the working's own proposals that can be taken by name.
func proposals(w *working.Working) string {
	var names []string
	for _, a := range w.Trail.Alternatives {
		if a.SD != nil && !a.Struck {
			text := a.Name + ": SD " + review.Short(*a.SD)
			if a.Mean != nil {
				text += ", mean " + review.Short(*a.Mean)
			}
			names = append(names, text)
		}
	}
	return strings.Join(names, "; ")
}

// SheetFormats lists the kinds of sheet, by file name ending.
func SheetFormats() []string { return []string{".xlsx", ".csv"} }

// WriteSheet writes results as a spreadsheet in which a person can decide: every
// cell is text, so that no program makes a date of 1-2 or cuts the zero of 2.10.
func WriteSheet(w io.Writer, format string, rows []ledger.Row) error {
	if format == ".csv" {
		return writeSheetCSV(w, rows)
	}
	return writeSheetXLSX(w, rows)
}

func writeSheetCSV(w io.Writer, rows []ledger.Row) error {
	columns := sheetColumns()
	names := make([]string, len(columns))
	for k, c := range columns {
		names[k] = c.name
	}
	return writeCSV(w, "the sheet", names, len(rows), func(row, column int) string { return columns[column].text(&rows[row]) })
}

const sheetName = "results"

func writeSheetXLSX(w io.Writer, rows []ledger.Row) error {
	f := excelize.NewFile()
	defer f.Close()
	if err := fillXLSX(f, rows); err != nil {
		return fmt.Errorf("writing the sheet: %w", err)
	}
	if err := f.Write(w); err != nil {
		return fmt.Errorf("writing the sheet: %w", err)
	}
	return nil
}

func fillXLSX(f *excelize.File, rows []ledger.Row) error {
	if err := f.SetSheetName(f.GetSheetName(0), sheetName); err != nil {
		return err
	}
	const textFormat = 49 // "@": what is typed stays as typed
	plain, err := f.NewStyle(&excelize.Style{NumFmt: textFormat, Alignment: &excelize.Alignment{Vertical: "top"}})
	if err != nil {
		return err
	}
	open, err := f.NewStyle(&excelize.Style{NumFmt: textFormat, Alignment: &excelize.Alignment{Vertical: "top"},
		Fill: excelize.Fill{Type: "pattern", Pattern: 1, Color: []string{"FFF8DC"}}})
	if err != nil {
		return err
	}
	head, err := f.NewStyle(&excelize.Style{NumFmt: textFormat, Font: &excelize.Font{Bold: true}})
	if err != nil {
		return err
	}
	out, err := f.NewStreamWriter(sheetName)
	if err != nil {
		return err
	}
	columns := sheetColumns()
	styles := make([]int, len(columns))
	header := make([]any, len(columns))
	for k, c := range columns {
		header[k] = excelize.Cell{StyleID: head, Value: c.name}
		styles[k] = plain
		if c.field || slices.Contains([]string{colDecision, colReason, colNote, colTake}, c.name) {
			styles[k] = open
		}
		if err := out.SetColWidth(k+1, k+1, c.width); err != nil {
			return err
		}
	}
	if err := out.SetPanes(&excelize.Panes{Freeze: true, YSplit: 1, TopLeftCell: "A2", ActivePane: "bottomLeft"}); err != nil {
		return err
	}
	if err := out.SetRow("A1", header); err != nil {
		return err
	}
	for i := range rows {
		line := make([]any, len(columns))
		for k, c := range columns {
			line[k] = excelize.Cell{StyleID: styles[k], Value: c.text(&rows[i])}
		}
		if err := out.SetRow(fmt.Sprintf("A%d", i+2), line); err != nil {
			return err
		}
	}
	if err := out.Flush(); err != nil {
		return err
	}
	return dropDowns(f, columns, len(rows))
}

// dropDowns offers the words that the decision columns may hold.
func dropDowns(f *excelize.File, columns []sheetColumn, rows int) error {
	lists := map[string][]string{
		colDecision: {"confirmed", "amended", "dropped", "queried"},
		colReason:   ledger.Reasons(),
		"given_as":  working.GivenAs(),
		"statistic": working.Statistics(),
	}
	for k, c := range columns {
		words, ok := lists[c.name]
		if !ok || rows == 0 {
			continue
		}
		letter, err := excelize.ColumnNumberToName(k + 1)
		if err != nil {
			return err
		}
		v := excelize.NewDataValidation(true)
		v.Sqref = fmt.Sprintf("%s2:%s%d", letter, letter, rows+1)
		if err := v.SetDropList(words); err != nil {
			return err
		}
		if err := f.AddDataValidation(sheetName, v); err != nil {
			return err
		}
	}
	return nil
}
