package census

import (
	"strconv"
	"strings"
)

// Words is the part of a regular expression that matches a number below one
// thousand written in words: "eighteen", "two hundred and five".
const Words = `(?:(?:one|two|three|four|five|six|seven|eight|nine) hundred(?: and)? )?(?:(?:twenty|thirty|forty|fifty|sixty|seventy|eighty|ninety)(?:[- ](?:one|two|three|four|five|six|seven|eight|nine))?|ten|eleven|twelve|thirteen|fourteen|fifteen|sixteen|seventeen|eighteen|nineteen|two|three|four|five|six|seven|eight|nine)|(?:one|two|three|four|five|six|seven|eight|nine) hundred`

// Subjects is the part of a regular expression that matches the words for what
// a study counts.
const Subjects = `(?:participants?|patients?|subjects?|women|men|children|adults?|adolescents?|girls?|boys?|males?|females?|infants?|toddlers|individuals?|people|persons?|volunteers?|students?|colonies|colony|bees?|hives|animals?|mothers?|workers?|employees|respondents|pupils|cases|newborns?|neonates?|residents?|eyes|teeth|couples|families|households|athletes|players|runners|cyclists|swimmers|soldiers|nurses|physicians|doctors|clinicians|anaesthetists|anesthesiologists|paramedics|practitioners|trainees|veterans|smokers|survivors|carers|caregivers|dogs?|cats?|mice|rats|rabbits|pigs|piglets|sheep|goats|cows|calves|heifers|horses|chickens|hens|broilers|lambs)`

var units = map[string]int{"one": 1, "two": 2, "three": 3, "four": 4, "five": 5, "six": 6, "seven": 7, "eight": 8, "nine": 9, "ten": 10,
	"eleven": 11, "twelve": 12, "thirteen": 13, "fourteen": 14, "fifteen": 15, "sixteen": 16, "seventeen": 17, "eighteen": 18, "nineteen": 19,
	"twenty": 20, "thirty": 30, "forty": 40, "fifty": 50, "sixty": 60, "seventy": 70, "eighty": 80, "ninety": 90}

// Number reads a count in digits, with commas between thousands, or in words
// below one thousand. It is false for anything else and for nought.
func Number(s string) (int, bool) {
	s = strings.ToLower(strings.ReplaceAll(s, ",", ""))
	if n, err := strconv.Atoi(s); err == nil {
		return n, n > 0
	}
	total := 0
	for _, w := range strings.FieldsFunc(s, func(r rune) bool { return r == ' ' || r == '-' || r == '\u00a0' }) {
		switch {
		case w == "and":
		case w == "hundred":
			total *= 100
		case units[w] > 0:
			total += units[w]
		default:
			return 0, false
		}
	}
	return total, total > 0
}

// subjectWords are the words that Subjects matches.
var subjectWords = func() map[string]bool {
	out := map[string]bool{}
	for _, w := range strings.Split(strings.TrimSuffix(strings.TrimPrefix(Subjects, "(?:"), ")"), "|") {
		if one, plural := strings.CutSuffix(w, "s?"); plural {
			out[one], out[one+"s"] = true, true
		} else {
			out[w] = true
		}
	}
	return out
}()

// speaksOfSubjects reports a word for what a study counts; it is far cheaper than
// the patterns that need one.
func speaksOfSubjects(s string) bool {
	const longest = 20
	var word [longest]byte
	n := 0
	for i := 0; i <= len(s); i++ {
		c := byte(' ')
		if i < len(s) {
			c = s[i] | 0x20 // a letter in lower case
		}
		if c >= 'a' && c <= 'z' {
			if n < longest {
				word[n] = c
			}
			n++
			continue
		}
		if n > 1 && n <= longest && subjectWords[string(word[:n])] {
			return true
		}
		n = 0
	}
	return false
}
