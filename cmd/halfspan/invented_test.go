package main

import (
	"fmt"
	"html"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
)

const number = `(\d+(?:\.\d+)?)`

var (
	// valueGroup is an estimate with its spread: "12.4 ± 1.3", "4 (9.5)", "1.3 (0.8 to 1.8)".
	valueGroup = regexp.MustCompile(number + `\s*%?[*†‡§^{}a-z]{0,5}\s*(?:±\s*` + number +
		`|[(\[]\s*(?:95\s*%\s*CI|SD|SE)?[:,\s]*-?` + number + `\s*%?(?:\s*(?:,|;|to|–|-|—|/)\s*-?\s*` + number + `)?\s*%?\s*[)\]])`)
	anyNumber  = regexp.MustCompile(number)
	realPart   = regexp.MustCompile(`(?s)<tr[\s>].*?</tr>|<p[\s>].*?</p>`)
	references = regexp.MustCompile(`(?s)<ref-list.*?</ref-list>`)
	nestedPart = regexp.MustCompile(`(?s)^.*<p[\s>]`)
	cellEnd    = regexp.MustCompile(`</t[dh]>`)
	tag        = regexp.MustCompile(`<[^>]*>`)
	sentence   = regexp.MustCompile(`[.;!?]\s+(?:[A-Z]|$)`)
	plainSigns = strings.NewReplacer("·", ".", "−", "-", "\u00a0", " ", "\u2009", " ", "\u202f", " ", "\u2002", " ", "⁎", "")
)

// groupsOf gives the value groups of a line as printed, without signs.
func groupsOf(line string) []string {
	var all []string
	for _, m := range valueGroup.FindAllStringSubmatch(plainSigns.Replace(line), -1) {
		all = append(all, strings.Join(strings.Fields(strings.Join(m[1:], " ")), " "))
	}
	return all
}

func digitsIn(s string) int {
	return len(s) - strings.Count(s, " ") - strings.Count(s, ".")
}

// runsOf gives every five numbers that follow each other in a line, where they
// are long enough not to be alike by chance: the mean and the SD of a group may
// stand in columns of their own.
func runsOf(line string) []string {
	const run, leastDigits, leastPoints = 5, 12, 3
	all := anyNumber.FindAllString(plainSigns.Replace(line), -1)
	var runs []string
	for ; len(all) >= run; all = all[1:] {
		s := strings.Join(all[:run], " ")
		if digitsIn(s) >= leastDigits && strings.Count(s, ".") >= leastPoints {
			runs = append(runs, s)
		}
	}
	return runs
}

// triplesOf gives every three decimals that follow each other in a line: an
// estimate and its bounds, in columns of their own or not.
func triplesOf(line string) []string {
	all := anyNumber.FindAllString(plainSigns.Replace(line), -1)
	var triples []string
	for ; len(all) >= 3; all = all[1:] {
		s := strings.Join(all[:3], " ")
		if strings.Count(s, ".") == 3 && digitsIn(s) >= 7 && all[0] != all[1] && all[1] != all[2] {
			triples = append(triples, s)
		}
	}
	return triples
}

// realRow is a row of a table or a sentence of a real paper.
type realRow struct {
	paper, text string
	groups      []string
}

// realRows holds the rows by what stands in them.
type realRows struct {
	rows  []realRow
	group map[string][]int // rows of a value group, in order
	run   map[string]int
	three map[string][]string // papers that print a triple
}

func (r *realRows) add(paper, text string) {
	for _, s := range triplesOf(text) {
		if !slices.Contains(r.three[s], paper) {
			r.three[s] = append(r.three[s], paper)
		}
	}
	k := len(r.rows)
	groups := groupsOf(text)
	runs := runsOf(text)
	if len(groups) < 2 && len(runs) == 0 {
		return
	}
	r.rows = append(r.rows, realRow{paper, text, groups})
	for _, s := range runs {
		r.run[s] = k
	}
	for _, g := range groups {
		if at := r.group[g]; len(at) == 0 || at[len(at)-1] != k {
			r.group[g] = append(at, k)
		}
	}
}

func newRealRows() *realRows {
	return &realRows{group: map[string][]int{}, run: map[string]int{}, three: map[string][]string{}}
}

// read takes the rows and sentences out of an article's XML.
func (r *realRows) read(paper, xml string) {
	xml = references.ReplaceAllString(xml, "")
	for _, part := range realPart.FindAllString(xml, -1) {
		pieces := []string{part}
		if strings.HasPrefix(part, "<p") {
			part = nestedPart.ReplaceAllString(part, "<p>")
			pieces = sentence.Split(html.UnescapeString(tag.ReplaceAllString(part, "")), -1)
		}
		for _, piece := range pieces {
			text := html.UnescapeString(tag.ReplaceAllString(cellEnd.ReplaceAllString(piece, " | "), ""))
			r.add(paper, strings.Join(strings.Fields(text), " "))
		}
	}
}

// inOrder gives the longest list of ours that stands in the same order in theirs.
func inOrder(ours, theirs []string) []string {
	best := make([][]string, len(theirs)+1)
	for _, g := range ours {
		for k, last := 0, []string(nil); k < len(theirs); k++ {
			above := best[k+1]
			switch {
			case theirs[k] == g:
				best[k+1] = append(slices.Clone(last), g)
			case len(best[k]) > len(best[k+1]):
				best[k+1] = best[k]
			}
			last = above
		}
	}
	return best[len(theirs)]
}

// tooMuch reports that a list of value groups is not shared by chance: two of at
// least five digits each, or any three.
func tooMuch(shared []string) bool {
	long := 0
	for _, g := range shared {
		if digitsIn(g) >= 5 {
			long++
		}
	}
	return long >= 2 || len(shared) >= 3
}

// shares says what a line has in common with a real row; "" for nothing that counts.
func (r *realRows) shares(line string) string {
	for _, s := range runsOf(line) {
		if k, ok := r.run[s]; ok {
			return fmt.Sprintf("%s stands in %s: %s", s, r.rows[k].paper, r.rows[k].text)
		}
	}
	groups := groupsOf(line)
	count := map[int]int{}
	for k, g := range groups {
		if slices.Contains(groups[:k], g) {
			continue
		}
		for _, row := range r.group[g] {
			if count[row]++; count[row] < 2 {
				continue
			}
			if shared := inOrder(groups, r.rows[row].groups); tooMuch(shared) {
				return fmt.Sprintf("%s stands in %s: %s", strings.Join(shared, ", "), r.rows[row].paper, r.rows[row].text)
			}
		}
	}
	return ""
}

// near finds three triples of one paper within a few lines; it gives the last
// line, counted from 0, and what they are, or -1.
func (r *realRows) near(lines []string) (int, string) {
	const window = 12
	seen := map[string]map[string]int{} // paper, triple, line
	for n, line := range lines {
		for _, s := range triplesOf(line) {
			for _, paper := range r.three[s] {
				if seen[paper] == nil {
					seen[paper] = map[string]int{}
				}
				seen[paper][s] = n
				var all []string
				for other, at := range seen[paper] {
					if n-at < window {
						all = append(all, other)
					}
				}
				if len(all) >= 3 {
					slices.Sort(all)
					return n, fmt.Sprintf("%s stand in %s", strings.Join(all, ", "), paper)
				}
			}
		}
	}
	return -1, ""
}

func TestShares(t *testing.T) {
	r := newRealRows()
	r.read("real", `<p>Intro.</p><table><tr><td>Reach, km</td><td>21.4 ± 3.7</td><td>88 (<italic>12.5</italic>)</td><td>1·93 (0·88–2·98)</td></tr>
<tr><td>2 (5.1)</td><td>3 (7.7)</td><td>9 (23)</td></tr><tr><td>7.31</td><td>2.26</td><td>7.84</td><td>2.09</td><td>0.118</td></tr></table>
<p>Reach was 15.6 (4.2) at dawn and 17.9 (4.8) at dusk. Rest was 13.3 (2.9).</p>`)
	for line, want := range map[string]bool{
		"| Mass | 21.4 (3.7) | 1.93 (0.88 to 2.98) |":         true,  // in another form
		"| Mass | 1.93 (0.88 to 2.98) | 21.4 (3.7) |":         false, // in another order
		"| Mass | 21.4 ± 3.7 | 88 (12.4) |":                   false,
		"| Mass | 88 (12.5) | 21.4 ± 3.7 | 1.93 (0.88–2.98)":  true,
		"| Dark | 2 (5.1) | 3 (7.7) |":                        false,
		"| Dark | 2 (5.1) | 3 (7.7) | 4 (8.1) | 9 (23) |":     true,
		"Mass\t7.31\t2.26\t7.84\t2.09\t0.118":                 true,
		"Mass\t7.31\t2.26\t7.84\t2.08\t0.118":                 false,
		"Mass was 15.6 ± 4.2 kg, and later 17.9 kg (SD 4.8).": true,
		"Mass was 15.6 ± 4.2 early and 17.9 (SD 4.8) late.":   true,
		"Mass was 17.9 ± 4.8 early and 13.3 ± 2.9 late.":      false, // two sentences
	} {
		if got := r.shares(line); got != "" != want {
			t.Errorf("%q: %q, want found %v", line, got, want)
		}
	}
}

func TestNear(t *testing.T) {
	r := newRealRows()
	r.read("real", `<table><tr><td>Reach</td><td>0.417</td><td>-0.13 to 0.96</td></tr><tr><td>Rest</td><td>0.288</td><td>-0.22 to 0.79</td></tr><tr><td>Load</td><td>1.305</td><td>0.84 to 1.77</td></tr></table>`)
	lines := []string{"| Mass | 1.305 | 0.84 to 1.77 |", "| Wax | 2.1 |", "=> 0.288 ci -0.22..0.79", "| Rest | 0.288 | 0.22 | 0.79 |", "| Comb | 0.417 (-0.13 to 0.96) |"}
	if n, found := r.near(lines); n != 4 {
		t.Errorf("line %d, %q, want 4", n, found)
	}
	if n, found := r.near(lines[:4]); n != -1 {
		t.Errorf("two triples: line %d, %q", n, found)
	}
}

// TestInvented holds that no line of the project has the numbers of a row of a
// table, or of a sentence, of a real paper. Who writes a case because of how a
// paper prints its results keeps the layout and makes up all the rest.
func TestInvented(t *testing.T) {
	r := newRealRows()
	for _, folder := range []string{"labelled", "more"} {
		files, err := filepath.Glob(filepath.Join(realPapers, folder, "xml", "*.xml"))
		if err != nil {
			t.Fatal(err)
		}
		for _, file := range files {
			xml, err := os.ReadFile(file)
			if err != nil {
				t.Fatal(err)
			}
			r.read(filepath.Base(file), string(xml))
		}
	}
	if len(r.rows) == 0 {
		t.Skip("the folder of real papers is not here: ../shared/papers")
	}
	root, lines := filepath.Join("..", ".."), 0
	err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if d.IsDir() {
			if strings.HasPrefix(d.Name(), ".") && path != root {
				return filepath.SkipDir
			}
			return nil
		}
		if !slices.Contains([]string{".go", ".txt", ".txtar", ".tsv", ".md", ".ms", ".html", ".xml", ".golden", ".R"}, filepath.Ext(path)) {
			return nil
		}
		text, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		all := strings.Split(string(text), "\n")
		for from := 0; from < len(all); {
			n, found := r.near(all[from:])
			if n < 0 {
				break
			}
			t.Errorf("%s:%d: make these numbers up: %s", filepath.ToSlash(path), from+n+1, found)
			from += n + 1
		}
		for n, line := range all {
			lines++
			if found := r.shares(line); found != "" {
				t.Errorf("%s:%d: make these numbers up: %s\n\t%s", filepath.ToSlash(path), n+1, found, strings.TrimSpace(line))
			}
		}
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
	if lines < 20000 {
		t.Errorf("only %d lines were read", lines)
	}
}
