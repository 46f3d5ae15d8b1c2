package prose

import (
	"sort"
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/pattern"
)

// functionWords are what sentences have and rows of a table have not.
var functionWords = map[string]bool{}

func init() {
	for _, w := range strings.Fields(`the a an of in and was were is are with for by to at that this from had has have not no on as than
		between among after during which we our their its be been or but did who these those it both`) {
		functionWords[w] = true
	}
}

// tally counts the words, function words and numbers of a stretch; numbers that
// come with their own word (95% CI 0.9 to 2.8, p = 0.03, n = 42) do not count.
type tally struct{ words, function, numbers int }

func (p *para) tally(from, to int) tally {
	var t tally
	k := sort.Search(len(p.r.Items), func(k int) bool { return p.r.Items[k].End > from })
	for i := p.token(from); i < len(p.r.Tokens) && p.r.Tokens[i].Start < to; i++ {
		switch tok := p.r.Tokens[i]; tok.Kind {
		case grammar.TokWord:
			if functionWords[tok.Value] {
				t.function++
			}
			if len(tok.Value) > 1 {
				t.words++
			}
		case grammar.TokNumber:
			for k < len(p.r.Items) && p.r.Items[k].End <= tok.Start {
				k++
			}
			if k < len(p.r.Items) && p.r.Items[k].Start <= tok.Start && worded(&p.r.Items[k]) {
				continue
			}
			t.numbers++
		}
	}
	return t
}

func worded(it *grammar.Item) bool {
	switch it.Kind {
	case grammar.KindPValue, grammar.KindSampleSize, grammar.KindTest, grammar.KindDF:
		return true
	}
	return it.Spread != ""
}

// isProse reports that a block reads as sentences. Rows of a table that a reader
// took for a paragraph do not: their results have lost their headings.
func (p *para) isProse() bool {
	t := p.tally(0, len(p.s))
	return t.words >= 6 && t.function >= 2 && (t.numbers <= t.words || t.function >= 4 && 2*t.numbers <= 3*t.words) || p.shortSentence(t)
}

// shortSentence reports a block that is one short sentence, from a capital over
// a verb to the full stop: "Mean mass was 12.1 kg (SD 1.2; n = 9)."
func (p *para) shortSentence(t tally) bool {
	s := strings.TrimSpace(p.s)
	return t.words >= 4 && t.numbers <= t.words && capital(s) && strings.HasSuffix(s, ".") && len(p.ends) == 1 && verb.MatchString(s)
}

var verb = pattern.MustCompile(`[\pL)] (?:was|were|is|are|had|has|averaged|rose|fell|weighed) (?:[\pL ]{0,20})[0-9<>−-]`)

// inSentence reports that the sentence around byte b has words enough for its
// numbers.
func (p *para) inSentence(b int) bool {
	from, to := p.sentence(b)
	t := p.tally(from, to)
	return t.words >= 2 && t.numbers <= 2*t.words+3 && 5*t.function >= t.numbers-20
}
