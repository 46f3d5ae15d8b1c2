package review

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"halfspan/convert"
	"halfspan/report/ledger"
)

// chance says how far two checkers agree beyond chance on keeping or dropping,
// with the share that each keeps beside it: kappa is low where nearly everything
// is kept, however well two people agree.
func (c *Comparison) chance() string {
	both, onlyA, onlyB, neither := c.KeepOrDrop()
	total := float64(both + onlyA + onlyB + neither)
	shares := fmt.Sprintf("%s keeps %.0f%%, %s keeps %.0f%%", c.NameA, 100*float64(both+onlyA)/total, c.NameB, 100*float64(both+onlyB)/total)
	a, err := convert.Kappa([][]int{{both, onlyA}, {onlyB, neither}})
	if err != nil {
		return fmt.Sprintf("On keeping or dropping: %s; kappa says nothing here (%v).\n", shares, err)
	}
	return fmt.Sprintf("On keeping or dropping: %s; kappa %.2f (Cohen 1960; see halfspan methods kappa).\n", shares, a.Kappa)
}

// apart says how far the two are apart in a field of numbers: the median and the
// largest difference of those that differ.
func (c *Comparison) apart(field string) string {
	var sizes []float64
	for i := range c.Pairs {
		p := &c.Pairs[i]
		if !slices.Contains(p.Differs(), field) {
			continue
		}
		a, _ := Field(&p.A.Decision.Decided.Working.Record, field)
		b, _ := Field(&p.B.Decision.Decided.Working.Record, field)
		x, errA := strconv.ParseFloat(a, 64)
		y, errB := strconv.ParseFloat(b, 64)
		if errA != nil || errB != nil {
			continue
		}
		sizes = append(sizes, math.Abs(x-y))
	}
	if len(sizes) == 0 {
		return ""
	}
	slices.Sort(sizes)
	return fmt.Sprintf("; where they differ, by %.4g at the median, %.4g at most", sizes[len(sizes)/2], sizes[len(sizes)-1])
}

// modes says how the decisions compared here were taken: two people who were
// both shown the proposed value are less independent than two who typed first.
func (c *Comparison) modes() string {
	var b strings.Builder
	b.WriteString("\nHow they were taken:\n")
	for _, side := range []struct {
		name string
		row  func(*Pair) *ledger.Row
	}{{c.NameA, func(p *Pair) *ledger.Row { return &p.A }}, {c.NameB, func(p *Pair) *ledger.Row { return &p.B }}} {
		counts := map[string]int{}
		for i := range c.Pairs {
			if row := side.row(&c.Pairs[i]); c.Pairs[i].Both() && row.Decision != nil {
				counts[row.Decision.Mode]++
			}
		}
		names := make([]string, 0, len(counts))
		for name := range counts {
			names = append(names, name)
		}
		slices.Sort(names)
		for i, name := range names {
			names[i] = fmt.Sprintf("%s %d", or(name, "not said"), counts[name])
		}
		fmt.Fprintf(&b, "  %-12s %s\n", side.name, strings.Join(names, "; "))
	}
	return b.String()
}
