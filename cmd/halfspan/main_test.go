package main

import (
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"

	"halfspan/extract/worker"
)

var update = flag.Bool("update", false, "write the expected outputs of the scripts anew")

func TestMain(m *testing.M) {
	worker.Serve(work)
	testscript.Main(m, map[string]func(){"halfspan": main})
}

// TestScripts runs the command line scripts: one for each feature.
func TestScripts(t *testing.T) {
	cache, err := os.UserCacheDir()
	if err != nil {
		t.Logf("no cache folder, the PDF reader is compiled in each script: %v", err)
	}
	papers, err := filepath.Abs(filepath.Join("..", "..", "testdata", "papers"))
	if err != nil {
		t.Fatal(err)
	}
	testscript.Run(t, testscript.Params{
		Dir:           filepath.Join("testdata", "script"),
		UpdateScripts: *update,
		Setup: func(env *testscript.Env) error {
			env.Setenv("XDG_CACHE_HOME", cache)
			env.Setenv("PAPERS", papers)
			return nil
		},
		Condition: func(cond string) (bool, error) {
			// Permissions do not bind root.
			return cond == "root" && os.Geteuid() == 0, nil
		},
		Cmds: map[string]func(ts *testscript.TestScript, neg bool, args []string){
			"status":  scriptStatus,
			"columns": scriptColumns,
			"edit":    scriptEdit,
		},
	})
}

// scriptStatus runs the program and holds its exit status:
//
//	status 3 scan papers
func scriptStatus(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: status NUMBER ARGUMENT...")
	}
	err := ts.Exec("halfspan", args[1:]...)
	got := "0"
	if err != nil {
		got = strings.TrimPrefix(err.Error(), "exit status ")
	}
	if got != args[0] {
		ts.Fatalf("exit status %s, want %s", got, args[0])
	}
}

// scriptColumns holds that no line of a file is wider:
//
//	columns 80 stdout
func scriptColumns(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 2 {
		ts.Fatalf("usage: columns NUMBER FILE")
	}
	widest := map[string]int{"80": 80}[args[0]]
	for line := range strings.Lines(ts.ReadFile(args[1])) {
		if n := len([]rune(strings.TrimRight(line, "\n"))); n > widest && !strings.HasSuffix(strings.TrimSpace(line), ".") {
			ts.Fatalf("a line of %d columns: %s", n, line)
		}
	}
}

// scriptEdit replaces a text in a file, once and for certain, as a person does in
// a spreadsheet:
//
//	edit sheet.csv OLD NEW
func scriptEdit(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 3 {
		ts.Fatalf("usage: edit FILE OLD NEW")
	}
	path := ts.MkAbs(args[0])
	text := ts.ReadFile(args[0])
	old, now := strings.ReplaceAll(args[1], `\n`, "\n"), strings.ReplaceAll(args[2], `\n`, "\n")
	if strings.Count(text, old) != 1 {
		ts.Fatalf("%q stands %d times in %s", old, strings.Count(text, old), args[0])
	}
	ts.Check(os.WriteFile(path, []byte(strings.Replace(text, old, now, 1)), 0o666))
}
