package layout_test

import (
	"encoding/json"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"golang.org/x/text/unicode/norm"

	"halfspan/extract/layout"
	"halfspan/extract/pdf"
)

// papers is the folder of real papers that the project is measured with.
const papers = "../../../shared/papers"

// TestLabelledSentencesAreWhole checks that what people quoted from the running
// text of real papers stands in one block, cut by no column or page.
func TestLabelledSentencesAreWhole(t *testing.T) {
	if testing.Short() {
		t.Skip("reads real papers: not in short runs")
	}
	files, _ := filepath.Glob(filepath.Join(papers, "labelled", "p*", "*.pdf"))
	if len(files) == 0 {
		t.Skip("the folder of real papers is not here: ../shared/papers")
	}
	quotes, broken := 0, 0
	for _, file := range files {
		content, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		glyphs, err := pdf.Read(content, pdf.Options{})
		if err != nil {
			t.Errorf("%s: %v", file, err)
			continue
		}
		var blocks []string
		for _, b := range layout.Arrange(glyphs.Pages).Blocks {
			blocks = append(blocks, bare(b.Text.S))
		}
		for _, q := range quoted(t, file) {
			quotes++
			for _, part := range regexp.MustCompile(`\.\.\.|…`).Split(q, -1) {
				found := false
				for _, b := range blocks {
					found = found || strings.Contains(b, bare(part))
				}
				if !found {
					broken++
					t.Logf("%s: in no block as a whole: %s", filepath.Base(file), q)
					break
				}
			}
		}
	}
	if quotes < 100 || broken*50 > quotes {
		t.Errorf("%d of %d quoted sentences are broken", broken, quotes)
	}
}

// quoted are the quotes from text and abstract that the labels of a paper hold.
func quoted(t *testing.T, file string) []string {
	name := strings.TrimSuffix(filepath.Base(file), ".pdf") + ".json"
	data, err := os.ReadFile(filepath.Join(papers, "labels", name))
	if err != nil {
		t.Fatal(err)
	}
	var labels []struct{ Where, Quote string }
	if err := json.Unmarshal(data, &labels); err != nil {
		t.Fatal(err)
	}
	var out []string
	for _, l := range labels {
		if (l.Where == "text" || l.Where == "abstract") && l.Quote != "" {
			out = append(out, l.Quote)
		}
	}
	return out
}

var spacesAndDashes = regexp.MustCompile(`[\s\x{00AD}\x{2010}-\x{2015}\x{2212}\x{FE63}\x{FF0D}-]+`)

// bare is a text without spaces and dashes, in lower case.
func bare(s string) string {
	return strings.ToLower(spacesAndDashes.ReplaceAllString(norm.NFKC.String(s), ""))
}
