package desk

import (
	"context"
	"errors"
	"path/filepath"
	"strings"
	"testing"

	"github.com/chromedp/chromedp"

	"halfspan/convert/working"
	"halfspan/extract/paper"
	"halfspan/extract/result"
	"halfspan/report/ledger"
)

// awaited evaluates an async function in the page and gives the faults it found.
func (b tab) awaited(body string) []string {
	b.t.Helper()
	b.run("evaluate", chromedp.Evaluate[chromedp.Void](`window.faults = null; (async () => {`+body+`})().then((f) => { window.faults = f; }, (e) => { window.faults = [String(e)]; }); undefined`))
	b.until("it was evaluated", `window.faults !== null`)
	return value[[]string](b, `window.faults`)
}

func TestPagesAreTurnedUpright(t *testing.T) {
	b := tab{t, browser(t)}
	b.open(start(t, Options{Book: newBook(t, t.TempDir(), "AB"), Papers: fakePapers{}, ReadTyped: readTyped}).address)
	// A line of print runs to the right in its own space; page turns it by quarter
	// turns into the unrotated page, as a wide table is printed.
	for _, f := range b.awaited(`
		const { Sheet, uprightTurn } = await import('/assets/sheet.js');
		const faults = [];
		const leafs = [0, 90, 180, 270].map((rotate) => ({ rotate, x0: 10, y0: 20, x1: 610, y1: 820 }));
		for (const leaf of leafs) for (const turn of [0, 90, 180, 270]) {
			const s = new Sheet(leaf, turn), [x, y] = s.at(100, 300), [bx, by] = s.back(x, y);
			if (Math.abs(bx - 100) + Math.abs(by - 300) > 1e-9) faults.push('no way back at ' + leaf.rotate + ', ' + turn);
			if (x < 0 || y < 0 || x > s.w || y > s.h) faults.push('outside the page at ' + leaf.rotate + ', ' + turn);
		}
		// runs: degrees that the print runs by, anticlockwise from level, in the unrotated page.
		const text = (t, from, to, runs) => {
			const along = { 0: [1, 0], 90: [0, 1], 180: [-1, 0], 270: [0, -1] }[runs], up = [-along[1], along[0]];
			const p = [from, to].flatMap((d) => [0, 8].map((h) => [300 + along[0] * d + up[0] * h, 400 + along[1] * d + up[1] * h]));
			return { text: t, box: [Math.min(...p.map((q) => q[0])), Math.min(...p.map((q) => q[1])), Math.max(...p.map((q) => q[0])), Math.max(...p.map((q) => q[1]))] };
		};
		for (const leaf of leafs) for (const runs of [0, 90, 180, 270]) {
			const label = text('Colony mass', -200, -140, runs), numbers = [text('11.8', 0, 20, runs), text('(2.1)', 24, 44, runs)];
			const s = new Sheet(leaf, uprightTurn(leaf, numbers, [], label));
			const [l, e] = [s.box(label.box), s.box(numbers[0].box)];
			if (e.x1 - e.x < e.y1 - e.y) faults.push('print running by ' + runs + ' stays sideways on a page rotated by ' + leaf.rotate);
			if ((leaf.rotate + runs) % 180 === 90 && l.x > e.x) faults.push('print running by ' + runs + ' is upside down on a page rotated by ' + leaf.rotate);
		}
		// Numbers too short to tell: the label does.
		const label = text('Colony mass', -200, -140, 270);
		if (uprightTurn(leafs[0], [text('16', 0, 8, 270), text('38', 60, 68, 270)], [label], label) !== 270) faults.push('a row of short numbers stays sideways');
		if (uprightTurn(leafs[0], [text('5', 0, 4, 90)]) !== 0) faults.push('one digit says nothing of how the print runs');
		return faults;`) {
		t.Error(f)
	}
}

func TestTagsNeverStandOnPrint(t *testing.T) {
	b := tab{t, browser(t)}
	b.open(start(t, Options{Book: newBook(t, t.TempDir(), "AB"), Papers: fakePapers{}, ReadTyped: readTyped}).address)
	for _, f := range b.awaited(`
		const { Ink, place } = await import('/assets/tags.js');
		const faults = [];
		// A page of 600 by 800: a column of lines without white between them, a
		// heading with white about it, a shaded head of a table with a word in it.
		const canvas = document.createElement('canvas');
		canvas.width = 600; canvas.height = 800;
		const pen = canvas.getContext('2d');
		pen.fillStyle = '#fff'; pen.fillRect(0, 0, 600, 800);
		pen.fillStyle = '#bbb'; pen.fillRect(60, 600, 480, 40);
		pen.fillStyle = '#000'; pen.fillRect(60, 100, 260, 400); pen.fillRect(60, 40, 80, 10); pen.fillRect(100, 606, 60, 10);
		const image = new Image();
		image.src = canvas.toDataURL();
		await image.decode();
		const ink = new Ink(image, 0);
		const tags = [
			{ text: 'time', box: { x: 60, y: 40, x1: 140, y1: 50 } },
			{ text: 'arm', box: { x: 100, y: 606, x1: 160, y1: 616 } },
			{ text: 'n', box: { x: 200, y: 300, x1: 240, y1: 310 } },
			{ text: 'a very long name that fits nowhere', box: { x: 70, y: 300, x1: 90, y1: 310 } },
		];
		const put = place(tags, ink, { w: 600, h: 800, size: 9, taken: tags.map((t) => t.box) });
		const of = (word) => put.find((p) => p.text.includes(word));
		if (!of('time') || !of('arm')) faults.push('a place in the white has no name: ' + JSON.stringify(put));
		if (of('n ') && of('n ').x < 320 && of('n ').x1 > 60) faults.push('the name of n stands in the column');
		for (const p of put) {
			if (ink.covered(p.x / 600, p.y / 800, p.x1 / 600, p.y1 / 800) > 0) faults.push(p.text + ' stands on print');
			for (const q of put) if (p !== q && p.x < q.x1 && q.x < p.x1 && p.y < q.y1 && q.y < p.y1) faults.push(p.text + ' stands on ' + q.text);
		}
		const turned = new Ink(image, 90);
		if (turned.w !== 800 || turned.covered(300 / 800, 60 / 600, 310 / 800, 70 / 600) !== 0) faults.push('the turned page has its print elsewhere');
		return faults;`) {
		t.Error(f)
	}
}

// textPapers is a paper without pages: a table with its head far above the row
// that is checked, and a sentence of the methods.
type textPapers struct {
	fakePapers
	doc *paper.Document
}

func (p textPapers) Page(context.Context, Paper, int) (paper.Page, int, error) {
	return paper.Page{}, 0, nil
}

func (p textPapers) Document(context.Context, Paper) (*paper.Document, error) { return p.doc, nil }

// at is a run of text that stands at a byte of the file.
func at(offset int, s string) paper.TextRun {
	return paper.TextRun{S: s, Runs: []paper.Run{{End: len(s), Place: paper.Place{Offset: offset}}}}
}

func textPaper() (*paper.Document, []result.Result) {
	table := &paper.Table{Label: "Table 1", Caption: at(1000, "Mass, kg"), Rows: 2, Cols: 3, HeadRows: 1}
	for i, s := range []string{"", "Syrup", "Water", "Mass", "11.8 (2.1)", "11.6 (2.3)"} {
		table.Cells = append(table.Cells, paper.Cell{Row: i / 3, Col: i % 3, RowSpan: 1, ColSpan: 1, Text: at(1100+100*i, s)})
	}
	doc := &paper.Document{Blocks: []paper.Block{
		{Kind: paper.Paragraph, Section: "Methods", Text: at(100, "Values are mean (SD).")},
		{Kind: paper.Paragraph, Section: "Methods", Text: at(200, "More.")}, {Kind: paper.Paragraph, Text: at(300, "More.")},
		{Kind: paper.Paragraph, Text: at(400, "More.")}, {Kind: paper.Paragraph, Text: at(500, "More.")},
		{Kind: paper.Heading, Section: "Results", Text: at(900, "Results")},
		{Kind: paper.TableBlock, Section: "Results", Table: table},
	}}
	source := func(field string, offset int, text string) result.Source {
		return result.Source{Field: field, Text: text, Place: paper.Place{Offset: offset}}
	}
	var results []result.Result
	for i, v := range [][3]string{{"11.8", "2.1", "Syrup"}, {"11.6", "2.3", "Water"}} {
		r := result.Result{Table: "Table 1", Row: "t1r1", Snippet: v[0], Statistic: result.Mean, GivenAs: result.SD, Estimate: v[0], GivenValue: v[1], Arm: v[2], Outcome: "Mass"}
		cell := 1500 + 100*i
		r.Sources = []result.Source{source("estimate", cell, v[0]), source("given_value", cell+6, v[1]), source("arm", 1200+100*i, v[2]), source("given_as", 100, "Values are mean (SD).")}
		r.Anchor = result.AnchorAt(r.Sources[1].Place, v[1])
		results = append(results, r)
	}
	return doc, results
}

func TestPapersWithoutPages(t *testing.T) {
	doc, results := textPaper()
	path := filepath.Join(t.TempDir(), ledger.FileName)
	l, err := ledger.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	var items []ledger.Item
	for i, w := range working.Work(working.Facts{Path: "colonies.txt", SHA256: sha, Format: paper.Text}, results) {
		items = append(items, ledger.Item{Result: results[i], Working: w})
	}
	if err := l.SetRoot(filepath.Dir(path)); err != nil {
		t.Fatal(err)
	}
	if _, err := l.Keep(ledger.Paper{Name: "colonies.txt", SHA256: sha, Format: paper.Text}, items); err != nil {
		t.Fatal(err)
	}
	if err := l.Close(); err != nil {
		t.Fatal(err)
	}
	book, err := ledger.OpenBook(path, ledger.Options{Checker: "AB", Version: "test"})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { book.Close() })
	b := tab{t, browser(t)}
	b.open(start(t, Options{Book: book, Papers: textPapers{doc: doc}, ReadTyped: readTyped}).address)
	b.until("the passage", `document.querySelector('.passage mark') !== null`)
	b.shot("passage")
	text := func(selector string) string {
		return value[string](b, `[...document.querySelectorAll('`+selector+`')].map((e) => e.textContent).join(' | ')`)
	}
	if got := text(".passage mark:not(.src, .mate)"); got != "11.8 (2.1" {
		t.Errorf("framed as the result: %q", got)
	}
	if got := text(".passage mark.mate"); got != "11.6 (2.3" {
		t.Errorf("marked as the other cell of the row: %q", got)
	}
	if got := text(".passage thead"); !strings.Contains(got, "Syruparm") {
		t.Errorf("the head, with where the arm was read: %q", got)
	}
	if got := text("#legend"); !strings.Contains(got, "1 elsewhere") {
		t.Errorf("the legend says %q: the methods are out of view", got)
	}
	b.press("v")
	b.until("the methods", said+`.startsWith('spread was read here') && document.querySelector('.passage mark.src').textContent.startsWith('Values are')`)
	for _, key := range []string{"Enter", "c"} {
		b.strike(key)
		b.until("the numbers are not in view now", said+`.startsWith('Not confirmed: its numbers')`)
		value[bool](b, `(() => { document.getElementById('said').textContent = ''; document.activeElement.blur(); return true; })()`)
	}
	b.strike("v")
	b.until("back", said+`.startsWith('Back')`)
	b.press("Enter")
	b.until("both cells", said+`.startsWith('That was the last')`)
	if all, err := book.Decisions().All(0); err != nil || len(all) != 2 {
		t.Errorf("%d decisions (%v), want two", len(all), err)
	}
}

func TestAPaperThatCannotBeShown(t *testing.T) {
	b := tab{t, browser(t)}
	book := newBook(t, t.TempDir(), "AB")
	b.open(start(t, Options{Book: book, Papers: fakePapers{fail: errors.New("colonies.pdf has changed since it was scanned")}, ReadTyped: readTyped}).address)
	b.until("said where the page would be", `document.getElementById('view').innerText.includes('has changed since')`)
	b.press("Enter")
	b.until("nothing is confirmed unseen", said+`.startsWith('Not confirmed: its numbers')`)
	b.press("X")
	b.until("asked why", `document.getElementById('dialog').open`)
	b.strike("Escape")
	if all, err := book.Decisions().All(0); err != nil || len(all) != 0 {
		t.Errorf("%d decisions (%v) without a page", len(all), err)
	}
}
