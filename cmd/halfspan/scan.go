package main

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"

	"github.com/spf13/cobra"

	"halfspan/report/ledger"
	"halfspan/report/review"
)

const ledgerHelp = `the ledger file (default: halfspan.ledger in the scanned folder)`

type scanOptions struct {
	jsonl  bool
	ledger string
	keep   bool // false for --ledger ""
	again  bool
	notes  bool
	ocr    bool
}

func newScan(s *streams) *cobra.Command {
	var opt scanOptions
	cmd := &cobra.Command{
		Use:   "scan PATH...",
		Short: "read papers, find their results and keep them in the ledger",
		Long: `Read papers, find every result that is printed with an interval or a spread,
work out the SD behind it where that is legitimate, and keep all in the ledger.
Then print the review table and a summary.

PATH is a paper (PDF, text, or article XML in JATS), a folder, which is searched
with all folders in it, or a pattern. Scanning again reads only what has changed
and keeps every decision. No paper leaves this machine.

` + cautionsHelp,
		Example: `  halfspan scan papers
  halfspan scan a.pdf b.xml 'more/*.txt'
  halfspan scan --jsonl --ledger "" papers > results.jsonl`,
		Args: cobra.MinimumNArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			opt.keep = !cmd.Flags().Changed("ledger") || opt.ledger != ""
			return scan(cmd.Context(), s, args, opt)
		},
	}
	cmd.Flags().BoolVar(&opt.jsonl, "jsonl", false, "write the records to standard output, one JSON object a line, instead of the table")
	cmd.Flags().StringVar(&opt.ledger, "ledger", "", ledgerHelp+`; "" keeps nothing`)
	cmd.Flags().BoolVar(&opt.again, "again", false, "read every paper again, changed or not")
	cmd.Flags().BoolVar(&opt.notes, "notes", false, "list everything the readers have to say, not only the first of it")
	cmd.Flags().BoolVar(&opt.ocr, "ocr", false, "read page pictures without text with tesseract, if it is installed")
	return cmd
}

// scanning is one run of the command.
type scanning struct {
	s      *streams
	opt    scanOptions
	root   string
	ledger *ledger.Ledger          // nil where nothing is kept
	kept   map[string]ledger.Paper // by name, as they were before
	reader string
	jsonl  *json.Encoder // nil where the table is printed
	names  []string      // of the papers that were named, without repeats
	sum    review.Summary
	items  []ledger.Item // where nothing is kept, for the table
}

func scan(ctx context.Context, s *streams, paths []string, opt scanOptions) error {
	g, err := until(ctx, func() (*gathered, error) { return gather(paths) })
	if ctx.Err() != nil {
		return errors.New("stopped")
	}
	if err != nil {
		return err
	}
	if len(g.papers) == 0 {
		if err := closedFolder(paths); err != nil {
			return err
		}
	}
	if len(g.papers) == 0 && len(g.failed) == 0 {
		return noPapers(paths, g)
	}
	sc := &scanning{s: s, opt: opt, root: g.root, reader: readerKey(opt.ocr)}
	if opt.jsonl {
		sc.jsonl = json.NewEncoder(s.out)
		sc.jsonl.SetEscapeHTML(false)
	}
	if opt.keep {
		if err := sc.openLedger(g); err != nil {
			return err
		}
		defer sc.ledger.Close()
	}
	sc.sum.PassedOver, sc.sum.All = g.passed, opt.notes
	for _, u := range g.failed {
		sc.sum.Unread = append(sc.sum.Unread, review.Unread{Name: u.name, Reason: u.reason})
	}
	if err := sc.read(ctx, g.papers); err != nil {
		if errors.Is(err, context.Canceled) {
			if sc.ledger == nil {
				return errors.New("stopped")
			}
			return errors.New("stopped: what had been read is kept, scan again to go on")
		}
		return err
	}
	return sc.finish()
}

// closedFolder says where nothing was found because a folder that was named
// cannot be opened.
func closedFolder(paths []string) error {
	for _, p := range paths {
		if _, err := os.ReadDir(p); errors.Is(err, fs.ErrPermission) {
			return fmt.Errorf("%s: this folder cannot be opened: no permission; change its permissions, or copy the papers into a folder of your own", p)
		}
	}
	return nil
}

func noPapers(paths []string, g *gathered) error {
	where := paths[0]
	if len(paths) > 1 {
		where = "these paths"
	}
	if len(g.passed) == 0 {
		return fmt.Errorf("%s: nothing to read: no PDF, text or XML file", where)
	}
	return fmt.Errorf("%s: nothing to read: no PDF, text or XML file among %s", where, review.Count(len(g.passed), "file"))
}

// openLedger opens the ledger and settles which folder the names of papers are
// relative to.
func (sc *scanning) openLedger(g *gathered) error {
	path := sc.opt.ledger
	if path == "" {
		path = filepath.Join(displayFolder(g.root), ledger.FileName)
	}
	l, err := ledger.Create(path)
	if err != nil {
		return err
	}
	if err := sc.adopt(l, g); err != nil {
		l.Close()
		return err
	}
	sc.ledger = l
	return nil
}

func (sc *scanning) adopt(l *ledger.Ledger, g *gathered) error {
	root, err := l.Root()
	if err != nil {
		return err
	}
	switch {
	case root == "":
		if err := l.SetRoot(g.root); err != nil {
			return err
		}
	case root != g.root && within(g.root, root):
		g.rebase(root)
		sc.root = root
	case root != g.root:
		return usageError("%s belongs to the papers in %s: name another file with --ledger for those in %s", l.Path(), root, g.root)
	}
	if err := l.MarkMissing(func(name string) bool {
		_, err := os.Stat(filepath.Join(sc.root, filepath.FromSlash(name)))
		return errors.Is(err, fs.ErrNotExist)
	}); err != nil {
		return err
	}
	papers, err := l.Papers()
	if err != nil {
		return err
	}
	sc.kept = map[string]ledger.Paper{}
	for _, p := range papers {
		sc.kept[p.Name] = p
	}
	return nil
}

// read reads the papers that have changed.
func (sc *scanning) read(ctx context.Context, papers []paperFile) error {
	var jobs []job
	sums := make([]string, len(papers))
	for i, f := range papers {
		// Opening a file on a disk far away may take any time.
		var err error
		if sums[i], err = until(ctx, func() (string, error) { return hashFile(f.path), nil }); err != nil {
			return ctx.Err()
		}
	}
	holder := sc.holders(papers, sums)
	for i, f := range papers {
		if h := holder[sums[i]]; h != "" && h != f.name {
			sc.sum.Same = append(sc.sum.Same, review.Unread{Name: f.name, Reason: "same content as " + h})
			continue
		}
		sc.names = append(sc.names, f.name)
		old, ok := sc.kept[f.name]
		if ok && !sc.opt.again && old.SHA256 == sums[i] && old.Reader == sc.reader {
			sc.sum.Unchanged++
			sc.sum.AddPaper(&old)
			continue
		}
		jobs = append(jobs, job{Task: "results", Path: f.path, Name: f.name, OCR: sc.opt.ocr})
	}
	pool := newPool(0)
	defer pool.Close()
	watch, clear := newWatcher(sc.s.err, len(jobs))
	defer clear()
	return runInOrder(ctx, pool, jobs, watch, func(i int, a answer) error { return sc.take(&jobs[i], a) })
}

// holders settles which of several files with one content is read: the one that
// was read before, or else the first.
func (sc *scanning) holders(papers []paperFile, sums []string) map[string]string {
	holder := map[string]string{} // name by content
	for i, f := range papers {
		if old, ok := sc.kept[f.name]; ok && old.SHA256 == sums[i] && old.Failure == "" && holder[sums[i]] == "" {
			holder[sums[i]] = f.name
		}
	}
	for i, f := range papers {
		if holder[sums[i]] == "" {
			holder[sums[i]] = f.name
		}
	}
	// Files that cannot be read, and empty ones, are each named for themselves.
	delete(holder, "")
	delete(holder, emptySum)
	return holder
}

// take keeps what a worker made of one paper.
func (sc *scanning) take(j *job, a answer) error {
	var out outcome
	if a.err != nil {
		out.Paper = ledger.Paper{Name: j.Name, SHA256: hashFile(j.Path), Failure: a.err.Error()}
	} else if err := json.Unmarshal(a.body, &out); err != nil {
		return fmt.Errorf("%s: reading the worker's answer: %w", j.Name, err)
	}
	out.Paper.Reader = sc.reader
	if sc.ledger != nil {
		items, err := sc.ledger.Keep(out.Paper, out.Items)
		var same *ledger.ErrSameContent
		if errors.As(err, &same) {
			sc.sum.Same = append(sc.sum.Same, review.Unread{Name: j.Name, Reason: same.Error()})
			return nil
		}
		if err != nil {
			return err
		}
		out.Items = items
	} else if err := sc.emit(out.Items); err != nil {
		return err
	}
	sc.sum.AddPaper(&out.Paper)
	return nil
}

// emit writes records, or holds them for the table.
func (sc *scanning) emit(items []ledger.Item) error {
	if sc.jsonl == nil {
		sc.items = append(sc.items, items...)
		return nil
	}
	for i := range items {
		sc.sum.AddRow(&ledger.Row{Item: items[i], State: ledger.StateOpen})
		if err := sc.jsonl.Encode(items[i].Working.Record); err != nil {
			return fmt.Errorf("writing the records: %w", err)
		}
	}
	return nil
}

// finish prints what was found.
func (sc *scanning) finish() error {
	rows, err := sc.rows()
	if err != nil {
		return err
	}
	summaryTo := sc.s.out
	if sc.jsonl != nil {
		summaryTo = sc.s.err
	} else {
		if err := printTable(sc.s, rows, false); err != nil {
			return err
		}
		for i := range rows {
			sc.sum.AddRow(&rows[i])
		}
	}
	if err := sc.sum.Write(summaryTo); err != nil {
		return err
	}
	trouble := sc.sum.Trouble()
	for _, u := range trouble {
		fmt.Fprintf(sc.s.err, "halfspan: %s: %s\n", u.Name, u.Reason)
	}
	if len(trouble) > 0 {
		return &statusError{status: statusPartial}
	}
	return nil
}

// rows are the results of the papers that were named, for the table. Records are
// written on the way where they are asked for.
func (sc *scanning) rows() ([]ledger.Row, error) {
	if sc.ledger == nil {
		rows := make([]ledger.Row, len(sc.items))
		for i := range sc.items {
			rows[i] = ledger.Row{Item: sc.items[i], State: ledger.StateOpen}
		}
		return rows, nil
	}
	if sc.jsonl != nil {
		for _, name := range sc.names {
			items, err := sc.ledger.ItemsOf(name)
			if err != nil {
				return nil, err
			}
			if err := sc.emit(items); err != nil {
				return nil, err
			}
		}
		return nil, nil
	}
	checker, err := onlyChecker(sc.ledger.Path())
	if err != nil {
		return nil, err
	}
	book, err := ledger.OpenBook(sc.ledger.Path(), ledger.Options{Checker: checker})
	if err != nil {
		return nil, err
	}
	defer book.Close()
	all, err := book.Rows()
	if err != nil {
		return nil, err
	}
	named := map[string]bool{}
	for _, name := range sc.names {
		named[name] = true
	}
	return slices.DeleteFunc(all, func(r ledger.Row) bool { return !named[r.Working.Record.Paper] }), nil
}

// emptySum is the SHA-256 of no content at all.
var emptySum = hex.EncodeToString(sha256.New().Sum(nil))

// hashFile is the SHA-256 of a file's content in hexadecimal; empty where it
// cannot be read, which the worker reports.
func hashFile(path string) string {
	f, err := os.Open(path)
	if err != nil {
		return ""
	}
	defer f.Close()
	h := sha256.New()
	if _, err := io.Copy(h, f); err != nil {
		return ""
	}
	return hex.EncodeToString(h.Sum(nil))
}

// displayFolder is a folder as a person would write it from here.
func displayFolder(folder string) string {
	here, err := os.Getwd()
	if err != nil {
		return folder
	}
	if rel, err := filepath.Rel(here, folder); err == nil && within(folder, here) {
		return rel
	}
	return folder
}
