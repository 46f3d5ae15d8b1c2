package table

import (
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

var (
	maleIs = pattern.MustCompile(`(?i)^(?:m|males?|men|boys)\b`)
	femIs  = pattern.MustCompile(`(?i)^(?:f|females?|women|girls)\b`)
)

// sexSize reads the n of each sex out of a heading, "Syrup (n = 9 M, 11 F)": that
// of the row's own sex, or both together.
func (f *frame) sexSize(e *estimate, x *context) (size, bool) {
	if x.contrast {
		return size{}, false
	}
	path := f.path(e.row, e.col)
	for i := len(path) - 1; i >= 0; i-- {
		m := nBySex.FindStringSubmatch(path[i].raw)
		if m == nil {
			continue
		}
		first, okFirst := census.Number(m[1])
		second, okSecond := census.Number(m[3])
		if maleIs.MatchString(m[4]) {
			first, second, okFirst, okSecond = second, first, okSecond, okFirst
		}
		own := x.subgroup
		if labels := f.lines[e.row].labels; own == "" && len(labels) > 0 {
			own = labels[len(labels)-1].text
		}
		n, ok := first+second, okFirst && okSecond
		switch {
		case totals[fold(own)]:
		case own != "" && (x.subgroup != "" || len(f.lines[e.row].groups) > 0 || len(f.lines[e.row].labels) > 1) && !femIs.MatchString(own) && !maleIs.MatchString(own):
			return size{}, false // a part that the heading does not count
		case femIs.MatchString(own):
			n, ok = second, okSecond
		case maleIs.MatchString(own):
			n, ok = first, okFirst
		}
		return sizeOfLabel(n, path[i], result.NHeading, f.columnName(e.col)), ok
	}
	return size{}, false
}

var (
	perGroup  = pattern.MustCompile(`(?i)\b(?:per|each|every)\s+(?:\w+\s+){0,2}?(?:groups?|arms?|treatments?|feeds?|conditions?|doses?|cells?|values?)\b|\b(?:replicates?|independent (?:experiments?|samples?))\b`)
	ofMean    = pattern.MustCompile(`(?i)\b(?:means?|averages?|medians?)\b|±|\bs\.?d\.?\b|\bs\.?e\.?m?\.?\b|\bstandard (?:deviation|error)`)
	bracketN  = pattern.MustCompile(`(?i)[(\[][^()\[\]]*\bn\s*=\s*([0-9]{1,5})\b[^()\[\]]*[)\]]`)
	samePhase = pattern.MustCompile(`(?i)\b(?:phase|period|session|condition|visit)s?\b`)
)

// declaredSize reads the n that a note gives with its declaration of what every
// value is, "values are mean ± SD, n = 6", or for each group, where no heading
// gives another.
func (f *frame) declaredSize(e *estimate, x *context) (size, bool) {
	if x.contrast || x.subgroup != "" && f.armRows {
		return size{}, false
	}
	for c := f.stub; c < f.tab.Cols; c++ {
		if _, _, ok := f.headingN(e.row, c); ok {
			return size{}, false
		}
	}
	read := func(s string, declared bool) (int, bool) {
		for _, sp := range segments(s) {
			seg := s[sp.Start:sp.End]
			if !perGroup.MatchString(seg) && !(declared && ofMean.MatchString(seg)) {
				continue
			}
			if h := grammar.ParsePhrase(grammar.Text{S: seg}); len(h.N) == 1 {
				if n := number(h.N[0].Value); n > 1 {
					return n, true
				}
			}
		}
		return 0, false
	}
	used := f.usedMarks()
	for _, nt := range f.notes.list {
		if nt.mark != "" && used[nt.mark] {
			continue
		}
		if n, ok := read(nt.run.S, true); ok {
			return size{n: n, from: result.NElsewhere, words: nt.from, text: shorten(clean(nt.run.S), 200), place: nt.run.At(0)}, true
		}
	}
	n, ok := read(f.tab.Caption.S, false)
	if m := bracketN.FindStringSubmatch(f.tab.Caption.S); !ok && m != nil && ofMean.MatchString(m[0]) {
		n, ok = census.Number(m[1]) // "(n = 6; mean ± SD)"
	}
	if ok {
		return size{n: n, from: result.NCaption, words: "caption", text: shorten(clean(f.tab.Caption.S), 200), place: f.tab.Caption.At(0)}, true
	}
	return size{}, false
}

// shareSize takes the denominator that the column prints with its counts,
// "18/50", where two rows or more agree on the largest.
func (f *frame) shareSize(e *estimate, x *context) (size, bool) {
	if x.contrast || x.subgroup != "" {
		return size{}, false
	}
	top, seen := 0, 0
	var at *paper.Cell
	for r := f.head; r < f.tab.Rows; r++ {
		cell := f.cellAt(r, e.col)
		if cell == nil {
			continue
		}
		m := shareOf.FindStringSubmatch(cell.Text.S)
		if m == nil {
			continue
		}
		n, ok := census.Number(m[2])
		k, _ := census.Number(m[1])
		switch {
		case !ok || k > n:
		case n > top:
			top, seen, at = n, 1, cell
		case n == top:
			seen++
		}
	}
	if seen < 2 || top < 5 {
		return size{}, false
	}
	return size{n: top, from: result.NHeading, words: "denominators of " + f.columnName(e.col), text: clean(at.Text.S), place: at.Text.At(0), counts: true}, true
}

var shareOf = pattern.MustCompile(`(?:^|[^0-9.,/])([0-9]{1,5})\s*/\s*([0-9]{1,5})(?:$|[^0-9.,/])`)

// sameSubjects reports that the table's arms are conditions of the same subjects.
func (b *binder) sameSubjects(f *frame) bool {
	if b.back.Census.Within && len(b.arms) == 0 {
		return true
	}
	names := f.armNames()
	for _, a := range names {
		if !samePhase.MatchString(a) {
			return false
		}
	}
	return len(names) > 1
}

// captionOfAll reads the caption's only n where the same subjects stand under
// every condition of the table.
func (b *binder) captionOfAll(f *frame, x *context) (size, bool) {
	if x.contrast || x.subgroup != "" || !b.sameSubjects(f) {
		return size{}, false
	}
	return f.captionN()
}

// ownGroupSize gives a ratio or coefficient the n of the heading over its column
// where that heading names one group and the numbers under it are an analysis
// inside that group.
func (f *frame) ownGroupSize(e *estimate, x *context, s result.Statistic) (size, bool) {
	if !x.contrast || x.arm2 != "" || s != result.Ratio && s != result.Coefficient {
		return size{}, false
	}
	n, l, ok := f.headingN(e.row, e.col)
	if !ok || l.cell == nil || l.cell.ColSpan < 2 || strings.Contains(fold(l.text), " vs") || f.lex.compares(l.text) {
		return size{}, false
	}
	return sizeOfLabel(n, l, result.NHeading, f.columnName(e.col)), true
}

// toldSentence is a sentence of the text that counts subjects by group.
type toldSentence struct {
	text  string
	place paper.Place
	last  bool // it counts those who stayed to the end
}

// findTold gathers the sentences of abstract, methods and results with more than
// one count of subjects.
func (b *binder) findTold() {
	for i := range b.doc.Blocks {
		bl := &b.doc.Blocks[i]
		if bl.Kind != paper.Paragraph || bl.Zone != paper.Results && bl.Zone != paper.Abstract && bl.Zone != paper.Methods {
			continue
		}
		for _, sp := range segments(bl.Text.S) {
			s := clean(bl.Text.S[sp.Start:sp.End])
			if len(s) > 600 || !counts(s) || planWord.MatchString(s) || leftWord.MatchString(s) {
				continue
			}
			b.told = append(b.told, toldSentence{text: s, place: bl.Text.Between(sp.Start, sp.End), last: flowWord.MatchString(s)})
		}
	}
}

// counts reports two counts of subjects or sizes, or more, in a sentence.
func counts(s string) bool {
	if strings.ContainsAny(s, "0123456789") && len(nMention.FindAllStringIndex(fold(s), 2)) == 2 {
		return true
	}
	return len(twoCounts.FindAllStringIndex(s, 2)) == 2
}

var twoCounts = pattern.MustCompile(`(?i)\b(?:[0-9]{1,5}|` + census.Words + `)\s+(?:[a-z-]+\s+){1,3}?` + census.Subjects + `\b`)

var leftWord = pattern.MustCompile(`(?i)\b(?:drop(?:ped)?[- ]?outs?|withdr[ae]w\w*|lost to|excluded|discontinu\w+|died|deaths?|adverse|missing|declined|refused|events?|developed|experienced|failed)\b`)

// toldSize reads the n of an arm in the text's sentences that count two or more
// arms of the table: at the start those that enrolled, later those that stayed.
// Sentences that differ give nothing.
func (b *binder) toldSize(f *frame, x *context) (size, bool) {
	if x.contrast || x.subgroup != "" || x.arm == "" || !f.aboutArms(x.arm) {
		return size{}, false
	}
	later := !atBaseline(x)
	var first, last toldN
	for _, s := range b.told {
		n, ok := b.toldOf(f, s.text, x.arm)
		if !ok || !b.othersTold(f, s.text, x.arm) {
			continue
		}
		at := &first
		if s.last {
			at = &last
		}
		at.add(n, s)
	}
	pick := first
	if later && last.n > 0 || first.n == 0 {
		pick = last
	}
	if pick.n == 0 || pick.differ || last.n > 0 && first.n > 0 && last.n > first.n {
		return size{}, false
	}
	return size{n: pick.n, from: result.NElsewhere, words: "the text", text: shorten(pick.from.text, 200), place: pick.from.place, told: true}, true
}

// toldN is the n that sentences give an arm.
type toldN struct {
	n      int
	differ bool
	from   toldSentence
}

func (t *toldN) add(n int, s toldSentence) {
	if t.n == 0 {
		t.n, t.from = n, s
	}
	t.differ = t.differ || t.n != n
}

// toldOf reads the n that a sentence gives an arm by its name, by the part of its
// name before a colon, by the words that tell it from the other arms, or by what
// its abbreviation stands for.
func (b *binder) toldOf(f *frame, s, arm string) (int, bool) {
	names := []string{arm, cutAt(arm, ":"), f.distinct(arm)}
	for _, w := range words(f.distinct(arm)) {
		if len(w) > 3 {
			names = append(names, w)
		}
	}
	for _, name := range append(names, b.longNames(f, arm)...) {
		if name == "" {
			continue
		}
		if n, ok := nForArm(s, name, f.otherArms(arm)); ok && n > 1 {
			return n, true
		}
		if n, ok := numberBefore(s, name); ok {
			return n, true
		}
	}
	return 0, false
}

// numberBefore reads "six healthy colonies and 7 robbed colonies": the number is
// followed by the arm's name and what is counted.
func numberBefore(s, name string) (int, bool) {
	low, stem := fold(s), strings.TrimSuffix(armWords(name), "s")
	if len(stem) < 4 {
		return 0, false
	}
	at := strings.Index(low, stem)
	if at < 0 || at > 0 && letterAt(low, at-1) {
		return 0, false
	}
	m := countEnd.FindStringSubmatch(low[max(0, at-40):at])
	if m == nil || !countedThing.MatchString(low[at+len(stem):min(len(low), at+len(stem)+40)]) {
		return 0, false
	}
	n, ok := census.Number(m[1])
	return n, ok && n > 1
}

var (
	countEnd     = pattern.MustCompile(`(?:^|[^\w.,-])([0-9]{1,5}|` + census.Words + `)\s+(?:[a-z-]+\s+)?$`)
	countedThing = pattern.MustCompile(`^[a-z]*\s+(?:(?:and|or)\s+\S+\s+\S+\s+)?` + census.Subjects + `\b`)
)

// othersTold reports that the sentence gives another arm of the table an n, too.
func (b *binder) othersTold(f *frame, s, arm string) bool {
	for _, o := range f.armNames() {
		if armWords(o) == armWords(arm) {
			continue
		}
		if _, ok := b.toldOf(f, s, o); ok {
			return true
		}
	}
	return false
}

var shortName = pattern.MustCompile(`^[A-Z][A-Za-z0-9]{0,5}$`)

// longNames gives what an arm's abbreviation stands for: by the notes and caption
// of its table, "SG: syrup group", or by the text, "syrup group (SG)".
func (b *binder) longNames(f *frame, arm string) []string {
	if !shortName.MatchString(arm) || strings.ToLower(arm[1:]) == arm[1:] && len(arm) > 3 {
		return nil
	}
	if got, ok := f.memo.long[arm]; ok {
		return got
	}
	var out []string
	defined := pattern.MustCompile(`\b` + arm + `\s*[:=,–-]\s*([A-Za-z][^;.,:()=]{2,50})`)
	runs := []string{f.tab.Caption.S}
	for _, n := range f.notes.list {
		runs = append(runs, n.run.S)
	}
	for _, s := range runs {
		if m := defined.FindStringSubmatch(s); m != nil {
			out = append(out, strings.TrimSpace(m[1]))
		}
	}
	inText := pattern.MustCompile(`((?:[A-Za-z+-]+\s+){1,4})\(` + arm + `\b`)
	for i := range b.doc.Blocks {
		if bl := &b.doc.Blocks[i]; bl.Kind == paper.Paragraph && strings.Contains(bl.Text.S, "("+arm) {
			if m := inText.FindStringSubmatch(bl.Text.S); m != nil {
				ws := strings.Fields(m[1])
				for k := max(0, len(ws)-2); k < len(ws); k++ {
					out = append(out, strings.Join(ws[k:], " "))
				}
				break
			}
		}
	}
	for i, name := range out {
		out[i] = strings.TrimSpace(strings.NewReplacer(" groups", "", " group", "", " arm", "").Replace(name))
	}
	f.memo.long[arm] = out
	return out
}
