package layout

import (
	"cmp"
	"slices"

	"halfspan/extract/layout/grid"
	"halfspan/extract/layout/words"
	"halfspan/extract/paper"
)

// Arrangement is a paper in reading order.
type Arrangement struct {
	Title  string // the largest print on the first page; empty where nothing stands out
	Blocks []paper.Block
	Pages  []PageLines
}

// PageLines is what is printed on one page, in reading order. Tables stand row
// by row; running heads and figure text are included.
type PageLines struct {
	Number int
	Lines  []PrintedLine
}

// PrintedLine is one printed line of a column, its words from left to right.
type PrintedLine struct {
	Words []*words.Word
	Cells bool // a row of a table: wide gaps between its words part its cells
}

// Arrange turns the pages of a paper into blocks in reading order.
func Arrange(pages []paper.GlyphPage) *Arrangement {
	sheets := make([][]sheet, len(pages))
	fonts := map[string]int32{}
	for i := range pages {
		sheets[i] = sheetsOf(&pages[i], fonts)
	}
	markFurniture(sheets)
	a := &arranger{sheets: sheets}
	a.body, a.font = bodyPrint(sheets)
	a.takeTables()
	a.findColumns()
	return a.finish(pages)
}

// arranger holds the paper while it is arranged.
type arranger struct {
	sheets [][]sheet
	body   int   // the paper's usual font size
	font   int32 // and font
	drafts []draft
	pages  []PageLines
	dict   map[string]bool
}

// sheetsOf makes the sheets of a page. fonts numbers the paper's fonts by name
// and grows.
func sheetsOf(p *paper.GlyphPage, fonts map[string]int32) []sheet {
	own := make(map[int32]int32, len(p.Fonts))
	for i, name := range p.Fonts {
		if len(name) > 7 && name[6] == '+' { // the mark of a font cut down to what is used
			name = name[7:]
		}
		if _, ok := fonts[name]; !ok {
			fonts[name] = int32(len(fonts))
		}
		own[int32(i)] = fonts[name]
	}
	frames := words.Read(p)
	out := make([]sheet, len(frames))
	for i := range frames {
		s := &out[i]
		s.page, s.frame, s.fonts = p.Page.Number, frames[i], own
		s.lines = make([]line, len(frames[i].Lines))
		for k, ws := range wordsOf(frames[i].Lines) {
			s.lines[k] = s.line(ws)
		}
	}
	return out
}

// bodyPrint is the font size and the font of the paper's running text: of most
// glyphs of its longer lines before the references.
func bodyPrint(sheets [][]sheet) (size int, font int32) {
	sizes, fonts := map[int]int{}, map[int32]int{}
	for _, page := range sheets {
		end := false
		for i := range page {
			for k := range page[i].lines {
				l := &page[i].lines[k]
				end = end || len(l.words) <= 3 && plainWord(l.words[len(l.words)-1].Text) == "references"
				n := l.glyphs
				if len(l.words) < 6 {
					n = (n + 9) / 10
				}
				sizes[(l.size+5)/10] += n
				fonts[l.font] += n
			}
		}
		if end {
			break
		}
	}
	delete(fonts, -1)
	return max(commonest(sizes), 10) * 10, commonest(fonts)
}

// commonest is the key with the highest count, the lower one of equals.
func commonest[K int | int32](count map[K]int) K {
	var best K
	most := 0
	for k, n := range count {
		if n > most || n == most && k < best {
			best, most = k, n
		}
	}
	return best
}

// takeTables finds the tables of the paper, takes their words out of the lines
// and puts one line in for each table.
func (a *arranger) takeTables() {
	var in []grid.Sheet
	var at []*sheet
	var from [][]int // of each sheet: the frame's line for each line that the search sees
	for p := range a.sheets {
		for i := range a.sheets[p] {
			s := &a.sheets[p][i]
			// Running heads are no part of a table.
			f := s.frame
			f.Lines = nil
			var kept []int
			for k := range s.lines {
				if !s.lines[k].furniture {
					f.Lines, kept = append(f.Lines, s.frame.Lines[k]), append(kept, k)
				}
			}
			in, at, from = append(in, grid.Sheet{Page: s.page, Frame: &f}), append(at, s), append(from, kept)
		}
	}
	for i, regions := range grid.FindAll(in, int32(a.body)) {
		at[i].takeRegions(regions, from[i])
	}
}

// takeRegions takes the words of the regions out of the lines.
func (s *sheet) takeRegions(regions []grid.Region, from []int) {
	if len(regions) == 0 {
		return
	}
	taken := map[grid.Ref]bool{}
	var tables []line
	for i := range regions {
		r := &regions[i]
		var ws []*words.Word
		var rows []line
		for _, part := range [][]grid.Ref{r.Caption, r.Body, r.Notes} {
			var own []line
			for _, ref := range part {
				key := grid.Ref{Line: int32(from[ref.Line]), Word: ref.Word}
				if taken[key] {
					continue
				}
				taken[key] = true
				w := &s.frame.Lines[key.Line].Words[key.Word]
				ws = append(ws, w)
				own = appendRow(own, w, -int(s.frame.Lines[key.Line].Base))
			}
			rows = append(rows, s.settleRows(own)...)
		}
		if len(ws) == 0 {
			continue
		}
		l := s.line(ws)
		for _, row := range rows {
			l.top, l.bot = min(l.top, row.top), max(l.bot, row.bot)
		}
		l.words = nil
		l.table = &tableAt{rows: rows, joined: r.Joined}
		if !r.Joined {
			l.table.table = r.Read(s.page)
			// The table may be wider than its words: a white last column.
			if t := s.frame.Upright(l.table.table.Box); l.table.table.Page == s.page && t.X1 > t.X0 {
				l.x0, l.x1 = min(l.x0, int(t.X0)), max(l.x1, int(t.X1))
			}
		}
		tables = append(tables, l)
	}
	s.dropWords(taken)
	s.lines = append(s.lines, tables...)
}

// appendRow adds a word to the row with its line's baseline, the last one or a
// new one.
func appendRow(rows []line, w *words.Word, base int) []line {
	for i := len(rows) - 1; i >= 0 && i >= len(rows)-3; i-- {
		if abs(rows[i].base-base)*4 <= int(w.Size) {
			rows[i].words = append(rows[i].words, w)
			return rows
		}
	}
	return append(rows, line{words: []*words.Word{w}, base: base})
}

func (s *sheet) settleRows(rows []line) []line {
	out := make([]line, len(rows))
	for i, r := range rows {
		slices.SortStableFunc(r.words, func(a, b *words.Word) int { return cmp.Compare(a.Box.X0, b.Box.X0) })
		out[i] = s.line(r.words)
		out[i].base = r.base
	}
	slices.SortStableFunc(out, func(a, b line) int { return cmp.Compare(a.base, b.base) })
	return out
}

// dropWords takes words out of the lines; what is left of a line on either
// side of them becomes a line of its own.
func (s *sheet) dropWords(taken map[grid.Ref]bool) {
	var out []line
	for i := range s.lines {
		start := 0
		ws := s.lines[i].words
		for k := 0; k <= len(ws); k++ {
			if k < len(ws) && !taken[grid.Ref{Line: int32(i), Word: int32(k)}] {
				continue
			}
			if k > start {
				l := s.line(ws[start:k])
				l.furniture = s.lines[i].furniture
				out = append(out, l)
			}
			start = k + 1
		}
	}
	s.lines = out
}

// findColumns finds the gutters of all sheets, the sure ones first: where they
// stand on one page they are believed with less text on another.
func (a *arranger) findColumns() {
	var upright []*sheet
	for p := range a.sheets {
		for i := range a.sheets[p] {
			if s := &a.sheets[p][i]; !s.frame.Oblique {
				upright = append(upright, s)
			}
		}
	}
	var prior []known
	for _, s := range upright {
		s.weighStripes(a.body)
		for _, c := range s.chooseGutters(nil, a.body) {
			if c.left >= 6 && c.right >= 6 && c.left+c.right >= 16 {
				prior = append(prior, known{(c.g.x0 + c.g.x1) / 2, s.edgeOf(&c.g)})
			}
		}
	}
	slices.SortFunc(prior, func(a, b known) int { return cmp.Or(cmp.Compare(a.mid, b.mid), cmp.Compare(a.edge, b.edge)) })
	prior = slices.CompactFunc(prior, func(x, y known) bool { return abs(y.mid-x.mid) < cell && abs(y.edge-x.edge) < cell })
	for _, s := range upright {
		for _, c := range s.chooseGutters(prior, a.body) {
			s.gutters = append(s.gutters, c.g)
		}
		s.addKnown(prior, a.body)
	}
}

// finish puts the sheets in order, numbers the lines and makes the blocks.
func (a *arranger) finish(pages []paper.GlyphPage) *Arrangement {
	for p := range a.sheets {
		out := PageLines{Number: pages[p].Page.Number}
		for i := range a.sheets[p] {
			a.arrangeSheet(&a.sheets[p][i], &out)
		}
		a.pages = append(a.pages, out)
	}
	a.learnWords()
	return &Arrangement{Title: a.title(), Blocks: a.blocks(), Pages: a.pages}
}

// arrangeSheet orders one sheet: running heads first, then the columns, then
// what stands at the foot.
func (a *arranger) arrangeSheet(s *sheet, out *PageLines) {
	var head, foot, body []line
	middle := 0
	for i := range s.lines {
		middle += s.lines[i].mid() / max(len(s.lines), 1)
	}
	for _, l := range s.lines {
		switch {
		case !l.furniture:
			body = append(body, l)
		case l.mid() < middle && !l.lineNumber:
			head = append(head, l)
		default:
			foot = append(foot, l)
		}
	}
	number := func(ls []line) {
		for i := range ls {
			l := &ls[i]
			l.no = len(out.Lines) + 1
			if l.table == nil {
				out.Lines = append(out.Lines, PrintedLine{Words: l.words})
				continue
			}
			for _, row := range l.table.rows {
				out.Lines = append(out.Lines, PrintedLine{Words: row.words, Cells: true})
			}
		}
	}
	margin := func(ls []line) {
		s.lines = ls
		s.place()
		s.joinRows()
		number(s.lines)
		for i := range s.lines {
			a.drafts = append(a.drafts, draft{kind: paper.Furniture, lines: s.lines[i : i+1], page: s.page})
		}
	}
	gutters := s.gutters
	s.gutters = nil
	margin(head)
	s.lines, s.gutters = body, gutters
	var stacks []stack
	if s.frame.Oblique {
		for i := range s.lines {
			stacks = append(stacks, stack{lines: s.lines[i : i+1]})
		}
	} else {
		stacks = s.columns()
	}
	for i := range stacks {
		number(stacks[i].lines)
		a.drafts = append(a.drafts, a.split(s, &stacks[i])...)
	}
	s.gutters = nil
	margin(foot)
}
