package convert

import "fmt"

// Agreement is how far two people agree on one choice about the same things.
type Agreement struct {
	Observed float64 // share of the things on which they chose the same
	Chance   float64 // share to be expected if each chose at random with the shares that they chose with
	Kappa    float64 // (Observed - Chance)/(1 - Chance)
}

// Kappa measures the agreement of two people beyond chance.
//
// Formula: kappa = (po - pe)/(1 - pe), po = Σ nii/N, pe = Σ (row sum i)·(column
// sum i)/N².
// Arguments: counts[i][j] how many things the first person put into category i
// and the second into j; square, none negative.
// Assumes: both judged the same things, each by themselves; nominal categories.
// Errors: ErrSize (nothing counted), ErrDomain (not square, or a negative
// count), ErrNoSolution (both put everything into one category: there is nothing
// to agree on beyond chance).
// Limits: 1 for full agreement, 0 for what chance gives, at least -1. It falls
// with the same observed share where one category is rare: give the shares
// beside it.
// Rounding: none, counts are exact.
// Source: Cohen 1960.
// Checked: Fleiss's printed example of 100 diagnoses, 0.68 (recalled from
// memory); against a direct count over all pairs of judgements.
func Kappa(counts [][]int) (Agreement, error) {
	rows, columns := make([]float64, len(counts)), make([]float64, len(counts))
	var total, same float64
	for i, row := range counts {
		if len(row) != len(counts) {
			return Agreement{}, fmt.Errorf("%w: row %d has %d counts, %d needed", ErrDomain, i+1, len(row), len(counts))
		}
		for j, n := range row {
			if n < 0 {
				return Agreement{}, fmt.Errorf("%w: a count of %d", ErrDomain, n)
			}
			rows[i] += float64(n)
			columns[j] += float64(n)
			total += float64(n)
			if i == j {
				same += float64(n)
			}
		}
	}
	if total == 0 {
		return Agreement{}, fmt.Errorf("%w: nothing was judged by both", ErrSize)
	}
	a := Agreement{Observed: same / total}
	for i := range rows {
		a.Chance += rows[i] / total * columns[i] / total
	}
	if 1-a.Chance < 1e-12 {
		return Agreement{}, fmt.Errorf("%w: both put everything into one category", ErrNoSolution)
	}
	a.Kappa = (a.Observed - a.Chance) / (1 - a.Chance)
	return a, nil
}
