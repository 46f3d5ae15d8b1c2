package layout

import "strings"

// Text is the plain text of the paper in reading order: one line for each
// printed line of a column, a form feed between pages, everything that is
// printed included. Where a wide gap is printed, as between the cells of a
// table, stands a tab.
func (a *Arrangement) Text() string {
	var b strings.Builder
	for i := range a.Pages {
		if i > 0 {
			b.WriteByte('\f')
		}
		a.Pages[i].write(&b)
	}
	return b.String()
}

// Text is the plain text of one page.
func (p *PageLines) Text() string {
	var b strings.Builder
	p.write(&b)
	return b.String()
}

func (p *PageLines) write(b *strings.Builder) {
	for i := range p.Lines {
		l := &p.Lines[i]
		right := int32(0)
		for k, w := range l.Words {
			switch {
			case k == 0 || w.Glued:
			case w.Box.X0-right > w.Size && (l.Cells || w.Box.X0-right > 2*w.Size):
				b.WriteByte('\t')
			default:
				b.WriteByte(' ')
			}
			if k == 0 {
				right = w.Box.X1
			}
			right = max(right, w.Box.X1)
			b.WriteString(w.Text)
		}
		b.WriteByte('\n')
	}
}
