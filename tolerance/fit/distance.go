package fit

import (
	"math"

	"lobewright/synth/plane"
)

// distance returns the largest distance of the curve from the chain, over the share of eps allowed there: at the samples, and between
// them by cubics with the values and slopes at both. It is infinite when the curvature of an arc lies further
// than swing outside the curve's along it and its neighbors: no parallel could be taken
// of such a path.
func (f *fitter) distance(th thread, swing float64) float64 {
	legs := f.legs(th)
	ranges := make([]span, len(legs)) // of the curve's curvature along each leg
	for i := range ranges {
		ranges[i] = span{math.Inf(1), math.Inf(-1)}
	}
	if f.left.dwell {
		ranges[0] = ranges[0].with(f.left.frame.K)
	}
	if f.right.dwell {
		ranges[len(legs)-1] = ranges[len(legs)-1].with(f.right.frame.K)
	}
	f.window()
	end := f.hi
	if f.closed {
		end = min(end+1, len(f.ss))
	}
	worst, l, ahead := 0.0, 0, legs[0].endDirection()
	d0, m0 := 0.0, 0.0
	for i := f.lo; i < end; i++ {
		s := &f.ss[i]
		for l < len(legs)-1 && s.P.Sub(legs[l].end).Dot(ahead) > 0 {
			l++
			ahead = legs[l].endDirection()
		}
		ranges[l] = ranges[l].with(s.K)
		d, m := legs[l].gap(s.P, s.T)
		if i > f.lo && m0*m < 0 {
			worst = math.Max(worst, math.Abs(crest(d0, m0, d, m, f.s[i]-f.s[i-1]))*math.Max(f.inv[i-1], f.inv[i]))
		}
		worst = math.Max(worst, math.Abs(d)*f.inv[i])
		if i < f.hi {
			f.real[i] = d
		}
		d0, m0 = d, m
	}
	if l < len(legs)-2 || math.IsNaN(worst) || !bentAlike(legs, ranges, swing) {
		return math.Inf(1)
	}
	return worst
}

// legs returns the arcs of the chain, with those of the dwells beside it.
func (f *fitter) legs(th thread) []leg {
	legs := make([]leg, 0, len(th.strokes)+2)
	if f.left.dwell {
		from := f.left.on(-f.left.room)
		legs = append(legs, leg{p: from.p, end: th.strokes[0].p, d: from.d, k: f.left.frame.K})
	}
	for _, s := range th.strokes {
		legs = append(legs, s.leg)
	}
	if f.right.dwell {
		last, to := legs[len(legs)-1], f.right.on(f.right.room)
		legs = append(legs, leg{p: last.end, end: to.p, d: last.endDirection(), k: f.right.frame.K})
	}
	return legs
}

// span is an interval of curvatures.
type span struct{ low, high float64 }

func (r span) with(k float64) span { return span{math.Min(r.low, k), math.Max(r.high, k)} }

// bentAlike reports whether no leg's curvature lies further than swing outside the curve's along it
// and its neighbors.
func bentAlike(legs []leg, ranges []span, swing float64) bool {
	for i, l := range legs {
		r := ranges[i]
		for _, n := range ranges[max(i-1, 0):min(i+2, len(ranges))] {
			r = r.with(n.low).with(n.high)
		}
		if !(l.k >= r.low-swing && l.k <= r.high+swing) {
			return false
		}
	}
	return true
}

// gap returns the signed distance of q from the leg's circle as away does, and how it grows as q
// moves along t.
func (l leg) gap(q plane.Point, t plane.Vector) (d, slope float64) {
	x, y := q.X-l.p.X, q.Y-l.p.Y
	f := l.d.X*y - l.d.Y*x - l.k/2*(x*x+y*y)
	root := math.Sqrt(math.Max(1-2*l.k*f, 0))
	return 2 * f / (1 + root), (t.Y*(l.d.X-l.k*y) - t.X*(l.d.Y+l.k*x)) / root
}

// crest returns the extreme of the cubic with values d and slopes m at both ends of a length h,
// where the slopes differ in sign.
func crest(d0, m0, d1, m1, h float64) float64 {
	c1, rise := h*m0, d1-d0
	c2 := 3*rise - h*(2*m0+m1)
	c3 := h*(m0+m1) - 2*rise
	q := -c2 - math.Copysign(math.Sqrt(math.Max(c2*c2-3*c1*c3, 0)), c2) // roots q/(3·c3) and c1/q
	u := c1 / q
	if !(u >= 0 && u <= 1) {
		u = q / (3 * c3)
	}
	if !(u >= 0 && u <= 1) {
		return math.Max(math.Abs(d0), math.Abs(d1))
	}
	return d0 + u*(c1+u*(c2+u*c3))
}
