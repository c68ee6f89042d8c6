package spec

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"unicode"
)

// Fault is one thing wrong with a spec.
type Fault struct {
	File         string // as the user named it; empty when there is no file
	Line, Column int    // from 1; columns count characters; 0 when the fault has no place
	Path         string // of the key: "motion.events[2].over"; list items count from 1
	Found        string // what stands there
	Allowed      string // what may stand there; may be empty
	Nearest      string // the valid name nearest to the one found; empty when none is near
	Advice       string // what to do; may be empty
}

// Error prints the fault on one line:
//
//	file:line:column: path: found X; allowed: Y; did you mean Z?; advice
func (f Fault) Error() string {
	var b strings.Builder
	if f.File != "" {
		b.WriteString(f.File + ":")
	}
	if f.Line > 0 {
		fmt.Fprintf(&b, "%d:%d:", f.Line, f.Column)
	}
	if b.Len() > 0 {
		b.WriteByte(' ')
	}
	if f.Path != "" {
		b.WriteString(f.Path + ": ")
	}
	b.WriteString("found " + f.Found)
	if f.Allowed != "" {
		b.WriteString("; allowed: " + f.Allowed)
	}
	if f.Nearest != "" {
		b.WriteString("; did you mean " + f.Nearest + "?")
	}
	if f.Advice != "" {
		b.WriteString("; " + f.Advice)
	}
	return b.String()
}

// Faults are all faults of one spec in the order of their places.
type Faults []Fault

// Error prints one fault a line.
func (f Faults) Error() string {
	lines := make([]string, len(f))
	for i, one := range f {
		lines[i] = one.Error()
	}
	return strings.Join(lines, "\n")
}

func (f Faults) sorted() Faults {
	slices.SortStableFunc(f, func(a, b Fault) int {
		return cmp.Or(cmp.Compare(a.Line, b.Line), cmp.Compare(a.Column, b.Column))
	})
	return slices.Compact(f)
}

// quoted echoes text of the spec: shortened, and with control characters escaped.
func quoted(s string) string {
	const most = 40
	if r := []rune(s); len(r) > most {
		s = string(r[:most]) + "..."
	}
	return strconv.Quote(s)
}

// figure prints a number for a message with ten significant digits, without an
// exponent where that is readable.
func figure(x float64) string {
	const digits, smallest, largest = 10, 1e-7, 1e9
	rounded, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', digits, 64), 64)
	if size := math.Abs(rounded); err == nil && (size == 0 || size >= smallest && size < largest) {
		return strconv.FormatFloat(rounded, 'f', -1, 64)
	}
	return strconv.FormatFloat(x, 'g', digits, 64)
}

// nearest returns the name with the smallest edit distance to word, or "" when
// every name is further off than a third of the word's letters (long words: one
// more).
func nearest(word string, names []string) string {
	const longest, long = 64, 4 // letters; no valid name is longer than the first
	if len(word) > longest {
		return ""
	}
	letters := len([]rune(word))
	best, least := "", letters/3+1
	if letters >= long {
		least++
	}
	for _, name := range names {
		if d := distance(plainForm(word), plainForm(name)); d < least {
			best, least = name, d
		}
	}
	return best
}

// plainForm takes away what people mix up: case, hyphen, underscore and blank.
func plainForm(s string) []rune {
	return []rune(strings.Map(func(r rune) rune {
		if r == '-' || r == ' ' {
			return '_'
		}
		return unicode.ToLower(r)
	}, s))
}

// distance counts the letters to insert, delete, replace or swap with their
// neighbor that turn a into b: optimal string alignment (Damerau, CACM 7(3),
// 1964, 171-176; dynamic programme as Wagner and Fischer, JACM 21(1), 1974).
func distance(a, b []rune) int {
	d := make([][]int, len(a)+1)
	for i := range d {
		d[i] = make([]int, len(b)+1)
		d[i][0] = i
	}
	for j := range d[0] {
		d[0][j] = j
	}
	for i := 1; i <= len(a); i++ {
		for j := 1; j <= len(b); j++ {
			replace := 1
			if a[i-1] == b[j-1] {
				replace = 0
			}
			d[i][j] = min(d[i-1][j]+1, d[i][j-1]+1, d[i-1][j-1]+replace)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				d[i][j] = min(d[i][j], d[i-2][j-2]+1)
			}
		}
	}
	return d[len(a)][len(b)]
}
