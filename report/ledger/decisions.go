package ledger

import (
	"crypto/sha256"
	"database/sql"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"time"
)

// Decisions is a checker's file, halfspan.AB.ledger. It is made with the first
// decision.
type Decisions struct {
	path    string
	checker string
	db      *sql.DB // nil while there is no file
}

// OpenDecisions opens the decisions of a checker beside the ledger at path. A
// checker without a file has none yet.
func OpenDecisions(path, checker string) (*Decisions, error) {
	checker, err := Initials(checker)
	if err != nil {
		return nil, err
	}
	d := &Decisions{path: CheckerPath(path, checker), checker: checker}
	if _, err := os.Stat(d.path); errors.Is(err, os.ErrNotExist) {
		return d, nil
	}
	return d, d.connect(reading)
}

// connect opens the file if it is not open.
func (d *Decisions) connect(how access) error {
	if d.db != nil {
		return nil
	}
	db, err := open(d.path, decisionSchema, how)
	if err != nil {
		return err
	}
	if err := d.settle(db); err != nil {
		db.Close()
		return err
	}
	d.db = db
	return nil
}

// settle checks that an opened file is sound and this checker's own.
func (d *Decisions) settle(db *sql.DB) error {
	if err := sound(db, d.path); err != nil {
		return err
	}
	return d.checkOwner(db)
}

func (d *Decisions) checkOwner(q querier) error {
	var owner string
	err := q.QueryRow("SELECT value FROM meta WHERE key = 'checker'").Scan(&owner)
	if errors.Is(err, sql.ErrNoRows) {
		return nil // made, but nothing decided yet
	}
	if err != nil {
		return fileError(d.path, err)
	}
	if owner != d.checker {
		return &FileError{d.path, fmt.Errorf("it holds the decisions of %s, not of %s", owner, d.checker), "give the file its own name back"}
	}
	return nil
}

// Close closes the file.
func (d *Decisions) Close() error {
	if d.db == nil {
		return nil
	}
	return d.db.Close()
}

// Checker is who decides.
func (d *Decisions) Checker() string { return d.checker }

// Path is the file's path; the file may not be there yet.
func (d *Decisions) Path() string { return d.path }

// Writable says beforehand whether decisions can be kept: whoever has looked at a
// page is not to learn it afterwards.
func (d *Decisions) Writable() error {
	// SQLite keeps a journal beside the file, so the folder counts as well.
	probe, err := os.CreateTemp(filepath.Dir(d.path), ".halfspan-*.ledger-journal")
	if err != nil {
		return &FileError{d.path, ErrReadOnly, "make the folder writable, or copy it with its ledger to a place of your own: nothing that you decide could be kept"}
	}
	if err := errors.Join(probe.Close(), os.Remove(probe.Name())); err != nil {
		return &FileError{Path: d.path, Err: err}
	}
	f, err := os.OpenFile(d.path, os.O_RDWR, 0)
	if errors.Is(err, os.ErrNotExist) {
		return nil
	}
	if err != nil {
		return &FileError{d.path, ErrReadOnly, "make the file writable: nothing that you decide could be kept"}
	}
	return f.Close()
}

// All lists every decision after the one numbered after, in the order in which
// they were taken, those taken back and the taking back included.
func (d *Decisions) All(after int64) ([]Decision, error) {
	if d.db == nil {
		// Another process may have made the file meanwhile.
		if _, err := os.Stat(d.path); err != nil {
			return nil, nil
		}
		if err := d.connect(reading); err != nil {
			return nil, err
		}
	}
	all, err := scanDecisions(d.db, after)
	return all, fileError(d.path, err)
}

type rowsQuerier interface {
	Query(query string, args ...any) (*sql.Rows, error)
}

func scanDecisions(q rowsQuerier, after int64) ([]Decision, error) {
	rows, err := q.Query(`SELECT seq, decided_at, checker, verdict, coalesce(undoes, 0), reason, note, mode, extra, by_hand, version,
		result_id, anchor, seen, seen_sha256, decided FROM decisions WHERE seq > ? ORDER BY seq`, after)
	if err != nil {
		return nil, err
	}
	defer rows.Close()
	var all []Decision
	for rows.Next() {
		var d Decision
		var at string
		var extra, anchor, seen, decided []byte
		if err := rows.Scan(&d.Seq, &at, &d.Checker, &d.Verdict, &d.Undoes, &d.Reason, &d.Note, &d.Mode, &extra, &d.ByHand, &d.Version,
			&d.ResultID, &anchor, &seen, &d.SeenSHA256, &decided); err != nil {
			return nil, err
		}
		if d.At, err = time.Parse(time.RFC3339, at); err != nil {
			return nil, fmt.Errorf("decision %d: %w", d.Seq, err)
		}
		for _, part := range []struct {
			text []byte
			to   any
		}{{extra, &d.Extra}, {anchor, &d.Anchor}, {seen, &d.Seen}, {decided, &d.Decided}} {
			if err := json.Unmarshal(part.text, part.to); err != nil {
				return nil, fmt.Errorf("decision %d: %w", d.Seq, err)
			}
		}
		all = append(all, d)
	}
	return all, rows.Err()
}

// Sum is the SHA-256 over all decisions, in hexadecimal: two ledgers with the
// same sum hold the same decisions.
func (d *Decisions) Sum() (string, error) {
	all, err := d.All(0)
	if err != nil {
		return "", err
	}
	h := sha256.New()
	enc := json.NewEncoder(h)
	for i := range all {
		if err := enc.Encode(&all[i]); err != nil {
			return "", fmt.Errorf("decision %d: %w", all[i].Seq, err)
		}
	}
	return hex.EncodeToString(h.Sum(nil)), nil
}

// add appends decisions, all or none, in a transaction that looks first at what
// has been decided meanwhile: check sees the decisions after the one numbered
// after, and gives back the entries to be written.
func (d *Decisions) add(after int64, check func(since []Decision) ([]Decision, error)) ([]Decision, error) {
	if err := d.connect(creating); err != nil {
		return nil, err
	}
	tx, err := d.db.Begin()
	if err != nil {
		return nil, fileError(d.path, err)
	}
	defer tx.Rollback()
	if _, err := tx.Exec("INSERT INTO meta VALUES ('checker', ?) ON CONFLICT DO NOTHING", d.checker); err != nil {
		return nil, fileError(d.path, err)
	}
	if err := d.checkOwner(tx); err != nil {
		return nil, err
	}
	since, err := scanDecisions(tx, after)
	if err != nil {
		return nil, fileError(d.path, err)
	}
	entries, err := check(since)
	if err != nil {
		return nil, err
	}
	for i := range entries {
		if err := insertDecision(tx, &entries[i]); err != nil {
			return nil, fileError(d.path, err)
		}
	}
	if err := tx.Commit(); err != nil {
		return nil, fileError(d.path, err)
	}
	return entries, nil
}

func insertDecision(tx *sql.Tx, entry *Decision) error {
	if entry.Extra == nil {
		entry.Extra = map[string]string{}
	}
	texts := make([]string, 0, 4)
	for _, part := range []any{entry.Extra, entry.Anchor, entry.Seen, entry.Decided} {
		text, err := json.Marshal(part)
		if err != nil {
			return fmt.Errorf("keeping the decision: %w", err)
		}
		texts = append(texts, string(text))
	}
	var undoes any
	if entry.Undoes != 0 {
		undoes = entry.Undoes
	}
	record := entry.Seen.Working.Record
	done, err := tx.Exec(`INSERT INTO decisions (decided_at, checker, verdict, undoes, reason, note, mode, extra, by_hand, version,
		result_id, paper, paper_sha256, anchor, seen, seen_sha256, decided) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)`,
		entry.At.Format(time.RFC3339), entry.Checker, entry.Verdict, undoes, entry.Reason, entry.Note, entry.Mode, texts[0], entry.ByHand,
		entry.Version, entry.ResultID, record.Paper, record.PaperSHA256, texts[1], texts[2], entry.SeenSHA256, texts[3])
	if err != nil {
		return err
	}
	entry.Seq, err = done.LastInsertId()
	return err
}

// Setting recalls what was remembered under key; empty if nothing was.
func (d *Decisions) Setting(key string) (string, error) {
	if d.db == nil {
		return "", nil
	}
	var value string
	err := d.db.QueryRow("SELECT value FROM settings WHERE key = ?", key).Scan(&value)
	if errors.Is(err, sql.ErrNoRows) {
		return "", nil
	}
	return value, fileError(d.path, err)
}

// SetSetting remembers a checker's wish, such as the outcomes to be shown first.
func (d *Decisions) SetSetting(key, value string) error {
	if err := d.connect(creating); err != nil {
		return err
	}
	_, err := d.db.Exec("INSERT INTO settings VALUES (?, ?) ON CONFLICT DO UPDATE SET value = excluded.value", key, value)
	return fileError(d.path, err)
}
