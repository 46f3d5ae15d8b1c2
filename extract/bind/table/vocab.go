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
