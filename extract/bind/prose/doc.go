// Package prose finds the results in a paper's running text: paragraphs, boxes
// and captions of figures. It takes what the grammar read in a paragraph, ties
// each interval or spread to its estimate, and puts the result into its
// sentence: what is given, at which level, of which statistic, for whom, when,
// and behind how many.
//
// Who took part is learnt first (the cast): the arms and sizes of the tables'
// results, then those that the text and the headings print. A sentence's results
// are tied to the arms it names by place (armof.go); their outcome is the last
// piece before them, between marks and verbs, that names something (outcome.go).
//
// What only looks like a result (citations, visit windows, tolerances, scale
// limits, doses, eligibility, assumptions of a sample size) is refused; another
// study's result is kept and marked as quoted. Start with [Find].
package prose
