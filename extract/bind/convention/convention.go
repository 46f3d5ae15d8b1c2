package convention

import (
	"strconv"
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// Scope is what a statement is about.
type Scope uint8

// The scopes. A statement without a word about its scope is for Everywhere.
const (
	Everywhere Scope = iota
	Tables
	Figures
	Prose
)

// Statement is one declaration of how values are printed.
type Statement struct {
	Statistic result.Statistic // of what: mean, median, ...; empty where only the spread is said
	Spread    result.GivenAs   // sd, se, ci, iqr or range
	Level     float64          // of an interval, percent; 0 where none is said
	Sign      bool             // printed with ±, so it explains that sign
	Bracket   bool             // the spread stands in brackets, so it explains those
	Unless    bool             // "unless otherwise stated": exceptions may follow
	Scope     Scope
	Zone      paper.Zone
	Block     int // index in Document.Blocks; -1 where it stands in no block
	Place     paper.Place
	Text      string // the words, as printed
	Declared  bool   // a sentence that sets out to declare; else only used so beside a value
}

// Conventions are the statements of one paper, in reading order.
type Conventions struct {
	Statements []Statement
	levels     map[float64]int
}

// Of collects the statements in a paper's running text and figure captions.
// Captions and notes of tables are about their own table: see [In].
func Of(doc *paper.Document) *Conventions {
	c := &Conventions{levels: map[float64]int{}}
	for i := range doc.Blocks {
		b := &doc.Blocks[i]
		switch b.Kind {
		case paper.Paragraph, paper.Caption, paper.Note:
		default:
			continue
		}
		if b.Zone == paper.References {
			continue
		}
		for _, s := range read(&b.Text, c.levels) {
			s.Zone, s.Block = b.Zone, i
			if b.Kind == paper.Caption {
				s.Scope = Figures
			} else if s.Declared && noteLike(b) {
				s.Scope = Tables
			} else if !s.Declared && b.Zone != paper.Methods && !s.Sign {
				continue
			}
			c.Statements = append(c.Statements, s)
		}
	}
	for i := range doc.Blocks {
		if t := doc.Blocks[i].Table; t != nil {
			countLevels(&t.Caption, c.levels)
			for k := range t.Notes {
				countLevels(&t.Notes[k].Text, c.levels)
			}
			for k := range t.Cells {
				countLevels(&t.Cells[k].Text, c.levels)
			}
		}
	}
	return c
}

// noteLike reports a short paragraph outside the methods: a declaration in it is
// a table's note that lost its table.
func noteLike(b *paper.Block) bool {
	const short = 600
	return b.Kind == paper.Note || b.Zone != paper.Methods && b.Zone != paper.Abstract && len(b.Text.S) < short
}

// In gives the statements of one caption, note or heading.
func In(run *paper.TextRun) []Statement {
	out := read(run, nil)
	for i := range out {
		out[i].Block = -1
	}
	return out
}

// Answer is what the conventions say to a question.
type Answer struct {
	Statement
	Conflict bool // statements of equal right say something else
}

// PlusMinus says what a ± without a word beside it means in the given scope.
func (c *Conventions) PlusMinus(scope Scope) (Answer, bool) {
	return c.answer(scope, func(s *Statement) int {
		switch {
		case s.Spread != result.SD && s.Spread != result.SE && !(s.Spread == result.CI && s.Sign):
			return 0
		case s.Statistic != "" && s.Statistic != result.Mean:
			return 0
		case s.Declared && s.Sign:
			return 4
		case s.Declared:
			return 3
		case s.Sign:
			return 1
		}
		return 0
	})
}

// Bracket says what a single number in brackets behind a mean means.
func (c *Conventions) Bracket(scope Scope) (Answer, bool) {
	return c.answer(scope, func(s *Statement) int {
		switch {
		case s.Spread != result.SD && s.Spread != result.SE || s.Statistic != "" && s.Statistic != result.Mean:
			return 0
		case s.Declared && s.Bracket:
			return 4
		case s.Declared && !s.Sign:
			return 3
		case s.Declared:
			return 2
		}
		return 0
	})
}

// Bounds says what two bare numbers in brackets behind a statistic mean.
func (c *Conventions) Bounds(scope Scope, statistic result.Statistic) (Answer, bool) {
	return c.answer(scope, func(s *Statement) int {
		if s.Spread != result.CI && s.Spread != result.IQR && s.Spread != result.Range || !s.Declared {
			return 0
		}
		switch {
		case s.Statistic == statistic && s.Bracket:
			return 4
		case s.Statistic == statistic:
			return 3
		case s.Statistic == "" && s.Spread == result.CI && statistic != result.Median:
			return 1
		}
		return 0
	})
}

// answer gives the best statement by rank within the scope; a statement about
// another scope does not count, one about this scope outranks a general one.
func (c *Conventions) answer(scope Scope, rank func(*Statement) int) (Answer, bool) {
	var best Answer
	bestRank := 0
	for i := range c.Statements {
		s := &c.Statements[i]
		r := rank(s) * 4
		if r == 0 || s.Scope != Everywhere && s.Scope != scope {
			continue
		}
		if s.Scope == scope && scope != Everywhere {
			r += 2
		}
		if s.Zone == paper.Methods {
			r++
		}
		switch {
		case r > bestRank:
			conflict := bestRank >= r-1 && best.Spread != s.Spread && bestRank > 0
			best, bestRank = Answer{Statement: *s, Conflict: conflict}, r
		case r >= bestRank-1 && s.Spread != best.Spread:
			best.Conflict = true
		}
	}
	return best, bestRank > 0
}

// Level gives the level that the paper names for its intervals, where it names
// only one.
func (c *Conventions) Level() (float64, bool) {
	var found float64
	total, most := 0, 0
	for level, n := range c.levels { // the order does not matter: a sum and a maximum
		total += n
		if n > most || n == most && level > found {
			found, most = level, n
		}
	}
	return found, most > 0 && most*20 >= total*19
}

func countLevels(run *paper.TextRun, levels map[float64]int) {
	if !strings.ContainsAny(run.S, "%iI") {
		return
	}
	for _, it := range grammar.Read(Text(run)).Items {
		addLevel(it, levels)
	}
}

func addLevel(it grammar.Item, levels map[float64]int) {
	if it.Level == "" || levels == nil {
		return
	}
	if f, err := strconv.ParseFloat(it.Level, 64); err == nil {
		levels[f]++
	}
}

// Text gives a run of a paper to the grammar.
func Text(run *paper.TextRun) grammar.Text {
	t := grammar.Text{S: run.S}
	for _, s := range run.Styles {
		span := grammar.Span{Start: s.Start, End: s.End}
		switch s.Kind {
		case paper.Raised:
			t.Raised = append(t.Raised, span)
		case paper.Lowered:
			t.Lowered = append(t.Lowered, span)
		}
	}
	return t
}
