package table

// The flags that reading a table raises. Every one rests a field on a weaker
// inference than a heading, label or note that says it.
const (
	FlagSpreadUnstated = "spread-unstated"     // nothing says what the ± or the bracket is
	FlagSpreadMethods  = "spread-from-methods" // only the paper's methods say what the ± or the bracket is
	FlagSpreadHabit    = "spread-from-rows"    // only other rows of the same table say what this form is
	FlagSpreadTwice    = "spread-ambiguous"    // two statements of equal right name different spreads for this form
	FlagSpreadConflict = "spread-conflict"     // the table and the methods name different spreads
	FlagCountConflict  = "count-or-spread"     // headed as a count with its percentage, which the numbers contradict
	FlagLevelElsewhere = "level-elsewhere"     // the level of the interval is said in another place than its heading
	FlagLevelMissing   = "level-missing"       // the paper nowhere says the level of the interval
	FlagStatistic      = "statistic-assumed"   // mean, median or other is not said and was taken from the kind of spread
	FlagArmUnclear     = "arm-unclear"         // the arm is not named where it stands
	FlagTimeUnclear    = "time-unclear"        // the time point rests on the caption
	FlagOutcomeUnclear = "outcome-unclear"     // no row label or heading says what was measured
	FlagNElsewhere     = "n-elsewhere"         // the n was read in another table or the text, by the arm's name
	FlagNKind          = "n-kind-unclear"      // a heading's n at baseline serves a later time point
	FlagNConflict      = "n-conflict"          // two places give different n's
	FlagNCounts        = "n-from-counts"       // the n is the denominator of the counts in its column
	FlagNBaseline      = "n-at-baseline"       // the headings' n are those at baseline, the paper says
	FlagNTold          = "n-from-text"         // the n is a count of the text that is not tied to this table
	FlagNTotal         = "n-total"             // the n may be the total of several arms
	FlagOutside        = "estimate-outside"    // the estimate lies outside its bounds
	FlagReversed       = "bounds-reversed"     // the lower bound is printed after the upper
	FlagBoundOpen      = "bound-not-a-number"  // a bound is printed as a word or sign
	FlagRowShape       = "row-shape-odd"       // the spread stands in another cell and was joined by position only
	FlagMended         = "misprint"            // the number is printed with a slip and kept as printed
)
