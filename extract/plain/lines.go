package plain

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/source"
)

// line is one line of the file, [start, end) of the decoded text.
type line struct {
	start, end int
	page       int // 1-based
	number     int // 1-based, in the file
	blank      bool
	running    bool // a running head or foot, a page number
}

func (r *reader) text(l line) string { return string(r.src.B[l.start:l.end]) }

// split finds the lines. A form feed ends a page and a line.
func (r *reader) split() {
	b := r.src.B
	page, number, start := 1, 1, 0
	end := func(i int) {
		s := b[start:i]
		r.lines = append(r.lines, line{start: start, end: i, page: page, number: number, blank: blank(s)})
	}
	for i := 0; i < len(b); i++ {
		switch b[i] {
		case '\n':
			end(i)
			start = i + 1
			number++
		case '\r':
			end(i)
			if i+1 < len(b) && b[i+1] == '\n' {
				i++
			}
			start = i + 1
			number++
		case '\f':
			end(i)
			start = i + 1
			page++
			r.paged = true
		}
		if len(r.lines) > maxLines {
			return
		}
	}
	if start < len(b) {
		end(len(b))
	}
}

// blank reports whether a line prints nothing. A line of tabs alone is a table
// row without content and counts as blank too.
func blank(s []byte) bool {
	for _, c := range string(s) {
		if !source.Blank(c) {
			return false
		}
	}
	return true
}

// furniture marks running heads and feet in files with pages: first and last
// lines of a page that come back, but for digits, on three pages or more.
func (r *reader) furniture() {
	if !r.paged {
		return
	}
	const edge = 2 // how many lines at the top and bottom of a page may be one
	type place struct{ page, line int }
	seen := map[string][]place{}
	byPage := map[int][]int{}
	last := 0
	for i, l := range r.lines {
		if !l.blank {
			byPage[l.page] = append(byPage[l.page], i)
			last = l.page
		}
	}
	for p := 1; p <= last; p++ {
		at := byPage[p]
		for k, i := range at {
			if k >= edge && k < len(at)-edge {
				continue
			}
			s := withoutDigits(r.text(r.lines[i]))
			seen[s] = append(seen[s], place{p, i})
		}
	}
	for _, places := range seen {
		if len(places) < 3 {
			continue
		}
		for _, p := range places {
			r.lines[p.line].running = true
		}
	}
}

var digits = pattern.MustCompile(`[0-9]+`)

func withoutDigits(s string) string {
	return strings.Join(strings.Fields(digits.ReplaceAllString(s, "#")), " ")
}

// findHyphens notes the words that are printed with a hyphen inside a line, so
// that a hyphen at a line's end which belongs to the word is kept.
func (r *reader) findHyphens() {
	r.hyphened = map[string]bool{}
	for _, m := range hyphenWord.FindAllIndex(r.src.B, -1) {
		r.hyphened[strings.ToLower(string(r.src.B[m[0]:m[1]]))] = true
	}
}

var hyphenWord = pattern.MustCompile(`\pL+[-‐]\pL+`)

// run reads lines [i, j) as one stretch of text.
func (r *reader) run(i, j int) paper.TextRun {
	b := &source.Builder{Src: r.src}
	for k := i; k < j; k++ {
		l := r.lines[k]
		if k > i {
			r.joint(b, k)
		}
		r.spaced(b, l.start, l.end)
	}
	return source.Trim(b.Run())
}

// spaced adds [start, end) of the text with its white space made single.
func (r *reader) spaced(b *source.Builder, start, end int) {
	raw := r.src.B[start:end]
	for len(raw) > 0 {
		k := 0
		for k < len(raw) && !layoutByte(raw[k]) {
			k++
		}
		if k > 0 {
			b.Put(raw[:k], start)
		}
		if k < len(raw) {
			b.Space(start + k)
		}
		for k < len(raw) && layoutByte(raw[k]) {
			k++
		}
		raw, start = raw[k:], start+k
	}
}

func layoutByte(c byte) bool {
	return c == ' ' || c == '\t' || c == '\v' || c == '\r' || c == '\n' || c == 0
}

// joint parts what b holds from line k, or joins the halves of a word or of a
// range that the line's end broke.
func (r *reader) joint(b *source.Builder, k int) {
	const word = 100 // bytes; more than the longest word
	before := string(b.S[max(0, len(b.S)-word):])
	next := strings.TrimLeftFunc(r.text(r.lines[k]), source.Blank)
	first, _ := utf8.DecodeRuneInString(next)
	dash, width := utf8.DecodeLastRuneInString(before)
	stem := before[:len(before)-width]
	lastOfStem, _ := utf8.DecodeLastRuneInString(stem)
	switch {
	case dash == '\u00AD' && unicode.IsLetter(first):
		cutLast(b, width)
	case (dash == '-' || dash == '‐') && unicode.IsLetter(lastOfStem) && unicode.IsLower(first):
		if !r.hyphened[strings.ToLower(lastWord(stem)+string(dash)+firstWord(next))] {
			cutLast(b, width)
		}
	case strings.ContainsRune("-‐–—−", dash) && unicode.IsDigit(lastOfStem) && unicode.IsDigit(first):
		// a range stays a range, without a space after its dash
	default:
		b.Space(r.lines[k].start)
	}
}

// cutLast takes the last n bytes back out of b.
func cutLast(b *source.Builder, n int) {
	b.S = b.S[:len(b.S)-n]
	for k := len(b.Runs) - 1; k >= 0 && b.Runs[k].End > len(b.S); k-- {
		b.Runs[k].End = len(b.S)
		if b.Runs[k].Start >= len(b.S) {
			b.Runs = b.Runs[:k]
		}
	}
}

func lastWord(s string) string {
	return s[strings.LastIndexFunc(s, notLetter)+1:]
}

func firstWord(s string) string {
	if k := strings.IndexFunc(s, notLetter); k >= 0 {
		return s[:k]
	}
	return s
}

func notLetter(c rune) bool { return !unicode.IsLetter(c) }
