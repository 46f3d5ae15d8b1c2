package layout

import (
	"testing"

	"halfspan/extract/layout/words"
)

func TestLineEnd(t *testing.T) {
	dict := map[string]bool{"confidence": true, "syrup": true, "fed": true, "follow-up": true, "without": true, "with": true, "out": true}
	cases := []struct {
		text, next, want string
	}{
		{"a mean of", "12.4 kg", "a mean of 12.4 kg"},
		{"95% confi-", "dence interval", "95% confidence interval"},
		{"haemo-", "lymph", "haemolymph"},
		{"colonies with-", "out syrup", "colonies without syrup"},
		{"syrup-", "fed colonies", "syrup-fed colonies"},
		{"at follow-", "up visits", "at follow-up visits"},
		{"the 12-", "week trial", "the 12-week trial"},
		{"from 1.2-", "3.4 kg", "from 1.2-3.4 kg"},
		{"95% CI 0.92–", "2.76", "95% CI 0.92–2.76"},
		{"62%–", "70%", "62%–70%"},
		{"mass –", "protein", "mass – protein"},
		{"a value of −", "0.4", "a value of − 0.4"},
		{"Varroa-", "Index", "Varroa-Index"},
		{"haemo\u00AD", "lymph", "haemolymph"},
		{"haemo\u2010", "lymph", "haemolymph"},
		{"IL-", "6 rose", "IL-6 rose"},
	}
	for _, c := range cases {
		w := writer{words.Text{S: []byte(c.text)}}
		switch lineEnd(w.S, c.next, dict) {
		case drop:
			w.DropLast()
		case space:
			w.S = append(w.S, ' ')
		}
		if got := string(w.S) + c.next; got != c.want {
			t.Errorf("%q + %q: got %q, want %q", c.text, c.next, got, c.want)
		}
	}
}

func TestGoesOn(t *testing.T) {
	cases := []struct {
		prev, next string
		want       bool
	}{
		{"colonies fed with syrup", "gained 1.84 kg", true},
		{"colonies fed with syrup", "Pollen was scarce", false},
		{"the difference was 1.84 kg (95% CI", "0.92 to 2.76)", true},
		{"gained mass (95% CI 0.92 to", "Fig. 2 Mass over time", false},
		{"were weighed by", "Apis observers", true},
		{"gained 1.84 kg", "3. Results", false},
	}
	for _, c := range cases {
		if got := goesOn(c.prev, c.next); got != c.want {
			t.Errorf("%q then %q: got %v", c.prev, c.next, got)
		}
	}
}

func TestEnded(t *testing.T) {
	for text, want := range map[string]bool{
		"gained 1.84 kg.": true, "gained mass.12": true, "gained mass [3, 4].": true, "(see Table 2).": true,
		"gained 1.84": false, "the syrup arm": false, "was 12.": true, "gained mass.": true, "CI 0.92 to 2.76)": false,
	} {
		if got := ended(text); got != want {
			t.Errorf("%q: got %v", text, got)
		}
	}
}

func TestRunInHeading(t *testing.T) {
	for text, want := range map[string]string{
		"Results: Colonies gained 1.84 kg":              "Results",
		"Background. Bees store syrup":                  "Background",
		"RESULTS—Colonies gained mass":                  "RESULTS",
		"Abstract Background: Bees store syrup":         "Background",
		"Results of the trial were clear":               "",
		"results: colonies gained":                      "",
		"Methods and Results: Colonies were weighed":    "Methods and Results",
		"Main Outcome Measures: Colony mass at week 12": "Main Outcome Measures",
	} {
		if got := runInHeading(text); got != want {
			t.Errorf("%q: got %q, want %q", text, got, want)
		}
	}
}

func TestStartsLabel(t *testing.T) {
	for text, want := range map[string]bool{
		"Figure 1. Colony mass": true, "Fig. 2 Colony mass": true, "FIGURE 3": true, "Table 2 Mass by arm": true, "Table S1. Mass": true,
		"Figure 1 shows the mass": false, "Table 2 gives the mass": false, "Tables of mass": false, "Figures": false, "Box 2258, Hive Street": false,
	} {
		if got := startsLabel(text); got != want {
			t.Errorf("%q: got %v", text, got)
		}
	}
}
