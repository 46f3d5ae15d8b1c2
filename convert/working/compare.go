package working

import (
	"fmt"
	"math"
	"strings"

	"halfspan/convert"
	"halfspan/extract/result"
)

// compare raises the flags that results of one paper give cause for together.
func compare(items []*item) {
	for _, it := range items {
		for _, m := range it.mates {
			compareMates(it, m)
		}
		testedLevel(it)
		testedDF(it)
		dfAgainstN(it)
	}
	for _, row := range rowsOf(items) {
		supportReading(row)
		sameMargins(row)
		for i, a := range row {
			for _, b := range row[i+1:] {
				compareSpreads(a, b)
			}
		}
	}
	repeats(items)
}

// rowsOf gathers the results of one table row, in order.
func rowsOf(items []*item) [][]*item {
	var rows [][]*item
	at := map[string]int{}
	for _, it := range items {
		if it.res.Row == "" {
			continue
		}
		i, ok := at[it.res.Row]
		if !ok {
			i = len(rows)
			at[it.res.Row] = i
			rows = append(rows, nil)
		}
		rows[i] = append(rows[i], it)
	}
	return rows
}

// compareMates compares two spreads of one estimate: it settles t or z where it
// can, and flags what does not agree.
func compareMates(it, m *item) {
	if it.val == nil && !it.interval() || m.val == nil || m.val.Low() <= 0 {
		return
	}
	if it.res.N == 0 {
		impliedN(it, m)
	}
	switch {
	case it.res.GivenAs == result.CI && it.res.Level == 0 && it.lopside == nil && it.margin.High > 0 && m.res.GivenAs == result.SE:
		if levels := levelsFitting(it, convert.Range{Low: it.margin.Low / m.val.High(), High: it.margin.High / m.val.Low()}); levels != "" {
			it.note("SE %s beside it fits an interval of %s", m.res.GivenValue, levels)
		}
	case it.res.GivenAs == result.CI && it.res.Level > 0 && it.lopside == nil && it.margin.High > 0 && m.res.GivenAs == result.SE:
		settleTorZ(it, m, convert.Range{Low: m.val.Low(), High: m.val.High()}, "SE "+m.res.GivenValue)
	case it.res.GivenAs == result.CI && it.res.Level > 0 && it.lopside == nil && it.margin.High > 0 && m.res.GivenAs == result.SD && it.res.N > 1 && isMean(it):
		root := math.Sqrt(float64(it.res.N))
		settleTorZ(it, m, convert.Range{Low: m.val.Low() / root, High: m.val.High() / root}, "SD "+m.res.GivenValue)
	case it.res.GivenAs == result.SE && m.res.GivenAs == result.SD && it.val != nil && it.val.Low() > 0 && it.res.N > 1 && isMean(it):
		n, err := convert.NFromSDAndSE(*m.val, *it.val)
		if err == nil && !n.Meets(convert.Range{Low: float64(it.res.N), High: float64(it.res.N)}) {
			detail := fmt.Sprintf("SD %s and SE %s belong to n from %.0f to %.0f, not to %d", m.res.GivenValue, it.res.GivenValue, math.Ceil(n.Low), math.Floor(n.High), it.res.N)
			it.raise("mates-disagree", detail)
			m.raise("mates-disagree", detail)
		}
	}
}

// impliedN notes which n makes a printed SD and the interval or SE of one mean agree,
// where n is not printed. It is not applied.
func impliedN(it, m *item) {
	if m.res.GivenAs != result.SD || !isMean(it) {
		return
	}
	switch it.res.GivenAs {
	case result.SE:
		if n, err := convert.NFromSDAndSE(*m.val, *it.val); err == nil {
			it.note("SD %s and SE %s of one mean belong to n from %.0f to %.0f", m.res.GivenValue, it.res.GivenValue, math.Ceil(n.Low), math.Floor(n.High))
		}
	case result.CI:
		if it.res.Level == 0 || it.lopside != nil || it.margin.Low <= 0 {
			return
		}
		if low, high, err := convert.NFromSDAndInterval(*m.val, it.margin, it.res.Level, false); err == nil {
			it.note("SD %s and this interval of one mean belong to n from %d to %d, by t", m.res.GivenValue, low, high)
		}
	}
}

// plainByMate reports an interval that the printed SD of the same mean explains: by
// t and n, within rounding, it is the plain interval of a mean, adjusted for
// nothing.
func plainByMate(it *item) bool {
	if it.res.GivenAs != result.CI || it.res.Level <= 0 || it.lopside != nil || it.margin.Low <= 0 || it.res.N < 2 || !isMean(it) {
		return false
	}
	t, err := convert.TwoSided(it.res.Level, float64(it.res.N-1))
	if err != nil {
		return false
	}
	root := math.Sqrt(float64(it.res.N))
	for _, m := range it.mates {
		if m.res.GivenAs == result.SD && m.val != nil && m.val.Low() > 0 &&
			(convert.Range{Low: it.margin.Low * root / m.val.High(), High: it.margin.High * root / m.val.Low()}).Holds(t) {
			it.note("SD %s beside it shows that this is the plain interval of the mean", m.res.GivenValue)
			return true
		}
	}
	return false
}

func isMean(it *item) bool {
	return it.res.Statistic == result.Mean || it.res.Statistic == result.MeanChange
}

// settleTorZ compares margin/SE with t and with z. Where only z fits, the SD is
// the one by z; where neither fits, the two spreads disagree.
func settleTorZ(it, m *item, se convert.Range, printed string) {
	z, err := convert.TwoSided(it.res.Level, convert.Normal)
	if err != nil {
		return
	}
	factor := convert.Range{Low: it.margin.Low / se.High, High: it.margin.High / se.Low}
	t := z
	if it.res.N > 1 && isMean(it) {
		if t, err = convert.TwoSided(it.res.Level, float64(it.res.N-1)); err != nil {
			return
		}
	}
	byT, byZ := factor.Holds(t), factor.Holds(z)
	switch {
	case byT && !byZ:
		it.settled(false, printed)
	case byZ && !byT:
		it.settled(true, printed)
	case !byT && !byZ && (it.res.N > 1 || factor.High < z):
		detail := fmt.Sprintf("the interval and %s would need a factor from %s to %s; t is %s, z is %s", printed, short(factor.Low), short(factor.High), short(t), short(z))
		if levels := levelsFitting(it, factor); levels != "" {
			detail += "; an interval of " + levels + " would fit"
		}
		it.raise("mates-disagree", detail)
		m.raise("mates-disagree", detail)
	}
}

// levelsFitting names the usual levels whose t or z lies within the factor that an
// interval and the SE beside it need.
func levelsFitting(it *item, factor convert.Range) string {
	var fit []string
	for _, level := range usualLevels {
		dfs := []float64{convert.Normal}
		if it.res.N > 1 && isMean(it) {
			dfs = append(dfs, float64(it.res.N-1))
		}
		for _, df := range dfs {
			if q, err := convert.TwoSided(level, df); err == nil && factor.Holds(q) && level != it.res.Level {
				fit = append(fit, short(level)+"%")
				break
			}
		}
	}
	return strings.Join(fit, " or ")
}

// settled records that a spread printed beside shows how the interval was made.
func (it *item) settled(byZ bool, printed string) {
	for i, f := range it.w.Flags {
		if f.Name == "t-or-z" {
			it.w.Flags = append(it.w.Flags[:i:i], it.w.Flags[i+1:]...)
			break
		}
	}
	if !byZ {
		it.note("%s beside it shows that the interval was made with t", printed)
		return
	}
	it.note("%s beside it shows that the interval was made with z: the SD by z is taken", printed)
	rec := it.rec()
	if rec.Use != useConverted || rec.SDNormal == nil || *it.rec().Method != "sd-from-ci" {
		return
	}
	t, z := *rec.SD, *rec.SDNormal
	ratio := float64(z) / float64(t)
	rec.SD, rec.SDNormal = number(float64(z)), nil
	rec.SDLow, rec.SDHigh = down(float64(*rec.SDLow)*ratio), up(float64(*rec.SDHigh)*ratio)
	rec.SE = number(float64(z) / math.Sqrt(float64(it.res.N)))
	it.method("sd-from-ci-normal")
	it.step("by z in place of t: SD = %s", short(float64(z)))
}

// compareSpreads looks at two arms or times of one table row: a ratio of their
// spreads near √n says that one of them is an SE printed as an SD, or the reverse.
func compareSpreads(a, b *item) {
	kind := a.res.GivenAs
	if kind != b.res.GivenAs || kind != result.SD && kind != result.SE || !isMean(a) || !isMean(b) || a.res.Statistic != b.res.Statistic ||
		a.res.Outcome != b.res.Outcome || a.val == nil || b.val == nil || a.val.Value <= 0 || b.val.Value <= 0 || a.res.N < 2 || b.res.N < 2 {
		return
	}
	ratio, err := convert.SEAsSD(a.val.Value, a.res.N, b.val.Value, b.res.N)
	if err != nil || ratio <= 3 {
		return
	}
	small, large := a, b
	if a.val.Value > b.val.Value {
		small, large = b, a
	}
	if varyAlike(small, large) {
		return
	}
	detail := fmt.Sprintf("%s beside %s in one row differ by about √n", small.res.GivenValue, large.res.GivenValue)
	if kind == result.SD {
		small.raise("se-as-sd", detail)
		return
	}
	large.raise("sd-as-se", detail) // holdBacks takes the SD back
}

// varyAlike reports two arms whose means differ so much that their spreads may differ
// only because both vary by a like share of the mean, as counts and concentrations do.
func varyAlike(small, large *item) bool {
	if small.est == nil || large.est == nil || small.est.Value <= 0 || large.est.Value <= 0 {
		return false
	}
	cvSmall, cvLarge := small.val.Value/small.est.Value, large.val.Value/large.est.Value
	if cvSmall >= cvLarge {
		return true
	}
	ratio, err := convert.SEAsSD(cvSmall, small.res.N, cvLarge, large.res.N)
	return err != nil || ratio <= 3
}

// testedLevel compares the interval of a difference with its p value.
func testedLevel(it *item) {
	if it.res.GivenAs != result.CI || it.res.Statistic != result.MeanDifference || it.res.Level == 0 || it.lopside != nil ||
		it.est == nil || it.flipped || it.res.P == "" || it.margin.High <= 0 {
		return
	}
	p, err := convert.ReadP(it.res.P)
	if err != nil || !p.Exact {
		return
	}
	df := convert.Normal
	if it.res.N > 1 && it.res.N2 > 1 {
		df = float64(it.res.N + it.res.N2 - 2)
	}
	levels, err := convert.ImpliedLevel(*it.est, it.margin, p, df)
	if err != nil {
		return
	}
	// Welch's degrees of freedom, a covariate or a rank test move the p value a
	// little: only a gross difference says that something was misread.
	if it.res.Level < levels.Low-3 || it.res.Level > levels.High+3 {
		it.raise("p-disagrees", fmt.Sprintf("p %s with this interval belongs to a level of %.0f to %.0f%%, not %s%%", it.res.P, levels.Low, levels.High, short(it.res.Level)))
	}
}

// testedDF compares a printed t with its p value and degrees of freedom.
func testedDF(it *item) {
	t, df := read(it.res.T), read(it.res.DF)
	if t == nil || df == nil || it.res.P == "" || df.Value < 1 {
		return
	}
	p, err := convert.ReadP(it.res.P)
	if err != nil || !p.Exact {
		return
	}
	size := math.Abs(t.Value)
	least, err1 := convert.TTail(size+t.Half, df.High())
	greatest, err2 := convert.TTail(math.Max(size-t.Half, 0), math.Max(df.Low(), 0.5))
	if err1 != nil || err2 != nil || p.Range.Meets(convert.Range{Low: 2 * least, High: 2 * greatest}) || p.Range.Meets(convert.Range{Low: least, High: greatest}) {
		return
	}
	it.raise("t-and-p-disagree", fmt.Sprintf("t %s with %s degrees of freedom gives p from %s to %s, printed is %s", it.res.T, it.res.DF, short(2*least), short(2*greatest), it.res.P))
}

// dfAgainstN compares printed degrees of freedom with the sizes of the two arms:
// beyond n₁ + n₂ − 2 the test counts something else than the units.
func dfAgainstN(it *item) {
	df := read(it.res.DF)
	if df == nil || it.res.Statistic != result.MeanDifference || it.res.N < 2 || it.res.N2 < 2 || it.res.T == "" {
		return
	}
	if most := it.res.N + it.res.N2 - 2; df.Low() > float64(most) {
		it.raise("df-above-n", fmt.Sprintf("%s degrees of freedom, n₁ + n₂ − 2 is %d", it.res.DF, most))
	}
}

// leastSameArms is how many arms of one row must share n and margin before that
// looks like one SD for all.
const leastSameArms = 3

// sameMargins notes that the intervals of a row's arms, of one n, are all equally
// wide: they may rest on the pooled SD of an analysis of variance.
func sameMargins(row []*item) {
	var arms []*item
	estimates := map[string]bool{}
	for _, it := range row {
		if it.res.GivenAs == result.CI && isMean(it) && it.lopside == nil && it.margin.High > 0 && it.res.N > 1 {
			arms = append(arms, it)
			estimates[it.res.Estimate] = true
		}
	}
	if len(arms) < leastSameArms || len(estimates) < 2 {
		return
	}
	for _, it := range arms[1:] {
		if it.res.N != arms[0].res.N || it.res.Time != arms[0].res.Time || !it.margin.Meets(arms[0].margin) || math.Abs(it.halfWidth()-arms[0].halfWidth()) > it.margin.High-it.margin.Low {
			return
		}
	}
	if width := arms[0].margin; width.High-width.Low > 0.05*width.High {
		return // too few digits to tell
	}
	for _, it := range arms {
		it.note("the intervals of all %d arms of this row are equally wide: they may be made from the pooled SD of an analysis of variance, whose t has N − k degrees of freedom", len(arms))
	}
}

// repeats flags results of one table that print the same estimate and spread, to
// at least five digits together, for different arms, times or outcomes.
func repeats(items []*item) {
	type key struct{ table, estimate, lower, upper, value string }
	first := map[key]*item{}
	for _, it := range items {
		if it.res.Table == "" || digits(it.res.Estimate)+digits(it.res.Lower)+digits(it.res.GivenValue) < 5 {
			continue
		}
		k := key{it.res.Table, it.res.Estimate, it.res.Lower, it.res.Upper, it.res.GivenValue}
		before, ok := first[k]
		if !ok {
			first[k] = it
			continue
		}
		if before.res.Arm == it.res.Arm && before.res.Time == it.res.Time && before.res.Outcome == it.res.Outcome {
			continue
		}
		detail := fmt.Sprintf("%s with the same spread stands twice in %s", it.res.Estimate, it.res.Table)
		it.raise("repeated-values", detail)
		before.raise("repeated-values", detail)
	}
}

func digits(s string) int {
	n := 0
	for i := 0; i < len(s); i++ {
		if s[i] >= '0' && s[i] <= '9' {
			n++
		}
	}
	return n
}
