package plain

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// sections follows the headings of a text: which zone it is in, and whether an
// "Results" belongs to a structured abstract or to the paper's body.
type sections struct {
	zone     paper.Zone
	title    string
	abstract abstractState
	seen     map[paper.Zone]bool // zones named inside the abstract
}

type abstractState uint8

const (
	before    abstractState = iota
	opened                  // its heading was read, no text yet
	plainText               // it begins with text: the next heading of a zone ends it
	inParts                 // it begins with a heading of its own
	done
)

var numberedHeading = pattern.MustCompile(`^(?:\d{1,2}(?:\.\d{1,2}){0,3}\.?|[IVX]{1,4}\.)[\s\x{00A0}]+\p{Lu}`)

// looksHeading reports whether a line can be a heading by its look: short, not
// a sentence, beginning with a capital.
func looksHeading(s string) bool {
	const long, words = 110, 14
	if s == "" || utf8.RuneCountInString(s) > long || len(strings.Fields(s)) > words {
		return false
	}
	if strings.ContainsAny(s[len(s)-1:], ".;,?:") || strings.Contains(s, "\t") || frontLine.MatchString(s) {
		return false
	}
	first, _ := utf8.DecodeRuneInString(s)
	if !unicode.IsUpper(first) && !numberedHeading.MatchString(s) {
		return false
	}
	return !resultLike.MatchString(s)
}

// resultLike is what a line of values holds and a heading does not.
var resultLike = pattern.MustCompile(`±|\d\s*\(|\d[–-]\d.*\d[–-]\d|=|\d.*[(\[](?:\d\d ?% ?CI|SDs?|SE|SEM|IQR|range)[:,]? ?\d`)

// heading takes s as a heading if it is one, and moves to its zone. Lines from
// next on follow it.
func (c *sections) heading(s string, lines []line, next int) bool {
	zone, sure := paper.ZoneOf(s)
	if !looksHeading(s) && !(sure && len(s) < 60) {
		return false
	}
	if c.zone == paper.References && !sure {
		return false // an entry without full stop
	}
	alone := next >= len(lines) || lines[next].blank
	if !sure && !numberedHeading.MatchString(s) && !alone {
		return false
	}
	c.title = s
	switch {
	case c.stays(zone, sure, s):
	case sure:
		c.zone = zone
	case zone != paper.Elsewhere && c.zone == paper.Elsewhere:
		c.zone = zone
	}
	return true
}

// stays keeps track of the abstract; true while the heading belongs to it.
func (c *sections) stays(zone paper.Zone, sure bool, s string) bool {
	if zone == paper.Abstract && sure {
		if c.abstract == done {
			return true
		}
		c.abstract, c.zone, c.seen = opened, paper.Abstract, map[paper.Zone]bool{}
		return true
	}
	switch c.abstract {
	case opened:
		c.abstract = inParts
		c.seen[zone] = true
		return true
	case inParts:
		ends := sure && c.seen[zone] && zone != paper.Discussion || sure && zone == paper.References ||
			strings.EqualFold(paper.PlainTitle(s), "introduction") || numberedHeading.MatchString(s) ||
			sure && zone == paper.Introduction && c.seen[paper.Discussion]
		c.seen[zone] = true
		if !ends {
			return true
		}
	case plainText:
		if !sure {
			c.title = s
			return zone == paper.Elsewhere
		}
	default:
		return false
	}
	c.abstract = done
	return false
}

// sawText notes that text stands under the last heading.
func (c *sections) sawText(string) {
	if c.abstract == opened {
		c.abstract = plainText
	}
}
