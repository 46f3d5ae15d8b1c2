package convention

import (
	"halfspan/extract/grammar"
	"halfspan/extract/result"
)

// GivenAs is the record's word for a spread of the grammar; empty for others.
func GivenAs(spread string) result.GivenAs {
	switch spread {
	case grammar.SpreadCI:
		return result.CI
	case grammar.SpreadSD:
		return result.SD
	case grammar.SpreadSE:
		return result.SE
	case grammar.SpreadIQR:
		return result.IQR
	case grammar.SpreadRange:
		return result.Range
	}
	return ""
}
