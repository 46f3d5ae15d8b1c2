package main

import (
	"database/sql"
	"encoding/binary"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf16"

	"github.com/pdfcpu/pdfcpu/pkg/api"
	"github.com/pdfcpu/pdfcpu/pkg/pdfcpu/model"
)

const hiveText = "Results\n\nMean colony mass was 9.8 kg (95% CI 9.1 to 10.5; n = 21) with syrup – at 20 °C.\n"

// TestBadFiles reads a folder of files that are wrong each in its own way, and
// holds what is said of each.
func TestBadFiles(t *testing.T) {
	dir := t.TempDir()
	papers := filepath.Join("..", "..", "testdata", "papers")
	write := func(name string, content []byte) {
		t.Helper()
		if err := os.WriteFile(filepath.Join(dir, name), content, 0o666); err != nil {
			t.Fatal(err)
		}
	}
	whole, err := os.ReadFile(filepath.Join(papers, "homing-flights.pdf"))
	if err != nil {
		t.Fatal(err)
	}
	write("truncated.pdf", whole[:len(whole)/4])
	write("scrambled.pdf", append([]byte("%PDF-1.4\n"), make([]byte, 4096)...))
	write("plain.pdf", []byte(hiveText))
	write("latin1.txt", []byte(strings.NewReplacer("–", "-", "°", "\xb0").Replace(hiveText)))
	var wide []byte
	for _, u := range utf16.Encode([]rune("\ufeff" + hiveText)) {
		wide = binary.LittleEndian.AppendUint16(wide, u)
	}
	write("utf16.txt", wide)
	write("zeros.txt", make([]byte, 2000))
	write("page.xml", []byte("<?xml version=\"1.0\"?><note><to>station</to></note>"))
	write("broken.xml", []byte("<?xml version=\"1.0\"?><article><body><p>Mass was 9.8"))
	write("large.txt", nil)
	if err := os.Truncate(filepath.Join(dir, "large.txt"), 200e6); err != nil {
		t.Fatal(err)
	}
	model.ConfigPath = "disable" // else the library makes itself a folder in the user's home
	locked := model.NewAESConfiguration("secret", "owner", 256)
	if err := api.EncryptFile(filepath.Join(papers, "homing-flights.pdf"), filepath.Join(dir, "locked.pdf"), locked); err != nil {
		t.Fatal(err)
	}
	scanned, err := os.ReadFile(filepath.Join(papers, "scanned-notes.pdf"))
	if err != nil {
		t.Fatal(err)
	}
	write("scanned.pdf", scanned)

	cmd := program(t, dir, "scan", "--ledger", "", "--notes", ".")
	var stdout, stderr strings.Builder
	cmd.Stdout, cmd.Stderr = &stdout, &stderr
	err = cmd.Run()
	if cmd.ProcessState.ExitCode() != statusPartial {
		t.Errorf("exit status %d, want %d: %v", cmd.ProcessState.ExitCode(), statusPartial, err)
	}
	for _, want := range []string{
		"plain.pdf: this is not a PDF",
		"truncated.pdf: ",
		"scrambled.pdf: the PDF is damaged",
		"locked.pdf: the PDF is encrypted and asks for a password",
		"scanned.pdf: ",
		"large.txt: it has 190 MB, and no text of a paper has more than 32",
		"zeros.txt: ",
		"page.xml: ",
		"broken.xml: ",
	} {
		if !strings.Contains(stderr.String(), "halfspan: "+want) {
			t.Errorf("nothing is said of %s", want)
		}
	}
	for _, bad := range []string{"panic", "goroutine", "fatal error", dir} {
		if strings.Contains(stderr.String(), bad) {
			t.Errorf("the message holds %q", bad)
		}
	}
	for _, name := range []string{"latin1.txt", "utf16.txt"} {
		if !strings.Contains(stdout.String(), name+"\n") || strings.Contains(stderr.String(), name) {
			t.Errorf("%s was not read", name)
		}
	}
	if t.Failed() {
		t.Logf("\n%s\n%s", stdout.String(), stderr.String())
	}
}

// TestLedgersOfOthers: a ledger of a newer version, and a damaged one, for what
// was read and for decisions.
func TestLedgersOfOthers(t *testing.T) {
	dir := t.TempDir()
	writePaper(t, dir, "hives.txt", hivePaper(3))
	runProgram(t, dir, "", "scan", ".")
	runProgram(t, dir, "cx", "check")
	refused := func(want string, args ...string) {
		t.Helper()
		cmd := program(t, dir, args...)
		out, err := cmd.CombinedOutput()
		if err == nil || cmd.ProcessState.ExitCode() != statusFailed || !strings.Contains(string(out), want) {
			t.Errorf("halfspan %s: %v, want %q in\n%s", strings.Join(args, " "), err, want, out)
		}
	}
	for _, name := range []string{"halfspan.ledger", "halfspan.AB.ledger"} {
		path := filepath.Join(dir, name)
		good, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		db, err := sql.Open("sqlite", path)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := db.Exec("PRAGMA user_version = 7"); err != nil {
			t.Fatal(err)
		}
		db.Close()
		refused(name+": the ledger was written by a newer version of halfspan: it has form 7", "list", "--checker", "AB")
		refused("newer version", "export", "--checker", "AB")
		if err := os.WriteFile(path, good[:5000], 0o666); err != nil {
			t.Fatal(err)
		}
		refused(name+": the file is damaged", "list", "--checker", "AB")
		refused("damaged", "check", "--checker", "AB")
		if err := os.WriteFile(path, good, 0o666); err != nil {
			t.Fatal(err)
		}
	}
	// What was read can be made again, and the decision is still there.
	if err := os.Remove(filepath.Join(dir, "halfspan.ledger")); err != nil {
		t.Fatal(err)
	}
	if out := runProgram(t, dir, "", "scan", "."); !strings.Contains(out, "Decisions: 2 open, 1 confirmed") {
		t.Errorf("got\n%s", out)
	}
}
