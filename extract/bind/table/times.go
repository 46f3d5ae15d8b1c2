package table

import (
	"strings"

	"halfspan/extract/pattern"
)

// generalTime are headings over times that name none.
var generalTime = map[string]bool{"time": true, "times": true, "time point": true, "time points": true, "timepoint": true, "timepoints": true, "stage": true, "stages": true,
	"visit": true, "visits": true, "period": true, "periods": true, "phase": true, "assessment": true, "assessments": true, "assessment period": true, "measurement": true, "measurements": true}

var baselineCaption = pattern.MustCompile(`(?i)\bbaseline\b|\bdemographics?\b|\bcharacteristics of\b|\b(?:patient|participant|subject|clinical|sociodemographic|demographic|general)s?['’]? characteristics\b`)

// someTime reports that a heading or label of the table names a time: values at
// time points, whatever the caption says of changes.
func (f *frame) someTime() bool {
	for c := f.stub; c < f.tab.Cols; c++ {
		for _, l := range f.heads[c] {
			if f.partOf(l).kind == partTime && !f.lex.change(l.text) {
				return true
			}
		}
	}
	for r := f.head; r < f.tab.Rows; r++ {
		for _, l := range f.lines[r].labels {
			if f.rowPart(l).kind == partTime && strings.Contains(fold(l.text), "baseline") {
				return true
			}
		}
	}
	return false
}

// someChange reports that a heading or label of the table speaks of changes, so
// that the rest prints values.
func (f *frame) someChange() bool {
	for c := f.stub; c < f.tab.Cols; c++ {
		for _, l := range f.heads[c] {
			if f.lex.change(l.text) {
				return true
			}
		}
	}
	for r := f.head; r < f.tab.Rows; r++ {
		for _, l := range f.lines[r].labels {
			if f.lex.change(l.text) {
				return true
			}
		}
	}
	return false
}

var (
	captionArm    = pattern.MustCompile(`(?i)\b(?:within|in) the ([A-Z][\w+/-]*(?:[ -][\w+/-]+){0,3}?)[- ](?:group|arm)\b`)
	changeCaption = pattern.MustCompile(`(?i)\bchanges? (?:in|of)\b`)
	scoreCaption  = pattern.MustCompile(`(?i)\bmeans?\s*(?:\((?:sd|se|sem|95% ci)\)|± ?(?:sd|sem?))\s*(?:changes?|reductions?)\b|\bmean changes?\b|\bchanges? (?:from|scores?)\b|\bchange scores?\b|\b(?:within|intra)[- ]?(?:groups?|subjects?|arms?) (?:mean )?(?:differences?|changes?)\b`)
)

func captionOutcome(s string) string {
	s = clean(s)
	if k := strings.Index(s, ". "); k > 20 {
		s = s[:k]
	}
	return nameOf(s)
}

var pointInTime = pattern.MustCompile(`(?i)(?:\b(?:at|after|by|from|post)\s+(?:the )?(?:\d|one|two|three|four|five|six|seven|eight|nine|ten|twelve)|\b(?:weeks?|months?|days?|years?|hours?|visits?)\s+\d|\bbaseline\b|\bfollow-?up\b|\bend of\b|\bstudy end\b|\b\d+[- ](?:weeks?|months?|days?|years?|hours?)[- ](?:follow|post|after))`)

// rowTime finds a time point in a row label that also names an outcome. A
// period that belongs to the outcome ("pain in the previous 7 days", "costs in
// 12 months") is none.
func rowTime(s string) string {
	if len(s) > 90 || !pointInTime.MatchString(s) {
		return ""
	}
	for _, t := range timesIn(s) {
		k := strings.Index(fold(s), fold(t))
		if k < 0 || recall.MatchString(fold(s)[:k]) {
			continue
		}
		return t
	}
	return ""
}

// phaseEnd is a label that ends with before or after: "Mass pre-test".
var phaseEnd = pattern.MustCompile(`(?i)^(.*\pL.*?)[\s,]+\(?((?:pre|post)(?:[- ]?(?:test|treatment|intervention|training|operative(?:ly)?|op|exercise|surgery|feeding|therapy))?)\)?$`)

// phasedRow splits a row's label into what was measured and when, where another
// row says the same of the other time.
func (f *frame) phasedRow(name string) (stem, phase string, ok bool) {
	m := phaseEnd.FindStringSubmatch(name)
	if m == nil {
		return "", "", false
	}
	for r := f.head; r < f.tab.Rows; r++ {
		for _, l := range f.lines[r].labels {
			if o := phaseEnd.FindStringSubmatch(f.lex.name(l.text)); o != nil && fold(o[1]) == fold(m[1]) && fold(o[2]) != fold(m[2]) {
				return m[1], m[2], true
			}
		}
	}
	return "", "", false
}

var recall = pattern.MustCompile(`(?:previous|last|past|prior|preceding|within|during the|per|in|first|every|over)\s*$`)

func timesIn(s string) []string {
	var out []string
	seen := map[string]bool{}
	text := clean(s)
	for _, at := range timeMark.FindAllStringIndex(text, -1) {
		m := text[at[0]:at[1]]
		if ageBefore.MatchString(text[:at[0]]) {
			continue
		}
		low := fold(m)
		if !hasDigit(low) {
			switch strings.TrimPrefix(low, "at ") {
			case "baseline", "screening", "follow-up", "followup", "discharge", "admission", "study end", "at study end":
			default:
				if !strings.HasPrefix(low, "end of") && !strings.HasPrefix(low, "pre") && !strings.HasPrefix(low, "post") || len(low) < 6 {
					continue
				}
			}
		} else if !longUnit.MatchString(low) {
			continue
		}
		if !seen[low] {
			seen[low] = true
			out = append(out, strings.Trim(tidyTime(m), edge))
		}
	}
	return out
}

var ageBefore = pattern.MustCompile(`(?i)(?:\bage[ds]?(?: group)?[^.;,]{0,12}|[<>≤≥]\s*|\bolder than |\byounger than )$`)

var longUnit = pattern.MustCompile(`week|wk|month|mo\b|day|year|hour|visit|session|cycle|minute|\bmin\b|period|phase|wave|trimester|quarter`)

// tidyTime gives a time heading in one form: without statistics, n's and
// leading prepositions that vary.
func tidyTime(s string) string {
	t := nameOf(s)
	if t == "" {
		t = clean(s)
	}
	low := fold(t)
	for _, pre := range []string{"at ", "by ", "the "} {
		if strings.HasPrefix(low, pre) {
			t = t[len(pre):]
		}
	}
	return strings.Trim(t, edge)
}

var (
	timeUnit   = `(?:weeks?|wks?|w|months?|mos?|mths?|m|days?|d|years?|yrs?|y|hours?|hrs?|h|minutes?|mins?|min|seconds?|secs?|s)`
	oneNumber  = `(?:\d+(?:\.\d+)?(?:st|nd|rd|th)?|one|two|three|four|five|six|seven|eight|nine|ten|twelve|eighteen|twenty-four|first|second|third|fourth|fifth|sixth)`
	timeNumber = oneNumber + `(?:\s?[-–—−]\s?` + oneNumber + `)?`
	// timeMark is one mention of a time point or period.
	timeMark = pattern.MustCompile(`(?i)\b(?:` +
		`(?:at |after |by |to |from |for |in |within |until |on )?(?:the )?(?:` + timeNumber + `(?:\s?(?:to|and)\s?` + timeNumber + `)?[\s-]?` + timeUnit + `\b(?: ?(?:\.|post|after|pre|before|follow-?up|later))*` +
		`|(?:weeks?|wk|months?|mo|days?|years?|yr|hours?|hour|visit|session|cycle|period|phase|wave|quarter|trimester|time ?point|time|stage|round|occasion)\s?[-–−]?` + timeNumber + `(?:\s?(?:[-–—−]|to|and|through)\s?(?:(?:week|month|day|year|hour)s?\s?)?` + timeNumber + `)?\b(?: (?:weeks?|months?|days?|years?|hours?|min)\b)?` +
		`|(?:at |after |by |before |in |during )?(?:the )?(?:\d{1,2}(?:st|nd|rd|th)|first|second|third|fourth|fifth|sixth|last)[\s-](?:cycle|visit|session|period|phase|trimester|round|wave|quarter|assessment|measurement)s?\b` +
		`|[tv]\d{1,2}\b|d\d{1,3}\b|w\d{1,2}\b` +
		`|baseline|screening|enrol?lment|randomi[sz]ation|admission|discharge|follow-?up|end ?point|endline|midline|study end|washout|run-in|` +
		`pre-?(?:treatment|intervention|test|operative(?:ly)?|op|training|dose|exercise|surgery|neoadjuvant|induction|study|therapy)|post-?(?:treatment|intervention|test|operative(?:ly)?|op|training|dose|exercise|surgery|neoadjuvant|induction|study|therapy|trial)|` +
		`intra-?operative(?:ly)?|before|after|pre|post|initial|final|end of (?:the )?(?:study|trial|treatment|intervention|programme|program|therapy|training|follow-?up)|` +
		`start|entry|immediately|delivery|birth|(?:hours?|days?|weeks?|months?|years?) (?:before|after|prior to))\b` +
		`)`)
	changeMark = pattern.MustCompile(`(?i)(?:\b|^)(?:mean |average |absolute |relative |percent(?:age)? |% |net |adjusted |ls |least squares? mean )*(?:changes?\b|[Δ∆]|\bdelta\b|(?:reductions?|decreases?|increases?|declines?|improvements?|drops?|(?:weight|mass) (?:loss|gain))\b(?: in\b| from\b| over time\b| of\b| relative to\b| since\b|\s*\(|\s*$))(?: in score)?(?: from (?:the )?baseline| over time| vs\.? baseline| within groups?)?`)
)

// isTimeHeading reports that a folded heading names a time or a period and
// little else.
func isTimeHeading(low string) bool {
	low = noCovariates(low)
	if len(words(low)) == 0 || len(low) > 80 || ageWord.MatchString(low) || strings.IndexAny(low, "<>≤≥") == 0 {
		return false
	}
	if strings.Trim(low, " .:()") == "bl" {
		return true // baseline
	}
	if ws := words(low); len(ws) > 2 && (len(ws) < 7 || len(ws) < 14 && ws[0] != "day") && unitOfTime[ws[0]] && (ws[1] == "after" || ws[1] == "before" || ws[1] == "post" || ws[1] == "since" || ws[1] == "from") {
		return true
	}
	if ws := words(low); len(ws) <= 3 && phaseWord[ws[0]] || bareChange.MatchString(low) && onlyFiller(changeMark.ReplaceAllString(low, "")) {
		return true
	}
	rest := stripTerms(low)
	if k := strings.IndexByte(rest, '('); k > 0 && timeMark.FindString(rest[:k]) != "" {
		rest = rest[:k] // "Baseline (self-reported)"
	}
	t := timeMark.FindAllString(rest, -1)
	if len(t) == 0 {
		switch strings.TrimSpace(low) {
		case "time", "time point", "timepoint", "time points", "week", "weeks", "visit", "visits", "day", "days", "month", "months", "stage", "stages", "period", "phase", "assessment", "assessment period", "measurement", "time (h)", "time (min)", "time (weeks)", "time (days)", "time (months)":
			return true
		}
		return false
	}
	rest = timeMark.ReplaceAllString(rest, " ")
	rest = changeMark.ReplaceAllString(rest, " ")
	left := 0
	for _, w := range words(rest) {
		if !timeFiller[w] && hasLetter(w) {
			left++
		}
	}
	return left == 0 || left == 1 && len(t) > 0 && len(words(low)) >= 3 && strings.ContainsAny(low, "0123456789")
}

// onlyFiller reports that no word of s names anything: "Change in score, mean".
func onlyFiller(s string) bool {
	for _, w := range words(s) {
		if !statFiller[w] {
			return false
		}
	}
	return true
}

var unitOfTime = map[string]bool{"minutes": true, "minute": true, "min": true, "hours": true, "hour": true, "h": true, "days": true, "day": true, "weeks": true, "week": true, "months": true, "month": true, "years": true, "year": true, "time": true}

var ageWord = pattern.MustCompile(`\bage[ds]?\b`)

// bareChange is a heading that says change and nothing else: a column beside
// those of the times.
var bareChange = pattern.MustCompile(`changes?\b|[δ∆]|\bdelta\b`)

// phaseWord begins headings of the time before, during or after something.
var phaseWord = map[string]bool{"pre": true, "post": true, "before": true, "after": true, "during": true, "preoperative": true, "postoperative": true, "pretreatment": true, "posttreatment": true, "pretest": true, "posttest": true}

// abbreviated is a short form in brackets: "baseline (bl)".
var abbreviated = pattern.MustCompile(`[(](?:[a-z]{2,3}|[a-z]\d)[)]`)

// bareTime reports that nothing but a time stands in a folded label.
func bareTime(low string) bool {
	low = abbreviated.ReplaceAllString(low, " ")
	rest := changeMark.ReplaceAllString(timeMark.ReplaceAllString(stripTerms(low), " "), " ")
	for _, w := range words(rest) {
		if !timeFiller[w] && hasLetter(w) {
			return false
		}
	}
	return true
}

var timeFiller = map[string]bool{"at": true, "after": true, "of": true, "the": true, "from": true, "to": true, "and": true, "in": true, "value": true,
	"values": true, "score": true, "scores": true, "treatment": true, "intervention": true, "study": true, "week": true, "weeks": true, "month": true, "months": true, "day": true, "days": true, "year": true,
	"years": true, "visit": true, "measurement": true, "assessment": true, "period": true, "time": true, "point": true, "start": true, "end": true, "h": true, "min": true, "hour": true, "hours": true,
	"m": true, "w": true, "d": true, "vs": true, "versus": true, "minus": true, "mean": true, "results": true, "test": true, "data": true, "no": true, "only": true, "surgery": true, "operation": true,
	"therapy": true, "exercise": true, "dose": true, "during": true, "within": true, "between": true, "infusion": true, "training": true, "follow": true, "up": true, "st": true, "nd": true, "rd": true, "th": true, "a": true, "b": true, "bl": true, "since": true, "randomisation": true, "randomization": true, "recruitment": true, "p": true, "for": true, "by": true, "one": true}
