package table

import (
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// vocabulary is what the whole paper tells about words: which words its running
// text uses, and which headings of its tables name arms.
type vocabulary struct {
	lex    *lexicon
	text   map[string]bool
	groups map[string]bool // folded names before "group" or "arm" in the text
	arms   map[string]bool // folded names of arms, as table headings print them with an n
}

func newVocabulary(doc *paper.Document) *vocabulary {
	v := &vocabulary{lex: newLexicon(), text: map[string]bool{}, arms: map[string]bool{}, groups: map[string]bool{}}
	v.lex.never = shortForms(doc)
	for i := range doc.Blocks {
		b := &doc.Blocks[i]
		if b.Kind == paper.TableBlock && b.Table != nil {
			v.add(b.Table.Caption.S)
			continue
		}
		if b.Kind != paper.Reference {
			v.add(b.Text.S)
		}
	}
	return v
}

func (v *vocabulary) add(s string) {
	for _, w := range words(s) {
		v.text[w] = true
	}
	low := fold(s)
	for _, noun := range []string{" group", " arm"} {
		for from := 0; ; {
			k := strings.Index(low[from:], noun)
			if k < 0 {
				break
			}
			from += k + len(noun)
			v.addGroup(low[max(0, from-80):min(len(low), from+2)])
		}
	}
}

// addGroup takes the names before the last "group" or "arm" of a stretch of
// text.
func (v *vocabulary) addGroup(s string) {
	ms := groupName.FindAllStringSubmatch(s, -1)
	if len(ms) == 0 {
		return
	}
	for _, name := range ms[len(ms)-1][1:] {
		if name != "" && !noGroup[name] {
			v.groups[name] = true
		}
	}
}

var groupName = pattern.MustCompile(`(?:\b([a-z][\w+/-]{1,24})(?: \(n ?= ?\d+\))?,? (?:and|or|versus|vs\.?) (?:the )?)?\b([a-z][\w+/-]{1,24})(?: \(n ?= ?\d+\))? (?:groups?|arms?)\b`)

// noGroup are words before "group" that name no arm.
var noGroup = map[string]bool{"age": true, "study": true, "both": true, "each": true, "all": true, "two": true, "three": true, "four": true, "these": true, "between": true,
	"within": true, "per": true, "treatment": true, "the": true, "other": true, "same": true, "this": true, "that": true, "either": true, "one": true, "first": true, "second": true,
	"sub": true, "parallel": true, "different": true, "patient": true, "food": true, "muscle": true, "ethnic": true, "risk": true, "by": true, "of": true, "in": true, "to": true, "and": true,
	"our": true, "respective": true, "separate": true, "total": true, "whole": true, "any": true, "which": true, "every": true, "compared": true, "across": true, "among": true,
	"research": true, "working": true, "focus": true, "support": true, "blood": true, "functional": true, "peer": true, "small": true, "large": true, "new": true, "upper": true, "lower": true, "left": true, "right": true,
	"for": true, "with": true, "were": true, "was": true, "is": true, "are": true, "mean": true, "from": true, "on": true, "at": true, "as": true, "its": true, "their": true, "no": true, "significant": true,
	"income": true, "gender": true, "sex": true, "weight": true, "symptom": true, "pain": true, "outcome": true, "time": true, "baseline": true, "not": true, "homogeneous": true, "randomized": true, "randomised": true}

func (v *vocabulary) knows(word string) bool { return v.text[word] }

// shorts are short forms of ratios that are as often something else.
var shorts = []struct {
	form        string
	word        *pattern.Pattern
	other       *pattern.Pattern // what else it is short for
	asStatistic *pattern.Pattern // where the paper speaks of the ratio
}{
	{"HR", pattern.MustCompile(`\bHR\b`), pattern.MustCompile(`(?i)\bheart[- ]rates?\b`), pattern.MustCompile(`(?i)\bhazard`)},
	{"RR", pattern.MustCompile(`\bRR\b`), pattern.MustCompile(`(?i)\brespirat(?:ory|ion) rates?\b|\bRR intervals?\b`), pattern.MustCompile(`(?i)\brelative risks?\b|\brisk ratios?\b|\brate ratios?\b`)},
}

// shortForms gives the short forms that the paper uses for something else than
// a ratio, and nowhere for the ratio.
func shortForms(doc *paper.Document) map[string]bool {
	out := map[string]bool{}
	for _, sh := range shorts {
		other, ratio := false, false
		look := func(s string) {
			other = other || sh.other.MatchString(s)
			ratio = ratio || sh.asStatistic.MatchString(s)
		}
		for i := range doc.Blocks {
			b := &doc.Blocks[i]
			if b.Kind == paper.Reference {
				continue
			}
			if b.Table == nil {
				look(b.Text.S)
				continue
			}
			look(b.Table.Caption.S)
			for k := range b.Table.Notes {
				look(b.Table.Notes[k].Text.S)
			}
			for k := range b.Table.Cells {
				look(b.Table.Cells[k].Text.S)
			}
		}
		if other && !ratio {
			out[sh.form] = true
		}
	}
	return out
}

// unname takes the statistic from short forms that mean none in the paper.
func (p *phrase) unname(never map[string]bool) {
	if len(never) == 0 {
		return
	}
	for i := range p.pairs {
		q := &p.pairs[i]
		if q.Statistic != "ratio" || !never[strings.TrimSpace(q.text[q.StatisticAt.Start:q.StatisticAt.End])] {
			continue
		}
		q.Statistic, q.Measure, q.Model = "", "", ""
		if q.Spread == "" {
			p.terms--
			p.onlyTerms = false
		}
	}
}
