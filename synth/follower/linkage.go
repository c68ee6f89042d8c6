// The follower on an arc, as a linkage.
//
// The problem: what the follower does on a curve that is not the design, or a second
// opinion on the design itself, wants lift, velocity and acceleration without going
// through the cam's own formulas; differentiating sampled lifts loses the acceleration.
// But while the follower is on an arc, the arc's center is a point fixed in the cam:
// cam and follower are a slider-crank, a four-bar, a Scotch yoke or an inverted
// slider-crank, with closed forms; and for lift, velocity and acceleration at an
// instant any curve is its osculating circle (any text on kinematics under equivalent
// linkages, e.g. J. E. Shigley and J. J. Uicker, Theory of Machines and Mechanisms, cited
// from memory).
//
// The obvious center and radius fail where the curve is straight. An arc is therefore
// given as a frame: a point A, a unit tangent T and the curvature k, and a point p is on
// it when T × (p-A) = k/2 |p-A|², which is a circle for any k and its tangent line for
// k = 0. The loop is closed with A and T as series in the cam angle, so velocity
// and acceleration are its exact derivatives.

package follower

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Reading is what a follower does at one cam angle while it is on an arc of the base
// curve (path of the center; contour under a flat face), prolonged as far as need be.
//
// The arc is a frame: a point, the unit tangent in the direction of growing cam angle,
// the curvature, positive turning left; DK is not used. The outside of the cam is thus
// on the right when the cam turns clockwise, on the left otherwise. It comes with ok =
// false where the linkage cannot be closed with the follower on the outside: then no
// point of the prolonged arc touches at that angle.
type Reading struct {
	Lift         float64     // length or degrees
	Velocity     float64     // lift per rad of cam angle
	Acceleration float64     // lift per rad²
	At           plane.Point // the point of the arc, cam frame, for the caller to see whether its arc goes that far
}

// reading takes value and derivatives of a lift given as a series in radians.
func reading(lift taylor.F, at plane.Point) (Reading, bool) {
	r := Reading{lift.C[0], lift.Deriv(1), lift.Deriv(2), at}
	return r, !math.IsNaN(r.Acceleration) && !math.IsInf(r.Acceleration, 0)
}

// turn takes points of the cam frame into the machine frame, as series in the cam
// angle in radians.
type turn struct{ sin, cos taylor.F }

// turned returns the turn at cam angle theta in degrees.
func turned(theta, sense float64) turn {
	var t turn
	t.sin, t.cos = taylor.FVar(float64(plane.Degrees(theta))).Scale(sense).SinCos()
	return t
}

func (t turn) point(p plane.Point) (x, y taylor.F) { return t.vector(plane.Vector(p)) }

func (t turn) vector(v plane.Vector) (x, y taylor.F) {
	return t.cos.Scale(v.X).Add(t.sin.Scale(v.Y)), t.cos.Scale(v.Y).Sub(t.sin.Scale(v.X))
}

// back takes a point of the machine frame into the cam frame, at the angle itself.
func (t turn) back(x, y float64) plane.Point {
	sin, cos := t.sin.C[0], t.cos.C[0]
	return plane.Point{X: x*cos - y*sin, Y: x*sin + y*cos}
}

// onQuadratic solves k/2 z² + b z + c = 0 for the root at which b + kz, the slope, has
// the given sign. Of the two forms of that root it uses the one that does not cancel,
// and for k = 0 that is always the one that does not divide by k.
func onQuadratic(k float64, b, c taylor.F, sign float64) (z taylor.F, ok bool) {
	square := b.Mul(b).Sub(c.Scale(2 * k))
	if !(square.C[0] > 0) {
		return z, false
	}
	root := square.Sqrt().Scale(sign)
	switch {
	case b.C[0]*sign > 0:
		return c.Scale(-2).Div(b.Add(root)), true
	case k == 0:
		return z, false
	}
	return root.Sub(b).Scale(1 / k), true
}

// onUnit returns the unit vector e with (wx, wy)·e = c for which w × e, where e is
// seen from w, has the given sign: w and c determine two of them.
func onUnit(wx, wy, c taylor.F, sign float64) (ex, ey taylor.F, ok bool) {
	w2 := wx.Mul(wx).Add(wy.Mul(wy))
	square := w2.Sub(c.Mul(c))
	if !(square.C[0] > 0) {
		return ex, ey, false
	}
	root := square.Sqrt().Scale(sign)
	ex = wx.Mul(c).Sub(wy.Mul(root)).Div(w2)
	ey = wy.Mul(c).Add(wx.Mul(root)).Div(w2)
	return ex, ey, true
}

// turning returns the angle of a unit vector as a series, less the angle zero (rad):
// its derivative is e × e'.
func turning(ex, ey taylor.F, zero float64) taylor.F {
	sin, cos := math.Sincos(zero)
	rate := ex.Mul(ey.D()).Sub(ey.Mul(ex.D()))
	a := rate.Of(math.Atan2(ey.C[0]*cos-ex.C[0]*sin, ex.C[0]*cos+ey.C[0]*sin))
	for k := 1; k <= taylor.Order; k++ {
		a.C[k] = rate.C[k-1] / float64(k)
	}
	return a
}

// centerOf returns center and radius of an arc of a contour, the radius positive where
// convex; K must not be 0, and may be infinite.
func centerOf(arc plane.Frame, sense float64) (q plane.Point, rho float64) {
	return arc.P.Add(arc.T.Left().Scale(1 / arc.K)), sense / arc.K
}
