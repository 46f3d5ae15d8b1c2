// Package background reads what a paper says once for all its results: how
// values are printed, how many took part, the design of the study and the models
// of its methods. Sentences and tables are bound with the same background.
package background

import (
	"slices"

	"halfspan/extract/bind/census"
	"halfspan/extract/bind/convention"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// Said is the first place where the methods or the abstract speak of something.
type Said struct {
	Place paper.Place
	Text  string // the words, as printed
}

// Source makes it the source of a field.
func (s *Said) Source(field string) result.Source {
	return result.Source{Field: field, Place: s.Place, Text: s.Text, From: "the methods"}
}

// Background is what the paper says of all its results.
type Background struct {
	Conventions *convention.Conventions
	Census      *census.Census
	Model       *Said    // a model that intervals of means may come from; nil where none is named
	LeastMeans  *Said    // least-squares or marginal means; nil where none are named
	Designs     []string // "clustered", "crossover": designs whose intervals are no plain ones
}

var (
	model      = pattern.MustCompile(`(?i)\bmixed[- ](?:effects? )?(?:linear |regression )?models?\b|\blinear mixed\b|\bancovas?\b|\banalys[ei]s of covariance\b|\bMMRM\b|\bGEEs?\b|\bgenerali[sz]ed estimating\b|\bmultilevel\b|\bhierarchical (?:linear|model)|\brandom[- ](?:effects?|intercepts?)\b|\badjust(?:ed|ing|ment) for\b|\bcontrolling for\b|\bmultiple imputation\b`)
	leastMeans = pattern.MustCompile(`(?i)\bleast[- ]squares? means?\b|\bLS[- ]?means?\b|\bmarginal means?\b|\badjusted means?\b`)
)

// designs are the designs of a whole trial whose intervals are no plain ones.
var designs = []struct {
	words *pattern.Pattern
	means string
}{
	{pattern.MustCompile(`(?i)\bcluster[- ]+(?:level )?randomi[sz]|\bclusters were (?:randomi|allocated|assigned)|\brandomi[sz]ed clusters?\b|\bcluster (?:trial|design)`), "clustered"},
	{pattern.MustCompile(`(?i)\bcross-?over(?:,| )[^.;]{0,40}?\b(?:trial|study|design|fashion|manner|randomi)|\brandomi[sz]ed,? (?:[a-z-]+,? )*cross-?over\b`), "crossover"},
}

// Of reads a paper's background.
func Of(doc *paper.Document) *Background {
	b := &Background{Conventions: convention.Of(doc), Census: census.Of(doc)}
	b.design(doc.Title)
	for i := range doc.Blocks {
		bl := &doc.Blocks[i]
		if bl.Kind != paper.Paragraph || bl.Zone != paper.Methods && bl.Zone != paper.Abstract {
			continue
		}
		b.design(bl.Text.S)
		first(&b.Model, model, &bl.Text)
		first(&b.LeastMeans, leastMeans, &bl.Text)
	}
	return b
}

func (b *Background) design(s string) {
	for _, d := range designs {
		if d.words.MatchString(s) && !slices.Contains(b.Designs, d.means) {
			b.Designs = append(b.Designs, d.means)
		}
	}
}

func first(at **Said, words *pattern.Pattern, run *paper.TextRun) {
	if *at != nil {
		return
	}
	if m := words.FindStringIndex(run.S); m != nil {
		*at = &Said{run.Between(m[0], m[1]), run.S[m[0]:m[1]]}
	}
}
