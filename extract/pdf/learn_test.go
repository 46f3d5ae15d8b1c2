package pdf

import (
	"fmt"
	"strings"
	"testing"

	"halfspan/extract/paper"
	"halfspan/extract/pdf/pdftest"
)

// lying is a font that shows its signs under false names: each entry of
// differences is a code and the name the file gives it.
func lying(differences string) map[string]string {
	return map[string]string{"F2": "<< /Type /Font /Subtype /Type1 /BaseFont /ABCDEF+Falsa /FirstChar 0 /LastChar 255 /Widths [" +
		strings.Repeat("600 ", 256) + "] /Encoding << /BaseEncoding /WinAnsiEncoding /Differences [" + differences + "] >> >>"}
}

// coded is a font that maps its codes 1 to 9 to the control codes 1 to 9.
func coded() (fonts map[string]string, object string) {
	fonts = lying("")
	fonts["F2"] = strings.Replace(fonts["F2"], "/Encoding", "/ToUnicode 5 0 R /Encoding", 1)
	return fonts, pdftest.Stream("", "begincmap 1 begincodespacerange <00> <FF> endcodespacerange 1 beginbfrange <01> <09> <0001> endbfrange endcmap")
}

// lines writes each line on its own; text in braces is shown in the lying font,
// as hexadecimal codes.
func lines(lines ...string) []pdftest.Page {
	var b strings.Builder
	y := 700
	for _, l := range lines {
		fmt.Fprintf(&b, "BT 72 %d Td ", y)
		for l != "" {
			plain, rest, ok := strings.Cut(l, "{")
			if plain != "" {
				fmt.Fprintf(&b, "/F1 10 Tf (%s) Tj ", strings.NewReplacer("(", `\(`, ")", `\)`).Replace(plain))
			}
			if !ok {
				break
			}
			var code string
			code, l, _ = strings.Cut(rest, "}")
			fmt.Fprintf(&b, "/F2 10 Tf <%s> Tj ", code)
		}
		b.WriteString("ET\n")
		y -= 14
	}
	return []pdftest.Page{{Content: b.String()}}
}

func textOf(p *paper.GlyphPage) string {
	var b strings.Builder
	for i, g := range p.Glyphs {
		if i > 0 && g.Origin.Y != p.Glyphs[i-1].Origin.Y {
			b.WriteByte('\n')
		}
		b.WriteString(g.Text)
	}
	return b.String()
}

func TestLearn(t *testing.T) {
	cases := []struct {
		name  string
		fonts map[string]string
		lines []string
		want  string // the page afterwards
		kinds string // of the problems
	}{
		{"a quarter after n and CI is an equals sign", lying(""),
			[]string{"syrup (n {BC} 42) and water (n {BC} 40)", "gain 1.8 kg (CI {BC} 0.9 to 2.7)"},
			"syrup (n = 42) and water (n = 40)\ngain 1.8 kg (CI = 0.9 to 2.7)", "repaired"},
		{"a quarter that is one stays", lying(""),
			[]string{"fed {BC} of the syrup, later 1{BC} litre", "and {BC} litre of water"},
			"fed ¼ of the syrup, later 1¼ litre\nand ¼ litre of water", ""},
		{"what goes with it", lying(""),
			[]string{"(n {BC} 42, n {BC} 40)", "sum {F0}a {FE} b{DE}"},
			"(n = 42, n = 40)\nsum (a + b)", "repaired repaired repaired repaired"},
		{"a code without which intervals run backwards is a minus", nil,
			[]string{"mass {02}0.4 kg (95% CI {02}0.9 to {02}0.1)", "protein {02}1.2 mg/mL (95% CI {02}2.0 to 0.3)"},
			"mass −0.4 kg (95% CI −0.9 to −0.1)\nprotein −1.2 mg/mL (95% CI −2.0 to 0.3)", "repaired"},
		{"a code that intervals speak against stays", nil,
			[]string{"mass {02}0.4 kg (95% CI {02}0.9 to {02}0.1)", "protein {02}1.2 mg/mL (95% CI {02}2.0 to {02}3.0)"},
			"mass \x020.4 kg (95% CI \x020.9 to \x020.1)\nprotein \x021.2 mg/mL (95% CI \x022.0 to \x023.0)", "unknown-sign"},
		{"an acute before numbers", lying(""),
			[]string{"mass {B4}0.4 kg (95% CI {B4}0.9, {B4}0.1)", "Andr{B4}e fed {B4}2 kg"},
			"mass −0.4 kg (95% CI −0.9, −0.1)\nAndr´e fed −2 kg", "repaired"},
		{"an acute before decimals only", lying(""),
			[]string{"changes were {B4}0.4, {B4}1.2 and {B4}0.05 kg"}, "changes were −0.4, −1.2 and −0.05 kg", "repaired"},
		{"an acute before a year is doubted, not read", lying(""),
			[]string{"since {B4}98 the mass was 0.4 kg"}, "since ´98 the mass was 0.4 kg", "unknown-sign"},
		{"a plus that the paper calls mean and SD", lying(""),
			[]string{"values are mean {2B} SD", "12.4 {2B} 1.3 kg and 11.1 {2B} 1.2 kg", "CD4{2B} and A {2B} B"},
			"values are mean ± SD\n12.4 ± 1.3 kg and 11.1 ± 1.2 kg\nCD4+ and A + B", "repaired"},
		{"a plus that nothing says", lying(""),
			[]string{"12.4 {2B} 1.3 kg and 11.1 {2B} 1.2 kg"}, "12.4 + 1.3 kg and 11.1 + 1.2 kg", ""},
		{"a breve between mean and SE", lying("24 /breve"),
			[]string{"(mean {18} SEM)", "24 {18} 5 and 19 {18} 4 min"},
			"(mean ± SEM)\n24 ± 5 and 19 ± 4 min", "repaired"},
		{"the letter o after p", lying(""),
			[]string{"(p{6F}0.05) and P {6F} .001", "no p{6F}int"}, "(p<0.05) and P < .001\nno point", "repaired"},
		{"codes of other fonts are not touched", nil,
			[]string{"p {02} 0.05"}, "p \x02 0.05", "unknown-sign"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			doc := pdftest.Doc{Pages: lines(c.lines...), Fonts: c.fonts}
			if c.fonts == nil {
				var m string
				doc.Fonts, m = coded()
				doc.Objects = []string{m}
			}
			got, err := Read(doc.Bytes(), Options{})
			if err != nil {
				t.Fatal(err)
			}
			if text := textOf(&got.Pages[0]); text != c.want {
				t.Errorf("got  %q\nwant %q", text, c.want)
			}
			var kinds []string
			for _, p := range got.Problems {
				kinds = append(kinds, p.Kind)
				if p.Kind == "repaired" && p.Lost {
					t.Errorf("a repair is no loss: %+v", p)
				}
			}
			if k := strings.Join(kinds, " "); k != c.kinds {
				t.Errorf("got problems %q, want %q: %+v", k, c.kinds, got.Problems)
			}
			for _, g := range got.Pages[0].Glyphs {
				if g.Repaired && !doubted(&got.Pages[0], g.Box) {
					t.Errorf("%q is repaired without a doubt on it", g.Text)
				}
			}
		})
	}
}

func doubted(p *paper.GlyphPage, b paper.Box) bool {
	for _, d := range p.Doubts {
		if d.Box == b && d.Kind == "repaired" && d.Text != "" {
			return true
		}
	}
	return false
}
