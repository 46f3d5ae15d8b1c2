package table

import (
	"fmt"
	"halfspan/extract/pattern"
	"strings"

	"halfspan/extract/paper"
)

// context is whom and what an estimate is about, with the labels it was read
// from.
type context struct {
	arm, arm2, time, subgroup, outcome, unit, heading string
	armAt, timeAt, outcomeAt, unitAt                  label
	armFrom, timeFrom, outcomeFrom                    string
	contrast                                          bool // between arms
	change                                            bool
	within                                            bool   // a difference inside one arm, by the layout
	aside                                             string // what headings beside the arm's say
	measured                                          string // what such headings say was measured
	changeAll                                         bool   // the caption says that the table prints changes
	timeGuess                                         bool   // the time rests on the caption
	armGuess                                          bool
	outcomeGuess                                      bool
}

// comparesFor reports that a heading makes an estimate a comparison. The short
// names of ratios are names of much else (heart rate, physical role): they count
// only where an interval is printed.
func (f *frame) comparesFor(e *estimate, s string) bool {
	if !f.lex.compares(s) {
		return false
	}
	if e.hasInterval() {
		return true
	}
	for _, q := range f.lex.phrase(s).pairs {
		if q.Statistic == "mean difference" || q.Statistic == "risk difference" {
			return true
		}
	}
	return false
}

// hasInterval reports that an interval is printed with the estimate.
func (e *estimate) hasInterval() bool {
	for i := range e.spreads {
		if e.spreads[i].shape == shapeInterval {
			return true
		}
	}
	return false
}

// nameless gives a heading its name back that was taken for the short form of a
// ratio: "HR (bpm)" over means with SDs.
func (f *frame) nameless(e *estimate, l label, p part) part {
	if p.kind != partEmpty && p.kind != partContrast || isContrast(fold(l.text)) || e.hasInterval() || f.comparesFor(e, l.text) {
		return p
	}
	for _, q := range f.lex.phrase(l.text).pairs {
		if q.Statistic == "ratio" && q.Spread == "" {
			p.kind, p.name = partOther, clean(nPhrase.ReplaceAllString(l.text, " "))
			return p
		}
	}
	return p
}

// aroundTime are names of outcomes that also say when: "Vigour after feeding".
var aroundTime = pattern.MustCompile(`(?i)\b(?:before|after|prior to|pre-?|post-?)\s?(?:the )?(?:treatment|intervention|therapy|surgery|operation|training|exercise|feeding|study|trial|test|dose)\b`)

// contextOf finds whom and what an estimate is about.
func (f *frame) contextOf(e *estimate) *context {
	x := &context{}
	f.columnContext(e, x)
	f.rowContext(e, x)
	f.captionContext(e, x)
	if a := f.correctedCaption(); a != "" && x.arm2 == "" {
		x.contrast, x.arm2 = true, a
	}
	if x.contrast {
		f.contrastArms(e, x)
	}
	x.heading = f.headingText(e)
	f.unitOf(e, x)
	return x
}

func (f *frame) columnContext(e *estimate, x *context) {
	var arms, others, times []string
	path := f.path(e.row, e.col)
	for i, l := range path {
		p := f.nameless(e, l, f.partOf(l))
		if f.lex.change(l.text) {
			x.change = true
		}
		if p.kind == partContrast && parseVs(p.name) == nil && f.armBelow(path[i+1:]) {
			continue // "Between groups" over the arms themselves
		}
		if f.comparesFor(e, l.text) && !f.armBelow(path[i+1:]) {
			x.contrast = true
		}
		if a := f.correctedFor(l.text); a != "" {
			x.contrast, x.arm2 = true, a
		}
		switch p.kind {
		case partTime:
			times = append(times, p.name)
			x.timeAt, x.timeFrom = l, f.columnName(e.col)
		case partContrast:
			x.contrast = true
			f.parseContrast(l, x)
			ts := f.lex.timesIn(noCovariates(againstTime.ReplaceAllString(l.text, " ")))
			if x.within && len(ts) > 1 {
				ts = ts[len(ts)-1:] // what lies between two times stands at the later one
			}
			if len(ts) > 0 {
				t := ts[0]
				times = append(times, t)
				x.timeAt, x.timeFrom = l, f.columnName(e.col)
			}
		case partArm, partOther:
			if f.general(p) {
				continue
			}
			if p.kind == partOther && (modelHead.MatchString(p.name) || analysisName.MatchString(p.name)) {
				x.aside = joinPath([]string{x.aside, p.name}, ", ")
				continue
			}
			if (f.armRows || f.outcomeCols) && len(times) > 0 && !hasLetter(p.name) {
				times[len(times)-1] += " " + p.name
				continue
			}
			if l.cell != nil && f.crossSub[l.cell.Row] || f.outcomeCols && f.subgroupLike(p.name) {
				x.aside = joinPath([]string{x.aside, f.rawName(l)}, ", ")
				continue
			}
			if t := f.lex.rowTime(p.name); t != "" && len(times) == 0 && f.outcomeCols {
				times = append(times, t)
				x.timeAt, x.timeFrom = l, f.columnName(e.col)
			}
			if f.armRows || f.outcomeCols {
				x.outcome = joinPath([]string{x.outcome, p.name}, ", ")
				x.outcomeAt, x.outcomeFrom = l, f.columnName(e.col)
				continue
			}
			name := p.name
			if strings.HasPrefix(l.text, "%") && !strings.HasPrefix(name, "%") {
				name = "% " + name // the share above a limit: "% ≥ 8"
			}
			if len(times) > 0 && p.kind == partOther && !hasLetter(name) && !strings.HasPrefix(name, "%") {
				times[len(times)-1] += " " + name // "Hours after treatment" over 24, 48, 72
				continue
			}
			if t := f.lex.timeIn(name); t != "" && p.kind == partOther {
				times = append(times, t)
				x.timeAt, x.timeFrom = l, f.columnName(e.col)
			}
			if p.kind == partOther && aroundTime.MatchString(name) {
				// "Vigour before feeding", "Vigour after feeding"
				times = append(times, name)
				x.timeAt, x.timeFrom = l, f.columnName(e.col)
				continue
			}
			if p.kind == partOther {
				others = append(others, name)
			}
			if p.measured != "" {
				x.measured = joinPath([]string{x.measured, p.measured}, ", ")
				x.outcomeAt, x.outcomeFrom = l, f.columnName(e.col)
			}
			arms = append(arms, name)
			x.armAt = l
		}
	}
	if x.contrast && x.arm2 == "" && len(arms) > 0 && f.differsWithin(path) {
		x.contrast, x.change, x.within = false, true, true
	}
	if !x.contrast && len(arms) == 0 && f.colArms && f.columnStatistic(e) == "coefficient" && len(f.armNames()) == 2 {
		x.contrast = true // a model's coefficient beside the columns of two arms
	}
	if len(others) == len(arms) {
		others = f.measured(others)
	}
	if len(others) > 0 && len(others) < len(arms) && f.spannedBy(path) {
		arms = others
	} else if len(others) > 0 && len(others) < len(arms) {
		// One heading is an arm by name: the others say what it is about.
		arms = without(arms, others)
		for _, o := range others {
			if len(f.measured([]string{o})) > 0 {
				x.measured = joinPath([]string{x.measured, o}, ", ")
				x.outcomeAt, x.outcomeFrom = path[len(path)-1], f.columnName(e.col)
				continue
			}
			x.aside = joinPath([]string{x.aside, o}, ", ")
		}
	}
	if !f.colArms && !x.contrast && len(arms) > 0 {
		x.outcome = joinPath(append([]string{x.outcome}, arms...), ", ")
		x.outcomeAt, x.outcomeFrom = x.armAt, f.columnName(e.col)
	}
	if f.colArms {
		if !x.contrast || x.arm == "" {
			x.arm = joinPath(arms, ", ")
		}
		x.armFrom = f.columnName(e.col)
	}
	for len(times) > 1 && generalTime[fold(times[0])] {
		times = times[1:]
	}
	x.time = joinPath(times, ", ")
}

// measured gives those of several headings over a column that carry a unit: they
// say what was measured in the arm that the rest names.
func (f *frame) measured(names []string) []string {
	var out []string
	for _, n := range names {
		if f.lex.unit(n) != "" && !doseName.MatchString(n) && !f.subgroupLike(n) || strings.HasPrefix(n, "%") {
			out = append(out, n)
		}
	}
	return out
}

func (f *frame) rowContext(e *estimate, x *context) {
	ln := &f.lines[e.row]
	var outcome, subs []string
	named := false // some label names an arm by its words
	for _, l := range ln.labels {
		named = named || f.isArm(fold(f.lex.name(l.text)))
	}
	take := func(l label, own bool) {
		p := f.nameless(e, l, f.rowPart(l))
		if m := overOne.FindStringSubmatch(l.text); m != nil && controls.MatchString(m[1]) || own && f.comparesFor(e, l.text) {
			x.contrast = true
		}
		if f.lex.change(l.text) {
			x.change = true
		}
		if p.kind == partArm && named && !f.isArm(fold(p.name)) {
			p.kind = partOther // "Mass (N = 133)" before the arms
		}
		switch {
		case analysisName.MatchString(p.name):
			subs = append(subs, p.name)
		case own && f.conditionRow(l):
			subs = append(subs, f.rawName(l))
		case p.kind == partTime:
			if own {
				x.time = joinPath([]string{x.time, f.changeUnder(e.row)}, ", ")
			}
			x.time = joinPath([]string{x.time, p.name}, ", ")
			x.timeAt, x.timeFrom = l, "row label"
		case p.kind == partContrast && parseVs(p.name) != nil:
			x.contrast = true
			f.parseContrast(l, x)
			if rest := strings.Trim(beforeFor(p.name), edge); rest != "" {
				outcome = append(outcome, rest)
			}
		case p.kind == partContrast:
			x.contrast = x.contrast || !f.colArms || strings.Contains(fold(p.name), "between") || strings.Contains(fold(p.name), "treatment difference")
			if t := f.lex.rowTime(p.name); t != "" && x.time == "" {
				x.time, x.timeAt, x.timeFrom = t, l, "row label"
			}
			if own || !saysNothing(p.name) {
				outcome = append(outcome, p.name)
			}
		case p.kind == partArm && (f.armRows || !f.colArms) && !f.modelCols:
			if m := armBehind.FindStringSubmatch(p.name); m != nil {
				outcome = append(outcome, clean(m[1]))
				x.outcomeAt, x.outcomeFrom = l, "row label"
				p.name = clean(m[2])
			}
			x.arm = joinPath([]string{x.arm, p.name}, ", ")
			x.armAt, x.armFrom = l, "row label"
		case p.kind == partArm && own && len(ln.groups) > 0 && nPhrase.MatchString(l.text):
			subs = append(subs, p.name)
			outcome = append(outcome, p.name)
		case p.kind == partEmpty:
		default:
			switch {
			case own && (f.partOfScale(e.row, p.name) || f.modelCols || f.isArm(fold(x.arm)) && f.category(e)):
			case own && f.subgroupLike(p.name):
				if n := len(ln.groups); n > 0 && len(ln.labels) == 1 {
					for _, g := range f.lines[ln.groups[n-1]].labels {
						if f.lex.unit(g.text) == "" && !f.colArms {
							subs = append(subs, f.lex.name(g.text))
						}
					}
				} else if len(ln.labels) > 1 && f.lex.unit(ln.labels[0].text) == "" && !f.colArms {
					subs = append(subs, f.lex.name(ln.labels[0].text))
				}
				subs = append(subs, p.name)
			case own && len(ln.groups) > 0 && nPhrase.MatchString(l.text):
				subs = append(subs, p.name)
			case !own && f.outerSub:
				subs = append(subs, p.name)
			}
			outcome = append(outcome, p.name)
			t := f.lex.rowTime(p.name)
			if t == "" {
				t = f.phaseInBracket(p.name)
			}
			if t == "" && own {
				if stem, phase, ok := f.phasedRow(p.name); ok {
					t, outcome[len(outcome)-1] = phase, stem
				}
			}
			if strings.Contains(fold(t), "baseline") && f.predicts(e) {
				t = "" // when a predictor was measured is not when the outcome was
			}
			if t != "" && x.time == "" {
				x.time, x.timeAt, x.timeFrom = t, l, "row label"
			}
			x.outcomeAt, x.outcomeFrom = l, "row label"
		}
	}
	if l, ok := f.firstAnalysis(e.row); ok {
		subs = append(subs, f.lex.name(l.text))
	}
	for _, g := range ln.groups {
		for _, l := range f.lines[g].labels {
			if !f.onlyCounts(l) || len(ln.labels) == 0 || f.furtherIn(e.row, g) || f.subgroupLike(f.lex.name(ln.labels[len(ln.labels)-1].text)) {
				take(l, false)
			}
		}
	}
	for _, l := range ln.labels {
		if e.stacked > 1 && l.cell != nil {
			if parts := strings.Split(l.cell.Text.S, "\n"); len(parts) == e.stacked {
				l.text = clean(parts[e.ordinal])
			}
		}
		take(l, true)
	}
	if x.measured != "" {
		outcome = append([]string{x.measured}, outcome...)
	}
	if len(outcome) > 0 {
		if x.outcome == "" {
			x.outcome = joinPath(outcome, ", ")
		} else {
			x.outcome = joinPath([]string{joinPath(outcome, ", "), x.outcome}, ", ")
		}
	}
	if x.aside != "" && x.outcome == "" {
		x.outcome = x.aside
	} else if x.aside != "" {
		subs = append([]string{x.aside}, subs...)
	}
	x.subgroup = joinPath(subs, ", ")
}

var covariates = pattern.MustCompile(`(?i)\b(?:adjust(?:ed|ing|ment)|controll(?:ed|ing)|correct(?:ed|ing)|accounting) for (?:the )?[^;:)\]]*`)

// noCovariates takes out of a heading what its estimates are adjusted for:
// "Effect adjusted for baseline" says no time.
func noCovariates(s string) string {
	if !strings.Contains(s, "for") {
		return s
	}
	return covariates.ReplaceAllString(s, " ")
}

// modelHead is a heading over the estimates of one analysis, which names no arm.
var modelHead = pattern.MustCompile(`(?i)^(?:(?:un|non-?)?adjusted |crude )?(?:uni|bi|multi)(?:ple |-)?varia(?:te|ble)\b|^(?:(?:un)?adjusted |crude )?(?:models?|analys[ei]s)(?: [a-z\d])?$|^(?:(?:logistic|linear|cox|poisson|multiple|ordinal|proportional|hazards?)[ -])+regression(?: analys[ei]s| models?)?$|^(?:per[- ]protocol|intention[- ]to[- ]treat)(?: analysis)?$`)

// armBehind is a row label that names the arm in brackets behind what was
// measured: "Colony mass (syrup group)".
var armBehind = pattern.MustCompile(`(?i)^([^()]*[a-z][^()]*)[(]([^()]+? (?:groups?|arms?))[)]$`)

// fromBaseline says what a change is measured from, not when.
var fromBaseline = pattern.MustCompile(`(?i)\b(?:changes?|reductions?|decreases?|increases?|improvements?|differences?)(?: scores?)? (?:from|since|vs\.?|versus|relative to|compared (?:with|to)) (?:the )?baseline\b`)

// furtherIn reports that the label of row r is printed further in than that of
// its group g.
func (f *frame) furtherIn(r, g int) bool {
	a, b := f.grid[r][0], f.grid[g][0]
	return a != nil && b != nil && a.Indent > b.Indent
}

// onlyCounts reports a group label over counts, "Colour, n (%)": a row with a
// spread that follows its rows is no longer under it.
func (f *frame) onlyCounts(l label) bool {
	counts := false
	for _, q := range f.lex.phrase(l.text).pairs {
		if q.Spread != "" {
			return false
		}
		counts = counts || q.Count && q.Percent
	}
	return counts
}

// captionContext fills in from the caption what rows and columns leave open.
func (f *frame) captionContext(e *estimate, x *context) {
	capt := f.tab.Caption.S
	l := label{text: clean(capt), raw: clean(capt)}
	if x.time == "" {
		switch ts := f.lex.timesIn(fromBaseline.ReplaceAllString(capt, " change ")); {
		case len(ts) == 1 && strings.Contains(fold(ts[0]), " and "):
		case len(ts) == 1:
			x.time, x.timeAt, x.timeFrom, x.timeGuess = ts[0], l, "caption", true
		case baselineCaption.MatchString(fromBaseline.ReplaceAllString(capt, " change ")) && len(ts) == 0:
			x.time, x.timeAt, x.timeFrom, x.timeGuess = "baseline", l, "caption", true
		}
	}
	if x.arm == "" && !x.contrast {
		if m := captionArm.FindStringSubmatch(clean(capt)); m != nil {
			x.arm, x.armAt, x.armFrom, x.armGuess = m[1], l, "caption", true
		}
	}
	if x.outcome == "" {
		x.outcome, x.outcomeAt, x.outcomeFrom, x.outcomeGuess = shorten(captionOutcome(capt), 160), l, "caption", true
	}
	switch low := fold(capt); {
	case scoreCaption.MatchString(low):
		x.change, x.changeAll = true, true
	case changeCaption.MatchString(low) && !f.someChange() && !f.someTime():
		x.change = true
	}
}

// headingText joins the headings as printed, without the marks that lead to
// notes, columns first.
func (f *frame) headingText(e *estimate) string {
	var parts []string
	for _, l := range f.path(e.row, e.col) {
		parts = append(parts, l.text)
	}
	ln := &f.lines[e.row]
	for _, g := range ln.groups {
		for _, l := range f.lines[g].labels {
			parts = append(parts, l.text)
		}
	}
	for _, l := range ln.labels {
		parts = append(parts, l.text)
	}
	return joinPath(parts, " | ")
}

// columnName names column c for a reader: "heading of column 3".
func (f *frame) columnName(c int) string { return fmt.Sprintf("heading of column %d", c+1) }

// placeOf gives where a label stands.
func placeOf(l label) paper.Place {
	if l.cell == nil {
		return paper.Place{}
	}
	return l.cell.Text.Between(0, len(l.cell.Text.S))
}
