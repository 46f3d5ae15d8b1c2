package convert

// Method explains one method for `halfspan methods`.
type Method struct {
	Name       string
	Title      string
	Formula    []string
	Conditions []string
	Source     string
	Checks     []string // how the implementation was checked
	Functions  []string // the functions of this package that do it
}

// What checks are made of.
const (
	againstR   = "against R (base) with 17 digits, to 1e-9 relative: convert/testdata/reference.R"
	thereBack  = "there and back: 10,000 random cases printed and converted back; the range always holds the true SD"
	byErrors   = "bias and error by simulation, fixed seed: convert/typical.tsv, shown beside each proposal"
	rawDataSet = "on 20 groups of open data sets: the printed summary gives back the raw data's SD within its range"
)

const handbookName = "Handbook for Systematic Reviews of Interventions"

// Methods is the table of all methods, in the order of the families.
func Methods() []Method {
	var all []Method
	for _, family := range [][]Method{meanMethods(), comparisonMethods(), medianMethods(), ratioMethods(), groupMethods(), doubtMethods()} {
		all = append(all, family...)
	}
	return all
}

func meanMethods() []Method {
	return []Method{
		{"printed-sd", "a printed SD, taken as it stands", []string{"SD as printed; SE = SD/√n"},
			[]string{"the paper says that it is an SD", "divisor n−1 (an SD with divisor n is smaller by √((n−1)/n))"},
			"definition", []string{"range of the printed digits by definition"}, []string{"ReadPrinted"}},
		{"sd-from-ci", "SD from the interval of a mean, by t", []string{"margin = (upper − lower)/2", "SE = margin/t, t with n − 1 degrees of freedom", "SD = SE·√n"},
			[]string{"raw mean of n independent values; n is the number analysed in that row", "two-sided interval, symmetric within rounding",
				"fails for adjusted, least-squares and marginal means, clustered or weighted data, bootstrap, back-transformed, simultaneous and one-sided intervals",
				"the range shown is that of rounding alone: it misses the SD of an interval made with 1.96 always at n = 10, in 86% at 30, 12% at 100, and of one made from an SE rounded before in about half the cases"},
			"Student 1908; " + handbookName + " 6.5.2.2",
			[]string{againstR, "Handbook's printed 5.09 and 4.06, Gardner & Altman 1986 (both recalled from memory)", "the t table of 1 to 40 degrees of freedom, three printed decimals (recalled from memory)", thereBack, rawDataSet},
			[]string{"SDFromInterval", "SEFromInterval", "TwoSided", "Margin"}},
		{"sd-from-ci-normal", "SD from the interval of a mean, by z", []string{"margin = (upper − lower)/2", "SD = √n·margin/z"},
			[]string{"as sd-from-ci, where the interval was made with z: a printed SE or SD beside it shows that", "larger than by t: 15% at n = 10, 5% at 25, 1.2% at 100"},
			handbookName + " 6.5.2.2", []string{againstR, "Handbook's printed divisors 3.29, 3.92 and 5.15 (recalled from memory)"}, []string{"SDFromInterval"}},
		{"sd-from-se", "SD from the standard error of a mean", []string{"SD = SE·√n"},
			[]string{"raw mean of n independent values", "not the SE of a model or of a difference"},
			"definition; " + handbookName + " 6.5.2.2", []string{againstR, "NIST/SEMATECH e-Handbook, two-sample example (recalled from memory)", thereBack}, []string{"SDFromSE"}},
		{"se-from-ci", "SE of a mean, difference or coefficient from its interval", []string{"SE = (upper − lower)/(2·factor), factor t or z as the steps say"},
			[]string{"interval made as estimate ± factor·SE"}, "Student 1908; " + handbookName + " 6.5.2.3", []string{againstR}, []string{"SEFromInterval"}},
		{"printed-se", "a printed SE, taken as it stands", []string{"SE as printed"}, []string{"no SD of the outcome is behind it"}, "definition", []string{"range of the printed digits by definition"}, []string{"ReadPrinted"}},
		{"rounding", "the range that the printed digits allow", []string{"margin between max((U₁−L₂)/2, U₁−M₂, M₁−L₂) and min((U₂−L₁)/2, U₂−M₁, M₂−L₁)", "L, U, M: rounding intervals of bounds and estimate on the scale"},
			[]string{"rounded to the nearest; symmetric on the scale", "only rounding: not the doubt about t, n or the method"},
			"Fourier-Motzkin elimination of the unknown estimate", []string{againstR, "brute force over random intervals", thereBack}, []string{"Margin", "Scales"}},
		{"n-from-sd-and-ci", "n that belongs to a printed SD and interval", []string{"√n/t(n−1) = SD/margin, both ends of the rounding"}, []string{"one mean; interval by t"},
			"Student 1908 solved for n", []string{againstR}, []string{"NFromSDAndInterval"}},
		{"n-from-sd-and-se", "n that belongs to a printed SD and SE", []string{"n = (SD/SE)²"}, []string{"one mean"}, "definition", []string{againstR}, []string{"NFromSDAndSE"}},
		{"se-one-sided", "SE from a one-sided limit", []string{"SE = |estimate − bound|/t at the one-sided level (95% one-sided is 90% two-sided)"}, []string{"limit made as estimate ± t·SE"},
			"definition", []string{againstR}, []string{"SEFromOneSided"}},
	}
}

func comparisonMethods() []Method {
	conditions := []string{"unadjusted difference of two independent raw means, pooled t test", "from Welch's test the same formula weighs the arms the other way round",
		"too small by about √(1−r²) after adjustment for a covariate; not for rank tests or paired designs"}
	return []Method{
		{"pooled-sd-from-ci", "pooled SD from the interval of a difference", []string{"SE = (upper − lower)/(2·t), t with n₁+n₂−2 degrees of freedom", "SD = SE/√(1/n₁ + 1/n₂)"}, conditions,
			handbookName + " 6.5.2.3", []string{againstR, "Gardner & Altman 1986: 17.7 lies in the range of the printed digits (recalled from memory)", thereBack}, []string{"PooledSDFromInterval", "PooledSDFromSE"}},
		{"pooled-sd-from-p", "pooled SD from a difference and its p value", []string{"t = t quantile at 1 − p/2 with n₁+n₂−2 degrees of freedom", "SE = |difference|/t", "SD = SE/√(1/n₁ + 1/n₂)"},
			append([]string{"two-sided p unless said; \"p < x\" gives an upper limit of the SD only, \"p > x\" a lower one"}, conditions...),
			handbookName + " 6.5.2.3", []string{againstR, "Handbook's example: its 4.69 comes from the SE rounded first; unrounded 4.68 (recalled from memory)", thereBack}, []string{"TFromP", "PooledSDFromP", "ReadP"}},
		{"pooled-sd-from-t", "pooled SD from a difference and its t or F", []string{"SE = |difference|/t; t = √F for F with 1 and n₁+n₂−2 degrees of freedom", "SD = SE/√(1/n₁ + 1/n₂)"}, conditions,
			handbookName + " 6.5.2.3", []string{againstR}, []string{"SEFromT", "TFromF", "PooledSDFromSE"}},
		{"pooled-sd-from-anova", "pooled SD from group means and the F of a one-way analysis of variance", []string{"SD = √(MSB/F), MSB = Σnᵢ(mᵢ−M)²/(k−1)"}, []string{"unadjusted F over exactly these groups"},
			"Fisher 1925", []string{againstR, "R's PlantGrowth, 0.6234 (recalled from memory)"}, []string{"PooledSDFromANOVA"}},
		{"sd-of-differences", "SD of paired differences", []string{"SD = |difference|/t·√n, n pairs"}, []string{"paired t test; it is not an arm's SD"},
			"Student 1908; " + handbookName + " 6.5.2.8", []string{againstR, "R's sleep data"}, []string{"SDOfDifferences"}},
		{"correlation", "correlation from SDs before, after and of the change", []string{"r = (s₁² + s₂² − sd²)/(2·s₁·s₂)"}, []string{"the same units at both times"},
			handbookName + " 6.5.2.8", []string{againstR, "Handbook's 0.78 and 0.82 (recalled from memory)"}, []string{"Correlation", "CorrelationRange"}},
		{"change-sd", "SD of the change, or after, with a correlation", []string{"sd = √(s₀² + s₁² − 2·r·s₀·s₁)", "s₁ = r·s₀ ± √(sd² − s₀²·(1−r²)): two values may fit"},
			[]string{"a correlation taken from elsewhere is an imputation: show r−0.2 and r+0.2 too"}, handbookName + " 6.5.2.8", []string{againstR, "there and back"},
			[]string{"ChangeSD", "FinalSD", "ArmSDFromDifferences"}},
		{"welch", "difference of two means, unequal SDs", []string{"SE = √(s₁²/n₁ + s₂²/n₂); degrees of freedom by Satterthwaite"}, []string{"independent samples"},
			"Welch 1947; Satterthwaite 1946", []string{againstR, "NIST/SEMATECH e-Handbook; R's sleep data (recalled from memory)"}, []string{"Welch"}},
		{"pooled", "difference of two means, common SD", []string{"SD = √(((n₁−1)s₁² + (n₂−1)s₂²)/(n₁+n₂−2))", "SE = SD·√(1/n₁ + 1/n₂)"}, []string{"independent samples, equal true SDs"},
			"Student 1908; Fisher 1925", []string{againstR, "Gardner & Altman 1986 (recalled from memory)"}, []string{"PooledSD", "Pooled", "WelchEquivalentSD"}},
		{"hedges", "standardised difference", []string{"d = (m₁ − m₂)/pooled SD", "g = J·d, J = Γ(ν/2)/(√(ν/2)·Γ((ν−1)/2)), ν = n₁+n₂−2"},
			[]string{"independent samples, equal true SDs", "several standard errors are in use: each is named"}, "Hedges 1981; Borenstein, Hedges, Higgins & Rothstein 2009",
			[]string{againstR, "Hedges 1981, table of c(m): two of eleven recalled fourth decimals do not come out (recalled from memory)"}, []string{"Hedges", "SmallSampleFactor"}},
	}
}

func groupMethods() []Method {
	return []Method{
		{"combine", "mean and SD of several groups together", []string{"N = Σn, M = Σn·m/N", "SD² = (Σ(n−1)s² + Σn(m−M)²)/(N−1)"}, []string{"groups share no unit", "not the pooled SD, which leaves out the differences between means"},
			handbookName + " 6.5.2.10", []string{againstR, "raw data of R's PlantGrowth", "combining and splitting returns the parts"}, []string{"Combine", "CombinePrinted"}},
		{"split", "what is left when one group is taken away", []string{"combine solved for one group"}, []string{"rounding errors grow about N/(N−n) times"},
			"as combine", []string{againstR, "combining and splitting returns the parts"}, []string{"Split"}},
		{"range-bounds", "limits of the SD for a given range", []string{"R/√(2(n−1)) ≤ SD ≤ (R/2)·√(n/(n−1)), odd n: (R/2)·√((n+1)/n)"}, []string{"none: true for any sample"},
			"Thomson 1955", []string{againstR, "all samples of six whole numbers from 0 to 6"}, []string{"SDBoundsFromRange"}},
		{"d2", "SD from the range of a small normal sample", []string{"SD = R/d₂(n), d₂ the expected range in SDs"}, []string{"normal values, n from 2 to 25"},
			"Tippett 1925", []string{againstR, "printed d₂ and d₃ tables (recalled from memory)"}, []string{"SDFromRangeSmall", "ExpectedRange", "SDOfRange"}},
		{"kappa", "agreement of two checkers beyond chance, on keeping or dropping", []string{"kappa = (po − pe)/(1 − pe)", "po: share on which both chose the same; pe = Σ (row sum)·(column sum)/N²"},
			[]string{"both judged the same results, each by themselves", "read it beside the share that is kept: where nearly all are kept it is low however well two people agree"},
			"Cohen 1960", []string{"Fleiss's printed example of 100 diagnoses, 0.68 (recalled from memory)", "a direct count over all pairs of judgements"}, []string{"Kappa"}},
	}
}
