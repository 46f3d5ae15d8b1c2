package working

import (
	"fmt"
	"math"

	"halfspan/convert"
	"halfspan/extract/result"
)

const (
	decisive     = 2.995732273553991 // ln 20: a smaller lead of log-likelihoods decides nothing
	leastRatio   = 4                 // sizes must differ as much for their spreads to tell
	leastGroups  = 3                 // declared coefficients of variation to compare with
	largestScore = 3                 // standard deviations from what is expected: beyond, nothing fits
)

// weighTogether shows beside each reading of an unexplained ± what the other arms
// say: whether their spreads fall with n as standard errors do, and what the same
// outcome varies by where its SD is known. It is evidence; nothing is applied.
func weighTogether(items []*item) {
	type about struct{ table, outcome, time, subgroup string }
	var order []about
	arms := map[about][]*item{}
	for _, it := range items {
		if !weighable(it) {
			continue
		}
		k := about{it.res.Table, it.res.Outcome, it.res.Time, it.res.Subgroup}
		if arms[k] == nil {
			order = append(order, k)
		}
		arms[k] = append(arms[k], it)
	}
	for _, k := range order {
		bySize, note := likelihoodsBySize(arms[k])
		for _, it := range arms[k] {
			it.showLikelihoods(bySize, note, items)
		}
	}
}

func weighable(it *item) bool {
	return it.res.GivenAs == result.Unstated && it.res.Statistic == result.Mean && it.res.Outcome != "" && it.est != nil && it.val != nil && it.val.Value > 0 && it.res.N > 1
}

// likelihoods are the log-likelihoods of the three readings; known is false where
// there is nothing to compare with.
type likelihoods struct {
	of    [len(readingNames)]float64
	fits  [len(readingNames)]bool
	known bool
}

// likelihoodsBySize compares the spreads of arms of unequal size.
func likelihoodsBySize(arms []*item) (l likelihoods, note string) {
	var spreads []float64
	var sizes []int
	least, most := math.MaxInt, 0
	for _, it := range arms {
		spreads, sizes = append(spreads, it.val.Value), append(sizes, it.res.N)
		least, most = min(least, it.res.N), max(most, it.res.N)
	}
	if len(arms) < 2 || most/leastRatio < least {
		return l, ""
	}
	of, err := convert.UnequalSizeLogLikelihoods(spreads, sizes, readingLevel)
	if err != nil {
		return l, ""
	}
	l.of, l.known = of, true
	free := float64(len(arms) - 1)
	for r := range of {
		l.fits[r] = -2*of[r] <= free+largestScore*math.Sqrt(2*free)
	}
	return l, fmt.Sprintf("how the spreads of %d arms go with their n, %d to %d", len(arms), least, most)
}

// likelihoodsByVariation compares with the coefficients of variation of the same
// outcome where its SD is known.
func (it *item) likelihoodsByVariation(items []*item) (l likelihoods, note string) {
	if it.est.Low() <= 0 {
		return l, ""
	}
	var cvs []float64
	for _, x := range items {
		rec := x.rec()
		if rec.SD != nil && *rec.SD > 0 && x.est != nil && x.est.Low() > 0 && x.res.Statistic == result.Mean && x.res.Outcome == it.res.Outcome && x.res.Unit == it.res.Unit {
			cvs = append(cvs, float64(*rec.SD)/x.est.Value)
		}
	}
	if len(cvs) < leastGroups {
		return l, ""
	}
	of, err := convert.CVLogLikelihoods(it.est.Value, it.val.Value, it.res.N, cvs, readingLevel)
	if err != nil {
		return l, ""
	}
	l.of, l.known = of, true
	// The density at its centre less what it loses largestScore away.
	top, err := convert.CVLogLikelihoods(it.est.Value, it.est.Value*geometricMean(cvs), it.res.N, cvs, readingLevel)
	if err != nil {
		return likelihoods{}, ""
	}
	k := float64(len(cvs))
	loss := k / 2 * math.Log1p(largestScore*largestScore/(k-1))
	for r := range of {
		l.fits[r] = of[r] >= top[convert.AsSD]-loss
	}
	return l, fmt.Sprintf("the coefficient of variation of this outcome in %d groups whose SD is known", len(cvs))
}

func geometricMean(v []float64) float64 {
	sum := 0.0
	for _, x := range v {
		sum += math.Log(x)
	}
	return math.Exp(sum / float64(len(v)))
}

// showLikelihoods writes the sum of the log-likelihoods beside each reading that is
// not struck out, and whether they decide.
func (it *item) showLikelihoods(bySize likelihoods, sizeNote string, items []*item) {
	byVariation, variationNote := it.likelihoodsByVariation(items)
	if !bySize.known && !byVariation.known {
		return
	}
	evidence := sizeNote
	if variationNote != "" {
		if evidence != "" {
			evidence += "; "
		}
		evidence += variationNote
	}
	best, second := -1, -1
	var sum [len(readingNames)]float64
	for r, name := range readingNames {
		sum[r] = bySize.of[r] + byVariation.of[r]
		for i := range it.w.Trail.Alternatives {
			a := &it.w.Trail.Alternatives[i]
			if a.Name != name || a.Struck {
				continue
			}
			a.Note = joined(a.Note, fmt.Sprintf("log-likelihood %.1f", sum[r]))
			switch {
			case best < 0 || sum[r] > sum[best]:
				best, second = r, best
			case second < 0 || sum[r] > sum[second]:
				second = r
			}
		}
	}
	fits := func(l likelihoods, r int) bool { return !l.known || l.fits[r] }
	switch {
	case best < 0 || second < 0:
		it.note("compared by %s", evidence)
	case !fits(bySize, best) || !fits(byVariation, best):
		it.note("no reading fits what is known by %s", evidence)
	case sum[best]-sum[second] < decisive:
		it.note("undecided by %s: %s leads by %.1f, %.1f would tell%s", evidence, readingNames[best], sum[best]-sum[second], decisive, it.farBehind(sum, best))
	default:
		it.note("%s is the likelier reading by %s: it leads by %.1f, %.1f tell; it is not applied", readingNames[best], evidence, sum[best]-sum[second], decisive)
	}
}

// farBehind names the readings that the numbers speak against.
func (it *item) farBehind(sum [len(readingNames)]float64, best int) string {
	text := ""
	for _, a := range it.w.Trail.Alternatives {
		for r, name := range readingNames {
			if a.Name == name && !a.Struck && sum[best]-sum[r] >= decisive {
				text += fmt.Sprintf("; it speaks against %q, which is behind by %.1f", name, sum[best]-sum[r])
			}
		}
	}
	return text
}

func joined(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}
