package plain

import (
	"bytes"
	"math/rand/v2"
	"path/filepath"
	"strings"
	"testing"

	"halfspan/extract/readtest"
)

// seeds gives the inputs of all cases.
func seeds(t testing.TB) [][]byte {
	out := [][]byte{[]byte(sample)}
	for _, name := range caseFiles {
		for _, c := range readtest.Cases(t, filepath.Join("testdata", name)) {
			out = append(out, []byte(c.Input))
		}
	}
	if len(out) < 25 {
		t.Fatalf("only %d seeds", len(out))
	}
	return out
}

// check reads content twice and fails unless it gives an error or a sound
// document, both times the same, with every place inside the file.
func check(t testing.TB, content []byte) {
	d, err := Read("fuzz.txt", content)
	again, err2 := Read("fuzz.txt", content)
	if err != nil {
		if err2 == nil || err.Error() != err2.Error() {
			t.Fatalf("read twice: %v, %v", err, err2)
		}
		return
	}
	readtest.CheckTables(t, d)
	readtest.CheckPlaces(t, d, func(i int) byte {
		// in UTF-16 the digit is one of two bytes
		for k := i; k < min(i+2, len(content)); k++ {
			if content[k] >= '0' && content[k] <= '9' {
				return content[k]
			}
		}
		return 0
	})
	if readtest.Dump(d) != readtest.Dump(again) {
		t.Fatal("two readings differ")
	}
}

func FuzzRead(f *testing.F) {
	for _, s := range seeds(f) {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, content []byte) {
		if len(content) > 1<<16 {
			return
		}
		check(t, content)
	})
}

// TestMutations cuts, doubles and overwrites parts of good files, by bytes and
// by lines and tabs: nothing may panic, whatever comes out.
func TestMutations(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	all := seeds(t)
	for range 700 {
		b := bytes.Clone(all[rng.IntN(len(all))])
		for range 1 + rng.IntN(4) {
			i := rng.IntN(len(b) + 1)
			j := min(len(b), i+rng.IntN(40))
			switch rng.IntN(5) {
			case 0:
				b = append(b[:i:i], b[j:]...)
			case 1:
				b = append(b[:j:j], b[i:]...)
			case 2:
				b = append(append(b[:i:i], []string{"\t", "\n", "\n\n", "|", "  ", "\f", "±", "\u00a0"}[rng.IntN(8)]...), b[i:]...)
			case 3:
				other := all[rng.IntN(len(all))]
				b = append(append(b[:i:i], other...), b[i:]...)
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
	content := []byte(strings.Repeat("Results\n\nMass was 12.4 ± 1.3 kg in the syrup arm.\n\nTable 1. Mass\n\nOutcome\tSyrup\tWater\tp\nMean\tSD\tMean\tSD\nMass\t12.4\t1.3\t11.1\t1.2\t0.03\nFlight\t24.1\t5.2\t19.0\t4.4\t0.004\n\nValues at week 6.\n\n", 100))
	b.SetBytes(int64(len(content)))
	for b.Loop() {
		d, err := Read("bench.txt", content)
		if err != nil || len(d.Blocks) < 300 {
			b.Fatal(err)
		}
	}
}
