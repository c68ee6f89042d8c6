// Package floor proves how few arcs or lines can follow a closed curve within a tolerance:
// no chain can have fewer, however it was made.
//
// # The problem
//
// A count is only good or bad beside the least possible one. The asymptotic count
// N* = ∫(√3|k'|/(216 eps))^(1/3) ds is an estimate, off by a fifth where ten arcs do, and a search
// over joints on a raster finds no better chain without showing that there is none.
//
// # What is counted
//
// A chain of n elements follows a closed curve within eps when the curve can be cut into n
// stretches, one an element, so that every point of a stretch is within eps of the circle
// or line of its element. Arcs may break apart, kink and have any curvature; whatever
// package certify finds within eps is such a chain. Stretch [a, b] fits when one circle or
// line is within eps of all of it. A part of a stretch that fits fits too.
//
// # A proof that a stretch does not fit
//
// A circle of radius r = 1/k about C, or a line (k = 0), is the zero set of
//
//	F(X) = (|X-C|² - r²)/(2r) = k/2 |X|² + b·X + c,   |b|² = 1 + 2kc,
//
// and F = d + k d²/2 at distance d from it. So |F| <= eps' = eps + k eps²/2 at points within eps.
// Take four points P_i of the stretch, x, y their coordinates in axes with the origin at a point M of
// the stretch, and weights u_i with Σu = Σux = Σu|P|² = 0, which always exist. Then
//
//	Σ u_i F(P_i) = b_y Σ u_i y_i,   so   |b_y| |Σ u_i y_i| <= eps' Σ|u_i|.
//
// With the x axis along a chord AB of length L and M half way in x, all four of these are small:
//
//	k    <= 1/(L/2 - eps)             the circle passes both ends
//	|c|  <= eps'                      c = F(M)
//	|bx| <= (2 eps' + k/2 ||B|²-|A|²|)/L   from F(B) - F(A)
//	b_y² >= 1 - 2k eps' - bx²
//
// So b_y is 1 but for terms of second order, and |Σ u y| > eps' Σ|u| excludes every circle and line at
// once, with no search over radii. To first order Σ u y is the third divided difference of the curve's
// normal deviation, and four points placed where the best circle is off by +,-,+,- (de la Vallée
// Poussin; E. W. Cheney, Introduction to Approximation Theory, 1966, chapter 3) lose nothing:
// where k' is constant a stretch of length h is refused from k'h³/192 = eps on. All of it is
// evaluated on interval enclosures of the points (proof.go); the u are plain floats, and what their sums
// miss zero by is part of the inequality. Floats choose the points (exchange.go, reach.go); a bad choice
// costs reach, never truth.
//
// # From stretches to a count
//
// reach(s) is a parameter with a proof that [s, reach(s)] does not fit. The next joint
// of any chain after a joint at or before s is before reach(s). So from a start p the n-th joint is before
// reach applied n times; g, the least n for which that passes p + 360, is at most one more than a
// chain's elements. For the one more: the first joint after p lies in (p, reach(p)). For s from the far
// end of this downwards, reach applied g-1 times gives s' + 360 with s' < s: no chain of g-1 elements has
// a joint in [s', s]. When these intervals cover (p, reach(p)) there is no such chain, and g is proven;
// else g-1 is.
//
// # The price
//
// 1 to 10 ms a curve for 10 to 90 arcs. For small eps the floor is 0.866 N*, free
// arcs against tangent-continuous ones (192 against 124.7); dwells and curvature jumps raise it above that. A search for chains of
// free arcs, in the tests, finds none above the floor by more than one, and most at the floor.
package floor

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Curve is an exact curve. Its parameter is the cam angle in degrees.
type Curve interface {
	// Pieces follow each other from t0 to t0+360; the curve is continuous, and closed unless it has a
	// method Closed that says it is not.
	Pieces() []plane.Piece
	// At evaluates one piece in plain floats. It guides the search and proves nothing.
	At(piece int, t float64) plane.Frame
	// Over returns rigorous enclosures of x and y over the interval t, which lies within
	// the piece, with derivatives by t up to order.
	Over(piece int, t taylor.Interval, order int) (x, y taylor.I)
}

const (
	turnDegrees  = 360
	parameterGap = 1e-9 // degrees: what rounding may leave between pieces or of a turn
)

// Arcs returns a proven lower bound, at least 1, of the number of arcs and line segments
// of any chain, connected or not, that follows the curve within eps (a length in the curve's
// unit) in the sense above. A curve of n arcs never gets more than n. The bound holds whatever At
// returns; it is weak where At is wrong. Errors: eps not a length or below 1e-11 of the curve's size, where
// floats cannot tell it from rounding; pieces that are not one closed turn; a curve that is not finite.
func Arcs(c Curve, eps float64) (int, error) {
	if !(eps > 0) || math.IsInf(eps, 0) {
		return 0, fmt.Errorf("deviation %g: want a length above 0", eps)
	}
	pieces := c.Pieces()
	if err := oneTurn(pieces); err != nil {
		return 0, err
	}
	s, err := newSurvey(c, pieces, eps)
	if err != nil {
		return 0, err
	}
	if o, ok := c.(interface{ Closed() bool }); ok && !o.Closed() {
		return s.countOpen(), nil
	}
	return s.count(), nil
}

func oneTurn(pieces []plane.Piece) error {
	if len(pieces) == 0 {
		return fmt.Errorf("the curve has no pieces")
	}
	if turn := pieces[len(pieces)-1].To - pieces[0].From; !(math.Abs(turn-turnDegrees) <= parameterGap) {
		return fmt.Errorf("the curve covers %g degrees of cam angle, want %d", turn, turnDegrees)
	}
	for i, p := range pieces {
		if !(p.To > p.From) || i > 0 && !(math.Abs(p.From-pieces[i-1].To) <= parameterGap) {
			return fmt.Errorf("piece %d goes from %g to %g degrees and does not follow the one before it", i, p.From, p.To)
		}
	}
	return nil
}

// countOpen counts along a curve that ends elsewhere than it starts: there a chain begins at the
// curve's start, so its n-th joint is before reach applied n times. What reach finds across
// the curve's end is no proof, and ends the count.
func (s *survey) countOpen() int {
	p := s.nodeAt(s.table[0].mark)
	at := p
	for g := 1; ; g++ {
		next, ok := s.reach(at)
		if !ok || !next.before(p.turned(1)) {
			return g
		}
		at = next
	}
}

// maxRuns bounds the greedy walks of one count: where they get no further in
// this many, the floor is one lower than it might be.
const maxRuns = 40

// count does what "From stretches to a count" above says.
func (s *survey) count() int {
	p := s.nodeAt(s.table[0].mark)
	first, ok := s.reach(p)
	if !ok {
		return 1
	}
	g, at := 1, first
	for !p.turned(1).before(at.mark) {
		g++
		if at, ok = s.reach(at); !ok {
			break
		}
	}
	if s.noneStarts(p.mark, first, g-1) {
		return g
	}
	return g - 1
}

// noneStarts reports a proof that no chain of n elements has a joint in (from, to).
func (s *survey) noneStarts(from mark, to node, n int) bool {
	for range maxRuns {
		at, ok := to, true
		for i := 0; i < n && ok; i++ {
			at, ok = s.reach(at)
		}
		if !ok {
			return false
		}
		back := at.turned(-1)
		if !back.before(to.mark) {
			return false
		}
		if !from.before(back) {
			return true
		}
		to = s.nodeAt(back)
	}
	return false
}
