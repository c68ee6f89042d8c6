// Package synth turns a spec into an exact cam: the motion, the pitch curve, the
// contour and every parallel curve as functions of the cam angle, and the gates
// that judge them. No polyline stands in for a curve anywhere.
package synth

import (
	"math"
	"sync"

	"lobewright/synth/follower"
	"lobewright/synth/motion"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/synth/taylor"
)

// Cam is a cam with its follower, complete and not changed after Build.
type Cam struct {
	completed
	spec     *spec.Spec
	zones    []motion.Zone
	lift     lift
	follower follower.Kind
	made     *curves // nil: none are kept
}

// curves keeps the parallels that were asked for: their pieces take longer to compare than a point takes to evaluate.
type curves struct {
	lock sync.Mutex
	of   map[float64]*Curve // by distance to the left of the pitch curve
}

// lift is the completed motion as series in the cam angle in degrees, by zone.
type lift interface {
	F(zone int, deg taylor.F) taylor.F
	I(zone int, deg taylor.I) taylor.I
}

// zoneLift evaluates zones of polynomial plus sinusoids.
type zoneLift []motion.Zone

func (z zoneLift) F(zone int, deg taylor.F) taylor.F { return motion.Eval(z[zone], deg) }
func (z zoneLift) I(zone int, deg taylor.I) taylor.I { return motion.Eval(z[zone], deg) }

// Vocabulary tells the spec reader which laws and kinds exist, and how fast a
// law starts and ends.
func Vocabulary() spec.Vocabulary {
	return spec.Vocabulary{
		Laws:      motion.Names(),
		Followers: followers(),
		Cams:      []string{"plate", "groove", "barrel"},
		Processes: []string{"mill", "grind", "wire"},
		ShareLaws: []string{"modified-constant-velocity"},

		SymmetricLaws: motion.SymmetricNames(),
		HalfLaws:      halfLaws(),
		EndSpeeds: func(l spec.Law) (start, end float64) {
			law, err := lawOf(l)
			if err != nil {
				return 0, 0 // the reader has already said what is wrong with the law
			}
			return law.EndSpeeds()
		},
	}
}

func kindOf(k spec.EventKind) motion.Kind {
	switch k {
	case spec.Rise:
		return motion.Rise
	case spec.Fall:
		return motion.Fall
	}
	return motion.Dwell
}

// Build completes the cam of a spec. It fails only where the spec contradicts
// itself in a way its reader cannot see.
func Build(s *spec.Spec) (*Cam, error) {
	if err := refuseFreeOffset(s); err != nil {
		return nil, err
	}
	m, err := complete(s)
	if err != nil {
		return nil, err
	}
	f, err := newFollower(s)
	if err != nil {
		return nil, err
	}
	if _, ok := f.(follower.Barrel); ok {
		m.cycle = m.cycle.Opened()
	}
	zones := m.cycle.Zones()
	return &Cam{spec: s, completed: m, zones: zones, lift: zoneLift(zones), follower: f, made: &curves{of: map[float64]*Curve{}}}, nil
}

// Cycle returns the completed motion.
func (c *Cam) Cycle() *motion.Cycle { return c.cycle }

// Follower returns the follower.
func (c *Cam) Follower() follower.Kind { return c.follower }

// Prime returns the radius of the prime circle, length: of the base circle where the
// follower has no roller.
func (c *Cam) Prime() float64 { return c.spec.Cam.BaseRadius + c.follower.Radius() }

// Omega returns the camshaft's speed in rad/s.
func (c *Cam) Omega() float64 { return c.spec.Camshaft.Speed * math.Pi / 30 }

// outward returns +1 when the outside of the cam lies to the left of travel: a
// cam that turns clockwise has its curves run counterclockwise, outside to the right. Of
// a barrel, whose development runs to +X when the cam turns clockwise, the outside is +Y.
func (c *Cam) outward() float64 {
	if _, ok := c.drum(); ok {
		return c.follower.Sense()
	}
	return -c.follower.Sense()
}

// Pitch returns the base curve: the path of the follower's center, or the contour where it
// has none.
func (c *Cam) Pitch() *Curve { return c.curve(0) }

// Contour returns the curve that is cut: of a groove its inner wall, of a barrel the wall on
// the side of the datum end, at the outer radius.
func (c *Cam) Contour() *Curve { return c.Parallel(0) }

// Grooved reports whether the cam is a groove with two walls.
func (c *Cam) Grooved() bool { return c.spec.Cam.Kind != "plate" }

// inset is how far the contour lies inside the base curve: the roller's radius, in a
// groove and half the clearance.
func (c *Cam) inset() float64 {
	if c.Grooved() {
		_, half := c.groove().Walls()
		return half
	}
	return c.follower.Radius()
}

func (c *Cam) groove() follower.Groove {
	return follower.Groove{Kind: c.follower, Clearance: c.spec.Cam.Clearance}
}

// GrooveWidth returns the width of the groove, length.
func (c *Cam) GrooveWidth() float64 { return 2 * c.inset() }

// FromPitch returns the curve at a distance outside the pitch curve, length.
func (c *Cam) FromPitch(outside float64) *Curve { return c.curve(c.outward() * outside) }

// OuterWall returns the outer wall of a groove, of a barrel the one away from the datum end, at
// the outer radius.
func (c *Cam) OuterWall() *Curve { return c.curve(c.outward() * c.inset()) }

// Parallel returns the curve at a distance outside the contour, length.
func (c *Cam) Parallel(outside float64) *Curve { return c.curve(c.LeftOfPitch(outside)) }

// LeftOfPitch turns a distance outside the contour into one to the left of the pitch curve's travel.
func (c *Cam) LeftOfPitch(outside float64) float64 {
	return c.outward() * (outside - c.inset())
}

// OutsideIsLeft reports whether the outside of the cam lies to the left of travel with growing cam angle.
func (c *Cam) OutsideIsLeft() bool { return c.outward() > 0 }

// Lift is the motion at one cam angle: lift (length; degrees of a swinging follower), and
// lift per radian, radian², radian³ of cam angle.
type Lift struct{ S, V, A, J float64 }

// LiftIn returns the motion at cam angle t, in degrees, of a zone.
func (c *Cam) LiftIn(zone int, t float64) Lift {
	const rad = 180 / math.Pi
	f := c.liftF(zone, t)
	return Lift{f.Deriv(0), f.Deriv(1) * rad, f.Deriv(2) * rad * rad, f.Deriv(3) * rad * rad * rad}
}

// LiftAt returns the motion at any cam angle in degrees; at a junction, of the
// zone that begins there.
func (c *Cam) LiftAt(deg float64) Lift {
	zone, t := c.cycle.Zone(deg)
	return c.LiftIn(zone, t)
}

// PressureAngleIn returns the pressure angle at cam angle t, in degrees, of a zone.
func (c *Cam) PressureAngleIn(zone int, t float64) plane.Angle {
	l := c.LiftIn(zone, t)
	return c.follower.PressureAngle(l.S, l.V)
}
