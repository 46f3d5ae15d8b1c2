package review

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/mattn/go-runewidth"

	"halfspan/convert/working"
	"halfspan/extract/paper"
	"halfspan/report/ledger"
)

var update = flag.Bool("update", false, "write the expected outputs anew")

// golden compares an output with the expected one kept in testdata.
func golden(t *testing.T, name, got string) {
	t.Helper()
	path := filepath.Join("testdata", name+".golden")
	if *update {
		if err := os.WriteFile(path, []byte(got), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(string(want), got); diff != "" {
		t.Errorf("%s differs (go test -update writes it anew):\n%s", name, diff)
	}
}

func text(s string) *string { return &s }
func whole(n int) *int      { return &n }
func num(v float64) *working.Number {
	n := working.Number(v)
	return &n
}
func real64(v float64) *float64 { return &v }

// hives are invented results of every kind that the table shows.
func hives() []ledger.Row {
	rows := []ledger.Row{
		{State: ledger.StateOpen}, {State: "confirmed"}, {State: "amended"}, {State: ledger.StateDiffering, Differs: []string{"n"}},
		{State: "dropped", Gone: "this version no longer finds it"}, {State: "confirmed", ByHand: "figure"},
	}
	for i, r := range []working.Record{
		{ID: "qaaaa11111", Paper: "stations/hives.pdf", Page: whole(4), Table: text("Table 2"), Statistic: text("mean"), GivenAs: text("ci"), Level: real64(95),
			Estimate: text("9.8"), Lower: text("9.1"), Upper: text("10.5"), N: whole(21), Arm: text("syrup, warmed before feeding"), Time: text("week 6"),
			Mean: num(9.8), SD: num(1.53780403), SDLow: num(1.42796088), SDHigh: num(1.64764718), SE: num(0.33557635), Use: "converted", Reading: "clear"},
		{ID: "qaaaa22222", Paper: "stations/hives.pdf", Page: whole(4), Statistic: text("mean"), GivenAs: text("sd"), Estimate: text("8.1"), GivenValue: text("1.20"),
			N: whole(20), SD: num(1.2), SDLow: num(1.195), SDHigh: num(1.205), Use: "printed", Reading: "look", Flags: []string{"n-kind-unclear", "time-unclear"}},
		{ID: "qbbbb00000", Paper: "stations/hives.pdf", Page: whole(11), Statistic: text("ratio"), Measure: text("odds ratio"), GivenAs: text("ci"), Level: real64(99.5),
			Estimate: text("2.37"), Lower: text("1.16"), Upper: text("4.83"), N: whole(121), N2: whole(119), Arm: text("syrup"), Arm2: text("water"),
			SE: num(0.363), Scale: text("log"), Use: "withheld", Reason: "a ratio", Reading: "clear"},
		{ID: "qcccc00000", Paper: "winter.txt", Statistic: text("mean"), GivenAs: text("unstated"), Estimate: text("6.8"), GivenValue: text("1.4"),
			Use: "withheld", Reason: "what ± means is not said", Reading: "doubtful", Flags: []string{"unstated"}},
		{ID: "qdddd00000", Paper: "winter.txt", Statistic: text("median"), GivenAs: text("iqr"), Estimate: text("4.1"), Lower: text("2.9"), Upper: text("7.8"),
			Use: "withheld", Reading: "look", Arm: text("花粉 pollen\x1b[31m")},
		{ID: "qeeee00000", Paper: "winter.txt", Statistic: text("mean"), GivenAs: text("range"), Estimate: text("3"), Lower: text("1"), Upper: text("5"), Use: "withheld", Reading: "clear"},
	} {
		rows[i].Working.Record = r
		if rows[i].State != ledger.StateOpen {
			seen := rows[i].Item
			rows[i].Decision = &ledger.Decision{Seq: int64(i), At: time.Unix(1e9, 0).UTC(), Checker: "AB", Verdict: ledger.Confirmed, Seen: seen, Decided: seen}
		}
	}
	return rows
}

func TestTable(t *testing.T) {
	for _, width := range []int{0, 120, 80, 40} {
		var out bytes.Buffer
		if err := Table(&out, hives(), TableOptions{Width: width}); err != nil {
			t.Fatal(err)
		}
		if strings.Contains(out.String(), "\x1b") {
			t.Error("a paper's text reaches the terminal as a control sequence")
		}
		for line := range strings.Lines(out.String()) {
			if n := runewidth.StringWidth(strings.TrimSuffix(line, "\n")); width >= 80 && n > width && !strings.HasPrefix(line, "gone:") {
				t.Errorf("width %d: a line of %d: %s", width, n, line)
			}
		}
		golden(t, map[int]string{0: "table-wide", 120: "table-120", 80: "table-80", 40: "table-40"}[width], out.String())
	}
	var coloured bytes.Buffer
	if err := Table(&coloured, hives(), TableOptions{Width: 80, Colour: true}); err != nil {
		t.Fatal(err)
	}
	golden(t, "table-colour", coloured.String())
	for line := range strings.Lines(coloured.String()) {
		shown := regexp.MustCompile("\x1b\\[[0-9]*m").ReplaceAllString(strings.TrimSuffix(line, "\n"), "")
		if n := runewidth.StringWidth(shown); n > 80 && !strings.HasPrefix(line, "gone:") || strings.HasSuffix(shown, " ") {
			t.Errorf("in colour, width 80: a line of %d: %q", n, line)
		}
	}
	var tsv bytes.Buffer
	if err := TSV(&tsv, hives()); err != nil {
		t.Fatal(err)
	}
	for line := range strings.Lines(tsv.String()) {
		if n := strings.Count(line, "\t"); n != 12 {
			t.Errorf("%d tabs in %q", n, line)
		}
	}
	golden(t, "table-tsv", tsv.String())
	var none bytes.Buffer
	if err := Table(&none, nil, TableOptions{}); err != nil || none.Len() > 0 {
		t.Errorf("a table of nothing: %q, %v", none.String(), err)
	}
}

func TestShortIDs(t *testing.T) {
	rows := hives()
	rows[1].Working.Record.ID = "qaaaa11112"
	if got := shorten(rows); got != 10 {
		t.Errorf("got %d, the ids differ in the last letter", got)
	}
}

func TestFilter(t *testing.T) {
	ids := func(rows []ledger.Row) string {
		var all []string
		for i := range rows {
			all = append(all, rows[i].ID()[1:2])
		}
		return strings.Join(all, "")
	}
	for _, test := range []struct {
		filter Filter
		want   string
	}{
		{Filter{}, "aabcde"},
		{Filter{Reading: "look, doubtful"}, "acd"},
		{Filter{State: "open"}, "a"},
		{Filter{State: "read differently since,open"}, "ac"},
		{Filter{Use: "printed"}, "a"},
		{Filter{Statistic: "mean,median"}, "aacde"},
		{Filter{Paper: "WINTER"}, "cde"},
		{Filter{Paper: "*.pdf"}, "aab"},
		{Filter{Paper: "stations/*"}, "aab"},
		{Filter{Arm: "water"}, "b"},
		{Filter{Time: "week"}, "a"},
		{Filter{Outcome: "mass"}, ""},
	} {
		if err := test.filter.Check(); err != nil {
			t.Errorf("%+v: %v", test.filter, err)
		}
		if got := ids(test.filter.Apply(hives())); got != test.want {
			t.Errorf("%+v: got %s, want %s", test.filter, got, test.want)
		}
	}
	for _, f := range []Filter{{Reading: "clera"}, {State: "done"}, {Use: "copied"}} {
		if f.Check() == nil {
			t.Errorf("%+v passes", f)
		}
	}
}

func TestSummary(t *testing.T) {
	s := Summary{PassedOver: []string{"a.docx", "b.docx", "README"}, Unchanged: 1}
	s.AddPaper(&ledger.Paper{Name: "hives.pdf", Pages: 12, Problems: []paper.Problem{
		{Page: 3, Kind: "no-text", Text: "It is a picture without text.", Lost: true},
		{Page: 5, Kind: "picture-table", Text: "Table 2 (Colony mass) is only a picture."},
		{Kind: "repaired", Text: "Two signs were repaired."},
	}})
	s.AddPaper(&ledger.Paper{Name: "winter.pdf", Failure: "the file is empty"})
	for _, r := range hives() {
		s.AddRow(&r)
	}
	for range 15 {
		s.Same = append(s.Same, Unread{"copy.pdf", "same content as hives.pdf"})
	}
	var out bytes.Buffer
	if err := s.Write(&out); err != nil {
		t.Fatal(err)
	}
	for _, u := range s.Trouble() {
		out.WriteString(u.Name + ": " + u.Reason + "\n")
	}
	golden(t, "summary", out.String())
}

func TestPrinted(t *testing.T) {
	var got []string
	for _, r := range hives() {
		got = append(got, Printed(&r.Working.Record)+" | "+Spread(&r.Working.Record)+" | "+DigitsAllow(&r.Working.Record)+" | "+Sizes(&r.Working.Record))
	}
	want := []string{
		"9.8 (95% CI 9.1 to 10.5) | 1.54 | 1.43 to 1.65 | 21",
		"8.1 (SD 1.20) | 1.20 |  | 20",
		"2.37 (99.5% CI 1.16 to 4.83) | SE 0.363 log |  | 121, 119",
		"6.8 ± 1.4 | - |  | -",
		"4.1 (IQR 2.9 to 7.8) | - |  | -",
		"3 (range 1 to 5) | - |  | -",
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
}

func TestMarkPrinted(t *testing.T) {
	record := hives()[0].Working.Record
	for snippet, want := range map[string]string{
		"It was 9.8 kg (9.1 to 10.5).":              "It was «9.8» kg («9.1» to «10.5»).",
		"After 19.8 and 9.85 it was 9.8 (9.1, 10.5": "After 19.8 and 9.85 it was «9.8» («9.1», «10.5»",
		"It was 9.8. Then more":                     "It was «9.8». Then more",
		"nothing of it":                             "nothing of it",
		"«9.8»":                                     `"«9.8»"`,
	} {
		record.Snippet = snippet
		if got := markPrinted(&record); got != want {
			t.Errorf("got %s, want %s", got, want)
		}
	}
}
