package table

import "halfspan/extract/paper"

// vocabulary is what the whole paper tells about words: which words its running
// text uses, and which headings of its tables name arms.
type vocabulary struct {
	text map[string]bool
	arms map[string]bool // folded names of arms, as table headings print them with an n
}

func newVocabulary(doc *paper.Document) *vocabulary {
	v := &vocabulary{text: map[string]bool{}, arms: map[string]bool{}}
	for i := range doc.Blocks {
		b := &doc.Blocks[i]
		if b.Kind == paper.TableBlock && b.Table != nil {
			v.add(b.Table.Caption.S)
			continue
		}
		if b.Kind != paper.Reference {
			v.add(b.Text.S)
		}
	}
	return v
}

func (v *vocabulary) add(s string) {
	for _, w := range words(s) {
		v.text[w] = true
	}
}

func (v *vocabulary) knows(word string) bool { return v.text[word] }
