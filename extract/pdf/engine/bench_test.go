package engine

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

func BenchmarkPage(b *testing.B) {
	e, err := Shared(nil)
	if err != nil {
		b.Fatal(err)
	}
	d, err := e.Open(readPaper(b, "labelled/pdf/s12966*.pdf"))
	if err != nil {
		b.Fatal(err)
	}
	defer d.Close()
	b.ReportAllocs()
	n := 0
	for i := range b.N {
		g, _, err := d.Page(1+i%d.NumPage(), true)
		if err != nil {
			b.Fatal(err)
		}
		n += len(g.Glyphs)
	}
	if n == 0 {
		b.Fatal("no glyphs")
	}
	b.ReportMetric(float64(n)/float64(b.N), "glyphs/op")
}

func BenchmarkOpen(b *testing.B) {
	e, err := Shared(nil)
	if err != nil {
		b.Fatal(err)
	}
	content := readPaper(b, "labelled/pdf/s12966*.pdf")
	b.ReportAllocs()
	for range b.N {
		d, err := e.Open(content)
		if err != nil {
			b.Fatal(err)
		}
		d.Close()
	}
}
