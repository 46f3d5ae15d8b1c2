package glyphs

import (
	"testing"

	"halfspan/extract/pdf/pdftest"
)

// seeded stops a fuzz target that has no seeds: it would test nothing.
func seeded(f *testing.F, n int) {
	f.Helper()
	if n == 0 {
		f.Fatal("no seeds were added")
	}
}

// FuzzContent runs foreign bytes as the content of a page.
func FuzzContent(f *testing.F) {
	n := 0
	for _, s := range []string{
		"BT /F1 10 Tf 72 700 Td (12.4 \\(1.3\\)) Tj [(a) -200 (b)] TJ ET",
		"q 1 0 0 1 10 10 cm /X1 Do Q 0 0 10 10 re W n 5 5 m 10 10 l S",
		"/Span << /ActualText <FEFF2212> >> BDC (x) Tj EMC",
		"BI /W 1 /H 1 ID \x00 EI BT 1 2 (q) \" 3 Tr ET",
		"[[[[[[(((((<<<</A/B/C",
		"/G gs /F2 1 Tf <00FF10> Tj T* 5 Tc 5 Tw 50 Tz 2 TL 3 Ts",
	} {
		f.Add([]byte(s))
		n++
	}
	seeded(f, n)
	f.Fuzz(func(t *testing.T, content []byte) {
		doc := pdftest.Doc{
			Pages:    []pdftest.Page{{Content: string(content)}},
			XObjects: map[string]string{"X1": "5 0 R"},
			Fonts:    map[string]string{"F2": "<< /Type /Font /Subtype /Type0 /BaseFont /Apis /Encoding /Identity-H /DescendantFonts [<< /Type /Font /Subtype /CIDFontType2 >>] >>"},
			Objects:  []string{pdftest.Stream("/Type /XObject /Subtype /Form /BBox [0 0 100 100]", "BT /F1 5 Tf (form) Tj ET /X1 Do")},
		}
		d, err := Open(doc.Bytes())
		if err != nil {
			t.Fatal(err)
		}
		p, err := d.Page(1)
		if err != nil {
			return
		}
		if len(p.Glyphs) != len(p.Marks) {
			t.Fatalf("%d glyphs, %d marks", len(p.Glyphs), len(p.Marks))
		}
		for _, g := range p.Glyphs {
			if g.Text == "" || g.Box.X1 < g.Box.X0 || g.Box.Y1 < g.Box.Y0 || int(g.Font) >= len(p.Fonts) {
				t.Fatalf("glyph %+v", g)
			}
		}
	})
}

// FuzzCMap reads foreign bytes as a character map.
func FuzzCMap(f *testing.F) {
	n := 0
	for _, s := range []string{
		"1 begincodespacerange <00> <FF> endcodespacerange 1 beginbfchar <01> <2212> endbfchar",
		"1 beginbfrange <0000> <FFFF> <0041> endbfrange 1 beginbfrange <00> <02> [<0041> /minus] endbfrange",
		"1 begincidrange <0000> <FFFF> 0 endcidrange 1 begincidchar <01> 5 endcidchar /H usecmap /WMode 1 def",
		"beginbfrange <FFFFFFF0> <FFFFFFFF> <DBFFDFFF>",
	} {
		f.Add([]byte(s))
		n++
	}
	seeded(f, n)
	f.Fuzz(func(t *testing.T, b []byte) {
		m := readCMap(b, nil)
		if len(m.text) > maxMapText || len(m.cids) > maxMapRanges {
			t.Fatalf("%d texts, %d ranges", len(m.text), len(m.cids))
		}
		for s := b; len(s) > 0; {
			n := m.length(s)
			if n < 1 || n > len(s) {
				t.Fatalf("length %d of %d", n, len(s))
			}
			m.cid(codeOf(s[:n]))
			s = s[n:]
		}
	})
}

// FuzzFont reads foreign bytes as a font's dictionary and as its program.
func FuzzFont(f *testing.F) {
	n := 0
	for _, s := range []struct{ dict, program string }{
		{"/Subtype /Type1 /FirstChar 0 /Widths [500 600] /Encoding << /Differences [0 /minus 5 /C6] >>", string(cffFont())},
		{"/Subtype /Type0 /Encoding /Identity-H /DescendantFonts [<< /W [0 [500] 5 9 600] /DW 700 >>]", "x"},
		{"/Subtype /Type3 /FontMatrix [0.01 0 0 0.01 0 0] /FontBBox [0 0 100 100] /Encoding << /Differences [65 /a65] >>", "dup 5 /minus put"},
		{"/Subtype /TrueType /Encoding /MacRomanEncoding /FontDescriptor << /Flags 4 /FontFile 5 0 R >>", "%!PS dup 0 /zero put eexec"},
	} {
		f.Add(s.dict, []byte(s.program))
		n++
	}
	seeded(f, n)
	f.Fuzz(func(t *testing.T, dict string, program []byte) {
		var names [256]string
		cffEncoding(program, &names)
		type1Encoding(program, &names)
		doc := pdftest.Doc{
			Pages:   []pdftest.Page{{Content: "BT /F2 10 Tf <00414243FFFE> Tj ET"}},
			Fonts:   map[string]string{"F2": "<< /Type /Font /BaseFont /Apis " + dict + " >>"},
			Objects: []string{pdftest.Stream("", string(program))},
		}
		d, err := Open(doc.Bytes())
		if err != nil {
			return
		}
		p, err := d.Page(1)
		if err == nil && len(p.Glyphs) != len(p.Marks) {
			t.Fatalf("%d glyphs, %d marks", len(p.Glyphs), len(p.Marks))
		}
	})
}

// FuzzFile reads foreign bytes as a whole file.
func FuzzFile(f *testing.F) {
	n := 0
	for _, d := range []pdftest.Doc{
		{Pages: []pdftest.Page{{Content: "BT /F1 10 Tf 72 700 Td (12.4) Tj ET"}}},
		{Pages: []pdftest.Page{{Content: "x"}, {Rotate: 90}}, Objects: []string{pdftest.Stream("/Filter /FlateDecode", "nonsense")}},
	} {
		f.Add(d.Bytes())
		n++
	}
	seeded(f, n)
	f.Fuzz(func(t *testing.T, b []byte) {
		d, err := Open(b)
		if err != nil {
			return
		}
		for i := 1; i <= min(d.NumPage(), 5); i++ {
			_, _ = d.Page(i)
		}
	})
}
