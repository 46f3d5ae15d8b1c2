package working

import (
	"math"
	"strconv"

	"halfspan/convert"
)

// short writes v with six significant digits, as steps show it.
func short(v float64) string {
	if v != 0 && (math.Abs(v) >= 1e15 || math.Abs(v) < 1e-6) {
		return strconv.FormatFloat(v, 'g', 6, 64)
	}
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'g', 6, 64), 64)
	if err != nil {
		return strconv.FormatFloat(v, 'g', 6, 64)
	}
	return strconv.FormatFloat(r, 'f', -1, 64)
}

// deserved writes v with the decimals that the range of its digits leaves
// meaningful, but never more than six significant digits.
func deserved(v float64, r convert.Range) string {
	d := r.Decimals()
	if d > 6 {
		return short(v)
	}
	if d < 0 {
		unit := math.Pow(10, float64(-d))
		return strconv.FormatFloat(math.Round(v/unit)*unit, 'f', 0, 64)
	}
	return strconv.FormatFloat(v, 'f', d, 64)
}

// percent writes a share in percent with two significant digits, large ones whole.
func percent(share float64) string {
	if math.Abs(share) >= 0.995 {
		return strconv.FormatFloat(100*share, 'f', 0, 64)
	}
	return strconv.FormatFloat(100*share, 'g', 2, 64)
}
