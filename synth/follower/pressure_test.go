package follower_test

import (
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"pgregory.net/rapid"
)

// The pressure angle by its definition: between the contact normal and the velocity of the
// follower there, positive when the side force pushes towards the cam's turning
// direction. The normal is square to a chord of the contour across the contact, the velocity a
// difference of two positions of the follower in the machine. Both are good to about 1e-6.
func TestPressureAngleByDefinition(t *testing.T) {
	each(t, func(t *rapid.T, s drawn) {
		deg := inZone(t, s)
		cw := s.kind.Sense() > 0
		at := func(d float64) plane.Point { return machine(s.contour(d), deg, cw) }
		const step = 1e-4
		contact := at(deg)
		force := at(deg + step).Sub(at(deg - step)).Left().Unit()
		if force.Dot(plane.Vector(contact)) < 0 {
			force = force.Neg() // the cam pushes outwards
		}

		lift := s.lift(deg).C[0]
		rub := contact // the point of the follower whose velocity counts
		if s.kind.Radius() > 0 {
			rub = contact.Add(force.Scale(s.kind.Radius()))
		}
		velocity := lifted(s.kind, rub, lift, step).Sub(lifted(s.kind, rub, lift, -step)).Unit()

		turning := plane.Vector(contact).Left() // of the cam's own material
		if cw {
			turning = turning.Neg()
		}
		sideways := force.Sub(velocity.Scale(force.Dot(velocity)))
		want := math.Atan2(sideways.Norm(), force.Dot(velocity)) * toDeg
		if sideways.Dot(turning) < 0 {
			want = -want
		}
		got := s.pressure(deg)
		if math.Abs(got-want) > 1e-3 {
			t.Errorf("pressure angle: got %v, want %v", got, want)
		}
	})
}

// lifted moves a point of the follower, in the machine frame at a lift, by a little more
// lift (length, or degrees of swing away from the camshaft).
func lifted(k follower.Kind, p plane.Point, lift, more float64) plane.Point {
	swing := func(c float64, above bool) plane.Point {
		if above {
			more = -more // the free end is towards the camshaft: up and away is clockwise
		}
		pivot := plane.Point{X: c}
		return pivot.Add(p.Sub(pivot).Turn(plane.Degrees(more)))
	}
	switch f := k.(type) {
	case follower.SwingingRoller:
		return swing(f.PivotDistance, f.Above)
	case follower.SwingingFlat:
		return swing(f.PivotDistance, f.Above)
	}
	return p.Add(plane.Vector{X: more})
}

// Where the follower is touched, from the contour's point at that angle.
func TestContactIsWhereTheContourIs(t *testing.T) {
	each(t, func(t *rapid.T, s drawn) {
		deg := inZone(t, s)
		p := machine(s.contour(deg), deg, s.kind.Sense() > 0)
		want := 0.0
		switch f := s.kind.(type) {
		case follower.TranslatingMushroom:
			want = p.Y - f.Offset
		case follower.TranslatingFlat:
			want = p.Y
		case follower.SwingingFlat:
			d := p.Dist(plane.Point{X: f.PivotDistance})
			want = math.Sqrt(d*d - f.FaceOffset*f.FaceOffset)
		}
		near(t, "contact", s.touch(deg), want, 1e-11)
	})
}

// At rest nothing is driven by slope: a swinging roller above the center line of a
// clockwise cam, whose arm is square to the line from roller to camshaft axis, has no
// pressure angle; a longer arm sets it one way, a shorter the other.
func TestPressureAngleAtRest(t *testing.T) {
	for _, c := range []struct{ arm, want float64 }{
		// Arm, prime radius 50 and pivot distance 100: tan a = (C cos ψ - L)/(C sin ψ).
		{50 * math.Sqrt(3), 0},
		{100, -14.4775121859299}, // isosceles: the angle at the roller is acos(1/4), 90° less 14.48°
	} {
		f := must(follower.NewSwingingRoller(40, 10, c.arm, 100, true, true))
		near(t, "pressure angle", f.PressureAngle(0, 0).Deg(), c.want, 1e-12)
		f = must(follower.NewSwingingRoller(40, 10, c.arm, 100, false, true))
		near(t, "pressure angle below", f.PressureAngle(0, 0).Deg(), -c.want, 1e-12)
	}
}
