package pdf

import (
	"fmt"
	"sort"
	"strconv"
	"strings"
	"unicode"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
	"halfspan/extract/pdf/glyphs"
)

// Some fonts call their signs by names that mean something else, and nothing
// in the file tells. What the sign is shows in its use: after n and CI before a
// number only an equals sign fits; a code before numbers without which
// intervals run backwards is a minus. Nothing is repaired that the paper itself
// does not show.

// signKey is one sign of one font.
type signKey struct{ font, text string }

// suspect reports whether a glyph's text may be a sign under a false name.
func suspect(text string) bool {
	switch text {
	case "´", "¼", "½", "þ", "Þ", "ð", "˘", "+", "o":
		return true
	}
	return !printable(text)
}

// learn looks at the use of each suspect sign and repairs what it proves.
func (r *reading) learn() {
	uses := r.suspects()
	keys := make([]signKey, 0, len(uses))
	for k := range uses {
		keys = append(keys, k)
	}
	sort.Slice(keys, func(i, j int) bool {
		return keys[i].font < keys[j].font || keys[i].font == keys[j].font && keys[i].text < keys[j].text
	})
	equals := map[string]bool{} // fonts whose ¼ is an equals sign
	for _, k := range keys {
		v := verdictOf(k, uses[k], r.hasPlusMinus())
		if v.text == "=" && k.text == "¼" {
			equals[k.font] = true
		}
		r.repair(k, uses[k], v)
	}
	for _, k := range keys {
		if text := besideQuarter[k.text]; text != "" && equals[k.font] {
			r.repair(k, uses[k], verdict{text: text, why: "the same font prints = under the name ¼, and these names go together in publishers' fonts"})
		}
	}
}

// besideQuarter are the signs of the fonts that print = under the name ¼.
var besideQuarter = map[string]string{"þ": "+", "ð": "(", "Þ": ")", "½": "["}

// suspects collects the uses of every suspect sign.
func (r *reading) suspects() map[signKey][]use {
	uses := map[signKey][]use{}
	for p := range r.out.Pages {
		page := &r.out.Pages[p]
		for i, g := range page.Glyphs {
			if g.Repaired || !suspect(g.Text) {
				continue
			}
			k := r.signOf(p, i)
			if g.Text == "o" && !afterP(page.Glyphs, i) {
				continue
			}
			left, right := around(page.Glyphs, i, func(j int) string {
				if page.Glyphs[j].Text == g.Text && r.signOf(p, j) == k {
					return mark
				}
				return page.Glyphs[j].Text
			})
			uses[k] = append(uses[k], use{p, i, left, right})
		}
	}
	return uses
}

// afterP reports whether the glyph before i is a lone p, so that an o may be
// the sign of "p < 0.05".
func afterP(all []paper.Glyph, i int) bool {
	for i--; i >= 0 && all[i].Text == " "; i-- {
	}
	return i >= 0 && (all[i].Text == "p" || all[i].Text == "P")
}

// signOf names the sign of a glyph. One whose text is unknown goes by its code.
func (r *reading) signOf(page, glyph int) signKey {
	p := &r.out.Pages[page]
	k := signKey{p.Fonts[p.Glyphs[glyph].Font], p.Glyphs[glyph].Text}
	if marks := r.marks[page]; marks != nil && k.text == string(unicode.ReplacementChar) {
		k.text += strconv.FormatUint(uint64(marks[glyph].Code), 16)
	}
	return k
}

// hasPlusMinus reports whether the paper prints ± under its own name.
func (r *reading) hasPlusMinus() bool {
	for p := range r.out.Pages {
		for _, g := range r.out.Pages[p].Glyphs {
			if g.Text == "±" {
				return true
			}
		}
	}
	return false
}

// verdict is what a sign was shown to be, and by what; text is empty where
// nothing was shown. only, where not nil, limits it to some of the uses.
type verdict struct {
	text, why string
	only      func(use) bool
}

func verdictOf(k signKey, uses []use, hasPlusMinus bool) verdict {
	if k.text == "o" {
		return lessThan(uses)
	}
	if s := symbolCode(k); s != "" && fits(s, uses) {
		return verdict{text: s, why: "its private code is that of this sign in the Symbol font, and its use fits"}
	}
	if k.text != "+" {
		if v := minusSign(uses); v.text != "" {
			return v
		}
		if v := acuteMinus(k, uses); v.text != "" {
			return v
		}
		if v := equalsSign(uses); v.text != "" {
			return v
		}
	}
	if k.text != "+" || !hasPlusMinus {
		return plusMinus(uses)
	}
	return verdict{}
}

// beforeEquals are words after which only an equals sign stands before a
// number; p is none of them, since < may follow it.
var beforeEquals = map[string]bool{
	"n": true, "N": true, "CI": true, "OR": true, "RR": true, "HR": true, "SD": true, "SE": true, "SEM": true,
	"t": true, "F": true, "df": true, "d.f": true, "M": true, "Z": true, "z": true, "𝑛": true, "𝑁": true,
}

// mayEqual are words after which an equals sign often stands, and others too.
var mayEqual = map[string]bool{
	"p": true, "P": true, "r": true, "R": true, "b": true, "B": true, "d": true, "k": true, "R2": true, "I2": true,
	"χ2": true, "β": true, "α": true, "κ": true, "𝑝": true, "𝑃": true,
}

func equalsSign(uses []use) verdict {
	fit, may, numbers := 0, 0, 0
	for _, u := range uses {
		if !startsNumber(u.right) {
			continue
		}
		numbers++
		switch word, _ := before(u.left); {
		case beforeEquals[word]:
			fit++
		case mayEqual[word]:
			may++
		}
	}
	if fit < 2 || numbers*2 < len(uses) || (fit+may)*10 < numbers*6 {
		return verdict{}
	}
	return verdict{text: "=", why: fmt.Sprintf("it stands %d times between a word such as n, CI or SD and a number", fit)}
}

// interval finds two numbers joined as bounds, each perhaps with the sign in
// question before it.
var interval = pattern.MustCompile(`(` + mark + `?) ?(\d+(?:[.·]\d+)?) ?(?:,|;|to|–|-|—|and) ?(` + mark + `?) ?(\d+(?:[.·]\d+)?)`)

// opener is what stands before an interval: a bracket, or the level.
var opener = pattern.MustCompile(`(?:[(\[]|CI:?,?|interval:?|[(\[]?95 ?% ?CI:?,?) ?$`)

func minusSign(uses []use) verdict {
	fit, against, mended, broken := 0, 0, 0, 0
	for _, u := range uses {
		word, gap := before(u.left)
		switch {
		case !startsNumber(u.right):
			against++
		case word != "" && !gap && isDigit(lastRune(word)):
			against++ // between two numbers: not a sign of the second
		default:
			fit++
		}
		line := u.left + mark + u.right
		for _, m := range interval.FindAllStringSubmatchIndex(line, -1) {
			// Every interval is looked at from the first sign in it.
			first := m[2]
			if m[3] == m[2] {
				first = m[6]
			}
			if first != len(u.left) || !opener.MatchString(line[:m[0]]) {
				continue
			}
			lo, hi := number64(line[m[4]:m[5]]), number64(line[m[8]:m[9]])
			plain := lo <= hi
			if m[3] > m[2] {
				lo = -lo
			}
			if m[7] > m[6] {
				hi = -hi
			}
			switch signed := lo <= hi; {
			case signed && !plain:
				mended++
			case plain && !signed:
				broken++
			}
		}
	}
	if mended < 1 || broken > 0 || fit < 2 || against*4 > fit {
		return verdict{}
	}
	return verdict{text: "−", why: fmt.Sprintf("it stands %d times before a number, and %d intervals run backwards without it, none with it", fit, mended),
		only: func(u use) bool { return startsNumber(u.right) }}
}

// acuteMinus takes an acute accent that stands before decimal numbers and
// nowhere else: it has no other meaning there.
func acuteMinus(k signKey, uses []use) verdict {
	if k.text != "´" || len(uses) < 3 {
		return verdict{}
	}
	for _, u := range uses {
		word, gap := before(u.left)
		if word != "" && !gap || !decimalNext.MatchString(u.right) {
			return verdict{}
		}
	}
	return verdict{text: "−", why: fmt.Sprintf("it stands %d times before a decimal number and nowhere else", len(uses))}
}

var decimalNext = pattern.MustCompile(`^ ?\d*[.·]\d`)

func number64(s string) float64 {
	v, _ := strconv.ParseFloat(strings.ReplaceAll(s, "·", "."), 64)
	return v
}

var (
	meanBefore = pattern.MustCompile(`(?i)\b(?:means?|averages?|x̄|values?)[ ,(\[]*$`)
	spreadNext = pattern.MustCompile(`^[ (\[]*(?:[sS]\.? ?[dD]\b|[sS]\.? ?[eE]\b|SEM\b|[sS]\.[eE]\.[mM]|[sS]tandard|STD\b|[sS]td\b)`)
)

// plusMinus needs the paper to say it: "mean + SD", with the same sign between
// numbers.
func plusMinus(uses []use) verdict {
	said, between := 0, 0
	fits := func(u use) bool {
		return endsNumber(u.left) && startsNumber(u.right) || meanBefore.MatchString(u.left) && spreadNext.MatchString(u.right)
	}
	for _, u := range uses {
		if meanBefore.MatchString(u.left) && spreadNext.MatchString(u.right) {
			said++
		} else if fits(u) {
			between++
		}
	}
	if said < 1 || between < 2 {
		return verdict{}
	}
	return verdict{text: "±", only: fits,
		why: fmt.Sprintf("the paper writes it between mean and SD or SE (%d times) and between numbers (%d times)", said, between)}
}

// lessThan takes the letter o between p and a number.
func lessThan(uses []use) verdict {
	fits := func(u use) bool {
		word, _ := before(u.left)
		return (word == "p" || word == "P") && smallNumber.MatchString(u.right)
	}
	n := 0
	for _, u := range uses {
		if fits(u) {
			n++
		}
	}
	if n == 0 {
		return verdict{}
	}
	return verdict{text: "<", only: fits, why: "the letter o stands between p and a number"}
}

var smallNumber = pattern.MustCompile(`^ ?0?[.·]0*\d`)

// symbolCode gives the sign that a private code U+F0xx means in the Symbol
// font, which many programs write so.
func symbolCode(k signKey) string {
	r := firstRune(k.text)
	lower := strings.ToLower(k.font)
	if r < 0xF020 || r > 0xF0FF || strings.Contains(lower, "dings") {
		return ""
	}
	return glyphs.SymbolText(byte(r - 0xF000))
}

// fits reports whether a sign's use is that of the sign s.
func fits(s string, uses []use) bool {
	n := 0
	for _, u := range uses {
		right, left := startsNumber(u.right), endsNumber(u.left)
		word, _ := before(u.left)
		ok := false
		switch s {
		case "±", "×":
			ok = right && left || meanBefore.MatchString(u.left) && spreadNext.MatchString(u.right)
		case "−":
			ok = right
		case "=", "<", ">", "≤", "≥":
			ok = right && (word == "" || unicode.IsLetter(lastRune(word)))
		default:
			ok = true
		}
		if ok {
			n++
		}
	}
	return n*10 >= len(uses)*9
}

// repair puts a verdict into the pages.
func (r *reading) repair(k signKey, uses []use, v verdict) {
	if v.text == "" {
		return
	}
	for _, u := range uses {
		if v.only != nil && !v.only(u) {
			continue
		}
		page := &r.out.Pages[u.page]
		g := &page.Glyphs[u.glyph]
		from := g.Text
		g.Text, g.Repaired = v.text, true
		r.doubtRepair(page, g, repairKey{k.font, from, v.text}, v.why)
	}
}
