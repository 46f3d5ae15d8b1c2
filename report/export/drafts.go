package export

import (
	"errors"
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"

	"halfspan/report/ledger"
	"halfspan/report/review"
)

// CellError says what is wrong with one cell of a sheet.
type CellError struct {
	Row    int // as spreadsheet programs count, the header being row 1
	Column string
	Letter string // of the column
	Text   string
}

func (e *CellError) Error() string {
	return fmt.Sprintf("row %d, column %s (%s): %s", e.Row, e.Column, e.Letter, e.Text)
}

// Drafts makes of a sheet the decisions that were taken in it: those of the rows
// whose decision is new or whose cells were changed. rows is what the ledger
// holds now. Every cell that cannot be taken is reported, and then no draft is to
// be used. Notes say what a spreadsheet program did to cells that nobody meant to
// change, and what of the sheet was passed over.
func Drafts(s *Sheet, rows []ledger.Row) (drafts []ledger.Draft, notes []string, wrong []*CellError) {
	d := &drafting{sheet: s, rows: map[string]*ledger.Row{}, seen: map[string]int{}, texts: map[string]func(r *ledger.Row) string{}}
	for i := range rows {
		d.rows[rows[i].ID()] = &rows[i]
	}
	for _, c := range sheetColumns() {
		d.texts[c.name] = c.text
	}
	d.notes = append(d.notes, s.Notes...)
	d.columns()
	for i := range s.Rows {
		d.at = i
		if draft := d.row(); draft != nil {
			d.drafts = append(d.drafts, *draft)
		}
	}
	if missing := len(rows) - len(d.seen); missing > 0 {
		d.notes = append(d.notes, fmt.Sprintf("%s of the ledger not in the sheet: left as they are", review.Count(missing, "result")))
	}
	return d.drafts, d.notes, d.wrong
}

// drafting is the work on one sheet.
type drafting struct {
	sheet  *Sheet
	rows   map[string]*ledger.Row
	texts  map[string]func(r *ledger.Row) string // of the columns, as they would be written now
	seen   map[string]int                        // row by id
	at     int
	drafts []ledger.Draft
	notes  []string
	wrong  []*CellError
}

// columns notes which columns of the sheet are not ours, and which of ours are
// gone.
func (d *drafting) columns() {
	for _, name := range d.sheet.Header {
		if d.texts[name] == nil && name != "" {
			d.notes = append(d.notes, fmt.Sprintf("the column %q is not one of halfspan's and was passed over", name))
		}
	}
	for _, name := range amendable {
		if !slices.Contains(d.sheet.Header, name) {
			d.notes = append(d.notes, fmt.Sprintf("the column %q is gone from the sheet: taken as unchanged", name))
		}
	}
}

// cell is a cell of the row at hand.
func (d *drafting) cell(name string) (text string, ok bool) {
	k := slices.Index(d.sheet.Header, name)
	if k < 0 {
		return "", false
	}
	return strings.TrimSpace(d.sheet.Rows[d.at][k]), true
}

func (d *drafting) fail(column, format string, args ...any) {
	letter, err := excelize.ColumnNumberToName(max(1, slices.Index(d.sheet.Header, column)+1))
	if err != nil {
		letter = "?"
	}
	d.wrong = append(d.wrong, &CellError{d.at + 2, column, letter, fmt.Sprintf(format, args...)})
}

func (d *drafting) note(column, format string, args ...any) {
	d.notes = append(d.notes, fmt.Sprintf("row %d, column %s: ", d.at+2, column)+fmt.Sprintf(format, args...))
}

// row makes the draft of one row; nil where nothing is decided in it, or where
// something is wrong with it.
func (d *drafting) row() *ledger.Draft {
	id, _ := d.cell(colID)
	row := d.rows[id]
	switch {
	case row == nil:
		d.fail(colID, "there is no result %q in the ledger", id)
		return nil
	case d.seen[id] != 0:
		d.fail(colID, "%s stands in row %d, too", id, d.seen[id])
		return nil
	}
	d.seen[id] = d.at + 2
	before := len(d.wrong)
	changed := d.changedFields(row)
	d.passedOver(row)
	take, _ := d.cell(colTake)
	draft := &ledger.Draft{ID: id, Mode: "sheet", Verdict: d.verdict(row)}
	draft.Token, _ = d.cell(colSeen)
	draft.Reason, _ = d.cell(colReason)
	draft.Note, _ = d.cell(colNote)
	if note := strings.TrimSpace(d.texts[colNote](row)); note != draft.Note {
		if _, err := habit(note, draft.Note); err != nil && madeDate.MatchString(draft.Note) {
			d.fail(colNote, "%v", err)
		}
	}
	if len(d.wrong) > before || !d.decided(row, draft, changed, take) {
		return nil
	}
	if draft.Token != row.Token() {
		d.fail(colSeen, "the result has changed since the sheet was written: write the sheet anew")
		return nil
	}
	if draft.Verdict == ledger.Amended {
		d.amend(row, draft, changed, take)
	}
	if len(d.wrong) > before {
		return nil
	}
	return draft
}

// verdict reads the decision cell.
func (d *drafting) verdict(row *ledger.Row) ledger.Verdict {
	text, _ := d.cell(colDecision)
	switch v := ledger.Verdict(strings.ToLower(text)); v {
	case ledger.Confirmed, ledger.Amended, ledger.Dropped, ledger.Queried:
		return v
	case "":
		if row.Decision != nil {
			d.fail(colDecision, "it was %s and is empty now: decisions are taken back in 'halfspan check' or 'halfspan desk'", row.Decision.Verdict)
		}
		return ""
	}
	d.fail(colDecision, "%q is none of: confirmed, amended, dropped, queried", text)
	return ""
}

// decided tells whether the row holds a decision that is not in the ledger yet,
// and complains where cells and decision do not go together.
func (d *drafting) decided(row *ledger.Row, draft *ledger.Draft, changed map[string]string, take string) bool {
	if draft.Verdict != ledger.Amended {
		for _, name := range amendable {
			if _, ok := changed[name]; ok {
				d.fail(name, "changed from %q to %q, but the decision is not 'amended'", d.texts[name](row), changed[name])
				return false
			}
		}
		if take != "" {
			d.fail(colTake, "a proposal is taken, but the decision is not 'amended'")
			return false
		}
	}
	if draft.Verdict == "" {
		if draft.Reason != "" || draft.Note != "" {
			d.fail(colDecision, "there is a reason or a note, but no decision")
		}
		return false
	}
	if was := row.Decision; was != nil && row.State != ledger.StateDiffering && was.Verdict == draft.Verdict &&
		was.Reason == draft.Reason && was.Note == draft.Note && len(changed) == 0 && take == "" {
		return false
	}
	if row.State == ledger.StateDiffering && len(changed) == 0 && row.Decision.Verdict == draft.Verdict && row.Decision.Note == draft.Note {
		d.note(colDecision, "%s was read differently since it was %s: decide it in 'halfspan check' or 'halfspan desk', where both are seen", draft.ID, draft.Verdict)
		return false
	}
	if (draft.Verdict == ledger.Dropped || draft.Verdict == ledger.Amended) && !slices.Contains(ledger.Reasons(), draft.Reason) {
		d.fail(colReason, "%q is none of: %s", draft.Reason, strings.Join(ledger.Reasons(), ", "))
		return false
	}
	return true
}

// amend works the result through again with the changed cells.
func (d *drafting) amend(row *ledger.Row, draft *ledger.Draft, changed map[string]string, take string) {
	// Cells are compared with what holds now; the working starts from what was read.
	all := map[string]string{}
	for _, name := range amendable {
		text, isChanged := changed[name]
		if !isChanged {
			text = d.texts[name](row)
		}
		if read, _ := review.Field(&row.Working.Record, name); text != read {
			all[name] = text
		}
	}
	if len(all) == 0 && take == "" {
		d.fail(colDecision, "it says amended, but nothing differs from what was read")
		return
	}
	item, err := review.Amend(&row.Item, all, take)
	if err != nil {
		column := colDecision
		for _, name := range append(slices.Clone(amendable), colTake) {
			if strings.HasPrefix(err.Error(), name+":") {
				column = name
			}
		}
		if column == colDecision && take != "" {
			column = colTake
		}
		d.fail(column, "%s", strings.TrimPrefix(err.Error(), column+": "))
		return
	}
	draft.Amended = item
}

// changedFields compares the cells that may be amended with what holds now.
func (d *drafting) changedFields(row *ledger.Row) map[string]string {
	changed := map[string]string{}
	for _, name := range amendable {
		cell, ok := d.cell(name)
		now := strings.TrimSpace(d.texts[name](row))
		if !ok || cell == now {
			continue
		}
		switch what, err := habit(now, cell); {
		case err != nil:
			d.fail(name, "%v", err)
		case what != "":
			d.note(name, "%s", what)
		default:
			changed[name] = cell
		}
	}
	return changed
}

// passedOver notes changed cells of columns that are not read back.
func (d *drafting) passedOver(row *ledger.Row) {
	for _, name := range d.sheet.Header {
		text := d.texts[name]
		if text == nil || slices.Contains(amendable, name) || slices.Contains([]string{colDecision, colReason, colNote, colTake, colID, colSeen, "state"}, name) {
			continue
		}
		cell, _ := d.cell(name)
		now := strings.TrimSpace(text(row))
		if cell == now || row.Token() != d.seenCell() {
			continue
		}
		if what, err := habit(now, cell); err == nil && what == "" && strings.Join(strings.Fields(cell), " ") != strings.Join(strings.Fields(now), " ") {
			d.note(name, "changed, but this column is not read back")
		}
	}
}

func (d *drafting) seenCell() string {
	text, _ := d.cell(colSeen)
	return text
}

const months = `(jan|feb|mar|apr|may|jun|jul|aug|sep|oct|nov|dec|mär|mai|okt|dez)\.?`

var (
	monthDate = regexp.MustCompile(`(?i)^(\d{1,4}[-. /]?` + months + `|` + months + `[-. /]?\d{1,4})$`)
	madeDate  = regexp.MustCompile(`(?i)^(\d{1,2}(-|\. ?)` + months + `|` + months + `-\d{2,4}|\d{4}-\d{2}-\d{2}[T ]00:00(:00.*)?)$`) // no person writes it so
	fullDate  = regexp.MustCompile(`^\d{4}-\d{2}-\d{2}([T ].*)?$|^\d{1,2}[./]\d{1,2}[./]\d{2,4}$`)
	rangeText = regexp.MustCompile(`^\d{1,4}\s*[-–/.]\s*\d{1,4}$`)
)

// habit recognises what spreadsheet programs do to cells by themselves. It
// returns what was done where the value is the same all the same, an error where
// what was meant cannot be told, and nothing where a person changed the cell.
func habit(now, cell string) (string, error) {
	if madeDate.MatchString(cell) && !rangeText.MatchString(now) {
		return "", fmt.Errorf("%q looks like a date that the spreadsheet program made of a range such as 1-5: give the cell the format text and write it anew", cell)
	}
	if rangeText.MatchString(now) && (monthDate.MatchString(cell) || fullDate.MatchString(cell) || isSerial(cell)) {
		return "", fmt.Errorf("%q looks like a date that the spreadsheet program made of %q: put back what was there", cell, now)
	}
	was, err := strconv.ParseFloat(now, 64)
	numeric := err == nil
	if v, err := strconv.ParseFloat(strings.Replace(cell, ",", ".", 1), 64); err == nil && strings.Contains(cell, ",") {
		if numeric && v == was {
			return fmt.Sprintf("%q has a decimal comma; %q is kept", cell, now), nil
		}
		return "", fmt.Errorf("%q has a comma: write the decimal mark as '.' and no thousands marks", cell)
	}
	if v, err := strconv.ParseFloat(cell, 64); err == nil && numeric && v == was {
		return fmt.Sprintf("%q is %q written otherwise; %q is kept", cell, now, now), nil
	}
	if errors.Is(err, strconv.ErrRange) {
		return "", fmt.Errorf("%q is no number that can be used", cell)
	}
	return "", nil
}

// isSerial tells the number by which spreadsheet programs count days since 1900.
func isSerial(cell string) bool {
	v, err := strconv.Atoi(cell)
	return err == nil && v > 20000 && v < 80000
}
