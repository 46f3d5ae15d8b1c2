package table

import (
	"strconv"
	"strings"

	"halfspan/extract/bind/background"
	"halfspan/extract/bind/convention"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// Find gives every result that is printed in the tables of the document, in
// their order, with the paper's background. Mates are indices in the slice it
// returns.
func Find(doc *paper.Document, back *background.Background) []result.Result {
	b := newBinder(doc, back)
	var out []result.Result
	for i, f := range b.frames {
		if f == nil {
			continue
		}
		base := len(out)
		rs := b.table(i, f)
		for k := range rs {
			for m := range rs[k].Mates {
				rs[k].Mates[m] += base
			}
		}
		out = append(out, rs...)
	}
	return out
}

// binder reads all tables of one paper together: an n or a convention may stand
// in another table or in the text.
type binder struct {
	doc    *paper.Document
	vocab  *vocabulary
	frames []*frame
	blocks []*paper.Block
	arms   []armSize
	flow   []flowSentence
	told   []toldSentence
	back   *background.Background
}

func newBinder(doc *paper.Document, back *background.Background) *binder {
	b := &binder{doc: doc, back: back}
	if !hasCells(doc) {
		return b
	}
	b.vocab = newVocabulary(doc)
	for i := range doc.Blocks {
		bl := &doc.Blocks[i]
		if bl.Kind != paper.TableBlock || bl.Table == nil {
			continue
		}
		b.blocks = append(b.blocks, bl)
		b.frames = append(b.frames, newFrame(bl.Table, len(b.frames)+1, b.vocab))
	}
	for _, f := range b.frames {
		if f != nil {
			f.nameArms()
		}
	}
	for _, f := range b.frames {
		if f != nil {
			f.findAxes()
		}
	}
	b.findArmSizes()
	b.findFlow()
	b.findTold()
	return b
}

// hasCells reports that the document has a table with cells.
func hasCells(doc *paper.Document) bool {
	for i := range doc.Blocks {
		if t := doc.Blocks[i].Table; t != nil && len(t.Cells) > 0 {
			return true
		}
	}
	return false
}

// nameArms puts the headings that carry an n into the paper's vocabulary.
func (f *frame) nameArms() {
	for c := f.stub; c < f.tab.Cols; c++ {
		for _, l := range f.heads[c] {
			if _, ok := f.lex.lastN(l); !ok {
				continue
			}
			name := f.lex.name(l.text)
			if w := armWords(name); w != "" && !f.lex.isTime(fold(name)) && len(w) < 60 {
				f.vocab.arms[w] = true
				f.vocab.arms[fold(name)] = true
			}
		}
	}
}

// table reads the results of one table.
func (b *binder) table(i int, f *frame) []result.Result {
	a := f.assemble()
	var out []result.Result
	for _, e := range a.list {
		if len(e.spreads) == 0 {
			continue
		}
		x := f.contextOf(e)
		all := f.statements(e)
		for k := range e.spreads {
			if r, ok := b.result(i, f, e, &e.spreads[k], x, all); ok {
				out = append(out, r)
			}
		}
	}
	onlyLater(out)
	pairMates(out)
	return out
}

// result makes the record of one estimate with one of its spreads.
func (b *binder) result(i int, f *frame, e *estimate, sp *spread, x *context, all []statement) (result.Result, bool) {
	rd := f.meaningOf(e, sp, all)
	if rd.count || rd.none || e.value.Value == "" || e.value.Rel != "" || sp.shape == shapeBracket && sp.value.Rel != "" {
		return result.Result{}, false
	}
	if rd.given == result.Unstated && sp.shape == shapeSign && f.visitWindow(e, sp) {
		return result.Result{}, false
	}
	r := result.Result{Section: b.blocks[i].Section, Zone: b.blocks[i].Zone, Table: tableName(f), Row: f.rowKey(e), Estimate: e.value.Value}
	if !b.settleSpread(&r, f, e, sp, &rd, all, x) {
		return result.Result{}, false
	}
	var model string
	var assumed bool
	r.Statistic, r.Measure, model, assumed = f.statisticOf(e, &rd, x, all)
	if assumed {
		r.Raise(FlagStatistic, "nothing names the statistic; taken from the kind of spread")
	}
	b.fill(&r, f, e, sp, x, &rd)
	f.adjustedOf(&rd, &r, model, e, all)
	b.setEvidence(&r, f, e, all)
	b.size(&r, i, f, e, x)
	f.rowTests(&r, e)
	b.check(&r, f, e, sp, x)
	return r, true
}

var visitLabel = pattern.MustCompile(`(?i)^(?:study )?(?:weeks?|days?|months?|visits?|time)\b|\bwindow\b|[(]\s*±`)

// visitWindow reports a planned visit with its window: "12 (±4)" in a row of
// weeks.
func (f *frame) visitWindow(e *estimate, sp *spread) bool {
	if !isWhole(e.value.Value) || !isWhole(sp.value.Value) {
		return false
	}
	ls := append([]label{}, f.lines[e.row].labels...)
	for c := 0; c < f.stub; c++ {
		ls = append(ls, f.heads[c]...)
	}
	for _, l := range append(ls, f.path(e.row, e.col)...) {
		if visitLabel.MatchString(l.text) {
			return true
		}
	}
	return false
}

func tableName(f *frame) string {
	if f.tab.Label != "" {
		return clean(f.tab.Label)
	}
	return "Table " + strconv.Itoa(f.num)
}

func (f *frame) rowKey(e *estimate) string {
	r := e.row
	if f.lines[r].kind == lineContinue {
		r = f.lines[r].above
	}
	return strconv.Itoa(f.num) + ":" + strconv.Itoa(r+1)
}

// settleSpread fills in the spread; false where it is none after all.
func (b *binder) settleSpread(r *result.Result, f *frame, e *estimate, sp *spread, rd *reading, all []statement, x *context) bool {
	if _, ok := grammar.CommonPower(e.value, sp.value, sp.lower, sp.upper); !ok {
		return false // digits of different powers of ten do not belong together
	}
	if rd.given == result.Unstated && !rd.contrary {
		st, _, _ := nearStatistic(all, rankNote)
		b.fromPaper(r, sp, rd, string(st))
	}
	r.GivenAs = rd.given
	r.Level = 0
	switch sp.shape {
	case shapeInterval:
		r.Lower, r.Upper = printed(sp.lower), printed(sp.upper)
		if r.Lower == "" && r.Upper == "" || sp.own.kind == roleBound && sp.upper.IsZero() {
			return false
		}
		if rd.given == result.Unstated && !holds(sp.lower, sp.upper, e.value) {
			return false
		}
		if l, ok := sp.lower.Float(); ok {
			if u, ok := sp.upper.Float(); ok && l > u {
				r.Lower, r.Upper = r.Upper, r.Lower // flagged in check
			}
		}
		if sp.own.kind == roleBound && rd.given == result.Unstated {
			rd.given, r.GivenAs = result.CI, result.CI
		}
	default:
		r.GivenValue = sp.value.Value
		if r.GivenValue == "" {
			return false
		}
	}
	if rd.given == result.CI {
		r.Level = rd.level
		switch {
		case rd.level == 0:
			if lv, ok := b.back.Conventions.Level(); ok {
				r.Level = lv
				r.Raise(FlagLevelElsewhere, "the level is said elsewhere in the paper")
				r.Sources = append(r.Sources, result.Source{Field: "level", Text: strconv.FormatFloat(lv, 'g', -1, 64) + "% CI", From: "the paper's other intervals"})
			} else {
				r.Raise(FlagLevelMissing, "the paper nowhere says the level")
			}
		case rd.levelAt != nil:
			r.Sources = append(r.Sources, result.Source{Field: "level", Place: rd.levelAt.place, Text: shorten(rd.levelAt.text, 120), From: rd.levelAt.from})
		}
	}
	if rd.given == result.Unstated {
		r.Raise(FlagSpreadUnstated, "nothing in the table or the methods says what it is")
	}
	if rd.habit {
		r.Raise(FlagSpreadHabit, "said of other rows of the table only")
	}
	if rd.contrary {
		r.Raise(FlagCountConflict, "headed as number and percentage, which the numbers contradict")
	}
	if rd.ambiguous {
		r.Raise(FlagSpreadTwice, "one statement names more than one spread for this form")
	}
	if rd.at.from != "" {
		r.Sources = append(r.Sources, result.Source{Field: "given_as", Place: rd.at.place, Text: shorten(rd.at.text, 200), From: rd.at.from})
	}
	return true
}

// fromPaper asks the paper's declared conventions.
func (b *binder) fromPaper(r *result.Result, sp *spread, rd *reading, near string) {
	var a convention.Answer
	var ok bool
	switch sp.shape {
	case shapeSign:
		a, ok = b.back.Conventions.PlusMinus(convention.Tables)
	case shapeBracket:
		a, ok = b.back.Conventions.Bracket(convention.Tables)
	case shapeInterval:
		a, ok = b.back.Conventions.Bounds(convention.Tables, result.Mean)
		if !ok {
			a, ok = b.back.Conventions.Bounds(convention.Tables, result.Median)
		}
		if st := result.Statistic(near); st == result.Ratio || st == result.Coefficient || st == result.MeanDifference {
			if a, ok = b.back.Conventions.Bounds(convention.Tables, st); !ok {
				var lv float64
				if lv, ok = b.back.Conventions.Level(); ok {
					a = convention.Answer{Statement: convention.Statement{Spread: result.CI, Level: lv, Text: "intervals of the paper"}}
				}
			}
		}
	}
	if !ok {
		return
	}
	if a.Conflict {
		r.Raise(FlagSpreadConflict, "the paper declares more than one meaning")
	}
	rd.given, rd.level = a.Spread, a.Level
	rd.pair.Statistic = string(a.Statistic)
	rd.at = statement{rank: rankPaper, from: "the methods", text: a.Text, place: a.Place}
	r.Raise(FlagSpreadMethods, "said in the text of the paper, not in the table")
}

func printed(n grammar.Number) string {
	if n.Value != "" {
		return n.Value
	}
	return n.Word
}

// fill enters context, places and snippet.
func (b *binder) fill(r *result.Result, f *frame, e *estimate, sp *spread, x *context, rd *reading) {
	r.Arm, r.Arm2, r.Time, r.Subgroup = x.arm, x.arm2, x.time, x.subgroup
	r.Outcome, r.Unit, r.Heading = x.outcome, x.unit, x.heading
	r.Arm, r.Arm2 = f.sameName(r.Arm), f.sameName(r.Arm2)
	if power := e.value.Power; power != "" {
		r.Unit = strings.TrimSpace("×" + power + " " + r.Unit)
		r.Raise("power-of-ten", "the digits are printed with the factor ×"+power+", which stands in the unit")
	}
	r.Page = e.cell.Text.At(e.value.Start).Page
	src := func(field string, l label, text, from string) {
		if text != "" && from != "" {
			r.Sources = append(r.Sources, result.Source{Field: field, Place: placeOf(l), Text: shorten(l.raw, 200), From: from})
		}
	}
	first := sp.value
	if sp.shape == shapeInterval {
		first = sp.lower
	}
	at := sp.cell.Text.Between(first.Start, first.End)
	digits := r.GivenValue
	if sp.shape == shapeInterval {
		digits = r.Lower + " " + r.Upper
	}
	r.Anchor = result.AnchorAt(firstDigit(&sp.cell.Text, first), digits)
	r.Sources = append(r.Sources, result.Source{Field: "estimate", Place: e.cell.Text.Between(e.value.Start, e.value.End), Text: e.cell.Text.S[e.value.Start:e.value.End]})
	if sp.shape == shapeInterval {
		r.Sources = append(r.Sources, result.Source{Field: "lower", Place: at, Text: sp.cell.Text.S[first.Start:first.End]})
		if !sp.upper.IsZero() && sp.upper.End <= len(sp.cell.Text.S) {
			r.Sources = append(r.Sources, result.Source{Field: "upper", Place: sp.cell.Text.Between(sp.upper.Start, sp.upper.End), Text: sp.cell.Text.S[sp.upper.Start:sp.upper.End]})
		}
	} else {
		r.Sources = append(r.Sources, result.Source{Field: "given_value", Place: at, Text: sp.cell.Text.S[first.Start:first.End]})
	}
	src("arm", x.armAt, x.arm, x.armFrom)
	src("time", x.timeAt, x.time, x.timeFrom)
	src("outcome", x.outcomeAt, x.outcome, x.outcomeFrom)
	if x.unit != "" {
		r.Sources = append(r.Sources, result.Source{Field: "unit", Place: placeOf(x.unitAt), Text: shorten(x.unitAt.raw, 120), From: "label"})
	}
	r.Snippet = snippet(x, e, sp)
	r.Evidence.Baseline = strings.Contains(fold(x.time), "baseline") || fold(x.time) == "pre" || strings.HasPrefix(fold(x.time), "before")
	if at := e.value.PowerAt; at.End > 0 && at.End <= len(e.cell.Text.S) {
		r.Sources = append(r.Sources, result.Source{Field: "unit", Place: e.cell.Text.Between(at.Start, at.End), Text: e.cell.Text.S[at.Start:at.End]})
	}
	if e.value.Mended || first.Mended {
		r.Raise(FlagMended, "printed with a slip; kept as printed")
	}
	if f.reads[e.cell].slashed {
		r.Raise(FlagMended, "a slash stands for the decimal point: "+clean(e.cell.Text.S))
	}
}

// firstDigit gives the place of the first digit of a number.
func firstDigit(t *paper.TextRun, n grammar.Number) paper.Place {
	for i := n.Start; i < n.End && i < len(t.S); i++ {
		if t.S[i] >= '0' && t.S[i] <= '9' {
			return t.At(i)
		}
	}
	return t.At(n.Start)
}

// snippet gives the row's labels, the column's heading and the cells.
func snippet(x *context, e *estimate, sp *spread) string {
	s := x.heading + ": " + clean(e.cell.Text.S)
	if sp.cell != e.cell {
		s += " | " + clean(sp.cell.Text.S)
	}
	return shorten(s, 300)
}

// check raises the flags that the finished record calls for.
func (b *binder) check(r *result.Result, f *frame, e *estimate, sp *spread, x *context) {
	if sp.shape == shapeInterval {
		l, ok1 := sp.lower.Float()
		u, ok2 := sp.upper.Float()
		switch {
		case !ok1 || !ok2:
			r.Raise(FlagBoundOpen, printed(sp.lower)+" to "+printed(sp.upper))
		case l > u:
			r.Raise(FlagReversed, "printed as "+printed(sp.lower)+" to "+printed(sp.upper))
		}
		if ok1 && ok2 && !holds(sp.lower, sp.upper, e.value) {
			r.Raise(FlagOutside, r.Estimate+" is not within "+r.Lower+" to "+r.Upper)
		}
	}
	if x.armGuess {
		r.Raise(FlagArmUnclear, "the arms of the comparison are not named where it stands")
	}
	if x.timeGuess && fold(x.time) != "baseline" {
		r.Raise(FlagTimeUnclear, "the time is taken from the caption")
	}
	if x.outcomeGuess {
		r.Raise(FlagOutcomeUnclear, "what was measured is taken from the caption")
	}
	if sp.cell != e.cell && sp.own.kind == roleNone {
		r.Raise(FlagRowShape, "the spread stands in another cell and is joined by position")
	}
}

// pairMates links the results that share estimate, arm, time and outcome.
func pairMates(rs []result.Result) {
	for i := range rs {
		for k := i + 1; k < len(rs); k++ {
			a, b := &rs[i], &rs[k]
			if a.Estimate == b.Estimate && a.Arm == b.Arm && a.Arm2 == b.Arm2 && a.Time == b.Time && a.Outcome == b.Outcome && a.Row == b.Row {
				a.Mates = append(a.Mates, k)
				b.Mates = append(b.Mates, i)
			}
		}
	}
}
