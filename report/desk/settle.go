package desk

import (
	"net/http"

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

// standing finds a checker's standing decision about a row.
func standing(file *ledger.Decisions, row ledger.Row) (*ledger.Decision, error) {
	all, err := file.All(0)
	if err != nil {
		return nil, err
	}
	undone := map[int64]bool{}
	for _, d := range all {
		if d.Verdict == ledger.Undone {
			undone[d.Undoes] = true
		}
	}
	for i := len(all) - 1; i >= 0; i-- {
		d := &all[i]
		if d.Verdict == ledger.Undone || undone[d.Seq] || d.Seen.Working.Record.PaperSHA256 != row.Working.Record.PaperSHA256 {
			continue
		}
		if _, ok := d.Anchor.Meets(row.Working.Anchor); ok {
			return d, nil
		}
	}
	return nil, nil
}

func (d *Desk) sides(row ledger.Row) ([]sideView, error) {
	var out []sideView
	for i, file := range d.opt.Sides {
		side := sideView{Checker: d.opt.Settle[i], Decision: "not decided"}
		dec, err := standing(file, row)
		if err != nil {
			return nil, err
		}
		if dec != nil {
			side.Decision, side.Reason, side.Note = string(dec.Verdict), dec.Reason, dec.Note
			side.Record = &dec.Decided.Working.Record
		}
		out = append(out, side)
	}
	return out, nil
}

// toSettle says whether the two checkers differ about a row: in what they
// decided, or in what they hold the values to be.
func (d *Desk) toSettle(row ledger.Row) (bool, error) {
	sides, err := d.sides(row)
	if err != nil {
		return false, err
	}
	a, b := sides[0], sides[1]
	if a.Record == nil && b.Record == nil {
		return false, nil
	}
	if a.Record == nil || b.Record == nil {
		return true, nil
	}
	keeps := func(s sideView) bool {
		return s.Decision == string(ledger.Confirmed) || s.Decision == string(ledger.Amended)
	}
	if keeps(a) != keeps(b) {
		return true, nil
	}
	return keeps(a) && len(ledger.Differs(*a.Record, *b.Record)) > 0, nil
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
	for i, file := range d.opt.Sides {
		if d.opt.Settle[i] != checker {
			continue
		}
		dec, err := standing(file, row)
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
