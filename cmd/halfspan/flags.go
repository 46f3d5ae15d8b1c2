package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"halfspan/convert/working"
)

func newFlags(s *streams) *cobra.Command {
	return &cobra.Command{
		Use:   "flags [NAME]",
		Short: "the flags: what each means, what to do, and what it does to the rating",
		Long: `Every flag that reading or working may raise, in order: its name, what it does to
the rating of the reading (none, look, doubtful), what it means and what to do. A
reading is as good as its worst flag; a reading without such flags is clear.`,
		Example: `  halfspan flags
  halfspan flags n-missing`,
		Args: cobra.MaximumNArgs(1),
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			var names []string
			for _, f := range working.Flags() {
				names = append(names, f.Name)
			}
			return names, cobra.ShellCompDirectiveNoFileComp
		},
		RunE: func(_ *cobra.Command, args []string) error {
			p := printer{out: s.out, width: min(terminalWidth(s.out), 80)}
			shown := 0
			for _, f := range working.Flags() {
				if len(args) > 0 && f.Name != args[0] {
					continue
				}
				shown++
				p.line(f.Name)
				p.item("  rating", f.Effect.String())
				p.item("  means", f.Meaning)
				p.item("  do", f.Do)
			}
			if shown == 0 {
				return fmt.Errorf("no flag is called %q: halfspan flags lists them", args[0])
			}
			return p.err
		},
	}
}
