package ledger

import (
	"database/sql"
	"errors"
	"os"
	"path/filepath"
	"reflect"
	"slices"
	"strings"
	"testing"

	"halfspan/convert/working"
)

// rawExec changes a file behind the package's back.
func rawExec(t *testing.T, path, statement string) {
	t.Helper()
	db, err := sql.Open("sqlite", path)
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close()
	if _, err := db.Exec(statement); err != nil {
		t.Fatal(err)
	}
}

func TestFilesThatAreNoLedger(t *testing.T) {
	dir := t.TempDir()
	write := func(name, content string) string {
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, []byte(content), 0o644); err != nil {
			t.Fatal(err)
		}
		return path
	}
	good := filepath.Join(dir, "good.ledger")
	keep(t, good, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"))
	whole, err := os.ReadFile(good)
	if err != nil {
		t.Fatal(err)
	}
	newer := write("newer.ledger", string(whole))
	rawExec(t, newer, "PRAGMA user_version = 99")
	foreign := filepath.Join(dir, "foreign.ledger")
	rawExec(t, foreign, "CREATE TABLE bees (name TEXT)")
	scrambled := slices.Clone(whole)
	for i := 4096; i < len(scrambled); i++ {
		scrambled[i] ^= 0x5a
	}
	for _, test := range []struct {
		name, path string
		want       error
	}{
		{"none", filepath.Join(dir, "none.ledger"), ErrNone},
		{"text", write("text.ledger", "the quick brown bee\n"), ErrDamaged},
		{"another program's", foreign, ErrDamaged},
		{"a newer version's", newer, ErrNewer},
		{"cut short", write("cut.ledger", string(whole[:len(whole)/2])), ErrDamaged},
		{"scrambled", write("scrambled.ledger", string(scrambled)), ErrDamaged},
		{"a folder", dir, ErrDamaged},
	} {
		t.Run(test.name, func(t *testing.T) {
			l, err := Open(test.path)
			if err == nil {
				l.Close()
			}
			var fe *FileError
			if !errors.Is(err, test.want) || !errors.As(err, &fe) || fe.Hint == "" || fe.Path != test.path {
				t.Errorf("got %v, want %v with a hint", err, test.want)
			}
		})
	}
	if _, err := Create(filepath.Join(dir, "no", "such", "x.ledger")); !errors.Is(err, ErrReadOnly) {
		t.Errorf("no folder: got %v", err)
	}
	// Left empty by a process that was killed while making it, or cut off: to look at
	// it is an error, a scan fills it.
	empty := write("empty.ledger", "")
	if _, err := Open(empty); !errors.Is(err, ErrDamaged) || !strings.Contains(err.Error(), "it is empty: scan again") {
		t.Errorf("empty file: got %v", err)
	}
	l, err := Create(empty)
	if err != nil {
		t.Fatalf("empty file: %v", err)
	}
	l.Close()
}

func TestMigration(t *testing.T) {
	path := filepath.Join(t.TempDir(), "x.ledger")
	old := schema{"CREATE TABLE hives (name TEXT); INSERT INTO hives VALUES ('Station A')"}
	db, err := open(path, old, creating)
	if err != nil {
		t.Fatal(err)
	}
	db.Close()
	broken := append(slices.Clone(old), "ALTER TABLE hives ADD COLUMN mass REAL", "ALTER TABLE nothing ADD COLUMN x")
	if _, err := open(path, broken, writing); err == nil || !strings.Contains(err.Error(), "step 3") {
		t.Fatalf("broken step: got %v", err)
	}
	grown := append(slices.Clone(old), "ALTER TABLE hives ADD COLUMN mass REAL DEFAULT 5.1")
	for range 2 { // the second time there is nothing to do
		if db, err = open(path, grown, reading); err != nil {
			t.Fatal(err)
		}
		var name string
		var mass float64
		if err := db.QueryRow("SELECT name, mass FROM hives").Scan(&name, &mass); err != nil || name != "Station A" || mass != 5.1 {
			t.Fatalf("got %s %g, %v", name, mass, err)
		}
		db.Close()
	}
	if _, err := open(path, old, reading); !errors.Is(err, ErrNewer) {
		t.Errorf("older program: got %v", err)
	}
}

func TestDecisionsAreOnlyAdded(t *testing.T) {
	path := filepath.Join(t.TempDir(), FileName)
	keep(t, path, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"))
	b := openBook(t, path, "AB")
	if _, err := b.Decide(draft(rowsOf(t, b)[0], Confirmed)); err != nil {
		t.Fatal(err)
	}
	db, err := sql.Open("sqlite", CheckerPath(path, "AB"))
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close()
	for _, statement := range []string{"DELETE FROM decisions", "UPDATE decisions SET note = 'x'"} {
		if _, err := db.Exec(statement); err == nil {
			t.Errorf("%s went through", statement)
		}
	}
	// A file under another checker's name is refused.
	if err := os.Rename(CheckerPath(path, "AB"), CheckerPath(path, "CD")); err != nil {
		t.Fatal(err)
	}
	if _, err := OpenBook(path, Options{Checker: "CD"}); err == nil || !strings.Contains(err.Error(), "decisions of AB") {
		t.Errorf("got %v", err)
	}
}

func TestBusy(t *testing.T) {
	if testing.Short() {
		t.Skip("waits for the lock")
	}
	path := filepath.Join(t.TempDir(), FileName)
	keep(t, path, hives("aa"))
	db, err := sql.Open("sqlite", path)
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close()
	db.SetMaxOpenConns(1)
	if _, err := db.Exec("BEGIN IMMEDIATE"); err != nil {
		t.Fatal(err)
	}
	l, err := Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer l.Close()
	if _, err := l.Keep(hives("bb"), nil); !errors.Is(err, ErrBusy) {
		t.Errorf("got %v", err)
	}
}

// TestRecordsView holds that every field of the record is a column of the view.
func TestRecordsView(t *testing.T) {
	path := filepath.Join(t.TempDir(), FileName)
	keep(t, path, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"))
	db, err := sql.Open("sqlite", path)
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close()
	rows, err := db.Query("SELECT * FROM records")
	if err != nil {
		t.Fatal(err)
	}
	defer rows.Close()
	got, err := rows.Columns()
	if err != nil {
		t.Fatal(err)
	}
	var want []string
	for i := range reflect.TypeFor[working.Record]().NumField() {
		want = append(want, reflect.TypeFor[working.Record]().Field(i).Tag.Get("json"))
	}
	if !slices.Equal(got, want) {
		t.Errorf("got  %v\nwant %v", got, want)
	}
	var estimate string
	rows.Close()
	if err := db.QueryRow("SELECT estimate FROM records WHERE lower = '4.2'").Scan(&estimate); err != nil || estimate != "5.1" {
		t.Errorf("got %q, %v", estimate, err)
	}
}

func TestNoFilesBesides(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, FileName)
	keep(t, path, hives("aa"), hive("aa", 10, "5.1", "4.2", "6.0"))
	b := openBook(t, path, "AB")
	if _, err := b.Decide(draft(rowsOf(t, b)[0], Confirmed)); err != nil {
		t.Fatal(err)
	}
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, e := range entries {
		names = append(names, e.Name())
	}
	if want := []string{"halfspan.AB.ledger", "halfspan.ledger"}; !slices.Equal(names, want) {
		t.Errorf("got %v, want %v", names, want)
	}
}
