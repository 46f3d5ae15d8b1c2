package export

import (
	"encoding/json"
	"fmt"
	"io"

	"halfspan/report/review"
)

// About says where an export comes from.
type About struct {
	Program   string            // name and version
	Results   int               // how many were exported
	Decisions map[string]string // SHA-256 over all decisions, by checker
}

// tableSchema is a Frictionless Table Schema (specs.frictionlessdata.io), with
// what it leaves to its users: title, description and the properties of ours.
type tableSchema struct {
	Title         string            `json:"title"`
	Description   string            `json:"description"`
	Fields        []schemaField     `json:"fields"`
	PrimaryKey    string            `json:"primaryKey"`
	MissingValues []string          `json:"missingValues"`
	Program       string            `json:"program"`
	Results       int               `json:"results"`
	Decisions     map[string]string `json:"decisions_sha256"` // by checker
	Cautions      []string          `json:"cautions"`
}

type schemaField struct {
	Name        string `json:"name"`
	Type        string `json:"type"`
	Description string `json:"description"`
	Unit        string `json:"unit,omitempty"`
}

// Codebook writes the description of the CSV's columns as a Table Schema.
func Codebook(w io.Writer, about About) error {
	schema := tableSchema{
		Title:         "Results confirmed or amended by a person",
		Description:   "One row a result. Empty means that the paper does not say, or that the value is withheld. Text that a spreadsheet program would run as a formula begins with an apostrophe that is not part of it.",
		PrimaryKey:    "id",
		MissingValues: []string{""},
		Program:       about.Program,
		Results:       about.Results,
		Decisions:     about.Decisions,
		Cautions: []string{
			review.Cautions,
			"The method's assumptions (independent values, the stated level, a symmetric interval) are the paper's and the program's, not facts.",
			"Numbers are kept as printed, misprints of the paper included, unless a person amended them with a reason.",
			"Results that print the same in one paper are marked in printed_again: using both counts one result twice.",
		},
	}
	for _, c := range allColumns() {
		schema.Fields = append(schema.Fields, schemaField{c.name, c.kind, c.describe, c.unit})
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(schema); err != nil {
		return fmt.Errorf("writing the codebook: %w", err)
	}
	return nil
}
