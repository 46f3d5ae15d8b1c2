package working

// The ratings of a reading, from sure to unsure.
const (
	Clear    = "clear"
	Look     = "look"
	Doubtful = "doubtful"
)

// effect is what a flag does to the rating of the reading.
type effect int

const (
	none     effect = iota // about the conversion or the study, not about the reading
	look                   // the reading may be wrong
	doubtful               // the reading is probably wrong or incomplete
)

// effects is the whole rule: a reading is as good as its worst flag. A flag that
// is not listed asks for a look.
func effects() map[string]effect {
	return map[string]effect{
		"t-or-z":              none,
		"n-missing":           look,
		"level-missing":       look,
		"small-n":             look,
		"adjusted":            none,
		"model-based":         none,
		"clustered":           none,
		"crossover":           none,
		"adjusted-unclear":    none,
		"asymmetric-interval": look,
		"estimate-outside":    doubtful,
		"bounds-descending":   look,
		"sign-flip":           look,
		"n-from-elsewhere":    look,
		"n-kind-unclear":      none,
		"n-randomised":        none,
		"statistic-unclear":   doubtful,
		"spread-unstated":     look,
		"spread-not-positive": doubtful,
		"quoted":              look,
	}
}

// rate gives the rating of a reading from its flags.
func rate(it *item) string {
	worst := none
	table := effects()
	for _, f := range it.w.Flags {
		e, listed := table[f.Name]
		if !listed {
			e = look
		}
		worst = max(worst, e)
	}
	return [...]string{Clear, Look, Doubtful}[worst]
}
