package working

import (
	"fmt"

	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// The uses of a record.
const (
	usePrinted   = "printed"
	useConverted = "converted"
	useWithheld  = "withheld"
)

// newRecord copies what was read into a record; what is empty becomes null.
func newRecord(doc Facts, r *result.Result) Record {
	rec := Record{
		Paper:       doc.Path,
		PaperSHA256: doc.SHA256,
		Page:        whole(r.Page),
		Section:     text(r.Section),
		Table:       text(r.Table),
		Snippet:     r.Snippet,
		Statistic:   text(string(r.Statistic)),
		Measure:     text(r.Measure),
		GivenAs:     text(string(r.GivenAs)),
		Estimate:    text(r.Estimate),
		Lower:       text(r.Lower),
		Upper:       text(r.Upper),
		GivenValue:  text(r.GivenValue),
		N:           whole(r.N),
		N2:          whole(r.N2),
		NFrom:       text(r.NFrom),
		NKind:       text(r.NKind),
		Arm:         text(r.Arm),
		Arm2:        text(r.Arm2),
		Time:        text(r.Time),
		Subgroup:    text(r.Subgroup),
		Outcome:     text(r.Outcome),
		Unit:        text(r.Unit),
		Heading:     text(r.Heading),
		Adjusted:    text(r.Adjusted),
		P:           text(r.P),
		T:           text(r.T),
		F:           text(r.F),
		DF:          text(r.DF),
		Use:         useWithheld,
		Flags:       []string{},
		Mates:       []string{},
		Places:      make([]Place, 0, len(r.Sources)),
	}
	if r.Level > 0 {
		level := r.Level
		rec.Level = &level
	}
	for _, s := range r.Sources {
		rec.Places = append(rec.Places, newPlace(s))
	}
	return rec
}

func newPlace(s result.Source) Place {
	p := Place{Field: s.Field, Text: s.Text, From: s.From}
	if s.ByPerson() && s.Place == (paper.Place{}) {
		return p
	}
	if s.Place.Page == 0 {
		offset := s.Place.Offset
		p.Offset = &offset
		return p
	}
	p.Page = whole(s.Place.Page)
	if b := s.Place.Box; !b.IsZero() {
		p.Box = &[4]float64{points(b.X0), points(b.Y0), points(b.X1), points(b.Y1)}
	}
	return p
}

func points(v int32) float64 { return float64(v) / 100 }

func text(s string) *string {
	if s == "" {
		return nil
	}
	return &s
}

func whole(n int) *int {
	if n <= 0 {
		return nil
	}
	return &n
}

func number(v float64) *Number {
	n := Number(v)
	return &n
}

// names gives every result its id. Two results of one paper whose anchors round
// to the same point would share a name: the later one is named from its digits
// too, so that the first keeps its name whatever follows it.
func names(sha string, results []result.Result) []string {
	taken := make(map[string]bool, len(results))
	out := make([]string, len(results))
	for i := range results {
		a := results[i].Anchor
		id := a.Name(sha)
		for k := 0; taken[id]; k++ {
			id = a.Name(fmt.Sprintf("%s/%s/%s/%d", sha, a.Digits, results[i].Estimate, k))
		}
		taken[id] = true
		out[i] = id
	}
	return out
}
