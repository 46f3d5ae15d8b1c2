package ledger

import (
	"crypto/rand"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"math/big"
	"slices"
	"strings"
	"sync"
	"time"
)

// Options say for whom a [Book] is opened.
type Options struct {
	Checker string           // initials; empty: only to look at what was read
	Version string           // of the program, kept with each decision
	Now     func() time.Time // nil: the clock
}

// Book is what was read together with what one checker decided. It may be used
// from several goroutines; other processes may read and write the same files.
type Book struct {
	opt Options

	mu        sync.Mutex
	read      *Ledger
	decisions *Decisions // nil without a checker
	loaded    bool
	stamp     Stamp
	papers    []Paper
	items     []Item
	history   history
	joined    []Row // what rows made
	joinedAt  Stamp // of what
}

// Stamp tells one state of a book from another: it differs after every change,
// whoever made it.
type Stamp struct {
	Read    int64 `json:"read"`    // changes to what was read
	Decided int64 `json:"decided"` // number of the last decision
}

// Row is one result with its state.
type Row struct {
	Item               // as this version reads it; as it was seen last where it is gone, or was added by hand
	State    State     // open, a verdict, or read differently since
	Decision *Decision // the standing one; nil when open
	Differs  []string  // fields read differently since
	Gone     string    // why this version has no such result, in words; empty where it has
	ByHand   string    // where a result added by a person was found; empty for the program's own
}

// ID is the name of the row's result.
func (r *Row) ID() string { return r.Working.Record.ID }

// Current is what holds for the result: as decided, or else as read.
func (r *Row) Current() *Item {
	if r.Decision != nil {
		return &r.Decision.Decided
	}
	return &r.Item
}

// OpenBook opens the ledger at path with the decisions of opt.Checker.
func OpenBook(path string, opt Options) (*Book, error) {
	if opt.Now == nil {
		opt.Now = time.Now
	}
	read, err := Open(path)
	if err != nil {
		return nil, err
	}
	b := &Book{opt: opt, read: read}
	if opt.Checker != "" {
		if b.decisions, err = OpenDecisions(path, opt.Checker); err != nil {
			read.Close()
			return nil, err
		}
	}
	return b, nil
}

// Close closes both files.
func (b *Book) Close() error {
	b.mu.Lock()
	defer b.mu.Unlock()
	err := b.read.Close()
	if b.decisions != nil {
		err = errors.Join(err, b.decisions.Close())
	}
	return err
}

// Ledger is what was read, for its papers and its root.
func (b *Book) Ledger() *Ledger { return b.read }

// Decisions is the checker's file; nil without a checker.
func (b *Book) Decisions() *Decisions { return b.decisions }

// Stamp looks at both files and says how far they are.
func (b *Book) Stamp() (Stamp, error) {
	b.mu.Lock()
	defer b.mu.Unlock()
	if err := b.refresh(); err != nil {
		return Stamp{}, err
	}
	return b.stamp, nil
}

// Rows lists every result with its state, by paper and reading order; at the end
// of each paper come the results added by hand and those that this version no
// longer finds but that were decided.
func (b *Book) Rows() ([]Row, error) {
	b.mu.Lock()
	defer b.mu.Unlock()
	if err := b.refresh(); err != nil {
		return nil, err
	}
	return slices.Clone(b.rows()), nil
}

// Row finds one result by its id, or an unambiguous beginning of it.
func (b *Book) Row(id string) (Row, error) {
	b.mu.Lock()
	defer b.mu.Unlock()
	if err := b.refresh(); err != nil {
		return Row{}, err
	}
	return findRow(b.rows(), id)
}

func findRow(rows []Row, id string) (Row, error) {
	var found []int
	for i := range rows {
		if rows[i].ID() == id {
			return rows[i], nil
		}
		if id != "" && strings.HasPrefix(rows[i].ID(), id) {
			found = append(found, i)
		}
	}
	switch len(found) {
	case 0:
		return Row{}, fmt.Errorf("%s: %w", id, ErrUnknown)
	case 1:
		return rows[found[0]], nil
	}
	return Row{}, fmt.Errorf("%s: %w: %d results begin so", id, ErrUnknown, len(found))
}

// History lists all decisions about one result, those taken back included.
func (b *Book) History(id string) ([]Decision, error) {
	row, err := b.Row(id)
	if err != nil {
		return nil, err
	}
	b.mu.Lock()
	defer b.mu.Unlock()
	for _, f := range b.history.byContent[row.Working.Record.PaperSHA256] {
		if row.Decision != nil && f.holds(row.Decision.Seq) || f.id() == row.ID() {
			return slices.Clone(f.entries), nil
		}
	}
	return nil, nil
}

// refresh takes up what has changed in the files.
func (b *Book) refresh() error {
	changes, err := b.read.changes()
	if err != nil {
		return err
	}
	if !b.loaded || changes != b.stamp.Read {
		if b.papers, err = b.read.Papers(); err != nil {
			return err
		}
		if b.items, err = b.read.Items(); err != nil {
			return err
		}
		b.stamp.Read, b.loaded = changes, true
	}
	if b.decisions == nil {
		return nil
	}
	since, err := b.decisions.All(b.stamp.Decided)
	if err != nil {
		return err
	}
	b.take(since)
	return nil
}

// take adds decisions to the history.
func (b *Book) take(entries []Decision) {
	for _, d := range entries {
		b.history.fileAway(d)
		b.stamp.Decided = d.Seq
	}
}

// rows joins what was read with what was decided. The slice is kept: it is not
// to be changed.
func (b *Book) rows() []Row {
	if b.joined != nil && b.joinedAt == b.stamp {
		return b.joined
	}
	name := map[string]string{} // of the contents that are there
	contentOf := map[string]string{}
	for _, p := range b.papers {
		name[p.SHA256], contentOf[p.Name] = p.Name, p.SHA256
	}
	type chapter struct {
		paper string
		rows  []Row
	}
	var chapters []chapter
	joined := map[string]bool{} // contents
	for start := 0; start < len(b.items); {
		record := &b.items[start].Working.Record
		end := start
		for end < len(b.items) && b.items[end].Working.Record.PaperSHA256 == record.PaperSHA256 {
			end++
		}
		sha := record.PaperSHA256
		chapters = append(chapters, chapter{record.Paper, joinPaper(b.items[start:end], b.history.byContent[sha], "")})
		joined[sha] = true
		start = end
	}
	for _, sha := range b.history.contents {
		if joined[sha] {
			continue
		}
		files := b.history.byContent[sha]
		gone := "its paper is no longer among those read"
		if _, there := name[sha]; there {
			gone = ""
		} else if _, there := contentOf[files[0].paper()]; there {
			gone = "its paper's file has changed"
		}
		chapters = append(chapters, chapter{files[0].paper(), joinPaper(nil, files, gone)})
	}
	slices.SortStableFunc(chapters, func(x, y chapter) int { return strings.Compare(x.paper, y.paper) })
	var rows []Row
	for i := range chapters {
		rows = append(rows, chapters[i].rows...)
	}
	b.joined, b.joinedAt = rows, b.stamp
	return rows
}

// Token stands for what a person sees of the row: the record as read and the
// decision it carries. It goes into a [Draft].
func (r *Row) Token() string {
	seq := int64(0)
	if r.Decision != nil {
		seq = r.Decision.Seq
	}
	sum := sha256.Sum256(fmt.Appendf(nil, "%s %d", Hash(r.Working.Record), seq))
	return hex.EncodeToString(sum[:8])
}

// handName makes the id of a result added by hand.
func handName() (string, error) {
	const width = 9
	n, err := rand.Int(rand.Reader, new(big.Int).Exp(big.NewInt(36), big.NewInt(width), nil))
	if err != nil {
		return "", fmt.Errorf("naming the result: %w", err)
	}
	text := n.Text(36)
	return "q" + strings.Repeat("0", width-len(text)) + text, nil
}
