package grid

import (
	"cmp"
	"slices"
	"strings"
	"unicode"
)

// line is what stands on one baseline inside a region, from left to right.
type line struct {
	box
	base, size int
	toks       []int
}

// run is a stretch of a line without a wide gap.
type run struct {
	box
	toks []int
}

// linesIn gives the lines of the words whose middle is inside b, from top to
// bottom.
func (s *sheet) linesIn(b box) []line { return s.lines(b, false) }

// linesFrom is linesIn with the whole of each segment that begins inside b: text
// may be wider than the table it belongs to.
func (s *sheet) linesFrom(b box) []line { return s.lines(b, true) }

func (s *sheet) lines(b box, whole bool) []line {
	lo, _ := slices.BinarySearchFunc(s.segs, b.top, func(g segment, y int) int { return cmp.Compare(g.base, y) })
	var out []line
	for gi := lo; gi < len(s.segs) && s.segs[gi].base <= b.bot; gi++ {
		g := &s.segs[gi]
		if g.x1 < b.x0 || g.x0 > b.x1 {
			continue
		}
		n := len(out) - 1
		fresh := n < 0 || g.base-out[n].base > max(100, min(g.size, out[n].size)/5)
		for i := g.first; i < g.first+g.n; i++ {
			t := &s.toks[i]
			if whole && !b.holdsX(g.x0) || !whole && !b.holdsX(t.mid()) {
				continue
			}
			if fresh {
				out = append(out, line{base: g.base})
				n, fresh = len(out)-1, false
			}
			l := &out[n]
			l.toks = append(l.toks, i)
			if t.shift == 0 {
				l.size = max(l.size, t.size)
			}
			l.box = l.box.union(box{t.x0, t.top, t.x1, t.bot})
		}
	}
	for i := range out {
		l := &out[i]
		slices.SortStableFunc(l.toks, func(a, b int) int { return cmp.Compare(s.toks[a].x0, s.toks[b].x0) })
		if l.size == 0 {
			l.size = s.toks[l.toks[0]].size
		}
		l.top, l.bot = l.base-l.size*3/4, l.base+l.size/4
	}
	return out
}

// runs cuts a line at gaps of at least gap hundredths of its font size.
func (s *sheet) runs(l *line, gap int) []run {
	var out []run
	right := 0
	for k, i := range l.toks {
		t := &s.toks[i]
		if k == 0 || (t.x0-right)*100 >= gap*l.size {
			out = append(out, run{box: box{t.x0, l.top, t.x1, l.bot}})
			right = t.x1
		}
		r := &out[len(out)-1]
		r.toks = append(r.toks, i)
		right = max(right, t.x1)
		r.x1 = right
	}
	return out
}

func (s *sheet) join(toks []int) string {
	var b strings.Builder
	for _, i := range toks {
		if b.Len() > 0 && !s.toks[i].glued {
			b.WriteByte(' ')
		}
		b.WriteString(s.toks[i].text)
	}
	return b.String()
}

func (s *sheet) joinLines(lines [][]int) string {
	var all []int
	for _, l := range lines {
		all = append(all, l...)
	}
	return s.join(all)
}

// isProse reports whether a run reads like running text in the page's own size.
func (s *sheet) isProse(r *run) bool {
	if len(r.toks) < 5 || r.width() < 10*s.bodySize {
		return false
	}
	letters, all, same := 0, 0, 0
	for _, i := range r.toks {
		t := &s.toks[i]
		if abs(t.size-s.bodySize)*100 <= 4*s.bodySize {
			same++
		}
		for _, c := range t.text {
			all++
			if unicode.IsLetter(c) {
				letters++
			}
		}
	}
	return same*2 > len(r.toks) && letters*100 >= 60*all
}

// isFigure reports whether a text reads as a value rather than as words: a
// number with what is printed round numbers, a dash, "NA".
func isFigure(text string) bool {
	text = strings.TrimSpace(text)
	if text == "" {
		return false
	}
	switch strings.ToLower(text) {
	case "-", "–", "—", "−", "na", "n/a", "nr", "ns", "n.s.", "nd", "ref", "ref.", "reference", "...", "…", "(ref)", "ne", "n.a.":
		return true
	}
	digits, letters := 0, 0
	for _, r := range text {
		switch {
		case unicode.IsDigit(r):
			digits++
		case unicode.IsLetter(r):
			letters++
		}
	}
	if digits == 0 {
		return false
	}
	starts := startsFigure(text)
	low := strings.ToLower(text)
	if strings.HasPrefix(low, "p ") || strings.HasPrefix(low, "p=") || strings.HasPrefix(low, "p<") || strings.HasPrefix(low, "p=") {
		starts = true
		letters--
	}
	for _, w := range []string{"reference", "ref", "to"} {
		if strings.Contains(low, w) && starts {
			letters -= len(w)
		}
	}
	return starts && letters <= max(1, digits)
}

// startsFigure reports whether the first thing printed is a number, after signs,
// brackets and marks.
func startsFigure(text string) bool {
	for _, r := range text {
		switch {
		case unicode.IsDigit(r):
			return true
		case strings.ContainsRune("([-–−+±<>≤≥=~∼.·$£€*†‡§ ", r):
		default:
			return false
		}
	}
	return false
}

// hasUnit reports whether a figure is one number followed by a word, as doses
// and times in headings are: "78 mg/ml", "6 weeks".
func hasUnit(text string) bool {
	f := strings.Fields(text)
	return len(f) == 2 && strings.IndexFunc(f[1], unicode.IsDigit) < 0 && strings.IndexFunc(f[1], unicode.IsLetter) >= 0 &&
		f[1][0] != '(' && strings.Trim(f[0], "0123456789.,·") == ""
}

// statisticWords are what headings that only name a statistic are made of.
var statisticWords = map[string]bool{
	"mean": true, "means": true, "median": true, "sd": true, "se": true, "sem": true, "iqr": true, "ci": true, "n": true, "no": true,
	"or": true, "and": true, "range": true, "min": true, "max": true, "m": true, "s": true, "d": true, "e": true, "std": true,
	"deviation": true, "standard": true, "error": true, "percent": true, "hr": true, "rr": true, "freq": true, "frequency": true,
}

// isStatistic reports whether a heading only names a statistic: "Mean (SD)",
// "mean ± SE", "n (%)", "OR (95% CI)".
func isStatistic(text string) bool {
	words := strings.FieldsFunc(strings.ToLower(text), func(r rune) bool { return !unicode.IsLetter(r) })
	for _, w := range words {
		if !statisticWords[w] {
			return false
		}
	}
	return len(words) > 0 && strings.ContainsAny(text, "(±%,/") && !isSize(text)
}

// isSize reports whether a heading is only a sample size: "(n = 42)".
func isSize(text string) bool {
	low := strings.ToLower(strings.Trim(strings.TrimSpace(text), "()[] "))
	return strings.HasPrefix(low, "n =") || strings.HasPrefix(low, "n=")
}

// isHeadFigure reports whether a figure is of the kinds that stand in column
// headings: sample sizes, percent levels, years, doses are told by isFigure
// already; what is left are bare years and small counts in brackets.
func isHeadFigure(text string) bool {
	t := strings.Trim(strings.TrimSpace(text), "()[] ")
	low := strings.ToLower(t)
	switch {
	case isSize(text):
		return true
	case strings.HasPrefix(low, "95") && strings.Contains(low, "%") && len(low) <= 8:
		return true
	case len(t) == 4 && (strings.HasPrefix(t, "19") || strings.HasPrefix(t, "20")) && strings.Trim(t, "0123456789") == "":
		return true
	}
	return false
}

func firstRune(s string) rune {
	for _, r := range s {
		return r
	}
	return 0
}

func lastRune(s string) rune {
	var last rune
	for _, r := range s {
		last = r
	}
	return last
}
