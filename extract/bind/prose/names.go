package prose

import (
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/pattern"
)

// doseOf is a dose, and the units it may have.
const (
	doseUnits = `mg/kg|mg|g|µg|μg|ug|ng|ml|iu`
	doseOf    = `([0-9]+(?:,[0-9]{3})*(?:\.[0-9]+)?)[- \x{a0}](` + doseUnits + `)`
)

// intoGroup is what joins a count to the name of its group.
const intoGroup = `(?:(?:were|was)\s+)?(?:(?:randomly\s+)?(?:assigned|allocated|randomi[sz]ed)\s+)?(?:in|to|into)\s+`

var (
	groupCount  = pattern.MustCompile(`(?i)(?:^|[^\w.,–/-])([0-9]{1,5}|` + census.Words + `)\s+(?:` + census.Subjects + `\s+)?` + intoGroup + `(?:the\s+)?((?:[\p{L}0-9][\p{L}0-9+/-]*\s+){1,4}?)(?:group|arm)\b`)
	doseGroup   = pattern.MustCompile(`(?i)\b` + doseOf + `(?:(?:,| and| or| vs\.?| versus) ` + `[0-9][0-9,.]*[- \x{a0}](?:` + doseUnits + `))*(?:[- ](?:[\p{L}-]+))?[- ](?:group|arm|dose|infusion)s?\b`)
	groupNamed  = pattern.MustCompile(`([\p{L}][\p{L}0-9+/-]*(?: [\p{L}0-9][\p{L}0-9+/-]*){0,3}) (?:group|arm)s?\b`)
	abbreviated = pattern.MustCompile(`([\p{L}0-9])(?: group| arm)? ?\(([A-Z][A-Za-z]{0,6}[0-9+-]{0,2})(?:[-– ](?:group|arm))?\)`)
	stopName    = map[string]bool{}
	weakName    = map[string]bool{}
	noArm       = map[string]bool{} // words that no arm's name has
	notAlone    = map[string]bool{} // words that name no arm by themselves
)

func init() {
	fill := func(m map[string]bool, list string) {
		for _, w := range strings.Fields(list) {
			m[w] = true
		}
	}
	fill(stopName, `the a an and or of in to for with from by at on was were is are be been had has have than vs versus between both each all either
		either two three four other same this that these those which while whereas but as receiving received receive given taking took assigned allocated
		randomized randomised randomly into within among per respective respectively compared only no-one our their its one another study age treated using without
		including included completed analysed analyzed patients participants subjects women men children followed not also those who either control's remaining
		mean median value values difference differences change total number score scores showed in between-group within-group between-groups i.e e.g after before during`)
	fill(weakName, `group groups arm arms patients participants subjects women men children individuals cohort users`)
	fill(noArm, `baseline week follow percent total post overall pooled whole studied parallel respective different various matched ethnic following`)
	fill(notAlone, `once twice high low early late usual standard new old single double long short active delayed male female first second third pre no non yes
		present absent other none daily normal good poor group change age sex treatment dose effect time visit intervention's mild moderate severe`)
	delete(stopName, "patients")
	delete(stopName, "participants")
	delete(stopName, "treatment")
}

// nameBefore is the name that ends the text: its last words, back to a
// preposition, a verb or a mark.
func nameBefore(s string) string {
	const most = 4
	s = strings.TrimRight(s, " \u00a0")
	end, start := len(s), len(s)
	for n := 0; n < most && start > 0; n++ {
		i := strings.LastIndexAny(s[:start], " \u00a0\n")
		w := s[i+1 : start]
		if w == "" || strings.ContainsAny(w, ",;:.()[]=<>%") || stopName[strings.ToLower(w)] {
			break
		}
		start = max(i, 0)
	}
	return strings.TrimSpace(s[start:end])
}

// nameKey is the content words of a name. "Group A (early feed)" is named by its
// letter.
func nameKey(name string) []string {
	all := strings.FieldsFunc(strings.ToLower(name), func(r rune) bool { return strings.ContainsRune(" \u00a0\n-–/,;()*†‡§¶#:+[]", r) })
	if len(all) > 1 && lettered[all[0]] && len(all[1]) <= 3 && label.MatchString(all[1]) {
		return []string{"group", all[1]}
	}
	if len(all) == 2 && all[0] == "study" && lettered[all[1]] {
		return all[:1]
	}
	var out []string
	for _, w := range all {
		if !weakName[w] && !stopName[w] {
			out = append(out, w)
		}
	}
	return out
}

// ofGroup are names that mean an arm only where the word group is near.
var ofGroup = map[string]bool{"study": true, "treatment": true, "treated": true, "test": true, "intervention": true, "standard": true, "case": true, "exercise": true, "training": true, "diet": true}

var (
	lettered = map[string]bool{"group": true, "arm": true, "cohort": true, "groups": true, "arms": true}
	label    = pattern.MustCompile(`^(?:[a-h]|[0-9]{1,2}|i{1,3}|iv|v)$`)
)

// dosed reports that a name holds a dose: a number with a unit behind it.
func dosed(key []string) bool { return doseIn(key) >= 0 }

// doseIn is where the dose of a name stands; -1 where it has none.
func doseIn(key []string) int {
	for i := 0; i+1 < len(key); i++ {
		if c := key[i][0]; c >= '0' && c <= '9' && unitWords[key[i+1]] {
			return i
		}
	}
	return -1
}
