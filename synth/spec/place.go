package spec

import (
	"bytes"
	"errors"
	"io"
	"unicode/utf8"
)

// Where is a syntax error? The library names the line where an enclosing block
// began, or the line before, and no column. But it reads forward: once a
// beginning of the file holds the error, everything longer is refused with the
// same words. So the place is the end of the shortest such beginning. Cutting
// inside brackets would be an error of its own, so open brackets are closed
// before asking. The search goes backwards from the end (by lines, then by
// characters) and stops at the first beginning that is not refused alike; a
// search by halves could stop inside an earlier quoted text, which is also
// refused when cut.
//
// Price: one parse a line and a character, 20 ms for a spec of 100 lines; above
// the two limits below the library's line is given instead.
const (
	mostSearchBytes = 16 << 10
	mostSearchSteps = 500
)

func syntaxPlace(data []byte, message string, err error) Place {
	ends := lineEnds(data)
	if len(data) > mostSearchBytes || len(ends) > mostSearchSteps {
		return Place{min(libraryLine(err), len(ends)), 1}
	}
	if open := openBrackets(data); !refusedAlike(data, message) && len(open) > 0 {
		return placeOf(data, open[len(open)-1].offset)
	}
	line := len(ends) - 1
	for line > 0 && refusedAlike(data[:ends[line-1]], message) {
		line--
	}
	start := 0
	if line > 0 {
		start = ends[line-1]
	}
	return placeOf(data, shortestRefused(data, start, ends[line], message))
}

// shortestRefused returns the offset of the last character of the shortest
// refused beginning that ends within the line data[start:end].
func shortestRefused(data []byte, start, end int, message string) int {
	end = start + len(bytes.TrimRight(data[start:end], "\r\n"))
	if end-start > mostSearchSteps {
		return start
	}
	last := start
	for end > start {
		_, n := utf8.DecodeLastRune(data[:end])
		last = end - n
		if !refusedAlike(data[:last], message) {
			break
		}
		end = last
	}
	return last
}

// refusedAlike reports whether a beginning of a file, its brackets closed, is
// refused with the message.
func refusedAlike(beginning []byte, message string) bool {
	text := bytes.Clone(beginning)
	open := openBrackets(beginning)
	for i := len(open) - 1; i >= 0; i-- {
		text = append(text, open[i].closer)
	}
	_, _, err := documents(text)
	return err != nil && !errors.Is(err, io.EOF) && plainMessage(err) == message
}

type bracket struct {
	offset int
	closer byte
}

// openBrackets lists the flow brackets that are not closed, leaving out quoted
// text and comments. It guesses; it only serves to find a place.
func openBrackets(data []byte) []bracket {
	var open []bracket
	var quote byte
	for i := 0; i < len(data); i++ {
		c := data[i]
		fresh := i == 0 || bytes.IndexByte([]byte(" \t\n[{,"), data[i-1]) >= 0
		switch {
		case quote != 0:
			if c == '\\' && quote == '"' {
				i++
			} else if c == quote {
				quote = 0
			}
		case (c == '"' || c == '\'') && fresh:
			quote = c
		case c == '#' && fresh:
			for i+1 < len(data) && data[i+1] != '\n' {
				i++
			}
		case (c == '[' || c == '{') && (fresh || len(open) > 0):
			open = append(open, bracket{i, c + 2}) // ']' and '}' follow two places after
		case (c == ']' || c == '}') && len(open) > 0 && open[len(open)-1].closer == c:
			open = open[:len(open)-1]
		}
	}
	return open
}

// lineEnds returns the offsets behind each line, its break included.
func lineEnds(data []byte) []int {
	var ends []int
	for i, c := range data {
		if c == '\n' {
			ends = append(ends, i+1)
		}
	}
	if len(ends) == 0 || ends[len(ends)-1] < len(data) {
		ends = append(ends, len(data))
	}
	return ends
}

// placeOf turns a byte offset into line and column, columns in characters.
func placeOf(data []byte, offset int) Place {
	before := data[:offset]
	line := bytes.Count(before, []byte("\n")) + 1
	start := bytes.LastIndexByte(before, '\n') + 1
	return Place{line, utf8.RuneCount(before[start:]) + 1}
}
