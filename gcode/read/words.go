package read

import (
	"bytes"
	"fmt"
	"strconv"
	"strings"
)

// word is a letter with its number in billionths.
type word struct {
	value      int64
	column     uint16 // of the letter, from 1
	start, end uint16 // where its number stands in the line: what a fault shows
	letter     byte
}

const (
	billion  = 1_000_000_000
	decimals = 9
	// maxWhole is the largest number taken, in units: billionths of it are exact in
	// a double, so a coordinate is rounded once.
	maxWhole = 9_000_000
	// maxLine is the longest line taken, the limit of NISTIR 6556 3.2.
	maxLine = 256
	maxSize = 64 << 20 // bytes of a program
	// maxLines keeps a hostile program of short lines from filling the memory: a line
	// becomes a Move of some 250 bytes, and may become a fault of some 500.
	maxLines = 200_000
)

// letters are those that are read, a bit each from A.
const letters = 1 | 1<<('B'-'A') | 1<<('C'-'A') | 1<<('D'-'A') | 1<<('F'-'A') | 1<<('G'-'A') | 1<<('H'-'A') | 1<<('I'-'A') | 1<<('J'-'A') |
	1<<('M'-'A') | 1<<('N'-'A') | 1<<('O'-'A') | 1<<('P'-'A') | 1<<('R'-'A') | 1<<('S'-'A') | 1<<('T'-'A') | 1<<('X'-'A') | 1<<('Y'-'A') | 1<<('Z'-'A')

// scan cuts one line into words, appended to those given, and comments. A comment in
// parentheses is one item; a semicolon makes a comment of the rest.
func scan(words []word, line []byte, no int) (_ []word, comments []string, err error) {
	for i := 0; i < len(line); {
		c := line[i]
		switch {
		case c == ' ' || c == '\t':
			i++
		case c == '(':
			end := bytes.IndexAny(line[i+1:], "()")
			if end < 0 || line[i+1+end] == '(' {
				return nil, nil, &Error{no, i + 1, "a comment that does not end", "comments end with ) on their line and hold no ("}
			}
			comments = append(comments, string(line[i+1:i+1+end]))
			i += end + 2
		case c == ';':
			return words, append(comments, string(line[i+1:])), nil
		default:
			w, err := scanWord(line, i, no)
			if err != nil {
				return nil, nil, err
			}
			words = append(words, w)
			i = int(w.end)
		}
	}
	return words, comments, nil
}

// scanWord reads the word at line[i:].
func scanWord(line []byte, i, no int) (word, error) {
	w := word{letter: upper(line[i]), column: uint16(i + 1)}
	if w.letter < 'A' || w.letter > 'Z' || letters>>(w.letter-'A')&1 == 0 {
		return w, &Error{no, i + 1, fmt.Sprintf("%q", line[i:i+1]), "words G X Y Z A B C I J R F S T D H N O M P are read here"}
	}
	j := i + 1
	for j < len(line) && (line[j] == ' ' || line[j] == '\t') {
		j++
	}
	w.start = uint16(j)
	for j < len(line) && inNumber(line[j]) {
		j++
	}
	w.end = uint16(j)
	exact, fault := parseNumber(string(line[w.start:j]))
	if fault != "" {
		if int(w.start) == j { // no number at all: say what stands in its place
			j = min(j+1, len(line))
		}
		found := "nothing"
		if int(w.start) < j {
			found = strconv.Quote(string(line[w.start:j]))
		}
		return w, &Error{no, int(w.start) + 1, fmt.Sprintf("%s after %c", found, w.letter), fault}
	}
	w.value = exact
	return w, nil
}

func inNumber(c byte) bool { return '0' <= c && c <= '9' || c == '.' || c == '-' || c == '+' }

func upper(c byte) byte {
	if 'a' <= c && c <= 'z' {
		return c - 'a' + 'A'
	}
	return c
}

// parseNumber returns a decimal number in billionths, exactly; a fault says what
// is allowed instead.
func parseNumber(s string) (int64, string) {
	const form = "a number is an optional sign, digits, and at most one point"
	neg := strings.HasPrefix(s, "-")
	if neg || strings.HasPrefix(s, "+") {
		s = s[1:]
	}
	whole, part, _ := strings.Cut(s, ".")
	if whole+part == "" || strings.ContainsAny(whole+part, "+-.") {
		return 0, form
	}
	part = strings.TrimRight(part, "0")
	if len(part) > decimals {
		return 0, "at most 9 decimals are read"
	}
	v := int64(0)
	for _, d := range []byte(strings.TrimLeft(whole, "0")) {
		if v = v*10 + int64(d-'0'); v > maxWhole {
			return 0, fmt.Sprintf("numbers up to %d are read", maxWhole)
		}
	}
	for k := 0; k < decimals; k++ {
		d := int64(0)
		if k < len(part) {
			d = int64(part[k] - '0')
		}
		v = v*10 + d
	}
	if neg {
		v = -v
	}
	return v, ""
}
