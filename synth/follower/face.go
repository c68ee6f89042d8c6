// The contour under a flat face.
//
// The problem: a contour is the envelope of the face's line, and its curvature is wanted
// everywhere, also where the contour cusps, because how close it comes to a cusp is what
// judges the cam. The obvious way, the contour as a curve (x, y) and its curvature by
// (x'y” - y'x”)/(x'² + y'²)^(3/2), divides 0 by 0 at a cusp and loses the sign
// beyond it.
//
// But the line itself never cusps. With p its distance from the camshaft axis and φ the
// polar angle of its normal, the contour is (L. A. Santaló, Integral Geometry and
// Geometric Probability, 1976, chapter 1, cited from memory; any text on convex sets)
//
//	x = p cos φ - h sin φ,  y = p sin φ + h cos φ,  h = dp/dφ,  ρ = p + d²p/dφ²
//
// with the sign of ρ: positive convex, 0 at a cusp, negative where the contour has
// looped and the face would not touch it. Parallels at a distance d outside are p + d.
// The price is that φ must turn: a face that swings as fast as the cam turns (dφ = 0)
// touches nowhere.

package follower

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Contour returns the contour of a face's line: p its distance from the camshaft axis,
// phi the polar angle of its normal in radians. One order is lost.
func Contour[T taylor.Scalar[T]](p, phi T) (x, y T) {
	sin, cos := phi.SinCos()
	h := along(p, phi)
	return p.Mul(cos).Sub(h.Mul(sin)), p.Mul(sin).Add(h.Mul(cos))
}

// along is dp/dφ: how far along the line it is touched, from the foot of the camshaft
// axis, positive towards growing polar angle. One order is lost.
func along[T taylor.Scalar[T]](p, phi T) T { return p.D().Div(phi.D()) }

// RadiusOfCurvature returns the contour's radius of curvature, length, positive where
// convex. Two orders are lost.
func RadiusOfCurvature[T taylor.Scalar[T]](p, phi T) T {
	return p.Add(along(along(p, phi), phi))
}

// FaceFrame returns the contour's parallel at a distance outside it (length) as a frame,
// and its radius of curvature with sign. The tangent is that of growing cam angle, as
// the face's line has it: where rho < 0 the curve runs against it. At a cusp K and DK
// are infinite, and everything else is as good as elsewhere.
func FaceFrame(p, phi taylor.F, outside float64) (f plane.Frame, rho float64) {
	p = p.Add(p.Of(outside))
	x, y := Contour(p, phi)
	r := RadiusOfCurvature(p, phi)
	turn := math.Copysign(1, phi.C[1])
	f.P = plane.Point{X: x.C[0], Y: y.C[0]}
	f.T = plane.Unit(plane.Angle(phi.C[0])).Left().Scale(turn)
	f.K = turn / r.C[0]
	f.DK = -r.C[1] / (r.C[0] * r.C[0] * r.C[0] * phi.C[1])
	return f, r.C[0]
}
