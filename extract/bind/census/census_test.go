package census

import (
	"regexp"
	"testing"

	"halfspan/extract/paper"
)

func TestWhole(t *testing.T) {
	type want struct{ start, later, each int }
	cases := []struct {
		name string
		text []string
		want want
	}{
		{"one count", []string{"Forty-two colonies were enrolled in spring."}, want{42, 42, 0}},
		{"digits with a comma", []string{"We included 1,204 colonies of four stations."}, want{1204, 1204, 0}},
		{"words between", []string{"Eighteen strong wintered colonies were studied in a crossover design."}, want{18, 18, 0}},
		{"fewer stayed", []string{"Nineteen colonies were enrolled.", "One colony was lost to wasps, so that 18 colonies completed the trial."}, want{19, 18, 0}},
		{"some left, none counted", []string{"Nineteen colonies were enrolled.", "Some colonies were lost to wasps; three colonies died."}, want{19, 0, 0}},
		{"part of the sample", []string{"Sixty colonies were enrolled.", "Of these, 22 colonies (37%) were treated before."}, want{60, 60, 0}},
		{"parts that make the sum", []string{"In all 50 colonies took part.", "We recruited 30 colonies at Larkmoor.", "Later 20 colonies were recruited at Tenby Hill."}, want{50, 50, 0}},
		{"counts that differ", []string{"We enrolled 60 colonies.", "We randomised 58 colonies."}, want{0, 0, 0}},
		{"a plan", []string{"A sample size of 74 colonies was needed for a difference of 2 kg."}, want{0, 0, 0}},
		{"in each group", []string{"Sixty colonies were randomised, 20 colonies in each group."}, want{60, 60, 20}},
		{"n in each group", []string{"Colonies were randomly allocated to two feeds (n = 34 for each group)."}, want{0, 0, 34}},
		{"two groups of", []string{"The colonies made two groups of 26 colonies."}, want{0, 0, 26}},
		{"both groups reached", []string{"Hives were added till both study groups reached the size of 36 colonies."}, want{0, 0, 36}},
		{"so many in each", []string{"Hives were assigned to four feeds (with nine in each group)."}, want{0, 0, 9}},
		{"groups with an n", []string{"Workers were assigned to 5 groups (n = 14)."}, want{0, 0, 14}},
		{"the enrolled ones", []string{"In May the 28 enrolled colonies were fed.", "In the end 24 colonies completed the trial."}, want{28, 24, 0}},
		{"equal groups", []string{"Thirty-six colonies were divided into four equal groups."}, want{36, 36, 9}},
		{"of one group", []string{"We randomised 31 colonies to the syrup group."}, want{0, 0, 0}},
		{"a study of others", []string{"In this study of 90 colonies by Vane et al, feed was given daily."}, want{0, 0, 0}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			doc := &paper.Document{}
			for _, s := range c.text {
				doc.Blocks = append(doc.Blocks, paper.Block{Kind: paper.Paragraph, Zone: paper.Methods, Text: paper.TextRun{S: s}})
			}
			got := Of(doc)
			start, _ := got.Whole(false)
			later, _ := got.Whole(true)
			each, _ := got.Each()
			if (want{start.N, later.N, each.N}) != c.want {
				t.Errorf("start, later, each = %d, %d, %d, want %+v; counts %+v", start.N, later.N, each.N, c.want, got.Counts)
			}
		})
	}
}

func TestWithin(t *testing.T) {
	for s, want := range map[string]bool{
		"Feeds were compared in a randomised crossover trial.": true,
		"Each colony served as its own control.":               true,
		"A single-arm study of feeding.":                       true,
		"Colonies were randomised to two feeds.":               false,
	} {
		doc := &paper.Document{Blocks: []paper.Block{{Kind: paper.Paragraph, Zone: paper.Methods, Text: paper.TextRun{S: s}}}}
		if got := Of(doc).Within; got != want {
			t.Errorf("%q: within %v, want %v", s, got, want)
		}
	}
}

func TestNumber(t *testing.T) {
	for s, want := range map[string]int{"18": 18, "1,204": 1204, "Eighteen": 18, "forty-two": 42, "Forty two": 42, "two hundred and five": 205, "nine hundred": 900, "0": 0, "many": 0, "": 0} {
		if got, ok := Number(s); got != want || ok != (want > 0) {
			t.Errorf("Number(%q) = %d, %v, want %d", s, got, ok, want)
		}
	}
}

func TestSpeaksOfSubjects(t *testing.T) {
	for s, want := range map[string]bool{"Eighteen COLONIES were fed.": true, "one colony": true, "The honey was weighed.": false, "": false, "beeswax": false, "a very longwordthatisnoneofthesubjects bees": true} {
		if got := speaksOfSubjects(s); got != want {
			t.Errorf("speaksOfSubjects(%q) = %v", s, got)
		}
		if re := regexp.MustCompile(`(?i)\b` + Subjects + `\b`); re.MatchString(s) != want {
			t.Errorf("the pattern differs for %q", s)
		}
	}
}
