package export

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"reflect"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/xuri/excelize/v2"

	"halfspan/convert/working"
	"halfspan/extract/result"
	"halfspan/report/ledger"
)

func text(s string) *string { return &s }

// hive is an invented result: a mean with its SE.
func hive(id, estimate, se string, n int) ledger.Row {
	r := result.Result{Estimate: estimate, GivenValue: se, N: n, Statistic: result.Mean, GivenAs: result.SE,
		Anchor: result.Anchor{Offset: n, Digits: se}, Snippet: "It was " + estimate + " kg (SE " + se + ")."}
	w := working.Work(working.Facts{Path: "hives.txt", SHA256: "aa"}, []result.Result{r})[0]
	w.Record.ID = id
	return ledger.Row{Item: ledger.Item{Result: r, Working: w}, State: ledger.StateOpen}
}

func decide(r ledger.Row, v ledger.Verdict, reason, note string) ledger.Row {
	r.Decision = &ledger.Decision{Seq: 1, At: time.Unix(1e9, 0).UTC(), Checker: "AB", Verdict: v, Reason: reason, Note: note, Seen: r.Item, Decided: r.Item}
	r.State = ledger.State(v)
	return r
}

// TestColumns holds that every field of the record is a column, in order, and
// that every column is described.
func TestColumns(t *testing.T) {
	var want, got []string
	for i := range reflect.TypeFor[working.Record]().NumField() {
		want = append(want, reflect.TypeFor[working.Record]().Field(i).Tag.Get("json"))
	}
	for _, c := range recordColumns() {
		got = append(got, c.name)
	}
	if !slices.Equal(got, want) {
		t.Errorf("got  %v\nwant %v", got, want)
	}
	seen := map[string]bool{}
	for _, c := range allColumns() {
		if c.describe == "" || !strings.HasSuffix(c.describe, ".") || !slices.Contains([]string{"string", "integer", "number", "datetime"}, c.kind) {
			t.Errorf("column %s is described as %q, of type %q", c.name, c.describe, c.kind)
		}
		if seen[c.name] {
			t.Errorf("column %s is there twice", c.name)
		}
		seen[c.name] = true
	}
	for _, name := range amendable {
		if !slices.Contains(working.Amendable(), name) {
			t.Errorf("%s cannot be amended", name)
		}
	}
	for _, name := range working.Amendable() {
		if !slices.Contains(amendable, name) {
			t.Errorf("%s can be amended but not in a sheet", name)
		}
	}
}

func TestHarmless(t *testing.T) {
	for in, want := range map[string]string{
		"":                    "",
		"syrup":               "syrup",
		"5.10":                "5.10",
		"-1.4":                "-1.4",
		"+0.5":                "+0.5",
		"1.5e-7":              "1.5e-7",
		"-":                   "'-",
		"=1+1":                "'=1+1",
		"+cmd|' /C calc'!A0":  "'+cmd|' /C calc'!A0",
		"-2+3":                "'-2+3",
		"@SUM(A1)":            "'@SUM(A1)",
		"  =1+1":              "'  =1+1",
		"\t=1+1":              "'\t=1+1",
		"＝1+1":                "'＝1+1",
		"-1.4 to -0.8":        "'-1.4 to -0.8",
		"mass = 5":            "mass = 5",
		"2-1":                 "2-1",
		"−1.4 (printed dash)": "−1.4 (printed dash)",
	} {
		if got := harmless(in); got != want {
			t.Errorf("%q: got %q, want %q", in, got, want)
		}
	}
}

func TestCSV(t *testing.T) {
	tricky := hive("q1", "5.1", "0.4", 12)
	tricky.Working.Record.Arm = text("=syrup, \"warm\"\nor cold")
	rows := Confirmed([]ledger.Row{
		decide(tricky, ledger.Confirmed, "", ""),
		hive("q2", "6.1", "0.5", 13),
		decide(hive("q3", "7.1", "0.6", 14), ledger.Dropped, "not needed", ""),
		decide(hive("q4", "8.1", "0.7", 15), ledger.Queried, "", "which?"),
		decide(hive("q5", "5.1", "0.4", 16), ledger.Amended, "misread", "@home"),
	})
	var out, again bytes.Buffer
	if err := CSV(&out, rows); err != nil {
		t.Fatal(err)
	}
	if err := CSV(&again, rows); err != nil || !bytes.Equal(out.Bytes(), again.Bytes()) {
		t.Errorf("twice is not the same: %v", err)
	}
	if n := bytes.Count(out.Bytes(), []byte("\r\n")); n < 3 || !bytes.HasSuffix(out.Bytes(), []byte("\r\n")) {
		t.Errorf("lines do not end as RFC 4180 says")
	}
	lines, err := csv.NewReader(&out).ReadAll()
	if err != nil || len(lines) != 3 {
		t.Fatalf("%d lines, %v", len(lines), err)
	}
	cell := func(line int, name string) string { return lines[line][slices.Index(lines[0], name)] }
	for _, test := range []struct {
		line       int
		name, want string
	}{
		{1, "id", "q1"}, {1, "arm", "'=syrup, \"warm\"\nor cold"}, {1, "n", "12"}, {1, "sd", "1.38564065"}, {1, "decided_at", "2001-09-09T01:46:40Z"},
		{1, "printed_again", "q5"}, {1, "read_estimate", "5.1"}, {1, "level", ""}, {2, "decision_note", "'@home"}, {2, "decision", "amended"},
	} {
		if got := cell(test.line, test.name); got != test.want {
			t.Errorf("line %d, %s: got %q, want %q", test.line, test.name, got, test.want)
		}
	}
	out.Reset()
	if err := CSV(&out, nil); err != nil || bytes.Count(out.Bytes(), []byte("\r\n")) != 1 {
		t.Errorf("without results: %q, %v", out.String(), err)
	}
}

func TestJSONLines(t *testing.T) {
	var out bytes.Buffer
	if err := JSONLines(&out, Confirmed([]ledger.Row{decide(hive("q1", "5.1", "0.4", 12), ledger.Confirmed, "", "<b>")})); err != nil {
		t.Fatal(err)
	}
	var line map[string]any
	if err := json.Unmarshal(out.Bytes(), &line); err != nil {
		t.Fatal(err)
	}
	if line["estimate"] != "5.1" || line["checker"] != "AB" || line["decision_note"] != "<b>" || line["sd"] != 1.38564065 {
		t.Errorf("got %v", line)
	}
}

func TestCodebook(t *testing.T) {
	var out bytes.Buffer
	if err := Codebook(&out, About{Program: "halfspan test", Results: 3, Decisions: map[string]string{"CD": "2", "AB": "1"}}); err != nil {
		t.Fatal(err)
	}
	var schema tableSchema
	if err := json.Unmarshal(out.Bytes(), &schema); err != nil {
		t.Fatal(err)
	}
	if len(schema.Fields) != len(allColumns()) || schema.Decisions["AB"] != "1" || len(schema.Cautions) == 0 || schema.PrimaryKey != "id" {
		t.Errorf("got %+v", schema)
	}
}

// sheetOf writes and reads a sheet.
func sheetOf(t *testing.T, format string, rows []ledger.Row) *Sheet {
	t.Helper()
	var out bytes.Buffer
	if err := WriteSheet(&out, format, rows); err != nil {
		t.Fatal(err)
	}
	s, err := ReadSheet(format, out.Bytes())
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func (s *Sheet) set(row int, column, text string) {
	s.Rows[row][slices.Index(s.Header, column)] = text
}

func TestSheetComesBackUnchanged(t *testing.T) {
	tricky := hive("q1", "-5.10", "0.40", 12)
	tricky.Working.Record.Time = text("1-2")
	tricky.Working.Record.Arm = text("-2 °C, =warm")
	tricky.Working.Record.Outcome = text("mass\nof the colony ")
	rows := []ledger.Row{tricky, decide(hive("q2", "6.1", "0.5", 13), ledger.Dropped, "other", "because"), decide(hive("q3", "7.1", "0.6", 14), ledger.Amended, "misread", "")}
	for _, format := range SheetFormats() {
		s := sheetOf(t, format, rows)
		drafts, notes, wrong := Drafts(s, rows)
		if len(drafts) != 0 || len(notes) != 0 || len(wrong) != 0 {
			t.Errorf("%s: %v, %v, %v", format, drafts, notes, wrong)
		}
	}
}

func TestDrafts(t *testing.T) {
	rows := []ledger.Row{hive("q1", "5.10", "0.40", 12), hive("q2", "6.1", "0.5", 13), decide(hive("q3", "7.1", "0.6", 14), ledger.Confirmed, "", "")}
	rows[1].Working.Record.Time = text("1-2")
	rows[1].Result.Time = "1-2"
	set := func(edits ...string) func(s *Sheet) {
		return func(s *Sheet) {
			for i := 0; i < len(edits); i += 3 {
				s.set(int(edits[i][0]-'0'), edits[i+1], edits[i+2])
			}
		}
	}
	for _, test := range []struct {
		name string
		edit func(s *Sheet)
		want string // drafts, or the first complaint
		note string
	}{
		{"confirm", set("0", "decision", "Confirmed"), "q1 confirmed", ""},
		{"amend", set("0", "decision", "amended", "0", "decision_reason", "misread", "0", "n", "20"), "q1 amended n=20", ""},
		{"clear a field", set("0", "decision", "amended", "0", "decision_reason", "misread", "0", "n", ""), "q1 amended n=", ""},
		{"drop and query", set("0", "decision", "dropped", "0", "decision_reason", "not needed", "1", "decision", "queried", "1", "decision_note", "why?"), "q1 dropped, q2 queried", ""},
		{"change of mind", set("2", "decision", "dropped", "2", "decision_reason", "printed twice"), "q3 dropped", ""},
		{"nothing amended", set("0", "decision", "amended", "0", "decision_reason", "misread"), "row 2, column decision (A): it says amended, but nothing differs from what was read", ""},
		{"confirmed but changed", set("0", "decision", "confirmed", "0", "n", "20"), `row 2, column n (Q): changed from "12" to "20", but the decision is not 'amended'`, ""},
		{"taken back", set("2", "decision", ""), "row 4, column decision (A): it was confirmed and is empty now: decisions are taken back in 'halfspan check' or 'halfspan desk'", ""},
		{"a note alone", set("0", "decision_note", "hm"), "row 2, column decision (A): there is a reason or a note, but no decision", ""},
		{"no such word", set("0", "decision", "amended", "0", "decision_reason", "misread", "0", "given_as", "sigma"), `row 2, column given_as (M): "sigma" is none of: ci, sd, se, iqr, range, unstated`, ""},
		{"a date out of a range", set("1", "time", "02-Jan"), `row 3, column time (U): "02-Jan" looks like a date that the spreadsheet program made of "1-2": put back what was there`, ""},
		{"a date out of a range in an amended row", set("1", "decision", "amended", "1", "decision_reason", "misread", "1", "n", "20", "1", "time", "02-Jan"), `row 3, column time (U): "02-Jan" looks like a date that the spreadsheet program made of "1-2": put back what was there`, ""},
		{"a date out of a range typed in", set("0", "decision", "amended", "0", "decision_reason", "misread", "0", "arm", "05-Jan"), `row 2, column arm (S): "05-Jan" looks like a date that the spreadsheet program made of a range such as 1-5: give the cell the format text and write it anew`, ""},
		{"a date in an estimate", set("0", "decision", "amended", "0", "decision_reason", "misread", "0", "estimate", "01-May"), `row 2, column estimate (I): "01-May" looks like a date that the spreadsheet program made of "5.10": put back what was there`, ""},
		{"a month that a person names", set("0", "decision", "amended", "0", "decision_reason", "misread", "0", "time", "May 2021"), "q1 amended n=12", ""},
		{"a day's number out of a range", set("1", "time", "46024"), `row 3, column time (U): "46024" looks like a date that the spreadsheet program made of "1-2": put back what was there`, ""},
		{"a lost zero", set("0", "estimate", "5.1"), "", `row 2, column estimate: "5.1" is "5.10" written otherwise; "5.10" is kept`},
		{"twice", set("1", "id", "q1"), "row 3, column id (AN): q1 stands in row 2, too", "1 result of the ledger not in the sheet: left as they are"},
		{"old", set("0", "decision", "confirmed", "0", "seen", "0123"), "row 2, column seen (AO): the result has changed since the sheet was written: write the sheet anew", ""},
		{"unread column", set("0", "snippet", "something else"), "", "row 2, column snippet: changed, but this column is not read back"},
		{"no such proposal", set("0", "decision", "amended", "0", "decision_reason", "misread", "0", "take", "guess"), `row 2, column take (Z): there is no proposal "guess" for this result`, ""},
		{"fewer rows", func(s *Sheet) { s.Rows = s.Rows[:2] }, "", "1 result of the ledger not in the sheet: left as they are"},
	} {
		t.Run(test.name, func(t *testing.T) {
			s := sheetOf(t, ".csv", rows)
			test.edit(s)
			drafts, notes, wrong := Drafts(s, rows)
			got := ""
			for i, d := range drafts {
				if i > 0 {
					got += ", "
				}
				got += d.ID + " " + string(d.Verdict)
				if d.Amended != nil {
					n := ""
					if p := d.Amended.Working.Record.N; p != nil {
						n = fmt.Sprint(*p)
					}
					got += " n=" + n
				}
			}
			if len(wrong) > 0 {
				got = wrong[0].Error()
			}
			if got != test.want {
				t.Errorf("got  %s\nwant %s", got, test.want)
			}
			if test.note != "" && !slices.Contains(notes, test.note) || test.note == "" && len(notes) > 0 {
				t.Errorf("notes %q, want %q", notes, test.note)
			}
		})
	}
}

// TestNumbersTypedInXLSX: what a person types into a cell that is no longer text
// comes back as it was typed.
func TestNumbersTypedInXLSX(t *testing.T) {
	rows := []ledger.Row{hive("q1", "5.10", "0.40", 12)}
	var out bytes.Buffer
	if err := WriteSheet(&out, ".xlsx", rows); err != nil {
		t.Fatal(err)
	}
	f, err := excelize.OpenReader(&out)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	for cell, value := range map[string]any{"A2": "amended", "B2": "misread", "I2": 4.1 - 0.3, "Q2": 20} {
		if err := f.SetCellValue(sheetName, cell, value); err != nil {
			t.Fatal(err)
		}
	}
	var edited bytes.Buffer
	if err := f.Write(&edited); err != nil {
		t.Fatal(err)
	}
	s, err := ReadSheet(".xlsx", edited.Bytes())
	if err != nil {
		t.Fatal(err)
	}
	drafts, _, wrong := Drafts(s, rows)
	if len(wrong) > 0 || len(drafts) != 1 {
		t.Fatalf("%v, %v", drafts, wrong)
	}
	if r := drafts[0].Amended.Working.Record; *r.Estimate != "3.8" || *r.N != 20 {
		t.Errorf("got %s, %d", *r.Estimate, *r.N)
	}
}

func TestFilesThatAreNoSheet(t *testing.T) {
	for _, test := range []struct{ format, content, want string }{
		{".csv", "", "empty"},
		{".csv", "\n\n", "empty"},
		{".csv", "id,decision\n", `"seen" is missing`},
		{".csv", "id,id,seen,decision\n", `"id" is there 2 times`},
		{".csv", "\xff\xfei\x00d\x00", "not in UTF-8"},
		{".csv", "id,seen,decision\nq\xe4,1,\n", "not in UTF-8"},
		{".csv", "id,seen,decision\nq1,1,,more\n", "more cells"},
		{".csv", "id,seen,decision\n\"q1,1\n", "reading the CSV"},
		{".xlsx", "PK\x03\x04nothing", "no .xlsx file"},
	} {
		if _, err := ReadSheet(test.format, []byte(test.content)); err == nil || !strings.Contains(err.Error(), test.want) {
			t.Errorf("%q: got %v, want %s", test.content, err, test.want)
		}
	}
}
