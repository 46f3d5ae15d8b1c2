package ledger

import (
	"errors"
	"fmt"

	"modernc.org/sqlite"
	sqlite3 "modernc.org/sqlite/lib"
)

// What can be wrong with a ledger file; found in a [FileError].
var (
	ErrNone     = errors.New("there is no ledger here")
	ErrNewer    = errors.New("the ledger was written by a newer version of halfspan")
	ErrDamaged  = errors.New("the file is damaged or is no ledger")
	ErrReadOnly = errors.New("the ledger cannot be written")
	ErrBusy     = errors.New("another halfspan is writing this ledger")
)

// What can be wrong with a decision.
var (
	ErrStale     = errors.New("the result has changed since it was shown: look at it again")
	ErrUnknown   = errors.New("there is no such result")
	ErrReason    = errors.New("a reason is needed")
	ErrUnchanged = errors.New("nothing was amended")
	ErrNothing   = errors.New("there is no decision to take back")
	ErrChecker   = errors.New("no checker is named")
)

// ErrSameContent says that a paper is there already under another name.
type ErrSameContent struct {
	Name string // the other name
}

func (e *ErrSameContent) Error() string { return "same content as " + e.Name }

// FileError is a failure of one ledger file, with what to do about it.
type FileError struct {
	Path string
	Err  error  // one of the Err variables, or what the system said
	Hint string // what to do, may be empty
}

func (e *FileError) Error() string {
	if e.Hint == "" {
		return fmt.Sprintf("%s: %v", e.Path, e.Err)
	}
	return fmt.Sprintf("%s: %v: %s", e.Path, e.Err, e.Hint)
}

func (e *FileError) Unwrap() error { return e.Err }

// fileError makes of an SQLite error what a person can act on.
func fileError(path string, err error) error {
	if err == nil {
		return nil
	}
	var done *FileError
	if errors.As(err, &done) {
		return err
	}
	var se *sqlite.Error
	if !errors.As(err, &se) {
		return &FileError{Path: path, Err: err}
	}
	switch se.Code() & 0xff {
	case sqlite3.SQLITE_BUSY, sqlite3.SQLITE_LOCKED:
		return &FileError{path, ErrBusy, "wait until it is done and try again"}
	case sqlite3.SQLITE_READONLY, sqlite3.SQLITE_CANTOPEN, sqlite3.SQLITE_PERM:
		return readOnlyError(path)
	case sqlite3.SQLITE_FULL:
		return &FileError{path, err, "the disk is full: nothing of this change was kept"}
	case sqlite3.SQLITE_CORRUPT, sqlite3.SQLITE_NOTADB:
		return damagedError(path)
	}
	return &FileError{Path: path, Err: err}
}

func readOnlyError(path string) error {
	return &FileError{path, ErrReadOnly, `make the folder writable, name another file with --ledger FILE, or keep nothing with --ledger ""`}
}

func damagedError(path string) error {
	if checkerOf(path) != "" {
		return &FileError{path, ErrDamaged, "it holds decisions: put back a copy, or move it away to begin anew"}
	}
	return &FileError{path, ErrDamaged, "move it away and scan again; decisions are kept in files of their own"}
}
