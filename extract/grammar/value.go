package grammar

import "strconv"

// value is the number behind a printed value, 0 for none.
func value(v string) float64 {
	f, err := strconv.ParseFloat(v, 64)
	if err != nil {
		return 0
	}
	return f
}

// Float is the number behind the print, its power of ten included; false for a bound that is no number.
func (n Number) Float() (float64, bool) {
	v := n.Value
	if e, ok := n.Decade(); ok {
		v += "e" + strconv.Itoa(e)
	}
	f, err := strconv.ParseFloat(v, 64)
	return f, err == nil
}
