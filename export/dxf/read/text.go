package read

import (
	"strconv"
	"strings"
)

// decode reads the codes of a text: \U+XXXX, the signs %%d (degree), %%p (plus-minus)
// and %%c (diameter), and a caret with its space. Other codes are faults.
func decode(p pair) (string, error) {
	var b strings.Builder
	for rest := p.value; rest != ""; {
		text, used := code(rest)
		if used == 0 {
			return "", fault(p.line+1, "the text code at %.12q is unknown; known are \\U+XXXX, %%%%d, %%%%p, %%%%c and a caret with a space", rest)
		}
		b.WriteString(text)
		rest = rest[used:]
	}
	if strings.TrimSpace(b.String()) == "" {
		return "", fault(p.line, "the text is blank")
	}
	return b.String(), nil
}

// code decodes the first character; used is 0 when its code is unknown.
func code(s string) (text string, used int) {
	switch {
	case strings.HasPrefix(s, `\U+`):
		if len(s) < 7 {
			return "", 0
		}
		n, err := strconv.ParseUint(s[3:7], 16, 16)
		if err != nil || n < 0x20 || n >= 0xd800 && n < 0xe000 {
			return "", 0
		}
		return string(rune(n)), 7
	case strings.HasPrefix(s, `\`):
		return "", 0
	case strings.HasPrefix(s, "%%"):
		if len(s) < 3 {
			return "", 0
		}
		switch s[2] {
		case 'd', 'D':
			return "°", 3
		case 'p', 'P':
			return "±", 3
		case 'c', 'C':
			return "⌀", 3
		}
		return "", 0
	case strings.HasPrefix(s, "^ "):
		return "^", 2
	case s[0] == '^':
		return "", 0
	}
	return s[:1], 1
}
