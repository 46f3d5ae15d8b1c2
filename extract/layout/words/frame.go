package words

import "halfspan/extract/paper"

// Word is a stretch of glyphs printed without a gap, all of them on the
// baseline or all of them raised or lowered.
type Word struct {
	Text      string          // in Unicode; ligatures and mathematical letters spelled out
	Box       paper.Box       // upright space of its Frame: advance by font height
	Base      int32           // its own baseline, upright space
	Size      int32           // its own font size
	Bold      bool            // every glyph of it
	Italic    bool            // every glyph of it
	Invisible bool            // every glyph of it: an OCR layer, a hidden copy
	Shift     paper.StyleKind // paper.Raised or paper.Lowered against its Line, else 0
	Glued     bool            // printed without a space after the word before it on the Line
	Glyphs    []paper.Glyph   // from left to right, in page space
}

// Line is a segment: words on one baseline, from left to right, with no gap
// between them wider than one em.
type Line struct {
	Words []Word
	Box   paper.Box // of all its words
	Base  int32     // of the words that are not shifted
	Size  int32     // the largest font size among the words that are not shifted
}

// Frame holds what is printed in one direction of a page, turned upright.
type Frame struct {
	Angle   int16       // 0, 90, 180 or 270: the direction of its baselines on the page, counter-clockwise
	Oblique bool        // any other angle (Angle is then 0): words stand in page space, one Line a run of text
	Bounds  paper.Box   // the page's visible box
	Lines   []Line      // from top to bottom (falling Base), then from left to right
	Rules   []paper.Box // drawn lines and thin rectangles of the whole page
	Images  []paper.Box // pictures of the whole page
	Glyphs  int         // how many glyphs its words hold
}

// Upright takes a box from page space into the frame.
func (f *Frame) Upright(b paper.Box) paper.Box { return turn(b, f.Angle) }

// ToPage takes a box from the frame back into page space.
func (f *Frame) ToPage(b paper.Box) paper.Box { return turn(b, (360-f.Angle)%360) }

// turn rotates a box clockwise by angle, a multiple of 90 degrees, about the
// origin of the page.
func turn(b paper.Box, angle int16) paper.Box {
	switch angle {
	case 90:
		return paper.Box{X0: b.Y0, Y0: -b.X1, X1: b.Y1, Y1: -b.X0}
	case 180:
		return paper.Box{X0: -b.X1, Y0: -b.Y1, X1: -b.X0, Y1: -b.Y0}
	case 270:
		return paper.Box{X0: -b.Y1, Y0: b.X0, X1: -b.Y0, Y1: b.X1}
	}
	return b
}

// PageBox is the union of the word's glyph boxes, in page space.
func (w *Word) PageBox() paper.Box {
	var b paper.Box
	for i := range w.Glyphs {
		b = b.Union(w.Glyphs[i].Box)
	}
	return b
}

// Text is the line's words joined by single spaces where they are not glued.
func (l *Line) Text() string {
	n := 0
	for i := range l.Words {
		n += len(l.Words[i].Text) + 1
	}
	buf := make([]byte, 0, n)
	for i := range l.Words {
		if i > 0 && !l.Words[i].Glued {
			buf = append(buf, ' ')
		}
		buf = append(buf, l.Words[i].Text...)
	}
	return string(buf)
}
