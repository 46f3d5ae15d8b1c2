package grammar

import (
	"strconv"
	"strings"
	"unicode/utf8"
)

// raisedDigits maps the superscript signs of the plain font.
var raisedDigits = strings.NewReplacer("⁰", "0", "¹", "1", "²", "2", "³", "3", "⁴", "4", "⁵", "5", "⁶", "6", "⁷", "7", "⁸", "8", "⁹", "9",
	"⁻", "-", "⁺", "", "−", "-", "–", "-", "‐", "-", "+", "")

// Decade is the exponent of the factor printed with the number: 5 of "×10^5".
// false where none is printed, or none that is a number.
func (n Number) Decade() (int, bool) {
	e, err := strconv.Atoi(strings.TrimPrefix(n.Power, "10^"))
	return e, err == nil && n.Power != "" && e > -300 && e < 300
}

// CommonPower gives the power of ten that all printed numbers of one result
// carry, "" for none; false where they carry different ones, so that their
// mantissas do not belong together.
func CommonPower(numbers ...Number) (string, bool) {
	power, first := "", true
	for _, n := range numbers {
		switch {
		case n.Value == "":
		case first:
			power, first = n.Power, false
		case n.Power != power:
			return "", false
		}
	}
	return power, true
}

// power reads a factor at token i:
//
//	power = ( "×" | "x" | "·" | "*" ) "10" ( "^" [ sign ] number | superscript | lost superscript )
//
// "× 10^5", "x10⁵", "·10^-5"; with a lost superscript "× 105" and "× 10−5".
func (p *parser) power(i int) (string, Span, int) {
	none := Span{}
	start, glued, cross := i, "", false
	switch p.kind(i) {
	case TokTimes:
		cross = true
		i++
	case TokMark:
		if v := p.toks[i].Value; v != "*" && v != "∗" {
			return "", none, start
		}
		i++
	case TokWord:
		w := p.toks[i].Value
		if !strings.HasPrefix(w, "x") || len(w) > 1 && !strings.HasPrefix(w, "x10") {
			return "", none, start
		}
		glued, cross = w[1:], true
		i++
	default:
		return "", none, start
	}
	if glued == "" {
		if p.kind(i) != TokNumber {
			return "", none, start
		}
		glued = p.toks[i].Value
		i++
	}
	if !whole(glued) || !strings.HasPrefix(glued, "10") {
		return "", none, start
	}
	end, exponent := i, ""
	switch {
	case len(glued) == 3 || len(glued) == 4 && glued[2] != '0':
		small := p.kind(start-1) != TokNumber || value(p.toks[start-1].Value) < 10
		if cross && glued[2] != '0' && small { // "12 × 105 cm" has two sides
			exponent = glued[2:]
		}
	case glued != "10":
	case p.caret(i):
		exponent, end = p.exponent(i + 1)
	case p.kind(i) == TokMark && p.kind(i+1) == TokMark && p.toks[i].Value == "*" && p.toks[i+1].Value == "*":
		exponent, end = p.exponent(i + 2)
	case p.kind(i) == TokRaised && !p.toks[i].Spaced:
		exponent, end = raisedDigits.Replace(p.toks[i].Value), i+1
	case cross && p.kind(i) == TokDash && !p.toks[i].Spaced && p.kind(i+1) == TokNumber && !p.toks[i+1].Spaced && whole(p.toks[i+1].Value):
		exponent, end = "-"+p.toks[i+1].Value, i+2
	}
	if exponent == "" {
		return "", none, start
	}
	return "10^" + exponent, Span{p.toks[start].Start, p.toks[end-1].End}, end
}

// smallP puts the power of a p value at token k into its value: "2.1 × 10^-5",
// "10⁻⁵". It gives the token behind.
func (p *parser) smallP(n *Number, k int) int {
	exponent, end := "", k+1
	if power, at, next := p.power(k + 1); next > k+1 {
		exponent, end, n.End = strings.TrimPrefix(power, "10^"), next, at.End
	} else if n.Value == "10" {
		if p.caret(k + 1) {
			exponent, end = p.exponent(k + 2)
		} else if p.kind(k+1) == TokRaised {
			exponent, end = raisedDigits.Replace(p.toks[k+1].Value), k+2
		}
		n.Value, n.End = "1", p.toks[end-1].End
	}
	if e, err := strconv.Atoi(exponent); err == nil && e < 0 && e > -300 {
		n.Value += "e" + strconv.Itoa(e)
		return end
	}
	n.Value, n.End = p.toks[k].Value, p.toks[k].End
	return k + 1
}

func (p *parser) caret(i int) bool {
	return i < len(p.toks) && p.toks[i].Kind == TokOther && (p.toks[i].Value == "^" || p.toks[i].Value == "ˆ")
}

// exponent reads what stands behind "^", with its sign and braces.
func (p *parser) exponent(i int) (string, int) {
	braced := p.kind(i) == TokOpen
	if braced {
		i++
	}
	sign := ""
	switch p.kind(i) {
	case TokDash:
		sign = "-"
		i++
	case TokPlus:
		i++
	}
	if p.kind(i) != TokNumber || !whole(p.toks[i].Value) {
		return "", i
	}
	v := sign + p.toks[i].Value
	i++
	if braced && p.kind(i) == TokClose {
		i++
	}
	return v, i
}

// give puts a power on a number that carries none.
func (n *Number) give(power string, at Span) {
	if n.Value != "" && n.Power == "" {
		n.Power, n.PowerAt = power, at
	}
}

// giveAll puts a power on an estimate and its spread.
func (it *Item) giveAll(power string, at Span) {
	switch it.Kind {
	case KindNumber, KindInterval, KindPlusMinus, KindSpread:
		it.Value.give(power, at)
		it.Of.give(power, at)
		it.Lower.give(power, at)
		it.Upper.give(power, at)
	}
}

// outer reads a power behind a closing bracket, which holds for all that stands
// in the bracket, and for the number right before it: "(2.1 ± 0.4) × 10^5",
// "2.1 (0.4) × 10^5".
func (p *parser) outer(i int) int {
	power, at, end := p.power(i)
	if end == i {
		return i
	}
	if n := len(p.out.Items); p.kind(i-1) == TokOpen && p.kind(end) == TokClose && n > 0 {
		if last := &p.out.Items[n-1]; strings.TrimSpace(p.src[last.End:p.toks[i-1].Start]) == "" {
			last.giveAll(power, at) // "2.1 ± 0.4 (×10^5)"
		}
		return end
	}
	if p.kind(i-1) != TokClose || p.lastOpen == 0 {
		return end
	}
	b := p.out.Brackets[p.lastOpen-1]
	for k := len(p.out.Items) - 1; k >= 0; k-- {
		it := &p.out.Items[k]
		inside := it.End > b.Start
		before := !inside && strings.TrimSpace(p.src[it.End:b.Start]) == ""
		if !inside && !before {
			break
		}
		it.giveAll(power, at)
		if before {
			break
		}
	}
	return end
}

// tenPower reports that "10" with an exponent stands at byte i: what is printed
// before it is a sign of multiplication, no decimal mark. certain asks for a
// caret or a superscript sign: a raised digit may be a note's mark.
func tenPower(s string, i, stop int, certain bool) bool {
	for i < len(s) && s[i] == ' ' {
		i++
	}
	if !strings.HasPrefix(s[i:], "10") {
		return false
	}
	r, _ := utf8.DecodeRuneInString(s[i+2:])
	return r == '^' || strings.ContainsRune("⁰¹²³⁴⁵⁶⁷⁸⁹⁻⁺", r) && i+2 < len(s) || !certain && i+2 == stop && stop < len(s)
}

// middleDot reports a point that may also be a sign of multiplication.
func middleDot(r rune) bool { return r != '.' && r != '\uff0e' && isPoint(r) }
