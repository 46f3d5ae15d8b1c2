package glyphs

import (
	"os"
	"path/filepath"
	"testing"
)

// papers is where real papers may lie, outside the project.
const papers = "../../../../shared/papers"

func readPaper(tb testing.TB, pattern string) []byte {
	tb.Helper()
	found, _ := filepath.Glob(filepath.Join(papers, pattern))
	if len(found) == 0 {
		tb.Skipf("no papers at %s", papers)
	}
	b, err := os.ReadFile(found[0])
	if err != nil {
		tb.Fatal(err)
	}
	return b
}

// BenchmarkPaper reads a whole paper, opening included, as a worker does.
func BenchmarkPaper(b *testing.B) {
	content := readPaper(b, "labelled/pdf/s12966*.pdf")
	b.ReportAllocs()
	pages, glyphs := 0, 0
	for range b.N {
		d, err := Open(content)
		if err != nil {
			b.Fatal(err)
		}
		for n := 1; n <= d.NumPage(); n++ {
			p, err := d.Page(n)
			if err != nil {
				b.Fatal(err)
			}
			pages++
			glyphs += len(p.Glyphs)
		}
	}
	if glyphs == 0 {
		b.Fatal("no glyphs")
	}
	b.ReportMetric(float64(b.Elapsed().Microseconds())/float64(pages), "µs/page")
	b.ReportMetric(float64(glyphs)/float64(pages), "glyphs/page")
}
