package plain

import (
	"strings"

	"halfspan/extract/pattern"
)

// kind is what a cell looks like, as far as it tells which column it belongs
// to.
type kind uint8

const (
	empty    kind = iota
	textual       // words
	whole         // 42
	decimal       // 12.4
	pvalue        // 0.03 (may be a decimal), <0.001, NS
	bracket       // 12.4 (1.3), 12 (5%)
	interval      // 0.92 to 2.76
	estimate      // 1.84 (0.92 to 2.76)
	spread        // 12.4 ± 1.3
	percent       // 12%
	quantity      // 1.5 mg/kg
	wild          // a dash, NA: fits everywhere
	kinds
)

const (
	number = `[<>≤≥=~]?\s*[-−–+‐]?\s*[$£€]?(?:\d[\d,]*(?:[.·]\d+)?|[.·]\d+)%?`
	sep    = `\s*(?:–|-|−|‐|to|,|;|/|:)\s*`
	marks  = `\s*[*†‡§¶#a-f,\s]{0,6}`
)

// kindForms tells kinds by form; the first that fits decides.
var kindForms = []struct {
	form *pattern.Pattern
	kind kind
}{
	{pattern.MustCompile(`^[-–—−_.]+$|^(?i:n/?a|nd|nr|ne|ref\.?|reference)$`), wild},
	{pattern.MustCompile(`^(?:[tTFzZrHQU]|χ2?|X2|df)\s*=\s*[-−–]?[\d.]+` + marks + `$`), decimal}, // a test statistic
	{pattern.MustCompile(`^(?i:p\s*)?[<>=≤]\s*0?[.·]\d+` + marks + `$|^(?i:ns|n\.s\.)$|^[01]?[.·]\d{2,4}` + marks + `$`), pvalue},
	{pattern.MustCompile(`^[([]?` + number + `\s*(?:±|\+/?[-−–])\s*` + number), spread},
	{pattern.MustCompile(`^` + number + marks + `[([]\s*` + number + sep + number + `\s*[)\]]`), estimate},
	{pattern.MustCompile(`^[([]?\s*` + number + sep + number + `\s*[)\]]?` + marks + `$`), interval},
	{pattern.MustCompile(`^` + number + marks + `[([]`), bracket},
	{pattern.MustCompile(`^\d[\d,]*\s?/\s?\d[\d,]*\s*(?:[([].*)?$`), bracket}, // 12/40 (30%)
	{pattern.MustCompile(`^` + number + `%` + marks + `$|^[0-9.·]+\s*%` + marks + `$`), percent},
	{pattern.MustCompile(`^[([]?\s*[<>]?\s*[-−–+‐]?\s*\d+\s*[)\]]?` + marks + `$`), whole},
	{pattern.MustCompile(`^[([]?\s*` + number + `\s*[)\]]?` + marks + `$`), decimal},
	{pattern.MustCompile(`^` + number + `\s*\pL\S*(?:\s\S+){0,3}$`), quantity},
}

// specialSpace makes the spaces of print plain ones.
var specialSpace = strings.NewReplacer("\u00A0", " ", "\u2002", " ", "\u2003", " ", "\u2005", " ", "\u2007", " ", "\u2009", " ", "\u200A", " ", "\u200B", "", "\u202F", " ")

func kindOf(s string) kind {
	s = strings.TrimSpace(specialSpace.Replace(s))
	if s == "" {
		return empty
	}
	for _, f := range kindForms {
		if f.form.MatchString(s) {
			return f.kind
		}
	}
	return textual
}

// numeric reports whether a cell of the kind prints a value.
func (k kind) numeric() bool { return k >= whole && k <= percent }

// likeness says how well a cell of kind a suits a column where kind b is usual:
// 1 the same, 0 nothing against it, negative a misfit. Hundredths.
func likeness(a, b kind) int {
	switch {
	case a == b:
		return 100
	case a == wild || b == wild:
		return 20
	case a == empty || b == empty:
		return 0
	case a.numeric() && b.numeric():
		if near[[2]kind{a, b}] || near[[2]kind{b, a}] {
			return 40
		}
		return -30
	case a == quantity || b == quantity:
		return -40
	}
	return -100
}

var near = map[[2]kind]bool{
	{whole, decimal}: true, {decimal, pvalue}: true, {whole, percent}: true, {decimal, percent}: true,
	{bracket, estimate}: true, {bracket, spread}: true, {spread, estimate}: true, {bracket, whole}: true,
	{bracket, decimal}: true, {interval, estimate}: true,
}

// profile counts the kinds seen in a column.
type profile [kinds]int

func (p *profile) add(k kind) { p[k]++ }

// fit is the mean likeness of kind k to what the column holds; first tells the
// first column.
func (p *profile) fit(k kind, first bool) int {
	total, n := 0, 0
	for other, count := range p {
		if count == 0 || kind(other) == empty {
			continue
		}
		total += count * likeness(k, kind(other))
		n += count
	}
	if n == 0 {
		if first == (k == textual) {
			return 0
		}
		return -50 // unknown: words belong into the first column, values into the others
	}
	return total / n
}

// mostly reports whether at least half of the column's filled cells are of one
// of the kinds.
func (p *profile) mostly(ks ...kind) bool {
	n, hit := 0, 0
	for k, count := range p {
		if kind(k) == empty || kind(k) == wild {
			continue
		}
		n += count
		for _, want := range ks {
			if kind(k) == want {
				hit += count
			}
		}
	}
	return n > 0 && 2*hit >= n
}

// words reports whether a column holds words more than anything else, empty
// cells aside.
func (p *profile) words() bool {
	values := 0
	for k, count := range p {
		if kind(k) != empty && kind(k) != textual && kind(k) != wild {
			values += count
		}
	}
	return p[textual] > 0 && p[textual] >= values
}

// bare reports whether a column holds mostly single numbers.
func (p *profile) bare() bool { return p.mostly(whole, decimal, pvalue) }

// usual is the kind that most of a column's filled cells are of, near kinds
// taken together; empty where it holds nothing.
func (p *profile) usual() kind {
	best, count := empty, 0
	for k, n := range p {
		if kind(k) == empty || kind(k) == wild {
			continue
		}
		if n > count {
			best, count = kind(k), n
		}
	}
	switch best {
	case whole:
		return decimal
	case percent:
		return bracket
	}
	return best
}
