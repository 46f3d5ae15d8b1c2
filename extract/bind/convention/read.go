package convention

import (
	"strconv"
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

var (
	// subject and participle of a declaring sentence
	declaring = pattern.MustCompile(`(?i)\b(?:presented|expressed|reported|given|shown|summari[sz]ed|described|displayed|represented?|denoted?s?|indicated?s?|listed|calculated|computed|used to describe|descriptive statistics|are (?:the )?(?:least[ -]squares? |adjusted |unadjusted |arithmetic |geometric )?(?:means?|medians?)|is (?:the )?(?:mean|median)|(?:values?|data|results?|bars?|numbers?|figures?)\s*(?:are|were|is|:|=|represent|indicate|denote|show))\b`)
	unless    = pattern.MustCompile(`(?i)\bunless\b|\bexcept\b`)
	tablesAre = pattern.MustCompile(`(?i)\btables?\b`)
	figures   = pattern.MustCompile(`(?i)\bfigures?\b(?: [0-9]|s\b)|\berror bars?\b|\bgraphs?\b|\bplots?\b|\bbars\b`)
	inText    = pattern.MustCompile(`(?i)\b(?:in|throughout) the text\b`)
	plan      = pattern.MustCompile(`(?i)\bsample size\b|\bpower\b|\bassum|\bdetect|\bexpected\b|\bprevious(?:ly)?\b|\bnorm(?:s|ative|ed)?\b`)
	reckoning = pattern.MustCompile(`(?i)\bdivided by\b|\bratio of\b|\beffect sizes?\b|\bcohen|\bhedges|\bpooled\b|\bz[- ]?scores?\b|\bstandardi[sz]ed (?:mean|difference)|\bcoefficients? of variation\b|\b(?:half a|one|two|three|[0-9.]+) (?:sds?|standard deviations?)\b`) // an SD in a formula, not in print
	others    = pattern.MustCompile(`(?i)\bliterature\b|\bet al\b|\b(?:earlier|other|another|prior) (?:stud|trial|work|report)|\bpilot\b|\[[0-9]{1,3}(?:\s?[,–-]\s?[0-9]{1,3})*\]`)
	meaningOf = pattern.MustCompile(`(?i)(?:±|\bplus[- ]minus\b|\bparenthes[ei]s|\bbrackets?|\berror bars?|\bbars|\bwhiskers)`)
)

// read gives the statements of a text; levels, where not nil, counts the levels
// it names.
func read(run *paper.TextRun, levels map[float64]int) []Statement {
	if !strings.ContainsAny(run.S, "SsCcIiQqRrMm±") {
		return nil
	}
	var out []Statement
	text := Text(run)
	if levels != nil {
		for _, it := range grammar.Read(text).Items {
			addLevel(it, levels)
		}
	}
	start := 0
	for start < len(run.S) {
		end := sentenceEnd(run.S, start)
		out = append(out, sentence(run, start, end)...)
		start = end
	}
	return out
}

var stop = pattern.MustCompile(`[.;]["”’)\]]?\s+[A-Z(\[]`)

func sentenceEnd(s string, start int) int {
	if loc := stop.FindStringIndex(s[start:]); loc != nil {
		return start + loc[0] + 1
	}
	return len(s)
}

func sentence(run *paper.TextRun, start, end int) []Statement {
	s := run.S[start:end]
	h := grammar.ParsePhrase(grammar.Text{S: s})
	if len(h.Pairs) == 0 || reckoning.MatchString(s) {
		return nil
	}
	declared := declaring.MatchString(s) && !plan.MatchString(s)
	var out []Statement
	for _, p := range h.Pairs {
		st := Statement{Statistic: result.Statistic(p.Statistic), Spread: result.GivenAs(p.Spread), Sign: p.Sign,
			Unless: unless.MatchString(s), Declared: declared, Text: clip(s)}
		switch p.Spread {
		case grammar.SpreadSD, grammar.SpreadSE, grammar.SpreadCI, grammar.SpreadIQR, grammar.SpreadRange:
		default:
			continue
		}
		st.Level, _ = strconv.ParseFloat(p.Level, 64)
		between := ""
		if p.StatisticAt.End > 0 && p.SpreadAt.Start > p.StatisticAt.End {
			between = s[p.StatisticAt.End:p.SpreadAt.Start]
		}
		st.Bracket = strings.ContainsAny(between, "([")
		valued := valuedPair(h.Items, p)
		switch {
		case valued && (!st.Sign || plan.MatchString(s) || others.MatchString(s)):
			continue
		case valued:
			st.Declared = false
		case p.Statistic == "" && !p.Sign:
			// "SD in parentheses", "error bars are SE": the spread alone must be
			// tied to the sign or bracket by words; an abbreviation is not.
			if !declared || !meaningOf.MatchString(s) || abbreviation(s, p.SpreadAt) {
				continue
			}
			st.Bracket = strings.Contains(strings.ToLower(s), "parenthes") || strings.Contains(strings.ToLower(s), "bracket")
		case p.Statistic == "":
		case len(between) > 60 && !st.Sign:
			continue
		case bare(s, p):
			// a note that is nothing but "Mean ± SD."
			st.Declared = true
		}
		st.Scope = scopeOf(s)
		st.Place = run.Between(start+p.Start, start+p.End)
		out = append(out, st)
	}
	return out
}

// valuedPair reports that numbers follow the pair's words at once: it explains
// one value, not a habit.
func valuedPair(items []grammar.Item, p grammar.Pair) bool {
	for _, it := range items {
		switch it.Kind {
		case grammar.KindNumber, grammar.KindInterval, grammar.KindPlusMinus, grammar.KindSpread:
			if it.Start >= p.Start && it.Start < p.End+40 || it.End <= p.Start && it.End+12 > p.Start {
				return true
			}
		}
	}
	return false
}

func bare(s string, p grammar.Pair) bool {
	rest := strings.TrimSpace(s[:p.Start] + s[p.End:])
	return len(strings.Trim(rest, ".,;:() ")) <= 12
}

// abbreviation reports "SD, standard deviation" and "SD = standard deviation":
// the printed spread is only spelled out.
func abbreviation(s string, at grammar.Span) bool {
	rest := strings.TrimLeft(s[at.End:], " )")
	return strings.HasPrefix(rest, ":") || strings.HasPrefix(rest, "=") || strings.HasPrefix(rest, ", s") || strings.HasPrefix(rest, ", c") || strings.HasPrefix(rest, ", i")
}

func scopeOf(s string) Scope {
	switch {
	case inText.MatchString(s):
		return Prose
	case figures.MatchString(s) && !tablesAre.MatchString(s):
		return Figures
	case tablesAre.MatchString(s) && !figures.MatchString(s):
		return Tables
	}
	return Everywhere
}

func clip(s string) string {
	const most = 300
	s = strings.TrimSpace(s)
	if len(s) <= most {
		return s
	}
	cut := most
	for cut > 0 && s[cut]&0xC0 == 0x80 {
		cut--
	}
	return s[:cut]
}
