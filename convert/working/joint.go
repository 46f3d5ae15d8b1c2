package working

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"halfspan/convert"
)

// Joint is what two or more groups give together: their difference, or their
// union.
type Joint struct {
	Values []JointValue `json:"values"`
	Trail  Trail        `json:"trail"`
}

// JointValue is one value of a Joint with the range that the printed digits
// allow, where that was carried through.
type JointValue struct {
	Name  string  `json:"name"`
	Value *Number `json:"value"` // null where only a range or a limit is known
	Low   *Number `json:"low,omitempty"`
	High  *Number `json:"high,omitempty"`
	Note  string  `json:"note,omitempty"`
}

func (j *Joint) add(name string, v float64, note string) {
	j.Values = append(j.Values, JointValue{Name: name, Value: number(v), Note: note})
}

func (j *Joint) addRange(name string, v float64, r convert.Range, note string) {
	j.Values = append(j.Values, JointValue{Name: name, Value: number(v), Low: down(r.Low), High: up(r.High), Note: note})
}

func (j *Joint) step(format string, args ...any) {
	j.Trail.Steps = append(j.Trail.Steps, fmt.Sprintf(format, args...))
}

// Arm is one group that takes part: name says it in messages. SD may be unknown
// (HasSD false) where a p value is to give it.
type Arm struct {
	Name  string
	Mean  convert.Printed
	N     int
	SD    float64
	Span  convert.Range // of the SD by the printed digits
	HasSD bool
}

// ArmOf takes an arm from a working. An error says what is missing.
func ArmOf(name string, w Working) (Arm, error) {
	r := w.Record
	if r.Estimate == nil || r.N == nil {
		return Arm{}, fmt.Errorf("%s: mean and n are needed, such as \"12.4 (SD 1.3), n = 42\"", name)
	}
	if r.Statistic != nil && *r.Statistic != "mean" && *r.Statistic != "mean change" {
		return Arm{}, fmt.Errorf("%s: a %s, where a mean of one group is needed", name, *r.Statistic)
	}
	mean, err := convert.ReadPrinted(*r.Estimate)
	if err != nil {
		return Arm{}, fmt.Errorf("%s: %w", name, err)
	}
	arm := Arm{Name: name, Mean: mean, N: *r.N}
	if r.SD == nil {
		return arm, fmt.Errorf("%s: no SD: %s", name, r.Reason)
	}
	arm.SD, arm.HasSD = float64(*r.SD), true
	arm.Span = convert.Range{Low: arm.SD, High: arm.SD}
	if r.SDLow != nil && r.SDHigh != nil {
		arm.Span = convert.Range{Low: float64(*r.SDLow), High: float64(*r.SDHigh)}
	}
	return arm, nil
}

// Pair works out the difference of two independent arms: pooled SD, tests,
// Hedges' g; with p, a printed two-sided p value of their difference, the pooled
// SD behind it.
func Pair(a, b Arm, p string) (Joint, error) {
	var j Joint
	d := a.Mean.Value - b.Mean.Value
	j.step("difference = %s − %s = %s", short(a.Mean.Value), minus(short(b.Mean.Value)), short(d))
	slack := a.Mean.Half + b.Mean.Half
	j.addRange("difference", d, convert.Range{Low: d - slack, High: d + slack}, "")
	if p != "" {
		if err := j.fromP(a, b, convert.Printed{Value: d, Half: slack}, p); err != nil {
			return Joint{}, err
		}
	}
	if !a.HasSD || !b.HasSD {
		if p == "" {
			return Joint{}, fmt.Errorf("an SD of each arm is needed, or --p with the p value of the difference")
		}
		return j, nil
	}
	if p != "" {
		if err := j.againstP(a, b, convert.Printed{Value: d, Half: slack}, p); err != nil {
			return Joint{}, err
		}
	}
	return j, j.fromSDs(a, b)
}

func (j *Joint) fromP(a, b Arm, d convert.Printed, printed string) error {
	p, err := convert.ReadP(printed)
	if err != nil {
		return err
	}
	span, err := convert.PooledSDFromP(d, p, 2, a.N, b.N)
	if err != nil {
		return err
	}
	df := a.N + b.N - 2
	note := "by a two-sided pooled t test of unadjusted means; too small after adjustment for a covariate"
	v := limited("pooled SD from p", span, note)
	if x, err := convert.ReadPrinted(printed); err == nil && p.Exact && x.Value > 0 && x.Value < 1 {
		t, err := convert.TFromP(x.Value, 2, float64(df))
		if err != nil {
			return err
		}
		se, err := convert.SEFromT(d.Value, t)
		if err != nil {
			return err
		}
		sd, err := convert.PooledSDFromSE(se, a.N, b.N)
		if err != nil {
			return err
		}
		j.step("t for p = %s (two-sided) with n₁ + n₂ − 2 = %d degrees of freedom = %s", printed, df, short(t))
		j.step("SE of the difference = |difference|/t = %s/%s = %s", short(math.Abs(d.Value)), short(t), short(se))
		j.step("pooled SD = SE/√(1/n₁ + 1/n₂) = %s/√(1/%d + 1/%d) = %s", short(se), a.N, b.N, short(sd))
		v.Value = number(sd)
	}
	j.Values = append(j.Values, v)
	return nil
}

func (j *Joint) fromSDs(a, b Arm) error {
	at := func(arm Arm, sd float64) convert.Group { return convert.Group{N: arm.N, Mean: arm.Mean.Value, SD: sd} }
	ga, gb := at(a, a.SD), at(b, b.SD)
	pooled, err := convert.PooledSD(ga, gb)
	if err != nil {
		return err
	}
	low, err := convert.PooledSD(at(a, a.Span.Low), at(b, b.Span.Low))
	if err != nil {
		return err
	}
	high, err := convert.PooledSD(at(a, a.Span.High), at(b, b.Span.High))
	if err != nil {
		return err
	}
	j.step("pooled SD = √(((n₁−1)·SD₁² + (n₂−1)·SD₂²)/(n₁+n₂−2)) = √((%d·%s² + %d·%s²)/%d) = %s",
		a.N-1, short(a.SD), b.N-1, short(b.SD), a.N+b.N-2, short(pooled))
	j.addRange("pooled SD", pooled, convert.Range{Low: low, High: high}, "")
	t, err := convert.Pooled(ga, gb, 95)
	if err != nil {
		return err
	}
	j.comparison("pooled t test", t)
	w, err := convert.Welch(ga, gb, 95)
	if err != nil {
		return err
	}
	j.comparison("Welch's t test", w)
	g, err := convert.Hedges(ga, gb)
	if err != nil {
		return err
	}
	j.step("d = difference/pooled SD = %s; g = J·d = %s·%s = %s", short(g.D), short(g.J), short(g.D), short(g.G))
	j.add("Hedges' g", g.G, fmt.Sprintf("SE %s (J²·(1/q + d²/2N) form), %s (2(N − 3.94) form), %s (exact variance)", short(g.SETextbook), short(g.SEHandbook), short(g.SEExact)))
	j.Trail.Assumptions = append(j.Trail.Assumptions, "two independent arms, unadjusted means", "pooled SD and g: equal true SDs")
	return nil
}

func (j *Joint) comparison(name string, c convert.Comparison) {
	j.add("SE of the difference, "+name, c.SE, fmt.Sprintf("95%% interval %s to %s, t = %s with %s degrees of freedom, p = %s",
		short(c.Interval.Low), short(c.Interval.High), short(c.T), short(c.DF), short(c.P)))
}

// Union works out mean and SD of two or more groups taken together.
func Union(arms []Arm) (Joint, error) {
	var j Joint
	groups := make([]convert.Group, len(arms))
	printed := make([]convert.PrintedGroup, len(arms))
	for i, a := range arms {
		if !a.HasSD {
			return Joint{}, fmt.Errorf("%s: an SD is needed", a.Name)
		}
		groups[i] = convert.Group{N: a.N, Mean: a.Mean.Value, SD: a.SD}
		printed[i] = convert.PrintedGroup{N: a.N, Mean: a.Mean, SD: a.Span}
	}
	all, err := convert.Combine(groups...)
	if err != nil {
		return Joint{}, err
	}
	mean, sd, err := convert.CombinePrinted(printed)
	if err != nil {
		return Joint{}, err
	}
	var sizes, sums, within, between []string
	for _, g := range groups {
		n, m := strconv.Itoa(g.N), minus(short(g.Mean))
		sizes, sums = append(sizes, n), append(sums, n+"·"+m)
		within = append(within, fmt.Sprintf("%d·%s²", g.N-1, short(g.SD)))
		between = append(between, fmt.Sprintf("%s·(%s − %s)²", n, short(g.Mean), minus(short(all.Mean))))
	}
	j.step("N = Σn = %s = %d", strings.Join(sizes, " + "), all.N)
	j.step("M = Σn·m/N = (%s)/%d = %s", strings.Join(sums, " + "), all.N, short(all.Mean))
	j.step("SD = √((Σ(n−1)·SD² + Σn·(m−M)²)/(N−1)) = √((%s + %s)/%d) = %s", strings.Join(within, " + "), strings.Join(between, " + "), all.N-1, short(all.SD))
	j.add("n", float64(all.N), "")
	j.addRange("mean", all.Mean, mean, "")
	j.addRange("SD", all.SD, sd, "")
	j.Trail.Assumptions = append(j.Trail.Assumptions, "the groups share no unit")
	return j, nil
}
