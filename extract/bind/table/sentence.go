package table

import (
	"strconv"
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// markedN reads the n for the arm out of the notes that marks lead to.
func (f *frame) markedN(marks []string, x *context) (size, bool) {
	for _, m := range marks {
		for _, nt := range f.notes.marked(m) {
			if n, ok := nForArm(nt.run.S, x.arm, f.otherArms(x.arm)); ok {
				return size{n: n, from: result.NElsewhere, words: nt.from, text: shorten(clean(nt.run.S), 200), place: nt.run.At(0)}, true
			}
		}
	}
	return size{}, false
}

// noteSize reads an n in the notes: for this arm, or the only one.
func (f *frame) noteSize(e *estimate, x *context) (size, bool) {
	for _, nt := range f.notes.general() {
		if n, ok := nForArm(nt.run.S, x.arm, f.otherArms(x.arm)); ok {
			return size{n: n, from: result.NElsewhere, words: nt.from, text: shorten(clean(nt.run.S), 200), place: nt.run.At(0)}, true
		}
	}
	return size{}, false
}

var nFor = pattern.MustCompile(`(?i)\bn\s*[=:]\s*(\d[\d,]*)\s+(?:for|in|at)\s+(?:the )?([^.;,]{2,60})`)

// rowNote reads "n = 38 for protein" and "n = 38 at week 12" out of the notes,
// for the rows or times that they name.
func (f *frame) rowNote(e *estimate, x *context) (size, bool) {
	marked := map[string]bool{}
	for _, l := range f.path(e.row, e.col) {
		for _, m := range l.marks {
			marked[m] = true
		}
	}
	for _, n := range f.notes.list {
		if n.mark != "" && !marked[n.mark] {
			continue
		}
		for _, m := range nFor.FindAllStringSubmatch(clean(n.run.S), -1) {
			if !f.about(m[2], x) {
				continue
			}
			v, err := strconv.Atoi(strings.ReplaceAll(m[1], ",", ""))
			if err == nil && v > 0 {
				return size{n: v, from: result.NElsewhere, words: n.from, text: shorten(clean(n.run.S), 200), place: n.run.At(0)}, true
			}
		}
	}
	return size{}, false
}

// about reports that the words name the outcome or time of the result.
func (f *frame) about(s string, x *context) bool {
	have := map[string]bool{}
	for _, w := range words(x.outcome + " " + x.time + " " + x.subgroup) {
		have[singularWord(w)] = true
	}
	some := false
	for _, w := range words(s) {
		w = singularWord(w)
		if noteFiller[w] {
			continue
		}
		if !have[w] {
			return false
		}
		some = true
	}
	return some
}

func singularWord(w string) string {
	if len(w) > 3 && strings.HasSuffix(w, "s") {
		return w[:len(w)-1]
	}
	return w
}

var noteFiller = map[string]bool{"score": true, "the": true, "value": true, "measure": true, "data": true, "all": true, "of": true, "analysi": true, "and": true}

// captionSize reads an n in the caption: beside the arm's name, or the only one
// where the table is about one arm.
func (f *frame) captionSize(_ *estimate, x *context) (size, bool) {
	c := &f.tab.Caption
	for _, name := range f.otherNames(x.arm) {
		if n, ok := nForArm(c.S, name, f.otherArms(x.arm)); ok {
			return size{n: n, from: result.NCaption, words: "caption", text: shorten(clean(c.S), 200), place: c.At(0)}, true
		}
	}
	// "fed with syrup (n = 13) or water (n = 13)": the same for every arm.
	if p := parsePhrase(textOf(c)); len(p.ns) > 1 && (len(f.armNames()) == 0 || len(p.ns) == len(f.armNames())) && !x.contrast {
		for _, n := range p.ns {
			if n.Value.Value != p.ns[0].Value.Value {
				return size{}, false
			}
		}
		if n := number(p.ns[0].Value); n > 0 {
			return size{n: n, from: result.NCaption, words: "caption", text: shorten(clean(c.S), 200), place: c.At(p.ns[0].Start)}, true
		}
	}
	return size{}, false
}

// otherNames gives the arm's name and, of two arms of which one is the control,
// the general words that captions use for them.
func (f *frame) otherNames(arm string) []string {
	out := []string{arm}
	names := f.armNames()
	if len(names) != 2 || !f.aboutArms(arm) {
		return out
	}
	c0, c1 := controls.MatchString(names[0]), controls.MatchString(names[1])
	if c0 == c1 {
		return out
	}
	if controls.MatchString(arm) {
		return append(out, "control")
	}
	return append(out, "intervention", "treatment", "experimental")
}

// loneSize reads the only n of caption or notes where the table has one arm.
func (f *frame) loneSize(e *estimate, x *context) (size, bool) {
	if x.contrast || (f.armsInColumns() || f.armRows) && len(f.armNames()) != 1 || x.subgroup != "" {
		return size{}, false
	}
	for k := 0; k < f.stub; k++ {
		for _, l := range f.heads[k] {
			if n, ok := f.lex.lastN(l); ok {
				return sizeOfLabel(n, l, result.NHeading, f.columnName(k)), true
			}
		}
	}
	if s, ok := f.captionN(); ok {
		return s, true
	}
	for _, nt := range f.notes.general() {
		if s, ok := onlySize(nt.run, result.NElsewhere, nt.from); ok {
			return s, true
		}
	}
	return size{}, false
}

var nMention = pattern.MustCompile(`(?i)(?:\bn\s*[=:]\s*(\d[\d,]*))|[(\[]\s*(\d[\d,]*)\s*[)\]]|\b(\d[\d,]*)\s+(?:` + census.Subjects + `|for|in|as|with)\b`)

var (
	nOfNext  = pattern.MustCompile(`\bn\s*[=:]\s*(\d[\d,]*)\s+(?:for|in)\s+(?:the )?$`)
	noCount  = pattern.MustCompile(`(?:[-–—/.<>=≤≥+±]|\b(?:weeks?|days?|months?|years?|hours?|visits?|phases?|periods?|times?|tables?|figures?|figs?\.?|grades?|stages?|to|and|versus|than|score))\s*$`) // before a number that counts nobody: "weeks 1–3 for syrup"
	nextName = pattern.MustCompile(`^\s+(?:for|in)\s+\w`)
)

// nForArm finds in a sentence the n that stands with an arm's name: "(n = 42)"
// behind it, "42 colonies in the syrup arm", "Syrup (42)".
func nForArm(s, arm string, others []string) (int, bool) {
	name := armWords(arm)
	if len(name) == 0 {
		return 0, false
	}
	low := fold(s)
	at := wordIndex(low, name)
	if at < 0 && totals[name] {
		if m := totalMention.FindStringSubmatch(low); m != nil {
			v, err := strconv.Atoi(strings.ReplaceAll(m[1], ",", ""))
			return v, err == nil && v > 0
		}
	}
	if at < 0 {
		return 0, false
	}
	for _, o := range others {
		// "placebo" inside "placebo plus syrup": the longer name owns the words.
		if len(o) > len(name) && strings.Contains(o, name) && strings.Contains(low, o) && strings.Index(low, o) <= at {
			return 0, false
		}
	}
	end := at + len(name)
	if m := nOfNext.FindStringSubmatchIndex(low[max(0, at-24):at]); m != nil {
		return intAt(low[max(0, at-24):at], m) // "n = 42 for syrup"
	}
	// Behind: only a few words may stand between.
	after := low[end:min(len(low), end+30)]
	if m := nMention.FindStringSubmatchIndex(after); m != nil && m[0] <= 16 && !strings.ContainsAny(after[:m[0]], ".;") && m[6] < 0 && !nextName.MatchString(after[m[1]:]) {
		return intAt(after, m)
	}
	// Before: "42 colonies in the syrup group".
	start := max(0, at-40)
	before := low[start:at]
	ms := nMention.FindAllStringSubmatchIndex(before, -1)
	if len(ms) > 0 {
		m := ms[len(ms)-1]
		if m[6] >= 0 && !strings.ContainsAny(before[m[1]:], ".;,0123456789") && !countsNobody(before, m, start) {
			return intAt(before, m)
		}
	}
	return 0, false
}

// countsNobody reports a bare "3 for" whose number belongs to words before it.
func countsNobody(before string, m []int, start int) bool {
	said := before[m[0]:m[1]]
	if !strings.HasSuffix(said, " for") && !strings.HasSuffix(said, " in") && !strings.HasSuffix(said, " as") && !strings.HasSuffix(said, " with") {
		return false
	}
	return m[0] == 0 && start > 0 || noCount.MatchString(before[:m[0]])
}

// wordIndex finds name in low as whole words.
func wordIndex(low, name string) int {
	for from := 0; from < len(low); {
		k := strings.Index(low[from:], name)
		if k < 0 {
			return -1
		}
		k += from
		end := k + len(name)
		if (k == 0 || !letterAt(low, k-1)) && (end >= len(low) || !letterAt(low, end)) {
			return k
		}
		from = k + 1
	}
	return -1
}

// totals are names of a column for all arms together.
var totals = map[string]bool{"total": true, "all": true, "overall": true, "all patients": true, "all participants": true, "all subjects": true, "entire cohort": true, "whole group": true, "total sample": true, "combined": true, "combined groups": true, "both groups": true, "pooled": true, "whole sample": true, "all groups": true, "total group": true, "study population": true, "entire group": true, "all arms": true}

var totalMention = pattern.MustCompile(`\b(\d[\d,]*) (?:patients|subjects|participants|women|men|children|colonies|persons|people|individuals|cases)\b`)

func letterAt(s string, i int) bool {
	return s[i] >= 'a' && s[i] <= 'z' || s[i] >= '0' && s[i] <= '9' || s[i] >= 0x80
}

func intAt(s string, m []int) (int, bool) {
	for k := 2; k+1 < len(m); k += 2 {
		if m[k] >= 0 {
			v, err := strconv.Atoi(strings.ReplaceAll(s[m[k]:m[k+1]], ",", ""))
			return v, err == nil && v > 0
		}
	}
	return 0, false
}

// armWords is the name of an arm for looking it up in sentences.
func armWords(arm string) string {
	low := fold(arm)
	for _, suffix := range []string{" group", " arm", " groups", " arms"} {
		low = strings.TrimSuffix(low, suffix)
	}
	low = strings.TrimPrefix(low, "the ")
	if len([]rune(low)) < 2 {
		return ""
	}
	return low
}
