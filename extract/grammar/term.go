package grammar

import "strings"

// termAt matches the longest term of the vocabulary at token i.
//
//	term = word { [ "-" ] word } [ "(" same term abbreviated ")" ]
//
// "confidence interval (CI)", "inter-quartile range", "odds ratio [OR]".
func (p *parser) termAt(i int) (Meaning, int, bool) {
	if i >= len(p.toks) || p.toks[i].Kind != TokWord {
		return Meaning{}, i, false
	}
	if i > 0 && !p.toks[i].Spaced && (p.toks[i-1].Kind == TokPeriod || p.src[p.toks[i-1].Start:p.toks[i-1].End] == "@") {
		return Meaning{}, i, false // part of an address: lab.se
	}
	for _, e := range vocabulary[singular(p.toks[i].Value)] {
		if p.toks[i].Value == "quartile" {
			break // "the highest quartile" is a group
		}
		if needsValue[e.words[0]] && i > 0 && !p.toks[i].Spaced && p.toks[i-1].Kind == TokNumber {
			continue // the b of "1b" is no coefficient
		}
		if (e.Spread == SpreadSD || e.Spread == SpreadSE) && len(e.words) == 1 && p.kind(i+1) == TokDash && !p.toks[i+1].Spaced && p.kind(i+2) == TokNumber && !p.toks[i+2].Spaced && whole(p.toks[i+2].Value) {
			continue // a name: SE-4
		}
		if e.exact && len(e.words) == 1 && p.kind(i+1) == TokDash && !p.toks[i+1].Spaced && p.kind(i+2) == TokWord && !p.toks[i+2].Spaced {
			continue // part of a longer name: HR-HPV
		}
		if end, ok := p.pattern(i, e); ok && (!needsValue[e.words[0]] || len(e.words) > 1 || p.hasValue(end)) {
			return e.Meaning, p.definition(end, e.Meaning), true
		}
	}
	return Meaning{}, i, false
}

// needsValue are one-letter terms that count only with a value or a bracketed
// spread behind them: "M = 12.4", "B (SE)".
var needsValue = map[string]bool{"No": true, "M": true, "B": true, "b": true, "β": true}

// hasValue looks a term's value up behind it; never from within itself, so that
// "B (B (B (" costs no more than its length.
func (p *parser) hasValue(i int) bool {
	if p.looking {
		return false
	}
	p.looking = true
	defer func() { p.looking = false }()
	switch p.kind(i) {
	case 0:
		return i == 1
	case TokEquals, TokColon, TokNumber:
		return true
	case TokPeriod:
		return !p.toks[i].Spaced && p.word(i-1) == "no" && (p.kind(i+1) == TokOpen || p.word(i+1) == "of")
	case TokDash, TokOpen:
		if p.word(i-1) == "no" && p.kind(i+1) == TokPercent {
			return true
		}
		_, _, ok := p.levelPhrase(i + 1)
		if !ok {
			var m Meaning
			m, _, ok = p.termAt(i + 1)
			ok = ok && m.Spread != ""
		}
		return ok || p.kind(i) == TokDash && p.kind(i+1) == TokNumber
	}
	return false
}

func (p *parser) pattern(i int, e entry) (int, bool) {
	for k, w := range e.words {
		if k > 0 {
			if i < len(p.toks) && (p.toks[i].Kind == TokDash && !p.toks[i].Spaced || isApostrophe(p.toks[i]) || p.toks[i].Kind == TokPeriod && !p.toks[i].Spaced) {
				i++ // inter-quartile, Cohen's d, Std. Error
			}
		}
		if i >= len(p.toks) || p.toks[i].Kind != TokWord {
			return i, false
		}
		t := p.toks[i]
		printed := p.src[t.Start:t.End]
		switch {
		case e.exact || lowerOnly[w]:
			if printed != w && !(lowerOnly[w] && p.valued(i, printed, w)) {
				return i, false
			}
		case singular(t.Value) != singular(strings.ToLower(w)):
			return i, false
		}
		i++
	}
	return i, true
}

// valued reports whether an ambiguous short word is printed as the term: in its
// own case and with a value or bracket after it ("se 0.3", "b = 0.42").
func (p *parser) valued(i int, printed, w string) bool {
	if printed != w || i+1 >= len(p.toks) {
		return false
	}
	switch p.toks[i+1].Kind {
	case TokEquals, TokColon:
		return true
	case TokNumber:
		return w == "se"
	}
	return false
}

func isApostrophe(t Token) bool { return t.Kind == TokOther && strings.ContainsAny(t.Value, "'’`ʼ") }

// definition skips a bracket that only gives the term's abbreviation.
func (p *parser) definition(i int, m Meaning) int {
	if p.kind(i) == TokComma && m.Spread != "" && p.short(i+1, m) {
		return i + 2 // "95% confidence interval, CI: 0.8 to 1.6"
	}
	if p.kind(i) == TokOpen && p.kind(i+1) == TokNumber && p.kind(i+2) == TokPercent && p.kind(i+4) == TokClose && p.short(i+3, m) {
		return i + 5 // "95% confidence interval (95% CI)"
	}
	if i+2 >= len(p.toks) || p.toks[i].Kind != TokOpen || p.toks[i+1].Kind != TokWord {
		return i
	}
	for _, e := range vocabulary[singular(p.toks[i+1].Value)] {
		if end, ok := p.pattern(i+1, e); ok && e.Spread == m.Spread && e.Statistic == m.Statistic && end < len(p.toks) && p.toks[end].Kind == TokClose {
			return end + 1
		}
	}
	return i
}

// short reports that the one word at i is another name of the same spread.
func (p *parser) short(i int, m Meaning) bool {
	for _, e := range vocabulary[singular(p.word(i))] {
		if _, ok := p.pattern(i, e); ok && len(e.words) == 1 && e.Spread == m.Spread && e.Spread != "" {
			return true
		}
	}
	return false
}

// modifiers are words that may stand between a level and the word interval.
var modifiers = map[string]string{
	"two": "", "sided": "", "one": "one-sided", "tailed": "", "bootstrap": "bootstrap", "bootstrapped": "bootstrap", "bca": "bootstrap",
	"percentile": "bootstrap", "bias": "bootstrap", "corrected": "", "accelerated": "", "and": "", "simultaneous": "simultaneous",
	"exact": "", "wald": "", "profile": "", "likelihood": "", "adjusted": "", "bayesian": "bayesian", "asymptotic": "", "robust": "", "the": "",
	"wilson": "", "clopper": "", "pearson": "", "unadjusted": "", "asymmetric": "", "binomial": "",
}

// levelPhrase reads the words that announce an interval, with its level:
//
//	level-phrase = [ level "%" ] { modifier } ci-word [ level "%" ] | ci-word
//
// "95% CI", "95 % two-sided confidence interval (CI)", "CI 95%", "95%-CI".
func (p *parser) levelPhrase(i int) (Item, int, bool) {
	it := Item{Kind: KindTerm}
	k := i
	if p.kind(k) == TokNumber && plausibleLevel(p.toks[k].Value) {
		it.Level, it.LevelAt = p.toks[k].Value, p.toks[k].Span
		k++
		switch {
		case p.kind(k) == TokPercent:
			k++
		case p.word(k) == "percent":
			k++
		case p.word(k) == "per" && p.word(k+1) == "cent":
			k += 2
		case p.word(k) == "ci" || p.word(k) == "cis" || p.word(k) == "confidence":
		default:
			return it, i, false
		}
	}
	design := ""
	for steps := 0; steps < 8; steps++ {
		if p.kind(k) == TokDash || p.kind(k) == TokNumber && p.toks[k].Value == "2" && p.kind(k+1) == TokDash ||
			p.kind(k) == TokNumber && p.toks[k].Value == "1" && p.kind(k+1) == TokDash {
			if it.Level == "" {
				break
			}
			if p.kind(k) == TokNumber && p.toks[k].Value == "1" {
				it.OneSided = true
			}
			k++
			continue
		}
		d, ok := modifiers[p.word(k)]
		if !ok || it.Level == "" && k == i && p.word(k) != "bootstrap" && p.word(k) != "bootstrapped" {
			break
		}
		if d == "one-sided" {
			it.OneSided = true
		} else if d != "" {
			design = d
		}
		k++
	}
	m, end, ok := p.termAt(k)
	switch {
	case ok && m.Spread == SpreadCI:
	case it.Level != "" && (p.word(k) == "cl" || p.word(k) == "cls"):
		m, end = Meaning{Spread: SpreadCI}, k+1 // confidence limits, or a small L for the capital I
	default:
		return it, i, false
	}
	it.Meaning = m
	if design != "" {
		it.Design = design
	}
	it.WordAt = Span{p.toks[i].Start, p.toks[end-1].End}
	if it.Level == "" {
		end = p.levelAfter(&it, end)
	}
	it.Span = Span{p.toks[i].Start, p.toks[end-1].End}
	return it, end, true
}

// levelAfter reads the level of "CI 95%", "CI (95%)".
func (p *parser) levelAfter(it *Item, k int) int {
	at := k
	if p.kind(at) == TokOpen || p.kind(at) == TokColon || p.kind(at) == TokComma || p.kind(at) == TokDash {
		at++
	}
	opened := p.kind(k) == TokOpen
	if p.kind(at) != TokNumber || !plausibleLevel(p.toks[at].Value) || p.kind(at+1) != TokPercent {
		return k
	}
	end := at + 2
	if opened {
		if p.kind(end) != TokClose {
			return k
		}
		end++
	}
	// "CI 51% to 73%": that is a bound, not the level.
	if p.kind(end) == TokDash || p.word(end) == "to" || p.kind(end) == TokComma && p.percentAfter(end) {
		return k
	}
	it.Level, it.LevelAt = p.toks[at].Value, p.toks[at].Span
	return end
}

func (p *parser) percentAfter(i int) bool {
	return p.kind(i+1) == TokNumber && p.kind(i+2) == TokPercent
}

// plausibleLevel reports whether a number can be the level of an interval.
func plausibleLevel(v string) bool {
	whole, _, _ := strings.Cut(v, ".")
	return len(whole) == 2 && whole >= "50" && whole <= "99"
}

func (p *parser) kind(i int) TokenKind {
	if i < 0 || i >= len(p.toks) {
		return 0
	}
	return p.toks[i].Kind
}

func (p *parser) word(i int) string {
	if p.kind(i) != TokWord {
		return ""
	}
	return p.toks[i].Value
}
