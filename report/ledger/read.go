package ledger

import (
	"database/sql"
	"encoding/json"
	"errors"
	"fmt"
	"path/filepath"
	"strconv"

	"halfspan/convert/working"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// Ledger is halfspan.ledger: papers and results as this version reads them.
type Ledger struct {
	path string
	db   *sql.DB
}

// Paper is one paper as a ledger keeps it.
type Paper struct {
	Name     string // relative to the scanned folder, with '/'
	SHA256   string // of its content
	Format   paper.Format
	Title    string
	Pages    int    // 0 where the format has none
	Reader   string // the version of the program that read it, and how: read again when it differs
	Failure  string // why it could not be read at all; empty when it could
	Problems []paper.Problem
	Missing  bool // no longer in the folder at the last scan
}

// Item is one result: what was read and the working that was made of it.
type Item struct {
	Result  result.Result   `json:"result"`
	Working working.Working `json:"working"`
}

// Create opens the ledger at path for a scan, and makes it where there is none.
func Create(path string) (*Ledger, error) { return openLedger(path, creating) }

// Open opens an existing ledger to look at it.
func Open(path string) (*Ledger, error) { return openLedger(path, reading) }

func openLedger(path string, how access) (*Ledger, error) {
	db, err := open(path, readSchema, how)
	if err != nil {
		return nil, err
	}
	if err := sound(db, path); err != nil {
		db.Close()
		return nil, err
	}
	return &Ledger{path, db}, nil
}

// Close closes the file.
func (l *Ledger) Close() error { return l.db.Close() }

// Path is the file's path as it was opened.
func (l *Ledger) Path() string { return l.path }

const rootKey = "root"

// Root is the folder that the papers' names are relative to: the folder of the
// ledger itself unless the ledger was put elsewhere. Empty before the first scan.
func (l *Ledger) Root() (string, error) {
	var root string
	err := l.db.QueryRow("SELECT value FROM meta WHERE key = ?", rootKey).Scan(&root)
	if errors.Is(err, sql.ErrNoRows) {
		return "", nil
	}
	if err != nil {
		return "", fileError(l.path, err)
	}
	if filepath.IsAbs(root) {
		return root, nil
	}
	dir, err := filepath.Abs(filepath.Dir(l.path))
	if err != nil {
		return "", &FileError{Path: l.path, Err: err}
	}
	return filepath.Join(dir, filepath.FromSlash(root)), nil
}

// SetRoot remembers the folder that the papers' names are relative to. A ledger
// that lies in that folder may be moved with it.
func (l *Ledger) SetRoot(root string) error {
	dir, err := filepath.Abs(filepath.Dir(l.path))
	if err != nil {
		return &FileError{Path: l.path, Err: err}
	}
	if dir == root {
		root = "."
	}
	_, err = l.db.Exec("INSERT INTO meta VALUES (?, ?) ON CONFLICT DO UPDATE SET value = excluded.value", rootKey, root)
	return fileError(l.path, err)
}

// Papers lists the papers by name.
func (l *Ledger) Papers() ([]Paper, error) {
	rows, err := l.db.Query("SELECT name, sha256, format, title, pages, reader, failure, problems, missing FROM papers ORDER BY name")
	if err != nil {
		return nil, fileError(l.path, err)
	}
	defer rows.Close()
	var papers []Paper
	for rows.Next() {
		var p Paper
		var problems string
		if err := rows.Scan(&p.Name, &p.SHA256, &p.Format, &p.Title, &p.Pages, &p.Reader, &p.Failure, &problems, &p.Missing); err != nil {
			return nil, fileError(l.path, err)
		}
		if err := json.Unmarshal([]byte(problems), &p.Problems); err != nil {
			return nil, damagedError(l.path)
		}
		papers = append(papers, p)
	}
	return papers, fileError(l.path, rows.Err())
}

// Items lists all results, by paper and reading order.
func (l *Ledger) Items() ([]Item, error) {
	return l.items("", nil)
}

// ItemsOf lists the results of one paper, in reading order.
func (l *Ledger) ItemsOf(name string) ([]Item, error) {
	return l.items("WHERE p.name = ?", []any{name})
}

func (l *Ledger) items(where string, args []any) ([]Item, error) {
	rows, err := l.db.Query("SELECT r.working, r.result FROM results r JOIN papers p USING (paper_id) "+where+" ORDER BY p.name, r.ord", args...)
	if err != nil {
		return nil, fileError(l.path, err)
	}
	defer rows.Close()
	var items []Item
	for rows.Next() {
		var w, r []byte
		if err := rows.Scan(&w, &r); err != nil {
			return nil, fileError(l.path, err)
		}
		var item Item
		if json.Unmarshal(w, &item.Working) != nil || json.Unmarshal(r, &item.Result) != nil {
			return nil, damagedError(l.path)
		}
		items = append(items, item)
	}
	return items, fileError(l.path, rows.Err())
}

// Keep puts a paper and its results into the ledger in place of what was there
// under its name. Results that were there before keep their ids, known by their
// anchors; the items are returned with the ids they have now. A paper whose
// content is there under another name gives an [ErrSameContent].
func (l *Ledger) Keep(p Paper, items []Item) ([]Item, error) {
	tx, err := l.db.Begin()
	if err != nil {
		return nil, fileError(l.path, err)
	}
	defer tx.Rollback()
	var other string
	err = tx.QueryRow("SELECT name FROM papers WHERE sha256 = ? AND name <> ? AND NOT missing AND failure = ''", p.SHA256, p.Name).Scan(&other)
	if err == nil {
		return nil, &ErrSameContent{other}
	}
	if !errors.Is(err, sql.ErrNoRows) {
		return nil, fileError(l.path, err)
	}
	known, err := knownResults(tx, p.SHA256)
	if err != nil {
		return nil, fileError(l.path, err)
	}
	items = withKeptIDs(p.SHA256, items, known)
	if err := replacePaper(tx, p, items); err != nil {
		return nil, fileError(l.path, err)
	}
	return items, fileError(l.path, tx.Commit())
}

// knownResults lists the results of the paper of that content, under whatever
// name it had.
func knownResults(tx *sql.Tx, sha256 string) ([]known, error) {
	rows, err := tx.Query(`SELECT r.id, json_extract(r.working, '$.anchor')
		FROM results r JOIN papers p USING (paper_id) WHERE p.sha256 = ? ORDER BY p.name, r.ord`, sha256)
	if err != nil {
		return nil, err
	}
	defer rows.Close()
	var all []known
	for rows.Next() {
		var k known
		var anchor []byte
		if err := rows.Scan(&k.id, &anchor); err != nil {
			return nil, err
		}
		if err := json.Unmarshal(anchor, &k.anchor); err != nil {
			return nil, err
		}
		all = append(all, k)
	}
	return all, rows.Err()
}

func replacePaper(tx *sql.Tx, p Paper, items []Item) error {
	problems, err := json.Marshal(p.Problems)
	if err != nil {
		return err
	}
	// A missing paper of the same content has been renamed: its row goes.
	if _, err := tx.Exec("DELETE FROM papers WHERE name = ? OR sha256 = ? AND (missing OR failure <> '')", p.Name, p.SHA256); err != nil {
		return err
	}
	done, err := tx.Exec(`INSERT INTO papers (name, sha256, format, title, pages, reader, failure, problems) VALUES (?, ?, ?, ?, ?, ?, ?, ?)`,
		p.Name, p.SHA256, p.Format, p.Title, p.Pages, p.Reader, p.Failure, problems)
	if err != nil {
		return err
	}
	paperID, err := done.LastInsertId()
	if err != nil {
		return err
	}
	insert, err := tx.Prepare("INSERT INTO results (id, paper_id, ord, working, result) VALUES (?, ?, ?, ?, ?)")
	if err != nil {
		return err
	}
	defer insert.Close()
	for i, item := range items {
		w, err := json.Marshal(item.Working)
		if err != nil {
			return err
		}
		r, err := json.Marshal(item.Result)
		if err != nil {
			return err
		}
		if _, err := insert.Exec(item.Working.Record.ID, paperID, i, string(w), string(r)); err != nil {
			return fmt.Errorf("keeping result %s: %w", item.Working.Record.ID, err)
		}
	}
	return countChange(tx)
}

// MarkMissing notes which papers are no longer in the folder: those, of the
// papers kept, for which gone says so. Their results stay.
func (l *Ledger) MarkMissing(gone func(name string) bool) error {
	papers, err := l.Papers()
	if err != nil {
		return err
	}
	tx, err := l.db.Begin()
	if err != nil {
		return fileError(l.path, err)
	}
	defer tx.Rollback()
	changed := false
	for _, p := range papers {
		if missing := gone(p.Name); missing != p.Missing {
			if _, err := tx.Exec("UPDATE papers SET missing = ? WHERE name = ?", missing, p.Name); err != nil {
				return fileError(l.path, err)
			}
			changed = true
		}
	}
	if !changed {
		return nil
	}
	if err := countChange(tx); err != nil {
		return fileError(l.path, err)
	}
	return fileError(l.path, tx.Commit())
}

func countChange(tx *sql.Tx) error {
	_, err := tx.Exec("UPDATE meta SET value = CAST(value AS INTEGER) + 1 WHERE key = 'changes'")
	return err
}

// changes counts the changes that were made to the ledger since it was made.
func (l *Ledger) changes() (int64, error) {
	var text string
	if err := l.db.QueryRow("SELECT value FROM meta WHERE key = 'changes'").Scan(&text); err != nil {
		return 0, fileError(l.path, err)
	}
	n, err := strconv.ParseInt(text, 10, 64)
	if err != nil {
		return 0, damagedError(l.path)
	}
	return n, nil
}
