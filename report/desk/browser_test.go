package desk

import (
	"context"
	"encoding/json"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/chromedp/cdproto/cdp"
	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/cdproto/input"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"
	"github.com/chromedp/chromedp/kb"
)

// browser opens a real Chromium that reaches this machine only.
func browser(t *testing.T) context.Context {
	t.Helper()
	path := ""
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome"} {
		if p, err := exec.LookPath(name); err == nil {
			path = p
			break
		}
	}
	if path == "" {
		if os.Getenv("HALFSPAN_REQUIRE_TOOLS") == "1" {
			t.Fatal("chromium is not installed")
		}
		t.Skip("chromium is not installed")
	}
	opts := append(chromedp.DefaultExecAllocatorOptions[:], chromedp.ExecPath(path), chromedp.NoSandbox, chromedp.Flag("window-size", "1440,900"),
		chromedp.Flag("disable-background-networking", true), chromedp.Flag("disable-component-update", true), chromedp.Flag("disable-quic", true))
	alloc, cancelAlloc := chromedp.NewExecAllocator(context.Background(), opts...)
	ctx, cancel := chromedp.NewContext(alloc)
	t.Cleanup(func() { cancel(); cancelAlloc() })
	thrown := make(chan string, 100)
	if err := chromedp.Listen(ctx, func(ev any) {
		if e, ok := ev.(*runtime.EventExceptionThrown); ok && len(thrown) < cap(thrown) {
			text, _ := json.Marshal(e)
			thrown <- string(text)
		}
	}); err != nil {
		t.Fatalf("chromium does not start: %v", err)
	}
	t.Cleanup(func() {
		for len(thrown) > 0 {
			t.Errorf("the page threw: %s", <-thrown)
		}
	})
	return ctx
}

type tab struct {
	t   *testing.T
	ctx context.Context
}

func (b tab) run(what string, steps ...chromedp.Action[chromedp.Void]) {
	b.t.Helper()
	ctx, cancel := context.WithTimeout(b.ctx, 20*time.Second)
	defer cancel()
	if err := chromedp.Do(ctx, steps...); err != nil {
		b.shot("failed")
		page, _ := chromedp.Run(b.ctx, chromedp.Evaluate[string](`document.body.innerText.slice(0, 900)`))
		b.t.Fatalf("%s: %v\nthe page says: %s", what, err, page)
	}
}

// value evaluates an expression in the page.
func value[T any](b tab, expression string) T {
	b.t.Helper()
	ctx, cancel := context.WithTimeout(b.ctx, 20*time.Second)
	defer cancel()
	v, err := chromedp.Run(ctx, chromedp.Evaluate[T](expression))
	if err != nil {
		b.t.Fatalf("%s: %v", expression, err)
	}
	return v
}

// open goes to the address and waits for the first row.
func (b tab) open(address string) {
	b.t.Helper()
	b.run("open", chromedp.Navigate(address), chromedp.WaitVisible(".cells button"))
}

// press waits, as a person does, until what is shown may be decided, and sends
// keys as a keyboard does.
func (b tab) press(keys ...string) {
	b.t.Helper()
	b.until("what is shown can be decided", `document.getElementById('choices').getAttribute('aria-busy') === 'false'`)
	b.strike(keys...)
}

// strike sends keys at once: a key whose keydown is handled by the page leaves no
// character behind.
func (b tab) strike(keys ...string) {
	b.t.Helper()
	for _, k := range keys {
		down := input.DispatchKeyEventParams{Type: input.DispatchKeyEventTypeKeyDown, Key: k, Text: k}
		switch k {
		case "Enter":
			down.Text, down.Code, down.WindowsVirtualKeyCode = "\r", k, 13
		case "ArrowDown":
			down.Text, down.Code, down.WindowsVirtualKeyCode = "", k, 40
		case "Shift+X":
			down.Text, down.Key, down.Modifiers = "X", "X", 8
		case "Escape":
			down.Text, down.Code, down.WindowsVirtualKeyCode = "", k, 27
		}
		up := down
		up.Type, up.Text = input.DispatchKeyEventTypeKeyUp, ""
		b.run("press "+k, chromedp.Func(func(ctx context.Context, t *chromedp.Target) error {
			if _, err := cdp.Call(ctx, t, input.DispatchKeyEvent, down); err != nil {
				return err
			}
			_, err := cdp.Call(ctx, t, input.DispatchKeyEvent, up)
			return err
		}))
	}
}

// fill types text into a field in place of what it holds.
func (b tab) fill(id, text string) {
	b.t.Helper()
	value[bool](b, `(() => { const f = document.getElementById('`+id+`'); f.focus(); f.select(); return true; })()`)
	b.run("clear "+id, chromedp.KeyEvent(kb.Backspace))
	if text != "" {
		b.run("fill "+id, chromedp.KeyEvent(text))
	}
}

// until waits for a condition in the page.
func (b tab) until(what, expression string) {
	b.t.Helper()
	b.run("wait until "+what, chromedp.Poll[chromedp.Void](expression, chromedp.WithPollingInterval(40*time.Millisecond)))
}

func (b tab) text(selector string) string {
	b.t.Helper()
	return value[string](b, `document.querySelector(`+quoteJS(selector)+`)?.innerText ?? ''`)
}

func quoteJS(s string) string { return "'" + strings.ReplaceAll(s, "'", `\'`) + "'" }

// shot keeps a picture of the page where HALFSPAN_SHOTS names a folder.
func (b tab) shot(name string) {
	dir := os.Getenv("HALFSPAN_SHOTS")
	if dir == "" {
		return
	}
	if png, err := chromedp.Run(b.ctx, chromedp.CaptureScreenshot()); err == nil {
		_ = os.WriteFile(filepath.Join(dir, name+".png"), png, 0o644)
	}
}

const said = `document.getElementById('said').textContent`

func TestCheckingByKeyboard(t *testing.T) {
	b := tab{t, browser(t)}
	book := newBook(t, t.TempDir(), "AB")
	r := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped})
	b.open(r.address)
	b.shot("row")
	if got := b.text("#row h2"); got != "colony mass" {
		t.Errorf("the first row is %q", got)
	}
	b.press("Enter")
	b.until("the row is confirmed", said+`.startsWith('confirmed') && document.querySelector('#row h2').textContent === 'frames of brood'`)
	b.press("u")
	b.until("the row is open again", `document.querySelector('#row h2').textContent === 'colony mass' && `+said+`.includes('2 cells')`)
	b.press("Enter")
	b.until("the next row", `document.querySelector('#row h2').textContent === 'frames of brood'`)
	b.press("x")
	b.until("the reasons", `document.getElementById('dialog').open`)
	b.shot("drop")
	b.strike("6")
	b.until("asked for words", `document.activeElement.matches('#dialog input')`)
	b.run("other, in words", chromedp.KeyEvent("a pilot"+kb.Enter))
	b.until("dropped", said+`.startsWith('dropped') && document.querySelector('#row h2').textContent === 'gain'`)
	b.press("/")
	b.until("what to find", `document.getElementById('dialog').open`)
	b.run("find by words", chromedp.KeyEvent("frames"+kb.ArrowDown+kb.Enter))
	b.until("found, with why it was dropped", `document.querySelector('#row h2').textContent === 'frames of brood' && document.getElementById('cell').innerText.includes('other (a pilot)')`)
	b.press("o")
	b.until("the open one", `document.querySelector('#row h2').textContent === 'gain'`)
	b.press("a")
	b.until("the form", `document.querySelector('form.amend') !== null`)
	b.fill("f-n", "12")
	b.until("worked again", `document.querySelector('#cell .summary').textContent.includes('→')`)
	b.shot("amend")
	// A reload in the middle keeps what was typed.
	b.run("reload", chromedp.Reload(), chromedp.WaitVisible(".cells button"))
	b.press("a")
	b.until("the draft is back", `document.getElementById('f-n')?.value === '12'`)
	b.run("save", chromedp.Focus("#f-n"), chromedp.KeyEvent(kb.Enter))
	b.until("amended, and nothing is open", said+`.startsWith('That was the last') && document.querySelector('.cells button').innerText.includes('amended')`)
	b.press("q")
	b.until("asked what to ask", `document.getElementById('dialog').open`)
	b.run("ask", chromedp.SendKeys("#dialog textarea", "which week?"), chromedp.SendKeys("#dialog textarea", kb.Enter))
	b.until("queried", `document.querySelector('.cells button').innerText.includes('queried')`)
	b.press("?")
	b.until("the keys", `document.getElementById('dialog').open`)
	b.shot("keys")
	b.press("Escape")

	states := map[string]int{}
	rows, err := book.Rows()
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range rows {
		states[string(row.State)]++
	}
	if states["confirmed"] != 2 || states["dropped"] != 1 || states["queried"] != 1 || states["open"] != 1 {
		t.Errorf("the ledger holds %v", states)
	}
}

func TestNoKeyDecidesWhatWasNotLookedAt(t *testing.T) {
	b := tab{t, browser(t)}
	book := newBook(t, t.TempDir(), "AB")
	r := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped})
	b.open(r.address)
	b.press("Enter", "Enter", "c", "Enter") // in haste: the first is meant, the others hit what has just appeared
	b.until("the next row", `document.querySelector('#row h2').textContent === 'frames of brood'`)
	b.strike("Enter")
	b.until("told so", said+`.startsWith('Not ')`)
	if all, err := book.Decisions().All(0); err != nil || len(all) != 2 {
		t.Errorf("%d decisions (%v), want those of the two cells that were looked at", len(all), err)
	}
	// A key held down decides once.
	held := input.DispatchKeyEventParams{Type: input.DispatchKeyEventTypeKeyDown, Key: "Enter", Code: "Enter", Text: "\r", WindowsVirtualKeyCode: 13, AutoRepeat: new(true)}
	b.press("ArrowDown")
	b.until("the third row", `document.querySelector('#row h2').textContent === 'gain'`)
	b.until("it can be decided", `document.getElementById('choices').getAttribute('aria-busy') === 'false'`)
	b.run("hold Enter", chromedp.Func(func(ctx context.Context, t *chromedp.Target) error {
		_, err := cdp.Call(ctx, t, input.DispatchKeyEvent, held)
		return err
	}))
	b.press("Shift+X")
	b.until("asked why", `document.getElementById('dialog').open`)
	b.strike("4")
	b.until("the row is dropped", said+`.startsWith('dropped')`)
	if all, err := book.Decisions().All(0); err != nil || len(all) != 3 {
		t.Errorf("%d decisions (%v), want three", len(all), err)
	}
}

func TestZoomingWhileThePageIsDrawn(t *testing.T) {
	b := tab{t, browser(t)}
	slow := slowPapers{delay: 1500 * time.Millisecond}
	r := start(t, Options{Book: newBook(t, t.TempDir(), "AB"), Papers: slow, ReadTyped: readTyped})
	b.open(r.address)
	b.strike("Enter")
	b.until("not before the page is there", said+`.startsWith('Not confirmed')`)
	b.strike("+", "t", "Enter")
	b.press("Enter") // waits until it may
	b.until("confirmed", said+`.startsWith('confirmed')`)
}

// slowPapers take their time to draw a page.
type slowPapers struct {
	fakePapers
	delay time.Duration
}

func (s slowPapers) Picture(ctx context.Context, p Paper, page, width int) ([]byte, error) {
	time.Sleep(s.delay)
	return s.fakePapers.Picture(ctx, p, page, width)
}

func TestADecisionIsNotTakenForOneElsewhere(t *testing.T) {
	b := tab{t, browser(t)}
	r := start(t, Options{Book: newBook(t, t.TempDir(), "AB"), Papers: fakePapers{}, ReadTyped: readTyped})
	b.open(r.address)
	// The list comes late, so that the watch for changes elsewhere runs in between.
	value[bool](b, `(() => { const f = window.fetch; window.late = 0;
		window.fetch = (p, o) => String(p).startsWith('/api/rows') ? new Promise((ok) => setTimeout(() => { window.late++; ok(f(p, o)); }, 2500)) : f(p, o); return true; })()`)
	b.press("Enter")
	b.until("the next row", `document.querySelector('#row h2').textContent === 'frames of brood'`)
	b.run("wait", chromedp.Sleep(3*time.Second))
	if got := b.text("#row h2"); got != "frames of brood" || value[int](b, `window.late`) != 1 {
		t.Errorf("after the decision the row is %q and the list was read %d times", got, value[int](b, `window.late`))
	}
}

func TestPickingAndAdding(t *testing.T) {
	b := tab{t, browser(t)}
	book := newBook(t, t.TempDir(), "AB")
	r := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped})
	b.open(r.address)
	b.press("a")
	b.until("the form", `document.getElementById('f-estimate') !== null`)
	b.fill("f-estimate", "")
	b.until("the page is there", `document.querySelector('.page img')?.complete === true`)
	// A click on the printed 11.8 at (220, 604.5) of a page of 595 by 842 points.
	at := value[[]float64](b, `(() => { const r = document.querySelector('.page').getBoundingClientRect(); const s = r.width / 595;
		return [r.left + 220 * s, r.top + (842 - 604.5) * s]; })()`)
	b.run("click", chromedp.MouseClickXY(at[0], at[1]))
	b.until("the number is in the field", `document.getElementById('f-estimate').value === '11.8'`)
	b.press("Escape")
	b.press("m")
	b.until("asked to draw", said+`.startsWith('Draw')`)
	b.press("Enter")
	b.until("the form", `document.getElementById('dialog').open`)
	b.run("type", chromedp.SendKeys("#dialog [name=text]", "9.9 (1.1)"), chromedp.SendKeys("#dialog [name=outcome]", "stores"), chromedp.SendKeys("#dialog [name=arm]", "candy"))
	b.shot("add")
	b.run("add", chromedp.KeyEvent(kb.Enter))
	b.until("added", said+`.startsWith('Added')`)
	if got := b.text("#row h2"); got != "stores" {
		t.Errorf("after adding the row is %q", got)
	}
}

func TestTypingFirst(t *testing.T) {
	b := tab{t, browser(t)}
	r := start(t, Options{Book: newBook(t, t.TempDir(), "AB"), Papers: fakePapers{}, ReadTyped: readTyped, TypeFirst: 1})
	b.open(r.address)
	b.until("the form", `document.getElementById('t-estimate') !== null`)
	if got := b.text("#side"); strings.Contains(got, "11.8") || strings.Contains(got, "2.1") {
		t.Errorf("the value is shown before it is typed: %s", got)
	}
	b.shot("type-first")
	b.run("type", chromedp.SendKeys("#t-estimate", "11.3"), chromedp.SendKeys("#t-given_value", "2.1"), chromedp.SendKeys("#t-n", "24"+kb.Enter))
	b.until("told apart", said+`.startsWith('Not the same')`)
	if got := b.text("#cell"); !strings.Contains(got, "11.3") || !strings.Contains(got, "11.8") {
		t.Errorf("both values should be shown: %s", got)
	}
}

func TestNothingIsLostWhenTheServerGoes(t *testing.T) {
	b := tab{t, browser(t)}
	dir := t.TempDir()
	r := start(t, Options{Book: newBook(t, dir, "AB"), Papers: fakePapers{}, ReadTyped: readTyped})
	b.open(r.address)
	b.press("Enter")
	b.until("confirmed", said+`.startsWith('confirmed') && document.querySelector('#row h2').textContent === 'frames of brood'`)
	r.stop()
	b.press("Enter")
	b.until("told", said+`.includes('does not answer')`)
	book := newBook(t, dir, "AB")
	again := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped})
	b.open(again.address)
	all, err := book.Decisions().All(0)
	if err != nil || len(all) != 2 {
		t.Errorf("%d decisions (%v), want the two that were shown as taken", len(all), err)
	}
	// What another window decides shows up here.
	other := newBook(t, dir, "AB")
	rows, err := other.Rows()
	if err != nil {
		t.Fatal(err)
	}
	if _, err := other.Undo(rows[0].ID(), rows[0].Token(), "elsewhere"); err != nil {
		t.Fatal(err)
	}
	b.until("seen here", `document.getElementById('progress').textContent.startsWith('1 of')`)
}

func TestSettlingByHand(t *testing.T) {
	b := tab{t, browser(t)}
	r, book := disagreement(t)
	b.open(r.address)
	b.until("both sides", `document.querySelectorAll('.two thead td').length === 2 && document.querySelectorAll('.two .differs').length > 0`)
	b.shot("settle")
	b.strike("Enter")
	b.until("no key decides here but the choice", said+`.startsWith('Press 1')`)
	b.strike("2", "Enter")
	b.until("asked why", said+`.startsWith('Say why') && document.activeElement.id === 'settle-why'`)
	b.run("why", chromedp.KeyEvent("the heading says 22"+kb.Enter))
	b.until("settled", `document.getElementById('progress').textContent.startsWith('1 of 1')`)
	rows, err := book.Rows()
	if err != nil {
		t.Fatal(err)
	}
	if d := rows[0].Decision; d == nil || d.Extra["take"] != "CD" || *d.Decided.Working.Record.N != 22 {
		t.Errorf("settled as %+v", d)
	}
}

func TestTextOfPapersIsNeverMarkup(t *testing.T) {
	b := tab{t, browser(t)}
	dir := t.TempDir()
	book := newBook(t, dir, "AB")
	r := start(t, Options{Book: book, Papers: fakePapers{}, ReadTyped: readTyped})
	b.open(r.address)
	b.press("m")
	b.until("asked to draw", said+`.startsWith('Draw')`)
	b.press("Enter")
	b.until("the form", `document.getElementById('dialog').open`)
	b.run("type", chromedp.SendKeys("#dialog [name=text]", "9.9 (1.1)"),
		chromedp.SendKeys("#dialog [name=outcome]", `<img src=x onerror="document.title='run'"><script>document.title='run'</script>`))
	b.run("add", chromedp.Click(`//dialog//button[contains(., 'Add it')]`))
	b.until("added", said+`.startsWith('Added')`)
	title := value[string](b, `document.title`)
	if title == "run" || !strings.Contains(b.text("#row h2"), "<script>") {
		t.Errorf("markup in a paper's text was not shown as text: title %q, heading %q", title, b.text("#row h2"))
	}
}

func TestNarrowAndDark(t *testing.T) {
	b := tab{t, browser(t)}
	r := start(t, Options{Book: newBook(t, t.TempDir(), "AB"), Papers: fakePapers{}, ReadTyped: readTyped})
	b.run("narrow", chromedp.EmulateViewport(1024, 720))
	b.open(r.address)
	if value[bool](b, `document.documentElement.scrollWidth > 1024`) {
		t.Error("at 1024 pixels the page scrolls sideways")
	}
	if value[bool](b, `document.querySelector('#leaf').scrollWidth > document.querySelector('#leaf').clientWidth ||
		document.getElementById('view').getBoundingClientRect().right > document.getElementById('side').getBoundingClientRect().left + 1`) {
		t.Error("at 1024 pixels the page covers what stands beside it")
	}
	b.shot("narrow")
	b.run("dark", scheme("dark"))
	b.shot("dark")
	checkAccessible(b, "dark")
	b.run("light", scheme("light"))
	checkAccessible(b, "light")
}

// scheme makes the browser ask for a light or a dark page.
func scheme(name string) chromedp.Action[chromedp.Void] {
	return chromedp.Func(func(ctx context.Context, t *chromedp.Target) error {
		_, err := cdp.Call(ctx, t, emulation.SetEmulatedMedia, emulation.SetEmulatedMediaParams{
			Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: name}}})
		return err
	})
}

// checkAccessible asks every visible text for its contrast (WCAG 2.2 AA: 4.5, or
// 3 for large text) and every control for a name.
func checkAccessible(b tab, scheme string) {
	b.t.Helper()
	faults := value[[]string](b, `(() => {
		const rgb = (s) => s.match(/[\d.]+/g).map(Number);
		const lum = ([r, g, b]) => [r, g, b].map((v) => { v /= 255; return v <= 0.03928 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4; }).reduce((a, v, i) => a + v * [0.2126, 0.7152, 0.0722][i], 0);
		const behind = (e) => { for (; e; e = e.parentElement) { const c = rgb(getComputedStyle(e).backgroundColor); if ((c[3] ?? 1) > 0.9) return c; } return [255, 255, 255]; };
		const out = [];
		for (const e of document.querySelectorAll('body *')) {
			const own = [...e.childNodes].some((n) => n.nodeType === 3 && n.textContent.trim());
			if (!own || !e.checkVisibility() || e.closest('svg, noscript')) continue;
			const s = getComputedStyle(e), [a, b] = [lum(rgb(s.color)), lum(behind(e))].sort((x, y) => y - x);
			const large = parseFloat(s.fontSize) >= 24 || (parseFloat(s.fontSize) >= 18.66 && s.fontWeight >= 700);
			if ((a + 0.05) / (b + 0.05) < (large ? 3 : 4.5)) out.push('contrast ' + ((a + 0.05) / (b + 0.05)).toFixed(2) + ': ' + e.textContent.slice(0, 40));
		}
		for (const e of document.querySelectorAll('button, input, select, textarea, [role=toolbar], section, [tabindex="0"]')) {
			if (!e.checkVisibility()) continue;
			const name = e.getAttribute('aria-label') || (e.labels?.[0]?.textContent ?? '') || (e.matches('button') ? e.textContent : '');
			if (!name.trim()) out.push('no name: ' + e.outerHTML.slice(0, 80));
		}
		if (!document.documentElement.lang) out.push('no language');
		if (!document.querySelector('main') || !document.querySelector('h1')) out.push('no main or h1');
		return out;
	})()`)
	for _, f := range faults {
		b.t.Errorf("%s: %s", scheme, f)
	}
}
