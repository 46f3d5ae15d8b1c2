package result

import (
	"strings"

	"halfspan/extract/paper"
)

// Statistic says what kind of estimate a result is.
type Statistic string

// The statistics of the record.
const (
	Mean           Statistic = "mean"
	MeanDifference Statistic = "mean difference"
	MeanChange     Statistic = "mean change"
	Median         Statistic = "median"
	GeometricMean  Statistic = "geometric mean"
	Ratio          Statistic = "ratio"
	Proportion     Statistic = "proportion"
	RiskDifference Statistic = "risk difference"
	Rate           Statistic = "rate"
	Coefficient    Statistic = "coefficient"
	Other          Statistic = "other"
)

// GivenAs says how the uncertainty of a result is printed.
type GivenAs string

// The ways of printing uncertainty.
const (
	CI       GivenAs = "ci"
	SD       GivenAs = "sd"
	SE       GivenAs = "se"
	IQR      GivenAs = "iqr"
	Range    GivenAs = "range"
	Unstated GivenAs = "unstated" // a ± or parenthesis that the paper never explains
)

// Where an n was read (Result.NFrom).
const (
	NBeside    = "beside"
	NHeading   = "heading"
	NCaption   = "caption"
	NElsewhere = "elsewhere"
	NPerson    = "person" // not read: a person gave it
)

// What an n counts (Result.NKind).
const (
	NRandomised = "randomised"
	NAnalysed   = "analysed"
	NCompleters = "completers"
	NUnclear    = "unclear"
)

// Result is one printed estimate with one interval or one spread.
type Result struct {
	Anchor  Anchor
	Page    int    // 1-based; 0 where the format has no pages
	Section string // nearest heading
	Zone    paper.Zone
	Table   string // "Table 2"; empty in running text
	Row     string // key shared by the results of one table row: they are checked together; empty in running text
	Snippet string // the printed text around it, at most 300 characters

	Statistic  Statistic
	Measure    string // "odds ratio", "hazard ratio", "standardised difference", ...; empty where not said
	GivenAs    GivenAs
	Estimate   string
	Lower      string
	Upper      string
	GivenValue string  // the SD, SE, ± or one-number IQR or range
	Level      float64 // of an interval, percent; 0 unknown

	N, N2        int // 0: not stated
	NFrom, NKind string

	Arm, Arm2, Time, Subgroup, Outcome, Unit, Heading string

	Adjusted string // "yes", "no", "unclear"; empty where the question does not arise

	P, T, F, DF string // as printed with the result

	Sources  []Source
	Evidence Evidence
	Flags    []Flag // what reading raised; the working adds its own
	Mates    []int  // indices, in the slice Find returns, of results that share estimate, arm, time and outcome
}

// Source says where one field of a Result was read.
type Source struct {
	Field string      `json:"field"` // name of the record's field: "estimate", "lower", "n", "arm", ...
	Place paper.Place `json:"place"`
	Text  string      `json:"text"`           // as printed there
	From  string      `json:"from,omitempty"` // in words: "heading of column 3", "footnote a", "the methods"
}

// FromPerson begins Source.From where a person said what stands there, in place of
// what was read.
const FromPerson = "a person"

// ByPerson reports that a person said what stands there.
func (s *Source) ByPerson() bool { return strings.HasPrefix(s.From, FromPerson) }

// Flag is one thing to look at, raised while reading or working.
type Flag struct {
	Name   string `json:"name"`             // a few lower-case words with hyphens, explained by `halfspan flags`
	Detail string `json:"detail,omitempty"` // the particulars in this result, in plain words
}

// Evidence is what the paper says around a result that may settle how it is to
// be read or converted. It is never applied in silence.
type Evidence struct {
	ScaleLow, ScaleHigh string   // printed limits of the outcome's scale: "0", "10"
	Tests               []string // stated tests: "t test", "rank test", "anova", "ancova", "mixed model", "paired t test", "log-rank", "cox"
	Design              []string // "clustered", "crossover", "bootstrap", "bayesian", "simultaneous", "one-sided", "back-transformed", "log-scale"
	Model               []string // words that say the estimate is modelled: "least-squares", "marginal", "adjusted"
	Integer             bool     // the outcome is counted in whole numbers
	Baseline            bool     // a baseline value
	Quoted              bool     // introduction or discussion, or a cited study: somebody else's result or a repeat
	RowP                string   // p value of the table row's comparison, as printed
	Repairs             []string // characters repaired in the text it was read from, with why
}

// HasFlag reports whether the flag of that name was raised.
func (r *Result) HasFlag(name string) bool {
	for _, f := range r.Flags {
		if f.Name == name {
			return true
		}
	}
	return false
}

// Raise adds a flag once.
func (r *Result) Raise(name, detail string) {
	if !r.HasFlag(name) {
		r.Flags = append(r.Flags, Flag{name, detail})
	}
}
