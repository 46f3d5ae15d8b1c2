package prose

import (
	"strings"

	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

var (
	points     = pattern.MustCompile(`(?i)^\s*(?:percent(?:age)?|%)[- ]?points?\b`)
	delta      = pattern.MustCompile(`[ΔΔ∆]\s*=?\s*$`)
	doubled    = pattern.MustCompile(`[ΔΔ∆]\s?[ΔΔ∆]|(?i)\b(?:placebo|vehicle|control|sham|baseline and placebo)[- ](?:corrected|adjusted|subtracted)\b`)
	single     = pattern.MustCompile(`[ΔΔ∆]\s?\p{L}`)
	beyond     = pattern.MustCompile(`(?i)\b(?:over|under)estimated\b[^.;]{0,60}\bby\s*$`)
	moreThan   = pattern.MustCompile(`(?i)^[)\]]?\s*(?:[\p{L}/%]{1,8}\s+)?(?:higher|lower|greater|less|more|fewer|longer|shorter|larger|smaller|better|worse|younger|older)\b`)
	linkedWith = pattern.MustCompile(`(?i)\b(?:associated|correlated)\b`)
	beats      = pattern.MustCompile(`(?i)^\s*(?:bpm|beats)\b|^[^;]{0,40}?\bbpm\b`)
	// moreish are words of comparison right behind a value with its spread, or behind
	// the next values of its list: "8.3 ± 2.1 and 9.6 ± 2.4 higher".
	moreish = pattern.MustCompile(`(?i)^%?(?:\s*(?:,|and|,\s*and)\s*[−-]?[0-9.]+\s*%?\s*±\s*[0-9.]+\s*%?)*[^).;,]{0,45}\b(?:higher|lower|greater|less|more|longer|shorter|larger|smaller)\b`)
)

// contrasted reads what is said of a difference by signs and by words round the
// estimate: percentage points, Δ and ΔΔ, "12% higher than", "overestimated by".
func (p *para) contrasted(c *cand, n named, from, at, to int) (result.Statistic, bool) {
	switch n.statistic {
	case "", result.Proportion, result.Mean, result.MeanChange, result.MeanDifference, result.RiskDifference:
	default:
		return "", false
	}
	clause := p.s[max(from, at-110):at]
	if i := strings.LastIndexAny(clause, ";"); i >= 0 {
		clause = clause[i:]
	}
	end := p.r.Items[c.item].End
	if b := p.r.Items[c.item].Bracket; b > 0 && p.r.Brackets[b-1].Start >= c.est.End {
		end = p.r.Brackets[b-1].End
	}
	switch {
	case points.MatchString(p.stretch(c.est.End, to)):
		return result.RiskDifference, true
	case doubled.MatchString(clause):
		return result.MeanDifference, true
	case delta.MatchString(p.s[from:at]) && (p.says(at, betterThan) || p.says(at, contrast)):
		return result.MeanDifference, true
	case delta.MatchString(p.s[from:at]), single.MatchString(clause):
		return result.MeanChange, true
	case beyond.MatchString(p.s[from:at]), c.given == result.CI && end < to && moreThan.MatchString(p.s[end:to]):
		return result.MeanDifference, true
	case c.given == result.CI && n.statistic != result.MeanDifference && n.statistic != result.Proportion && p.unitless(c) && linkedWith.MatchString(clause):
		return result.Coefficient, true // "age was associated with mass (−0.04; 95% CI −0.06 to −0.02)"
	}
	return "", false
}

// unitless reports that no unit and no percent sign stands behind the estimate.
func (p *para) unitless(c *cand) bool {
	_, ok := p.unitAt(c.est.End)
	return !ok && !c.est.Percent && !c.lower.Percent
}
