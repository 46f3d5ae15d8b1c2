package working

import (
	"halfspan/extract/paper"
	"halfspan/extract/result"
)

// Record is one result with its working as it is written to JSON Lines, CSV,
// sheets and the ledger. Field names and their order are part of the program's
// contract; null means that the paper does not say, or that it is withheld.
type Record struct {
	ID          string   `json:"id"`
	Paper       string   `json:"paper"`
	PaperSHA256 string   `json:"paper_sha256"`
	Page        *int     `json:"page"`
	Section     *string  `json:"section"`
	Table       *string  `json:"table"`
	Snippet     string   `json:"snippet"`
	Statistic   *string  `json:"statistic"`
	Measure     *string  `json:"measure"`
	GivenAs     *string  `json:"given_as"`
	Estimate    *string  `json:"estimate"`
	Lower       *string  `json:"lower"`
	Upper       *string  `json:"upper"`
	GivenValue  *string  `json:"given_value"`
	Level       *float64 `json:"level"`
	N           *int     `json:"n"`
	N2          *int     `json:"n2"`
	NFrom       *string  `json:"n_from"`
	NKind       *string  `json:"n_kind"`
	Arm         *string  `json:"arm"`
	Arm2        *string  `json:"arm2"`
	Time        *string  `json:"time"`
	Subgroup    *string  `json:"subgroup"`
	Outcome     *string  `json:"outcome"`
	Unit        *string  `json:"unit"`
	Heading     *string  `json:"heading"`
	Adjusted    *string  `json:"adjusted"`
	P           *string  `json:"p"`
	T           *string  `json:"t"`
	F           *string  `json:"f"`
	DF          *string  `json:"df"`
	Mean        *Number  `json:"mean"`
	SD          *Number  `json:"sd"`
	SDOf        *string  `json:"sd_of"` // values, changes, differences
	SE          *Number  `json:"se"`
	Scale       *string  `json:"scale"` // of se: raw, log, logit
	SDLow       *Number  `json:"sd_digits_low"`
	SDHigh      *Number  `json:"sd_digits_high"`
	SDNormal    *Number  `json:"sd_normal"`
	Method      *string  `json:"method"`
	Use         string   `json:"use"` // printed, converted, withheld
	Reason      string   `json:"reason"`
	Reading     string   `json:"reading"` // clear, look, doubtful
	Flags       []string `json:"flags"`
	Mates       []string `json:"mates"`
	Places      []Place  `json:"places"`
}

// Place is where one field of a record was read.
type Place struct {
	Field  string      `json:"field"`
	Page   *int        `json:"page"`
	Box    *[4]float64 `json:"box"`         // x0, y0, x1, y1 in points of the unrotated page, y upwards; null where there are no pages
	Offset *int        `json:"byte_offset"` // in the file; null where there are pages
	Text   string      `json:"text"`
	From   string      `json:"from,omitempty"`
}

// Working is a record with what the program keeps beside it: the anchor that
// ties it to the page, the trail of the conversion and the flags in full.
type Working struct {
	Record Record        `json:"record"`
	Anchor result.Anchor `json:"anchor"`
	Row    string        `json:"row,omitempty"` // results of one table row share it
	Zone   paper.Zone    `json:"zone,omitempty"`
	Quoted bool          `json:"quoted,omitempty"`   // seems to quote another study or to repeat
	Base   bool          `json:"baseline,omitempty"` // a baseline value
	Trail  Trail         `json:"trail"`
	Flags  []result.Flag `json:"flags"` // Record.Flags with their particulars
}

// Trail is how the values of a record were reached, as a person would write it.
type Trail struct {
	Method       string        `json:"method,omitempty"`
	Steps        []string      `json:"steps,omitempty"`       // formula, then the numbers put in, line by line
	Assumptions  []string      `json:"assumptions,omitempty"` // under which the value holds
	Alternatives []Alternative `json:"alternatives,omitempty"`
	Notes        []string      `json:"notes,omitempty"`
}

// Alternative is another value beside the one taken, or a proposal where none
// is taken: the SD by the normal value, each median method, each reading of an
// unstated ±.
type Alternative struct {
	Name   string  `json:"name"` // method or reading
	Mean   *Number `json:"mean,omitempty"`
	SD     *Number `json:"sd,omitempty"`
	SE     *Number `json:"se,omitempty"`
	Low    *Number `json:"sd_low,omitempty"`
	High   *Number `json:"sd_high,omitempty"`
	Note   string  `json:"note,omitempty"`   // typical error, conditions, why it is preferred or struck out
	Struck bool    `json:"struck,omitempty"` // shown to be impossible
}
