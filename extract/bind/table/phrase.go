package table

import (
	"strconv"
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// phrase is what a heading, a label or a note says about the values under it.
type phrase struct {
	pairs     []pair
	ns        []grammar.Item // n = 42, in order
	terms     int            // terms of statistics in it
	onlyTerms bool           // it announces statistics and names nothing else
	onlyN     bool           // it gives an n and names nothing else
	hasN      bool
	isP       bool   // it heads p values
	test      string // it heads a test statistic or degrees of freedom: "t", "F", "df"
	countHead bool   // it heads sample sizes: "N", "No. of colonies"
	bound     int    // it heads one end of an interval: -1 lower, +1 upper
	armLike   bool
	rest      []string // words that are no terms
}

// pair is one statement of how values are printed.
type pair struct {
	grammar.Pair
	text string
}

// textOf gives a text run to the grammar.
func textOf(t *paper.TextRun) grammar.Text {
	g := grammar.Text{S: t.S}
	for _, s := range t.Styles {
		switch s.Kind {
		case paper.Raised:
			g.Raised = append(g.Raised, grammar.Span{Start: s.Start, End: s.End})
		case paper.Lowered:
			g.Lowered = append(g.Lowered, grammar.Span{Start: s.Start, End: s.End})
		}
	}
	return g
}

// readPhrase reads a heading without marks.
func readPhrase(s string) phrase { return parsePhrase(grammar.Text{S: s}) }

// variants are spellings of the range and the quartiles that the grammar does
// not know as one term; each is put in with spaces to the same length, so that
// places stay right.
var variants = []struct {
	form *pattern.Pattern
	as   string
}{
	{pattern.MustCompile(`(?i)\bmin(?:imum)?\.?\s*(?:[-–—:;,/~]|to|and)\s*max(?:imum)?\b\.?`), "range"},
	{pattern.MustCompile(`\b[uU]OR\b`), "OR "},
	{pattern.MustCompile(`(?i)\bratios? of (?:the )?(?:adjusted )?(?:gm[ct]s?|geometric mean (?:tit(?:re|er)s?|concentrations?))\b|\b(?:gm[ct]s?|geometric mean (?:tit(?:re|er)|concentration)) ratios?\b`), "GMR"},
	// The mean as a letter with a bar over it; s beside it is the sample's SD.
	{pattern.MustCompile("[xXχ][\u0304\u0305\u00af\u02c9]\\s*±\\s*(?:[sS]\\b|SD\\b|S[.]D[.])"), "mean±SD"},
	{pattern.MustCompile("[xXχ][\u0304\u0305\u00af\u02c9]\\s*±\\s*(?:[sS]\\b|SD\\b|S[.]D[.])"), "M±SD"},
	{pattern.MustCompile(`(?i)\bq1\s*(?:[-–—:;,/~]|to|and)\s*q3\b`), "IQR"},
	{pattern.MustCompile(`(?i)\b(?:p|c)?25(?:th)?(?: ?%| percentile)?\s*(?:[-–—:;,/~]|to|and)\s*(?:p|c)?75(?:th)?(?: ?%| ?percentiles?| ?centiles?)`), "IQR"},
	{pattern.MustCompile(`(?i)\b(?:lower|first|1st)\s*(?:[-–—:;,/~]|to|and)\s*(?:upper|third|3rd) quartiles?\b`), "IQR"},
	{pattern.MustCompile(`(?i)\bquartile [1I]\s*(?:[-–—:;,/~]|to|and)\s*(?:quartile )?(?:3|III)\b`), "IQR"},
}

func normalise(s string) string {
	for _, v := range variants {
		s = v.form.ReplaceAllStringFunc(s, func(m string) string {
			if len(m) < len(v.as) {
				return m
			}
			pad := strings.Repeat(" ", len(m)-len(v.as))
			if v.as == "GMR" {
				return pad + v.as // what follows tells its spread
			}
			return v.as + pad
		})
	}
	return s
}

func parsePhrase(in grammar.Text) phrase {
	in.S = normalise(in.S)
	h := grammar.ParsePhrase(in)
	p := phrase{ns: h.N, hasN: len(h.N) > 0}
	last := ""
	lastMeasure, lastModel := "", ""
	for _, q := range h.Pairs {
		if q.Statistic == "" && q.Spread != "" && !q.Count {
			q.Statistic, q.Measure, q.Model = last, lastMeasure, lastModel // "mean (SD or 95% CI)"
		}
		if q.Statistic != "" {
			last, lastMeasure, lastModel = q.Statistic, q.Measure, q.Model
		} else if q.Count {
			last, lastMeasure, lastModel = "", "", ""
		}
		p.pairs = append(p.pairs, pair{q, in.S})
		if q.Spread != "" || q.Statistic != "" || q.Count || q.Percent {
			p.terms++
		}
	}
	for i := range p.pairs {
		for k := range p.pairs {
			if p.pairs[i].Statistic == "mean change" && p.pairs[k].Statistic == "mean difference" && k < i+2 {
				p.pairs[i].Statistic = "mean difference" // "mean difference in change"
			}
		}
	}
	p.rest = restWords(in.S, h)
	low := fold(in.S)
	p.onlyTerms = p.terms > 0 && len(p.rest) == 0
	p.onlyN = p.hasN && p.terms == 0 && len(p.rest) == 0
	p.isP = isPHeading(low)
	p.test = testHeading(low)
	p.bound = boundHeading(low)
	p.countHead = isCountHeading(low)
	p.armLike = p.hasN && len(p.rest) > 0
	return p
}

// fillers are words of headings that name nothing that is measured.
var fillers = map[string]bool{"value": true, "values": true, "adj": true, "adjusted": true, "unadjusted": true, "crude": true, "raw": true,
	"estimate": true, "estimates": true, "estimated": true, "est": true, "of": true, "the": true, "and": true, "or": true, "in": true, "for": true,
	"with": true, "as": true, "per": true, "cent": true, "two": true, "sided": true, "tailed": true, "statistic": true, "statistics": true, "to": true, "from": true,
	"min": true, "max": true, "th": true, "st": true, "number": true, "patients": true, "subjects": true, "participants": true, "between": true,
	"group": true, "groups": true, "dif": true, "diff": true, "data": true, "are": true, "is": true, "observed": true, "model": true, "mean": true, "total": true, "unless": true}

// restWords gives the words of s that are in no item and are no fillers.
func restWords(s string, h grammar.Heading) []string {
	b := []byte(s)
	blank := func(i, j int) {
		for ; i < j && i < len(b); i++ {
			b[i] = ' '
		}
	}
	for _, it := range h.Items {
		blank(it.Start, it.End)
	}
	for _, q := range h.Pairs {
		if q.SpreadAt.End > 0 {
			blank(q.SpreadAt.Start, q.SpreadAt.End)
		}
		if q.StatisticAt.End > 0 {
			blank(q.StatisticAt.Start, q.StatisticAt.End)
		}
	}
	var out []string
	for _, w := range words(strings.ToValidUTF8(string(b), " ")) {
		if !fillers[w] && hasLetter(w) && len([]rune(w)) > 1 {
			out = append(out, w)
		}
	}
	return out
}

func isPHeading(low string) bool {
	low = strings.Trim(low, " *†‡§¶#^()[]")
	switch low {
	case "p", "p-value", "p value", "p-values", "pvalue", "p values", "sig.", "sig", "significance", "p-val", "asymp. sig.":
		return true
	}
	for _, pre := range []string{"p value", "p-value", "p for ", "p =", "p=", "p ", "adjusted p", "unadjusted p", "p(", "pvalue", "p1", "p2", "p3", "p trend", "p interaction"} {
		if strings.HasPrefix(low, pre) && len(low) < 60 && !strings.HasPrefix(low, "p wave") {
			return pre != "p " || len(low) < 14
		}
	}
	if strings.Contains(low, "ci)") || strings.Contains(low, "interval") || strings.Contains(low, "difference") || len(low) > 60 {
		return false // "Difference (95% CI), p value"
	}
	return strings.HasSuffix(low, " p value") || strings.HasSuffix(low, " p-value") || strings.HasSuffix(low, "p-values") || len(low) == 2 && low[0] == 'p' && strings.IndexByte("0123456789*#", low[1]) >= 0
}

// testHeading names the test statistic that a heading announces.
func testHeading(low string) string {
	low = strings.Trim(low, " *†‡§¶#^")
	switch {
	case low == "t" || low == "t value" || low == "t-value" || low == "t statistic" || low == "t-test" || low == "t test" || strings.HasPrefix(low, "t (df") || strings.HasPrefix(low, "t(df"):
		return "t"
	case low == "f" || low == "f value" || low == "f-value" || low == "f statistic" || strings.HasPrefix(low, "f-stat") || strings.HasPrefix(low, "f (df") || strings.HasPrefix(low, "f(df") || low == "f ratio":
		return "F"
	case low == "df" || low == "d.f." || low == "degrees of freedom":
		return "df"
	case low == "z" || low == "χ2" || low == "χ 2" || low == "x2" || low == "chi-square" || low == "chi2" || low == "u" || low == "r" || low == "r2" || low == "test statistic" || low == "statistics" || low == "wald":
		return "other"
	}
	return ""
}

// boundHeading tells headings of one end of an interval.
func boundHeading(low string) int {
	low = strings.Trim(low, " *†‡§¶#^()[]")
	switch {
	case strings.Contains(low, "lower and upper") || strings.Contains(low, "upper and lower") || strings.Contains(low, "lower, upper"):
		return 0
	case strings.HasPrefix(low, "lower") && len(low) < 30 || low == "ll" || low == "lcl" || low == "lci" || strings.HasSuffix(low, " lower") || strings.HasSuffix(low, "lower limit") || strings.HasSuffix(low, "lower bound") || strings.HasSuffix(low, "ci lower"):
		return -1
	case strings.HasPrefix(low, "upper") && len(low) < 30 || low == "ul" || low == "ucl" || low == "uci" || strings.HasSuffix(low, " upper") || strings.HasSuffix(low, "upper limit") || strings.HasSuffix(low, "upper bound") || strings.HasSuffix(low, "ci upper"):
		return 1
	}
	return 0
}

// counted are nouns that an n column or row counts.
var counted = []string{"patients", "subjects", "participants", "women", "men", "children", "individuals", "people", "persons", "cases", "respondents", "infants", "animals",
	"students", "girls", "boys", "adults", "volunteers", "completers", "observations", "colonies", "eyes", "rats", "mice", "dogs", "cows", "calves", "pigs", "hives", "bees", "births", "mothers", "athletes", "knees"}

// isCountHeading tells the headings of sample sizes.
func isCountHeading(low string) bool {
	low = strings.Trim(low, " *†‡§¶#^.,:")
	switch low {
	case "n", "no", "nr", "number", "sample size", "sample", "(n)", "n (analysed)", "n analysed", "n analyzed", "number in group", "group size", "count", "n total", "total n", "total (n)", "number of observations", "n.":
		return true
	}
	for _, pre := range []string{"number of ", "no. of ", "no of ", "n. of ", "n of ", "nr of ", "number ", "no. ", "n ", "total number of ", "total no. of ", "sample size, "} {
		if strings.HasPrefix(low, pre) {
			rest := strings.TrimPrefix(strings.TrimPrefix(low, pre), "the ")
			for _, c := range counted {
				if rest == c || rest == c+" analysed" || rest == c+" analyzed" || rest == c+" in group" || rest == "of "+c || rest == c+" (n)" || rest == "randomised "+c || rest == "randomized "+c || rest == c+" randomised" || rest == c+" randomized" || rest == "enrolled "+c || rest == c+" per group" {
					return true
				}
			}
			if rest == "analysed" || rest == "analyzed" || rest == "randomised" || rest == "randomized" || rest == "evaluated" || rest == "in group" || rest == "(patients)" {
				return true
			}
		}
	}
	for _, c := range counted {
		if low == c || low == c+" (n)" || low == c+", n" || low == c+" n" || low == c+", no" || low == "all "+c {
			return true
		}
	}
	return false
}

// level is the printed level of an interval as a number.
func level(s string) float64 {
	v, err := strconv.ParseFloat(strings.ReplaceAll(s, "·", "."), 64)
	if err != nil || v <= 0 || v >= 100 {
		return 0
	}
	return v
}
