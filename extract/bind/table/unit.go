package table

import (
	"strings"

	"halfspan/extract/pattern"
)

var (
	unitBracket = pattern.MustCompile(`[(\[]([^()\[\]]{1,30})[)\]]`)
	unitComma   = pattern.MustCompile(`,\s*([^,;()]{1,20})$`)
	unitToken   = pattern.MustCompile(`^(?:[µμm]?(?:g|l|L|mol|M|m|s|V|W|Hz|Pa|J|U|IU|Eq|Osm|Gy|bar)|[kcdn](?:g|m|l|L|J|Pa|mol|cal|Hz|M|W|V|s)|%|°C|°|℃|mmHg|mm ?Hg|cmH2O|cm ?H2O|bpm|years?|yrs?|y|months?|mos?|weeks?|wks?|days?|d|hours?|hrs?|h|minutes?|mins?|min|seconds?|secs?|s|sec|ms|kcal|cal|MET|METs|points?|score|beats?|breaths?|€|\$|£|US\$|USD|EUR|AUD|units?|cells?|copies|IU|U|mIU|µIU|μIU|mEq|mEq|ng|pg|fg|kJ|MJ|torr|Torr|rpm|kPa|inches|in|lb|lbs|colony|colonies|frames?|mm2|mm3|cm2|cm3|m2|kg|cm|mm|nm|ml|mL|dl|dL|fl|fL|times|stones?|steps|servings?|portions?|pack-years|person-years|ppm|ppb|AU|a\.u\.|arb|1\.73|predicted|log10|log|body|weight|BW|bw|total|energy|protein|creatinine|Hg|O2|CO2|per|night|week|day|year|month|minute|hour|of|serum|plasma|Cr|cr|tissue|×|x|10|103|106|109|ηg|mmol|µmol|μmol|nmol|pmol|fmol|mg|µg|μg|mcg|gm|gms|Kg|Kgs|kgs|litres?|liters?|Meq|meq|mosm|mOsm|dyn|dynes|Nm|kN|lux|dB|dioptres?|diopters?|mV|kV|mA|mmhg|MmHg)[\d⁻−²³^*-]*$`)
)

// unitOf reads the unit from the row labels, the headings or the cell.
func (f *frame) unitOf(e *estimate, x *context) {
	ln := &f.lines[e.row]
	var ls []label
	for i := len(ln.labels) - 1; i >= 0; i-- {
		ls = append(ls, ln.labels[i])
	}
	for i := len(ln.groups) - 1; i >= 0; i-- {
		ls = append(ls, f.lines[ln.groups[i]].labels...)
	}
	path := f.path(e.row, e.col)
	for i := len(path) - 1; i >= 0; i-- {
		ls = append(ls, path[i])
	}
	if f.armRows || f.outcomeCols {
		// The column names the outcome.
		ls = append(append([]label{}, ls[len(ls)-len(path):]...), ls[:len(ls)-len(path)]...)
	}
	if x.outcomeGuess {
		ls = append(ls, x.outcomeAt)
	}
	if e.unit != "" && isUnit(e.unit) {
		x.unit, x.unitAt = e.unit, label{text: e.unit, raw: e.unit, cell: e.cell}
		return
	}
	if e.value.Percent {
		x.unit, x.unitAt = "%", label{text: "%", raw: "%", cell: e.cell}
		return
	}
	for i, l := range ls {
		if i >= len(ls)-len(path) && f.colArms && !x.outcomeGuess && !unitBracket.MatchString(l.text) {
			continue // "Drug 100 mg": a dose
		}
		if x.timeAt.cell != nil && l.cell == x.timeAt.cell && x.timeFrom != "row label" && hasDigit(l.text) && !unitBracket.MatchString(l.text) {
			continue // "Week 0 to 6 weeks": the unit of the time
		}
		if i >= len(ls)-len(path) && f.colArms && !x.outcomeGuess && nPhrase.MatchString(l.text) && percentBracket.MatchString(l.text) {
			continue // "Syrup n = 42 (%)": of the counts below
		}
		if l.cell != nil && l.cell.Col < f.stub && unitOfTime[f.lex.unit(l.text)] && f.lex.isTime(fold(l.text)) && !unitBracket.MatchString(l.text) {
			continue // "36 months" labels a time, and measures nothing
		}
		if l.cell != nil && l.cell.Col >= f.stub && f.partOf(l).kind == partTime && unitOfTime[f.lex.unit(l.text)] {
			continue // "Time after feeding (min)" over the columns
		}
		if u := f.lex.unit(l.text); u != "" && !(u == "%" && f.countsBeside(l)) {
			x.unit, x.unitAt = u, l
			return
		}
	}
}

// countsBeside reports that the percent sign of a label belongs to its counts:
// "mean (SD) or n (%)".
func (f *frame) countsBeside(l label) bool {
	p := f.lex.phrase(l.text)
	for _, q := range p.pairs {
		if q.Count && q.Percent {
			return true
		}
	}
	return p.onlyTerms && len(p.pairs) > 1
}

// unitIn finds the unit in a label: "Colony mass (kg)", "Flight time, min".
func unitIn(s string) string {
	s = nPhrase.ReplaceAllString(s, " ")
	ms := unitBracket.FindAllStringSubmatch(s, -1)
	for i := len(ms) - 1; i >= 0; i-- {
		for _, piece := range strings.FieldsFunc(ms[i][1], func(r rune) bool { return r == ';' || r == ',' }) {
			if piece = clean(piece); isUnit(piece) {
				return piece
			}
		}
	}
	t := nameOf(s)
	if m := unitBracket.FindStringSubmatch(t); m != nil && isUnit(clean(m[1])) {
		return clean(m[1]) // "Flight time (min ± SEM)"
	}
	if m := unitComma.FindStringSubmatch(t); m != nil && isUnit(clean(m[1])) {
		return clean(m[1])
	}
	if ws := strings.Fields(t); len(ws) > 1 && len(ws[len(ws)-1]) > 1 && plainUnit.MatchString(ws[len(ws)-1]) {
		return ws[len(ws)-1]
	}
	if strings.Contains(t, "%") && !strings.Contains(s, "95%") {
		return "%"
	}
	return ""
}

// plainUnit are units that stand behind a name without a comma or bracket.
var plainUnit = pattern.MustCompile(`^(?:years|yrs|cm|mm|kg|mg|mL|ml|mmHg|kcal|bpm|mg/dL|mg/dl|mmol/L|mmol/l|kg/m2|g/dL|g/dl|ng/mL|pg/mL|µg/L|μg/L|minutes|min|days|weeks|months|hours)$`)

// isUnit reports that every part of s is the sign of a unit.
func isUnit(s string) bool {
	parts := strings.FieldsFunc(s, func(r rune) bool {
		return r == '/' || r == ' ' || r == '·' || r == '.' || r == '*' || r == '\u00a0' || r == '∙' || r == '⋅'
	})
	if len(parts) == 0 || len(parts) > 6 {
		return false
	}
	for _, p := range parts {
		if !unitToken.MatchString(p) {
			return false
		}
	}
	return true
}
