package prose

import (
	"strings"

	"halfspan/extract/bind/convention"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// said is a word for a spread that was printed, with or without numbers: later
// intervals and brackets may share it.
type said struct {
	item int // index of the item
	grammar.Meaning
	level    string
	levelAt  grammar.Span
	at       grammar.Span
	bracket  bool   // its own interval stood in a bracket with it
	announce bool   // no numbers of its own: "mean (95% CI)"
	sep      string // of its own interval
	oneSided bool
}

// cand is a spread with the estimate it is about.
type cand struct {
	item     int // the spread's item
	est      grammar.Number
	estItem  int // -1: none printed
	given    result.GivenAs
	level    string
	levelAt  grammar.Span
	givenAt  grammar.Span // the word that says what it is; zero where the convention says
	conv     *conventionSource
	meaning  grammar.Meaning
	value    grammar.Number
	lower    grammar.Number
	upper    grammar.Number
	start    int // of the first digit of the spread
	flags    []result.Flag
	oneSided bool
	quartile bool // the middle of three quartiles is the estimate
}

// spread looks at item k: if it is a spread that can be a result, its candidate
// is kept; if it is a word for one, it is remembered.
func (p *para) spread(k int) {
	it := &p.r.Items[k]
	switch it.Kind {
	case grammar.KindTerm:
		if it.Spread != "" {
			p.said = append(p.said, said{item: k, Meaning: it.Meaning, level: it.Level, levelAt: it.LevelAt, at: it.WordAt,
				announce: true, oneSided: it.OneSided})
		}
	case grammar.KindInterval:
		if it.Spread != "" {
			p.said = append(p.said, said{item: k, Meaning: it.Meaning, level: it.Level, levelAt: it.LevelAt, at: it.WordAt,
				bracket: it.Bracket > 0, sep: it.Sep, oneSided: it.OneSided})
			p.wordInterval(k)
			return
		}
		p.bareInterval(k)
	case grammar.KindPlusMinus:
		p.plusMinus(k)
	case grammar.KindSpread:
		p.said = append(p.said, said{item: k, Meaning: it.Meaning, at: it.WordAt, bracket: it.Bracket > 0})
		p.wordSpread(k)
	case grammar.KindNumber:
		if it.Bracket > 0 && it.Alone {
			p.bareBracket(k)
		}
	}
}

// wordInterval takes an interval whose word stands with it.
func (p *para) wordInterval(k int) {
	it := &p.r.Items[k]
	c := cand{item: k, given: convention.GivenAs(it.Spread), level: it.Level, levelAt: it.LevelAt, givenAt: it.WordAt, meaning: it.Meaning,
		lower: it.Lower, upper: it.Upper, start: it.Lower.Start, oneSided: it.OneSided, estItem: -1}
	if third, ok := p.thirdQuartile(k); ok {
		c.est, c.estItem, c.upper, c.quartile = it.Upper, k, third, true
		p.cands = append(p.cands, c)
		return
	}
	if p.refusedInterval(k, c.given) {
		return
	}
	p.estimate(&c)
	if c.estItem < 0 || c.given == result.Range && p.rangeMisfit(&c) {
		return // the interval of a difference that is not printed is no result
	}
	p.cands = append(p.cands, c)
}

// rangeMisfit reports that a range and its number hardly belong together: the
// number lies outside, stands far off, or names a time.
func (p *para) rangeMisfit(c *cand) bool {
	e, ok := c.est.Float()
	if !ok || c.est.Rel != "" || timeLike(p, c.estItem) >= 3 && p.r.Items[c.estItem].Kind == grammar.KindNumber {
		return true
	}
	it := &p.r.Items[c.item]
	verb := strings.HasPrefix(p.s[it.Start:], "rang") && !strings.HasPrefix(p.s[it.Start:], "range")
	if near := p.gap(c, c.est); !near && (it.Follows || (verb || strings.HasPrefix(p.s[it.Start:], "ranged")) && !p.says(it.Start, central)) {
		return true
	}
	lo, ok1 := c.lower.Float()
	hi, ok2 := c.upper.Float()
	if ok1 && ok2 && lo > hi && hi >= 0 {
		return true
	}
	return p.within(c, e) != inside && !p.gap(c, c.est)
}

// thirdQuartile reads the last of "quartiles 5, 12, 48".
func (p *para) thirdQuartile(k int) (grammar.Number, bool) {
	it := &p.r.Items[k]
	if it.Spread != grammar.SpreadIQR || it.Sep != "," || k+1 >= len(p.r.Items) {
		return grammar.Number{}, false
	}
	next := &p.r.Items[k+1]
	if next.Kind != grammar.KindNumber || strings.TrimSpace(p.s[it.End:next.Start]) != "," || next.Bracket != it.Bracket {
		return grammar.Number{}, false
	}
	p.used[k+1] = true
	return next.Value, true
}

// bareInterval takes an interval without a word: one whose level was said
// before, or is said behind it in the same bracket, or is announced, or that
// the paper's conventions explain.
func (p *para) bareInterval(k int) {
	it := &p.r.Items[k]
	c := cand{item: k, lower: it.Lower, upper: it.Upper, start: it.Lower.Start, estItem: -1}
	if it.Bracket == 0 || !it.Alone && !p.firstInBracket(k) {
		if !p.commaForm(k, &c) {
			return
		}
	} else if !p.explain(k, &c) {
		return
	}
	if c.estItem < 0 || p.refusedInterval(k, c.given) {
		return
	}
	p.cands = append(p.cands, c)
}

// firstInBracket reports that only the bracket's opening stands before item k.
func (p *para) firstInBracket(k int) bool {
	it := &p.r.Items[k]
	return it.Bracket > 0 && strings.TrimSpace(p.s[p.r.Brackets[it.Bracket-1].Start+1:it.Start]) == ""
}

// explain finds what a bracketed bare interval is. Its estimate must stand
// before the bracket and lie within the bounds.
func (p *para) explain(k int, c *cand) bool {
	p.estimate(c)
	if c.estItem < 0 || len(c.flags) > 0 || !p.nextTo(c) {
		return false
	}
	if w := p.behind(k); w != nil {
		p.take(c, w)
		return true
	}
	if w := p.shared(k, grammar.SpreadCI, grammar.SpreadIQR, grammar.SpreadRange); w != nil {
		p.take(c, w)
		return true
	}
	return p.byConvention(k, c)
}

func (p *para) take(c *cand, w *said) {
	c.given, c.level, c.levelAt, c.givenAt, c.meaning, c.oneSided = convention.GivenAs(w.Spread), w.level, w.levelAt, w.at, w.Meaning, w.oneSided
}

// behind finds a word for the interval later in its own bracket: "(0.9–2.8, 95% CI)".
func (p *para) behind(k int) *said {
	it := &p.r.Items[k]
	if k+1 < len(p.r.Items) {
		n := &p.r.Items[k+1]
		if n.Kind == grammar.KindTerm && n.Spread != "" && n.Bracket == it.Bracket && n.Start-it.End < 12 && convention.GivenAs(n.Spread) != result.SD && convention.GivenAs(n.Spread) != result.SE {
			return &said{Meaning: n.Meaning, level: n.Level, levelAt: n.LevelAt, at: n.WordAt}
		}
	}
	return nil
}

// shareWithin is how many bytes behind a word for a spread a bare form may
// still share it when a sentence has ended between them.
const shareWithin = 300

// shared finds the word for a spread that item k shares: the last one said in
// the same sentence, or in the one before, near enough.
func (p *para) shared(k int, kinds ...string) *said {
	it := &p.r.Items[k]
	no := p.sentenceNo(it.Start)
	for i := len(p.said) - 1; i >= 0; i-- {
		w := &p.said[i]
		if w.at.End > it.Start {
			continue
		}
		d := no - p.sentenceNo(w.at.Start)
		if d > 1 || d == 1 && it.Start-w.at.End > shareWithin {
			return nil
		}
		if d == 1 && !w.announce && p.r.Items[w.item].Kind == grammar.KindInterval && it.Kind == grammar.KindInterval &&
			(p.r.Items[w.item].Lower.Percent || p.r.Items[w.item].Upper.Percent) != (it.Lower.Percent || it.Upper.Percent) {
			continue // another kind of value
		}
		for _, kind := range kinds {
			if w.Spread == kind {
				return w
			}
		}
	}
	return nil
}

// commaForm takes an interval outside any bracket of its own, "0.94, 0.80 to
// 1.12", whose level was said before in the same sentence.
func (p *para) commaForm(k int, c *cand) bool {
	it := &p.r.Items[k]
	w := p.shared(k, grammar.SpreadCI, grammar.SpreadIQR)
	if w == nil || p.sentenceNo(w.at.Start) != p.sentenceNo(it.Start) {
		return false
	}
	if w.sep != "" && w.sep != it.Sep {
		return false
	}
	p.estimate(c)
	if c.estItem < 0 || len(c.flags) > 0 {
		return false
	}
	switch strings.TrimSpace(p.s[c.est.End:it.Start]) {
	case ",", ";", ":", "(":
	case "and":
		if !w.announce {
			return false
		}
	default:
		return false
	}
	p.take(c, w)
	return true
}

// plusMinus takes "12.4 ± 1.3" and "12.4 (±1.3)".
func (p *para) plusMinus(k int) {
	it := &p.r.Items[k]
	c := cand{item: k, value: it.Value, start: it.Value.Start, meaning: it.Meaning, givenAt: it.WordAt, level: it.Level, levelAt: it.LevelAt, estItem: -1}
	if !it.Of.IsZero() {
		c.est, c.estItem = it.Of, k
	} else {
		p.estimate(&c)
		if c.estItem < 0 || !p.nextTo(&c) && it.Spread != grammar.SpreadCI {
			return
		}
	}
	if p.refusedPlusMinus(k, &c) {
		return
	}
	switch it.Spread {
	case "":
		if !p.explainSign(k, &c) {
			return
		}
	default:
		c.given = convention.GivenAs(it.Spread)
	}
	p.cands = append(p.cands, c)
}

// explainSign finds what a ± without a word means: a word behind it in the
// sentence, one announced or shared before it, the paper's declaration; else it
// stays unstated.
func (p *para) explainSign(k int, c *cand) bool {
	it := &p.r.Items[k]
	if k+1 < len(p.r.Items) {
		for j := k + 1; j < len(p.r.Items) && j < k+4; j++ {
			n := &p.r.Items[j]
			if n.Kind == grammar.KindTerm && (n.Spread == grammar.SpreadSD || n.Spread == grammar.SpreadSE) && n.Start-it.End < 30 &&
				p.sentenceNo(n.Start) == p.sentenceNo(it.Start) {
				c.given, c.givenAt = convention.GivenAs(n.Spread), n.WordAt
				return true
			}
		}
	}
	if w := p.shared(k, grammar.SpreadSD, grammar.SpreadSE); w != nil && p.sentenceNo(w.at.Start) == p.sentenceNo(it.Start) {
		c.given, c.givenAt = convention.GivenAs(w.Spread), w.at
		return true
	}
	p.signConvention(c)
	return true
}

// wordSpread takes "SD 1.3" with the number it is about.
func (p *para) wordSpread(k int) {
	it := &p.r.Items[k]
	c := cand{item: k, given: convention.GivenAs(it.Spread), value: it.Value, start: it.Value.Start, meaning: it.Meaning, givenAt: it.WordAt, estItem: -1}
	if c.given == "" || p.refusedSpread(k) {
		return
	}
	p.estimate(&c)
	if c.estItem < 0 {
		return
	}
	p.cands = append(p.cands, c)
}

// bareBracket takes "12.4 (1.3)" where a spread was announced or shared in the
// same sentence.
func (p *para) bareBracket(k int) {
	it := &p.r.Items[k]
	if p.looksCited(k) || it.Value.Value == "" || it.Value.Rel != "" || strings.HasPrefix(it.Value.Value, "-") {
		return
	}
	w := p.shared(k, grammar.SpreadSD, grammar.SpreadSE, grammar.SpreadIQR, grammar.SpreadCI, grammar.SpreadRange)
	c := cand{item: k, value: it.Value, start: it.Value.Start, estItem: -1}
	said := w != nil && (w.Spread == grammar.SpreadSD || w.Spread == grammar.SpreadSE) && (w.announce || w.bracket)
	if w != nil && !said {
		return
	}
	p.estimate(&c)
	if c.estItem < 0 || !p.nextTo(&c) || p.refusedBracket(&c) {
		return
	}
	if said {
		p.take(&c, w)
	} else if !p.declaredBracket(&c) {
		return
	}
	p.cands = append(p.cands, c)
}

// declaredBracket takes "a mean mass of 12.4 (1.3)" where the paper declares
// what stands in brackets behind its means. Decimals and the word must be there:
// nearly every other number in brackets is a count, a share or a citation.
func (p *para) declaredBracket(c *cand) bool {
	if c.est.Percent || c.value.Percent || decimals(c.est.Value) == 0 || decimals(c.value.Value) == 0 || p.planned(c.est.Start) {
		return false
	}
	a, ok := p.f.conv.Bracket(convention.Prose)
	if !ok || a.Conflict || !a.Bracket && a.Sign {
		return false
	}
	from, _ := p.sentence(c.est.Start)
	if !meanWord.MatchString(p.s[from:c.est.Start]) && !p.plainPair(c, a) {
		return false
	}
	c.given, c.conv = a.Spread, &conventionSource{a.Statement}
	return true
}

// plainPair reports "12.4 (1.3) kg" among the results of a paper that says what
// its brackets hold: both numbers printed alike, and a unit or the next such pair
// behind them.
func (p *para) plainPair(c *cand, a convention.Answer) bool {
	if !a.Bracket || p.block.Zone != paper.Results && p.block.Zone != paper.Abstract || decimals(c.est.Value) != decimals(c.value.Value) {
		return false
	}
	e, ok1 := c.est.Float()
	v, ok2 := c.value.Float()
	i := p.token(c.value.End)
	if !ok1 || !ok2 || v <= 0 || v >= e || i >= len(p.r.Tokens) || p.r.Tokens[i].Kind != grammar.TokClose {
		return false
	}
	for i++; i < len(p.r.Tokens); i++ {
		t := &p.r.Tokens[i]
		switch {
		case t.Kind == grammar.TokComma, t.Value == "and", t.Value == "vs", t.Value == "versus", t.Value == "to":
			continue
		}
		return t.Kind == grammar.TokNumber || unitWords[t.Value] || t.Kind == grammar.TokWord && i+1 < len(p.r.Tokens) && p.r.Tokens[i+1].Value == "/"
	}
	return false
}

var meanWord = pattern.MustCompile(`(?i)\b(?:means?|averaged?)\b`)
