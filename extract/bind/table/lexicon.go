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
	return remembered(x.phrases, s, func() *phrase {
		p := parsePhrase(grammar.Text{S: s})
		p.unname(x.never)
		return &p
	})
}

// name is what a heading names: see nameOf.
func (x *lexicon) name(s string) string {
	return remembered(x.names, s, func() string { return x.keep(s) })
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
	return remembered(x.times, low, func() bool { return isTimeHeading(low) })
}

// unit is the unit in a label: see unitIn.
func (x *lexicon) unit(s string) string {
	return remembered(x.units, s, func() string { return unitIn(s) })
}

// compares reports that a heading announces a statistic between arms.
func (x *lexicon) compares(s string) bool {
	return remembered(x.compared, s, func() bool { return comparesArms(x.phrase(s)) })
}

// noteStatements gives what a note declares: see noteStatements.
func (x *lexicon) noteStatements(n note, rk rank) []statement {
	key := noteKey{n.run, rk}
	return remembered(x.marked, key, func() []statement { return noteStatements(n, rk) })
}

// timesIn lists the times named in a text: see timesIn.
func (x *lexicon) timesIn(s string) []string {
	return remembered(x.points, s, func() []string { return timesIn(s) })
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
	return remembered(x.inRow, s, func() string { return rowTime(s) })
}

// change reports that a text speaks of a change.
func (x *lexicon) change(s string) bool {
	return remembered(x.changes, s, func() bool { return changeMark.MatchString(fold(s)) })
}

// has reports that the text holds a match of the pattern.
func (x *lexicon) has(p *pattern.Pattern, s string) bool {
	key := patternKey{p, s}
	return remembered(x.found, key, func() bool { return p.MatchString(s) })
}
