package convert

import (
	"math"
	"slices"
	"testing"
)

func groupCases() []checkCase {
	triple := func(v *values, g Group, err error) {
		v.t.Helper()
		v.add(float64(g.N), err)
		v.add(g.Mean, nil)
		v.add(g.SD, nil)
	}
	comparison := func(v *values, c Comparison, err error) {
		v.t.Helper()
		v.add(c.Difference, err)
		for _, x := range []float64{c.SE, c.DF, c.T, c.P, c.Interval.Low, c.Interval.High} {
			v.add(x, nil)
		}
	}
	hedges := func(v *values, a, b Group) {
		v.t.Helper()
		h, err := Hedges(a, b)
		v.add(h.D, err)
		for _, x := range []float64{h.G, h.GApprox, h.SETextbook, h.SEHandbook, h.SEExact} {
			v.add(x, nil)
		}
	}
	plants := [][]float64{
		{4.17, 5.58, 5.18, 6.11, 4.50, 4.61, 5.17, 4.53, 5.33, 5.14},
		{4.81, 4.17, 4.41, 3.59, 5.87, 3.83, 6.03, 4.89, 4.32, 4.69},
		{6.31, 5.12, 5.54, 5.50, 5.37, 5.29, 4.92, 6.15, 5.80, 5.26},
	}
	return []checkCase{
		{name: "f1-plantgrowth-parts", got: func(v *values) {
			for range plants {
				v.add(10, nil)
			}
			for _, p := range plants {
				v.add(sample(p).Mean, nil)
			}
			for _, p := range plants {
				v.add(sample(p).SD, nil)
			}
		}},
		{name: "f1-plantgrowth", figures: "30 5.073 0.701191843 5.073 0.701191843", got: func(v *values) {
			var groups []Group
			var all []float64
			for _, p := range plants {
				m := sample(p)
				groups = append(groups, Group{10, m.Mean, m.SD})
				all = append(all, p...)
			}
			g, err := Combine(groups...)
			triple(v, g, err)
			v.pair(sample(all), nil)
		}},
		{name: "f1-two", figures: "43 45.555814 9.32916069", got: func(v *values) {
			g, err := Combine(Group{18, 42.3, 8.1}, Group{25, 47.9, 9.6})
			triple(v, g, err)
		}},
		{name: "f2-rest", figures: "25 47.9000001 9.59999998 20 4.8465 0.704026249", got: func(v *values) {
			g, err := Split(Group{43, 45.5558140, 9.32916069}, Group{18, 42.3, 8.1})
			triple(v, g, err)
			g, err = Split(Group{30, 5.073, .70119}, Group{10, 5.526, .44257})
			triple(v, g, err)
		}},
		{name: "f3-change", figures: "4.52588113 4.17109098 6.59105454 5.58300994 4.347183", got: func(v *values) {
			v.add(ChangeSD(6.4, 7.1, .78))
			v.add(ChangeSD(7.0, 6.9, .82))
			for _, r := range []float64{.3, .5, .7} {
				v.add(ChangeSD(5.2, 5.9, r))
			}
		}},
		{name: "f3-final", got: func(v *values) {
			for _, c := range [][3]float64{{6.4, 4.5, .78}, {5, 6, .3}, {6.4, 4.1, .78}} {
				s, err := FinalSD(c[0], c[1], c[2])
				if err != nil {
					v.t.Fatal(err)
				}
				v.list = append(v.list, s...)
			}
		}},
		{name: "f5-d2", figures: "1.128379 1.692569 2.058751 2.325929 2.534413 2.704357 2.847201 2.970026 3.077505 3.172873 3.258455 3.33598 3.406763 3.471827 3.531983 3.587884 3.640064 3.688963 3.73495 3.778336 3.819385 3.858323 3.895348 3.930629",
			published: "1.128 1.693 2.059 2.326 2.534 2.704 2.847 2.970 3.078 3.173 3.258 3.336 3.407 3.472 3.532 3.588 3.640 3.689 3.735 3.778 3.819 3.858 3.895 3.931", source: "d2 table, n = 2 to 25, recalled from memory",
			got: func(v *values) {
				for n := 2; n <= 25; n++ {
					v.add(ExpectedRange(n))
				}
			}},
		{name: "f5-d3", figures: "0.852502466 0.888368004 0.879808203 0.864081941 0.797050674 0.75621143 0.728686346 0.708440766",
			published: "0.853 0.888 0.880 0.864 0.797 0.756 0.729 0.708", source: "d3 table, recalled from memory", got: func(v *values) {
				for _, n := range []int{2, 3, 4, 5, 10, 15, 20, 25} {
					v.add(SDOfRange(n))
				}
			}},
		{name: "f4-f5-range", figures: "4.98735493 1.59076226 0.287943001 3.79510964 7.59021927 1.30814755 2.02657346", got: func(v *values) {
			a, relative, err := SDFromRangeSmall(14.2, 8)
			v.add(a, err)
			b, _, err := SDFromRangeSmall(3.7, 5)
			v.add(b, err)
			v.add(relative, nil)
			v.both(SDBoundsFromRange(14.2, 8))
			v.both(SDBoundsFromRange(3.7, 5))
		}},
		{name: "f6-ehandbook", published: "- - 136.8750 -12.94627", source: eHandbook, got: func(v *values) {
			c, err := Welch(Group{249, 20.14458, 6.414700}, Group{79, 30.48101, 6.107710}, 95)
			comparison(v, c, err)
		}},
		{name: "f6-ehandbook-pooled", figures: "6.34260082 -12.620585", published: "6.34260 -12.62059", source: eHandbook, got: func(v *values) {
			a, b := Group{249, 20.14458, 6.414700}, Group{79, 30.48101, 6.107710}
			v.add(PooledSD(a, b))
			c, err := Pooled(a, b, 95)
			v.add(c.T, err)
		}},
		{name: "f6-sleep", published: "- - 17.776 -1.8608 0.07939 -3.3654832 0.2054832", source: "R's example output, recalled from memory", got: func(v *values) {
			a, b := sample(sleepOne), sample(sleepTwo)
			c, err := Welch(Group{10, a.Mean, a.SD}, Group{10, b.Mean, b.SD}, 95)
			comparison(v, c, err)
		}},
		{name: "f6-invented", figures: "1.8 0.856265424 54.567729 2.10215191 0.0401693748 0.0837001457 3.51629985", got: func(v *values) {
			c, err := Welch(Group{30, 24.6, 3.1}, Group{28, 22.8, 3.4}, 95)
			comparison(v, c, err)
		}},
		{name: "f7-j", figures: "0.564189584 0.723601255 0.797884561 0.840748682 0.868626688 0.888202908 0.902703334 0.913874892 0.922745608 0.961944534 0.984911942 0.923076923",
			published: ".5642 .7236 .7979 .8408 .8686 .8882 .9027 .9139 .9228 .9619 .9849", source: "Hedges 1981, table of c(m), recalled from memory",
			misses: []string{".8408: fourth decimal recalled with doubt; three agree", ".9228: as above"},
			got: func(v *values) {
				for _, df := range []float64{2, 3, 4, 5, 6, 7, 8, 9, 10, 20, 50} {
					v.add(SmallSampleFactor(df))
				}
				v.add(1-3/39., nil)
			}},
		{name: "f7-borenstein", figures: "0.597022314 0.592439623 0.59244158 0.202837884", published: "0.5970 0.5924 0.5924 0.2028",
			source: "Borenstein, Hedges, Higgins & Rothstein 2009, ch. 4, recalled from memory", got: func(v *values) {
				hedges(v, Group{50, 103, 5.5}, Group{50, 100, 4.5})
			}},
		{name: "f7-invented", figures: "0.941834846 0.893808415 0.893944939 0.485944616 0.51642678 0.525979005", got: func(v *values) {
			hedges(v, Group{9, 14.1, 3.9}, Group{8, 10.2, 4.4})
		}},
	}
}

func readingCases() []checkCase {
	arm := func(v *values, mean, spread string, n int) PrintedArm {
		v.t.Helper()
		return PrintedArm{printed(v.t, mean), printed(v.t, spread), n}
	}
	ps := func(m1, x1 string, n1 int, m2, x2 string, n2 int) func(*values) {
		return func(v *values) {
			r, err := PUnderReadings(arm(v, m1, x1, n1), arm(v, m2, x2, n2), 95)
			for _, p := range r {
				v.both(p, err)
			}
		}
	}
	three := func(v *values, x [readings]float64, err error) {
		v.t.Helper()
		for _, y := range x {
			v.add(y, err)
		}
	}
	return []checkCase{
		{name: "h1-sd", figures: "0.0276708 0.0556633 0.675906 0.717331 0.392943 0.459105", got: ps("24.6", "3.1", 30, "22.8", "3.4", 28)},
		{name: "h1-se", figures: "1.29807e-20 4.22462e-19 0.0295205 0.0414519 2.5429e-05 7.33239e-05", got: ps("118.3", "2.4", 36, "125.9", "2.6", 35)},
		{name: "h1-ci", figures: "7.30318e-11 6.94499e-10 0.229435 0.262749 0.0164787 0.0251698", got: ps("52.4", "3.3", 40, "47.1", "3.1", 38)},
		{name: "h1-undecided", figures: "0.0281402 0.0527856 0.319712 0.390439 0.0226374 0.0439256", got: ps("14.2", "1.5", 6, "12.0", "1.7", 6)},
		{name: "h1-tiny", figures: "6.48339e-17 4.30099e-14 1.05963e-06 5.01345e-05 7.6688e-13 2.53565e-10", got: ps("9.8", ".4", 12, "6.1", ".5", 12)},
		{name: "h2-cv", figures: "-9.2897778 -0.981098087 -5.35956889 -1.40581348 -1.17408505 -2.48630739", got: func(v *values) {
			x, err := CVLogLikelihoods(50.2, 2.1, 30, []float64{.21, .25, .19, .28, .23}, 95)
			three(v, x, err)
			x, err = CVLogLikelihoods(50.2, 9.0, 4, []float64{.15, .35, .22, .48, .27}, 95)
			three(v, x, err)
		}},
		{name: "h3-scale", figures: "4.01248053 0.85 5.37587202 2.65778225", got: func(v *values) {
			v.add(GreatestSD(8.05, 0, 10, 40))
			x, err := SDsOfReadings(.85, 40, 95)
			three(v, x, err)
		}},
		{name: "h3-extremes", figures: "5.68068632 21.7420616 1.9 10.4067286 5.08829345", got: func(v *values) {
			v.add(LeastSD(40.2, 21, 64, 30))
			v.add(GreatestSD(40.2, 21, 64, 30))
			x, err := SDsOfReadings(1.9, 30, 95)
			three(v, x, err)
		}},
		{name: "h4-mean", figures: "0 1 1 0", published: "0", source: "Brown & Heathers 2017: 5.19 with n = 28 is impossible, recalled from memory", got: func(v *values) {
			for _, c := range []struct {
				mean string
				n    int
			}{{"5.19", 28}, {"5.18", 28}, {"3.47", 15}, {"3.45", 15}} {
				v.truth(MeanAttainable(printed(v.t, c.mean), c.n, 1))
			}
		}},
		{name: "h4-on-scale", figures: "1 0 0 0 1 0 0 0 1 1 0 1 1 1 0", got: func(v *values) {
			for _, c := range []struct {
				mean, spread string
				n            int
			}{{"2.93", "1.10", 15}, {"2.93", ".28", 15}, {"2.93", ".61", 15}, {"2.82", ".64", 17}, {"3.00", ".76", 8}} {
				fits, err := AttainableOnScale(printed(v.t, c.mean), printed(v.t, c.spread), c.n, 1, 5, 95)
				for _, f := range fits {
					v.truth(f, err)
				}
			}
		}},
		{name: "h5-sizes", figures: "-7.62894461 -0.0154705135 -0.130991082 -0.179490903 -7.39187613 -8.78626938 -0.052650047 -0.131722318 -0.14704633", got: func(v *values) {
			for _, c := range []struct {
				x []float64
				n []int
			}{{[]float64{2.6, 1.3, .8}, []int{12, 50, 140}}, {[]float64{8.1, 8.9, 7.7}, []int{12, 50, 140}}, {[]float64{1.9, 2.1, 2.0}, []int{20, 22, 19}}} {
				x, err := UnequalSizeLogLikelihoods(c.x, c.n, 95)
				three(v, x, err)
			}
		}},
		{name: "i2-scales", figures: "0 1 0 0 0 1 1 0 0 1 1 0 0 0 0", got: func(v *values) {
			for _, c := range [][3]string{{"1.62", "1.12", "2.35"}, {".083", ".045", ".148"}, {"12.8", "8.7", "16.9"}, {"1.51", "1.42", "1.61"}, {".30", ".21", ".47"}} {
				fit, err := Scales(printed(v.t, c[0]), printed(v.t, c[1]), printed(v.t, c[2]))
				for _, s := range []Scale{Raw, Log, Logit} {
					v.truth(slices.Contains(fit, s), err)
				}
			}
		}},
		{name: "i4-se-as-sd", figures: "33.7308656 -27.592645 0.587808367", got: func(v *values) {
			v.add(SEAsSD(1.4, 40, 8.6, 38))
			v.add(SEAsSD(7.1, 40, 8.6, 38))
			v.add(SEAsSD(4.8, 5, 8.6, 6))
		}},
		{name: "i5-level", figures: "94.3134277 95.7661121 89.4050233 91.6981962", got: func(v *values) {
			p, err := ReadP("0.013")
			if err != nil {
				v.t.Fatal(err)
			}
			for _, b := range [][2]string{{"0.9", "7.5"}, {"1.4", "7.0"}} {
				v.both(ImpliedLevel(printed(v.t, "4.2"), marginOf(v, b[0], b[1], "", Raw), p, 78))
			}
		}},
		{name: "i6-one-sided", figures: "0.941660026 0.618775935", got: func(v *values) {
			v.add(SEFromOneSided(11.2, 12.8, 95, 29))
			v.add(SEFromOneSided(7.4, 6.1, 97.5, 18))
		}},
		{name: "i7-n", figures: "37.5650364 39.0061124 32.9956733 36.8834027", got: func(v *values) {
			v.both(NFromSDAndSE(printed(v.t, "8.6"), printed(v.t, "1.39")))
			v.both(NFromSDAndSE(printed(v.t, "12.4"), printed(v.t, "2.1")))
		}},
		{name: "i8-df", figures: "17 19 54 88 0 0", got: func(v *values) {
			for _, p := range []string{"0.033", "0.024", "0.018"} {
				pv, err := ReadP(p)
				if err != nil {
					v.t.Fatal(err)
				}
				low, high, err := DFFromTAndP(printed(v.t, "2.31"), pv, 2000)
				if err != nil && p != "0.018" {
					v.t.Fatal(err)
				}
				v.list = append(v.list, float64(low), float64(high))
			}
		}},
	}
}

// rawDataCases checks that each open data set's printed interval gives back its SD
// within the range of the printed digits; reference.tsv has n, mean, SD, SE, the
// t interval, the five quantiles, Luo's mean and Shi's SD.
func rawDataCases(t *testing.T, reference map[string][]float64) []checkCase {
	t.Helper()
	var cases []checkCase
	for _, name := range rawDataNames() {
		ref := reference[name]
		if len(ref) != 13 {
			t.Fatalf("%s: %d values in reference.tsv, want 13", name, len(ref))
		}
		n, mean, sd := int(ref[0]), ref[1], ref[2]
		cases = append(cases, checkCase{name: name, got: func(v *values) {
			v.add(ref[0], nil)
			v.add(mean, nil)
			sdByT(v, ref[4], ref[5], 95, n)
			se, err := SEFromInterval(ref[4], ref[5], 95, float64(n-1))
			v.add(se, err)
			f, err := TwoSided(95, float64(n-1))
			v.add(mean-f*sd/math.Sqrt(ref[0]), err)
			v.add(mean+f*sd/math.Sqrt(ref[0]), nil)
			for _, q := range ref[6:11] {
				v.add(q, nil)
			}
			v.add(LuoMeanFromFive(ref[6], ref[7], ref[8], ref[9], ref[10], n))
			v.add(ShiSDFromFive(ref[6], ref[7], ref[9], ref[10], n))
		}})
	}
	return append(cases, checkCase{name: "k-morley-all", figures: "299.8524 0.0790105478", published: "299.852400000000 0.0790105478190518",
		source: "NIST StRD certified values, data set Michelso, recalled from memory", got: func(v *values) {
			v.list = append(v.list, reference["k-morley-all"]...) // R's own; no raw data are kept here
		}})
}

func rawDataNames() []string {
	return []string{"k-toothgrowth_oj", "k-toothgrowth_vc", "k-plantgrowth_ctrl", "k-plantgrowth_trt1", "k-plantgrowth_trt2", "k-chickwts_casein",
		"k-chickwts_horsebean", "k-iris_setosa", "k-iris_virginica", "k-insectsprays_a", "k-insectsprays_c", "k-sleep_1", "k-sleep_2", "k-warpbreaks_al",
		"k-co2_quebec_chilled", "k-morley_1", "k-trees_volume", "k-women_height", "k-mtcars_manual", "k-airquality_may"}
}
