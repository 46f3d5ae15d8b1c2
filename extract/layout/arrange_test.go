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

// left and right set running text in the two columns of a page: the columns
// are 240 points wide, the gutter 20.
const (
	leftX, rightX = 50, 310
	leading       = 12
)

// prose fills a column: each line about as wide as the column.
func prose(first string, n int) []string {
	lines := []string{first}
	for i := 1; i < n; i++ {
		lines = append(lines, fmt.Sprintf("%s line %d of the invented text about bees and flowers", strings.Fields(first)[0], i))
	}
	return lines
}

func narrow(first string, n int) []string {
	lines := []string{first}
	for i := 1; i < n; i++ {
		lines = append(lines, fmt.Sprintf("%s %s line of the invented text", strings.Fields(first)[0], ordinals[i]))
	}
	return lines
}

var ordinals = []string{"Zeroth", "First", "Second", "Third", "Fourth", "Fifth", "Sixth", "Seventh", "Eighth", "Ninth"}

// readingCases are pages and the text that is read in them.
var readingCases = []struct {
	name string
	draw func() []*sketch.Page
	want string
}{
	{name: "two columns under a title", draw: func() []*sketch.Page {
		p := sketch.New(1, 600, 800)
		p.Size = 18
		p.Text(60, 740, "Feeding trials on honey-bee colonies in spring")
		p.Size = 10
		p.Lines(leftX, 700, leading, prose("Alpha was weighed before the feeding began", 6)...)
		p.Lines(rightX, 695, leading, prose("Beta was weighed after the feeding had ended", 6)...)
		return []*sketch.Page{p}
	}, want: `Feeding trials on honey-bee colonies in spring
Alpha was weighed before the feeding began
Alpha line 1 of the invented text about bees and flowers
Alpha line 2 of the invented text about bees and flowers
Alpha line 3 of the invented text about bees and flowers
Alpha line 4 of the invented text about bees and flowers
Alpha line 5 of the invented text about bees and flowers
Beta was weighed after the feeding had ended
Beta line 1 of the invented text about bees and flowers
Beta line 2 of the invented text about bees and flowers
Beta line 3 of the invented text about bees and flowers
Beta line 4 of the invented text about bees and flowers
Beta line 5 of the invented text about bees and flowers
`},
	{name: "a table across both columns", draw: func() []*sketch.Page {
		p := sketch.New(1, 600, 800)
		p.Lines(leftX, 740, leading, prose("Alpha was weighed before the feeding began", 5)...)
		p.Lines(rightX, 740, leading, prose("Beta was weighed after the feeding had ended", 5)...)
		table(p, leftX, 660)
		p.Lines(leftX, 560, leading, prose("Gamma was weighed before the swarming began", 5)...)
		p.Lines(rightX, 560, leading, prose("Delta was weighed after the swarming had ended", 5)...)
		return []*sketch.Page{p}
	}, want: `Alpha was weighed before the feeding began
Alpha line 1 of the invented text about bees and flowers
Alpha line 2 of the invented text about bees and flowers
Alpha line 3 of the invented text about bees and flowers
Alpha line 4 of the invented text about bees and flowers
Beta was weighed after the feeding had ended
Beta line 1 of the invented text about bees and flowers
Beta line 2 of the invented text about bees and flowers
Beta line 3 of the invented text about bees and flowers
Beta line 4 of the invented text about bees and flowers
Table 1. Colony mass and protein by arm
Outcome	Syrup (n = 42)	Water (n = 41)
Mass, kg	12.4 (1.3)	11.1 (1.2)
Protein, mg/mL	8.1 (1.0)	7.7 (0.9)
Flight time, min	24 (5)	19 (6)
Gamma was weighed before the swarming began
Gamma line 1 of the invented text about bees and flowers
Gamma line 2 of the invented text about bees and flowers
Gamma line 3 of the invented text about bees and flowers
Gamma line 4 of the invented text about bees and flowers
Delta was weighed after the swarming had ended
Delta line 1 of the invented text about bees and flowers
Delta line 2 of the invented text about bees and flowers
Delta line 3 of the invented text about bees and flowers
Delta line 4 of the invented text about bees and flowers
`},
	{name: "a box in one column", draw: func() []*sketch.Page {
		p := sketch.New(1, 600, 800)
		p.Lines(leftX, 740, leading, prose("Alpha was weighed before the feeding began", 16)...)
		y := p.Lines(rightX, 740, leading, prose("Beta was weighed after the feeding had ended", 4)...)
		p.Rule(rightX, rightX+240, y)
		p.Size = 8
		y = p.Lines(rightX+6, y-12, 10, "Box 1. What is already known", "Colonies fed with syrup gain mass in the spring of most years",
			"and lose some of it again when the pollen runs short")
		p.Rule(rightX, rightX+240, y)
		p.Size = 10
		p.Lines(rightX, y-20, leading, prose("Delta was weighed after the swarming had ended", 5)...)
		return []*sketch.Page{p}
	}, want: strings.Join(prose("Alpha was weighed before the feeding began", 16), "\n") + "\n" +
		strings.Join(prose("Beta was weighed after the feeding had ended", 4), "\n") + `
Box 1. What is already known
Colonies fed with syrup gain mass in the spring of most years
and lose some of it again when the pollen runs short
` + strings.Join(prose("Delta was weighed after the swarming had ended", 5), "\n") + "\n"},
	{name: "a rotated table beside upright text", draw: func() []*sketch.Page {
		p := sketch.New(1, 600, 800)
		p.Text(60, 740, "The table of this page is printed sideways for want of room.")
		p.Angle = 90
		for i, row := range [][]string{{"Table 2. Colony mass by arm"}, {"Outcome", "Syrup", "Water"},
			{"Mass, kg", "12.4 (1.3)", "11.1 (1.2)"}, {"Protein, mg/mL", "8.1 (1.0)", "7.7 (0.9)"}} {
			for k, cell := range row {
				p.Text(200+14*i, 100+150*k, cell)
			}
			if i == 0 || i == 1 || i == 3 {
				p.UprightRule(100, 500, 204+14*i)
			}
		}
		return []*sketch.Page{p}
	}, want: `Table 2. Colony mass by arm
Outcome	Syrup	Water
Mass, kg	12.4 (1.3)	11.1 (1.2)
Protein, mg/mL	8.1 (1.0)	7.7 (0.9)
The table of this page is printed sideways for want of room.
`},
	{name: "dates and keywords beside the abstract", draw: func() []*sketch.Page {
		p := sketch.New(1, 600, 800)
		p.Size = 7
		p.Lines(50, 703, 9, "Article history:", "Received 12 May 2020", "Accepted 30 June 2020", "Available online 3 July 2020",
			"Keywords:", "Honey bee", "Colony mass")
		p.Size = 8
		p.Lines(190, 700, 10, "Background: Colonies that are fed with syrup in spring may gain mass or they may lose it to robbers in",
			"the neighbourhood, and nobody has weighed them before and after. Methods: We fed 84 colonies with syrup",
			"or water for twelve weeks and weighed them each week on a balance that was checked before use and in",
			"the evening of each day of the trial. Results: Mass rose by 1.84 kg (95% CI 0.92 to 2.76) with syrup and",
			"did not change with water, nor did the protein of the haemolymph change in any of the arms in the weeks",
			"of the trial. Conclusions: Syrup raises the mass of the colonies in spring, and more of it may raise more",
			"of them in the neighbourhood.")
		return []*sketch.Page{p}
	}, want: `Background: Colonies that are fed with syrup in spring may gain mass or they may lose it to robbers in
the neighbourhood, and nobody has weighed them before and after. Methods: We fed 84 colonies with syrup
or water for twelve weeks and weighed them each week on a balance that was checked before use and in
the evening of each day of the trial. Results: Mass rose by 1.84 kg (95% CI 0.92 to 2.76) with syrup and
did not change with water, nor did the protein of the haemolymph change in any of the arms in the weeks
of the trial. Conclusions: Syrup raises the mass of the colonies in spring, and more of it may raise more
of them in the neighbourhood.
Article history:
Received 12 May 2020
Accepted 30 June 2020
Available online 3 July 2020
Keywords:
Honey bee
Colony mass
`},
	{name: "labels in the margin stay with their lines", draw: func() []*sketch.Page {
		p := sketch.New(1, 600, 800)
		for i, label := range []string{"Objective", "", "Design", "Setting", "", "Results", "", "Conclusion"} {
			p.Text(50, 700-12*i, label)
			p.Text(130, 700-12*i, "the "+ordinals[i]+" line of a text that says what was found in the trial of the bees")
		}
		return []*sketch.Page{p}
	}, want: `Objective	the Zeroth line of a text that says what was found in the trial of the bees
the First line of a text that says what was found in the trial of the bees
Design	the Second line of a text that says what was found in the trial of the bees
Setting	the Third line of a text that says what was found in the trial of the bees
the Fourth line of a text that says what was found in the trial of the bees
Results	the Fifth line of a text that says what was found in the trial of the bees
the Sixth line of a text that says what was found in the trial of the bees
Conclusion	the Seventh line of a text that says what was found in the trial of the bees
`},
	{name: "a large first letter", draw: func() []*sketch.Page {
		p := sketch.New(1, 600, 800)
		p.Lines(68, 700, 12, "ees store syrup when there is no nectar in", "the neighbourhood, and they lose mass in")
		p.Lines(50, 676, 12, "spring. Nobody has weighed the colonies.")
		p.Size = 32
		p.Text(50, 684, "B")
		return []*sketch.Page{p}
	}, want: `Bees store syrup when there is no nectar in
the neighbourhood, and they lose mass in
spring. Nobody has weighed the colonies.
`},
	{name: "three columns", draw: func() []*sketch.Page {
		p := sketch.New(1, 600, 800)
		p.Size = 8
		for i, w := range []string{"Alpha", "Beta", "Gamma"} {
			p.Lines(40+180*i, 740, 10, narrow(w+" colonies were fed with syrup in spring", 8)...)
		}
		return []*sketch.Page{p}
	}, want: strings.Join(narrow("Alpha colonies were fed with syrup in spring", 8), "\n") + "\n" +
		strings.Join(narrow("Beta colonies were fed with syrup in spring", 8), "\n") + "\n" +
		strings.Join(narrow("Gamma colonies were fed with syrup in spring", 8), "\n") + "\n"},
	{name: "line numbers and repeated heads stand apart", draw: func() []*sketch.Page {
		var pages []*sketch.Page
		for n := 1; n <= 3; n++ {
			p := sketch.New(n, 600, 800)
			p.Text(50, 770, "Journal of Invented Apiculture")
			p.Text(540, 770, fmt.Sprint(n+10))
			for i := range 9 {
				p.Text(40, 700-20*i, fmt.Sprint(9*n-8+i))
				p.Text(80, 700-20*i, fmt.Sprintf("%s line of text runs on and on to the word %s", ordinals[n], ordinals[i]))
			}
			pages = append(pages, p)
		}
		return pages
	}, want: strings.Join([]string{numberedPage(1), numberedPage(2), numberedPage(3)}, "\f")},
}

// TestReadingOrder sets pages as papers do and compares the plain text with
// one written by hand.
func TestReadingOrder(t *testing.T) {
	for _, c := range readingCases {
		t.Run(c.name, func(t *testing.T) {
			a := layout.Arrange(glyphPages(c.draw()))
			if diff := cmp.Diff(c.want, a.Text()); diff != "" {
				t.Errorf("text (-want +got):\n%s", diff)
			}
			if got, want := joined(a), strings.Fields(a.Text()); len(got) != len(want) {
				t.Errorf("the blocks hold %d words, the text %d", len(got), len(want))
			}
		})
	}
}

func numberedPage(n int) string {
	var b strings.Builder
	fmt.Fprintf(&b, "Journal of Invented Apiculture\t%d\n", n+10)
	for i := range 9 {
		fmt.Fprintf(&b, "%s line of text runs on and on to the word %s\n", ordinals[n], ordinals[i])
	}
	for i := range 9 {
		fmt.Fprintf(&b, "%d\n", 9*n-8+i)
	}
	return b.String()
}

func table(p *sketch.Page, x, y int) {
	p.Text(x, y, "Table 1. Colony mass and protein by arm")
	p.Rule(x, x+500, y-5)
	rows := [][]string{
		{"Outcome", "Syrup (n = 42)", "Water (n = 41)"},
		{"Mass, kg", "12.4 (1.3)", "11.1 (1.2)"},
		{"Protein, mg/mL", "8.1 (1.0)", "7.7 (0.9)"},
		{"Flight time, min", "24 (5)", "19 (6)"},
	}
	for i, row := range rows {
		for k, cell := range row {
			p.Text(x+200*k, y-18-13*i, cell)
		}
		if i == 0 {
			p.Rule(x, x+500, y-23)
		}
	}
	p.Rule(x, x+500, y-18-13*len(rows)+8)
}

func glyphPages(pages []*sketch.Page) []paper.GlyphPage {
	out := make([]paper.GlyphPage, len(pages))
	for i, p := range pages {
		out[i] = p.GlyphPage
	}
	return out
}

// joined gives the words of all blocks, tables included.
func joined(a *layout.Arrangement) []string {
	var all []string
	for _, b := range a.Blocks {
		all = append(all, strings.Fields(b.Text.S)...)
		if b.Table == nil {
			continue
		}
		all = append(all, strings.Fields(b.Table.Label+" "+b.Table.Caption.S)...)
		for _, c := range b.Table.Cells {
			all = append(all, strings.Fields(c.Text.S)...)
		}
		for _, n := range b.Table.Notes {
			all = append(all, strings.Fields(n.Mark+" "+n.Text.S)...)
		}
	}
	return all
}
