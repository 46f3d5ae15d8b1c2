package plain

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"

	"halfspan/extract/paper"
	"halfspan/extract/source"
)

// Limits of what is read; the text of a paper has some 100 kB.
const (
	maxBytes = 32 << 20
	maxLines = 200_000
)

// reader holds one file while it is read.
type reader struct {
	src   *source.Text
	lines []line
	doc   *paper.Document
	paged bool // the file has form feeds

	hyphened map[string]bool // words printed with a hyphen inside a line
	prose    map[string]int  // how often each word stands in running text
	cells    map[string]int  // and in table rows
	front    int             // the first line after title, authors and addresses
	sections sections
	shapes   map[string]bool // names that end in digits, without these; nil before they are asked for
	regions  map[int]region  // tables by their first line, as looked for so far; no rows: none
}

// Read turns a text file into a Document. Blank lines part paragraphs; in a
// file without them every line is one. Form feeds part pages (Block.Page;
// places stay byte offsets). Headings, the reference list and tables in three
// forms (cells parted by tabs, by pipes, by aligned spaces) are told from
// running text, with the table's caption before or after it and its notes.
//
// UTF-8, UTF-16 and, where the bytes are no UTF-8, windows-1252 are read. An
// error says why a file is no text or too large.
func Read(path string, content []byte) (*paper.Document, error) {
	if len(content) > maxBytes {
		return nil, fmt.Errorf("%s: %d MB of text; a paper has less than one, and files above %d MB are not read: is this the right file?", path, len(content)>>20, maxBytes>>20)
	}
	src, err := decode(path, content)
	if err != nil {
		return nil, err
	}
	sum := sha256.Sum256(content)
	r := &reader{src: src, doc: &paper.Document{Path: path, SHA256: hex.EncodeToString(sum[:]), Format: paper.Text}, regions: map[int]region{}}
	r.split()
	if len(r.lines) > maxLines {
		r.problem("cut-short", fmt.Sprintf("the file has more than %d lines; what follows was not read", maxLines), true)
		r.lines = r.lines[:maxLines]
	}
	r.findHyphens()
	r.countWords()
	r.furniture()
	r.findFront()
	r.read()
	if src.Guessed {
		r.problem("encoding-guessed", "the file is not UTF-8; it was read as "+src.Encoding+", so look at its special characters", false)
	}
	if zeros := bytes.Count(src.B, []byte{0}); zeros > 0 {
		r.problem("bad-characters", fmt.Sprintf("%d zero bytes stand in the text and were read as spaces", zeros), false)
	}
	if src.Bad > 0 {
		r.problem("bad-characters", fmt.Sprintf("%d characters are not valid in the file's encoding (%s)", src.Bad, src.Encoding), true)
	}
	if len(r.doc.Blocks) == 0 {
		return nil, fmt.Errorf("%s: the file holds no text", path)
	}
	return r.doc, nil
}

func (r *reader) problem(kind, text string, lost bool) {
	r.doc.Problems = append(r.doc.Problems, paper.Problem{Kind: kind, Text: text, Lost: lost})
}

// decode tells the encoding and refuses what is no text.
func decode(path string, content []byte) (*source.Text, error) {
	if len(content) == 0 {
		return nil, fmt.Errorf("%s: the file is empty", path)
	}
	enc, name, skip := source.BOM(content)
	switch {
	case name == "UTF-8" && utf8.Valid(content[skip:]):
		return source.UTF8(content, skip), nil
	case enc != nil && name != "UTF-8":
		return source.Decode(content, skip, enc, name), nil
	case looksBinary(content):
		return nil, fmt.Errorf("%s: this is neither a PDF nor article XML nor text (it holds binary data)", path)
	case utf8.Valid(content):
		return source.UTF8(content, 0), nil
	}
	t := source.Decode(content, 0, charmap.Windows1252, "windows-1252")
	t.Guessed = true
	return t, nil
}

// looksBinary tells data from text: text has hardly any zero bytes, and hardly any
// other control characters but white space, form feeds and the few that bad
// converters leave for signs.
func looksBinary(content []byte) bool {
	head := content[:min(len(content), 1<<20)]
	const perZero = 1000 // bytes of text for each stray zero byte that a converter may have left
	if zeros := bytes.Count(content, []byte{0}); zeros*perZero > len(content) {
		return true
	}
	control := 0
	for _, c := range head {
		if c < 0x20 && c != '\t' && c != '\n' && c != '\r' && c != '\f' && c != '\v' {
			control++
		}
	}
	const oneIn = 50
	return control > 8 && control*oneIn > len(head)
}
