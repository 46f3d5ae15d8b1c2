package grid

import (
	"cmp"
	"slices"

	"halfspan/extract/layout/words"
	"halfspan/extract/paper"
)

// tok is one word in the upright frame, y growing downwards.
type tok struct {
	x0, x1, top, bot int
	base             int // of its line, so that raised marks sort with their host
	size             int
	line, word       int32 // index into Frame.Lines and Line.Words
	bold             bool
	shift            paper.StyleKind
	glued            bool
	text             string
	page             int32
	w                *words.Word
}

func (t *tok) mid() int { return (t.x0 + t.x1) / 2 }

// box is an area of the frame, y growing downwards.
type box struct{ x0, top, x1, bot int }

func (b box) width() int        { return b.x1 - b.x0 }
func (b box) holdsX(x int) bool { return x >= b.x0 && x <= b.x1 }

func (b box) union(o box) box {
	if b == (box{}) {
		return o
	}
	return box{min(b.x0, o.x0), min(b.top, o.top), max(b.x1, o.x1), max(b.bot, o.bot)}
}

// rule is a drawn line: across (y, x0..x1) or upright (x, from..to in y).
type rule struct{ x0, x1, y int }

// segment is a words.Line as the page's lines are first cut: words with no gap
// wider than an em.
type segment struct {
	box
	base, size int
	first, n   int // tokens
	chars      int
	bold       bool
}

// sheet is one frame prepared: tokens in reading order of lines, rules sorted.
type sheet struct {
	frame    *words.Frame
	toks     []tok
	segs     []segment
	rules    []rule // across, joined where they continue one another; by y, then x0
	drawn    []rule // across, as drawn
	uprights []box
	images   []box
	bounds   box
	bodySize int // the font size that most letters have
	page     int
	words    map[string]bool // that the paper prints, for joining broken ones
}

const (
	maxToks  = 60000 // words of one frame looked at; a page of a paper has about 1,000
	maxRules = 20000
)

func newSheet(f *words.Frame, bodySize int) *sheet {
	s := &sheet{frame: f, bodySize: bodySize}
	s.bounds = flip(f.Bounds)
	sizes := map[int]int{}
	for li := range f.Lines {
		l := &f.Lines[li]
		if len(s.toks)+len(l.Words) > maxToks {
			break
		}
		g := segment{box: flip(l.Box), base: -int(l.Base), size: max(int(l.Size), 1), first: len(s.toks), bold: true}
		for wi := range l.Words {
			w := &l.Words[wi]
			b := flip(w.Box)
			s.toks = append(s.toks, tok{
				x0: b.x0, x1: b.x1, top: b.top, bot: b.bot, base: g.base, size: max(int(w.Size), 1),
				line: int32(li), word: int32(wi), bold: w.Bold, shift: w.Shift, glued: w.Glued, text: w.Text, w: w,
			})
			g.chars += len(w.Glyphs)
			g.bold = g.bold && (w.Bold || w.Shift != 0)
		}
		g.n = len(s.toks) - g.first
		if g.n == 0 {
			continue
		}
		sizes[(g.size+5)/10] += g.chars
		s.segs = append(s.segs, g)
	}
	if s.bodySize == 0 {
		s.bodySize = commonest(sizes) * 10
	}
	s.addRules(f.Rules)
	for _, m := range f.Images {
		s.images = append(s.images, flip(m))
	}
	return s
}

// commonest is the key with the highest count, the smaller one of equals.
func commonest(counts map[int]int) int {
	best, n := 0, 0
	for k, c := range counts {
		if c > n || c == n && k < best {
			best, n = k, c
		}
	}
	return best
}

func flip(b paper.Box) box {
	return box{int(b.X0), -int(b.Y1), int(b.X1), -int(b.Y0)}
}

const (
	thin    = 300 // a rule is at most this thick
	sameY   = 150 // rules this close in y lie on one line
	bridged = 800
)

// addRules sorts the drawn lines and joins those that continue one another, as
// the borders of neighbouring cells do.
func (s *sheet) addRules(rules []paper.Box) {
	for i, r := range rules {
		if i >= maxRules {
			break
		}
		b := flip(r)
		switch {
		case b.bot-b.top <= thin && b.x1-b.x0 >= 500:
			s.drawn = append(s.drawn, rule{b.x0, b.x1, (b.top + b.bot) / 2})
		case b.x1-b.x0 <= thin && b.bot-b.top >= 500:
			s.uprights = append(s.uprights, b)
		}
	}
	slices.SortStableFunc(s.drawn, func(a, b rule) int {
		return cmp.Or(cmp.Compare(a.y, b.y), cmp.Compare(a.x0, b.x0))
	})
	for i := 0; i < len(s.drawn); {
		j := i + 1
		for j < len(s.drawn) && s.drawn[j].y-s.drawn[i].y <= sameY {
			j++
		}
		s.rules = append(s.rules, joinRules(s.drawn[i:j])...)
		i = j
	}
}

// joinRules joins the pieces of one height into as few rules as cover them.
func joinRules(pieces []rule) []rule {
	byX := slices.Clone(pieces)
	slices.SortStableFunc(byX, func(a, b rule) int { return cmp.Compare(a.x0, b.x0) })
	out := byX[:0:0]
	for _, p := range byX {
		if n := len(out); n > 0 && p.x0 <= out[n-1].x1+bridged {
			out[n-1].x1 = max(out[n-1].x1, p.x1)
			continue
		}
		out = append(out, p)
	}
	return out
}

// rulesIn gives the rules with y in [top, bot] that overlap x0..x1, in order.
func rulesIn(rules []rule, b box) []rule {
	i, _ := slices.BinarySearchFunc(rules, b.top, func(r rule, y int) int { return cmp.Compare(r.y, y) })
	var out []rule
	for ; i < len(rules) && rules[i].y <= b.bot; i++ {
		if rules[i].x0 < b.x1 && b.x0 < rules[i].x1 {
			out = append(out, rules[i])
		}
	}
	return out
}

// toPage takes a box of the sheet back to the page.
func (s *sheet) toPage(b box) paper.Box {
	return s.frame.ToPage(paper.Box{X0: int32(b.x0), Y0: int32(-b.bot), X1: int32(b.x1), Y1: int32(-b.top)})
}
