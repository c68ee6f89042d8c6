package synth

import (
	"errors"
	"fmt"
	"math"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/synth/taylor"
)

// newFollower makes the follower of a spec. The error is a Faults at the key that does
// not fit.
func newFollower(s *spec.Spec) (follower.Kind, error) {
	f, base, cw := s.Follower, s.Cam.BaseRadius, s.Camshaft.Clockwise
	var kind follower.Kind
	var err error
	if s.Cam.Kind == "barrel" {
		kind, err = newBarrel(s)
		return kind, err
	}
	switch f.Kind {
	case "translating-knife":
		kind, err = follower.NewTranslatingKnife(base, f.Offset, cw)
	case "translating-mushroom":
		kind, err = follower.NewTranslatingMushroom(base, f.FaceRadius, f.HeadDiameter, f.Offset, cw)
	case "translating-flat":
		kind, err = follower.NewTranslatingFlat(base, f.FaceWidth, cw)
	case "swinging-roller":
		kind, err = follower.NewSwingingRoller(base, f.RollerDiameter/2, f.ArmLength, f.PivotDistance, !f.Below, cw)
	case "swinging-flat":
		kind, err = follower.NewSwingingFlat(base, f.FaceOffset, f.Face.From, f.Face.To, f.PivotDistance, !f.Below, cw)
	default:
		roller, ok := follower.NewTranslatingRoller(base, f.RollerDiameter/2, f.Offset, cw)
		kind = roller
		if prime := base + f.RollerDiameter/2; !ok {
			err = &follower.Misfit{Key: "offset", Value: f.Offset, From: -prime, To: prime, Why: "the follower's line meets the prime circle"}
		}
	}
	var m *follower.Misfit
	if errors.As(err, &m) {
		return nil, spec.Faults{{File: s.File, Line: f.Place.Line, Column: f.Place.Column, Path: "follower." + m.Key,
			Found: fmt.Sprintf("%.6g", m.Value), Allowed: between(m.From, m.To), Advice: "only then " + m.Why}}
	}
	return kind, err
}

func between(from, to float64) string {
	if math.IsInf(to, 1) {
		return fmt.Sprintf("above %.6g", from)
	}
	return fmt.Sprintf("above %.6g and below %.6g", from, to)
}

// followers are the kinds a plate cam takes.
func followers() []string {
	return []string{"translating-roller", "translating-knife", "translating-mushroom", "translating-flat", "swinging-roller", "swinging-flat"}
}

// face returns the follower as one with a flat face.
func (c *Cam) face() (follower.Face, bool) {
	f, ok := c.follower.(follower.Face)
	return f, ok
}

// Swings reports whether lifts are degrees of swing.
func (c *Cam) Swings() bool { return c.spec.Follower.Swings() }

// LiftUnit is the unit of lifts: that of lengths, or deg.
func (c *Cam) LiftUnit() string { return liftUnit(c.spec) }

func liftUnit(s *spec.Spec) string {
	if s.Follower.Swings() {
		return "deg"
	}
	return s.Units.Short()
}

// HasPitchCurve reports whether the follower has a center whose path is another curve
// than the contour.
func (c *Cam) HasPitchCurve() bool { return c.follower.Radius() > 0 }

// AtRest returns where the follower's center stands at lift 0 and cam angle 0: of a face,
// where it touches the base circle.
func (c *Cam) AtRest() plane.Point {
	x, y := c.follower.F(taylor.F{}, taylor.F{})
	if f, ok := c.face(); ok {
		p, phi := f.SupportF(taylor.FVar(0), taylor.F{})
		frame, _ := follower.FaceFrame(p, phi, 0)
		return frame.P
	}
	return plane.Point{X: x.C[0], Y: y.C[0]}
}

// Stroke returns how far a swinging roller's center goes along its arc, length; 0 for
// other followers.
func (c *Cam) Stroke() float64 {
	if f, ok := c.follower.(follower.SwingingRoller); ok {
		return f.Stroke(c.cycle.MaxLift())
	}
	return 0
}

// HasCenter reports whether the follower has a center or an edge, which a face has not.
func (c *Cam) HasCenter() bool {
	_, face := c.face()
	return !face
}
