package engine

import (
	"encoding/binary"
	"errors"
	"fmt"
	"unicode/utf16"
)

// What a file may turn out to be instead of a readable PDF.
var (
	ErrPassword = errors.New("the PDF asks for a password")
	ErrFormat   = errors.New("the PDF is damaged or is none")
	ErrSecurity = errors.New("the PDF is encrypted in a way that cannot be read")
)

// Document is one open PDF. It is not safe for use by several goroutines at
// once. Close it.
type Document struct {
	engine  *Engine
	content []byte
	r       *raw
	data    uint64 // the content inside the sandbox, which the library reads from
	doc     uint64
	pages   int
}

// Open loads a PDF from its content. The content must not change while the
// Document is open.
func (e *Engine) Open(content []byte) (*Document, error) {
	d := &Document{engine: e, content: content}
	if err := d.load(); err != nil {
		return nil, err
	}
	return d, nil
}

func (d *Document) load() error {
	r, err := d.engine.instance()
	if err != nil {
		return err
	}
	d.r = r
	d.data = r.malloc(len(d.content))
	r.write(d.data, d.content)
	d.doc = r.call("FPDF_LoadMemDocument64", d.data, uint64(len(d.content)), 0)
	if d.doc == 0 && r.err == nil {
		code := r.call("FPDF_GetLastError")
		d.Close()
		return loadError(code)
	}
	d.pages = r.int("FPDF_GetPageCount", d.doc)
	if r.err != nil {
		err := r.err
		d.Close()
		return err
	}
	return nil
}

func loadError(code uint64) error {
	switch code {
	case 4:
		return ErrPassword
	case 5:
		return ErrSecurity
	default:
		return ErrFormat
	}
}

// Close frees the document.
func (d *Document) Close() {
	if d.r == nil {
		return
	}
	if d.doc != 0 {
		d.r.call("FPDF_CloseDocument", d.doc)
	}
	d.r.free(d.data)
	d.engine.release(d.r)
	d.r, d.doc, d.data = nil, 0, 0
}

// NumPage is the number of pages.
func (d *Document) NumPage() int { return d.pages }

// Title is the title that the file's own description gives, or "".
func (d *Document) Title() string { return d.meta("Title") }

// Producer is the program that wrote the file, as the file says, or "".
func (d *Document) Producer() string { return d.meta("Producer") }

func (d *Document) meta(tag string) string {
	if d.ready() != nil {
		return ""
	}
	d.r.write(d.r.scratch, append([]byte(tag), 0))
	n := d.r.int("FPDF_GetMetaText", d.doc, d.r.scratch, d.r.scratch+64, scratchSize-64)
	n = min(n, scratchSize-64)
	if n < 2 {
		return ""
	}
	return utf16le(d.r.bytes(d.r.scratch+64, n-2))
}

func utf16le(b []byte) string {
	u := make([]uint16, len(b)/2)
	for i := range u {
		u[i] = binary.LittleEndian.Uint16(b[2*i:])
	}
	return string(utf16.Decode(u))
}

// ready makes sure that the instance is sound: after a trap or enough pages a
// new one is started.
func (d *Document) ready() error {
	if d.r != nil && d.r.err == nil && d.r.pages < pagesPerInstance {
		return nil
	}
	d.Close()
	return d.load()
}

// loadPage loads a page, 1-based.
func (d *Document) loadPage(number int) (uint64, error) {
	if number < 1 || number > d.pages {
		return 0, fmt.Errorf("page %d: the file has pages 1 to %d", number, d.pages)
	}
	if err := d.ready(); err != nil {
		return 0, err
	}
	d.r.pages++
	page := d.r.call("FPDF_LoadPage", d.doc, uint64(number-1))
	if d.r.err != nil {
		return 0, d.r.err
	}
	if page == 0 {
		return 0, fmt.Errorf("page %d cannot be loaded", number)
	}
	return page, nil
}
