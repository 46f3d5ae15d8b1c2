package desk

import (
	"context"

	"halfspan/extract/paper"
	"halfspan/report/ledger"
)

// Paper is one paper that the desk may show.
type Paper struct {
	Name   string // as in the ledger
	File   string // path on this machine
	SHA256 string // of the content that was scanned
}

// Word is one printed word with its box (x0, y0, x1, y1) in points of the
// unrotated page, y upwards.
type Word struct {
	Text string     `json:"text"`
	Box  [4]float64 `json:"box"`
}

// Papers reads and draws papers. The desk's command does it in worker processes,
// so that no paper can crash or hang the desk. Each method fails with a reason
// in plain words, also where the file's content is no longer what was scanned.
type Papers interface {
	// Page gives the box and the rotation of one page, 1-based, and how many there
	// are: none for a paper without pages.
	Page(ctx context.Context, p Paper, number int) (page paper.Page, of int, err error)
	// Picture draws one page, width pixels wide, as PNG.
	Picture(ctx context.Context, p Paper, page, width int) ([]byte, error)
	// Words gives the words of one page.
	Words(ctx context.Context, p Paper, page int) ([]Word, error)
	// Document reads a paper without pages.
	Document(ctx context.Context, p Paper) (*paper.Document, error)
}

// ReadTyped reads one result typed as papers print it and works it through. An
// error says what could not be read in it.
type ReadTyped func(text string) (ledger.Item, error)
