package convert

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"
)

// Fleiss, Statistical Methods for Rates and Proportions: two raters, 100
// subjects, three diagnoses; kappa printed as 0.68 (recalled from memory).
func TestKappaAgainstAPrintedExample(t *testing.T) {
	got, err := Kappa([][]int{{75, 1, 4}, {5, 4, 1}, {0, 0, 10}})
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(got.Kappa-0.68) > 0.005 || math.Abs(got.Observed-0.89) > 1e-12 || math.Abs(got.Chance-0.66) > 1e-12 {
		t.Errorf("got %+v, want kappa 0.68 from 0.89 and 0.66", got)
	}
}

// The direct computation: chance agreement is the share of pairs of judgements,
// one of each person on whatever things, that are alike.
func TestKappaAgainstADirectCount(t *testing.T) {
	random := rand.New(rand.NewPCG(7, 11))
	for range 200 {
		k, n := 2+random.IntN(3), 1+random.IntN(40)
		first, second := make([]int, n), make([]int, n)
		counts := make([][]int, k)
		for i := range counts {
			counts[i] = make([]int, k)
		}
		for i := range n {
			first[i], second[i] = random.IntN(k), random.IntN(k)
			counts[first[i]][second[i]]++
		}
		same, alike := 0, 0
		for i := range n {
			if first[i] == second[i] {
				same++
			}
			for j := range n {
				if first[i] == second[j] {
					alike++
				}
			}
		}
		got, err := Kappa(counts)
		if alike == n*n {
			if !errors.Is(err, ErrNoSolution) {
				t.Errorf("%v: %v, want ErrNoSolution", counts, err)
			}
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		po, pe := float64(same)/float64(n), float64(alike)/float64(n*n)
		if want := (po - pe) / (1 - pe); math.Abs(got.Kappa-want) > 1e-9 {
			t.Errorf("%v: kappa %v, want %v", counts, got.Kappa, want)
		}
	}
}

func TestKappaRefuses(t *testing.T) {
	for _, c := range []struct {
		counts [][]int
		want   error
	}{
		{nil, ErrSize}, {[][]int{{0, 0}, {0, 0}}, ErrSize}, {[][]int{{1, 2}, {3}}, ErrDomain}, {[][]int{{1, -2}, {3, 4}}, ErrDomain}, {[][]int{{9, 0}, {0, 0}}, ErrNoSolution},
	} {
		if _, err := Kappa(c.counts); !errors.Is(err, c.want) {
			t.Errorf("%v: %v, want %v", c.counts, err, c.want)
		}
	}
}
