package read

import (
	"bytes"
	"math"
	"strconv"
	"strings"
)

// pair is a group: a code and its value.
type pair struct {
	code  int
	value string
	line  int // of the code; the value is on the next line
}

// codeComment marks a group every reader passes over.
const codeComment = 999

// scan splits a file into groups. The last must be EOF, and nothing follows it.
func scan(data []byte) ([]pair, error) {
	if len(data) > LargestFile {
		return nil, fault(1, "the file has %d bytes; at most %d are taken", len(data), LargestFile)
	}
	var pairs []pair
	line := 1
	for rest := data; len(rest) > 0; line += 2 {
		var code, value string
		var whole bool
		code, rest, _ = cutLine(rest)
		if value, rest, whole = cutLine(rest); !whole && value == "" {
			return nil, fault(line, "the file ends after group code %q; its value is missing", code)
		}
		p, err := newPair(code, value, line)
		if err != nil {
			return nil, err
		}
		pairs = append(pairs, p)
		if p.code == 0 && p.value == "EOF" {
			if len(rest) > 0 {
				return nil, fault(line+2, "there is more after EOF")
			}
			return pairs, nil
		}
	}
	return nil, fault(line, "the file ends without EOF; it was cut short")
}

// cutLine takes a line off; whole tells whether it had a line end.
func cutLine(data []byte) (text string, rest []byte, whole bool) {
	line, rest, whole := bytes.Cut(data, []byte{'\n'})
	return string(bytes.TrimSuffix(line, []byte{'\r'})), rest, whole
}

func newPair(code, value string, line int) (pair, error) {
	for i := range len(value) {
		if value[i] < 0x20 || value[i] > 0x7e {
			return pair{}, fault(line+1, "byte %d of %.60q is not printable ASCII", i+1, value)
		}
	}
	number, err := strconv.Atoi(strings.Trim(code, " "))
	if err != nil || number < 0 || number > 1071 {
		return pair{}, fault(line, "%.60q is no group code; a whole number from 0 to 1071 must stand here", code)
	}
	return pair{number, value, line}, nil
}

// float reads a decimal figure, finite and not beyond LargestFigure.
func (p pair) float() (float64, error) {
	text := strings.Trim(p.value, " ")
	for _, c := range text {
		if !strings.ContainsRune("0123456789+-.eE", c) {
			return 0, fault(p.line+1, "%.60q is no decimal figure (group %d)", p.value, p.code)
		}
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || math.Abs(v) > LargestFigure {
		return 0, fault(p.line+1, "%.60q is no decimal figure of magnitude up to %g (group %d)", p.value, float64(LargestFigure), p.code)
	}
	return v, nil
}

// integer reads a whole number.
func (p pair) integer() (int, error) {
	n, err := strconv.ParseInt(strings.Trim(p.value, " "), 10, 32)
	if err != nil {
		return 0, fault(p.line+1, "%.60q is no whole number (group %d)", p.value, p.code)
	}
	return int(n), nil
}

// record is a group 0 with the groups up to the next group 0.
type record struct {
	name   string
	line   int
	groups []pair
}

// records splits groups into records; the first group must have code 0.
func records(pairs []pair) ([]record, error) {
	var all []record
	for _, p := range pairs {
		switch {
		case p.code == codeComment:
		case p.code == 0:
			all = append(all, record{name: p.value, line: p.line})
		case len(all) == 0:
			return nil, fault(p.line, "group %d stands before the first group 0", p.code)
		default:
			last := &all[len(all)-1]
			last.groups = append(last.groups, p)
		}
	}
	return all, nil
}
