package review

import (
	"fmt"
	"path"
	"slices"
	"strings"

	"halfspan/report/ledger"
)

// Filter picks results. A field that is empty picks all; several words of one
// field, parted by commas, pick each.
type Filter struct {
	Reading   string // clear, look, doubtful
	State     string // open, confirmed, ...
	Use       string // printed, converted, withheld
	Statistic string // mean, ...
	Paper     string // part of the name, or a pattern with * and ?
	Outcome   string // part of the outcome
	Arm       string // part of the arm or its comparator
	Time      string // part of the time
}

// FilterWords lists the words that a filter of a closed set may use, by its flag.
func FilterWords() map[string][]string {
	states := make([]string, 0, 6)
	for _, s := range ledger.States() {
		states = append(states, string(s))
	}
	return map[string][]string{
		"reading": {"clear", "look", "doubtful"},
		"state":   states,
		"use":     {"printed", "converted", "withheld"},
	}
}

// Check says what is wrong with a filter's words.
func (f *Filter) Check() error {
	allowed := FilterWords()
	for _, w := range []struct{ flag, value string }{{"reading", f.Reading}, {"state", f.State}, {"use", f.Use}} {
		for _, word := range words(w.value) {
			if !slices.Contains(allowed[w.flag], word) {
				return fmt.Errorf("--%s: %q is none of: %s", w.flag, word, strings.Join(allowed[w.flag], ", "))
			}
		}
	}
	return nil
}

// Apply gives the rows that the filter picks, in their order.
func (f *Filter) Apply(rows []ledger.Row) []ledger.Row {
	var picked []ledger.Row
	for i := range rows {
		if f.picks(&rows[i]) {
			picked = append(picked, rows[i])
		}
	}
	return picked
}

func (f *Filter) picks(r *ledger.Row) bool {
	record := &r.Current().Working.Record
	return isOne(f.Reading, r.Working.Record.Reading) && isOne(f.State, string(r.State)) && isOne(f.Use, record.Use) &&
		isOne(f.Statistic, str(record.Statistic)) && (hasPart(f.Paper, record.Paper) || matches(f.Paper, record.Paper)) &&
		hasPart(f.Outcome, str(record.Outcome)) && (hasPart(f.Arm, str(record.Arm)) || hasPart(f.Arm, str(record.Arm2))) &&
		hasPart(f.Time, str(record.Time))
}

func words(list string) []string {
	var all []string
	for w := range strings.SplitSeq(list, ",") {
		if w = strings.TrimSpace(w); w != "" {
			all = append(all, w)
		}
	}
	return all
}

func isOne(list, value string) bool {
	all := words(list)
	return len(all) == 0 || slices.Contains(all, value)
}

func hasPart(list, value string) bool {
	all := words(list)
	return len(all) == 0 || slices.ContainsFunc(all, func(w string) bool {
		return strings.Contains(strings.ToLower(value), strings.ToLower(w))
	})
}

func matches(list, name string) bool {
	return slices.ContainsFunc(words(list), func(w string) bool {
		whole, err := path.Match(w, name)
		last, err2 := path.Match(w, path.Base(name))
		return err == nil && whole || err2 == nil && last
	})
}
