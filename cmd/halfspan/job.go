package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"strings"
	"time"

	"halfspan/convert/working"
	"halfspan/extract"
	"halfspan/extract/paper"
	"halfspan/extract/pdf"
	"halfspan/extract/worker"
	"halfspan/report/ledger"
)

// A job is what a worker process is asked to do with one paper.
type job struct {
	Task     string          `json:"task"` // one of tasks
	Path     string          `json:"path"` // to open it
	Name     string          `json:"name"` // as it is to stand in the records
	OCR      bool            `json:"ocr,omitempty"`
	Again    bool            `json:"again,omitempty"`    // a worker was lost over it: read with more care
	Page     int             `json:"page,omitempty"`     // only this page, for the tasks that show a paper; 0 all
	Width    int             `json:"width,omitempty"`    // of a picture, in pixels
	Evidence json.RawMessage `json:"evidence,omitempty"` // what to show of it, for the tasks that write evidence
	Form     string          `json:"form,omitempty"`     // of the output, for the tasks that have several
}

// newPool makes the pool of worker processes, as many as there are cores where
// workers is 0.
func newPool(workers int) *worker.Pool {
	return worker.NewPool(worker.Options{Workers: workers, Again: secondTry})
}

// secondTry is the job to run after a worker was lost over it: our own PDF
// reader may have been why, so it is left out.
func secondTry(request []byte) []byte {
	var j job
	if err := json.Unmarshal(request, &j); err != nil {
		return request // the worker says what is wrong with it
	}
	j.Again = true
	again, err := json.Marshal(j)
	if err != nil {
		return request
	}
	return again
}

// A task makes something of a document, in the worker process.
type task func(j *job, doc *paper.Document) (any, error)

// tasks lists what a worker can be asked for. Each gives the type that the
// command which asks for it expects.
func tasks() map[string]task {
	return map[string]task{
		"results": findResults, // outcome
		"text":    showText,    // shown
		"tables":  showTables,  // shown
		"read":    showRead,    // readAnswer
	}
}

// A glance is a task that needs the file only, not what stands in it.
type glance func(j *job, content []byte) (any, error)

// glances lists the tasks for which a paper is not read.
func glances() map[string]glance {
	return map[string]glance{
		"page":    showPage,    // pageFacts
		"picture": showPicture, // drawn
		"cutouts": showCutouts, // cutouts
		"marked":  showMarked,  // marked
	}
}

// outcome is a paper read, with the results found in it.
type outcome struct {
	Paper ledger.Paper
	Items []ledger.Item
}

// maxFile and maxText bound the size of a PDF and of other files that are read
// at all. The largest of some hundred published PDFs has 30 MB, the longest
// text 1 MB.
const (
	maxFile = 200 << 20
	maxText = 32 << 20
)

// preparing is how long the PDF reader may take to be compiled, once for a user.
const preparing = 3 * time.Minute

// recognising is how long tesseract may take for one page.
const recognising = 2 * time.Minute

// work is the handler of the worker processes.
func work(request []byte, alive worker.Alive) ([]byte, error) {
	var j job
	if err := json.Unmarshal(request, &j); err != nil {
		return nil, fmt.Errorf("reading the job: %w", err)
	}
	do, known := tasks()[j.Task]
	look, quick := glances()[j.Task]
	if !known && !quick {
		return nil, fmt.Errorf("no such task: %q", j.Task)
	}
	content, err := readFile(j.Path)
	if err != nil {
		return nil, err
	}
	if quick {
		made, err := look(&j, content)
		if err != nil {
			return nil, err
		}
		return json.Marshal(made)
	}
	doc, err := extract.Read(j.Path, content, extract.Options{
		OCR:       j.OCR,
		OneReader: j.Again,
		Progress:  func(page int) { alive(fmt.Sprintf("page %d", page), 0) },
		Preparing: func() { alive("preparing the PDF reader, once", preparing) },
		Recognising: func(page int) {
			alive(fmt.Sprintf("recognising page %d", page), recognising)
		},
	})
	if err != nil {
		return nil, errors.New(strings.TrimPrefix(err.Error(), j.Path+": "))
	}
	doc.Path = j.Name
	alive("finding results", 0)
	made, err := do(&j, doc)
	if err != nil {
		return nil, err
	}
	return json.Marshal(made)
}

// readFile reads a paper's file, or says in plain words why not.
func readFile(path string) ([]byte, error) {
	if notAFile(path) {
		return nil, errors.New(notAFileReason)
	}
	f, err := os.Open(path)
	if errors.Is(err, fs.ErrPermission) {
		return nil, errors.New("no permission to read it: change its permissions")
	}
	if err != nil {
		return nil, fmt.Errorf("opening it: %w", bare(err))
	}
	defer f.Close()
	info, err := f.Stat()
	if err != nil {
		return nil, fmt.Errorf("opening it: %w", bare(err))
	}
	if info.IsDir() {
		return nil, errors.New("it is a folder")
	}
	head := make([]byte, 1024)
	n, err := io.ReadFull(f, head)
	if err != nil && !errors.Is(err, io.EOF) && !errors.Is(err, io.ErrUnexpectedEOF) {
		return nil, fmt.Errorf("reading it: %w", bare(err))
	}
	most, what := int64(maxText), "text"
	if pdf.IsPDF(head[:n]) {
		most, what = maxFile, "PDF"
	}
	if info.Size() > most {
		return nil, fmt.Errorf("it has %d MB, and no %s of a paper has more than %d: split it, or leave it out", info.Size()>>20, what, most>>20)
	}
	rest, err := io.ReadAll(io.LimitReader(f, most))
	if err != nil {
		return nil, fmt.Errorf("reading it: %w", bare(err))
	}
	return append(head[:n], rest...), nil
}

// bare is an error of the file system without the path, which is said already.
func bare(err error) error {
	var pe *fs.PathError
	if errors.As(err, &pe) {
		return pe.Err
	}
	return err
}

// findResults finds and works out the results of a paper.
func findResults(_ *job, doc *paper.Document) (any, error) {
	results := extract.Find(doc)
	workings := working.Work(working.FactsOf(doc), results)
	out := outcome{Paper: ledger.Paper{
		Name: doc.Path, SHA256: doc.SHA256, Format: doc.Format, Title: doc.Title, Pages: len(doc.Pages), Problems: doc.Problems,
	}}
	for i := range results {
		out.Items = append(out.Items, ledger.Item{Result: results[i], Working: workings[i]})
	}
	return out, nil
}
