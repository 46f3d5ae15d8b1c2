// Package bind puts what the grammar read into its context: row label, column
// heading, row group, caption, footnote, sentence, section, and the paper's own
// conventions, in that order of precedence. The outcome is results. What it
// cannot know stays empty and is said; nothing is guessed in silence.
package bind
