package ledger

import (
	"errors"
	"path/filepath"
	"slices"
	"testing"
	"time"

	"halfspan/convert/working"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

func text(s string) *string { return &s }

// hive makes a result of the invented paper with that content, at a byte offset.
func hive(sha string, offset int, estimate, low, high string) Item {
	anchor := result.Anchor{Offset: offset, Digits: low + high}
	return Item{
		Result: result.Result{Anchor: anchor, Estimate: estimate, Lower: low, Upper: high},
		Working: working.Working{Anchor: anchor, Record: working.Record{
			ID: anchor.Name(sha), Paper: "hives.txt", PaperSHA256: sha, Estimate: text(estimate), Lower: text(low), Upper: text(high),
			Statistic: text("mean"), GivenAs: text("ci"), Use: "withheld", Reading: "clear",
		}},
	}
}

func hives(sha string) Paper {
	return Paper{Name: "hives.txt", SHA256: sha, Format: paper.Text, Reader: "1"}
}

// keep scans a paper into the ledger at path.
func keep(t *testing.T, path string, p Paper, items ...Item) []Item {
	t.Helper()
	l, err := Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer l.Close()
	items, err = l.Keep(p, items)
	if err != nil {
		t.Fatal(err)
	}
	return items
}

func openBook(t *testing.T, path, checker string) *Book {
	t.Helper()
	b, err := OpenBook(path, Options{Checker: checker, Version: "test", Now: func() time.Time { return time.Unix(1e9, 0) }})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { b.Close() })
	return b
}

func rowsOf(t *testing.T, b *Book) []Row {
	t.Helper()
	rows, err := b.Rows()
	if err != nil {
		t.Fatal(err)
	}
	return rows
}

func states(t *testing.T, b *Book) []State {
	t.Helper()
	var all []State
	for _, r := range rowsOf(t, b) {
		all = append(all, r.State)
	}
	return all
}

func draft(r Row, v Verdict) Draft {
	return Draft{ID: r.ID(), Token: r.Token(), Verdict: v, Mode: "test"}
}

func amended(r Row, estimate string) *Item {
	item := r.Item
	item.Working.Record.Estimate = text(estimate)
	return &item
}

func TestDecisions(t *testing.T) {
	path := filepath.Join(t.TempDir(), FileName)
	keep(t, path, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"), hive("aa", 50, "7.1", "6.2", "8.0"),
		hive("aa", 90, "2.1", "1.2", "3.0"), hive("aa", 120, "9.1", "8.2", "9.9"))
	b := openBook(t, path, "ab")
	rows := rowsOf(t, b)

	for _, test := range []struct {
		name  string
		draft Draft
		want  error
	}{
		{"no reason to drop", draft(rows[0], Dropped), ErrReason},
		{"foreign reason", Draft{ID: rows[0].ID(), Token: rows[0].Token(), Verdict: Dropped, Reason: "dull"}, ErrReason},
		{"other without words", Draft{ID: rows[0].ID(), Token: rows[0].Token(), Verdict: Dropped, Reason: ReasonOther, Note: " "}, ErrReason},
		{"query of nothing", draft(rows[0], Queried), ErrReason},
		{"amended into itself", Draft{ID: rows[0].ID(), Token: rows[0].Token(), Verdict: Amended, Reason: "misread", Amended: amended(rows[0], "5.1")}, ErrUnchanged},
		{"unknown", Draft{ID: "q123456789", Verdict: Confirmed}, ErrUnknown},
		{"stale", Draft{ID: rows[0].ID(), Token: "x", Verdict: Confirmed}, ErrStale},
	} {
		if _, err := b.Decide(test.draft); !errors.Is(err, test.want) {
			t.Errorf("%s: got %v, want %v", test.name, err, test.want)
		}
	}
	if got := states(t, b); !slices.Equal(got, []State{"open", "open", "open", "open"}) {
		t.Fatalf("refused decisions were kept: %v", got)
	}

	// All or nothing.
	if _, err := b.Decide(draft(rows[0], Confirmed), draft(rows[1], Dropped)); !errors.Is(err, ErrReason) {
		t.Fatalf("got %v", err)
	}
	if got := states(t, b); got[0] != StateOpen {
		t.Errorf("half of a refused batch was kept: %v", got)
	}

	drop := draft(rows[2], Dropped)
	drop.Reason = "printed twice"
	amend := draft(rows[1], Amended)
	amend.Reason, amend.Amended = "misread", amended(rows[1], "7.7")
	query := draft(rows[3], Queried)
	query.Note = "which station?"
	if _, err := b.Decide(draft(rows[0], Confirmed), amend, drop, query); err != nil {
		t.Fatal(err)
	}
	want := []State{"confirmed", "amended", "dropped", "queried"}
	if got := states(t, b); !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
	if got := rowsOf(t, b)[1].Current().Working.Record.Estimate; *got != "7.7" {
		t.Errorf("amended value is %s", *got)
	}

	// What was shown before the decision is stale after it.
	if _, err := b.Decide(draft(rows[0], Confirmed)); !errors.Is(err, ErrStale) {
		t.Errorf("deciding twice on one sight: got %v", err)
	}

	// Another process sees the same, and its decision is seen here.
	other := openBook(t, path, "AB")
	if got := states(t, other); !slices.Equal(got, want) {
		t.Errorf("reopened: got %v, want %v", got, want)
	}
	before, _ := b.Stamp()
	last := rowsOf(t, other)[0]
	if _, err := other.Undo(last.ID(), last.Token(), "test"); err != nil {
		t.Fatal(err)
	}
	if after, _ := b.Stamp(); after == before {
		t.Error("the stamp has not moved")
	}
	if got := states(t, b)[0]; got != StateOpen {
		t.Errorf("undone elsewhere, here still %s", got)
	}
	first := rowsOf(t, b)[0]
	if _, err := b.Undo(first.ID(), first.Token(), "test"); !errors.Is(err, ErrNothing) {
		t.Errorf("undo of nothing: got %v", err)
	}
	if h, _ := b.History(first.ID()); len(h) != 2 {
		t.Errorf("history has %d entries, want 2", len(h))
	}
	// Another checker has seen nothing of it.
	if got := states(t, openBook(t, path, "CD")); !slices.Equal(got, []State{"open", "open", "open", "open"}) {
		t.Errorf("CD sees %v", got)
	}
	if got, _ := Checkers(path); !slices.Equal(got, []string{"AB"}) {
		t.Errorf("checkers: %v", got)
	}
}

func TestUndoRestores(t *testing.T) {
	path := filepath.Join(t.TempDir(), FileName)
	keep(t, path, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"))
	b := openBook(t, path, "AB")
	decide := func(v Verdict, want State) {
		t.Helper()
		d := draft(rowsOf(t, b)[0], v)
		d.Reason = "not needed"
		if _, err := b.Decide(d); err != nil {
			t.Fatal(err)
		}
		if got := states(t, b)[0]; got != want {
			t.Fatalf("got %s, want %s", got, want)
		}
	}
	undo := func(want State) {
		t.Helper()
		r := rowsOf(t, b)[0]
		if _, err := b.Undo(r.ID(), r.Token(), "test"); err != nil {
			t.Fatal(err)
		}
		if got := states(t, b)[0]; got != want {
			t.Fatalf("after undo: got %s, want %s", got, want)
		}
	}
	decide(Confirmed, "confirmed")
	decide(Dropped, "dropped")
	undo("confirmed")
	decide(Queried, "queried")
	undo("confirmed")
	undo("open")
}

func TestScanAgain(t *testing.T) {
	path := filepath.Join(t.TempDir(), FileName)
	first := keep(t, path, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"), hive("aa", 50, "7.1", "6.2", "8.0"), hive("aa", 90, "2.1", "1.2", "3.0"))
	b := openBook(t, path, "AB")
	for _, r := range rowsOf(t, b) {
		if _, err := b.Decide(draft(r, Confirmed)); err != nil {
			t.Fatal(err)
		}
	}
	// A later version finds one more, reads the second otherwise, and no longer
	// finds the third. A renamed id must not part a decision from its result.
	changed := hive("aa", 50, "7.4", "6.2", "8.0")
	moved := hive("aa", 10, "5.1", "4.2", "6.0")
	moved.Working.Record.ID = "qzzzzzzzzz"
	moved.Working.Record.Mates = []string{changed.Working.Record.ID, "q000000000"}
	again := keep(t, path, hives("aa"), hive("aa", 2, "1", "0", "2"), moved, changed)
	if again[1].Working.Record.ID != first[0].Working.Record.ID {
		t.Errorf("id %s became %s", first[0].Working.Record.ID, again[1].Working.Record.ID)
	}
	rows := rowsOf(t, b)
	if got, want := states(t, b), []State{"open", "confirmed", StateDiffering, "confirmed"}; !slices.Equal(got, want) {
		t.Fatalf("got %v, want %v", got, want)
	}
	if got := rows[2].Differs; !slices.Equal(got, []string{"estimate"}) {
		t.Errorf("differs in %v", got)
	}
	if got := *rows[2].Current().Working.Record.Estimate; got != "7.1" {
		t.Errorf("the confirmed value became %s", got)
	}
	if rows[3].Gone == "" || rows[0].Gone != "" {
		t.Errorf("gone: %q, %q", rows[0].Gone, rows[3].Gone)
	}

	// The file changes: its decisions stay, with the reason.
	keep(t, path, hives("bb"), hive("bb", 10, "5.1", "4.2", "6.0"))
	rows = rowsOf(t, b)
	if len(rows) != 4 || rows[0].State != StateOpen || rows[1].Gone != "its paper's file has changed" {
		t.Fatalf("got %d rows, %+v", len(rows), rows[1].Gone)
	}
	// The old content comes back.
	keep(t, path, hives("aa"), moved, changed)
	if got := states(t, b); got[0] != "confirmed" {
		t.Errorf("got %v", got)
	}
}

func TestRenamedPaperKeepsItsIDs(t *testing.T) {
	path := filepath.Join(t.TempDir(), FileName)
	first := keep(t, path, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"))
	l, err := Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer l.Close()
	renamed := hives("aa")
	renamed.Name = "stations/hives.txt"
	item := hive("aa", 10, "5.1", "4.2", "6.0")
	item.Working.Record.ID = "qother"
	var same *ErrSameContent
	if _, err := l.Keep(renamed, []Item{item}); !errors.As(err, &same) || same.Name != "hives.txt" {
		t.Fatalf("got %v", err)
	}
	if err := l.MarkMissing(func(name string) bool { return name == "hives.txt" }); err != nil {
		t.Fatal(err)
	}
	got, err := l.Keep(renamed, []Item{item})
	if err != nil || got[0].Working.Record.ID != first[0].Working.Record.ID {
		t.Fatalf("got %v, %v", got, err)
	}
	papers, err := l.Papers()
	if err != nil || len(papers) != 1 || papers[0].Name != renamed.Name {
		t.Errorf("got %v, %v", papers, err)
	}
}

func TestAddedByHand(t *testing.T) {
	path := filepath.Join(t.TempDir(), FileName)
	keep(t, path, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"))
	b := openBook(t, path, "AB")
	item := hive("aa", 0, "4.4", "3.3", "5.5")
	item.Working.Anchor = result.Anchor{}
	if _, err := b.Add(item, "hearsay", "", "test", nil); err == nil {
		t.Error("hearsay is a source")
	}
	foreign := item
	foreign.Working.Record.PaperSHA256 = "zz"
	if _, err := b.Add(foreign, "figure", "", "test", nil); err == nil {
		t.Error("added to no paper")
	}
	one, err := b.Add(item, "figure", "read off the axis", "test", nil)
	if err != nil {
		t.Fatal(err)
	}
	two, err := b.Add(item, "figure", "", "test", nil)
	if err != nil || one.ID() == two.ID() {
		t.Fatalf("got %s and %s, %v", one.ID(), two.ID(), err)
	}
	amend := draft(one, Amended)
	amend.Reason, amend.Amended = "misread", amended(one, "4.5")
	if _, err := b.Decide(amend); err != nil {
		t.Fatal(err)
	}
	if got, want := states(t, b), []State{"open", "amended", "confirmed"}; !slices.Equal(got, want) {
		t.Fatalf("got %v, want %v", got, want)
	}
	if _, err := b.Undo(two.ID(), two.Token(), "test"); err != nil {
		t.Fatal(err)
	}
	if got := states(t, b); len(got) != 2 {
		t.Errorf("an added result without its decision is still there: %v", got)
	}
}

func TestDecidingNeedsAChecker(t *testing.T) {
	path := filepath.Join(t.TempDir(), FileName)
	keep(t, path, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"))
	b := openBook(t, path, "")
	if _, err := b.Decide(draft(rowsOf(t, b)[0], Confirmed)); !errors.Is(err, ErrChecker) {
		t.Errorf("got %v", err)
	}
	for _, bad := range []string{"..", "a/b", "", "a b", "abcdefghi", "a.b"} {
		if _, err := Initials(bad); err == nil {
			t.Errorf("%q passes for initials", bad)
		}
	}
}
