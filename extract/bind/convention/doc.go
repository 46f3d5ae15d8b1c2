// Package convention finds what a paper says of its own habits: "values are
// mean ± SE", "data are shown as median (IQR) unless stated", "95% CI
// throughout". What a ± or a bracket means where nothing beside it tells is
// looked up here, last of all.
//
// A list of abbreviations ("SD, standard deviation") declares nothing. Two
// statements that contradict each other are both kept, and the answer says so.
// Start with [Of] for a paper and with [In] for one caption or note.
package convention
