package main

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"image/png"
	"strings"
	"sync"

	"halfspan/extract/paper"
	"halfspan/extract/pdf"
	"halfspan/extract/worker"
	"halfspan/report/desk"
)

// deskPapers reads and draws papers for the desk, in worker processes.
type deskPapers struct {
	pool *worker.Pool

	mu   sync.Mutex
	read []readPaper // the papers read last, the latest first
}

type readPaper struct {
	sha   string
	doc   *paper.Document // of a paper without pages
	words map[int][]desk.Word
}

// keepRead is how many papers' words stay in memory.
const keepRead = 4

// pageFacts is the answer to the task "page".
type pageFacts struct {
	SHA256 string
	Page   paper.Page
	Of     int // pages in all; 0 where the paper has none
}

// drawn is the answer to the task "picture".
type drawn struct {
	SHA256 string
	PNG    []byte
}

// readAnswer is the answer to the task "read".
type readAnswer struct {
	SHA256   string
	Document *paper.Document     // without its places' boxes where Words says them
	Words    map[int][]desk.Word // by page, of a PDF
}

func (d *deskPapers) ask(ctx context.Context, p desk.Paper, j job, into any) error {
	j.Path, j.Name = p.File, p.Name
	request, err := json.Marshal(j)
	if err != nil {
		return err
	}
	body, err := d.pool.Do(ctx, p.Name, request, nil)
	if err != nil {
		return err
	}
	return json.Unmarshal(body, into)
}

// stale refuses a paper whose content is not what was scanned: the boxes would
// lie in other places.
func stale(p desk.Paper, sha string) error {
	if sha != p.SHA256 {
		return fmt.Errorf("%s has changed since it was scanned: run 'halfspan scan' again", p.Name)
	}
	return nil
}

// Page implements [desk.Papers].
func (d *deskPapers) Page(ctx context.Context, p desk.Paper, number int) (paper.Page, int, error) {
	var facts pageFacts
	if err := d.ask(ctx, p, job{Task: "page", Page: number}, &facts); err != nil {
		return paper.Page{}, 0, err
	}
	return facts.Page, facts.Of, stale(p, facts.SHA256)
}

// Picture implements [desk.Papers].
func (d *deskPapers) Picture(ctx context.Context, p desk.Paper, page, width int) ([]byte, error) {
	var picture drawn
	if err := d.ask(ctx, p, job{Task: "picture", Page: page, Width: width}, &picture); err != nil {
		return nil, err
	}
	return picture.PNG, stale(p, picture.SHA256)
}

// Words implements [desk.Papers].
func (d *deskPapers) Words(ctx context.Context, p desk.Paper, page int) ([]desk.Word, error) {
	r, err := d.readOnce(ctx, p)
	if err != nil {
		return nil, err
	}
	return r.words[page], nil
}

// Document implements [desk.Papers].
func (d *deskPapers) Document(ctx context.Context, p desk.Paper) (*paper.Document, error) {
	r, err := d.readOnce(ctx, p)
	if err != nil {
		return nil, err
	}
	return r.doc, nil
}

func (d *deskPapers) readOnce(ctx context.Context, p desk.Paper) (readPaper, error) {
	d.mu.Lock()
	for _, r := range d.read {
		if r.sha == p.SHA256 {
			d.mu.Unlock()
			return r, nil
		}
	}
	d.mu.Unlock()
	var a readAnswer
	if err := d.ask(ctx, p, job{Task: "read"}, &a); err != nil {
		return readPaper{}, err
	}
	if err := stale(p, a.SHA256); err != nil {
		return readPaper{}, err
	}
	r := readPaper{a.SHA256, a.Document, a.Words}
	d.mu.Lock()
	defer d.mu.Unlock()
	d.read = append([]readPaper{r}, d.read[:min(len(d.read), keepRead-1)]...)
	return r, nil
}

// showPage gives the geometry of one page, in the worker: only that page is
// parsed, for the first page of a paper is waited for.
func showPage(j *job, content []byte) (any, error) {
	facts := pageFacts{SHA256: sum(content)}
	if !pdf.IsPDF(content) {
		return facts, nil
	}
	pictures, err := pdf.OpenPictures(content)
	if err != nil {
		return nil, err
	}
	defer pictures.Close()
	facts.Of = pictures.NumPage()
	facts.Page, err = pictures.Facts(j.Page)
	return facts, err
}

// showPicture draws a page, in the worker.
func showPicture(j *job, content []byte) (any, error) {
	pictures, err := pdf.OpenPictures(content)
	if err != nil {
		return nil, err
	}
	defer pictures.Close()
	picture, err := pictures.PageWide(j.Page, j.Width)
	if err != nil {
		return nil, err
	}
	var b bytes.Buffer
	encoder := png.Encoder{CompressionLevel: png.BestSpeed}
	if err := encoder.Encode(&b, thin(picture)); err != nil {
		return nil, err
	}
	return drawn{sum(content), b.Bytes()}, nil
}

func sum(content []byte) string {
	h := sha256.Sum256(content)
	return hex.EncodeToString(h[:])
}

// showRead gives a paper as read: the words of its pages, or the whole model of
// a paper without pages, in the worker.
func showRead(_ *job, doc *paper.Document) (any, error) {
	a := readAnswer{SHA256: doc.SHA256}
	if len(doc.Pages) == 0 {
		doc.Printed = nil
		a.Document = doc
		return a, nil
	}
	a.Words = map[int][]desk.Word{}
	add := func(t *paper.TextRun) {
		for from, word := range wordsOf(t.S) {
			if place := t.Between(from, from+len(word)); place.Page > 0 {
				b := place.Box
				a.Words[place.Page] = append(a.Words[place.Page], desk.Word{Text: word, Box: [4]float64{points(b.X0), points(b.Y0), points(b.X1), points(b.Y1)}})
			}
		}
	}
	for i := range doc.Blocks {
		b := &doc.Blocks[i]
		add(&b.Text)
		if b.Table == nil {
			continue
		}
		add(&b.Table.Caption)
		for k := range b.Table.Cells {
			add(&b.Table.Cells[k].Text)
		}
		for k := range b.Table.Notes {
			add(&b.Table.Notes[k].Text)
		}
	}
	return a, nil
}

// wordsOf yields the words of a text with where they begin.
func wordsOf(s string) func(yield func(int, string) bool) {
	return func(yield func(int, string) bool) {
		for from := 0; from < len(s); {
			rest := strings.TrimLeft(s[from:], " \n\t\u00a0\u2009")
			from = len(s) - len(rest)
			word := rest
			if end := strings.IndexAny(rest, " \n\t"); end >= 0 {
				word = rest[:end]
			}
			if word == "" {
				return
			}
			if !yield(from, word) {
				return
			}
			from += len(word)
		}
	}
}
