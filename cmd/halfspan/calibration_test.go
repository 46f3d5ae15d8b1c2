package main

import (
	"encoding/json"
	"flag"
	"fmt"
	"maps"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"sort"
	"strings"
	"testing"

	"halfspan/convert/working"
	"halfspan/extract"
)

var calibrate = flag.Bool("calibrate", false, "how often readings of each rating are wholly right, over labelled papers: minutes")

// moreLabels names further sets to measure: FOLDER=LABELS, several parted by commas.
const moreLabels = "HALFSPAN_LABELS"

// scorer compares records with labels; what "wholly right" means stands there.
const scorer = "../../../shared/score/score.py"

// labelled is one folder of papers with the labels made for them by hand.
type labelled struct{ folder, labels string }

func labelledSets(t *testing.T) []labelled {
	t.Helper()
	var sets []labelled
	for _, form := range []string{"xml", "pdf", "print", "txt"} {
		if folder := filepath.Join(realPapers, "labelled", form); isFolder(folder) {
			sets = append(sets, labelled{folder, filepath.Join(realPapers, "labels")})
		}
	}
	for _, pair := range strings.Split(os.Getenv(moreLabels), ",") {
		if pair == "" {
			continue
		}
		folder, labels, ok := strings.Cut(pair, "=")
		if !ok || !isFolder(folder) || !isFolder(labels) {
			t.Fatalf("%s: %q is not FOLDER=LABELS with two folders that are there", moreLabels, pair)
		}
		sets = append(sets, labelled{folder, labels})
	}
	return sets
}

func isFolder(path string) bool {
	info, err := os.Stat(path)
	return err == nil && info.IsDir()
}

// tally counts the readings of one paper: of a rating, or of a rating and a class.
type tally struct{ right, of int }

// TestCalibration prints for each folder of labelled papers the share of readings that
// are wholly right, by rating and by class (SD copied, SD converted, other), with the
// interval from resampling papers: readings of one paper are right or wrong together,
// so that papers, not readings, are drawn. It measures; the figures are for people.
func TestCalibration(t *testing.T) {
	if !*calibrate {
		t.Skip("reads many papers: make calibrate")
	}
	python, err := exec.LookPath("python3")
	if err != nil {
		t.Skip("python3 is not here, and the scorer is written in it")
	}
	if _, err := os.Stat(scorer); err != nil {
		t.Skipf("the scorer is not at %s", scorer)
	}
	sets := labelledSets(t)
	if len(sets) == 0 {
		t.Skipf("no labelled papers at %s, and %s names none", realPapers, moreLabels)
	}
	for _, set := range sets {
		papers := scorePapers(t, python, set)
		if len(papers) == 0 {
			t.Errorf("%s: no paper has labels in %s", set.folder, set.labels)
			continue
		}
		printCalibration(t, set.folder, papers)
	}
}

// scorePapers reads every labelled paper of a folder and has it scored by itself.
func scorePapers(t *testing.T, python string, set labelled) []map[string]tally {
	t.Helper()
	files, err := filepath.Glob(filepath.Join(set.folder, "*"))
	if err != nil {
		t.Fatal(err)
	}
	sort.Strings(files)
	var papers []map[string]tally
	for _, path := range files {
		stem := strings.TrimSuffix(filepath.Base(path), filepath.Ext(path))
		if _, err := os.Stat(filepath.Join(set.labels, stem+".json")); err != nil {
			continue
		}
		out, err := exec.Command(python, scorer, writeRecords(t, path), set.labels, "--paper", stem, "--json").Output()
		if err != nil {
			t.Fatalf("scoring %s: %v", path, err)
		}
		var said map[string]json.RawMessage
		if err := json.Unmarshal(out, &said); err != nil {
			t.Fatalf("the scorer on %s: %v", path, err)
		}
		counts := map[string]tally{}
		for name, raw := range said {
			var pair [2]int
			if rest, ok := strings.CutPrefix(name, "reading "); ok && json.Unmarshal(raw, &pair) == nil {
				counts[rest] = tally{pair[0], pair[1]}
			}
		}
		papers = append(papers, counts)
	}
	return papers
}

// writeRecords reads a paper as scan does and writes its records to a file.
func writeRecords(t *testing.T, path string) string {
	t.Helper()
	content, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	name := filepath.Join(t.TempDir(), "records.jsonl")
	file, err := os.Create(name)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	doc, err := extract.Read(path, content, extract.Options{})
	if err != nil {
		t.Logf("%s cannot be read: %v", path, err)
		return name
	}
	e := json.NewEncoder(file)
	for _, w := range working.Work(working.FactsOf(doc), extract.Find(doc)) {
		if err := e.Encode(w.Record); err != nil {
			t.Fatal(err)
		}
	}
	return name
}

// leastOfClass is how many readings a class needs for a figure of its own to be held
// against the goal.
const leastOfClass = 50

func printCalibration(t *testing.T, folder string, papers []map[string]tally) {
	t.Helper()
	rows := map[string]bool{}
	all := 0
	for _, p := range papers {
		for name := range p {
			rows[name] = true
		}
		for _, rating := range []string{working.Clear, working.Look, working.Doubtful} {
			all += p[rating].of
		}
	}
	t.Logf("%s: %d papers", folder, len(papers))
	t.Logf("  %-20s %12s %7s %18s %s", "reading", "right/of", "share", "95% by papers", "goal")
	for _, name := range slices.Sorted(maps.Keys(rows)) {
		var sum tally
		for _, p := range papers {
			sum.right, sum.of = sum.right+p[name].right, sum.of+p[name].of
		}
		if sum.of == 0 {
			continue
		}
		low, high := resampled(papers, name)
		t.Logf("  %-20s %12s %7.3f %18s %s", name, fmt.Sprintf("%d/%d", sum.right, sum.of), share(sum), fmt.Sprintf("%.3f to %.3f", low, high), goalOf(name, sum, all))
	}
}

// goalOf says what is aimed at for a row, and whether it is reached.
func goalOf(name string, sum tally, all int) string {
	rating, class, _ := strings.Cut(name, " ")
	goal, ok := map[string]float64{working.Clear: 0.98, working.Look: 0.85}[rating]
	if !ok || class != "" && (rating != working.Clear || sum.of < leastOfClass) {
		return ""
	}
	reached := map[bool]string{true: "reached", false: "missed"}
	text := fmt.Sprintf("%.2f %s", goal, reached[share(sum) >= goal])
	if name == working.Clear {
		text += fmt.Sprintf("; %.0f%% of all, half %s", 100*float64(sum.of)/float64(all), reached[2*sum.of >= all])
	}
	return text
}

func share(c tally) float64 { return float64(c.right) / float64(c.of) }

// resampled is the interval of a share from drawing papers with replacement, by the
// percentiles of 4000 draws with a fixed seed. Draws without a reading do not count.
func resampled(papers []map[string]tally, name string) (low, high float64) {
	const draws = 4000
	r := rand.New(rand.NewPCG(2026, 12))
	var shares []float64
	for range draws {
		var sum tally
		for range papers {
			c := papers[r.IntN(len(papers))][name]
			sum.right, sum.of = sum.right+c.right, sum.of+c.of
		}
		if sum.of > 0 {
			shares = append(shares, share(sum))
		}
	}
	if len(shares) == 0 {
		return math.NaN(), math.NaN()
	}
	sort.Float64s(shares)
	at := func(q float64) float64 { return shares[int(math.Round(q*float64(len(shares)-1)))] }
	return at(0.025), at(0.975)
}

// The interval from resampling papers holds what it must: it is as wide as papers
// differ, not as their readings are many.
func TestResamplingDrawsPapers(t *testing.T) {
	alike := make([]map[string]tally, 20)
	apart := make([]map[string]tally, 20)
	for i := range alike {
		alike[i] = map[string]tally{"clear": {90, 100}}
		apart[i] = map[string]tally{"clear": {100 * (i % 2), 100}}
	}
	if low, high := resampled(alike, "clear"); low != 0.9 || high != 0.9 {
		t.Errorf("papers that are alike: %v to %v", low, high)
	}
	// 20 papers, half of them wholly right: the standard error of the share is √(0.25/20) = 0.11.
	if low, high := resampled(apart, "clear"); math.Abs(low-0.5+1.96*0.1118) > 0.06 || math.Abs(high-0.5-1.96*0.1118) > 0.06 {
		t.Errorf("papers that differ: %v to %v", low, high)
	}
	if low, _ := resampled(alike, "look"); !math.IsNaN(low) {
		t.Errorf("a rating that no reading has: %v", low)
	}
}
