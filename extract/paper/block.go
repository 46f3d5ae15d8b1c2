package paper

// BlockKind says what a block of a paper is.
type BlockKind uint8

// The kinds of block. Only Paragraph, Table, Caption and Note are searched for
// results.
const (
	Heading BlockKind = iota + 1
	Paragraph
	TableBlock
	Caption   // of a figure; a table's caption stands in its Table
	Note      // a footnote that belongs to no table, a box
	Reference // an entry of the reference list
	Furniture // running heads, page numbers, affiliations, copyright lines
)

// Zone is the part of the paper that a block stands in.
type Zone uint8

// The zones of a paper, by its headings.
const (
	Elsewhere Zone = iota
	Abstract
	Introduction
	Methods
	Results
	Discussion
	References
	BackMatter
)

// Block is one piece of a paper in reading order.
type Block struct {
	Kind    BlockKind
	Zone    Zone
	Section string  // the nearest heading above, as printed: "Results", "Statistical analysis"
	Level   int     // of a heading: 1 is the highest; 0 unknown
	Page    int     // page of its first character; 0 where there are none
	Text    TextRun // empty for a TableBlock
	Table   *Table  // only of a TableBlock
}
