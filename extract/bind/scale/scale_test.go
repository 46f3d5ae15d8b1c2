package scale

import (
	"fmt"
	"strings"
	"testing"

	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// The limits of scales, and pairs of numbers that are none.
func TestSpansOf(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"The Homing Ease Score (HES) ranges from 0 to 63, higher is worse.", "0..63"},
		{"Brood calmness was scored on a scale from 0 (restless) to 10 (calm).", "0..10"},
		{"Brood calmness was rated on a 0–10 numeric scale, VAS 0–100 mm.", "0..100"},
		{"Scores range between 1 and 5.", "1..5"},
		{"Comb tidiness index (possible range 12–36 points) was noted weekly.", "12..36"},
		{"HES, Homing Ease Score (0–63).", "0..63"},
		{"Calmness scale: 0 = restless to 10 = calm.", "0..10"},
		{"Scores of the change scale range from −3 to 3.", ""}, // the typographic minus is no digit here
		{"Scores of the change scale range from -3 to 3.", ""}, // a scale with such a limit must say "possible"
		{"The calmness score has a possible range of -3 to 3.", "-3..3"},
		// None.
		{"The median score was 4 (range 0–9).", ""},
		{"Mean score 4.2, range 0 to 9.", ""},
		{"Colonies with a score from 0 to 3 were included.", ""},
		{"Each item is scored from 0 to 3.", ""},
		{"Scored from 0 to 12 weeks after feeding.", ""},
		{"The index ranged from 31 to 64 in May.", ""},
		{"Weighed on scales between 8 and 16 h.", ""},
		{"Score 1–2.5", ""},
		{"Stations 0 to 7 had queens.", ""},
		{"Scale 0 to 1.", ""},
		{"Scale 7 to 3.", ""},
		{"Ease of landing was scored (0~66).", "0..66"},
		{"Calm on the VAS in 10–34 colonies.", ""},
		{"Scale from 0 to 99999.", ""},
	} {
		var got []string
		for _, s := range spansOf(c.text) {
			got = append(got, fmt.Sprintf("%d..%d", s.low, s.high))
			if want := c.text[s.start:s.end]; !strings.Contains(want, fmt.Sprint(s.high)) {
				t.Errorf("%q: the limits stand at %q", c.text, want)
			}
		}
		if g := strings.Join(got, " "); g != c.want {
			t.Errorf("%q: got %q, want %q", c.text, g, c.want)
		}
	}
}

func TestNamesOf(t *testing.T) {
	for _, c := range []struct {
		outcome, clause string
		want            bool
	}{
		{"HES total score", "the HES (", true},
		{"HES total score", "the CHES (", false},
		{"Homing ease", "the homing ease of workers was scored, ", true},
		{"Homing ease", "the ease of landing was scored, ", false},
		{"Calm", "calm bees were scored ", false},
		{"Tranquillity score", "tranquillity was scored ", true},
		{"SD", "SD of the score ", false},
		{"", "anything ", false},
	} {
		if got := namesOf(c.outcome).speaksOf(c.clause); got != c.want {
			t.Errorf("%q in %q: %v", c.outcome, c.clause, got)
		}
	}
}

func run(s string, offset int) paper.TextRun {
	return paper.TextRun{S: s, Runs: []paper.Run{{Start: 0, End: len(s), Place: paper.Place{Offset: offset}}}}
}

func TestSet(t *testing.T) {
	doc := &paper.Document{Blocks: []paper.Block{
		{Kind: paper.Paragraph, Zone: paper.Introduction, Text: run("Others gave the tranquillity score a range of 0 to 6.", 10)},
		{Kind: paper.Paragraph, Zone: paper.Methods, Text: run("The tranquillity score ranges from 0 to 21. The Homing Ease Score (HES) ranges from 0 to 63.", 100)},
		{Kind: paper.TableBlock, Table: &paper.Table{Label: "Table 1", Caption: run("Feeding and homing", 300),
			Notes: []paper.FootNote{{Text: run("HES scores range from 0 to 100.", 400)}}}},
	}}
	mean := func(table, outcome, estimate string) result.Result {
		return result.Result{Statistic: result.Mean, GivenAs: result.Unstated, Table: table, Outcome: outcome, Estimate: estimate}
	}
	ratio := mean("Table 2", "Tranquillity score", "1.2")
	ratio.Statistic = result.Ratio
	change := mean("Table 3", "Tranquillity score", "-3.2")
	change.Statistic = result.MeanChange
	said := mean("Table 2", "Tranquillity score", "5.1")
	said.Evidence.ScaleLow, said.Evidence.ScaleHigh = "0", "7"
	perHour := mean("Table 2", "Number of flights per hour", "4.2")
	inBees := mean("Table 2", "Number of flights", "4.2")
	inBees.Unit = "thousands"
	found := []result.Result{
		mean("Table 1", "HES", "31.4"), mean("Table 2", "HES", "31.4"), mean("Table 2", "Tranquillity score", "5.1"), mean("Table 2", "Ease of landing score (0–10)", "3.1"),
		mean("Table 4", "HES", "31.4"), mean("Table 4", "HES", "71.4"), ratio, change, said, mean("Table 2", "Colony mass", "12.4"), mean("Table 2", "Colony mass (0–10 weeks)", "2.4"),
		mean("Table 2", "Tranquillity score, duration of feeding, weeks", "2"),
		mean("Table 2", "Number of dead bees", "4.2"), perHour, inBees,
	}
	Set(doc, found)
	var got []string
	for _, r := range found {
		text := r.Evidence.ScaleLow + ".." + r.Evidence.ScaleHigh
		if r.Evidence.Integer {
			text += " whole"
		}
		for _, s := range r.Sources {
			text += fmt.Sprintf(" %q@%d", s.Text, s.Place.Offset)
		}
		got = append(got, text)
	}
	want := []string{`0..100 "0 to 100"@422`, `0..63 "0 to 63"@184`, `0..21 "0 to 21"@135`, "0..10",
		"..", "..", // one estimate does not keep to the limits
		"..", `0..21 "0 to 21"@135`, "0..7", "..", "..", "..", ".. whole", "..", ".."}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("%s, %s: got %s, want %s", found[i].Table, found[i].Outcome, got[i], want[i])
		}
	}
}

// FuzzSet: whatever a paper says, limits are in order, hold the estimate, and lie in
// the text.
func FuzzSet(f *testing.F) {
	seeds := []string{"The Homing Ease Score (HES) ranges from 0 to 63.", "VAS 0–100 mm", "scale (0 = restless) to 10", "HES;HES scale: 1–5); 0–3", "\xff score \xe2 0-9", "HES scores range from 0 to 99999999999999999999"}
	for _, s := range seeds {
		f.Add(s, "HES", "3")
	}
	if len(seeds) < 5 {
		f.Fatal("too few seeds")
	}
	f.Fuzz(func(t *testing.T, text, outcome, estimate string) {
		doc := &paper.Document{Blocks: []paper.Block{{Kind: paper.Paragraph, Zone: paper.Methods, Text: run(text, 7)}}}
		found := []result.Result{{Statistic: result.Mean, Outcome: outcome, Estimate: estimate}, {Statistic: result.MeanChange, Outcome: outcome + text, Estimate: estimate}}
		Set(doc, found)
		for _, r := range found {
			if (r.Evidence.ScaleLow == "") != (r.Evidence.ScaleHigh == "") {
				t.Errorf("one limit only: %+v", r.Evidence)
			}
		}
		for _, s := range spansOf(text) {
			if s.low >= s.high || s.clause > s.start || s.start >= s.end || s.end > len(text) {
				t.Errorf("%q: %+v", text, s)
			}
		}
	})
}
