package jats

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"halfspan/extract/paper"
	"halfspan/extract/pattern"
)

// longestFormula is how many characters of a formula are read as text: a
// number, "n = 42" or "± 1.3" is, an equation is not.
const longestFormula = 60

// formula adds the text of a formula where it is short, else nothing.
func (r *reader) formula(b *builder, n *node) {
	switch n.name {
	case "math":
		r.math(b, n)
	case "tex-math":
		r.tex(b, n)
	default:
		r.content(b, n)
	}
}

// math adds the characters of a MathML formula; its white space means nothing.
func (r *reader) math(b *builder, n *node) {
	if r.mathLength(n) > longestFormula {
		return
	}
	r.mathContent(b, n)
}

func (r *reader) mathLength(n *node) int {
	total := 0
	for _, k := range n.kids {
		if k.name == "" {
			total += len(strings.TrimSpace(string(r.src.B[k.start:k.end])))
		} else if k.name != "annotation" && k.name != "annotation-xml" {
			total += r.mathLength(k)
		}
	}
	return total
}

func (r *reader) mathContent(b *builder, n *node) {
	switch n.name {
	case "annotation", "annotation-xml":
		return
	case "mspace":
		b.Word()
		return
	}
	parts := 0
	for _, k := range n.kids {
		if k.name == "" {
			b.mathChars(k.start, k.end)
			continue
		}
		parts++
		inside := func() { r.mathContent(b, k) }
		switch {
		case n.name == "msup" && parts == 2, n.name == "msubsup" && parts == 3:
			b.Styled(paper.Raised, inside)
		case n.name == "msub" && parts == 2, n.name == "msubsup" && parts == 2:
			b.Styled(paper.Lowered, inside)
		case n.name == "mfrac" && parts == 2:
			b.Insert("/")
			inside()
		default:
			inside()
		}
	}
}

// mathChars adds character data without the white space at its ends, save that
// before the formula.
func (b *builder) mathChars(start, end int) {
	raw := b.Src.B[start:end]
	for len(raw) > 0 && unicode.IsSpace(rune(raw[0])) {
		raw, start = raw[1:], start+1
	}
	for len(raw) > 0 && unicode.IsSpace(rune(raw[len(raw)-1])) {
		raw, end = raw[:len(raw)-1], end-1
	}
	if len(raw) > 0 {
		b.chars(start, end)
	}
}

var (
	texBody    = pattern.MustCompile(`(?s)(?:\$\$|\\\(|\\\[|\$)(.*?)(?:\$\$|\\\)|\\\]|\$)`)
	texToken   = pattern.MustCompile(`\\[A-Za-z]+|\\.|[{}^_~$]|\s+|[^\\{}^_~$\s]+`)
	texSymbols = map[string]string{
		`\pm`: "±", `\times`: "×", `\le`: "≤", `\leq`: "≤", `\leqslant`: "≤", `\ge`: "≥", `\geq`: "≥", `\geqslant`: "≥",
		`\cdot`: "·", `\alpha`: "α", `\beta`: "β", `\chi`: "χ", `\Delta`: "Δ", `\delta`: "δ", `\mu`: "μ", `\kappa`: "κ",
		`\eta`: "η", `\rho`: "ρ", `\sigma`: "σ", `\sim`: "~", `\approx`: "≈", `\infty`: "∞", `\lt`: "<", `\gt`: ">",
		`\%`: "%", `\,`: " ", `\;`: " ", `\:`: " ", `\!`: "", `\ `: " ", `~`: " ", `\#`: "#", `\&`: "&", `\circ`: "°",
		`\mathrm`: "", `\text`: "", `\mathit`: "", `\mathbf`: "", `\rm`: "", `\it`: "", `\left`: "", `\right`: "",
		`\mathsf`: "", `\textrm`: "", `\textit`: "", `\quad`: " ", `\displaystyle`: "", `{`: "", `}`: "", `\bar`: "",
		`\ldots`: "…", `\dots`: "…", `\to`: "→", `\rightarrow`: "→", `\operatorname`: "", `\hbox`: "", `\mbox`: "",
	}
)

// tex adds a formula in TeX where it is made of characters and well-known
// symbols only; raising and lowering become styles.
func (r *reader) tex(b *builder, n *node) {
	for _, k := range n.kids {
		if k.name != "" {
			return
		}
		raw := string(r.src.B[k.start:k.end])
		base := k.start
		if m := texBody.FindStringSubmatchIndex(raw); m != nil {
			raw, base = raw[m[2]:m[3]], base+m[2]
		} else if strings.Contains(raw, `\document`) {
			return
		}
		if len(strings.TrimSpace(raw)) > longestFormula || strings.Contains(raw, "&") {
			return
		}
		b.texTokens(raw, base)
	}
}

func (b *builder) texTokens(raw string, base int) {
	all := texToken.FindAllStringIndex(raw, -1)
	for _, m := range all {
		tok := raw[m[0]:m[1]]
		if _, ok := texSymbols[tok]; !ok && (tok[0] == '\\') {
			return
		}
	}
	var shift paper.StyleKind // waits for the next token or group
	depth, from, until := 0, 0, -1
	for _, m := range all {
		tok := raw[m[0]:m[1]]
		switch {
		case tok == "^":
			shift = paper.Raised
			continue
		case tok == "_":
			shift = paper.Lowered
			continue
		case tok == "{":
			depth++
			if shift != 0 && until < 0 {
				from, until = len(b.S), depth-1
			}
			continue
		case tok == "}":
			depth--
			if depth == until {
				if len(b.S) > from {
					b.Styles = append(b.Styles, paper.Style{Start: from, End: len(b.S), Kind: shift})
				}
				shift, until = 0, -1
			}
			continue
		case strings.TrimSpace(tok) == "":
			continue
		}
		b.Flush()
		start := len(b.S)
		if s, ok := texSymbols[tok]; ok {
			if s == " " {
				b.Word()
			} else {
				b.PutAs([]byte(s), base+m[0])
			}
		} else {
			b.Put([]byte(tok), base+m[0])
		}
		if shift != 0 && until < 0 {
			// without braces only the first character is raised
			if len(b.S) > start {
				b.Styles = append(b.Styles, paper.Style{Start: start, End: start + runeLen(b.S[start:]), Kind: shift})
			}
			shift = 0
		}
	}
}

// runeLen is the length in bytes of the first character of s.
func runeLen(s []byte) int {
	_, n := utf8.DecodeRune(s)
	return n
}
