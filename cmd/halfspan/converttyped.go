package main

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"halfspan/convert"
	"halfspan/convert/working"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// loneSize is the only sample size of a typed text, wherever it stands; 0 where
// there is none or more than one.
func loneSize(text string) int {
	size := 0
	for _, it := range grammar.Read(grammar.Text{S: text}).Items {
		if it.Kind != grammar.KindSampleSize {
			continue
		}
		n, ok := it.Value.Float()
		if !ok || n < 1 || n > 1e9 || size != 0 {
			return 0
		}
		size = int(n)
	}
	return size
}

// bothSizes are the ways to type the n of two arms.
var bothSizes = []*pattern.Pattern{
	pattern.MustCompile(`(?i)\bn\s*[=:]?\s*(\d{1,9})\s*(?:and|vs?\.?|versus|against|,|;|/|\+)\s*(?:n\s*=\s*)?(\d{1,9})\b`),
	pattern.MustCompile(`(?i)\bn\s*[1₁]\s*=\s*(\d{1,9})\D{1,12}\bn\s*[2₂]\s*=\s*(\d{1,9})\b`),
}

// pairOfSizes reads the n of two arms from a typed text.
func pairOfSizes(text string) (n1, n2 int, ok bool) {
	for _, way := range bothSizes {
		m := way.FindStringSubmatch(text)
		if m == nil {
			continue
		}
		n1, err1 := strconv.Atoi(m[1])
		n2, err2 := strconv.Atoi(m[2])
		if err1 == nil && err2 == nil && n1 > 0 && n2 > 0 {
			return n1, n2, true
		}
	}
	return 0, 0, false
}

// saySizes puts in the sample sizes that the reading of running text left out: the
// only one of the text where all results are of one estimate, both of a comparison,
// and the whole of "9 of 40 (22.5%)".
func saySizes(results []result.Result, text string) {
	if len(results) == 0 {
		return
	}
	oneEstimate := !slices.ContainsFunc(results, func(r result.Result) bool { return r.Estimate != results[0].Estimate })
	n1, n2, both := pairOfSizes(text)
	for i := range results {
		r := &results[i]
		switch r.Statistic {
		case result.MeanDifference, result.RiskDifference, result.Ratio:
			if both && r.N2 == 0 && (r.N == 0 || r.N == n1) {
				r.N, r.N2, r.NFrom = n1, n2, result.NBeside
			}
			continue
		case result.Proportion:
			if n := wholeOf(r.Estimate, text); n > 0 && r.N == 0 {
				r.N, r.NFrom = n, result.NBeside
			}
		}
		if n := loneSize(text); n > 0 && !both && oneEstimate && r.N == 0 {
			r.N, r.NFrom = n, result.NBeside
		}
	}
}

// fraction is a count of a whole.
var fraction = pattern.MustCompile(`(\d{1,9})\s*(?:/|of|out of)\s*(\d{1,9})\b`)

// wholeOf gives n where the text says "x of n" and that is the percentage printed.
func wholeOf(percentage, text string) int {
	p, err := convert.ReadPrinted(percentage)
	m := fraction.FindStringSubmatch(text)
	if err != nil || m == nil {
		return 0
	}
	x, err1 := strconv.Atoi(m[1])
	n, err2 := strconv.Atoi(m[2])
	if err1 != nil || err2 != nil || n == 0 || math.Abs(100*float64(x)/float64(n)-p.Value) > p.Half+1e-9 {
		return 0
	}
	return n
}

// spoken is what the words of a typed text call its estimate; the zero Meaning where
// they call it nothing, or two things.
func spoken(text string) grammar.Meaning {
	var m grammar.Meaning
	for _, it := range grammar.Read(grammar.Text{S: text}).Items {
		if it.Kind != grammar.KindTerm || it.Statistic == "" || it.Statistic == m.Statistic {
			continue
		}
		if m.Statistic != "" {
			return grammar.Meaning{}
		}
		m = it.Meaning
	}
	return m
}

// sayKind puts right a difference of two risks that was taken for a percentage: a
// typed text is about one thing, and says it.
func sayKind(r *result.Result, text string) {
	for _, it := range grammar.Read(grammar.Text{S: text}).Items {
		if it.Kind == grammar.KindTerm && it.Statistic == string(result.RiskDifference) && r.Statistic == result.Proportion {
			r.Statistic, r.Measure = result.RiskDifference, it.Measure
		}
	}
}

// relativeChange are words that make a percentage a change relative to something.
var relativeChange = pattern.MustCompile(`(?i)%\s*(?:\([^)]*\)\s*)?(lower|less|fewer|reduction|decrease|decline|higher|more|greater|increase)\b`)

// besideChange shows what a percentage such as "32% lower (95% CI 12% to 47%)" is as a
// ratio to the comparator.
func besideChange(w *working.Working, text string) {
	m := relativeChange.FindStringSubmatch(text)
	r := w.Record
	if m == nil || r.Statistic == nil || *r.Statistic != string(result.Proportion) || r.Estimate == nil || r.Lower == nil || r.Upper == nil || r.Level == nil {
		return
	}
	sign := 1.0
	switch strings.ToLower(m[1]) {
	case "lower", "less", "fewer", "reduction", "decrease", "decline":
		sign = -1
	}
	var ratios [3]float64
	for i, printed := range []*string{r.Estimate, r.Lower, r.Upper} {
		p, err := convert.ReadPrinted(*printed)
		if err != nil {
			return
		}
		if ratios[i], err = convert.RatioFromPercentChange(sign * p.Value); err != nil {
			return
		}
	}
	low, high := min(ratios[1], ratios[2]), max(ratios[1], ratios[2])
	se, err := convert.LogSEFromInterval(low, high, *r.Level, convert.Normal)
	if err != nil {
		return
	}
	number := working.Number(se)
	w.Trail.Alternatives = append(w.Trail.Alternatives, working.Alternative{Name: "as a ratio to the comparator", SE: &number,
		Note: fmt.Sprintf("%.4g (%.4g to %.4g); SE of the logarithm, by z", ratios[0], low, high)})
}

// bareSpread reads "12.4 (1.3)", "12.4 (11.2 to 13.6)", "OR 1.8 (1.1 to 2.9)": an
// estimate with a bracket that no word explains, which running text does not offer as
// a result. What the bracket is stays unstated unless --as says it or the estimate is
// a ratio, which has an interval.
func bareSpread(text string) []result.Result {
	cell := grammar.ParseCell(grammar.Text{S: text})
	if len(cell.Values) != 1 || cell.Values[0].Estimate.Value == "" {
		return nil
	}
	v := cell.Values[0]
	r := result.Result{Snippet: text, Estimate: v.Estimate.Value, GivenAs: result.Unstated, Zone: paper.Results, Unit: v.Unit}
	level := 0.0
	for _, part := range v.Parts {
		switch part.Kind {
		case grammar.KindNumber, grammar.KindPlusMinus, grammar.KindSpread, grammar.KindInterval:
			if _, ok := grammar.CommonPower(v.Estimate, part.Value, part.Lower, part.Upper); !ok {
				return nil // digits of different powers of ten do not belong together
			}
		}
		switch part.Kind {
		case grammar.KindNumber, grammar.KindPlusMinus:
			if part.Value.Percent && !v.Estimate.Percent {
				if x, ok := part.Value.Float(); ok && x >= 50 && x < 100 {
					level = x // "95%-KI 11.2 to 13.6": words of another language
				}
				continue
			}
			if r.GivenValue == "" {
				r.GivenValue = part.Value.Value
			}
		case grammar.KindInterval:
			r.Lower, r.Upper = part.Lower.Value, part.Upper.Value
		case grammar.KindSampleSize:
			if n, ok := part.Value.Float(); ok && n >= 1 && n < 1e9 {
				r.N, r.NFrom = int(n), result.NBeside
			}
		}
	}
	bounds := r.Lower != "" && r.Upper != ""
	if !bounds && slices.ContainsFunc(cell.Terms, func(it grammar.Item) bool { return it.Level != "" }) {
		return nil // "12.4 (95% CI 11.2)": an interval of which one bound is not there
	}
	if r.GivenValue == "" && !bounds {
		return nil
	}
	called := spoken(text)
	r.Statistic, r.Measure = result.Statistic(called.Statistic), called.Measure
	switch {
	case bounds && level > 0:
		r.GivenAs, r.Level, r.GivenValue = result.CI, level, ""
		if r.Statistic == "" {
			r.Statistic = result.Mean
			r.Raise("statistic-assumed", "that the estimate is a mean is not said")
		}
	case bounds && (r.Statistic == result.Ratio || r.Statistic == result.GeometricMean):
		r.GivenAs, r.GivenValue = result.CI, ""
		r.Raise("interval-unnamed", "nothing says that the bounds are a confidence interval")
	case r.GivenValue != "" && r.Statistic == "":
		r.Statistic = result.Mean
	}
	if power := v.Estimate.Power; power != "" {
		r.Unit = strings.TrimSpace("×" + power + " " + r.Unit)
		r.Raise("power-of-ten", "the digits are printed with the factor ×"+power+", which stands in the unit")
	}
	return []result.Result{r}
}

// variation is a coefficient of variation in percent.
var variation = pattern.MustCompile(`(?i)\b(?:g?CV|coefficient of variation)\s*[=:]?\s*(\d+(?:\.\d+)?)\s*%`)

// onlyCV works out a geometric mean that has a coefficient of variation in place of an
// interval.
func onlyCV(text string, statistic result.Statistic) (j working.Joint, ok bool, err error) {
	m := variation.FindStringSubmatchIndex(text)
	if m == nil || statistic != result.GeometricMean {
		return working.Joint{}, false, nil
	}
	cv, failed := convert.ReadPrinted(text[m[2]:m[3]])
	if failed != nil {
		return working.Joint{}, false, nil
	}
	for _, it := range grammar.Read(grammar.Text{S: text}).Items {
		if it.Kind != grammar.KindNumber || it.Start == m[2] {
			continue
		}
		if gm, failed := convert.ReadPrinted(it.Value.Value); failed == nil {
			j, err = working.GeometricFromCV(gm, cv)
			return j, true, err
		}
	}
	return working.Joint{}, false, nil
}

// onlyP works out a ratio, or a difference of two means, that has a p value and no
// interval; ok is false where the text is no such result.
func onlyP(text string, opt convertOptions) (j working.Joint, ok bool, err error) {
	called := spoken(text)
	statistic := result.Statistic(called.Statistic)
	if j, ok, err := onlyCV(text, statistic); ok {
		return j, true, err
	}
	if opt.statistic != "" {
		statistic = result.Statistic(opt.statistic)
	}
	var estimate, p string
	for _, it := range grammar.Read(grammar.Text{S: text}).Items {
		switch {
		case it.Kind == grammar.KindPValue && p == "":
			p = strings.TrimPrefix(it.Value.Rel, "=") + it.Value.Value
		case it.Kind == grammar.KindNumber && estimate == "":
			estimate = it.Value.Value
		}
	}
	printed, failed := convert.ReadPrinted(estimate)
	if failed != nil || p == "" {
		return working.Joint{}, false, nil
	}
	switch statistic {
	case result.Ratio:
		j, err = working.RatioFromP(printed, p)
	case result.MeanDifference:
		n1, n2, _ := pairOfSizes(text)
		if opt.n > 0 {
			n1 = opt.n
		}
		if opt.n2 > 0 {
			n2 = opt.n2
		}
		j, err = working.DifferenceFromP(printed, n1, n2, p)
	default:
		return working.Joint{}, false, nil
	}
	return j, true, err
}
