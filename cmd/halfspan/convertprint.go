package main

import (
	"fmt"
	"io"
	"strconv"
	"strings"
	"unicode/utf8"

	"halfspan/convert/working"
)

// printer writes workings for a person: labels on the left, text wrapped to the
// width. It remembers the first error of writing.
type printer struct {
	out   io.Writer
	width int
	err   error
}

const printerLabel = 10

func (p *printer) line(text string) {
	if p.err == nil {
		_, p.err = fmt.Fprintln(p.out, strings.TrimRight(text, " "))
	}
}

// item writes one labelled piece; further lines are indented below it.
func (p *printer) item(label, text string) {
	width := p.width
	if width <= 0 {
		width = 80
	}
	for i, l := range wrapWords(text, max(width-printerLabel, 30)) {
		if i > 0 {
			label = ""
			l = "  " + l
		}
		p.line(fmt.Sprintf("%-*s%s", printerLabel, label, l))
	}
}

func (p *printer) items(label string, texts []string) {
	for _, t := range texts {
		p.item(label, t)
		label = ""
	}
}

// wrapWords breaks text at spaces into lines of at most width characters, the
// second and later ones two shorter.
func wrapWords(text string, width int) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(text) {
		most := width
		if len(lines) > 0 {
			most -= 2
		}
		if line != "" && utf8.RuneCountInString(line)+1+utf8.RuneCountInString(word) > most {
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

func (p *printer) working(w working.Working) {
	p.item("read", readBack(w.Record))
	p.items("steps", w.Trail.Steps)
	p.item("result", workedOut(w.Record))
	for i, a := range w.Trail.Alternatives {
		label := ""
		if i == 0 {
			label = "beside"
		}
		p.item(label, alternative(a))
	}
	p.items("assumes", w.Trail.Assumptions)
	var notes []string
	for _, n := range w.Trail.Notes {
		if !strings.Contains(n, " read as ") {
			notes = append(notes, n)
		}
	}
	p.items("notes", notes)
	for i, f := range w.Flags {
		label := ""
		if i == 0 {
			label = "flags"
		}
		text := f.Name
		if f.Detail != "" {
			text += ": " + f.Detail
		}
		p.item(label, text)
	}
	if m := w.Record.Method; m != nil {
		p.item("method", *m+" (halfspan methods "+*m+")")
	}
}

// readBack says what was understood, so that a person sees a misreading at once.
func readBack(r working.Record) string {
	var b strings.Builder
	if r.Statistic != nil {
		b.WriteString(*r.Statistic + " ")
	} else {
		b.WriteString("estimate of unknown kind ")
	}
	b.WriteString(orNone(r.Estimate))
	if r.Unit != nil {
		b.WriteString(" " + *r.Unit)
	}
	names := map[string]string{"ci": "interval", "sd": "SD", "se": "SE", "iqr": "quartiles", "range": "range", "unstated": "± unexplained"}
	if r.GivenAs != nil {
		name := names[*r.GivenAs]
		if *r.GivenAs == "ci" {
			name = "interval of unknown level"
			if r.Level != nil {
				name = fmt.Sprintf("%v%% interval", *r.Level)
			}
		}
		b.WriteString(", " + name + " ")
	}
	if r.GivenValue != nil {
		if r.GivenAs != nil && *r.GivenAs == "iqr" {
			b.WriteString("as one number ")
		}
		b.WriteString(*r.GivenValue)
	} else {
		b.WriteString(orNone(r.Lower) + " to " + orNone(r.Upper))
	}
	if r.N != nil {
		b.WriteString(", n " + strconv.Itoa(*r.N))
	} else {
		b.WriteString(", n not said")
	}
	if r.N2 != nil {
		b.WriteString(" and " + strconv.Itoa(*r.N2))
	}
	return b.String()
}

func orNone(s *string) string {
	if s == nil {
		return "(none)"
	}
	return *s
}

// workedOut is the one line that a person came for.
func workedOut(r working.Record) string {
	var parts []string
	if r.Mean != nil {
		parts = append(parts, "mean "+r.Mean.String())
	}
	if r.SD != nil {
		text := "SD " + sixDigits(*r.SD)
		if r.SDLow != nil && r.SDHigh != nil {
			text += fmt.Sprintf(" (%s to %s by the printed digits)", sixDigits(*r.SDLow), sixDigits(*r.SDHigh))
		}
		parts = append(parts, text)
	}
	if r.SE != nil {
		text := "SE " + sixDigits(*r.SE)
		if r.Scale != nil && *r.Scale != "raw" {
			text += " on the " + *r.Scale + " scale"
		}
		parts = append(parts, text)
	}
	if r.Use == "withheld" {
		parts = append(parts, "no SD: "+r.Reason)
	}
	return strings.Join(parts, ", ")
}

func sixDigits(n working.Number) string {
	r, err := strconv.ParseFloat(strconv.FormatFloat(float64(n), 'g', 6, 64), 64)
	if err != nil {
		return n.String()
	}
	return working.Number(r).String()
}

func alternative(a working.Alternative) string {
	var parts []string
	if a.Mean != nil {
		parts = append(parts, "mean "+sixDigits(*a.Mean))
	}
	if a.SD != nil {
		text := "SD " + sixDigits(*a.SD)
		if a.Low != nil && a.High != nil {
			text += fmt.Sprintf(" (%s to %s)", sixDigits(*a.Low), sixDigits(*a.High))
		}
		parts = append(parts, text)
	} else if a.SE != nil {
		parts = append(parts, "SE "+sixDigits(*a.SE))
	}
	text := a.Name
	if len(parts) > 0 {
		text += ": " + strings.Join(parts, ", ")
	}
	if a.Note != "" {
		text += "; " + a.Note
	}
	if a.Struck {
		text = "struck out: " + text
	}
	return text
}

func (p *printer) joint(j working.Joint) {
	p.items("steps", j.Trail.Steps)
	for i, v := range j.Values {
		label := ""
		if i == 0 {
			label = "result"
		}
		text := v.Name
		if v.Value != nil {
			text += " " + sixDigits(*v.Value)
		}
		switch {
		case v.Low != nil && v.High != nil:
			text += fmt.Sprintf(" (%s to %s by the printed digits)", sixDigits(*v.Low), sixDigits(*v.High))
		case v.Low != nil:
			text += " at least " + sixDigits(*v.Low)
		case v.High != nil:
			text += " at most " + sixDigits(*v.High)
		}
		if v.Note != "" {
			text += "; " + v.Note
		}
		p.item(label, text)
	}
	p.items("assumes", j.Trail.Assumptions)
	p.items("notes", j.Trail.Notes)
}
