package desk

import (
	"net/http"
	"sync"

	"halfspan/convert/working"
	"halfspan/report/ledger"
)

// sideView is what one of two checkers decided about a result.
type sideView struct {
	Checker  string          `json:"checker"`
	Decision string          `json:"decision"`
	Record   *working.Record `json:"record"`
	Reason   string          `json:"reason"`
	Note     string          `json:"note"`
}

// side keeps one checker's decisions as far as they were read: a file of
// decisions only grows, so each is read once.
type side struct {
	file *ledger.Decisions

	mu      sync.Mutex
	last    int64
	undone  map[int64]bool
	byPaper map[string][]ledger.Decision // by content hash, in order
}

func (s *side) refresh() error {
	fresh, err := s.file.All(s.last)
	if err != nil {
		return err
	}
	if s.byPaper == nil {
		s.byPaper, s.undone = map[string][]ledger.Decision{}, map[int64]bool{}
	}
	for _, d := range fresh {
		s.last = d.Seq
		if d.Verdict == ledger.Undone {
			s.undone[d.Undoes] = true
			continue
		}
		sha := d.Seen.Working.Record.PaperSHA256
		s.byPaper[sha] = append(s.byPaper[sha], d)
	}
	return nil
}

// standing finds the checker's standing decision about a row; nil where there is
// none.
func (s *side) standing(row ledger.Row) (*ledger.Decision, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if err := s.refresh(); err != nil {
		return nil, err
	}
	of := s.byPaper[row.Working.Record.PaperSHA256]
	for i := len(of) - 1; i >= 0; i-- {
		if s.undone[of[i].Seq] {
			continue
		}
		if _, ok := of[i].Anchor.Meets(row.Working.Anchor); ok {
			found := of[i]
			return &found, nil
		}
	}
	return nil, nil
}

func (d *Desk) sides(row ledger.Row) ([]sideView, error) {
	var out []sideView
	for i, side := range d.settling {
		view := sideView{Checker: d.opt.Settle[i], Decision: "not decided"}
		dec, err := side.standing(row)
		if err != nil {
			return nil, err
		}
		if dec != nil {
			view.Decision, view.Reason, view.Note = string(dec.Verdict), dec.Reason, dec.Note
			view.Record = &dec.Decided.Working.Record
		}
		out = append(out, view)
	}
	return out, nil
}

// toSettle says whether the two checkers have both decided about a row and
// differ: in what they decided, or in what they hold the values to be.
func (d *Desk) toSettle(row ledger.Row) (bool, error) {
	sides, err := d.sides(row)
	if err != nil {
		return false, err
	}
	for _, s := range sides {
		if s.Record == nil || s.Decision == string(ledger.Queried) {
			return false, nil
		}
	}
	keeps := func(s sideView) bool { return s.Decision != string(ledger.Dropped) }
	if keeps(sides[0]) != keeps(sides[1]) {
		return true, nil
	}
	return keeps(sides[0]) && len(ledger.Differs(*sides[0].Record, *sides[1].Record)) > 0, nil
}

// settle records which of the two decisions holds, who says so and why, as a
// decision of its own in the settling checker's ledger.
func (d *Desk) settle(r *http.Request) (any, error) {
	body, err := take[struct {
		ID   string `json:"id"`
		Hash string `json:"hash"`
		Take string `json:"take"` // initials, or "neither"
		Why  string `json:"why"`
	}](r)
	if err != nil {
		return nil, err
	}
	if d.opt.Settle[0] == "" {
		return nil, fail(http.StatusBadRequest, "this desk settles nothing: start it with --settle A,B")
	}
	if body.Why == "" {
		return nil, fail(http.StatusUnprocessableEntity, "say why")
	}
	row, err := d.opt.Book.Row(body.ID)
	if err != nil {
		return nil, err
	}
	out := ledger.Draft{ID: row.ID(), Token: body.Hash, Verdict: ledger.Dropped, Reason: "other", Note: body.Why, Mode: "desk, settling",
		Extra: map[string]string{"settles": d.opt.Settle[0] + "," + d.opt.Settle[1], "take": body.Take}}
	if body.Take != "neither" {
		dec, err := d.decisionOf(body.Take, row)
		if err != nil {
			return nil, err
		}
		out.Verdict = dec.Verdict
		if dec.Verdict == ledger.Amended {
			item := dec.Decided
			out.Amended = &item
		}
	}
	if _, err := d.opt.Book.Decide(out); err != nil {
		return nil, plainly(err)
	}
	return map[string]bool{"done": true}, nil
}

func (d *Desk) decisionOf(checker string, row ledger.Row) (*ledger.Decision, error) {
	for i, side := range d.settling {
		if d.opt.Settle[i] != checker {
			continue
		}
		dec, err := side.standing(row)
		if err != nil {
			return nil, err
		}
		if dec == nil {
			return nil, fail(http.StatusUnprocessableEntity, "%s has not decided this result", checker)
		}
		return dec, nil
	}
	return nil, fail(http.StatusBadRequest, "%q is neither of the two checkers", checker)
}
