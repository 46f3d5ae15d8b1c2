package convert

import (
	"math"
	"slices"
)

func medianCases() []checkCase {
	return []checkCase{
		{name: "c1-hozo", figures: "14.75 7.95429653 12 6.75 12 4.5", got: func(v *values) {
			for _, n := range []int{12, 40, 90} {
				v.pair(HozoFromRange(4, 12, 31, n))
			}
		}},
		{name: "c2-wan-range", figures: "14.75 6.26056266 72.75 9.95158952", got: func(v *values) {
			v.pair(WanFromRange(4, 12, 31, 40))
			v.pair(WanFromRange(50, 70, 101, 120))
		}},
		{name: "c2-wan-quartiles", figures: "12.3333333 5.38250931 70.3333333 12.7563614", got: func(v *values) {
			v.pair(WanFromQuartiles(9, 12, 16, 40))
			v.pair(WanFromQuartiles(62, 70, 79, 120))
		}},
		{name: "c2-wan-five", figures: "13.625 5.82153598 71.625 11.3539755", got: func(v *values) {
			v.pair(WanFromFive(4, 9, 12, 16, 31, 40))
			v.pair(WanFromFive(50, 62, 70, 79, 101, 120))
		}},
		{name: "c3-bland", figures: "13.721875 6.28863061 71.6572917 12.466831", got: func(v *values) {
			v.pair(BlandFromFive(4, 9, 12, 16, 31, 40))
			v.pair(BlandFromFive(50, 62, 70, 79, 101, 120))
		}},
		{name: "c4-luo", figures: "13.1052269 70.5464955 12.354875 70.351625 12.9709748 70.6387738", got: func(v *values) {
			v.add(LuoMeanFromRange(4, 12, 31, 40))
			v.add(LuoMeanFromRange(50, 70, 101, 120))
			v.add(LuoMeanFromQuartiles(9, 12, 16, 40))
			v.add(LuoMeanFromQuartiles(62, 70, 79, 120))
			v.add(LuoMeanFromFive(4, 9, 12, 16, 31, 40))
			v.add(LuoMeanFromFive(50, 62, 70, 79, 101, 120))
		}},
		{name: "c4-shi", figures: "5.91783357 11.5029304", got: func(v *values) {
			v.add(ShiSDFromFive(4, 9, 16, 31, 40))
			v.add(ShiSDFromFive(50, 62, 79, 101, 120))
		}},
		{name: "c4-expected-range", figures: "1.12837917 2.32592895 3.07750546 3.93062922 4.49814726", published: "1.128 2.326 3.078 3.931 4.498",
			source: "Wan 2014 table 1, recalled from memory", got: func(v *values) {
				for _, n := range []int{2, 5, 10, 25, 50} {
					v.add(ExpectedRange(n))
				}
			}},
		{name: "c4-xi", figures: "3.09327054 3.92843368 4.48665753", got: func(v *values) {
			for _, n := range []int{10, 25, 50} {
				v.add(extremesFactor(n), nil)
			}
		}},
		{name: "c4-expected-iqr", figures: "0.990037941 1.14394157 1.25964356 1.30298894 1.33956267", published: "0.990 1.144 1.260 1.303 1.340",
			source: "Wan 2014 table 2, n = 4Q+1, recalled from memory", got: func(v *values) {
				for _, q := range []int{1, 2, 5, 10, 50} {
					v.add(expectedOrder(3*q+1, 4*q+1)-expectedOrder(q+1, 4*q+1), nil)
				}
			}},
		{name: "c4-iqr-large", figures: "1.3489795", published: "1.35", source: handbook, got: func(v *values) {
			z, err := NormalUpper(.25)
			v.add(2*z, err)
		}},
		{name: "c4-widths", got: func(v *values) {
			v.add(SDFromIQRWidth(7, 40))
			v.add(SDFromRangeWidth(27, 40))
		}},
		{name: "c6-skew", figures: "0.407407407 0.318786956 0.142857143 0.416882929 0.542507877 0.468987295", got: func(v *values) {
			skews(v, 4, 9, 12, 16, 31, 40, true, false, true)
		}},
		{name: "c6-no-skew", figures: "0.215686275 0.227909597 0.0588235294 0.242412556 0.223142917 0.271100039", got: func(v *values) {
			skews(v, 50, 62, 70, 79, 101, 120, false, false, false)
		}},
		{name: "c7-log", figures: "7.6146663 7.74294551 4.18990214 8.59519264", got: func(v *values) {
			v.pair(LogNormalFromQuartiles(3.1, 5.2, 9.4, 60))
			v.pair(LogNormalFromQuartiles(0.8, 1.9, 4.1, 25))
		}},
		// A minimum is only found to half the digits of a float64.
		{name: "c7-quantile-estimation", figures: "7.56997 7.70049 3.70809 6.39024", tolerance: 1e-7, got: func(v *values) {
			for _, q := range []Quantiles{{Q1: 3.1, Median: 5.2, Q3: 9.4, HasQuartiles: true}, {Q1: 0.8, Median: 1.9, Q3: 4.1, HasQuartiles: true}} {
				fits, err := QuantileEstimation(q, 100)
				if err != nil {
					v.t.Fatal(err)
				}
				i := slices.IndexFunc(fits, func(f Fit) bool { return f.Family == "lognormal" })
				v.pair(fits[i].MeanSD, nil)
			}
		}},
		{name: "c7-beta", tolerance: 1e-6, got: func(v *values) {
			betaFit(v, Quantiles{Q1: .31, Median: .52, Q3: .64, HasQuartiles: true, Limits: &Bounded{0, 1}}, 40, 0, 1)
			betaFit(v, Quantiles{Min: .02, Q1: .11, Median: .19, Q3: .34, Max: .71, HasQuartiles: true, HasRange: true, Limits: &Bounded{0, 1}}, 40, 0, 1)
		}},
		{name: "c7-box-cox-power", figures: "-0.243862941 0.143926943", got: func(v *values) {
			v.add(BoxCoxPower(3.1, 5.2, 9.4))
			v.add(BoxCoxPower(0.8, 1.9, 4.1))
		}},
	}
}

// betaFit adds mean and SD of the fitted beta law, and holds that a shifted and
// stretched scale only shifts and stretches them.
func betaFit(v *values, q Quantiles, n int, low, high float64) {
	v.t.Helper()
	fit := func(q Quantiles) MeanSD {
		fits, err := QuantileEstimation(q, n)
		if err != nil {
			v.t.Fatal(err)
		}
		i := slices.IndexFunc(fits, func(f Fit) bool { return f.Family == "beta" })
		if i < 0 {
			v.t.Fatal("no beta law was fitted")
		}
		return fits[i].MeanSD
	}
	m := fit(q)
	v.pair(m, nil)
	scaled := q
	scaled.Limits = &Bounded{3 + 60*low, 3 + 60*high}
	for _, x := range []*float64{&scaled.Min, &scaled.Q1, &scaled.Median, &scaled.Q3, &scaled.Max} {
		*x = 3 + 60**x
	}
	if s := fit(scaled); math.Abs(s.Mean-3-60*m.Mean) > 1e-4 || math.Abs(s.SD-60*m.SD) > 1e-4 {
		v.t.Errorf("on another scale %v, on 0 to 1 %v", s, m)
	}
}

func skews(v *values, a, q1, m, q3, b float64, n int, ranged, quartiles, five bool) {
	v.t.Helper()
	for _, c := range []struct {
		test func() (SkewTest, error)
		want bool
	}{
		{func() (SkewTest, error) { return SkewFromRange(a, m, b, n) }, ranged},
		{func() (SkewTest, error) { return SkewFromQuartiles(q1, m, q3, n) }, quartiles},
		{func() (SkewTest, error) { return SkewFromFive(a, q1, m, q3, b, n) }, five},
	} {
		s, err := c.test()
		v.add(s.Statistic, err)
		v.add(s.Critical, nil)
		if s.Skewed() != c.want {
			v.t.Errorf("skewed: got %v, want %v (%v against %v)", s.Skewed(), c.want, s.Statistic, s.Critical)
		}
	}
}

// expectedOrder is the expected value of the r-th of n standard normal values, by
// direct summation over a fine grid: a check of quartilesFactor, not a method.
func expectedOrder(r, n int) float64 {
	lg := func(x int) float64 { v, _ := math.Lgamma(float64(x + 1)); return v }
	c := lg(n) - lg(r-1) - lg(n-r)
	sum, h := 0.0, 1e-3
	for z := -10.0; z <= 10; z += h {
		sum += h * z * math.Exp(-z*z/2+c+float64(r-1)*math.Log(NormalTail(-z))+float64(n-r)*math.Log(NormalTail(z))) / math.Sqrt(2*math.Pi)
	}
	return sum
}

func ratioCases() []checkCase {
	altman := "Altman & Bland 2011, recalled from memory"
	newcombe := "Newcombe 1998, recalled from memory: 81/263, 15/148, 1/29"
	cases := []checkCase{
		{name: "d1-altman", figures: "0.0752053463 0.00507959778", published: "- 0.005", source: altman, got: func(v *values) {
			se, err := LogSEFromInterval(.70, .94, 95, Normal)
			v.add(se, err)
			v.add(2*NormalTail(-math.Log(.81)/se), nil)
		}},
		{name: "d1-altman-p", figures: "1.43670151 32.5632985", published: "1.4 32.6", source: altman + "; z by their approximation", got: func(v *values) {
			z := -0.862 + math.Sqrt(.743-2.404*math.Log(.032))
			se, err := SEFromT(17, z)
			v.add(17-1.96*se, err)
			v.add(17+1.96*se, err)
		}},
		{name: "d1-levels", figures: "0.189056189 0.225274344 0.143853989 1.62234398", got: func(v *values) {
			for _, level := range []float64{95, 90, 99} {
				v.add(LogSEFromInterval(1.12, 2.35, level, Normal))
			}
			v.add(math.Sqrt(1.12*2.35), nil)
		}},
		{name: "d1-percent", figures: "0.129350566 0.682934843", got: func(v *values) {
			low, err := RatioFromPercentChange(-47)
			v.add(low, err)
			high, err := RatioFromPercentChange(-12)
			v.add(high, err)
			v.list = nil
			v.add(LogSEFromInterval(low, high, 95, Normal))
			v.add(math.Sqrt(low*high), nil)
		}},
		{name: "d1-hayfever", figures: "4.89281866 0.103076061 3.99778105 5.9882405", published: "4.89 0.103 4.00 5.99", source: "Bland & Altman 2000, recalled from memory", got: func(v *values) {
			or := 141. * 13525 / (420 * 928)
			se, err := LogOddsRatioSE(141, 420, 928, 13525)
			v.add(or, nil)
			v.add(se, err)
			v.add(math.Exp(math.Log(or)-1.96*se), nil)
			v.add(math.Exp(math.Log(or)+1.96*se), nil)
		}},
		{name: "d2-first", figures: "0.221263472 0.259437261 0.184114924 0.152291606", got: func(v *values) {
			v.add(LogRiskRatioSE(24, 110, 39, 108))
			v.add(LogRateRatioSE(24, 39))
			v.add(LogHazardRatioSE(118, 1, 1))
			v.add(LogSEFromP(.72, .031))
		}},
		{name: "d2-second", figures: "0.419065345 0.501644842 0.53935989 0.267261242 0.150089572", got: func(v *values) {
			v.add(LogRiskRatioSE(7, 60, 15, 58))
			v.add(LogOddsRatioSE(7, 53, 15, 43))
			v.add(LogRateRatioSE(11, 5))
			v.add(LogHazardRatioSE(63, 2, 1))
			v.add(LogSEFromP(1.48, .009))
		}},
		{name: "d3-logit-se", got: func(v *values) {
			v.add(LogitSEFromInterval(.045, .148, 95))
			v.add(LogitSEFromInterval(.255, .366, 90))
		}},
		{name: "d3-zero", figures: "0 0.168433471 0.161125158", published: "0 .1684 .1611", source: "Newcombe 1998, 0/20, recalled from memory", got: func(v *values) {
			v.both(intervalOf("exact")(0, 20, 95))
			r, err := intervalOf("wilson")(0, 20, 95)
			v.add(r.High, err)
			v.both(intervalOf("exact")(20, 20, 95))
		}},
		{name: "d3-sd-binary", got: func(v *values) { v.add(SDOfBinary(9, 40)) }},
		{name: "d4-one-decimal", got: func(v *values) { recovered(v, "30.8", "25.5", "36.6") }},
		{name: "d4-wald", got: func(v *values) { recovered(v, "22.5", "9.6", "35.4") }},
		{name: "d4-whole-percents", figures: "134", got: func(v *values) {
			c, err := CountsFromProportion(printed(v.t, "31"), printed(v.t, "25"), printed(v.t, "37"), 95, 2, 2000, nil)
			v.add(float64(len(c)), err)
		}},
		{name: "d5-poisson", figures: "0 3.68887945 0.025317808 5.57164339 1.62348639 11.6683321 4.7953887 18.390356 12.2165196 30.8883779 81.3639913 121.626794",
			published: "0 3.689 0.0253 5.572 1.623 11.668 4.795 18.390 12.217 30.888 81.364 121.627", source: "Poisson limit tables, recalled from memory", got: func(v *values) {
				for _, x := range []float64{0, 1, 5, 10, 20, 100} {
					v.both(PoissonInterval(x, 95))
				}
			}},
		{name: "d5-count", figures: "22.5912048 24.9958021 21.4034585 23.7447565 23.868893 26.3398165", got: func(v *values) {
			for _, b := range [][2]float64{{3.2, 7.3}, {3.15, 7.35}, {3.25, 7.25}} {
				v.add(CountFromRateInterval(b[0], b[1], 95, false))
				v.add(CountFromRateInterval(b[0], b[1], 95, true))
			}
		}},
		{name: "d5-count-known", figures: "8.50446044 10.0000009 10 11.6157641", got: func(v *values) {
			z, err := TwoSided(95, Normal)
			if err != nil {
				v.t.Fatal(err)
			}
			f := math.Exp(z / math.Sqrt(10))
			for _, b := range [][2]float64{{4.795389, 18.390356}, {10 / f, 10 * f}} {
				v.add(CountFromRateInterval(b[0], b[1], 95, false))
				v.add(CountFromRateInterval(b[0], b[1], 95, true))
			}
		}},
		{name: "e1-interval", figures: "0.57020007 10.0219759 1.76862086 11.7887673 7.30720996", got: func(v *values) {
			s, err := LogSDFromInterval(8.1, 12.4, 95, 30, 29)
			v.add(s, err)
			v.add(math.Sqrt(8.1*12.4), nil)
			v.add(math.Exp(s), nil)
			v.pair(LogNormalToRaw(10.02, s))
		}},
		{name: "e1-interval-90", figures: "0.346183863 1.52381101 1.70252055 0.85901849", got: func(v *values) {
			v.add(LogSDFromInterval(1.35, 1.72, 90, 24, 23))
			v.add(math.Sqrt(1.35*1.72), nil)
			s, err := LogSDFromGSD(1.61)
			if err != nil {
				v.t.Fatal(err)
			}
			v.pair(LogNormalToRaw(1.52, s))
		}},
		{name: "e1-cv", figures: "0.0997513451 0.246220677 0.38525317 0.703346459", got: func(v *values) {
			for _, cv := range []float64{.10, .25, .40, .80} {
				v.add(LogSDFromGeometricCV(cv))
			}
		}},
		{name: "e1-ratio-of-means", figures: "0.364484528 0.374787652 0.435655068 0.440824538", got: func(v *values) {
			differenceSDs(v, math.Log(1.05), math.Log(1.62), 95, 24, 22)
			differenceSDs(v, math.Log(.71), math.Log(.98), 90, 40, 41)
		}},
		{name: "e2-there-and-back", figures: "9.79229377 0.637669073 12 8.5", got: func(v *values) {
			gm, s, err := RawToLogNormal(12.0, 8.5)
			v.add(gm, err)
			v.add(s, nil)
			v.pair(LogNormalToRaw(gm, s))
		}},
	}
	published := map[string]string{
		"wald":   ".2522 .3638 .0527 .1500 - .1009",
		"wilson": ".2553 .3662 .0624 .1605 .0061 .1718",
		"exact":  ".2527 .3676 .0578 .1617 .0009 .1776",
	}
	for _, m := range ProportionMethods() {
		cases = append(cases, checkCase{name: "d3-" + m.Name, published: published[m.Name], source: newcombe, got: func(v *values) {
			for _, c := range [][2]int{{81, 263}, {15, 148}, {1, 29}, {39, 40}} {
				v.both(m.Interval(c[0], c[1], 95))
			}
		}})
	}
	return cases
}

func intervalOf(name string) func(x, n int, percent float64) (Range, error) {
	methods := ProportionMethods()
	return methods[slices.IndexFunc(methods, func(m ProportionMethod) bool { return m.Name == name })].Interval
}

func recovered(v *values, p, l, u string) {
	v.t.Helper()
	c, err := CountsFromProportion(printed(v.t, p), printed(v.t, l), printed(v.t, u), 95, 2, 2000, nil)
	if err != nil {
		v.t.Fatal(err)
	}
	for _, k := range c {
		v.list = append(v.list, float64(k.X), float64(k.N))
	}
}
