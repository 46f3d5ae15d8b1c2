package paper

// Format names what kind of file a Document was read from.
type Format string

// The formats that halfspan reads.
const (
	PDF  Format = "pdf"
	Text Format = "txt"
	JATS Format = "xml"
)

// Document is one paper.
type Document struct {
	Path     string // as given on the command line or relative to the scanned folder, with '/'
	SHA256   string // of the file's content, lower-case hexadecimal
	Format   Format
	Title    string    // empty when the file does not say
	Pages    []Page    // one per page; empty where the format has no pages
	Blocks   []Block   // the whole paper in reading order
	Problems []Problem // what could not be read, or not surely
	Doubts   []Doubt   // places whose reading is not beyond doubt, by page
	Printed  []string  // the text of each page, one line for each printed line, running heads and all; empty where there are no pages
}

// Page is one page of a paginated paper.
type Page struct {
	Number int    // 1-based
	Box    Box    // the visible (crop) box in unrotated user space
	Rotate int    // degrees clockwise that a viewer turns the page by: 0, 90, 180 or 270
	Reader string // who read its glyphs: "both", "own", "pdfium", "ocr", or "" where nobody could
}

// Problem is something that the reader of a paper must be told.
type Problem struct {
	Page int    `json:"page,omitempty"` // 0: the paper as a whole
	Kind string `json:"kind"`           // a flag-like name: "no-text", "readers-differ", "page-unreadable", "cut-short", "picture-table", "repaired", ...
	Text string `json:"text"`           // one sentence in plain words: what, and what to do
	Lost bool   `json:"lost,omitempty"` // content may be missing: the scan ends with status 3
}

// Doubt is a place on a page whose reading is not beyond doubt. Results that
// stand on it carry Kind as a flag and Text as the explanation.
type Doubt struct {
	Page int    `json:"page"`
	Box  Box    `json:"box"`
	From int    `json:"from,omitempty"` // byte offsets in the file, [From, To), where the format has no boxes
	To   int    `json:"to,omitempty"`
	Kind string `json:"kind"` // "readers-differ", "repaired", "columns-unclear"
	Text string `json:"text"` // both readings; what was repaired and why
}

// Point is a position on a page, in 1/100 point.
type Point struct {
	X int32 `json:"x"`
	Y int32 `json:"y"`
}

// Box is a rectangle on a page, in 1/100 point; X0 <= X1 and Y0 <= Y1.
type Box struct {
	X0 int32 `json:"x0"`
	Y0 int32 `json:"y0"`
	X1 int32 `json:"x1"`
	Y1 int32 `json:"y1"`
}

// IsZero reports whether b says nothing.
func (b Box) IsZero() bool { return b == Box{} }

// Union is the smallest box that holds both; a zero box counts as nothing.
func (b Box) Union(o Box) Box {
	switch {
	case b.IsZero():
		return o
	case o.IsZero():
		return b
	}
	return Box{min(b.X0, o.X0), min(b.Y0, o.Y0), max(b.X1, o.X1), max(b.Y1, o.Y1)}
}

// Overlaps reports whether the two boxes share any area.
func (b Box) Overlaps(o Box) bool {
	return b.X0 < o.X1 && o.X0 < b.X1 && b.Y0 < o.Y1 && o.Y0 < b.Y1
}

// Place says where something was read.
type Place struct {
	Page   int   `json:"page,omitempty"`   // 1-based; 0 where the format has no pages
	Line   int   `json:"line,omitempty"`   // 1-based line on the page or in the file; 0 unknown
	Box    Box   `json:"box,omitzero"`     // where the format has pages
	Origin Point `json:"origin,omitzero"`  // origin (baseline start) of the first glyph, where the format has pages
	Offset int   `json:"offset,omitempty"` // byte offset in the file, for text and XML
}

// Glyph is one printed character (or ligature) of a PDF page, whichever reader
// read it.
type Glyph struct {
	Text                    string // what it stands for, in Unicode; several runes for a ligature
	Box                     Box    // advance by font height, axis-parallel, in unrotated user space
	Origin                  Point
	Size                    int32 // effective font size, 1/100 point
	Font                    int32 // index into the page's font names
	Angle                   int16 // direction of the baseline in degrees counter-clockwise in user space: 0, 90, 180, 270; others rounded to a degree
	Bold, Italic, Invisible bool
	Repaired                bool // Text is not what the file says: see the page's Doubts
}

// GlyphPage is what a PDF reader hands to the layout: the glyphs of one page
// in content order, and the straight lines and thin rectangles drawn on it.
type GlyphPage struct {
	Page   Page
	Fonts  []string // font names by Glyph.Font
	Glyphs []Glyph
	Rules  []Box // drawn lines, each as a thin box
	Images []Box // placed pictures
	Doubts []Doubt
}
