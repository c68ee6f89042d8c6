package chain

import (
	"math"
	"strconv"
	"strings"

	"lobewright/synth/plane"
)

// maxDecimals keeps 10^Decimals exact in a double and in an int64.
const maxDecimals = 15

// scale returns 10^Decimals, exact for 0 <= Decimals <= 22.
func (g Grid) scale() float64 { return math.Pow10(g.Decimals) }

// Step returns the length of one count in the unit of length.
func (g Grid) Step() float64 { return 1 / g.scale() }

// Point returns the grid point nearest to p (halves away from zero).
// p must be finite and within 2^53 counts of the origin; Snap checks that.
func (g Grid) Point(p plane.Point) Point {
	s := g.scale()
	return Point{int64(math.Round(p.X * s)), int64(math.Round(p.Y * s))}
}

// Value returns the point a reader makes of the printed decimals: count /
// 10^Decimals, rounded once. Exact in that sense for |count| < 2^53, because
// both operands are then doubles and IEEE division rounds correctly, as does
// a correct decimal parser.
func (g Grid) Value(p Point) plane.Point {
	s := g.scale()
	return plane.Point{X: float64(p.X) / s, Y: float64(p.Y) / s}
}

// Format prints a count as the integer with a point in it: all Decimals digits
// after the point, at least one before it, no plus sign, and never "-0.000".
func (g Grid) Format(count int64) string {
	digits := strconv.FormatInt(count, 10)
	sign := ""
	if count < 0 {
		sign, digits = "-", digits[1:]
	}
	if g.Decimals <= 0 {
		return sign + digits
	}
	if pad := g.Decimals + 1 - len(digits); pad > 0 {
		digits = strings.Repeat("0", pad) + digits
	}
	cut := len(digits) - g.Decimals
	return sign + digits[:cut] + "." + digits[cut:]
}
