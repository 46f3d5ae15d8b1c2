package paper

import (
	"regexp"
	"strings"
)

var (
	headingNumber = regexp.MustCompile(`^(?:(?:[0-9]+(?:\.[0-9]+)*|[IVX]+)[.):]?\s+|[A-H][.)]\s+)`)
	headingJunk   = regexp.MustCompile(`[\s\x{00A0}\x{2002}-\x{200A}]+`)
)

// wholeTitles are the headings that name a zone by themselves, whatever the
// section around them is called.
var wholeTitles = map[string]Zone{
	"abstract": Abstract, "summary": Abstract, "structured abstract": Abstract,
	"introduction": Introduction, "background": Introduction, "intro": Introduction,
	"background and objectives": Introduction, "introduction and background": Introduction,
	"methods": Methods, "method": Methods, "methodology": Methods,
	"materials and methods": Methods, "material and methods": Methods, "methods and materials": Methods,
	"patients and methods": Methods, "subjects and methods": Methods, "participants and methods": Methods,
	"methods/design": Methods, "methods and design": Methods, "design and methods": Methods,
	"research design and methods": Methods, "experimental section": Methods, "experimental": Methods,
	"experimental procedures": Methods, "statistical analysis": Methods, "statistical analyses": Methods,
	"statistical methods": Methods, "statistics": Methods, "data analysis": Methods,
	"results": Results, "result": Results, "findings": Results, "results and discussion": Results,
	"discussion": Discussion, "conclusion": Discussion, "conclusions": Discussion, "comment": Discussion,
	"discussion and conclusion": Discussion, "discussion and conclusions": Discussion,
	"limitations": Discussion, "strengths and limitations": Discussion, "interpretation": Discussion,
	"references": References, "bibliography": References, "references and notes": References,
	"literature cited": References, "literature": References, "reference list": References,
}

// titleWords are words that tell the zone of a heading which is no whole title;
// the first that fits decides.
var titleWords = []struct {
	words *regexp.Regexp
	zone  Zone
}{
	{regexp.MustCompile(`^(?:acknowledge?ments?|competing interests?|conflicts? of interests?|declarations?|disclosures?|funding|financial (?:support|disclosure)|authors?['’]? ?contributions?|author contributions?|contributors|abbreviations?(?: used)?|supplementa(?:ry|l) .*|supporting information|additional files?|appendi(?:x|ces)\b.*|data availability.*|availability of .*|pre-?publication history|consent for publication|ethics approval.*|provenance.*|notes|authors?['’] information|endnotes|trial registration)$`), BackMatter},
	{regexp.MustCompile(`\bmethods?\b|\bstatistical\b|\bstudy (?:design|population)\b|\bparticipants\b|\bsample size\b|\brandomi[sz]ation\b|\boutcome measures?\b|\beligibility\b|\bprocedures?\b`), Methods},
	{regexp.MustCompile(`\bresults?\b|\bfindings\b`), Results},
	{regexp.MustCompile(`\bdiscussions?\b|\bconclusions?\b|\blimitations\b`), Discussion},
	{regexp.MustCompile(`\bintroduction\b|\bbackground\b|\brationale\b|\bobjectives?\b|\baims?\b`), Introduction},
}

// PlainTitle is a heading without its number, in lower case, with single
// spaces, without closing punctuation and with "and" for "&".
func PlainTitle(title string) string {
	s := strings.TrimSpace(headingJunk.ReplaceAllString(title, " "))
	s = headingNumber.ReplaceAllString(s, "")
	s = strings.ToLower(strings.Trim(s, " .:|–—-"))
	return strings.ReplaceAll(s, "&", "and")
}

// ZoneOf tells the zone that a heading opens. Sure is true where the heading
// names the zone by itself ("Results"); else the zone is a guess from a word in
// it and should not overrule the section around ("Sample size" in Results).
// Elsewhere where nothing tells.
func ZoneOf(title string) (zone Zone, sure bool) {
	s := PlainTitle(title)
	if z, ok := wholeTitles[s]; ok {
		return z, true
	}
	for _, t := range titleWords {
		if t.words.MatchString(s) {
			return t.zone, t.zone == BackMatter
		}
	}
	return Elsewhere, false
}
