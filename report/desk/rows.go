package desk

import (
	"encoding/json"
	"hash/fnv"
	"net/http"
	"slices"
	"strings"
	"time"

	"halfspan/convert/working"
	"halfspan/extract/result"
	"halfspan/report/ledger"
)

// Filter names what is wanted first: a result fits when each part that is not
// empty is found in the field of that name, whatever the case. What does not fit
// is set aside, not left out.
type Filter struct {
	Outcome, Arm, Time, Section string
}

func (f Filter) fits(r working.Record) bool {
	holds := func(field *string, want string) bool {
		return want == "" || field != nil && strings.Contains(strings.ToLower(*field), strings.ToLower(want))
	}
	return holds(r.Outcome, f.Outcome) && (holds(r.Arm, f.Arm) || holds(r.Arm2, f.Arm)) && holds(r.Time, f.Time) &&
		(holds(r.Section, f.Section) || holds(r.Table, f.Section))
}

// group is one unit of work: the cells of a table row, or what one sentence says
// of one outcome.
type group struct {
	key   string
	rows  []ledger.Row
	star  bool
	aside bool
}

// groups puts the book's rows together by table row, starred outcomes first.
func (d *Desk) groups() ([]group, error) {
	rows, err := d.opt.Book.Rows()
	if err != nil {
		return nil, err
	}
	stars, err := d.stars()
	if err != nil {
		return nil, err
	}
	var out []group
	at := map[string]int{}
	for _, row := range rows {
		if d.opt.Settle[0] != "" {
			if differ, err := d.toSettle(row); err != nil {
				return nil, err
			} else if !differ {
				continue
			}
		}
		if last := len(out) - 1; last >= 0 && oneSentence(out[last].rows[0], row) {
			out[last].rows = append(out[last].rows, row)
			continue
		}
		key := paperKey(row.Working.Record.PaperSHA256) + " " + row.Working.Row
		if row.Working.Row == "" {
			key = row.ID()
		}
		i, ok := at[key]
		if !ok {
			i = len(out)
			at[key] = i
			out = append(out, group{key: key})
		}
		out[i].rows = append(out[i].rows, row)
	}
	for i := range out {
		g := &out[i]
		aside := func(row ledger.Row) bool {
			w := row.Working
			return (w.Base || w.Quoted || !d.opt.Filter.fits(w.Record)) && row.ByHand == ""
		}
		g.aside = !slices.ContainsFunc(g.rows, func(row ledger.Row) bool { return !aside(row) })
		g.star = slices.ContainsFunc(g.rows, func(row ledger.Row) bool {
			return row.Working.Record.Outcome != nil && slices.Contains(stars, *row.Working.Record.Outcome)
		})
	}
	slices.SortStableFunc(out, func(a, b group) int {
		switch {
		case a.star == b.star:
			return 0
		case a.star:
			return -1
		}
		return 1
	})
	return out, nil
}

// oneSentence says whether two results that follow one another are printed in one
// sentence of the running text and are of one kind and outcome: "24.3 (5.1) with
// syrup and 28.5 (6.2) with water".
func oneSentence(a, b ledger.Row) bool {
	p, q := a.Working.Record, b.Working.Record
	if a.Working.Row != "" || b.Working.Row != "" || a.ByHand != "" || b.ByHand != "" || p.Snippet == "" {
		return false
	}
	same := func(x, y *string) bool { return x == y || x != nil && y != nil && *x == *y }
	return p.PaperSHA256 == q.PaperSHA256 && p.Snippet == q.Snippet && same(p.Section, q.Section) && same(p.Outcome, q.Outcome) &&
		same(p.Statistic, q.Statistic) && same(p.GivenAs, q.GivenAs)
}

type cellBrief struct {
	ID      string `json:"id"`
	State   string `json:"state"`
	Reading string `json:"reading"`
}

type rowBrief struct {
	Key   string      `json:"key"`
	Title string      `json:"title"`
	Find  string      `json:"find"` // what a search looks through, in lower case
	Star  bool        `json:"star"`
	Aside bool        `json:"aside"`
	Paper string      `json:"paper"` // its key
	Page  *int        `json:"page"`
	Cells []cellBrief `json:"cells"`
}

func (d *Desk) rows(*http.Request) (any, error) {
	// The stamp is taken before the rows: a change in between is seen next time.
	stamp, err := d.stamp()
	if err != nil {
		return nil, err
	}
	groups, err := d.groups()
	if err != nil {
		return nil, err
	}
	var counts struct {
		All      int `json:"all"`
		Decided  int `json:"decided"`
		Doubtful int `json:"doubtful"`
		Aside    int `json:"aside"`
	}
	out := make([]rowBrief, 0, len(groups))
	for _, g := range groups {
		b := rowBrief{Key: g.key, Title: title(g.rows[0]), Star: g.star, Aside: g.aside,
			Paper: paperKey(g.rows[0].Working.Record.PaperSHA256), Page: g.rows[0].Working.Record.Page}
		var find strings.Builder
		for _, row := range g.rows {
			rec := row.Current().Working.Record
			b.Cells = append(b.Cells, cellBrief{row.ID(), string(row.State), rec.Reading})
			for _, s := range []*string{&rec.Paper, rec.Table, rec.Section, rec.Outcome, rec.Arm, rec.Arm2, rec.Time, rec.Subgroup, rec.Estimate, rec.Lower, rec.Upper, rec.GivenValue, rec.Heading} {
				if s != nil {
					find.WriteString(strings.ToLower(*s) + " ")
				}
			}
			counts.All++
			switch {
			case row.State != ledger.StateOpen && row.State != ledger.StateDiffering:
				counts.Decided++
			case rec.Reading == working.Doubtful && !g.aside:
				counts.Doubtful++
			}
			if g.aside {
				counts.Aside++
			}
		}
		b.Find = find.String()
		out = append(out, b)
	}
	flags := d.opt.Flags
	if flags == nil {
		flags = map[string]Meaning{}
	}
	return map[string]any{"rows": out, "counts": counts, "version": stamp, "flags": flags}, nil
}

func title(row ledger.Row) string {
	rec := row.Current().Working.Record
	parts := []string{rec.Paper}
	for _, s := range []*string{rec.Table, rec.Outcome, rec.Subgroup, rec.Time} {
		if s != nil {
			parts = append(parts, *s)
		}
	}
	if rec.Outcome == nil {
		parts = append(parts, rec.Snippet)
	}
	text := strings.Join(parts, " · ")
	if r := []rune(text); len(r) > 110 {
		text = string(r[:109]) + "…"
	}
	return text
}

func (d *Desk) stamp() (string, error) {
	s, err := d.opt.Book.Stamp()
	if err != nil {
		return "", err
	}
	text, err := json.Marshal(s)
	return string(text), err
}

func (d *Desk) version(*http.Request) (any, error) {
	stamp, err := d.stamp()
	return map[string]string{"version": stamp}, err
}

type decisionView struct {
	Decision  string `json:"decision"`
	Checker   string `json:"checker"`
	DecidedAt string `json:"decided_at"`
	Reason    string `json:"reason"`
	Note      string `json:"note"`
}

type cellView struct {
	Working   working.Working `json:"working"`
	Hash      string          `json:"hash"` // the row's token: what the person saw
	State     string          `json:"state"`
	Decision  *decisionView   `json:"decision"`
	Changed   []string        `json:"changed,omitempty"` // fields that the person amended
	Differs   []string        `json:"differs,omitempty"`
	Gone      string          `json:"gone,omitempty"`
	ByHand    string          `json:"by_hand,omitempty"`
	TypeFirst bool            `json:"type_first"`
	Sides     []sideView      `json:"sides,omitempty"`
}

func (d *Desk) row(r *http.Request) (any, error) {
	groups, err := d.groups()
	if err != nil {
		return nil, err
	}
	key := r.URL.Query().Get("key")
	i := slices.IndexFunc(groups, func(g group) bool { return g.key == key })
	if i < 0 {
		return nil, fail(http.StatusNotFound, "this row is no longer there: the paper was read again")
	}
	g := groups[i]
	first := g.rows[0].Working.Record
	cells := make([]cellView, 0, len(g.rows))
	for _, row := range g.rows {
		c := cellView{Working: row.Current().Working, Hash: row.Token(), State: string(row.State), Differs: row.Differs, Gone: row.Gone, ByHand: row.ByHand,
			TypeFirst: d.typeFirst(row.ID()) && row.ByHand == ""}
		switch row.State {
		case ledger.StateDiffering:
			c.Working = row.Working
		case ledger.State(ledger.Amended):
			c.Changed = ledger.Differs(row.Working.Record, c.Working.Record)
		}
		if row.Decision != nil {
			c.Decision = viewOf(*row.Decision)
		}
		if d.opt.Settle[0] != "" {
			if c.Sides, err = d.sides(row); err != nil {
				return nil, err
			}
		}
		if c.Working.Flags == nil {
			c.Working.Flags = []result.Flag{}
		}
		cells = append(cells, c)
	}
	return map[string]any{"key": g.key, "paper": paperKey(first.PaperSHA256), "paper_name": first.Paper, "page": first.Page,
		"table": first.Table, "section": first.Section, "star": g.star, "cells": cells}, nil
}

func viewOf(d ledger.Decision) *decisionView {
	return &decisionView{string(d.Verdict), d.Checker, d.At.Format(time.DateTime) + " UTC", d.Reason, d.Note}
}

// typeFirst says whether the values of a result stay hidden until typed. Which
// ones is fixed by the id, so that a reload cannot show them.
func (d *Desk) typeFirst(id string) bool {
	h := fnv.New32a()
	_, _ = h.Write([]byte(d.opt.Book.Decisions().Checker() + " " + id))
	return float64(h.Sum32()) < d.opt.TypeFirst*float64(1<<32)
}

const starsKey = "starred outcomes"

func (d *Desk) stars() ([]string, error) {
	text, err := d.opt.Book.Decisions().Setting(starsKey)
	if err != nil || text == "" {
		return nil, err
	}
	var stars []string
	return stars, json.Unmarshal([]byte(text), &stars)
}

func (d *Desk) star(r *http.Request) (any, error) {
	body, err := take[struct {
		Outcome string `json:"outcome"`
	}](r)
	if err != nil {
		return nil, err
	}
	if body.Outcome == "" {
		return nil, fail(http.StatusUnprocessableEntity, "this result has no outcome to star")
	}
	stars, err := d.stars()
	if err != nil {
		return nil, err
	}
	if i := slices.Index(stars, body.Outcome); i >= 0 {
		stars = slices.Delete(stars, i, i+1)
	} else {
		stars = append(stars, body.Outcome)
	}
	text, err := json.Marshal(stars)
	if err != nil {
		return nil, err
	}
	return map[string]bool{"done": true}, d.opt.Book.Decisions().SetSetting(starsKey, string(text))
}
