package chain

import (
	"math"
	"strconv"

	"lobewright/synth/plane"
)

// Vertex is a corner of a DXF polyline: P, and the bulge of the segment that
// leaves it: tan(sweep/4), positive counterclockwise, 0 for a line.
type Vertex struct {
	P     Point
	Bulge float64
}

// bulgeDigits is how many significant digits of a bulge are printed; a double
// holds that many exactly, so printing and reading give the same number.
const bulgeDigits = 15

// Bulges returns the chain as DXF vertices. The arc that a bulge says goes through
// both grid points; its bulge is that of the center's foot on the bisector
// of the chord, rounded to 15 significant digits. A closed chain has one
// vertex a segment; an open one has the end point as a last vertex with bulge 0.
// A full circle has no bulge: Snap makes none.
func (c Chain) Bulges() []Vertex {
	vs := make([]Vertex, 0, len(c.Segments)+1)
	for _, s := range c.Segments {
		vs = append(vs, Vertex{s.From, s.bulge()})
	}
	if n := len(c.Segments); n > 0 && c.Segments[n-1].To != c.Segments[0].From {
		vs = append(vs, Vertex{P: c.Segments[n-1].To})
	}
	return vs
}

// bulge returns tan(sweep/4) in a form without cancellation: with half chord a, and
// center at h left of the chord (h < 0: past it) for a counterclockwise arc,
// the sagitta is r-h and the bulge (r-h)/a = a/(r+h).
func (s Segment) bulge() float64 {
	if s.Kind != Arc || s.From == s.To {
		return 0
	}
	chord := vec(s.From, s.To)
	toCenter := vec(s.From, s.Center)
	a := chord.Norm() / 2
	h := chord.Cross(toCenter) / (2 * a)
	sign := 1.0
	if !s.CCW {
		h, sign = -h, -1
	}
	r := math.Hypot(a, h)
	b := a / (r + h)
	if h < 0 {
		b = (r - h) / a
	}
	return roundDigits(sign*b, bulgeDigits)
}

// vec returns b - a in counts.
func vec(a, b Point) plane.Vector {
	return plane.Vector{X: float64(b.X - a.X), Y: float64(b.Y - a.Y)}
}

func roundDigits(x float64, digits int) float64 {
	y, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', digits, 64), 64)
	if err != nil {
		return x
	}
	return y
}

// FromBulges returns the path that DXF vertices and their bulges say: true circular
// arcs through the points. Missing bulges count as 0; when closed, the
// last bulge is that of the way back to the first point, else it is not used.
// Two equal neighbor points make no element. Points and bulges must be finite.
//
// Center is a float; Slack bounds the distance of every point of the true arc from
// the circles about Center through From and To. With u = 2^-53 and
// C = M + g·left(c), M = (From+To)/2, c = To-From, g = (1-b)(1+b)/(4b):
// M is wrong by at most u|M|, g by 4 roundings, c by one, their product by one,
// the sum by u|C|; so the center by at most δ = u(|M| + 6|g c| + |C|) to first
// order, and a point of the true arc and From, both at the true radius from the
// true center, differ by at most 2δ in their distance from Center.
func FromBulges(points []plane.Point, bulges []float64, closed bool) Path {
	var p Path
	n := len(points)
	for i := range points {
		if i == n-1 && !closed {
			break
		}
		from, to := points[i], points[(i+1)%n]
		if from == to {
			continue
		}
		b := 0.0
		if i < len(bulges) {
			b = bulges[i]
		}
		p = append(p, fromBulge(from, to, b))
	}
	return p
}

func fromBulge(from, to plane.Point, b float64) Element {
	if b == 0 {
		return Element{Kind: Line, From: from, To: to}
	}
	mid := plane.Point{X: from.X/2 + to.X/2, Y: from.Y/2 + to.Y/2}
	c := to.Sub(from)
	g := (1 - b) * (1 + b) / (4 * b)
	center := mid.Add(c.Left().Scale(g))
	const u = 0x1p-53
	const secondOrder = 1.01 // pays for the terms of order u² and for evaluating the bound in floats
	delta := u * (mid.Radius() + 6*math.Abs(g)*c.Norm() + center.Radius()) * secondOrder
	return Element{Kind: Arc, From: from, To: to, Center: center, CCW: b > 0, Slack: 2 * delta}
}
