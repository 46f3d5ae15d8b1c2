package words_test

import (
	"fmt"
	"strings"
	"testing"

	"halfspan/extract/layout/internal/sketch"
	"halfspan/extract/layout/words"
	"halfspan/extract/paper"
)

// show writes the words of a frame, one line a Line; shifted words in braces.
func show(f words.Frame) string {
	var b strings.Builder
	for _, l := range f.Lines {
		for i, w := range l.Words {
			if i > 0 && !w.Glued {
				b.WriteByte(' ')
			}
			switch w.Shift {
			case paper.Raised:
				fmt.Fprintf(&b, "^{%s}", w.Text)
			case paper.Lowered:
				fmt.Fprintf(&b, "_{%s}", w.Text)
			default:
				b.WriteString(w.Text)
			}
		}
		b.WriteByte('\n')
	}
	return b.String()
}

func TestRead(t *testing.T) {
	cases := []struct {
		name string
		draw func(p *sketch.Page)
		want string
	}{
		{"plain line", func(p *sketch.Page) { p.Text(50, 700, "Colony mass was 12.4 kg.") },
			"Colony mass was 12.4 kg.\n"},
		{"mark after a number", func(p *sketch.Page) { p.Text(50, 700, "12.3^{a} and 11.1^{b,c} kg") },
			"12.3^{a} and 11.1^{b,c} kg\n"},
		{"power and subscript", func(p *sketch.Page) { p.Text(50, 700, "2.1 × 10^{3} spores, n_{1} = 42") },
			"2.1 × 10^{3} spores, n_{1} = 42\n"},
		{"mark before its note", func(p *sketch.Page) { p.Text(50, 700, "^{a}Values are means.") },
			"^{a}Values are means.\n"},
		{"marks printed after the line", func(p *sketch.Page) {
			end := p.Text(50, 700, "8.1")
			p.Text(end+4, 700, "± 1.0")
			p.Size = 6
			p.Text(end, 704, "b")
		}, "8.1^{b} ± 1.0\n"},
		{"cells are segments", func(p *sketch.Page) {
			p.Text(50, 700, "Mass, kg")
			p.Text(150, 700, "12.4 (1.3)")
			p.Text(220, 700, "11.1 (1.2)")
		}, "Mass, kg\n12.4 (1.3)\n11.1 (1.2)\n"},
		{"lines close together stay apart", func(p *sketch.Page) {
			p.Text(50, 700, "Syrup arm^{1} of")
			p.Text(50, 690, "the trial^{2}")
		}, "Syrup arm^{1} of\nthe trial^{2}\n"},
		{"bold by printing twice", func(p *sketch.Page) {
			p.Text(50, 700, "Results")
			p.Text(50, 700, "Results")
		}, "Results\n"},
		{"ligature and italic letter", func(p *sketch.Page) { p.Text(50, 700, "conﬁdence 𝑛 = 33") },
			"confidence n = 33\n"},
		{"letters spaced out", func(p *sketch.Page) { p.Spread = 20; p.Text(50, 700, "RESULTS OF FEEDING") },
			"RESULTS OF FEEDING\n"},
		{"digits spaced out are numbers", func(p *sketch.Page) { p.Spread = 30; p.Text(50, 700, "123456789") },
			"1 2 3 4 5 6 7 8 9\n"},
		{"fine print under a line is no subscript", func(p *sketch.Page) {
			p.Text(50, 700, "Syrup")
			p.Size = 6
			p.Text(50, 692, "Water and pollen")
		}, "Syrup\nWater and pollen\n"},
	}
	for _, c := range cases {
		for _, angle := range []int16{0, 90, 180, 270} {
			t.Run(fmt.Sprintf("%s at %d", c.name, angle), func(t *testing.T) {
				p := sketch.New(1, 600, 800)
				c.draw(p)
				turnPage(&p.GlyphPage, angle)
				frames := words.Read(&p.GlyphPage)
				if len(frames) != 1 || frames[0].Angle != angle {
					t.Fatalf("got %d frames, want one at %d degrees", len(frames), angle)
				}
				if got := show(frames[0]); got != c.want {
					t.Errorf("got:\n%swant:\n%s", got, c.want)
				}
			})
		}
	}
}

// turnPage turns the whole page counter-clockwise about the origin.
func turnPage(p *paper.GlyphPage, angle int16) {
	f := words.Frame{Angle: angle}
	for i := range p.Glyphs {
		g := &p.Glyphs[i]
		g.Box = f.ToPage(g.Box)
		o := f.ToPage(paper.Box{X0: g.Origin.X, Y0: g.Origin.Y, X1: g.Origin.X, Y1: g.Origin.Y})
		g.Origin, g.Angle = paper.Point{X: o.X0, Y: o.Y0}, g.Angle+angle
	}
}

func TestTurnAndBack(t *testing.T) {
	b := paper.Box{X0: 10, Y0: 20, X1: 110, Y1: 45}
	for _, angle := range []int16{0, 90, 180, 270} {
		f := words.Frame{Angle: angle}
		u := f.Upright(b)
		if u.X0 > u.X1 || u.Y0 > u.Y1 {
			t.Errorf("%d: box %v is inside out", angle, u)
		}
		if got := f.ToPage(u); got != b {
			t.Errorf("%d: got %v back, want %v", angle, got, b)
		}
	}
}

func TestSketchTurnsAsThePageDoes(t *testing.T) {
	p := sketch.New(1, 600, 800)
	p.Angle = 90
	p.Text(100, 50, "Mass 12.4^{a}")
	f := words.Read(&p.GlyphPage)
	if len(f) != 1 || f[0].Angle != 90 || show(f[0]) != "Mass 12.4^{a}\n" {
		t.Fatalf("got %+v", f)
	}
}
