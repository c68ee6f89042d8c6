package spec

import (
	"fmt"
	"math"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"go.yaml.in/yaml/v3"
)

// Limits of a value.
const (
	mostItems  = 1000 // of a list
	mostText   = 200  // characters of a line of text
	mostFaults = 200  // reported for one spec
)

// span is the numbers a key takes.
type span struct {
	noun         string // "a length": with its unit
	lo, hi       float64
	above, below bool // lo, hi itself is out
	whole        bool // whole numbers only
}

// String says the span in words: "a length from 0.000001 to 10000".
func (s span) String() string {
	lo, hi := " from ", " to "
	switch {
	case s.lo == s.hi:
		return figure(s.lo)
	case s.above && s.below:
		lo, hi = " above ", " and below "
	case s.above:
		lo, hi = " above ", " and at most "
	case s.below:
		hi = " to below "
	}
	return s.noun + lo + figure(s.lo) + hi + figure(s.hi)
}

func (s span) holds(x float64) bool {
	low := x >= s.lo && !(s.above && x == s.lo)
	high := x <= s.hi && !(s.below && x == s.hi)
	return low && high && (!s.whole || x == math.Trunc(x))
}

func (s span) schema() object {
	o := object{{"type", "number"}}
	if s.whole {
		o = object{{"type", "integer"}}
	}
	lo, hi := "minimum", "maximum"
	if s.above {
		lo = "exclusiveMinimum"
	}
	if s.below {
		hi = "exclusiveMaximum"
	}
	return append(o, pair{lo, s.lo}, pair{hi, s.hi})
}

// number reads a finite decimal number of the span.
func (r *reader) number(w where, s span) (float64, bool) {
	r.seen(w)
	x, advice, ok := plainNumber(w)
	if !ok {
		r.wrong(w, s.String(), advice)
		return 0, false
	}
	if !s.holds(x) {
		r.fault(w.place(), Fault{Path: w.path, Found: w.val.Value, Allowed: s.String()})
		return 0, false
	}
	return x + 0, true // -0 becomes 0
}

var (
	decimal     = regexp.MustCompile(`^[-+]?([0-9]+(\.[0-9]*)?|\.[0-9]+)([eE][-+]?[0-9]{1,3})?$`)
	leadingZero = regexp.MustCompile(`^[-+]?0[0-9]`)
	otherBase   = regexp.MustCompile(`^[-+]?(0[xXoObB][0-9a-fA-F_]+|[0-9][0-9_]*_[0-9_.]*)$`)
	decimalSign = regexp.MustCompile(`^[-+]?[0-9]+,[0-9]+$`)
	withUnit    = regexp.MustCompile(`^[-+]?[0-9.]+ *([a-zA-Z"%°µ][a-zA-Z"%°µ/²³0-9^]*)$`)
	notFinite   = regexp.MustCompile(`(?i)^[-+]?\.?(nan|inf|infinity)$`)
)

// plainNumber parses a node as a number. Numbers that readers of YAML disagree
// about (010 is 8 in YAML 1.1, 1_000 and 0x10 are text in some) are refused.
func plainNumber(w where) (x float64, advice string, ok bool) {
	v := w.val.Value
	switch {
	case w.val.Kind != yaml.ScalarNode, w.empty():
		return 0, "", false
	case w.val.Style != 0:
		if decimal.MatchString(v) {
			advice = "take the quotes away"
		}
		return 0, advice, false
	case notFinite.MatchString(v):
		return 0, "write a finite number", false
	case leadingZero.MatchString(v) && decimal.MatchString(v):
		return 0, "a leading zero may mean octal: write " + withoutZeros(v), false
	case decimal.MatchString(v):
		x, err := strconv.ParseFloat(v, 64)
		if err != nil {
			return 0, "write a number a machine can hold", false
		}
		return x, "", true
	case otherBase.MatchString(v):
		return 0, "write plain decimal digits", false
	case decimalSign.MatchString(v):
		return 0, "write the decimal sign as a point: " + strings.Replace(v, ",", ".", 1), false
	case withUnit.MatchString(v):
		return 0, "write the number alone: the format fixes the unit", false
	}
	return 0, "", false
}

func withoutZeros(v string) string {
	sign := strings.TrimRight(v[:1], "0123456789")
	s := strings.TrimLeft(v[len(sign):], "0")
	if s == "" || s[0] < '0' || s[0] > '9' {
		s = "0" + s
	}
	return sign + s
}

// word reads one of the available words. Words of the format that are not
// available are answered as such.
func (r *reader) word(w where, available, every []string) (string, bool) {
	r.seen(w)
	v := w.val.Value
	f := Fault{Path: w.path, Allowed: strings.Join(available, ", ")}
	switch {
	case w.val.Kind != yaml.ScalarNode, w.empty():
		r.wrong(w, f.Allowed, "")
		return "", false
	case slices.Contains(available, v):
		return v, true
	case slices.Contains(every, v):
		f.Found = v + ", which is not available in this version"
	default:
		f.Found = describe(w.val)
		f.Nearest = nearest(v, available)
	}
	r.fault(w.place(), f)
	return "", false
}

var textAllowed = fmt.Sprintf("one line of printable text, at most %d characters", mostText)

func textSchema(types ...string) object {
	return object{{"type", append([]string{"string", "number"}, types...)}, {"maxLength", mostText}}
}

// text reads one line of text. A number is taken as it is written; nothing
// after the key is an empty text.
func (r *reader) text(w where) (string, bool) {
	r.seen(w)
	n := w.val
	switch {
	case w.empty() && w.key != nil:
		return "", true
	case n.Kind != yaml.ScalarNode, w.empty():
		r.wrong(w, textAllowed, "")
		return "", false
	case n.Tag == "!!bool" || n.Tag == "!!null":
		r.wrong(w, textAllowed, "if it is meant as text, put it in quotes")
		return "", false
	}
	f := Fault{Path: w.path, Allowed: textAllowed}
	if count := utf8.RuneCountInString(n.Value); count > mostText {
		f.Found = fmt.Sprintf("text of %d characters", count)
	}
	for _, c := range n.Value {
		if !printable(c) {
			f.Found, f.Advice = fmt.Sprintf("the character %U in text", c), "take it out"
			if c == '\n' {
				f.Found, f.Advice = "text of several lines", "write one line; notes takes a list of lines"
			}
			break
		}
	}
	if f.Found != "" {
		r.fault(w.place(), f)
		return "", false
	}
	return n.Value, true
}

// printable allows letters, marks, digits, signs and spaces of every language,
// and the two joiners that some scripts are written with; not control
// characters and not those that turn the direction of writing.
func printable(c rune) bool {
	const nonJoiner, joiner = '\u200c', '\u200d'
	return unicode.IsGraphic(c) || c == nonJoiner || c == joiner
}

// describe says what stands at a node.
func describe(n *yaml.Node) string {
	switch n.Kind {
	case yaml.MappingNode:
		return "a map"
	case yaml.SequenceNode:
		return "a list"
	}
	switch {
	case n.Style != 0:
		return "the text " + quoted(n.Value)
	case n.Value == "":
		return "no value"
	case n.Tag == "!!null", n.Tag == "!!bool", n.Tag == "!!int", n.Tag == "!!float":
		return n.Value
	}
	return quoted(n.Value)
}
