package pdf

import (
	"fmt"
	"os"
	"path/filepath"
	"testing"
)

// papers is where real papers may lie, outside the project.
const papers = "../../../shared/papers"

// TestPapers sets the two readers against each other on real papers. The
// readings differ in none of them today; a change that makes them differ is
// looked at before it is kept.
func TestPapers(t *testing.T) {
	found, _ := filepath.Glob(filepath.Join(papers, "labelled/pdf/*.pdf"))
	if len(found) == 0 {
		t.Skipf("no papers at %s: the two readers were not compared on real ones", papers)
	}
	who := map[string]int{}
	for _, f := range found {
		content, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		both, err := Read(content, Options{BothAlways: true})
		if err != nil {
			t.Fatalf("%s: %v", filepath.Base(f), err)
		}
		for _, p := range both.Problems {
			if p.Kind == "readers-differ" || p.Kind == "one-reader" || p.Lost {
				t.Errorf("%s: %+v", filepath.Base(f), p)
			}
		}
		proved, err := Read(content, Options{})
		if err != nil {
			t.Fatal(err)
		}
		for i := range proved.Pages {
			who[proved.Pages[i].Page.Reader]++
			if a, b := textOf(&both.Pages[i]), textOf(&proved.Pages[i]); a != b {
				t.Errorf("%s page %d: read by one reader it is another page", filepath.Base(f), i+1)
			}
		}
	}
	t.Logf("%d papers, pages by reader: %v", len(found), who)
}

// BenchmarkRead reads a whole paper, both readers included.
func BenchmarkRead(b *testing.B) {
	found, _ := filepath.Glob(filepath.Join(papers, "labelled/pdf/s12966*.pdf"))
	if len(found) == 0 {
		b.Skipf("no papers at %s", papers)
	}
	content, err := os.ReadFile(found[0])
	if err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	pages := 0
	for range b.N {
		g, err := Read(content, Options{})
		if err != nil || len(g.Pages) == 0 {
			b.Fatal(fmt.Errorf("%d pages: %w", len(g.Pages), err))
		}
		pages += len(g.Pages)
	}
	b.ReportMetric(float64(b.Elapsed().Microseconds())/float64(pages), "µs/page")
}
