package jats

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf16"

	"golang.org/x/text/encoding/charmap"

	"halfspan/extract/paper"
	"halfspan/extract/readtest"
)

var update = flag.Bool("update", false, "write the expected outputs")

// article wraps what stands in a case: a whole file, or the body of one.
func article(s string) []byte {
	if strings.HasPrefix(s, "<?xml") || strings.HasPrefix(s, "<!DOCTYPE") || strings.HasPrefix(s, "<article") {
		return []byte(s)
	}
	return []byte("<article xmlns:xlink=\"http://www.w3.org/1999/xlink\" xmlns:mml=\"http://www.w3.org/1998/Math/MathML\">\n<body>" + s + "</body></article>\n")
}

func TestCases(t *testing.T) {
	for _, name := range []string{"text.txt", "tables.txt"} {
		t.Run(name, func(t *testing.T) {
			readtest.Run(t, filepath.Join("testdata", name), *update, func(t testing.TB, s string) string {
				content := article(s)
				d, err := Read("paper.xml", content)
				if err != nil {
					return "error " + err.Error()
				}
				readtest.CheckPlaces(t, d, func(i int) byte { return content[i] })
				readtest.CheckTables(t, d)
				return readtest.Dump(d)
			})
		})
	}
}

const sample = `<article><front><article-meta><title-group><article-title>Syrup for colonies – a trial</article-title></title-group>
<abstract><p>Mass was 12.4 ± 1.3 kg (n = 42), naïve colonies 11.1 ± 1.2 kg.</p></abstract></article-meta></front>
<body><sec><title>Results</title><table-wrap><label>Table 1</label><table><tbody>
<tr><td>é 24.5 (5.1)</td><td>“19.25”</td></tr></tbody></table></table-wrap></sec></body></article>`

// The same article in several encodings gives the same text, and each digit's
// place is right in each.
func TestEncodings(t *testing.T) {
	utf16le := func(s string) []byte {
		b := []byte{0xFF, 0xFE}
		for _, u := range utf16.Encode([]rune(s)) {
			b = append(b, byte(u), byte(u>>8))
		}
		return b
	}
	utf16be := func(s string) []byte {
		b := []byte{0xFE, 0xFF}
		for _, u := range utf16.Encode([]rune(s)) {
			b = append(b, byte(u>>8), byte(u))
		}
		return b
	}
	windows, err := charmap.Windows1252.NewEncoder().Bytes([]byte(sample))
	if err != nil {
		t.Fatal(err)
	}
	want, err := Read("a.xml", []byte(sample))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name    string
		content []byte
		digit   int // where the digit stands in its code unit
	}{
		{"UTF-8 with mark", append([]byte("\xEF\xBB\xBF"), sample...), 0},
		{"UTF-8 declared", append([]byte(`<?xml version="1.0" encoding="UTF-8"?>`), sample...), 0},
		{"XML 1.1", append([]byte(`<?xml version="1.1"?>`), sample...), 0},
		{"UTF-16LE", utf16le(`<?xml version="1.0" encoding="UTF-16"?>` + sample), 0},
		{"UTF-16BE", utf16be(sample), 1},
		{"windows-1252 declared", append([]byte(`<?xml version="1.0" encoding="windows-1252"?>`), windows...), 0},
		{"windows-1252 declared as ISO-8859-1", append([]byte(`<?xml version="1.0" encoding="ISO-8859-1"?>`), windows...), 0},
		{"windows-1252 undeclared", windows, 0},
	} {
		t.Run(c.name, func(t *testing.T) {
			if !Is(c.content) {
				t.Error("not taken for article XML")
			}
			got, err := Read("a.xml", c.content)
			if err != nil {
				t.Fatal(err)
			}
			readtest.CheckPlaces(t, got, func(i int) byte { return c.content[i+c.digit] })
			got.Problems = nil
			if g, w := readtest.Dump(got), readtest.Dump(want); g != w {
				t.Errorf("got\n%s\nwant\n%s", g, w)
			}
		})
	}
}

func TestRefusals(t *testing.T) {
	deep := strings.Repeat("<sec>", 5000) + strings.Repeat("</sec>", 5000)
	for _, c := range []struct{ name, content, want string }{
		{"not closed", "<article><body>\n<p>12.4</body></article>", "bad.xml: line 2: the XML is not well-formed: element <p> closed by </body>; download the file again or mend this line"},
		{"cut off", "<article>\n<body>\n<p>12.4", "bad.xml: line 3: the XML is not well-formed: unexpected EOF; download the file again or mend this line"},
		{"no article", "<book><p>12.4</p></book>", "bad.xml: not article XML: it holds no <article> element, so it is no article in JATS form; get the article XML or the PDF"},
		{"too deep", "<article>" + deep + "</article>", "bad.xml: line 1: elements nested more than 256 deep; this is no article"},
		{"unknown entity", "<article><body>\n\n<p>&honeycomb;</p></body></article>", "bad.xml: line 3: the XML is not well-formed: invalid character entity &honeycomb;; download the file again or mend this line"},
		{"entities of entities", "<!DOCTYPE article [<!ENTITY a \"&b;&b;\"><!ENTITY b \"bee\">]>\n<article><body><p>&b;</p><p>&a;</p></body></article>", "bad.xml: line 2: the XML is not well-formed: invalid character entity &a;; download the file again or mend this line"},
		{"external entity", "<!DOCTYPE article [<!ENTITY x SYSTEM \"file:///etc/hostname\">]>\n<article><body><p>&x;</p></body></article>", "bad.xml: line 2: the XML is not well-formed: invalid character entity &x;; download the file again or mend this line"},
	} {
		t.Run(c.name, func(t *testing.T) {
			d, err := Read("bad.xml", []byte(c.content))
			if err == nil {
				t.Fatalf("read as\n%s", readtest.Dump(d))
			}
			if err.Error() != c.want {
				t.Errorf("got  %s\nwant %s", err, c.want)
			}
		})
	}
	if _, err := Read("big.xml", make([]byte, maxBytes+1)); err == nil || !strings.Contains(err.Error(), "64 MB") {
		t.Errorf("a file above the limit: %v", err)
	}
}

// A table may be huge or its spans absurd: it is cut, and said.
func TestTableFuel(t *testing.T) {
	var b strings.Builder
	b.WriteString("<table-wrap><label>Table 1</label><table><tbody>")
	for i := range 3000 {
		fmt.Fprintf(&b, `<tr><td>row %d</td><td colspan="100000" rowspan="100000">%d</td></tr>`, i, i)
	}
	b.WriteString("</tbody></table></table-wrap>")
	d, err := Read("wide.xml", article(b.String()))
	if err != nil {
		t.Fatal(err)
	}
	readtest.CheckTables(t, d)
	for _, bl := range d.Blocks {
		if bl.Kind == paper.TableBlock && bl.Table.Rows*bl.Table.Cols > 2*maxCells {
			t.Errorf("a grid of %d by %d was kept", bl.Table.Rows, bl.Table.Cols)
		}
	}
}

func TestIs(t *testing.T) {
	for content, want := range map[string]bool{
		"<article><body/></article>":                         true,
		"\n<!-- x -->\n<nlm:article xmlns:nlm='u'/>":         true,
		"<!DOCTYPE article [ ]>\n<article article-type='x'>": true,
		"<html><body>article</body></html>":                  false,
		"The article <article> of the text":                  false,
		"%PDF-1.7 <article>":                                 false,
		"":                                                   false,
	} {
		if got := Is([]byte(content)); got != want {
			t.Errorf("%q: %v", content, got)
		}
	}
}

// realPapers lists the XML files of the folder of real papers; the test is
// skipped where it is absent.
func realPapers(t testing.TB) []string {
	var all []string
	for _, dir := range []string{"labelled/xml", "more/xml"} {
		files, err := filepath.Glob(filepath.Join("../../../shared/papers", dir, "*.xml"))
		if err != nil {
			t.Fatal(err)
		}
		all = append(all, files...)
	}
	if len(all) == 0 {
		t.Skip("the folder of real papers is not here: ../shared/papers")
	}
	return all
}

// Every real paper is read, with sound tables and right places.
func TestRealPapers(t *testing.T) {
	for _, path := range realPapers(t) {
		content, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		d, err := Read(filepath.Base(path), content)
		if err != nil {
			t.Error(err)
			continue
		}
		readtest.CheckPlaces(t, d, func(i int) byte { return content[i] })
		readtest.CheckTables(t, d)
		zones := map[paper.Zone]int{}
		for _, b := range d.Blocks {
			zones[b.Zone]++
		}
		const letter = 20 // blocks; a letter or a correction has no sections
		if len(d.Blocks) > letter && zones[paper.Results]+zones[paper.Methods]+zones[paper.Abstract] == 0 {
			t.Errorf("%s: no zone was told: %v", path, zones)
		}
	}
}
