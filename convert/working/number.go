package working

import (
	"math"
	"strconv"
)

// Number is a computed number. It is written with 9 significant digits, so that
// machines agree byte for byte.
type Number float64

// MarshalJSON writes n with 9 significant digits, without an exponent where it
// is short enough to be read.
func (n Number) MarshalJSON() ([]byte, error) { return []byte(n.String()), nil }

// String is n with 9 significant digits.
func (n Number) String() string { return formatSignificant(float64(n)) }

func formatSignificant(v float64) string {
	rounded, err := strconv.ParseFloat(strconv.FormatFloat(v, 'e', 8, 64), 64)
	if err != nil {
		return strconv.FormatFloat(v, 'e', 8, 64)
	}
	if a := math.Abs(rounded); a != 0 && (a < 1e-6 || a >= 1e15) {
		return strconv.FormatFloat(rounded, 'e', -1, 64)
	}
	return strconv.FormatFloat(rounded, 'f', -1, 64)
}

// Down and Up round to 9 significant digits towards minus and plus infinity, so
// that a range of digits written out still holds every value it should.
func Down(v float64) Number { return outward(v, -1) }

// Up rounds v to 9 significant digits towards plus infinity.
func Up(v float64) Number { return outward(v, +1) }

// sameNumber is the relative difference up to which a computed number is taken
// for the decimal with 9 digits beside it.
const sameNumber = 1e-12

func outward(v float64, side int) Number {
	if v == 0 || math.IsInf(v, 0) || math.IsNaN(v) {
		return Number(v)
	}
	r, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'e', 8, 64), 64)
	if math.Abs(r-v) <= sameNumber*math.Abs(v) {
		return Number(r) // 8.850000000000001 is the 8.85 that sums of binary fractions miss
	}
	if side < 0 && r > v || side > 0 && r < v {
		step := math.Pow(10, math.Floor(math.Log10(math.Abs(v)))-8)
		r, _ = strconv.ParseFloat(strconv.FormatFloat(r+float64(side)*step, 'e', 8, 64), 64)
	}
	return Number(r)
}
