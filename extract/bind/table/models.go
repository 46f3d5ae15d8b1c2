package table

import (
	"strings"

	"halfspan/extract/pattern"
)

// predictors announces estimates for what predicts an outcome.
var predictors = pattern.MustCompile(`(?i)\bpredictors?\b|\b(?:risk |associated |prognostic )?factors? (?:associated|influencing|related|affecting|for|predicting)\b|\bdeterminants?\b|\bassociations? (?:between|of)\b|\bcorrelates\b`)

// modelColumns reports that the data columns hold nothing but ratios and
// coefficients: estimates of models, over which a heading names the outcome of
// the model and no arm.
func (f *frame) modelColumns() bool {
	fitted := regression.MatchString(f.tab.Caption.S) || predictors.MatchString(f.tab.Caption.S)
	found := 0
	for c := f.stub; c < f.tab.Cols; c++ {
		if f.pColumn(c) {
			continue
		}
		role := f.columnRole(f.head, c)
		switch role.kind {
		case roleP, roleTest, roleN, roleSpread, roleBound:
			continue
		}
		stat := ""
		only := f.lex.phrase(role.label.text).onlyTerms
		for _, q := range role.pairs {
			if q.Statistic != "" && (only || q.Spread != "") {
				stat = q.Statistic // not the beta of a name
				break
			}
		}
		switch {
		case stat == "ratio" && fitted && partNamed(role), stat == "coefficient":
			found++
		case stat == "" && fitted && (role.kind == roleEstimate || role.kind == roleNone && f.estimates(c)):
			found++
		default:
			return false
		}
	}
	return found > 0
}

// partNamed reports that the ratio of a heading is of a kind that is named.
func partNamed(r role) bool {
	for _, q := range r.pairs {
		if q.Statistic == "ratio" && q.Measure != "" {
			return true
		}
	}
	return false
}

var estimateHead = pattern.MustCompile(`(?i)\b(?:estimates?|coeff?(?:icients?|s)?|effects?|beta|β)\b`)

// estimates reports a column that is headed by a word for an estimate.
func (f *frame) estimates(c int) bool {
	hs := f.heads[c]
	return len(hs) > 0 && estimateHead.MatchString(hs[len(hs)-1].text)
}

// corrected are headings of differences from an arm that are not called so:
// "placebo-corrected change", "ΔΔ mass".
var corrected = pattern.MustCompile(`(?i)\b(placebo|vehicle|sham|control|water)[- ](?:corrected|adjusted|subtracted)\b|([Δ∆]\s?[Δ∆])|\bdouble[- ]delta\b`)

// correctedFor gives the arm from which the values under a heading are
// differences; "" where it speaks of none.
func (f *frame) correctedFor(s string) string {
	m := corrected.FindStringSubmatch(s)
	switch {
	case m == nil:
		return ""
	case m[1] != "":
		return m[1]
	}
	if m := corrected.FindStringSubmatch(f.tab.Caption.S); m != nil && m[1] != "" {
		return m[1]
	}
	return "placebo"
}

// correctedCaption gives the arm of a caption that says so of the whole table:
// no column or row prints the values of that arm.
func (f *frame) correctedCaption() string {
	m := corrected.FindStringSubmatch(f.tab.Caption.S)
	if m == nil || m[1] == "" {
		return ""
	}
	for _, a := range f.armNames() {
		if strings.Contains(fold(a), fold(m[1])) {
			return ""
		}
	}
	return m[1]
}

// deltaPair is the difference of two arms: "Δ syrup-water".
var deltaPair = pattern.MustCompile(`^[Δ∆]\s*([^-–−]{2,30}?)\s?[-–−]\s?([^-–−]{2,30})$`)

// deltaOfArms reports a heading that names the difference of two arms with a
// delta.
func (f *frame) deltaOfArms(name string) bool {
	m := deltaPair.FindStringSubmatch(name)
	return m != nil && (f.isArm(fold(m[1])) || f.isArm(fold(m[2])))
}

// againstReference is a group label of categories with the one that they are
// compared with: "Hive type (vs. wooden)".
var againstReference = pattern.MustCompile(`(?i)^([^()]+)\((?:vs\.?|versus|compared (?:with|to)|ref(?:erence)?\.?[:=]?)\s+([^()]+)\)$`)

// namesReference reports such a label; two arms are a comparison.
func (f *frame) namesReference(name string) bool {
	m := againstReference.FindStringSubmatch(name)
	return m != nil && !f.isArm(fold(clean(m[1]))) && !f.isArm(fold(clean(m[2])))
}

// measuredInArm is a heading that names both what was measured and the arm:
// "Flights made in the syrup group".
var measuredInArm = pattern.MustCompile(`(?i)^(.{4,80}) in (?:the )?([^()]{2,40} (?:groups?|arms?))$`)

// splitMeasured parts such a heading.
func splitMeasured(name string) (measured, arm string) {
	m := measuredInArm.FindStringSubmatch(name)
	if m == nil || strings.Contains(fold(m[1]), "difference") {
		return "", name
	}
	return clean(m[1]), clean(m[2])
}

// doseName is a name with a dose outside brackets: "Syrup 20 mg".
var doseName = pattern.MustCompile(`^[^()]*\d(?:[.,]\d+)?\s?(?:mg|g|kg|[µμ]g|mcg|ng|IU|U|mL|ml|mmol|mg/kg)\b`)

// doseColumns reports that the lowest names over most data columns hold a dose.
func (f *frame) doseColumns() bool {
	with, all := 0, 0
	for c := f.stub; c < f.tab.Cols; c++ {
		if f.pColumn(c) {
			continue
		}
		for k := len(f.heads[c]) - 1; k >= 0; k-- {
			if p := f.partOf(f.heads[c][k]); p.kind == partOther || p.kind == partArm {
				all++
				if doseName.MatchString(p.name) {
					with++
				}
				break
			}
		}
	}
	return with >= 2 && 2*with > all
}

// measuredHead reports that one heading with a unit stands over all names of the
// data columns: it says what was measured, so that the names below do not.
func (f *frame) measuredHead() bool {
	for r := 0; r < f.head-1; r++ {
		cell := f.grid[r][f.stub]
		if cell == nil || cell.ColSpan < 2 || f.lex.unit(f.label(cell).text) == "" {
			continue
		}
		all, names := true, map[string]bool{}
		for c := f.stub; c < f.tab.Cols; c++ {
			if f.pColumn(c) {
				continue
			}
			all = all && f.grid[r][c] == cell
			if low := f.heads[c]; len(low) > 1 {
				if p := f.partOf(low[len(low)-1]); p.kind == partOther || p.kind == partArm {
					names[fold(p.name)] = true
				}
			}
		}
		if all && len(names) >= 2 {
			return true
		}
	}
	return false
}

// category reports a row that is one level of a predictor: its estimate compares
// it with the reference row of its group. It is no subgroup.
func (f *frame) category(e *estimate) bool {
	ln := &f.lines[e.row]
	if len(ln.groups) == 0 || len(ln.labels) != 1 {
		return false
	}
	switch f.columnStatistic(e) {
	case "ratio", "coefficient", "risk difference", "mean difference":
		return f.referenceRow(e) >= 0
	}
	return false
}

// sameName gives the name of an arm as the table prints it first: "Group (1)",
// "Group(1)" and "group 1" are one.
func (f *frame) sameName(arm string) string {
	if arm == "" {
		return ""
	}
	key := strings.Join(words(arm), " ")
	for _, a := range f.armNames() {
		if strings.Join(words(a), " ") == key {
			return a
		}
	}
	return arm
}

// predicts reports an estimate of a model, or a ratio of a table without arms: its
// row names a predictor.
func (f *frame) predicts(e *estimate) bool {
	if f.modelCols {
		return true
	}
	return !f.colArms && !f.armRows && f.columnStatistic(e) == "ratio"
}
