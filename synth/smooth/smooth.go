// Package smooth turns a table of cam angle and lift into a periodic curve: a spline of
// degree 5 on few knots, smooth to the fourth derivative all the way round, that moves no
// row of the table by more than the smoothing allowed.
//
// The problem. A cam runs on its acceleration, and a table holds lifts rounded to the last
// place written or measured with some noise. Second differences of a 1 degree table
// rounded to 0.001 mm carry 2.3 mm/rad² of rounding: half the acceleration of a gentle cam.
// The rounding must be averaged out, over as long a stretch as the motion allows. How long
// that is changes along the cam: a dwell is one straight piece, a flank a few pieces, and
// where the jerk of the law jumps, as at the ends of most rises, the curve must turn
// within a degree or two. And every knot is a piece of an exact curve that all later work
// pays for.
//
// What does not do. A smoothing spline (Reinsch) has a knot at every row and one stiffness
// all round: soft enough for the ends of the rise, it lets the rounding through everywhere
// else. The curve of least squared jerk that stays within the smoothing (a knot at each row
// it leans on) spends the whole allowance, rounds the ends of a rise, and swings in the
// dwells behind them. Evenly spaced knots are too many on the dwell or too few at its end.
// Knots put in one at a time, where the misfit is worst, surround such an end before they
// find it.
//
// What is done. The other way round (thin.go): begin with a knot at every row, where the
// spline passes through all of them, and take knots away, always those whose loss costs
// least. What a loss costs, the growth of the sum of squared residuals, is known exactly
// for every knot from one factorization. It ends when every knot left is worth more than
// noise would make it worth. Long stretches that are constant to within the smoothing are
// found first and made exactly flat (dwell.go). Then the weight on the squared jerk is made
// as large as the residuals allow, and if a row is still moved too far the largest residual
// is held by an inequality for every row, or, when that cannot be, by more knots
// (settle.go). In the end there is a knot at every row and nothing is moved, so this ends.
//
// Its price: the knots kept are not the fewest possible, because residuals are brought down
// to the noise, or to a tenth of the smoothing where the table has less noise than that,
// and not only to the smoothing. The error of a spline of degree 5 goes with the sixth
// power of the knot spacing, so that tenth costs at most a factor 10^(1/6) = 1.5 in knots,
// and it is what makes the acceleration right.
package smooth

import (
	"cmp"
	"fmt"
	"math"
	"slices"
)

// The rows a table may have.
const (
	LeastRows = 20
	MostRows  = 20000
)

// MostLift and MostAngle bound the numbers of a table: lift in its own unit of length,
// cam angle in degrees. Closest is the least step of cam angle from row to row, degrees.
const (
	MostLift  = 1e6
	MostAngle = 36000.0
	Closest   = 1e-3
)

// Table is lifts over one turn.
type Table struct {
	Angle []float64 // cam angle, degrees, from the first row on less than one turn, increasing
	Lift  []float64 // length
	Line  []int     // line of the file each row stands on; may be nil
	Names [2]string // what the header calls the two columns
}

// Piece is a stretch of the curve: lift = sum of Poly[i]*u^i, u = (deg-Origin)/Span. A dwell
// is a piece with one coefficient.
type Piece struct {
	From, To     float64 // cam angle, degrees, From < To
	Origin, Span float64 // degrees, Span not 0; |u| <= 1 on the piece
	Poly         []float64
}

// Curve is the lift over one turn: pieces in order of cam angle, each beginning where the
// one before ends, from t0 to t0+360 with 0 <= t0 < 360. Through every joint, the last to
// the first among them, the lift and its first four derivatives go on to rounding.
type Curve struct{ Pieces []Piece }

// At returns lift, velocity, acceleration and jerk at a cam angle (degrees, any finite): length,
// and length per rad, rad² and rad³.
func (c Curve) At(deg float64) (lift, velocity, acceleration, jerk float64) {
	t0 := c.Pieces[0].From
	if deg -= turn * math.Floor((deg-t0)/turn); !(deg > t0 && deg < t0+turn) { // by rounding
		deg = t0
	}
	i, found := slices.BinarySearchFunc(c.Pieces, deg, func(p Piece, deg float64) int { return cmp.Compare(p.From, deg) })
	if !found {
		i--
	}
	p := c.Pieces[i]
	u, per := (deg-p.Origin)/p.Span, 180/math.Pi/p.Span
	var d [4]float64 // Horner for the derivatives over their factorials
	for k := len(p.Poly) - 1; k >= 0; k-- {
		for m := len(d) - 1; m > 0; m-- {
			d[m] = d[m]*u + d[m-1]
		}
		d[0] = d[0]*u + p.Poly[k]
	}
	return d[0], d[1] * per, 2 * d[2] * per * per, 6 * d[3] * per * per * per
}

// Fit returns the curve of a table and what is to be said of it. No row is moved by more
// than smoothing (length, at least 0), to rounding; with 0 the curve passes through every
// row and has a knot at each that it needs.
//
// The error says what is wrong with the table or the smoothing. Of a table from Read it is
// TooClose, or, where rows a thousandth of a degree apart contradict each other, that 64
// bits do not do.
func Fit(t Table, smoothing float64) (Curve, Report, error) {
	if err := sound(t, smoothing); err != nil {
		return Curve{}, Report{}, err
	}
	f := newFitter(t, smoothing)
	if f.high-f.low <= 2*smoothing { // all within the smoothing of one lift
		level := f.low + (f.high-f.low)/2
		curve := Curve{[]Piece{{From: 0, To: turn, Origin: 0, Span: turn, Poly: []float64{level}}}}
		return curve, f.report(t, curve, ring{}), nil
	}
	f.findDwells()
	s, err := f.settle(f.thin(f.firstRing()))
	if err != nil {
		return Curve{}, Report{}, err
	}
	curve := s.curve()
	return curve, f.report(t, curve, s.ring), nil
}

// sound reports what keeps a table from being fitted.
func sound(t Table, smoothing float64) error {
	n := len(t.Angle)
	switch {
	case !(smoothing >= 0) || smoothing > MostLift:
		return fmt.Errorf("a smoothing of %g; it is a length from 0 to %g", smoothing, MostLift)
	case n < LeastRows || n > MostRows:
		return fmt.Errorf("%d rows; a table has %d to %d", n, LeastRows, MostRows)
	case len(t.Lift) != n || t.Line != nil && len(t.Line) != n:
		return fmt.Errorf("%d angles, %d lifts and %d lines", n, len(t.Lift), len(t.Line))
	}
	for i := range n {
		if !(math.Abs(t.Angle[i]) <= MostAngle) || !(math.Abs(t.Lift[i]) <= MostLift) {
			return fmt.Errorf("row %d: cam angle %g, lift %g", i+1, t.Angle[i], t.Lift[i])
		}
		if i > 0 && t.Angle[i]-t.Angle[i-1] < Closest {
			return fmt.Errorf("row %d: cam angle %g after %g", i+1, t.Angle[i], t.Angle[i-1])
		}
	}
	if over := t.Angle[n-1] - t.Angle[0]; over > turn-Closest {
		return fmt.Errorf("the rows cover %g degrees; they must cover less than a turn", over)
	}
	return nil
}
