package grammar

import "strings"

// where says in what surroundings a pair of numbers is met, and so what may
// part them.
type where uint8

const (
	bare      where = iota // in running text: only a dash or "to"
	inBracket              // first thing in a bracket: also comma, semicolon, colon, slash
	afterWord              // after "95% CI", "IQR", "range"
)

// signed reads one number with what is printed before and directly behind it:
//
//	signed = [ "<" | ">" ] [ sign ] [ currency ] [ sign ] number [ "%" ] [ "×" "10" power ]
//
// A sign may stand one space before its number.
func (p *parser) signed(i int) (Number, int, bool) {
	var n Number
	start := i
	switch p.kind(i) {
	case TokLess, TokGreater:
		n.Rel = map[TokenKind]string{TokLess: "<", TokGreater: ">"}[p.kind(i)]
		i++
		if p.kind(i) == TokEquals {
			i++
		}
	}
	sign := ""
	for steps := 0; steps < 3; steps++ {
		switch p.kind(i) {
		case TokDash:
			if sign != "" {
				return n, start, false
			}
			sign = "-"
			i++
			continue
		case TokPlus:
			if sign != "" {
				return n, start, false
			}
			sign, n.Plus = "+", true
			i++
			continue
		case TokCurrency:
			i++
			continue
		}
		break
	}
	switch p.kind(i) {
	case TokInfinity:
		n.Word = strings.TrimPrefix(sign, "+") + "∞"
		n.Span = Span{p.toks[start].Start, p.toks[i].End}
		return n, i + 1, true
	case TokNumber:
	default:
		return n, start, false
	}
	t := p.toks[i]
	n.Value, n.Mended = t.Value, t.Mended
	if sign == "-" {
		n.Value = "-" + n.Value
	}
	n.Span = Span{p.toks[start].Start, t.End}
	i++
	if p.kind(i) == TokPercent {
		n.Percent = true
		n.End = p.toks[i].End
		i++
	}
	if t.Value == "10" && p.caret(i) {
		if exponent, end := p.exponent(i + 1); exponent != "" {
			n.Value, n.Word, n.End = "", "10^"+exponent, p.toks[end-1].End
			return n, end, true // a power alone has no digits of its own
		}
	}
	if power, at, end := p.power(i); end > i {
		n.Power, n.PowerAt, n.End = power, at, at.End
		i = end
	}
	return n, i, true
}

// openBound reads a bound that is no number: NE, NR, "not reached".
func (p *parser) openBound(i int) (Number, int, bool) {
	switch w := p.word(i); w {
	case "ne", "nr", "nc", "na", "inf", "infinity", "undefined":
		t := p.toks[i]
		if w != "inf" && w != "infinity" && w != "undefined" && p.src[t.Start:t.End] != strings.ToUpper(w) {
			return Number{}, i, false
		}
		return Number{Span: t.Span, Word: p.src[t.Start:t.End]}, i + 1, true
	case "not", "non":
		k := i + 1
		if p.kind(k) == TokDash {
			k++
		}
		switch p.word(k) {
		case "reached", "estimable", "evaluable", "calculable", "estimated", "available", "computed", "calculated", "defined":
			s := Span{p.toks[i].Start, p.toks[k].End}
			return Number{Span: s, Word: p.src[s.Start:s.End]}, k + 1, true
		}
	}
	return Number{}, i, false
}

// bound reads one end of an interval, which may stand in a bracket of its own:
// "-1.9 - (-0.3)".
func (p *parser) bound(i int) (Number, int, bool) {
	if p.kind(i) == TokOpen && p.kind(i+1) == TokDash {
		if n, k, ok := p.signed(i + 1); ok && p.kind(k) == TokClose {
			return n, k + 1, true
		}
	}
	if n, k, ok := p.signed(i); ok {
		return n, k, true
	}
	return p.openBound(i)
}

// bounds reads an interval's two numbers:
//
//	bounds = bound [ unit ] separator bound
//
// A dash between them is the separator; a second dash is the upper bound's
// minus. "−4.0 −0.7" has one dash for both: it is read as the minus where the
// space stands before it only.
func (p *parser) bounds(i int, in where) (Item, int, bool) {
	it := Item{Kind: KindInterval}
	lower, k, ok := p.bound(i)
	if !ok || lower.Rel != "" && in == bare {
		return it, i, false
	}
	k = p.skipMarks(k)
	if in == afterWord {
		k = p.brokenPoint(&lower, k)
	}
	if in != bare {
		k = p.skipUnit(k)
	} else if p.clock(k) {
		return it, i, false
	}
	sep, k2 := p.separator(k, in)
	if sep == "" {
		return it, i, false
	}
	if _, _, level := p.levelPhrase(k2); level {
		return it, i, false // "3.0, 95% CI": the level is no bound
	}
	upper, end, ok := p.bound(k2)
	if !ok && sep == "-" && in == inBracket && p.kind(k2) == TokClose {
		return it, i, false
	}
	if !ok {
		return it, i, false
	}
	if in == afterWord && (p.kind(end+2) == TokClose || p.kind(end+2) == TokSemicolon) {
		end = p.joinPoint(&upper, end) // "1. 02)"
	}
	if sep == "-" && k2 == k+1 && p.toks[k].Spaced && !p.toks[k2].Spaced && upper.Value != "" && p.toks[k].Kind == TokDash {
		if strings.HasPrefix(lower.Value, "-") && p.toks[k].Value == p.src[lower.Start:lower.Start+len(p.toks[k].Value)] {
			upper.Value = "-" + upper.Value
			upper.Start = p.toks[k].Start
			it.Apart = true
		}
	}
	if !p.fits(&lower, &upper, sep, k, end, in) {
		return it, i, false
	}
	lower.give(upper.Power, upper.PowerAt) // "1.9 to 2.3 × 10^5"
	it.Lower, it.Upper, it.Sep = lower, upper, sep
	it.Span = Span{lower.Start, upper.End}
	return it, end, true
}

// brokenPoint mends "14. 6 to 1.9": a space behind the decimal point.
func (p *parser) brokenPoint(n *Number, k int) int {
	if s, _ := p.separator(k+2, bare); s == "" {
		return k
	}
	return p.joinPoint(n, k)
}

// joinPoint joins a whole number, a point and the digits behind a space.
func (p *parser) joinPoint(n *Number, k int) int {
	if !whole(strings.TrimPrefix(n.Value, "-")) || p.kind(k) != TokPeriod || p.toks[k].Spaced || p.kind(k+1) != TokNumber || !whole(p.toks[k+1].Value) {
		return k
	}
	n.Value += "." + p.toks[k+1].Value
	n.End, n.Mended = p.toks[k+1].End, true
	return k + 2
}

// fits refuses pairs that only look like bounds.
func (p *parser) fits(lower, upper *Number, sep string, k, end int, in where) bool {
	if lower.Value == "" && upper.Value == "" {
		return false
	}
	switch sep {
	case ",", ";":
		// "0.83, 0.70 to 0.99": the first is an estimate, no bound.
		if s, next := p.separator(end, bare); s == "to" || s == "-" {
			if _, _, ok := p.bound(next); ok {
				return false
			}
		}
		// "(12, 14, 17)": a list.
		if next := p.kind(end + 2); in == inBracket && p.kind(end) == TokComma && p.kind(end+1) == TokNumber && (next == TokClose || next == TokComma) {
			return false
		}
	case "/":
		if in == inBracket && whole(lower.Value) && whole(upper.Value) {
			return false // a fraction
		}
	}
	// "12-15%": the sign on the last serves both.
	if upper.Percent {
		lower.Percent = true
	}
	return true
}

// separator reads what parts two bounds.
func (p *parser) separator(k int, in where) (string, int) {
	switch p.kind(k) {
	case TokDash, TokTilde:
		// "10-12 - 14" is no pair; a dash glued to a word behind is a hyphen.
		return "-", k + 1
	case TokWord:
		switch p.word(k) {
		case "to", "through", "until":
			return "to", k + 1
		case "and":
			if in == afterWord {
				return "and", k + 1
			}
		}
	case TokComma:
		if in != bare {
			if p.word(k+1) == "to" {
				return "to", k + 2
			}
			return ",", k + 1
		}
	case TokSemicolon:
		if in != bare {
			return ";", k + 1
		}
	case TokColon:
		if in != bare {
			return ":", k + 1
		}
	case TokSlash:
		if in != bare {
			return "/", k + 1
		}
	case TokPercent:
		return p.separator(k+1, in)
	case TokOther:
		if in == afterWord && (p.toks[k].Value == "_" || p.toks[k].Value == "|") {
			return "-", k + 1
		}
	}
	return "", k
}

// clock reports ":05" glued behind a number: a time of day.
func (p *parser) clock(k int) bool {
	return p.kind(k) == TokColon && !p.toks[k].Spaced && p.kind(k+1) == TokNumber && !p.toks[k+1].Spaced
}

func (p *parser) skipMarks(k int) int {
	for p.kind(k) == TokMark || p.kind(k) == TokRaised {
		k++
	}
	return k
}

// skipUnit passes over a unit between a bound and its separator: "19 min to 29
// min", "+5 per 1000 to +60 per 1000". It stays where no separator follows.
func (p *parser) skipUnit(k int) int {
	for j := k; j < k+6; j++ {
		switch p.kind(j) {
		case TokWord:
			if p.word(j) == "to" || p.word(j) == "and" {
				return j
			}
			if _, _, ok := p.termAt(j); ok || stopWords[p.word(j)] {
				return k
			}
		case TokDash:
			if j > k {
				return j
			}
			return k
		case TokSlash, TokDegree, TokPercent, TokRaised, TokMark, TokTimes:
			if j == k && p.kind(j) == TokSlash {
				return k
			}
		case TokComma, TokSemicolon:
			if j > k {
				return j
			}
			return k
		case TokNumber:
			if j == k || p.word(j-1) != "per" && p.kind(j-1) != TokSlash && p.kind(j-1) != TokTimes {
				return k
			}
		default:
			return k
		}
	}
	return k
}

// onlyUnits reports whether nothing but a unit, a sign or a mark stands between
// two bytes.
func (p *parser) onlyUnits(from, to int) bool {
	words := 0
	for i := p.tokenAt(from); i < len(p.toks) && p.toks[i].Start < to; i++ {
		switch p.kind(i) {
		case TokWord:
			if words++; words > 2 || stopWords[p.word(i)] {
				return false
			}
		case TokPercent, TokDegree, TokSlash, TokRaised, TokMark, TokCurrency:
		default:
			return false
		}
	}
	return true
}

// onlyMarks reports whether nothing but marks stands between two bytes.
func (p *parser) onlyMarks(from, to int) bool {
	for i := p.tokenAt(from); i < len(p.toks) && p.toks[i].Start < to; i++ {
		if p.kind(i) != TokMark && p.kind(i) != TokRaised {
			return false
		}
	}
	return true
}

// tokenAt gives the index of the first token that starts at or behind a byte.
func (p *parser) tokenAt(b int) int {
	lo, hi := 0, len(p.toks)
	for lo < hi {
		mid := (lo + hi) / 2
		if p.toks[mid].Start < b {
			lo = mid + 1
		} else {
			hi = mid
		}
	}
	return lo
}
