package convert

import (
	"go/ast"
	"go/doc"
	"go/parser"
	"go/token"
	"path/filepath"
	"strings"
	"testing"
)

// exported gives the documentation of every exported function of the package.
func exported(t *testing.T) []*doc.Func {
	t.Helper()
	set := token.NewFileSet()
	names, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	var files []*ast.File
	for _, name := range names {
		if strings.HasSuffix(name, "_test.go") {
			continue
		}
		f, err := parser.ParseFile(set, name, nil, parser.ParseComments)
		if err != nil {
			t.Fatal(err)
		}
		files = append(files, f)
	}
	p, err := doc.NewFromFiles(set, files, "halfspan/convert")
	if err != nil {
		t.Fatal(err)
	}
	funcs := append([]*doc.Func{}, p.Funcs...)
	for _, typ := range p.Types {
		funcs = append(funcs, typ.Funcs...)
	}
	if len(funcs) < 60 {
		t.Fatalf("only %d exported functions found", len(funcs))
	}
	return funcs
}

// Every exported function says the same eight things.
func TestEveryFunctionSaysWhatItIs(t *testing.T) {
	for _, f := range exported(t) {
		if f.Name == "Methods" {
			continue // the table itself
		}
		for _, heading := range []string{"Formula: ", "Arguments: ", "Assumes: ", "Errors: ", "Limits: ", "Rounding: ", "Source: ", "Checked: "} {
			if !strings.Contains("\n"+f.Doc, "\n"+heading) {
				t.Errorf("%s: the doc comment has no line %q", f.Name, heading)
			}
		}
	}
}

// The table of methods names each method once, says everything, and every function
// that it names exists.
func TestMethodsTable(t *testing.T) {
	names := map[string]bool{}
	for _, f := range exported(t) {
		names[f.Name] = true
	}
	seen := map[string]bool{}
	for _, m := range Methods() {
		if seen[m.Name] {
			t.Errorf("%s stands twice", m.Name)
		}
		seen[m.Name] = true
		if m.Title == "" || len(m.Formula) == 0 || len(m.Conditions) == 0 || m.Source == "" || len(m.Checks) == 0 || len(m.Functions) == 0 {
			t.Errorf("%s: something is not said", m.Name)
		}
		for _, f := range m.Functions {
			if !names[f] {
				t.Errorf("%s names %s, which does not exist", m.Name, f)
			}
		}
	}
	for _, m := range simulatedMethods() {
		if !seen[m.name] {
			t.Errorf("the simulated method %s is not in the table", m.name)
		}
	}
}
