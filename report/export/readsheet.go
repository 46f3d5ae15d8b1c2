package export

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"github.com/xuri/excelize/v2"
)

// Sheet is a spreadsheet as it was read, before anything is made of it.
type Sheet struct {
	Header []string
	Rows   [][]string // without the header; every row has a cell for each column
	Notes  []string   // what a spreadsheet program did to the file
}

// ReadSheet reads a spreadsheet of that kind. What is wrong with the file as a
// whole is an error; what single cells say is looked at by [Drafts].
func ReadSheet(format string, content []byte) (*Sheet, error) {
	if format == ".csv" {
		return readCSV(content)
	}
	return readXLSX(content)
}

func readCSV(content []byte) (*Sheet, error) {
	s := &Sheet{}
	if rest, ok := bytes.CutPrefix(content, []byte("\xef\xbb\xbf")); ok {
		content = rest
		s.Notes = append(s.Notes, "the file begins with a byte order mark, which was passed over")
	}
	if len(content) == 0 {
		return nil, errors.New("the file is empty")
	}
	if bytes.HasPrefix(content, []byte("\xff\xfe")) || bytes.HasPrefix(content, []byte("\xfe\xff")) || !utf8.Valid(content) {
		return nil, errors.New("the file is not in UTF-8: save it as 'CSV UTF-8', or use .xlsx")
	}
	first, _, _ := bytes.Cut(content, []byte("\n"))
	comma := ','
	for _, other := range []rune{';', '\t'} {
		if bytes.Count(first, []byte(string(other))) > bytes.Count(first, []byte(string(comma))) {
			comma = other
		}
	}
	if comma != ',' {
		s.Notes = append(s.Notes, fmt.Sprintf("the columns are parted by %q instead of commas, which was understood", comma))
	}
	r := csv.NewReader(bytes.NewReader(content))
	r.Comma, r.FieldsPerRecord = comma, -1
	lines, err := r.ReadAll()
	if err != nil {
		return nil, fmt.Errorf("reading the CSV: %w", err)
	}
	for _, line := range lines {
		for k, cell := range line {
			if rest, ok := strings.CutPrefix(cell, "'"); ok && harmless(rest) == cell {
				line[k] = rest
			}
		}
	}
	return s.settle(lines)
}

func readXLSX(content []byte) (*Sheet, error) {
	f, err := excelize.OpenReader(bytes.NewReader(content), excelize.Options{RawCellValue: true, UnzipSizeLimit: 512 << 20})
	if err != nil {
		return nil, fmt.Errorf("this is no .xlsx file that can be read: %w", err)
	}
	defer f.Close()
	name := sheetName
	if i, err := f.GetSheetIndex(name); err != nil || i < 0 {
		name = f.GetSheetName(0)
	}
	lines, err := f.GetRows(name)
	if err != nil {
		return nil, fmt.Errorf("reading the sheet: %w", err)
	}
	for i, line := range lines {
		for k, cell := range line {
			line[k] = shortest(f, name, i, k, cell)
		}
	}
	return (&Sheet{}).settle(lines)
}

// shortest writes a cell that a spreadsheet program stored as a binary number as
// it was typed: 5.1 and not 5.0999999999999996.
func shortest(f *excelize.File, sheet string, row, col int, cell string) string {
	v, err := strconv.ParseFloat(cell, 64)
	if err != nil || len(cell) < 15 {
		return cell
	}
	at, err := excelize.CoordinatesToCellName(col+1, row+1)
	if err != nil {
		return cell
	}
	if kind, err := f.GetCellType(sheet, at); err != nil || kind == excelize.CellTypeSharedString || kind == excelize.CellTypeInlineString {
		return cell
	}
	return strconv.FormatFloat(v, 'g', 15, 64)
}

// settle parts header and rows, makes the rows equally long and leaves empty
// ones out at the end.
func (s *Sheet) settle(lines [][]string) (*Sheet, error) {
	for len(lines) > 0 && strings.TrimSpace(strings.Join(lines[len(lines)-1], "")) == "" {
		lines = lines[:len(lines)-1]
	}
	if len(lines) == 0 {
		return nil, errors.New("the sheet is empty")
	}
	for _, name := range lines[0] {
		s.Header = append(s.Header, strings.TrimSpace(name))
	}
	for _, name := range []string{colID, colSeen, colDecision} {
		switch n := count(s.Header, name); {
		case n == 0:
			return nil, fmt.Errorf("the column %q is missing: write the sheet anew with 'halfspan sheet write' and keep all its columns", name)
		case n > 1:
			return nil, fmt.Errorf("the column %q is there %d times", name, n)
		}
	}
	for i, line := range lines[1:] {
		for len(line) < len(s.Header) {
			line = append(line, "")
		}
		if extra := slices.IndexFunc(line[len(s.Header):], func(c string) bool { return strings.TrimSpace(c) != "" }); extra >= 0 {
			return nil, fmt.Errorf("row %d has more cells than there are columns: %q", i+2, line[len(s.Header)+extra])
		}
		s.Rows = append(s.Rows, line[:len(s.Header)])
	}
	return s, nil
}

func count(all []string, word string) int {
	n := 0
	for _, s := range all {
		if s == word {
			n++
		}
	}
	return n
}
