package extract

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode"

	"halfspan/extract/result"
)

// echoes fills what a sentence does not say of its result from the table of the
// same paper that prints the same numbers, where exactly one result of the tables
// has them and nothing in the sentence speaks against it. Every field that was
// taken carries the place in the table as its source, and the result a flag.
func echoes(found []result.Result) {
	tables := map[string][]int{}
	for i := range found {
		if r := &found[i]; r.Table != "" {
			k, _ := numbersOf(r, 1)
			tables[k] = append(tables[k], i)
		}
	}
	twins := make([]*result.Result, len(found))
	for i := range found {
		if r := &found[i]; r.Table == "" && !r.Evidence.Quoted {
			twins[i] = twin(found, tables, r)
		}
	}
	for i, t := range twins {
		if t == nil {
			continue
		}
		takeFrom(&found[i], t)
		for _, m := range found[i].Mates { // its range beside its SD
			if r := &found[m]; r.Table == "" && twins[m] == nil && r.Statistic == found[i].Statistic {
				takeFrom(r, t)
			}
		}
	}
}

// fewestDigits is how many significant digits the numbers of two results must
// have together before their equality is no chance; with fewer than sureDigits
// the sentence must name the outcome or the arm of the table's result too.
const (
	fewestDigits = 4
	sureDigits   = 6
)

// twin finds the one result of the tables with the numbers of r; one with all
// signs turned, as a fall by 1.2 is printed -1.2 in a table, where none has them
// as they stand.
func twin(found []result.Result, tables map[string][]int, r *result.Result) *result.Result {
	for _, sign := range []float64{1, -1} {
		k, digits := numbersOf(r, sign)
		if digits < fewestDigits {
			return nil
		}
		var fit []int
		for _, i := range tables[k] {
			if t := &found[i]; agrees(r, t) && (digits >= sureDigits || shares(r.Snippet, t.Outcome) || shares(r.Snippet, t.Arm)) {
				fit = append(fit, i)
			}
		}
		if len(fit) > 0 {
			return sameContext(found, fit)
		}
	}
	return nil
}

// sameContext gives the first of several results if all are about the same: a
// paper may print one result in two tables.
func sameContext(found []result.Result, list []int) *result.Result {
	a := &found[list[0]]
	for _, i := range list[1:] {
		if b := &found[i]; a.Arm != b.Arm || a.Time != b.Time || a.Outcome != b.Outcome || a.N != b.N {
			return nil
		}
	}
	return a
}

// numbersOf writes estimate and spread as values, all turned by sign, and counts
// their significant digits: none where a bound is no number.
func numbersOf(r *result.Result, sign float64) (key string, digits int) {
	var b strings.Builder
	lower, upper := r.Lower, r.Upper
	if sign < 0 {
		lower, upper = upper, lower
	}
	for _, v := range []string{r.Estimate, lower, upper} {
		f, err := strconv.ParseFloat(v, 64)
		if v != "" && err != nil {
			return "", 0
		}
		digits += significant(v)
		fmt.Fprintf(&b, "%g|", f*sign+0) // +0: no negative zero
	}
	f, err := strconv.ParseFloat(r.GivenValue, 64)
	if r.GivenValue != "" && err != nil {
		return "", 0
	}
	digits += significant(r.GivenValue)
	fmt.Fprintf(&b, "%g", math.Abs(f))
	return b.String(), digits
}

func significant(v string) int {
	n := 0
	for _, c := range strings.TrimLeft(strings.TrimLeft(v, "-"), "0.") {
		if unicode.IsDigit(c) {
			n++
		}
	}
	return n
}

// agrees reports that nothing the sentence says speaks against the table's
// result: the kind of spread, the level, n, and the arm, unless the sentence
// names the table's arm as well.
func agrees(r, t *result.Result) bool {
	switch {
	case r.GivenAs != t.GivenAs && r.GivenAs != result.Unstated && t.GivenAs != result.Unstated,
		r.Level > 0 && t.Level > 0 && r.Level != t.Level,
		r.N > 0 && t.N > 0 && r.N != t.N && r.NFrom == result.NBeside,
		between(r) != between(t):
		return false
	}
	return r.Arm == "" || t.Arm == "" || shares(r.Arm, t.Arm) || shares(r.Snippet, t.Arm) || initials(r.Arm, t.Arm)
}

func between(r *result.Result) bool {
	switch r.Statistic {
	case result.MeanDifference, result.RiskDifference, result.Ratio, result.Coefficient:
		return true
	}
	return false
}

// ofGroups reports that a result is a value of one group.
func ofGroups(t *result.Result) bool {
	switch t.Statistic {
	case result.Mean, result.MeanChange, result.Median, result.GeometricMean:
		return true
	}
	return false
}

// shares reports that a word of b stands in a.
func shares(a, b string) bool {
	have := map[string]bool{}
	for _, w := range words(a) {
		have[w] = true
	}
	for _, w := range words(b) {
		if have[w] && !loose[w] {
			return true
		}
	}
	return false
}

// loose words join names but tell nothing apart.
var loose = map[string]bool{"group": true, "groups": true, "arm": true, "the": true, "of": true, "and": true, "in": true, "with": true, "at": true,
	"for": true, "to": true, "a": true, "or": true, "mean": true, "sd": true, "n": true, "from": true, "by": true, "was": true, "were": true}

func words(s string) []string {
	return strings.FieldsFunc(strings.ToLower(s), func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsDigit(r) })
}

// initials reports that a short name begins as the long one does: "SG" for
// "Syrup group".
func initials(short, long string) bool {
	a, b := words(short), words(long)
	return len(a) > 0 && len(b) > 0 && len(a[0]) <= 4 && a[0][0] == b[0][0]
}

// narrower reports that name a has all words of name b and another one that the
// sentence prints: "without pollen" where "pollen" was read.
func narrower(a, b, sentence string) bool {
	have, printed := map[string]bool{}, map[string]bool{}
	for _, w := range words(a) {
		have[w] = true
	}
	for _, w := range words(sentence) {
		printed[w] = true
	}
	for _, w := range words(b) {
		if !have[w] && !loose[w] {
			return false
		}
		delete(have, w)
	}
	for w := range have {
		if printed[w] && !loose[w] {
			return true
		}
	}
	return false
}

// takeFrom fills the fields that r lacks from its twin in a table.
func takeFrom(r, t *result.Result) {
	var took []string
	take := func(field string, to *string, from string) {
		if *to == "" && from != "" {
			*to = from
			took = append(took, field)
			copySource(r, t, field)
		}
	}
	if t.N > 0 && r.N != t.N && (r.N == 0 || r.NFrom == result.NElsewhere) {
		drop(r, "n")
		r.N, r.NFrom, r.NKind = t.N, result.NElsewhere, t.NKind
		took = append(took, "n")
		copySource(r, t, "n")
	}
	if t.N2 > 0 && r.N2 == 0 {
		r.N2 = t.N2
		took = append(took, "n2")
		copySource(r, t, "n2")
	}
	if r.Arm != "" && t.Arm != "" && !between(r) && (!shares(r.Arm, t.Arm) && !initials(r.Arm, t.Arm) || narrower(t.Arm, r.Arm, r.Snippet)) {
		drop(r, "arm") // the sentence names both: the table says which
		r.Arm = ""
	}
	if _, digits := numbersOf(r, 1); r.Outcome != "" && t.Outcome != "" && !shares(r.Outcome, t.Outcome) && (shares(r.Snippet, t.Outcome) || digits >= sureDigits) {
		drop(r, "outcome")
		r.Outcome = ""
	}
	if t.N > 0 || ofGroups(t) { // the columns of models are no arms
		take("arm", &r.Arm, t.Arm)
		take("arm2", &r.Arm2, t.Arm2)
	}
	take("time", &r.Time, t.Time)
	take("subgroup", &r.Subgroup, t.Subgroup)
	take("outcome", &r.Outcome, t.Outcome)
	take("unit", &r.Unit, t.Unit)
	if r.GivenAs == result.Unstated && t.GivenAs != result.Unstated {
		r.GivenAs = t.GivenAs
		took = append(took, "what the spread is")
		copySource(r, t, "given_as")
	}
	if len(took) == 0 {
		took = []string{"nothing, the sentence says it all"}
	}
	r.Raise("from-the-table", fmt.Sprintf("%s prints the same numbers; taken from there: %s", t.Table, strings.Join(took, ", ")))
}

// copySource gives r the table's source of a field, saying where it stands.
func copySource(r, t *result.Result, field string) {
	for _, s := range t.Sources {
		if s.Field == field {
			if s.From == "" {
				s.From = "the same numbers in " + t.Table
			} else {
				s.From = "the same numbers in " + t.Table + ", " + s.From
			}
			r.Sources = append(r.Sources, s)
		}
	}
}

// drop takes out the sources of a field.
func drop(r *result.Result, field string) {
	kept := r.Sources[:0]
	for _, s := range r.Sources {
		if s.Field != field {
			kept = append(kept, s)
		}
	}
	r.Sources = kept
}
