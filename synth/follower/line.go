package follower

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Line is a center that moves along +X in the machine frame, on a line at Offset from
// the camshaft axis: what roller, knife edge and mushroom share.
type Line struct {
	Offset    float64 // length, positive towards +Y
	Datum     float64 // X of the center at lift 0, length
	Clockwise bool    // the cam turns clockwise as seen on the marked face
}

// newLine returns the line of a center that stands on the prime circle at lift 0:
// x = sqrt(prime² - offset²), y = offset (H. A. Rothbart, ed., Cam Design Handbook,
// McGraw-Hill 2004, chapter 7; any textbook).
func newLine(prime, offset float64, clockwise bool) Line {
	return Line{Offset: offset, Datum: math.Sqrt((prime - offset) * (prime + offset)), Clockwise: clockwise}
}

// offsetWithin checks that the line meets the prime circle.
func offsetWithin(prime, offset float64) error {
	return Misfit{"offset", offset, -prime, prime, "the follower's line meets the prime circle"}.within()
}

// center is the center in the cam frame: the machine point (datum+s, offset) turned.
func center[T taylor.Scalar[T]](l Line, deg, lift T) (x, y T) {
	sin, cos := deg.Radians().Scale(l.Sense()).SinCos()
	u, v := lift.Add(lift.Of(l.Datum)), l.Offset
	return u.Mul(cos).Sub(sin.Scale(v)), u.Mul(sin).Add(cos.Scale(v))
}

// Sense returns +1 when the cam turns clockwise, -1 otherwise: see Kind.
func (l Line) Sense() float64 { return sense(l.Clockwise) }

// F returns the center in the cam frame as series in the cam angle in degrees.
func (l Line) F(deg, lift taylor.F) (x, y taylor.F) { return center(l, deg, lift) }

// I encloses what F computes, over an interval of cam angle.
func (l Line) I(deg, lift taylor.I) (x, y taylor.I) { return center(l, deg, lift) }

// PressureAngle returns the angle between the contact normal and the follower's
// line, positive when the side force pushes towards the cam's turning
// direction: tan a = (ds/dtheta -+ offset)/(datum + lift), - when the cam turns
// clockwise. Lift in length, slope in length a radian.
func (l Line) PressureAngle(lift, slope float64) plane.Angle {
	return plane.Angle(math.Atan2(slope-l.Sense()*l.Offset, l.Datum+lift))
}

// OnArc reads the slider-crank of cam, center and line.
//
// With A, T and k of the arc, A and T turned into the machine frame, the center
// (x, offset) is on the arc when T × (p-A) = k/2 |p-A|²: with X = x - Ax and Y = offset - Ay
//
//	k/2 X² + Ty X + (k/2 Y² - Tx Y) = 0
//
// and Ty + kX is the Y part of the tangent at the contact, which has the sign of the
// machine's turning about the cam.
func (l Line) OnArc(theta float64, arc plane.Frame) (Reading, bool) {
	m := turned(theta, l.Sense())
	ax, ay := m.point(arc.P)
	tx, ty := m.vector(arc.T)
	y := ay.Of(l.Offset).Sub(ay)
	c := y.Mul(y).Scale(arc.K / 2).Sub(tx.Mul(y))
	x, ok := onQuadratic(arc.K, ty, c, l.Sense())
	if !ok {
		return Reading{}, false
	}
	f := ax.Add(x)
	return reading(f.Sub(f.Of(l.Datum)), m.back(f.C[0], l.Offset))
}
