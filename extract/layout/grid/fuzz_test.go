package grid

import (
	"encoding/binary"
	"fmt"
	"strings"
	"testing"

	"halfspan/extract/layout/words"
	"halfspan/extract/paper"
)

// FuzzPictures reads drawn pages: whatever is printed where, tables keep their
// invariants and no word is in two regions.
func FuzzPictures(f *testing.F) {
	seeds := 0
	for _, file := range caseFiles(f) {
		for _, c := range readCases(f, file) {
			f.Add(c.picture)
			seeds++
		}
	}
	if seeds < 40 {
		f.Fatalf("only %d seeds", seeds)
	}
	f.Fuzz(func(t *testing.T, picture string) {
		if len(picture) > 1<<14 {
			return
		}
		readChecked(t, drawPicture(picture))
	})
}

// FuzzGlyphs reads pages whose glyphs, rules and pictures stand anywhere.
func FuzzGlyphs(f *testing.F) {
	f.Add([]byte("Table 1 12.4 (1.3) 0123456789abcdefghijklmnopqrstuvwxyz"))
	f.Add([]byte(strings.Repeat("\x00\x10T\x01\x00\x20a\x01\x7f\xffb\x00", 40)))
	f.Fuzz(func(t *testing.T, data []byte) {
		if len(data) > 1<<13 {
			return
		}
		readChecked(t, []paper.GlyphPage{scattered(data)})
	})
}

// scattered makes a page of the bytes: five of them place a glyph or a rule.
func scattered(data []byte) paper.GlyphPage {
	page := paper.GlyphPage{Page: paper.Page{Number: 1, Box: paper.Box{X1: 60000, Y1: 84000}}}
	for _, w := range []string{"Table", "2."} {
		for _, r := range w {
			x := int32(len(page.Glyphs)) * 500
			page.Glyphs = append(page.Glyphs, paper.Glyph{Text: string(r), Size: 1000, Origin: paper.Point{X: x, Y: 80000}, Box: paper.Box{X0: x, Y0: 79800, X1: x + 450, Y1: 80800}})
		}
	}
	for ; len(data) >= 5; data = data[5:] {
		x, y := int32(binary.BigEndian.Uint16(data)), int32(binary.BigEndian.Uint16(data[2:]))
		if data[4]%16 == 0 {
			page.Rules = append(page.Rules, paper.Box{X0: x, Y0: y, X1: x + int32(data[4])*200, Y1: y + 50}, paper.Box{X0: y, Y0: x, X1: y + 50, Y1: x + 9000})
			continue
		}
		size := int32(data[4]%7+4) * 200
		page.Glyphs = append(page.Glyphs, paper.Glyph{
			Text: string(rune(' ' + data[4]%95)), Size: size, Angle: int16(data[4]/64) * 90, Bold: data[4]%3 == 0,
			Origin: paper.Point{X: x, Y: y}, Box: paper.Box{X0: x, Y0: y - size/4, X1: x + size/2, Y1: y + size*3/4},
		})
	}
	return page
}

func readChecked(t *testing.T, pages []paper.GlyphPage) {
	var sheets []Sheet
	for i := range pages {
		frames := words.Read(&pages[i])
		for k := range frames {
			sheets = append(sheets, Sheet{Page: pages[i].Page.Number, Frame: &frames[k]})
		}
	}
	for i, regions := range FindAll(sheets, 0) {
		for k := range regions {
			r := &regions[k]
			for _, part := range [][]Ref{r.Caption, r.Body, r.Notes} {
				for _, ref := range part {
					if int(ref.Line) >= len(sheets[i].Frame.Lines) || int(ref.Word) >= len(sheets[i].Frame.Lines[ref.Line].Words) {
						t.Fatalf("no word %v", ref)
					}
				}
			}
			if !r.Joined {
				table := r.Read(sheets[i].Page)
				checkTable(t, &table)
			}
		}
	}
}

// bigPicture is a page with a table of n rows of cols columns.
func bigPicture(n, cols int) string {
	var b strings.Builder
	b.WriteString("  Table 1. Mass by station and week\n  " + strings.Repeat("-", 14+cols*13) + "\n")
	row := func(head string, cell func(int) string) {
		fmt.Fprintf(&b, "  %-14s", head)
		for c := range cols {
			fmt.Fprintf(&b, "%-13s", cell(c))
		}
		b.WriteString("\n")
	}
	row("Station", func(c int) string { return fmt.Sprintf("Week %d", c) })
	b.WriteString("  " + strings.Repeat("-", 14+cols*13) + "\n")
	for i := range n {
		row(fmt.Sprintf("Hive %d", i), func(c int) string { return fmt.Sprintf("%d.%d (1.%d)", 9+i%4, c%10, i%10) })
	}
	b.WriteString("  " + strings.Repeat("-", 14+cols*13) + "\n")
	return b.String()
}

func BenchmarkRead(b *testing.B) {
	pages := drawPicture(bigPicture(40, 8))
	frames := words.Read(&pages[0])
	sheets := []Sheet{{Page: 1, Frame: &frames[0]}}
	b.ReportAllocs()
	for b.Loop() {
		regions := FindAll(sheets, fontSize)
		if len(regions[0]) != 1 {
			b.Fatalf("%d regions", len(regions[0]))
		}
		if t := regions[0][0].Read(1); t.Rows != 41 || t.Cols != 9 {
			b.Fatalf("%d by %d", t.Rows, t.Cols)
		}
	}
}

// A page of very many words, rules and captions is given up or read within the
// limits; it may not take longer than the square of anything.
func TestHugePages(t *testing.T) {
	var many strings.Builder
	for i := range 1500 {
		fmt.Fprintf(&many, "  Table %d. 12 34 56 78 90 12 34 56 78 90 12 34 56 78 90 12 34 56 78 90 12 34 56 78 90 12 34 56 78 90 12 34 56 78 90 12 34 56 78 90 12 34 56 78 90 12 34 56 78 90 12 34 56 78 90 12 34 56\n", i)
	}
	tall := bigPicture(3000, 12)
	ruled := strings.Repeat("  Table 1. Mass\n  | 12 | 13 | 14 | 15 | 16 | 17 | 18 | 19 | 20 | 21 | 22 | 23 | 24 | 25 |\n  ---- ---- ---- ---- ---- ---- ---- ---- ----\n", 700)
	for name, picture := range map[string]string{"captions": many.String(), "rows": tall, "rules": ruled} {
		t.Run(name, func(t *testing.T) {
			for _, table := range readPages(drawPicture(picture)) {
				checkTable(t, &table)
			}
		})
	}
}
