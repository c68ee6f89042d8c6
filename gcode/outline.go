package gcode

import (
	"math"

	"lobewright/synth/plane"
)

// outlinePoints is how many points of the contour an outline keeps; it sorts
// moves into cuts and leads and tells inside from outside for points that are
// proven to keep their distance from the exact curve. It proves nothing itself.
const outlinePoints = 1440

// outline is the contour as a fine polygon.
type outline struct {
	t []float64
	p []plane.Point
}

func newOutline(c Curve) outline {
	var o outline
	first := c.Pieces()[0].From
	for k := range outlinePoints {
		t := first + 360*float64(k)/outlinePoints
		o.t, o.p = append(o.t, t), append(o.p, pointAt(c, t))
	}
	return o
}

// near returns the distance of p from the polygon, by its nearest corner, and the
// cam angle there.
func (o outline) near(p plane.Point) (distance, t float64) {
	best, least := 0, math.Inf(1)
	for i, a := range o.p {
		if d := (a.X-p.X)*(a.X-p.X) + (a.Y-p.Y)*(a.Y-p.Y); d < least {
			best, least = i, d
		}
	}
	distance = math.Inf(1)
	n := len(o.p)
	for _, i := range []int{(best + n - 1) % n, best} {
		a, ab := o.p[i], o.p[(i+1)%n].Sub(o.p[i])
		f := 0.0
		if d := ab.Dot(ab); d > 0 {
			f = math.Max(0, math.Min(1, p.Sub(a).Dot(ab)/d))
		}
		if d := p.Dist(a.Add(ab.Scale(f))); d < distance {
			distance, t = d, o.t[i]+f*360/outlinePoints
		}
	}
	return distance, t
}

// inside reports whether p lies inside the polygon, by winding.
func (o outline) inside(p plane.Point) bool {
	winding := 0.0
	for i, a := range o.p {
		u, v := a.Sub(p), o.p[(i+1)%len(o.p)].Sub(p)
		winding += math.Atan2(u.Cross(v), u.Dot(v))
	}
	return math.Abs(winding) > math.Pi
}
