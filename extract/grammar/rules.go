package grammar

// linkWords may stand between the words that announce an interval and its
// first bound: "the 95% CI of the difference was 0.92 to 2.76".
var linkWords = map[string]bool{
	"of": true, "is": true, "was": true, "were": true, "being": true, "between": true, "from": true, "ranging": true,
	"for": true, "the": true, "difference": true, "mean": true, "ranged": true, "are": true, "this": true, "these": true,
	"with": false, "limits": true, "in": false, "about": true, "approximately": true,
}

// labelled reads an interval behind the words that name it:
//
//	labelled = ( level-phrase | spread-word ) { link } [ "(" ] bounds
//
// "95% CI 0.92 to 2.76", "CI: 0.92, 2.76", "IQR = 17–31", "range from 9 to 40",
// "95% CI [0.70, 0.99]". Where no bounds follow, the words stand as a term.
func (p *parser) labelled(i int) int {
	it, k, ok := p.levelPhrase(i)
	if !ok {
		it, k, ok = p.spreadPhrase(i, SpreadIQR, SpreadRange)
	}
	if !ok {
		return i
	}
	words := k
	k = p.link(k)
	if b, end, ok := p.bounds(k, afterWord); ok && !p.triple(b, end) {
		b.Meaning, b.WordAt, b.Level, b.LevelAt, b.OneSided = it.Meaning, it.WordAt, it.Level, it.LevelAt, it.OneSided
		b.Start = it.Start
		p.add(b)
		return p.more(b, end)
	}
	if it.Spread == SpreadIQR || it.Spread == SpreadCI {
		if half, end, ok := p.halfWidth(it, k); ok {
			p.add(half)
			return end
		}
	}
	if it.Spread == SpreadIQR {
		if n, end, ok := p.signed(k); ok && n.Value != "" {
			w := it
			w.Kind, w.Value, w.Span = KindSpread, n, Span{it.Start, n.End}
			p.add(w)
			return end
		}
	}
	it.Name = fold(p.src[it.Start:p.toks[words-1].End])
	p.add(it)
	return words
}

// more reads further intervals of a list that share the first one's words:
//
//	more = { ( "and" | "vs" | ";" | "/" | "," ) bounds }
//
// "90% CI −3.1, −1.2 and −2.6, −0.8", "95% CI −1.3, −0.5/−0.7, −0.1".
func (p *parser) more(first Item, k int) int {
	for {
		at := k
		switch {
		case p.kind(at) == TokSemicolon && first.Sep != ";", p.kind(at) == TokSlash && first.Sep != "/":
			at++
		case p.kind(at) == TokComma && first.Sep != ",":
			at++
		case p.kind(at) == TokComma && p.word(at+1) == "and":
			at++
		}
		switch p.word(at) {
		case "and", "vs", "versus", "to":
			at++
		default:
			if at == k {
				return k
			}
		}
		it, end, ok := p.bounds(at, afterWord)
		if !ok || it.Sep != first.Sep {
			return k
		}
		it.Meaning, it.WordAt, it.Level, it.LevelAt, it.Follows = first.Meaning, first.WordAt, first.Level, first.LevelAt, true
		p.add(it)
		k = end
	}
}

// halfWidth reads "95% CI ±8".
func (p *parser) halfWidth(it Item, k int) (Item, int, bool) {
	if p.kind(k) != TokPlusMinus {
		return it, k, false
	}
	n, end, ok := p.signed(k + 1)
	if !ok {
		return it, k, false
	}
	it.Kind, it.Value, it.Span = KindPlusMinus, n, Span{it.Start, n.End}
	return it, end, true
}

// triple reports that a comma pair is the beginning of three numbers, estimate
// and bounds: "OR, 95% CI: 0.83, 0.70, 0.99".
func (p *parser) triple(b Item, end int) bool {
	if b.Sep != "," && b.Sep != ";" || p.kind(end) != TokComma && p.kind(end) != TokSemicolon {
		return false
	}
	n, next, ok := p.signed(end + 1)
	if !ok || p.kind(next) != TokClose && p.kind(next) != TokSemicolon {
		return false
	}
	mid, third, first := value(b.Upper.Value), value(n.Value), value(b.Lower.Value)
	return mid < first && first < third
}

// link passes over what stands between an announcing phrase and its numbers.
func (p *parser) link(k int) int {
	opened := false
	for steps := 0; steps < 7; steps++ {
		switch p.kind(k) {
		case TokColon, TokComma, TokEquals, TokSemicolon, TokPeriod, TokApprox:
			k++
		case TokOpen:
			if opened {
				return k
			}
			opened = true
			k++
		case TokWord:
			if !linkWords[p.word(k)] {
				return k
			}
			k++
		default:
			return k
		}
	}
	return k
}

// spreadPhrase reads a term of one of the wanted spreads, and percentiles:
//
//	"interquartile range (IQR)", "25th–75th percentile", "Q1–Q3", "ranging"
func (p *parser) spreadPhrase(i int, wanted ...string) (Item, int, bool) {
	it := Item{Kind: KindTerm}
	m, end, ok := p.termAt(i)
	if !ok {
		m, end, ok = p.percentiles(i)
	}
	if !ok && (p.word(i) == "ranging" || p.word(i) == "ranged") && p.word(i+1) == "from" {
		m, end, ok = Meaning{Spread: SpreadRange}, i+2, true
	}
	if !ok {
		return it, i, false
	}
	for _, w := range wanted {
		if m.Spread == w {
			it.Meaning = m
			it.WordAt = Span{p.toks[i].Start, p.toks[end-1].End}
			it.Span = it.WordAt
			return it, end, true
		}
	}
	return it, i, false
}

// percentiles reads "25th–75th percentile", "25th and 75th percentiles",
// "25–75%", "25%, 75%".
func (p *parser) percentiles(i int) (Meaning, int, bool) {
	low, k := p.ordinal(i)
	if low != "25" && low != "0.25" {
		return Meaning{}, i, false
	}
	if p.word(k) == "percentile" || p.word(k) == "percentiles" {
		k++
	}
	switch {
	case p.kind(k) == TokDash, p.kind(k) == TokComma, p.kind(k) == TokSlash, p.word(k) == "and", p.word(k) == "to", p.kind(k) == TokSemicolon:
		k++
	default:
		return Meaning{}, i, false
	}
	if p.word(k) == "the" {
		k++
	}
	high, k := p.ordinal(k)
	if high != "75" {
		return Meaning{}, i, false
	}
	if w := p.word(k); w == "percentile" || w == "percentiles" || w == "centile" || w == "centiles" || w == "quartiles" {
		return Meaning{Spread: SpreadIQR}, k + 1, true
	}
	if p.kind(k-1) == TokPercent && p.kind(i-1) == TokOpen {
		return Meaning{Spread: SpreadIQR}, k, true
	}
	return Meaning{}, i, false
}

func (p *parser) ordinal(i int) (string, int) {
	if p.kind(i) != TokNumber {
		return "", i
	}
	k := i + 1
	if w := p.word(k); w == "th" || w == "st" || w == "rd" {
		k++
	} else if p.kind(k) == TokPercent || p.kind(k) == TokRaised {
		k++
	}
	return p.toks[i].Value, k
}

// spreadWord reads an SD or SE word and its value:
//
//	spread = sd-word { ":" | "=" | "," | "of" | "was" | "±" } number
//
// "SD 1.3", "(SD = 1.3)", "SD: 1.3 kg", "SD ± 1.3", "standard deviation of 1.3".
func (p *parser) spreadWord(i int) int {
	it, k, ok := p.spreadPhrase(i, SpreadSD, SpreadSE, SpreadCV)
	if !ok {
		return i
	}
	if p.word(i-1) == "per" {
		return k // "per se 12"
	}
	words := k
	for steps := 0; steps < 3; steps++ {
		switch {
		case p.kind(k) == TokComma && p.kind(i-1) == TokPlusMinus:
			// "mean ± SD, 42 colonies" announces; the number is another matter.
		case p.kind(k) == TokColon, p.kind(k) == TokEquals, p.kind(k) == TokComma, p.kind(k) == TokPlusMinus,
			p.word(k) == "of", p.word(k) == "was", p.word(k) == "is", p.kind(k) == TokPeriod && p.kind(k+1) == TokNumber:
			k++
			continue
		}
		break
	}
	if n, end, ok := p.signed(k); ok && n.Value != "" && n.Value[0] != '-' && n.Rel == "" && p.toPlusMinus(end) == 0 {
		if _, _, pair := p.bounds(k, bare); !pair || p.kind(k+1) == TokDash && p.toks[k+1].Spaced {
			it.Kind, it.Value, it.Span = KindSpread, n, Span{it.Start, n.End}
			p.add(it)
			return end
		}
	}
	it.Name = fold(p.src[it.Start:p.toks[words-1].End])
	p.add(it)
	return words
}

// plusMinus reads the sign and its value, with a spread word beside:
//
//	plus-minus = [ number [ unit ] ] [ "(" ] "±" [ spread-word ] number [ [ "(" ] spread-word ]
//
// "12.4 ± 1.3", "12.4 (±1.3)", "12.4 ± SD 1.3", "12.4 ± 1.3 (SEM)", "± 95% CI 2.1".
func (p *parser) plusMinus(i int, of Number, start int) int {
	if p.ofHours(i) {
		return i // "4 h 34 min ± 1 h 13 min": neither number is the whole time
	}
	it := Item{Kind: KindPlusMinus, Of: of}
	k := i + 1
	if w, end, ok := p.levelPhrase(k); ok {
		it.Meaning, it.WordAt, it.Level, it.LevelAt, k = w.Meaning, w.WordAt, w.Level, w.LevelAt, end
	} else if w, end, ok := p.spreadPhrase(k, SpreadSD, SpreadSE); ok {
		it.Meaning, it.WordAt, k = w.Meaning, w.WordAt, end
		if p.kind(k) == TokEquals || p.kind(k) == TokColon {
			k++
		}
	}
	n, end, ok := p.signed(k)
	if !ok || n.Value == "" || n.Value[0] == '-' || it.Spread != "" && p.toPlusMinus(end) > 0 {
		return i // "mean ± SD 24.6 ± 3.8": the first ± only announces
	}
	it.Of.give(n.Power, n.PowerAt) // "2.1 ± 0.4 × 10^5"
	it.Value, it.Span = n, Span{start, n.End}
	if it.Spread == "" {
		after := end
		for steps := 0; steps < 3 && (p.kind(after) == TokWord || p.kind(after) == TokOpen || p.kind(after) == TokClose); steps++ {
			if w, e, ok := p.spreadPhrase(after, SpreadSD, SpreadSE); ok {
				if p.kind(e) == TokClose || p.kind(e) == TokSemicolon || p.kind(e) == TokComma || p.kind(after-1) != TokOpen && p.kind(e) != TokEquals && p.kind(e) != TokNumber {
					it.Meaning, it.WordAt = w.Meaning, w.WordAt
				}
				break
			}
			if stopWords[p.word(after)] {
				break
			}
			after++
		}
	}
	p.add(it)
	return end
}

var hourWords = map[string]bool{"h": true, "hr": true, "hrs": true, "hour": true, "hours": true}

// ofHours reports that the number before the ± at token i goes on with a time that
// began with hours: "4 h 34 min".
func (p *parser) ofHours(i int) bool {
	k := i - 1
	if p.kind(k) == TokWord {
		k--
	}
	return p.kind(k) == TokNumber && hourWords[p.word(k-1)] && p.kind(k-2) == TokNumber
}

// sampleSize reads "n = 42", "N: 42", "n 42", "n1 = 42", "no. = 42".
func (p *parser) sampleSize(i int) int {
	w := p.word(i)
	if w != "n" && w != "n1" && w != "n2" && w != "n3" {
		return i
	}
	k := i + 1
	switch {
	case p.kind(k) == TokNumber && p.toks[k].Lowered || p.kind(k) == TokWord && p.toks[k].Lowered:
		k++
	case p.kind(k) == TokNumber && p.toks[k].End-p.toks[k].Start == 1 && p.kind(k+1) == TokEquals:
		k++ // "n1 = 42": the 1 names the arm
	}
	link := k
	for p.kind(k) == TokEquals || p.kind(k) == TokColon || p.kind(k) == TokApprox {
		k++
	}
	if k == link && i > 0 && p.kind(i-1) == TokOpen && p.kind(k) == TokPeriod && p.kind(k+1) == TokNumber {
		k, link = k+1, k+1 // "(n. 42)"
	}
	n, end, ok := p.signed(k)
	if !ok || !whole(n.Value) || n.Percent || k == link && p.toks[k].Kind != TokNumber {
		return i
	}
	it := Item{Kind: KindSampleSize, Span: Span{p.toks[i].Start, n.End}, Value: n, Name: p.src[p.toks[i].Start:p.toks[i].End]}
	it.Count = true
	p.add(it)
	return end
}

// pValue reads "p = 0.03", "P<.001", "p value 0.2", "po0.05", "p for trend = 0.04".
func (p *parser) pValue(i int) int {
	w := p.word(i)
	if w != "p" && w != "po" && w != "pvalue" && w != "ps" {
		return i
	}
	k := i + 1
	rel := ""
	if w == "po" {
		rel = "<"
	}
	for steps := 0; steps < 5; steps++ {
		switch p.kind(k) {
		case TokWord:
			switch p.word(k) {
			case "value", "values", "for", "trend", "interaction", "of", "was", "is", "ns":
				k++
				continue
			}
		case TokDash, TokEquals, TokColon, TokComma:
			if p.kind(k) == TokEquals && rel == "" {
				rel = "="
			}
			k++
			continue
		case TokLess:
			rel = "<"
			k++
			continue
		case TokGreater:
			rel = ">"
			k++
			continue
		}
		break
	}
	if p.kind(k) != TokNumber {
		return i
	}
	if rel == "" && k == i+1 && p.toks[k].Spaced && p.toks[k].Value[0] != '.' && p.toks[k].Value[0] != '0' {
		return i
	}
	t := p.toks[k]
	n := Number{Span: t.Span, Value: t.Value, Rel: rel, Mended: t.Mended}
	end := p.smallP(&n, k)
	p.add(Item{Kind: KindPValue, Span: Span{p.toks[i].Start, n.End}, Value: n, Name: "p"})
	return end
}

// test reads a test statistic or degrees of freedom: "t(41) = 2.3",
// "t41 = 2.3", "F(1, 81) = 4.2", "χ2 = 3.8", "df = 58".
func (p *parser) test(i int) int {
	name := p.src[p.toks[i].Start:p.toks[i].End]
	if name == "df" || name == "d.f." || name == "DF" {
		k := i + 1
		for p.kind(k) == TokEquals || p.kind(k) == TokColon {
			k++
		}
		if n, end, ok := p.signed(k); ok && k > i+1 && n.Value != "" {
			p.add(Item{Kind: KindDF, Span: Span{p.toks[i].Start, n.End}, Value: n, Name: "df"})
			return end
		}
		return i
	}
	df := ""
	switch name {
	case "t", "F", "z", "Z", "χ", "χ2", "T":
	default:
		if len(name) < 2 || name[0] != 't' && name[0] != 'F' || !whole(name[1:]) {
			return i
		}
		df, name = name[1:], name[:1]
	}
	k := i + 1
	if p.kind(k) == TokRaised {
		k++
	}
	if p.kind(k) == TokNumber && p.toks[k].Lowered {
		first := k
		for p.kind(k) == TokNumber || p.kind(k) == TokComma && p.kind(k+1) == TokNumber {
			k++
		}
		df = p.src[p.toks[first].Start:p.toks[k-1].End]
	}
	if p.kind(k) == TokOpen {
		first := k + 1
		for k++; p.kind(k) == TokNumber || p.kind(k) == TokComma || p.word(k) == "df" || p.kind(k) == TokEquals; k++ {
		}
		if p.kind(k) != TokClose || k == first {
			return i
		}
		df = p.src[p.toks[first].Start:p.toks[k-1].End]
		k++
	}
	if p.kind(k) != TokEquals {
		return i
	}
	n, end, ok := p.signed(k + 1)
	if !ok || n.Value == "" {
		return i
	}
	p.add(Item{Kind: KindTest, Span: Span{p.toks[i].Start, n.End}, Value: n, Name: name, DF: df})
	return end
}
