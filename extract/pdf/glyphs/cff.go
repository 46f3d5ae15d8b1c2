package glyphs

// cffEncoding reads the glyph names by code in a compact (CFF) font program.
// A program that does not hold together gives no names.
func cffEncoding(b []byte, to *[256]string) {
	defer func() { _ = recover() }() // an index outside the program: no names
	if len(b) < 4 {
		return
	}
	_, next := cffIndex(b, int(b[2])) // names
	tops, next := cffIndex(b, next)
	strings, _ := cffIndex(b, next)
	if len(tops) == 0 {
		return
	}
	top := cffDict(tops[0])
	if _, cid := top[12<<8|30]; cid {
		return
	}
	glyphs, _ := cffIndex(b, int(top[17]))
	names := cffCharset(b, int(top[15]), len(glyphs), strings)
	switch offset := int(top[16]); offset {
	case 0:
		*to = *standardNames()
	case 1: // the expert encoding: names alone tell
	default:
		cffCodes(b[offset:], names, to)
	}
}

// cffIndex reads a list of byte strings and gives where it ends.
func cffIndex(b []byte, at int) (items [][]byte, end int) {
	n := int(b[at])<<8 | int(b[at+1])
	if n == 0 {
		return nil, at + 2
	}
	size := int(b[at+2])
	offset := func(i int) int {
		v := 0
		for _, c := range b[at+3+i*size : at+3+(i+1)*size] {
			v = v<<8 | int(c)
		}
		return v
	}
	base := at + 2 + (n+1)*size
	for i := range n {
		items = append(items, b[base+offset(i):base+offset(i+1)])
	}
	return items, base + offset(n)
}

// cffDict reads a dictionary: the last number before each operator.
func cffDict(b []byte) map[int]float64 {
	out := map[int]float64{}
	var last float64
	for i := 0; i < len(b); {
		c := int(b[i])
		i++
		switch {
		case c == 12:
			out[12<<8|int(b[i])] = last
			i++
		case c <= 21:
			out[c] = last
		case c == 28:
			last = float64(int16(uint16(b[i])<<8 | uint16(b[i+1])))
			i += 2
		case c == 29:
			last = float64(int32(uint32(b[i])<<24 | uint32(b[i+1])<<16 | uint32(b[i+2])<<8 | uint32(b[i+3])))
			i += 4
		case c == 30: // a real, none of which we need
			for b[i]&0xF != 0xF && b[i]>>4 != 0xF {
				i++
			}
			i++
		case c >= 32 && c <= 246:
			last = float64(c - 139)
		case c >= 247 && c <= 250:
			last = float64((c-247)*256 + int(b[i]) + 108)
			i++
		case c >= 251 && c <= 254:
			last = float64(-(c-251)*256 - int(b[i]) - 108)
			i++
		}
	}
	return out
}

// cffCharset gives the name of each glyph.
func cffCharset(b []byte, at, glyphs int, strings [][]byte) []string {
	names := make([]string, 1, glyphs+1)
	name := func(sid int) string {
		if sid < cffStandardCount {
			return cffStandardName(sid)
		}
		if sid -= cffStandardCount; sid < len(strings) {
			return string(strings[sid])
		}
		return ""
	}
	if at <= 2 { // the predefined sets number their glyphs like the strings
		for g := 1; g < glyphs; g++ {
			names = append(names, name(g))
		}
		return names
	}
	format := b[at]
	for at++; len(names) < glyphs; {
		sid := int(b[at])<<8 | int(b[at+1])
		at += 2
		more := 0
		switch format {
		case 1:
			more = int(b[at])
			at++
		case 2:
			more = int(b[at])<<8 | int(b[at+1])
			at += 2
		}
		for k := 0; k <= more && len(names) < glyphs; k++ {
			names = append(names, name(sid+k))
		}
	}
	return names
}

// cffCodes gives the code of each glyph.
func cffCodes(b []byte, names []string, to *[256]string) {
	set := func(code, glyph int) {
		if glyph < len(names) {
			to[code&0xFF] = names[glyph]
		}
	}
	n := int(b[1])
	switch b[0] & 0x7F {
	case 0:
		for i := range n {
			set(int(b[2+i]), i+1)
		}
	case 1:
		glyph := 1
		for i := range n {
			for k := 0; k <= int(b[3+2*i]); k++ {
				set(int(b[2+2*i])+k, glyph)
				glyph++
			}
		}
	}
}
