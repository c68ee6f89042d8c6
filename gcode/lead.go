package gcode

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// A lead-in is a straight move square to the contour and a quarter circle that
// runs into the path tangentially; a lead-out is the same backwards. Both lie
// outside: on the left of travel for side +1, on the right for -1. The
// straight move is where compensation is switched, so it is longer than
// the tool's radius, and the quarter circle is larger than it.

// lead is one end of a stretch: the joint with it, the arc's other end, its center,
// and the direction away from the contour.
type lead struct {
	joint, corner, center plane.Point
	out                   plane.Vector
	ccw                   bool
}

// leadIn returns the lead to the start of path, with an arc of radius r.
func leadIn(path chain.Path, side, r float64) lead {
	p, t := path[0].From, path[0].StartTangent()
	out := t.Left().Scale(side)
	c := p.Add(out.Scale(r))
	return lead{p, c.Add(t.Scale(-r)), c, out, side > 0}
}

// leadOut returns the lead from the end of path.
func leadOut(path chain.Path, side, r float64) lead {
	l := leadIn(path.Reverse(), -side, r)
	l.ccw = side > 0
	return l
}

// in returns the elements from outer, a point away from the corner.
func (l lead) in(outer plane.Point) chain.Path {
	return chain.Path{
		{Kind: chain.Line, From: outer, To: l.corner},
		{Kind: chain.Arc, From: l.corner, To: l.joint, Center: l.center, CCW: l.ccw},
	}
}

// away returns the elements to outer.
func (l lead) away(outer plane.Point) chain.Path {
	return chain.Path{
		{Kind: chain.Arc, From: l.joint, To: l.corner, Center: l.center, CCW: l.ccw},
		{Kind: chain.Line, From: l.corner, To: outer},
	}
}

// straight returns the point at the length from the corner, away from the contour.
func (l lead) straight(length float64) plane.Point { return l.corner.Add(l.out.Scale(length)) }

// outside returns the first point straight away from the corner, at least least
// from it, that lies at the radius from the camshaft axis or beyond.
func (l lead) outside(radius, least float64) plane.Point {
	p := l.corner.Sub(plane.Point{})
	b, c := p.Dot(l.out), p.Dot(p)-radius*radius
	reach := 0.0
	if d := b*b - c; d > 0 {
		reach = -b + math.Sqrt(d)
	}
	return l.straight(math.Max(reach, least))
}
