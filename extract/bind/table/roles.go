package table

import (
	"strings"

	"halfspan/extract/grammar"
	"halfspan/extract/pattern"
)

// roleKind is what the values of a column or row are, by its heading.
type roleKind uint8

const (
	roleNone     roleKind = iota
	roleEstimate          // an estimate alone: "Mean", "Difference", "OR"
	roleBoth              // an estimate with its spread: "Mean (SD)"
	roleSpread            // a spread alone: "SD", "95% CI"
	roleBound             // one end of an interval
	roleN                 // sample sizes
	roleP
	roleTest
	rolePercent // percentages, or counts with percentages
)

// role is what a heading makes of the values under it.
type role struct {
	kind  roleKind
	pairs []pair
	bound int
	test  string
	label label // the heading that says so
}

// roleOf reads a role from one heading; roleNone where it announces none.
func roleOf(l label, p *phrase) role {
	r := role{label: l, pairs: p.pairs, bound: p.bound, test: p.test}
	switch {
	case p.isP:
		r.kind = roleP
	case p.test != "":
		r.kind = roleTest
	case p.bound != 0:
		r.kind = roleBound
	case p.countHead:
		r.kind = roleN
	case p.terms == 0:
		return role{}
	default:
		r.kind = kindOfPairs(p)
	}
	return r
}

func kindOfPairs(p *phrase) roleKind {
	est, spr, both, count, percent := 0, 0, 0, 0, 0
	for _, q := range p.pairs {
		switch {
		case q.Spread != "" && q.Statistic != "":
			both++
		case q.Spread != "":
			spr++
		case q.Statistic != "":
			est++
		case q.Percent:
			percent++
		case q.Count:
			count++
		}
	}
	switch {
	case spr > 0 && p.pairs[0].Spread != "" && p.pairs[0].Statistic == "" && !p.pairs[0].Sign:
		return roleSpread // "95% CI of the hazard ratio"
	case both > 0:
		return roleBoth
	case spr > 0 && est == 0 && len(p.rest) > 0 && p.bracketed():
		return roleBoth // "Mass (SD)"
	case spr > 0 && est == 0:
		return roleSpread
	case spr > 0:
		return roleBoth
	case percent > 0 && est == 0:
		return rolePercent
	case est > 0:
		return roleEstimate
	case count > 0 && p.onlyTerms:
		return roleN
	case count > 0:
		return roleNone
	}
	return roleNone
}

// bracketed reports that the first spread of a heading stands in brackets.
func (p *phrase) bracketed() bool {
	for _, q := range p.pairs {
		if q.Spread != "" {
			k := q.SpreadAt.Start
			for k > 0 && (q.text[k-1] == ' ' || q.text[k-1] >= '0' && q.text[k-1] <= '9' || q.text[k-1] == '%') {
				k--
			}
			return k > 0 && (q.text[k-1] == '(' || q.text[k-1] == '[')
		}
	}
	return false
}

func (f *frame) findColumnRole(r, c int) role {
	path := f.path(r, c)
	for k := len(path) - 1; k >= 0; k-- {
		p := f.lex.phrase(path[k].text)
		if role := roleOf(path[k], p); role.kind != roleNone {
			if role.kind == roleN && f.anySpread(c) {
				continue
			}
			if k < len(path)-1 && (role.kind == roleP || role.kind == roleN || role.kind == roleTest || role.kind == roleBound) && path[len(path)-1].text != "" && !p.onlyTerms && role.kind != roleP {
				continue
			}
			return role
		}
	}
	return role{}
}

// pColumn reports a column of p values.
func (f *frame) pColumn(c int) bool {
	for _, l := range f.heads[c] {
		if isPHeading(fold(l.text)) {
			return true
		}
	}
	return false
}

func (f *frame) findRowRole(r int) role {
	ln := &f.lines[r]
	if len(ln.labels) == 0 || ln.kind == lineContinue {
		return role{}
	}
	l := ln.labels[len(ln.labels)-1]
	p := f.lex.phrase(l.text)
	role := roleOf(l, p)
	switch role.kind {
	case roleN:
		if !p.countHead || f.spreadCells(r) > 0 {
			return roleNoneOf(role) // "All colonies" before values names whose they are
		}
		switch strings.Trim(fold(l.text), " *.:") {
		case "no", "number", "nr", "total", "count":
			if !strings.HasSuffix(clean(l.text), ".") {
				return roleNoneOf(role) // "no" answers a question
			}
		}
		return role
	case roleP, roleTest:
		return role
	case roleBound:
		return role
	case roleSpread:
		if f.otherShortForm(l) {
			return roleNoneOf(role)
		}
		if len(p.rest) <= 1 || len(p.pairs) == 1 && p.pairs[0].Start == 0 {
			return role
		}
	case roleEstimate, roleBoth:
		if p.onlyTerms {
			return role
		}
	}
	return roleNoneOf(role)
}

var (
	shortSpread   = pattern.MustCompile(`^(?:SD|SE)$`)
	shortFormNote = pattern.MustCompile(`\b(SD|SE)\s*[,:=]\s*([a-z]+)`)
	tumourLabel   = pattern.MustCompile(`^(?:CR|PR|PD)$`)
)

// otherShortForm reports a row labelled SD that is no standard deviation: a note
// says what else it stands for, or it stands among the grades of response, where
// it is stable disease.
func (f *frame) otherShortForm(l label) bool {
	if !shortSpread.MatchString(l.text) {
		return false
	}
	for _, n := range f.notes.list {
		for _, m := range shortFormNote.FindAllStringSubmatch(clean(n.run.S), -1) {
			if m[1] == l.text && m[2] != "standard" {
				return true
			}
		}
	}
	grades := 0
	for r := f.head; r < f.tab.Rows; r++ {
		if cell := f.cellAt(r, f.stub-1); cell != nil && tumourLabel.MatchString(clean(cell.Text.S)) {
			grades++
		}
	}
	return grades >= 2
}

func roleNoneOf(r role) role { return role{label: r.label, pairs: r.pairs} }

var nPhrase = pattern.MustCompile(`(?i)[\(\[,;]?\s*\b(?:n|no\.?)\s*[=:]\s*[\d,.]+(?:\s*(?:/\s*\d+|patients|subjects|participants|women|men|children|colonies))?\s*[\)\]]?`)

// manyN is a bracket with the n of several times: (Week 6, n = 47; Week 12, n = 41).
var manyN = pattern.MustCompile(`(?i)[(\[][^()\[\]]*\bn\s*=\s*\d+[^()\[\]]*\bn\s*=\s*\d+[^()\[\]]*[)\]]`)

// nBySex is a bracket with the n of each sex: (n = 9 M, 11 F).
var nBySex = pattern.MustCompile(`(?i)\(\s*n\s*=\s*(\d*)\s*(m|f|males?|females?|men|women)\s*[,;/&]\s*(\d+)\s*(m|f|males?|females?|men|women)\s*\)`)

// onlyTerms reports that nothing but terms stands in a heading.
func onlyTerms(s string, h grammar.Heading) bool { return len(restWords(s, h)) == 0 }

// partOfName reports a term that, beside other words, belongs to the name of
// what was measured: heart rate, E/A ratio, interferon beta.
func partOfName(q grammar.Pair) bool {
	switch q.Statistic {
	case "rate", "proportion", "coefficient", "other":
		return true
	case "ratio":
		return q.Measure == ""
	}
	return false
}

// fixedMean are quantities with mean in their name.
var fixedMean = pattern.MustCompile(`(?i)^mean (?:arterial|blood|airway|corpuscular|cell|platelet|aortic|pulmonary|transvalvular|circulatory)\b`)

// stripTerms takes n = 42, statistics and levels out of a heading.
func stripTerms(s string) string {
	s = normalise(s)
	s = nPhrase.ReplaceAllString(nBySex.ReplaceAllString(manyN.ReplaceAllString(s, " "), " "), " ")
	h := grammar.ParsePhrase(grammar.Text{S: s})
	b := []byte(s)
	all := onlyTerms(s, h)
	for _, q := range h.Pairs {
		for _, sp := range []grammar.Span{q.SpreadAt, q.StatisticAt} {
			if sp == q.StatisticAt && q.Statistic == "" && !all {
				continue // "No. of eggs" is a name
			}
			word := strings.ToLower(s[sp.Start:sp.End])
			if sp == q.StatisticAt && fixedMean.MatchString(s[sp.Start:]) {
				continue
			}
			if changeMark.MatchString(word) || strings.Contains(word, "change") || sp == q.StatisticAt && !all && partOfName(q) {
				continue
			}
			for i := sp.Start; i < sp.End; i++ {
				b[i] = ' '
			}
		}
		if (q.Count || q.Percent) && (all || q.Count && q.Percent) {
			for i := q.Start; i < q.End; i++ {
				b[i] = ' '
			}
		}
	}
	return strings.ToValidUTF8(string(b), " ")
}
