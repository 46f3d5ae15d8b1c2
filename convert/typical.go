package convert

import (
	_ "embed"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// typicalTable is written by TestTypicalErrors with -simulate (make errors).
//
//go:embed typical.tsv
var typicalTable string

// TypicalError is how far a median method lies from the truth in simulation: bias
// and root mean square error, of the mean in percent of an SD, of the SD in
// percent of itself. A method that gives only one of the two has the other 0.
type TypicalError struct {
	Law              string // the law of the simulated values: "normal", "lognormal s=0.5", ...
	N                int    // the simulated sample size nearest to the one asked for
	MeanBias, MeanRM float64
	SDBias, SDRM     float64
}

// TypicalErrors gives the simulated errors of a median method for the sample size
// nearest to n, one for each law, normal first.
//
// Formula: error of the mean (method - sample mean)/sample SD, of the SD
// method/sample SD - 1, over 20,000 simulated samples (1000 for
// quantile-estimation and log-normal methods), times 100.
// Arguments: method, a name of Methods ("wan-quartiles"); n ≥ 2.
// Assumes: quartiles by linear interpolation of ranks 1 to n.
// Errors: ErrDomain for a method without a simulation; ErrSize.
// Limits: simulated at n = 10, 25, 50, 100 and 500; the nearest on the log scale.
// Rounding: simulation error about 1 in the last digit.
// Source: this project's own simulation, fixed seed.
// Checked: the table is made again, in part, by each run of the tests.
func TypicalErrors(method string, n int) ([]TypicalError, error) {
	if err := size(n, 2); err != nil {
		return nil, err
	}
	nearest, distance := 0, math.Inf(1)
	rows := typicalRows()
	for _, r := range rows {
		if d := math.Abs(math.Log(float64(r.n) / float64(n))); r.method == method && d < distance {
			nearest, distance = r.n, d
		}
	}
	if nearest == 0 {
		return nil, fmt.Errorf("%w: no simulated errors for %q", ErrDomain, method)
	}
	var out []TypicalError
	for _, r := range rows {
		if r.method == method && r.n == nearest {
			out = append(out, TypicalError{r.law, r.n, r.errors[0], r.errors[1], r.errors[2], r.errors[3]})
		}
	}
	return out, nil
}

type typicalRow struct {
	law    string
	n      int
	method string
	errors [4]float64
}

// typicalRows reads the table. A broken line, which only a broken build could
// have, is passed over; a test counts the lines.
func typicalRows() []typicalRow {
	var rows []typicalRow
	for _, line := range strings.Split(typicalTable, "\n") {
		cells := strings.Split(line, "\t")
		if strings.HasPrefix(line, "#") || len(cells) != 7 {
			continue
		}
		n, err := strconv.Atoi(cells[1])
		if err != nil {
			continue
		}
		r := typicalRow{law: cells[0], n: n, method: cells[2]}
		for i := range r.errors {
			if r.errors[i], err = strconv.ParseFloat(cells[3+i], 64); err != nil {
				break
			}
		}
		if err == nil {
			rows = append(rows, r)
		}
	}
	return rows
}
