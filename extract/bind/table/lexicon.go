package table

import (
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
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
	marked   map[noteKey][]statement
}

type noteKey struct {
	run *paper.TextRun
	rk  rank
}

func newLexicon() *lexicon {
	return &lexicon{phrases: map[string]*phrase{}, names: map[string]string{}, times: map[string]bool{}, compared: map[string]bool{},
		units: map[string]string{}, marked: map[noteKey][]statement{}}
}

// phrase reads a heading without marks.
func (x *lexicon) phrase(s string) *phrase {
	p, ok := x.phrases[s]
	if !ok {
		v := parsePhrase(grammar.Text{S: s})
		p = &v
		x.phrases[s] = p
	}
	return p
}

// name is what a heading names: see nameOf.
func (x *lexicon) name(s string) string {
	n, ok := x.names[s]
	if !ok {
		n = nameOf(s)
		x.names[s] = n
	}
	return n
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
