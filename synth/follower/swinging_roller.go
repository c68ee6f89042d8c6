package follower

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// SwingingRoller is a roller at the end of an arm that swings about a pivot at
// (PivotDistance, 0) in the machine frame. Lift is in degrees of swing and turns the arm
// away from the camshaft.
type SwingingRoller struct {
	RollerRadius  float64 // length, above 0
	ArmLength     float64 // pivot to roller center, length
	PivotDistance float64 // pivot to camshaft axis, length
	Above         bool    // the roller is above the center line (+Y), else below
	Clockwise     bool    // the cam turns clockwise as seen on the marked face
	Rest          float64 // angle at the pivot between arm and camshaft axis at lift 0, rad, between 0 and pi
}

// NewSwingingRoller returns the follower whose roller center is on the prime circle at
// lift 0. Fails, with a *Misfit, when arm, pivot distance and prime radius are not sides
// of a triangle.
func NewSwingingRoller(baseRadius, rollerRadius, armLength, pivotDistance float64, above, clockwise bool) (SwingingRoller, error) {
	prime, l, c := baseRadius+rollerRadius, armLength, pivotDistance
	f := SwingingRoller{
		RollerRadius: rollerRadius, ArmLength: l, PivotDistance: c, Above: above, Clockwise: clockwise,
		Rest: opposite(prime, l, c),
	}
	if err := (Misfit{"pivot_distance", c, 0, math.Inf(1), "the pivot is off the camshaft axis"}).within(); err != nil {
		return f, err
	}
	return f, Misfit{"arm_length", l, math.Abs(c - prime), c + prime, "the arm reaches the prime circle from its pivot"}.within()
}

// opposite returns the angle opposite side a of a triangle, by the half-angle form,
// which keeps its digits for needle-like triangles (W. Kahan, cited from memory).
func opposite(a, b, c float64) float64 {
	return 2 * math.Atan2(math.Sqrt((a-(b-c))*(a+(b-c))), math.Sqrt(((b+c)-a)*((b+c)+a)))
}

// tip is the roller center in the cam frame: from the turned pivot, at distance C, one
// arm's length back, ψ off the center line (any textbook, e.g. F. Y. Chen, Mechanics and
// Design of Cam Mechanisms, Pergamon 1982, cited from memory; written as the sum of two
// vectors, which keeps enclosures tight).
func tip[T taylor.Scalar[T]](f SwingingRoller, deg, lift T) (x, y T) {
	turn := deg.Radians().Scale(f.Sense())
	psi := lift.Radians().Add(lift.Of(f.Rest))
	sin, cos := turn.SinCos()
	s, c := turn.Sub(psi.Scale(side(f.Above))).SinCos()
	return cos.Scale(f.PivotDistance).Sub(c.Scale(f.ArmLength)), sin.Scale(f.PivotDistance).Sub(s.Scale(f.ArmLength))
}

// Sense returns +1 when the cam turns clockwise, -1 otherwise: see Kind.
func (f SwingingRoller) Sense() float64 { return sense(f.Clockwise) }

// F returns the roller center in the cam frame as series in the cam angle in degrees;
// lift in degrees.
func (f SwingingRoller) F(deg, lift taylor.F) (x, y taylor.F) { return tip(f, deg, lift) }

// I encloses what F computes, over an interval of cam angle.
func (f SwingingRoller) I(deg, lift taylor.I) (x, y taylor.I) { return tip(f, deg, lift) }

// Radius returns the roller's radius, length.
func (f SwingingRoller) Radius() float64 { return f.RollerRadius }

// MaxSwing returns the lift, in degrees, that would lay the arm in line with the
// camshaft axis and its pivot, beyond the pivot.
func (f SwingingRoller) MaxSwing() float64 { return 180 - plane.Angle(f.Rest).Deg() }

// Stroke returns how far the roller center goes along its arc for a lift in degrees,
// length.
func (f SwingingRoller) Stroke(lift float64) float64 {
	return f.ArmLength * float64(plane.Degrees(lift))
}

// PressureAngle returns the angle between the contact normal and the velocity of the
// roller center on its arc away from the camshaft, positive when the side force pushes
// towards the cam's turning direction. Lift in degrees, slope in degrees a radian.
//
// With ψ the arm's angle and d = ±1 for an arm above the center line of a cam that
// turns clockwise or below one that turns counterclockwise (+), else (-):
//
//	tan a = d (C cos ψ - L (1 - d ψ'))/(C sin ψ)
func (f SwingingRoller) PressureAngle(lift, slope float64) plane.Angle {
	d := f.Sense() * side(f.Above)
	sin, cos := math.Sincos(f.Rest + float64(plane.Degrees(lift)))
	q := 1 - d*float64(plane.Degrees(slope))
	return plane.Angle(math.Atan2(d*(f.PivotDistance*cos-f.ArmLength*q), f.PivotDistance*sin))
}

// Contact returns 0: a roller turns, and is touched everywhere.
func (f SwingingRoller) Contact(lift, slope float64) float64 { return 0 }

// OnArc reads the four-bar of cam, arc, arm and machine.
//
// With A, T and k of the arc, turned into the machine frame, B = pivot - A and e the
// unit vector of the arm, the center A + B + Le is on the arc when
//
//	W·e = (k/2 (|B|² + L²) - T × B)/L,  W = left(T) - k B
//
// which is linear in e. Growing lift goes along ∓left(e) for an arm above or below,
// and must part from the cam: that picks one of the two e.
func (f SwingingRoller) OnArc(theta float64, arc plane.Frame) (Reading, bool) {
	m := turned(theta, f.Sense())
	ax, ay := m.point(arc.P)
	tx, ty := m.vector(arc.T)
	bx, by := ax.Of(f.PivotDistance).Sub(ax), ay.Scale(-1)
	square := bx.Mul(bx).Add(by.Mul(by)).Add(bx.Of(f.ArmLength * f.ArmLength))
	c := square.Scale(arc.K / 2).Sub(tx.Mul(by).Sub(ty.Mul(bx))).Scale(1 / f.ArmLength)
	wx, wy := ty.Scale(-1).Sub(bx.Scale(arc.K)), tx.Sub(by.Scale(arc.K))
	up := side(f.Above)
	ex, ey, ok := onUnit(wx, wy, c, -f.Sense()*up)
	if !ok {
		return Reading{}, false
	}
	// The arm at angle ψ is (-cos ψ, ±sin ψ); mirrored into (cos ψ, sin ψ).
	swing := turning(ex.Scale(-1), ey.Scale(up), f.Rest)
	return reading(swing.Scale(plane.Angle(1).Deg()),
		m.back(f.PivotDistance+f.ArmLength*ex.C[0], f.ArmLength*ey.C[0]))
}
