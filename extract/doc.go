// Package extract reads papers and finds the results in them: [Read] turns a
// file into a paper.Document, [Find] a document into results. It is the façade
// over the readers (pdf with layout, plain, jats), the grammar and the binding;
// the rest of the program uses nothing else of them.
//
// It knows nothing of conversion, ledgers or screens, and touches no file but
// the one it is asked to read.
package extract
