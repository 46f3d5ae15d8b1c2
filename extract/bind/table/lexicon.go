package table

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// lexicon remembers what was read in the headings, labels and notes of one
// paper: the same words stand over many values. It holds nothing that the words
// alone do not say.
type lexicon struct {
	phrases  map[string]*phrase
	names    map[string]string
	times    map[string]bool
	compared map[string]bool
	units    map[string]string
	points   map[string][]string
	inRow    map[string]string
	changes  map[string]bool
	found    map[patternKey]bool
	marked   map[noteKey][]statement
	never    map[string]bool // short forms that mean no statistic in this paper
}

type noteKey struct {
	run *paper.TextRun
	rk  rank
}

type patternKey struct {
	p *pattern.Pattern
	s string
}

func newLexicon() *lexicon {
	return &lexicon{phrases: map[string]*phrase{}, names: map[string]string{}, times: map[string]bool{}, compared: map[string]bool{},
		units: map[string]string{}, points: map[string][]string{}, inRow: map[string]string{}, changes: map[string]bool{}, found: map[patternKey]bool{}, marked: map[noteKey][]statement{}}
}

// phrase reads a heading without marks.
func (x *lexicon) phrase(s string) *phrase {
	p, ok := x.phrases[s]
	if !ok {
		v := parsePhrase(grammar.Text{S: s})
		v.unname(x.never)
		p = &v
		x.phrases[s] = p
	}
	return p
}

// name is what a heading names: see nameOf.
func (x *lexicon) name(s string) string {
	n, ok := x.names[s]
	if !ok {
		n = x.keep(s)
		x.names[s] = n
	}
	return n
}

// keep is nameOf with the short forms that mean no statistic left in.
func (x *lexicon) keep(s string) string {
	t := s
	for _, sh := range shorts {
		if x.never[sh.form] {
			t = sh.word.ReplaceAllString(t, "x"+sh.form)
		}
	}
	if t == s {
		return nameOf(s)
	}
	t = nameOf(t)
	for _, sh := range shorts {
		t = strings.ReplaceAll(t, "x"+sh.form, sh.form)
	}
	return t
}

// isTime reports that a folded heading names a time: see isTimeHeading.
func (x *lexicon) isTime(low string) bool {
	t, ok := x.times[low]
	if !ok {
		t = isTimeHeading(low)
		x.times[low] = t
	}
	return t
}

// unit is the unit in a label: see unitIn.
func (x *lexicon) unit(s string) string {
	u, ok := x.units[s]
	if !ok {
		u = unitIn(s)
		x.units[s] = u
	}
	return u
}

// compares reports that a heading announces a statistic between arms.
func (x *lexicon) compares(s string) bool {
	c, ok := x.compared[s]
	if !ok {
		c = comparesArms(x.phrase(s))
		x.compared[s] = c
	}
	return c
}

// noteStatements gives what a note declares: see noteStatements.
func (x *lexicon) noteStatements(n note, rk rank) []statement {
	key := noteKey{n.run, rk}
	s, ok := x.marked[key]
	if !ok {
		s = noteStatements(n, rk)
		x.marked[key] = s
	}
	return s
}

// timesIn lists the times named in a text: see timesIn.
func (x *lexicon) timesIn(s string) []string {
	t, ok := x.points[s]
	if !ok {
		t = timesIn(s)
		x.points[s] = t
	}
	return t
}

// timeIn is the first time named in a text.
func (x *lexicon) timeIn(s string) string {
	if t := x.timesIn(s); len(t) > 0 {
		return t[0]
	}
	return ""
}

// rowTime is the time point in a row label: see rowTime.
func (x *lexicon) rowTime(s string) string {
	t, ok := x.inRow[s]
	if !ok {
		t = rowTime(s)
		x.inRow[s] = t
	}
	return t
}

// change reports that a text speaks of a change.
func (x *lexicon) change(s string) bool {
	c, ok := x.changes[s]
	if !ok {
		c = changeMark.MatchString(fold(s))
		x.changes[s] = c
	}
	return c
}

// has reports that the text holds a match of the pattern.
func (x *lexicon) has(p *pattern.Pattern, s string) bool {
	key := patternKey{p, s}
	m, ok := x.found[key]
	if !ok {
		m = p.MatchString(s)
		x.found[key] = m
	}
	return m
}
