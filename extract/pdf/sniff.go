package pdf

import "bytes"

// headerWithin is how far into a file the PDF header may stand; viewers accept
// some rubbish before it.
const headerWithin = 1024

// IsPDF reports whether the content begins like a PDF.
func IsPDF(content []byte) bool {
	return bytes.Contains(content[:min(len(content), headerWithin)], []byte("%PDF-"))
}

func looksLikePDF(content []byte) error {
	switch {
	case len(content) == 0:
		return ErrEmpty
	case !IsPDF(content):
		return ErrNotPDF
	}
	return nil
}
