package convert

import (
	"errors"
	"fmt"
	"math"
)

// The errors of this package. Every error that a function returns wraps one of
// them, so that callers can tell with errors.Is what was wrong; the text says
// which value and what is allowed.
var (
	ErrNotFinite    = errors.New("not a finite number")
	ErrSize         = errors.New("sample size too small")
	ErrLevel        = errors.New("level outside 0 to 100 percent")
	ErrOrder        = errors.New("values out of order")
	ErrSpread       = errors.New("spread not positive")
	ErrDomain       = errors.New("value outside its domain")
	ErrDF           = errors.New("degrees of freedom not positive")
	ErrInconsistent = errors.New("values contradict each other")
	ErrNoSolution   = errors.New("no solution")
)

// finite checks that all values are numbers, neither NaN nor infinite.
func finite(values ...float64) error {
	for _, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("%w: %v", ErrNotFinite, v)
		}
	}
	return nil
}

// size checks that n is at least least.
func size(n, least int) error {
	if n < least {
		return fmt.Errorf("%w: n is %d, at least %d needed", ErrSize, n, least)
	}
	return nil
}

// level checks a level in percent.
func level(percent float64) error {
	if !(percent > 0 && percent < 100) {
		return fmt.Errorf("%w: %v", ErrLevel, percent)
	}
	return nil
}

// ordered checks that the values do not descend.
func ordered(what string, values ...float64) error {
	for i := 1; i < len(values); i++ {
		if !(values[i-1] <= values[i]) {
			return fmt.Errorf("%w: %s: %v stands before %v", ErrOrder, what, values[i-1], values[i])
		}
	}
	return nil
}

// positive checks that a named value is finite and above 0.
func positive(what string, v float64, kind error) error {
	if !(v > 0) || math.IsInf(v, 0) {
		return fmt.Errorf("%w: %s is %v", kind, what, v)
	}
	return nil
}

// result guards what leaves the package: an overflow becomes an error.
func result(v float64) (float64, error) {
	if err := finite(v); err != nil {
		return 0, fmt.Errorf("the values are too large or too small to compute with: %w", err)
	}
	return v, nil
}
