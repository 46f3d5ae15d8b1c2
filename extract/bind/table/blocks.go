package table

import (
	"strings"

	"halfspan/extract/pattern"
)

// analysisName is the name of an analysis, or of the set of subjects that it was
// made in: it says of whom a block of a table is, not what was measured.
var analysisName = pattern.MustCompile(`(?i)^(?:the )?(?:(?:adjusted|unadjusted|main|primary) )?(?:` +
	`(?:(?:modified )?intent(?:ion)?[- ]to[- ]treat|m?ITT|per[- ]protocol|as[- ]treated|on[- ]treatment|sensitivity|complete[- ]cases?|completers?'?|available[- ]cases?|observed[- ]cases?)(?: (?:analys[ei]s|population|set|sample|cohort|only))?` +
	`|(?:main|primary|secondary|post[- ]hoc|exploratory|full|safety|evaluable|efficacy|(?:m?ITT|PP)) (?:analys[ei]s(?: set)?|population|set|sample))` +
	`(?: (?:with|without|using|by|based on)\b.*)?\s*(?:\d{1,2})?\s*(?:[(\[:].*)?$`)

// analysisBlock reports a group label over a block of rows that names their
// analysis, where each analysis has one block: then the blocks are the outermost
// division of the table, whatever labels of the same step stand inside them.
func (f *frame) analysisBlock(r int) bool {
	if !f.namesAnalysis(r) {
		return false
	}
	own := fold(f.lines[r].labels[0].text)
	for q := f.head; q < f.tab.Rows; q++ {
		if q != r && f.namesAnalysis(q) && fold(f.lines[q].labels[0].text) == own {
			return false // it comes again under every outcome
		}
	}
	return true
}

// countsBesideLabel reports a row with an n beside its label.
func (f *frame) countsBesideLabel(r int) bool {
	for c := f.stub; c < f.tab.Cols; c++ {
		if cell := f.cellAt(r, c); cell != nil && f.reads[cell].phrase.onlyN {
			return true
		}
	}
	return false
}

// namesAnalysis reports a label over rows, and over nothing else, that names an
// analysis.
func (f *frame) namesAnalysis(r int) bool {
	ln := &f.lines[r]
	return (ln.kind == lineGroup || ln.kind == lineHead) && len(ln.labels) == 1 && analysisName.MatchString(f.lex.name(ln.labels[0].text))
}

// firstAnalysis gives the heading over the labels of the rows that names the
// analysis of those above the first block that has its own.
func (f *frame) firstAnalysis(r int) (label, bool) {
	for _, g := range f.lines[r].groups {
		if f.namesAnalysis(g) {
			return label{}, false
		}
	}
	for c := 0; c < f.stub; c++ {
		for _, l := range f.heads[c] {
			if analysisName.MatchString(f.lex.name(l.text)) {
				return l, true
			}
		}
	}
	return label{}, false
}

// wholeScale are the names of the sum or mean over the parts of a scale.
var wholeScale = map[string]bool{"total": true, "overall": true, "total score": true, "overall score": true}

// partOfScale reports a label such as "Overall" or "Total" over or among the
// parts of one scale: rows of the same group that name no other subgroup. It
// says what was measured, not in whom.
func (f *frame) partOfScale(r int, name string) bool {
	if !wholeScale[fold(name)] {
		return false
	}
	ln := &f.lines[r]
	if len(ln.groups) == 0 && len(ln.labels) < 2 {
		return false
	}
	others, subs := 0, 0
	for q := f.head; q < f.tab.Rows; q++ {
		o := &f.lines[q]
		if q == r || o.kind != lineData || len(o.labels) != len(ln.labels) || len(o.groups) != len(ln.groups) || !prefix(o.groups, ln.groups) ||
			len(ln.labels) > 1 && !sameFirst(o, ln) {
			continue
		}
		l := o.labels[len(o.labels)-1]
		switch p := f.rowPart(l); {
		case totals[fold(p.name)]:
		case p.kind != partOther || f.subgroupLike(p.name) || nPhrase.MatchString(l.text):
			subs++
		default:
			others++
		}
	}
	return others > 1 && subs == 0
}

// bracketPhase is a bracket that says before or after what: "Vigour [after feeding]".
var bracketPhase = pattern.MustCompile(`(?i)[(\[](before|after|during|pre|post)[- ](?:the )?([^()\[\]]{3,30})[)\]]`)

// phaseInBracket gives the time in the bracket of a label where another label
// of the table names the other phase of the same.
func (f *frame) phaseInBracket(s string) string {
	m := bracketPhase.FindStringSubmatch(s)
	if m == nil {
		return ""
	}
	for r := f.head; r < f.tab.Rows; r++ {
		for _, l := range f.lines[r].labels {
			o := bracketPhase.FindStringSubmatch(l.text)
			if o != nil && strings.EqualFold(o[2], m[2]) && !strings.EqualFold(o[1], m[1]) {
				return strings.Trim(m[0], "()[]")
			}
		}
	}
	return ""
}

// changeUnder gives the time that the row above names for a row of changes:
// "Week 8" over "Change from baseline", again and again.
func (f *frame) changeUnder(r int) string {
	ln := &f.lines[r]
	if ln.kind != lineData || len(ln.labels) == 0 {
		return ""
	}
	own := ln.labels[len(ln.labels)-1]
	if !f.plainChange(own) {
		return ""
	}
	same := 0
	for q := f.head; q < f.tab.Rows; q++ {
		o := &f.lines[q]
		if o.kind == lineData && len(o.labels) == len(ln.labels) && len(o.groups) == len(ln.groups) && prefix(o.groups, ln.groups) && fold(o.labels[len(o.labels)-1].text) == fold(own.text) {
			same++
		}
	}
	if same < 2 {
		return "" // one change for all times
	}
	for q := r - 1; q >= f.head; q-- {
		o := &f.lines[q]
		if o.kind != lineData || len(o.labels) != len(ln.labels) || len(o.groups) != len(ln.groups) || !prefix(o.groups, ln.groups) {
			return ""
		}
		l := o.labels[len(o.labels)-1]
		if f.plainChange(l) {
			continue // two kinds of change under one time
		}
		if p := f.rowPart(l); p.kind == partTime && !f.lex.change(l.text) {
			return p.name
		}
		return ""
	}
	return ""
}

// plainChange reports a label that says change, from baseline or not, and no
// time of its own.
func (f *frame) plainChange(l label) bool {
	return f.lex.change(l.text) && f.rowPart(l).kind == partTime && len(f.lex.timesIn(fromBaseline.ReplaceAllString(l.text, " "))) == 0
}
