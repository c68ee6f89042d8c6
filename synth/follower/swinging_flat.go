package follower

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// SwingingFlat is a flat face that swings about a pivot at (PivotDistance, 0) in the
// machine frame. Lift is in degrees of swing and turns the face away from the camshaft.
type SwingingFlat struct {
	BaseRadius    float64 // length
	FaceOffset    float64 // from the pivot to the face's line, positive towards the cam, length
	From, To      float64 // the face, along its line from the foot of the pivot, positive towards the cam, length
	PivotDistance float64 // pivot to camshaft axis, length
	Above         bool    // the face touches the base circle above the center line (+Y), else below
	Clockwise     bool    // the cam turns clockwise as seen on the marked face
	Rest          float64 // angle of the face's normal from the center line at lift 0, rad, between 0 and pi
}

// NewSwingingFlat returns the follower whose face is tangent to the base circle at lift
// 0. Fails, with a *Misfit, when the pivot is so near that no line at the face's offset
// from it can be, or when the face has no length.
func NewSwingingFlat(baseRadius, faceOffset, from, to, pivotDistance float64, above, clockwise bool) (SwingingFlat, error) {
	foot := baseRadius + faceOffset
	f := SwingingFlat{
		BaseRadius: baseRadius, FaceOffset: faceOffset, From: from, To: to, PivotDistance: pivotDistance,
		Above: above, Clockwise: clockwise,
		Rest: math.Atan2(math.Sqrt((pivotDistance-foot)*(pivotDistance+foot)), foot),
	}
	why := "the face's line can be tangent to the base circle"
	if err := (Misfit{"pivot_distance", pivotDistance, math.Abs(foot), math.Inf(1), why}).within(); err != nil {
		return f, err
	}
	return f, Misfit{"face.to", to, from, math.Inf(1), "the face has a length"}.within()
}

// swingSupport is the face's line in the cam frame. In the machine its normal is the angle
// μ off the center line, and its distance from the axis that of the pivot less the offset:
//
//	p = C cos μ - f,  μ = μ0 - lift
func swingSupport[T taylor.Scalar[T]](f SwingingFlat, deg, lift T) (p, phi T) {
	mu := lift.Of(f.Rest).Sub(lift.Radians())
	_, cos := mu.SinCos()
	return cos.Scale(f.PivotDistance).Sub(lift.Of(f.FaceOffset)),
		deg.Radians().Scale(f.Sense()).Add(mu.Scale(side(f.Above)))
}

// Sense returns +1 when the cam turns clockwise, -1 otherwise: see Kind.
func (f SwingingFlat) Sense() float64 { return sense(f.Clockwise) }

// SupportF returns distance and normal angle (rad) of the face's line: see Face. Lift in
// degrees.
func (f SwingingFlat) SupportF(deg, lift taylor.F) (p, phi taylor.F) {
	return swingSupport(f, deg, lift)
}

// SupportI encloses what SupportF computes.
func (f SwingingFlat) SupportI(deg, lift taylor.I) (p, phi taylor.I) {
	return swingSupport(f, deg, lift)
}

// F returns the contour; lift in degrees. One order is lost.
func (f SwingingFlat) F(deg, lift taylor.F) (x, y taylor.F) { return Contour(f.SupportF(deg, lift)) }

// I encloses what F computes; its order is one less than that of lift.
func (f SwingingFlat) I(deg, lift taylor.I) (x, y taylor.I) { return Contour(f.SupportI(deg, lift)) }

// Radius returns 0: the base curve is the contour.
func (f SwingingFlat) Radius() float64 { return 0 }

// MaxSwing returns the lift, in degrees, that would set the face square to the center
// line: more would bring it nearer to the camshaft again.
func (f SwingingFlat) MaxSwing() float64 { return plane.Angle(f.Rest).Deg() }

// Contact returns how far along its line the face is touched, from the foot of the
// pivot, positive towards the cam, length: C sin μ/(1 ∓ ψ'), to be held against From and
// To. Lift in degrees, slope in degrees a radian. It is +Inf where the face swings as
// fast as the cam turns, or faster: no cam can do that.
func (f SwingingFlat) Contact(lift, slope float64) float64 {
	q := 1 - f.Sense()*side(f.Above)*float64(plane.Degrees(slope))
	if !(q > 0) {
		return math.Inf(1)
	}
	return f.PivotDistance * math.Sin(f.Rest-float64(plane.Degrees(lift))) / q
}

// PressureAngle returns the angle between the face's normal and the velocity of the
// follower's point at the contact, away from the camshaft: tan a = ±f/l, with f the
// face's offset and l the contact along the face; 0 for a face through its pivot. It is
// positive when the side force pushes towards the cam's turning direction: with f > 0,
// above the center line of a cam that turns clockwise, below one that turns
// counterclockwise. It is 0 where Contact is +Inf. Lift in degrees, slope in degrees a radian.
func (f SwingingFlat) PressureAngle(lift, slope float64) plane.Angle {
	return plane.Angle(math.Atan2(f.Sense()*side(f.Above)*f.FaceOffset, f.Contact(lift, slope)))
}

// OnArc reads the inverted slider-crank of cam and face: of an arc with center Q, turned
// into the machine frame, and radius ρ, the face's line at μ touches it when
//
//	C cos μ - f = Qx cos μ ± Qy sin μ + ρ
//
// which is linear in (cos μ, sin μ). Of the two solutions it is the one touched on the
// cam's side of the foot. A straight line (K = 0) is touched by a face in one
// instant only: ok is false. At a corner K is infinite.
func (f SwingingFlat) OnArc(theta float64, arc plane.Frame) (Reading, bool) {
	if arc.K == 0 {
		return Reading{}, false
	}
	m, up := turned(theta, f.Sense()), side(f.Above)
	q, rho := centerOf(arc, f.Sense())
	qx, qy := m.point(q)
	gx, gy := qx.Of(f.PivotDistance).Sub(qx), qy.Scale(-up)
	ex, ey, ok := onUnit(gx, gy, gx.Of(f.FaceOffset+rho), 1)
	if !ok {
		return Reading{}, false
	}
	mu := turning(ex, ey, f.Rest)
	n := m.back(ex.C[0], up*ey.C[0])
	return reading(mu.Scale(-plane.Angle(1).Deg()), q.Add(plane.Vector(n).Scale(rho)))
}
