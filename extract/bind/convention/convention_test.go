package convention

import (
	"testing"

	"halfspan/extract/paper"
	"halfspan/extract/result"
)

func block(zone paper.Zone, kind paper.BlockKind, s string) paper.Block {
	return paper.Block{Kind: kind, Zone: zone, Text: paper.TextRun{S: s, Runs: []paper.Run{{Start: 0, End: len(s), Place: paper.Place{Offset: 7}}}}}
}

func TestPlusMinus(t *testing.T) {
	methods, caption := paper.Methods, paper.Caption
	for _, c := range []struct {
		title    string
		blocks   []paper.Block
		scope    Scope
		want     result.GivenAs
		ok       bool
		conflict bool
	}{
		{"data are presented as", []paper.Block{block(methods, paper.Paragraph, "Data are presented as mean ± SD unless stated.")}, Prose, result.SD, true, false},
		{"values are", []paper.Block{block(methods, paper.Paragraph, "Values are means ± standard errors of the mean.")}, Prose, result.SE, true, false},
		{"plural with and", []paper.Block{block(methods, paper.Paragraph, "Means and standard deviations were calculated station by station.")}, Prose, result.SD, true, false},
		{"a note alone", []paper.Block{block(methods, paper.Paragraph, "Mean ± SD.")}, Prose, result.SD, true, false},
		{"the sign explained", []paper.Block{block(methods, paper.Paragraph, "The sign ± denotes the SE.")}, Prose, result.SE, true, false},
		{"for tables only", []paper.Block{block(methods, paper.Paragraph, "In the tables data are shown as mean ± SD.")}, Prose, "", false, false},
		{"a caption is for figures", []paper.Block{block(paper.Results, caption, "Figure 1. Values are means ± SE.")}, Prose, "", false, false},
		{"a caption in its scope", []paper.Block{block(paper.Results, caption, "Figure 1. Values are means ± SE.")}, Figures, result.SE, true, false},
		{"two of equal right", []paper.Block{block(methods, paper.Paragraph, "Data are presented as mean ± SD. Data are presented as mean ± SE.")}, Prose, result.SD, true, true},
		{"a table's note that lost its table", []paper.Block{block(paper.Results, paper.Paragraph, "If not said otherwise, values are means ± SE.")}, Prose, "", false, false},
		{"an abbreviation", []paper.Block{block(methods, paper.Paragraph, "SD, standard deviation; SE, standard error.")}, Prose, "", false, false},
		{"a value, no habit", []paper.Block{block(methods, paper.Paragraph, "The hives had a mean mass of 12.4 (SD 1.3) kg.")}, Prose, "", false, false},
		{"a plan", []paper.Block{block(methods, paper.Paragraph, "A mean and SD of 12 kg and 3 kg were assumed for the sample size.")}, Prose, "", false, false},
		{"a value of another study", []paper.Block{block(methods, paper.Paragraph, "In the literature, the mean ± SD mass of hives was 12.4 ± 1.3 kg.")}, Prose, "", false, false},
		{"a value with a citation", []paper.Block{block(methods, paper.Paragraph, "[7], the mean ± SD mass of hives was 12.6 ± 1.4 kg.")}, Prose, "", false, false},
		{"a formula", []paper.Block{block(methods, paper.Paragraph, "Effects were calculated as the difference in means divided by the standard deviation.")}, Prose, "", false, false},
		{"references", []paper.Block{block(paper.References, paper.Paragraph, "Data are presented as mean ± SD.")}, Prose, "", false, false},
		{"nothing", nil, Prose, "", false, false},
	} {
		a, ok := Of(&paper.Document{Blocks: c.blocks}).PlusMinus(c.scope)
		if ok != c.ok || a.Spread != c.want || a.Conflict != c.conflict {
			t.Errorf("%s: got %q, %t, conflict %t, want %q, %t, conflict %t", c.title, a.Spread, ok, a.Conflict, c.want, c.ok, c.conflict)
		}
		if ok && (a.Text == "" || a.Place.Offset < 7) {
			t.Errorf("%s: the statement has no text or place: %+v", c.title, a.Statement)
		}
	}
}

func TestBracketAndBounds(t *testing.T) {
	c := Of(&paper.Document{Blocks: []paper.Block{block(paper.Methods, paper.Paragraph,
		"Continuous data are reported as mean (SD) or median (IQR). Differences between means are given as mean difference (95% CI).")}})
	if a, ok := c.Bracket(Prose); !ok || a.Spread != result.SD {
		t.Errorf("bracket: got %q, %t", a.Spread, ok)
	}
	if a, ok := c.Bounds(Prose, result.Median); !ok || a.Spread != result.IQR {
		t.Errorf("bounds of a median: got %q, %t", a.Spread, ok)
	}
	if a, ok := c.Bounds(Prose, result.MeanDifference); !ok || a.Spread != result.CI || a.Level != 95 {
		t.Errorf("bounds of a difference: got %q, level %g, %t", a.Spread, a.Level, ok)
	}
}

func TestLevel(t *testing.T) {
	doc := &paper.Document{Blocks: []paper.Block{block(paper.Results, paper.Paragraph, "12 (95% CI 9 to 15), 13 (95% CI 10 to 16)")}}
	if level, ok := Of(doc).Level(); !ok || level != 95 {
		t.Errorf("one level: got %g, %t", level, ok)
	}
	doc.Blocks = append(doc.Blocks, block(paper.Results, paper.Paragraph, "14 (90% CI 9 to 15)"))
	if level, ok := Of(doc).Level(); ok {
		t.Errorf("two levels: got %g", level)
	}
	if _, ok := Of(&paper.Document{}).Level(); ok {
		t.Error("no level: got one")
	}
}

func TestIn(t *testing.T) {
	run := paper.TextRun{S: "Values are mean (SE) unless otherwise indicated. CI, confidence interval."}
	got := In(&run)
	if len(got) != 1 || got[0].Spread != result.SE || !got[0].Bracket || !got[0].Unless || got[0].Block != -1 {
		t.Errorf("got %+v", got)
	}
}
