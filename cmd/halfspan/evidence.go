package main

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"image"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"slices"
	"sort"
	"strings"

	"halfspan/convert/working"
	"halfspan/extract/paper"
	"halfspan/extract/pdf"
	"halfspan/extract/worker"
	"halfspan/report/evidence"
	"halfspan/report/export"
	"halfspan/report/ledger"
)

// cutScale is how finely evidence is drawn: 150 dots an inch.
const cutScale = 150.0 / 72

// cutMargin is how much of the page is shown above and below a result, in points.
const cutMargin = 70

// cut is one result to be cut out of a page.
type cut struct {
	ID     string
	Own    []paper.Box
	Others []paper.Box
}

// evidenceJob is what the tasks "cutouts" and "marked" are told.
type evidenceJob struct {
	Cuts  []cut           `json:",omitempty"` // on the job's page
	Notes []evidence.Note `json:",omitempty"`
}

// cutouts is the answer to the task "cutouts"; marked that to "marked".
type cutouts struct {
	SHA256 string
	PNG    map[string][]byte
}

type marked struct {
	SHA256 string
	PDF    []byte
}

// showCutouts cuts results out of one page, in the worker.
func showCutouts(j *job, content []byte) (any, error) {
	var what evidenceJob
	if err := json.Unmarshal(j.Evidence, &what); err != nil {
		return nil, err
	}
	pictures, err := pdf.OpenPictures(content)
	if err != nil {
		return nil, err
	}
	defer pictures.Close()
	facts, err := pictures.Facts(j.Page)
	if err != nil {
		return nil, err
	}
	page, err := pictures.Page(j.Page, cutScale)
	if err != nil {
		return nil, err
	}
	out := cutouts{sum(content), map[string][]byte{}}
	rectangles := func(boxes []paper.Box) []image.Rectangle {
		var all []image.Rectangle
		for _, b := range boxes {
			all = append(all, pdf.OnPicture(facts, cutScale, b))
		}
		return all
	}
	for _, c := range what.Cuts {
		picture, err := evidence.CutOut(page, rectangles(c.Own), rectangles(c.Others), int(math.Round(cutMargin*cutScale)), cutScale)
		if errors.Is(err, evidence.ErrNoPlace) {
			continue
		}
		if err != nil {
			return nil, err
		}
		var b bytes.Buffer
		if err := png.Encode(&b, picture); err != nil {
			return nil, err
		}
		out.PNG[c.ID] = b.Bytes()
	}
	return out, nil
}

// showMarked writes a copy of a PDF with its results highlighted, in the worker.
func showMarked(j *job, content []byte) (any, error) {
	var what evidenceJob
	if err := json.Unmarshal(j.Evidence, &what); err != nil {
		return nil, err
	}
	out, err := evidence.Mark(content, what.Notes)
	if err != nil {
		return nil, err
	}
	return marked{sum(content), out}, nil
}

// ownFields are the fields that are the printed result itself.
var ownFields = []string{"estimate", "lower", "upper", "given_value"}

// boxesOf parts the places of a record on its page into the result's own and the
// others.
func boxesOf(r working.Record) (own, others []paper.Box) {
	for _, p := range r.Places {
		if p.Box == nil || r.Page == nil || p.Page == nil || *p.Page != *r.Page {
			continue
		}
		c := func(v float64) int32 { return int32(v * 100) }
		b := paper.Box{X0: c(p.Box[0]), Y0: c(p.Box[1]), X1: c(p.Box[2]), Y1: c(p.Box[3])}
		if slices.Contains(ownFields, p.Field) {
			own = append(own, b)
		} else {
			others = append(others, b)
		}
	}
	return own, others
}

// evidenceWriter writes where exported results stand.
type evidenceWriter struct {
	pool *worker.Pool
	root string // folder of the papers
	dir  string
}

// byPaper groups rows by paper, in order.
func byPaper(rows []export.Row) [][]export.Row {
	at := map[string]int{}
	var out [][]export.Row
	for _, r := range rows {
		name := r.Current().Working.Record.Paper
		i, ok := at[name]
		if !ok {
			i = len(out)
			at[name] = i
			out = append(out, nil)
		}
		out[i] = append(out[i], r)
	}
	return out
}

func (e *evidenceWriter) ask(ctx context.Context, task, name string, page int, what evidenceJob, into any) error {
	told, err := json.Marshal(what)
	if err != nil {
		return err
	}
	request, err := json.Marshal(job{Task: task, Path: filepath.Join(e.root, filepath.FromSlash(name)), Name: name, Page: page, Evidence: told})
	if err != nil {
		return err
	}
	body, err := e.pool.Do(ctx, name, request, nil)
	if err != nil {
		return err
	}
	return json.Unmarshal(body, into)
}

// writeCutouts writes a picture for every result on a page, named by its id, and
// the passage as text for the others. It returns how many it wrote and, in words,
// what could not be shown.
func (e *evidenceWriter) writeCutouts(ctx context.Context, rows []export.Row) (wrote int, missing []string, err error) {
	if err := os.MkdirAll(e.dir, 0o777); err != nil {
		return 0, nil, fmt.Errorf("making the folder for the evidence: %w", err)
	}
	for _, papers := range byPaper(rows) {
		pages := map[int][]cut{}
		for _, r := range papers {
			rec := r.Current().Working.Record
			own, others := boxesOf(rec)
			if len(own) > 0 {
				pages[*rec.Page] = append(pages[*rec.Page], cut{rec.ID, own, others})
				continue
			}
			if err := os.WriteFile(filepath.Join(e.dir, rec.ID+".txt"), []byte(passageText(rec)), 0o666); err != nil {
				return wrote, missing, err
			}
			wrote++
		}
		numbers := make([]int, 0, len(pages))
		for n := range pages {
			numbers = append(numbers, n)
		}
		sort.Ints(numbers)
		first := papers[0].Current().Working.Record
		for _, n := range numbers {
			var got cutouts
			err := e.ask(ctx, "cutouts", first.Paper, n, evidenceJob{Cuts: pages[n]}, &got)
			if err == nil && got.SHA256 != first.PaperSHA256 {
				err = errors.New("the file has changed since it was scanned")
			}
			if err != nil {
				missing = append(missing, fmt.Sprintf("%s, page %d: %v", first.Paper, n, err))
				continue
			}
			for _, c := range pages[n] {
				picture, ok := got.PNG[c.ID]
				if !ok {
					missing = append(missing, fmt.Sprintf("%s, page %d: %s lies outside the page", first.Paper, n, c.ID))
					continue
				}
				if err := os.WriteFile(filepath.Join(e.dir, c.ID+".png"), picture, 0o666); err != nil {
					return wrote, missing, err
				}
				wrote++
			}
		}
	}
	return wrote, missing, nil
}

// passageText is the evidence for a result of a paper without pages.
func passageText(r working.Record) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n", r.Paper)
	for _, s := range []*string{r.Section, r.Table} {
		if s != nil {
			fmt.Fprintf(&b, "%s\n", *s)
		}
	}
	fmt.Fprintf(&b, "\n%s\n\n", r.Snippet)
	for _, p := range r.Places {
		if p.Offset != nil {
			fmt.Fprintf(&b, "%s: %q at byte %d", p.Field, p.Text, *p.Offset)
			if p.From != "" {
				fmt.Fprintf(&b, ", %s", p.From)
			}
			b.WriteByte('\n')
		}
	}
	return b.String()
}

// writeMarked writes copies of the PDFs with the results highlighted. Papers of
// formats without pages are named in passed: nothing of them is missing.
func (e *evidenceWriter) writeMarked(ctx context.Context, rows []export.Row) (wrote int, missing, passed []string, err error) {
	if err := os.MkdirAll(e.dir, 0o777); err != nil {
		return 0, nil, nil, fmt.Errorf("making the folder for the marked copies: %w", err)
	}
	var names outNames
	for _, papers := range byPaper(rows) {
		var notes []evidence.Note
		for _, r := range papers {
			rec := r.Current().Working.Record
			if own, _ := boxesOf(rec); len(own) > 0 {
				notes = append(notes, evidence.Note{ID: rec.ID, Page: *rec.Page, Boxes: own, Text: noteText(r), By: r.Decision.Checker})
			}
		}
		first := papers[0].Current().Working.Record
		if len(notes) == 0 && first.Page == nil {
			passed = append(passed, first.Paper)
			continue
		}
		if len(notes) == 0 {
			missing = append(missing, first.Paper+": its results have no place on a page")
			continue
		}
		var got marked
		err := e.ask(ctx, "marked", first.Paper, 0, evidenceJob{Notes: notes}, &got)
		if err == nil && got.SHA256 != first.PaperSHA256 {
			err = errors.New("the file has changed since it was scanned")
		}
		if err != nil {
			missing = append(missing, fmt.Sprintf("%s: %v", first.Paper, err))
			continue
		}
		if err := os.WriteFile(filepath.Join(e.dir, names.of(first.Paper, ".pdf")), got.PDF, 0o666); err != nil {
			return wrote, missing, passed, err
		}
		wrote++
	}
	return wrote, missing, passed, nil
}

// noteText is what a highlighted result says in the PDF.
func noteText(r export.Row) string {
	w := r.Current().Working
	rec := w.Record
	var b strings.Builder
	fmt.Fprintf(&b, "%s, %s by %s on %s\n", rec.ID, r.State, r.Decision.Checker, r.Decision.At.Format("2006-01-02"))
	for _, f := range []struct {
		name  string
		value *string
	}{{"outcome", rec.Outcome}, {"arm", rec.Arm}, {"time", rec.Time}, {"given as", rec.GivenAs}} {
		if f.value != nil {
			fmt.Fprintf(&b, "%s: %s\n", f.name, *f.value)
		}
	}
	if rec.N != nil {
		fmt.Fprintf(&b, "n: %d\n", *rec.N)
	}
	if rec.SD != nil {
		fmt.Fprintf(&b, "SD: %s (%s)\n", rec.SD, rec.Use)
	} else if rec.Reason != "" {
		fmt.Fprintf(&b, "SD withheld: %s\n", rec.Reason)
	}
	for _, step := range w.Trail.Steps {
		fmt.Fprintf(&b, "%s\n", step)
	}
	b.WriteString("An estimate under stated assumptions: to be checked by a second person.")
	return b.String()
}

// writeEvidence writes what --evidence and --marked ask for. What cannot be shown
// is named on standard error; the exported values stay as they are.
func writeEvidence(ctx context.Context, s *streams, args []string, opt *exportOptions, rows []export.Row) error {
	if opt.evidence == "" && opt.marked == "" {
		return nil
	}
	path, err := (&ledgerFlags{ledger: opt.ledger}).find(args)
	if err != nil {
		return err
	}
	read, err := ledger.Open(path)
	if err != nil {
		return err
	}
	defer read.Close()
	root, err := read.Root()
	if err != nil {
		return err
	}
	pool := newPool(0)
	defer pool.Close()
	var missing []string
	for _, kind := range []struct {
		dir, what string
		write     func(*evidenceWriter, context.Context, []export.Row) (int, []string, []string, error)
	}{
		{opt.evidence, "cut-outs and passages", func(e *evidenceWriter, ctx context.Context, rows []export.Row) (int, []string, []string, error) {
			wrote, missing, err := e.writeCutouts(ctx, rows)
			return wrote, missing, nil, err
		}},
		{opt.marked, "marked copies", (*evidenceWriter).writeMarked},
	} {
		if kind.dir == "" {
			continue
		}
		wrote, not, passed, err := kind.write(&evidenceWriter{pool: pool, root: root, dir: kind.dir}, ctx, rows)
		if err != nil {
			return err
		}
		fmt.Fprintf(s.err, "%d %s in %s.\n", wrote, kind.what, kind.dir)
		if len(passed) > 0 {
			fmt.Fprintf(s.err, "Without a marked copy, as files without pages: %s.\n", strings.Join(passed, ", "))
		}
		missing = append(missing, not...)
	}
	for _, m := range missing {
		fmt.Fprintf(s.err, "halfspan: not shown: %s\n", m)
	}
	if len(missing) > 0 {
		return &statusError{status: statusPartial}
	}
	return nil
}
