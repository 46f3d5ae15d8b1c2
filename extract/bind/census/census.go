package census

import (
	"strings"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// Kind says who is counted.
type Kind uint8

// The kinds, from the start of a study to its end.
const (
	Enrolled Kind = iota // recruited, included, randomised, studied
	Finished             // completed, followed up, analysed
)

// Count is one count of the study's subjects.
type Count struct {
	N     int
	Kind  Kind
	Each  bool // of every group, not of the whole sample
	Place paper.Place
	Text  string // the words, as printed
}

// Census is what a paper's text counts of those who took part, in reading order.
type Census struct {
	Counts []Count
	Within bool // the same subjects stand under every condition: crossover, one group
	lost   bool // some left, were lost or were excluded
}

// fewest is the smallest count that is taken: below it, a count is of a part.
const fewest = 5

// sentenceMost is the length in bytes of the longest sentence that is read.
const sentenceMost = 700

// Of reads the counts of a paper's abstract, methods and results.
func Of(doc *paper.Document) *Census {
	c := &Census{Within: within.MatchString(doc.Title)}
	for i := range doc.Blocks {
		b := &doc.Blocks[i]
		if b.Kind != paper.Paragraph || b.Zone != paper.Abstract && b.Zone != paper.Methods && b.Zone != paper.Results {
			continue
		}
		s := b.Text.S
		c.Within = c.Within || b.Zone != paper.Results && within.MatchString(s)
		for start := 0; start < len(s); {
			end := start + sentenceEnd(s[start:])
			if end-start <= sentenceMost {
				c.sentence(b, start, end)
			}
			start = end
		}
	}
	return c
}

// sentenceEnd is the length of the sentence that s begins with.
func sentenceEnd(s string) int {
	for i := 0; i+2 < len(s); i++ {
		if s[i] == '\n' || (s[i] == '.' || s[i] == '?') && (s[i+1] == ' ' || s[i+1] == '\n') && !(s[i+2] >= 'a' && s[i+2] <= 'z') {
			return i + 1
		}
	}
	return len(s)
}

var (
	counted = pattern.MustCompile(`(?i)(?:^|[^\w.,–-])((?:[0-9]{1,3}(?:,[0-9]{3})+|[0-9]{1,6}|` + Words + `))\s+(?:(?:[a-z][a-z-]*|\([^()]{0,40}\)|,)\s+){0,4}?` + Subjects + `\b(?:\s*\([^()]{0,60}\))?`)
	nEach   = pattern.MustCompile(`(?i)\bn\s*=\s*([0-9]{1,6})\s*(?:` + Subjects + `\s*)?(?:,\s*)?(?:(?:for|in|per|from)\s+)?(?:each|every|per)\s+(?:\w+\s+){0,2}?(?:groups?|arms?|treatments?|conditions?)\b`)
	groupOf = pattern.MustCompile(`(?i)\b(?:two|three|four|five|six|both|all|each|equal)\b[^.;]{0,50}?\b(?:groups?|arms?)\s+(?:of|with|reached[^.;]{0,30}? of|consisted of|comprised|included|contained|had)\s+([0-9]{1,5}|` + Words + `)\s+(?:\w+\s+)?` + Subjects + `\b`)
	inEach  = pattern.MustCompile(`(?i)\b([0-9]{1,5}|` + Words + `)\s+(?:` + Subjects + `\s+)?(?:(?:in|for|to|from)\s+(?:each|every)|per)\s+(?:of\s+the\s+)?(?:\w+\s+){0,2}?(?:groups?|arms?)\b`)
	groupsN = pattern.MustCompile(`(?i)\b(?:two|three|four|five|six|seven|eight|nine|ten|[2-9]|1[0-9])\s+(?:\w+\s+){0,2}?groups?\s*\(\s*n\s*=\s*([0-9]{1,5})\s*(?:each)?\s*\)`)
	named   = pattern.MustCompile(`(?i)\b(?:enrolled|recruited|randomi[sz]ed|included|eligible)\b`)
	equal   = pattern.MustCompile(`(?i)\b(?:divided|allocated|assigned|randomi[sz]ed|distributed|split|separated|classified)\b[^.;]{0,60}?\b(two|three|four|five|six|seven|eight|2|3|4|5|6|7|8)\s+(?:\w+\s+)?equal(?:ly sized)?\s+(?:\w+\s+)?groups\b|\bequally\b[^.;]{0,30}?\binto\s+(two|three|four|five|six|seven|eight|2|3|4|5|6|7|8)\s+(?:\w+\s+){0,2}groups\b`)

	planned  = pattern.MustCompile(`(?i)\bpower\b|\bsample size\b|\brequired?\b|\bneeded\b|\bplanned\b|\bcalculat|\bdetect\b|\bwould\b|\bestimated that\b|\baimed? to\b|\btarget\b|\bscreened\b|\bapproached\b|\binvited\b|\bassessed for eligib|\bresponded\b|\bpilot\b|\bprevious(?:ly)? (?:stud|trial|report)|\bet al\b|\bin (?:this|these|their) stud(?:y|ies) of\b`)
	leaving  = pattern.MustCompile(`(?i)\bdrop(?:ped)?[- ]?outs?\b|\bwithdr[ae]w\w*|\blost\b|\bexclu[ds]\w*|\bdiscontinu\w*|\bdied\b|\bdeaths?\b|\bdeclined\b|\brefus\w+|\bmissing\b|\bineligible\b|\bdid not\b|\bunable\b|\bfailed\b|\bleft the\b|\bstopped\b|\bwere not\b|\bwas not\b|\bquit\b|\bpost-?pon`)
	finished = pattern.MustCompile(`(?i)\bcomplet(?:ed|ion|ers|ing)\b|\banaly[sz]ed\b|\bin the (?:final |present |main |primary |statistical )?analys[ie]s\b|\bfollowed[- ]up\b|\bremained\b|\bfinished\b|\bcontributed\b|\bdata (?:were|was|are) available\b|\bevaluable\b|\bavailable for\b|\bdata (?:from|of|for)\b`)
	enrolled = pattern.MustCompile(`(?i)\benrol\w+|\brecruit\w+|\bincluded\b|\binvolv\w+|\bcomprised\b|\bconsisted of\b|\bparticipated\b|\bparticipat\w+ in\b|\btook part\b|\brandomi[sz]\w+|\ballocated\b|\bassigned\b|\bdivided\b|\bstudied\b|\bvolunteered\b|\bconsent\w*|\bunderwent\b|\bentered\b|\bserved as\b|\bwere (?:selected|tested|examined|treated|investigated|given)\b|\breceived\b|\bsample of\b|\bstudy (?:population|sample)\b|\bin a\b.{0,80}\b(?:trial|study)\b`)
	inGroup  = pattern.MustCompile(`(?i)^[\s,]*(?:\([^()]*\)\s*)?(?:were\s+|was\s+)?(?:(?:randomly\s+|randomi[sz]ed\s+)?(?:allocated|assigned|randomi[sz]ed)\s+)?(?:in|to|into|from|of|on|for|per|with|receiving|received)\s+(?:(?:either|both|each|every|all)\s+(?:of\s+)?)?(?:the\s+)?(?:two\s+|three\s+|four\s+|study\s+|treatment\s+)*`)
	eachWord = pattern.MustCompile(`(?i)^[\s,]*(?:were\s+)?(?:in|per|for|to|from|of)?\s*(?:each|every)\s+(?:of\s+the\s+)?(?:\w+\s+){0,2}?(?:groups?|arms?|treatments?|conditions?)\b|^[\s,]*per\s+(?:group|arm)\b`)
	ofBefore = pattern.MustCompile(`(?i)(?:\bof|\bout of|\bamong|\bfrom|/)\s+(?:the\s+|these\s+|those\s+|all\s+|our\s+|a total of\s+)*$`)
	partWord = pattern.MustCompile(`(?i)(?:\bother|\banother|\bfurther|\badditional|\bremaining|\bonly|\bexcept|\bleast|\bmost|\bthan|\babout|\bevery|\bnext|\bfirst|\bof which|\bof whom|\bgroup of|\bboth|\bwhom|[0-9]%?\)?,? and|\band|\bor)\s+$`)
	joined   = pattern.MustCompile(`(?i)\s(?:of|in|to|at|among|for|with|by|from|and|or|mo|months?|weeks?|wk|days?|years?|hours?|h|min|mg|ml|g|kg|percent|the|were|was|had|per|group|groups|arm|arms|than|out)\s`)
	share    = pattern.MustCompile(`^[^()]{0,3}\([^()]*%|\([^()]*%[^()]*\)\s*$|^\s+[\w ]{0,30}\(\s*[0-9.·]+\s*%`)
	within   = pattern.MustCompile(`(?i)\bcross-?over(?:,| )[^.;]{0,40}?\b(?:trial|study|design|fashion|manner|randomi)|\brandomi[sz]ed,? (?:[a-z-]+,? )*cross-?over\b|\bwithin[- ](?:subjects?|participants?) (?:design|study|crossover|comparison)|\b(?:his|her|their|its) own controls?\b|\b(?:single|one)[- ](?:arm|group) (?:study|trial|design|pilot|pre)|\bcounter-?balanced\b`)
	armAfter = pattern.MustCompile(`(?i)^[^.;]{0,60}?\b(?:group|arm|controls?|placebo|condition)\b`)
)

// sentence takes the counts of one sentence of a block.
func (c *Census) sentence(b *paper.Block, from, to int) {
	s := b.Text.S[from:to]
	if !speaksOfSubjects(s) && !strings.Contains(s, "group") {
		return
	}
	counts := counted.FindAllStringSubmatchIndex(s, -1)
	grouped := strings.Contains(s, "group") || strings.Contains(s, "arm") || strings.Contains(s, "treatment") || strings.Contains(s, "condition")
	if len(counts) == 0 && !grouped || planned.MatchString(s) {
		return
	}
	var taken [][]int
	if grouped {
		taken = c.groups(b, from, s)
	}
	if len(counts) == 0 {
		return
	}
	left := leaving.MatchString(s)
	c.lost = c.lost || left
	done, began := finished.MatchString(s), enrolled.MatchString(s)
	if !done && !began {
		return
	}
	for _, m := range counts {
		n, ok := Number(s[m[2]:m[3]])
		if !ok || n < fewest || inside(taken, m[2]) || joined.MatchString(s[m[3]:m[1]]) {
			continue
		}
		k := Count{N: n, Kind: Enrolled, Text: strings.TrimSpace(s[m[2]:m[1]]), Place: b.Text.Between(from+m[2], from+m[1])}
		before, after := s[:m[2]], s[m[1]:]
		switch {
		case share.MatchString(s[m[3]:m[1]]) || share.MatchString(after):
			continue // "24 drones (57%)": part of the sample
		case eachWord.MatchString(after):
			k.Each = true
		case partWord.MatchString(before) && !ofBefore.MatchString(before):
			continue
		case armOf(after):
			continue
		}
		if leavers(s, m, left) {
			continue
		}
		if done && !strings.Contains(before, ".") && (finished.MatchString(clause(after)) || finished.MatchString(clauseBefore(before))) && !ofBefore.MatchString(before) {
			if !named.MatchString(k.Text) { // "the 25 enrolled colonies" are those enrolled
				k.Kind = Finished
			}
		}
		c.Counts = append(c.Counts, k)
	}
}

// groups takes what a sentence says of the size of every group: "n = 40 for each
// group", "two groups of 25 colonies", "divided into four equal groups". It gives
// the bytes that it has read.
func (c *Census) groups(b *paper.Block, from int, s string) (taken [][]int) {
	each := func(n, start, end int) {
		taken = append(taken, []int{start, end})
		c.Counts = append(c.Counts, Count{N: n, Each: true, Text: strings.TrimSpace(s[start:end]), Place: b.Text.Between(from+start, from+end)})
	}
	for _, p := range []*pattern.Pattern{nEach, groupOf, inEach, groupsN} {
		for _, m := range p.FindAllStringSubmatchIndex(s, -1) {
			if n, ok := Number(s[m[2]:m[3]]); ok && n >= 2 {
				each(n, m[0], m[1])
			}
		}
	}
	m := equal.FindStringSubmatchIndex(s)
	if m == nil {
		return taken
	}
	parts, _ := Number(s[max(m[2], m[4]):max(m[3], m[5])])
	for _, w := range counted.FindAllStringSubmatchIndex(s, -1) {
		if n, ok := Number(s[w[2]:w[3]]); ok && w[1] <= m[0]+len("divided") && parts > 1 && n%parts == 0 && n > parts {
			each(n/parts, w[2], m[1])
			return taken[:len(taken)-1] // the whole is counted there, too
		}
	}
	return taken
}

// inside reports that byte i lies in one of the spans.
func inside(spans [][]int, i int) bool {
	for _, sp := range spans {
		if sp[0] <= i && i < sp[1] {
			return true
		}
	}
	return false
}

// armOf reports that the words behind a count name one group: "to the syrup
// group", "in the control arm".
func armOf(after string) bool {
	m := inGroup.FindString(after)
	return m != "" && armAfter.MatchString(after[len(m):]) && !strings.Contains(firstWords(after[len(m):], 4), "two") || m != "" && armAfter.MatchString(m)
}

func firstWords(s string, n int) string {
	f := strings.Fields(s)
	return strings.Join(f[:min(n, len(f))], " ")
}

// leavers reports that a count is of those who left: the verb of leaving stands
// nearer to it than any of staying.
func leavers(s string, m []int, left bool) bool {
	if !left {
		return false
	}
	after := clause(s[m[1]:])
	l := leaving.FindStringIndex(after)
	if l == nil {
		return leaving.MatchString(clauseBefore(s[:m[2]]))
	}
	d := finished.FindStringIndex(after)
	e := enrolled.FindStringIndex(after)
	return (d == nil || l[0] < d[0]) && (e == nil || l[0] < e[0])
}

// clause is the text up to the next count or clause mark.
func clause(s string) string {
	if i := strings.IndexAny(s, ";:"); i >= 0 {
		s = s[:i]
	}
	for _, stop := range []string{", and ", ", but ", " while ", " whereas ", ", of "} {
		if i := strings.Index(s, stop); i >= 0 {
			s = s[:i]
		}
	}
	return s
}

func clauseBefore(s string) string {
	if i := strings.LastIndexAny(s, ";:,"); i >= 0 {
		s = s[i+1:]
	}
	return s
}

// Whole is the size of the whole sample at the start of the study or, if later,
// of those whom the later results are about. False where the text's counts
// disagree or, later, where some left and nothing says how many stayed.
func (c *Census) Whole(later bool) (Count, bool) {
	start, okStart := c.agreed(Enrolled)
	end, okEnd := c.agreed(Finished)
	switch {
	case okEnd && okStart && end.N > start.N:
		return Count{}, false
	case okEnd && (later || !okStart):
		return end, true
	case later && (c.lost || c.has(Finished)):
		return Count{}, false
	}
	return start, okStart
}

// Each is the size of every group, where the text states one for all.
func (c *Census) Each() (Count, bool) {
	var got Count
	for _, k := range c.Counts {
		if !k.Each {
			continue
		}
		if got.N != 0 && got.N != k.N {
			return Count{}, false
		}
		if got.N == 0 {
			got = k
		}
	}
	return got, got.N > 0
}

// agreed is the number of the whole sample that the counts of one kind name:
// all of them, or the largest where it is named twice or is the sum of the
// others, which then count parts of it.
func (c *Census) agreed(kind Kind) (Count, bool) {
	var top Count
	seen, others, sum := 0, 0, 0
	for _, k := range c.Counts {
		switch {
		case k.Kind != kind || k.Each:
		case k.N > top.N:
			others, sum = others+seen, sum+top.N
			top, seen = k, 1
		case k.N == top.N:
			seen++
		default:
			others, sum = others+1, sum+k.N
		}
	}
	if seen > 0 && (others == 0 || seen > 1 && seen >= others || sum == top.N) {
		return top, true
	}
	return Count{}, false
}

func (c *Census) has(kind Kind) bool {
	for _, k := range c.Counts {
		if k.Kind == kind && !k.Each {
			return true
		}
	}
	return false
}
