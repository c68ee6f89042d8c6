package read

import (
	"bytes"
	"fmt"
	"slices"
	"strings"
)

// Parse reads a program. Lines that are own, but for a block number and spaces about them, are passed over and noted. The
// error is an *Error: the first fault of the file.
func Parse(data []byte, own ...string) (*Program, error) {
	if len(data) > maxSize {
		return nil, &Error{1, 1, fmt.Sprintf("more than %d bytes", maxSize), "a program has at most that many"}
	}
	r := &reader{p: &Program{Number: -1, Bytes: len(data)}}
	r.state = State{D: -1, H: -1, Tool: -1, Speed: -1}
	r.pending, r.own = -1, own
	r.p.Moves = make([]Move, 0, min(bytes.Count(data, []byte{'\n'}), len(data)/leastMove, maxLines))
	lines := 0
	for rest, more := data, true; more; {
		var raw []byte
		raw, rest, more = bytes.Cut(rest, []byte{'\n'})
		if lines++; lines > maxLines {
			return nil, &Error{lines, 1, "one line more", fmt.Sprintf("a program has at most %d lines", maxLines)}
		}
		if err := r.line(bytes.TrimSuffix(raw[:min(len(raw), maxLine+2)], []byte{'\r'}), lines); err != nil {
			return nil, err
		}
	}
	if err := r.finish(lines); err != nil {
		return nil, err
	}
	return r.p, nil
}

// leastMove is the shortest line that moves: X1 and its end.
const leastMove = 3

// reader is the control's state while it reads.
type reader struct {
	p       *Program
	state   State
	own     []string
	words   []word // of the line, kept for its memory
	now     block  // likewise
	pending int    // T word that waits for M6; -1 when none

	percent, closed bool // % at the start, at the end
	started         bool // a line with words came
	unit            int  // 20, 21, or 0
	distance        int  // 90, 91, or 0
	centerAbsolute  bool
	motion          int // 0 to 3, or -1 after G80 and before the first motion word
	hasMotion       bool

	x, y, z int64 // billionths
	rotary  int64 // billionths of a degree
	haveX   bool
	haveY   bool
	haveZ   bool
	haveR   bool
}

// line reads one line of the file.
func (r *reader) line(text []byte, no int) error {
	if len(text) > maxLine {
		return &Error{no, maxLine + 1, fmt.Sprintf("a line of more than %d characters", maxLine), "a line has at most that many"}
	}
	r.p.Longest = max(r.p.Longest, len(text))
	words, plain := quick(r.words[:0], text)
	if !plain {
		if i := unprintable(text); i >= 0 {
			return &Error{no, i + 1, fmt.Sprintf("byte %#02x", text[i]), "programs are printable ASCII"}
		}
	}
	trimmed := bytes.TrimSpace(text)
	switch {
	case len(trimmed) == 0:
		return nil
	case len(trimmed) == 1 && trimmed[0] == '%':
		return r.tape(no)
	case r.closed:
		return &Error{no, 1, "text after the closing %", "nothing follows it"}
	case len(r.own) > 0 && r.isOwn(string(trimmed), no):
		return nil
	}
	var comments []string
	if !plain {
		var err error
		if words, comments, err = scan(r.words[:0], text, no); err != nil {
			return err
		}
	}
	for _, c := range comments {
		r.p.Comments = append(r.p.Comments, Comment{no, strings.TrimSpace(c)})
	}
	r.started = true
	if len(words) == 0 {
		return nil
	}
	r.words = words
	if r.p.Ended {
		return &Error{no, int(words[0].column), words[0].in(text) + " after the end of the program", "nothing follows M2 or M30 but %"}
	}
	r.p.Blocks++
	if err := r.now.sort(words, text, no); err != nil {
		return err
	}
	return r.block(&r.now)
}

// isOwn notes a line of the user's own, which is the same with other spaces, letters in lower case, another block number or a
// comment behind it.
func (r *reader) isOwn(text string, no int) bool {
	text = usual(text)
	if rest, ok := strings.CutPrefix(text, "N"); ok {
		if digits := len(rest) - len(strings.TrimLeft(rest, "0123456789")); digits > 0 {
			text = strings.TrimSpace(rest[digits:])
		}
	}
	bare := text
	if k := strings.IndexAny(text, "(;"); k >= 0 {
		bare = strings.TrimSpace(text[:k])
	}
	i := slices.IndexFunc(r.own, func(o string) bool { return usual(o) == text || usual(o) == bare })
	if i < 0 || r.p.Ended {
		return false
	}
	r.started = true
	r.p.Blocks++
	r.p.Own = append(r.p.Own, Own{no, r.own[i], len(r.p.Moves)})
	return true
}

// usual is a line in capitals with one space between its words.
func usual(line string) string { return strings.ToUpper(strings.Join(strings.Fields(line), " ")) }

// unprintable returns the index of the first byte that is no printable ASCII and no
// tab, or -1. Bytes above 126 are refused in comments too: controls garble them.
func unprintable(s []byte) int {
	for i, c := range s {
		if (c < ' ' && c != '\t') || c > '~' {
			return i
		}
	}
	return -1
}

// tape takes a % line: the first thing in the file, or the last.
func (r *reader) tape(no int) error {
	switch {
	case !r.started && !r.percent:
		r.percent = true
	case r.percent && !r.closed:
		r.closed = true
	default:
		return &Error{no, 1, "a %", "% stands once before and once after the program"}
	}
	return nil
}

func (r *reader) finish(lines int) error {
	switch {
	case r.percent && !r.closed:
		return &Error{lines, 1, "the end of the file", "a program that starts with % ends with %"}
	case !r.percent && !r.p.Ended:
		return &Error{lines, 1, "the end of the file", "a program ends with M2, M30 or %"}
	case r.p.Blocks == 0:
		return &Error{lines, 1, "no blocks", "a program has at least one"}
	}
	r.p.Inch = r.unit == 20
	r.p.End = r.state
	return nil
}
