package extract

import (
	"sort"

	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// numeric are the fields whose digits a doubt about the page may concern.
var numeric = map[string]bool{
	"estimate": true, "lower": true, "upper": true, "given_value": true, "level": true, "n": true, "n2": true,
	"p": true, "t": true, "f": true, "df": true,
}

// raiseDoubts puts the doubts about single places of the paper, and about pages
// read from a picture, on the results that were read there.
func raiseDoubts(doc *paper.Document, results []result.Result) {
	byPage := map[int][]paper.Doubt{}
	var byOffset []paper.Doubt // in the order of the file
	for _, d := range doc.Doubts {
		if d.To > d.From {
			byOffset = append(byOffset, d)
			continue
		}
		byPage[d.Page] = append(byPage[d.Page], d)
	}
	scanned := map[int]bool{}
	for _, p := range doc.Pages {
		scanned[p.Number] = p.Reader == "ocr"
	}
	for i := range results {
		r := &results[i]
		for _, s := range r.Sources {
			if !numeric[s.Field] {
				continue
			}
			for _, d := range byPage[s.Place.Page] {
				if d.Box.Overlaps(s.Place.Box) {
					r.Raise(d.Kind, d.Text)
				}
			}
			k := sort.Search(len(byOffset), func(k int) bool { return byOffset[k].To > s.Place.Offset })
			if k < len(byOffset) && byOffset[k].From <= s.Place.Offset {
				r.Raise(byOffset[k].Kind, byOffset[k].Text)
			}
			if scanned[s.Place.Page] {
				r.Raise("ocr", "read from a picture of the page")
			}
		}
	}
}
