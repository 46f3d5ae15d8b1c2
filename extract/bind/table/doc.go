// Package table reads the results that stand in a paper's tables: from a
// paper.Table in its Document to []result.Result.
//
// A table is first laid out as a frame: heading rows and body, stub and data
// columns, the path of headings over every column and of labels before every
// row, headings repeated inside the body, notes with the marks that lead to
// them. Then the grammar says what each body cell prints, and what belongs
// together is joined: an estimate with the interval in the next column, a mean
// with the SD in the next row. What a spread means is looked up in a fixed
// order: the cell itself, its row label, its column heading, the row group, the
// caption, the notes, other statements of the paper. At last each result gets
// its arm, time, subgroup, outcome, unit and sample size, each with the place
// it was read from.
//
// What the paper does not say stays empty; what rests on a weaker inference
// raises one of the flags in flags.go. The package knows no file formats and
// computes no statistics beyond the arithmetic that tells a count with its
// percent from a mean with its SD.
package table
