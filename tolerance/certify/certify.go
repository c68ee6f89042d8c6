// Package certify proves how far a written path of lines and arcs is from the
// exact curve it was made for, and that an element of a path keeps its distance
// from a curve. It knows nothing of how a path was made.
//
// # The problem
//
// Sampling always reads low, and not by a known amount: 8 samples an arc miss up to 3 % of
// the deviation, and an S-shaped span crosses its chord in the middle and reads
// zero there. Comparing nearest points also misses whole faults: a path that
// leaves out a piece, or runs out and back, stays near the curve everywhere.
//
// # The proof
//
// The path is taken as a map of the curve. For every joint J_i of the path a
// parameter t_i is chosen, t_0 < t_1 < ... < t_n, and element i answers for the curve
// over [t_i, t_i+1]. For a closed path t_n is t_0 and one turn, so that the
// stretches cover the curve exactly once, by construction. The t_i are found with
// plain floats (walk.go): whatever they are, what follows holds or the path is refused.
//
// For one element with ends A, B and the curve P over [a, b] let the foot of P(t)
// be its perpendicular projection on the line, or its radial projection on the
// circle of radius r about the arc's center C; let d(t) be the signed distance from the foot.
//
//  1. The foot moves forward: P'·(B-A) > 0 for a line, (P-C)×P' of the sign of the
//     arc's sense for an arc, proven over subintervals that cover [a, b]. On each
//     of them P-C keeps within a quarter turn of its value at the midpoint, so the angle
//     swept about C is the sum of angles between midpoints without a doubt of
//     whole turns; it must agree with the arc's sweep (a doubled turn fails here).
//  2. |d| <= D over [a, b], from Taylor's theorem on subintervals m-h..m+h:
//     d(t) = c0 + c1(t-m) + c2(t-m)² + c3(t-m)³, with c0, c1, c2 from a
//     series at the point m, and c3 from one over the whole subinterval, in
//     interval arithmetic (R. E. Moore, Interval Analysis, Prentice-Hall 1966,
//     chapter 11). The range of the quadratic is exact, |c3|h³ is added.
//     Subintervals are split until the bound is within half a percent of a value certainly reached.
//  3. The feet of P(a) and P(b) miss A and B by at most eta (a length along the line, an angle on the arc).
//
// A curve point whose foot lies on the element is within D of it. By 1 the foot of any
// other lies beyond A or B by at most eta, and its distance from that end is at most
//
//	line: sqrt(D² + eta²)      arc: sqrt((rho-r)² + 4 rho r sin²(eta/2)) <= sqrt(D² + (r+D) r eta²).
//
// An element point that is the foot of some P(t) is within D of the curve; by
// continuity the others lie between A and the foot of P(a), or B and the foot
// of P(b), and the same formula bounds their distance from P(a) or P(b). So it
// bounds both directions, and covers the wedge at a joint where the tangents differ.
//
// Mismatched radii. On a grid the ends of an arc have two distances r0, r1 from
// C. What a control makes of that (radius blended from start to end; start
// radius and a step at the end; center moved onto the bisector of the chord) lies between
// r0 and r1 about C, and within the arc's sector. For the first two this is
// plain. For the third let the center move by s along the chord to C', R = |A-C'|; then
// |X-C|² = R² + s² + 2Rs cos(psi), psi the angle between X-C' and the chord. Over at most a
// half turn symmetric to the bisector cos(psi) is monotone, so |X-C| runs from r0
// to r1; over more it stays within R-s..R+s. The polar angle about C is monotone as s < R.
// So r is the mean radius and the half width of the band is added to D.
// Above a half turn only mismatches of rounding size are accepted.
//
// The curve itself may have steps of rounding size where two pieces meet. The
// largest step g is measured; as P keeps 4g away from C it turns the foot by less than 1.05 g/rho, and
// 3g added to the bound covers the points passed over.
//
// # The price
//
// Two Taylor series (order 2 and 3) a subinterval, 4 to 12 subintervals an arc, one or two a line: 1 to 3 ms
// for 40 arcs. The bound is 1.001 to 1.005 times the true deviation (the benchmark prints it), plus the
// band of mismatched radii.
package certify

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
)

// Curve is an exact curve. Its parameter is the cam angle in degrees.
type Curve interface {
	// Pieces follow each other from t0 to t0+360; the curve is continuous, and closed but
	// for Open.
	Pieces() []plane.Piece
	// At evaluates one piece in plain floats. It guides the search and proves nothing.
	At(piece int, t float64) plane.Frame
	// Over returns rigorous enclosures of x and y with their derivatives by t
	// up to order <= 3 over the interval t, which lies within the piece.
	Over(piece int, t taylor.Interval, order int) (x, y taylor.I)
}

// Deviation is the proven distance of a path from a curve. Lengths in the unit of
// the curve, parameters in degrees of cam angle.
type Deviation struct {
	// Bound is a certified upper bound of the Hausdorff distance of the path and
	// its stretch of the curve (every point of either has a point of the other this near),
	// whatever a control makes of an arc whose radii differ.
	Bound float64
	// Left and Right are the largest deviations of the path to the left and right of the
	// curve, seen along growing parameter, that are certainly reached; >= 0.
	Left, Right float64
	At          float64 // where the larger of Left and Right is reached, within the curve's own turn; where the Bound is much larger, on its element
	Segment     int     // index of the element there
	From, To    float64 // stretch that was walked; To exceeds From+360 where the path overlaps itself
}

// Closed certifies a closed path against the whole curve. The path runs in the direction of
// growing parameter; it may start anywhere. Source spans are not used. It is an error
// when the path is not connected and closed, runs backwards, turns once too often or
// too seldom, or has an arc that is none; in all other cases the Bound holds.
func Closed(curve Curve, path chain.Path) (Deviation, error) {
	return certify(curve, path, turn)
}

// Stretch certifies an open path that starts and ends near the curve against the
// stretch between the feet of its first and last points, which the result
// names. Errors are those of Closed.
func Stretch(curve Curve, path chain.Path) (Deviation, error) {
	return certify(curve, path, stretch)
}

// Open certifies an open path against the whole of a curve that is not closed: a development.
// It begins beside the curve's first point and ends beside its last. Errors are those of
// Closed.
func Open(curve Curve, path chain.Path) (Deviation, error) {
	return certify(curve, path, whole)
}

// Part certifies an open path against the stretch of an open curve beside it. It begins and ends
// beside points of the curve, which the result names. Errors are those of Closed.
func Part(curve Curve, path chain.Path) (Deviation, error) {
	return certify(curve, path, within)
}

// reach says how much of the curve a path stands for.
type reach uint8

const (
	turn    reach = iota // a closed curve, once around
	stretch              // of a closed curve, what the path runs along
	whole                // all of an open curve
	within               // of an open curve, what the path runs along
)

func certify(curve Curve, path chain.Path, r reach) (Deviation, error) {
	s, err := newSurvey(curve, r == turn || r == stretch)
	if err != nil {
		return Deviation{}, err
	}
	figures, err := connected(path, r == turn)
	if err != nil {
		return Deviation{}, err
	}
	p := proof{survey: s, figures: figures, spent: make([]float64, len(figures)), slip: make([]float64, len(figures))}
	w := newWalker(s)
	first := mark{0, s.t0}
	if r != whole {
		first = w.start(figures[0].e.From)
	}
	here := first
	for i := range figures {
		there, err := w.step(here, &figures[i])
		if (r == turn || r == whole) && i == len(figures)-1 {
			there = mark{first.turn + 1, first.t}
		}
		if err == nil {
			err = p.cover(i, here, there)
		}
		if err != nil {
			return Deviation{}, fmt.Errorf("element %d (%s): %w", i, figures[i].name(), err)
		}
		here = there
	}
	p.refine()
	d, err := p.result()
	d.From, d.To = s.angle(first), s.angle(here)
	return d, err
}

// connected turns the elements of a path into figures and checks the joints.
func connected(path chain.Path, closed bool) ([]figure, error) {
	if len(path) == 0 {
		return nil, fmt.Errorf("the path is empty: there is nothing to certify")
	}
	figures := make([]figure, len(path))
	for i, e := range path {
		f, err := newFigure(e)
		if err == nil && f.point() {
			err = fmt.Errorf("it has no length; leave it out")
		}
		if err != nil {
			return nil, fmt.Errorf("element %d: %w", i, err)
		}
		if i > 0 && path[i-1].To != e.From {
			return nil, fmt.Errorf("element %d (%s) does not start where element %d ends, at %s, %.3g away", i, f.name(), i-1,
				show(path[i-1].To), path[i-1].To.Dist(e.From))
		}
		figures[i] = f
	}
	if last := path[len(path)-1].To; closed && last != path[0].From {
		return nil, fmt.Errorf("the path is not closed: it starts at %s and ends at %s, %.3g away",
			show(path[0].From), show(last), last.Dist(path[0].From))
	}
	return figures, nil
}

func show(p plane.Point) string { return fmt.Sprintf("(%.6g, %.6g)", p.X, p.Y) }

// outward is a factor above the accumulated rounding of the few operations that
// combine finished bounds (each errs by 2^-53 relative, fewer than 32 are in a row).
const outward = 1 + 1.0/(1<<47)

func finite(x ...float64) bool {
	for _, v := range x {
		if math.IsNaN(v) || math.Abs(v) > largest {
			return false
		}
	}
	return true
}

// largest is the largest coordinate accepted, in the curve's unit of length: far beyond any
// machine, and its fourth power is far from overflow.
const largest = 1e12
