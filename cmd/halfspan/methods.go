package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"halfspan/convert"
)

func newMethods(s *streams) *cobra.Command {
	return &cobra.Command{
		Use:   "methods [NAME]",
		Short: "the methods: formula, conditions, source, how each was checked",
		Long: `List the methods, or explain the ones that a record names: formula, conditions,
source, and how each was checked.`,
		Example: `  halfspan methods
  halfspan methods sd-from-ci
  halfspan methods "luo-quartiles with wan-quartiles"`,
		Args: cobra.MaximumNArgs(1),
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			var names []string
			for _, m := range convert.Methods() {
				names = append(names, m.Name)
			}
			return names, cobra.ShellCompDirectiveNoFileComp
		},
		RunE: func(_ *cobra.Command, args []string) error {
			if len(args) == 0 {
				return listMethods(s)
			}
			return explainMethod(s, args[0])
		},
	}
}

func listMethods(s *streams) error {
	p := printer{out: s.out, width: min(terminalWidth(s.out), 80)}
	for _, m := range convert.Methods() {
		p.line(m.Name)
		p.line("    " + m.Title)
	}
	p.line("")
	p.line("halfspan methods NAME explains one.")
	return p.err
}

// explainMethod explains one method; a record may name two, the mean's with the
// SD's.
func explainMethod(s *streams, name string) error {
	p := printer{out: s.out, width: min(terminalWidth(s.out), 80)}
	for i, part := range strings.Split(name, " with ") {
		m, ok := findMethod(part)
		if !ok {
			return fmt.Errorf("no method is called %q%s: halfspan methods lists them", part, nearestMethod(part))
		}
		if i > 0 {
			p.line("")
		}
		p.line(m.Name + ": " + m.Title)
		p.items("formula", m.Formula)
		p.items("needs", m.Conditions)
		p.item("source", m.Source)
		p.items("checked", m.Checks)
	}
	return p.err
}

func findMethod(name string) (convert.Method, bool) {
	for _, m := range convert.Methods() {
		if m.Name == name {
			return m, true
		}
	}
	return convert.Method{}, false
}

// nearestMethod suggests the names that hold the word.
func nearestMethod(word string) string {
	var names []string
	for _, m := range convert.Methods() {
		if word != "" && (strings.Contains(m.Name, word) || strings.Contains(m.Title, word)) {
			names = append(names, m.Name)
		}
	}
	if len(names) == 0 {
		return ""
	}
	return " (did you mean " + strings.Join(names[:min(len(names), 5)], ", ") + "?)"
}
