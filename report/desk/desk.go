package desk

import (
	"context"
	"embed"
	"errors"
	"fmt"
	"html/template"
	"io/fs"
	"net"
	"net/http"
	"path/filepath"
	"slices"
	"time"

	"halfspan/report/ledger"
)

//go:embed assets
var assets embed.FS

// Meaning explains one flag to the person at the desk.
type Meaning struct {
	Meaning string `json:"meaning"`
	Todo    string `json:"todo"`
}

// Options say what the desk shows and to whom.
type Options struct {
	Book      *ledger.Book
	Papers    Papers
	ReadTyped ReadTyped
	Flags     map[string]Meaning
	Filter    Filter
	TypeFirst float64              // share of the results whose values are hidden until the person has typed what they see, 0 to 1
	Settle    [2]string            // initials of the two checkers whose differences are settled; empty otherwise
	Sides     [2]*ledger.Decisions // their decisions, where Settle is set
}

// Desk is one running desk.
type Desk struct {
	opt      Options
	root     string           // folder that the papers' names are relative to
	papers   map[string]Paper // by the key in addresses
	pictures *pictures
	guard    *guard
	settling []*side // the two checkers whose differences are settled; empty otherwise
	closed   chan struct{}
}

// New makes a desk for the results of a book. The book needs a checker.
func New(opt Options) (*Desk, error) {
	if opt.Book.Decisions() == nil {
		return nil, errors.New("the desk needs to know who checks: give --checker with your initials")
	}
	root, err := opt.Book.Ledger().Root()
	if err != nil {
		return nil, err
	}
	papers, err := opt.Book.Ledger().Papers()
	if err != nil {
		return nil, err
	}
	d := &Desk{opt: opt, root: root, papers: map[string]Paper{}, closed: make(chan struct{})}
	for _, p := range papers {
		d.papers[paperKey(p.SHA256)] = Paper{Name: p.Name, File: filepath.Join(root, filepath.FromSlash(p.Name)), SHA256: p.SHA256}
	}
	if opt.Settle[0] != "" {
		d.settling = []*side{{file: opt.Sides[0]}, {file: opt.Sides[1]}}
	}
	d.pictures = newPictures(pictureBytes, func(ctx context.Context, key pictureKey) ([]byte, error) {
		return opt.Papers.Picture(ctx, d.papers[key.sha], key.page, key.width)
	})
	return d, nil
}

// paperKey names a paper in addresses: never by its path, so that no address can
// name a file.
func paperKey(sha256 string) string { return sha256[:min(16, len(sha256))] }

// Listen opens a free port on this machine only.
func Listen() (net.Listener, error) {
	l, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		return nil, fmt.Errorf("the desk cannot open a port on this machine: %w", err)
	}
	return l, nil
}

// Prepare gives the address that opens the desk, once, in one browser.
func (d *Desk) Prepare(l net.Listener) string {
	d.guard = newGuard(l.Addr().String())
	return d.guard.address()
}

// Serve answers until ctx ends or the person closes the desk from the page.
func (d *Desk) Serve(ctx context.Context, l net.Listener) error {
	handler, err := d.handler()
	if err != nil {
		return err
	}
	server := &http.Server{Handler: handler, ReadHeaderTimeout: 10 * time.Second, IdleTimeout: 2 * time.Minute, MaxHeaderBytes: 64 << 10}
	done := make(chan error, 1)
	go func() { done <- server.Serve(l) }()
	go d.warm(context.WithoutCancel(ctx))
	select {
	case err := <-done:
		return err
	case <-ctx.Done():
	case <-d.closed:
	}
	// Answers under way are finished: a decision that was sent is kept.
	last, cancel := context.WithTimeout(context.WithoutCancel(ctx), 5*time.Second)
	defer cancel()
	if err := server.Shutdown(last); err != nil && !errors.Is(err, context.DeadlineExceeded) {
		return err
	}
	return nil
}

// warm has the readers started while the browser opens: the first page would
// wait for them. What fails here fails again, and is said, when it is asked for.
func (d *Desk) warm(ctx context.Context) {
	rows, err := d.opt.Book.Rows()
	if err != nil || len(rows) == 0 {
		return
	}
	if p, ok := d.papers[paperKey(rows[0].Working.Record.PaperSHA256)]; ok {
		_, _, _ = d.opt.Papers.Page(ctx, p, max(rows[0].Working.Anchor.Page, 1))
	}
}

// mode is what the page is told of how it is used.
func (d *Desk) mode() string {
	switch {
	case d.opt.Settle[0] != "":
		return "settle"
	case d.opt.TypeFirst > 0:
		return "type-first"
	}
	return "check"
}

func (d *Desk) handler() (http.Handler, error) {
	static, err := fs.Sub(assets, "assets")
	if err != nil {
		return nil, err
	}
	page, err := template.ParseFS(static, "desk.html")
	if err != nil {
		return nil, err
	}
	mux := http.NewServeMux()
	mux.HandleFunc("GET /{$}", func(w http.ResponseWriter, _ *http.Request) {
		w.Header().Set("Content-Type", "text/html; charset=utf-8")
		_ = page.Execute(w, map[string]string{"WriteToken": d.guard.write, "Checker": d.opt.Book.Decisions().Checker(), "Mode": d.mode()})
	})
	mux.HandleFunc("GET /assets/{name}", func(w http.ResponseWriter, r *http.Request) {
		name := r.PathValue("name")
		if !slices.Contains([]string{".js", ".css"}, filepath.Ext(name)) {
			http.NotFound(w, r)
			return
		}
		http.ServeFileFS(w, r, static, name)
	})
	mux.HandleFunc("GET /page", d.picture)
	for path, answer := range map[string]func(*http.Request) (any, error){
		"GET /api/rows":     d.rows,
		"GET /api/row":      d.row,
		"GET /api/version":  d.version,
		"GET /api/leaf":     d.leaf,
		"GET /api/words":    d.words,
		"GET /api/passage":  d.passage,
		"POST /api/work":    d.work,
		"POST /api/decide":  d.decide,
		"POST /api/undo":    d.undo,
		"POST /api/star":    d.star,
		"POST /api/add":     d.add,
		"POST /api/compare": d.compare,
		"POST /api/settle":  d.settle,
		"POST /api/close":   d.close,
	} {
		mux.HandleFunc(path, answerWith(answer))
	}
	return d.guard.wrap(mux), nil
}

func (d *Desk) close(*http.Request) (any, error) {
	select {
	case <-d.closed:
	default:
		close(d.closed)
	}
	return map[string]bool{"closed": true}, nil
}
