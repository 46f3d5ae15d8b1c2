package review

import (
	"cmp"
	"fmt"
	"io"
	"strings"

	"github.com/mattn/go-runewidth"

	"halfspan/convert/working"
	"halfspan/extract/result"
	"halfspan/report/ledger"
)

// card writes everything there is to know about one result.
type card struct {
	w      io.Writer
	width  int
	colour bool
}

const labelWidth = 11

// show writes a result: where it stands, its context with the printed numbers
// marked, what was read in each field, how the SD was reached, and the flags.
func (c *card) show(r *ledger.Row) {
	record := &r.Working.Record
	c.line(c.bold(whereabouts(record)))
	c.context(record)
	c.line("")
	c.fields(&r.Current().Working.Record)
	c.working(&r.Current().Working)
	for _, f := range r.Working.Flags {
		c.labelled("flag", flagWords(f))
	}
	c.labelled("reading", record.Reading)
	c.decision(r)
}

// flagWords says what a flag means here, and what to do about it.
func flagWords(f result.Flag) string {
	info, _ := working.ExplainFlag(f.Name)
	text := f.Name
	if about := cmp.Or(f.Detail, info.Meaning); about != "" {
		text += ": " + about
	}
	if info.Do != "" {
		text += "; " + info.Do
	}
	return text
}

// whereabouts says where a result stands: "hives.txt, page 4, Table 2, Results".
func whereabouts(record *working.Record) string {
	parts := []string{record.Paper}
	if record.Page != nil {
		parts = append(parts, fmt.Sprintf("page %d", *record.Page))
	}
	for _, s := range []*string{record.Table, record.Section} {
		if s != nil {
			parts = append(parts, *s)
		}
	}
	return oneLine(strings.Join(parts, ", "))
}

// context writes the lines of the snippet around the printed result.
func (c *card) context(record *working.Record) {
	marked := markPrinted(record)
	lines := wrap(marked, c.width-2)
	first := 0
	for i, line := range lines {
		if strings.Contains(line, openMark) {
			first = i
			break
		}
	}
	from := max(0, min(first-1, len(lines)-4))
	for _, line := range lines[from:min(len(lines), from+4)] {
		if c.colour {
			line = strings.NewReplacer(openMark, "\x1b[7m", closeMark, "\x1b[0m").Replace(line)
		}
		c.line("  " + line)
	}
}

// The printed numbers stand between these marks where there is no colour.
const (
	openMark  = "«"
	closeMark = "»"
)

// markPrinted marks the numbers of a record in its snippet, as far as they are
// found there in their order.
func markPrinted(record *working.Record) string {
	text := oneLine(strings.NewReplacer(openMark, `"`, closeMark, `"`).Replace(record.Snippet))
	var b strings.Builder
	for _, field := range []string{"estimate", "lower", "upper", "given_value"} {
		printed := printedText(record, field)
		if printed == "" {
			continue
		}
		i := indexNumber(text, printed)
		if i < 0 {
			continue
		}
		b.WriteString(text[:i] + openMark + printed + closeMark)
		text = text[i+len(printed):]
	}
	return b.String() + text
}

// indexNumber finds a printed number in text where it stands alone, not as part
// of a longer one.
func indexNumber(text, printed string) int {
	digit := func(i int) bool {
		return i >= 0 && i < len(text) && (text[i] >= '0' && text[i] <= '9' || text[i] == '.')
	}
	for from := 0; ; {
		i := strings.Index(text[from:], printed)
		if i < 0 {
			return -1
		}
		i += from
		end := i + len(printed)
		last := end < len(text) && text[end] == '.' && !digit(end+1) // the end of a sentence
		if !digit(i-1) && (!digit(end) || last) {
			return i
		}
		from = i + 1
	}
}

// printedText is what stands in the paper for a field, as printed.
func printedText(record *working.Record, field string) string {
	for _, p := range record.Places {
		if p.Field == field && p.Text != "" {
			return oneLine(p.Text)
		}
	}
	value, _ := Field(record, field)
	return value
}

// wrap breaks text into lines of a width at its spaces.
func wrap(text string, width int) []string {
	var lines []string
	line := ""
	for word := range strings.FieldsSeq(text) {
		if line != "" && runewidth.StringWidth(line)+1+runewidth.StringWidth(word) > width {
			lines = append(lines, line)
			line = ""
		}
		if line != "" {
			line += " "
		}
		line += word
	}
	return append(lines, line)
}

// fields writes what was read, and where that is not beside the result.
func (c *card) fields(record *working.Record) {
	c.labelled("printed", Printed(record))
	c.labelled("statistic", strings.TrimSpace(str(record.Statistic)+" "+str(record.Measure)))
	if record.Level != nil && str(record.GivenAs) == "ci" {
		c.labelled("given as", fmt.Sprintf("%s%% ci", working.Number(*record.Level)))
	} else {
		c.labelled("given as", str(record.GivenAs))
	}
	sizes := Sizes(record)
	if record.N != nil {
		for _, s := range []*string{record.NFrom, record.NKind} {
			if s != nil {
				sizes += ", " + *s
			}
		}
	}
	c.labelled("n", sizes)
	c.labelled("arm", or(Group(record), "-"))
	for _, f := range []struct {
		label string
		value *string
	}{{"time", record.Time}, {"subgroup", record.Subgroup}, {"outcome", record.Outcome}, {"unit", record.Unit}, {"heading", record.Heading}, {"adjusted", record.Adjusted}, {"p", record.P}} {
		if f.value != nil {
			c.labelled(f.label, *f.value)
		}
	}
}

// working writes how the values were reached, or why they were withheld.
func (c *card) working(w *working.Working) {
	r := &w.Record
	switch {
	case r.SD != nil:
		text := Spread(r)
		if allow := DigitsAllow(r); allow != "" {
			text += ", digits allow " + allow
		}
		if r.SDOf != nil {
			text += ", of the " + *r.SDOf
		}
		c.labelled("SD", text+" ("+r.Use+")")
	case r.Use == "withheld":
		c.labelled("SD", "withheld: "+or(r.Reason, "no reason given"))
	}
	if r.SE != nil && r.SD == nil {
		c.labelled("SE", strings.TrimPrefix(Spread(r), "SE "))
	}
	for i, step := range w.Trail.Steps {
		c.labelled(once("working", i), step)
	}
	for i, assumption := range w.Trail.Assumptions {
		c.labelled(once("assumes", i), assumption)
	}
	for i, a := range w.Trail.Alternatives {
		c.labelled(once("also", i), alternative(&a))
	}
}

func once(label string, i int) string {
	if i > 0 {
		return ""
	}
	return label
}

// alternative writes another value beside the one taken.
func alternative(a *working.Alternative) string {
	text := a.Name
	for _, v := range []struct {
		name  string
		value *working.Number
	}{{"mean", a.Mean}, {"SD", a.SD}, {"SE", a.SE}} {
		if v.value != nil {
			text += fmt.Sprintf(", %s %s", v.name, Short(*v.value))
		}
	}
	if a.Struck {
		text += ", impossible"
	}
	if a.Note != "" {
		text += ": " + a.Note
	}
	return text
}

// decision writes what was decided about the result before.
func (c *card) decision(r *ledger.Row) {
	if r.Decision == nil {
		return
	}
	text := stateWord(r) + " on " + r.Decision.At.Format("2006-01-02")
	if r.Decision.Reason != "" {
		text += ", " + r.Decision.Reason
	}
	if r.Decision.Note != "" {
		text += ": " + r.Decision.Note
	}
	c.labelled("state", text)
	for _, name := range r.Differs {
		before, _ := Field(&r.Decision.Seen.Working.Record, name)
		now, _ := Field(&r.Working.Record, name)
		c.labelled("", fmt.Sprintf("%s was read as %s, is now read as %s", name, or(before, "-"), or(now, "-")))
	}
}

func (c *card) line(text string) { fmt.Fprintln(c.w, text) }

// labelled writes a text under its label, broken into lines.
func (c *card) labelled(label, text string) {
	if text == "" {
		return
	}
	for i, line := range wrap(oneLine(text), max(20, c.width-labelWidth)) {
		if i > 0 {
			label = ""
		}
		c.line(fmt.Sprintf("%-*s%s", labelWidth, label, line))
	}
}

func (c *card) bold(text string) string {
	if !c.colour {
		return text
	}
	return "\x1b[1m" + text + "\x1b[0m"
}
