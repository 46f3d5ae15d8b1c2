package jats

import (
	"bytes"
	"math/rand/v2"
	"path/filepath"
	"testing"

	"halfspan/extract/readtest"
)

// seeds gives the inputs of all cases.
func seeds(t testing.TB) [][]byte {
	out := [][]byte{[]byte(sample)}
	for _, name := range []string{"text.txt", "tables.txt"} {
		for _, c := range readtest.Cases(t, filepath.Join("testdata", name)) {
			out = append(out, article(c.Input))
		}
	}
	if len(out) < 30 {
		t.Fatalf("only %d seeds", len(out))
	}
	return out
}

// check reads content twice and fails unless it gives an error or a sound
// document, both times the same.
func check(t testing.TB, content []byte) {
	d, err := Read("fuzz.xml", content)
	again, err2 := Read("fuzz.xml", content)
	if err != nil {
		if err2 == nil || err.Error() != err2.Error() {
			t.Fatalf("read twice: %v, %v", err, err2)
		}
		return
	}
	readtest.CheckTables(t, d)
	for _, r := range readtest.Runs(d) {
		for i := range len(r.S) {
			if p := r.At(i).Offset; p < 0 || p > len(content) {
				t.Fatalf("place %d outside of %d bytes", p, len(content))
			}
		}
	}
	if readtest.Dump(d) != readtest.Dump(again) {
		t.Fatal("two readings differ")
	}
}

func FuzzRead(f *testing.F) {
	for _, s := range seeds(f) {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, content []byte) { check(t, content) })
}

// TestMutations cuts, doubles and overwrites parts of good files: nothing may
// panic, whatever comes out.
func TestMutations(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	all := seeds(t)
	for range 3000 {
		b := bytes.Clone(all[rng.IntN(len(all))])
		for range 1 + rng.IntN(3) {
			i := rng.IntN(len(b) + 1)
			j := min(len(b), i+rng.IntN(40))
			switch rng.IntN(4) {
			case 0:
				b = append(b[:i:i], b[j:]...)
			case 1:
				b = append(b[:j:j], b[i:]...)
			case 2:
				other := all[rng.IntN(len(all))]
				k := rng.IntN(len(other))
				b = append(append(b[:i:i], other[k:min(len(other), k+60)]...), b[i:]...)
			default:
				if i < len(b) {
					b[i] = byte(rng.IntN(256))
				}
			}
		}
		check(t, b)
	}
}

func BenchmarkRead(b *testing.B) {
	content := article(string(bytes.Repeat([]byte(`<sec><title>Results</title><p>Mass was 12.4 &#xB1; 1.3 kg.</p><table-wrap><label>Table 1</label>
<table><thead><tr><th/><th>Syrup (n = 42)</th><th>Water (n = 41)</th></tr></thead><tbody>
<tr><td>Mass, kg</td><td>12.4 (1.3)</td><td>11.1 (1.2)</td></tr></tbody></table></table-wrap></sec>`), 200)))
	b.SetBytes(int64(len(content)))
	for b.Loop() {
		d, err := Read("bench.xml", content)
		if err != nil || len(d.Blocks) != 600 {
			b.Fatal(err, len(d.Blocks))
		}
	}
}
