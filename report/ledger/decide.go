package ledger

import (
	"errors"
	"fmt"
	"slices"
	"strings"
	"time"

	"halfspan/extract/result"
)

// Draft is a decision that a person wants to take.
type Draft struct {
	ID      string // of the row
	Token   string // of the row as the person saw it
	Verdict Verdict
	Reason  string // one of [Reasons]; needed for amended and dropped
	Note    string // free text; needed for the reason "other", and for a query without a reason
	Amended *Item  // for amended: the result as the person wants it, worked out anew
	Mode    string // where and how: "terminal", "sheet", "desk", ...
	Extra   map[string]string
}

// DraftError says which of several drafts was refused.
type DraftError struct {
	Index int // in the drafts given
	ID    string
	Err   error
}

func (e *DraftError) Error() string { return fmt.Sprintf("%s: %v", e.ID, e.Err) }
func (e *DraftError) Unwrap() error { return e.Err }

// Decide takes decisions: all of them, or none and a *[DraftError] for the first
// that is refused. It is the only way in, for terminal, sheet and desk alike. It
// refuses with [ErrStale] where the row is no longer what the person saw. When it
// returns, the decisions are on disk. It returns the rows as they are now.
func (b *Book) Decide(drafts ...Draft) ([]Row, error) {
	b.mu.Lock()
	defer b.mu.Unlock()
	return b.change(func(rows []Row) ([]Decision, error) {
		entries := make([]Decision, 0, len(drafts))
		seen := map[string]bool{}
		for i := range drafts {
			d := &drafts[i]
			entry, err := b.entry(d, rows)
			if err == nil && seen[d.ID] {
				err = errors.New("decided twice at once")
			}
			if err != nil {
				return nil, &DraftError{i, d.ID, err}
			}
			seen[d.ID] = true
			entries = append(entries, entry)
		}
		return entries, nil
	})
}

// entry turns a draft into the decision to be kept.
func (b *Book) entry(d *Draft, rows []Row) (Decision, error) {
	i := indexRow(rows, d.ID)
	if i < 0 {
		return Decision{}, ErrUnknown
	}
	row := &rows[i]
	if row.Token() != d.Token {
		return Decision{}, ErrStale
	}
	if err := checkDraft(d, row.Working.Record); err != nil {
		return Decision{}, err
	}
	entry := b.newDecision(row)
	entry.Verdict, entry.Reason, entry.Note, entry.Mode, entry.Extra = d.Verdict, d.Reason, strings.TrimSpace(d.Note), d.Mode, d.Extra
	if d.Verdict == Amended {
		entry.Decided = *d.Amended
		to, from := &entry.Decided.Working, row.Working
		to.Record.ID, to.Record.Paper, to.Record.PaperSHA256, to.Anchor = from.Record.ID, from.Record.Paper, from.Record.PaperSHA256, from.Anchor
	}
	return entry, nil
}

func (b *Book) newDecision(row *Row) Decision {
	return Decision{
		At: b.opt.Now().UTC().Truncate(time.Second), Checker: b.decisions.checker, ByHand: row.ByHand, Version: b.opt.Version,
		ResultID: row.ID(), Anchor: row.Working.Anchor, Seen: row.Item, SeenSHA256: Hash(row.Working.Record), Decided: row.Item,
	}
}

// Undo takes the standing decision about a result back: the one before it stands
// again, or the result is open. An added result is gone with its only decision.
func (b *Book) Undo(id, token, mode string) (Row, error) {
	b.mu.Lock()
	defer b.mu.Unlock()
	rows, err := b.change(func(rows []Row) ([]Decision, error) {
		row, err := findRow(rows, id)
		switch {
		case err != nil:
			return nil, err
		case row.Decision == nil:
			return nil, ErrNothing
		case row.Token() != token:
			return nil, ErrStale
		}
		entry := b.newDecision(&row)
		entry.Verdict, entry.Undoes, entry.Mode = Undone, row.Decision.Seq, mode
		return []Decision{entry}, nil
	})
	if err != nil {
		return Row{}, err
	}
	if len(rows) == 0 {
		return Row{}, nil
	}
	return rows[0], nil
}

// Add takes a result that the program missed and a person found. source says
// where, one of [Sources]. The item needs a paper of the ledger (by content); its
// anchor may be zero. It counts as confirmed.
func (b *Book) Add(item Item, source, note, mode string, extra map[string]string) (Row, error) {
	b.mu.Lock()
	defer b.mu.Unlock()
	if !slices.Contains(Sources(), source) {
		return Row{}, fmt.Errorf("%q is no source of a result: %s", source, strings.Join(Sources(), ", "))
	}
	rows, err := b.change(func([]Row) ([]Decision, error) {
		record := &item.Working.Record
		i := slices.IndexFunc(b.papers, func(p Paper) bool { return p.SHA256 == record.PaperSHA256 })
		if i < 0 {
			return nil, errors.New("the result belongs to no paper of the ledger")
		}
		id, err := handName()
		if err != nil {
			return nil, err
		}
		record.ID, record.Paper = id, b.papers[i].Name
		if item.Working.Anchor == (result.Anchor{}) {
			item.Working.Anchor.Digits = record.ID
		}
		entry := b.newDecision(&Row{Item: item, ByHand: source})
		entry.Verdict, entry.Note, entry.Mode, entry.Extra = Confirmed, strings.TrimSpace(note), mode, extra
		return []Decision{entry}, nil
	})
	if err != nil {
		return Row{}, err
	}
	return rows[0], nil
}

// change writes the decisions that decide makes of the rows as they are now, and
// returns the rows they are about as they are afterwards.
func (b *Book) change(decide func(rows []Row) ([]Decision, error)) ([]Row, error) {
	if b.decisions == nil {
		return nil, ErrChecker
	}
	if err := b.refresh(); err != nil {
		return nil, err
	}
	// What is refused anyhow must not make a file.
	if _, err := decide(b.rows()); err != nil {
		return nil, err
	}
	entries, err := b.decisions.add(b.stamp.Decided, func(since []Decision) ([]Decision, error) {
		b.take(since)
		return decide(b.rows())
	})
	if err != nil {
		return nil, err
	}
	b.take(entries)
	var changed []Row
	rows := b.rows()
	for i := range rows {
		if slices.ContainsFunc(entries, func(d Decision) bool { return d.ResultID == rows[i].ID() }) {
			changed = append(changed, rows[i])
		}
	}
	return changed, nil
}

// indexRow finds a row by its whole id. Rows are large: they are not copied.
func indexRow(rows []Row, id string) int {
	for i := range rows {
		if rows[i].ID() == id {
			return i
		}
	}
	return -1
}
