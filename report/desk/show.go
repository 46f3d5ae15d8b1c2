package desk

import (
	"context"
	"net/http"
	"slices"
	"strings"

	"halfspan/extract/paper"
)

// The widths, in pixels, that a page may be drawn at.
const (
	minWidth = 200
	maxWidth = 3000
	maxPages = 1 << 20

	maxOffset = 1 << 40 // of a byte in a file
)

type leafView struct {
	Of     int     `json:"of"` // pages of the paper; 0 where it has none
	Number int     `json:"number"`
	Rotate int     `json:"rotate"`
	X0     float64 `json:"x0"`
	Y0     float64 `json:"y0"`
	X1     float64 `json:"x1"`
	Y1     float64 `json:"y1"`
}

// leaf answers with the geometry of one page, and begins to draw the picture that
// will be asked for next where the browser foresees its width.
func (d *Desk) leaf(r *http.Request) (any, error) {
	p, err := d.paperOf(r)
	if err != nil {
		return nil, err
	}
	number, err := numberOf(r, "page", 1, maxPages)
	if err != nil {
		return nil, err
	}
	if soon, err := numberOf(r, "soon", minWidth, maxWidth); err == nil {
		go func(ctx context.Context) {
			_, _ = d.pictures.get(ctx, pictureKey{paperKey(p.SHA256), number, soon}) // asked for again, it says what failed
		}(context.WithoutCancel(r.Context()))
	}
	page, of, err := d.opt.Papers.Page(r.Context(), p, number)
	if err != nil {
		return nil, err
	}
	b := page.Box
	return leafView{of, page.Number, page.Rotate, float64(b.X0) / 100, float64(b.Y0) / 100, float64(b.X1) / 100, float64(b.Y1) / 100}, nil
}

func (d *Desk) words(r *http.Request) (any, error) {
	p, err := d.paperOf(r)
	if err != nil {
		return nil, err
	}
	page, err := numberOf(r, "page", 1, maxPages)
	if err != nil {
		return nil, err
	}
	words, err := d.opt.Papers.Words(r.Context(), p, page)
	if err != nil {
		return nil, err
	}
	if words == nil {
		words = []Word{}
	}
	return map[string]any{"words": words}, nil
}

// picture answers with a page as PNG. Browsers may keep it: a page never
// changes under one content hash.
func (d *Desk) picture(w http.ResponseWriter, r *http.Request) {
	p, err := d.paperOf(r)
	if err != nil {
		refuse(w, http.StatusNotFound, err.Error())
		return
	}
	page, err := numberOf(r, "page", 1, maxPages)
	if err == nil {
		var width int
		if width, err = numberOf(r, "width", minWidth, maxWidth); err == nil {
			var png []byte
			if png, err = d.pictures.get(r.Context(), pictureKey{paperKey(p.SHA256), page, width}); err == nil {
				w.Header().Set("Content-Type", "image/png")
				w.Header().Set("Cache-Control", "private, max-age=3600")
				_, _ = w.Write(png)
				return
			}
			refuse(w, http.StatusInternalServerError, err.Error())
			return
		}
	}
	refuse(w, http.StatusBadRequest, err.Error())
}

// spanView is a stretch of text; Field says what was read there, empty where
// nothing was.
type spanView struct {
	Text  string `json:"text"`
	Field string `json:"field,omitempty"`
}

type cellText struct {
	Head  bool       `json:"head,omitempty"`
	Rows  int        `json:"rows"`
	Cols  int        `json:"cols"`
	Spans []spanView `json:"spans"`
}

type blockView struct {
	Head  bool         `json:"head,omitempty"`
	Note  bool         `json:"note,omitempty"`
	Spans []spanView   `json:"spans,omitempty"` // of a table: its caption
	Rows  [][]cellText `json:"rows,omitempty"`
}

// around is how many blocks before and after a result are shown with it.
const around = 3

// passage shows where a result stands in a paper without pages: its block as
// read, with the blocks before and after it, and the offsets of the places that
// are in them.
func (d *Desk) passage(r *http.Request) (any, error) {
	p, err := d.paperOf(r)
	if err != nil {
		return nil, err
	}
	row, err := d.opt.Book.Row(r.URL.Query().Get("id"))
	if err != nil {
		return nil, err
	}
	doc, err := d.opt.Papers.Document(r.Context(), p)
	if err != nil {
		return nil, err
	}
	marks, err := d.mateMarks(r.URL.Query().Get("mates"))
	if err != nil {
		return nil, err
	}
	marks = append(marks, marksOf(row.Current().Working)...)
	offset := row.Working.Anchor.Offset
	if r.URL.Query().Has("at") { // another place that the result was read from
		if offset, err = numberOf(r, "at", 0, maxOffset); err != nil {
			return nil, err
		}
	}
	at := blockAt(doc, offset)
	if at < 0 {
		return nil, fail(http.StatusNotFound, "this place is not found in the paper any more: scan it again")
	}
	blocks, holds := make([]blockView, 0, 3), make([]int, 0, len(marks))
	for i := max(at-around, 0); i <= min(at+around, len(doc.Blocks)-1); i++ {
		b := &doc.Blocks[i]
		heading := b.Kind == paper.Heading && b.Text.S == doc.Blocks[at].Section // stands above already
		if i == at || !heading && b.Kind != paper.TableBlock && b.Kind != paper.Reference && b.Kind != paper.Furniture {
			blocks = append(blocks, viewBlock(b, marks)...)
			for _, m := range marks {
				if holdsOffset(b, m.offset) {
					holds = append(holds, m.offset)
				}
			}
		}
	}
	return map[string]any{"heading": doc.Blocks[at].Section, "page": doc.Blocks[at].Page, "blocks": blocks, "holds": holds}, nil
}

// mateMarks are the numbers of the other results of a row, by their ids.
func (d *Desk) mateMarks(ids string) ([]mark, error) {
	var out []mark
	for _, id := range strings.Fields(ids) {
		row, err := d.opt.Book.Row(id)
		if err != nil {
			return nil, err
		}
		for _, m := range marksOf(row.Current().Working) {
			if slices.Contains(own, m.field) {
				out = append(out, mark{m.offset, m.text, "mate"})
			}
		}
	}
	return out, nil
}

func blockAt(doc *paper.Document, offset int) int {
	return slices.IndexFunc(doc.Blocks, func(b paper.Block) bool { return holdsOffset(&b, offset) })
}

func holdsOffset(b *paper.Block, offset int) bool {
	for _, t := range textsOf(b) {
		for _, run := range t.Runs {
			if start := run.Place.Offset; offset >= start && offset < start+run.End-run.Start {
				return true
			}
		}
	}
	return false
}

// textsOf lists the stretches of text of a block.
func textsOf(b *paper.Block) []*paper.TextRun {
	out := []*paper.TextRun{&b.Text}
	if b.Table == nil {
		return out
	}
	out = append(out, &b.Table.Caption)
	for i := range b.Table.Cells {
		out = append(out, &b.Table.Cells[i].Text)
	}
	for i := range b.Table.Notes {
		out = append(out, &b.Table.Notes[i].Text)
	}
	return out
}

func viewBlock(b *paper.Block, marks []mark) []blockView {
	if b.Table == nil {
		return []blockView{{Head: b.Kind == paper.Heading, Spans: spans(&b.Text, marks, "")}}
	}
	t := b.Table
	label := t.Label
	if label != "" {
		label += ". "
	}
	table := blockView{Spans: spans(&t.Caption, marks, label), Rows: make([][]cellText, t.Rows)}
	for i := range t.Cells {
		c := &t.Cells[i]
		if c.Row >= 0 && c.Row < t.Rows {
			table.Rows[c.Row] = append(table.Rows[c.Row], cellText{c.Head || c.Row < t.HeadRows, c.RowSpan, c.ColSpan, spans(&c.Text, marks, "")})
		}
	}
	out := []blockView{table}
	for i := range t.Notes {
		n := &t.Notes[i]
		lead := n.Mark
		if lead != "" {
			lead += " "
		}
		out = append(out, blockView{Note: true, Spans: spans(&n.Text, marks, lead)})
	}
	return out
}
