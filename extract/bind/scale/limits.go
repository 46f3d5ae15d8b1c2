package scale

import (
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/pattern"
)

// span is a stretch of text that prints the limits of a scale.
type span struct {
	low, high  int
	start, end int // of the limits in the text
	clause     int // where the clause begins that leads to them
}

// Ways to print the limits of a scale. A bare bracket counts only behind the name of
// a scored outcome: see own.
var (
	scored = pattern.MustCompile(`(?i)\b(?:scor(?:e[sd]?|ing)|scales?|sub-?scales?|VAS|NRS|visual analogu?e|ratings?|rated|questionnaires?|inventory|index|points)\b`)
	limits = pattern.MustCompile(`(?i)(?:\b(?:possible |theoretical |total |score )*(?:ranges?|ranging|ranged)(?: of (?:possible )?(?:total )?(?:scores?|values))?\s*(?:is|was|are|=|:|,|from|between|of)?\s*(?:from|between)?\s*|\b(?:from|between)\s+|\bscales? (?:of|from|is|:)?\s*|[(\[:,]\s*|\b(?:VAS|NRS)\s*|\bscores?\s+)` +
		`(-?\d{1,3})(?:\s*(?:points?|mm|cm))?(?:\s*\([^()]{1,60}\)|\s*=\s*[^()\d,;.]{1,60}?)?\s*(?:-|–|—|−|~|\bto\b|\band\b)\s*(\d{1,4})\b`)
	bracket = pattern.MustCompile(`(?i)[(\[,]\s*(?:range:?|scale:?|score:?|scores?)?\s*(-?\d{1,2})\s*(?:-|–|—|−|~|to)\s*(\d{1,4})\s*(?:points?|mm|cm|scale|pts?\.?)?\s*[)\],]`)
	// plainly says that the limits are those of the scale, whatever they are.
	plainly = pattern.MustCompile(`(?i)\b(?:possible|theoretical)\b`)
	// observed are words behind which two numbers are what was observed; refused, who
	// was let in, one item of several, a time.
	observed = pattern.MustCompile(`(?i)\b(?:medians?|means?|averages?|IQR|inter-?quartile|quartiles?|observed|SD|CI|confidence|P)\b`)
	refused  = pattern.MustCompile(`(?i)\b(?:ages?|aged|years?|yrs|months?|weeks?|days?|hours?|min|minutes?|eligib\w+|inclusion|includ\w+|exclu\w+|criteri\w+|with a|patients with|each|items?|components?|per|categor\w+|grades?|increas\w+|decreas\w+|improv\w+|change[sd]?|cut-?offs?|threshold\w*)\b|%`)
	// units after the limits that are no scale's.
	otherUnit = pattern.MustCompile(`(?i)^\s*(?:%|[.,]\d|years?|yrs?|y\b|months?|weeks?|wks?|days?|d\b|hours?|h\b|hrs?|minutes?|min\b|s\b|sec|kg|g\b|mg|m\b|ml|l\b|kcal|kj|/|of\b|times|items?|×|x\b|°)`)
)

const (
	lookBack = 130 // bytes before the limits that belong to the same clause at most
	mostHigh = 1000
)

// spansOf finds the limits of scales that a text prints.
func spansOf(s string) []span {
	var out []span
	for _, m := range limits.FindAllStringSubmatchIndex(s, -1) {
		sp, ok := spanAt(s, m)
		if !ok {
			continue
		}
		if before := s[sp.clause:sp.start]; scored.MatchString(before+" "+tail(s, sp.end)) && !observed.MatchString(before) {
			out = append(out, sp)
		}
	}
	return out
}

// own finds the limits in the name of an outcome: "Ease of homing (0–10)".
func own(s string) (out []span) {
	if !scored.MatchString(s) {
		return nil
	}
	for _, m := range limits.FindAllStringSubmatchIndex(s, -1) {
		if sp, ok := spanAt(s, m); ok {
			out = append(out, sp)
		}
	}
	for _, m := range bracket.FindAllStringSubmatchIndex(s, -1) {
		if sp, ok := spanAt(s, m); ok {
			out = append(out, sp)
		}
	}
	return out
}

// tail is a little of what stands behind the limits: "0–10 scale".
func tail(s string, from int) string {
	rest := s[from:min(from+24, len(s))]
	if i := strings.IndexAny(rest, ".;()"); i >= 0 {
		rest = rest[:i]
	}
	return rest
}

func spanAt(s string, m []int) (span, bool) {
	low, err1 := strconv.Atoi(s[m[2]:m[3]])
	high, err2 := strconv.Atoi(s[m[4]:m[5]])
	if err1 != nil || err2 != nil || high > mostHigh || low >= high {
		return span{}, false
	}
	sp := span{low: low, high: high, start: m[2], end: m[5], clause: clauseStart(s, m[2])}
	before := s[sp.clause:sp.start]
	switch {
	case otherUnit.MatchString(s[sp.end:]), refused.MatchString(before):
		return span{}, false
	case low != 0 && low != 1 && !plainly.MatchString(before+" "+tail(s, sp.end)):
		return span{}, false // what was observed rather than what is possible
	case high-low < 2 || strings.HasPrefix(s[sp.end:], "."+digitAfter(s, sp.end+1)):
		return span{}, false
	}
	return sp, true
}

// digitAfter is the digit at a place of the text; a sign that no text has where
// there is none.
func digitAfter(s string, at int) string {
	if at < len(s) && s[at] >= '0' && s[at] <= '9' {
		return s[at : at+1]
	}
	return "\x00"
}

// clauseStart is where the clause begins in which the limits stand: behind the last
// full stop or semicolon, or behind the limits before.
func clauseStart(s string, at int) int {
	from := max(at-lookBack, 0)
	for !utf8.RuneStart(s[from]) {
		from++
	}
	back := s[from:at]
	cut := 0
	for i := 0; i < len(back); i++ {
		switch {
		case back[i] == ';':
			cut = i + 1
		case back[i] == '.' && i+1 < len(back) && back[i+1] == ' ':
			cut = i + 1
		case back[i] == ')' && digitAfter(back, i-1) != "\x00":
			cut = i + 1 // limits of another scale, or a reference
		}
	}
	return from + cut
}

// names are the words by which a text may speak of an outcome: its abbreviations,
// and its other words.
type names struct{ short, words []string }

// noName are words that say nothing of which outcome it is.
var noName = map[string]bool{"score": true, "scores": true, "scale": true, "total": true, "index": true, "mean": true, "sum": true, "points": true, "range": true,
	"baseline": true, "change": true, "final": true, "with": true, "from": true, "that": true, "after": true, "before": true, "weeks": true, "months": true, "days": true,
	"questionnaire": true, "inventory": true, "subscale": true, "overall": true, "rating": true, "number": true, "value": true, "level": true, "component": true}

// noShort are abbreviations that name no outcome.
var noShort = map[string]bool{"SD": true, "SE": true, "SEM": true, "CI": true, "IQR": true, "OR": true, "RR": true, "MD": true, "NS": true, "NA": true, "II": true, "III": true, "IV": true}

func namesOf(outcome string) names {
	var n names
	for _, w := range strings.FieldsFunc(outcome, func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsDigit(r) && r != '-' }) {
		upper := 0
		for _, r := range w {
			if unicode.IsUpper(r) {
				upper++
			}
		}
		lower := strings.ToLower(w)
		switch {
		case upper >= 2 && !noShort[w]:
			n.short = append(n.short, w)
		case utf8.RuneCountInString(w) >= 4 && !noName[lower]:
			n.words = append(n.words, lower)
		}
	}
	return n
}

// speaksOf reports that a clause names the outcome: by one of its abbreviations, or
// by all its words, of which there must be two or a long one.
func (n names) speaksOf(clause string) bool {
	for _, s := range n.short {
		if holdsWord(clause, s) {
			return true
		}
	}
	if len(n.words) == 0 || len(n.words) == 1 && utf8.RuneCountInString(n.words[0]) < 7 {
		return false
	}
	lower := strings.ToLower(clause)
	for _, w := range n.words {
		if !strings.Contains(lower, w) {
			return false
		}
	}
	return true
}

func holdsWord(s, word string) bool {
	for at := 0; ; {
		i := strings.Index(s[at:], word)
		if i < 0 {
			return false
		}
		i += at
		before, _ := utf8.DecodeLastRuneInString(s[:i])
		after, _ := utf8.DecodeRuneInString(s[i+len(word):])
		inWord := func(r rune) bool { return unicode.IsLetter(r) || unicode.IsDigit(r) }
		if !inWord(before) && !inWord(after) {
			return true
		}
		at = i + len(word)
	}
}
