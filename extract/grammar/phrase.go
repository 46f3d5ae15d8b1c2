package grammar

// Pair is one statement of how values are printed: "Mean (SD)", "n (%)",
// "OR (95% CI)", "Median". Fields that are not said are empty.
type Pair struct {
	Span
	Statistic, Measure, Model, Design string
	StatisticAt                       Span
	Spread                            string // "ci", "sd", "se", "iqr", "range", "cv"
	SpreadAt                          Span
	Level                             string
	LevelAt                           Span
	Sign                              bool // a ± stands between them
	Count                             bool // it counts: n, No., number
	Percent                           bool // a percentage is named
}

// Heading is what a heading, label, caption or note says of the values it is
// about.
type Heading struct {
	Pairs []Pair
	N     []Item // n = 42, in order
	Items []Item // everything read, for closer looks
}

// First gives the first pair that names a spread, else the first pair, else an
// empty one.
func (h *Heading) First() Pair {
	for _, p := range h.Pairs {
		if p.Spread != "" {
			return p
		}
	}
	if len(h.Pairs) > 0 {
		return h.Pairs[0]
	}
	return Pair{}
}

// ParsePhrase reads a heading: "Syrup (n = 42)", "Adjusted difference (95% CI)",
// "n (%) or mean (SD)", "Median (25th–75th percentile)".
func ParsePhrase(in Text) Heading {
	r := Read(in)
	h := Heading{Items: r.Items}
	open := -1 // the pair that still waits for its spread
	sign := false
	for _, it := range r.Items {
		switch it.Kind {
		case KindSampleSize:
			h.N = append(h.N, it)
			continue
		case KindTerm, KindInterval, KindSpread, KindPlusMinus:
		default:
			continue
		}
		switch {
		case it.Name == "±":
			sign = true
			if open < 0 {
				h.Pairs = append(h.Pairs, Pair{Span: it.Span, Sign: true})
				open = len(h.Pairs) - 1
			} else {
				h.Pairs[open].Sign = true
				h.Pairs[open].End = it.End
			}
		case it.Spread != "":
			if open < 0 {
				h.Pairs = append(h.Pairs, Pair{Span: it.Span})
				open = len(h.Pairs) - 1
			}
			p := &h.Pairs[open]
			p.Spread, p.SpreadAt, p.Level, p.LevelAt, p.End = it.Spread, it.WordAt, it.Level, it.LevelAt, it.End
			if it.Design != "" {
				p.Design = it.Design
			}
			p.Sign = p.Sign || sign || it.Kind == KindPlusMinus
			open, sign = -1, false
		case it.Percent && open >= 0 && h.Pairs[open].Count:
			h.Pairs[open].Percent, h.Pairs[open].End = true, it.End
			open = -1
		case it.Percent:
			h.Pairs = append(h.Pairs, Pair{Span: it.Span, Percent: true})
		case it.Statistic != "" || it.Count:
			if open >= 0 && joins(h.Pairs[open], it) {
				merge(&h.Pairs[open], it)
				continue
			}
			h.Pairs = append(h.Pairs, Pair{Span: it.Span, Statistic: it.Statistic, Measure: it.Measure, Model: it.Model,
				StatisticAt: it.WordAt, Count: it.Count})
			open = len(h.Pairs) - 1
		}
	}
	return h
}

// joins reports that two terms name one statistic: "mean ... difference",
// "mean ... change".
func joins(p Pair, it Item) bool {
	return p.Statistic == "mean" && (it.Statistic == "mean difference" || it.Statistic == "mean change") ||
		it.Statistic == "mean" && (p.Statistic == "mean difference" || p.Statistic == "mean change")
}

func merge(p *Pair, it Item) {
	if p.Statistic == "mean" {
		p.Statistic = it.Statistic
	}
	if it.Measure != "" {
		p.Measure = it.Measure
	}
	if it.Model != "" {
		p.Model = it.Model
	}
	p.End = it.End
}
