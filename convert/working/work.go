package working

import (
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// Facts are what a working needs to know of the paper as a whole.
type Facts struct {
	Path     string // as it is to stand in the record: relative to the scanned folder, with '/'
	SHA256   string // of the file's content
	Format   paper.Format
	Problems []paper.Problem
	Typed    bool // a single result typed in: what it is about is nobody's question
}

// FactsOf takes the facts from a document.
func FactsOf(doc *paper.Document) Facts {
	return Facts{Path: doc.Path, SHA256: doc.SHA256, Format: doc.Format, Problems: doc.Problems}
}

// Work makes the working of every result of one paper, in the order given. It
// reads the results, changes none of them, and never fails: what cannot be
// worked out is withheld with the reason.
func Work(doc Facts, results []result.Result) []Working {
	items := make([]*item, len(results))
	ids := names(doc.SHA256, results)
	for i := range results {
		items[i] = newItem(doc, &results[i])
		items[i].rec().ID = ids[i]
	}
	for i, it := range items {
		for _, m := range results[i].Mates {
			if m >= 0 && m < len(items) && m != i {
				it.mates = append(it.mates, items[m])
				it.rec().Mates = append(it.rec().Mates, ids[m])
			}
		}
	}
	for _, row := range rowsOf(items) {
		for _, it := range row {
			it.row = row
		}
	}
	for _, it := range items {
		run(checksOfReading(), it)
		applyPolicy(it)
	}
	compare(items)
	if !doc.Typed {
		compareContexts(items)
	}
	effects := effectOf(Flags())
	out := make([]Working, len(items))
	for _, it := range items {
		run(checksOfWorking(), it)
		holdBackGuesses(it)
	}
	weighTogether(items)
	for i, it := range items {
		it.finish(effects)
		out[i] = *it.w
	}
	return out
}
