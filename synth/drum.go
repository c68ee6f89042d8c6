package synth

import (
	"math"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/synth/taylor"
)

// A barrel cam is a Cam whose curves lie in the developed plane, seen from outside: X is
// the outer radius times the polar angle, Y the axial position from the datum end. They are
// open, begin in the middle of the longest low dwell and go on for one turn. The contour is
// the wall on the side of the datum end where it meets the outer radius, the outer wall the
// other one; what lies deeper is drum_cut.go's.

// drum returns the follower as that of a barrel.
func (c *Cam) drum() (follower.Barrel, bool) {
	b, ok := c.follower.(follower.Barrel)
	return b, ok
}

// Barrel returns the barrel, of which the curves are the development; ok is false for
// plate and groove cams.
func (c *Cam) Barrel() (b follower.Barrel, ok bool) { return c.drum() }

func newBarrel(s *spec.Spec) (follower.Kind, error) {
	m := s.Cam
	return follower.NewBarrel(m.Radius, m.GrooveDepth, s.Follower.RollerDiameter/2, m.TrackPosition, s.Camshaft.Clockwise)
}

// size is the cam's own scale, length: the prime circle's radius, or the barrel's.
func (c *Cam) size() float64 {
	if b, ok := c.drum(); ok {
		return b.OuterRadius
	}
	return c.Prime()
}

// flanked is the wall that a curve of a barrel belongs to; ok is false for the pitch curve.
func (c *Curve) flanked() (follower.Wall, bool) {
	return follower.Wall{Half: math.Abs(c.left), Upper: c.left*c.cam.outward() > 0}, c.left != 0
}

// drumF is a wall of a barrel, or the path of a tool's axis, as series; ok is false for the pitch
// curve itself.
func (c *Curve) drumF(piece int, t float64) (x, y taylor.F, ok bool) {
	b, drum := c.cam.drum()
	w, wall := c.flanked()
	if !drum || !wall && c.tool == nil {
		return x, y, false
	}
	deg, lift := taylor.FVar(t), c.cam.liftF(piece, t)
	switch {
	case c.tool == nil:
		x, y = b.WallF(deg, lift, w, b.OuterRadius)
	case wall:
		x, y = b.AxisF(deg, lift, w, c.shift(b), c.tool.At)
	default:
		x, y = b.F(deg, lift)
		x = x.Scale(c.tool.At / b.OuterRadius)
	}
	return x, y, true
}

// drumI encloses what drumF computes.
func (c *Curve) drumI(piece int, t taylor.Interval, order int) (x, y taylor.I, ok bool) {
	b, drum := c.cam.drum()
	w, wall := c.flanked()
	if !drum || !wall && c.tool == nil {
		return x, y, false
	}
	if wall {
		order++
	}
	deg := taylor.IVar(t, order)
	lift := c.cam.lift.I(piece, deg)
	switch {
	case c.tool == nil:
		x, y = b.WallI(deg, lift, w, b.OuterRadius)
	case wall:
		x, y = b.AxisI(deg, lift, w, c.shift(b), c.tool.At)
	default:
		x, y = b.I(deg, lift)
		x = x.Scale(c.tool.At / b.OuterRadius)
	}
	return x, y, true
}

// shift is how the curve's tool is moved.
func (c *Curve) shift(b follower.Barrel) follower.Shift {
	return follower.Shift{Tool: c.tool.Radius, Exact: b.MiddleRadius(), Rotary: c.tool.Rotary}
}

// DrumTool is a tool in a barrel's groove, and how its axis is looked at.
type DrumTool struct {
	Radius float64 // length, with the stock it is to leave
	Side   int     // 0 on the pitch curve; else it cuts a wall: -1 that at the datum end, +1 the other
	Rotary bool    // shifted to its wall by the rotary axis, else by an axis across
	At     float64 // distance from the camshaft axis at which it is looked at, length
}

// ToolAxis returns the path of the tool's axis as the plane at a distance from the camshaft
// axis sees it: X is that distance times its polar angle and what the tool is beside it, Y the
// axial position.
func (c *Cam) ToolAxis(t DrumTool) *Curve {
	left := 0.0
	if t.Side != 0 && t.Radius < c.inset() {
		left = float64(t.Side) * c.outward() * c.inset()
	}
	p := c.build(left)
	p.tool = &t
	for i := 1; i < len(p.pieces); i++ {
		p.pieces[i].Jump = jump(p.At(i-1, p.pieces[i-1].To), p.At(i, p.pieces[i].From), c.size())
	}
	return p
}

// drumRound is the least radius of curvature of both walls where their material bulges, in the
// developed plane.
func (c *Cam) drumRound() (float64, place) {
	lower, upper := c.Contour().Radii(), c.OuterWall().Radii()
	radius, at := lower.Convex, lower.ConvexAt
	if upper.Concave < radius {
		radius, at = upper.Concave, upper.ConcaveAt
	}
	zone, t := c.cycle.Zone(at)
	return radius, place{piece: zone, t: t}
}

// slopeIn is the slope of the track, lift per radian.
func (c *Cam) slopeIn(zone int, t float64) float64 { return c.LiftIn(zone, t).V }

// SlantAt returns the angle of the track against the turning at a distance from the
// camshaft axis (length): the pressure angle there.
func (c *Cam) SlantAt(zone int, t, radius float64) plane.Angle {
	b, _ := c.drum()
	return b.Slant(c.slopeIn(zone, t), radius)
}
