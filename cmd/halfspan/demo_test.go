package main

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"sort"
	"strconv"
	"strings"
	"testing"

	"halfspan/convert/working"
)

// TestDemoPapers reads the invented papers of testdata and wants exactly what a
// person finds in them (testdata/papers/expected.tsv, written by hand from their
// sources): nothing less, nothing more, each with its n and use where only one
// answer is defensible.
func TestDemoPapers(t *testing.T) {
	dir := filepath.Join("..", "..", "testdata", "papers")
	want := readExpected(t, filepath.Join(dir, "expected.tsv"))
	var out, errs bytes.Buffer
	status := run([]string{"scan", "--jsonl", "--ledger", "", dir}, nil, &out, &errs)
	if status != statusPartial {
		t.Errorf("exit status %d, want %d: one paper is a picture of a page\n%s", status, statusPartial, &errs)
	}
	if !strings.Contains(errs.String(), "scanned-notes.pdf") {
		t.Errorf("the page without text is not named:\n%s", &errs)
	}
	got := map[string][]working.Record{}
	dec := json.NewDecoder(&out)
	for dec.More() {
		var r working.Record
		if err := dec.Decode(&r); err != nil {
			t.Fatal(err)
		}
		got[expectedKey(r)] = append(got[expectedKey(r)], r)
	}
	if len(want) < 100 {
		t.Fatalf("only %d expected results were read", len(want))
	}
	for _, w := range want {
		found := got[w.key]
		if len(found) == 0 {
			t.Errorf("missed: %s", w.key)
			continue
		}
		r := found[0]
		got[w.key] = found[1:]
		n := "-"
		if r.N != nil {
			n = strconv.Itoa(*r.N)
		}
		if w.n != "?" && n != w.n {
			t.Errorf("%s: n %s, want %s", w.key, n, w.n)
		}
		if w.use != "?" && r.Use != w.use {
			t.Errorf("%s: %s (%s), want %s", w.key, r.Use, r.Reason, w.use)
		}
	}
	var extra []string
	for key, records := range got {
		for range records {
			extra = append(extra, key)
		}
	}
	sort.Strings(extra)
	for _, key := range extra {
		t.Errorf("not in the papers: %s", key)
	}
}

type expected struct{ key, n, use string }

func readExpected(t *testing.T, path string) []expected {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comma, r.Comment, r.FieldsPerRecord = '\t', '#', 11
	rows, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []expected
	for _, row := range rows {
		out = append(out, expected{strings.Join(row[:9], " | "), row[9], row[10]})
	}
	return out
}

// expectedKey is a record in the columns of expected.tsv, without n and use.
func expectedKey(r working.Record) string {
	str := func(s *string) string {
		if s == nil {
			return ""
		}
		return *s
	}
	level := ""
	if r.Level != nil {
		level = fmt.Sprint(*r.Level)
	}
	return strings.Join([]string{filepath.Base(r.Paper), str(r.Table), str(r.Statistic), str(r.GivenAs), level, str(r.Estimate), str(r.Lower), str(r.Upper), str(r.GivenValue)}, " | ")
}
