package prose

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

const count = `(?:[0-9]+(?:\.[0-9]+)?|one|two|three|four|five|six|eight|nine|ten|twelve)`

var (
	timeWords = pattern.MustCompile(`(?i)\b(?:(?:at|after|by|over|during|within|until)\s+(?:the\s+)?)?(?:` +
		`(?:week|month|day|year|hour|visit|cycle|session)s?\s+[0-9]+(?:\s*(?:-|–|to)\s*(?:week|month|day|year)?\s?[0-9]+)?` +
		`|baseline|follow-?up|pre-?test|post-?test|(?:pre|post)-?(?:treatment|intervention|operative(?:ly)?)|(?:the )?end of (?:the )?(?:study|trial|treatment|intervention))\b` +
		`|\b(?:at|after|by|over|during|within|until)\s+(?:the\s+)?` + count + `[ \x{a0}-](?:weeks?|months?|days?|years?|hours?|h|min|minutes)\b(?:\s+(?:follow-?up|post\w*|after \w+))?` +
		`|\b(?:at\s+(?:the\s+)?|after\s+(?:the\s+)?)?` + count + `-(?:week|month|day|year|hour)s?\b(?:\s+(?:follow-?up|visit|time point))?`)
	timeAfter = pattern.MustCompile(`(?i)^[^.;,()0-9]{0,50}$`)
)

// setTime names the time point: the one right behind the result, else the last
// before it in the sentence. "From baseline" names no time of a value.
func (p *para) setTime(r *result.Result, c *cand) {
	it := &p.r.Items[c.item]
	_, to := p.sentence(it.Start)
	end := it.End
	if it.Bracket > 0 {
		end = min(to, max(end, p.r.Brackets[it.Bracket-1].End))
	}
	all := p.matches(it.Start, timeWords)
	for _, m := range all {
		if m[0] < end {
			continue
		}
		if between := p.s[end:m[0]]; len(between) < 50 && timeAfter.MatchString(between) && !strings.Contains(between, " and ") && !strings.HasSuffix(p.s[:m[0]], "from ") {
			p.setTimeAt(r, m[0], m[1])
			return
		}
		break
	}
	for k := len(all) - 1; k >= 0; k-- {
		a, b := all[k][0], all[k][1]
		if b <= c.est.Start && !strings.HasSuffix(p.s[:a], "from ") && !p.inSpread(a, b) {
			p.setTimeAt(r, a, b)
			return
		}
	}
}

func (p *para) setTimeAt(r *result.Result, a, b int) {
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
