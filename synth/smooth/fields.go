package smooth

import (
	"strconv"
	"strings"
	"unicode/utf8"
)

// field is the text between two separators, without the blanks and quotes around it.
type field struct {
	text   string
	column int // where it begins, in characters from 1
}

// split parts a line; a separator between double quotes is text.
func split(line string, separator rune) []field {
	var out []field
	from, quotes := 0, false
	for k, c := range line {
		switch {
		case c == '"':
			quotes = !quotes
		case c == separator && !quotes:
			out = append(out, trimmed(line, from, k))
			from = k + utf8.RuneLen(c)
		}
	}
	return append(out, trimmed(line, from, len(line)))
}

// trimmed returns the field of a line between two byte offsets.
func trimmed(line string, from, to int) field {
	text := strings.TrimSpace(line[from:to])
	if text != "" {
		from += strings.Index(line[from:to], text)
	}
	column := utf8.RuneCountInString(line[:from]) + 1
	if n := len(text); n >= 2 && text[0] == '"' && text[n-1] == '"' {
		text = strings.TrimSpace(text[1 : n-1])
	}
	return field{text, column}
}

// number reads a decimal number: digits with at most one point, a sign, an exponent. It
// is stricter than strconv, which knows hexadecimal, underscores and infinity.
func number(s string) (float64, bool) {
	digits := false
	for _, c := range s {
		switch {
		case c >= '0' && c <= '9':
			digits = true
		case !strings.ContainsRune("+-.eE", c):
			return 0, false
		}
	}
	v, err := strconv.ParseFloat(s, 64)
	return v, digits && err == nil
}

// isDecimalComma reports whether s is a number with a comma in the place of its point.
func isDecimalComma(s string) bool {
	_, ok := number(strings.Replace(s, ",", ".", 1))
	return ok
}

func separatorName(separator rune) string {
	switch separator {
	case '\t':
		return "a tab"
	case ';':
		return "a semicolon"
	}
	return "a comma"
}

// quoted echoes text of the table: shortened, and with control characters escaped.
func quoted(s string) string {
	const most = 40
	if r := []rune(s); len(r) > most {
		s = string(r[:most]) + "..."
	}
	return strconv.Quote(s)
}
