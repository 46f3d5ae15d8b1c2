package working

import (
	"fmt"
	"strings"

	"halfspan/convert"
	"halfspan/extract/result"
)

// item is one result on its way to a Working, with its printed numbers read.
// A number that is not printed, or not a number, is nil.
type item struct {
	doc   Facts
	res   *result.Result
	w     *Working
	mates []*item
	row   []*item // the results of its table row, itself included

	est, low, high, val *convert.Printed

	swapped bool          // the bounds are printed in descending order
	flipped bool          // the interval holds the estimate with the other sign
	margin  convert.Range // half-widths that the printed digits allow, raw scale
	tied    bool          // symmetric only if all three numbers are rounded from the middle
	lopside error         // why no symmetric interval prints like this, nil when one does
}

func (it *item) rec() *Record { return &it.w.Record }

// raise adds a flag of the working once.
func (it *item) raise(name, detail string) {
	for _, f := range it.w.Flags {
		if f.Name == name {
			return
		}
	}
	it.w.Flags = append(it.w.Flags, result.Flag{Name: name, Detail: detail})
}

// sizeMissing flags a result without n, unless the paper itself says why it has
// none (n-at-baseline).
func (it *item) sizeMissing() {
	if !it.has("n-at-baseline") {
		it.raise("n-missing", "no sample size is printed for this result")
	}
}

func (it *item) has(name string) bool {
	for _, f := range it.w.Flags {
		if f.Name == name {
			return true
		}
	}
	return false
}

func newItem(doc Facts, r *result.Result) *item {
	it := &item{doc: doc, res: r}
	it.est, it.low, it.high, it.val = read(r.Estimate), read(r.Lower), read(r.Upper), read(r.GivenValue)
	it.w = &Working{
		Record: newRecord(doc, r),
		Anchor: r.Anchor,
		Row:    r.Row,
		Zone:   r.Zone,
		Quoted: r.Evidence.Quoted,
		Base:   r.Evidence.Baseline,
		Flags:  append([]result.Flag{}, r.Flags...),
	}
	it.settleMargin()
	return it
}

func read(text string) *convert.Printed {
	if text == "" {
		return nil
	}
	p, err := convert.ReadPrinted(text)
	if err != nil {
		return nil
	}
	return &p
}

// settleMargin works out the half-width of the interval, whichever way it is
// printed, and whether the interval is symmetric about the estimate.
func (it *item) settleMargin() {
	if it.low == nil || it.high == nil {
		if it.val != nil {
			it.margin = convert.Range{Low: it.val.Low(), High: it.val.High()}
		}
		return
	}
	low, high := *it.low, *it.high
	if low.Value > high.Value {
		it.swapped = true
		low, high = high, low
	}
	bare, err := convert.Margin(low, high, nil, convert.Raw)
	if err != nil {
		it.lopside = err
		return
	}
	it.margin = bare
	if it.est == nil {
		return
	}
	est := *it.est
	if outside(est, low, high) {
		if mirrored := (convert.Printed{Value: -est.Value, Half: est.Half}); !outside(mirrored, low, high) {
			it.flipped = true
			est = mirrored
		}
	}
	narrow, err := convert.Margin(low, high, &est, convert.Raw)
	if err != nil {
		it.lopside = err
		return
	}
	// Where all three numbers would have to sit on rounding ties, the estimate
	// says nothing about the width: the set would shrink to a point.
	if narrow.High-narrow.Low <= 1e-6*est.Half {
		it.tied = true
		return
	}
	it.margin = narrow
}

func outside(est, low, high convert.Printed) bool {
	slack := 1e-9 * (est.Half + low.Half + high.Half)
	return est.High() < low.Low()-slack || est.Low() > high.High()+slack
}

// interval reports whether both bounds are printed and read.
func (it *item) interval() bool { return it.low != nil && it.high != nil }

// bounds gives the bounds in ascending order.
func (it *item) bounds() (low, high convert.Printed) {
	if it.swapped {
		return *it.high, *it.low
	}
	return *it.low, *it.high
}

// halfWidth is the margin by the printed values.
func (it *item) halfWidth() float64 {
	if it.interval() {
		low, high := it.bounds()
		return (high.Value - low.Value) / 2
	}
	if it.val != nil {
		return it.val.Value
	}
	return 0
}

func (it *item) step(format string, args ...any) {
	it.w.Trail.Steps = append(it.w.Trail.Steps, fmt.Sprintf(format, args...))
}

func (it *item) assume(text string) {
	it.w.Trail.Assumptions = append(it.w.Trail.Assumptions, text)
}

func (it *item) note(format string, args ...any) {
	it.w.Trail.Notes = append(it.w.Trail.Notes, fmt.Sprintf(format, args...))
}

func (it *item) offer(a Alternative) {
	it.w.Trail.Alternatives = append(it.w.Trail.Alternatives, a)
}

// withhold says why no SD is given.
func (it *item) withhold(reason string) {
	it.rec().Use = useWithheld
	it.rec().Reason = reason
}

func (it *item) method(name string) {
	it.rec().Method = text(name)
	it.w.Trail.Method = name
}

// finish rates the reading and writes out the flags and where each number that
// went in was read.
func (it *item) finish(effects map[string]Effect) {
	it.rec().Reading = rate(it, effects)
	it.rec().Flags = make([]string, 0, len(it.w.Flags))
	for _, f := range it.w.Flags {
		it.rec().Flags = append(it.rec().Flags, f.Name)
	}
	it.traceInputs()
}

// inputs are the fields whose origin a reader of the trail wants to see.
var inputs = []string{"estimate", "lower", "upper", "given_value", "given_as", "level", "n", "n2", "p", "t", "f", "df", "limits"}

func (it *item) traceInputs() {
	for _, field := range inputs {
		for _, s := range it.res.Sources {
			if s.Field != field || s.Text == "" {
				continue
			}
			name := strings.ReplaceAll(field, "_", " ")
			if s.ByPerson() {
				it.note("%s %q given by %s", name, s.Text, s.From)
				break
			}
			it.note("%s read as %q%s", name, s.Text, whereRead(s))
			break
		}
	}
}

func whereRead(s result.Source) string {
	var parts []string
	if s.From != "" {
		parts = append(parts, s.From)
	}
	if s.Place.Page > 0 {
		parts = append(parts, fmt.Sprintf("page %d", s.Place.Page))
	}
	if s.Place.Page > 0 && s.Place.Line > 0 {
		parts = append(parts, fmt.Sprintf("line %d", s.Place.Line))
	}
	if s.Place.Page == 0 && s.Place.Offset > 0 {
		parts = append(parts, fmt.Sprintf("byte %d", s.Place.Offset))
	}
	if len(parts) == 0 {
		return ""
	}
	return " (" + strings.Join(parts, ", ") + ")"
}
