// Package follower holds the follower kinds, one small file each: the follower
// seen from the cam, as Taylor values, so that every derivative and every
// rigorous enclosure of the pitch curve comes from the textbook's one formula.
package follower

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// TranslatingRoller is a roller whose center moves along +X in the machine
// frame, on a line at Offset from the camshaft axis.
type TranslatingRoller struct {
	RollerRadius float64 // length, above 0
	Offset       float64 // length, positive towards +Y
	Datum        float64 // X of the roller center at lift 0, length
	Clockwise    bool    // the cam turns clockwise as seen on the marked face
}

// NewTranslatingRoller returns the follower that rests on the base circle at
// lift 0: x = sqrt((Rb+r)² - offset²), y = offset (H. A. Rothbart, ed., Cam Design
// Handbook, McGraw-Hill 2004, chapter 7; any textbook). ok is false when the offset
// is not smaller than the prime radius.
func NewTranslatingRoller(baseRadius, rollerRadius, offset float64, clockwise bool) (f TranslatingRoller, ok bool) {
	prime := baseRadius + rollerRadius
	f = TranslatingRoller{RollerRadius: rollerRadius, Offset: offset, Clockwise: clockwise}
	f.Datum = math.Sqrt((prime - offset) * (prime + offset))
	return f, prime > math.Abs(offset)
}

// pitch is the roller center in the cam frame: the machine point (datum+s,
// offset) turned by +theta when the cam turns clockwise, by -theta otherwise.
func pitch[T taylor.Scalar[T]](f TranslatingRoller, deg, lift T) (x, y T) {
	sin, cos := deg.Radians().SinCos()
	if !f.Clockwise {
		sin = sin.Scale(-1)
	}
	u, v := lift.Add(lift.Of(f.Datum)), f.Offset
	return u.Mul(cos).Sub(sin.Scale(v)), u.Mul(sin).Add(cos.Scale(v))
}

// F returns the roller center in the cam frame as series in the cam angle in degrees.
func (f TranslatingRoller) F(deg, lift taylor.F) (x, y taylor.F) { return pitch(f, deg, lift) }

// I encloses what F computes, over an interval of cam angle.
func (f TranslatingRoller) I(deg, lift taylor.I) (x, y taylor.I) { return pitch(f, deg, lift) }

// PressureAngle returns the angle between the contact normal and the follower's
// line, positive when the side force pushes towards the cam's turning
// direction: tan a = (ds/dtheta -+ offset)/(datum + lift). Lift in length, slope
// in length a radian.
func (f TranslatingRoller) PressureAngle(lift, slope float64) plane.Angle {
	e := f.Offset
	if !f.Clockwise {
		e = -e
	}
	return plane.Angle(math.Atan2(slope-e, f.Datum+lift))
}
