package prose

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

var (
	planning  = pattern.MustCompile(`(?i)\bsample[- ]size|\bpower(?:ed)?\b|\bprojected\b|\bhypothesi[sz]|\bprior studies\b|\bassum(?:e|ed|es|ing|ption|ptions)\b|\bto detect\b|\banticipat|\btype (?:I|1|II|2)\b|\bwere? (?:needed|required)\b|\bclinically (?:relevant|significant|important|meaningful) (?:difference|change)`)
	planned   = pattern.MustCompile(`(?i)\bsample[- ]size|% power|\bpower(?:ed)? (?:of|to|calculation|analysis)\b`)
	norms     = pattern.MustCompile(`(?i)\bnorm(?:s|ed|ative|alis|aliz)?|\bt[- ]scores?\b|\bstandardi[sz]ed (?:to|with)|\bhas (?:a|the) mean\b|\bgeneral population\b`)
	scaleText = pattern.MustCompile(`(?i)\bscor(?:e|es|ed|ing)\b|\bscales?\b|\bpoints?\b|\bquestionnaire|\brated\b|\blikert\b|\bpossible\b|\bitems?\b|\bnormal range|\breference range|\btarget`)
	climate   = pattern.MustCompile(`(?i)\btemperature|\bhumidity|\bmaintained\b|\bkept\b|\bstored\b|\bincubat|\bhoused\b|\bcentrifug|\bambient\b|\badjusted to\b|\bset to\b|\bpH\b`)
	ofBody    = pattern.MustCompile(`(?i)\b(?:body|core|skin|rectal|ear|brood|surface) temperature`)
	humidity  = pattern.MustCompile(`(?i)\bhumidity\b`)
	margins   = pattern.MustCompile(`(?i)\bmargin|\bequivalence|\bbioequivalen|\bnon-?inferiority|\bacceptance|\bpre-?specified`)
	central   = pattern.MustCompile(`(?i)\bmeans?\b|\bmedians?\b|\baverages?\b|\bM\s*=|\baged?\b`)
	limits    = pattern.MustCompile(`(?i)\b(?:normal|reference|target|possible|therapeutic|score|which|limits|dose|dosage|concentration|wide|linear|frequency)\s*$`)
	cited     = pattern.MustCompile(`(?i)\bet al\b|\bmeta-?analys|\bprevious(?:ly)?\b|\b(?:other|earlier|recent|another|similar) (?:study|studies|trial|trials|report|reports)\b|\bsystematic review|\breported (?:by|in)\b|\bpublished\b|\bliterature\b`)
	bracketed = pattern.MustCompile(`\[[0-9]+(?:[-–,][ 0-9]+)*\]`)
)

func (p *para) sentenceText(b int) string {
	from, to := p.sentence(b)
	return p.s[from:to]
}

// planned reports that the sentence speaks of assumptions, not of results.
func (p *para) planned(b int) bool {
	if !p.says(b, planning) {
		return false
	}
	return p.block.Zone == paper.Methods || p.block.Zone == paper.Elsewhere || p.says(b, planned)
}

// refusedPlusMinus reports visit windows, tolerances and assumptions.
func (p *para) refusedPlusMinus(k int, c *cand) bool {
	it := &p.r.Items[k]
	i := p.token(c.est.Start)
	if i > 0 {
		switch p.r.Tokens[i-1].Value {
		case "day", "days", "week", "weeks", "month", "months", "visit", "hour", "year", "d":
			if !p.unitBehind(it.End, "kg", "g", "ml") && whole(it.Value.Value) {
				return true
			}
		case "ci", "interval":
			return true
		case ":":
			if !p.r.Tokens[i-1].Spaced && !p.r.Tokens[i].Spaced {
				return true // a time of day
			}
		}
	}
	if whole(c.est.Value) && whole(it.Value.Value) && (c.est.Value == "0" || p.window(it.End)) {
		return true // "0 ± 3°" is a class, "10 ± 5 min after" a window
	}
	if p.block.Zone == paper.Methods && whole(c.est.Value) && whole(it.Value.Value) && p.timeBehind(c.est.End) && p.timeBehind(it.End) {
		return true // "every 6 hours ± 10 minutes"
	}
	if p.block.Zone == paper.Methods && it.Bracket == 0 && p.bracketEnd(it.End) && whole(c.est.Value) && whole(it.Value.Value) && p.timeBehind(it.End+1) && !p.says(it.Start, central) {
		return true // "at 28 (±4) days"
	}
	j := p.token(it.End)
	if j < len(p.r.Tokens) && degree(p.r.Tokens[j]) && (p.block.Zone == paper.Methods || p.says(it.Start, climate) && !p.says(it.Start, ofBody)) {
		return true
	}
	if p.says(it.Start, humidity) && p.says(it.Start, climate) {
		return true
	}
	if i > 0 && p.r.Tokens[i-1].Value == "every" && whole(c.est.Value) && whole(it.Value.Value) {
		return true // "every 14 (±3) days"
	}
	return p.planned(it.Start)
}

// degree reports a degree sign, which some papers raise by hand.
func degree(t grammar.Token) bool {
	return t.Kind == grammar.TokDegree || t.Kind == grammar.TokRaised && (t.Value == "∘" || t.Value == "°" || t.Value == "o" || t.Value == "◦")
}

var windowWords = map[string]bool{"after": true, "before": true, "prior": true, "post": true, "following": true, "postoperatively": true, "from": true}

func (p *para) bracketEnd(b int) bool { return b < len(p.s) && (p.s[b] == ')' || p.s[b] == ']') }

func (p *para) timeBehind(b int) bool {
	i := p.token(b)
	return i < len(p.r.Tokens) && timeUnits[p.r.Tokens[i].Value]
}

// window reports that a unit of time and a word like "after" follow byte b.
func (p *para) window(b int) bool {
	i := p.token(b)
	return i+1 < len(p.r.Tokens) && timeUnits[p.r.Tokens[i].Value] && windowWords[p.r.Tokens[i+1].Value]
}

func (p *para) unitBehind(b int, units ...string) bool {
	i := p.token(b)
	if i >= len(p.r.Tokens) {
		return false
	}
	for _, u := range units {
		if p.r.Tokens[i].Value == u {
			return true
		}
	}
	return false
}

// refusedSpread reports norms ("mean 50, SD 10") and assumptions.
func (p *para) refusedSpread(k int) bool {
	it := &p.r.Items[k]
	if p.says(it.Start, norms) && whole(it.Value.Value) {
		return true
	}
	return p.planned(it.Start)
}

// refusedInterval reports scale limits, eligibility, margins and plans.
func (p *para) refusedInterval(k int, given result.GivenAs) bool {
	it := &p.r.Items[k]
	if p.planned(it.Start) {
		return true
	}
	says := func(what *pattern.Pattern) bool { return p.says(it.Start, what) }
	switch given {
	case result.Range:
		if limits.MatchString(p.s[max(0, it.Start-30):it.Start]) || strings.HasSuffix(p.s[:it.Start], "in the ") || p.block.Zone == paper.Methods && says(climate) {
			return true
		}
		return p.block.Zone == paper.Methods && says(scaleText) || says(scaleText) && !says(central)
	case result.CI:
		return p.block.Zone == paper.Methods && says(margins)
	}
	return false
}

// refusedBracket reports a bracketed number that is a share or a count.
func (p *para) refusedBracket(c *cand) bool {
	e, ok1 := c.est.Float()
	v, ok2 := c.value.Float()
	if !ok1 || !ok2 {
		return true
	}
	if c.value.Percent && !c.est.Percent {
		return true
	}
	if i := p.token(c.value.End); i < len(p.r.Tokens) && p.r.Tokens[i].Kind == grammar.TokWord && !unitWords[p.r.Tokens[i].Value] && p.r.Tokens[i].Start < c.value.End+3 {
		return true // "72 colonies (36 per arm)"
	}
	return e == v && whole(c.est.Value)
}

// quoted reports that the result is somebody else's, or a repeat: it stands in
// the introduction or discussion beside a citation or words of other studies.
func (p *para) quoted(c *cand) bool {
	at := p.r.Items[c.item].Start
	switch p.block.Zone {
	case paper.Introduction:
		return true
	case paper.Discussion:
		return p.says(at, cited) || p.says(at, bracketed) || p.citedBy(at)
	}
	return false
}

// citedBy reports a superscript number in the sentence.
func (p *para) citedBy(b int) bool {
	from, to := p.sentence(b)
	for i := p.token(from); i < len(p.r.Tokens) && p.r.Tokens[i].Start < to; i++ {
		t := p.r.Tokens[i]
		if t.Kind == grammar.TokRaised && t.Value != "" && t.Value[0] >= '0' && t.Value[0] <= '9' && i > 0 &&
			(p.r.Tokens[i-1].Kind == grammar.TokWord && len(p.r.Tokens[i-1].Value) > 2 || p.r.Tokens[i-1].Kind == grammar.TokPeriod) {
			return true
		}
	}
	return false
}

// onePower reports that estimate and spread are printed with the same power of
// ten: their digits do not belong together otherwise.
func (c *cand) onePower() bool {
	_, ok := grammar.CommonPower(c.est, c.value, c.lower, c.upper)
	return ok
}

// cut reports that a number of the candidate is half of one with a decimal
// comma, which the grammar could not tell from a list: the 1 of "8,1".
func (p *para) cut(c *cand) bool {
	for _, n := range []grammar.Number{c.est, c.value, c.lower, c.upper} {
		if n.Value == "" || strings.ContainsAny(n.Value, ".e") || strings.ContainsAny(p.s[n.Start:n.End], ",") {
			continue
		}
		pair := p.r.Items[c.item].Sep == ","
		if p.commaBefore(n.Start) && !(pair && n.Span == c.upper.Span) || p.commaBehind(n.End) && !(pair && n.Span == c.lower.Span) {
			return true
		}
	}
	return false
}

// commaBefore reports a whole number and a comma right before byte i.
func (p *para) commaBefore(i int) bool {
	if i < 2 || p.s[i-1] != ',' {
		return false
	}
	k := p.token(i-1) - 1
	return k >= 0 && p.r.Tokens[k].End == i-1 && p.r.Tokens[k].Kind == grammar.TokNumber && whole(p.r.Tokens[k].Value)
}

// commaBehind reports a comma and a whole number of one or two digits right
// behind byte i.
func (p *para) commaBehind(i int) bool {
	if i+1 >= len(p.s) || p.s[i] != ',' {
		return false
	}
	k := p.token(i + 1)
	return k < len(p.r.Tokens) && p.r.Tokens[k].Start == i+1 && p.r.Tokens[k].Kind == grammar.TokNumber && whole(p.r.Tokens[k].Value) && len(p.r.Tokens[k].Value) < 3
}
