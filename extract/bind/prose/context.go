package prose

import "halfspan/extract/result"

// setContext fills arm, time and outcome from the sentence where they are
// plain.
func (p *para) setContext(r *result.Result, c *cand) {
	p.setTime(r, c)
	p.setOutcome(r, c)
	p.setArms(r, c)
}
