package extract

import (
	"testing"

	"halfspan/extract/paper"
	"halfspan/extract/result"
)

func TestDoubtsReachTheResultsReadThere(t *testing.T) {
	at := func(page int, x int32) result.Result {
		return result.Result{Sources: []result.Source{
			{Field: "estimate", Place: paper.Place{Page: page, Box: paper.Box{X0: x, Y0: 100, X1: x + 50, Y1: 120}}},
			{Field: "outcome", Place: paper.Place{Page: page, Box: paper.Box{X0: 900, Y0: 100, X1: 950, Y1: 120}}},
		}}
	}
	doc := &paper.Document{
		Pages: []paper.Page{{Number: 1, Reader: "both"}, {Number: 2, Reader: "ocr"}},
		Doubts: []paper.Doubt{
			{Page: 1, Box: paper.Box{X0: 110, Y0: 105, X1: 120, Y1: 115}, Kind: "readers-differ", Text: "12.4 or 12.1"},
			{Page: 1, Box: paper.Box{X0: 900, Y0: 100, X1: 950, Y1: 120}, Kind: "repaired", Text: "a letter in a heading"},
		},
	}
	results := []result.Result{at(1, 100), at(1, 500), at(2, 100)}
	raiseDoubts(doc, results)
	for i, want := range []string{"readers-differ", "", "ocr"} {
		got := ""
		for _, f := range results[i].Flags {
			got += f.Name
		}
		if got != want {
			t.Errorf("result %d carries %q, want %q", i, got, want)
		}
	}
}

// In a text file a doubt stands by its bytes.
func TestDoubtsByOffset(t *testing.T) {
	at := func(offset int) result.Result {
		return result.Result{Sources: []result.Source{{Field: "estimate", Place: paper.Place{Line: 3, Offset: offset}}}}
	}
	doc := &paper.Document{Doubts: []paper.Doubt{
		{From: 40, To: 50, Kind: "columns-unclear", Text: "two ways"},
		{From: 60, To: 70, Kind: "columns-unclear", Text: "two ways"},
	}}
	for offset, want := range map[int]bool{39: false, 40: true, 49: true, 50: false, 65: true, 70: false} {
		results := []result.Result{at(offset)}
		raiseDoubts(doc, results)
		if got := results[0].HasFlag("columns-unclear"); got != want {
			t.Errorf("offset %d: flag %v, want %v", offset, got, want)
		}
	}
}
