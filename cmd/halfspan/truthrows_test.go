package main

import (
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"sort"
	"testing"

	"halfspan/convert"
	"halfspan/convert/working"
	"halfspan/extract"
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// realPapers is where real papers to measure with lie, beside the project.
const realPapers = "../../../shared/papers"

var truthRows = flag.Bool("truth", false, "compare rows that print both an SD and an interval, over all papers: minutes")

// agreement counts how the SD worked out without the printed one compares with it.
type agreement struct {
	rows, meets, close, converted, convertedMeets int
	papers                                        map[string]bool
}

// TestTruthRows needs no labels: where a paper prints an SD and, of the same mean, an
// interval or an SE, the printed SD is the truth. It is hidden, the SD is worked out
// from the other, and the two are compared, by what the row says.
func TestTruthRows(t *testing.T) {
	if !*truthRows {
		t.Skip("reads many papers: make truth")
	}
	var files []string
	for _, dir := range []string{"labelled/xml", "more/xml"} {
		found, err := filepath.Glob(filepath.Join(realPapers, dir, "*.*xml"))
		if err != nil {
			t.Fatal(err)
		}
		files = append(files, found...)
	}
	if len(files) == 0 {
		t.Skipf("no real papers at %s: nothing to compare with", realPapers)
	}
	table := map[string]*agreement{}
	for _, path := range files {
		content, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		doc, err := extract.Read(path, content, extract.Options{})
		if err != nil {
			continue
		}
		for _, pair := range sdBeside(extract.Find(doc)) {
			compareTruth(table, filepath.Base(path), pair[0], pair[1])
		}
	}
	names := make([]string, 0, len(table))
	for name := range table {
		names = append(names, name)
	}
	sort.Strings(names)
	t.Logf("%-110s %6s %6s %10s %10s %10s %14s", "what the row says", "rows", "papers", "in range", "within 5%", "converted", "of them right")
	for _, name := range names {
		a := table[name]
		t.Logf("%-110s %6d %6d %10d %10d %10d %14d", name, a.rows, len(a.papers), a.meets, a.close, a.converted, a.convertedMeets)
	}
}

// sdBeside finds pairs of results of one mean, of which the first prints an SD and
// the second an interval or an SE.
func sdBeside(results []result.Result) [][2]result.Result {
	estimateAt := func(r *result.Result) paper.Place {
		i := slices.IndexFunc(r.Sources, func(s result.Source) bool { return s.Field == "estimate" })
		if i < 0 {
			return paper.Place{}
		}
		return r.Sources[i].Place
	}
	var pairs [][2]result.Result
	for i := range results {
		a := &results[i]
		if a.GivenAs != result.SD || a.Statistic != result.Mean && a.Statistic != result.MeanChange {
			continue
		}
		for k := range results {
			b := &results[k]
			same := slices.Contains(a.Mates, k) || estimateAt(a) != (paper.Place{}) && estimateAt(a) == estimateAt(b)
			if same && k != i && a.Estimate == b.Estimate && (b.GivenAs == result.CI || b.GivenAs == result.SE) {
				pairs = append(pairs, [2]result.Result{*a, *b})
			}
		}
	}
	return pairs
}

func compareTruth(table map[string]*agreement, name string, printed, other result.Result) {
	sd, err := convert.ReadPrinted(printed.GivenValue)
	n := max(other.N, printed.N)
	if err != nil || sd.Value <= 0 || n < 2 {
		return
	}
	other.Mates, other.N = nil, n
	as := working.Work(working.Facts{Path: name}, []result.Result{other})[0].Record
	says := "raw"
	switch {
	case other.Adjusted == "yes" || printed.Adjusted == "yes":
		says = "adjusted"
	case len(other.Evidence.Model) > 0:
		says = "model"
	case other.Adjusted == "unclear":
		says = "unclear"
	}
	key := fmt.Sprintf("%s, %s", other.GivenAs, says)
	if as.Use == "withheld" {
		key += "; " + as.Reason
	}
	a := table[key]
	if a == nil {
		a = &agreement{papers: map[string]bool{}}
		table[key] = a
	}
	a.rows++
	a.papers[name] = true
	value, span := impliedSD(other)
	meets := value > 0 && span.Meets(convert.Range{Low: sd.Low(), High: sd.High()})
	if meets {
		a.meets++
	}
	if value > 0 && math.Abs(value/sd.Value-1) <= 0.05 {
		a.close++
	}
	if as.Use == "converted" {
		a.converted++
		if meets {
			a.convertedMeets++
		}
	}
}

// impliedSD is the SD by SE·√n, whether or not that is legitimate here.
func impliedSD(r result.Result) (float64, convert.Range) {
	root := math.Sqrt(float64(r.N))
	if r.GivenAs == result.SE {
		se, err := convert.ReadPrinted(r.GivenValue)
		if err != nil || se.Value <= 0 {
			return 0, convert.Range{}
		}
		return se.Value * root, convert.Range{Low: se.Low(), High: se.High()}.Times(root)
	}
	low, err1 := convert.ReadPrinted(r.Lower)
	high, err2 := convert.ReadPrinted(r.Upper)
	if err1 != nil || err2 != nil || r.Level == 0 {
		return 0, convert.Range{}
	}
	t, err := convert.TwoSided(r.Level, float64(r.N-1))
	m, err2 := convert.Margin(low, high, nil, convert.Raw)
	if err != nil || err2 != nil {
		return 0, convert.Range{}
	}
	// By t or by z: a range that misses one may meet the other.
	z, _ := convert.TwoSided(r.Level, convert.Normal)
	return (m.Low + m.High) / 2 * root / t, m.Times(root / t).Union(m.Times(root / z))
}
