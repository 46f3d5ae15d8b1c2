package table

import (
	"strconv"
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// armSize is the n that a table's heading gives an arm.
type armSize struct {
	name  string // armWords of the arm
	n     int
	table int
	l     label
}

// findArmSizes gathers the arms with an n in the headings of all tables.
func (b *binder) findArmSizes() {
	for i, f := range b.frames {
		if f == nil {
			continue
		}
		seen := map[string]bool{}
		for c := f.stub; c < f.tab.Cols; c++ {
			n, l, ok := f.headingN(f.tab.Rows, c)
			if !ok {
				n, l, ok = f.firstN(c)
			}
			if !ok {
				continue
			}
			name := armWords(f.armOfColumn(f.head, c))
			if name == "" {
				name = armWords(b.vocab.lex.name(l.text))
			}
			key := name + strconv.Itoa(n)
			if name == "" || seen[key] {
				continue
			}
			seen[key] = true
			b.arms = append(b.arms, armSize{name: name, n: n, table: i, l: l})
		}
	}
}

// ofSample is the caption of a table about the sample as a whole.
var ofSample = pattern.MustCompile(`(?i)\b(?:baseline|characteristics?|demographics?|descriptive)\b`)

// firstN reads the row of n's that opens a table of the sample with arms in its
// columns.
func (f *frame) firstN(c int) (int, label, bool) {
	if !f.colArms || f.armOfColumn(f.head, c) == "" || !ofSample.MatchString(f.tab.Caption.S) {
		return 0, label{}, false
	}
	for r := f.head; r < f.tab.Rows; r++ {
		switch ln := &f.lines[r]; {
		case ln.kind == lineNone:
		case ln.kind != lineData || len(ln.groups) > 0 || f.rowRole(r).kind != roleN:
			return 0, label{}, false
		default:
			s, ok := f.nCell(r, c)
			cell := f.grid[r][c]
			if !ok || cell == nil {
				return 0, label{}, false
			}
			return s.n, f.label(cell), true
		}
	}
	return 0, label{}, false
}

// size gives a result its n. An agreement or a coefficient for which nothing nearer
// gives one has that of the caption.
func (b *binder) size(r *result.Result, i int, f *frame, e *estimate, x *context) {
	b.ownSize(r, i, f, e, x)
	if r.N > 0 || r.Statistic != result.Coefficient && r.Statistic != result.Other || x.subgroup != "" {
		return
	}
	if s, ok := f.captionN(); ok {
		b.setN(r, s, f, x)
	}
}

// captionN is the only n of the caption.
func (f *frame) captionN() (size, bool) {
	return onlySize(&f.tab.Caption, result.NCaption, "caption")
}

// onlySize is the n of a text that gives one and no other; words name the text.
func onlySize(run *paper.TextRun, from, words string) (size, bool) {
	p := parsePhrase(textOf(run))
	if len(p.ns) != 1 {
		return size{}, false
	}
	n := number(p.ns[0].Value)
	return size{n: n, from: from, words: words, text: shorten(clean(run.S), 200), place: run.At(p.ns[0].Start)}, n > 0
}

// ownSize finds the n of a result in its own table, else by the arm's name in
// another table of the paper or in the text.
func (b *binder) ownSize(r *result.Result, i int, f *frame, e *estimate, x *context) {
	if x.contrast && x.arm2 != "" {
		b.contrastSize(r, i, f, e, x)
		return
	}
	if x.contrast && b.categorySize(r, f, e, x) {
		return
	}
	s, ok := f.nearSize(e, x)
	if ok && s.from == result.NHeading && f.baselineN(b) && !atBaseline(x) {
		r.Raise(FlagNBaseline, "the n of the heading is that at baseline: "+s.text)
		return
	}
	if ok && s.shared && f.colArms {
		// One column of n's beside several arms: of all of them together, unless
		// every arm has the same subjects.
		if o, known := b.otherSize(i, x.arm); known && 4*s.n > 5*o.n {
			s = o
		} else {
			r.Raise(FlagNTotal, "one column of n's stands beside several arms")
		}
	}
	if !ok && f.fewerInGroup(e) {
		return // an arm's n of elsewhere would be that of the whole arm
	}
	for _, find := range []func() (size, bool){
		func() (size, bool) { return b.captionOfAll(f, x) },
		func() (size, bool) { return f.ownGroupSize(e, x, r.Statistic) },
		func() (size, bool) { return b.flowSize(i, f, x) },
		func() (size, bool) { return b.otherSize(i, x.arm) },
		func() (size, bool) { return b.toldSize(f, x) },
		func() (size, bool) { return b.countedSize(r, f, e, x) },
	} {
		if ok {
			break
		}
		s, ok = find()
	}
	if ok {
		b.setN(r, s, f, x)
	}
}

func (b *binder) setN(r *result.Result, s size, f *frame, x *context) {
	r.N, r.NFrom, r.NKind = s.n, s.from, kindOfN(s.text+" "+f.tab.Caption.S)
	r.Sources = append(r.Sources, result.Source{Field: "n", Place: s.place, Text: shorten(s.text, 200), From: s.words})
	if s.from == result.NElsewhere {
		r.Raise(FlagNElsewhere, "read from "+s.words)
	}
	if s.told {
		r.Raise(FlagNTold, s.words)
	}
	if s.counts {
		r.Raise(FlagNCounts, s.words)
	}
	if s.total && x.contrast {
		r.Raise(FlagNTotal, "the n may be that of both arms together")
	}
	if r.NKind == result.NUnclear && (s.from == result.NHeading || s.from == result.NElsewhere) && !atBaseline(x) && x.time != "" {
		r.Raise(FlagNKind, "the n in the heading may be that at baseline")
	}
}

func kindOfN(s string) string {
	low := fold(s)
	switch {
	case strings.Contains(low, "randomi"):
		return result.NRandomised
	case strings.Contains(low, "complet"):
		return result.NCompleters
	case strings.Contains(low, "analy"):
		return result.NAnalysed
	}
	return result.NUnclear
}

// atBaseline reports that a result is about the time before treatment.
func atBaseline(x *context) bool {
	low := fold(x.time)
	return low == "" && !x.change || strings.Contains(low, "baseline") && !strings.Contains(low, "change") && !strings.Contains(low, " to ") && !strings.ContainsAny(low, "×→") || strings.HasPrefix(low, "pre") || strings.HasPrefix(low, "before") || strings.Contains(low, "screening") || strings.Contains(low, "week 0")
}

// countedSize falls back on what the text counts: all subjects for a result that
// is about all of them or, where the same subjects stand under every condition,
// about any; else the number in each group, where the text gives one for all.
func (b *binder) countedSize(r *result.Result, f *frame, e *estimate, x *context) (size, bool) {
	if x.contrast || x.subgroup != "" || !aboutSubjects(r.Statistic) {
		return size{}, false
	}
	if f.ofCategory(e, x) {
		return size{}, false
	}
	c := b.back.Census
	named := f.armsInColumns() || f.armRows || x.arm != "" && !totals[armWords(x.arm)]
	var n census.Count
	var ok bool
	switch {
	case !named && len(f.lines[e.row].groups)+len(f.lines[e.row].labels) > 1 && f.onlyTermsOver(e):
		// Under a heading that says nothing but mean and SD, the rows of a group are
		// its categories.
	case !named && !f.describesSubjects():
		// A table about the feed or the room has other numbers of its own.
	case named && x.arm != "" && f.aboutArms(x.arm) && (b.sameSubjects(f) || f.namesGroup() || f.describesSubjects()):
		if n, ok = c.Each(); !ok && b.sameSubjects(f) {
			n, ok = c.Whole(x.time != "" && !atBaseline(x) || x.time == "" && !ofSample.MatchString(f.tab.Caption.S))
		}
	case !named || b.sameSubjects(f):
		n, ok = c.Whole(!atBaseline(x))
	}
	if !ok {
		return size{}, false
	}
	return size{n: n.N, from: result.NElsewhere, words: "the text's count of those who took part", text: n.Text, place: n.Place, told: true}, true
}

var subjectWord = pattern.MustCompile(`(?i)\b(?:` + census.Subjects + `|demographic\w*|baseline|sample|cohort|age|sex|gender|bmi|body mass|weight|height)\b`)

// describesSubjects reports that the caption or a label of the table speaks of
// those who took part.
func (f *frame) describesSubjects() bool {
	if subjectWord.MatchString(f.tab.Caption.S) {
		return true
	}
	for r := range f.lines {
		for _, l := range f.lines[r].labels {
			if subjectWord.MatchString(l.text) {
				return true
			}
		}
	}
	return false
}

// category is a label that names a part of the subjects and nothing else.
var category = pattern.MustCompile(`(?i)^\W*(?:all groups,? )?(?:males?|females?|men|women|boys|girls|young(?:er)?|old(?:er)?|elderly|smokers?|non-?smokers?|ex-?smokers?|responders?|non-?responders?|low|high|moderate|medium|mild|severe)(?:\W.{0,16})?$`)

// ofCategory reports that a label or heading of the estimate names a part of the
// subjects, which the text's counts of all do not hold for.
func (f *frame) ofCategory(e *estimate, x *context) bool {
	for _, l := range append(append([]label{}, f.lines[e.row].labels...), f.path(e.row, e.col)...) {
		if category.MatchString(l.text) {
			return true
		}
	}
	return category.MatchString(x.arm)
}

var groupWord = pattern.MustCompile(`(?i)\b(?:groups?|arms?|controls?|placebo|treat|treated|untreated|sham|vehicle)\b`)

// namesGroup reports that one of the table's arms is called a group, or a control.
func (f *frame) namesGroup() bool {
	for _, a := range f.armNames() {
		if groupWord.MatchString(a) {
			return true
		}
	}
	return false
}

// onlyTermsOver reports that the headings over an estimate name statistics alone.
func (f *frame) onlyTermsOver(e *estimate) bool {
	for _, l := range f.path(e.row, e.col) {
		if !f.lex.phrase(l.text).onlyTerms {
			return false
		}
	}
	return true
}

// aboutSubjects reports a statistic of subjects, which their number belongs to.
func aboutSubjects(s result.Statistic) bool {
	switch s {
	case result.Mean, result.MeanChange, result.GeometricMean, result.Median:
		return true
	}
	return false
}

// baselineN reports that a note says the headings' n's are those at baseline:
// of this table, or of an earlier one whose caption begins alike.
func (f *frame) baselineN(b *binder) bool {
	if f.saysBaselineN() {
		return true
	}
	for _, g := range b.frames {
		if g == nil || g.num >= f.num {
			continue
		}
		if g.saysBaselineN() && sameOpening(g.tab.Caption.S, f.tab.Caption.S) {
			return true
		}
	}
	return false
}

func (f *frame) saysBaselineN() bool {
	for _, n := range f.notes.list {
		low := fold(n.run.S)
		if k := strings.Index(low, "baseline"); k >= 0 {
			from := max(0, k-60)
			around := " " + low[from:k]
			if (strings.Contains(around, " n for ") || strings.Contains(around, " n at ") || strings.Contains(around, " n is ") || strings.Contains(around, " n's ") || strings.Contains(around, " n = ") && strings.Contains(around, "number of")) && !strings.Contains(around, ".") {
				return true
			}
		}
	}
	return false
}

// sameOpening reports that two captions begin with the same four words.
func sameOpening(a, b string) bool {
	wa, wb := words(a), words(b)
	if len(wa) < 4 || len(wb) < 4 {
		return false
	}
	for i := 0; i < 4; i++ {
		if wa[i] != wb[i] {
			return false
		}
	}
	return true
}

// otherSize finds the n of an arm in the headings of the paper's other tables;
// the nearest table before, then after. Tables that disagree give the first
// with a flag by the caller.
func (b *binder) otherSize(i int, arm string) (size, bool) {
	want := armWords(arm)
	if want == "" {
		return size{}, false
	}
	best, dist := -1, 1<<30
	for k, a := range b.arms {
		if a.table == i {
			continue
		}
		d := i - a.table
		if d < 0 {
			d = -d + 1000
		}
		switch {
		case a.name == want:
		case sameArm(a.name, want):
			d += 10
		case within(want, a.name) && b.only(a.table, want):
			d += 2000
		default:
			continue
		}
		if d < dist {
			best, dist = k, d
		}
	}
	if best < 0 {
		return size{}, false
	}
	a := b.arms[best]
	if b.otherN(a) {
		return size{}, false
	}
	return sizeOfLabel(a.n, a.l, result.NElsewhere, "heading or row of n in "+tableName(b.frames[a.table])), true
}

// otherN reports that further down in its table the arm is headed with another
// n, so that neither is the one of another table.
func (b *binder) otherN(a armSize) bool {
	f := b.frames[a.table]
	if a.l.cell == nil || len(f.mid) == 0 {
		return false
	}
	for r := f.head; r < f.tab.Rows; r++ {
		if n, l, ok := f.headingN(r, a.l.cell.Col); ok && n != a.n && l.cell != nil && armWords(b.vocab.lex.name(l.text)) == a.name {
			return true
		}
	}
	return false
}

// within reports that all words of the short name stand in the long one.
func within(short, long string) bool {
	have := map[string]bool{}
	for _, w := range words(long) {
		have[w] = true
	}
	ws := words(short)
	some := false
	for _, w := range ws {
		if !have[w] && !generalWord[w] {
			return false
		}
		some = some || have[w]
	}
	return some
}

var generalWord = map[string]bool{"dose": true, "group": true, "arm": true, "treatment": true, "regimen": true, "groups": true, "therapy": true, "the": true}

// only reports that one arm alone of the table has all words of the name.
func (b *binder) only(table int, name string) bool {
	n := 0
	for _, a := range b.arms {
		if a.table == table && within(name, a.name) {
			n++
		}
	}
	return n == 1
}

var armNoise = strings.NewReplacer(" group", "", " arm", "", "group ", "", "the ", "", "-", " ", ".", "")

// sameArm reports that one name is the other with more words: "placebo" and
// "placebo group 50 mg" are not the same, "chemotherapy" and "chemotherapy arm"
// are.
func sameArm(a, b string) bool {
	strip := func(s string) string {
		return strings.TrimSpace(armNoise.Replace(s))
	}
	return strip(a) == strip(b) && strip(a) != ""
}
