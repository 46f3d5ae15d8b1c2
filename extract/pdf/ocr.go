package pdf

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"image"
	"image/png"
	"os/exec"
	"strconv"
	"strings"
	"time"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/engine"
	"halfspan/extract/pdf/geom"
)

// ocrScale draws pages for the recogniser at 300 dots an inch.
const ocrScale = 300.0 / 72

// ocrTime is far above what a page takes (2 to 10 s); a recogniser that needs
// longer hangs.
const ocrTime = 120 * time.Second

// recogniser reads pictures of pages through tesseract, a program that the
// user installed.
type recogniser struct{ program string }

// newRecogniser finds tesseract; its error says, as the end of a sentence, why
// no page will be recognised.
func newRecogniser(wanted bool) (*recogniser, error) {
	if !wanted {
		return nil, errors.New("give --ocr to have it read by tesseract, where that is installed")
	}
	path, err := exec.LookPath("tesseract")
	if err != nil {
		return nil, errors.New("install tesseract to have it read")
	}
	return &recogniser{path}, nil
}

// page recognises one page.
func (o *recogniser) page(doc *engine.Document, page paper.Page) (paper.GlyphPage, error) {
	img, err := doc.Render(page.Number, ocrScale)
	if err != nil {
		return paper.GlyphPage{}, err
	}
	var picture, table, complaint bytes.Buffer
	if err := png.Encode(&picture, img); err != nil {
		return paper.GlyphPage{}, err
	}
	ctx, cancel := context.WithTimeout(context.Background(), ocrTime)
	defer cancel()
	cmd := exec.CommandContext(ctx, o.program, "stdin", "stdout", "--dpi", "300", "--psm", "3", "tsv")
	cmd.Stdin, cmd.Stdout, cmd.Stderr = &picture, &table, &complaint
	if err := cmd.Run(); err != nil {
		said, _, _ := strings.Cut(strings.TrimSpace(complaint.String()), "\n")
		return paper.GlyphPage{}, fmt.Errorf("%w %s", err, said)
	}
	page.Reader = "ocr"
	out := paper.GlyphPage{Page: page, Fonts: []string{"recognised"}}
	out.Glyphs, err = recognised(table.String(), page)
	return out, err
}

// tsvColumns are the columns of tesseract's table.
const tsvColumns = 12

// recognised turns tesseract's table of words into glyphs: a word's box is
// shared out evenly among its characters, lines give baseline and size.
func recognised(table string, page paper.Page) ([]paper.Glyph, error) {
	var out []paper.Glyph
	var line image.Rectangle // the present line's box
	header := false
	for row := range strings.SplitSeq(table, "\n") {
		f := strings.Split(strings.TrimRight(row, "\r"), "\t")
		if len(f) != tsvColumns {
			continue
		}
		if f[0] == "level" {
			header = true
			continue
		}
		var n [10]int
		for i := range n {
			v, err := strconv.Atoi(f[i])
			if err != nil {
				return nil, fmt.Errorf("tesseract's table has %q where a number belongs", f[i])
			}
			n[i] = v
		}
		box := image.Rect(n[6], n[7], n[6]+n[8], n[7]+n[9])
		switch n[0] {
		case 4:
			line = box
		case 5:
			out = append(out, word(f[11], box, line, page)...)
		}
	}
	if !header {
		return nil, errors.New("tesseract gave no table")
	}
	return out, nil
}

// word shares a word's box out among its characters.
func word(text string, box, line image.Rectangle, page paper.Page) []paper.Glyph {
	runes := []rune(strings.TrimSpace(text))
	var out []paper.Glyph
	for i, r := range runes {
		part := image.Rect(box.Min.X+box.Dx()*i/len(runes), line.Min.Y, box.Min.X+box.Dx()*(i+1)/len(runes), line.Max.Y)
		g := paper.Glyph{Text: plainText(string(r)), Box: engine.FromPicture(page, ocrScale, part), Angle: upright(page.Rotate)}
		if g.Text == "" {
			continue
		}
		g.Size = int32(float64(line.Dy()) / ocrScale * 100)
		g.Origin = baseline(g.Box, g.Angle, int32(float64(g.Size)*-geom.Descent))
		out = append(out, g)
	}
	return out
}

// upright is the direction of text that a viewer shows upright on a turned
// page.
func upright(turn int) int16 { return int16(turn) }

// baseline gives the point on the baseline where a glyph begins.
func baseline(b paper.Box, angle int16, up int32) paper.Point {
	switch angle {
	case 90:
		return paper.Point{X: b.X1 - up, Y: b.Y0}
	case 180:
		return paper.Point{X: b.X1, Y: b.Y1 - up}
	case 270:
		return paper.Point{X: b.X0 + up, Y: b.Y1}
	}
	return paper.Point{X: b.X0, Y: b.Y0 + up}
}
