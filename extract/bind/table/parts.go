package table

import (
	"strings"

	"halfspan/extract/pattern"
)

// kind of a part of a heading.
type partKind uint8

const (
	partEmpty partKind = iota
	partTime
	partArm
	partContrast
	partOther
)

// part is one heading or label with what it is taken for.
type part struct {
	l        label
	name     string // without n, statistics and marks
	measured string // what a heading of an arm says of the outcome
	kind     partKind
}

var armWord = pattern.MustCompile(`(?i)\b(?:placebo|controls?|sham|usual care|standard (?:care|treatment|therapy)|intervention|treatment|experimental|vehicle|wait(?:ing)?[- ]?list|arms?|groups?|comparator|active|exposed|unexposed|treated|untreated|cases)\b`)

// partOf classifies one heading or label.
func (f *frame) partOf(l label) part {
	key := partKey{l.cell, l.text}
	if p, ok := f.memo.parts[key]; ok {
		p.l = l
		return p
	}
	p := f.classify(l)
	f.memo.parts[key] = p
	return p
}

func (f *frame) classify(l label) part {
	p := part{l: l, name: f.lex.name(l.text)}
	low := fold(p.name)
	switch {
	case low == "" && isContrast(fold(l.text)):
		p.kind = partContrast
	case low == "":
		p.kind = partEmpty
		if f.lex.isTime(fold(l.text)) {
			p.kind, p.name = partTime, tidyTime(l.text)
		}
	case boundHeading(fold(l.text)) != 0:
		p.kind, p.name = partEmpty, ""
	case isUnit(p.name) && len(p.name) > 1 && !strings.Contains(p.name, " "):
		p.kind, p.name = partEmpty, "" // a unit alone names no group
	case countOf.MatchString(nPhrase.ReplaceAllString(fold(l.text), " ")) && isCountHeading(clean(nPhrase.ReplaceAllString(fold(l.text), " "))):
		p.kind, p.name = partEmpty, ""
	case isPHeading(low) || isCountHeading(low) && !nPhrase.MatchString(l.text) && !f.overValues(l):
		p.kind, p.name = partEmpty, ""
	case l.cell != nil && l.cell.Row < f.head && l.cell.Col >= f.stub && f.crossTime[l.cell.Row]:
		p.kind, p.name = partTime, tidyTime(l.text)
	case f.namesReference(p.name):
		p.kind = partOther
	case f.deltaOfArms(p.name):
		p.kind = partContrast
	case isContrast(low) || f.lex.compares(l.text) && !f.isArm(low) || f.armMinusArm(p.name):
		p.kind = partContrast
	case f.lex.isTime(low):
		p.kind, p.name = partTime, tidyTime(l.text)
	case analysisName.MatchString(p.name):
		p.kind = partOther
	case f.isArm(low) || nPhrase.MatchString(l.text) && hasArmShape(l.text):
		p.kind = partArm
		if l.cell != nil && l.cell.Row < f.head {
			p.measured, p.name = splitMeasured(p.name)
		}
	case l.cell != nil && l.cell.Row < f.head && l.cell.Col >= f.stub && f.timeRow[l.cell.Row]:
		p.kind, p.name = partTime, tidyTime(l.text)
	case l.cell != nil && l.cell.Row < f.head && l.cell.Col >= f.stub && f.armRow[l.cell.Row]:
		p.kind = partArm // beside a heading that names an arm
	default:
		p.kind = partOther
	}
	return p
}

var dashed = pattern.MustCompile(`^(.{3,40}?)(?: ?[—−] ?| [-–] )(.{3,40})$`)

// colonPair is a pair of names with a colon, as ratios are headed.
var colonPair = pattern.MustCompile(`^([^:;,()]{2,40}?)\s*: ?([^:;,()]{2,40})$`)

// captionRatio reports that the caption announces ratios.
func (f *frame) captionRatio() bool {
	for _, q := range f.lex.phrase(f.tab.Caption.S).pairs {
		if q.Statistic == "ratio" {
			return true
		}
	}
	return false
}

// armMinusArm reports one arm less another: "Syrup − control".
func (f *frame) armMinusArm(name string) bool {
	m := dashed.FindStringSubmatch(name)
	if c := colonPair.FindStringSubmatch(name); m == nil && c != nil && f.captionRatio() {
		m = c // "Syrup:Control" below "Ratio of geometric means"
	}
	return m != nil && f.isArm(fold(m[1])) && f.isArm(fold(m[2])) && fold(m[1]) != fold(m[2])
}

var countOf = pattern.MustCompile(`^\s*(?:no\.?|number|nr\.?|n\.?) of `)

// rowPart classifies a label before a row: there an n does not make an arm, and
// a time stands without other words.
func (f *frame) rowPart(l label) part {
	p := f.partOf(l)
	low := fold(p.name)
	switch {
	case p.kind == partOther && !hasLetter(p.name) && hasDigit(p.name) && f.timeStub(l) != "":
		p.kind, p.name = partTime, f.timeStub(l)
	case p.kind == partArm && !f.isArm(low):
		if !f.armRows {
			p.kind = partOther
		}
	case p.kind == partTime && (measuredTime.MatchString(low) || !bareTime(low) && !f.phasePair(low)):
		p.kind, p.name = partOther, f.lex.name(l.text)
	}
	return p
}

var timeHead = pattern.MustCompile(`(?i)^(?:time(?: ?points?)?|weeks?|days?|months?|hours?|minutes?)(?: (?:after|since|post)[^()]*)?(?:\s*(?:[(\[]|, )(h|hrs?|hours?|min|mins?|minutes?|s|sec|d|days?|w|wks?|weeks?|months?|y|yrs?|years?)[)\]]?)?$`)

// timeStub gives the time that a bare number in the stub stands for, where the
// heading over it names times: 4 under "Week", 0.5 under "Time (h)".
func (f *frame) timeStub(l label) string {
	if l.cell == nil || l.cell.Col >= f.stub || l.cell.Row < f.head || len(f.heads[l.cell.Col]) == 0 {
		return ""
	}
	head := f.heads[l.cell.Col][len(f.heads[l.cell.Col])-1].text
	m := timeHead.FindStringSubmatch(head)
	switch {
	case m == nil:
		return ""
	case m[1] != "":
		return l.text + " " + m[1]
	}
	return strings.TrimSuffix(cutAt(head, " "), "s") + " " + l.text
}

var phaseName = pattern.MustCompile(`^(pre|post|before|after)[- ](?:the )?([a-z]+?)s?$`)

// phasePair reports that a label and another name the phases before and after
// the same: "Pre-nectar", "Post-nectar".
func (f *frame) phasePair(low string) bool {
	m := phaseName.FindStringSubmatch(low)
	if m == nil {
		return false
	}
	for r := f.head; r < f.tab.Rows; r++ {
		for _, l := range f.lines[r].labels {
			o := phaseName.FindStringSubmatch(fold(f.lex.name(l.text)))
			if o != nil && o[2] == m[2] && o[1] != m[1] {
				return true
			}
		}
	}
	return false
}

// measuredTime is a time that was measured: "Time (s)" before a row.
var measuredTime = pattern.MustCompile(`^(?:total |mean )?times?(?:,| \()\s*(?:ms|s|secs?|seconds?|mins?|minutes?)\b`)

// overValues reports that estimates with spreads stand under a heading or beside
// a label, so that "Men" names a group and no number of men.
func (f *frame) overValues(l label) bool {
	switch {
	case l.cell == nil:
		return false
	case l.cell.Row >= f.head:
		return l.cell.Col < f.stub && f.spreadCells(l.cell.Row) > 0
	}
	for c := max(l.cell.Col, f.stub); c < min(l.cell.Col+l.cell.ColSpan, f.tab.Cols); c++ {
		if f.anySpread(c) {
			return true
		}
	}
	return false
}

// hasArmShape keeps "All (n = 57)" apart: names with an n are arms.
func hasArmShape(s string) bool { return len(s) < 120 }

var (
	spaceBracket   = pattern.MustCompile(`\(\s*\)|\[\s*\]`)
	meanBracket    = pattern.MustCompile(`(?i)\(\s*(?:(?:adjusted|unadjusted|estimated|marginal|ls|least[- ]squares?)\s+)*(?:means?|medians?)[\s±,;]*\)`)
	levelBracket   = pattern.MustCompile(`[(\[]\s*9\d(?:[.]\d)?\s*%\s*[)\]]`)
	percentBracket = pattern.MustCompile(`[(]\s*%\s*[)]`)
	loneMark       = pattern.MustCompile(`\s*[,;:]\s*(?:[,;:]\s*)*([)\]])`)
	edge           = " ,;:-–—/.±"
)

// lettersPercent is a short name whose bracket holds only a percent sign: the
// letters are what was measured, not the statistic they may stand for elsewhere.
var lettersPercent = pattern.MustCompile(`^\s*(?:VE|AUC|ER|RR|HR|VR)\s*\(\s*%\s*\)\s*$`)

// spreadAndN is a bracket that announces the n behind a spread: "mean ± SD (n)".
var spreadAndN = pattern.MustCompile(`(?i)(\b(?:sds?|sem?|ci)\b\)?)[,;]?\s*[(\[]\s*n\s*[)\]]`)

// nameOf takes n's, statistics and levels out of a heading: what it names.
func nameOf(s string) string {
	if lettersPercent.MatchString(s) {
		return clean(s)
	}
	s = spreadAndN.ReplaceAllString(s, "$1")
	t := stripTerms(clean(s))
	t = worded.ReplaceAllString(t, " ")
	t = meanBracket.ReplaceAllString(levelBracket.ReplaceAllString(t, " "), " ")
	if nPhrase.MatchString(s) {
		t = percentBracket.ReplaceAllString(t, " ") // of the counts below
	}
	for k := 0; k < 3; k++ {
		t = spaceBracket.ReplaceAllString(t, " ")
	}
	t = strings.ReplaceAll(t, "±", " ")
	t = loneMark.ReplaceAllString(t, "$1")
	t = spaceBracket.ReplaceAllString(t, " ")
	t = clean(t)
	t = strings.ReplaceAll(strings.ReplaceAll(t, " )", ")"), "( ", "(")
	t = strings.TrimSuffix(strings.Trim(t, edge), " for") // "Mass (kg) for:" over the arms
	t = unbalanced(dropStatParts(t))
	if !hasLetter(t) && !hasDigit(t) {
		return ""
	}
	ws := words(t)
	left := 0
	for _, w := range ws {
		if !statFiller[w] {
			left++
		}
	}
	if left == 0 {
		return ""
	}
	return t
}

// dropStatParts drops the parts of a list, after the first, that hold only words
// of statistics: "Mass, kg, mean".
func dropStatParts(s string) string {
	parts := strings.Split(s, ",")
	out := parts[:1]
	for _, p := range parts[1:] {
		keep := len(words(p)) == 0 || isUnit(clean(p))
		for _, w := range words(p) {
			keep = keep || !statFiller[w]
		}
		if keep && strings.TrimSpace(p) != "" {
			out = append(out, p)
		}
	}
	return strings.Join(out, ",")
}

var statFiller = map[string]bool{"value": true, "values": true, "adj": true, "adjusted": true, "unadjusted": true, "crude": true, "estimate": true,
	"estimates": true, "est": true, "of": true, "the": true, "and": true, "or": true, "in": true, "for": true, "as": true, "dif": true, "diff": true,
	"statistic": true, "statistics": true, "a": true, "b": true, "m": true, "min": true, "max": true, "std": true, "error": true, "score": true, "scores": true, "result": true, "results": true, "to": true,
	"unless": true, "otherwise": true, "stated": true, "data": true, "are": true, "is": true, "estimated": true, "observed": true, "multivariate": true, "univariate": true,
	"multivariable": true, "univariable": true, "model": true, "mean": true, "means": true, "median": true, "medians": true}

// unbalanced drops a bracket that lost its partner when terms were taken out.
func unbalanced(s string) string {
	for _, pr := range [][2]string{{"(", ")"}, {"[", "]"}} {
		o, c := strings.Count(s, pr[0]), strings.Count(s, pr[1])
		if o > c && strings.HasSuffix(s, pr[0]) {
			s = strings.TrimSuffix(s, pr[0])
		}
		if c > o && strings.HasSuffix(s, pr[1]) {
			s = strings.TrimSuffix(s, pr[1])
		} else if o > c {
			if k := strings.LastIndex(s, pr[0]); k > 0 && len(s)-k < 4 {
				s = s[:k]
			} else if k > 0 {
				return strings.Trim(s, edge) + pr[1]
			}
		}
	}
	return strings.Trim(s, edge)
}

var contrastWord = pattern.MustCompile(`(?i)\bdiff(?:erences?|s)?\b|\b(?:treatment|intervention|group) effects?\b|\beffect of\b|\bvs\.?\b|\bversus\b|\bcompared (?:with|to)\b|\bbetween[- ]groups?\b|\best\.? of (?:the )?effect\b|\bestimates? of (?:the )?(?:treatment )?effect\b|\beffect estimates?\b|\bminus\b`)

func isContrast(low string) bool { return contrastWord.MatchString(low) }

// isArm reports that the folded name is an arm by its words or because a table
// of the paper gives it an n.
func (f *frame) isArm(low string) bool {
	if f.rowArms[low] || f.vocab.groups[low] && !outcomeWord.MatchString(low) || f.vocab.arms[low] || f.vocab.arms[armWords(low)] {
		return true
	}
	return armWord.MatchString(low) && len(words(low)) <= 6 && f.lex.unit(low) == "" && !outcomeWord.MatchString(low)
}

var outcomeWord = pattern.MustCompile(`(?i)\b(?:rate|score|duration|time|days|number|level|index|satisfaction|success|failure|adherence|compliance|cost|response|locus|pain|symptom|sessions?|received|effect|(?:mental|motor|postural|balance|inhibitory|impulse|cognitive|executive|attention(?:al)?|emotional|glyca?emic|metabolic|diabetes|asthma|disease|symptom|weight|blood pressure|rate|birth|head|self|perceived|behaviou?ral) control|age groups?|average)\b`)

var onlyArmWord = pattern.MustCompile(`(?i)^(?:the )?(?:interventions?|treatments?|groups?|arms?|study groups?|regimens?|conditions?)$`)

// spannedBy reports that the arm's heading is a general word over columns with
// names of their own: "Intervention" over three regimens.
func (f *frame) spannedBy(path []label) bool {
	for _, l := range path {
		if onlyArmWord.MatchString(f.lex.name(l.text)) && l.cell != nil && l.cell.ColSpan > 1 {
			return true
		}
	}
	return false
}

// columnStatistic gives the statistic that the estimate's column announces.
func (f *frame) columnStatistic(e *estimate) string {
	for _, q := range f.columnRole(e.row, e.col).pairs {
		if q.Statistic != "" {
			return q.Statistic
		}
	}
	return ""
}

func without(all, taken []string) []string {
	drop := map[string]bool{}
	for _, t := range taken {
		drop[t] = true
	}
	var out []string
	for _, a := range all {
		if !drop[a] {
			out = append(out, a)
		}
	}
	return out
}

// armBelow reports that one of the headings names an arm.
func (f *frame) armBelow(path []label) bool {
	for _, l := range path {
		if k := f.partOf(l).kind; k == partArm || k == partOther {
			return true
		}
	}
	return false
}

// comparesArms reports that a heading announces a statistic between arms.
func comparesArms(p *phrase) bool {
	for _, q := range p.pairs {
		switch q.Statistic {
		case "ratio":
			if q.Measure != "" || p.onlyTerms {
				return true // else it may be what was measured: the E/A ratio
			}
		case "mean difference", "risk difference":
			return true
		}
	}
	return false
}

var subgroupName = pattern.MustCompile(`(?i)^(?:all|total|overall|males?|females?|men|women|boys?|girls?|yes|no|low|medium|moderate|high|easy|difficult|insufficient|good|poor|normal|overweight|obese|underweight|single|married|present|absent|combined|[<>≤≥]?\s*\d+(?:\.\d+)?\s*(?:[-–]\s*\d+(?:\.\d+)?)?(?:\s*(?:years?|yrs?|y))?(?:\s*or (?:more|less|older|younger))?)$`)

func (f *frame) subgroupLike(name string) bool {
	return subgroupName.MatchString(name) || strings.HasPrefix(fold(name), "all ") && isCountHeading(fold(name))
}
