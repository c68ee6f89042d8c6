package chain

import (
	"math"

	"lobewright/synth/plane"
)

// Sweep returns the signed angle in radians that an arc turns about its center,
// 0 < |sweep| <= 2π, positive counterclockwise; 0 for a line. An arc that ends
// in the direction it started from, seen from the center, is a full circle.
func (e Element) Sweep() float64 {
	if e.Kind != Arc {
		return 0
	}
	a, b := e.From.Sub(e.Center), e.To.Sub(e.Center)
	s := math.Atan2(a.Cross(b), a.Dot(b))
	switch {
	case e.CCW && s <= 0:
		s += 2 * math.Pi
	case !e.CCW && s >= 0:
		s -= 2 * math.Pi
	}
	return s
}

// Radius returns the mean of the distances of From and To from Center, in the
// unit of length; +Inf for a line.
func (e Element) Radius() float64 {
	if e.Kind != Arc {
		return math.Inf(1)
	}
	return (e.From.Dist(e.Center) + e.To.Dist(e.Center)) / 2
}

// Length returns the length along the element: exact for lines and true arcs,
// to second order in the mismatch for an arc whose radii differ.
func (e Element) Length() float64 {
	if e.Kind != Arc {
		return e.From.Dist(e.To)
	}
	return e.Radius() * math.Abs(e.Sweep())
}

// Curvature returns the signed curvature, 1/length, positive when the element
// turns left; 0 for a line.
func (e Element) Curvature() float64 {
	switch {
	case e.Kind != Arc:
		return 0
	case e.CCW:
		return 1 / e.Radius()
	}
	return -1 / e.Radius()
}

// StartTangent returns the unit direction of travel at From. For an arc it is
// square to the radius there.
func (e Element) StartTangent() plane.Vector { return e.tangentAt(e.From) }

// EndTangent returns the unit direction of travel at To.
func (e Element) EndTangent() plane.Vector { return e.tangentAt(e.To) }

func (e Element) tangentAt(p plane.Point) plane.Vector {
	if e.Kind != Arc {
		return e.To.Sub(e.From).Unit()
	}
	n := p.Sub(e.Center).Unit().Left()
	if !e.CCW {
		return n.Neg()
	}
	return n
}

// PointAt returns the point at the given fraction of the way, 0 at From and 1 at
// To (both exact). On an arc whose radii differ the radius goes over linearly.
func (e Element) PointAt(fraction float64) plane.Point {
	switch fraction {
	case 0:
		return e.From
	case 1:
		return e.To
	}
	if e.Kind != Arc {
		return e.From.Add(e.To.Sub(e.From).Scale(fraction))
	}
	a := e.From.Sub(e.Center)
	r0, r1 := a.Norm(), e.To.Dist(e.Center)
	turned := a.Turn(plane.Angle(e.Sweep() * fraction))
	return e.Center.Add(turned.Scale(1 + fraction*(r1-r0)/r0))
}

// Reverse returns the element travelled the other way. Its Source then falls.
func (e Element) Reverse() Element {
	e.From, e.To = e.To, e.From
	e.CCW = e.Kind == Arc && !e.CCW
	e.Source.From, e.Source.To = e.Source.To, e.Source.From
	return e
}

// Split cuts the element at the given fraction of its length, 0 < fraction < 1.
// Source is cut in the same proportion: it is a label that says roughly where on
// the cam a point belongs, not the parameter of the cut point.
func (e Element) Split(fraction float64) (Element, Element) {
	a, b := e, e
	a.To = e.PointAt(fraction)
	b.From = a.To
	a.Source.To = e.Source.at(fraction)
	b.Source.From = a.Source.To
	return a, b
}

func (s Span) at(fraction float64) float64 { return s.From + fraction*(s.To-s.From) }

// fractionOf returns where t lies in the span, 0 at From, 1 at To.
func (s Span) fractionOf(t float64) float64 { return (t - s.From) / (s.To - s.From) }

// offset returns the element moved by d to the left of travel, and whether it
// still runs the same way (an arc does not when its radius would reach 0).
func (e Element) offset(d float64) (Element, bool) {
	if e.Kind == Arc {
		inward := d
		if !e.CCW {
			inward = -d
		}
		if math.Min(e.From.Dist(e.Center), e.To.Dist(e.Center)) <= inward {
			return e, false
		}
	}
	start, end := e.StartTangent().Left(), e.EndTangent().Left()
	e.From, e.To = e.From.Add(start.Scale(d)), e.To.Add(end.Scale(d))
	return e, true
}
