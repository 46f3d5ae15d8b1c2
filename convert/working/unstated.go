package working

import (
	"math"

	"halfspan/convert"
)

// weighReadings shows what a ± would mean as SD, SE and half-width of a 95%
// interval; none is taken.
func weighReadings(it *item) {
	it.raise("spread-unstated", "the paper does not say what stands after the ± or in the bracket")
	it.withhold("the paper does not say whether the spread is an SD, an SE or the half-width of an interval")
	if it.val == nil || it.val.Value <= 0 {
		return
	}
	span := convert.Range{Low: math.Max(it.val.Low(), 0), High: it.val.High()}
	it.offer(Alternative{Name: "as an SD", SD: number(it.val.Value), Low: down(span.Low), High: up(span.High)})
	n := it.res.N
	if n < 2 {
		it.raise("n-missing", "no sample size is printed for this result")
		return
	}
	root := math.Sqrt(float64(n))
	it.offer(Alternative{Name: "as an SE", SD: number(it.val.Value * root), SE: number(it.val.Value),
		Low: down(span.Low * root), High: up(span.High * root)})
	t, err := convert.TwoSided(95, float64(n-1))
	if err != nil {
		return
	}
	it.offer(Alternative{Name: "as the half-width of a 95% interval", SD: number(it.val.Value * root / t), SE: number(it.val.Value / t),
		Low: down(span.Low * root / t), High: up(span.High * root / t)})
}
