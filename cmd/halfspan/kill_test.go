package main

import (
	"bufio"
	"bytes"
	"encoding/csv"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"sync"
	"testing"
	"time"

	"halfspan/report/ledger"
)

// program prepares the program itself, as a process of its own.
func program(t *testing.T, dir string, args ...string) *exec.Cmd {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	// The test binary is the program when it is called by its name.
	return &exec.Cmd{Path: self, Args: append([]string{"halfspan"}, args...), Dir: dir, Env: append(os.Environ(), "HALFSPAN_CHECKER=AB")}
}

func runProgram(t *testing.T, dir, input string, args ...string) string {
	t.Helper()
	cmd := program(t, dir, args...)
	cmd.Stdin = strings.NewReader(input)
	out, err := cmd.CombinedOutput()
	if err != nil {
		t.Fatalf("halfspan %s: %v\n%s", strings.Join(args, " "), err, out)
	}
	return string(out)
}

// hivePaper is an invented paper with n results.
func hivePaper(n int) string {
	var b strings.Builder
	b.WriteString("Results\n\n")
	for i := range n {
		fmt.Fprintf(&b, "Mean colony mass was %d.8 kg (95%% CI %d.1 to %d.5; n = 21) at station %c.\n\n", i+9, i+9, i+10, 'A'+i%26)
	}
	return b.String()
}

func writePaper(t *testing.T, dir, name, text string) {
	t.Helper()
	if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
}

// exportedRows reads the exported estimates with their decisions, in order.
func exportedRows(t *testing.T, path string) []string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	lines, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	at := map[string]int{}
	for k, name := range lines[0] {
		at[name] = k
	}
	var rows []string
	for _, line := range lines[1:] {
		rows = append(rows, line[at["estimate"]]+" "+line[at["n"]]+" "+line[at["decision"]])
	}
	return rows
}

// TestKilledInTheMiddle: what was shown as decided survives kill -9, and nothing
// else is there.
func TestKilledInTheMiddle(t *testing.T) {
	dir := t.TempDir()
	writePaper(t, dir, "hives.txt", hivePaper(8))
	runProgram(t, dir, "", "scan", ".")
	runProgram(t, dir, "c\nc\na\nn 25\n\n1d4x", "check", "--order", "paper")

	// The second session is killed as soon as it says that a decision is taken.
	cmd := program(t, dir, "check", "--order", "paper")
	keys, err := cmd.StdinPipe()
	if err != nil {
		t.Fatal(err)
	}
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	if _, err := io.WriteString(keys, "c\n"); err != nil {
		t.Fatal(err)
	}
	lines := bufio.NewScanner(out)
	for lines.Scan() && lines.Text() != "confirmed" {
	}
	// Into the middle of the next decision: a reason is asked for.
	if _, err := io.WriteString(keys, "d"); err != nil {
		t.Fatal(err)
	}
	for lines.Scan() && !strings.HasPrefix(lines.Text(), "  6  other") {
	}
	if err := cmd.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	_ = cmd.Wait() // it was killed

	runProgram(t, dir, "", "scan", ".")
	runProgram(t, dir, "", "scan", "--again", ".")
	runProgram(t, dir, "", "export", "--out", "out.csv")
	got := strings.Join(exportedRows(t, filepath.Join(dir, "out.csv")), "; ")
	if want := "9.8 21 confirmed; 10.8 21 confirmed; 11.8 25 amended; 13.8 21 confirmed"; got != want {
		t.Errorf("got  %s\nwant %s", got, want)
	}
}

// TestScanKilled: a scan that is killed at any moment leaves a ledger that the
// next scan goes on with.
func TestScanKilled(t *testing.T) {
	dir := t.TempDir()
	for i := range 12 {
		writePaper(t, dir, fmt.Sprintf("hives%02d.txt", i), hivePaper(20+i))
	}
	for _, after := range []time.Duration{20, 60, 120, 240} {
		cmd := program(t, dir, "scan", ".")
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(after * time.Millisecond)
		_ = cmd.Process.Kill() // it may be done already
		_ = cmd.Wait()
	}
	if out := runProgram(t, dir, "", "scan", "."); !strings.Contains(out, "Read 12 papers") || !strings.Contains(out, "Found 306 results") {
		t.Errorf("got %s", out)
	}
}

// TestTwoAtOnce: two scans and two checking sessions of one folder at once wait
// for each other, and nothing is lost.
func TestTwoAtOnce(t *testing.T) {
	dir := t.TempDir()
	for i := range 6 {
		writePaper(t, dir, fmt.Sprintf("hives%02d.txt", i), hivePaper(10+i))
	}
	both := func(input string, args ...string) (said [2]string) {
		t.Helper()
		var wait sync.WaitGroup
		for i := range said {
			cmd := program(t, dir, args...)
			cmd.Stdin = strings.NewReader(input)
			wait.Go(func() {
				out, err := cmd.CombinedOutput()
				if err != nil {
					t.Errorf("halfspan %s: %v\n%s", strings.Join(args, " "), err, out)
				}
				said[i] = string(out)
			})
		}
		wait.Wait()
		return said
	}
	both("", "scan", ".")
	if out := runProgram(t, dir, "", "scan", "."); !strings.Contains(out, "6 unchanged") {
		t.Errorf("got %s", out)
	}
	// Both see the same open results; what one has decided the other is refused,
	// sees anew and may confirm again. Every decision that they say they took is in
	// the ledger.
	took := 0
	for _, out := range both(strings.Repeat("c", 30)+"x", "check", "--order", "paper") {
		if m := tookConfirmed.FindStringSubmatch(out); m != nil {
			n, err := strconv.Atoi(m[1])
			if err != nil {
				t.Fatal(err)
			}
			took += n
		}
	}
	book, err := ledger.OpenDecisions(filepath.Join(dir, ledger.FileName), "AB")
	if err != nil {
		t.Fatal(err)
	}
	defer book.Close()
	kept, err := book.All(0)
	if err != nil {
		t.Fatal(err)
	}
	if took < 30 || len(kept) != took {
		t.Errorf("the ledger holds %d decisions, the two sessions took %d", len(kept), took)
	}
}

var tookConfirmed = regexp.MustCompile(`(\d+) confirmed[^\n]*kept in`)

// TestSameWhateverTheLoad: the records do not depend on the order in which the
// workers are done.
func TestSameWhateverTheLoad(t *testing.T) {
	dir := t.TempDir()
	for i := range 9 {
		writePaper(t, dir, fmt.Sprintf("hives%02d.txt", i), hivePaper(40-4*i))
	}
	var first []byte
	for range 3 {
		out, err := program(t, dir, "scan", "--jsonl", "--ledger", "", ".").Output()
		if err != nil {
			t.Fatal(err)
		}
		if first == nil {
			first = out
		}
		if !bytes.Equal(first, out) {
			t.Fatal("two scans of the same papers differ")
		}
	}
	if bytes.Count(first, []byte("\n")) != 216 {
		t.Errorf("%d records", bytes.Count(first, []byte("\n")))
	}
}
