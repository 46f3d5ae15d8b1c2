package table

import (
	"halfspan/extract/bind/convention"
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// rank says from how near a statement was taken.
type rank uint8

const (
	rankCell rank = iota
	rankRow
	rankColumn
	rankGroup
	rankCaption
	rankNote
	rankPaper
)

// statement is one text that says how values are printed.
type statement struct {
	rank      rank
	pairs     []pair
	text      string
	from      string // in words
	place     paper.Place
	l         label
	onlyTerms bool // it names nothing but statistics
}

// statements gives every text that may say what the values of an estimate mean,
// the nearest first.
func (f *frame) statements(e *estimate) []statement {
	var out []statement
	byMarks := func(marks []string, rk rank) {
		for _, m := range marks {
			for _, n := range f.notes.marked(m) {
				out = append(out, f.lex.noteStatements(n, rk)...)
			}
		}
	}
	byLabel := func(l label, rk rank, from string) {
		out = append(out, f.lex.labelStatement(l, rk, from))
		byMarks(l.marks, rk)
	}
	byMarks(e.marks, rankCell)
	if rd := f.reads[e.cell]; rd != nil && hasLetter(e.cell.Text.S) {
		if s, ok := cellStatement(e.cell, rd.phrase); ok {
			out = append(out, s)
		}
	}
	ln := &f.lines[e.row]
	path := f.path(e.row, e.col)
	if k := len(path) - 1; k >= 0 && f.ownMeaning(path[k].text) {
		// A column of differences says itself what it prints; the row label
		// speaks of the arms' columns.
		byLabel(path[k], rankRow, f.columnName(e.col))
		path = path[:k]
	}
	for i := len(ln.labels) - 1; i >= 0; i-- {
		byLabel(ln.labels[i], rankRow, "row label")
	}
	for i := len(path) - 1; i >= 0; i-- {
		byLabel(path[i], rankColumn, f.columnName(e.col))
	}
	for i := len(ln.groups) - 1; i >= 0; i-- {
		for _, l := range f.lines[ln.groups[i]].labels {
			if f.namesAnalysis(ln.groups[i]) {
				continue // "Per protocol (70% of feeds)" says nothing of the values
			}
			byLabel(l, rankGroup, "label of the row group")
		}
	}
	for c := 0; c < f.stub; c++ {
		for i := len(f.heads[c]) - 1; i >= 0; i-- {
			byLabel(f.heads[c][i], rankGroup, "heading of the row labels")
		}
	}
	for _, s := range f.tableStatements() {
		out = append(out, f.excepted(e, s))
	}
	return out
}

// excepted keeps of "values are mean (SD) except for the gain, which is mean (SE)"
// what holds for the estimate: the exception where a label or heading of it is named
// there, the rule elsewhere.
func (f *frame) excepted(e *estimate, s statement) statement {
	cut := exceptFor.FindStringIndex(s.text)
	if cut == nil || len(s.pairs) < 2 {
		return s
	}
	named := false
	for _, l := range append(append([]label{}, f.lines[e.row].labels...), f.path(e.row, e.col)...) {
		w := fold(f.lex.name(l.text))
		named = named || w != "" && wordIndex(fold(s.text[cut[1]:]), w) >= 0
	}
	var kept []pair
	for _, q := range s.pairs {
		if at := exceptFor.FindStringIndex(q.text); at != nil && (q.Start > at[0]) == named {
			kept = append(kept, q)
		}
	}
	if len(kept) > 0 {
		s.pairs = kept
	}
	return s
}

var exceptFor = pattern.MustCompile(`(?i)\bexcept(?:ing)?(?: for| that| in)?\b`)

// cellStatement is what the words inside a cell of values say: "Mean: 23 Range: 8–44".
func cellStatement(cell *paper.Cell, p phrase) (statement, bool) {
	s := statement{rank: rankCell, text: clean(cell.Text.S), from: "the cell", place: cell.Text.Between(0, len(cell.Text.S))}
	for _, q := range p.pairs {
		if q.Statistic != "" && q.StatisticAt.End > q.StatisticAt.Start {
			s.pairs = append(s.pairs, q)
		}
	}
	return s, len(s.pairs) > 0
}

// ownMeaning reports a column heading of a comparison that names its spread.
func (f *frame) ownMeaning(s string) bool {
	if !f.lex.compares(s) && !isContrast(fold(s)) {
		return false
	}
	for _, q := range f.lex.phrase(s).pairs {
		if q.Spread != "" {
			return true
		}
	}
	return false
}

// tableStatements gives what caption and notes say for the whole table.
func (f *frame) tableStatements() []statement {
	if f.whole != nil {
		return f.whole
	}
	out := []statement{}
	capt := note{run: &f.tab.Caption, from: "caption"}
	out = append(out, f.lex.noteStatements(capt, rankCaption)...)
	for _, n := range f.notes.general() {
		out = append(out, f.lex.noteStatements(n, rankNote)...)
	}
	used := f.usedMarks()
	for _, n := range f.notes.list {
		if n.mark != "" && !used[n.mark] {
			out = append(out, f.lex.noteStatements(n, rankNote)...)
		}
	}
	f.whole = out
	return out
}

// usedMarks gives the marks that headings, labels and values carry.
func (f *frame) usedMarks() map[string]bool {
	used := map[string]bool{}
	for i := range f.tab.Cells {
		c := &f.tab.Cells[i]
		_, marks := f.notes.split(&c.Text)
		for _, m := range marks {
			used[m] = true
		}
		for _, v := range f.reads[c].cell.Values {
			for _, s := range v.Marks {
				for _, m := range f.cellMarks(c.Text.S[s.Start:s.End]) {
					used[m] = true
				}
			}
		}
	}
	return used
}

func (x *lexicon) labelStatement(l label, rk rank, from string) statement {
	p := x.phrase(l.text)
	s := statement{rank: rk, pairs: p.pairs, text: l.text, from: from, l: l, onlyTerms: p.onlyTerms}
	if l.cell != nil {
		s.place = l.cell.Text.Between(0, len(l.cell.Text.S))
	}
	return s
}

// noteStatements cuts a caption or note into sentences and keeps the pairs that
// declare something; a sentence that only expands an abbreviation declares
// nothing.
func noteStatements(n note, rk rank) []statement {
	var out []statement
	for _, seg := range segments(n.run.S) {
		text := n.run.S[seg.Start:seg.End]
		p := readPhrase(text)
		s := statement{rank: rk, text: clean(text), from: n.from, place: n.run.Between(seg.Start, seg.End)}
		for i, q := range p.pairs {
			if declares(text, p.pairs, i, rk) {
				s.pairs = append(s.pairs, q)
			}
		}
		out = append(out, s)
	}
	return out
}

// segments cuts a note at full stops and semicolons that end a statement.
func segments(s string) []grammar.Span {
	var out []grammar.Span
	start := 0
	for i := 0; i < len(s); i++ {
		cut := s[i] == ';' || s[i] == '\n' || s[i] == '.' && i+1 < len(s) && s[i+1] == ' ' && i+2 < len(s) && !lowerAt(s, i+2) && !initialAt(s, i)
		if cut && depth(s[start:i]) <= 0 {
			out = append(out, grammar.Span{Start: start, End: i + 1})
			start = i + 1
		}
	}
	if start < len(s) {
		out = append(out, grammar.Span{Start: start, End: len(s)})
	}
	return out
}

func lowerAt(s string, i int) bool { return i < len(s) && s[i] >= 'a' && s[i] <= 'z' }

// initialAt reports that the point at i ends an abbreviation: s.d., vs., No.
func initialAt(s string, i int) bool {
	return i >= 2 && s[i-2] == '.' || strings.HasSuffix(strings.ToLower(s[:i]), " vs") || strings.HasSuffix(strings.ToLower(s[:i]), "no")
}

func depth(s string) int {
	return strings.Count(s, "(") + strings.Count(s, "[") - strings.Count(s, ")") - strings.Count(s, "]")
}

// declaring are words with which a sentence says how values are printed.
var declaring = []string{"express", "present", "values", "value is", "data", "given", "shown", "report", "parenthes", "bracket", "denote", "represent", "indicat", "display", "numbers are", "figures are", "results are", "describ", "unless", "otherwise", "summar", "mean ±", "means ±", "mean±", "table shows"}

// declares reports whether the i-th pair of a note's sentence declares what is
// printed, and does not only expand an abbreviation.
func declares(text string, pairs []pair, i int, rk rank) bool {
	q := pairs[i]
	low := fold(text)
	if q.Count && q.Percent || q.Sign {
		return true
	}
	said := false
	for _, w := range declaring {
		if strings.Contains(low, w) {
			said = true
			break
		}
	}
	switch {
	case q.Spread != "" && q.Statistic != "":
		if said {
			return true
		}
		// "Mean (SD)", "median (range)": short, in brackets.
		from, to := q.StatisticAt.End, q.SpreadAt.Start
		if from == 0 && i > 0 {
			from = pairs[i-1].End
		}
		if rk <= rankGroup && to > 0 && to <= len(text) && strings.HasSuffix(strings.TrimRight(text[:to], " "), "(") {
			return true // a note that a mark leads to: "adjusted for station (SE)"
		}
		return to >= from && to-from <= 12 && !strings.ContainsAny(text[from:to], "=:")
	case q.Spread != "":
		return said && !expands(text, q)
	case q.Percent || q.Count:
		return said
	case q.Statistic != "":
		return said && rk >= rankCaption
	}
	return false
}

// expands reports "SD, standard deviation" and "SD = standard deviation".
func expands(text string, q pair) bool {
	after := strings.TrimLeft(text[min(q.SpreadAt.End, len(text)):], " \u00a0")
	return strings.HasPrefix(after, "=") || strings.HasPrefix(after, ":") || strings.HasPrefix(after, ", standard") || strings.HasPrefix(after, "- standard")
}

// reading is what a spread was found to mean.
type reading struct {
	given     result.GivenAs
	pair      pair
	at        statement
	level     float64
	levelAt   *statement
	count     bool // it is a count with its percentage, no result
	none      bool // it is no spread for another reason
	ambiguous bool
	habit     bool // only other rows of the table say so
	contrary  bool // declared as a count, and the numbers say otherwise
}

// meaningOf finds what a spread of an estimate means.
func (f *frame) meaningOf(e *estimate, sp *spread, all []statement) reading {
	if v, ok := sp.value.Float(); ok && v < 0 && sp.shape != shapeInterval {
		return reading{none: true}
	}
	if sp.item.Spread != "" && sp.item.Kind != grammar.KindNumber {
		if g := convention.GivenAs(sp.item.Spread); g != "" {
			return f.withLevel(reading{given: g, level: level(sp.item.Level), at: statement{rank: rankCell, from: "the cell"}}, all)
		}
		return reading{none: true}
	}
	if sp.own.kind == roleSpread {
		for _, q := range sp.own.pairs {
			if g := convention.GivenAs(q.Spread); g != "" {
				s := f.lex.labelStatement(sp.own.label, rankColumn, f.columnName(sp.col))
				if sp.own.label.cell != nil && sp.own.label.cell.Row == sp.row {
					s.rank, s.from = rankRow, "row label"
				}
				return f.withLevel(reading{given: g, pair: q, level: level(q.Level), at: s}, all)
			}
		}
		return reading{none: true}
	}
	if sp.own.kind == roleBound {
		s := f.lex.labelStatement(sp.own.label, rankColumn, f.columnName(sp.col))
		for _, q := range sp.own.pairs {
			if g := convention.GivenAs(q.Spread); g != "" {
				return f.withLevel(reading{given: g, pair: q, level: level(q.Level), at: s}, all)
			}
		}
	}
	rd := f.lookUp(e, sp, all)
	return f.withLevel(rd, all)
}

// lookUp goes through the statements, the nearest first, until one fits the
// shape of the spread.
func (f *frame) lookUp(e *estimate, sp *spread, all []statement) reading {
	hint := statisticHint(all)
	counts := f.countEvidence(e, sp)
	if counts == countSure {
		return reading{count: true}
	}
	for i := range all {
		s := &all[i]
		fits := fitting(s, sp, hint)
		isCount, strong := countStatement(s)
		if strong && sp.shape == shapeBracket && counts > countImpossible && (allSigned(fits) || s.rank >= rankCaption && f.printsSigns()) {
			fits = nil // "mean ± SD or n (%)": the bracket holds the percentage
		}
		if isCount && sp.shape == shapeBracket {
			switch {
			case len(fits) == 0 && strong && counts == countImpossible && s.rank <= rankGroup:
				return reading{given: result.Unstated, contrary: true, at: *s}
			case len(fits) == 0 && strong:
				return reading{count: true}
			case len(fits) == 0 && counts >= countLikely:
				return reading{count: true}
			case counts == countLikely:
				return reading{count: true}
			}
		}
		if len(fits) == 0 {
			continue
		}
		if sp.shape == shapeBracket && s.rank >= rankCaption && counts == countLikely {
			return reading{count: true}
		}
		q := fits[0]
		rd := reading{given: convention.GivenAs(q.Spread), pair: q, at: *s, level: level(q.Level)}
		for _, o := range fits[1:] {
			if o.Spread != q.Spread {
				rd.ambiguous = true
			}
		}
		return rd
	}
	if sp.shape == shapeBracket && counts > countUnlikely {
		return reading{count: true}
	}
	if rd, ok := f.habit(sp, hint); ok {
		return rd
	}
	return reading{given: result.Unstated}
}

// printsSigns reports that spreads stand behind ± in the table.
func (f *frame) printsSigns() bool {
	for _, rd := range f.reads {
		for i := range rd.cell.Values {
			if rd.cell.Values[i].Part(grammar.KindPlusMinus) != nil {
				return true
			}
		}
	}
	return false
}

// allSigned reports spreads that a statement prints behind ± only.
func allSigned(fits []pair) bool {
	for _, q := range fits {
		if !q.Sign {
			return false
		}
	}
	return len(fits) > 0
}

// fitting gives the pairs of a statement whose kind of spread can be printed in
// the shape, the best first.
func fitting(s *statement, sp *spread, hint string) []pair {
	var out []pair
	for _, q := range s.pairs {
		if q.Spread == "" || !fitsShape(q.Spread, sp) {
			continue
		}
		if s.rank >= rankCaption && hint != "" && q.Statistic != "" && (hint == "median") != (q.Statistic == "median") && (hint == "median" || hint == "mean") {
			continue
		}
		out = append(out, q)
	}
	if len(out) < 2 {
		return out
	}
	// "mean ± SD; median (IQR)": the sign chooses.
	var better []pair
	for _, q := range out {
		if q.Sign == (sp.shape == shapeSign) {
			better = append(better, q)
		}
	}
	if len(better) > 0 && len(better) < len(out) && sp.shape != shapeInterval {
		return append(better, rest(out, better)...)
	}
	if hint != "" {
		better = nil
		for _, q := range out {
			if q.Statistic == hint {
				better = append(better, q)
			}
		}
		if len(better) > 0 {
			return better
		}
	}
	return out
}

func rest(all, taken []pair) []pair {
	var out []pair
	for _, q := range all {
		used := false
		for _, t := range taken {
			used = used || t.Pair == q.Pair
		}
		if !used {
			out = append(out, q)
		}
	}
	return out
}

func fitsShape(spreadWord string, sp *spread) bool {
	switch sp.shape {
	case shapeInterval:
		return spreadWord == grammar.SpreadCI || spreadWord == grammar.SpreadIQR || spreadWord == grammar.SpreadRange
	case shapeSign:
		return spreadWord == grammar.SpreadSD || spreadWord == grammar.SpreadSE
	case shapeBracket, shapePlain, shapeWord:
		return spreadWord == grammar.SpreadSD || spreadWord == grammar.SpreadSE || spreadWord == grammar.SpreadIQR
	}
	return false
}

// statisticHint gives mean or median where a label or heading says one.
func statisticHint(all []statement) string {
	for i := range all {
		if all[i].rank > rankGroup {
			return ""
		}
		for _, q := range all[i].pairs {
			switch q.Statistic {
			case "":
			case "median":
				return "median"
			default:
				return "mean"
			}
		}
	}
	return ""
}

// withLevel completes the level of a confidence interval from other statements
// of the same table.
func (f *frame) withLevel(rd reading, all []statement) reading {
	if rd.given != result.CI || rd.level > 0 {
		return rd
	}
	for i := range all {
		for _, q := range all[i].pairs {
			if q.Spread == grammar.SpreadCI && level(q.Level) > 0 {
				rd.level, rd.levelAt = level(q.Level), &all[i]
				return rd
			}
		}
	}
	for i := range f.tab.Notes {
		for _, q := range f.lex.phrase(f.tab.Notes[i].Text.S).pairs {
			if q.Spread == grammar.SpreadCI && level(q.Level) > 0 {
				rd.level = level(q.Level)
				rd.levelAt = &statement{rank: rankNote, from: "note below the table", text: q.Level + "% CI", place: f.tab.Notes[i].Text.At(q.LevelAt.Start)}
				return rd
			}
		}
	}
	return rd
}
