package prose

import (
	"regexp"
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/result"
)

// named is the statistic of a result and the words that say so.
type named struct {
	statistic result.Statistic
	measure   string
	model     string
	at        grammar.Span
}

var (
	changeWords = regexp.MustCompile(`(?i)\b(?:change[ds]?|increas(?:e|ed|es|ing)|decreas(?:e|ed|es|ing)|reduc(?:ed|tion|tions|es)|fell|rose|dropp?ed|declined?|gain(?:ed|s)?|lost|loss|improve(?:d|ment)|rise|fall|drop)\b`)
	contrast    = regexp.MustCompile(`(?i)\b(?:than|compared (?:with|to)|versus|vs|relative to|in favou?r of|between[- ](?:the )?(?:two )?(?:groups?|arms?|treatments?)|differen(?:ce|t|ces|tial)|superior)\b`)
	betterThan  = regexp.MustCompile(`(?i)\b(?:higher|lower|greater|less|more|fewer|longer|shorter|larger|smaller|better|worse|younger|older)\b[^.;]{0,80}\bthan\b`)
	sharesOf    = regexp.MustCompile(`(?i)\b(?:percentage|proportion|prevalence|sensitivity|specificity|predictive value|survival|cure|success|response|rates?|coverage|uptake|adherence|incidence)\b`)
)

// statistic finds what kind of estimate the candidate is: from the nearest term
// before it in the sentence, from a term between it and its spread, else from
// the words of change or contrast around it and the kind of spread.
func (p *para) statistic(c *cand) named {
	it := &p.r.Items[c.item]
	at := c.est.Start
	from, to := p.sentence(at)
	best := named{}
	for k := range p.r.Items {
		e := &p.r.Items[k]
		if e.Start >= it.Start || e.Start < from {
			continue
		}
		if e.Statistic == "" || e.Kind != grammar.KindTerm {
			continue
		}
		if e.Start < at && at-e.End > 160 {
			continue
		}
		n := named{statistic: result.Statistic(e.Statistic), measure: e.Measure, model: e.Model, at: e.WordAt}
		best = p.combine(best, n)
	}
	if best.statistic == "" {
		best = p.termBehind(c, to)
	}
	return p.settle(c, best, from, at, to)
}

// termBehind looks for a term just behind the spread: "12.4 ± 1.3 (mean ± SD)",
// "0.83 (0.70–0.99; odds ratio)".
func (p *para) termBehind(c *cand, to int) named {
	it := &p.r.Items[c.item]
	for k := c.item + 1; k < len(p.r.Items) && k < c.item+3; k++ {
		e := &p.r.Items[k]
		if e.Start < to && e.Start-it.End < 25 && e.Kind == grammar.KindTerm && e.Statistic != "" {
			return named{statistic: result.Statistic(e.Statistic), measure: e.Measure, model: e.Model, at: e.WordAt}
		}
	}
	return named{}
}

// combine lets a later term replace an earlier one, but "mean ... difference"
// and "adjusted ... mean" stay together.
func (p *para) combine(a, b named) named {
	if a.statistic == "" {
		return b
	}
	near := b.at.Start-a.at.End < 40
	switch {
	case near && b.statistic == result.Mean && (a.statistic == result.MeanDifference || a.statistic == result.MeanChange):
		return a
	case near && b.statistic == result.MeanDifference && a.statistic == result.MeanChange,
		near && b.statistic == result.MeanChange && a.statistic == result.MeanDifference:
		a.statistic = result.MeanDifference
		return a
	case near && a.statistic == b.statistic:
		if b.measure == "" {
			b.measure = a.measure
		}
		if b.model == "" {
			b.model = a.model
		}
	case near && a.statistic == result.Ratio && b.statistic != result.Ratio && b.at.Start-a.at.End < 4:
		return a
	}
	return b
}

// settle decides where no term, or one that is too general, was found.
func (p *para) settle(c *cand, n named, from, at, to int) named {
	before := p.s[max(from, at-110):at]
	around := p.s[from:to]
	change := changeWords.MatchString(lastClause(before))
	percent := c.est.Percent || c.lower.Percent
	switch c.given {
	case result.IQR:
		if c.quartile || n.statistic != result.Mean {
			n.statistic = result.Median
		}
		return n
	case result.Range:
		if n.statistic != result.Mean && n.statistic != result.Median {
			n.statistic = result.Mean
			if strings.Contains(strings.ToLower(around), "median") {
				n.statistic = result.Median
			}
		}
		return n
	case result.SD, result.SE, result.Unstated:
		switch n.statistic {
		case result.Mean:
			if change && strings.Contains(lastClause(before), " by ") {
				n.statistic = result.MeanChange
			}
		case result.MeanChange, result.MeanDifference, result.Coefficient, result.GeometricMean, result.Median, result.Ratio:
		case "", result.Proportion, result.Rate, result.Other, result.RiskDifference:
			n.statistic, n.measure = result.Mean, ""
			if change {
				n.statistic = result.MeanChange
			}
		}
		return n
	}
	switch n.statistic {
	case "":
		switch {
		case betterThan.MatchString(around) && !percent, contrast.MatchString(lastClause(before)):
			n.statistic = result.MeanDifference
		case change:
			n.statistic = result.MeanChange
		case percent:
			n.statistic = result.Proportion
		default:
			n.statistic = result.Mean
		}
	case result.MeanChange:
		if betterThan.MatchString(around) || contrast.MatchString(before) {
			n.statistic = result.MeanDifference
		}
	case result.Mean:
		if percent && sharesOf.MatchString(before) {
			n.statistic = result.Proportion
		}
	case result.Rate:
		if percent {
			n.statistic = result.Proportion
		}
	case result.MeanDifference:
		if percent && n.measure == "" {
			n.statistic = result.RiskDifference
		}
	}
	return n
}

// lastClause is what stands behind the last semicolon, full stop or opening
// bracket.
func lastClause(s string) string {
	if i := strings.LastIndexAny(s, ";"); i >= 0 {
		return s[i+1:]
	}
	return s
}
