package desk

import (
	"context"

	"halfspan/convert/working"
	"halfspan/extract/paper"
)

// Paper is one paper that the desk may show.
type Paper struct {
	Name   string // as in the ledger
	File   string // path on this machine
	SHA256 string // of the content that was scanned
}

// Word is one printed word with its box in points of the unrotated page.
type Word struct {
	Text string     `json:"text"`
	Box  [4]float64 `json:"box"`
}

// Papers reads and draws papers. The desk's command does it in worker processes,
// so that no paper can crash or hang the desk. Each method fails with a reason
// in plain words, also where the file's content is no longer what was scanned.
type Papers interface {
	// Pages gives the pages' boxes and rotation; none for a paper without pages.
	Pages(ctx context.Context, p Paper) ([]paper.Page, error)
	// Picture draws one page, width pixels wide, as PNG.
	Picture(ctx context.Context, p Paper, page, width int) ([]byte, error)
	// Words gives the words of one page.
	Words(ctx context.Context, p Paper, page int) ([]Word, error)
	// Document reads a paper without pages.
	Document(ctx context.Context, p Paper) (*paper.Document, error)
}

// Work works results through again: Change a record with some of its fields
// amended, Typed a result typed as printed.
type Work interface {
	Change(w working.Working, amended map[string]string, take string) (working.Working, error)
	Typed(text string, fields map[string]string) (working.Working, error)
}
