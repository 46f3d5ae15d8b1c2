package plain

import (
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/source"
)

// Notes stand below a table as paragraphs, each like the running text that goes
// on after them. A paragraph is taken for a note by its first characters (a
// mark), by what it declares (what values are, what letters stand for), or by
// being short; the first that is none of these ends the notes.

var (
	// noteOpens begins nothing but a note, however long it is.
	noteOpens = pattern.MustCompile(`^(?i:all (?:values|data|numbers|figures|p[- ]values|tests|estimates|models)\b|bold(?:ed|face)? (?:values?|type|numbers?|figures?|print)\b|conversion factors?\b|continuous variables (?:are|were|\(presented)\b|parametric variables are\b|unless |except where|notes?[.:—–]|note that\b|abbr\pL{2,12}\b|(?:the )?(?:data|values?|results|figures)\s+(?:are|were|was|is|represent|given|shown|in parenthes[ei]s|in brackets|presented|expressed|reported|denote|indicate)\b|values,|numbers? (?:in|are)\b|n, number|(?:the )?table (?:shows|presents|gives|legend)|this table\b|(?:a |the )?(?:positive |negative )?differences? (?:is|are|was|were|=)|(?:there (?:was|were) )?no (?:statistically )?significant differences? (?:were found )?between (?:the )?(?:\pL+ )?groups\.?$|means? (?:in|within|with)\b|different (?:letters|superscripts)|(?:small|capital|lower-?case) letters|shown (?:as|by|are)|presented as|expressed as|missing data\b|valid sample|analys[ie]s of variance|ordered by|source\b)`)
	// noteForms are forms inside a paragraph that only a note has.
	noteForms = pattern.MustCompile(`^[\w%()*†‡ .-]{1,14}\s?=\s|^[A-Z][\w-]*[A-Z0-9]\s(?:denotes?|indicates?|stands for|\pL[^.;,]+,\s[A-Z]\w*\s\pL)|\bin (?:parenthes[ei]s|brackets)\b|\b(?:in|of) (?:the|this) table\b|\b(?:are|is|were|was) (?:expressed|presented|given|shown|reported|displayed) as (?:the )?(?:mean|median|n\b|number|percent)`)
	noteStat  = pattern.MustCompile(`^(?i:(?:mean|median|n)s? ?(?:±|\(|\+))`)
	aDecimal  = pattern.MustCompile(`\d[.·]\d`)
	noteWords = pattern.MustCompile(`^(?i:notes?\b|data\b|values?\b|numbers? (?:in|are)\b|numbers? \(|figures in|means?\b|medians?\b|results (?:are|were)|n\s*=|p\s*[<=>≤]|p[- ]values?\b|percentages\b|based on|adjusted\b|comparisons? (?:of|between)|statistically significant|source:|key:|legend|negative|positive|scores?\b|ns[,: ]|mann|wilcoxon|chi|fisher|kruskal|student|paired|independent|anova|ancova|cochran|[−+-]\s)`)
	// expands is a list of what letters stand for.
	expands = pattern.MustCompile(`^[A-Z0-9\pL][\w\pL/&.%()αβγμ²₂ -]{0,24}?\s?(?:[,:=]|–|—)\s?\pL[^.]{2,}`)
	// abbreviated is the same without a sign between letters and words.
	abbreviated = pattern.MustCompile(`^[A-Z][A-Za-z0-9-]*[A-Z0-9]\s\pL[^.;]+;\s[A-Z][A-Za-z0-9-]*[A-Z0-9]\s\pL`)
	// symbolMark is a mark that is no letter or digit.
	symbolMark = pattern.MustCompile(`^(?:\*{1,4}|[†‡ǂ§¶#‖∥⁎∗^$¥€Δ∆△▲◊■●○•µ]{1,3})`)
	plainMark  = pattern.MustCompile(`^(?:[a-z]|\d{1,2})[).]?`)
)

const (
	longNote  = 1500 // characters
	shortNote = 100
	mostNotes = 20
)

// notes reads the notes below table t, whose rows end before line from, and
// gives the line after them.
func (r *reader) notes(t *paper.Table, from int) int {
	marks := cellMarks(t)
	i := from
	for n := 0; n < mostNotes; n++ {
		k := r.skipBlank(i)
		if k >= len(r.lines) || isCaption(r.text(r.lines[k])) || r.startsTable(k) {
			break
		}
		end := r.paragraphEnd(k, r.chunk(k))
		run := r.run(k, end)
		next := nextMark(t)
		if next.number == "" && firstNumber.MatchString(run.S) && r.below(end, secondNumber) {
			next.number = "1"
		}
		if !r.isNote(run.S, next, marks) && !r.betweenNotes(run.S, end, next, marks) {
			break
		}
		t.Notes = append(t.Notes, r.splitNotes(run, next, marks)...)
		i = end
	}
	r.raiseMarks(t)
	return i
}

// firstNumber and secondNumber begin notes whose marks are numbers; only both
// below one another tell them from other text.
var (
	firstNumber  = pattern.MustCompile(`^1[).]?\s?\pL`)
	secondNumber = pattern.MustCompile(`^2[).]?\s?\pL`)
)

// below reports whether the text after line k begins like the form.
func (r *reader) below(k int, form *pattern.Pattern) bool {
	k = r.skipBlank(k)
	return k < len(r.lines) && form.MatchString(strings.TrimSpace(r.text(r.lines[k])))
}

var (
	endMarks  = pattern.MustCompile(`(?:[\d)%]|[\s\x{00A0}])[\s\x{00A0}]?((?:[*†‡§¶#]+,?\s?)*(?:[a-z](?:,\s?)?){1,4})$`)
	oneLetter = pattern.MustCompile(`[a-z]`)
)

// cellMarks collects the letters that end cells behind a digit, a bracket or a
// space: they may be marks.
func cellMarks(t *paper.Table) map[string]bool {
	marks := map[string]bool{}
	add := func(s string) {
		if m := endMarks.FindStringSubmatch(s); m != nil {
			for _, l := range oneLetter.FindAllString(m[1], -1) {
				marks[l] = true
			}
		}
	}
	add(t.Caption.S)
	for i := range t.Cells {
		for _, part := range strings.Split(t.Cells[i].Text.S, "\n") {
			add(part)
		}
	}
	return marks
}

// isNote reports whether a paragraph below a table is one of its notes; next
// are the marks that would come next.
func (r *reader) isNote(s string, next following, marks map[string]bool) bool {
	s = strings.TrimSpace(specialSpace.Replace(s))
	if s == "" || utf8.RuneCountInString(s) > longNote || figureStart.MatchString(s) {
		return false
	}
	if _, sure := paper.ZoneOf(s); sure && looksHeading(s) {
		return false
	}
	if r.markAt(s, next, marks) > 0 {
		return true
	}
	if numberedHeading.MatchString(s) {
		return false
	}
	if (expands.MatchString(s) || abbreviated.MatchString(s)) && (strings.Count(s, ";")+strings.Count(s, ",") > 1 || len(s) < shortNote) && declares(s) {
		return true
	}
	switch {
	case noteOpens.MatchString(s):
		return true
	case noteStat.MatchString(s): // "Mean (SD)." is a note, "Mean (SD) mass was 12.4 (1.3) kg." a sentence
		return !aDecimal.MatchString(s)
	case noteWords.MatchString(s), noteForms.MatchString(s):
		return !sentences(s)
	}
	return false
}

// runningText has what a note has not: it points to tables and figures, or
// reports results.
var runningText = pattern.MustCompile(`\((?:see )?(?:Tables?|Figures?|Figs?\.?)[\s\x{00A0}]*\d|\bTable \d|\d[.·]\d.*\d[.·]\d.*\d[.·]\d`)

// betweenNotes reports whether s, no note by its look, stands above one with
// little between: then it is one too, if it is short and no heading.
func (r *reader) betweenNotes(s string, end int, next following, marks map[string]bool) bool {
	const ahead, most = 3, 800 // paragraphs, characters
	for n := 0; n < ahead; n++ {
		if utf8.RuneCountInString(s) > most || figureStart.MatchString(s) || numberedHeading.MatchString(s) {
			return false
		}
		if _, sure := paper.ZoneOf(s); sure || runningText.MatchString(s) {
			return false
		}
		k := r.skipBlank(end)
		if k >= len(r.lines) || isCaption(r.text(r.lines[k])) || r.startsTable(k) {
			return false
		}
		end = r.paragraphEnd(k, r.chunk(k))
		below := r.run(k, end).S
		if r.isNote(below, next, marks) {
			return !(looksHeading(s) && sentences(below))
		}
		s = below
	}
	return false
}

// declares reports whether s has the look of a list "X, words; Y, words" or
// "X: words", whose first part is an abbreviation.
func declares(s string) bool {
	k := strings.IndexAny(s, ",:=–—")
	if k <= 0 {
		k = strings.IndexByte(s, ' ')
	}
	if k <= 0 {
		return false
	}
	first := strings.TrimSpace(s[:k])
	capitals := 0
	for _, c := range first {
		if unicode.IsUpper(c) || unicode.IsDigit(c) {
			capitals++
		}
	}
	letters := utf8.RuneCountInString(first)
	if parts := strings.Split(s, ";"); len(parts) > 2 && capitals > 1 {
		return true
	}
	return letters <= 25 && (2*capitals >= letters || letters <= 2 || strings.Contains(s, ";") && letters <= 8)
}

// sentences reports whether s is running text: several sentences, none short.
func sentences(s string) bool {
	const long = 350
	return len(s) > long && strings.Count(s, ". ") >= 2
}

// following holds the letter and the number that the next note's mark would be;
// no number where notes have none.
type following struct{ letter, number string }

// nextMark tells what follows the notes that t has.
func nextMark(t *paper.Table) following {
	f := following{letter: "a"}
	for _, n := range t.Notes {
		f = f.after(n.Mark)
	}
	return f
}

func (f following) after(mark string) following {
	if len(mark) == 1 && mark[0] >= 'a' && mark[0] < 'z' {
		f.letter = string(mark[0] + 1)
	} else if k, err := strconv.Atoi(mark); err == nil {
		f.number = strconv.Itoa(k + 1)
	}
	return f
}

// markAt gives the length of the note mark that s begins with, 0 without one.
// expected is the mark that would come next; text has lost what was raised, so
// that "aRank test" must be told from "a rank test" and "adjusted".
func (r *reader) markAt(s string, expected following, marks map[string]bool) int {
	if loc := symbolMark.FindStringIndex(s); loc != nil {
		return loc[1]
	}
	loc := plainMark.FindStringIndex(s)
	if loc == nil || loc[1] >= len(s) {
		return 0
	}
	mark := strings.TrimRight(s[:loc[1]], ").:")
	rest := s[loc[1]:]
	next, _ := utf8.DecodeRuneInString(rest)
	if mark[0] <= '9' { // a number: only where a word is glued to it
		if mark == expected.number && (unicode.IsLetter(next) || next == ' ') || mark == "1" && loc[1] == 1 && unicode.IsUpper(next) {
			return loc[1]
		}
		return 0
	}
	known := mark == expected.letter || marks[mark]
	switch {
	case loc[1] > len(mark): // "a)" or "a."
		return loc[1]
	case !known:
		return 0
	case unicode.IsSpace(next) || next == '\u00A0':
		return loc[1]
	case unicode.IsUpper(next), unicode.IsDigit(next), sampleSize.MatchString(rest), strings.ContainsRune("(<=>≤≥", next):
		return loc[1]
	case unicode.IsLower(next):
		if r.glued(mark+firstWord(rest), firstWord(rest), 1) || mark != "a" && mark == expected.letter && marks[mark] && r.prose[strings.ToLower(mark+firstWord(rest))] <= 1 {
			return loc[1]
		}
	}
	return 0
}

// sampleSize begins a note that gives an n.
var sampleSize = pattern.MustCompile(`^[nN][\s\x{00A0}\x{2009}]*=`)

// glued reports whether a word is a mark with another word before or behind it:
// the file uses the other word, and the whole not more often than times in its
// running text.
func (r *reader) glued(whole, other string, times int) bool {
	if len(other) == 1 && !strings.Contains("np", strings.ToLower(other)) {
		return false
	}
	return r.prose[strings.ToLower(whole)] <= times && r.prose[strings.ToLower(other)] > 0
}

// countWords counts the words of the running text and those of table rows, in
// lower case.
func (r *reader) countWords() {
	r.prose, r.cells = map[string]int{}, map[string]int{}
	for i, l := range r.lines {
		if l.blank {
			continue
		}
		count := r.prose
		if r.tabbed(i) {
			count = r.cells
		}
		for _, w := range anyWord.FindAllString(r.text(l), -1) {
			count[strings.ToLower(w)]++
		}
	}
}

var anyWord = pattern.MustCompile(`\pL+`)

// splitNotes parts a paragraph into notes at the marks it holds: at its start
// and after a full stop, comma or semicolon.
func (r *reader) splitNotes(run paper.TextRun, next following, marks map[string]bool) []paper.FootNote {
	var notes []paper.FootNote
	mark, start := "", 0
	if n := r.markAt(run.S, next, marks); n > 0 {
		mark, start = trimMark(run.S[:n]), n
		next = next.after(mark)
	}
	finish := func(end int) {
		text := source.Trim(source.Slice(run, start, end))
		if text.S != "" || mark != "" {
			notes = append(notes, paper.FootNote{Mark: mark, Text: text})
		}
	}
	for i := start; i+1 < len(run.S); i++ {
		if run.S[i] != ' ' || i == 0 || !strings.ContainsRune(".;,", rune(run.S[i-1])) {
			continue
		}
		s := run.S[i+1:]
		n := r.markAt(s, next, marks)
		m := trimMark(s[:n])
		if n == 0 || m[0] >= 'a' && m[0] <= 'z' && m != next.letter {
			continue
		}
		finish(i)
		mark, start = m, i+1+n
		next = next.after(mark)
		i += n
	}
	finish(len(run.S))
	return notes
}

func trimMark(s string) string { return strings.Trim(s, "().: \u00A0\u2009") }

// after is the part of run behind offset i, without space and punctuation in
// front.
func after(run paper.TextRun, i int) paper.TextRun {
	rest := source.Slice(run, i, len(run.S))
	k := len(rest.S) - len(strings.TrimLeftFunc(rest.S, func(c rune) bool {
		return source.Blank(c) || strings.ContainsRune(".:|–—-", c)
	}))
	return source.Trim(source.Slice(rest, k, len(rest.S)))
}
