package prose

import (
	"sort"
	"strconv"
	"strings"

	"halfspan/extract/bind/convention"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// fromHeading says that a size stands in a table's column heading.
const fromHeading = "in a column heading"

// arm is one group of the paper, by the words that name it.
type arm struct {
	name  string   // as first printed
	key   []string // its content words, lower case, in order
	seen  int      // how often it was named
	group bool     // it was named as a group or arm, or in a table's heading
	sizes []size   // every n printed right behind its name
}

// cast is who takes part in the paper: its arms with their sizes.
type cast struct {
	arms  []arm
	index map[string]int
	first map[string][]int // the arms by the first word of their key
}

// learn collects the arms and their sizes from running text and the column
// headings of tables.
func (f *finder) learn() {
	f.cast.index, f.cast.first = map[string]int{}, map[string][]int{}
	for i := range f.doc.Blocks {
		b := &f.doc.Blocks[i]
		switch {
		case b.Table != nil:
			f.learnTable(b.Table)
		case b.Zone == paper.References || b.Zone == paper.Introduction || b.Kind != paper.Paragraph && b.Kind != paper.Note && b.Kind != paper.Caption:
		default:
			f.learnText(b)
		}
	}
}

func (f *finder) learnTable(t *paper.Table) {
	for k := range t.Cells {
		c := &t.Cells[k]
		if c.Row >= max(t.HeadRows, 1) {
			break
		}
		h := grammar.ParsePhrase(convention.Text(&c.Text))
		if len(h.N) != 1 {
			continue
		}
		it := h.N[0]
		name := strings.TrimRight(strings.TrimSpace(c.Text.S[:it.Start]), " (,;:[\n")
		f.addArm(name, &it, &c.Text, fromHeading)
	}
}

// learnText reads "syrup (n = 42)" and "the syrup group".
func (f *finder) learnText(b *paper.Block) {
	s := b.Text.S
	if strings.Contains(s, "n") || strings.Contains(s, "N") {
		f.learnSizes(b)
	}
	for _, m := range groupNamed.FindAllStringSubmatch(s, -1) {
		f.addArm(nameBefore(m[1]), nil, nil, "")
	}
}

// pairedWithin is how many bytes apart two sizes may stand to name the arms of
// one comparison: "syrup (n = 42) or water (n = 44)".
const pairedWithin = 160

// learnSizes takes the sizes that stand in pairs behind their arms' names.
func (f *finder) learnSizes(b *paper.Block) {
	r := grammar.Read(convention.Text(&b.Text))
	var at []int
	for k := range r.Items {
		if it := &r.Items[k]; it.Kind == grammar.KindSampleSize && it.Bracket > 0 && it.Alone {
			at = append(at, k)
		}
	}
	for i, k := range at {
		it := &r.Items[k]
		if lost.MatchString(around(b.Text.S, it.Start)) {
			continue // who left, not who took part
		}
		paired := i > 0 && it.Start-r.Items[at[i-1]].End < pairedWithin || i+1 < len(at) && r.Items[at[i+1]].Start-it.End < pairedWithin
		if paired {
			f.addArm(nameBefore(b.Text.S[:r.Brackets[it.Bracket-1].Start]), it, &b.Text, "elsewhere in the text")
		}
	}
}

var (
	groupNamed = pattern.MustCompile(`([\p{L}][\p{L}0-9+/-]*(?: [\p{L}0-9][\p{L}0-9+/-]*){0,3}) (?:group|arm)s?\b`)
	stopName   = map[string]bool{}
	weakName   = map[string]bool{}
)

func init() {
	for _, w := range strings.Fields(`the a an and or of in to for with from by at on was were is are be been had has have than vs versus between both each all either
		either two three four other same this that these those which while whereas but as receiving received receive given taking took assigned allocated
		randomized randomised randomly into within among per respective respectively compared only no-one our their its one another study age treated using without
		including included completed analysed analyzed patients participants subjects women men children followed not also those who either control's remaining
		mean median value values difference differences change total number score scores showed in between-group within-group between-groups i.e e.g after before during`) {
		stopName[w] = true
	}
	for _, w := range strings.Fields(`group groups arm arms patients participants subjects women men children individuals cohort users`) {
		weakName[w] = true
	}
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

// nameKey is the content words of a name.
func nameKey(name string) []string {
	var out []string
	for _, w := range strings.FieldsFunc(strings.ToLower(name), func(r rune) bool { return strings.ContainsRune(" \u00a0\n-/,()*†‡§¶#:", r) }) {
		if !weakName[w] && !stopName[w] {
			out = append(out, w)
		}
	}
	return out
}

func (f *finder) addArm(name string, n *grammar.Item, run *paper.TextRun, from string) {
	key := nameKey(name)
	if len(key) == 0 || len(key) > 4 || len(key) == 1 && len(key[0]) < 2 {
		return
	}
	for _, w := range key {
		if timeUnits[w] || w == "baseline" || w == "week" || w == "follow" || w == "percent" || unitWords[w] || w == "total" || w == "post" {
			return
		}
	}
	if _, err := strconv.Atoi(key[0]); err == nil && len(key) == 1 {
		return
	}
	k := strings.Join(key, " ")
	i, ok := f.cast.index[k]
	if !ok {
		i = len(f.cast.arms)
		f.cast.index[k] = i
		f.cast.first[key[0]] = append(f.cast.first[key[0]], i)
		f.cast.arms = append(f.cast.arms, arm{name: name, key: key})
	}
	a := &f.cast.arms[i]
	a.seen++
	if n == nil {
		a.group = true
		return
	}
	a.group = a.group || from == fromHeading
	if v, err := strconv.Atoi(n.Value.Value); err == nil && v > 3 {
		a.sizes = append(a.sizes, size{n: v, at: n.Span, text: run.S[n.Start:n.End], run: run, from: from})
	}
}

// sizeOf gives the arm's size: that of the column headings where those agree
// (of the text for a baseline value), else that of the text where it agrees.
func (a *arm) sizeOf(baseline bool) (size, bool) {
	heads, okHeads := agreed(a.sizes, true)
	text, okText := agreed(a.sizes, false)
	switch {
	case okHeads && okText && baseline:
		return text, true
	case okHeads:
		return heads, true
	case okText && !hasHeads(a.sizes):
		return text, true
	}
	return size{}, false
}

// lost are the words of sentences that count who left.
var lost = pattern.MustCompile(`(?i)\b(?:drop-?outs?|dropped out|withdr[ae]w\w*|lost to|excluded|exclusion|discontinu\w+|died|deaths?|refus\w+|declined|adverse|missing)\b`)

// around is the stretch of 200 bytes round a byte.
func around(s string, at int) string {
	return strings.ToValidUTF8(s[max(0, at-100):min(len(s), at+100)], "")
}

func hasHeads(sizes []size) bool {
	for _, s := range sizes {
		if s.from == fromHeading {
			return true
		}
	}
	return false
}

// agreed gives the size that all statements of one sort name.
func agreed(sizes []size, heads bool) (size, bool) {
	found, ok := size{}, false
	for _, s := range sizes {
		if (s.from == fromHeading) != heads {
			continue
		}
		if ok && s.n != found.n {
			return size{}, false
		}
		if !ok {
			found, ok = s, true
		}
	}
	return found, ok
}

// sized gives the arm whose size counts for arm i: itself, or, where it was
// never printed with one, the only arm with a size whose name holds all its
// words. A paper that gives a size for one arm only is not trusted with it.
func (c *cast) sized(i int, baseline bool) (size, bool) {
	with, found := 0, i
	for k := range c.arms {
		if _, ok := c.arms[k].sizeOf(baseline); ok {
			with++
		}
	}
	if with < 2 {
		return size{}, false
	}
	if len(c.arms[i].sizes) == 0 {
		found = -1
		for k := range c.arms {
			if len(c.arms[k].sizes) == 0 || !holds(c.arms[k].key, c.arms[i].key) {
				continue
			}
			if found >= 0 {
				return size{}, false
			}
			found = k
		}
		if found < 0 {
			return size{}, false
		}
	}
	return c.arms[found].sizeOf(baseline)
}

// holds reports whether all words of b stand in a.
func holds(a, b []string) bool {
	for _, w := range b {
		ok := false
		for _, v := range a {
			ok = ok || v == w
		}
		if !ok {
			return false
		}
	}
	return true
}

// mention is an arm named in a sentence.
type mention struct {
	arm        int
	start, end int
}

// mentions finds the arms named between two bytes, the longest name first, in
// order of place.
func (p *para) mentions(from, to int) []mention {
	if start, end := p.sentence(from); start == from && end == to {
		if got, ok := p.arms[from]; ok {
			return got
		}
		got := p.mentionsIn(from, to)
		p.arms[from] = got
		return got
	}
	return p.mentionsIn(from, to)
}

func (p *para) mentionsIn(from, to int) []mention {
	toks := p.r.Tokens
	var out []mention
	for i := p.token(from); i < len(toks) && toks[i].Start < to; i++ {
		if toks[i].Kind != grammar.TokWord && toks[i].Kind != grammar.TokNumber {
			continue
		}
		best, bestEnd, bestLen := -1, i, 0
		for _, a := range p.f.cast.first[toks[i].Value] {
			arm := &p.f.cast.arms[a]
			if len(arm.key) <= bestLen {
				continue
			}
			if end, ok := p.named(i, arm); ok && (arm.seen > 1 || len(arm.sizes) > 0 || groupNoun[p.r.Tokens[end-1].Value]) {
				best, bestEnd, bestLen = a, end, len(arm.key)
			}
		}
		if best >= 0 {
			out = append(out, mention{best, toks[i].Start, toks[bestEnd-1].End})
			i = bestEnd - 1
		}
	}
	sort.SliceStable(out, func(a, b int) bool { return out[a].start < out[b].start })
	return out
}

var groupNoun = map[string]bool{"group": true, "groups": true, "arm": true, "arms": true}

// named reports whether the arm's words begin at token i. A single word must be
// followed by "group" or "arm", or be a name that is printed with its size or
// in capitals.
func (p *para) named(i int, a *arm) (int, bool) {
	toks := p.r.Tokens
	k := i
	for _, w := range a.key {
		for k < len(toks) && k > i && (toks[k].Kind == grammar.TokDash || toks[k].Kind == grammar.TokSlash || weakName[toks[k].Value] || toks[k].Value == "and" || toks[k].Kind == grammar.TokPlus) {
			k++
		}
		if k >= len(toks) || toks[k].Value != w {
			return i, false
		}
		k++
	}
	if k < len(toks) && (weakName[toks[k].Value]) {
		return k + 1, true
	}
	if len(a.key) > 1 || len(a.sizes) > 0 && a.group {
		return k, true
	}
	if k+1 < len(toks) && toks[k].Kind == grammar.TokOpen && toks[k+1].Value == "n" {
		return k, true // "syrup (n = 42)"
	}
	printed := p.s[toks[i].Start:toks[i].End]
	return k, strings.ToUpper(printed) == printed && len(printed) > 1
}
