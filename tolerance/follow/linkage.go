package follow

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Linkage says what a follower does at cam angle theta (degrees) while it is on an arc of
// its base curve, given as a frame with the tangent in the direction of growing cam
// angle: lift, velocity and acceleration per rad and rad², and the point of the arc it is
// on. ok is false where it can be on no point of the prolonged arc.
type Linkage func(theta float64, arc plane.Frame) (lift, v, a float64, at plane.Point, ok bool)

// Kind is a follower known by its linkage alone. The cam angle at which it is at an end
// of an element is found from the linkage: the place where it touches goes along the arc
// steadily, and is at that end.
type Kind struct {
	On    Linkage
	Near  func(p plane.Point) float64 // the cam angle, degrees, at which the design is near a point of its base curve
	Sense float64                     // +1 when the cam turns clockwise, -1 otherwise

	// Flat followers touch by direction: at a joint that breaks by a hair the angle they
	// leave one element at is not the one they meet the next at. Kinks is by how much, in
	// degrees, such joints may miss one turn in all.
	Kinks float64
}

func (k Kind) closing() float64 { return closing + k.Kinks }

func (k Kind) closes(first, last plane.Point) bool { return closed(first, last) }

func (k Kind) stretch(e chain.Element) (stretch, bool) {
	s := stretch{start: e.From, tangent: startTangent(e), k: e.Curvature()}
	if plane.Vector(e.From).Cross(s.tangent)*k.Sense < 0 {
		e = e.Reverse()
		s = stretch{start: e.From, tangent: startTangent(e), k: e.Curvature(), backward: true}
	}
	from, ok := k.angle(s, e, 0)
	to, ok2 := k.angle(s, e, 1)
	s.from, s.extent = plane.Wrap360(from), plane.Wrap360(to-from)
	if math.Abs(e.Sweep()) > math.Pi && s.extent < angleSlack {
		s.extent += 360
	}
	return s, ok && ok2
}

func (k Kind) at(s stretch, theta float64) (lift, v, a float64, ok bool) {
	lift, v, a, _, ok = k.On(theta, s.frame())
	return lift, v, a, ok
}

func (s stretch) frame() plane.Frame { return plane.Frame{P: s.start, T: s.tangent, K: s.k} }

// angle finds the cam angle at which the follower is at the start (end 0) or the end
// (1) of the element, by the secant method on how far along the arc it is.
func (k Kind) angle(s stretch, e chain.Element, end int) (float64, bool) {
	p, t := e.From, s.tangent
	if end == 1 {
		p, t = e.To, e.EndTangent()
	}
	off := func(theta float64) (float64, bool) {
		_, _, _, at, ok := k.On(theta, s.frame())
		return at.Sub(p).Dot(t), ok
	}
	const steps, first = 60, 1e-3
	x := k.Near(p)
	fx, ok := off(x)
	y := x + first
	fy, ok2 := off(y)
	for range steps {
		if !ok || !ok2 {
			return 0, false
		}
		if math.Abs(fy) <= 1e-13*p.Radius() || fy == fx {
			break
		}
		step := -fy * (y - x) / (fy - fx)
		step = math.Max(-5, math.Min(5, step))
		x, fx = y, fy
		y += step
		fy, ok2 = off(y)
	}
	return y, ok2 && math.Abs(fy) <= 1e-9*p.Radius()
}
