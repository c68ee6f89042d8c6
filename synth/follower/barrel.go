package follower

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Barrel is a groove on a cylinder, with a roller whose axis is radial and which moves
// along +Z. Its curves are in the developed plane, seen from outside: X is the cam's
// outer radius times the polar angle, Y the axial position from the datum end. As a Kind
// its base curve is the path of the roller's center there.
type Barrel struct {
	OuterRadius  float64 // length
	Depth        float64 // of the groove, from the outer radius, length
	RollerRadius float64 // length, above 0
	Track        float64 // Y of the roller center at lift 0, length
	Clockwise    bool    // the cam turns clockwise as seen on the marked face
}

// NewBarrel returns the follower whose roller center is at track from the datum end at
// lift 0. Fails, with a *Misfit, when the groove reaches the axis, or when the core it
// leaves is not thicker than the roller, of which the walls could then not be given.
func NewBarrel(outerRadius, depth, rollerRadius, track float64, clockwise bool) (Barrel, error) {
	b := Barrel{outerRadius, depth, rollerRadius, track, clockwise}
	if err := (Misfit{"groove_depth", depth, 0, outerRadius, "the groove leaves a core"}).within(); err != nil {
		return b, err
	}
	return b, Misfit{"roller_diameter", 2 * rollerRadius, 0, 2 * (outerRadius - depth), "the core is thicker than the roller"}.within()
}

// Sense returns +1 when the cam turns clockwise, -1 otherwise: see Kind.
func (b Barrel) Sense() float64 { return sense(b.Clockwise) }

// MiddleRadius returns the distance from the camshaft axis of the middle of the roller's
// depth, length: pressure angles are gated there.
func (b Barrel) MiddleRadius() float64 { return b.OuterRadius - b.Depth/2 }

// BottomRadius returns the distance of the groove's bottom from the camshaft axis, length.
func (b Barrel) BottomRadius() float64 { return b.OuterRadius - b.Depth }

// developed is the roller center in the developed plane.
func developed[T taylor.Scalar[T]](b Barrel, deg, lift T) (x, y T) {
	return deg.Radians().Scale(b.Sense() * b.OuterRadius), lift.Add(lift.Of(b.Track))
}

// F returns the roller center in the developed plane as series in the cam angle in
// degrees. It does not wrap: one turn of the cam goes 2π outer radii along X, towards -X
// when the cam turns counterclockwise.
func (b Barrel) F(deg, lift taylor.F) (x, y taylor.F) { return developed(b, deg, lift) }

// I encloses what F computes, over an interval of cam angle.
func (b Barrel) I(deg, lift taylor.I) (x, y taylor.I) { return developed(b, deg, lift) }

// Radius returns the roller's radius, length.
func (b Barrel) Radius() float64 { return b.RollerRadius }

// Contact returns 0, as of every roller.
func (b Barrel) Contact(lift, slope float64) float64 { return 0 }

// PressureAngle returns the pressure angle at the middle of the roller's depth.
func (b Barrel) PressureAngle(lift, slope float64) plane.Angle {
	return b.Slant(slope, b.MiddleRadius())
}

// Slant returns the angle between the contact normal and the follower's
// line at a distance from the camshaft axis, positive when the side force pushes towards
// the cam's turning direction: tan a = (ds/dθ)/radius. Slope in length a radian.
func (b Barrel) Slant(slope, radius float64) plane.Angle {
	return plane.Angle(math.Atan2(slope, radius))
}

// OnArc returns what the follower does on an arc of the roller center's path in the
// developed plane: see Reading, the arc's tangent and At being in that plane. With X and Y
// from the arc's point
//
//	k/2 Y² - Tx Y + (k/2 X² + Ty X) = 0
//
// and Tx - kY is the X part of the tangent there, which has the sign of the turning.
func (b Barrel) OnArc(theta float64, arc plane.Frame) (Reading, bool) {
	at := taylor.FVar(float64(plane.Degrees(theta))).Scale(b.Sense() * b.OuterRadius)
	x := at.Sub(at.Of(arc.P.X))
	c := x.Mul(x).Scale(arc.K / 2).Add(x.Scale(arc.T.Y))
	y, ok := onQuadratic(arc.K, x.Of(-arc.T.X), c, -b.Sense())
	if !ok {
		return Reading{}, false
	}
	y = y.Add(y.Of(arc.P.Y))
	return reading(y.Sub(y.Of(b.Track)), plane.Point{X: at.C[0], Y: y.C[0]})
}
