package result

import (
	"crypto/sha256"
	"encoding/binary"
	"math/big"

	"halfspan/extract/paper"
)

// Anchor is where the first digit of a result's spread stands: for text and XML
// the byte offset in the file, for PDF the page and the origin of that digit in
// 1/100 point of the unrotated page. Two readings of the same file are the same
// result if their anchors meet (see [Anchor.Meets]).
type Anchor struct {
	Page   int    `json:"page,omitempty"`
	X      int32  `json:"x,omitempty"`
	Y      int32  `json:"y,omitempty"`
	Offset int    `json:"offset,omitempty"`
	Digits string `json:"digits"` // the spread's digits: lower and upper, or the given value
}

// AnchorAt makes the anchor of a spread whose first digit stands at p.
func AnchorAt(p paper.Place, digits string) Anchor {
	if p.Page > 0 {
		return Anchor{Page: p.Page, X: p.Origin.X, Y: p.Origin.Y, Digits: digits}
	}
	return Anchor{Offset: p.Offset, Digits: digits}
}

// meetWithin is how far two origins may lie apart, in 1/100 point: two unrelated
// readers place the same number within 1.2 pt at the 99th percentile.
const meetWithin = 300

// Meets reports whether a and b, of files with equal content, name the same
// printed spread, and how far apart they lie in 1/100 point (0 for text).
func (a Anchor) Meets(b Anchor) (distance int64, ok bool) {
	if a.Page != b.Page {
		return 0, false
	}
	if a.Page == 0 {
		return 0, a.Offset == b.Offset
	}
	dx, dy := int64(a.X)-int64(b.X), int64(a.Y)-int64(b.Y)
	dx, dy = max(dx, -dx), max(dy, -dy)
	if dx > meetWithin || dy > meetWithin || a.Digits != b.Digits {
		return 0, false
	}
	return dx + dy, true
}

// Name makes the id of a result new to a ledger: 'q' and nine lower-case letters
// or digits, from the content hash, the page and the anchor rounded to 1 point.
func (a Anchor) Name(contentSHA256 string) string {
	h := sha256.New()
	h.Write([]byte(contentSHA256))
	var buf [8]byte
	for _, v := range []int64{int64(a.Page), round100(a.X), round100(a.Y), int64(a.Offset)} {
		binary.BigEndian.PutUint64(buf[:], uint64(v))
		h.Write(buf[:])
	}
	const width = 9
	text := new(big.Int).SetBytes(h.Sum(nil)).Text(36)
	for len(text) < width {
		text = "0" + text
	}
	return "q" + text[len(text)-width:]
}

func round100(v int32) int64 {
	if v < 0 {
		return -((-int64(v) + 50) / 100)
	}
	return (int64(v) + 50) / 100
}
