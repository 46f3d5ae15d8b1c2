//go:build ignore

// This program writes tables.txt, the glyph names and the metrics of the PDF
// standard fonts, from two modules that the project uses anyway:
//
//   - name.go of github.com/ledongthuc/pdf: the Adobe Glyph List, name to rune;
//   - the AFM files in github.com/pdfcpu/pdfcpu (Adobe's Core 14 metrics):
//     StandardEncoding, the encodings of Symbol and ZapfDingbats, widths.
//
// Run it in extract/pdf/glyphs by `go generate`.
package main

import (
	"bytes"
	"log"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"sort"
	"strings"
)

// fonts are the ones with widths of their own: the oblique Helveticas share
// those of the upright ones, and every Courier glyph is 600 wide.
var fonts = []string{"Helvetica", "Helvetica-Bold", "Times-Roman", "Times-Bold", "Times-Italic", "Times-BoldItalic", "Symbol", "ZapfDingbats"}

func main() {
	var out bytes.Buffer
	out.WriteString("# Written by gen/main.go; see there for the sources.\n")
	out.WriteString("[names]\n" + names())
	for _, f := range fonts {
		encoding, widths := metrics(f)
		switch f {
		case "Times-Roman":
			out.WriteString("[StandardEncoding]\n" + encoding)
		case "Symbol", "ZapfDingbats":
			out.WriteString("[" + f + "Encoding]\n" + encoding)
		}
		out.WriteString("[" + f + "]\n" + widths)
	}
	out.WriteString("[end]\n")
	if err := os.WriteFile("tables.txt", out.Bytes(), 0o644); err != nil {
		log.Fatal(err)
	}
}

func moduleFile(module, path string) string {
	dir, err := exec.Command("go", "list", "-m", "-f", "{{.Dir}}", module).Output()
	if err != nil {
		log.Fatal(err)
	}
	b, err := os.ReadFile(filepath.Join(strings.TrimSpace(string(dir)), path))
	if err != nil {
		log.Fatal(err)
	}
	return string(b)
}

func names() string {
	entry := regexp.MustCompile(`"([^"]+)":\s+0x([0-9A-Fa-f]{4,6}),`)
	var lines []string
	for _, m := range entry.FindAllStringSubmatch(moduleFile("github.com/ledongthuc/pdf", "name.go"), -1) {
		lines = append(lines, m[1]+" "+strings.ToUpper(m[2])+"\n")
	}
	if len(lines) < 4000 {
		log.Fatalf("only %d glyph names found", len(lines))
	}
	sort.Strings(lines)
	return strings.Join(lines, "")
}

func metrics(font string) (encoding, widths string) {
	glyph := regexp.MustCompile(`(?m)^C (-?\d+) ; WX (\d+) ; N (\S+) ;`)
	var codes, ws []string
	for _, m := range glyph.FindAllStringSubmatch(moduleFile("github.com/pdfcpu/pdfcpu", "internal/corefont/Core14_AFMs/"+font+".afm"), -1) {
		if m[1] != "-1" {
			codes = append(codes, m[1]+" "+m[3]+"\n")
		}
		ws = append(ws, m[3]+" "+m[2]+"\n")
	}
	if len(ws) < 150 {
		log.Fatalf("%s: only %d glyphs found", font, len(ws))
	}
	sort.Strings(ws)
	return strings.Join(codes, ""), strings.Join(ws, "")
}
