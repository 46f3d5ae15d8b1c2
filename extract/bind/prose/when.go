package prose

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

const (
	count   = `(?:[0-9]+(?:[.–-][0-9]+)?|one|two|three|four|five|six|eight|nine|ten|twelve)`
	ordinal = `(?:first|second|third|fourth|fifth|sixth|eighth|ninth|tenth|twelfth|last|final)`
)

var (
	timeWords = pattern.MustCompile(`(?i)\b(?:(?:at|in|on|after|by|over|during|within|until)\s+(?:the\s+)?)?(?:` +
		`(?:week|month|day|year|hour|visit|cycle|session)s?\s+[0-9]+(?:\s*(?:-|–|to)\s*(?:week|month|day|year)?\s?[0-9]+)?` +
		`|baseline|follow-?up|pre-?test|post-?test|(?:pre|post)-?(?:treatment|intervention|operative(?:ly)?)|(?:the )?end of (?:the )?(?:study|trial|treatment|intervention))\b` +
		`|\b(?:at|in|on|by|during|until)\s+(?:the\s+)?` + ordinal + `\s+(?:week|month|day|year|hour|visit|cycle|session)s?\b` +
		`|\b(?:(?:at|after|by|over|during|within|until)\s+(?:the\s+)?)?` + count + `[ \x{a0}-](?:weeks?|months?|days?|years?|hours?|h|min|minutes)\s+(?:after|following|post|before|prior to)\s+(?:the\s+)?\p{L}+(?:\s+of\s+(?:the\s+)?\p{L}+)?` +
		`|\b(?:at|after|by|over|during|within|until)\s+(?:the\s+)?` + count + `[ \x{a0}-](?:weeks?|months?|days?|years?|hours?|h|min|minutes)\b(?:\s+(?:follow-?up|post\w*|after \w+))?` +
		`|\b(?:at\s+(?:the\s+)?|after\s+(?:the\s+)?)?` + count + `-(?:week|month|day|year|hour)s?\b(?:\s+(?:follow-?up|visit|time point))?`)
	timeAfter = pattern.MustCompile(`(?i)^[^.;,()0-9]{0,50}$`)
	joinsOn   = pattern.MustCompile(`(?i)\b(?:and|or|to|than|versus|vs)\b`) // the time behind is another result's
	leadTime  = pattern.MustCompile(`(?i)^(?:at|in|on)\s+(?:the\s+)?`)
	// fromHere is what stands before the first value of "from 12.4 ± 1.3 to 13.1 ± 1.2".
	fromHere = pattern.MustCompile(`(?i)\bfrom\s+(?:an?\s+|the\s+)?(?:(?:mean|median|average|value)\s+(?:of\s+)?)?(?:[\p{L}-]+\s*)?\(?$`)
	atOnce   = pattern.MustCompile(`(?i)^\s*(?:was|were|of|values?)?\s*\(?$`)
)

// setTime names the time point: the one right behind the result, else the last
// before it in the sentence. "From baseline" names no time of a value, but what a
// value fell or rose from is the value at the start.
func (p *para) setTime(r *result.Result, c *cand) {
	it := &p.r.Items[c.item]
	from, to := p.sentence(it.Start)
	end := it.End
	if it.Bracket > 0 {
		end = min(to, max(end, p.r.Brackets[it.Bracket-1].End))
	}
	all := p.matches(it.Start, timeWords)
	for _, m := range all {
		if m[0] < end {
			continue
		}
		if between := p.s[end:m[0]]; len(between) < 50 && timeAfter.MatchString(between) && !joinsOn.MatchString(between) && !strings.HasSuffix(p.s[:m[0]], "from ") {
			p.setTimeAt(r, m[0], m[1])
			return
		}
		break
	}
	first := p.startOfPair(c, from, to)
	for k := len(all) - 1; k >= 0; k-- {
		a, b := all[k][0], all[k][1]
		if b > c.est.Start || p.inSpread(a, b) || strings.HasSuffix(p.s[:a], "from ") && !atOnce.MatchString(p.s[b:c.est.Start]) {
			continue
		}
		if first && !atOnce.MatchString(p.s[b:c.est.Start]) {
			break // "at week 6 mass had risen from 12.4 to 13.1"
		}
		p.setTimeAt(r, a, b)
		return
	}
	if first {
		at := from + fromHere.FindStringIndex(p.s[from:c.est.Start])[0]
		r.Time = "baseline"
		p.source(r, "time", grammar.Span{Start: at, End: at + len("from")})
	}
}

// startOfPair reports the first value of "rose from 12.4 ± 1.3 to 13.1 ± 1.2".
func (p *para) startOfPair(c *cand, from, to int) bool {
	if !fromHere.MatchString(p.s[from:c.est.Start]) || !changeWords.MatchString(p.s[from:c.est.Start]) {
		return false
	}
	units, at := p.unitsOf(c, from, to)
	return at >= 0 && at+1 < len(units) && toNext.MatchString(p.stretch(units[at].end, units[at+1].start))
}

func (p *para) setTimeAt(r *result.Result, a, b int) {
	if m := leadTime.FindStringIndex(p.s[a:b]); m != nil {
		a += m[1]
	}
	r.Time = p.s[a:b]
	p.source(r, "time", grammar.Span{Start: a, End: b})
}

// inSpread reports that a stretch holds the estimate of a result: "35 min" is
// then no time point.
func (p *para) inSpread(a, b int) bool {
	from, to := p.sentence(a)
	for k, last := p.found(from, to); k < last; k++ {
		if e := p.cands[k].est; e.Start < b && e.End > a {
			return true
		}
	}
	return false
}
