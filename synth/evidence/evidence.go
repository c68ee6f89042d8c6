// Package evidence holds the table of checks against published values: what, from
// which source, the published figure, and ours, computed when it is asked for.
package evidence

import (
	"math"
	"strconv"
	"strings"

	"lobewright/synth/motion"
)

// Status says how a published value is known.
type Status string

const (
	Seen       Status = "read"        // the text of the source was read
	FromMemory Status = "from memory" // of the named source; its text was not seen
	Derived    Status = "derived"     // worked out with 30 digits or more from textbook formulas, outside this program
)

// Row is one check.
type Row struct {
	Source    string
	Status    Status
	What      string
	Published string  // the figure as printed
	Ours      float64 // computed now
}

// Difference is ours less the published figure.
func (r Row) Difference() float64 { return r.Ours - r.value() }

func (r Row) value() float64 {
	v, err := strconv.ParseFloat(r.Published, 64)
	if err != nil {
		return math.NaN()
	}
	return v
}

// Pass reports whether ours rounds to the published figure: no farther from it than
// half a unit of its last digit, and a hair for figures that end in a 5.
func (r Row) Pass() bool {
	const hair = 1.02
	_, decimals, _ := strings.Cut(r.Published, ".")
	return math.Abs(r.Difference()) <= hair*0.5*math.Pow10(-len(decimals))
}

// Laws finds a motion law by its name; tests hand in a spoiled one.
type Laws func(name string) (motion.Law, error)

// Rows computes the table, grouped by source. It fails only where a law is missing.
func Rows(laws Laws) ([]Row, error) {
	var rows []Row
	for _, part := range []func(Laws) ([]Row, error){peaks, printed, skewed, joined, tables, contours, kinds, barrel} {
		r, err := part(laws)
		if err != nil {
			return nil, err
		}
		rows = append(rows, r...)
	}
	return rows, nil
}
