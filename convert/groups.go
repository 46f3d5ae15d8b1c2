package convert

import (
	"fmt"
	"math"
)

// Group is size, mean and SD of one group.
type Group struct {
	N    int
	Mean float64
	SD   float64
}

func (g Group) check(least int) error {
	if err := size(g.N, least); err != nil {
		return err
	}
	if err := finite(g.Mean, g.SD); err != nil {
		return err
	}
	if g.SD < 0 {
		return fmt.Errorf("%w: SD is %v", ErrSpread, g.SD)
	}
	return nil
}

// Combine is the union of groups that share no unit.
//
// Formula: N = Σn, M = Σn·m/N, S² = (Σ(n-1)·s² + Σn·(m - M)²)/(N - 1).
// Arguments: two or more groups in one unit; SD ≥ 0; a group of one has SD 0.
// Assumes: disjoint groups, SDs with divisor n-1. It is not the pooled SD, which
// leaves out the differences between the means.
// Errors: ErrSize, ErrNotFinite, ErrSpread.
// Limits: equal means give slightly less than the pooled SD.
// Rounding: see CombinePrinted.
// Source: decomposition of a sum of squares; for two groups the formula of the
// Handbook for Systematic Reviews of Interventions 6.5.2.10.
// Checked: against R to 1e-9 and the raw data of R's PlantGrowth; Split returns
// the parts.
func Combine(groups ...Group) (Group, error) {
	if len(groups) < 2 {
		return Group{}, fmt.Errorf("%w: %d groups, two or more needed", ErrSize, len(groups))
	}
	total, sum := 0, 0.0
	for _, g := range groups {
		if err := g.check(1); err != nil {
			return Group{}, err
		}
		if total > math.MaxInt32-g.N {
			return Group{}, fmt.Errorf("%w: the sizes add up to too much", ErrDomain)
		}
		total += g.N
		sum += float64(g.N) * g.Mean
	}
	mean, squares := sum/float64(total), 0.0
	for _, g := range groups {
		squares += float64(g.N-1)*g.SD*g.SD + float64(g.N)*(g.Mean-mean)*(g.Mean-mean)
	}
	out := Group{total, mean, math.Sqrt(squares / float64(total-1))}
	return out, finite(out.Mean, out.SD)
}

// PrintedGroup is a group with mean and SD as printed.
type PrintedGroup struct {
	N    int
	Mean Printed
	SD   Range // the SDs that the printed digits allow
}

// CombinePrinted is the set of means and SDs of a union of groups that the
// printed digits allow.
//
// Formula: as Combine. The SD grows with every SD; in the means its square is
// convex, so its greatest value lies at a corner of the rounding and its least
// where every mean is as near to the grand mean as its rounding allows.
// Arguments: 2 to 12 groups.
// Assumes: as Combine.
// Errors: as Combine; ErrDomain for more than 12 groups.
// Limits: no rounding gives Combine's value twice.
// Rounding: this is its statement.
// Source: as Combine; methods section G.
// Checked: against random values within the rounding.
func CombinePrinted(groups []PrintedGroup) (mean, sd Range, err error) {
	if len(groups) > 12 {
		return Range{}, Range{}, fmt.Errorf("%w: %d groups, at most 12", ErrDomain, len(groups))
	}
	low, high := make([]Group, len(groups)), make([]Group, len(groups))
	for i, g := range groups {
		low[i] = Group{g.N, g.Mean.Low(), math.Max(g.SD.Low, 0)}
		high[i] = Group{g.N, g.Mean.High(), g.SD.High}
	}
	a, err := Combine(low...)
	if err != nil {
		return Range{}, Range{}, err
	}
	b, err := Combine(high...)
	if err != nil {
		return Range{}, Range{}, err
	}
	mean = Range{a.Mean, b.Mean}
	corner := make([]Group, len(groups))
	for bits := 0; bits < 1<<len(groups); bits++ {
		copy(corner, high)
		for i, g := range groups {
			if bits>>i&1 == 0 {
				corner[i].Mean = g.Mean.Low()
			}
		}
		if c, err := Combine(corner...); err == nil {
			sd.High = math.Max(sd.High, c.SD)
		}
	}
	// Coordinate descent on a convex function over a box.
	centre := (a.Mean + b.Mean) / 2
	for i := 0; i < 200; i++ {
		for k, g := range groups {
			low[k].Mean = math.Min(math.Max(centre, g.Mean.Low()), g.Mean.High())
		}
		c, err := Combine(low...)
		if err != nil {
			return Range{}, Range{}, err
		}
		sd.Low = c.SD
		if math.Abs(c.Mean-centre) <= 1e-15*math.Abs(centre) {
			break
		}
		centre = c.Mean
	}
	return mean, sd, nil
}

// Split is what is left of a union when one of its groups is taken away.
//
// Formula: k = N - n, q = (N·M - n·m)/k,
// s² = ((N-1)·S² - (n-1)·s1² - n·(m-M)² - k·(q-M)²)/(k - 1).
// Arguments: the union and the group in it, in one unit.
// Assumes: the group is wholly in the union.
// Errors: ErrSize when fewer than 2 are left; ErrInconsistent when the variance
// would be negative: the group is not part of the union, or a number is misprinted.
// Limits: none.
// Rounding: errors grow about N/k times.
// Source: Combine solved for one group.
// Checked: against R; returns the parts of Combine.
func Split(union, part Group) (Group, error) {
	if err := union.check(2); err != nil {
		return Group{}, err
	}
	if err := part.check(1); err != nil {
		return Group{}, err
	}
	k := union.N - part.N
	if err := size(k, 2); err != nil {
		return Group{}, err
	}
	n, f := float64(part.N), float64(k)
	mean := union.Mean + n*(union.Mean-part.Mean)/f
	squares := float64(union.N-1)*union.SD*union.SD - (n-1)*part.SD*part.SD -
		n*(part.Mean-union.Mean)*(part.Mean-union.Mean) - f*(mean-union.Mean)*(mean-union.Mean)
	if squares < 0 {
		if squares < -1e-9*float64(union.N-1)*union.SD*union.SD {
			return Group{}, fmt.Errorf("%w: the rest would have a negative variance", ErrInconsistent)
		}
		squares = 0
	}
	out := Group{k, mean, math.Sqrt(squares / (f - 1))}
	return out, finite(out.Mean, out.SD)
}
