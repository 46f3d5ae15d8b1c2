package grammar

import "strings"

// Value is one estimate in a table cell with all that hangs on it. What a
// bracketed number means (spread, percentage, n, p) the cell does not say: that
// is for the reader of headings to find.
type Value struct {
	Span
	Estimate Number // the zero Number where the cell holds only a spread or bounds
	Of       Number // the denominator of "3/40"
	Unit     string // words or signs directly behind the estimate, as printed
	Parts    []Item // in order of print: plus-minus, bracketed numbers, intervals, n, p, ...
	Marks    []Span // footnote marks and stars behind it
}

// Part gives the first part of the kind, nil where there is none.
func (v *Value) Part(k Kind) *Item {
	for i := range v.Parts {
		if v.Parts[i].Kind == k {
			return &v.Parts[i]
		}
	}
	return nil
}

// Cell is what one table cell holds.
type Cell struct {
	Values    []Value
	Brackets  []Bracket
	Terms     []Item // words of the trade in the cell: "mean", "95% CI"
	Letters   int    // letters of words that are no unit, mark or term
	Missing   bool   // nothing but a dash, NA or the like
	Reference bool   // "1.00 (ref)", "reference"
}

// ParseCell reads one table cell: "12.4 ± 1.3 (18)", "24 (17–31) [9–40]",
// "3/40 (7.5)", "−0.4 (−0.9–0.1) p = 0.03", several stacked by line breaks.
func ParseCell(in Text) Cell {
	r := Read(in)
	c := Cell{Brackets: r.Brackets}
	g := grouper{src: in.S, r: &r, cell: &c}
	for i := range r.Items {
		g.item(r.Items[i])
	}
	g.words()
	return c
}

type grouper struct {
	src  string
	r    *Reading
	cell *Cell
}

func (g *grouper) current() *Value {
	if len(g.cell.Values) == 0 {
		return nil
	}
	return &g.cell.Values[len(g.cell.Values)-1]
}

func (g *grouper) start(v Value, s Span) {
	v.Span = s
	g.cell.Values = append(g.cell.Values, v)
}

// attach hangs the item on the current value, or on a new one without estimate.
func (g *grouper) attach(it Item) {
	v := g.current()
	if v == nil {
		g.start(Value{Parts: []Item{it}}, it.Span)
		return
	}
	v.Parts = append(v.Parts, it)
	v.End = max(v.End, it.End)
}

func (g *grouper) item(it Item) {
	inside := it.Bracket > 0
	switch it.Kind {
	case KindTerm:
		g.cell.Terms = append(g.cell.Terms, it)
	case KindNumber:
		if inside && !g.wholeCell(it) {
			g.attach(it)
			return
		}
		if inside {
			g.start(Value{Parts: []Item{it}}, it.Span)
			return
		}
		g.start(Value{Estimate: it.Value}, it.Span)
	case KindFraction:
		if inside && len(g.cell.Values) > 0 {
			g.attach(it)
			return
		}
		g.start(Value{Estimate: it.Value, Of: it.Of}, it.Span)
	case KindPlusMinus:
		of := it.Of
		if of.IsZero() {
			g.attach(it)
			return
		}
		if v := g.current(); v != nil && v.Estimate.Span == of.Span {
			g.attach(it)
			return
		}
		g.start(Value{Estimate: of, Parts: []Item{it}}, it.Span)
	case KindInterval:
		v := g.current()
		if !inside && it.Spread == "" && (v == nil || v.Part(KindInterval) != nil || v.Estimate.IsZero()) {
			g.start(Value{Parts: []Item{it}}, it.Span)
			return
		}
		g.attach(it)
	default:
		g.attach(it)
	}
}

// wholeCell reports that the item's bracket opens the cell or its line: the
// bracket then hangs on no value before it in the cell.
func (g *grouper) wholeCell(it Item) bool {
	b := g.r.Brackets[it.Bracket-1]
	before := strings.TrimRight(g.src[:b.Start], " \u00a0\u2009\u202f")
	return before == "" || strings.HasSuffix(before, "\n") && g.lineHasBracket(len(before)-1)
}

// lineHasBracket reports that the line that ends at byte i holds a bracket
// already, so that the next line's bracket is stacked under it.
func (g *grouper) lineHasBracket(i int) bool {
	line := g.src[strings.LastIndexByte(g.src[:i], '\n')+1 : i]
	return strings.ContainsAny(line, "([")
}

var missingWords = map[string]bool{"na": true, "n/a": true, "nd": true, "nr": true, "ne": true, "–": true}

var referenceWords = map[string]bool{"ref": true, "reference": true, "referent": true, "referrent": true, "refer": true}

// words tells marks, units and other words apart, and empty cells.
func (g *grouper) words() {
	dashes, others := 0, 0
	for i, t := range g.r.Tokens {
		switch t.Kind {
		case TokMark, TokRaised:
			g.mark(t)
		case TokDash:
			dashes++
		case TokWord:
			switch {
			case referenceWords[t.Value]:
				g.cell.Reference = true
			case g.inItem(t):
			case missingWords[t.Value] && len(g.r.Items) == 0:
				dashes++
			case !t.Spaced && i > 0 && len(t.Value) <= 2 && g.afterValue(i):
				g.mark(t)
			case g.unit(t):
			default:
				others += len(t.Value)
			}
		case TokPercent, TokDegree:
			g.unit(t)
		case TokNumber:
			if !g.inItem(t) && i > 0 && g.r.Tokens[i-1].Kind == TokClose {
				g.mark(t)
			}
		case TokPeriod, TokSlash, TokBreak, TokOpen, TokClose, TokComma, TokSemicolon:
		default:
			if !g.inItem(t) {
				others++
			}
		}
	}
	g.cell.Letters = others
	g.cell.Missing = len(g.cell.Values) == 0 && others == 0 && dashes > 0
}

func (g *grouper) afterValue(i int) bool {
	k := g.r.Tokens[i-1].Kind
	return k == TokNumber || k == TokClose || k == TokMark
}

func (g *grouper) inItem(t Token) bool {
	for _, it := range g.r.Items {
		if t.Start >= it.Start && t.End <= it.End {
			return true
		}
	}
	return false
}

// mark gives a mark to the last value that begins before it.
func (g *grouper) mark(t Token) {
	for k := len(g.cell.Values) - 1; k >= 0; k-- {
		if g.cell.Values[k].Start < t.Start {
			g.cell.Values[k].Marks = append(g.cell.Values[k].Marks, t.Span)
			return
		}
	}
}

// unit gives a word or sign directly behind an estimate to it.
func (g *grouper) unit(t Token) bool {
	for k := range g.cell.Values {
		v := &g.cell.Values[k]
		if v.Estimate.IsZero() {
			continue
		}
		end := v.Estimate.End + len(v.Unit)
		gap := ""
		if t.Start >= end && t.Start <= end+3 {
			gap = strings.TrimSpace(g.src[end:t.Start])
			if gap == "" {
				v.Unit = strings.TrimSpace(g.src[v.Estimate.End:t.End])
				return true
			}
		}
	}
	return false
}
