package fit

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// node is where a biarc starts or ends: a point and a unit direction of travel near
// the curve at parameter t.
type node struct {
	p plane.Point
	d plane.Vector
	t float64
}

// leg is one arc of a biarc: from p in direction d with curvature k to end.
type leg struct {
	p, end plane.Point
	d      plane.Vector
	k      float64
}

// through returns the arc that leaves p in direction d and goes through end.
func through(p plane.Point, d plane.Vector, end plane.Point) leg {
	v := end.Sub(p)
	return leg{p: p, end: end, d: d, k: 2 * d.Cross(v) / v.Dot(v)}
}

// endDirection returns the direction at the end: the start's mirrored on the chord.
func (l leg) endDirection() plane.Vector {
	u := l.end.Sub(l.p).Unit()
	return u.Scale(2 * u.Dot(l.d)).Sub(l.d)
}

// away returns the signed distance of q from the leg's circle, positive to the left:
// d = 2F/(1+√(1-2kF)), F = d×v - k|v|²/2, good for flat arcs too.
func (l leg) away(q plane.Point) float64 {
	x, y := q.X-l.p.X, q.Y-l.p.Y
	f := l.d.X*y - l.d.Y*x - l.k/2*(x*x+y*y)
	return 2 * f / (1 + math.Sqrt(math.Max(1-2*l.k*f, 0)))
}

// flatTurn is the half turn of a leg, in radians, below which it is written as a line:
// the tangent then breaks by less than 1e-9, and the center of anything
// more curved is near enough for its coordinates to hold the radius.
const flatTurn = 4e-10

// element writes the leg.
func (l leg) element(source chain.Span) chain.Element {
	e := chain.Element{Kind: chain.Line, From: l.p, To: l.end, Source: source}
	if math.Abs(l.k)*l.p.Dist(l.end)/2 > flatTurn {
		e.Kind, e.CCW = chain.Arc, l.k > 0
		e.Center = l.p.Add(l.d.Left().Scale(1 / l.k))
	}
	return e
}

// biarc is two arcs that meet in a common tangent; the joint stands for parameter t, the
// end for parameter end.
type biarc struct {
	legs   [2]leg
	t, end float64
}

// join returns the biarc from a to b whose first tangent leg has length alpha, and
// whether there is one that runs forward. The joint lies on the line between the
// tips of the tangent legs (Bolton 1975); beta, the other leg, follows from
// their distance being alpha+beta.
func join(a, b node, alpha float64) (biarc, bool) {
	v := b.p.Sub(a.p)
	beta := (v.Dot(v)/2 - alpha*v.Dot(a.d)) / (v.Dot(b.d) - alpha*(a.d.Dot(b.d)-1))
	if !(alpha > 0 && beta > 0) || math.IsInf(beta, 0) {
		return biarc{}, false
	}
	u, w := a.p.Add(a.d.Scale(alpha)), b.p.Sub(plane.Point{}).Sub(b.d.Scale(beta))
	f := alpha / (alpha + beta)
	j := u.Add(w.Sub(plane.Vector(u)).Scale(f))
	first := through(a.p, a.d, j)
	second := through(b.p, b.d.Neg(), j) // backward from the end, so that both ends are exact
	return biarc{legs: [2]leg{first, {p: j, end: b.p, d: second.endDirection().Neg(), k: -second.k}}}, true
}

// sameTurn is the angle in radians within which two arcs that meet in a common tangent are
// one: it moves the path by less than 1e-10 of its length.
const sameTurn = 1e-10

// single returns the one arc that the biarc is when both legs are of one circle or line.
func (b biarc) single() (leg, bool) {
	one := through(b.legs[0].p, b.legs[0].d, b.legs[1].end)
	u, v := one.endDirection(), b.legs[1].endDirection()
	return one, math.Abs(u.Cross(v)) < sameTurn && u.Dot(v) > 0
}

// evenLeg returns the tangent leg length of the biarc from a to b with equal legs.
func evenLeg(a, b node) float64 {
	v := b.p.Sub(a.p)
	along, vv := v.Dot(a.d)+v.Dot(b.d), v.Dot(v)
	return vv / (along + math.Sqrt(along*along+2*math.Max(1-a.d.Dot(b.d), 0)*vv))
}

// deviation estimates the largest distance of the curve between the nodes from the
// biarc, from the samples and parabolas through them, and places the joint's t. It stops
// at the first sample further than enough.
func (r *run) deviation(a, b node, arcs *biarc, enough float64) float64 {
	lo, hi := r.after(a.t), r.after(b.t)
	joint := arcs.legs[1]
	worst, d0, d1 := 0.0, 0.0, 0.0 // d0, d1: the two distances before
	l, t0, x0 := 0, a.t, -1.0
	arcs.t, arcs.end = a.t+(b.t-a.t)/2, b.t
	for i := lo; i < hi; i++ {
		s := &r.samples[i]
		if l == 0 {
			x := s.P.Sub(joint.p).Dot(joint.d)
			if i == lo {
				x0 = a.p.Sub(joint.p).Dot(joint.d)
			}
			if x > 0 {
				l = 1
				arcs.t = t0 + (s.t-t0)*math.Min(math.Max(x0/(x0-x), 0), 1)
			}
			t0, x0 = s.t, x
		}
		d := arcs.legs[l].away(s.P)
		if math.Abs(d) > worst {
			if worst = math.Abs(d); worst > enough {
				return worst
			}
		}
		if (d1-d0)*(d-d1) < 0 && i > lo+1 {
			worst = math.Max(worst, math.Abs(peak(d0, d1, d)))
		}
		d0, d1 = d1, d
	}
	return worst
}

// peak returns the extreme of the parabola through three values at equal distances.
func peak(y0, y1, y2 float64) float64 {
	bend := y0 - 2*y1 + y2
	if bend == 0 {
		return y1
	}
	slope := (y2 - y0) / 2
	return y1 - slope*slope/(2*bend)
}
