package layout_test

import (
	"encoding/binary"
	"testing"

	"halfspan/extract/layout"
	"halfspan/extract/layout/internal/sketch"
	"halfspan/extract/paper"
)

// glyphBytes is how many bytes of a fuzz input make one glyph.
const glyphBytes = 12

// FuzzArrange hands over arbitrary glyphs on up to three pages: nothing may
// panic, no glyph that prints something may get lost and the result must not
// depend on the run.
func FuzzArrange(f *testing.F) {
	seeds := 0
	for _, pages := range [][]*sketch.Page{invented(), {sketch.New(1, 600, 800)}} {
		f.Add(encode(pages), int16(0))
		f.Add(encode(pages), int16(90))
		seeds += 2
	}
	f.Add([]byte{}, int16(0))
	f.Add([]byte{255, 127, 255, 127, 0, 128, 0, 128, 1, 0, 65, 0, 0, 0, 0, 0, 0, 0, 0, 0, 200, 1, 66, 1}, int16(45))
	if seeds < 4 {
		f.Fatal("no seeds were loaded")
	}
	f.Fuzz(func(t *testing.T, data []byte, angle int16) {
		if len(data) > 40_000 {
			return
		}
		pages := decode(data, angle)
		a := layout.Arrange(pages)
		text := a.Text()
		if again := layout.Arrange(decode(data, angle)).Text(); again != text {
			t.Fatalf("two runs differ:\n%q\n%q", text, again)
		}
		inText := letters(text)
		inBlocks := 0
		for _, b := range a.Blocks {
			inBlocks += letters(b.Text.S)
			for i, r := range b.Text.Runs {
				if r.Start >= r.End || r.End > len(b.Text.S) || i > 0 && r.Start < b.Text.Runs[i-1].End {
					t.Fatalf("run %+v does not fit %q", r, b.Text.S)
				}
			}
			if b.Kind != paper.TableBlock && b.Text.S == "" {
				t.Fatal("an empty block")
			}
			if b.Table != nil {
				inBlocks += inText // what a table holds is for the grid's own tests
			}
		}
		if inBlocks < inText {
			t.Fatalf("the text has %d letters, the blocks only %d", inText, inBlocks)
		}
	})
}

// letters counts letters and digits; hyphens at line ends may go.
func letters(s string) int {
	n := 0
	for _, r := range s {
		if r >= '0' && r <= '9' || r >= 'A' && r <= 'Z' || r >= 'a' && r <= 'z' {
			n++
		}
	}
	return n
}

func encode(pages []*sketch.Page) []byte {
	var out []byte
	for p, page := range pages {
		for _, g := range page.Glyphs {
			var b [glyphBytes]byte
			binary.LittleEndian.PutUint16(b[0:], uint16(g.Box.X0/4))
			binary.LittleEndian.PutUint16(b[2:], uint16(g.Origin.Y/4))
			binary.LittleEndian.PutUint16(b[4:], uint16((g.Box.X1-g.Box.X0)/4))
			binary.LittleEndian.PutUint16(b[6:], uint16(g.Size/4))
			b[8] = byte(p)
			if g.Text != "" {
				b[9] = g.Text[0]
			}
			out = append(out, b[:]...)
		}
	}
	return out
}

func decode(data []byte, angle int16) []paper.GlyphPage {
	pages := make([]paper.GlyphPage, 3)
	for i := range pages {
		pages[i].Page = paper.Page{Number: i + 1, Box: paper.Box{X1: 60000, Y1: 80000}}
		pages[i].Fonts = []string{"Sketch"}
	}
	for ; len(data) >= glyphBytes; data = data[glyphBytes:] {
		x, y := int32(int16(binary.LittleEndian.Uint16(data[0:])))*4, int32(int16(binary.LittleEndian.Uint16(data[2:])))*4
		w, size := int32(binary.LittleEndian.Uint16(data[4:]))*4, int32(int16(binary.LittleEndian.Uint16(data[6:])))*4
		g := paper.Glyph{Text: string(rune(data[9])), Size: size, Angle: int16(data[10])*int16(data[11]) + angle,
			Box: paper.Box{X0: x, Y0: y - size/5, X1: x + w, Y1: y + size*4/5}, Origin: paper.Point{X: x, Y: y}}
		p := &pages[int(data[8])%3]
		p.Glyphs = append(p.Glyphs, g)
	}
	return pages
}

func BenchmarkArrange(b *testing.B) {
	pages := glyphPages(invented())
	glyphs := 0
	for i := range pages {
		glyphs += len(pages[i].Glyphs)
	}
	b.ReportAllocs()
	for b.Loop() {
		if a := layout.Arrange(pages); len(a.Blocks) < 10 {
			b.Fatal("blocks are missing")
		}
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(glyphs), "ns/glyph")
}
