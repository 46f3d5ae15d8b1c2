package layout

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

var (
	figureLabel  = pattern.MustCompile(`^(?i:supplementary |supplemental |additional )?(?:Figure|FIGURE|Fig\.?|FIG\.?|Scheme|Chart|Box|BOX)\s?(?:[0-9]{1,2}|[SA][0-9]+|[IVX]+)[A-Za-z]?(?:$|[.:|–—]|\s+[^\sa-z])`)
	tableLabel   = pattern.MustCompile(`^(?:Table|TABLE)\s?(?:[0-9]{1,2}|[SA][0-9]+|[IVX]+)[A-Za-z]?(?:$|[.:|–—]|\s+[^\sa-z])`)
	numbered     = pattern.MustCompile(`^(?:[0-9]{1,2}(?:\.[0-9]{1,2}){0,3}\.?|[IVX]{1,4}\.|[A-H]\.)\s+\p{Lu}`)
	numberedDeep = pattern.MustCompile(`^[0-9]{1,2}(?:\.[0-9]{1,2}){1,3}\.?\s+\p{Lu}`)
	runIn        = pattern.MustCompile(`^(?i:(?:abstract|summary)[.:]?\s+)?((?i:background|introduction|objectives?|aims?|purpose|context|importance|methods?|methodology|materials? and methods|patients and methods|study design|design|setting|settings|participants|subjects|interventions?|measurements?|main outcome measures?|main outcomes?(?: and measures)?|outcome measures?|results?|findings|main results|conclusions?|interpretation|discussion|trial registration|background/aims?|background and (?:aims?|objectives?|purpose)|methods and results|methods/design|aims? and objectives?|limitations?|significance|rationale|hypothesis|funding))\s?([.:—–]|\s+-)\s*\S`)
)

// titleStarts are the first four letters of the headings that name a zone.
var titleStarts = starts("abst summ stru intr back meth mate pati subj part desi rese expe stat data resu find disc conc comm limi stre inte refe " +
	"bibl lite ackn comp conf decl fund fina auth cont abbr supp addi appe avai pre- prep cons ethi prov note endn tria")

func starts(list string) map[string]bool {
	m := map[string]bool{}
	for _, s := range strings.Fields(list) {
		m[s] = true
	}
	return m
}

// startsLabel reports whether a line begins like the caption of a figure or a
// table.
func startsLabel(text string) bool {
	if text == "" || strings.IndexByte("FTSCBAsa", text[0]) < 0 {
		return false
	}
	return figureLabel.MatchString(text) || tableLabel.MatchString(text)
}

// headingLine reports whether a line looks like (a part of) a heading: by its
// print, its number or its words.
func (a *arranger) headingLine(l *line) bool {
	text := l.text()
	if len(text) > 160 || !hasLetters(text) || bullet(text) {
		return false
	}
	big := l.size*100 >= a.body*106
	switch {
	case knownTitle(text):
		return true
	case strings.HasSuffix(text, ",") || strings.HasSuffix(text, ";") || !letterEnd(text) && !l.bold && l.size*100 < a.body*115:
		return false
	case big && letterShare(text) >= 60:
		return true
	case l.bold && l.size*100 >= a.body*90 && len(text) <= 120 && letterShare(text) >= 60:
		return true
	case allCaps(text) && len(text) >= 6 && len(text) <= 90 && letterShare(text) >= 75:
		return true
	case l.short() && numberedDeep.MatchString(text) && len(text) <= 90 && !ended(text) && !sentenceIn(text) && letterShare(text) >= 60:
		return true
	}
	return false
}

// sentenceIn reports whether a sentence ends inside a numbered line: the
// heading is then run in with the text.
func sentenceIn(text string) bool {
	return strings.Contains(strings.TrimLeft(text, "0123456789. "), ". ")
}

// knownTitle reports whether a line is one of the headings that papers have,
// and nothing else.
func knownTitle(text string) bool {
	if len(text) > 80 || len(text) == 0 || strings.Count(text, " ") > 7 || !startsUpper(text) && text != "abstract" {
		return false
	}
	// Most lines are none: look at the first word before the whole.
	first := strings.ToLower(strings.TrimLeft(text, "0123456789.IVX)|: \t"))
	if first != "" && !titleStarts[first[:min(len(first), 4)]] && !titleStarts[strings.ToLower(text[:min(len(text), 4)])] {
		return false
	}
	zone, sure := paper.ZoneOf(text)
	return sure && zone != paper.Elsewhere && !strings.HasSuffix(text, ",")
}

// isHeading reports whether a draft as a whole is a heading.
func (a *arranger) isHeading(d *draft) bool {
	if len(d.lines) > 6 || d.lines[0].table != nil {
		return false
	}
	text := d.text()
	words := strings.Fields(text)
	if len(d.lines) == 1 && knownTitle(text) {
		return true
	}
	if len(words) > 30 || len(words) == 0 || startsLabel(text) {
		return false
	}
	if strings.HasSuffix(text, ".") && len(words) > 12 && !numbered.MatchString(text) {
		return false
	}
	inFont := len(words) <= 12 && !ended(text) && !sentenceIn(text) && letterShare(text) >= 60 &&
		startsUpper(text) && d.size*100 >= a.body*94 && d.last().short() && letterEnd(text)
	for i := range d.lines {
		l := &d.lines[i]
		if !(inFont && a.apart(l)) && !a.headingLine(l) {
			return false
		}
	}
	return !strings.ContainsAny(text, "@=±") && !strings.Contains(text, "http")
}

// letterEnd reports whether a text does not end in a hyphen.
func letterEnd(text string) bool {
	r, _ := utf8.DecodeLastRuneInString(text)
	return !isHyphen(r)
}

func hasLetters(s string) bool {
	return strings.IndexFunc(s, unicode.IsLetter) >= 0
}

// letterShare is how many of a text's printed characters are letters, percent.
func letterShare(s string) int {
	letters, all := 0, 0
	for _, r := range s {
		if unicode.IsSpace(r) {
			continue
		}
		all++
		if unicode.IsLetter(r) {
			letters++
		}
	}
	return letters * 100 / max(all, 1)
}

func allCaps(s string) bool {
	upper := false
	for _, r := range s {
		if unicode.IsLower(r) {
			return false
		}
		upper = upper || unicode.IsUpper(r)
	}
	return upper
}

// runInHeading is the heading that a paragraph begins with, "Results" of
// "Results: Colonies gained ...", or "".
func runInHeading(text string) string {
	if len(text) > 120 {
		text = text[:120]
	}
	m := runIn.FindStringSubmatchIndex(text)
	if m == nil {
		return ""
	}
	title := text[m[2]:m[3]]
	if r := []rune(title); !unicode.IsUpper(r[0]) {
		return ""
	}
	return title
}
