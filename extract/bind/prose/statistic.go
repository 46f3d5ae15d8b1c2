package prose

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/pattern"
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
	changeWords = pattern.MustCompile(`(?i)\b(?:change[ds]?|increas(?:e|ed|es|ing)|decreas(?:e|ed|es|ing)|reduc(?:ed|tion|tions|es)|fell|rose|dropp?ed|declined?|gain(?:ed|s)?|lost|loss|improve(?:d|ment)|rise|fall|drop)\b`)
	contrast    = pattern.MustCompile(`(?i)\b(?:than|compared (?:with|to)|versus|vs|relative to|in favou?r of|between[- ](?:the )?(?:two )?(?:groups?|arms?|treatments?)|differen(?:ce|t|ces|tial)|superior)\b`)
	betterThan  = pattern.MustCompile(`(?i)\b(?:higher|lower|greater|less|more|fewer|longer|shorter|larger|smaller|better|worse|younger|older)\b[^.;]{0,80}\bthan\b`)
	sharesOf    = pattern.MustCompile(`(?i)\b(?:percentage|proportion|prevalence|sensitivity|specificity|predictive value|survival|cure|success|response|rates?|coverage|uptake|adherence|incidence)\b`)
)

// statistic finds what kind of estimate the candidate is: from the nearest term
// before it in the sentence, from a term between it and its spread, else from
// the words of change or contrast around it and the kind of spread.
func (p *para) statistic(c *cand) named {
	it := &p.r.Items[c.item]
	at := c.est.Start
	from, to := p.sentence(at)
	best := named{}
	for k, last := p.items(from, it.Start); k < last; k++ {
		e := &p.r.Items[k]
		if e.Statistic == "" || e.Kind != grammar.KindTerm || e.Start < at && at-e.End > 600 {
			continue
		}
		n := named{statistic: result.Statistic(e.Statistic), measure: e.Measure, model: e.Model, at: e.WordAt}
		if n.statistic == result.MeanDifference && p.noContrastOf(c, n.at) || n.statistic == result.Ratio && p.heartRate(c, n.at) {
			continue
		}
		best = p.combine(best, n)
	}
	if best.statistic == "" {
		best = p.termBehind(c, to)
	}
	return p.settle(c, best, from, at, to)
}

// heartRate reports an abbreviation that cannot name a ratio: what has an SD or
// a ± behind it is a heart rate, not a hazard ratio.
func (p *para) heartRate(c *cand, at grammar.Span) bool {
	switch c.given {
	case result.SD, result.SE, result.Unstated, result.CI:
		if c.given == result.CI && !beats.MatchString(p.s[c.est.End:]) {
			return false
		}
		return !strings.Contains(strings.ToLower(p.s[at.Start:at.End]), "ratio")
	}
	return false
}

var denied = pattern.MustCompile(`(?i)\b(?:no|not|any|without)\b[^.;]{0,40}$`)

// noContrastOf reports that a word "difference" only speaks about the values
// of single groups: "no significant differences in mass (12.4 ± 1.3 vs ...)".
// The spread of a value with a CI may still be a difference's.
func (p *para) noContrastOf(c *cand, at grammar.Span) bool {
	switch c.given {
	case result.SD, result.SE, result.Unstated, result.IQR, result.Range:
	default:
		return false
	}
	between := ""
	if at.End <= c.est.Start {
		between = p.s[at.End:c.est.Start]
	}
	return strings.HasSuffix(p.s[at.Start:at.End], "s") || len(between) > 50 || strings.ContainsAny(between, ",;") ||
		denied.MatchString(p.s[max(0, at.Start-50):at.Start])
}

// resultBetween reports that another result stands between two bytes.
func (p *para) resultBetween(a, b int) bool {
	for k, last := p.found(a, b); k < last; k++ {
		if p.cands[k].est.Start >= a {
			return true
		}
	}
	return false
}

// termBehind looks for a term just behind the spread: "12.4 ± 1.3 (mean ± SD)",
// "0.83 (0.70–0.99; odds ratio)".
func (p *para) termBehind(c *cand, to int) named {
	it := &p.r.Items[c.item]
	for k := c.item + 1; k < len(p.r.Items) && k < c.item+3; k++ {
		e := &p.r.Items[k]
		if e.Start < to && e.Start-it.End < 25 && e.Bracket > 0 && (e.Bracket == it.Bracket || e.Start-it.End < 14) && e.Kind == grammar.KindTerm && e.Statistic != "" {
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
	case near && (a.statistic == result.Mean || a.statistic == result.Median || a.statistic == result.GeometricMean) &&
		(b.statistic == result.Coefficient || b.statistic == result.Rate || b.statistic == result.Other || b.statistic == result.Proportion) &&
		!strings.ContainsAny(p.s[a.at.End:b.at.Start], "0123456789,;"):
		return a // "the median slope"
	case near && a.statistic == b.statistic:
		if b.measure == "" {
			b.measure = a.measure
		}
		if b.model == "" {
			b.model = a.model
		}
	case a.statistic == result.Ratio && b.statistic != result.Ratio && b.at.Start-a.at.End < 60 && !strings.ContainsAny(p.s[a.at.End:b.at.Start], "0123456789;"):
		return a // "the odds ratio and its CI for the treatment difference"
	}
	return b
}

// joinedValues is a word that joins the values of two groups, "12.4 (SD 1.3) vs
// 11.1": it makes no difference of the second.
var joinedValues = pattern.MustCompile(`(?i)(?:[0-9%)\]]\s*|[0-9]\s*[a-zµμ%/°]{1,8}\s*)[,;]?\s*(?:vs\.?|versus|compared with|compared to)\s*$`)

var (
	fromTo = pattern.MustCompile(`(?i)(?:\bfrom|\bto|\buntil)\s+(?:[\w-]+\s+){0,2}?\(?$`)
	byMuch = pattern.MustCompile(`(?i)\b(?:by|of|was|were|averaged)\b[^0-9]{0,25}$`)
)

// settle decides where no term, or one that is too general, was found.
func (p *para) settle(c *cand, n named, from, at, to int) named {
	before := joinedValues.ReplaceAllString(p.s[max(from, at-110):at], "; ")
	around := p.s[from:to]
	percent := c.est.Percent || c.lower.Percent
	if st, ok := p.contrasted(c, n, from, at, to); ok && c.given != result.IQR && c.given != result.Range {
		n.statistic = st
		return n
	}
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
		return p.settleSpread(c, n, before, p.s[p.r.Items[c.item].End:to])
	}
	change := changeWords.MatchString(lastClause(before))
	if fromTo.MatchString(before) && changeWords.MatchString(before) && (n.statistic == "" || n.statistic == result.MeanChange) {
		n.statistic = result.Mean // "rose from 12.4 to 13.1"
		if percent {
			n.statistic = result.Proportion
		}
		return n
	}
	compared := p.says(at, betterThan) || contrast.MatchString(p.beforeFirst(c, from))
	switch n.statistic {
	case "":
		switch {
		case compared && !percent, contrast.MatchString(lastClause(before)):
			n.statistic = result.MeanDifference
		case change:
			n.statistic = result.MeanChange
		case percent:
			n.statistic = result.Proportion
		default:
			n.statistic = result.Mean
		}
	case result.MeanChange:
		if compared {
			n.statistic = result.MeanDifference
		}
	case result.Mean:
		switch {
		case p.introduced(n.at, c): // "mean: 1768.7"
		case percent && sharesOf.MatchString(before):
			n.statistic = result.Proportion
		case compared:
			n.statistic = result.MeanDifference
		case p.changeNoun(n.at, at):
			n.statistic = result.MeanChange
		case percent && p.says(at, changeWords):
			n.statistic = result.MeanChange
		}
	case result.Rate:
		if percent {
			n.statistic = result.Proportion
		}
	case result.Coefficient:
		if n.measure == "" && compared {
			n.statistic = result.MeanDifference // the coefficient of an arm
		}
	case result.MeanDifference:
		if percent && n.measure == "" && sharesBeside(p, c, from, to) {
			n.statistic = result.RiskDifference
		}
	}
	return n
}

// sharesBeside reports that percentages stand in the sentence besides the
// candidate's own: the difference is one of shares.
func sharesBeside(p *para, c *cand, from, to int) bool {
	for k, last := p.items(from, to); k < last; k++ {
		e := &p.r.Items[k]
		if e.Kind == grammar.KindNumber && e.Value.Percent && e.End <= to && k != c.estItem {
			return true
		}
	}
	return false
}

// settleSpread decides for a value with SD, SE or a bare ±: a mean, unless a
// change or difference is said right before it.
func (p *para) settleSpread(c *cand, n named, before, behind string) named {
	switch n.statistic {
	case result.Ratio:
		if n.measure != "" {
			return n
		}
		n.statistic = result.Mean // "a ratio of 0.31 ± 0.05" of the values of one group
	case result.Median:
		if !p.resultBetween(n.at.End, c.est.Start) {
			return n
		}
		n.statistic, n.measure = result.Mean, ""
	case result.Coefficient, result.GeometricMean:
		return n
	}
	clause := before
	if i := strings.LastIndexAny(before, ";±"); i >= 0 {
		clause = before[i:]
	}
	switch {
	case fromTo.MatchString(before):
		n.statistic, n.measure = result.Mean, ""
	case moreish.MatchString(behind) && !strings.Contains(behind[:min(len(behind), 45)], " than"):
		n.statistic = result.MeanDifference
	case n.statistic == result.MeanDifference:
	case n.statistic == result.Mean && p.changeNoun(n.at, c.est.Start):
		n.statistic = result.MeanChange
	case n.statistic == result.MeanChange && (strings.Contains(strings.ToLower(p.s[n.at.Start:n.at.End]), "mean") || byMuch.MatchString(before)):
	case changeWords.MatchString(clause) && byMuch.MatchString(before):
		n.statistic = result.MeanChange
	default:
		n.statistic, n.measure = result.Mean, ""
	}
	return n
}

var (
	changeNouns = pattern.MustCompile(`(?i)\b(?:weight|mass)? ?(?:loss|gain|reduction|increase|decrease|decline|improvement|change)s?\b`)
	otherLoss   = pattern.MustCompile(`(?i)\b(?:blood|hair|hearing|tooth|job|fluid|bone|water|heat|vision|memory) loss`)
)

// changeNoun reports a word of change between a term and the estimate: "mean
// weight loss was 1.2 kg".
func (p *para) changeNoun(term grammar.Span, est int) bool {
	if term.End == 0 || term.End > est {
		return false
	}
	s := p.s[term.End:est]
	return len(s) < 90 && changeNouns.MatchString(s) && !otherLoss.MatchString(s) && !strings.ContainsAny(s, ";")
}

// introduced reports that a term stands right before the candidate's estimate,
// or right before an earlier result of the sentence.
func (p *para) introduced(at grammar.Span, c *cand) bool {
	from, to := p.sentence(c.est.Start)
	for k, last := p.found(from, to); k < last; k++ {
		if d := p.cands[k].est.Start - at.End; d >= 0 && d < 4 && p.cands[k].est.Start <= c.est.Start {
			return true
		}
	}
	return false
}

// beforeFirst is the sentence up to its first result.
func (p *para) beforeFirst(c *cand, from int) string {
	end := c.est.Start
	_, to := p.sentence(c.est.Start)
	for k, last := p.found(from, to); k < last; k++ {
		if s := p.cands[k].est.Start; s >= from && s < end {
			end = s
		}
	}
	return p.s[from:end]
}

// lastClause is what stands behind the last semicolon.
func lastClause(s string) string {
	if i := strings.LastIndexAny(s, ";"); i >= 0 {
		return s[i+1:]
	}
	return s
}
