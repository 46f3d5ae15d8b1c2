package prose

import (
	"sort"

	"halfspan/extract/bind/background"
	"halfspan/extract/bind/convention"
	"halfspan/extract/grammar"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// Find gives the results printed in the running text of a paper, in reading
// order, with the paper's background. Tables are not its business, but the
// results that were read there tell it the arms of the study and their sizes.
func Find(doc *paper.Document, back *background.Background, tables []result.Result) []result.Result {
	f := &finder{doc: doc, back: back, conv: back.Conventions, comma: decimalComma(doc)}
	f.learn(tables)
	for i := range doc.Blocks {
		b := &doc.Blocks[i]
		switch b.Kind {
		case paper.Paragraph, paper.Caption, paper.Note:
		default:
			continue
		}
		if b.Zone == paper.References {
			continue
		}
		f.block(i)
	}
	f.repeats()
	return f.out
}

// finder holds what is known of the whole paper while its blocks are read.
type finder struct {
	doc   *paper.Document
	back  *background.Background
	conv  *convention.Conventions // of the background
	comma bool                    // the paper prints decimal commas
	cast  cast                    // its arms and their sizes
	out   []result.Result
}

// decimalComma reports whether the paper prints decimal commas: most numbers
// with one mark have a comma where only a decimal mark can stand.
func decimalComma(doc *paper.Document) bool {
	commas, points := 0, 0
	for i := range doc.Blocks {
		b := &doc.Blocks[i]
		if b.Zone == paper.References || b.Kind == paper.Reference || b.Kind == paper.Furniture {
			continue
		}
		c, p := grammar.DecimalMarks(b.Text.S)
		commas, points = commas+c, points+p
	}
	return commas > 20 && commas > 4*points
}

// para is one block with what the grammar read in it.
type para struct {
	f      *finder
	block  *paper.Block
	run    *paper.TextRun
	s      string
	r      grammar.Reading
	arms   map[int][]mention // by the start of their sentence, once looked for
	facts  map[fact]bool
	places map[fact][][]int
	ends   []int  // byte offsets at which sentences end
	said   []said // words for a spread met so far
	used   []bool // items that belong to a spread and are no estimate
	cands  []cand // spreads with their estimates
}

func (f *finder) block(i int) {
	b := &f.doc.Blocks[i]
	if len(b.Text.S) == 0 {
		return
	}
	text := convention.Text(&b.Text)
	text.DecimalComma = f.comma
	p := &para{f: f, arms: map[int][]mention{}, facts: map[fact]bool{}, places: map[fact][][]int{}, block: b, run: &b.Text, s: b.Text.S, r: grammar.Read(text)}
	p.sentences()
	if !p.isProse() {
		return
	}
	p.used = make([]bool, len(p.r.Items))
	for k := range p.r.Items {
		p.spread(k)
	}
	p.lists()
	first := len(f.out)
	for k := range p.cands {
		if c := &p.cands[k]; p.inSentence(c.est.Start) && c.onePower() && !p.cut(c) {
			f.out = append(f.out, p.result(c))
		}
	}
	p.mates(first)
}

// mates ties together the results of one estimate: its interval and its range.
func (p *para) mates(first int) {
	out := p.f.out
	for i := first; i < len(out); i++ {
		for j := i + 1; j < len(out) && j < i+4; j++ {
			a, b := place(&out[i], "estimate"), place(&out[j], "estimate")
			if out[i].Estimate != "" && a == b && a != (paper.Place{}) {
				out[i].Mates = append(out[i].Mates, j)
				out[j].Mates = append(out[j].Mates, i)
			}
		}
	}
}

func place(r *result.Result, field string) paper.Place {
	for _, s := range r.Sources {
		if s.Field == field {
			return s.Place
		}
	}
	return paper.Place{}
}

// sentences notes where sentences end: a full stop with space behind it and a
// capital, a bracket or a number next, abbreviations aside.
func (p *para) sentences() {
	toks := p.r.Tokens
	for i := 0; i+1 < len(toks); i++ {
		t, next := toks[i], toks[i+1]
		if t.Kind != grammar.TokPeriod && !(t.Kind == grammar.TokOther && (t.Value == "?" || t.Value == "!")) {
			continue
		}
		for next.Kind == grammar.TokRaised && i+2 < len(toks) { // a citation behind the stop
			i++
			next = toks[i+1]
		}
		if !next.Spaced || i > 0 && abbreviations[toks[i-1].Value] {
			continue
		}
		if next.Kind == grammar.TokWord && !capital(p.s[next.Start:]) {
			continue
		}
		if next.Kind == grammar.TokComma || next.Kind == grammar.TokSemicolon {
			continue
		}
		p.ends = append(p.ends, next.Start)
	}
	p.ends = append(p.ends, len(p.s))
	p.cutLong()
	p.joinItems()
}

// joinItems takes out the ends that fall into an item: "−14. 6 to −1.9".
func (p *para) joinItems() {
	kept := p.ends[:0]
	k := 0
	for _, end := range p.ends {
		for k < len(p.r.Items) && p.r.Items[k].End <= end {
			k++
		}
		if k < len(p.r.Items) && p.r.Items[k].Start < end && end < len(p.s) {
			continue
		}
		kept = append(kept, end)
	}
	p.ends = kept
}

var abbreviations = map[string]bool{
	"vs": true, "fig": true, "figs": true, "eg": true, "ie": true, "cf": true, "approx": true, "resp": true, "ca": true,
	"al": true, "no": true, "dr": true, "st": true, "e.g": true, "i.e": true, "p": true, "ref": true, "refs": true, "eq": true,
}

func capital(s string) bool {
	for _, r := range s {
		return r >= 'A' && r <= 'Z' || r >= 'À' && r <= 'Þ'
	}
	return false
}

// sentence gives the byte range of the sentence that holds byte b.
func (p *para) sentence(b int) (start, end int) {
	k := sort.SearchInts(p.ends, b+1)
	if k > 0 {
		start = p.ends[k-1]
	}
	if k < len(p.ends) {
		return start, p.ends[k]
	}
	return start, len(p.s)
}

// sentenceNo numbers the sentence that holds byte b.
func (p *para) sentenceNo(b int) int { return sort.SearchInts(p.ends, b+1) }
