package glyphs

import (
	"errors"
	"fmt"
)

// What one paper may cost. Printed papers stay below a twentieth of each.
const (
	fuelObjects   = 400_000     // objects looked up
	fuelOperators = 40_000_000  // operators run
	fuelForms     = 300_000     // forms run
	fuelGlyphs    = 6_000_000   // glyphs shown
	fuelInflated  = 500 << 20   // bytes inflated
	fuelContent   = 500 << 20   // bytes of content run, those of a form each time
	fuelRead      = 2_000 << 20 // bytes that the library read from the file, again and again
	maxStream     = 64 << 20    // bytes of one inflated stream
	keepForm      = 4 << 20     // bytes of a form that is kept for its next use
	maxPageGlyphs = 400_000     // glyphs of one page
	maxForms      = 24          // form XObjects inside each other
	maxStack      = 64          // saved graphics states
	maxOperands   = 512         // before an operator
	maxNesting    = 32          // arrays and dictionaries inside each other
	maxPages      = 20_000
	maxTree       = 500 // nodes of the page tree above a page
	maxRules      = 20_000
)

// fuel counts what one paper has cost so far. It is counted, not timed, so
// that a paper is cut at the same place whatever the load.
type fuel struct {
	objects, operators, forms, glyphs, inflated, content, read int64
}

// Error is a failure of this reader; the paper may be sound.
type Error struct {
	What string // what could not be read, in plain words
	Err  error  // the cause; nil where What says it all
}

func (e *Error) Error() string {
	if e.Err == nil {
		return e.What
	}
	return e.What + ": " + e.Err.Error()
}

// Unwrap gives the cause.
func (e *Error) Unwrap() error { return e.Err }

// ErrFuel is the cause of an [Error] where a paper asked for more work than
// any printed paper needs.
var ErrFuel = errors.New("more work than a paper can need")

// burn counts n of a kind of work against its limit; past it the reader stops.
func burn(used *int64, n int, limit int64, what string) {
	*used += int64(n)
	if *used > limit {
		panic(&Error{What: "too many " + what, Err: ErrFuel})
	}
}

// caught turns a panic, of the library or of [burn], into an Error.
func caught(what string, err *error) {
	switch p := recover().(type) {
	case nil:
	case *Error:
		*err = p
	case error:
		*err = &Error{What: what, Err: p}
	default:
		*err = &Error{What: what, Err: fmt.Errorf("%v", p)}
	}
}
