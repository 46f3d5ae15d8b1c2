package working

// The ratings of a reading, from sure to unsure.
const (
	Clear    = "clear"
	Look     = "look"
	Doubtful = "doubtful"
)

// Effect is what a flag does to the rating of the reading.
type Effect int

// The effects: a reading is as good as its worst flag.
const (
	None      Effect = iota // about the conversion or the study, not about the reading
	AsksLook                // the reading may be wrong
	MakesIt                 // the reading is probably wrong or incomplete
	effectEnd               // how many there are
)

// FlagInfo explains one flag.
type FlagInfo struct {
	Name    string
	Effect  Effect
	Meaning string
	Do      string
}

// Flags is the table of all flags: what each means, what to do, and what it does
// to the rating. It is the only place that decides a rating; a flag that is not
// listed asks for a look. The effects were settled by how often readings with the
// flag were wrong on labelled papers.
func Flags() []FlagInfo {
	return []FlagInfo{
		// The sample size.
		{"n-missing", AsksLook, "no sample size is printed for this result", "look for n in the paper; without it an interval gives the SE only"},
		{"n-missing-here", AsksLook, "no n was found for this result, though other results of its table have one", "look at the table's headings and its n row"},
		{"n-elsewhere", None, "n was read in another table or in the text, by the name of the arm", "check that this n is the one analysed here"},
		{"n-kind-unclear", None, "whether n counts those analysed in this row is not said", "look for missing values; fewer analysed means a larger SE for the same SD"},
		{"n-randomised", None, "n counts those randomised; fewer may have been analysed", "look for the number analysed in the flow of the study"},
		{"n-total", AsksLook, "the n may be that of several arms together", "look for the n of this arm; the SD is withheld"},
		{"n-at-baseline", None, "the paper says that the n of the headings are those at baseline, and prints none for this time", "look for those analysed at this time in the text; without n an interval gives the SE only"},
		{"n-from-text", AsksLook, "n is a count in the text of all who took part, or of each group, which is not tied to this table", "look whether these are the subjects of this row, and whether some are missing"},
		{"n-from-counts", AsksLook, "n is the denominator that the column prints with its counts", "look for missing values: this row may have fewer"},
		{"n-conflict", MakesIt, "two places give different n", "decide which one counts for this row"},
		{"small-n", None, "n is below 5", "an SD from so few values is hardly known"},
		// What the spread is.
		{"spread-unstated", AsksLook, "the paper does not say what stands after the ± or in the bracket", "compare the readings side by side; ask the authors"},
		{"spread-from-methods", None, "only the methods say what the ± or the bracket is, not the table", "check that the statement covers this table"},
		{"spread-ambiguous", AsksLook, "one statement names more than one spread for this form", "decide which one this row has"},
		{"spread-conflict", AsksLook, "table and methods name different spreads", "compare with other arms: an SE is smaller than an SD by √n"},
		{"spread-not-positive", MakesIt, "the spread or the interval has no width, or is negative", "look at the page: a misprint or a slip of reading"},
		{"count-or-spread", AsksLook, "headed as a count with its percentage, which the numbers contradict", "decide whether it is a count or a mean"},
		{"se-as-sd", AsksLook, "two spreads of one row, both called SD, differ by about √n: the smaller looks like an SE", "look at the page; compare with other papers"},
		{"sd-as-se", None, "called an SE, but its size, beside another of its row or as a multiple of the mean, is that of an SD", "compare with other papers; the SD is withheld"},
		{"no-reading-fits", AsksLook, "the paper's p value fits no reading of the unexplained ±", "another test was used, or a number is misprinted"},
		// The interval.
		{"level-missing", AsksLook, "the level of the interval is not printed", "look in the methods; what 90, 95 and 99% would give is shown"},
		{"level-assumed", AsksLook, "the level is not printed here; it is that of the paper's other intervals", "check that this interval is of the same kind"},
		{"level-elsewhere", None, "the level is said in another place than the heading of the interval", "look there"},
		{"bounds-reversed", AsksLook, "the larger bound stands first", "a decrease printed towards zero, or a slip"},
		{"open-bound", AsksLook, "a bound is not a number", "look at the page; nothing is converted"},
		{"bound-not-a-number", AsksLook, "a bound is printed as a word or sign", "look at the page; nothing is converted"},
		{"estimate-outside", MakesIt, "the estimate lies outside its interval", "look at the page: another row, a lost decimal point or sign, or a misprint"},
		{"sign-flip", AsksLook, "the estimate lies in its interval only with the other sign", "decide which sign is meant: \"fell by\" with a negative interval"},
		{"asymmetric-interval", None, "the interval is not symmetric about the estimate, even allowing for rounding", "it may belong to a median, a logarithm, a bootstrap or a model; the SD is withheld"},
		{"barely-symmetric", None, "symmetric only if all three numbers were rounded from the middle between two digits", "an interval made from rounded numbers looks like this"},
		{"one-sided", None, "a one-sided limit", "half its distance is not a margin"},
		{"t-or-z", None, "t and z give SDs more than 1% apart and nothing in the row settles which was used", "t is usual for a plain mean; the SD by z is shown beside"},
		{"coarse-digits", None, "the printed digits leave the SD open by more than 10%", "use the range; look for the same result with more digits"},
		{"p-disagrees", None, "interval and p value of one comparison belong to different levels", "an adjusted or rank test, another level than printed, or a p of another row"},
		{"t-and-p-disagree", None, "t, degrees of freedom and p do not belong together", "a misprint, or another test"},
		{"df-above-n", None, "the degrees of freedom of the t test exceed n₁ + n₂ − 2", "repeated measures, or units counted more than once: n or the test is not what it seems"},
		{"mates-disagree", AsksLook, "two spreads of one estimate do not belong to one n and level", "n, the level or what the spread is was misread, or the paper misprints"},
		{"repeated-values", None, "the same estimate and spread stand twice in one table for different arms, times or outcomes", "look whether the paper repeats itself or the wrong cell was read"},
		// How the estimate was made.
		{"statistic-unclear", MakesIt, "the paper does not say what the estimate is", "decide whether it is a mean, a median or something else"},
		{"statistic-assumed", None, "mean, median or other is not said and was taken from the kind of spread", "check the table's heading and the methods"},
		{"adjusted", None, "the mean or difference is adjusted", "its interval reflects a model: the SD is withheld"},
		{"statistic-against-heading", AsksLook, "a word of the heading contradicts the statistic that was read", "decide which of them holds"},
		{"adjusted-baseline", AsksLook, "a baseline value is called adjusted", "the word may belong to other columns; if so, its SD can be worked out"},
		{"adjusted-unclear", None, "the paper leaves open whether the mean is adjusted or comes from a model", "look in the methods; the SD is withheld"},
		{"model-based", None, "the mean comes from a model (least squares, marginal, mixed model)", "the SD is withheld"},
		{"model-stated", None, "an analysis by a model is stated with the result", "look whether this number comes from it; the SD is withheld"},
		{"clustered", None, "the data are clustered", "SE·√n is not the SD: it is withheld"},
		{"crossover", None, "a crossover design", "the interval may rest on differences within units: the SD is withheld"},
		{"bootstrap-interval", None, "a bootstrap interval", "t and z do not apply: the SD is withheld"},
		{"bayesian-interval", None, "a credible interval", "t and z do not apply: the SD is withheld"},
		{"simultaneous-interval", None, "a simultaneous interval (Bonferroni, Tukey)", "wider than t for one mean: the SD is withheld"},
		{"other-interval", None, "an interval of single values: prediction, tolerance or reference interval, limits of agreement", "it says nothing of the mean's SE: the SD is withheld"},
		{"back-transformed", None, "a back-transformed mean", "its interval belongs to another scale: the SD is withheld"},
		{"log-scale", None, "analysed on the log scale", "its interval belongs to that scale: the SD is withheld"},
		// The values.
		{"skewed", None, "mean below 2 SD: values that cannot be negative would be skewed", "an SD from an interval stands all the same; a median's proposals mislead"},
		{"large-converted-sd", AsksLook, "the SD worked out is more than half the mean", "check n and what the spread is: an n of another group gives such an SD"},
		{"skewed-summary", None, "median and quantiles are skewed by the test for them", "the methods for near-normal data mislead"},
		{"count-data", None, "the outcome is counted in whole numbers", "often skewed; an SD from an interval stands all the same"},
		{"mean-impossible", AsksLook, "no whole numbers have this mean with this n", "n or the mean was misread or misprinted, or the outcome is not counted"},
		{"sd-impossible", MakesIt, "no values on the outcome's scale have this mean and SD", "an SE printed as an SD, a misprint or a slip of reading"},
		{"bounds-not-positive", MakesIt, "a ratio or geometric mean with a bound that is not above 0", "look at the page: a lost digit, or a difference"},
		{"decimal-slip", AsksLook, "one bound lies ten times as far from the estimate as the other or has another number of decimals", "look at the page: a lost decimal point"},
		// What it is about.
		{"described-alike", AsksLook, "two results of one table, or of the text, are described by the same words and differ", "look what tells them apart: arm, time, subgroup or outcome"},
		{"in-running-text", MakesIt, "read from a sentence alone: arm, time, outcome and n are less sure than in a table", "read the sentence"},
		{"from-the-table", AsksLook, "read from a sentence; a table prints the same numbers, and what the sentence does not say was taken from there", "check that both are the same result"},
		{"arm-not-named", MakesIt, "read from a sentence that names no arm", "read the sentence: which arm, or all together"},
		{"sentence-without-n", MakesIt, "read from a sentence that gives no n, nor an arm whose n is known", "read the sentence: what it is about is often read wrongly"},
		{"arm-unclear", None, "the arms of a comparison are not named where the result stands", "check the arm"},
		{"arm-missing-here", AsksLook, "other results of this table name an arm, this one does not", "check the arm"},
		{"arm-cut-short", AsksLook, "the name of the arm breaks off", "check the arm"},
		{"arm-a-phrase", AsksLook, "the name of the arm is a whole phrase: words of the outcome may be in it", "check the arm and the outcome"},
		{"time-unclear", AsksLook, "the time point rests on the caption", "check the time"},
		{"time-missing-here", AsksLook, "other results of this table name a time, this one does not", "check the time"},
		{"outcome-abbreviated", AsksLook, "the outcome is only an abbreviation", "look up what it stands for"},
		{"outcome-stacked", AsksLook, "the outcome's row group has a unit of its own: the row above may be another outcome", "check which row the values belong to"},
		{"outcome-unclear", AsksLook, "no row label or heading says what was measured, or a part of the label seems lost", "check the outcome"},
		{"columns-unclear", AsksLook, "read from text, which does not say over which columns a heading reaches; here it can be read in two ways", "check arm, time and n against the printed table"},
		{"row-shape-odd", AsksLook, "the spread stands in another cell and was joined to its estimate by position", "check that the two belong together"},
		{"quoted", AsksLook, "seems to quote another study, or to repeat", "take it from where it was first reported"},
		{"sign-differs", AsksLook, "the sign was read in two ways", "look at the page"},
		{"spread-from-rows", None, "what the spread is was taken from other rows of the table", "check the row's heading"},
		{"in-methods", AsksLook, "printed in the methods: an assumption or a description", "rarely a result"},
		// The text.
		{"misprint", AsksLook, "a number is printed with a slip and was read as meant", "look at the page"},
		{"repaired", AsksLook, "characters of the file were repaired to read the numbers", "compare the digits with the page"},
		{"unknown-sign", AsksLook, "a character of the file could not be told: a sign or a digit may be missing", "compare with the page"},
		{"ocr", AsksLook, "read from a picture of the page", "compare every digit with the page"},
		{"conventions-differ", AsksLook, "the paper declares more than one meaning of its spreads", "decide which one this sentence follows"},
		{"interval-unnamed", AsksLook, "nothing says that these bounds are a confidence interval", "decide whether they are an interval, quartiles or a range"},
		{"scale-differs", AsksLook, "the estimate fits its bounds only as a percentage", "look at the page: fraction or percent"},
		{"power-of-ten", AsksLook, "the numbers are printed with a power of ten, which was put into the unit", "look whether one power holds for all of them"},
		{"readers-differ", MakesIt, "the two readers of the PDF read different digits here", "compare the digits with the page"},
	}
}

// effectOf gives the effect of each flag of the table.
func effectOf(table []FlagInfo) map[string]Effect {
	out := make(map[string]Effect, len(table))
	for _, f := range table {
		out[f.Name] = f.Effect
	}
	return out
}

// rate gives the rating of a reading from its flags.
func rate(it *item, effects map[string]Effect) string {
	worst := None
	for _, f := range it.w.Flags {
		e, listed := effects[f.Name]
		if !listed {
			e = AsksLook
		}
		worst = max(worst, e)
	}
	return [effectEnd]string{Clear, Look, Doubtful}[worst]
}

// ExplainFlag looks up one flag.
func ExplainFlag(name string) (FlagInfo, bool) {
	for _, f := range Flags() {
		if f.Name == name {
			return f, true
		}
	}
	return FlagInfo{}, false
}

// String says in words what the effect is.
func (e Effect) String() string {
	return [effectEnd]string{"none", "look", "doubtful"}[e]
}
