package prose

import (
	"strconv"
	"strings"
	"unicode/utf8"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// result makes the Result of a candidate, with the place of every field.
func (p *para) result(c *cand) result.Result {
	it := &p.r.Items[c.item]
	r := result.Result{Section: p.block.Section, Zone: p.block.Zone, GivenAs: c.given}
	place := p.run.At(c.start)
	r.Page = place.Page
	r.Estimate = c.est.Value
	p.source(&r, "estimate", c.est.Span)
	if c.value.Value != "" {
		r.GivenValue = c.value.Value
		p.source(&r, "given_value", c.value.Span)
		r.Anchor = result.AnchorAt(p.run.At(c.start), r.GivenValue)
	} else {
		r.Lower, r.Upper = printed(c.lower), printed(c.upper)
		p.source(&r, "lower", c.lower.Span)
		p.source(&r, "upper", c.upper.Span)
		r.Anchor = result.AnchorAt(p.run.At(firstDigit(p.s, c.start)), r.Lower+","+r.Upper)
	}
	p.setGiven(&r, c)
	st := p.statistic(c)
	r.Statistic, r.Measure = st.statistic, st.measure
	if st.at.End > 0 {
		p.source(&r, "statistic", st.at)
	} else if c.given == result.CI || c.given == result.Range {
		r.Raise("statistic-assumed", "no word of the sentence says what the estimate is")
	}
	if st.model != "" {
		r.Evidence.Model = append(r.Evidence.Model, st.model)
	}
	if c.meaning.Design != "" {
		r.Evidence.Design = append(r.Evidence.Design, c.meaning.Design)
	}
	if c.oneSided {
		r.Evidence.Design = append(r.Evidence.Design, "one-sided")
	}
	p.setUnit(&r, c)
	p.setTests(&r, c)
	p.setEvidence(&r, c, st)
	p.setSize(&r, c)
	p.setContext(&r, c)
	p.wholeSample(&r, c)
	r.Flags = append(r.Flags, c.flags...)
	p.slips(&r, c)
	r.Snippet = p.snippet(min(it.Start, c.est.Start), max(it.End, c.est.End))
	return r
}

// printed is a bound as the record keeps it: an open bound by its word.
func printed(n grammar.Number) string {
	if n.Value == "" {
		return n.Word
	}
	return n.Value
}

// firstDigit is the first digit at or behind byte i; i where none follows.
func firstDigit(s string, i int) int {
	for k := i; k < len(s) && k < i+12; k++ {
		if s[k] >= '0' && s[k] <= '9' {
			return k
		}
	}
	return i
}

func (p *para) source(r *result.Result, field string, at grammar.Span) {
	r.Sources = append(r.Sources, result.Source{Field: field, Place: p.run.Between(at.Start, at.End), Text: p.s[at.Start:at.End]})
}

// setGiven records what says the kind of spread and the level.
func (p *para) setGiven(r *result.Result, c *cand) {
	switch {
	case c.givenAt.End > 0:
		p.source(r, "given_as", c.givenAt)
	case c.conv != nil:
		r.Sources = append(r.Sources, result.Source{Field: "given_as", Place: c.conv.Place, Text: c.conv.Text, From: zoneName(c.conv.Statement)})
	}
	if c.given != result.CI {
		return
	}
	if c.level != "" {
		r.Level, _ = strconv.ParseFloat(c.level, 64)
		p.source(r, "level", c.levelAt)
		return
	}
	if c.conv != nil && c.conv.Level > 0 {
		r.Level = c.conv.Level
		r.Sources = append(r.Sources, result.Source{Field: "level", Place: c.conv.Place, Text: c.conv.Text, From: zoneName(c.conv.Statement)})
		return
	}
	if level, ok := p.f.conv.Level(); ok {
		r.Level = level
		r.Raise("level-assumed", "the level is not printed here; it is that of the paper's other intervals")
	}
}

// setUnit takes a percent sign or a unit printed directly behind the estimate,
// its spread or its bracket.
func (p *para) setUnit(r *result.Result, c *cand) {
	defer func() {
		if c.est.Power != "" {
			r.Unit = strings.TrimSpace("×" + c.est.Power + " " + r.Unit)
			p.source(r, "unit", c.est.PowerAt)
		}
	}()
	if c.est.Percent || c.value.Percent || c.lower.Percent {
		r.Unit = "%"
		return
	}
	ends := []int{p.r.Items[c.item].End}
	if b := p.r.Items[c.item].Bracket; b > 0 {
		ends = append(ends, p.r.Brackets[b-1].End)
	}
	ends = append([]int{c.est.End}, ends...)
	if c.est.Power != "" {
		ends = append(ends, c.est.PowerAt.End, c.value.PowerAt.End, c.upper.PowerAt.End)
	}
	for _, end := range ends {
		if u, ok := p.unitAt(end); ok {
			r.Unit = p.s[u.Start:u.End]
			p.source(r, "unit", u)
			return
		}
	}
}

var unitWords = map[string]bool{}

func init() {
	for _, u := range strings.Fields(`kg g mg µg μg ug ng pg l ml dl µl μl mm cm m km nm mmhg kpa s sec secs seconds second min mins minutes minute h hr hrs hours hour
		d day days wk week weeks months month year years yr yrs y mmol µmol μmol nmol pmol iu u meq kcal kj j w bpm beats points point
		percent cells db hz ms msec usd eur degrees colonies visits sessions units kgs litres liters watts pixels`) {
		unitWords[u] = true
	}
}

// unitAt reads a unit directly behind byte b: "kg", "mg/mL", "kg/m2", "beats/min".
func (p *para) unitAt(b int) (grammar.Span, bool) {
	i := p.token(b)
	if i >= len(p.r.Tokens) || p.r.Tokens[i].Start > b+4 {
		return grammar.Span{}, false
	}
	t := p.r.Tokens[i]
	if t.Kind == grammar.TokDegree || t.Kind == grammar.TokCurrency {
		end := t.End
		if i+1 < len(p.r.Tokens) && p.r.Tokens[i+1].Value == "c" {
			end = p.r.Tokens[i+1].End
		}
		return grammar.Span{Start: t.Start, End: end}, true
	}
	if t.Kind != grammar.TokWord || !unitWords[t.Value] {
		return grammar.Span{}, false
	}
	end := t.End
	for k := i + 1; k+1 < len(p.r.Tokens) && p.r.Tokens[k].Kind == grammar.TokSlash && p.r.Tokens[k+1].Kind == grammar.TokWord && !p.r.Tokens[k+1].Spaced; k += 2 {
		end = p.r.Tokens[k+1].End
		if k+2 < len(p.r.Tokens) && p.r.Tokens[k+2].Kind == grammar.TokRaised && !p.r.Tokens[k+2].Spaced && len(p.r.Tokens[k+2].Value) == 1 {
			end = p.r.Tokens[k+2].End
		}
	}
	return grammar.Span{Start: t.Start, End: end}, true
}

// setTests takes p, t, F and df printed in the result's bracket or behind it in
// the same clause, before the next estimate.
func (p *para) setTests(r *result.Result, c *cand) {
	it := &p.r.Items[c.item]
	_, to := p.sentence(it.Start)
	for k := c.item + 1; k < len(p.r.Items) && k < c.item+5; k++ {
		e := &p.r.Items[k]
		if e.Start >= to || e.Start-it.End > 60 {
			break
		}
		if !p.test(r, e) && (e.Kind == grammar.KindNumber || e.Kind == grammar.KindPlusMinus || e.Kind == grammar.KindInterval) {
			break
		}
	}
	for k := c.estItem + 1; k < c.item; k++ {
		p.test(r, &p.r.Items[k])
	}
}

func (p *para) test(r *result.Result, e *grammar.Item) bool {
	text := p.s[e.Value.Start:e.Value.End]
	switch {
	case e.Kind == grammar.KindPValue && r.P == "":
		r.P = e.Value.Value
		if e.Value.Rel != "=" {
			r.P = e.Value.Rel + e.Value.Value
		}
		p.source(r, "p", e.Span)
	case e.Kind == grammar.KindTest && e.Name == "t" && r.T == "":
		r.T = e.Value.Value
		r.DF = e.DF
		p.source(r, "t", e.Span)
	case e.Kind == grammar.KindTest && e.Name == "F" && r.F == "":
		r.F = e.Value.Value
		r.DF = e.DF
		p.source(r, "f", e.Span)
	case e.Kind == grammar.KindDF && r.DF == "":
		r.DF = text
		p.source(r, "df", e.Span)
	default:
		return false
	}
	return true
}

// slips flags misprints; they are kept as printed.
func (p *para) slips(r *result.Result, c *cand) {
	if c.est.Mended || c.lower.Mended || c.upper.Mended || c.value.Mended {
		r.Raise("misprint", "a number is printed with a slip and was read as meant")
	}
	if c.est.Power != "" {
		r.Raise("power-of-ten", "the digits are printed with the factor ×"+c.est.Power+", which stands in the unit")
	}
	lo, ok1 := c.lower.Float()
	hi, ok2 := c.upper.Float()
	if ok1 && ok2 && lo > hi {
		r.Raise("bounds-reversed", "the first bound is the larger one, as printed")
	}
	if c.value.Value == "" && c.lower.Value+c.upper.Value != "" && (!ok1 || !ok2) {
		r.Raise("open-bound", "a bound is not a number")
	}
}

// snippet gives at most 300 bytes around [from, to).
func (p *para) snippet(from, to int) string {
	const most = 300
	a, b := p.sentence(from)
	_, e := p.sentence(max(to-1, from))
	b = max(b, e)
	if b-a > most {
		room := max(0, most-(to-from))
		a = max(a, from-room*2/3)
		b = min(b, a+most)
	}
	for a > 0 && a < len(p.s) && !utf8.RuneStart(p.s[a]) {
		a++
	}
	for b > a && b < len(p.s) && !utf8.RuneStart(p.s[b]) {
		b--
	}
	return strings.TrimSpace(p.s[a:b])
}

// setEvidence records what the sentence says of tests, design and models.
func (p *para) setEvidence(r *result.Result, c *cand, st named) {
	r.Evidence.Quoted = p.quoted(c)
	s := strings.ToLower(p.sentenceText(p.r.Items[c.item].Start))
	for _, e := range designWords {
		if strings.Contains(s, e.word) {
			addOnce(&r.Evidence.Design, e.means)
		}
	}
	for _, e := range modelled {
		if strings.Contains(s, e.word) {
			addOnce(&r.Evidence.Model, e.means)
		}
	}
	for _, e := range testWords {
		if strings.Contains(s, e.word) {
			addOnce(&r.Evidence.Tests, e.means)
		}
	}
	r.Evidence.Baseline = strings.Contains(s, "baseline") && !strings.Contains(s, "from baseline")
	p.setAdjusted(r, s)
	p.setScale(r, c)
	if p.block.Zone == paper.Methods {
		r.Raise("in-methods", "printed in the methods")
	}
}

var scaleLimits = []*pattern.Pattern{
	pattern.MustCompile(`(?i)\b(?:scale|score|VAS|NRS|index)s?,?\s*(?:of|from|ranging from|range|:|\(|\[)?\s*([0-9]+)\s*(?:-|–|to)\s*([0-9]+)\b`),
	pattern.MustCompile(`(?i)\b([0-9]+)\s*(?:-|–|to)\s*([0-9]+)[- ](?:point |mm |cm )?(?:scale|VAS|NRS|visual analogue|numeric)`),
}

// setScale takes the limits of the outcome's scale where the sentence prints
// them, and notes outcomes that are counted.
func (p *para) setScale(r *result.Result, c *cand) {
	for _, what := range scaleLimits {
		for _, m := range p.matches(c.est.Start, what) {
			low, high := p.s[m[2]:m[3]], p.s[m[4]:m[5]]
			if e, ok := c.est.Float(); !ok || e < atof(low) || e > atof(high) || m[2] <= c.lower.Start && c.lower.Start < m[5] {
				continue
			}
			r.Evidence.ScaleLow, r.Evidence.ScaleHigh = low, high
			return
		}
	}
}

func atof(s string) float64 {
	f, _ := strconv.ParseFloat(s, 64)
	return f
}

type wordMeans struct{ word, means string }

var designWords = []wordMeans{{"bootstrap", "bootstrap"}, {"credible interval", "bayesian"}, {"cluster", "clustered"}, {"crossover", "crossover"},
	{"cross-over", "crossover"}, {"bonferroni", "simultaneous"}, {"back-transformed", "back-transformed"}, {"geometric", "log-scale"}, {"one-sided", "one-sided"}}

var modelled = []wordMeans{{"least squares mean", "least-squares"}, {"least-squares mean", "least-squares"}, {"ls mean", "least-squares"},
	{"marginal mean", "marginal"}, {" adjusted", "adjusted"}, {"adjusting for", "adjusted"}, {"adjustment for", "adjusted"}, {"controlling for", "adjusted"}, {"(adjusted", "adjusted"}, {"modelled", "adjusted"}}

var testWords = []wordMeans{{"t test", "t test"}, {"t-test", "t test"}, {"paired t", "paired t test"}, {"mann-whitney", "rank test"}, {"mann–whitney", "rank test"},
	{"wilcoxon", "rank test"}, {"ancova", "ancova"}, {"analysis of covariance", "ancova"}, {"anova", "anova"}, {"mixed model", "mixed model"}, {"mixed-effects", "mixed model"},
	{"log-rank", "log-rank"}, {"cox ", "cox"}}

func addOnce(list *[]string, v string) {
	for _, have := range *list {
		if have == v {
			return
		}
	}
	*list = append(*list, v)
}
