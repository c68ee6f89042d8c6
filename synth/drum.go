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

// drumF is a wall of a barrel, or the path of a tool that cuts it, as series.
func (c *Curve) drumF(piece int, t float64) (x, y taylor.F, ok bool) {
	b, drum := c.cam.drum()
	w, wall := c.flanked()
	if !drum || !wall {
		return x, y, false
	}
	deg, lift := taylor.FVar(t), c.cam.liftF(piece, t)
	if c.tool > 0 {
		x, y = b.ShiftedF(deg, lift, w, c.tool, b.MiddleRadius())
	} else {
		x, y = b.WallF(deg, lift, w, b.OuterRadius)
	}
	return x, y, true
}

// drumI encloses what drumF computes.
func (c *Curve) drumI(piece int, t taylor.Interval, order int) (x, y taylor.I, ok bool) {
	b, drum := c.cam.drum()
	w, wall := c.flanked()
	if !drum || !wall {
		return x, y, false
	}
	deg := taylor.IVar(t, order+1)
	lift := c.cam.lift.I(piece, deg)
	if c.tool > 0 {
		x, y = b.ShiftedI(deg, lift, w, c.tool, b.MiddleRadius())
	} else {
		x, y = b.WallI(deg, lift, w, b.OuterRadius)
	}
	return x, y, true
}

// ToolPath returns the path of the axis of a tool in a barrel's groove, in the developed
// plane: of a tool as wide as the groove the pitch curve; of a narrower one, for the upper
// wall (away from the datum end) or the lower, the pitch curve shifted square to the track by
// what the tool is too narrow and by the stock that is to stay (length), which is exact at
// the middle of the roller's depth.
func (c *Cam) ToolPath(toolRadius, stock float64, upper bool) *Curve {
	half := c.inset()
	if narrower := half - toolRadius - stock; narrower <= widthSlack*half {
		return c.Pitch()
	}
	left := half * c.outward()
	if !upper {
		left = -left
	}
	p := c.curve(left)
	p.tool = toolRadius + stock
	return p.renewed()
}

// renewed settles again what depends on where the curve is.
func (c *Curve) renewed() *Curve {
	for i := 1; i < len(c.pieces); i++ {
		c.pieces[i].Jump = jump(c.At(i-1, c.pieces[i-1].To), c.At(i, c.pieces[i].From), c.cam.size())
	}
	return c
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
