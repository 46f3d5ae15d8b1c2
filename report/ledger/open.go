package ledger

import (
	"bytes"
	"database/sql"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"net/url"
	"os"
	"path/filepath"
	"strings"
	"time"
)

// busyWait is how long one process waits for another to finish its change.
const busyWait = 5 * time.Second

// access says what a file is opened for.
type access uint8

const (
	reading  access = iota // never creates or changes the file, but for finishing what a killed process left half done
	writing                // the file must be there
	creating               // the file is made where there is none
)

// open opens one ledger file and brings its form up to date. In reading access
// an older form is brought up to date too, where the file can be written.
func open(path string, steps schema, how access) (*sql.DB, error) {
	if err := checkHeader(path, how); err != nil {
		return nil, err
	}
	mode := map[access]string{reading: "rw", writing: "rw", creating: "rwc"}[how]
	db, err := connect(path, mode, steps)
	var fe *FileError
	if how == reading && errors.As(err, &fe) && errors.Is(err, ErrReadOnly) {
		db, err = connect(path, "ro", nil)
	}
	if err != nil {
		return nil, err
	}
	if err := checkForm(db, path, steps); err != nil {
		db.Close()
		return nil, err
	}
	return db, nil
}

func connect(path, mode string, steps schema) (*sql.DB, error) {
	abs, err := filepath.Abs(path)
	if err != nil {
		return nil, &FileError{Path: path, Err: err}
	}
	slash := filepath.ToSlash(abs)
	if !strings.HasPrefix(slash, "/") {
		slash = "/" + slash // a drive letter
	}
	name := url.URL{Scheme: "file", Path: slash}
	query := url.Values{"mode": {mode}, "_txlock": {"immediate"}, "_pragma": {
		fmt.Sprintf("busy_timeout(%d)", busyWait.Milliseconds()), "foreign_keys(1)", "synchronous(FULL)", "trusted_schema(0)",
	}}
	name.RawQuery = query.Encode()
	db, err := sql.Open("sqlite", name.String())
	if err != nil {
		return nil, fileError(path, err)
	}
	// One connection: a second would only wait for the first.
	db.SetMaxOpenConns(1)
	if err := migrate(db, path, steps); err != nil {
		db.Close()
		return nil, err
	}
	return db, nil
}

// checkHeader refuses what is no SQLite file before SQLite touches it.
func checkHeader(path string, how access) error {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist) && how == creating:
		if _, err := os.Stat(filepath.Dir(path)); err != nil {
			return &FileError{path, ErrReadOnly, "there is no such folder"}
		}
		return nil
	case errors.Is(err, fs.ErrNotExist):
		return &FileError{path, ErrNone, "run 'halfspan scan' on the folder of papers first"}
	case err != nil:
		return &FileError{Path: path, Err: err}
	case info.IsDir():
		return &FileError{path, ErrDamaged, "it is a folder"}
	case !info.Mode().IsRegular():
		return &FileError{path, ErrDamaged, "it is a pipe, a socket or a device"}
	case info.Size() == 0 && how != creating && checkerOf(path) == "":
		return &FileError{path, ErrDamaged, "it is empty: scan again; decisions are kept in files of their own"}
	case info.Size() == 0:
		// As SQLite leaves it when it is killed while making the file, and for a
		// moment when a checker takes the first decision.
		return nil
	}
	f, err := os.Open(path)
	if err != nil {
		return &FileError{Path: path, Err: errors.Unwrap(err)}
	}
	defer f.Close()
	head := make([]byte, 16)
	if _, err := io.ReadFull(f, head); err != nil || !bytes.Equal(head, []byte("SQLite format 3\x00")) {
		return damagedError(path)
	}
	return nil
}

// migrate takes the steps that the file has not seen, all or none. It leaves a
// file that is up to date, or newer, alone.
func migrate(db *sql.DB, path string, steps schema) error {
	version, app, err := form(db)
	if err != nil {
		return fileError(path, err)
	}
	if app != 0 && app != applicationID || version >= len(steps) || app == 0 && version != 0 {
		return nil
	}
	tx, err := db.Begin()
	if err != nil {
		return fileError(path, err)
	}
	defer tx.Rollback()
	// Another process may have been here meanwhile.
	if version, app, err = form(tx); err != nil {
		return fileError(path, err)
	}
	if app == 0 {
		var tables int
		if err := tx.QueryRow("SELECT count(*) FROM sqlite_schema").Scan(&tables); err != nil {
			return fileError(path, err)
		}
		if tables > 0 {
			return damagedError(path) // somebody else's database
		}
	}
	for ; version < len(steps); version++ {
		if _, err := tx.Exec(steps[version]); err != nil {
			return fileError(path, fmt.Errorf("step %d of the ledger's form: %w", version+1, err))
		}
	}
	if _, err := tx.Exec(fmt.Sprintf("PRAGMA application_id = %d; PRAGMA user_version = %d", applicationID, len(steps))); err != nil {
		return fileError(path, err)
	}
	return fileError(path, tx.Commit())
}

// checkForm refuses files of other programs and of newer versions.
func checkForm(db *sql.DB, path string, steps schema) error {
	version, app, err := form(db)
	switch {
	case err != nil:
		return fileError(path, err)
	case app != applicationID:
		return damagedError(path)
	case version > len(steps):
		return &FileError{path, ErrNewer, fmt.Sprintf("it has form %d, this program knows up to %d: use the newer program", version, len(steps))}
	case version < len(steps):
		return &FileError{path, ErrReadOnly, "it was written by an older version and must be brought up to date, but cannot be written"}
	}
	return nil
}

type querier interface {
	QueryRow(query string, args ...any) *sql.Row
}

func form(q querier) (version, app int, err error) {
	if err = q.QueryRow("PRAGMA user_version").Scan(&version); err == nil {
		err = q.QueryRow("PRAGMA application_id").Scan(&app)
	}
	return version, app, err
}

// sound asks SQLite whether the file is whole.
func sound(db *sql.DB, path string) error {
	var answer string
	if err := db.QueryRow("PRAGMA quick_check(1)").Scan(&answer); err != nil {
		return fileError(path, err)
	}
	if answer != "ok" {
		return damagedError(path)
	}
	return nil
}
