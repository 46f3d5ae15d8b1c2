package table

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// cellReading is what the grammar finds in one cell, read both as values and as
// a heading.
type cellReading struct {
	cell        grammar.Cell
	phrase      phrase
	headingLike bool
	slashed     bool // it prints a slash for the decimal point
}

func readCell(c *paper.Cell) *cellReading {
	in := textOf(&c.Text)
	in.DecimalComma = in.DecimalComma || loneComma.MatchString(in.S)
	slashed := slashDecimals.MatchString(in.S)
	if slashed {
		in.S = strings.ReplaceAll(in.S, "/", ".")
	}
	rd := &cellReading{cell: grammar.ParseCell(in), phrase: parsePhrase(in), slashed: slashed}
	rd.headingLike = (hasLetter(c.Text.S) || rd.phrase.terms > 0) && !rd.hasSpread() && !rd.cell.Missing
	return rd
}

// loneComma is a cell that prints one number with a comma and one or two digits:
// 41,8 is no list, and no thousands have so few.
var loneComma = pattern.MustCompile(`^\s*[-−–]?[0-9]{1,3},[0-9]{1,2}\s*%?\s*$`)

// slashDecimals is a cell whose value and spread both have a slash where the decimal
// point stands elsewhere: 12/43 ± 1/32.
var slashDecimals = pattern.MustCompile(`^\s*[0-9]{1,4}/[0-9]{1,4}\s*±\s*[0-9]{1,4}/[0-9]{1,4}\s*$`)

// hasSpread reports a value with something that may be a spread beside it.
func (rd *cellReading) hasSpread() bool {
	for i := range rd.cell.Values {
		v := &rd.cell.Values[i]
		for k := range v.Parts {
			switch v.Parts[k].Kind {
			case grammar.KindPlusMinus:
				return true
			case grammar.KindInterval, grammar.KindSpread:
				if rd.cell.Letters < 12 {
					return true
				}
			case grammar.KindNumber:
				if !v.Estimate.IsZero() && rd.cell.Letters < 4 && v.Parts[k].Alone {
					return true
				}
			}
		}
	}
	return false
}

// isData reports a cell that prints numbers as data, not as part of a name.
func (rd *cellReading) isData() bool {
	return rd.hasSpread() || len(rd.cell.Values) > 0 && rd.cell.Letters == 0 && !rd.phrase.onlyN && !rd.phrase.onlyTerms
}

// isLabel reports a cell that names something.
func (rd *cellReading) isLabel() bool {
	if rd.hasSpread() || rd.cell.Missing {
		return false
	}
	if rd.cell.Letters > 0 || len(rd.cell.Terms) > 0 && len(rd.cell.Values) == 0 {
		return !strings.HasPrefix(strings.TrimSpace(rd.text()), "<0") && !rd.pLike()
	}
	return len(rd.cell.Values) == 1 && len(rd.cell.Values[0].Parts) == 0 && hasLetter(rd.cell.Values[0].Unit)
}

func (rd *cellReading) text() string {
	if len(rd.phrase.pairs) > 0 {
		return rd.phrase.pairs[0].text
	}
	return ""
}

// pLike reports a cell that prints only a p value, or that it is not significant.
func (rd *cellReading) pLike() bool {
	for i := range rd.cell.Values {
		if rd.cell.Values[i].Part(grammar.KindPValue) != nil && rd.cell.Values[i].Estimate.IsZero() {
			return true
		}
	}
	return false
}

// shape is how a spread is printed.
type shape uint8

const (
	shapeNone     shape = iota
	shapeSign           // a ± b
	shapeBracket        // a (b), a [b]
	shapeInterval       // a (b–c), a [b, c]
	shapeWord           // SD b
	shapePlain          // b, in a column or row of its own
)

// spread is one printed spread of an estimate.
type spread struct {
	shape        shape
	lower, upper grammar.Number // of shapeInterval
	value        grammar.Number // of the others
	item         grammar.Item   // with the words in the cell
	cell         *paper.Cell    // where it stands
	row, col     int
	square       bool
	own          role // of its own column or row, where it stands alone
}

// estimate is one printed estimate with everything printed for it.
type estimate struct {
	row, col int
	cell     *paper.Cell
	value    grammar.Number
	of       grammar.Number // "3/40": the denominator
	unit     string         // printed behind it
	spreads  []spread
	parts    []grammar.Item // p, n, tests in the cell
	marks    []string       // marks behind it
	ordinal  int            // of several stacked in one cell
	stacked  int            // how many are stacked there
	extra    []grammar.Item // bracketed numbers beside another spread: an n, a percent change
}

// estimatesIn gives the estimates printed in a cell, and the spreads that stand
// there without one.
func (f *frame) estimatesIn(r, c int) (ests []*estimate, orphans []spread) {
	cell := f.grid[r][c]
	if cell == nil || cell.Row != r || cell.Col != c {
		return nil, nil
	}
	rd := f.reads[cell]
	if rd.cell.Letters > 25 && !rd.headed() {
		return nil, nil // a sentence
	}
	for i := range rd.cell.Values {
		v := &rd.cell.Values[i]
		e := &estimate{row: r, col: c, cell: cell, value: v.Estimate, of: v.Of, unit: v.Unit, ordinal: i}
		for _, m := range v.Marks {
			e.marks = append(e.marks, f.cellMarks(cell.Text.S[m.Start:m.End])...)
		}
		f.takeParts(e, v, rd)
		if v.Estimate.IsZero() {
			orphans = append(orphans, e.spreads...)
			continue
		}
		ests = append(ests, e)
	}
	for _, e := range ests {
		e.stacked = len(ests)
	}
	return ests, orphans
}

// headed reports that the values of a wordy cell begin it.
func (rd *cellReading) headed() bool {
	return len(rd.cell.Values) > 0 && rd.cell.Values[0].Start < 3
}

// cellMarks splits the marks behind a value: "a,b" or "*†" or "ab".
func (f *frame) cellMarks(s string) []string {
	var out []string
	for _, p := range strings.FieldsFunc(clean(s), func(r rune) bool { return r == ',' || r == ' ' || r == ';' }) {
		if f.notes.known[p] || len([]rune(p)) == 1 {
			out = append(out, p)
			continue
		}
		for _, r := range p {
			out = append(out, string(r))
		}
	}
	return out
}

// takeParts sorts what hangs on a value into spreads and the rest.
func (f *frame) takeParts(e *estimate, v *grammar.Value, rd *cellReading) {
	for _, it := range v.Parts {
		sp := spread{item: it, cell: e.cell, row: e.row, col: e.col}
		if it.Bracket > 0 {
			sp.square = rd.cell.Brackets[it.Bracket-1].Open == '['
		}
		switch it.Kind {
		case grammar.KindPlusMinus:
			sp.shape, sp.value = shapeSign, it.Value
		case grammar.KindInterval:
			sp.shape, sp.lower, sp.upper = shapeInterval, it.Lower, it.Upper
		case grammar.KindSpread:
			sp.shape, sp.value = shapeWord, it.Value
		case grammar.KindNumber:
			if !it.Alone && it.Bracket > 0 {
				e.extra = append(e.extra, it)
				continue
			}
			sp.shape, sp.value = shapeBracket, it.Value
			if it.Bracket == 0 {
				sp.shape = shapePlain
			}
		default:
			e.parts = append(e.parts, it)
			continue
		}
		if sp.shape == shapeBracket && len(e.spreads) > 0 {
			e.extra = append(e.extra, it)
			continue
		}
		e.spreads = append(e.spreads, sp)
	}
}
