package prose

import (
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// model is where the methods say that estimates come from a model.
type model struct {
	run   *paper.TextRun
	at    grammar.Span
	found bool
}

var (
	// models whose intervals of means are no plain intervals of a mean
	modelWords = pattern.MustCompile(`(?i)\bmixed[- ](?:effects? )?(?:linear |regression )?models?\b|\blinear mixed\b|\bancovas?\b|\banalys[ei]s of covariance\b|\bMMRM\b|\bGEEs?\b|\bgenerali[sz]ed estimating\b|\bmultilevel\b|\bhierarchical (?:linear|model)|\brandom[- ](?:effects?|intercepts?)\b|\badjust(?:ed|ing|ment) for\b|\bcontrolling for\b|\bmultiple imputation\b`)
	leastWords = pattern.MustCompile(`(?i)\bleast[- ]squares? means?\b|\bLS[- ]?means?\b|\bmarginal means?\b|\badjusted means?\b`)
)

// designs are the designs of a whole trial whose intervals are no plain ones.
var designs = []struct {
	words *pattern.Pattern
	means string
}{
	{pattern.MustCompile(`(?i)\bcluster[- ]+(?:level )?randomi[sz]|\bclusters were (?:randomi|allocated|assigned)|\brandomi[sz]ed clusters?\b|\bcluster (?:trial|design)`), "clustered"},
	{pattern.MustCompile(`(?i)\bcross-?over (?:trial|study|design|fashion|manner|randomi)|\brandomi[sz]ed,? (?:[a-z-]+,? )*cross-?over\b`), "crossover"},
}

// learnModels finds the first words of a model, and of model-based means, in
// the methods and the abstract, and the design of the trial there and in the
// title.
func (f *finder) learnModels() {
	design := func(s string) {
		for _, d := range designs {
			if d.words.MatchString(s) {
				addOnce(&f.designs, d.means)
			}
		}
	}
	design(f.doc.Title)
	for i := range f.doc.Blocks {
		b := &f.doc.Blocks[i]
		if b.Zone != paper.Methods && b.Zone != paper.Abstract || b.Kind != paper.Paragraph {
			continue
		}
		design(b.Text.S)
		if m := modelWords.FindStringIndex(b.Text.S); m != nil && !f.models.found {
			f.models = model{&b.Text, grammar.Span{Start: m[0], End: m[1]}, true}
		}
		if m := leastWords.FindStringIndex(b.Text.S); m != nil && !f.leastMeans.found {
			f.leastMeans = model{&b.Text, grammar.Span{Start: m[0], End: m[1]}, true}
		}
	}
}

// setAdjusted says whether a mean or difference is adjusted: by the words of
// its sentence, else left open where the methods speak of a model that such
// intervals come from.
func (p *para) setAdjusted(r *result.Result, s string) {
	switch r.Statistic {
	case result.Mean, result.MeanChange, result.MeanDifference, result.GeometricMean:
	default:
		return
	}
	switch {
	case len(r.Evidence.Model) > 0:
		r.Adjusted = "yes"
		return
	case plainWords.MatchString(s):
		r.Adjusted = "no"
		return
	}
	if r.GivenAs != result.SD {
		for _, d := range p.f.designs {
			addOnce(&r.Evidence.Design, d)
		}
	}
	m := &p.f.models
	if r.GivenAs == result.SE || r.GivenAs == result.Unstated {
		m = &p.f.leastMeans
	}
	if !m.found || r.GivenAs == result.SD {
		return
	}
	r.Adjusted = "unclear"
	r.Sources = append(r.Sources, result.Source{Field: "adjusted", Place: m.run.Between(m.at.Start, m.at.End), Text: m.run.S[m.at.Start:m.at.End], From: "the methods"})
}

var plainWords = pattern.MustCompile(`(?i)\bunadjusted\b|\bcrude\b|\braw means?\b|\bobserved means?\b`)
