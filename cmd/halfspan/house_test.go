package main

import (
	"bufio"
	"bytes"
	"encoding/json"
	"errors"
	"go/ast"
	"go/parser"
	"go/token"
	"io"
	"io/fs"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"os"

	"halfspan/report/review"
)

const module = "halfspan"

// mayImport says which packages of the project each may import; "x/..." stands
// for x and everything below it. A package without a line may import nothing of
// the project. The list is the house of DEVELOPERS.md.
var mayImport = map[string][]string{
	"extract/result":     {"extract/paper"},
	"extract/source":     {"extract/paper"},
	"extract/readtest":   {"extract/paper"}, // helpers of the readers' tests
	"extract/tidy":       {"extract/paper", "extract/source"},
	"extract/pdf":        {"extract/paper", "extract/pdf/..."},
	"extract/pdf/...":    {"extract/paper", "extract/pdf/..."},
	"extract/layout":     {"extract/paper", "extract/layout/...", "extract/tidy"},
	"extract/layout/...": {"extract/paper", "extract/layout/...", "extract/tidy"},
	"extract/plain":      {"extract/paper", "extract/source", "extract/tidy"},
	"extract/jats":       {"extract/paper", "extract/source", "extract/tidy"},
	"extract/bind":       {"extract/paper", "extract/result", "extract/grammar", "extract/bind/..."},
	"extract/bind/...":   {"extract/paper", "extract/result", "extract/grammar", "extract/bind/..."},
	"extract":            {"extract/..."},
	"convert/working":    {"extract/result", "extract/paper", "convert"},
	"report/ledger":      {"extract/paper", "extract/result", "convert/working"},
	"report/review":      {"extract/paper", "extract/result", "convert", "convert/working", "report/ledger"},
	"report/export":      {"extract/paper", "extract/result", "convert", "convert/working", "report/ledger", "report/review"},
	"report/evidence":    {"extract/paper", "extract/result", "convert/working", "report/ledger", "report/export"},
	"report/desk":        {"extract", "extract/...", "convert", "convert/working", "report/ledger", "report/review", "report/export"},
	"cmd/halfspan":       {"extract", "extract/...", "convert", "convert/...", "report/..."},
}

// everywhere lists what any package but convert and the models may import.
var everywhere = []string{"extract/pattern"}

// notEven takes back what a wider line of mayImport allows.
var notEven = map[string][]string{
	"extract": {"extract/worker"},
}

func allowed(patterns []string, pkg string) bool {
	return slices.ContainsFunc(patterns, func(p string) bool {
		below, wide := strings.CutSuffix(p, "...")
		return p == pkg || wide && strings.HasPrefix(pkg, below)
	})
}

// ruleOf finds the most particular line for a package.
func ruleOf(pkg string) []string {
	if rule, ok := mayImport[pkg]; ok {
		return rule
	}
	for dir := pkg; strings.Contains(dir, "/"); {
		dir = dir[:strings.LastIndex(dir, "/")]
		if rule, ok := mayImport[dir+"/..."]; ok {
			return rule
		}
	}
	return nil
}

type listedPackage struct {
	ImportPath, Doc, Dir string
	Imports              []string
}

func packages(t *testing.T) []listedPackage {
	t.Helper()
	list := exec.Command("go", "list", "-e", "-json=ImportPath,Doc,Dir,Imports", module+"/...")
	list.Stderr = os.Stderr
	out, err := list.Output()
	if err != nil {
		t.Fatal(err)
	}
	var all []listedPackage
	for dec := json.NewDecoder(bytes.NewReader(out)); ; {
		var p listedPackage
		if err := dec.Decode(&p); errors.Is(err, io.EOF) {
			break
		} else if err != nil {
			t.Fatal(err)
		}
		all = append(all, p)
	}
	if len(all) < 15 {
		t.Fatalf("only %d packages found", len(all))
	}
	return all
}

// TestHouse holds the directions of imports, and that every package says its job.
func TestHouse(t *testing.T) {
	for _, p := range packages(t) {
		pkg := strings.TrimPrefix(p.ImportPath, module+"/")
		if strings.TrimSpace(p.Doc) == "" {
			t.Errorf("%s has no package comment", pkg)
		}
		for _, path := range p.Imports {
			other, ours := strings.CutPrefix(path, module+"/")
			if ours && strings.HasPrefix(pkg, "extract/") && pkg != "extract/result" && slices.Contains(everywhere, other) {
				continue
			}
			if ours && (!allowed(ruleOf(pkg), other) || allowed(notEven[pkg], other)) {
				t.Errorf("%s may not import %s", pkg, other)
			}
		}
	}
}

// TestSizes holds that files and functions stay small enough to be read.
func TestSizes(t *testing.T) {
	const mostLines, mostOfFunction = 600, 150
	for _, p := range packages(t) {
		files, err := filepath.Glob(filepath.Join(p.Dir, "*.go"))
		if err != nil {
			t.Fatal(err)
		}
		for _, file := range files {
			set := token.NewFileSet()
			parsed, err := parser.ParseFile(set, file, nil, parser.SkipObjectResolution)
			if err != nil {
				t.Errorf("%s: %v", file, err)
				continue
			}
			name, _ := filepath.Rel(filepath.Join(p.Dir, ".."), file)
			if n := set.File(parsed.Pos()).LineCount(); n > mostLines {
				t.Errorf("%s has %d lines, more than %d", name, n, mostLines)
			}
			for _, d := range parsed.Decls {
				f, ok := d.(*ast.FuncDecl)
				if !ok {
					continue
				}
				if n := set.Position(f.End()).Line - set.Position(f.Pos()).Line; n > mostOfFunction && !strings.HasSuffix(file, "_test.go") {
					t.Errorf("%s: %s has %d lines, more than %d", name, f.Name.Name, n, mostOfFunction)
				}
			}
		}
	}
}

// TestOneWayOut holds that only main ends the process, and that nothing slow is
// done at every start.
func TestOneWayOut(t *testing.T) {
	root := filepath.Join("..", "..")
	exits := 0
	err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() || !strings.HasSuffix(path, ".go") || strings.HasSuffix(path, "_test.go") {
			return err
		}
		f, err := os.Open(path)
		if err != nil {
			return err
		}
		defer f.Close()
		slash := filepath.ToSlash(path)
		if strings.Contains(slash, "/gen/") {
			return nil // generators are programs of their own
		}
		lines := bufio.NewScanner(f)
		for n := 1; lines.Scan(); n++ {
			line := lines.Text()
			if strings.Contains(line, "= regexp.MustCompile(") && strings.Contains(slash, "/extract/") && !strings.HasSuffix(slash, "paper/zone.go") {
				t.Errorf("%s:%d: compiled at every start of the program: use extract/pattern", slash, n)
			}
			if strings.Contains(line, "log.Fatal") {
				t.Errorf("%s:%d: %s", slash, n, strings.TrimSpace(line))
			}
			if !strings.Contains(line, "os.Exit(") {
				continue
			}
			if strings.HasSuffix(slash, "cmd/halfspan/main.go") {
				exits++
			} else if !strings.HasSuffix(slash, "extract/worker/serve.go") {
				t.Errorf("%s:%d: %s", slash, n, strings.TrimSpace(line))
			}
		}
		return lines.Err()
	})
	if err != nil {
		t.Fatal(err)
	}
	if exits != 1 {
		t.Errorf("main leaves in %d places", exits)
	}
}

// TestCautions holds that the help says what stands under the review table.
func TestCautions(t *testing.T) {
	if got, want := strings.Join(strings.Fields(cautionsHelp), " "), review.Cautions; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
