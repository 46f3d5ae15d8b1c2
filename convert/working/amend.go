package working

import (
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"

	"halfspan/convert"
	"halfspan/extract/result"
)

// setter puts the text that a person typed into one field of a result, or says
// what is wrong with it. The empty text clears the field.
type setter func(r *result.Result, text string) error

// setters are the fields that a person may amend, by their names in the record.
func setters() map[string]setter {
	words := func(field func(*result.Result) *string) setter {
		return func(r *result.Result, text string) error {
			*field(r) = text
			return nil
		}
	}
	printed := func(field func(*result.Result) *string) setter {
		return func(r *result.Result, text string) error {
			if text != "" {
				if _, err := convert.ReadPrinted(text); err != nil {
					return fmt.Errorf("%q is not a number as papers print it: write digits with '.' as the decimal mark and '-' as the minus", text)
				}
			}
			*field(r) = text
			return nil
		}
	}
	count := func(field func(*result.Result) *int) setter {
		return func(r *result.Result, text string) error {
			if text == "" {
				*field(r) = 0
				return nil
			}
			n, err := strconv.Atoi(text)
			if err != nil || n < 1 {
				return fmt.Errorf("%q is not a sample size: write a whole number from 1 up, or nothing", text)
			}
			*field(r) = n
			return nil
		}
	}
	return map[string]setter{
		"estimate":    printed(func(r *result.Result) *string { return &r.Estimate }),
		"lower":       printed(func(r *result.Result) *string { return &r.Lower }),
		"upper":       printed(func(r *result.Result) *string { return &r.Upper }),
		"given_value": printed(func(r *result.Result) *string { return &r.GivenValue }),
		"n":           count(func(r *result.Result) *int { return &r.N }),
		"n2":          count(func(r *result.Result) *int { return &r.N2 }),
		"arm":         words(func(r *result.Result) *string { return &r.Arm }),
		"arm2":        words(func(r *result.Result) *string { return &r.Arm2 }),
		"time":        words(func(r *result.Result) *string { return &r.Time }),
		"subgroup":    words(func(r *result.Result) *string { return &r.Subgroup }),
		"outcome":     words(func(r *result.Result) *string { return &r.Outcome }),
		"unit":        words(func(r *result.Result) *string { return &r.Unit }),
		"measure":     words(func(r *result.Result) *string { return &r.Measure }),
		"level":       setLevel,
		"statistic": oneOf(Statistics(), func(r *result.Result, text string) {
			r.Statistic = result.Statistic(text)
		}),
		"given_as": oneOf(GivenAs(), func(r *result.Result, text string) { r.GivenAs = result.GivenAs(text) }),
		"adjusted": oneOf([]string{"yes", "no", "unclear"}, func(r *result.Result, text string) { r.Adjusted = text }),
	}
}

// Statistics are the words that the statistic of a record may be.
func Statistics() []string {
	return []string{"mean", "mean difference", "mean change", "median", "geometric mean", "ratio", "proportion",
		"risk difference", "rate", "coefficient", "other"}
}

// GivenAs are the words that say how the uncertainty of a record is printed.
func GivenAs() []string { return []string{"ci", "sd", "se", "iqr", "range", "unstated"} }

func oneOf(allowed []string, set func(*result.Result, string)) setter {
	return func(r *result.Result, text string) error {
		if text != "" && !slices.Contains(allowed, text) {
			return fmt.Errorf("%q is none of: %s", text, strings.Join(allowed, ", "))
		}
		set(r, text)
		return nil
	}
}

func setLevel(r *result.Result, text string) error {
	if text == "" {
		r.Level = 0
		return nil
	}
	v, err := strconv.ParseFloat(strings.TrimSuffix(text, "%"), 64)
	if err != nil || !(v > 0 && v < 100) {
		return fmt.Errorf("%q is not a level: write a percentage between 0 and 100, such as 95", text)
	}
	r.Level = v
	return nil
}

// Amendable are the fields of a record that a person may amend, in order.
func Amendable() []string {
	return slices.Sorted(maps.Keys(setters()))
}

// Amend works a result through again with some of its fields put right by a
// person. r is what was read, w the working that was made of it; changed maps
// names of the record's fields (see [Amendable]) to what the paper prints there,
// where the empty text says that it prints nothing. take, if not empty, names one
// of the working's own proposals (Trail.Alternatives) whose mean and SD the
// person takes.
//
// A field that a person gave says so in its place (result.FromPerson), with what
// the program had read; the doubts of reading that the field settles are gone. The
// id, the anchor and the mates stay; what compares the result with others of its
// paper is not worked again. An error names the field and says what is wrong with
// it. Neither r nor w is changed.
func Amend(r result.Result, w Working, changed map[string]string, take string) (result.Result, Working, error) {
	r.Flags = slices.Clone(r.Flags)
	r.Mates = nil
	table := setters()
	for _, field := range slices.Sorted(maps.Keys(changed)) {
		set, ok := table[field]
		if !ok {
			return result.Result{}, Working{}, fmt.Errorf("%s cannot be amended: only %s can", field, strings.Join(Amendable(), ", "))
		}
		if err := set(&r, strings.TrimSpace(changed[field])); err != nil {
			return result.Result{}, Working{}, fmt.Errorf("%s: %w", field, err)
		}
		givenByPerson(&r, field, strings.TrimSpace(changed[field]))
	}
	out := w
	out.Trail.Notes = slices.Clone(w.Trail.Notes)
	if len(changed) > 0 {
		keepComparisons(&r, w, changed)
		out = Work(Facts{Path: w.Record.Paper, SHA256: w.Record.PaperSHA256}, []result.Result{r})[0]
		out.Record.ID, out.Record.Mates = w.Record.ID, w.Record.Mates
		out.Row, out.Anchor = w.Row, w.Anchor
	}
	if take != "" {
		if err := takeProposal(&out, take); err != nil {
			return result.Result{}, Working{}, err
		}
	}
	return r, out, nil
}

// keepComparisons hands on what the comparison with other results of the paper
// found wrong with the spread, where nothing that went into it was changed.
func keepComparisons(r *result.Result, w Working, changed map[string]string) {
	for _, field := range append([]string{"given_as", "level", "n", "statistic"}, ownNumbers...) {
		if _, yes := changed[field]; yes {
			return
		}
	}
	for _, f := range w.Flags {
		if slices.Contains([]string{"mates-disagree", "sd-as-se", "se-as-sd"}, f.Name) {
			r.Raise(f.Name, f.Detail)
		}
	}
}

// settledBy are the doubts of reading that end where a person gives a field.
func settledBy() map[string][]string {
	numbers := []string{"mates-disagree", "sd-as-se", "se-as-sd", "sign-differs", "scale-differs", "open-bound", "bound-not-a-number"}
	return map[string][]string{
		"n":           {"mates-disagree", "sd-as-se", "se-as-sd", "n-total", "n-conflict", "n-kind-unclear", "n-elsewhere"},
		"given_as":    {"mates-disagree", "sd-as-se", "se-as-sd", "spread-conflict", "spread-ambiguous", "conventions-differ", "spread-from-methods", "spread-from-rows", "interval-unnamed", "count-or-spread"},
		"level":       {"mates-disagree", "level-assumed", "level-elsewhere"},
		"statistic":   {"statistic-assumed", "count-or-spread"},
		"estimate":    numbers,
		"lower":       numbers,
		"upper":       numbers,
		"given_value": numbers,
		"arm":         {"arm-unclear"},
		"time":        {"time-unclear"},
		"outcome":     {"outcome-unclear"},
		"unit":        {"scale-differs", "power-of-ten"},
	}
}

// ownNumbers are the fields that are the printed result itself: their place on the
// page is that of the result, whatever digits stand there.
var ownNumbers = []string{"estimate", "lower", "upper", "given_value"}

// givenByPerson marks a field as given by a person and drops what was true of the
// value read only: where it was read, what its n counts, the doubts it settles.
func givenByPerson(r *result.Result, field, typed string) {
	source, was := result.Source{Field: field, Text: typed, From: result.FromPerson}, ""
	kept := make([]result.Source, 0, len(r.Sources)+1)
	for _, s := range r.Sources {
		if s.Field != field {
			kept = append(kept, s)
			continue
		}
		if s.ByPerson() || was != "" {
			continue
		}
		was = s.Text
		if slices.Contains(ownNumbers, field) {
			source.Place = s.Place
		}
		source.From += fmt.Sprintf("; the program read %q%s", s.Text, whereRead(s))
	}
	if typed != "" {
		kept = append(kept, source)
	}
	r.Sources = kept
	r.Flags = slices.DeleteFunc(r.Flags, func(f result.Flag) bool { return slices.Contains(settledBy()[field], f.Name) })
	switch field {
	case "n":
		r.NFrom, r.NKind = "", ""
		if typed != "" {
			r.NFrom = result.NPerson
		}
	case "adjusted":
		if typed == "no" {
			r.Evidence.Model = nil
			r.Evidence.Tests = slices.DeleteFunc(slices.Clone(r.Evidence.Tests), func(t string) bool { return t == "ancova" || t == "mixed model" })
		}
	}
}

// takeProposal fills mean and SD from the proposal of that name.
func takeProposal(w *Working, name string) error {
	for _, a := range w.Trail.Alternatives {
		if a.Name != name {
			continue
		}
		if a.Struck || a.SD == nil {
			return fmt.Errorf("the proposal %q cannot be taken: %s", name, a.Note)
		}
		w.Record.SD, w.Record.SDLow, w.Record.SDHigh = a.SD, a.Low, a.High
		if a.Mean != nil {
			w.Record.Mean = a.Mean
		}
		w.Record.SDOf, w.Record.Method = text("values"), text(a.Name)
		w.Record.Use, w.Record.Reason = useConverted, ""
		w.Trail.Notes = append(w.Trail.Notes, fmt.Sprintf("A person took the proposal %q.", a.Name))
		return nil
	}
	return fmt.Errorf("there is no proposal %q for this result", name)
}
