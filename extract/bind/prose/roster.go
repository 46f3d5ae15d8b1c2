package prose

import (
	"strings"

	"halfspan/extract/pattern"
	"halfspan/extract/result"
)

// enlist adds the arms of the tables' results with the sizes that were read
// there: a table's heading says them more surely than any sentence.
func (f *finder) enlist(tables []result.Result) {
	for i := range tables {
		t := &tables[i]
		f.fromTable(t, t.Arm, t.N, "n")
		f.fromTable(t, t.Arm2, t.N2, "n2")
	}
}

func (f *finder) fromTable(t *result.Result, name string, n int, field string) {
	const most = 6
	if name == "" || n == 0 && !ofGroups(t) {
		return
	}
	if allOfThem.MatchString(name) && n > 3 && t.Subgroup == "" {
		f.cast.totals = append(f.cast.totals, sizeIn(t, n, field))
		return
	}
	a := f.arm(name, most)
	if a == nil {
		return
	}
	a.seen++
	a.group = true
	a.table = true
	if n <= 3 || t.Evidence.Quoted {
		return
	}
	a.sizes = append(a.sizes, sizeIn(t, n, field))
}

// allOfThem names all arms together.
var allOfThem = pattern.MustCompile(`(?i)^(?:total|overall|all|whole|entire)(?:\s+(?:sample|group|patients|participants|subjects|colonies|population|cohort))?\b[^\p{L}]*$`)

func sizeIn(t *result.Result, n int, field string) size {
	s := size{n: n, from: "in " + t.Table, table: t.Table, baseline: t.Evidence.Baseline || startTime.MatchString(t.Time),
		sub: t.Subgroup != "", outcome: t.Outcome}
	for _, src := range t.Sources {
		if src.Field == field {
			s.text, s.place = src.Text, src.Place
		}
	}
	return s
}

// ofGroups reports that a table's arms are groups for sure although no size is
// printed: it has their means; columns of models are called by all sorts of names.
func ofGroups(t *result.Result) bool {
	switch t.Statistic {
	case result.Mean, result.MeanChange, result.Median, result.GeometricMean:
		return true
	}
	return false
}

// shorten lets the arms of tables be named as sentences do: "syrup" for "Syrup
// 250 mg at noon", "the 5-mg group" for "Syrup, 5 mg", "the evening group"
// for "Evening syrup". A short name holds what tells the arm from the others.
func (f *finder) shorten() {
	c := &f.cast
	holders := map[string]int{} // arms of tables by the words of their names
	for i := range c.arms {
		for _, w := range distinct(c.arms[i].key) {
			if c.arms[i].table {
				holders[w]++
			}
		}
	}
	short := map[string][]int{}
	var order []string
	offer := func(key []string, i int) {
		k := strings.Join(key, " ")
		if short[k] == nil {
			order = append(order, k)
		}
		short[k] = append(short[k], i)
	}
	for i := range c.arms {
		if !c.arms[i].table || len(c.arms[i].key) < 2 || c.arms[i].key[0] == "group" {
			continue
		}
		for _, key := range shortNames(c.arms[i].key, holders) {
			offer(key, i)
		}
	}
	for _, k := range order {
		i, ok := c.oneArm(short[k])
		if !ok {
			continue
		}
		if a, known := c.names[k]; !known {
			c.call(strings.Fields(k), i)
		} else if len(c.arms[a.arm].sizes) == 0 && !c.arms[a.arm].table {
			c.rename(strings.Fields(k), i)
		}
	}
}

func distinct(words []string) []string {
	var out []string
	seen := map[string]bool{}
	for _, w := range words {
		if !seen[w] {
			seen[w] = true
			out = append(out, w)
		}
	}
	return out
}

// shortNames gives the short forms of an arm's name.
func shortNames(key []string, holders map[string]int) [][]string {
	var out [][]string
	if d := doseIn(key); d > 0 {
		dose := key[d : d+2]
		out = append(out, key[:d], dose, key[:d+2], append(append([]string{}, dose...), key[:d]...))
	} else if d < 0 {
		a, b := 0, len(key)
		for a < b-1 && holders[key[a]] > 1 {
			a++
		}
		for b > a+1 && holders[key[b-1]] > 1 {
			b--
		}
		if b-a == 1 && notAlone[key[a]] && b < len(key) {
			b++
		}
		out = append(out, key[a:b])
	}
	kept := out[:0]
	for _, k := range out {
		if len(k) > 1 || len(k[0]) > 3 && !notAlone[k[0]] && !unitWords[k[0]] {
			kept = append(kept, k)
		}
	}
	return kept
}

// oneArm gives the arm that several bearers of one short name are: they must have
// the same sizes, as a table's "Syrup 400 mg" and another's "Syrup 400 mg daily".
func (c *cast) oneArm(bearers []int) (int, bool) {
	for _, b := range bearers[1:] {
		if !sameSizes(c.arms[bearers[0]].sizes, c.arms[b].sizes) {
			return 0, false
		}
	}
	return bearers[0], true
}

func sameSizes(a, b []size) bool {
	x, okX := agreed(a)
	y, okY := agreed(b)
	return okX && okY && x.n == y.n
}
