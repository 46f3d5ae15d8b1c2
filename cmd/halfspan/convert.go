package main

import (
	"encoding/json"
	"fmt"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"halfspan/convert"
	"halfspan/convert/working"
	"halfspan/extract"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

type convertOptions struct {
	json, pair, combine bool
	p                   string
	n, n2               int
	level               float64
	statistic, as       string
}

func newConvert(s *streams) *cobra.Command {
	var opt convertOptions
	cmd := &cobra.Command{
		Use:   "convert TEXT...",
		Short: "work out one printed result step by step",
		Long: `Work out a result as a paper prints it: the steps with the numbers put in, the
range that the printed digits allow, what it assumes, and other values beside it.
A ratio, or a difference with both n, may have a p value in place of an interval.
What the text does not say can be added by the flags. One thing is assumed, and
said so: an estimate that no word explains is taken for a mean, since whoever
types it knows what it is; a scan withholds the SD of such a result in a paper.

With --pair two groups are compared: pooled SD, tests, Hedges' g; with --p the
pooled SD behind the p value of their difference. With --combine two or more
groups are taken together.`,
		Example: `  halfspan convert "12.4 kg (95% CI 11.2 to 13.6), n = 42"
  halfspan convert "median flight time 24 min (IQR 17-31), n = 40"
  halfspan convert "24.6 ± 3.1" --n 30
  halfspan convert "odds ratio 1.48, p = 0.009"
  halfspan convert --pair "12.4 (SD 1.3), n = 42" "11.1 (SD 1.2), n = 40"
  halfspan convert --pair --p 0.03 "12.4, n = 42" "11.1, n = 40"
  halfspan convert --combine "12.4 (SD 1.3), n = 42" "11.1 (SD 1.2), n = 40"`,
		Args: cobra.MinimumNArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			switch {
			case opt.pair && opt.combine:
				return usageError("--pair and --combine exclude each other")
			case opt.pair && len(args) != 2:
				return usageError("--pair compares two groups: give two texts, each in quotes (%d given)", len(args))
			case opt.combine && len(args) < 2:
				return usageError("--combine takes two or more groups together: give a text for each, in quotes")
			case opt.p != "" && !opt.pair:
				return usageError("--p goes with --pair: it is the p value of the difference of two groups")
			case !opt.pair && !opt.combine && len(args) > 1:
				return usageError("one printed result at a time: put it in quotes, or use --pair or --combine")
			case opt.pair || opt.combine:
				return convertGroups(s, args, opt)
			}
			return convertOne(s, args[0], opt)
		},
	}
	f := cmd.Flags()
	f.BoolVar(&opt.json, "json", false, "write the working as JSON")
	f.BoolVar(&opt.pair, "pair", false, "compare two groups")
	f.StringVar(&opt.p, "p", "", "with --pair: the printed two-sided p value of the difference, such as 0.03 or <0.05")
	f.BoolVar(&opt.combine, "combine", false, "take two or more groups together")
	f.IntVar(&opt.n, "n", 0, "sample size, where the text does not say it")
	f.IntVar(&opt.n2, "n2", 0, "sample size of the comparator, for a difference")
	f.Float64Var(&opt.level, "level", 0, "level of the interval in percent, where the text does not say it")
	f.StringVar(&opt.statistic, "statistic", "", "what the estimate is: "+strings.Join(working.Statistics(), ", "))
	f.StringVar(&opt.as, "as", "", "what its spread is: "+strings.Join(working.GivenAs(), ", "))
	complete(cmd, "statistic", working.Statistics())
	complete(cmd, "as", working.GivenAs())
	return cmd
}

// lead makes a sentence of a typed result: the readers of running text pass over
// lines that are no sentence.
const lead = "This is the result as it was typed in for a look at its spread: "

// typed makes a paper of one paragraph from a typed text; offsets count in the
// text as typed.
func typed(text string) *paper.Document {
	run := paper.TextRun{S: lead + text, Runs: []paper.Run{{Start: len(lead), End: len(lead) + len(text), Place: paper.Place{Line: 1}}}}
	return &paper.Document{Path: "typed", Format: paper.Text, Blocks: []paper.Block{
		{Kind: paper.Paragraph, Zone: paper.Results, Section: "Results", Text: run}}}
}

// understand reads a typed text as one paper would be read, puts in what the flags
// say, and works it out.
func understand(text string, opt convertOptions) ([]working.Working, error) {
	text = strings.TrimSpace(text)
	doc := typed(text)
	results := extract.Find(doc)
	if len(results) == 0 {
		results = bareSpread(text)
	}
	if len(results) == 0 {
		return nil, fmt.Errorf("%q: no estimate with an interval or a spread in it\n"+
			"write it as a paper would: \"12.4 (95%% CI 11.2 to 13.6), n = 42\", \"24.6 ± 3.1\", \"24 (IQR 17-31)\"", text)
	}
	for i := range results {
		forgetLead(&results[i], text)
		sayKind(&results[i], text)
		if err := opt.complete(&results[i]); err != nil {
			return nil, err
		}
	}
	facts := working.FactsOf(doc)
	facts.Typed = true
	assumed := opt.takeAsMeans(results)
	saySizes(results, text)
	found := working.Work(facts, results)
	for i := range found {
		besideChange(&found[i], text)
	}
	for _, i := range assumed {
		found[i].Trail.Assumptions = append(found[i].Trail.Assumptions, "the estimate is a mean, which the text does not say: --statistic says what it is")
	}
	return found, nil
}

// forgetLead takes out of a result what only the paper made of a typed text says.
func forgetLead(r *result.Result, typed string) {
	r.Snippet = strings.TrimPrefix(r.Snippet, lead)
	r.Section = ""
	for _, f := range []struct {
		field string
		value *string
	}{{"outcome", &r.Outcome}, {"arm", &r.Arm}, {"arm2", &r.Arm2}, {"time", &r.Time}, {"subgroup", &r.Subgroup}} {
		if *f.value == "" || !strings.Contains(strings.ToLower(lead), strings.ToLower(*f.value)) || strings.Contains(strings.ToLower(typed), strings.ToLower(*f.value)) {
			continue
		}
		*f.value = ""
		r.Sources = slices.DeleteFunc(r.Sources, func(s result.Source) bool { return s.Field == f.field })
	}
}

// valued are the flags that take the next argument as their value.
var valued = []string{"--n", "--n2", "--level", "--p", "--statistic", "--as"}

// textArguments keeps typed results that begin with a minus from being taken for
// flags: a space before them, which the reading drops, tells the two apart.
func textArguments(args []string) []string {
	if len(args) == 0 || args[0] != "convert" {
		return args
	}
	out := slices.Clone(args)
	for i, a := range out {
		if value := i > 1 && slices.Contains(valued, out[i-1]); value {
			continue // of the flag before it
		}
		if len(a) > 1 && a[0] == '-' && (a[1] == '.' || a[1] >= '0' && a[1] <= '9') {
			out[i] = " " + a
		}
	}
	return out
}

// takeAsMeans takes an interval of something that the text does not name for that of
// a mean: whoever types it in knows what it is, and is told. It gives the indices.
func (opt convertOptions) takeAsMeans(results []result.Result) []int {
	var taken []int
	for i := range results {
		r := &results[i]
		k := slices.IndexFunc(r.Flags, func(f result.Flag) bool { return f.Name == "statistic-assumed" })
		if k < 0 {
			continue
		}
		r.Flags = slices.Delete(slices.Clone(r.Flags), k, k+1)
		if opt.statistic == "" && (r.Statistic == result.Mean || r.Statistic == result.MeanChange) {
			taken = append(taken, i)
		}
	}
	return taken
}

// complete puts in what the flags say where the text does not.
func (opt convertOptions) complete(r *result.Result) error {
	if opt.n < 0 || opt.n2 < 0 {
		return usageError("a sample size is a whole number from 1 up")
	}
	if opt.n > 0 {
		r.N, r.NFrom, r.NKind = opt.n, result.NBeside, ""
	}
	if opt.n2 > 0 {
		r.N2 = opt.n2
	}
	if opt.level != 0 {
		if !(opt.level > 0 && opt.level < 100) {
			return usageError("--level %v: a percentage between 0 and 100, such as 95", opt.level)
		}
		r.Level = opt.level
	}
	if opt.statistic != "" {
		if !slices.Contains(working.Statistics(), opt.statistic) {
			return usageError("--statistic %q is none of: %s", opt.statistic, strings.Join(working.Statistics(), ", "))
		}
		r.Statistic = result.Statistic(opt.statistic)
	}
	if opt.as != "" {
		if !slices.Contains(working.GivenAs(), opt.as) {
			return usageError("--as %q is none of: %s", opt.as, strings.Join(working.GivenAs(), ", "))
		}
		r.GivenAs = result.GivenAs(opt.as)
	}
	return nil
}

func convertOne(s *streams, text string, opt convertOptions) error {
	found, err := understand(text, opt)
	if err != nil {
		if joint, ok, why := onlyP(text, opt); ok {
			return showJoint(s, joint, why, opt)
		}
		return err
	}
	if opt.json {
		return writeJSON(s, found)
	}
	p := printer{out: s.out, width: min(terminalWidth(s.out), 80)}
	for i, w := range found {
		if len(found) > 1 {
			p.line(fmt.Sprintf("result %d of %d", i+1, len(found)))
		}
		p.working(w)
		if i+1 < len(found) {
			p.line("")
		}
	}
	return p.err
}

func convertGroups(s *streams, texts []string, opt convertOptions) error {
	arms := make([]working.Arm, len(texts))
	for i, text := range texts {
		arm, err := groupOf(fmt.Sprintf("group %d", i+1), text, opt)
		if err != nil {
			return err
		}
		arms[i] = arm
	}
	var joint working.Joint
	var err error
	if opt.pair {
		joint, err = working.Pair(arms[0], arms[1], opt.p)
	} else {
		joint, err = working.Union(arms)
	}
	return showJoint(s, joint, err, opt)
}

func showJoint(s *streams, joint working.Joint, err error, opt convertOptions) error {
	if err != nil {
		return err
	}
	if opt.json {
		return writeJSON(s, joint)
	}
	p := printer{out: s.out, width: min(terminalWidth(s.out), 80)}
	p.joint(joint)
	return p.err
}

// groupOf reads one group. With --p a mean and its n are enough.
func groupOf(name, text string, opt convertOptions) (working.Arm, error) {
	text = strings.TrimSpace(text)
	found, err := understand(text, opt)
	if err == nil && len(found) > 1 {
		return working.Arm{}, fmt.Errorf("%s: %q holds %d results, one is needed", name, text, len(found))
	}
	if err == nil {
		arm, err := working.ArmOf(name, found[0])
		if err == nil || arm.N == 0 || opt.p == "" {
			return arm, err
		}
		return arm, nil
	}
	if opt.p == "" {
		return working.Arm{}, fmt.Errorf("%s: %w", name, err)
	}
	arm, ok := bareMean(text)
	if !ok {
		return working.Arm{}, fmt.Errorf("%s: %q: write mean and n, such as \"12.4, n = 42\"", name, text)
	}
	arm.Name = name
	return arm, nil
}

// bareMean reads "12.4, n = 42".
func bareMean(text string) (working.Arm, bool) {
	var arm working.Arm
	var have bool
	for _, it := range grammar.Read(grammar.Text{S: text}).Items {
		switch it.Kind {
		case grammar.KindNumber:
			if m, err := convert.ReadPrinted(it.Value.Value); err == nil && !have {
				arm.Mean, have = m, true
			}
		case grammar.KindSampleSize:
			if n, ok := it.Value.Float(); ok && n >= 1 && n < 1e9 {
				arm.N = int(n)
			}
		}
	}
	return arm, have && arm.N > 0
}

func writeJSON(s *streams, v any) error {
	e := json.NewEncoder(s.out)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	return e.Encode(v)
}
