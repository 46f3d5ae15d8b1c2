package working

import (
	"fmt"
	"regexp"
	"slices"
	"strings"

	"halfspan/convert"
	"halfspan/extract/result"
)

// rule is one line of the policy: what is done with a result it applies to.
type rule struct {
	applies func(*item) bool
	act     func(*item)
}

// policy is the table of what is converted and what is withheld. The first rule
// that applies decides; the last one applies to everything.
func policy() []rule {
	return []rule{
		{unreadable, withholdUnreadable},
		{both(printedAs(result.SD), isStatistic(result.GeometricMean, result.Ratio)), geometricSD},
		{printedAs(result.SD), takeSD},
		{printedAs(result.Unstated), weighReadings},
		{isStatistic(result.Median), proposeFromMedian},
		{printedAs(result.IQR, result.Range), withholdQuantiles},
		{isStatistic(result.MeanDifference, result.RiskDifference, result.Coefficient), ownScaleRaw},
		{isStatistic(result.Ratio, result.GeometricMean), ownScaleLog},
		{isStatistic(result.Proportion, result.Rate), ownScaleProportion},
		{not(isStatistic(result.Mean, result.MeanChange)), withholdKind},
		{printedAs(result.CI), meanFromInterval},
		{printedAs(result.SE), meanFromSE},
		{always, withholdKind},
	}
}

func applyPolicy(it *item) {
	for _, r := range policy() {
		if r.applies(it) {
			r.act(it)
			return
		}
	}
}

func always(*item) bool { return true }

func both(f, g func(*item) bool) func(*item) bool {
	return func(it *item) bool { return f(it) && g(it) }
}

func not(f func(*item) bool) func(*item) bool {
	return func(it *item) bool { return !f(it) }
}

func printedAs(kinds ...result.GivenAs) func(*item) bool {
	return func(it *item) bool { return slices.Contains(kinds, it.res.GivenAs) }
}

func isStatistic(kinds ...result.Statistic) func(*item) bool {
	return func(it *item) bool { return slices.Contains(kinds, it.res.Statistic) }
}

func unreadable(it *item) bool {
	return it.val == nil && !it.interval()
}

func withholdUnreadable(it *item) {
	it.withhold("no spread that can be read as a number is printed")
}

func withholdKind(it *item) {
	if it.res.Statistic == "" {
		it.raise("statistic-unclear", "the paper does not say what the estimate is")
		it.withhold("the paper does not say what the estimate is")
		return
	}
	it.withhold(fmt.Sprintf("an SD cannot be worked out from this kind of result (%s, given as %s)", it.res.Statistic, it.res.GivenAs))
}

func withholdQuantiles(it *item) {
	what := "quartiles"
	if it.res.GivenAs == result.Range {
		what = "a range"
		if it.interval() && it.res.N > 1 {
			low, high := it.bounds()
			if span, err := convert.SDBoundsFromRange(high.Value-low.Value, it.res.N); err == nil {
				it.note("whatever the values are, their SD lies between %s and %s", short(span.Low), short(span.High))
			}
		}
	}
	it.withhold(fmt.Sprintf("%s beside something that is not a median: no published method applies", what))
}

// obstacle is a condition under which the interval or SE of a mean does not lead
// to an SD: the flag raised, and the reason given.
type obstacle struct {
	flag   string
	reason string
	found  func(*item) (detail string, yes bool)
}

// obstacles are the conditions of the conversion of a mean, in the order in which
// they are given as the reason; all that apply raise their flag.
func obstacles() []obstacle {
	return []obstacle{
		{"adjusted", "the mean is adjusted: its interval or SE reflects a model, not the spread of the values", func(it *item) (string, bool) {
			return "the paper says so", it.res.Adjusted == "yes" && !plainBaseline(it)
		}},
		{"model-based", "the mean comes from a model: its interval or SE does not lead to the SD of the values", func(it *item) (string, bool) {
			return strings.Join(it.res.Evidence.Model, ", "), len(it.res.Evidence.Model) > 0 && !plainBaseline(it)
		}},
		{"clustered", "clustered data: SE·√n is not the SD", design("clustered")},
		{"crossover", "a crossover design: the interval may rest on differences within the same units", func(it *item) (string, bool) {
			detail, yes := design("crossover")(it)
			return detail, yes && it.res.GivenAs == result.CI // the SE of one arm's plain mean is SD/√n all the same
		}},
		{"bootstrap-interval", "a bootstrap interval: t and z do not apply", design("bootstrap")},
		{"bayesian-interval", "a credible interval: t and z do not apply", design("bayesian")},
		{"simultaneous-interval", "a simultaneous interval: wider than t for one mean", design("simultaneous")},
		{"other-interval", "an interval of single values, not of the mean", func(it *item) (string, bool) {
			words := otherInterval.FindString(it.res.Heading + " | " + it.res.Snippet)
			return words, it.res.GivenAs == result.CI && words != ""
		}},
		{"one-sided", "a one-sided limit: half its distance is not a margin", design("one-sided")},
		{"back-transformed", "a back-transformed mean: its interval belongs to another scale", design("back-transformed")},
		{"log-scale", "analysed on the log scale: its interval belongs to that scale", design("log-scale")},
		{"model-stated", "an analysis by a model is stated with the result", func(it *item) (string, bool) {
			for _, t := range it.res.Evidence.Tests {
				if (t == "ancova" || t == "mixed model") && !rawBesideAdjusted(it) {
					return t, true
				}
			}
			return "", false
		}},
		{"statistic-assumed", "that the estimate is a mean is not said", func(it *item) (string, bool) {
			return "taken from the kind of spread", it.res.GivenAs == result.CI && it.has("statistic-assumed")
		}},
		{"n-total", "the n may be that of several arms together", func(it *item) (string, bool) {
			return "", it.has("n-total")
		}},
		{"spread-conflict", "table and methods name different spreads", func(it *item) (string, bool) {
			return "", it.has("spread-conflict")
		}},
		{"spread-ambiguous", "one statement names more than one spread for this form", func(it *item) (string, bool) {
			return "", it.has("spread-ambiguous")
		}},
		{"adjusted-unclear", "the paper leaves open whether the mean is adjusted or comes from a model", func(it *item) (string, bool) {
			return "neither said nor ruled out", it.res.Adjusted == "unclear" && !rawBesideAdjusted(it) && !plainByMate(it)
		}},
	}
}

// otherInterval are intervals that hold single values and are much wider than that
// of a mean.
var otherInterval = regexp.MustCompile(`(?i)\b(?:prediction|tolerance|reference) (?:intervals?|limits?)\b|\blimits of agreement\b`)

// plainBaseline reports a baseline mean whose own heading and footnote say nothing
// of a model: what the caption says of adjustment concerns the values after it.
// Such a reading asks for a look (adjusted-baseline).
func plainBaseline(it *item) bool {
	if speaksOfModel(it.res.Heading) {
		return false
	}
	for _, s := range it.res.Sources {
		if s.Field == "given_as" && strings.HasPrefix(s.From, "footnote") && speaksOfModel(s.Text) {
			return false
		}
	}
	return it.res.Evidence.Baseline && it.res.Heading != "" && isStatistic(result.Mean)(it)
}

func speaksOfModel(words string) bool {
	words = strings.NewReplacer("unadjusted", "", "not adjusted", "").Replace(strings.ToLower(words))
	for _, word := range []string{"adj", "covariate", "least", "ls mean", "marginal", "model", "estimated", "predicted", "ancova"} {
		if strings.Contains(words, word) {
			return true
		}
	}
	return false
}

// rawBesideAdjusted reports a result whose row prints a plain difference and, in
// another column, the adjusted one: a table that tells the two apart says by that
// which values are not adjusted.
func rawBesideAdjusted(it *item) bool {
	plain, adjusted := false, false
	for _, x := range it.row {
		if x.res.Statistic == result.MeanDifference && x.res.Outcome == it.res.Outcome {
			plain = plain || x.res.Adjusted != "yes"
			adjusted = adjusted || x.res.Adjusted == "yes"
		}
	}
	return plain && adjusted && it.res.Adjusted != "yes" && len(it.res.Evidence.Model) == 0
}

func design(word string) func(*item) (string, bool) {
	return func(it *item) (string, bool) {
		return "the paper speaks of it", slices.Contains(it.res.Evidence.Design, word)
	}
}

// blocked raises every obstacle's flag and gives the first one's reason.
func blocked(it *item) (reason string) {
	for _, o := range obstacles() {
		if detail, yes := o.found(it); yes {
			it.raise(o.flag, detail)
			if reason == "" {
				reason = o.reason
			}
		}
	}
	return reason
}
