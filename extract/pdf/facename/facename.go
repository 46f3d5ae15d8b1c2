// Package facename reads what the name of a font tells: its plain name, bold,
// italic. Both PDF readers use it, so that they call a font the same.
package facename

import "strings"

// Plain cuts the tag of a subset from a font's name: "ABCDEF+Times" is "Times".
func Plain(name string) string {
	if len(name) > 7 && name[6] == '+' {
		for _, c := range name[:6] {
			if c < 'A' || c > 'Z' {
				return name
			}
		}
		return name[7:]
	}
	return name
}

var (
	boldWords   = []string{"bold", "black", "heavy", "-bd", "demi"}
	italicWords = []string{"italic", "oblique"}
)

// Bold reports whether the name is one of a bold face.
func Bold(name string) bool { return containsAny(strings.ToLower(name), boldWords) }

// Italic reports whether the name is one of a slanted face.
func Italic(name string) bool {
	s := strings.ToLower(name)
	return containsAny(s, italicWords) || strings.HasSuffix(s, "-it")
}

func containsAny(s string, words []string) bool {
	for _, w := range words {
		if strings.Contains(s, w) {
			return true
		}
	}
	return false
}
