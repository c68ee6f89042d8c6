// What a tool leaves of a barrel's walls.
//
// The problem: a tool narrower than the groove goes along each wall, shifted from the pitch
// curve. The exact wall touches the roller along a line that twists with depth, because the
// track is steeper the nearer the camshaft axis; a shifted tool cannot follow the twist. The
// obvious estimate, in the developed plane, takes one slope for all depths and sees nothing.
//
// Used here: points of the exact wall, at a distance z along the roller's axis, held in three
// dimensions against the tool: a cylinder that moves, its axis square to the camshaft's, in
// the radial direction of polar angle p or beside it by o. A point is distant from that axis, at
// height h,
//
//	√((Qy cos p - Qx sin p - o)² + (Qz - h)²)
//
// and what is left at it is the least of that over the whole pass, less the tool's radius:
// positive is material left, negative is cut away. The same with a tool as wide as the groove
// on the pitch curve, over all positions and not only the near ones, says whether another
// part of the track cuts into the wall.
//
// A tool may be shifted in two ways, both exact at the middle of the roller's depth. Parallel: by
// the axial axis and a third linear axis, off center; the shift is then the same at all
// depths, and what is left is second order, d (1 - cos) of the difference of slopes. Rotary: by the
// axial and the rotary axis; the shift along the turning then grows with the distance from the
// camshaft, and what is left is first order.
//
// Price: the points are samples (half a degree apart and at five depths), each refined to
// rounding along the pass, not a proof; the walls are smooth over a degree.

package synth

import (
	"math"

	"lobewright/synth/follower"
	"lobewright/synth/taylor"
)

const (
	wallStep   = 0.5 // degrees of cam angle between points of a wall
	wallDepths = 5   // depths at which they lie
	nearby     = 8.0 // degrees either way within which a pass touches a point
)

// Miss is the largest error of a wall, length: positive where material is left, negative
// where the tool cuts into it.
type Miss struct {
	Error  float64
	At     float64 // cam angle, degrees
	Radius float64 // distance from the camshaft axis along the roller's, length
	Upper  bool    // the wall away from the datum end
}

// larger keeps the larger of two.
func (m *Miss) larger(n Miss) {
	if math.Abs(n.Error) > math.Abs(m.Error) {
		*m = n
	}
}

// pose is where a tool's axis is: its polar angle (radians), how far it is beside the radial line of
// that angle, towards growing polar angle, and its height (lengths).
type pose struct{ polar, beside, height float64 }

// axis is a tool's pose at a cam angle, degrees.
type axis func(deg float64) pose

// Flank returns the point of a wall (the upper one is that away from the datum end) that touches
// the roller at cam angle t (degrees) of a zone, at a distance along the roller's axis from the
// camshaft axis (length): x and y across the camshaft, z from the datum end.
func (c *Cam) Flank(zone int, t, along float64, upper bool) (x, y, z float64) {
	b, _ := c.drum()
	fx, fy, fz := b.FlankF(taylor.FVar(t), c.liftF(zone, t), follower.Wall{Half: c.inset(), Upper: upper}, along)
	return fx.C[0], fy.C[0], fz.C[0]
}

// flank is the point of the exact wall at a cam angle and a distance along the roller's axis.
func (c *Cam) flank(w follower.Wall, deg, along float64) (x, y, z float64) {
	zone, t := c.cycle.Zone(deg)
	return c.Flank(zone, t, along, w.Upper)
}

// away is the distance of a point from a tool's axis.
func away(x, y, z float64, p pose) float64 {
	s, k := math.Sincos(p.polar)
	return math.Hypot(y*k-x*s-p.beside, z-p.height)
}

// nearest is the least distance of a point from the axis within a range of cam angle.
func nearest(x, y, z float64, at axis, lo, hi float64) float64 {
	p := largestOn(lo, hi, 16, func(deg float64) float64 { return -away(x, y, z, at(deg)) })
	return -p.value
}

// passAxis is the axis of a tool of a radius that cuts a wall.
func (c *Cam) passAxis(b follower.Barrel, w follower.Wall, tool float64, rotary bool) axis {
	z, sign := b.MiddleRadius(), -1.0
	if w.Upper {
		sign = 1
	}
	d := w.Half - tool
	return func(deg float64) pose {
		zone, t := c.cycle.Zone(deg)
		l := c.LiftIn(zone, t)
		a := float64(b.Slant(l.V, z))
		p := pose{b.Sense() * deg * math.Pi / 180, -sign * b.Sense() * d * math.Sin(a), b.Track + l.S + sign*d*math.Cos(a)}
		if rotary {
			p.polar, p.beside = p.polar+p.beside/z, 0
		}
		return p
	}
}

// Misses returns the largest errors of the walls cut by a tool of a radius (length, at most
// half the groove's width), by both ways of shifting it.
func (c *Cam) Misses(tool float64) (parallel, rotary Miss) {
	b, _ := c.drum()
	c.overWalls(func(w follower.Wall, deg, along, x, y, z float64) {
		n := Miss{At: camAngle(deg), Radius: along, Upper: w.Upper}
		n.Error = nearest(x, y, z, c.passAxis(b, w, tool, false), deg-nearby, deg+nearby) - tool
		parallel.larger(n)
		n.Error = nearest(x, y, z, c.passAxis(b, w, tool, true), deg-nearby, deg+nearby) - tool
		rotary.larger(n)
	})
	return parallel, rotary
}

// overWalls calls do for points of both exact walls, half the groove's width from the roller's
// axis.
func (c *Cam) overWalls(do func(w follower.Wall, deg, along, x, y, z float64)) {
	b, _ := c.drum()
	from := c.zones[0].From
	for _, upper := range []bool{false, true} {
		w := follower.Wall{Half: c.inset(), Upper: upper}
		for k := range int(360 / wallStep) {
			deg := from + float64(k)*wallStep
			for i := range wallDepths {
				along := b.BottomRadius() + b.Depth*float64(i)/(wallDepths-1)
				x, y, z := c.flank(w, deg, along)
				do(w, deg, along, x, y, z)
			}
		}
	}
}

// overlap is the deepest that one part of the track cuts into a wall of another: 0 or below.
func (c *Cam) overlap() Miss {
	b, _ := c.drum()
	half := c.inset()
	center := func(deg float64) pose {
		zone, t := c.cycle.Zone(deg)
		return pose{polar: b.Sense() * deg * math.Pi / 180, height: b.Track + c.LiftIn(zone, t).S}
	}
	// The axis as a list: most positions are far from a point, and cheap to pass over.
	const step = 0.25
	const n = int(360 / step)
	var sin, cos, height [n]float64
	for k := range n {
		p := center(c.zones[0].From + float64(k)*step)
		sin[k], cos[k] = math.Sincos(p.polar)
		height[k] = p.height
	}
	window := int(math.Ceil(math.Asin(math.Min(1, half/b.BottomRadius()))*180/math.Pi/step)) + 2
	worst := Miss{}
	c.overWalls(func(w follower.Wall, deg, along, x, y, z float64) {
		k0 := int(math.Round((deg - c.zones[0].From) / step))
		best, at := math.Inf(1), 0
		for k := k0 - 2*window; k <= k0+2*window; k++ {
			i := ((k % n) + n) % n
			if d := math.Hypot(x*sin[i]-y*cos[i], z-height[i]); d < best {
				best, at = d, k
			}
		}
		if best > half {
			return
		}
		t := c.zones[0].From + float64(at)*step
		d := nearest(x, y, z, center, t-step, t+step) - half
		if d < worst.Error {
			worst = Miss{Error: d, At: camAngle(deg), Radius: along, Upper: w.Upper}
		}
	})
	return worst
}
