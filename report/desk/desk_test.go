package desk

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"image"
	"image/png"
	"io"
	"net/http"
	"net/http/cookiejar"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"halfspan/convert/working"
	"halfspan/extract/paper"
	"halfspan/extract/result"
	"halfspan/report/ledger"
)

// The invented paper that the tests check: one page, two table rows and one
// result quoted from another study.
const sha = "5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a5a"

func place(x, y int32) paper.Place {
	return paper.Place{Page: 1, Box: paper.Box{X0: x, Y0: y, X1: x + 4000, Y1: y + 900}, Origin: paper.Point{X: x, Y: y}}
}

func cell(row, outcome, arm, mean, sd string, n int, x, y int32) result.Result {
	r := result.Result{Page: 1, Table: "Table 1", Row: row, Snippet: outcome + " " + mean + " (" + sd + ")", Statistic: result.Mean, GivenAs: result.SD,
		Estimate: mean, GivenValue: sd, N: n, NFrom: result.NHeading, Arm: arm, Outcome: outcome, Unit: "kg", Zone: paper.Results}
	r.Sources = []result.Source{
		{Field: "estimate", Place: place(x, y), Text: mean},
		{Field: "given_value", Place: place(x+4200, y), Text: sd},
		{Field: "n", Place: place(x, 70000), Text: fmt.Sprintf("n = %d", n), From: "heading of column 2"},
	}
	r.Anchor = result.AnchorAt(r.Sources[1].Place, sd)
	return r
}

func demoResults() []result.Result {
	quoted := cell("", "colony mass in a survey", "", "10.1", "1.9", 0, 10000, 20000)
	quoted.Table, quoted.Evidence.Quoted = "", true
	change := cell("t1r3", "gain", "syrup", "3.1", "", 24, 20000, 48000)
	change.Statistic, change.GivenAs, change.GivenValue, change.Lower, change.Upper, change.Level, change.Adjusted = result.MeanChange, result.CI, "", "2.3", "3.9", 95, "no"
	change.Anchor.Digits = "2.3,3.9"
	return []result.Result{
		cell("t1r1", "colony mass", "syrup", "11.8", "2.1", 24, 20000, 60000),
		cell("t1r1", "colony mass", "water", "11.6", "2.3", 23, 40000, 60000),
		cell("t1r2", "frames of brood", "syrup", "6.2", "1.4", 24, 20000, 54000),
		change,
		quoted,
	}
}

type fakePapers struct{ fail error }

func (f fakePapers) Page(context.Context, Paper, int) (paper.Page, int, error) {
	return paper.Page{Number: 1, Box: paper.Box{X1: 59500, Y1: 84200}}, 1, f.fail
}

func (f fakePapers) Picture(_ context.Context, _ Paper, page, width int) ([]byte, error) {
	if f.fail != nil || page != 1 {
		return nil, errors.New("there is no such page")
	}
	var b bytes.Buffer
	err := png.Encode(&b, image.NewGray(image.Rect(0, 0, width, width*842/595)))
	return b.Bytes(), err
}

func (f fakePapers) Words(context.Context, Paper, int) ([]Word, error) {
	return []Word{{"11.8", [4]float64{200, 600, 240, 609}}, {"(2.1)", [4]float64{242, 600, 282, 609}}, {"<script>", [4]float64{10, 10, 60, 19}}}, f.fail
}

func (f fakePapers) Document(context.Context, Paper) (*paper.Document, error) { return nil, f.fail }

func readTyped(text string) (ledger.Item, error) {
	if !strings.Contains(text, "(") {
		return ledger.Item{}, fmt.Errorf("no result in %q", text)
	}
	r := result.Result{Snippet: text, Statistic: result.Mean, GivenAs: result.SD, Estimate: "9.9", GivenValue: "1.1", Anchor: result.Anchor{Digits: "1.1"}}
	return ledger.Item{Result: r, Working: working.Work(working.Facts{}, []result.Result{r})[0]}, nil
}

// newBook keeps the invented paper in a ledger in dir and opens it for checker.
func newBook(t *testing.T, dir, checker string) *ledger.Book {
	t.Helper()
	path := filepath.Join(dir, ledger.FileName)
	if _, err := os.Stat(path); err != nil {
		l, err := ledger.Create(path)
		if err != nil {
			t.Fatal(err)
		}
		if err := l.SetRoot(dir); err != nil {
			t.Fatal(err)
		}
		results := demoResults()
		works := working.Work(working.Facts{Path: "colonies.pdf", SHA256: sha, Format: paper.PDF}, results)
		items := make([]ledger.Item, len(works))
		for i := range works {
			items[i] = ledger.Item{Result: results[i], Working: works[i]}
		}
		if _, err := l.Keep(ledger.Paper{Name: "colonies.pdf", SHA256: sha, Format: paper.PDF, Pages: 1}, items); err != nil {
			t.Fatal(err)
		}
		if err := l.Close(); err != nil {
			t.Fatal(err)
		}
	}
	book, err := ledger.OpenBook(path, ledger.Options{Checker: checker, Version: "test"})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { book.Close() })
	return book
}

// running is a desk that answers on a real port.
type running struct {
	t       *testing.T
	base    string
	address string
	client  *http.Client
	desk    *Desk
	stop    func()
}

func start(t *testing.T, opt Options) *running {
	t.Helper()
	d, err := New(opt)
	if err != nil {
		t.Fatal(err)
	}
	l, err := Listen()
	if err != nil {
		t.Fatal(err)
	}
	address := d.Prepare(l)
	ctx, cancel := context.WithCancel(context.Background())
	done := make(chan error, 1)
	go func() { done <- d.Serve(ctx, l) }()
	var stopped bool
	stop := func() {
		if stopped {
			return
		}
		stopped = true
		cancel()
		if err := <-done; err != nil {
			t.Errorf("the desk ended with %v", err)
		}
	}
	t.Cleanup(stop)
	jar, _ := cookiejar.New(nil)
	return &running{t, "http://" + l.Addr().String(), address, &http.Client{Jar: jar}, d, stop}
}

func (r *running) enter() {
	r.t.Helper()
	resp, err := r.client.Get(r.address)
	if err != nil {
		r.t.Fatal(err)
	}
	resp.Body.Close()
	if resp.StatusCode != http.StatusOK {
		r.t.Fatalf("the address was refused with %d", resp.StatusCode)
	}
}

func (r *running) do(method, path string, body any, head map[string]string) (int, string, http.Header) {
	r.t.Helper()
	var reader io.Reader
	switch b := body.(type) {
	case nil:
	case []byte:
		reader = bytes.NewReader(b)
	default:
		text, err := json.Marshal(b)
		if err != nil {
			r.t.Fatal(err)
		}
		reader = bytes.NewReader(text)
	}
	req, err := http.NewRequest(method, r.base+path, reader)
	if err != nil {
		r.t.Fatal(err)
	}
	for k, v := range head {
		if k == "Host" {
			req.Host = v
			continue
		}
		req.Header.Set(k, v)
	}
	resp, err := r.client.Do(req)
	if err != nil {
		r.t.Fatal(err)
	}
	defer resp.Body.Close()
	text, err := io.ReadAll(resp.Body)
	if err != nil {
		r.t.Fatal(err)
	}
	return resp.StatusCode, string(text), resp.Header
}

func (r *running) post(path string, body any) (int, string) {
	r.t.Helper()
	status, text, _ := r.do("POST", path, body, map[string]string{"Origin": r.base, "X-Desk-Token": r.desk.guard.write})
	return status, text
}

func TestWhoMayTalkToTheDesk(t *testing.T) {
	r := start(t, Options{Book: newBook(t, t.TempDir(), "AB"), Papers: fakePapers{}, ReadTyped: readTyped})
	if status, _, _ := r.do("GET", "/", nil, nil); status != http.StatusUnauthorized {
		t.Errorf("without the address: %d, want 401", status)
	}
	if status, _, _ := r.do("GET", "/open?token=guess", nil, nil); status != http.StatusUnauthorized {
		t.Errorf("with a guessed token: %d, want 401", status)
	}
	r.enter()
	write := map[string]string{"Origin": r.base, "X-Desk-Token": r.desk.guard.write}
	with := func(k, v string) map[string]string {
		h := map[string]string{}
		for a, b := range write {
			h[a] = b
		}
		h[k] = v
		return h
	}
	large := bytes.Repeat([]byte(" "), 10<<20)
	for _, c := range []struct {
		name, method, path string
		body               any
		head               map[string]string
		want               int
	}{
		{"page", "GET", "/", nil, nil, 200},
		{"rows", "GET", "/api/rows", nil, nil, 200},
		{"another host", "GET", "/", nil, map[string]string{"Host": "colonies.example"}, 421},
		{"localhost by name", "GET", "/", nil, map[string]string{"Host": "localhost"}, 421},
		{"another origin", "GET", "/api/rows", nil, map[string]string{"Origin": "http://colonies.example"}, 403},
		{"null origin", "POST", "/api/undo", map[string]any{}, with("Origin", "null"), 403},
		{"write without token", "POST", "/api/undo", map[string]any{}, map[string]string{"Origin": r.base}, 403},
		{"write with a wrong token", "POST", "/api/undo", map[string]any{}, with("X-Desk-Token", "x"), 403},
		{"write without origin", "POST", "/api/undo", map[string]any{}, map[string]string{"X-Desk-Token": r.desk.guard.write}, 403},
		{"write by another method", "PUT", "/api/undo", map[string]any{}, write, 405},
		{"10 MB", "POST", "/api/decide", append([]byte(`{"drafts":[`), large...), write, 413},
		{"no JSON", "POST", "/api/decide", []byte("x"), write, 400},
		{"unknown field", "POST", "/api/decide", map[string]any{"path": "/etc"}, write, 400},
		{"path traversal in assets", "GET", "/assets/..%2fdesk.go", nil, nil, 404},
		{"template itself", "GET", "/assets/desk.html", nil, nil, 404},
		{"paper by path", "GET", "/api/leaf?page=1&paper=../../etc/passwd", nil, nil, 404},
		{"picture by path", "GET", "/page?paper=%2fetc%2fpasswd&page=1&width=800", nil, nil, 404},
		{"huge picture", "GET", "/page?paper=" + sha[:16] + "&page=1&width=90000", nil, nil, 400},
		{"page nought", "GET", "/page?paper=" + sha[:16] + "&page=0&width=800", nil, nil, 400},
		{"picture", "GET", "/page?paper=" + sha[:16] + "&page=1&width=800", nil, nil, 200},
		{"unknown row", "GET", "/api/row?key=x", nil, nil, 404},
		{"undo with nothing decided", "POST", "/api/undo", map[string]any{}, write, 200},
	} {
		status, text, head := r.do(c.method, c.path, c.body, c.head)
		if status != c.want {
			t.Errorf("%s: %d %s, want %d", c.name, status, text, c.want)
		}
		if head.Get("Content-Security-Policy") != policy || head.Get("X-Content-Type-Options") != "nosniff" {
			t.Errorf("%s: answered without the policy", c.name)
		}
		if strings.Contains(text, "root:") {
			t.Errorf("%s: a file of this machine was served", c.name)
		}
	}
	other := &running{t, r.base, r.address, &http.Client{}, r.desk, func() {}}
	if status, _, _ := other.do("GET", strings.TrimPrefix(r.address, r.base), nil, nil); status != http.StatusUnauthorized {
		t.Errorf("the address worked a second time, in another browser: %d", status)
	}
}

func TestTheCookieIsStrict(t *testing.T) {
	r := start(t, Options{Book: newBook(t, t.TempDir(), "AB"), Papers: fakePapers{}, ReadTyped: readTyped})
	resp, err := http.Get(r.address)
	if err != nil {
		t.Fatal(err)
	}
	resp.Body.Close()
	port := r.base[strings.LastIndexByte(r.base, ':')+1:]
	for _, c := range resp.Cookies() {
		if c.HttpOnly && c.SameSite == http.SameSiteStrictMode && strings.HasSuffix(c.Name, port) {
			return
		}
	}
	t.Errorf("cookies %v: none is HttpOnly, SameSite=Strict and named with the port", resp.Cookies())
}

type rowsAnswer struct {
	Rows   []rowBrief     `json:"rows"`
	Counts map[string]int `json:"counts"`
}

func (r *running) rows() rowsAnswer {
	r.t.Helper()
	status, text, _ := r.do("GET", "/api/rows", nil, nil)
	var a rowsAnswer
	if err := json.Unmarshal([]byte(text), &a); err != nil || status != 200 {
		r.t.Fatalf("rows: %d %v %s", status, err, text)
	}
	return a
}

type rowAnswer struct {
	Cells []cellView `json:"cells"`
}

func (r *running) row(key string) rowAnswer {
	r.t.Helper()
	status, text, _ := r.do("GET", "/api/row?key="+strings.ReplaceAll(key, " ", "%20"), nil, nil)
	var a rowAnswer
	if err := json.Unmarshal([]byte(text), &a); err != nil || status != 200 {
		r.t.Fatalf("row: %d %v %s", status, err, text)
	}
	return a
}

func TestRowsAreTheUnitOfWork(t *testing.T) {
	book := newBook(t, t.TempDir(), "AB")
	r := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped})
	r.enter()
	a := r.rows()
	if len(a.Rows) != 4 || len(a.Rows[0].Cells) != 2 || a.Counts["all"] != 5 {
		t.Fatalf("got %+v", a)
	}
	if !a.Rows[3].Aside || a.Counts["aside"] != 1 {
		t.Errorf("the quoted result is not set aside: %+v", a.Rows[3])
	}
	row := r.row(a.Rows[0].Key)
	drafts := []map[string]any{}
	for _, c := range row.Cells {
		drafts = append(drafts, map[string]any{"id": c.Working.Record.ID, "hash": c.Hash, "decision": "confirmed"})
	}
	// One of two is stale: none may be taken.
	drafts[1]["hash"] = "old"
	if status, text := r.post("/api/decide", map[string]any{"drafts": drafts}); status != http.StatusConflict {
		t.Fatalf("a stale draft was answered with %d %s", status, text)
	}
	if got := r.rows().Counts["decided"]; got != 0 {
		t.Fatalf("%d decided after a refused row", got)
	}
	drafts[1]["hash"] = row.Cells[1].Hash
	if status, text := r.post("/api/decide", map[string]any{"drafts": drafts}); status != 200 {
		t.Fatalf("%d %s", status, text)
	}
	decisions, err := book.Decisions().All(0)
	if err != nil || len(decisions) != 2 {
		t.Fatalf("%d decisions (%v), want one for each cell", len(decisions), err)
	}
	if status, text := r.post("/api/undo", map[string]any{}); status != 200 || !strings.Contains(text, `"taken":2`) {
		t.Errorf("undo of a row: %d %s", status, text)
	}
	if got := r.rows().Counts["decided"]; got != 0 {
		t.Errorf("%d decided after undo", got)
	}
}

func TestAmendingWorksAgain(t *testing.T) {
	book := newBook(t, t.TempDir(), "AB")
	r := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped})
	r.enter()
	a := r.rows()
	c := r.row(a.Rows[2].Key).Cells[0]
	id := c.Working.Record.ID
	status, text := r.post("/api/work", map[string]any{"id": id, "amended": map[string]string{"n": "12"}})
	var w struct{ Working working.Working }
	if err := json.Unmarshal([]byte(text), &w); err != nil || status != 200 || w.Working.Record.SD == nil || *w.Working.Record.SD == *c.Working.Record.SD {
		t.Fatalf("%d %s", status, text)
	}
	for _, bad := range []map[string]string{{"n": "-3"}, {"lower": "x"}, {"level": "120"}} {
		if status, text := r.post("/api/work", map[string]any{"id": id, "amended": bad}); status != http.StatusUnprocessableEntity {
			t.Errorf("%v: %d %s", bad, status, text)
		}
	}
	draft := map[string]any{"id": id, "hash": c.Hash, "decision": "amended", "reason": "misread", "amended": map[string]string{"lower": "−2.3", "n": "12"}}
	if status, text := r.post("/api/decide", map[string]any{"drafts": []any{draft}}); status != 200 {
		t.Fatalf("%d %s", status, text)
	}
	now := r.row(a.Rows[2].Key).Cells[0]
	if now.State != "amended" || *now.Working.Record.Lower != "-2.3" || *now.Working.Record.N != 12 {
		t.Errorf("after amending: %s %v %v", now.State, *now.Working.Record.Lower, *now.Working.Record.N)
	}
}

func TestAddingByHand(t *testing.T) {
	book := newBook(t, t.TempDir(), "AB")
	r := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped})
	r.enter()
	body := map[string]any{"paper": sha[:16], "text": "9.9 (1.1)", "outcome": "stores", "arm": "candy", "n": "21", "page": "1", "source": "figure", "box": []float64{10, 20, 60, 30}}
	if status, text := r.post("/api/add", body); status != 200 {
		t.Fatalf("%d %s", status, text)
	}
	body["n"] = "a few"
	if status, _ := r.post("/api/add", body); status != http.StatusUnprocessableEntity {
		t.Errorf("n in words was taken: %d", status)
	}
	rows, err := book.Rows()
	if err != nil {
		t.Fatal(err)
	}
	last := rows[len(rows)-1]
	if last.ByHand != "figure" || *last.Working.Record.Outcome != "stores" || *last.Working.Record.N != 21 || last.State != "confirmed" {
		t.Errorf("added: %+v", last.Working.Record)
	}
}

func TestTypeFirstHidesAndCompares(t *testing.T) {
	book := newBook(t, t.TempDir(), "AB")
	r := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped, TypeFirst: 1})
	r.enter()
	a := r.rows()
	c := r.row(a.Rows[0].Key).Cells[0]
	if !c.TypeFirst {
		t.Fatal("the cell is not to be typed first")
	}
	id := c.Working.Record.ID
	draft := map[string]any{"id": id, "hash": c.Hash, "decision": "confirmed", "mode": "shown"}
	if status, _ := r.post("/api/decide", map[string]any{"drafts": []any{draft}}); status != http.StatusUnprocessableEntity {
		t.Errorf("confirmed without typing: %d", status)
	}
	if _, text := r.post("/api/compare", map[string]any{"id": id, "typed": map[string]string{"estimate": "11.8", "given_value": "2.1", "n": "24"}}); !strings.Contains(text, `"same":true`) {
		t.Errorf("the same values differ: %s", text)
	}
	if _, text := r.post("/api/compare", map[string]any{"id": id, "typed": map[string]string{"estimate": "11.3", "given_value": "2.1", "n": ""}}); !strings.Contains(text, `"same":false`) {
		t.Errorf("other values are the same: %s", text)
	}
	draft["mode"] = "typed first"
	if status, text := r.post("/api/decide", map[string]any{"drafts": []any{draft}}); status != 200 {
		t.Errorf("%d %s", status, text)
	}
	all, err := book.Decisions().All(0)
	if err != nil || len(all) != 1 || !strings.Contains(all[0].Mode, "typed first") {
		t.Errorf("the mode is not kept: %+v %v", all, err)
	}
}

// disagreement has two checkers decide the first result otherwise, and gives a
// desk for a third who settles it.
func disagreement(t *testing.T) (*running, *ledger.Book) {
	t.Helper()
	dir := t.TempDir()
	decide := func(checker string, n string) {
		book := newBook(t, dir, checker)
		r := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped})
		r.enter()
		c := r.row(r.rows().Rows[0].Key).Cells[0]
		draft := map[string]any{"id": c.Working.Record.ID, "hash": c.Hash, "decision": "confirmed"}
		if n != "" {
			draft["decision"], draft["reason"], draft["amended"] = "amended", "misread", map[string]string{"n": n}
		}
		if status, text := r.post("/api/decide", map[string]any{"drafts": []any{draft}}); status != 200 {
			t.Fatalf("%d %s", status, text)
		}
		r.stop()
	}
	decide("AB", "")
	decide("CD", "22")
	book := newBook(t, dir, "EF")
	opt := Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped, Settle: [2]string{"AB", "CD"}}
	for i, checker := range opt.Settle {
		file, err := ledger.OpenDecisions(filepath.Join(dir, ledger.FileName), checker)
		if err != nil {
			t.Fatal(err)
		}
		t.Cleanup(func() { file.Close() })
		opt.Sides[i] = file
	}
	return start(t, opt), book
}

func TestSettling(t *testing.T) {
	r, book := disagreement(t)
	r.enter()
	a := r.rows()
	if len(a.Rows) != 1 || len(a.Rows[0].Cells) != 1 {
		t.Fatalf("only the one that differs is to be settled: %+v", a.Rows)
	}
	c := r.row(a.Rows[0].Key).Cells[0]
	if len(c.Sides) != 2 || *c.Sides[0].Record.N != 24 || *c.Sides[1].Record.N != 22 {
		t.Fatalf("sides: %+v", c.Sides)
	}
	body := map[string]any{"id": c.Working.Record.ID, "hash": c.Hash, "take": "CD", "why": ""}
	if status, _ := r.post("/api/settle", body); status != http.StatusUnprocessableEntity {
		t.Errorf("settled without a reason: %d", status)
	}
	body["why"] = "the heading says 22"
	if status, text := r.post("/api/settle", body); status != 200 {
		t.Fatalf("%d %s", status, text)
	}
	rows, err := book.Rows()
	if err != nil {
		t.Fatal(err)
	}
	if d := rows[0].Decision; d == nil || d.Note != "the heading says 22" || d.Extra["take"] != "CD" || *d.Decided.Working.Record.N != 22 {
		t.Errorf("settled as %+v", d)
	}
}

func TestPicturesAreBoundedAndDrawnOnce(t *testing.T) {
	drawn := map[pictureKey]int{}
	c := newPictures(250, func(_ context.Context, key pictureKey) ([]byte, error) {
		drawn[key]++
		if key.page == 9 {
			return nil, errors.New("damaged page")
		}
		return make([]byte, 100), nil
	})
	get := func(page int) error {
		_, err := c.get(context.Background(), pictureKey{"s", page, 800})
		return err
	}
	for _, page := range []int{1, 2, 1, 3, 1, 2} {
		if err := get(page); err != nil {
			t.Fatal(err)
		}
	}
	if drawn[pictureKey{"s", 1, 800}] != 1 || drawn[pictureKey{"s", 2, 800}] != 2 {
		t.Errorf("drawn %v: page 1 was always used last, page 2 had to make room", drawn)
	}
	for range 2 {
		if get(9) == nil {
			t.Error("a page that cannot be drawn was drawn")
		}
	}
	if drawn[pictureKey{"s", 9, 800}] != 2 {
		t.Error("a failed drawing was kept")
	}
}
