package layout_test

import (
	"fmt"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"halfspan/extract/layout"
	"halfspan/extract/layout/internal/sketch"
	"halfspan/extract/paper"
)

var (
	kinds = []string{"?", "heading", "paragraph", "table", "caption", "note", "reference", "furniture"}
	zones = []string{"elsewhere", "abstract", "introduction", "methods", "results", "discussion", "references", "back"}
)

func dump(a *layout.Arrangement) string {
	var b strings.Builder
	for _, k := range a.Blocks {
		text := k.Text.S
		if k.Table != nil {
			text = k.Table.Label
		}
		fmt.Fprintf(&b, "%d %s %s %q: %s\n", k.Page, kinds[k.Kind], zones[k.Zone], k.Section, text)
	}
	return b.String()
}

// invented is a paper of two pages in two columns.
func invented() []*sketch.Page {
	head := func(p *sketch.Page, x, y int, text string) int {
		p.Bold, p.Size = true, 11
		p.Text(x, y, text)
		p.Bold, p.Size = false, 10
		return y - 16
	}
	p := sketch.New(1, 600, 800)
	p.Text(50, 780, "Invented Apiculture 2020, 12:1")
	p.Size = 18
	p.Text(60, 740, "Feeding trials on honey-bee colonies in spring")
	p.Size = 10
	head(p, 50, 715, "Abstract")
	p.Lines(50, 700, leading,
		"Background: Colonies fed in spring may gain mass. Methods: We fed 84 colonies with syrup or with water for twelve weeks and weighed",
		"them. Results: The difference was 1.84 kg (95% CI 0.92 to 2.76). Conclusions: Syrup raises the mass of colonies in spring, and so on.")
	y := head(p, leftX, 650, "1. Introduction")
	y = p.Lines(leftX, y, leading,
		"Bees store syrup when there is no nectar, and",
		"they lose mass in spring. Nobody has weighed",
		"the colonies before and after feeding.")
	y = head(p, leftX, y-10, "2. Methods")
	p.Lines(leftX, y, leading,
		"We fed 84 colonies with syrup or water and we",
		"weighed them each week on a balance that was",
		"checked before use. The protein of the haemo-")
	y = p.Lines(rightX, 650, leading,
		"lymph was measured too, and the flight time of",
		"ten foragers was taken by two observers in the",
		"mornings of all trial days.")
	y = head(p, rightX, y-10, "3. Results")
	p.Lines(rightX, y, leading,
		"Colonies fed with syrup weighed more at week 12",
		"than those that had water, and the difference was",
		"1.84 kg (95% CI 0.92 to")
	q := sketch.New(2, 600, 800)
	q.Text(50, 780, "Invented Apiculture 2020, 12:2")
	table(q, 50, 740)
	y = q.Lines(leftX, 640, leading,
		"2.76). The flight time did not differ between the",
		"two arms at any week of the trial in our hands.")
	y = head(q, leftX, y-10, "4. Discussion")
	q.Lines(leftX, y, leading,
		"Syrup raises mass. We saw no change of protein",
		"in the haemolymph and none of the flight time.",
		"The trial was small and short in many ways.")
	y = head(q, rightX, 640, "References")
	q.Size = 8
	q.Lines(rightX, y, 10,
		"1. A. Drone, B. Worker, Mass of colonies, 12.4 (1.3) kg, Hive",
		"Letters, vol. 3, pp. 10-12, 2001, and a further part of it.",
		"2. C. Queen, Syrup in spring, Comb Review, vol. 4, 2002.")
	r := sketch.New(3, 600, 800)
	r.Text(50, 780, "Invented Apiculture 2020, 12:3")
	return []*sketch.Page{p, q, r}
}

func TestBlocks(t *testing.T) {
	want := `1 furniture elsewhere "": Invented Apiculture 2020, 12:1
1 heading elsewhere "": Feeding trials on honey-bee colonies in spring
1 heading abstract "Abstract": Abstract
1 paragraph abstract "Background": Background: Colonies fed in spring may gain mass.
1 paragraph abstract "Methods": Methods: We fed 84 colonies with syrup or with water for twelve weeks and weighed them.
1 paragraph abstract "Results": Results: The difference was 1.84 kg (95% CI 0.92 to 2.76).
1 paragraph abstract "Conclusions": Conclusions: Syrup raises the mass of colonies in spring, and so on.
1 heading introduction "1. Introduction": 1. Introduction
1 paragraph introduction "1. Introduction": Bees store syrup when there is no nectar, and they lose mass in spring. Nobody has weighed the colonies before and after feeding.
1 heading methods "2. Methods": 2. Methods
1 paragraph methods "2. Methods": We fed 84 colonies with syrup or water and we weighed them each week on a balance that was checked before use. The protein of the haemolymph was measured too, and the flight time of ten foragers was taken by two observers in the mornings of all trial days.
1 heading results "3. Results": 3. Results
1 paragraph results "3. Results": Colonies fed with syrup weighed more at week 12 than those that had water, and the difference was 1.84 kg (95% CI 0.92 to 2.76). The flight time did not differ between the two arms at any week of the trial in our hands.
2 furniture elsewhere "": Invented Apiculture 2020, 12:2
2 table results "3. Results": Table 1
2 heading discussion "4. Discussion": 4. Discussion
2 paragraph discussion "4. Discussion": Syrup raises mass. We saw no change of protein in the haemolymph and none of the flight time. The trial was small and short in many ways.
2 heading references "References": References
2 reference references "References": 1. A. Drone, B. Worker, Mass of colonies, 12.4 (1.3) kg, Hive Letters, vol. 3, pp. 10-12, 2001, and a further part of it.
2 reference references "References": 2. C. Queen, Syrup in spring, Comb Review, vol. 4, 2002.
3 furniture elsewhere "": Invented Apiculture 2020, 12:3
`
	a := layout.Arrange(glyphPages(invented()))
	if diff := cmp.Diff(want, dump(a)); diff != "" {
		t.Errorf("blocks (-want +got):\n%s", diff)
	}
	if want := "Feeding trials on honey-bee colonies in spring"; a.Title != want {
		t.Errorf("title %q, want %q", a.Title, want)
	}
}

// TestPlaces checks that each byte of a block's text leads to where it is
// printed, across a page break and through marks.
func TestPlaces(t *testing.T) {
	pages := invented()
	a := layout.Arrange(glyphPages(pages))
	for _, b := range a.Blocks {
		for _, r := range b.Text.Runs {
			found := false
			for _, g := range pages[r.Place.Page-1].Glyphs {
				found = found || g.Box == r.Place.Box && g.Origin == r.Place.Origin && g.Text == b.Text.S[r.Start:r.End]
			}
			if !found {
				t.Fatalf("%q at %+v is no glyph of the page", b.Text.S[r.Start:r.End], r.Place)
			}
		}
	}
	for _, b := range a.Blocks {
		if k := strings.Index(b.Text.S, "0.92 to 2.76). The flight"); k >= 0 {
			if p, q := b.Text.At(k), b.Text.At(k+8); p.Page != 1 || q.Page != 2 {
				t.Errorf("the bounds stand on pages %d and %d, want 1 and 2", p.Page, q.Page)
			}
			return
		}
	}
	t.Error("the sentence over the page break is missing")
}

func TestMarksAreStyled(t *testing.T) {
	p := sketch.New(1, 600, 800)
	p.Text(50, 700, "Mass was 12.3^{a} kg and spores 2.1 × 10^{3} per bee.")
	a := layout.Arrange(glyphPages([]*sketch.Page{p}))
	if len(a.Blocks) != 1 {
		t.Fatalf("got %d blocks", len(a.Blocks))
	}
	run := a.Blocks[0].Text
	if want := "Mass was 12.3a kg and spores 2.1 × 103 per bee."; run.S != want {
		t.Fatalf("got %q", run.S)
	}
	var raised []string
	for _, s := range run.Styles {
		if s.Kind == paper.Raised {
			raised = append(raised, run.S[s.Start:s.End])
		}
	}
	if diff := cmp.Diff([]string{"a", "3"}, raised); diff != "" {
		t.Errorf("raised (-want +got):\n%s", diff)
	}
}
