package working

import (
	"fmt"
	"strings"

	"halfspan/convert"
	"halfspan/extract/result"
)

// proposeFromMedian leaves mean and SD empty: the published methods are shown as
// proposals, and a person may take one.
func proposeFromMedian(it *item) {
	it.withhold("a median: the published methods give proposals only, none is taken")
	if it.res.GivenAs == result.CI {
		it.withhold("a median with a confidence interval: no published method leads from it to an SD")
		return
	}
	n := it.res.N
	if n == 0 {
		it.sizeMissing()
		it.withhold("a median, and n is not printed: the published methods need it")
		return
	}
	if !it.interval() {
		it.proposeFromWidth(n)
		return
	}
	if it.est == nil {
		return
	}
	s, scope := it.summary()
	switch {
	case s.HasQuartiles && s.HasRange:
		it.proposeFive(s, n)
	case s.HasQuartiles:
		it.proposeQuartiles(s, n)
	case s.HasRange:
		it.proposeRange(s, n)
	}
	if scope != "" {
		it.note("%s", scope)
	}
}

// summary gathers the quantiles printed for this result and, where a mate prints
// the other pair, that too.
func (it *item) summary() (q convert.Quantiles, scope string) {
	q.Median = it.est.Value
	add := func(x *item) {
		if !x.interval() {
			return
		}
		low, high := x.bounds()
		switch x.res.GivenAs {
		case result.IQR:
			q.Q1, q.Q3, q.HasQuartiles = low.Value, high.Value, true
		case result.Range:
			q.Min, q.Max, q.HasRange = low.Value, high.Value, true
		}
	}
	add(it)
	for _, m := range it.mates {
		if m.res.GivenAs == it.res.GivenAs || m.res.GivenAs != result.IQR && m.res.GivenAs != result.Range {
			continue
		}
		add(m)
		scope = "the other pair of quantiles is read from the result printed beside it"
	}
	return q, scope
}

// propose offers mean and SD by a method or a pair of methods; what the method
// refuses is passed over. width scales the SD with the rounding of the printed
// distance, 0 where that is not so simple.
func (it *item) propose(name string, m convert.MeanSD, err error, width, half float64, notes ...string) {
	if err != nil {
		return
	}
	a := Alternative{Name: name, Mean: number(m.Mean), SD: number(m.SD)}
	if width > 2*half {
		a.Low, a.High = down(m.SD*(1-2*half/width)), up(m.SD*(1+2*half/width))
	}
	a.Note = strings.Join(append(notes, typicalNote(name, it.res.N)), "; ")
	it.offer(a)
}

// typicalNote states the simulated error of a proposal for near-normal and for
// skewed values. The first method named gives the mean, the last one the SD.
func typicalNote(name string, n int) string {
	parts := strings.Split(name, " with ")
	mean, err := convert.TypicalErrors(parts[0], n)
	if err != nil {
		return "error not simulated"
	}
	sd, err := convert.TypicalErrors(parts[len(parts)-1], n)
	if err != nil {
		return "error not simulated"
	}
	var out []string
	for i := range mean {
		if i < len(sd) && (mean[i].Law == "normal" || mean[i].Law == "lognormal s=0.5") {
			out = append(out, fmt.Sprintf("%s data: mean off by %.0f%% of an SD, SD by %.0f%%", mean[i].Law, mean[i].MeanRM, sd[i].SDRM))
		}
	}
	return fmt.Sprintf("typical error at n %d: %s", mean[0].N, strings.Join(out, "; "))
}

const preferred = "preferred in the literature for near-normal data"

func (it *item) verdict(s convert.SkewTest, err error) {
	if err != nil {
		return
	}
	if s.Statistic < 1e-9 {
		s.Statistic = 0 // what is left of equal distances after subtracting
	}
	if s.Skewed() {
		it.raise("skewed-summary", fmt.Sprintf("skewness %s, critical %s at 5%%", short(s.Statistic), short(s.Critical)))
		it.note("the printed quantiles are skewed (%s > %s): the methods for near-normal data mislead", short(s.Statistic), short(s.Critical))
		return
	}
	it.note("skewness %s, critical %s: symmetry not rejected, which is no proof of it", short(s.Statistic), short(s.Critical))
}

func (it *item) halfUnit() float64 {
	low, high := it.bounds()
	return max(low.Half, high.Half)
}

func (it *item) proposeQuartiles(q convert.Quantiles, n int) {
	width, h := q.Q3-q.Q1, it.halfUnit()
	wan, err := convert.WanFromQuartiles(q.Q1, q.Median, q.Q3, n)
	if err != nil {
		it.note("no proposal: %v", err)
		return
	}
	it.step("η = 2·Φ⁻¹((0.75·n − 0.125)/(n + 0.25)) = %s for n = %d", short(width/wan.SD), n)
	it.step("SD (wan-quartiles) = (q3 − q1)/η = (%s − %s)/%s = %s", short(q.Q3), minus(short(q.Q1)), short(width/wan.SD), short(wan.SD))
	luo, err := convert.LuoMeanFromQuartiles(q.Q1, q.Median, q.Q3, n)
	it.step("mean (luo-quartiles) = w·(q1 + q3)/2 + (1 − w)·median = %s, w = 0.7 + 0.39/n", short(luo))
	it.propose("luo-quartiles with wan-quartiles", convert.MeanSD{Mean: luo, SD: wan.SD}, err, width, h, preferred)
	it.propose("wan-quartiles", wan, nil, width, h)
	m, err := convert.LogNormalFromQuartiles(q.Q1, q.Median, q.Q3, n)
	it.propose("lognormal-quartiles", m, err, 0, 0, "if the logarithms are near normal")
	m, err = convert.BoxCoxFromQuartiles(q.Q1, q.Median, q.Q3, n)
	it.propose("box-cox-quartiles", m, err, 0, 0, "if some power makes them near normal")
	it.proposeFit(q, n, "quantile-estimation-quartiles")
	it.verdict(convert.SkewFromQuartiles(q.Q1, q.Median, q.Q3, n))
}

func (it *item) proposeRange(q convert.Quantiles, n int) {
	width, h := q.Max-q.Min, it.halfUnit()
	wan, err := convert.WanFromRange(q.Min, q.Median, q.Max, n)
	if err != nil {
		it.note("no proposal: %v", err)
		return
	}
	it.step("ξ = 2·Φ⁻¹((n − 0.375)/(n + 0.25)) = %s for n = %d", short(width/wan.SD), n)
	it.step("SD (wan-range) = (max − min)/ξ = (%s − %s)/%s = %s", short(q.Max), minus(short(q.Min)), short(width/wan.SD), short(wan.SD))
	luo, err := convert.LuoMeanFromRange(q.Min, q.Median, q.Max, n)
	it.step("mean (luo-range) = w·(min + max)/2 + (1 − w)·median = %s, w = 4/(4 + n^0.75)", short(luo))
	it.propose("luo-range with wan-range", convert.MeanSD{Mean: luo, SD: wan.SD}, err, width, h, preferred)
	it.propose("wan-range", wan, nil, width, h)
	m, err := convert.HozoFromRange(q.Min, q.Median, q.Max, n)
	it.propose("hozo-range", m, err, 0, 0, "superseded: jumps at n = 15 and 70")
	if bounds, err := convert.SDBoundsFromRange(width, n); err == nil {
		it.note("whatever the values are, their SD lies between %s and %s", short(bounds.Low), short(bounds.High))
	}
	it.verdict(convert.SkewFromRange(q.Min, q.Median, q.Max, n))
}

func (it *item) proposeFive(q convert.Quantiles, n int) {
	shi, err := convert.ShiSDFromFive(q.Min, q.Q1, q.Q3, q.Max, n)
	if err != nil {
		it.note("no proposal: %v", err)
		return
	}
	it.step("SD (shi-five) = (max − min)/θ1 + (q3 − q1)/θ2 = %s", short(shi))
	luo, err := convert.LuoMeanFromFive(q.Min, q.Q1, q.Median, q.Q3, q.Max, n)
	it.step("mean (luo-five) from all five numbers = %s", short(luo))
	it.propose("luo-five with shi-five", convert.MeanSD{Mean: luo, SD: shi}, err, 0, 0, preferred)
	m, err := convert.WanFromFive(q.Min, q.Q1, q.Median, q.Q3, q.Max, n)
	it.propose("wan-five", m, err, 0, 0)
	if n <= 50 {
		m, err = convert.BlandFromFive(q.Min, q.Q1, q.Median, q.Q3, q.Max, n)
		it.propose("bland-five", m, err, 0, 0, "the SD grows with n: not above 50")
	}
	m, err = convert.LogNormalFromFive(q.Min, q.Q1, q.Median, q.Q3, q.Max, n)
	it.propose("lognormal-five", m, err, 0, 0, "if the logarithms are near normal")
	it.proposeFit(q, n, "quantile-estimation-five")
	it.verdict(convert.SkewFromFive(q.Min, q.Q1, q.Median, q.Q3, q.Max, n))
}

func (it *item) proposeFit(q convert.Quantiles, n int, name string) {
	if low, high, ok := it.scale(); ok {
		q.Limits = &convert.Bounded{Low: low, High: high}
	}
	fits, err := convert.QuantileEstimation(q, n)
	if err != nil {
		return
	}
	closest := fits[0].Family
	if closest == "beta" {
		closest = fmt.Sprintf("beta between the limits of the scale, %s and %s", short(q.Limits.Low), short(q.Limits.High))
	}
	it.propose(name, fits[0].MeanSD, nil, 0, 0, "closest law: "+closest)
}

// proposeFromWidth offers the SD where only the width is printed.
func (it *item) proposeFromWidth(n int) {
	if it.val == nil || it.val.Value <= 0 {
		it.raise("spread-not-positive", "width "+it.res.GivenValue)
		return
	}
	name, method := "wan-quartiles", convert.SDFromIQRWidth
	if it.res.GivenAs == result.Range {
		name, method = "wan-range", convert.SDFromRangeWidth
	}
	sd, err := method(it.val.Value, n)
	if err != nil {
		it.note("no proposal: %v", err)
		return
	}
	it.step("SD = width/%s = %s/%s = %s", short(it.val.Value/sd), it.res.GivenValue, short(it.val.Value/sd), short(sd))
	it.offer(Alternative{Name: name, SD: number(sd), Low: down(sd * (1 - it.val.Half/it.val.Value)), High: up(sd * (1 + it.val.Half/it.val.Value)),
		Note: "from the width alone: no mean; " + typicalNote(name, n)})
	if it.res.GivenAs == result.Range && n <= 25 {
		if small, relative, err := convert.SDFromRangeSmall(it.val.Value, n); err == nil {
			it.offer(Alternative{Name: "d2", SD: number(small), Note: fmt.Sprintf("normal data; relative error of an SD from a range at this n: %.0f%%", 100*relative)})
		}
	}
}
