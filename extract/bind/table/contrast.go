package table

import (
	"strings"

	"halfspan/extract/pattern"
)

var vsForm = pattern.MustCompile(`(?i)^(?:.*?(?:\bfor |\bof |\bbetween |: ?|\bdifferences? (?:in means? )?|\bratio )\s*)?(.+?)\s*(?:\bvs\.?|\bversus|\bminus|\bcompared (?:with|to)|\brelative to| [-–−] |\s?—\s?)\s*(.+)$`)

// parseVs splits "A vs B", "A minus B", "A − B" into its arms.
func parseVs(s string) []string {
	m := vsForm.FindStringSubmatch(clean(s))
	if m == nil {
		m = colonPair.FindStringSubmatch(clean(s))
		if m == nil || !controls.MatchString(m[2]) || isContrast(fold(m[1])) {
			return nil
		}
	}
	if k := strings.LastIndexByte(m[1], '('); k >= 0 && !strings.Contains(m[1][k:], ")") && k+1 < len(m[1]) {
		m[1] = m[1][k+1:] // "Mass difference (syrup − water), kg"
		m[2] = cutAt(m[2], ")")
	}
	a, b := strings.Trim(m[1], edge+"()"), strings.Trim(m[2], edge)
	b = strings.Trim(cutAt(b, " (", " for ", " at ", ", "), edge+"()")
	if !hasLetter(a) && !hasDigit(a) || !hasLetter(b) && !hasDigit(b) || len(a) > 80 || len(b) > 80 {
		return nil
	}
	return []string{a, b}
}

// cutAt cuts s at the first of the marks.
func cutAt(s string, marks ...string) string {
	for _, m := range marks {
		if k := strings.Index(s, m); k > 0 {
			s = s[:k]
		}
	}
	return s
}

// beforeFor gives what is compared in "Odds ratio of A vs B for recovery".
func beforeFor(s string) string {
	if k := strings.LastIndex(fold(s), " for "); k > 0 && k+5 < len(s) {
		return s[k+5:]
	}
	return ""
}

var comparingWords = map[string]bool{"least": true, "square": true, "squares": true, "ls": true, "treatment": true, "difference": true, "differences": true, "effect": true,
	"effects": true, "between": true, "group": true, "groups": true, "comparison": true, "comparisons": true, "arm": true, "arms": true, "treatments": true, "by": true, "at": true}

// saysNothing reports that a group label of comparisons names no outcome:
// "Treatment differences by week 8 (least square means)".
func saysNothing(name string) bool {
	for _, w := range words(timeMark.ReplaceAllString(name, " ")) {
		if low := strings.ToLower(w); !statFiller[low] && !timeFiller[low] && !comparingWords[low] {
			return false
		}
	}
	return true
}

var betweenTwo = pattern.MustCompile(`(?i)\bdifferences?\b.*? between (.+?) and (.+)$`)

// againstTime is a difference from an earlier time.
var againstTime = pattern.MustCompile(`(?i)\bdifferences?\b.*?\b(?:compared (?:with|to)|vs\.?|versus|relative to|from|since) (?:the )?(?:baseline|start|outset|entry|pre-?(?:treatment|intervention|test|feeding)|(?:week|day|month|visit) \d+)(?: values?)?\b`)

// parseContrast takes the two arms from a heading of a difference.
func (f *frame) parseContrast(l label, x *context) {
	name := f.lex.name(l.text)
	if againstTime.MatchString(l.text) && !overOne.MatchString(againstTime.ReplaceAllString(l.text, " ")) {
		x.contrast, x.change, x.within = false, true, true
		return
	}
	if m := betweenTwo.FindStringSubmatch(l.text); m != nil && f.lex.isTime(fold(m[1])) && f.lex.isTime(fold(f.lex.name(m[2]))) {
		x.contrast, x.change, x.within = false, true, true
		return
	}
	if ab := parseVs(name); ab != nil && (f.lex.isTime(fold(ab[1])) || f.lex.timeIn(ab[1]) != "" && !f.isArm(fold(ab[1]))) {
		x.contrast, x.change = false, true // against baseline: a change inside one arm
		return
	}
	if ab := parseVs(name); ab != nil {
		x.arm, x.arm2 = ab[0], ab[1]
		x.armAt, x.armFrom = l, "heading"
	}
}

var (
	minusNote = pattern.MustCompile(`(?i)\b(?:differences?|estimates?|effects?)\b[^.;]{0,40}?\b(?:is|are|was|were|=|calculated as|defined as|as)\s+(?:the )?([\w+/ -]{2,40}?)\s+(?:minus|versus|vs\.?|compared with|[-–−])\s+(?:the )?([\w+/ -]{2,40}?)(?:[.,;)]|$)`)
	controls  = pattern.MustCompile(`(?i)\b(?:placebo|controls?|sham|usual care|standard care|vehicle|wait(?:ing)?[- ]?list|no (?:treatment|intervention)|natural course|comparator|saline|water)\b`)
	overOne   = pattern.MustCompile(`(?i)\b(?:over|versus|vs\.?|minus|compared (?:with|to)|relative to|against)\s+(?:the )?(placebo|controls?|sham|usual care|vehicle|[A-Z][\w-]*)\b`)
)

// differsWithin reports that every arm has a column of differences of its own,
// beside its values: they lie between its times, not between arms.
func (f *frame) differsWithin(path []label) bool {
	if len(path) < 2 {
		return false
	}
	own, arm := path[len(path)-1], path[len(path)-2]
	if own.cell == nil || arm.cell == nil || arm.cell.ColSpan < 2 || overOne.MatchString(own.text) || controls.MatchString(own.text) ||
		strings.Contains(fold(own.text), "between") || parseVs(own.text) != nil {
		return false
	}
	spans := 0
	for c := f.stub; c < f.tab.Cols; c++ {
		o := f.cellAt(arm.cell.Row, c)
		if o == nil || isBlankText(o.Text.S) || o.ColSpan < 2 {
			continue
		}
		same, values := 0, 0
		for k := c; k < min(c+o.ColSpan, f.tab.Cols); k++ {
			if len(f.heads[k]) == 0 || f.pColumn(k) {
				continue
			}
			low := f.heads[k][len(f.heads[k])-1]
			switch kind := f.partOf(low).kind; {
			case low.text == own.text:
				same++
			case kind == partArm || kind == partOther || kind == partContrast:
				return false
			case kind == partTime || f.columnRole(f.head, k).kind == roleBoth:
				values++
			}
		}
		if same != 1 || values == 0 {
			return false
		}
		spans++
	}
	return spans >= 2
}

// contrastArms fills in the arms of a difference that its heading leaves open:
// from a note, from "over placebo", from the table's two arms.
func (f *frame) contrastArms(e *estimate, x *context) {
	if x.arm2 != "" {
		x.arm, x.arm2 = f.fullArm(x.arm), f.fullArm(x.arm2)
		return
	}
	for _, n := range f.notes.list {
		if m := minusNote.FindStringSubmatch(clean(n.run.S)); m != nil {
			a, b := f.fullArm(m[1]), f.fullArm(m[2])
			x.arm, x.arm2 = a, b
			x.armAt, x.armFrom = label{text: clean(n.run.S), raw: clean(n.run.S)}, n.from
			return
		}
	}
	arms := f.armNames()
	if x.arm == "" && len(arms) == 2 {
		a, b := arms[0], arms[1]
		if controls.MatchString(a) && !controls.MatchString(b) {
			a, b = b, a
		}
		x.arm, x.arm2, x.armFrom = a, b, "the table's two arms"
		return
	}
	if f.armRows && len(arms) == 2 && x.arm != "" {
		a, b := arms[0], arms[1]
		if controls.MatchString(a) && !controls.MatchString(b) {
			a, b = b, a
		}
		x.arm, x.arm2, x.armFrom = a, b, "the table's two arms"
		return
	}
	if x.arm == "" {
		if x.arm = f.armOfColumn(e.row, e.col); x.arm != "" {
			x.armFrom = f.columnName(e.col)
		}
	}
	ln := &f.lines[e.row]
	for _, l := range append(append([]label{}, ln.labels...), f.path(e.row, e.col)...) {
		if m := overOne.FindStringSubmatch(l.text); m != nil {
			if x.arm != "" {
				x.arm2 = f.fullArm(m[1])
				return
			}
		}
	}
	x.armGuess = true
}

// fullArm gives the printed name of the arm that a short form means.
func (f *frame) fullArm(s string) string {
	w := armWords(s)
	if w == "" {
		return s
	}
	hit, hits := "", 0
	for _, a := range f.armNames() {
		o := armWords(a)
		if o == w {
			return a
		}
		if strings.Contains(o, w) {
			hit = a
			hits++
		}
	}
	if hits == 1 {
		return hit
	}
	return s
}
