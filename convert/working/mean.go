package working

import (
	"fmt"
	"math"

	"halfspan/convert"
	"halfspan/extract/result"
)

// sdOf says what the values are whose SD is given.
func sdOf(r *result.Result) *string {
	switch r.Statistic {
	case result.MeanChange:
		return text("changes")
	case result.MeanDifference:
		return text("differences")
	}
	return text("values")
}

func (it *item) takeMean() {
	if it.est != nil {
		it.rec().Mean = number(it.est.Value)
	}
}

// takeSD takes a printed SD as it stands.
func takeSD(it *item) {
	if it.val == nil {
		it.withhold("an SD is announced, but no single number is printed for it")
		return
	}
	if it.val.Value < 0 {
		it.raise("spread-not-positive", "SD "+it.res.GivenValue)
		it.withhold("the printed SD is negative")
		return
	}
	if it.val.Value == 0 {
		it.raise("spread-not-positive", "SD "+it.res.GivenValue)
	}
	rec := it.rec()
	rec.Use = usePrinted
	rec.SD = number(it.val.Value)
	rec.SDLow, rec.SDHigh = down(max(it.val.Low(), 0)), up(it.val.High())
	rec.SDOf = sdOf(it.res)
	switch it.res.Statistic {
	case result.Mean, result.MeanChange, result.MeanDifference, "":
		it.takeMean()
	}
	it.method("printed-sd")
	it.step("SD = %s as printed", it.res.GivenValue)
	if n := it.res.N; n >= 2 && it.val.Value > 0 && it.res.Statistic != result.MeanDifference {
		se := it.val.Value / math.Sqrt(float64(n))
		rec.SE, rec.Scale = number(se), text("raw")
		it.step("SE = SD/√n = %s/√%d = %s", it.res.GivenValue, n, short(se))
	}
	if it.res.N == 0 {
		it.sizeMissing()
	}
}

func down(v float64) *Number { n := Down(v); return &n }
func up(v float64) *Number   { n := Up(v); return &n }

// mostSDs is how many times its mean an SD may be before an SE is taken for an SD:
// values that cannot be negative hardly ever vary so much, and where they can be
// negative withholding costs little.
const mostSDs = 4

// meanFromSE works out the SD behind the SE of a mean.
func meanFromSE(it *item) {
	if it.val == nil || it.val.Value <= 0 {
		it.raise("spread-not-positive", "SE "+it.res.GivenValue)
		it.withhold("the printed SE is not above 0")
		return
	}
	it.takeMean()
	rec := it.rec()
	rec.SE, rec.Scale = number(it.val.Value), text("raw")
	it.step("SE = %s as printed", it.res.GivenValue)
	reason := blocked(it)
	n := it.res.N
	if n == 0 {
		it.sizeMissing()
	}
	switch {
	case reason != "":
		it.withhold(reason)
		return
	case n == 0:
		it.withhold("n is not printed: SE only")
		return
	case n < 2:
		it.withhold(fmt.Sprintf("n is %d: no SD from so few values", n))
		return
	}
	sd, err := convert.SDFromSE(it.val.Value, n)
	if err != nil {
		it.withhold(err.Error())
		return
	}
	span := convert.Range{Low: math.Max(it.val.Low(), 0), High: it.val.High()}.Times(math.Sqrt(float64(n)))
	if it.res.Statistic == result.Mean && it.est != nil && it.est.Low() > 0 && span.Low > mostSDs*it.est.High() {
		it.raise("sd-as-se", fmt.Sprintf("as an SE %s would mean an SD of %s with a mean of %s", it.res.GivenValue, short(sd), it.res.Estimate))
		it.withhold("printed as an SE, but its size says that it is an SD")
		return
	}
	it.step("SD = SE·√n = %s·√%d = %s", it.res.GivenValue, n, short(sd))
	it.give(sd, span, "sd-from-se")
	it.assume(fmt.Sprintf("SE = SD/√n of %d independent values", n))
}

// give records a converted SD with the range of its digits.
func (it *item) give(sd float64, span convert.Range, method string) {
	rec := it.rec()
	rec.Use = useConverted
	rec.SD = number(sd)
	rec.SDLow, rec.SDHigh = down(span.Low), up(span.High)
	rec.SDOf = sdOf(it.res)
	it.method(method)
	if it.res.Adjusted == "unclear" {
		it.assume("not adjusted: the table prints the adjusted difference in a column of its own")
	}
	it.step("the printed digits allow %s to %s: SD %s", short(span.Low), short(span.High), deserved(sd, span))
}

// meanFromInterval works out SE and SD behind the interval of a mean.
func meanFromInterval(it *item) {
	it.takeMean()
	reason := blocked(it)
	n, level := it.res.N, it.res.Level
	if n == 0 {
		it.sizeMissing()
	}
	if level == 0 {
		it.raise("level-missing", "the level of the interval is not printed")
	}
	width := it.halfWidth()
	switch {
	case it.lopside != nil:
		it.explainLopside()
		it.withhold(it.lopsideReason())
	case width <= 0:
		it.raise("spread-not-positive", "the interval has no width")
		it.withhold("the interval has no width")
	case reason != "":
		// By t with n-1 the interval of a model would give neither SE nor SD: the
		// interval itself stays in the record.
		it.withhold(reason)
	case level == 0:
		it.withhold("the level of the interval is not printed")
		it.offerLevels(width, n)
	case n == 1:
		it.withhold("n is 1: no SD from a single value")
	case n == 0:
		it.seByNormal(width)
	default:
		it.sdByT(width)
	}
}

// seByNormal gives the SE where n is not known.
func (it *item) seByNormal(width float64) {
	it.withhold("n is not printed: SE only, by the normal value")
	z, err := convert.TwoSided(it.res.Level, convert.Normal)
	if err != nil {
		it.withhold(err.Error())
		return
	}
	it.stepMargin(width)
	it.step("SE = margin/z = %s/%s = %s, by the normal value since n is not known", short(width), short(z), short(width/z))
	it.rec().SE, it.rec().Scale = number(width/z), text("raw")
	it.method("se-from-ci")
}

// sdByT gives SE and SD by t with n-1 degrees of freedom, the value by z beside.
func (it *item) sdByT(width float64) {
	n, level := it.res.N, it.res.Level
	t, err := convert.TwoSided(level, float64(n-1))
	if err != nil {
		it.withhold(err.Error())
		return
	}
	z, err := convert.TwoSided(level, convert.Normal)
	if err != nil {
		it.withhold(err.Error())
		return
	}
	root := math.Sqrt(float64(n))
	sd, byZ := root*width/t, root*width/z
	it.stepMargin(width)
	it.step("t for %s%% with n − 1 = %d degrees of freedom = %s", short(level), n-1, short(t))
	it.step("SE = margin/t = %s/%s = %s", short(width), short(t), short(width/t))
	it.step("SD = SE·√n = %s·√%d = %s", short(width/t), n, short(sd))
	it.rec().SE, it.rec().Scale = number(width/t), text("raw")
	it.give(sd, it.margin.Times(root/t), "sd-from-ci")
	it.rec().SDNormal = number(byZ)
	it.offer(Alternative{Name: "normal value (z) in place of t", Mean: it.rec().Mean, SD: number(byZ), SE: number(width / z),
		Low: down(it.margin.Low * root / z), High: up(it.margin.High * root / z), Note: fmt.Sprintf("larger by %s%%", percent(t/z-1))})
	it.assume(fmt.Sprintf("raw mean of %d independent values, interval made as mean ± t·SE", n))
	if t/z-1 > 0.01 {
		it.raise("t-or-z", fmt.Sprintf("by z the SD would be %s, by t it is %s", short(byZ), short(sd)))
	}
}

func (it *item) stepMargin(width float64) {
	if it.interval() {
		low, high := it.res.Lower, it.res.Upper
		if it.swapped {
			low, high = high, low
		}
		it.step("margin = (upper − lower)/2 = (%s − %s)/2 = %s", high, minus(low), short(width))
		return
	}
	it.step("margin = %s as printed", it.res.GivenValue)
}

// minus puts a negative number that follows a sign into brackets.
func minus(s string) string {
	if len(s) > 0 && s[0] == '-' {
		return "(" + s + ")"
	}
	return s
}

// usualLevels are the levels of intervals in use, the usual one first.
var usualLevels = []float64{95, 90, 99}

// offerLevels shows what the SD would be at the usual levels.
func (it *item) offerLevels(width float64, n int) {
	if n < 2 {
		return
	}
	for _, level := range usualLevels {
		t, err := convert.TwoSided(level, float64(n-1))
		if err != nil {
			continue
		}
		root := math.Sqrt(float64(n))
		it.offer(Alternative{Name: fmt.Sprintf("if the level is %s%%", short(level)), SD: number(root * width / t), SE: number(width / t),
			Low: down(it.margin.Low * root / t), High: up(it.margin.High * root / t)})
	}
}
