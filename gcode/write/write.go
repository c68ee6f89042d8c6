// Package write prints a gcode.Program: ASCII, one block a line, LF, no
// arithmetic. A count of the grid is printed as that integer with a point in it.
package write

import (
	"strconv"
	"strings"

	"lobewright/gcode"
	"lobewright/tolerance/chain"
)

const (
	// lineWidth is the longest comment line; the longest block of words is
	// below it, and old controls take 80 characters and more.
	lineWidth = 78
	// blockStep is the step of N numbers, which leaves room for a block by hand.
	blockStep = 10
	// lastNumber is the largest N number of controls with five digits.
	lastNumber = 99990
)

// Program returns the text of p. Comments lose what a control may not take: bytes
// outside printable ASCII become '?', brackets of every kind and signs that
// some controls give a meaning become a space.
func Program(p gcode.Program) []byte {
	w := &writer{p: p}
	w.raw("%")
	w.raw("O" + pad(p.Number, 4))
	for _, c := range p.Header {
		w.comment(c)
	}
	for _, b := range p.Blocks {
		w.block(b)
	}
	w.raw("%")
	return []byte(w.out.String())
}

type writer struct {
	p   gcode.Program
	out strings.Builder
	n   int
}

func (w *writer) raw(s string) { w.out.WriteString(s + "\n") }

// comment prints text on lines of its own, cut between words.
func (w *writer) comment(text string) {
	line, room := "", w.width()-2
	for _, word := range strings.Fields(Clean(text)) {
		word = word[:min(len(word), room)]
		if line != "" && len(line)+1+len(word) > room {
			w.raw(w.said(line))
			line = ""
		}
		if line != "" {
			line += " "
		}
		line += word
	}
	if line != "" {
		w.raw(w.said(line))
	}
}

// width is the most characters of a line of comment.
func (w *writer) width() int {
	if n := w.p.LineLength; n > 0 {
		return min(n, lineWidth)
	}
	return lineWidth
}

// said is a comment as the control takes it.
func (w *writer) said(text string) string {
	if w.p.Semicolons {
		return "; " + text
	}
	return "(" + text + ")"
}

// Clean returns the text as a comment may hold it, in capitals.
func Clean(text string) string {
	return strings.Map(func(c rune) rune {
		switch {
		case strings.ContainsRune("()[]{}<>;%#$~\"'\\|^`@", c), c < ' ', c == 127:
			return ' '
		case c > 127:
			return '?'
		case 'a' <= c && c <= 'z':
			return c - 'a' + 'A'
		}
		return c
	}, text)
}

// block prints the words of b in the usual order; a block without words is its
// comment on lines of its own.
func (w *writer) block(b gcode.Block) {
	words := w.words(b)
	if b.Own != "" {
		words = []string{b.Own}
	}
	if len(words) == 0 {
		w.comment(b.Comment)
		return
	}
	if w.p.BlockNumbers {
		w.n += blockStep
		if w.n > lastNumber {
			w.n = blockStep
		}
		words = append([]string{"N" + strconv.Itoa(w.n)}, words...)
	}
	line := strings.Join(words, " ")
	if b.Comment != "" {
		line += " " + w.said(strings.Join(strings.Fields(Clean(b.Comment)), " "))
	}
	w.raw(line)
}

func (w *writer) words(b gcode.Block) []string {
	var words []string
	for _, c := range b.G {
		words = append(words, "G"+code(c))
	}
	if b.Motion != gcode.NoMotion {
		words = append(words, "G"+strconv.Itoa(int(b.Motion)-1))
	}
	for _, a := range []struct {
		letter string
		count  gcode.Count
		grid   chain.Grid
	}{{"X", b.X, w.p.Grid}, {"Y", b.Y, w.p.Grid}, {"Z", b.Z, w.p.Grid}, {string(w.p.Rotary), b.R, w.p.RotaryGrid},
		{"I", b.I, w.p.Grid}, {"J", b.J, w.p.Grid}, {"R", b.Round, w.p.Grid}, {"P", b.P, w.p.Grid}, {"F", b.F, w.p.Grid}} {
		if a.count.On {
			words = append(words, a.letter+a.grid.Format(a.count.V))
		}
	}
	for _, a := range []struct {
		letter string
		number gcode.Number
	}{{"T", b.T}, {"D", b.D}, {"H", b.H}, {"S", b.S}} {
		if a.number.On {
			words = append(words, a.letter+strconv.Itoa(a.number.V))
		}
	}
	for _, m := range b.M {
		words = append(words, "M"+pad(m, 2))
	}
	return words
}

// code prints a G word's number: 911 as 91.1.
func code(c gcode.Code) string {
	if c%10 == 0 {
		return strconv.Itoa(int(c / 10))
	}
	return strconv.Itoa(int(c/10)) + "." + strconv.Itoa(int(c%10))
}

// pad prints n with leading zeros to at least the given digits.
func pad(n, digits int) string {
	s := strconv.Itoa(n)
	return strings.Repeat("0", max(0, digits-len(s))) + s
}
