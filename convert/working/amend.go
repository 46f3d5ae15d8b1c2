package working

import (
	"fmt"
	"slices"
	"sort"
	"strconv"
	"strings"

	"halfspan/convert"
	"halfspan/extract/paper"
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
	names := make([]string, 0, len(setters()))
	for name := range setters() {
		names = append(names, name)
	}
	sort.Strings(names)
	return names
}

// Amend works a result through again with some of its fields put right by a
// person: changed maps names of the record's fields (see [Amendable]) to what
// the paper prints there; the empty text says that it prints nothing. take, if
// not empty, names one of the working's own proposals (Trail.Alternatives) whose
// mean and SD the person takes.
//
// The id, the anchor and the places stay. What compares the result with others
// of its paper is not worked again. An error names the field and says what is
// wrong; nothing is changed then.
func Amend(w Working, changed map[string]string, take string) (Working, error) {
	r := resultOf(w)
	table := setters()
	fields := make([]string, 0, len(changed))
	for field := range changed {
		fields = append(fields, field)
	}
	sort.Strings(fields)
	for _, field := range fields {
		set, ok := table[field]
		if !ok {
			return Working{}, fmt.Errorf("%s cannot be amended: only %s can", field, strings.Join(Amendable(), ", "))
		}
		if err := set(&r, strings.TrimSpace(changed[field])); err != nil {
			return Working{}, fmt.Errorf("%s: %w", field, err)
		}
	}
	doc := Facts{Path: w.Record.Paper, SHA256: w.Record.PaperSHA256, Format: paper.Text}
	out := Work(doc, []result.Result{r})[0]
	out.Record.ID, out.Record.Mates, out.Record.Places = w.Record.ID, w.Record.Mates, w.Record.Places
	out.Row, out.Anchor = w.Row, w.Anchor
	if take == "" {
		return out, nil
	}
	for _, a := range out.Trail.Alternatives {
		if a.Name != take {
			continue
		}
		if a.Struck || a.SD == nil {
			return Working{}, fmt.Errorf("the proposal %q cannot be taken: %s", take, a.Note)
		}
		out.Record.SD, out.Record.SDLow, out.Record.SDHigh = a.SD, a.Low, a.High
		if a.Mean != nil {
			out.Record.Mean = a.Mean
		}
		out.Record.SDOf = text("values")
		out.Record.Method = text(a.Name)
		out.Record.Use, out.Record.Reason = useConverted, ""
		out.Trail.Notes = append(out.Trail.Notes, fmt.Sprintf("A person took the proposal %q.", a.Name))
		return out, nil
	}
	return Working{}, fmt.Errorf("there is no proposal %q for this result", take)
}

// resultOf is the result that a working was made from.
func resultOf(w Working) result.Result {
	rec := w.Record
	str := func(s *string) string {
		if s == nil {
			return ""
		}
		return *s
	}
	num := func(n *int) int {
		if n == nil {
			return 0
		}
		return *n
	}
	r := result.Result{
		Anchor: w.Anchor, Page: num(rec.Page), Section: str(rec.Section), Zone: w.Zone, Table: str(rec.Table), Row: w.Row,
		Snippet: rec.Snippet, Statistic: result.Statistic(str(rec.Statistic)), Measure: str(rec.Measure),
		GivenAs: result.GivenAs(str(rec.GivenAs)), Estimate: str(rec.Estimate), Lower: str(rec.Lower), Upper: str(rec.Upper),
		GivenValue: str(rec.GivenValue), N: num(rec.N), N2: num(rec.N2), NFrom: str(rec.NFrom), NKind: str(rec.NKind),
		Arm: str(rec.Arm), Arm2: str(rec.Arm2), Time: str(rec.Time), Subgroup: str(rec.Subgroup), Outcome: str(rec.Outcome),
		Unit: str(rec.Unit), Heading: str(rec.Heading), Adjusted: str(rec.Adjusted), P: str(rec.P), T: str(rec.T),
		F: str(rec.F), DF: str(rec.DF), Evidence: w.Evidence, Flags: slices.Clone(w.Raised),
	}
	if rec.Level != nil {
		r.Level = *rec.Level
	}
	return r
}
