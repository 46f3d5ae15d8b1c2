package pdf

import (
	"errors"
	"fmt"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/engine"
	"halfspan/extract/pdf/glyphs"
)

// What a file may turn out to be instead of a readable PDF; test with
// errors.Is. The messages say what to do.
var (
	ErrEmpty    = errors.New("the file is empty: download it again")
	ErrNotPDF   = errors.New("this is not a PDF, whatever its name: look at it in a text editor, it may be a web page saved under the wrong name")
	ErrDamaged  = errors.New("the PDF is damaged, perhaps cut short: download it again, or open it in a PDF viewer and save it anew")
	ErrPassword = errors.New("the PDF is encrypted and asks for a password: save a copy without one and scan that")
	ErrNoPages  = errors.New("the PDF has no pages")
)

// Options say how a PDF is to be read.
type Options struct {
	OCR       bool      // read page images without text through tesseract, where it is on PATH
	Progress  func(int) // called after each page with its number, may be nil
	Preparing func()    // called once if the PDF reader must first be compiled (some seconds), may be nil
	// Recognising is called with the number of a page before tesseract reads it,
	// which may take a minute or two; may be nil.
	Recognising func(int)
	// OneReader reads by the sandboxed engine alone. It is for a paper that
	// made a process hang or burst once: our reader's library may be why.
	OneReader bool
	// BothAlways reads every page by both readers, proof or not: for tests and
	// for measuring.
	BothAlways bool
}

// Glyphs is what a PDF says, page by page.
type Glyphs struct {
	Title    string
	Pages    []paper.GlyphPage // every page of the file, in order, also those that nobody could read
	Problems []paper.Problem
}

// Read reads the content of a PDF. An error means that nothing could be read
// and says why; what could not be read of single pages stands in Problems.
func Read(content []byte, opt Options) (*Glyphs, error) {
	if err := looksLikePDF(content); err != nil {
		return nil, err
	}
	eng, err := engine.Shared(opt.Preparing)
	if err != nil {
		return nil, err
	}
	r := &reading{opt: opt, out: &Glyphs{}, proof: newProof(), repairs: map[repairKey]*repaired{}}
	r.doc, err = eng.Open(content)
	if err != nil {
		return nil, fileError(err)
	}
	defer r.doc.Close()
	if r.doc.NumPage() == 0 {
		return nil, ErrNoPages
	}
	r.out.Title = r.doc.Title()
	r.openOwn(content)
	for n := 1; n <= r.doc.NumPage(); n++ {
		r.page(n)
		if opt.Progress != nil {
			opt.Progress(n)
		}
	}
	r.finish()
	return r.out, nil
}

func fileError(err error) error {
	switch {
	case errors.Is(err, engine.ErrPassword), errors.Is(err, engine.ErrSecurity):
		return ErrPassword
	case errors.Is(err, engine.ErrFormat):
		return ErrDamaged
	}
	return err
}

// reading is one paper while it is read.
type reading struct {
	opt     Options
	out     *Glyphs
	doc     *engine.Document
	own     *glyphs.Document // nil: our reader cannot read this paper
	proof   *proof
	repairs map[repairKey]*repaired
	order   []repairKey
	marks   [][]glyphs.Mark // by page; nil where the engine's reading stands
}

// openOwn opens the paper for our reader. That it cannot is no problem of the
// paper, but it must be said: no digit of it is read twice.
func (r *reading) openOwn(content []byte) {
	if r.opt.OneReader {
		r.problem(0, "one-reader", false, "Only one of the two PDF readers was used for this paper, since reading it failed before: no digit of it was read twice.")
		return
	}
	own, err := glyphs.Open(content)
	switch {
	case err != nil:
		r.problem(0, "one-reader", false, "Only one of the two PDF readers can read this paper ("+err.Error()+"): no digit of it was read twice.")
	case own.NumPage() != r.doc.NumPage():
		r.problem(0, "one-reader", false, fmt.Sprintf("The two PDF readers see %d and %d pages in this paper: no digit of it was read twice.", r.doc.NumPage(), own.NumPage()))
	default:
		r.own = own
	}
}

func (r *reading) problem(page int, kind string, lost bool, text string) {
	r.out.Problems = append(r.out.Problems, paper.Problem{Page: page, Kind: kind, Text: text, Lost: lost})
}

// page reads one page: by our reader alone where all its fonts are proved,
// else by both.
func (r *reading) page(n int) {
	var ours *glyphs.Page
	var ownErr error
	if r.own != nil {
		if ours, ownErr = r.own.Page(n); ownErr == nil {
			ours.Marks = clean(&ours.GlyphPage, ours.Marks)
			if !r.opt.BothAlways && r.proof.holds(ours) {
				r.keep(ours.GlyphPage, ours.Marks)
				return
			}
		} else {
			ours = nil // what was read up to the error is no reading
		}
	}
	theirs, cut, err := r.doc.Page(n, ours == nil)
	if err != nil {
		r.withoutEngine(n, ours, err)
		return
	}
	if cut {
		r.problem(n, "cut-short", true, fmt.Sprintf("Page %d holds more characters than a printed page can; the rest was not read.", n))
	}
	clean(&theirs, nil)
	if ours == nil {
		if ownErr != nil {
			r.problem(n, "one-reader", false, fmt.Sprintf("Only one of the two PDF readers can read page %d (%v): its digits were not read twice.", n, ownErr))
		}
		settle(theirs.Glyphs)
		r.keep(theirs, nil)
		return
	}
	r.compare(ours, theirs)
}

// withoutEngine keeps what our reader read of a page that the other cannot
// read.
func (r *reading) withoutEngine(n int, ours *glyphs.Page, err error) {
	if ours != nil && len(ours.Glyphs) > 0 {
		r.problem(n, "one-reader", false, fmt.Sprintf("Only one of the two PDF readers can read page %d (%v): its digits were not read twice.", n, err))
		r.keep(ours.GlyphPage, ours.Marks)
		return
	}
	r.problem(n, "page-unreadable", true, fmt.Sprintf("Page %d could not be read (%v): look at it in a PDF viewer.", n, err))
	r.keep(paper.GlyphPage{Page: paper.Page{Number: n}}, nil)
}

// compare sets the two readings of a page against each other. Where they
// differ in a number the engine's stands, and every such number is a doubt.
func (r *reading) compare(ours *glyphs.Page, theirs paper.GlyphPage) {
	m := match(ours.Glyphs, theirs.Glyphs)
	r.proof.learn(m, ours.Marks)
	lend(m)
	settle(theirs.Glyphs)
	differ := m.disputes()
	n := theirs.Page.Number
	if len(differ) == 0 {
		// The readings are one. Ours is kept: it knows the codes.
		ours.Page.Reader = "both"
		r.keep(ours.GlyphPage, ours.Marks)
		return
	}
	for _, d := range differ {
		text := fmt.Sprintf("One reader of the PDF reads %s here, the other %s.", orNothing(d.engine), orNothing(d.ours))
		theirs.Doubts = append(theirs.Doubts, paper.Doubt{Page: n, Box: d.box, Kind: "readers-differ", Text: text})
	}
	// The drawings of both are the same, and ours are there already.
	theirs.Rules, theirs.Images = ours.Rules, ours.Images
	first := differ[0]
	r.problem(n, "readers-differ", false, fmt.Sprintf("The two PDF readers differ in %d numbers or signs of page %d, first in %s against %s: look at the page.",
		len(differ), n, orNothing(first.engine), orNothing(first.ours)))
	r.keep(theirs, nil)
}

func orNothing(s string) string {
	if s == "" {
		return "nothing"
	}
	return fmt.Sprintf("%q", s)
}

// keep takes a page that is read.
func (r *reading) keep(p paper.GlyphPage, marks []glyphs.Mark) {
	r.noteRepairs(&p, marks)
	r.out.Pages = append(r.out.Pages, p)
	r.marks = append(r.marks, marks)
}

// finish looks at the paper as a whole.
func (r *reading) finish() {
	r.pictures()
	r.learn()
	r.reportRepairs()
	r.unknownSigns()
}
