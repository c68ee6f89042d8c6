package follower

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// TranslatingFlat is a flat face square to +X, which moves along +X.
type TranslatingFlat struct {
	BaseRadius float64 // X of the face at lift 0, length
	FaceWidth  float64 // length, centered on the follower's line, which passes through the camshaft axis
	Clockwise  bool    // the cam turns clockwise as seen on the marked face
}

// NewTranslatingFlat returns the follower that rests on the base circle at lift 0.
// Fails, with a *Misfit, when the base radius or the face width is not above 0.
func NewTranslatingFlat(baseRadius, faceWidth float64, clockwise bool) (TranslatingFlat, error) {
	f := TranslatingFlat{baseRadius, faceWidth, clockwise}
	if err := (Misfit{"base_radius", baseRadius, 0, math.Inf(1), "there is a base circle"}).within(); err != nil {
		return f, err
	}
	return f, Misfit{"face_width", faceWidth, 0, math.Inf(1), "there is a face"}.within()
}

// flatSupport is the face's line in the cam frame: at Rb + s, its normal turned with
// the machine.
func flatSupport[T taylor.Scalar[T]](f TranslatingFlat, deg, lift T) (p, phi T) {
	return lift.Add(lift.Of(f.BaseRadius)), deg.Radians().Scale(f.Sense())
}

// Sense returns +1 when the cam turns clockwise, -1 otherwise: see Kind.
func (f TranslatingFlat) Sense() float64 { return sense(f.Clockwise) }

// SupportF returns distance and normal angle (rad) of the face's line: see Face.
func (f TranslatingFlat) SupportF(deg, lift taylor.F) (p, phi taylor.F) {
	return flatSupport(f, deg, lift)
}

// SupportI encloses what SupportF computes.
func (f TranslatingFlat) SupportI(deg, lift taylor.I) (p, phi taylor.I) {
	return flatSupport(f, deg, lift)
}

// F returns the contour: (Rb + s) along the normal, ds/dθ beside it (any textbook, e.g. H. H.
// Mabie and C. F. Reinholtz, Mechanisms and Dynamics of Machinery, Wiley 1987, cited from
// memory). One order is lost.
func (f TranslatingFlat) F(deg, lift taylor.F) (x, y taylor.F) { return Contour(f.SupportF(deg, lift)) }

// I encloses what F computes; its order is one less than that of lift.
func (f TranslatingFlat) I(deg, lift taylor.I) (x, y taylor.I) { return Contour(f.SupportI(deg, lift)) }

// Radius returns 0: the base curve is the contour.
func (f TranslatingFlat) Radius() float64 { return 0 }

// PressureAngle returns 0: face and motion are square to each other.
func (f TranslatingFlat) PressureAngle(lift, slope float64) plane.Angle { return 0 }

// Contact returns how far from the follower's line the face is touched, length, positive
// towards +Y: the slope, on the side the cam comes from. It must stay within half the face
// width.
func (f TranslatingFlat) Contact(lift, slope float64) float64 { return f.Sense() * slope }

// OnArc reads the Scotch yoke of cam and face: of an arc with center Q and radius ρ the
// face stands at ρ + X of Q in the machine frame. A straight line (K = 0) is touched
// by a face in one instant only: ok is false. At a corner K is infinite.
func (f TranslatingFlat) OnArc(theta float64, arc plane.Frame) (Reading, bool) {
	if arc.K == 0 {
		return Reading{}, false
	}
	m := turned(theta, f.Sense())
	q, rho := centerOf(arc, f.Sense())
	x, _ := m.point(q)
	normal := plane.Unit(plane.Degrees(f.Sense() * theta))
	return reading(x.Add(x.Of(rho-f.BaseRadius)), q.Add(normal.Scale(rho)))
}
