package table

import (
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

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
	for _, d := range b.back.Designs {
		r.Evidence.Design = addOnce(r.Evidence.Design, d)
	}
	if r.Adjusted != "no" || f.lex.anyHas(unadjustedWord, near) || plainTest(r.Evidence.Tests) {
		return
	}
	from := b.back.LeastMeans
	if r.GivenAs == result.CI {
		from = b.back.Model
	}
	if from == nil {
		return
	}
	r.Adjusted = "unclear"
	r.Sources = append(r.Sources, from.Source("adjusted"))
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
