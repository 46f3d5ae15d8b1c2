package ledger

import (
	"cmp"
	"slices"

	"halfspan/extract/result"
)

// file is everything that was decided about one result, in order.
type file struct {
	entries []Decision
}

func (f *file) last() *Decision       { return &f.entries[len(f.entries)-1] }
func (f *file) id() string            { return f.last().ResultID }
func (f *file) anchor() result.Anchor { return f.last().Anchor }
func (f *file) paper() string         { return f.last().Seen.Working.Record.Paper }
func (f *file) byHand() string        { return f.last().ByHand }

func (f *file) holds(seq int64) bool {
	return slices.ContainsFunc(f.entries, func(d Decision) bool { return d.Seq == seq })
}

// standing is the last decision that was not taken back; nil if there is none.
func (f *file) standing() *Decision {
	undone := map[int64]bool{}
	for i := len(f.entries) - 1; i >= 0; i-- {
		switch d := &f.entries[i]; {
		case d.Verdict == Undone:
			undone[d.Undoes] = true
		case !undone[d.Seq]:
			return d
		}
	}
	return nil
}

// history is everything that a checker decided, by the content of the papers.
type history struct {
	contents  []string // in the order of their first decision
	byContent map[string][]*file
}

// fileAway puts a decision with the others about its result: the same content
// and an anchor that meets theirs, the nearest if several do. Results added by
// hand may have no place, so that only their id tells them apart.
func (h *history) fileAway(d Decision) {
	sha := d.Seen.Working.Record.PaperSHA256
	var best *file
	var nearest int64
	for _, f := range h.byContent[sha] {
		if (f.byHand() != "") != (d.ByHand != "") {
			continue
		}
		if d.ByHand != "" {
			if f.id() == d.ResultID {
				best = f
			}
			continue
		}
		if distance, ok := f.anchor().Meets(d.Anchor); ok && (best == nil || distance < nearest) {
			best, nearest = f, distance
		}
	}
	if best != nil {
		best.entries = append(best.entries, d)
		return
	}
	if h.byContent == nil {
		h.byContent = map[string][]*file{}
	}
	if h.byContent[sha] == nil {
		h.contents = append(h.contents, sha)
	}
	h.byContent[sha] = append(h.byContent[sha], &file{[]Decision{d}})
}

// joinPaper gives the rows of one paper: its results as read, each with what was
// decided about it, then the results added by hand and those that are gone. gone
// says why the whole paper is not there; empty if it is.
func joinPaper(items []Item, files []*file, gone string) []Row {
	var own, hand []*file
	for _, f := range files {
		if f.byHand() != "" {
			hand = append(hand, f)
		} else {
			own = append(own, f)
		}
	}
	olds := make([]result.Anchor, len(own))
	for i, f := range own {
		olds[i] = f.anchor()
	}
	news := make([]result.Anchor, len(items))
	for i := range items {
		news[i] = items[i].Working.Anchor
	}
	found := make([]bool, len(own))
	rows := make([]Row, 0, len(items))
	for i, m := range match(olds, news) {
		row := Row{Item: items[i]}
		if m >= 0 {
			found[m] = true
			row.Decision = own[m].standing()
		}
		rows = append(rows, row.settled())
	}
	var lost []Row
	for i, f := range own {
		if d := f.standing(); d != nil && !found[i] {
			why := gone
			if why == "" {
				why = "this version no longer finds it"
			}
			lost = append(lost, Row{Item: d.Seen, Decision: d, Gone: why}.settled())
		}
	}
	for _, f := range hand {
		if d := f.standing(); d != nil {
			lost = append(lost, Row{Item: f.entries[0].Seen, Decision: d, ByHand: f.byHand(), Gone: gone}.settled())
		}
	}
	slices.SortStableFunc(lost, func(a, b Row) int {
		x, y := a.Working.Anchor, b.Working.Anchor
		return cmp.Or(x.Page-y.Page, cmp.Compare(y.Y, x.Y), cmp.Compare(x.X, y.X), x.Offset-y.Offset)
	})
	return append(rows, lost...)
}

// settled works out a row's state from its reading and its decision.
func (r Row) settled() Row {
	r.State = StateOpen
	if d := r.Decision; d != nil {
		r.State = State(d.Verdict)
		if r.Gone == "" && r.ByHand == "" {
			r.Differs = Differs(d.Seen.Working.Record, r.Working.Record)
		}
		if len(r.Differs) > 0 {
			r.State = StateDiffering
		}
	}
	return r
}
