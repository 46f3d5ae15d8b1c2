package review

import (
	"fmt"
	"io"
	"slices"
	"strings"

	"halfspan/convert/working"
	"halfspan/report/ledger"
)

// Pair is one result with what each of two checkers decided.
type Pair struct {
	A, B ledger.Row // a row without a decision where one has not decided, or has no such result
}

// ID is the name of the pair's result.
func (p *Pair) ID() string {
	if p.A.ID() != "" {
		return p.A.ID()
	}
	return p.B.ID()
}

func decided(r *ledger.Row) bool { return r.Decision != nil && r.Decision.Verdict != ledger.Queried }

func keeps(r *ledger.Row) bool {
	return r.Decision != nil && (r.Decision.Verdict == ledger.Confirmed || r.Decision.Verdict == ledger.Amended)
}

// Both tells whether both checkers have decided.
func (p *Pair) Both() bool { return decided(&p.A) && decided(&p.B) }

// Differs names the fields on which two checkers who both keep a result disagree.
func (p *Pair) Differs() []string {
	if !keeps(&p.A) || !keeps(&p.B) {
		return nil
	}
	return ledger.Differs(p.A.Decision.Decided.Working.Record, p.B.Decision.Decided.Working.Record)
}

// Agreed tells whether both have decided, and alike.
func (p *Pair) Agreed() bool {
	return p.Both() && keeps(&p.A) == keeps(&p.B) && len(p.Differs()) == 0
}

// Words says in a line what the two decided.
func (p *Pair) Words() string {
	row := &p.A
	if row.ID() == "" {
		row = &p.B
	}
	where := row.Working.Record.Paper
	if page := row.Working.Record.Page; page != nil {
		where += fmt.Sprintf(", page %d", *page)
	}
	text := fmt.Sprintf("%s %s, %s: %s / %s", p.ID(), oneLine(where), Printed(&row.Working.Record), verdictWord(&p.A), verdictWord(&p.B))
	for _, name := range p.Differs() {
		a, _ := Field(&p.A.Decision.Decided.Working.Record, name)
		b, _ := Field(&p.B.Decision.Decided.Working.Record, name)
		text += fmt.Sprintf("; %s %s / %s", name, or(a, "-"), or(b, "-"))
	}
	return text
}

func verdictWord(r *ledger.Row) string {
	if r.Decision == nil {
		return "not decided"
	}
	if r.Decision.Reason != "" {
		return string(r.Decision.Verdict) + " (" + r.Decision.Reason + ")"
	}
	return string(r.Decision.Verdict)
}

// Comparison is two checkers' decisions side by side.
type Comparison struct {
	NameA, NameB string
	Pairs        []Pair // every result that at least one has decided about, in order
}

// Compare puts the decisions of two books over the same papers side by side.
// Results are the same by their anchors, also those that a person added.
func Compare(a, b *ledger.Book) (*Comparison, error) {
	rowsA, err := a.Rows()
	if err != nil {
		return nil, err
	}
	rowsB, err := b.Rows()
	if err != nil {
		return nil, err
	}
	c := &Comparison{NameA: a.Decisions().Checker(), NameB: b.Decisions().Checker()}
	taken := make([]bool, len(rowsB))
	byID := map[string]int{}
	for i := range rowsB {
		if rowsB[i].ByHand == "" && rowsB[i].Gone == "" {
			byID[rowsB[i].ID()] = i
		}
	}
	for i := range rowsA {
		pair := Pair{A: rowsA[i]}
		k, ok := byID[rowsA[i].ID()]
		if !ok {
			k = slices.IndexFunc(rowsB, func(r ledger.Row) bool { return sameResult(&rowsA[i], &r) })
			ok = k >= 0 && !taken[k]
		}
		if ok {
			pair.B, taken[k] = rowsB[k], true
		}
		c.add(pair)
	}
	for i := range rowsB {
		if !taken[i] {
			c.add(Pair{B: rowsB[i]})
		}
	}
	return c, nil
}

// sameResult tells whether rows that are not in the ledger of what was read are
// about the same printed result.
func sameResult(a, b *ledger.Row) bool {
	ra, rb := &a.Working.Record, &b.Working.Record
	if ra.PaperSHA256 != rb.PaperSHA256 || (a.ByHand == "") != (b.ByHand == "") {
		return false
	}
	if _, ok := a.Working.Anchor.Meets(b.Working.Anchor); ok {
		return true
	}
	// Two people who drag over one number do not hit the same point.
	return a.ByHand != "" && samePage(ra, rb) && Printed(ra) == Printed(rb)
}

func samePage(a, b *working.Record) bool {
	return a.Page == nil && b.Page == nil || a.Page != nil && b.Page != nil && *a.Page == *b.Page
}

func (c *Comparison) add(p Pair) {
	if p.A.Decision != nil || p.B.Decision != nil {
		c.Pairs = append(c.Pairs, p)
	}
}

// Open lists the pairs that are to be settled: both have decided, not alike.
func (c *Comparison) Open() []Pair {
	var open []Pair
	for _, p := range c.Pairs {
		if p.Both() && !p.Agreed() {
			open = append(open, p)
		}
	}
	return open
}

// KeepOrDrop counts, of the results that both have decided about, those that
// both keep, only A keeps, only B keeps, and neither keeps.
func (c *Comparison) KeepOrDrop() (both, onlyA, onlyB, neither int) {
	for i := range c.Pairs {
		p := &c.Pairs[i]
		switch {
		case !p.Both():
		case keeps(&p.A) && keeps(&p.B):
			both++
		case keeps(&p.A):
			onlyA++
		case keeps(&p.B):
			onlyB++
		default:
			neither++
		}
	}
	return both, onlyA, onlyB, neither
}

// FieldAgreement is how often two checkers give the same for one field.
type FieldAgreement struct {
	Field      string
	Same, Both int // of the results that both keep
}

// Fields counts the agreement on each field of the results that both keep.
func (c *Comparison) Fields() []FieldAgreement {
	var all []FieldAgreement
	for _, name := range []string{"statistic", "given_as", "estimate", "lower", "upper", "given_value", "level", "n", "n2", "arm", "arm2", "time", "outcome", "unit", "mean", "sd", "se"} {
		f := FieldAgreement{Field: name}
		for i := range c.Pairs {
			p := &c.Pairs[i]
			if !keeps(&p.A) || !keeps(&p.B) {
				continue
			}
			f.Both++
			if !slices.Contains(p.Differs(), name) {
				f.Same++
			}
		}
		all = append(all, f)
	}
	return all
}

// Write writes the comparison: the counts, the fields, and the list to settle.
func (c *Comparison) Write(w io.Writer) error {
	var b strings.Builder
	both, onlyA, onlyB, neither := c.KeepOrDrop()
	total := both + onlyA + onlyB + neither
	fmt.Fprintf(&b, "%s and %s have both decided about %s.\n", c.NameA, c.NameB, Count(total, "result"))
	if total > 0 {
		fmt.Fprintf(&b, "Kept by both %d, by %s only %d, by %s only %d, by neither %d: alike in %d of %d.\n", both, c.NameA, onlyA, c.NameB, onlyB, neither, both+neither, total)
		b.WriteString(c.chance())
	}
	if both > 0 {
		fmt.Fprintf(&b, "\nOf %s kept by both, the same value:\n", Count(both, "result"))
		for _, f := range c.Fields() {
			fmt.Fprintf(&b, "  %-12s %d of %d%s\n", f.Field, f.Same, f.Both, c.apart(f.Field))
		}
		b.WriteString(c.modes())
	}
	if one := len(c.Pairs) - total; one > 0 {
		fmt.Fprintf(&b, "\nDecided by one of them only, or queried: %s.\n", Count(one, "result"))
	}
	open := c.Open()
	fmt.Fprintf(&b, "\nTo settle: %s\n", Count(len(open), "result"))
	for i := range open {
		fmt.Fprintf(&b, "  %s\n", open[i].Words())
	}
	_, err := io.WriteString(w, b.String())
	return err
}
