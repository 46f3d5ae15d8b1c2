package pdf

import (
	"sort"
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"

	"halfspan/extract/paper"
)

// near is how far apart, in 1/100 point, the two readers may place the same
// glyph; they differ by less than 1.2 points (99th percentile).
const near = 150

// moved is how far apart the same character may stand: one reader drops a
// spacing here and there.
const moved = 400

// place finds glyphs by where they stand.
type place struct{ x, y int32 }

func placeOf(p paper.Point) place { return place{p.X / (2 * near), p.Y / (2 * near)} }

// matching ties the glyphs of two readings of one page together.
type matching struct {
	a, b []paper.Glyph
	toB  []int // for each glyph of a its counterpart in b, or -1
	toA  []int
}

// match pairs the glyphs that stand in the same place, those with the same
// text first.
func match(a, b []paper.Glyph) *matching {
	m := &matching{a: a, b: b, toB: make([]int, len(a)), toA: make([]int, len(b))}
	at := make(map[place][]int, len(b))
	for j := range b {
		m.toA[j] = -1
		at[placeOf(b[j].Origin)] = append(at[placeOf(b[j].Origin)], j)
	}
	for i := range a {
		m.toB[i] = -1
	}
	// Both readers go through the page in the same order nearly always.
	j := 0
	for i := range a {
		for k := j; k < len(b) && k < j+3; k++ {
			if m.toA[k] < 0 && within(a[i], b[k], near) && a[i].Text == b[k].Text {
				m.tie(i, k)
				j = k + 1
				break
			}
		}
	}
	for _, pass := range []struct {
		same bool
		most int32
	}{{true, near}, {true, moved}, {false, near}} {
		for i := range a {
			if m.toB[i] < 0 {
				if k := m.find(at, i, pass.same, pass.most); k >= 0 {
					m.tie(i, k)
				}
			}
		}
	}
	return m
}

func (m *matching) tie(i, j int) { m.toB[i], m.toA[j] = j, i }

func within(a, b paper.Glyph, most int32) bool {
	dx, dy := a.Origin.X-b.Origin.X, a.Origin.Y-b.Origin.Y
	return dx <= most && dx >= -most && dy <= most && dy >= -most
}

// find looks for the nearest free glyph of b within most of glyph i of a.
func (m *matching) find(at map[place][]int, i int, sameText bool, most int32) int {
	best, bestDist := -1, int64(1)<<62
	p := placeOf(m.a[i].Origin)
	reach := (most + 2*near - 1) / (2 * near)
	for dx := -reach; dx <= reach; dx++ {
		for dy := -reach; dy <= reach; dy++ {
			for _, j := range at[place{p.x + dx, p.y + dy}] {
				if m.toA[j] >= 0 || !within(m.a[i], m.b[j], most) || sameText && m.a[i].Text != m.b[j].Text {
					continue
				}
				x, y := int64(m.a[i].Origin.X-m.b[j].Origin.X), int64(m.a[i].Origin.Y-m.b[j].Origin.Y)
				if d := x*x + y*y; d < bestDist {
					best, bestDist = j, d
				}
			}
		}
	}
	return best
}

// telling gives what counts of a glyph's text when two readings are compared:
// digits, decimal marks and the signs that make or join numbers. All short
// hyphens are one.
func telling(text string) string {
	if len(text) == 1 {
		if isTelling(rune(text[0])) {
			return text
		}
		return ""
	}
	plainASCII := true
	for i := 0; i < len(text); i++ {
		plainASCII = plainASCII && text[i] < 0x80
	}
	if !plainASCII {
		text = norm.NFKC.String(text)
	}
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\u2010' || r == '\u2011':
			return '-'
		case isTelling(r):
			return r
		}
		return -1
	}, text)
}

func isTelling(r rune) bool {
	if r < 0x80 {
		return r >= '0' && r <= '9' || r == '.' || r == '-' || r == '+' || r == '<' || r == '>' || r == '='
	}
	switch r {
	case '·', '±', '−', '–', '—', '≤', '≥', '×', '∙', '⋅':
		return true
	}
	return unicode.IsDigit(r)
}

// alike reports whether two glyphs say the same as far as numbers go.
func alike(a, b string) bool { return a == b || telling(a) == telling(b) }

// dispute is a number that the readers read differently.
type dispute struct {
	box    paper.Box
	ours   string // "" where this reader sees nothing there
	engine string
}

// disputes lists the numbers of a page in which the readings differ, in
// content order of a. Numbers that only one reading has in another place come
// out as equal multisets and are none.
func (m *matching) disputes() []dispute {
	var out []dispute
	doneA, doneB := repeats(m.a, m.toB), repeats(m.b, m.toA)
	for i := range m.a {
		j := m.toB[i]
		if doneA[i] || j >= 0 && alike(m.a[i].Text, m.b[j].Text) || j < 0 && telling(m.a[i].Text) == "" {
			continue
		}
		d := dispute{}
		d.ours, d.box = number(m.a, i, doneA)
		if j >= 0 {
			var box paper.Box
			d.engine, box = number(m.b, j, doneB)
			d.box = d.box.Union(box)
		}
		out = append(out, d)
	}
	for j := range m.b {
		if m.toA[j] < 0 && !doneB[j] && telling(m.b[j].Text) != "" {
			d := dispute{}
			d.engine, d.box = number(m.b, j, doneB)
			out = append(out, d)
		}
	}
	return unmoved(out)
}

// repeats marks the glyphs without a counterpart that print over another one of
// the same text: one reader drops what is printed twice, the other may not.
func repeats(all []paper.Glyph, to []int) []bool {
	out := make([]bool, len(all))
	var at map[place][]int
	for i := range all {
		if to[i] >= 0 || telling(all[i].Text) == "" {
			continue
		}
		if at == nil {
			at = make(map[place][]int, len(all))
			for k := range all {
				if to[k] >= 0 {
					at[placeOf(all[k].Origin)] = append(at[placeOf(all[k].Origin)], k)
				}
			}
		}
		p := placeOf(all[i].Origin)
		for dx := int32(-1); dx <= 1; dx++ {
			for dy := int32(-1); dy <= 1; dy++ {
				for _, k := range at[place{p.x + dx, p.y + dy}] {
					out[i] = out[i] || all[k].Text == all[i].Text && within(all[i], all[k], overprint)
				}
			}
		}
	}
	return out
}

// overprint is how far apart two prints of the same glyph are at most.
const overprint = 60

// unmoved drops the disputes that cancel out: the same numbers in both
// readings, in another place.
func unmoved(all []dispute) []dispute {
	var ours, theirs []string
	for _, d := range all {
		ours, theirs = append(ours, d.ours), append(theirs, d.engine)
	}
	sort.Strings(ours)
	sort.Strings(theirs)
	if strings.Join(ours, " ") == strings.Join(theirs, " ") {
		return nil
	}
	return all
}

// number gives the stretch of digits and signs around glyph i on its line, and
// its box; done marks the glyphs it took.
func number(all []paper.Glyph, i int, done []bool) (string, paper.Box) {
	from, to := i, i
	for from > 0 && i-from < 24 && joined(all[from-1], all[from]) && telling(all[from-1].Text) != "" {
		from--
	}
	for to+1 < len(all) && to-i < 24 && joined(all[to], all[to+1]) && telling(all[to+1].Text) != "" {
		to++
	}
	var s strings.Builder
	var box paper.Box
	for k := from; k <= to; k++ {
		s.WriteString(all[k].Text)
		box = box.Union(all[k].Box)
		done[k] = true
	}
	return s.String(), box
}

// joined reports whether b follows a without a gap.
func joined(a, b paper.Glyph) bool {
	if a.Angle != b.Angle {
		return false
	}
	var along, across int32
	switch a.Angle {
	case 90:
		along, across = b.Box.Y0-a.Box.Y1, b.Origin.X-a.Origin.X
	case 180:
		along, across = a.Box.X0-b.Box.X1, b.Origin.Y-a.Origin.Y
	case 270:
		along, across = a.Box.Y0-b.Box.Y1, b.Origin.X-a.Origin.X
	default:
		along, across = b.Box.X0-a.Box.X1, b.Origin.Y-a.Origin.Y
	}
	gap := a.Size / 5
	return along <= gap && along >= -2*gap && across <= a.Size/3 && across >= -a.Size/3
}
