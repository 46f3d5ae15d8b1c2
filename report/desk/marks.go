package desk

import (
	"slices"
	"sort"
	"strings"

	"halfspan/convert/working"
	"halfspan/extract/paper"
)

// mark is a stretch of text where one field of a result was read.
type mark struct {
	offset int // of its first byte in the file
	text   string
	field  string
}

// own are the fields that are the result itself.
var own = []string{"estimate", "lower", "upper", "given_value"}

// marksOf lists where the fields of a working were read, the result's own
// numbers last, so that they win where places overlap.
func marksOf(w working.Working) []mark {
	var out []mark
	for _, p := range w.Record.Places {
		if p.Offset != nil && p.Text != "" {
			out = append(out, mark{*p.Offset, p.Text, p.Field})
		}
	}
	sort.SliceStable(out, func(i, j int) bool {
		a, b := slices.Contains(own, out[i].field), slices.Contains(own, out[j].field)
		return !a && b
	})
	return out
}

// spans cuts a stretch of text where something was read in it.
func spans(t *paper.TextRun, marks []mark, lead string) []spanView {
	fields := make([]string, len(t.S))
	for _, m := range marks {
		for _, run := range t.Runs {
			from := m.offset - run.Place.Offset + run.Start
			if from < run.Start || from >= run.End {
				continue
			}
			// What is printed may take more bytes in the file than here (&minus;),
			// so its length is that of the text.
			for i := from; i < min(from+len(m.text), len(t.S)); i++ {
				fields[i] = m.field
			}
			break
		}
	}
	var out []spanView
	if lead != "" {
		out = append(out, spanView{Text: lead})
	}
	for i := 0; i < len(t.S); {
		j := i + 1
		for j < len(t.S) && (fields[j] == fields[i] || t.S[j]&0xC0 == 0x80) {
			j++
		}
		out = append(out, spanView{Text: strings.ReplaceAll(t.S[i:j], "\n", " / "), Field: fields[i]})
		i = j
	}
	return out
}
