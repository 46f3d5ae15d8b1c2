package prose

import (
	"slices"
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// Where a size stands, in words.
const (
	fromHeading = "in a column heading"
	fromText    = "elsewhere in the text"
)

// size is a sample size with the place it was read from.
type size struct {
	n     int
	at    grammar.Span // in the sentence's own block, where it stands beside
	text  string
	from  string      // where, in words, when it is not beside
	place paper.Place // when it is not beside

	table    string // of a table's result: the table
	outcome  string // what was measured there
	baseline bool   // at the start of the study
	sub      bool   // of a subgroup
}

var startTime = pattern.MustCompile(`(?i)\b(?:baseline|pre|before|day 0|week 0|start|enrol\w*|randomi[sz]ation)\b`)

// asked is the result whose size is looked for.
type asked struct {
	baseline bool
	outcome  string
	events   bool // a ratio, a proportion: its n may be of another part of the arm
}

// sizeOf gives the arm's size behind the result asked for: of the table rows
// about the same outcome; for a baseline value of the rows about the start; else
// the size that the tables agree on, or nearly all of their results; else that of
// the headings; else that of the text.
func (a *arm) sizeOf(q asked) (size, bool) {
	rows := pick(a.sizes, func(s *size) bool { return s.table != "" })
	if whole := pick(rows, func(s *size) bool { return !s.sub }); len(whole) > 0 {
		rows = whole
	}
	if q.events {
		if s, ok := agreed(pick(rows, func(s *size) bool { return alike(s.outcome, q.outcome) })); ok {
			return s, true
		}
		return agreed(a.sizes)
	}
	text := pick(a.sizes, func(s *size) bool { return s.from == fromText })
	heads := pick(a.sizes, func(s *size) bool { return s.from == fromHeading })
	if len(rows) == 0 && len(heads) > 0 && q.baseline {
		text, heads = heads, text
	}
	for _, list := range [][]size{
		pick(rows, func(s *size) bool { return alike(s.outcome, q.outcome) && (s.baseline || !q.baseline) }),
		rows, printedSize(heads, text), largest(usual(rows)),
	} {
		if s, ok := agreed(list); ok {
			return s, true
		}
	}
	return size{}, false
}

// usual are the sizes that at least a quarter of the list has: others are of
// parts of an arm, or of more than one.
func usual(list []size) []size {
	count := map[int]int{}
	for i := range list {
		count[list[i].n]++
	}
	return pick(list, func(s *size) bool { return 4*count[s.n] >= len(list) })
}

// printedSize is the size that headings and text give an arm: the one they share, or
// the larger of two; none where the text gives several and not the heading's.
func printedSize(heads, text []size) []size {
	x, okX := agreed(heads)
	y, okY := agreed(text)
	switch {
	case okX && okY:
		return largest([]size{x, y})
	case okX && (len(text) == 0 || len(pick(text, func(s *size) bool { return s.n == x.n })) > 0):
		return []size{x}
	case okY && len(heads) == 0:
		return []size{y}
	}
	return nil
}

// largest is the largest size alone: of all who were in the arm.
func largest(list []size) []size {
	var out []size
	for _, s := range list {
		if len(out) == 0 || s.n > out[0].n {
			out = []size{s}
		}
	}
	if _, all := agreed(list); !all && len(out) > 0 {
		out[0].from += ", the largest that is printed for the arm"
	}
	return out
}

func pick(list []size, keep func(*size) bool) []size {
	var out []size
	for i := range list {
		if keep(&list[i]) {
			out = append(out, list[i])
		}
	}
	return out
}

// agreed gives the size that all name.
func agreed(list []size) (size, bool) {
	for i := range list {
		if list[i].n != list[0].n {
			return size{}, false
		}
	}
	if len(list) == 0 {
		return size{}, false
	}
	return list[0], true
}

// alike reports that two outcomes share the most of the shorter one's words.
func alike(a, b string) bool {
	x, y := contentWords(a), contentWords(b)
	if len(x) > len(y) {
		x, y = y, x
	}
	if len(x) == 0 {
		return false
	}
	both := 0
	for _, w := range x {
		for _, v := range y {
			if w == v {
				both++
				break
			}
		}
	}
	return 3*both >= 2*len(x)
}

// contentWords are the words of an outcome that tell it from others.
func contentWords(s string) []string {
	var out []string
	for _, w := range strings.FieldsFunc(strings.ToLower(s), func(r rune) bool { return strings.ContainsRune(" \u00a0\n-–/,;()[]*†‡:+%.", r) }) {
		if len(w) > 1 && !functionWords[w] && !stopName[w] {
			out = append(out, w)
		}
	}
	return distinct(out)
}

// sized gives the size of arm i behind a result: its own, or, where it was never
// printed with one, that of the arm with a size whose name holds all its words. A paper that gives a size for one arm only is not trusted with it.
func (c *cast) sized(i int, q asked) (size, bool) {
	with, found := 0, i
	for k := range c.arms {
		if len(c.arms[k].sizes) > 0 {
			with++
		}
	}
	if with < 2 {
		return size{}, false
	}
	if len(c.arms[i].sizes) == 0 {
		if found = c.bearer(c.arms[i].key); found < 0 {
			return size{}, false
		}
	}
	return c.arms[found].sizeOf(q)
}

// bearer gives the arm with a size that has the shortest name with all the words:
// "Pollen cake" for "pollen", beside "No pollen cake"; -1 where two are as short.
func (c *cast) bearer(key []string) int {
	found, tied := -1, false
	for k := range c.arms {
		a := &c.arms[k]
		switch {
		case len(a.sizes) == 0 || !holds(a.key, key):
		case found < 0 || len(a.key) < len(c.arms[found].key):
			found, tied = k, false
		case len(a.key) == len(c.arms[found].key):
			tied = true
		}
	}
	if tied {
		return -1
	}
	return found
}

// holds reports whether all words of b stand in a.
func holds(a, b []string) bool {
	for _, w := range b {
		ok := false
		for _, v := range a {
			ok = ok || v == w
		}
		if !ok {
			return false
		}
	}
	return true
}

// together is the size of all arms at the start: the tables' totals, else the sum
// of the arms of one table of the start, where every such table gives the same.
func (c *cast) together() (size, bool) {
	if len(c.totals) > 0 {
		if first := pick(c.totals, func(s *size) bool { return s.baseline }); len(first) > 0 {
			return agreed(first)
		}
		return agreed(c.totals)
	}
	sums := map[string]size{}
	parts := map[string][]int{}
	var order []string
	for i := range c.arms {
		here := map[string][]size{}
		for _, s := range c.arms[i].sizes {
			if s.table == "" || !s.baseline || s.sub {
				continue
			}
			if here[s.table] == nil && parts[s.table] == nil {
				order = append(order, s.table)
			}
			here[s.table] = append(here[s.table], s)
		}
		for _, table := range order {
			if s, ok := agreed(usual(here[table])); ok {
				s.n += sums[table].n
				s.from = "in " + table + ", as the sum of its arms"
				parts[table] = append(parts[table], s.n-sums[table].n)
				sums[table] = s
			}
		}
	}
	var all []size
	for _, table := range order {
		if n := parts[table]; len(n) > 1 && 2*slices.Max(n) != sums[table].n {
			all = append(all, sums[table])
		}
	}
	return agreed(all)
}
