package table

import (
	"strings"

	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// statisticOf settles what kind of estimate a result is: what the statement of
// its spread names, else the nearest label or heading that names one, else what
// such a spread is usually printed with.
func (f *frame) statisticOf(e *estimate, rd *reading, x *context, all []statement) (st result.Statistic, measure, model string, assumed bool) {
	st, measure, model = result.Statistic(rd.pair.Statistic), rd.pair.Measure, rd.pair.Model
	if s, m, mo := nearStatistic(all, rankGroup); s != "" && outranks(s, st) && !(s == result.Median && st == result.Mean && (rd.given == result.SD || rd.given == result.SE)) {
		st = s
		if m != "" {
			measure = m
		}
		if mo != "" {
			model = mo
		}
	}
	if st == "" || st == result.Mean && rd.at.rank >= rankCaption && rd.pair.Statistic == "" {
		if s, m, mo := nearStatistic(all, rankNote); s != "" && st == "" {
			st, measure, model = s, m, mo
		}
	}
	if st == "" {
		st, assumed = usual(rd.given), true
		switch {
		case rd.given != result.SD && rd.given != result.IQR && rd.given != result.Range && regression.MatchString(f.tab.Caption.S):
			st = result.Coefficient
		case rd.given == result.CI && e.value.Percent:
			st = result.Proportion
		}
	}
	if st == result.Ratio && rd.given != result.CI && rd.given != result.SE && rd.given != result.Unstated {
		st, measure = usual(rd.given), "" // HR is a heart rate here
	}
	return f.refine(st, measure, e, rd, x, all), measure, model, assumed
}

// outranks reports that a statistic in a near label replaces the one that came
// with the spread's statement.
func outranks(near, have result.Statistic) bool {
	switch have {
	case "":
		return true
	case result.Mean:
		return near != result.Proportion && near != result.Rate && near != result.Other
	case result.Median:
		return false
	}
	return false
}

// nearStatistic gives the statistic that the nearest statement names. What says
// more (a ratio, a coefficient, a difference) in the row label or the column
// heading goes before a mean or a change; efficacy, area and the like only count
// where nothing else is said.
func nearStatistic(all []statement, limit rank) (result.Statistic, string, string) {
	var first, strong, weak pair
	for i := range all {
		if all[i].rank > limit {
			break
		}
		best := pair{}
		for _, q := range all[i].pairs {
			if q.Statistic == "" || all[i].nameOnly(q) {
				continue
			}
			if best.Statistic == "" || q.Spread != "" && best.Spread == "" || weight(q.Statistic) > weight(best.Statistic) {
				best = q
			}
		}
		switch {
		case best.Statistic == "":
		case best.Statistic == "other":
			if weak.Statistic == "" {
				weak = best
			}
		default:
			if first.Statistic == "" {
				first = best
			}
			if strong.Statistic == "" && all[i].rank <= rankColumn && (best.Statistic == "ratio" || best.Statistic == "coefficient" || best.Statistic == "risk difference") {
				strong = best
			}
		}
	}
	for _, q := range []pair{strong, first, weak} {
		if q.Statistic != "" {
			return result.Statistic(q.Statistic), q.Measure, q.Model
		}
	}
	return "", "", ""
}

// nameOnly reports a term that here is part of what was measured: "E/A ratio",
// "heart rate", "area under the curve", beside other words and without a spread.
func (s *statement) nameOnly(q pair) bool {
	if q.Spread != "" && q.Statistic != "ratio" || s.rank > rankGroup {
		return false
	}
	switch q.Statistic {
	case "ratio":
		if q.Measure != "" {
			return false
		}
	case "rate", "other", "coefficient", "proportion":
	default:
		return false
	}
	return !s.onlyTerms
}

// weight orders statistics named in one heading by how much they say.
func weight(s string) int {
	switch s {
	case "mean":
		return 1
	case "rate", "proportion":
		return 0
	case "other":
		return -1
	}
	return 2
}

var regression = pattern.MustCompile(`(?i)\bregression\b|\bmultivaria(?:te|ble) analys|\bunivaria(?:te|ble) analys|\bcoefficients?\b`)

func usual(g result.GivenAs) result.Statistic {
	switch g {
	case result.IQR, result.Range:
		return result.Median
	}
	return result.Mean
}

var (
	sensitivityAnalysis = pattern.MustCompile(`(?i)\bsensitivity analys[ie]s\b`)

	strictShare = pattern.MustCompile(`(?i)\bper ?cent of\b|\bproportion|\bprevalence|\bsensitivity|\bspecificity|\bpredictive value|\b(?:response|success|cure|event|mortality|failure|detection|infection|attack|relapse|recurrence|pregnancy|completion|retention|remission|survival) rates?\b|\bn ?\(%\)|^\s*%|%\s*(?:\|\s*)?[≥≤<>]|\bpatients with\b|\bpatients \(%\)`)
)

// refine turns a plain mean into a change, a difference or a proportion where
// the context says so.
func (f *frame) refine(st result.Statistic, measure string, e *estimate, rd *reading, x *context, all []statement) result.Statistic {
	if st == result.MeanDifference && !x.contrast && x.arm != "" && (x.within || f.colArms && rd.given != result.CI) {
		return result.MeanChange // a "difference" inside one arm
	}
	switch st {
	case result.Mean, result.MeanChange:
		if x.contrast && (x.arm2 != "" || st == result.Mean) {
			if f.shares(x, all) {
				return result.RiskDifference
			}
			return result.MeanDifference
		}
		if st == result.Mean && x.change && !f.namedPoint(x) {
			return result.MeanChange
		}
		if st == result.Mean && rd.given == result.CI && f.shares(x, all) && (x.unit == "%" || x.unit == "") {
			return result.Proportion
		}
	case result.MeanDifference:
		if f.shares(x, all) && measure == "" {
			return result.RiskDifference
		}
	case result.Rate:
		if rd.given == result.SD || rd.given == result.SE {
			return result.Mean
		}
		if x.unit == "%" {
			return result.Proportion
		}
	case result.Proportion:
		if rd.given == result.SD || rd.given == result.SE {
			return result.Mean
		}
		if x.contrast && x.arm2 != "" || strings.HasPrefix(e.value.Value, "-") {
			return result.RiskDifference // a share is never below zero
		}
		if x.contrast && x.arm2 != "" {
			return result.RiskDifference // "Difference in prevalence (95% CI)"
		}
	}
	return st
}

// namedPoint reports a column or row of plain time points beside others of
// change: "Baseline" under a caption "Changes in mass".
func (f *frame) namedPoint(x *context) bool {
	low := fold(x.time)
	if x.changeAll {
		return atBaseline(&context{time: x.time}) && low != ""
	}
	if low == "" || x.timeGuess || changeMark.MatchString(low) {
		return false
	}
	own := f.lex.change(x.heading)
	return !own
}

// shares reports that the outcome is a share of subjects.
func (f *frame) shares(x *context, all []statement) bool {
	for _, s := range []string{x.outcome, x.heading} {
		if strictShare.MatchString(sensitivityAnalysis.ReplaceAllString(s, " ")) && !strings.Contains(fold(s), "heart rate") {
			return true
		}
	}
	return false
}

var (
	adjustedWord   = pattern.MustCompile(`(?i)\badjust(?:ed|ing|ment)\b|\bancova\b|\banalysis of covariance\b|\bcovariates?\b|\bcontroll(?:ed|ing) for\b|\bleast[- ]squares?\b|\bls[- ]?means?\b|\blsmd?\b|\bmarginal means?\b|\bmultivaria(?:te|ble)\b|\bmodel-(?:averaged|based|adjusted)\b|\badj\.?\b|\bmultiple regression\b|\bpropensity\b`)
	unadjustedWord = pattern.MustCompile(`(?i)\bunadjusted\b|\bcrude\b|\bunivaria(?:te|ble)\b|\bnot adjusted\b|\braw means?\b|\bobserved means?\b`)
	modelWord      = pattern.MustCompile(`(?i)\bmixed[- ](?:effects? )?models?\b|\bgee\b|\bgeneralized (?:estimating|linear)\b|\bgeneralised (?:estimating|linear)\b|\bglm\b|\brepeated[- ]measures\b|\bimput|\bgeneral linear\b|\bmmrm\b|\bregression\b`)
	leastWord      = pattern.MustCompile(`(?i)\bleast[- ]squares?\b|\bls[- ]?means?\b`)
	marginalWord   = pattern.MustCompile(`(?i)\bmarginal means?\b`)
)

// adjustedOf reads from headings, caption and notes whether an estimate is
// adjusted.
func (f *frame) adjustedOf(rd *reading, r *result.Result, model string, e *estimate, all []statement) {
	switch r.Statistic {
	case result.Mean, result.MeanChange, result.MeanDifference, result.GeometricMean:
	default:
		return
	}
	near, wide := f.near(e, all), f.wide()
	switch {
	case f.lex.anyHas(unadjustedWord, near):
		r.Adjusted = "no"
	case f.lex.anyHas(adjustedWord, near) || model != "" && rd.given != result.SD:
		r.Adjusted = "yes"
	case rd.given == result.SD || f.adjustsElsewhere() && !f.lex.has(adjustedWord, f.tab.Caption.S):
		r.Adjusted = "no"
	case f.lex.anyHas(adjustedWord, wide):
		r.Adjusted = "yes"
		if r.Statistic == result.Mean && !f.lex.has(adjustedWord, f.tab.Caption.S) {
			r.Adjusted = "unclear"
		}
	case f.lex.anyHas(modelWord, wide) || f.lex.anyHas(modelWord, near):
		r.Adjusted = "unclear"
	default:
		r.Adjusted = "no"
	}
	if f.lex.anyHas(leastWord, near) || f.lex.anyHas(leastWord, wide) {
		r.Evidence.Model = append(r.Evidence.Model, "least-squares")
	}
	if f.lex.anyHas(marginalWord, near) {
		r.Evidence.Model = append(r.Evidence.Model, "marginal")
	}
	if r.Adjusted == "yes" && len(r.Evidence.Model) == 0 {
		r.Evidence.Model = append(r.Evidence.Model, "adjusted")
	}
}

// adjustsElsewhere reports that the table heads other columns or rows as
// adjusted, so that those without the word are not.
func (f *frame) adjustsElsewhere() bool {
	for c := f.stub; c < f.tab.Cols; c++ {
		if f.pColumn(c) {
			continue
		}
		for _, l := range f.heads[c] {
			if f.lex.has(adjustedWord, l.text) && !f.lex.has(unadjustedWord, l.text) {
				return true
			}
		}
	}
	return false
}

// near gives the texts near an estimate: labels, headings, the notes that their
// marks and those of the row's p values lead to.
func (f *frame) near(e *estimate, all []statement) []string {
	var out []string
	for _, s := range all {
		if s.rank <= rankGroup {
			out = append(out, s.text)
		}
	}
	for c := f.stub; c < f.tab.Cols; c++ {
		cell := f.grid[e.row][c]
		if cell == nil || !f.pColumn(c) {
			continue
		}
		for _, v := range f.reads[cell].cell.Values {
			for _, m := range v.Marks {
				for _, mk := range f.cellMarks(cell.Text.S[m.Start:m.End]) {
					for _, nt := range f.notes.marked(mk) {
						out = append(out, nt.run.S)
					}
				}
			}
		}
	}
	return out
}

// wide gives the caption and the notes of the whole table.
func (f *frame) wide() []string {
	out := []string{f.tab.Caption.S}
	for _, nt := range f.notes.list {
		out = append(out, nt.run.S)
	}
	return out
}

// anyHas reports that one of the texts holds a match of the pattern.
func (x *lexicon) anyHas(p *pattern.Pattern, texts []string) bool {
	for _, s := range texts {
		if x.has(p, s) {
			return true
		}
	}
	return false
}
