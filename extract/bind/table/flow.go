package table

import (
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// flowSentence is a sentence of the results that counts who was followed up.
type flowSentence struct {
	text  string
	place paper.Place
	each  int      // "28 colonies in each group"; 0 where it names groups
	times []string // folded time points in it
}

var (
	flowWord = pattern.MustCompile(`(?i)\bfollow(?:ed)?[- ]?up\b|\bcompleted\b|\bcompleters\b|\bavailable\b|\banaly[sz]ed\b|\bincluded in the (?:final )?analys[ie]s\b|\bevaluated\b|\bassessed\b|\bremained\b`)
	planWord = pattern.MustCompile(`(?i)\bpower\b|\bsample size\b|\brequired?\b|\bneeded\b|\bplanned\b|\bcalculat|\bdetect\b|\bwould\b|\blost\b.{0,20}$`)
	inEach   = pattern.MustCompile(`(?i)\b(\d{1,5}|[a-z]+(?:[- ][a-z]+)?)\s+(?:patients|subjects|participants|women|men|children|colonies|individuals|people|persons|animals|adults|infants)\s+(?:in|from|of|per)\s+(?:each|both|either)?\s*(?:of the )?(?:two |three |four )?(?:study |treatment )?(?:group|arm)s?\b`)
)

// findFlow gathers the sentences of abstract and results that count who was
// followed up.
func (b *binder) findFlow() {
	for i := range b.doc.Blocks {
		bl := &b.doc.Blocks[i]
		if bl.Kind != paper.Paragraph || bl.Zone != paper.Results && bl.Zone != paper.Abstract {
			continue
		}
		if !strings.ContainsAny(bl.Text.S, "0123456789") && !strings.Contains(bl.Text.S, "each") {
			continue
		}
		for _, sp := range segments(bl.Text.S) {
			s := clean(bl.Text.S[sp.Start:sp.End])
			if len(s) > 500 || !hasLetter(s) || !flowWord.MatchString(s) || planWord.MatchString(s) {
				continue
			}
			fs := flowSentence{text: s, place: bl.Text.Between(sp.Start, sp.End)}
			if m := inEach.FindStringSubmatch(s); m != nil && strings.Contains(strings.ToLower(m[0]), "each") {
				fs.each, _ = census.Number(m[1])
			}
			for _, t := range timesIn(s) {
				if hasDigit(t) {
					fs.times = append(fs.times, fold(t))
				}
			}
			if fs.each > 0 || nMention.MatchString(s) {
				b.flow = append(b.flow, fs)
			}
		}
	}
}

// flowSize finds the n of an arm at a later time in the text's own count.
func (b *binder) flowSize(i int, f *frame, x *context) (size, bool) {
	if atBaseline(x) || x.arm == "" || !f.aboutArms(x.arm) {
		return size{}, false
	}
	// It cannot exceed the arm's n elsewhere; far below it, something else was
	// counted.
	whole, known := b.otherSize(i, x.arm)
	for _, s := range b.flow {
		if !sameTime(s.times, fold(x.time)) {
			continue
		}
		n, ok := s.each, s.each > 0
		if !ok {
			n, ok = nForArm(s.text, x.arm, f.otherArms(x.arm))
		}
		if !ok {
			if k := f.distinct(x.arm); k != "" {
				n, ok = nForArm(s.text, k, nil)
			}
		}
		if ok && (!known && s.each > 0 || known && n <= whole.n && 2*n >= whole.n) {
			return size{n: n, from: result.NElsewhere, words: "the text of the results", text: shorten(s.text, 200), place: s.place}, true
		}
	}
	return size{}, false
}

// aboutArms reports that the table sets two or more arms apart, of which the
// named is one.
func (f *frame) aboutArms(arm string) bool {
	names := f.armNames()
	if len(names) < 2 {
		return false
	}
	for _, a := range names {
		if armWords(a) == armWords(arm) {
			return true
		}
	}
	return false
}

// distinct gives the words of an arm's name that no other arm of the table has.
func (f *frame) distinct(arm string) string {
	other := map[string]bool{}
	for _, o := range f.otherArms(arm) {
		for _, w := range words(o) {
			other[w] = true
		}
	}
	var out []string
	for _, w := range words(armWords(arm)) {
		if !other[w] && len(w) > 2 {
			out = append(out, w)
		}
	}
	return strings.Join(out, " ")
}

// sameTime reports that a sentence is about the time of a result: it names no
// time, or one with the same numbers.
func sameTime(times []string, at string) bool {
	if len(times) == 0 {
		return true
	}
	want := digitsOf(at)
	if want == "" {
		return false
	}
	for _, t := range times {
		if digitsOf(t) == want {
			return true
		}
	}
	return false
}

func digitsOf(s string) string {
	var b strings.Builder
	for _, r := range s {
		if r >= '0' && r <= '9' {
			b.WriteRune(r)
		} else if b.Len() > 0 && b.String()[b.Len()-1] != ' ' {
			b.WriteByte(' ')
		}
	}
	return strings.TrimSpace(b.String())
}
