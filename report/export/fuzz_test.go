package export

import (
	"bytes"
	"testing"

	"halfspan/report/ledger"
)

// FuzzReadSheet: whatever a spreadsheet program leaves, reading it ends with
// decisions or with errors, and decisions only where no cell is wrong.
func FuzzReadSheet(f *testing.F) {
	rows := []ledger.Row{hive("q1", "5.10", "0.40", 12), decide(hive("q2", "6.1", "0.5", 13), ledger.Confirmed, "", "")}
	seeds := 0
	for _, format := range SheetFormats() {
		var out bytes.Buffer
		if err := WriteSheet(&out, format, rows); err != nil {
			f.Fatal(err)
		}
		f.Add(format == ".xlsx", out.Bytes())
		seeds++
	}
	for _, text := range []string{"id;seen;decision\nq1;x;confirmed\n", "\xef\xbb\xbfid,seen,decision,n\nq1,,amended,\"1,2\"\n", "id,seen,decision\n\"", "PK\x03\x04"} {
		f.Add(false, []byte(text))
		f.Add(true, []byte(text))
		seeds += 2
	}
	if seeds < 10 {
		f.Fatalf("only %d seeds", seeds)
	}
	f.Fuzz(func(t *testing.T, xlsx bool, content []byte) {
		format := ".csv"
		if xlsx {
			format = ".xlsx"
		}
		s, err := ReadSheet(format, content)
		if err != nil {
			return
		}
		for _, row := range s.Rows {
			if len(row) != len(s.Header) {
				t.Fatalf("a row of %d cells under %d columns", len(row), len(s.Header))
			}
		}
		drafts, _, _ := Drafts(s, rows)
		for _, d := range drafts {
			if d.Verdict == ledger.Amended && d.Amended == nil || d.Verdict == "" {
				t.Fatalf("got %+v", d)
			}
		}
	})
}
