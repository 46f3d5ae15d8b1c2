// Package source turns the bytes of a file into UTF-8 text and remembers where
// in the file each part of the text stood, whatever the file's encoding. The
// readers of text and XML share it. It knows nothing of papers.
package source

import (
	"bytes"
	"sort"
	"unicode/utf8"

	"golang.org/x/text/encoding"
	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/transform"
)

// Text is the content of a file as UTF-8.
type Text struct {
	B        []byte
	Encoding string // name of the encoding it was read by
	Guessed  bool   // the encoding was not declared, or the declared one does not fit
	Bad      int    // byte sequences that mean nothing in that encoding, read as U+FFFD

	base int // file offset of B[0] where marks is empty
	// marks tie offsets in B to offsets in the file, ascending; from one mark
	// to the next both run in step.
	marks []mark
}

type mark struct{ text, file int }

// Offset gives the byte offset in the file of the byte at offset i of t.B.
func (t *Text) Offset(i int) int {
	if len(t.marks) == 0 {
		return t.base + i
	}
	k := sort.Search(len(t.marks), func(k int) bool { return t.marks[k].text > i }) - 1
	if k < 0 {
		return t.base + i
	}
	return t.marks[k].file + i - t.marks[k].text
}

// Break gives the first offset in (i, end] of t.B where text and file stop
// running in step.
func (t *Text) Break(i, end int) int {
	if len(t.marks) == 0 {
		return end
	}
	k := sort.Search(len(t.marks), func(k int) bool { return t.marks[k].text > i })
	if k == len(t.marks) {
		return end
	}
	return min(end, t.marks[k].text)
}

// BOM looks for a byte order mark: the encoding it stands for, nil where there
// is none, and its length. A file of UTF-16 without a mark is told by the zero
// bytes of its first characters.
func BOM(b []byte) (enc encoding.Encoding, name string, length int) {
	switch {
	case bytes.HasPrefix(b, []byte{0xEF, 0xBB, 0xBF}):
		return unicode.UTF8, "UTF-8", 3
	case bytes.HasPrefix(b, []byte{0xFF, 0xFE}):
		return unicode.UTF16(unicode.LittleEndian, unicode.IgnoreBOM), "UTF-16LE", 2
	case bytes.HasPrefix(b, []byte{0xFE, 0xFF}):
		return unicode.UTF16(unicode.BigEndian, unicode.IgnoreBOM), "UTF-16BE", 2
	case len(b) >= 4 && b[0] != 0 && b[1] == 0 && b[2] != 0 && b[3] == 0:
		return unicode.UTF16(unicode.LittleEndian, unicode.IgnoreBOM), "UTF-16LE", 0
	case len(b) >= 4 && b[0] == 0 && b[1] != 0 && b[2] == 0 && b[3] != 0:
		return unicode.UTF16(unicode.BigEndian, unicode.IgnoreBOM), "UTF-16BE", 0
	}
	return nil, "", 0
}

// UTF8 takes valid UTF-8 as it is; skip bytes (a byte order mark) are left out.
func UTF8(b []byte, skip int) *Text {
	return &Text{B: b[skip:], Encoding: "UTF-8", base: skip}
}

// Decode reads b, from byte skip on, by enc.
func Decode(b []byte, skip int, enc encoding.Encoding, name string) *Text {
	t := &Text{Encoding: name, base: skip, B: make([]byte, 0, len(b)+len(b)/8)}
	dec := enc.NewDecoder()
	// Longest sequence of any encoding known here: an escape sequence with a
	// character of four bytes after it.
	const longest = 8
	var dst [4 * utf8.UTFMax]byte
	for i := skip; i < len(b); {
		wrote, read := 0, 0
		for k := 1; k <= longest && i+k <= len(b); k++ {
			var err error
			wrote, read, err = dec.Transform(dst[:], b[i:i+k], i+k == len(b))
			if read > 0 || err != nil && err != transform.ErrShortSrc {
				break
			}
		}
		if read == 0 {
			wrote, read = copy(dst[:], "\uFFFD"), 1
		}
		if bytes.Contains(dst[:wrote], []byte("\uFFFD")) {
			t.Bad++
		}
		t.step(len(t.B), i)
		t.B = append(t.B, dst[:wrote]...)
		i += read
	}
	return t
}

func (t *Text) step(text, file int) {
	if t.Offset(text) != file || len(t.marks) == 0 {
		t.marks = append(t.marks, mark{text, file})
	}
}
