package glyphs

// tokKind is the kind of one token of a content stream.
type tokKind uint8

const (
	tokEOF tokKind = iota
	tokNumber
	tokName
	tokString
	tokWord // an operator, or true, false, null
	tokArrayOpen
	tokArrayClose
	tokDictOpen
	tokDictClose
)

// token is one token; b is only valid until the stream's buffer goes.
type token struct {
	kind tokKind
	num  float64
	b    []byte // name without slash, string decoded, word
}

// lexer splits a content stream or a character map into tokens. It never
// fails: rubbish becomes words that no operator answers to.
type lexer struct {
	b   []byte
	pos int
}

// class of a byte in PDF syntax.
const (
	regular = iota
	space
	delimiter
)

var classes = func() (c [256]uint8) {
	for _, b := range []byte("\x00\t\n\f\r ") {
		c[b] = space
	}
	for _, b := range []byte("()<>[]{}/%") {
		c[b] = delimiter
	}
	return c
}()

func (l *lexer) skipSpace() {
	for l.pos < len(l.b) {
		c := l.b[l.pos]
		if c == '%' {
			for l.pos < len(l.b) && l.b[l.pos] != '\n' && l.b[l.pos] != '\r' {
				l.pos++
			}
			continue
		}
		if classes[c] != space {
			return
		}
		l.pos++
	}
}

func (l *lexer) next() token {
	l.skipSpace()
	if l.pos >= len(l.b) {
		return token{kind: tokEOF}
	}
	c := l.b[l.pos]
	switch c {
	case '(':
		return l.literal()
	case '/':
		return l.name()
	case '[':
		l.pos++
		return token{kind: tokArrayOpen}
	case ']':
		l.pos++
		return token{kind: tokArrayClose}
	case '<':
		if l.at(1) == '<' {
			l.pos += 2
			return token{kind: tokDictOpen}
		}
		return l.hex()
	case '>':
		if l.at(1) == '>' {
			l.pos += 2
			return token{kind: tokDictClose}
		}
		l.pos++
		return l.next1()
	case ')', '{', '}':
		l.pos++
		return token{kind: tokWord, b: l.b[l.pos-1 : l.pos]}
	}
	if c >= '0' && c <= '9' || c == '-' || c == '+' || c == '.' {
		if t, ok := l.number(); ok {
			return t
		}
	}
	return l.word()
}

// next1 is next, one call deeper at most: a run of lone '>' is skipped here.
func (l *lexer) next1() token {
	for l.pos < len(l.b) && l.b[l.pos] == '>' {
		l.pos++
	}
	return token{kind: tokWord}
}

func (l *lexer) at(k int) byte {
	if l.pos+k < len(l.b) {
		return l.b[l.pos+k]
	}
	return 0
}

func (l *lexer) word() token {
	start := l.pos
	for l.pos < len(l.b) && classes[l.b[l.pos]] == regular {
		l.pos++
	}
	return token{kind: tokWord, b: l.b[start:l.pos]}
}

// number reads integers and reals, also as sloppy writers print them: "--5",
// "5-3" (the part behind is dropped), "4.". ok is false for other words.
func (l *lexer) number() (token, bool) {
	i, neg, digits := l.pos, false, 0
	for i < len(l.b) && (l.b[i] == '-' || l.b[i] == '+') {
		neg = l.b[i] == '-'
		i++
	}
	var whole, frac, scale float64 = 0, 0, 1
	for ; i < len(l.b) && l.b[i] >= '0' && l.b[i] <= '9'; i++ {
		whole = whole*10 + float64(l.b[i]-'0')
		digits++
	}
	if i < len(l.b) && l.b[i] == '.' {
		for i++; i < len(l.b) && l.b[i] >= '0' && l.b[i] <= '9'; i++ {
			if scale < 1e12 {
				frac, scale = frac*10+float64(l.b[i]-'0'), scale*10
			}
			digits++
		}
	}
	for i < len(l.b) && digits > 0 && (l.b[i] == '-' || l.b[i] == '.' || l.b[i] >= '0' && l.b[i] <= '9') {
		i++
	}
	if i < len(l.b) && classes[l.b[i]] == regular {
		return token{}, false
	}
	l.pos = i
	v := whole + frac/scale
	if neg {
		v = -v
	}
	return token{kind: tokNumber, num: v}, true
}

func (l *lexer) name() token {
	l.pos++
	start, escaped := l.pos, false
	for l.pos < len(l.b) && classes[l.b[l.pos]] == regular {
		escaped = escaped || l.b[l.pos] == '#'
		l.pos++
	}
	b := l.b[start:l.pos]
	if escaped {
		b = unescapeName(b)
	}
	return token{kind: tokName, b: b}
}

func unescapeName(b []byte) []byte {
	out := make([]byte, 0, len(b))
	for i := 0; i < len(b); i++ {
		if b[i] == '#' && i+2 < len(b) && hexVal[b[i+1]] >= 0 && hexVal[b[i+2]] >= 0 {
			out = append(out, byte(hexVal[b[i+1]]<<4|hexVal[b[i+2]]))
			i += 2
			continue
		}
		out = append(out, b[i])
	}
	return out
}

var hexVal = func() (v [256]int8) {
	for i := range v {
		v[i] = -1
	}
	for i := range 10 {
		v['0'+i] = int8(i)
	}
	for i := range 6 {
		v['a'+i], v['A'+i] = int8(10+i), int8(10+i)
	}
	return v
}()

func (l *lexer) hex() token {
	l.pos++
	var out []byte
	high := int8(-1)
	for l.pos < len(l.b) {
		c := l.b[l.pos]
		l.pos++
		if c == '>' {
			break
		}
		v := hexVal[c]
		switch {
		case v < 0:
		case high < 0:
			high = v
		default:
			out = append(out, byte(high<<4|v))
			high = -1
		}
	}
	if high >= 0 {
		out = append(out, byte(high<<4))
	}
	return token{kind: tokString, b: out}
}

// literal reads a string in round brackets. One without escapes is a view of
// the stream.
func (l *lexer) literal() token {
	l.pos++
	start, depth := l.pos, 1
	for l.pos < len(l.b) {
		switch l.b[l.pos] {
		case '(':
			depth++
		case ')':
			if depth--; depth == 0 {
				l.pos++
				return token{kind: tokString, b: l.b[start : l.pos-1]}
			}
		case '\\', '\r':
			return l.escaped(start, depth)
		}
		l.pos++
	}
	return token{kind: tokString, b: l.b[start:]}
}

// escaped goes on with a string from its first escape on.
func (l *lexer) escaped(start, depth int) token {
	out := append(make([]byte, 0, 2*(l.pos-start)+16), l.b[start:l.pos]...)
	for l.pos < len(l.b) {
		c := l.b[l.pos]
		l.pos++
		switch c {
		case '(':
			depth++
		case ')':
			if depth--; depth == 0 {
				return token{kind: tokString, b: out}
			}
		case '\r':
			if l.at(0) == '\n' {
				l.pos++
			}
			c = '\n'
		case '\\':
			out = l.escape(out)
			continue
		}
		out = append(out, c)
	}
	return token{kind: tokString, b: out}
}

func (l *lexer) escape(out []byte) []byte {
	if l.pos >= len(l.b) {
		return out
	}
	c := l.b[l.pos]
	l.pos++
	switch c {
	case 'n':
		return append(out, '\n')
	case 'r':
		return append(out, '\r')
	case 't':
		return append(out, '\t')
	case 'b':
		return append(out, '\b')
	case 'f':
		return append(out, '\f')
	case '\n':
		return out
	case '\r':
		if l.at(0) == '\n' {
			l.pos++
		}
		return out
	}
	if c < '0' || c > '7' {
		return append(out, c)
	}
	v := int(c - '0')
	for k := 0; k < 2 && l.pos < len(l.b) && l.b[l.pos] >= '0' && l.b[l.pos] <= '7'; k++ {
		v = v<<3 | int(l.b[l.pos]-'0')
		l.pos++
	}
	return append(out, byte(v))
}
