package table

import (
	"fmt"
	"halfspan/extract/pattern"
	"strconv"
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
	aside                                             string // what headings beside the arm's say
	changeAll                                         bool   // the caption says that the table prints changes
	timeGuess                                         bool   // the time rests on the caption
	armGuess                                          bool
	outcomeGuess                                      bool
}

// kind of a part of a heading.
type partKind uint8

const (
	partEmpty partKind = iota
	partTime
	partArm
	partContrast
	partOther
)

// part is one heading or label with what it is taken for.
type part struct {
	l    label
	name string // without n, statistics and marks
	kind partKind
}

var armWord = pattern.MustCompile(`(?i)\b(?:placebo|controls?|sham|usual care|standard (?:care|treatment|therapy)|intervention|treatment|experimental|vehicle|wait(?:ing)?[- ]?list|arms?|groups?|comparator|active|exposed|unexposed|treated|untreated|cases)\b`)

// partOf classifies one heading or label.
func (f *frame) partOf(l label) part {
	p := part{l: l, name: nameOf(l.text)}
	low := fold(p.name)
	switch {
	case low == "" && isContrast(fold(l.text)):
		p.kind = partContrast
	case low == "":
		p.kind = partEmpty
		if isTimeHeading(fold(l.text)) {
			p.kind, p.name = partTime, tidyTime(l.text)
		}
	case isUnit(p.name) && len(p.name) > 1 && !strings.Contains(p.name, " "):
		p.kind, p.name = partEmpty, "" // a unit alone names no group
	case isPHeading(low) || isCountHeading(low) && !nPhrase.MatchString(l.text) && !f.overValues(l):
		p.kind, p.name = partEmpty, ""
	case isContrast(low) || compares(l.text) && !f.isArm(low):
		p.kind = partContrast
	case isTimeHeading(low):
		p.kind, p.name = partTime, tidyTime(l.text)
	case f.isArm(low) || nPhrase.MatchString(l.text) && hasArmShape(l.text):
		p.kind = partArm
	case l.cell != nil && l.cell.Row < f.head && l.cell.Col >= f.stub && f.timeRow[l.cell.Row]:
		p.kind, p.name = partTime, tidyTime(l.text)
	case l.cell != nil && l.cell.Row < f.head && l.cell.Col >= f.stub && f.armRow[l.cell.Row]:
		p.kind = partArm // beside a heading that names an arm
	default:
		p.kind = partOther
	}
	return p
}

// findArmRows marks the heading rows in which some heading names an arm by its
// words: its neighbours then name arms too.
func (f *frame) findArmRows() {
	rows := map[int]bool{}
	for i := range f.tab.Cells {
		c := &f.tab.Cells[i]
		if c.Row >= f.head || c.Col < f.stub || isBlankText(c.Text.S) {
			continue
		}
		if p := f.partOf(f.label(c)); p.kind == partArm && f.isArm(fold(p.name)) {
			rows[c.Row] = true
		}
	}
	f.armRow = rows
	f.timeRow = map[int]bool{}
	for r := 0; r < f.head; r++ {
		times, all := 0, 0
		for c := f.stub; c < f.tab.Cols; c++ {
			cell := f.cellAt(r, c)
			if cell == nil || isBlankText(cell.Text.S) {
				continue
			}
			switch f.partOf(f.label(cell)).kind {
			case partTime:
				times++
				all++
			case partOther, partArm:
				all++
			}
		}
		f.timeRow[r] = times >= 2 && 2*times >= all && !rows[r]
	}
}

// rowPart classifies a label before a row: there an n does not make an arm, and
// a time stands without other words.
func (f *frame) rowPart(l label) part {
	p := f.partOf(l)
	low := fold(p.name)
	switch {
	case p.kind == partArm && !f.isArm(low):
		if !f.armRows {
			p.kind = partOther
		}
	case p.kind == partTime && !bareTime(low):
		p.kind, p.name = partOther, nameOf(l.text)
	}
	return p
}

// overValues reports that estimates with spreads stand under a heading, so that
// "Men" names a group and no number of men.
func (f *frame) overValues(l label) bool {
	if l.cell == nil || l.cell.Row >= f.head {
		return false
	}
	for c := max(l.cell.Col, f.stub); c < min(l.cell.Col+l.cell.ColSpan, f.tab.Cols); c++ {
		if f.anySpread(c) {
			return true
		}
	}
	return false
}

// hasArmShape keeps "All (n = 57)" apart: names with an n are arms.
func hasArmShape(s string) bool { return len(s) < 120 }

var (
	spaceBracket = pattern.MustCompile(`\(\s*\)|\[\s*\]`)
	loneMark     = pattern.MustCompile(`\s*[,;:]\s*(?:[,;:]\s*)*([)\]])`)
	edge         = " ,;:-–—/.±"
)

// nameOf takes n's, statistics and levels out of a heading: what it names.
func nameOf(s string) string {
	t := stripTerms(clean(s))
	t = worded.ReplaceAllString(t, " ")
	for k := 0; k < 3; k++ {
		t = spaceBracket.ReplaceAllString(t, " ")
	}
	t = strings.ReplaceAll(t, "±", " ")
	t = loneMark.ReplaceAllString(t, "$1")
	t = spaceBracket.ReplaceAllString(t, " ")
	t = clean(t)
	t = strings.ReplaceAll(strings.ReplaceAll(t, " )", ")"), "( ", "(")
	t = strings.Trim(t, edge)
	t = unbalanced(t)
	if !hasLetter(t) && !hasDigit(t) {
		return ""
	}
	ws := words(t)
	left := 0
	for _, w := range ws {
		if !statFiller[w] {
			left++
		}
	}
	if left == 0 {
		return ""
	}
	return t
}

var statFiller = map[string]bool{"value": true, "values": true, "adj": true, "adjusted": true, "unadjusted": true, "crude": true, "estimate": true,
	"estimates": true, "est": true, "of": true, "the": true, "and": true, "or": true, "in": true, "for": true, "as": true, "dif": true, "diff": true,
	"statistic": true, "statistics": true, "a": true, "b": true, "m": true, "min": true, "max": true, "std": true, "error": true, "score": true, "scores": true, "result": true, "results": true, "to": true,
	"unless": true, "otherwise": true, "stated": true, "data": true, "are": true, "is": true, "estimated": true, "observed": true, "multivariate": true, "univariate": true,
	"multivariable": true, "univariable": true, "model": true, "mean": true, "means": true, "median": true, "medians": true}

// unbalanced drops a bracket that lost its partner when terms were taken out.
func unbalanced(s string) string {
	for _, pr := range [][2]string{{"(", ")"}, {"[", "]"}} {
		o, c := strings.Count(s, pr[0]), strings.Count(s, pr[1])
		if o > c && strings.HasSuffix(s, pr[0]) {
			s = strings.TrimSuffix(s, pr[0])
		}
		if c > o && strings.HasSuffix(s, pr[1]) {
			s = strings.TrimSuffix(s, pr[1])
		} else if o > c {
			if k := strings.LastIndex(s, pr[0]); k > 0 && len(s)-k < 4 {
				s = s[:k]
			}
		}
	}
	return strings.Trim(s, edge)
}

var contrastWord = pattern.MustCompile(`(?i)\bdiff(?:erences?|s)?\b|\btreatment effects?\b|\beffect of\b|\bvs\.?\b|\bversus\b|\bcompared (?:with|to)\b|\bbetween[- ]groups?\b|\best\.? of (?:the )?effect\b|\bestimates? of (?:the )?(?:treatment )?effect\b|\beffect estimates?\b|\bminus\b`)

func isContrast(low string) bool { return contrastWord.MatchString(low) }

// isArm reports that the folded name is an arm by its words or because a table
// of the paper gives it an n.
func (f *frame) isArm(low string) bool {
	if f.rowArms[low] || f.vocab.arms[low] || f.vocab.arms[armWords(low)] {
		return true
	}
	return armWord.MatchString(low) && len(words(low)) <= 6 && unitIn(low) == "" && !outcomeWord.MatchString(low)
}

var outcomeWord = pattern.MustCompile(`(?i)\b(?:rate|score|duration|time|days|number|level|index|satisfaction|success|failure|adherence|compliance|cost|response|locus|pain|symptom|sessions?|received|effect)\b`)

// axes settles which of rows and columns name the arms.
func (f *frame) findAxes() {
	f.findArmRows()
	arms, rows := 0, 0
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind != lineData || len(ln.labels) == 0 || f.rowRole(r).kind == roleP {
			continue
		}
		rows++
		if f.namesArm(r) {
			arms++
		}
	}
	stubArm := false
	for c := 0; c < f.stub; c++ {
		for _, l := range f.heads[c] {
			switch strings.Trim(fold(l.text), " s:") {
			case "group", "treatment group", "treatment", "arm", "study arm", "study group", "intervention", "allocation", "regimen", "treatment arm":
				stubArm = true
			}
		}
	}
	colArm := false
	for c := f.stub; c < f.tab.Cols; c++ {
		for _, l := range f.heads[c] {
			if f.partOf(l).kind == partArm {
				colArm = true
			}
		}
	}
	if 2*arms < rows {
		if n := f.repeatedLabels(); !colArm {
			arms = n
		}
	}
	f.armRows = rows > 0 && (2*arms >= rows || stubArm && !colArm)
	if colArm && f.armRows && 10*arms < 8*rows {
		f.armRows = false
	}
	f.outcomeCols = !colArm && !f.armRows && (rows > 0 && 5*f.timeRows() >= 4*rows || f.unitColumns())
	if f.outcomeCols {
		if 5*f.timeRows() < 4*rows {
			f.nameRows()
			f.armRows = len(f.rowArms) > 0
		}
		return
	}
	f.colArms = !f.armRows && (colArm || f.namedColumns() >= 2)
}

// timeRows counts the data rows that a time labels and nothing else.
func (f *frame) timeRows() int {
	n := 0
	for r := f.head; r < f.tab.Rows; r++ {
		if ln := &f.lines[r]; ln.kind == lineData && len(ln.labels) == 1 && f.rowPart(ln.labels[0]).kind == partTime {
			n++
		}
	}
	return n
}

// unitColumns reports that the data columns are headed by outcomes: most names
// over them carry a unit, and the row labels carry none.
func (f *frame) unitColumns() bool {
	with, all := 0, 0
	for c := f.stub; c < f.tab.Cols; c++ {
		if f.pColumn(c) {
			continue
		}
		for _, l := range f.heads[c] {
			if f.partOf(l).kind == partOther {
				all++
				if u := unitIn(l.text); u != "" && u != "%" || strings.Contains(l.text, "(%)") {
					with++
				}
			}
		}
	}
	if all < 2 || 5*with < 3*all {
		return false
	}
	for r := f.head; r < f.tab.Rows; r++ {
		for _, l := range f.lines[r].labels {
			if unitIn(l.text) != "" {
				return false
			}
		}
	}
	return true
}

// nameRows takes the innermost labels of the data rows for arms.
func (f *frame) nameRows() {
	f.rowArms = map[string]bool{}
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind != lineData || len(ln.labels) == 0 {
			continue
		}
		p := f.partOf(ln.labels[len(ln.labels)-1])
		if p.kind == partOther && !subgroupName.MatchString(p.name) && f.rowRole(r).kind == roleNone {
			f.rowArms[fold(p.name)] = true
		}
	}
}

// repeatedLabels finds arms by repetition: the same few names in every block,
// that are no times, statistics or categories. It returns the rows they label.
func (f *frame) repeatedLabels() int {
	blocks := map[string]map[string]bool{}
	rows := map[string]int{}
	var order []string
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind != lineData || len(ln.labels) == 0 {
			continue
		}
		outer := ""
		if len(ln.labels) > 1 {
			outer = ln.labels[0].text
		} else if len(ln.groups) > 0 {
			outer = strconv.Itoa(ln.groups[len(ln.groups)-1])
		} else {
			continue
		}
		l := ln.labels[len(ln.labels)-1]
		p := f.partOf(l)
		low := fold(p.name)
		if p.kind == partTime || p.kind == partEmpty || p.kind == partContrast || subgroupName.MatchString(low) || f.rowRole(r).kind != roleNone || unitIn(l.text) != "" {
			continue
		}
		if blocks[low] == nil {
			blocks[low] = map[string]bool{}
			order = append(order, low)
		}
		blocks[low][outer] = true
		rows[low]++
	}
	n := 0
	var names []string
	for _, name := range order {
		if len(blocks[name]) >= 2 {
			n += rows[name]
			names = append(names, name)
		}
	}
	if len(names) < 2 || f.outerArms() {
		return 0
	}
	outers := map[string]bool{}
	for _, name := range names {
		for o := range blocks[name] {
			outers[o] = true // only counted
		}
	}
	if len(outers) <= 4 && len(outers) < len(names) {
		f.outerSub = true // the blocks are analyses or subgroups of the same outcomes
		return 0
	}
	if len(names) > 5 || f.comparing() {
		return 0
	}
	f.rowArms = map[string]bool{}
	for _, name := range names {
		f.rowArms[name] = true
	}
	return n
}

// comparing reports that a column holds comparisons between arms.
func (f *frame) comparing() bool {
	for c := f.stub; c < f.tab.Cols; c++ {
		for _, l := range f.heads[c] {
			if compares(l.text) {
				return true
			}
		}
	}
	return false
}

// outerArms reports that the group labels name arms, so that the rows under
// them do not.
func (f *frame) outerArms() bool {
	arms, all := 0, 0
	for r := f.head; r < f.tab.Rows; r++ {
		ln := &f.lines[r]
		if ln.kind == lineGroup && len(ln.labels) > 0 {
			all++
			if f.isArm(fold(nameOf(ln.labels[0].text))) {
				arms++
			}
		}
	}
	return all > 0 && 2*arms >= all
}

// namesArm reports that the innermost label of row r names an arm: by its words,
// or by an n where no row beside it is for all arms together.
func (f *frame) namesArm(r int) bool {
	ln := &f.lines[r]
	l := ln.labels[len(ln.labels)-1]
	p := f.partOf(l)
	if p.kind != partArm {
		return false
	}
	if f.isArm(fold(p.name)) {
		return true
	}
	for q := f.head; q < f.tab.Rows; q++ {
		o := &f.lines[q]
		if o.kind == lineData && len(o.labels) > 0 && len(o.groups) == len(ln.groups) && prefix(o.groups, ln.groups) && totals[fold(nameOf(o.labels[len(o.labels)-1].text))] {
			return false
		}
	}
	return len(ln.groups) > 0 || len(ln.labels) > 1
}

// namedColumns counts the different names over data columns that are neither
// times nor contrasts.
func (f *frame) namedColumns() int {
	seen := map[string]bool{}
	for c := f.stub; c < f.tab.Cols; c++ {
		if f.pColumn(c) {
			continue
		}
		for _, l := range f.heads[c] {
			if p := f.partOf(l); p.kind == partOther || p.kind == partArm {
				seen[fold(p.name)] = true
			}
		}
	}
	return len(seen)
}

// armsInColumns reports that column headings name the arms.
func (f *frame) armsInColumns() bool { return f.colArms }

// otherArms gives the folded names of the table's arms other than arm.
func (f *frame) otherArms(arm string) []string {
	var out []string
	for _, a := range f.armNames() {
		if w := armWords(a); w != armWords(arm) {
			out = append(out, w)
		}
	}
	return out
}

// armNames gives the names of the arms in the order of print.
func (f *frame) armNames() []string {
	if f.armList != nil {
		return f.armList
	}
	seen := map[string]bool{}
	out := []string{}
	add := func(name string) {
		k := armWords(name)
		if k != "" && !seen[k] {
			seen[k] = true
			out = append(out, name)
		}
	}
	if f.colArms {
		for c := f.stub; c < f.tab.Cols; c++ {
			if name := f.armOfColumn(f.head, c); name != "" && !f.pColumn(c) {
				add(name)
			}
		}
	}
	if f.armRows {
		for r := f.head; r < f.tab.Rows; r++ {
			if ln := &f.lines[r]; ln.kind == lineData && len(ln.labels) > 0 {
				if p := f.partOf(ln.labels[len(ln.labels)-1]); p.kind == partArm {
					add(p.name)
				}
			}
		}
	}
	f.armList = out
	return out
}

var generic = map[string]bool{"treatment group": true, "treatment groups": true, "study group": true, "study groups": true, "group": true, "groups": true, "treatment": true,
	"between groups": true, "group assignment": true, "treatment arm": true, "arm": true, "arms": true, "study arm": true, "intervention groups": true, "randomised group": true, "randomized group": true, "allocation": true, "treatment allocation": true, "treatments": true}

// general reports a heading over several columns that only says that arms
// stand below it.
func (f *frame) general(p part) bool {
	return generic[fold(p.name)] && (p.l.cell == nil || p.l.cell.ColSpan > 1 || p.l.cell.Col < f.stub)
}

// armOfColumn joins the headings over a column that name its arm.
func (f *frame) armOfColumn(r, c int) string {
	var names, known []string
	for _, l := range f.path(r, c) {
		p := f.partOf(l)
		if p.kind == partArm || p.kind == partOther {
			if f.general(p) {
				continue
			}
			names = append(names, p.name)
			if p.kind == partArm {
				known = append(known, p.name)
			}
		}
		if p.kind == partContrast {
			return ""
		}
	}
	if len(known) > 0 {
		names = known
	}
	return joinPath(names, ", ")
}

// contextOf finds whom and what an estimate is about.
func (f *frame) contextOf(e *estimate) *context {
	x := &context{}
	f.columnContext(e, x)
	f.rowContext(e, x)
	f.captionContext(e, x)
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
		p := f.partOf(l)
		if changeMark.MatchString(fold(l.text)) {
			x.change = true
		}
		if p.kind == partContrast && parseVs(p.name) == nil && f.armBelow(path[i+1:]) {
			continue // "Between groups" over the arms themselves
		}
		if compares(l.text) && !f.armBelow(path[i+1:]) {
			x.contrast = true
		}
		switch p.kind {
		case partTime:
			times = append(times, p.name)
			x.timeAt, x.timeFrom = l, f.columnName(e.col)
		case partContrast:
			x.contrast = true
			f.parseContrast(l, x)
			if t := timeIn(l.text); t != "" {
				times = append(times, t)
				x.timeAt, x.timeFrom = l, f.columnName(e.col)
			}
		case partArm, partOther:
			if f.general(p) {
				continue
			}
			if (f.armRows || f.outcomeCols) && len(times) > 0 && !hasLetter(p.name) {
				times[len(times)-1] += " " + p.name
				continue
			}
			if f.armRows || f.outcomeCols {
				x.outcome = joinPath([]string{x.outcome, p.name}, ", ")
				x.outcomeAt, x.outcomeFrom = l, f.columnName(e.col)
				continue
			}
			name := p.name
			if len(times) > 0 && p.kind == partOther && !hasLetter(name) {
				times[len(times)-1] += " " + name // "Hours after treatment" over 24, 48, 72
				continue
			}
			if t := timeIn(name); t != "" && p.kind == partOther {
				times = append(times, t)
				x.timeAt, x.timeFrom = l, f.columnName(e.col)
			}
			if p.kind == partOther {
				others = append(others, name)
			}
			arms = append(arms, name)
			x.armAt = l
		}
	}
	if !x.contrast && len(arms) == 0 && f.colArms && f.columnStatistic(e) == "coefficient" && len(f.armNames()) == 2 {
		x.contrast = true // a model's coefficient beside the columns of two arms
	}
	if len(others) > 0 && len(others) < len(arms) && f.spannedBy(path) {
		arms = others
	} else if len(others) > 0 && len(others) < len(arms) {
		// One heading is an arm by name: the others say what it is about.
		arms = without(arms, others)
		x.aside = joinPath(others, ", ")
	}
	if f.colArms || len(arms) > 0 && !f.armRows && !f.outcomeCols {
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

// generalTime are headings over times that name none.
var generalTime = map[string]bool{"time": true, "times": true, "time point": true, "time points": true, "timepoint": true, "timepoints": true, "stage": true, "stages": true,
	"visit": true, "visits": true, "period": true, "periods": true, "phase": true, "assessment": true, "assessments": true, "assessment period": true, "measurement": true, "measurements": true}

var onlyArmWord = pattern.MustCompile(`(?i)^(?:the )?(?:interventions?|treatments?|groups?|arms?|study groups?|regimens?|conditions?)$`)

// spannedBy reports that the arm's heading is a general word over columns with
// names of their own: "Intervention" over three regimens.
func (f *frame) spannedBy(path []label) bool {
	for _, l := range path {
		if onlyArmWord.MatchString(nameOf(l.text)) && l.cell != nil && l.cell.ColSpan > 1 {
			return true
		}
	}
	return false
}

// columnStatistic gives the statistic that the estimate's column announces.
func (f *frame) columnStatistic(e *estimate) string {
	for _, q := range f.columnRole(e.row, e.col).pairs {
		if q.Statistic != "" {
			return q.Statistic
		}
	}
	return ""
}

func without(all, taken []string) []string {
	drop := map[string]bool{}
	for _, t := range taken {
		drop[t] = true
	}
	var out []string
	for _, a := range all {
		if !drop[a] {
			out = append(out, a)
		}
	}
	return out
}

// armBelow reports that one of the headings names an arm.
func (f *frame) armBelow(path []label) bool {
	for _, l := range path {
		if k := f.partOf(l).kind; k == partArm || k == partOther {
			return true
		}
	}
	return false
}

// compares reports that a heading announces a statistic between arms.
func compares(s string) bool {
	p := readPhrase(s)
	for _, q := range p.pairs {
		switch q.Statistic {
		case "ratio":
			if q.Measure != "" || p.onlyTerms {
				return true // else it may be what was measured: the E/A ratio
			}
		case "mean difference", "risk difference":
			return true
		}
	}
	return false
}

func (f *frame) rowContext(e *estimate, x *context) {
	ln := &f.lines[e.row]
	var outcome, subs []string
	take := func(l label, own bool) {
		p := f.rowPart(l)
		if m := overOne.FindStringSubmatch(l.text); m != nil && controls.MatchString(m[1]) || own && compares(l.text) {
			x.contrast = true
		}
		if changeMark.MatchString(fold(l.text)) {
			x.change = true
		}
		switch {
		case p.kind == partTime:
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
			outcome = append(outcome, p.name)
		case p.kind == partArm && (f.armRows || !f.colArms):
			x.arm = joinPath([]string{x.arm, p.name}, ", ")
			x.armAt, x.armFrom = l, "row label"
		case p.kind == partArm && own && len(ln.groups) > 0 && nPhrase.MatchString(l.text):
			subs = append(subs, p.name)
			outcome = append(outcome, p.name)
		case p.kind == partEmpty:
		default:
			switch {
			case own && f.subgroupLike(p.name):
				if n := len(ln.groups); n > 0 && len(ln.labels) == 1 {
					for _, g := range f.lines[ln.groups[n-1]].labels {
						if unitIn(g.text) == "" && !f.colArms {
							subs = append(subs, nameOf(g.text))
						}
					}
				} else if len(ln.labels) > 1 && unitIn(ln.labels[0].text) == "" && !f.colArms {
					subs = append(subs, nameOf(ln.labels[0].text))
				}
				subs = append(subs, p.name)
			case own && len(ln.groups) > 0 && nPhrase.MatchString(l.text):
				subs = append(subs, p.name)
			case !own && f.outerSub:
				subs = append(subs, p.name)
			}
			outcome = append(outcome, p.name)
			if t := rowTime(p.name); t != "" && x.time == "" {
				x.time, x.timeAt, x.timeFrom = t, l, "row label"
			}
			x.outcomeAt, x.outcomeFrom = l, "row label"
		}
	}
	for _, g := range ln.groups {
		for _, l := range f.lines[g].labels {
			take(l, false)
		}
	}
	for _, l := range ln.labels {
		take(l, true)
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

var subgroupName = pattern.MustCompile(`(?i)^(?:all|total|overall|males?|females?|men|women|boys?|girls?|yes|no|low|medium|moderate|high|easy|difficult|insufficient|good|poor|normal|overweight|obese|underweight|single|married|present|absent|combined|[<>≤≥]?\s*\d+(?:\.\d+)?\s*(?:[-–]\s*\d+(?:\.\d+)?)?(?:\s*(?:years?|yrs?|y))?(?:\s*or (?:more|less|older|younger))?)$`)

func (f *frame) subgroupLike(name string) bool { return subgroupName.MatchString(name) }

var baselineCaption = pattern.MustCompile(`(?i)\bbaseline\b|\bdemographics?\b|\bcharacteristics of\b|\b(?:patient|participant|subject|clinical|sociodemographic|demographic|general)s?['’]? characteristics\b`)

// captionContext fills in from the caption what rows and columns leave open.
func (f *frame) captionContext(e *estimate, x *context) {
	capt := f.tab.Caption.S
	l := label{text: clean(capt), raw: clean(capt)}
	if x.time == "" {
		switch ts := timesIn(capt); {
		case len(ts) == 1 && strings.Contains(fold(ts[0]), " and "):
		case len(ts) == 1:
			x.time, x.timeAt, x.timeFrom, x.timeGuess = ts[0], l, "caption", true
		case baselineCaption.MatchString(capt) && len(ts) == 0:
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
	case changeCaption.MatchString(low) && !f.someChange():
		x.change = true
	}
}

// someChange reports that a heading or label of the table speaks of changes, so
// that the rest prints values.
func (f *frame) someChange() bool {
	for c := f.stub; c < f.tab.Cols; c++ {
		for _, l := range f.heads[c] {
			if changeMark.MatchString(fold(l.text)) {
				return true
			}
		}
	}
	for r := f.head; r < f.tab.Rows; r++ {
		for _, l := range f.lines[r].labels {
			if changeMark.MatchString(fold(l.text)) {
				return true
			}
		}
	}
	return false
}

var (
	captionArm    = pattern.MustCompile(`(?i)\b(?:within|in) the ([A-Z][\w+/-]*(?:[ -][\w+/-]+){0,3}?)[- ](?:group|arm)\b`)
	changeCaption = pattern.MustCompile(`(?i)\bchanges? (?:in|of)\b`)
	scoreCaption  = pattern.MustCompile(`(?i)\bmeans?\s*(?:\((?:sd|se|sem|95% ci)\)|± ?(?:sd|sem?))\s*(?:changes?|reductions?)\b|\bmean changes?\b|\bchanges? (?:from|scores?)\b|\bchange scores?\b`)
)

func captionOutcome(s string) string {
	s = clean(s)
	if k := strings.Index(s, ". "); k > 20 {
		s = s[:k]
	}
	return nameOf(s)
}

// timeIn finds the time point named in a longer text, with a number in it or
// one of the fixed names.
func timeIn(s string) string {
	ts := timesIn(s)
	if len(ts) == 0 {
		return ""
	}
	return ts[0]
}

var pointInTime = pattern.MustCompile(`(?i)(?:\b(?:at|after|by|from|post)\s+(?:the )?(?:\d|one|two|three|four|five|six|seven|eight|nine|ten|twelve)|\b(?:weeks?|months?|days?|years?|hours?|visits?)\s+\d|\bbaseline\b|\bfollow-?up\b|\bend of\b|\b\d+[- ](?:weeks?|months?|days?|years?|hours?)[- ](?:follow|post|after))`)

// rowTime finds a time point in a row label that also names an outcome. A
// period that belongs to the outcome ("pain in the previous 7 days", "costs in
// 12 months") is none.
func rowTime(s string) string {
	if len(s) > 90 || !pointInTime.MatchString(s) {
		return ""
	}
	for _, t := range timesIn(s) {
		k := strings.Index(fold(s), fold(t))
		if k < 0 || recall.MatchString(fold(s)[:k]) {
			continue
		}
		return t
	}
	return ""
}

var recall = pattern.MustCompile(`(?:previous|last|past|prior|preceding|within|during the|per|in|first|every|over)\s*$`)

func timesIn(s string) []string {
	var out []string
	seen := map[string]bool{}
	text := clean(s)
	for _, at := range timeMark.FindAllStringIndex(text, -1) {
		m := text[at[0]:at[1]]
		if ageBefore.MatchString(text[:at[0]]) {
			continue
		}
		low := fold(m)
		if !hasDigit(low) {
			switch low {
			case "baseline", "screening", "follow-up", "followup", "discharge", "admission":
			default:
				if !strings.HasPrefix(low, "end of") && !strings.HasPrefix(low, "pre") && !strings.HasPrefix(low, "post") || len(low) < 6 {
					continue
				}
			}
		} else if !longUnit.MatchString(low) {
			continue
		}
		if !seen[low] {
			seen[low] = true
			out = append(out, strings.Trim(tidyTime(m), edge))
		}
	}
	return out
}

var ageBefore = pattern.MustCompile(`(?i)(?:\bage[ds]?(?: group)?[^.;,]{0,12}|[<>≤≥]\s*|\bolder than |\byounger than )$`)

var longUnit = pattern.MustCompile(`week|wk|month|mo\b|day|year|hour|visit|session|cycle|minute|\bmin\b|period|phase|wave|trimester|quarter`)

var leadTime = pattern.MustCompile(`(?i)^(?:at|after|by|from|in|within|until|on|for|to) (?:the )?`)

// tidyTime gives a time heading in one form: without statistics, n's and
// leading prepositions that vary.
func tidyTime(s string) string {
	t := nameOf(s)
	if t == "" {
		t = clean(s)
	}
	low := fold(t)
	for _, pre := range []string{"at ", "by ", "the "} {
		if strings.HasPrefix(low, pre) {
			t = t[len(pre):]
		}
	}
	return strings.Trim(t, edge)
}

// headingText joins the headings as printed, columns first.
func (f *frame) headingText(e *estimate) string {
	var parts []string
	for _, l := range f.path(e.row, e.col) {
		parts = append(parts, l.raw)
	}
	ln := &f.lines[e.row]
	for _, g := range ln.groups {
		for _, l := range f.lines[g].labels {
			parts = append(parts, l.raw)
		}
	}
	for _, l := range ln.labels {
		parts = append(parts, l.raw)
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
