package ledger

import (
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"unicode"
)

// FileName is the name of the ledger beside the papers.
const FileName = "halfspan.ledger"

const ending = ".ledger"

const mostInitials = 8

func areInitials(s string) bool {
	n := 0
	for _, r := range s {
		if !unicode.IsLetter(r) && !unicode.IsNumber(r) {
			return false
		}
		n++
	}
	return n > 0 && n <= mostInitials
}

// Initials checks and tidies a checker's initials: one to eight letters or
// digits, in capitals, since not every file system tells ab from AB.
func Initials(s string) (string, error) {
	s = strings.ToUpper(strings.TrimSpace(s))
	if !areInitials(s) {
		return "", fmt.Errorf("%q cannot be a checker's initials: one to eight letters or digits", s)
	}
	return s, nil
}

// CheckerPath is the file that keeps the decisions of a checker beside the
// ledger at path: halfspan.AB.ledger beside halfspan.ledger.
func CheckerPath(path, checker string) string {
	return strings.TrimSuffix(path, ending) + "." + checker + ending
}

// checkerOf is the checker in a file name, empty in that of a ledger of what was
// read.
func checkerOf(path string) string {
	base := strings.TrimSuffix(filepath.Base(path), ending)
	i := strings.LastIndexByte(base, '.')
	if i < 0 || !areInitials(base[i+1:]) {
		return ""
	}
	return base[i+1:]
}

// Checkers lists the checkers who have decisions beside the ledger at path.
func Checkers(path string) ([]string, error) {
	entries, err := os.ReadDir(filepath.Dir(path))
	if err != nil {
		return nil, &FileError{Path: path, Err: err}
	}
	var checkers []string
	for _, entry := range entries {
		c := checkerOf(entry.Name())
		if c != "" && filepath.Base(CheckerPath(path, c)) == entry.Name() {
			checkers = append(checkers, c)
		}
	}
	slices.Sort(checkers)
	return checkers, nil
}
