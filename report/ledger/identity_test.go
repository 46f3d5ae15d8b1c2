package ledger

import (
	"slices"
	"testing"

	"halfspan/extract/result"
)

func TestMatch(t *testing.T) {
	at := func(page int, x, y int32, digits string) result.Anchor {
		return result.Anchor{Page: page, X: x, Y: y, Digits: digits}
	}
	for _, test := range []struct {
		name       string
		olds, news []result.Anchor
		want       []int
	}{
		{"none", nil, []result.Anchor{at(1, 0, 0, "1")}, []int{-1}},
		{"moved a little", []result.Anchor{at(1, 1000, 2000, "4.2 6.0")}, []result.Anchor{at(1, 1120, 1990, "4.2 6.0")}, []int{0}},
		{"moved too far", []result.Anchor{at(1, 1000, 2000, "4.2 6.0")}, []result.Anchor{at(1, 1301, 2000, "4.2 6.0")}, []int{-1}},
		{"other digits", []result.Anchor{at(1, 1000, 2000, "4.2 6.0")}, []result.Anchor{at(1, 1000, 2000, "4.2 6.1")}, []int{-1}},
		{"other page", []result.Anchor{at(1, 1000, 2000, "4.2 6.0")}, []result.Anchor{at(2, 1000, 2000, "4.2 6.0")}, []int{-1}},
		{"the nearest of two",
			[]result.Anchor{at(1, 1000, 2000, "0.1"), at(1, 1200, 2000, "0.1")},
			[]result.Anchor{at(1, 1190, 2000, "0.1"), at(1, 1010, 2000, "0.1")}, []int{1, 0}},
		{"one old for two new",
			[]result.Anchor{at(1, 1000, 2000, "0.1")},
			[]result.Anchor{at(1, 1100, 2000, "0.1"), at(1, 1050, 2000, "0.1")}, []int{-1, 0}},
		{"text", []result.Anchor{{Offset: 40, Digits: "0.1"}, {Offset: 80, Digits: "0.1"}},
			[]result.Anchor{{Offset: 80, Digits: "0.1 0.2"}, {Offset: 41, Digits: "0.1"}}, []int{1, -1}},
	} {
		if got := match(test.olds, test.news); !slices.Equal(got, test.want) {
			t.Errorf("%s: got %v, want %v", test.name, got, test.want)
		}
	}
}

func TestKeptIDs(t *testing.T) {
	one, two := hive("aa", 10, "5.1", "4.2", "6.0"), hive("aa", 50, "7.1", "6.2", "8.0")
	two.Working.Record.ID = one.Working.Record.ID // a name that is taken
	one.Working.Record.Mates = []string{"qelse"}
	got := withKeptIDs("aa", []Item{one, two}, []known{{"qold", two.Working.Anchor}})
	if got[0].Working.Record.ID != one.Working.Record.ID || got[1].Working.Record.ID != "qold" {
		t.Errorf("got %s, %s", got[0].Working.Record.ID, got[1].Working.Record.ID)
	}
	again := withKeptIDs("aa", []Item{one, two}, nil)
	if a, b := again[0].Working.Record.ID, again[1].Working.Record.ID; a == b || len(b) != 10 {
		t.Errorf("got %s, %s", a, b)
	}
	if one.Working.Record.ID == "qold" || two.Working.Record.ID == "qold" {
		t.Error("the items given were changed")
	}
}
