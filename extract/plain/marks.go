package plain

import (
	"bytes"
	"sort"
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// In text a raised mark stands on the line like any letter: "0.65a", "meansa",
// "(0-10)c, mm". Where a note of the table explains it, it gets back the style
// it had in print, so that what reads the table sees one form only.

// raiseMarks marks the letters and symbols in caption and cells that a note of
// the table explains as raised.
func (r *reader) raiseMarks(t *paper.Table) {
	for i := range t.Cells {
		r.lower(&t.Cells[i].Text)
	}
	has := map[rune]bool{}
	for _, n := range t.Notes {
		for _, c := range n.Mark {
			if !unicode.IsDigit(c) && !unicode.IsUpper(c) {
				has[c] = true
			}
		}
	}
	if len(has) == 0 {
		return
	}
	r.raise(&t.Caption, has, 1)
	for i := range t.Cells {
		r.raise(&t.Cells[i].Text, has, 0)
	}
}

// runTogether is a name that ends in lowered digits or times, with a small word printed
// against it: the mark-up had no space after the digit ("NO2at night").
var runTogether = pattern.MustCompile(`\b\pL[\pL\d–-]*?(\d[\d–-]*(?:h|min)?)(?:at|in|of|and|to|for|with|on|by|from)\b`)

// namedAlone is such a name by itself.
var namedAlone = pattern.MustCompile(`\b\pL[\pL\d–-]*\d[\d–-]*(?:h|min)?[\s,;.)]`)

// lower marks the digit in such names as lowered, if the file also prints the
// name by itself, or one that differs in its digits alone.
func (r *reader) lower(run *paper.TextRun) {
	defer sortStyles(run)
	r.lowerBetween(run)
	for _, m := range runTogether.FindAllStringSubmatchIndex(run.S, -1) {
		name := run.S[m[0]:m[3]]
		if bytes.Contains(r.src.B, []byte(name+" ")) || bytes.Contains(r.src.B, []byte(name+",")) || r.namesLike(name) {
			run.Styles = append(run.Styles, paper.Style{Start: m[2], End: m[3], Kind: paper.Lowered})
		}
	}
}

// twoNames are two names of capitals printed against each other, the first with
// a digit at its end ("NO2CLO4h").
var twoNames = pattern.MustCompile(`\b(\p{Lu}{2,}(\d))(\p{Lu}{2,})\d?`)

// lowerBetween marks the digit between two such names as lowered, if the file
// prints each of them by itself.
func (r *reader) lowerBetween(run *paper.TextRun) {
	for _, m := range twoNames.FindAllStringSubmatchIndex(run.S, -1) {
		first, second := run.S[m[2]:m[3]], run.S[m[6]:m[7]]
		if bytes.Contains(r.src.B, []byte(first+" ")) && bytes.Contains(r.src.B, []byte(" "+second)) {
			run.Styles = append(run.Styles, paper.Style{Start: m[4], End: m[5], Kind: paper.Lowered})
		}
	}
}

// namesLike reports whether the file prints a name by itself that differs from
// this one in its digits alone, of which it has more than one number.
func (r *reader) namesLike(name string) bool {
	if r.shapes == nil {
		r.shapes = map[string]bool{}
		for _, m := range namedAlone.FindAllString(string(r.src.B), -1) {
			r.shapes[withoutDigits(m[:len(m)-1])] = true
		}
	}
	shape := withoutDigits(name)
	return strings.Count(shape, "#") > 1 && r.shapes[shape]
}

func sortStyles(run *paper.TextRun) {
	sort.SliceStable(run.Styles, func(i, j int) bool { return run.Styles[i].Start < run.Styles[j].Start })
}

// raise marks what is raised in one text; times is how often the text itself
// counts among the running text of the file.
func (r *reader) raise(run *paper.TextRun, has map[rune]bool, times int) {
	defer sortStyles(run)
	s := run.S
	for i := 0; i < len(s); {
		c, w := utf8.DecodeRuneInString(s[i:])
		end := i + w
		if has[c] {
			if unicode.IsLetter(c) && c < utf8.RuneSelf {
				end = r.letterMark(s, i, has, times)
			} else if next, _ := utf8.DecodeRuneInString(s[end:]); unicode.IsLetter(next) || i == 0 {
				end = i // "µg"; a cell that begins with the sign
			}
			if end > i {
				run.Styles = append(run.Styles, paper.Style{Start: i, End: end, Kind: paper.Raised})
			}
		}
		i = max(end, i+w)
	}
}

var (
	// markList is one letter, or several with commas.
	markList = pattern.MustCompile(`^[a-z](?:,\s?[a-z]\b)*`)
	// namedByLetter is a word that a letter behind it names a case of.
	namedByLetter = pattern.MustCompile(`(?i)(?:group|arm|type|model|class|grade|stage|hepatitis|vitamin|phase|category|part|panel|table|figure|level|study|or|and|versus|vs\.?)$`)
)

// endings are letters that make another form of a word: behind a word that
// stands in tables alone they are no mark.
const endings = "sdenry"

// gluedInRows is like glued for a word that stands in table rows alone.
func (r *reader) gluedInRows(word, mark string, times int) bool {
	const shortest = 3
	return len(word) >= shortest && !strings.Contains(endings, mark[:1]) &&
		r.cells[strings.ToLower(word)] > 0 && r.prose[strings.ToLower(word+mark)] <= times
}

// letterMark gives the end of the mark of letters that begins at i of s, i if
// these letters are none.
func (r *reader) letterMark(s string, i int, has map[rune]bool, times int) int {
	end := i + len(markList.FindString(s[i:]))
	for k, c := range s[i:end] {
		if !unicode.IsLetter(c) || has[c] {
			continue
		}
		if k == 0 {
			return i
		}
		end = i + strings.LastIndexByte(s[i:i+k], ',') // "weighed, n (%)" with the mark a: n is none
		break
	}
	next, _ := utf8.DecodeRuneInString(s[end:])
	if end < len(s) && (unicode.IsLetter(next) || unicode.IsDigit(next) || strings.ContainsRune("-–'/", next)) {
		return i
	}
	prev, _ := utf8.DecodeLastRuneInString(s[:i])
	switch {
	case i == 0:
		return i
	case unicode.IsLetter(prev):
		word := lastWord(s[:i])
		if !r.glued(word+s[i:end], word, times) && !r.gluedInRows(word, s[i:end], times) {
			return i
		}
	case unicode.IsSpace(prev):
		before := strings.TrimRightFunc(s[:i], unicode.IsSpace)
		behind := strings.TrimLeftFunc(s[end:], unicode.IsSpace)
		last, _ := utf8.DecodeLastRuneInString(before)
		first, _ := utf8.DecodeRuneInString(behind)
		switch {
		case namedByLetter.MatchString(before):
			return i
		case unicode.IsLower(first): // "a dose"
			return i
		case unicode.IsDigit(last) && strings.ContainsRune("dghlms", rune(s[i])): // "5 d"
			return i
		}
	case !unicode.IsDigit(prev) && !strings.ContainsRune(")]%*†‡§¶#,", prev):
		return i
	}
	return end
}
