package desk

import (
	"errors"
	"fmt"
	"net/http"
	"slices"
	"strconv"
	"strings"

	"halfspan/convert/working"
	"halfspan/extract/paper"
	"halfspan/extract/result"
	"halfspan/report/ledger"
)

// amendment is what a person puts right in a result.
type amendment struct {
	Amended map[string]string `json:"amended"`
	Take    string            `json:"take"` // a proposal of the working
}

func amend(row ledger.Row, a amendment) (ledger.Item, error) {
	changed := map[string]string{}
	for field, value := range a.Amended {
		changed[field] = asTyped(value)
	}
	res, work, err := working.Amend(row.Result, row.Working, changed, a.Take)
	if err != nil {
		return ledger.Item{}, fail(http.StatusUnprocessableEntity, "%v", err)
	}
	return ledger.Item{Result: res, Working: work}, nil
}

// asTyped takes the characters that people paste for a minus or a decimal point.
func asTyped(s string) string {
	return strings.NewReplacer("−", "-", "–", "-", "·", ".", "\u00a0", " ").Replace(strings.TrimSpace(s))
}

// work works an amended or a typed result through without keeping anything.
func (d *Desk) work(r *http.Request) (any, error) {
	body, err := take[struct {
		ID   string `json:"id"`
		Text string `json:"text"`
		amendment
	}](r)
	if err != nil {
		return nil, err
	}
	if body.ID == "" {
		item, err := d.typed(body.Text)
		return map[string]any{"working": item.Working}, err
	}
	row, err := d.opt.Book.Row(body.ID)
	if err != nil {
		return nil, err
	}
	item, err := amend(row, body.amendment)
	return map[string]any{"working": item.Working}, err
}

type draft struct {
	ID       string `json:"id"`
	Hash     string `json:"hash"`
	Decision string `json:"decision"`
	Reason   string `json:"reason"`
	Note     string `json:"note"`
	Mode     string `json:"mode"`    // "shown" or "typed first"
	SeenMS   int    `json:"seen_ms"` // how long it was looked at
	amendment
}

// decide takes one or several decisions: all of them or none. Those of one
// request share a mark, so that one undo takes them back together.
func (d *Desk) decide(r *http.Request) (any, error) {
	body, err := take[struct {
		Drafts []draft `json:"drafts"`
	}](r)
	if err != nil {
		return nil, err
	}
	if len(body.Drafts) == 0 {
		return nil, fail(http.StatusBadRequest, "no decision was sent")
	}
	batch := secret()[:12]
	drafts := make([]ledger.Draft, 0, len(body.Drafts))
	for _, b := range body.Drafts {
		one, err := d.draft(b, batch)
		if err != nil {
			return nil, err
		}
		drafts = append(drafts, one)
	}
	if _, err := d.opt.Book.Decide(drafts...); err != nil {
		return nil, plainly(err)
	}
	return map[string]int{"taken": len(drafts)}, nil
}

func (d *Desk) draft(b draft, batch string) (ledger.Draft, error) {
	verdict := ledger.Verdict(b.Decision)
	if !slices.Contains([]ledger.Verdict{ledger.Confirmed, ledger.Amended, ledger.Dropped, ledger.Queried}, verdict) {
		return ledger.Draft{}, fail(http.StatusBadRequest, "%q is no decision", b.Decision)
	}
	mode := "desk"
	if b.Mode == "typed first" {
		mode = "desk, typed first"
	} else if d.typeFirst(b.ID) && verdict != ledger.Queried && verdict != ledger.Dropped {
		return ledger.Draft{}, fail(http.StatusUnprocessableEntity, "this result is to be typed before it is shown")
	}
	out := ledger.Draft{ID: b.ID, Token: b.Hash, Verdict: verdict, Reason: b.Reason, Note: b.Note, Mode: mode,
		Extra: map[string]string{"batch": batch, "looked_at_ms": strconv.Itoa(max(b.SeenMS, 0))}}
	if verdict != ledger.Amended {
		return out, nil
	}
	row, err := d.opt.Book.Row(b.ID)
	if err != nil {
		return ledger.Draft{}, err
	}
	item, err := amend(row, b.amendment)
	if err != nil {
		return ledger.Draft{}, err
	}
	out.Amended = &item
	return out, nil
}

// plainly leaves the id out of the message: the person sees the result.
func plainly(err error) error {
	var one *ledger.DraftError
	if errors.As(err, &one) {
		return one.Err
	}
	return err
}

// undo takes back what was decided last at this desk's ledger, together with
// what was decided by the same key.
func (d *Desk) undo(*http.Request) (any, error) {
	rows, err := d.opt.Book.Rows()
	if err != nil {
		return nil, err
	}
	var last *ledger.Row
	for i := range rows {
		if rows[i].Decision != nil && (last == nil || rows[i].Decision.Seq > last.Decision.Seq) {
			last = &rows[i]
		}
	}
	if last == nil {
		return map[string]any{"id": "", "decision": ""}, nil
	}
	batch, taken := last.Decision.Extra["batch"], 0
	for i := range rows {
		row := &rows[i]
		if row != last && (row.Decision == nil || batch == "" || row.Decision.Extra["batch"] != batch) {
			continue
		}
		if _, err := d.opt.Book.Undo(row.ID(), row.Token(), "desk"); err != nil {
			return nil, err
		}
		taken++
	}
	return map[string]any{"id": last.ID(), "decision": string(last.Decision.Verdict), "taken": taken}, nil
}

func (d *Desk) typed(text string) (ledger.Item, error) {
	if strings.TrimSpace(text) == "" {
		return ledger.Item{}, fail(http.StatusUnprocessableEntity, "type the result as it is printed, such as 12.4 (95%% CI 11.8 to 13.0), n = 42")
	}
	item, err := d.opt.ReadTyped(text)
	if err != nil {
		return ledger.Item{}, fail(http.StatusUnprocessableEntity, "%v", err)
	}
	return item, nil
}

// add takes a result that the program missed, through the same working.
func (d *Desk) add(r *http.Request) (any, error) {
	body, err := take[struct {
		Paper   string      `json:"paper"`
		Text    string      `json:"text"`
		Outcome string      `json:"outcome"`
		Arm     string      `json:"arm"`
		Time    string      `json:"time"`
		N       string      `json:"n"`
		Page    string      `json:"page"`
		Source  string      `json:"source"`
		Note    string      `json:"note"`
		Box     *[4]float64 `json:"box"`
	}](r)
	if err != nil {
		return nil, err
	}
	p, ok := d.papers[body.Paper]
	if !ok {
		return nil, fail(http.StatusNotFound, "there is no such paper in this ledger")
	}
	item, err := d.typed(body.Text)
	if err != nil {
		return nil, err
	}
	changed := map[string]string{}
	for field, value := range map[string]string{"outcome": body.Outcome, "arm": body.Arm, "time": body.Time, "n": body.N} {
		if value != "" {
			changed[field] = asTyped(value)
		}
	}
	res := item.Result
	res.Snippet = body.Text
	res.Sources = nil
	if body.Page != "" {
		if res.Page, err = strconv.Atoi(body.Page); err != nil || res.Page < 1 || res.Page > maxPages {
			return nil, fail(http.StatusUnprocessableEntity, "page: %q is not a page number", body.Page)
		}
		res.Anchor = result.Anchor{}
		if body.Box != nil {
			box := boxOf(*body.Box)
			place := paper.Place{Page: res.Page, Box: box, Origin: paper.Point{X: box.X0, Y: box.Y0}}
			res.Sources = []result.Source{{Field: "estimate", Place: place, Text: body.Text, From: "drawn by hand"}}
			res.Anchor = result.AnchorAt(place, item.Working.Anchor.Digits)
		}
	}
	facts := working.Facts{Path: p.Name, SHA256: p.SHA256}
	work := working.Work(facts, []result.Result{res})[0]
	if res, work, err = working.Amend(res, work, changed, ""); err != nil {
		return nil, fail(http.StatusUnprocessableEntity, "%v", err)
	}
	row, err := d.opt.Book.Add(ledger.Item{Result: res, Working: work}, body.Source, body.Note, "desk", nil)
	if err != nil {
		return nil, err
	}
	return map[string]string{"id": row.ID()}, nil
}

func boxOf(b [4]float64) paper.Box {
	c := func(v float64) int32 { return int32(min(max(v, -1e6), 1e6) * 100) }
	return paper.Box{X0: c(b[0]), Y0: c(b[1]), X1: c(b[2]), Y1: c(b[3])}
}

type fieldDiffers struct {
	Field string `json:"field"`
	Typed string `json:"typed"`
	Read  string `json:"read"`
}

// compare tells what a person typed from what the program read.
func (d *Desk) compare(r *http.Request) (any, error) {
	body, err := take[struct {
		ID    string            `json:"id"`
		Typed map[string]string `json:"typed"`
	}](r)
	if err != nil {
		return nil, err
	}
	row, err := d.opt.Book.Row(body.ID)
	if err != nil {
		return nil, err
	}
	rec := row.Working.Record
	differs := []fieldDiffers{}
	for _, field := range []string{"estimate", "lower", "upper", "given_value", "n"} {
		typed, asked := body.Typed[field]
		if !asked {
			continue
		}
		if read := readField(rec, field); asTyped(typed) != read {
			differs = append(differs, fieldDiffers{field, asTyped(typed), read})
		}
	}
	return map[string]any{"same": len(differs) == 0, "differs": differs}, nil
}

func readField(r working.Record, field string) string {
	var s *string
	switch field {
	case "estimate":
		s = r.Estimate
	case "lower":
		s = r.Lower
	case "upper":
		s = r.Upper
	case "given_value":
		s = r.GivenValue
	case "n":
		if r.N != nil {
			return fmt.Sprint(*r.N)
		}
	}
	if s == nil {
		return ""
	}
	return *s
}
