// Package plain reads text files into the model: form feeds part pages,
// paragraphs and tables (tab-separated, pipe-separated, space-aligned) are told
// apart. It knows nothing of results.
package plain
