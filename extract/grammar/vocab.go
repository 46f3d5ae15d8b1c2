package grammar

import "strings"

// The words for an uncertainty, as Term.Spread and Item.Spread give them.
const (
	SpreadCI    = "ci"
	SpreadSD    = "sd"
	SpreadSE    = "se"
	SpreadIQR   = "iqr"
	SpreadRange = "range"
	SpreadCV    = "cv"
)

// Meaning is what a term of the trade says. Empty fields say nothing.
type Meaning struct {
	Spread    string // "ci", "sd", "se", "iqr", "range", "cv"
	Statistic string // "mean", "median", "ratio", ...: the record's statistics
	Measure   string // "odds ratio", "hazard ratio", ...
	Design    string // "bayesian", "bootstrap": how an interval was made
	Model     string // "least-squares", "adjusted", "marginal"
	Count     bool   // the term announces a number of subjects: n, No.
	Percent   bool   // the term announces a percentage: %
}

type entry struct {
	words []string
	exact bool // the printed case must be that of the pattern
	Meaning
}

// vocabulary holds the terms by their first word, longest first. A pattern with
// a capital letter matches only in the printed case.
var vocabulary = buildVocabulary([]row{
	{"standard deviation|std deviation|std dev|standard dev|sd|s.d.|s.d|std|stdev|SDs", Meaning{Spread: SpreadSD}},
	{"standard error of the mean|standard error of mean|std error of the mean|std error of mean|std error mean|SE of the mean|SE of mean|SE mean|standard error mean|standard error|std error|std err|sem|s.e.m.|s.e.m|SE|se|s.e.|s.e|SEs|SEMs", Meaning{Spread: SpreadSE}},
	{"confidence interval|confidence limit|confidence bound|confidence intervall|ci|c.i.|c.i|CIs|conf interval", Meaning{Spread: SpreadCI}},
	{"credible interval|credibility interval|posterior interval|highest density interval|highest posterior density interval|CrI|CrIs|HPDI", Meaning{Spread: SpreadCI, Design: "bayesian"}},
	{"interquartile range|inter quartile range|interquartile interval|interquartile|quartile|lower and upper quartile|upper and lower quartile|first and third quartile|iqr|i.q.r.|IQRs|Q1 Q3|Q1 to Q3|Q1 and Q3|q1 q3|P25 P75", Meaning{Spread: SpreadIQR}},
	{"range|min max|minimum maximum|minimum to maximum|min to max|minimum and maximum|min and max|extremes", Meaning{Spread: SpreadRange}},
	{"coefficient of variation|cv|CVs", Meaning{Spread: SpreadCV}},

	{"geometric mean ratio|ratio of geometric means|GMR|ratio of means|ratio of the geometric means", Meaning{Statistic: "ratio", Measure: "ratio of means"}},
	{"geometric mean titre|geometric mean titer|geometric mean concentration|geometric mean|geomean|GMT|GMTs|GMC|GMCs", Meaning{Statistic: "geometric mean"}},
	{"standardised mean difference|standardized mean difference|standardised difference|standardized difference|SMD|Cohen s d|cohen d|Cohens d|hedges g|Hedges s g|effect size|ES", Meaning{Statistic: "mean difference", Measure: "standardised difference"}},
	{"weighted mean difference|mean difference|mean dif|mean diff|difference in mean|difference of mean|difference between mean|difference between the mean|difference between group|between group difference|group difference|treatment difference|estimated treatment difference|treatment effect|intervention effect|difference|M diff|mean diff|Mdiff|MD|WMD|ETD|net difference", Meaning{Statistic: "mean difference"}},
	{"adjusted mean difference|adjusted mean dif|adjusted mean diff|adj mean dif|adj mean diff|adj mean difference|adjusted difference|adj difference|adjusted MD|aMD|AMD", Meaning{Statistic: "mean difference", Model: "adjusted"}},
	{"least squares mean difference|least square mean difference|LS mean difference|LSM difference|LSMD", Meaning{Statistic: "mean difference", Model: "least-squares"}},
	{"least squares mean change|LS mean change", Meaning{Statistic: "mean change", Model: "least-squares"}},
	{"least squares mean|least square mean|LS mean|LSmean|LSM|lsmeans", Meaning{Statistic: "mean", Model: "least-squares"}},
	{"estimated marginal mean|marginal mean|EMM", Meaning{Statistic: "mean", Model: "marginal"}},
	{"adjusted mean change", Meaning{Statistic: "mean change", Model: "adjusted"}},
	{"adjusted mean|adj mean", Meaning{Statistic: "mean", Model: "adjusted"}},
	{"mean change|change from baseline|mean reduction|mean decrease|mean increase|mean percent change|mean percentage change|average change|change score|change", Meaning{Statistic: "mean change"}},
	{"mean|average|M|arithmetic mean|avg", Meaning{Statistic: "mean"}},
	{"median|Mdn|MED", Meaning{Statistic: "median"}},

	{"odds ratio|OR|ORs|cOR|COR", Meaning{Statistic: "ratio", Measure: "odds ratio"}},
	{"adjusted odds ratio|aOR|AOR|aORs|AORs|ORadj|OR adj", Meaning{Statistic: "ratio", Measure: "odds ratio", Model: "adjusted"}},
	{"hazard ratio|hazards ratio|HR|HRs|hazard rate ratio", Meaning{Statistic: "ratio", Measure: "hazard ratio"}},
	{"adjusted hazard ratio|aHR|AHR|sHR", Meaning{Statistic: "ratio", Measure: "hazard ratio", Model: "adjusted"}},
	{"risk ratio|relative risk|RR|RRs|prevalence ratio|PR", Meaning{Statistic: "ratio", Measure: "risk ratio"}},
	{"adjusted risk ratio|adjusted relative risk|aRR|ARR", Meaning{Statistic: "ratio", Measure: "risk ratio", Model: "adjusted"}},
	{"rate ratio|incidence rate ratio|incidence ratio|IRR|IRRs|relative rate", Meaning{Statistic: "ratio", Measure: "rate ratio"}},
	{"adjusted rate ratio|adjusted incidence rate ratio|aIRR", Meaning{Statistic: "ratio", Measure: "rate ratio", Model: "adjusted"}},
	{"ratio|fold change|fold difference", Meaning{Statistic: "ratio"}},
	{"absolute risk reduction|absolute risk difference|absolute difference in risk|risk difference|absolute difference in proportion|difference in proportion|difference in percentage|RD|rate difference", Meaning{Statistic: "risk difference"}},
	{"number needed to treat|NNT|NNTs|NNTB|NNH", Meaning{Statistic: "other", Measure: "number needed to treat"}},
	{"regression coefficient|coefficient|beta|slope|β|B|b|unstandardised coefficient|unstandardized coefficient|coef", Meaning{Statistic: "coefficient"}},
	{"correlation coefficient|correlation|pearson s r|spearman s rho", Meaning{Statistic: "coefficient", Measure: "correlation"}},
	{"intraclass correlation coefficient|intraclass correlation|ICC|kappa|area under the ROC curve", Meaning{Statistic: "coefficient", Measure: "agreement"}},
	{"vaccine efficacy|efficacy|VE|area under the curve|AUC", Meaning{Statistic: "other"}},
	{"proportion|prevalence|percentage|percent|sensitivity|specificity|positive predictive value|negative predictive value|predictive value|response rate|survival rate|success rate|cure rate|event rate|success rate|cumulative incidence", Meaning{Statistic: "proportion"}},
	{"incidence rate|rate|event rate per|incidence", Meaning{Statistic: "rate"}},

	{"n|number|Nr|No", Meaning{Count: true}},
})

type row struct {
	patterns string
	meaning  Meaning
}

func buildVocabulary(rows []row) map[string][]entry {
	out := map[string][]entry{}
	for _, r := range rows {
		for _, p := range strings.Split(r.patterns, "|") {
			e := entry{exact: p != strings.ToLower(p), Meaning: r.meaning}
			e.words = strings.Fields(p)
			if len(e.words) > 1 && strings.ToUpper(e.words[len(e.words)-1]) != e.words[len(e.words)-1] {
				e.exact = false
			}
			key := singular(strings.ToLower(e.words[0]))
			at := 0
			for at < len(out[key]) && len(out[key][at].words) >= len(e.words) {
				at++
			}
			out[key] = append(out[key], entry{})
			copy(out[key][at+1:], out[key][at:])
			out[key][at] = e
		}
	}
	return out
}

// singular takes a plural s off longer words, so that one pattern serves both.
func singular(w string) string {
	if len(w) > 4 && strings.HasSuffix(w, "s") && !strings.HasSuffix(w, "ss") {
		return w[:len(w)-1]
	}
	return w
}

// lowerOnly are words that mean something else in lower case or in running
// text, where only their printed form in the vocabulary counts.
var lowerOnly = map[string]bool{"or": true, "se": true, "b": true, "m": true, "es": true, "pr": true, "no": true, "med": true}
