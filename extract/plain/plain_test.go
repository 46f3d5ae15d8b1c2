package plain

import (
	"bytes"
	"flag"
	"fmt"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf16"

	"golang.org/x/text/encoding/charmap"

	"halfspan/extract/paper"
	"halfspan/extract/readtest"
)

var update = flag.Bool("update", false, "write the expected outputs")

var caseFiles = []string{"text.txt", "tabs.txt", "other.txt"}

func TestCases(t *testing.T) {
	for _, name := range caseFiles {
		t.Run(name, func(t *testing.T) {
			readtest.Run(t, filepath.Join("testdata", name), *update, func(t testing.TB, s string) string {
				d, err := Read("paper.txt", []byte(s))
				if err != nil {
					return "error " + err.Error()
				}
				readtest.CheckPlaces(t, d, func(i int) byte { return s[i] })
				readtest.CheckTables(t, d)
				return readtest.Dump(d)
			})
		})
	}
}

const sample = "Results\n\nIn naïve colonies mass was 12.4 ± 1.3 kg – 24.1 “min”.\n\nTable 1. Mass\n\nArm\tMass, µg\nSyrup\t12.4 ± 1.3\nWater\t11.1 ± 1.2\n"

// The same text in several encodings gives the same document, and each digit's
// place is right in each.
func TestEncodings(t *testing.T) {
	var le, be []byte
	for _, u := range utf16.Encode([]rune(sample)) {
		le = append(le, byte(u), byte(u>>8))
		be = append(be, byte(u>>8), byte(u))
	}
	windows, err := charmap.Windows1252.NewEncoder().Bytes([]byte(sample))
	if err != nil {
		t.Fatal(err)
	}
	want, err := Read("a.txt", []byte(sample))
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name    string
		content []byte
		digit   int // where the digit stands in its code unit
	}{
		{"UTF-8 with mark", append([]byte("\xEF\xBB\xBF"), sample...), 0},
		{"line ends of another system", []byte(strings.ReplaceAll(sample, "\n", "\r\n")), 0},
		{"line ends of an old system", []byte(strings.ReplaceAll(sample, "\n", "\r")), 0},
		{"UTF-16LE", append([]byte{0xFF, 0xFE}, le...), 0},
		{"UTF-16LE without mark", le, 0},
		{"UTF-16BE", append([]byte{0xFE, 0xFF}, be...), 1},
		{"windows-1252", windows, 0},
	} {
		t.Run(c.name, func(t *testing.T) {
			got, err := Read("a.txt", c.content)
			if err != nil {
				t.Fatal(err)
			}
			readtest.CheckPlaces(t, got, func(i int) byte { return c.content[i+c.digit] })
			if c.name == "windows-1252" && (len(got.Problems) != 1 || got.Problems[0].Kind != "encoding-guessed") {
				t.Errorf("a guessed encoding is not said: %v", got.Problems)
			}
			got.Problems = nil
			if g, w := readtest.Dump(got), readtest.Dump(want); g != w {
				t.Errorf("got\n%s\nwant\n%s", g, w)
			}
		})
	}
}

func TestRefusals(t *testing.T) {
	for _, c := range []struct {
		name    string
		content []byte
		want    string
	}{
		{"empty", nil, "bad.txt: the file is empty"},
		{"blank", []byte(" \n\t\n\n"), "bad.txt: the file holds no text"},
		{"binary", []byte("PK\x03\x04\x14\x00\x08\x00 some bytes"), "bad.txt: this is neither a PDF nor article XML nor text (it holds binary data)"},
		{"control characters", bytes.Repeat([]byte("a\x01\x02b"), 50), "bad.txt: this is neither a PDF nor article XML nor text (it holds binary data)"},
	} {
		t.Run(c.name, func(t *testing.T) {
			if _, err := Read("bad.txt", c.content); err == nil || err.Error() != c.want {
				t.Errorf("got  %v\nwant %s", err, c.want)
			}
		})
	}
	_, err := Read("big.txt", make([]byte, 200<<20))
	if want := "big.txt: 200 MB of text; a paper has less than one, and files above 32 MB are not read: is this the right file?"; err == nil || err.Error() != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
}

// A few zero bytes in a long text are read as spaces, and said.
func TestStrayZeros(t *testing.T) {
	content := []byte(strings.Repeat("Mass was 12.4 kg at night. ", 100) + "\x00and 11.1 kg")
	d, err := Read("a.txt", content)
	if err != nil {
		t.Fatal(err)
	}
	if len(d.Problems) != 1 || d.Problems[0].Kind != "bad-characters" || !strings.HasSuffix(d.Blocks[0].Text.S, "night. and 11.1 kg") {
		t.Errorf("%v %q", d.Problems, d.Blocks[0].Text.S)
	}
}

// Too many lines are cut, and said.
func TestCutShort(t *testing.T) {
	d, err := Read("long.txt", bytes.Repeat([]byte("Mass was 12.4 kg.\n\n"), maxLines/2+100))
	if err != nil {
		t.Fatal(err)
	}
	if len(d.Problems) != 1 || d.Problems[0].Kind != "cut-short" || !d.Problems[0].Lost {
		t.Errorf("problems: %v", d.Problems)
	}
	if len(d.Blocks) > maxLines {
		t.Errorf("%d blocks", len(d.Blocks))
	}
}

// Pages are counted by form feeds, kept with the block, and never make a place
// look like one on a page of a PDF.
func TestPages(t *testing.T) {
	d, err := Read("a.txt", []byte("Results\n\nMass was 12.4 kg.\n\fFlight took 24 min.\n"))
	if err != nil {
		t.Fatal(err)
	}
	last := d.Blocks[len(d.Blocks)-1]
	if last.Page != 2 || last.Text.At(0).Page != 0 || last.Text.At(0).Offset != 28 {
		t.Errorf("page %d, place %+v", last.Page, last.Text.At(0))
	}
}

// Inputs that blow up careless readers take no long time: rows of many cells
// under many heads, thousands of captions, of tabs, of hyphens.
func TestBlowUps(t *testing.T) {
	wide := "Table 1. Wide\n\n" + strings.Repeat("a\t", 60) + "\n" + strings.Repeat("b\t", 90) + "\n" + strings.Repeat("c\t", 100) + "\n" + strings.Repeat(strings.Repeat("1.2\t", 110)+"\n", 50)
	for name, s := range map[string]string{
		"heads":    wide,
		"captions": strings.Repeat("Table 1. Mass\n", 20_000),
		"tabs":     strings.Repeat("\t", 200_000) + "1\n" + strings.Repeat("1\t2\n", 20_000),
		"hyphens":  strings.Repeat("mass-\n", 50_000),
		"spaces":   strings.Repeat("a  1.2  b\n", 20_000),
		"pipes":    strings.Repeat("|1.2|3|\n", 20_000),
		"marks":    "Table 1. x\n\na\t1.2\nb\t1.3\n\n" + strings.Repeat("a b; c ", 20_000),
		"letters":  strings.Repeat("x", 1<<20),
	} {
		t.Run(name, func(t *testing.T) {
			d, err := Read("blow.txt", []byte(s))
			if err != nil {
				t.Fatal(err)
			}
			readtest.CheckTables(t, d)
		})
	}
}

// A table's reconstruction: rows as a person copies them from a page, spans
// known, must come back. Property: tables made at random, written out as text,
// read again.
func TestSpansComeBack(t *testing.T) {
	for groups := 1; groups <= 4; groups++ {
		for width := 2; width <= 4; width++ {
			for _, p := range []bool{false, true} {
				name := fmt.Sprintf("%d groups of %d, p %v", groups, width, p)
				subs := []string{"Mean", "SD", "n", "95% CI"}[:width]
				values := []string{"12.4", "1.3", "42", "0.92 to 2.76"}[:width]
				head, sub, row := "Outcome", "", ""
				for g := range groups {
					head += fmt.Sprintf("\tArm %c", 'A'+g)
					for k := range subs {
						sub += subs[k] + "\t"
						row += "\t" + values[k]
					}
				}
				sub = strings.TrimSuffix(sub, "\t")
				if p {
					head, row = head+"\tp value", row+"\t0.03"
				}
				text := "Table 1. Test\n\n" + head + "\n" + sub + "\nMass" + row + "\nFlight" + row + "\n"
				d, err := Read("a.txt", []byte(text))
				if err != nil {
					t.Fatal(err)
				}
				tab := d.Blocks[0].Table
				if tab == nil || tab.HeadRows != 2 {
					t.Errorf("%s: not read as a table with two heading rows", name)
					continue
				}
				grid := tab.Grid()
				for g := range groups {
					for k := range width {
						c := grid[0][1+g*width+k]
						if c == nil || c.Text.S != fmt.Sprintf("Arm %c", 'A'+g) {
							t.Errorf("%s: column %d stands under %v", name, 1+g*width+k, c)
						}
					}
				}
				if last := grid[1][tab.Cols-1]; p && (last == nil || last.Text.S != "p value") {
					t.Errorf("%s: the p value's heading does not reach down", name)
				}
			}
		}
	}
}

func TestTableText(t *testing.T) {
	d, err := Read("a.txt", []byte("Table 1. Mass\n\nArm\tMass\nSyrup\t12.4\nWater\t11.1\n"))
	if err != nil {
		t.Fatal(err)
	}
	tab := d.Blocks[0].Table
	c := tab.Grid()[1][1]
	if c.Text.S != "12.4" || c.Text.At(0) != (paper.Place{Offset: 30}) {
		t.Errorf("%q at %+v", c.Text.S, c.Text.At(0))
	}
}
