package dxf

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Longest texts, in bytes as written: the group value limits of the two versions.
const (
	longestR12  = 255
	longest2000 = 2049
)

// encode writes a text, which checkText has passed, in printable ASCII. Its own signs
// are escaped, so that a text cannot hold a code by accident: a backslash, and a
// percent sign after another, become \U+XXXX; a caret is followed by a space.
func encode(text string) string {
	var b strings.Builder
	last := rune(0)
	for _, c := range text {
		b.WriteString(encodeRune(c, last))
		last = c
	}
	return b.String()
}

func encodeRune(c, last rune) string {
	percent := last == '%' // a code after it would be misread
	switch {
	case c == '°' && !percent:
		return "%%d"
	case c == '±' && !percent:
		return "%%p"
	case c == '⌀' && !percent:
		return "%%c"
	case c == '^':
		return "^ "
	case c == '\\', c == '%' && percent, c > 0x7e && c <= 0xffff:
		return fmt.Sprintf(`\U+%04X`, c)
	case c > 0xffff:
		return "?"
	}
	return string(c)
}

// checkText refuses a text that cannot be written, or not in this version.
func checkText(text string, v Version) error {
	if !utf8.ValidString(text) {
		return fmt.Errorf("text %q is not valid UTF-8", text)
	}
	if strings.TrimSpace(text) == "" {
		return fmt.Errorf("text %q is blank; leave it out", text)
	}
	if i := strings.IndexFunc(text, unicode.IsControl); i >= 0 {
		return fmt.Errorf("text %q holds the control character %U; split it into lines", text, []rune(text[i:])[0])
	}
	most := longest2000
	if v == R12 {
		most = longestR12
	}
	if n := len(encode(text)); n > most {
		return fmt.Errorf("text %.40q... takes %d bytes as written, at most %d are allowed; wrap it", text, n, most)
	}
	return nil
}

// Wrap breaks a text into lines of at most columns characters (at least 1):
// at its line feeds, then at spaces where it can. Spaces at a break are dropped, and blank lines. With up to
// 36 columns every line fits into R12 whatever its characters.
func Wrap(text string, columns int) []string {
	columns = max(columns, 1)
	var lines []string
	for _, paragraph := range strings.FieldsFunc(text, func(c rune) bool { return c == '\n' || c == '\r' }) {
		rest := []rune(strings.TrimSpace(paragraph))
		for len(rest) > columns {
			cut := columns
			for cut > 0 && !unicode.IsSpace(rest[cut]) {
				cut--
			}
			if cut == 0 {
				cut = columns
			}
			lines = append(lines, strings.TrimSpace(string(rest[:cut])))
			rest = []rune(strings.TrimSpace(string(rest[cut:])))
		}
		if len(rest) > 0 {
			lines = append(lines, string(rest))
		}
	}
	return lines
}
