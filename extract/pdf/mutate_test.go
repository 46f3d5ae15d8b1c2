package pdf

import (
	"bytes"
	"compress/zlib"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"halfspan/extract/pdf/pdftest"
)

// broken is a PDF that was spoilt on purpose.
type broken struct {
	name    string
	content []byte
}

// mutants spoils sound PDFs in all the ways that are known to hurt readers. It
// gives the same ones each time.
func mutants(sound []byte, name string) []broken {
	rnd := rand.New(rand.NewPCG(1, uint64(len(sound))))
	var out []broken
	add := func(how string, content []byte) { out = append(out, broken{name + ": " + how, content}) }
	for _, part := range []int{10, 50, 90, 99} {
		add(fmt.Sprintf("cut after %d%%", part), sound[:len(sound)*part/100])
	}
	for i := range 8 {
		b := bytes.Clone(sound)
		for range 1 << (i / 2) {
			b[rnd.IntN(len(b))] ^= 1 << rnd.IntN(8)
		}
		add(fmt.Sprintf("bits turned, %d", i), b)
	}
	replace := func(how, from, to string) {
		if b := bytes.ReplaceAll(sound, []byte(from), []byte(to)); !bytes.Equal(b, sound) {
			add(how, b)
		}
	}
	replace("streams without end", "endstream", "endstre")
	replace("objects without end", "endobj", "enobj")
	replace("huge lengths", "/Length ", "/Length 99999999")
	replace("negative lengths", "/Length ", "/Length -")
	replace("no lengths", "/Length", "/Lengxh")
	replace("another root", "/Root 1", "/Root 2")
	replace("pages that are their own parent", "/Kids [", "/Kids [2 0 R ")
	replace("no catalog", "/Catalog", "/Catalxg")
	replace("another header", "%PDF-1.", "%PDF-9.")
	replace("no filter of that name", "FlateDecode", "FlateDecodx")
	if i := bytes.LastIndex(sound, []byte("startxref")); i > 0 {
		add("a cross-reference table at 0", append(bytes.Clone(sound[:i]), "startxref\n0\n%%EOF"...))
		add("a cross-reference table far out", append(bytes.Clone(sound[:i]), "startxref\n999999999999\n%%EOF"...))
	}
	return out
}

func bomb(n int) string {
	var b bytes.Buffer
	z := zlib.NewWriter(&b)
	zeros := make([]byte, 1<<20)
	for range n {
		_, _ = z.Write(zeros)
	}
	_ = z.Close()
	return b.String()
}

// traps are PDFs built to hang or burst a reader.
func traps() []broken {
	page := []pdftest.Page{{Content: "/X1 Do BT /F1 10 Tf 72 700 Td (12.4) Tj ET"}}
	x := map[string]string{"X1": "5 0 R"}
	form := func(body string) string {
		return pdftest.Stream("/Type /XObject /Subtype /Form /BBox [0 0 600 800] /Resources 3 0 R", body)
	}
	doc := func(d pdftest.Doc) []byte { return d.Bytes() }
	loop := func(prev string) []byte {
		b := doc(pdftest.Doc{Pages: page})
		at := bytes.LastIndex(b, []byte("xref\n0"))
		return bytes.Replace(b, []byte("/Root"), []byte(fmt.Sprintf("/Prev %s /Root", strings.ReplaceAll(prev, "HERE", fmt.Sprint(at)))), 1)
	}
	return []broken{
		{"form inside itself", doc(pdftest.Doc{Pages: page, XObjects: x, Objects: []string{form("/X1 Do /X1 Do")}})},
		{"forms inside each other", doc(pdftest.Doc{Pages: page, XObjects: map[string]string{"X1": "5 0 R", "X2": "6 0 R"}, Objects: []string{form(strings.Repeat("/X2 Do ", 20)), form(strings.Repeat("/X1 Do ", 20))}})},
		{"deep arrays", doc(pdftest.Doc{Pages: []pdftest.Page{{Content: strings.Repeat("[", 500_000)}}})},
		{"deep dictionaries in an object", doc(pdftest.Doc{Pages: page, Objects: []string{strings.Repeat("<< /A ", 100_000)}, XObjects: x})},
		{"deep states", doc(pdftest.Doc{Pages: []pdftest.Page{{Content: strings.Repeat("q ", 500_000)}}})},
		{"a million operators", doc(pdftest.Doc{Pages: []pdftest.Page{{Content: strings.Repeat("0 0 m 1 1 l S ", 300_000)}}})},
		{"a stream that inflates to 300 MB", doc(pdftest.Doc{Pages: page, XObjects: x, Objects: []string{
			pdftest.Stream("/Type /XObject /Subtype /Form /BBox [0 0 9 9] /Filter /FlateDecode", bomb(300))}})},
		{"many streams that inflate", doc(pdftest.Doc{Pages: []pdftest.Page{{Content: strings.Repeat("/X1 Do /X2 Do ", 5)}},
			XObjects: map[string]string{"X1": "5 0 R", "X2": "6 0 R"}, Objects: []string{
				pdftest.Stream("/Type /XObject /Subtype /Form /BBox [0 0 9 9] /Filter /FlateDecode", bomb(40)),
				pdftest.Stream("/Type /XObject /Subtype /Form /BBox [0 0 9 9] /Filter /FlateDecode", bomb(40))}})},
		{"a cross-reference table before itself", loop("HERE")},
		{"an earlier table that is none", loop("17")},
		{"two thousand million objects", bytes.Replace(doc(pdftest.Doc{Pages: page}), []byte("xref\n0 "), []byte("xref\n2000000000 "), 1)},
		{"a length that is its own object", doc(pdftest.Doc{Pages: page, XObjects: x, Objects: []string{"<< /Type /XObject /Subtype /Form /Length 5 0 R >>\nstream\nq Q\nendstream"}})},
		{"widths without end", doc(pdftest.Doc{Pages: []pdftest.Page{{Content: "BT /F2 10 Tf <0001> Tj ET"}}, Fonts: map[string]string{
			"F2": "<< /Type /Font /Subtype /Type0 /Encoding /Identity-H /DescendantFonts [<< /Subtype /CIDFontType2 /W [0 4294967295 500] >>] >>"}})},
		{"a map of all codes", doc(pdftest.Doc{Pages: []pdftest.Page{{Content: "BT /F2 10 Tf <0001> Tj ET"}}, Fonts: map[string]string{
			"F2": "<< /Type /Font /Subtype /Type0 /Encoding /Identity-H /ToUnicode 5 0 R /DescendantFonts [<< /Subtype /CIDFontType2 >>] >>"},
			Objects: []string{pdftest.Stream("", strings.Repeat("1 beginbfrange <00000000> <FFFFFFFF> <0041> endbfrange ", 1000))}})},
		{"a page of half a million glyphs", doc(pdftest.Doc{Pages: []pdftest.Page{{Content: "BT /F1 1 Tf 10 10 Td (" + strings.Repeat("1", 500_000) + ") Tj ET"}}})},
		{"a page as large as a field", doc(pdftest.Doc{Pages: []pdftest.Page{{Content: "BT /F1 10 Tf 1 0 0 1 1e30 99999999999999999999 Tm (1) Tj ET", MediaBox: "[-1e30 -1e30 1e30 1e30]"}}})},
	}
}

// limit is what a worker may take without a sign of life, with room for a
// machine under load.
const (
	limit = 60 * time.Second
	slow  = 5 * time.Second
)

func TestBroken(t *testing.T) {
	all := traps()
	all = append(all, mutants((&pdftest.Doc{Pages: append(lines("12.4 kg (1.3)"), lines("n = 42")...)}).Bytes(), "made")...)
	demos, _ := filepath.Glob("../../testdata/papers/*.pdf")
	for _, d := range demos {
		b, err := os.ReadFile(d)
		if err != nil {
			t.Fatal(err)
		}
		m := mutants(b, filepath.Base(d))
		if testing.Short() {
			m = m[:3]
		}
		all = append(all, m...)
	}
	if len(all) < 40 {
		t.Fatalf("only %d broken files", len(all))
	}
	read, refused := 0, 0
	for _, b := range all {
		begun := time.Now()
		done := make(chan error, 1)
		go func() {
			g, err := Read(b.content, Options{})
			if err == nil && len(g.Pages) == 0 {
				err = fmt.Errorf("no pages and no error")
				t.Errorf("%s: %v", b.name, err)
			}
			done <- err
		}()
		select {
		case err := <-done:
			if d := time.Since(begun); d > slow {
				t.Logf("%s: took %v", b.name, d)
			}
			if err != nil {
				refused++
				if err.Error() == "" {
					t.Errorf("%s: an error without a word", b.name)
				}
			} else {
				read++
			}
		case <-time.After(limit):
			t.Fatalf("%s: still reading after %v", b.name, limit)
		}
	}
	t.Logf("%d broken files: %d read in part or whole, %d refused with a reason", len(all), read, refused)
}
