package working

import (
	"fmt"
	"math"

	"halfspan/convert"
)

// RatioFromP works out the SE of the logarithm of a ratio, and the 95% interval that
// goes with it, from the ratio and its p value alone.
func RatioFromP(ratio convert.Printed, p string) (Joint, error) {
	var j Joint
	read, err := convert.ReadP(p)
	if err != nil {
		return Joint{}, err
	}
	if ratio.Low() <= 0 {
		return Joint{}, fmt.Errorf("a ratio is above 0, and %s is not", short(ratio.Value))
	}
	least, most := math.Abs(math.Log(ratio.Low())), math.Abs(math.Log(ratio.High()))
	if least > most {
		least, most = most, least
	}
	if ratio.Low() <= 1 && ratio.High() >= 1 {
		return Joint{}, fmt.Errorf("the ratio may be 1: its p value says nothing of the SE")
	}
	span := convert.Range{Low: 0, High: math.Inf(1)}
	if read.Low > 0 {
		z, err := convert.TFromP(read.Low, 2, convert.Normal)
		if err != nil {
			return Joint{}, err
		}
		span.Low = least / z
	}
	if read.High < 1 {
		z, err := convert.TFromP(read.High, 2, convert.Normal)
		if err != nil {
			return Joint{}, err
		}
		span.High = most / z
	}
	note := "by a two-sided Wald or score test of ratio 1; for a hazard ratio near 1 and a log-rank or Cox p"
	v := limited("SE of the logarithm", span, note)
	if x, err := convert.ReadPrinted(p); err == nil && read.Exact && x.Value > 0 && x.Value < 1 {
		z, err := convert.TFromP(x.Value, 2, convert.Normal)
		if err != nil {
			return Joint{}, err
		}
		se, err := convert.LogSEFromP(ratio.Value, x.Value)
		if err != nil {
			return Joint{}, err
		}
		z95, err := convert.TwoSided(readingLevel, convert.Normal)
		if err != nil {
			return Joint{}, err
		}
		j.step("z for p = %s (two-sided) = %s", p, short(z))
		j.step("SE of the logarithm = |ln ratio|/z = |ln %s|/%s = %s", short(ratio.Value), short(z), short(se))
		v.Value = number(se)
		j.Values = append(j.Values, v)
		j.addRange("ratio", ratio.Value, convert.Range{Low: ratio.Low(), High: ratio.High()},
			fmt.Sprintf("95%% interval from this SE: %s to %s", short(ratio.Value*math.Exp(-z95*se)), short(ratio.Value*math.Exp(z95*se))))
		return j, nil
	}
	j.Values = append(j.Values, v)
	return j, nil
}

// DifferenceFromP works out the pooled SD behind a printed difference of two means
// and its p value, from the sizes of the two arms.
func DifferenceFromP(d convert.Printed, n1, n2 int, p string) (Joint, error) {
	var j Joint
	if n1 == 0 || n2 == 0 {
		return Joint{}, fmt.Errorf("the n of both arms is needed, such as \"n = 42 and 40\", or --n and --n2")
	}
	j.addRange("difference", d.Value, convert.Range{Low: d.Low(), High: d.High()}, "")
	return j, j.fromP(Arm{N: n1}, Arm{N: n2}, d, p)
}

// limited is a value of which the printed digits leave a range, or one limit only.
func limited(name string, span convert.Range, note string) JointValue {
	v := JointValue{Name: name, Low: down(span.Low), Note: note}
	switch {
	case math.IsInf(span.High, 1):
		v.Note = "a lower limit only; " + note
	case span.Low == 0:
		v.High, v.Low = up(span.High), nil
		v.Note = "an upper limit only; " + note
	default:
		v.High = up(span.High)
	}
	return v
}

// againstP says where a printed p value is not that of the two SDs beside it.
func (j *Joint) againstP(a, b Arm, d convert.Printed, printed string) error {
	p, err := convert.ReadP(printed)
	if err != nil {
		return err
	}
	span := convert.Range{Low: 1, High: 0}
	for _, side := range []struct{ d, sdA, sdB float64 }{
		{math.Abs(d.Value) + d.Half, a.Span.Low, b.Span.Low}, {math.Max(math.Abs(d.Value)-d.Half, 0), a.Span.High, b.Span.High}} {
		ga, gb := convert.Group{N: a.N, Mean: side.d, SD: side.sdA}, convert.Group{N: b.N, SD: side.sdB}
		for _, test := range []func(convert.Group, convert.Group, float64) (convert.Comparison, error){convert.Pooled, convert.Welch} {
			c, err := test(ga, gb, readingLevel)
			if err != nil {
				return nil // an SD that may be 0: no test
			}
			span.Low, span.High = math.Min(span.Low, c.P), math.Max(span.High, c.P)
		}
	}
	if !p.Meets(span) {
		j.Trail.Notes = append(j.Trail.Notes, fmt.Sprintf("the printed p %s is not that of these SDs, whose t tests give p from %s to %s: an SE printed as an SD, another test, or a misprint", printed, short(span.Low), short(span.High)))
	}
	return nil
}

// GeometricFromCV works out mean and SD behind a geometric mean and its coefficient of
// variation in percent, in both meanings of it.
func GeometricFromCV(gm, percent convert.Printed) (Joint, error) {
	var j Joint
	if gm.Value <= 0 || percent.Low() <= 0 {
		return Joint{}, fmt.Errorf("a geometric mean and its coefficient of variation are above 0")
	}
	for _, way := range []struct {
		name, formula string
		of            func(cv float64) (float64, error)
	}{
		{"if CV = √(exp(s²) − 1), as usual", "√ln(1 + CV²)", convert.LogSDFromGeometricCV},
		{"if CV = exp(s) − 1, the geometric SD less 1", "ln(1 + CV)", func(cv float64) (float64, error) { return convert.LogSDFromGSD(1 + cv) }},
	} {
		s, err := way.of(percent.Value / 100)
		if err != nil {
			return Joint{}, err
		}
		m, err := convert.LogNormalToRaw(gm.Value, s)
		if err != nil {
			return Joint{}, err
		}
		var span convert.Range
		for _, end := range []struct {
			cv   float64
			into *float64
		}{{percent.Low(), &span.Low}, {percent.High(), &span.High}} {
			log, err := way.of(end.cv / 100)
			if err != nil {
				return Joint{}, err
			}
			raw, err := convert.LogNormalToRaw(gm.Value, log)
			if err != nil {
				return Joint{}, err
			}
			*end.into = raw.SD
		}
		j.step("SD of the logarithms s = %s = %s, %s", way.formula, short(s), way.name)
		j.step("mean = GM·exp(s²/2) = %s; SD = mean·√(exp(s²) − 1) = %s", short(m.Mean), short(m.SD))
		j.add("mean", m.Mean, way.name)
		j.addRange("SD", m.SD, span, way.name)
	}
	j.Trail.Assumptions = append(j.Trail.Assumptions, "lognormal law; no zeros, no detection limit")
	return j, nil
}
