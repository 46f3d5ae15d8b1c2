package grammar

import (
	"fmt"
	"strings"
)

// String prints the number with its peculiarities: "-0.4", "<0.1", "27%", "NE".
func (n Number) String() string {
	s := n.Rel + n.Value + n.Word
	if n.Percent {
		s += "%"
	}
	if n.Power != "" {
		s += "×" + n.Power
	}
	if n.Mended {
		s += "!"
	}
	return s
}

// String prints the item on one line, for tests and debugging.
func (it Item) String() string {
	var b strings.Builder
	fmt.Fprintf(&b, "%d:%d %s", it.Start, it.End, it.Kind)
	switch it.Kind {
	case KindInterval:
		fmt.Fprintf(&b, " %s %s %s", it.Lower, it.Sep, it.Upper)
	case KindFraction:
		fmt.Fprintf(&b, " %s of %s", it.Value, it.Of)
	case KindPlusMinus:
		if !it.Of.IsZero() {
			fmt.Fprintf(&b, " %s ±", it.Of)
		} else {
			b.WriteString(" ±")
		}
		fmt.Fprintf(&b, " %s", it.Value)
	case KindTest:
		fmt.Fprintf(&b, " %s(%s) = %s", it.Name, it.DF, it.Value)
	case KindTerm:
		fmt.Fprintf(&b, " %q", it.Name)
	default:
		fmt.Fprintf(&b, " %s", it.Value)
	}
	for _, f := range [...]string{it.Spread, it.Level, it.Statistic, it.Measure, it.Design, it.Model} {
		if f != "" {
			b.WriteString(" " + f)
		}
	}
	if it.Count {
		b.WriteString(" count")
	}
	if it.OneSided {
		b.WriteString(" one-sided")
	}
	if it.Apart {
		b.WriteString(" apart")
	}
	if it.Bracket > 0 {
		b.WriteString(" in brackets")
		if it.Alone {
			b.WriteString(" alone")
		}
	}
	return b.String()
}

// String prints the cell, one value a line.
func (c Cell) String() string {
	var b strings.Builder
	for _, v := range c.Values {
		fmt.Fprintf(&b, "value %s", v.Estimate)
		if !v.Of.IsZero() {
			fmt.Fprintf(&b, " of %s", v.Of)
		}
		if v.Unit != "" {
			fmt.Fprintf(&b, " unit %q", v.Unit)
		}
		if len(v.Marks) > 0 {
			fmt.Fprintf(&b, " marks %d", len(v.Marks))
		}
		b.WriteByte('\n')
		for _, p := range v.Parts {
			fmt.Fprintf(&b, "  %s\n", p)
		}
	}
	for _, t := range c.Terms {
		fmt.Fprintf(&b, "term %s\n", t)
	}
	if c.Letters > 0 {
		fmt.Fprintf(&b, "letters %d\n", c.Letters)
	}
	if c.Missing {
		b.WriteString("missing\n")
	}
	if c.Reference {
		b.WriteString("reference\n")
	}
	return b.String()
}

// String prints the heading, one pair a line.
func (h Heading) String() string {
	var b strings.Builder
	for _, p := range h.Pairs {
		fmt.Fprintf(&b, "%d:%d", p.Start, p.End)
		for _, f := range [...]string{p.Statistic, p.Measure, p.Model, p.Design} {
			if f != "" {
				b.WriteString(" " + f)
			}
		}
		for _, f := range [...]struct {
			on   bool
			name string
		}{{p.Count, "count"}, {p.Percent, "percent"}, {p.Sign, "±"}, {p.Spread != "", "(" + p.Spread + ")"}, {p.Level != "", p.Level}} {
			if f.on {
				b.WriteString(" " + f.name)
			}
		}
		b.WriteByte('\n')
	}
	for _, n := range h.N {
		fmt.Fprintf(&b, "n %s\n", n.Value)
	}
	return b.String()
}
