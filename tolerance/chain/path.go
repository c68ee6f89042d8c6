package chain

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
)

// Reverse returns the path travelled the other way.
func (p Path) Reverse() Path {
	q := make(Path, len(p))
	for i, e := range p {
		q[len(p)-1-i] = e.Reverse()
	}
	return q
}

// Length returns the length along the path, in the unit of length.
func (p Path) Length() float64 {
	sum := 0.0
	for _, e := range p {
		sum += e.Length()
	}
	return sum
}

// Closed reports whether the path ends within tol (a length) of its start.
func (p Path) Closed(tol float64) bool {
	return len(p) > 0 && p[0].From.Dist(p[len(p)-1].To) <= tol
}

// Bounds returns the smallest and largest X and Y on the path, to rounding. For
// an empty path min is +Inf and max -Inf.
func (p Path) Bounds() (min, max plane.Point) {
	min = plane.Point{X: math.Inf(1), Y: math.Inf(1)}
	max = plane.Point{X: math.Inf(-1), Y: math.Inf(-1)}
	take := func(q plane.Point) {
		min = plane.Point{X: math.Min(min.X, q.X), Y: math.Min(min.Y, q.Y)}
		max = plane.Point{X: math.Max(max.X, q.X), Y: math.Max(max.Y, q.Y)}
	}
	for _, e := range p {
		take(e.From)
		take(e.To)
		for _, q := range e.quadrants() {
			take(q)
		}
	}
	return min, max
}

// quadrants returns the points of an arc that lie straight right, above, left or
// below its center.
func (e Element) quadrants() []plane.Point {
	sweep := e.Sweep()
	if sweep == 0 {
		return nil
	}
	var found []plane.Point
	start := float64(e.From.Sub(e.Center).Angle())
	for q := 0; q < 4; q++ {
		turn := math.Mod(float64(q)*math.Pi/2-start, 2*math.Pi)
		if turn*sweep < 0 {
			turn += math.Copysign(2*math.Pi, sweep)
		}
		if math.Abs(turn) < math.Abs(sweep) {
			found = append(found, e.PointAt(turn/sweep))
		}
	}
	return found
}

// SplitArcs returns the path with every arc of more than maxSweep radians cut
// into equal arcs of at most that. A maxSweep that is not positive cuts nothing.
func (p Path) SplitArcs(maxSweep float64) Path {
	q := make(Path, 0, len(p))
	for _, e := range p {
		n := 1
		if maxSweep > 0 {
			// A sweep above the limit only by rounding is not cut.
			n = int(math.Ceil(math.Abs(e.Sweep())/maxSweep - sweepSlop))
		}
		q = append(q, e.equal(n)...)
	}
	return q
}

// sweepSlop is the share of an arc that rounding may make of a sweep: some
// hundred units in the last place of 2π.
const sweepSlop = 1e-13

// equal cuts the element into n equal ones.
func (e Element) equal(n int) Path {
	var q Path
	for ; n > 1; n-- {
		a, b := e.Split(1 / float64(n))
		q, e = append(q, a), b
	}
	return append(q, e)
}

// kinkMax is the largest tangent break, in radians, at which Offset still takes a
// joint for smooth. Fitted joints are smooth to 1e-9; the gap it leaves in an
// offset of 100 is 1e-4 of that angle's worth, which joining hides.
const kinkMax = 1e-6

// Offset returns the path moved by d (a length, negative to the right) to the left
// of travel. Lines stay lines, arcs keep their centers. It is meant for paths
// with continuous tangents, whose joints stay joined; a kink is an error
// (OffsetRound takes those), and so is an arc whose radius would reach zero.
func (p Path) Offset(d float64) (Path, error) {
	q := make(Path, len(p))
	for i, e := range p {
		moved, ok := e.offset(d)
		if !ok {
			return nil, flipError(i, e, d)
		}
		q[i] = moved
	}
	for i := range q {
		next := (i + 1) % len(q)
		if next == 0 && p[0].From != p[i].To {
			break // open
		}
		if a := turn(p[i], p[next]); math.Abs(a) > kinkMax {
			return nil, fmt.Errorf("offset by %g: the path has a kink of %.3g degrees after element %d (cam angle %.6g); "+
				"at most %.2g is smooth; offset it with round corners", d, a*180/math.Pi, i, p[i].Source.To, kinkMax*180/math.Pi)
		}
		q[i].To = q[next].From
	}
	return q, nil
}

func flipError(i int, e Element, d float64) error {
	return fmt.Errorf("offset by %g: element %d (cam angle %.6g to %.6g) is an arc of radius %.6g that would turn inside out; "+
		"the offset to that side must stay below the radius", d, i, e.Source.From, e.Source.To, e.Radius())
}

// turn returns the signed angle in radians by which travel turns from the end of
// a to the start of b.
func turn(a, b Element) float64 {
	u, v := a.EndTangent(), b.StartTangent()
	return math.Atan2(u.Cross(v), u.Dot(v))
}
