package grammar

import "strings"

// fuelPerText is how many tokens one text may have: a paragraph of a paper has
// a few hundred, a whole paper some ten thousand.
const fuelPerText = 200_000

// parser walks over the tokens of one text. Every rule is a method that looks
// at the tokens from i on, returns the index behind what it has read, and has
// no effect where it reads nothing. Look-ahead is bounded, so the time is
// linear in the text.
type parser struct {
	src   string
	toks  []Token
	out   Reading
	stack []int // 1-based indices of the open brackets

	lastOpen int // 1-based index of the bracket that was closed last

	looking bool // hasValue is at work
}

// Read finds everything that is printed in a stretch of running text.
func Read(in Text) Reading {
	p := &parser{src: in.S, toks: Lex(in)}
	if len(p.toks) > fuelPerText {
		p.toks = p.toks[:fuelPerText]
		p.out.Cut = true
	}
	for i := 0; i < len(p.toks); {
		next := p.item(i)
		if next <= i {
			next = i + 1
		}
		for k := i; k < next; k++ {
			p.brackets(k)
		}
		i = next
	}
	for _, open := range p.stack {
		p.out.Brackets[open-1].End = len(p.src)
	}
	p.lone()
	p.out.Tokens = p.toks
	return p.out
}

// brackets keeps the stack of open brackets.
func (p *parser) brackets(i int) {
	switch p.toks[i].Kind {
	case TokOpen:
		parent := 0
		if len(p.stack) > 0 {
			parent = p.stack[len(p.stack)-1]
		}
		open := byte('(')
		switch p.toks[i].Value {
		case "[", "［":
			open = '['
		case "{":
			open = '{'
		}
		p.out.Brackets = append(p.out.Brackets, Bracket{Span: p.toks[i].Span, Open: open, Parent: parent})
		p.stack = append(p.stack, len(p.out.Brackets))
	case TokClose:
		if len(p.stack) == 0 {
			return
		}
		open := p.stack[len(p.stack)-1]
		p.out.Brackets[open-1].End = p.toks[i].End
		p.lastOpen = open
		p.stack = p.stack[:len(p.stack)-1]
	}
}

// lone marks the items that fill their bracket, and gives every item its bracket.
func (p *parser) lone() {
	var stack []int
	b := 0
	for k := range p.out.Items {
		it := &p.out.Items[k]
		for b < len(p.out.Brackets) && p.out.Brackets[b].Start < it.Start {
			stack = append(stack, b)
			b++
		}
		for len(stack) > 0 && p.out.Brackets[stack[len(stack)-1]].End <= it.Start {
			stack = stack[:len(stack)-1]
		}
		// A bracket that opened and closed before the item lies deeper in the stack.
		for d := len(stack) - 1; d >= 0; d-- {
			if p.out.Brackets[stack[d]].End > it.Start {
				it.Bracket = stack[d] + 1
				break
			}
		}
		if it.Bracket > 0 {
			br := p.out.Brackets[it.Bracket-1]
			it.Alone = p.onlyMarks(br.Start+1, it.Start) && p.onlyUnits(it.End, br.End-1)
		}
	}
}

// item reads one item at token i; the order of the alternatives matters.
//
//	item = interval | spread | sample-size | p-value | test | plus-minus | number | term
func (p *parser) item(i int) int {
	if next := p.outer(i); next > i {
		return next
	}
	switch p.toks[i].Kind {
	case TokWord:
		for _, rule := range [...]func(int) int{p.labelled, p.spreadWord, p.sampleSize, p.pValue, p.test, p.term} {
			if next := rule(i); next > i {
				return next
			}
		}
	case TokNumber, TokDash, TokPlus, TokCurrency, TokLess, TokGreater, TokInfinity:
		if p.kind(i) == TokNumber && !p.toks[i].Spaced && p.kind(i-1) == TokClose {
			return i + 1 // "(0.9–1.6)12": a mark that lost its raise
		}
		if next := p.labelled(i); next > i {
			return next
		}
		return p.numeric(i)
	case TokPlusMinus:
		if next := p.plusMinus(i, Number{}, p.toks[i].Start); next > i {
			return next
		}
		p.add(Item{Kind: KindTerm, Span: p.toks[i].Span, Name: "±"})
	case TokPercent:
		p.add(Item{Kind: KindTerm, Span: p.toks[i].Span, Meaning: Meaning{Percent: true}, Name: "%"})
		return i + 1
	case TokOther:
		if p.caret(i) {
			if v, end := p.exponent(i + 1); v != "" {
				return end // an exponent is no value
			}
		}
		if v := p.toks[i].Value; v == "Δ" || v == "χ" {
			return p.test(i)
		}
	}
	return i + 1
}

func (p *parser) add(it Item) { p.out.Items = append(p.out.Items, it) }

// term keeps a term of the trade that has no value of its own.
func (p *parser) term(i int) int {
	m, end, ok := p.termAt(i)
	if !ok {
		return i
	}
	w := Span{p.toks[i].Start, p.toks[end-1].End}
	p.add(Item{Kind: KindTerm, Span: w, WordAt: w, Meaning: m, Name: fold(p.src[w.Start:w.End])})
	return end
}

// numeric reads a number and what hangs on it.
//
//	numeric = bounds | number [ unit ] "±" number | number "/" number | number
func (p *parser) numeric(i int) int {
	if p.afterOpen(i) {
		if it, next, ok := p.tightPair(i); ok {
			p.add(it)
			return next
		}
		if it, next, ok := p.bounds(i, inBracket); ok {
			p.add(it)
			return next
		}
	}
	n, next, ok := p.signed(i)
	if !ok {
		return i + 1
	}
	if pm := p.toPlusMinus(next); pm > 0 {
		if end := p.plusMinus(pm, n, n.Start); end > pm {
			return end
		}
	}
	if it, end, ok := p.bounds(i, bare); ok && !p.plusMinusAfter(end) {
		p.add(it)
		return end
	}
	if it, end, ok := p.fraction(n, next); ok {
		p.add(it)
		return end
	}
	p.add(Item{Kind: KindNumber, Span: Span{n.Start, n.End}, Value: n})
	return next
}

// tightPair reads "(80,120)" as bounds where the number before the bracket lies
// between the two and the thousands reading is far off it.
func (p *parser) tightPair(i int) (Item, int, bool) {
	if p.kind(i) != TokNumber || p.kind(i+1) != TokClose || len(p.out.Items) == 0 {
		return Item{}, i, false
	}
	t := p.toks[i]
	a, b, ok := strings.Cut(p.src[t.Start:t.End], ",")
	of := p.out.Items[len(p.out.Items)-1]
	if !ok || of.Kind != KindNumber || !whole(a) || !whole(b) {
		return Item{}, i, false
	}
	e := value(of.Value.Value)
	if value(a) > e || e > value(b) || value(t.Value) < 20*e {
		return Item{}, i, false
	}
	lower := Number{Span: Span{t.Start, t.Start + len(a)}, Value: a}
	upper := Number{Span: Span{t.End - len(b), t.End}, Value: b}
	return Item{Kind: KindInterval, Span: t.Span, Lower: lower, Upper: upper, Sep: ","}, i + 1, true
}

// afterOpen reports whether the token before i, marks aside, opens a bracket.
func (p *parser) afterOpen(i int) bool {
	for i > 0 && (p.kind(i-1) == TokMark || p.kind(i-1) == TokRaised) {
		i--
	}
	return p.kind(i-1) == TokOpen
}

// toPlusMinus gives the index of a plus-minus sign that belongs to the number
// before i: directly, or behind one short unit. 0: none.
func (p *parser) toPlusMinus(i int) int {
	for k := i; k < i+5; k++ {
		switch p.kind(k) {
		case TokPlusMinus:
			return k
		case TokPercent, TokDegree, TokSlash, TokRaised, TokMark:
		case TokWord:
			if _, _, ok := p.termAt(k); ok || stopWords[p.toks[k].Value] {
				return 0
			}
		case TokOpen:
			if p.kind(k+1) == TokPlusMinus {
				return k + 1
			}
			return 0
		default:
			return 0
		}
	}
	return 0
}

func (p *parser) plusMinusAfter(i int) bool { return p.toPlusMinus(i) > 0 }

// stopWords never stand between a number and what belongs to it as a unit.
var stopWords = map[string]bool{
	"to": true, "and": true, "vs": true, "versus": true, "or": true, "in": true, "for": true, "with": true, "of": true,
	"at": true, "was": true, "were": true, "is": true, "the": true, "from": true, "by": true, "than": true, "after": true,
	"before": true, "on": true, "respectively": true, "while": true, "but": true, "as": true, "a": false,
}

// fraction reads "12/45" and "12 of 45".
func (p *parser) fraction(n Number, i int) (Item, int, bool) {
	if !whole(n.Value) || p.kind(i) != TokSlash && !(p.kind(i) == TokWord && (p.word(i) == "of" || p.word(i) == "out" && p.word(i+1) == "of")) {
		return Item{}, i, false
	}
	k := i + 1
	if p.word(i) == "out" {
		k++
	}
	if p.kind(k) != TokNumber || !whole(p.toks[k].Value) {
		return Item{}, i, false
	}
	of, next, ok := p.signed(k)
	if !ok {
		return Item{}, i, false
	}
	return Item{Kind: KindFraction, Span: Span{n.Start, of.End}, Value: n, Of: of}, next, true
}

func whole(v string) bool {
	for i := 0; i < len(v); i++ {
		if !isDigit(rune(v[i])) {
			return false
		}
	}
	return v != ""
}
