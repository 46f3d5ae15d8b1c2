// Package pattern is the regular expressions of the standard library, compiled
// when they are first used. The readers and the binding hold some hundred of
// them in package variables; compiling all at every start of the program, even
// for --version, takes 20 ms.
//
// It knows nothing of papers. [MustCompile] stands in for regexp.MustCompile.
package pattern

import (
	"regexp"
	"sync"
)

// Pattern is a regular expression. It may be used from several goroutines.
type Pattern struct {
	compiled func() *regexp.Regexp
}

// MustCompile names a regular expression of the standard library's syntax. One
// that cannot be compiled panics at its first use.
func MustCompile(expression string) *Pattern {
	return &Pattern{sync.OnceValue(func() *regexp.Regexp { return regexp.MustCompile(expression) })}
}

// The methods are those of [regexp.Regexp].

// String is the expression.
func (p *Pattern) String() string { return p.compiled().String() }

// Match reports whether b holds a match.
func (p *Pattern) Match(b []byte) bool { return p.compiled().Match(b) }

// MatchString reports whether s holds a match.
func (p *Pattern) MatchString(s string) bool { return p.compiled().MatchString(s) }

// FindString is the leftmost match in s.
func (p *Pattern) FindString(s string) string { return p.compiled().FindString(s) }

// FindStringIndex is the place of the leftmost match in s.
func (p *Pattern) FindStringIndex(s string) []int { return p.compiled().FindStringIndex(s) }

// FindStringSubmatch is the leftmost match in s with its groups.
func (p *Pattern) FindStringSubmatch(s string) []string { return p.compiled().FindStringSubmatch(s) }

// FindStringSubmatchIndex is the place of the leftmost match in s and of its groups.
func (p *Pattern) FindStringSubmatchIndex(s string) []int {
	return p.compiled().FindStringSubmatchIndex(s)
}

// FindAllString lists up to n matches in s, all if n is negative.
func (p *Pattern) FindAllString(s string, n int) []string { return p.compiled().FindAllString(s, n) }

// FindAllStringIndex lists the places of up to n matches in s.
func (p *Pattern) FindAllStringIndex(s string, n int) [][]int {
	return p.compiled().FindAllStringIndex(s, n)
}

// FindAllStringSubmatch lists up to n matches in s with their groups.
func (p *Pattern) FindAllStringSubmatch(s string, n int) [][]string {
	return p.compiled().FindAllStringSubmatch(s, n)
}

// FindAllStringSubmatchIndex lists the places of up to n matches in s and of
// their groups.
func (p *Pattern) FindAllStringSubmatchIndex(s string, n int) [][]int {
	return p.compiled().FindAllStringSubmatchIndex(s, n)
}

// Find is the leftmost match in b.
func (p *Pattern) Find(b []byte) []byte { return p.compiled().Find(b) }

// FindIndex is the place of the leftmost match in b.
func (p *Pattern) FindIndex(b []byte) []int { return p.compiled().FindIndex(b) }

// FindSubmatch is the leftmost match in b with its groups.
func (p *Pattern) FindSubmatch(b []byte) [][]byte { return p.compiled().FindSubmatch(b) }

// FindSubmatchIndex is the place of the leftmost match in b and of its groups.
func (p *Pattern) FindSubmatchIndex(b []byte) []int { return p.compiled().FindSubmatchIndex(b) }

// FindAllSubmatch lists up to n matches in b with their groups.
func (p *Pattern) FindAllSubmatch(b []byte, n int) [][][]byte {
	return p.compiled().FindAllSubmatch(b, n)
}

// FindAllIndex lists the places of up to n matches in b.
func (p *Pattern) FindAllIndex(b []byte, n int) [][]int { return p.compiled().FindAllIndex(b, n) }

// ReplaceAllString replaces every match in s; $1 stands for the first group.
func (p *Pattern) ReplaceAllString(s, with string) string {
	return p.compiled().ReplaceAllString(s, with)
}

// ReplaceAllLiteralString replaces every match in s with the text as it is.
func (p *Pattern) ReplaceAllLiteralString(s, with string) string {
	return p.compiled().ReplaceAllLiteralString(s, with)
}

// ReplaceAllStringFunc replaces every match in s with what with makes of it.
func (p *Pattern) ReplaceAllStringFunc(s string, with func(string) string) string {
	return p.compiled().ReplaceAllStringFunc(s, with)
}

// Split parts s at the matches into at most n pieces, all if n is negative.
func (p *Pattern) Split(s string, n int) []string { return p.compiled().Split(s, n) }

// SubexpIndex is the number of the group of that name, -1 if there is none.
func (p *Pattern) SubexpIndex(name string) int { return p.compiled().SubexpIndex(name) }

// NumSubexp is the number of groups.
func (p *Pattern) NumSubexp() int { return p.compiled().NumSubexp() }
