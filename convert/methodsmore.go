package convert

import "strings"

const nearBest = "recalled constants against the best for normal samples by simulation, n 25 to 400: weights within 0.02"

const nearNormal = "values near normal: look at the skewness test first"

func medianMethods() []Method {
	wan := "Wan, Wang, Liu & Tong 2014 (recalled from memory)"
	luo := "Luo, Wan, Liu & Tong 2018 (recalled from memory)"
	median := func(name, title, formula, source string, functions string, conditions ...string) Method {
		return Method{name, title, []string{formula}, append(conditions, "proposed, never taken by itself"), source, []string{againstR, byErrors}, []string{functions}}
	}
	all := []Method{
		median("luo-quartiles", "mean from median and quartiles", "w·(q₁+q₃)/2 + (1−w)·median, w = 0.7 + 0.39/n", luo, "LuoMeanFromQuartiles", nearNormal),
		median("wan-quartiles", "mean and SD from median and quartiles", "mean (q₁+median+q₃)/3; SD (q₃−q₁)/η, η = 2·Φ⁻¹((0.75n−0.125)/(n+0.25))", wan, "WanFromQuartiles", nearNormal,
			"quartiles by the n+1 rule make the SD 31% too large at n = 10, 5% at 50"),
		median("luo-range", "mean from median, minimum and maximum", "w·(min+max)/2 + (1−w)·median, w = 4/(4+n^0.75)", luo, "LuoMeanFromRange", nearNormal),
		median("wan-range", "mean and SD from median, minimum and maximum", "mean (min+2·median+max)/4; SD (max−min)/ξ, ξ = 2·Φ⁻¹((n−0.375)/(n+0.25))", wan, "WanFromRange", nearNormal),
		median("luo-five", "mean from median, quartiles, minimum and maximum", "w·(min+max)/2 + v·(q₁+q₃)/2 + (1−w−v)·median, w = 2.2/(2.2+n^0.75), v = 0.7 − 0.72/n^0.55", luo, "LuoMeanFromFive", nearNormal),
		median("shi-five", "SD from quartiles, minimum and maximum", "(max−min)/θ₁ + (q₃−q₁)/θ₂", "Shi, Luo, Weng, Zeng, Lin, Chu & Tong 2020 (recalled from memory)", "ShiSDFromFive", nearNormal),
		median("wan-five", "mean and SD from five numbers", "mean (min+2q₁+2·median+2q₃+max)/8; SD half of wan-range's and wan-quartiles'", wan, "WanFromFive", nearNormal),
		median("bland-five", "mean and SD from five numbers, no law", "values spread evenly between the quantiles", "Bland 2015 (recalled from memory)", "BlandFromFive", "the SD grows with n: not above n = 50"),
		median("hozo-range", "mean and SD from median, minimum and maximum, oldest method", "SD (max−min)/4 for n 16 to 70, /6 above", "Hozo, Djulbegovic & Hozo 2005 (recalled from memory)", "HozoFromRange", "superseded: jumps at n = 15 and 70"),
		median("lognormal-quartiles", "mean and SD from quartiles of lognormal values", "luo-quartiles and wan-quartiles on the logarithms, then lognormal", "Higgins, White & Anzures-Cabrera 2008 with the above (recalled from memory)", "LogNormalFromQuartiles", "values near lognormal: far off where they are not"),
		median("lognormal-five", "mean and SD from five numbers of lognormal values", "luo-five and shi-five on the logarithms, then lognormal", "as lognormal-quartiles", "LogNormalFromFive", "values near lognormal: far off where they are not"),
		median("box-cox-quartiles", "mean and SD from quartiles through a power", "the power that makes the quartiles symmetric; luo and wan there; back through the normal law", "Box & Cox 1964; McGrath et al. 2020 (recalled from memory)", "BoxCoxFromQuartiles", "some power makes the values near normal", "negative powers: the law is cut at 4 SDs"),
		median("quantile-estimation-quartiles", "mean and SD of the law that fits the quartiles best", "least squares of normal, lognormal, gamma and Weibull quantiles, of a scored outcome also beta between the limits of its scale", "McGrath, Zhao, Steele, Thombs & Benedetti 2020 (recalled from memory)", "QuantileEstimation", "one of the laws holds; with three numbers the choice is weak"),
		median("quantile-estimation-five", "mean and SD of the law that fits five numbers best", "as quantile-estimation-quartiles, extremes at 1/n and 1−1/n", "as quantile-estimation-quartiles", "QuantileEstimation", "one of the laws holds"),
	}
	for i := range all {
		if all[i].Name == "box-cox-quartiles" {
			all[i].Checks = []string{"its power against R", "powers 0 and 1 against the other methods"}
		}
		if all[i].Name == "lognormal-five" {
			all[i].Checks = []string{byErrors}
		}
		if strings.HasPrefix(all[i].Name, "luo-") || all[i].Name == "shi-five" {
			all[i].Checks = append(all[i].Checks, nearBest)
		}
		if all[i].Functions[0] == "QuantileEstimation" {
			all[i].Checks = []string{"the lognormal and the beta fit against R", byErrors}
		}
	}
	return append(all, Method{"skewness", "test of symmetry from printed quantiles",
		[]string{"{min, median, max}: |min+max−2·median|/(max−min) > 1.01/ln(n+9) + 2.43/(n+1)", "{q₁, median, q₃}: |q₁+q₃−2·median|/(q₃−q₁) > 2.66/√n − 5.92/n²", "five: the larger, weighted, > 2.97/√n − 39.1/n³"},
		[]string{"not rejected is no proof: quartiles alone do not see moderate skew below n of about 200"},
		"Shi, Luo, Wan, Liu & Tong 2023; constants recalled from memory", []string{againstR, "size near 5% in simulation for n of 25 and more, which cannot confirm their last digits"},
		[]string{"SkewFromRange", "SkewFromQuartiles", "SkewFromFive"}})
}

func ratioMethods() []Method {
	return []Method{
		{"log-se-from-ci", "SE of the logarithm of a ratio, rate or geometric mean from its interval", []string{"(ln upper − ln lower)/(2·z); t for a geometric mean"},
			[]string{"bounds above 0, symmetric on the log scale within rounding", "an approximation for exact, profile, bootstrap and Bayesian intervals", "never the SD of an outcome"},
			handbookName + " 6.3; Altman & Bland 2011", []string{againstR, "Altman & Bland 2011, p = 0.005 (recalled from memory)", thereBack}, []string{"LogSEFromInterval", "RatioFromPercentChange"}},
		{"logit-se-from-ci", "SE of the log odds of a proportion from its interval", []string{"(logit upper − logit lower)/(2·z), logit p = ln(p/(1 − p))"},
			[]string{"bounds above 0 and below 100%, symmetric on the logit scale within rounding", "an approximation for Wilson, exact and other intervals", "never the SD of an outcome"},
			"definition", []string{againstR}, []string{"LogitSEFromInterval"}},
		{"log-se-from-p", "SE of the logarithm of a ratio from its p value", []string{"|ln ratio|/z"}, []string{"for a hazard ratio: near 1, log-rank or Cox p"},
			"Parmar, Torri & Stewart 1998; Tierney et al. 2007", []string{againstR}, []string{"LogSEFromP"}},
		{"log-se-from-counts", "SE of the logarithm of a ratio from counts", []string{"odds ratio √(1/a+1/b+1/c+1/d)", "risk ratio √(1/a−1/n₁+1/c−1/n₂)", "rate ratio √(1/a+1/c)", "hazard ratio 1/√(O·r₁r₂/(r₁+r₂)²)"},
			[]string{"no count of 0"}, "Woolf 1955; Katz et al. 1978; Parmar et al. 1998", []string{againstR, "Bland & Altman 2000, 0.103 (recalled from memory)"},
			[]string{"LogOddsRatioSE", "LogRiskRatioSE", "LogRateRatioSE", "LogHazardRatioSE", "RateSE"}},
		{"proportion", "which interval of a proportion was printed, and the counts behind it", []string{"Wald, Wilson, exact and five others, each compared with both printed bounds", "SD of a 0/1 variable √(p(1−p)·n/(n−1))"},
			[]string{"several may fit: they then agree to the printed digits"}, "Wilson 1927; Clopper & Pearson 1934; Newcombe 1998", []string{againstR, "Newcombe 1998 (recalled from memory)"},
			[]string{"ProportionMethods", "MatchProportion", "CountsFromProportion", "SDOfBinary"}},
		{"rate", "the count behind the interval of a rate", []string{"exact: solves χ² limits for the count; log-normal: (2z/ln(upper/lower))²"}, []string{"Poisson count; only the matching way gives it back"},
			"Garwood 1936", []string{againstR, "printed Poisson limits (recalled from memory)"}, []string{"PoissonInterval", "CountFromRateInterval"}},
		{"lognormal", "mean and SD behind a geometric mean", []string{"s = √n·ln(upper/lower)/(2t), or ln GSD, or √ln(1+CV²)", "mean = GM·exp(s²/2), SD = mean·√(exp(s²)−1)"},
			[]string{"lognormal law; no zeros, no detection limit", "two meanings of a geometric CV: √(exp(s²)−1), or exp(s)−1"},
			"Higgins, White & Anzures-Cabrera 2008", []string{againstR, "there and back", "a million simulated values"},
			[]string{"LogSDFromInterval", "LogSDFromGSD", "LogSDFromGeometricCV", "LogNormalToRaw", "RawToLogNormal"}},
	}
}

func doubtMethods() []Method {
	return []Method{
		{"readings", "what an unexplained ± may be", []string{"SD = x; x·√n; x·√n/t"},
			[]string{"impossible readings are struck out, the rest stand side by side; none is applied", "half-width and SD nearly agree at n = 6 and 7",
				"the paper's own p value names a reading only where a t test is stated and exactly one fits"},
			"definitions; Bhatia & Davis 2000; Thomson 1955; Brown & Heathers 2017; Anaya 2016 (recalled from memory)", []string{againstR, "all samples of six whole numbers from 0 to 6"},
			[]string{"SDsOfReadings", "PUnderReadings", "CVLogLikelihoods", "UnequalSizeLogLikelihoods", "GreatestSD", "LeastSD", "MeanAttainable", "SDAttainable", "AttainableOnScale"}},
		{"plausibility", "checks of what was read", []string{"level implied by interval and p; degrees of freedom implied by t and p; ratio of two spreads against √n; mean against 2 SD"},
			[]string{"each with its rounding"}, "Altman & Bland 1996 and definitions", []string{againstR}, []string{"ImpliedLevel", "DFFromTAndP", "SEAsSD", "SkewOfPositive"}},
	}
}
