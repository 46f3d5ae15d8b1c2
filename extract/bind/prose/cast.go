package prose

import (
	"strconv"
	"strings"

	"halfspan/extract/bind/census"
	"halfspan/extract/bind/convention"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// arm is one group of the paper, by the words that name it.
type arm struct {
	name  string   // as first printed
	key   []string // its content words, lower case, in order
	seen  int      // how often it was named
	group bool     // it was named as a group or arm, or in a table
	table bool     // results of tables are about it
	sizes []size   // every n printed with its name
}

// alias is one way to name an arm: its key, or a shorter one.
type alias struct {
	key []string
	arm int
}

// cast is who takes part in the paper: its arms with their sizes.
type cast struct {
	arms  []arm
	index map[string]int   // the arms by their key
	names map[string]alias // by their words
	first map[string][]string

	doses map[string]int // how often a dose was named as a group

	totals []size // of all arms together, in the tables' columns of totals
}

// learn collects the arms and their sizes from the results of the tables, from
// running text and from the column headings of tables.
func (f *finder) learn(tables []result.Result) {
	f.cast.index, f.cast.names, f.cast.first = map[string]int{}, map[string]alias{}, map[string][]string{}
	f.cast.doses = map[string]int{}
	f.enlist(tables)
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
	f.shorten()
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
		f.addPrinted(name, &it, &c.Text, fromHeading)
	}
}

// learnText reads "syrup (n = 42)", "the syrup group" and "the syrup group (SG)".
func (f *finder) learnText(b *paper.Block) {
	s := b.Text.S
	if strings.Contains(s, "n") || strings.Contains(s, "N") {
		f.learnSizes(b)
	}
	for _, m := range groupNamed.FindAllStringSubmatch(s, -1) {
		f.addPrinted(nameBefore(m[1]), nil, nil, "")
	}
	for _, m := range groupCount.FindAllStringSubmatchIndex(s, -1) {
		f.countOf(b, m)
	}
	for _, m := range doseGroup.FindAllStringSubmatch(s, -1) {
		f.dose(strings.ReplaceAll(m[1], ",", ""), strings.ToLower(m[2]), m[1]+" "+m[2])
	}
	for _, m := range abbreviated.FindAllStringSubmatchIndex(s, -1) {
		f.abbreviate(nameBefore(s[:m[3]]), s[m[4]:m[5]])
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
			f.addPrinted(nameBefore(b.Text.S[:r.Brackets[it.Bracket-1].Start]), it, &b.Text, fromText)
		}
	}
}

// countOf reads "42 colonies were assigned to the syrup group".
func (f *finder) countOf(b *paper.Block, m []int) {
	n, ok := census.Number(b.Text.S[m[2]:m[3]])
	if !ok || n <= 3 || lost.MatchString(around(b.Text.S, m[0])) {
		return
	}
	const most = 4
	if a := f.arm(b.Text.S[m[4]:m[5]], most); a != nil {
		a.seen++
		a.group = true
		a.sizes = append(a.sizes, size{n: n, text: b.Text.S[m[2]:m[1]], place: b.Text.Between(m[2], m[1]), from: fromText})
	}
}

// addPrinted adds an arm as it is printed, with the n beside its name, if any.
func (f *finder) addPrinted(name string, n *grammar.Item, run *paper.TextRun, from string) {
	const most = 4
	a := f.arm(name, most)
	if a == nil {
		return
	}
	a.seen++
	if n == nil {
		a.group = true
		return
	}
	a.group = a.group || from == fromHeading
	if v, err := strconv.Atoi(n.Value.Value); err == nil && v > 3 {
		a.sizes = append(a.sizes, size{n: v, text: run.S[n.Start:n.End], place: run.Between(n.Start, n.End), from: from})
	}
}

// arm gives the arm of that name, which is new if nothing was named so before;
// nil where the words cannot name an arm or are more than most.
func (f *finder) arm(name string, most int) *arm {
	key := nameKey(name)
	if len(key) == 0 || len(key) > most || len(key) == 1 && len(key[0]) < 2 {
		return nil
	}
	for _, w := range key {
		if timeUnits[w] && !dosed(key) || noArm[w] || unitWords[w] && !dosed(key) {
			return nil
		}
	}
	if _, err := strconv.Atoi(key[0]); err == nil && len(key) == 1 {
		return nil
	}
	k := strings.Join(key, " ")
	i, ok := f.cast.index[k]
	if !ok {
		i = len(f.cast.arms)
		f.cast.index[k] = i
		f.cast.arms = append(f.cast.arms, arm{name: name, key: key})
		f.cast.call(key, i)
	}
	return &f.cast.arms[i]
}

// call lets words name an arm, unless they name one already.
func (c *cast) call(key []string, arm int) {
	k := strings.Join(key, " ")
	if _, known := c.names[k]; known {
		return
	}
	c.names[k] = alias{key, arm}
	c.first[key[0]] = append(c.first[key[0]], k)
}

// abbreviate lets "SG" name the arm of "the syrup group (SG)", or the other way
// round where the tables have the short form only.
func (f *finder) abbreviate(name, short string) {
	long, abbr := nameKey(name), nameKey(short)
	if len(long) == 0 || len(abbr) != 1 || noArm[long[0]] {
		return
	}
	a, okA := f.cast.index[strings.Join(long, " ")]
	b, okB := f.cast.index[abbr[0]]
	switch {
	case okA && (!okB || len(f.cast.arms[b].sizes) == 0):
		f.cast.rename(abbr, a)
	case okB && (!okA || len(f.cast.arms[a].sizes) == 0):
		f.cast.rename(long, b)
	}
}

// rename lets words name an arm, whatever they named before.
func (c *cast) rename(key []string, arm int) {
	c.arms[arm].seen++
	k := strings.Join(key, " ")
	if _, known := c.names[k]; known {
		c.names[k] = alias{key, arm}
		return
	}
	c.call(key, arm)
}

// dose adds the arm of "the 400-mg group"; one that is named only once is
// none.
func (f *finder) dose(number, unit, name string) {
	k := number + " " + unit
	if a, known := f.cast.names[k]; known {
		f.cast.arms[a.arm].seen++
		return
	}
	const often = 2
	if f.cast.doses[k]++; f.cast.doses[k] < often {
		return
	}
	i := len(f.cast.arms)
	f.cast.index[k] = i
	f.cast.arms = append(f.cast.arms, arm{name: name, key: []string{number, unit}, seen: often, group: true})
	f.cast.call([]string{number, unit}, i)
}

// lost are the words of sentences that count who left.
var lost = pattern.MustCompile(`(?i)\b(?:drop-?outs?|dropped out|withdr[ae]w\w*|lost to|excluded|exclusion|discontinu\w+|died|deaths?|refus\w+|declined|adverse|missing)\b`)

// around is the stretch of 200 bytes round a byte.
func around(s string, at int) string {
	return strings.ToValidUTF8(s[max(0, at-100):min(len(s), at+100)], "")
}
