package table

import (
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// said is the first place where the methods speak of something.
type said struct {
	run *paper.TextRun
	at  grammar.Span
}

// background is what the methods, abstract and title say of models and designs
// whose intervals are no plain intervals of a mean.
type background struct {
	model   *said // a model that intervals of means may come from
	least   *said // least-squares or marginal means
	designs []string
}

var (
	modelMethods = pattern.MustCompile(`(?i)\bmixed[- ](?:effects? )?(?:linear |regression )?models?\b|\blinear mixed\b|\bancovas?\b|\banalys[ei]s of covariance\b|\bMMRM\b|\bGEEs?\b|\bgenerali[sz]ed estimating\b|\bmultilevel\b|\bhierarchical (?:linear|model)|\brandom[- ](?:effects?|intercepts?)\b|\badjust(?:ed|ing|ment) for\b|\bcontrolling for\b|\bmultiple imputation\b`)
	leastMethods = pattern.MustCompile(`(?i)\bleast[- ]squares? means?\b|\bLS[- ]?means?\b|\bmarginal means?\b|\badjusted means?\b`)
	clustered    = pattern.MustCompile(`(?i)\bcluster[- ]+(?:level )?randomi[sz]|\bclusters were (?:randomi|allocated|assigned)|\brandomi[sz]ed clusters?\b|\bcluster (?:trial|design)`)
	crossover    = pattern.MustCompile(`(?i)\bcross-?over (?:trial|study|design|fashion|manner|randomi)|\brandomi[sz]ed,? (?:[a-z-]+,? )*cross-?over\b`)
)

// findBackground reads title, abstract and methods once.
func (b *binder) findBackground() {
	design := func(s string) {
		if clustered.MatchString(s) {
			b.back.designs = addOnce(b.back.designs, "clustered")
		}
		if crossover.MatchString(s) {
			b.back.designs = addOnce(b.back.designs, "crossover")
		}
	}
	design(b.doc.Title)
	for i := range b.doc.Blocks {
		bl := &b.doc.Blocks[i]
		if bl.Kind != paper.Paragraph || bl.Zone != paper.Methods && bl.Zone != paper.Abstract {
			continue
		}
		design(bl.Text.S)
		first := func(p *pattern.Pattern, at **said) {
			if *at != nil {
				return
			}
			if m := p.FindStringIndex(bl.Text.S); m != nil {
				*at = &said{&bl.Text, grammar.Span{Start: m[0], End: m[1]}}
			}
		}
		first(modelMethods, &b.back.model)
		first(leastMethods, &b.back.least)
	}
}

func addOnce(list []string, s string) []string {
	for _, x := range list {
		if x == s {
			return list
		}
	}
	return append(list, s)
}

// stated are tests that headings and notes name.
var stated = []struct {
	words *pattern.Pattern
	means string
}{
	{pattern.MustCompile(`(?i)\bpaired (?:samples? |student'?s? )?t[- ]?tests?\b|\bpaired difference t`), "paired t test"},
	{pattern.MustCompile(`(?i)\b(?:student'?s?|independent|unpaired|two[- ]sample|2-sample)[^.;]{0,20}t[- ]?tests?\b|\bt[- ]tests?\b`), "t test"},
	{pattern.MustCompile(`(?i)\bmann[-– ]whitney|\bwilcoxon|\bkruskal|\brank[- ]sum|\bfriedman`), "rank test"},
	{pattern.MustCompile(`(?i)\bancova\b|\banalysis of covariance`), "ancova"},
	{pattern.MustCompile(`(?i)\banova\b|\banalysis of variance`), "anova"},
	{pattern.MustCompile(`(?i)\bmixed[- ](?:effects? )?models?|\bmixed models? test`), "mixed model"},
	{pattern.MustCompile(`(?i)\blog[- ]rank`), "log-rank"},
	{pattern.MustCompile(`(?i)\bcox\b`), "cox"},
}

var noted = []struct {
	words *pattern.Pattern
	means string
}{
	{pattern.MustCompile(`(?i)\bbootstrap`), "bootstrap"},
	{pattern.MustCompile(`(?i)\bcredible interval|\bbayesian`), "bayesian"},
	{pattern.MustCompile(`(?i)\bsimultaneous (?:confidence )?(?:interval|ci)\b`), "simultaneous"},
	{pattern.MustCompile(`(?i)\bback[- ]?transform`), "back-transformed"},
	{pattern.MustCompile(`(?i)\blog[- ]?(?:arithmically )?transformed|\blog scale|\blogarithmic scale`), "log-scale"},
}

// setEvidence records the tests and designs that headings, caption, notes and
// the design of the trial say, and leaves open whether a mean is adjusted where
// only the methods speak of a model.
func (b *binder) setEvidence(r *result.Result, f *frame, e *estimate, all []statement) {
	near, wide := f.near(e, all), f.wide()
	for _, t := range stated {
		// What caption and notes say of a model concerns the values after baseline.
		far := !(r.Evidence.Baseline && (t.means == "ancova" || t.means == "mixed model"))
		if f.lex.anyHas(t.words, near) || far && f.lex.anyHas(t.words, wide) {
			r.Evidence.Tests = addOnce(r.Evidence.Tests, t.means)
		}
	}
	if r.GivenAs == result.SD || r.GivenAs == result.IQR || r.GivenAs == result.Range {
		return
	}
	for _, d := range noted {
		if f.lex.anyHas(d.words, near) || f.lex.anyHas(d.words, wide) {
			r.Evidence.Design = addOnce(r.Evidence.Design, d.means)
		}
	}
	for _, d := range b.back.designs {
		r.Evidence.Design = addOnce(r.Evidence.Design, d)
	}
	if r.Adjusted != "no" || f.lex.anyHas(unadjustedWord, near) || plainTest(r.Evidence.Tests) {
		return
	}
	from := b.back.least
	if r.GivenAs == result.CI {
		from = b.back.model
	}
	if from == nil {
		return
	}
	r.Adjusted = "unclear"
	r.Sources = append(r.Sources, result.Source{Field: "adjusted", Place: from.run.Between(from.at.Start, from.at.End), Text: from.run.S[from.at.Start:from.at.End], From: "the methods"})
}

// plainTest reports a test that compares means as they are.
func plainTest(tests []string) bool {
	for _, t := range tests {
		if t == "t test" || t == "paired t test" {
			return true
		}
	}
	return false
}
