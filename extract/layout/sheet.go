package layout

import (
	"halfspan/extract/layout/words"
	"halfspan/extract/paper"
)

// line is a stretch of words on one baseline of one column. Its coordinates are
// those of its frame with y turned to grow downwards, so that lines sort as
// they are read.
type line struct {
	words          []*words.Word
	x0, x1         int
	base           int
	top, bot       int // from the baseline and the font size
	size           int // the font size of most of its glyphs
	glyphs         int
	bold, italic   bool  // most of its glyphs
	font           int32 // of nearly all its glyphs, by the paper's list; -1 where it is mixed
	furniture      bool
	lineNumber     bool     // a kind of furniture
	table          *tableAt // the line stands for a table; it has no words
	left, right    int      // gutters beside it, -1 for none
	no             int      // 1-based number on the page, in reading order
	page           int
	leading, width int    // of its column: usual distance of baselines, and from edge to edge
	edge           int    // left edge of its column
	printed        string // what text gives, once it was asked for
}

// tableAt is a table in the flow of the lines.
type tableAt struct {
	table  paper.Table
	rows   []line // as printed: caption, body and notes
	joined bool   // the rest of a table that began on an earlier page, which holds it all
}

// sheet is one direction of one page.
type sheet struct {
	page    int
	frame   words.Frame
	fonts   map[int32]int32 // the page's font numbers to the paper's
	lines   []line          // not yet in reading order
	stripes []candidate     // white stripes that may be gutters, the best first
	gutters []gutter
	raster  *raster
}

// line makes a line of words, which must not be empty.
func (s *sheet) line(ws []*words.Word) line {
	l := line{words: ws, page: s.page, font: -1, left: -1, right: -1, x0: int(ws[0].Box.X0), x1: int(ws[0].Box.X1)}
	best, bold, italic, plain := 0, 0, 0, 0
	font, same := int32(-1), 0
	for _, w := range ws {
		l.x0, l.x1 = min(l.x0, int(w.Box.X0)), max(l.x1, int(w.Box.X1))
		n := len(w.Glyphs)
		l.glyphs += n
		if w.Shift != 0 {
			continue
		}
		plain += n
		if w.Bold {
			bold += n
		}
		if w.Italic {
			italic += n
		}
		f := s.fonts[w.Glyphs[0].Font]
		if font < 0 {
			font = f
		}
		if f == font {
			same += n
		}
		if n > best {
			best, l.size, l.base = n, int(w.Size), -int(w.Base)
		}
	}
	if best == 0 {
		l.size, l.base = int(ws[0].Size), -int(ws[0].Base)
	}
	l.bold, l.italic = bold*10 >= plain*8 && bold > 0, italic*10 >= plain*8 && italic > 0
	if font >= 0 && same*10 >= plain*9 {
		l.font = font
	}
	l.top, l.bot = l.base-l.size*3/4, l.base+l.size/4
	return l
}

// wordsOf are pointers to the words of the segments of a frame.
func wordsOf(segs []words.Line) [][]*words.Word {
	n := 0
	for i := range segs {
		n += len(segs[i].Words)
	}
	all := make([]*words.Word, 0, n)
	out := make([][]*words.Word, len(segs))
	for i := range segs {
		start := len(all)
		for k := range segs[i].Words {
			all = append(all, &segs[i].Words[k])
		}
		out[i] = all[start:len(all):len(all)]
	}
	return out
}

// text is the line as printed, words joined by single spaces. The words of a
// line never change, so that it is made once.
func (l *line) text() string {
	if l.printed != "" {
		return l.printed
	}
	n := 0
	for _, w := range l.words {
		n += len(w.Text) + 1
	}
	buf := make([]byte, 0, n)
	for i, w := range l.words {
		if i > 0 && !w.Glued {
			buf = append(buf, ' ')
		}
		buf = append(buf, w.Text...)
	}
	l.printed = string(buf)
	return l.printed
}

func (l *line) mid() int { return (l.top + l.bot) / 2 }

// gutter is a white stripe between two columns; y grows downwards.
type gutter struct{ x0, x1, top, bot int }

func (g *gutter) covers(y int) bool { return y >= g.top && y <= g.bot }

func abs(x int) int {
	if x < 0 {
		return -x
	}
	return x
}
