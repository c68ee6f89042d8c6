// The walls of a barrel cam's groove.
//
// The problem: the walls that a roller touches along its whole length. The obvious way,
// the parallel of the developed pitch curve, is right at no depth: the roller's
// cross-section is a circle in the plane tangent to the cylinder, not on the cylinder,
// and the direction of travel changes with depth. For a pressure angle of 27° on a
// cylinder of radius 50 and a roller of radius 8 the parallel is 0.0014 off at the outer
// radius; carried inwards along radial lines it is 0.42 off at radius 40.
//
// The method is the conjugate condition: at a distance z along its axis the roller is
// touched where its normal is square to its velocity seen from the cam, which there is
// (z, s') along the turning and the axis. With tan a = s'/z and the roller's half width r
//
//	across the axis t = ∓ r sin a, along it s ± r cos a
//
// the upper sign for the wall on the +Y side (the condition of any text on gearing, e.g.
// F. L. Litvin, Gear Geometry and Applied Theory, Prentice Hall 1994, cited from memory).
// That point is at the distance R = √(z² + t²) from the camshaft axis. What is
// drawn, cut and measured is the wall at a given R, so z is eliminated: with
// u = z² + s'²
//
//	u² - (R² + s'²) u + r² s'² = 0,  sin a = s'/√u
//
// of which the larger root is the groove's, and no difference of like numbers is left.

package follower

import (
	"math"

	"lobewright/synth/taylor"
)

// Wall names one wall of a groove: which, and how wide the groove is.
type Wall struct {
	Half  float64 // half the groove's width, length: roller radius plus half the clearance
	Upper bool    // the wall on the +Y side of the roller
}

func (w Wall) sign() float64 { return side(w.Upper) }

// arctangent is Scalar with the inverse tangent, which polar angles need.
type arctangent[T any] interface {
	taylor.Scalar[T]
	Atan() T
}

// slope is ds/dθ per radian. One order is lost.
func slope[T taylor.Scalar[T]](deg, lift T) T { return lift.D().Div(deg.Radians().D()) }

// wallAt is the wall at a distance from the camshaft axis, in the developed plane.
func wallAt[T arctangent[T]](b Barrel, deg, lift T, w Wall, radius float64) (x, y T) {
	v := slope(deg, lift)
	beside := func(d T) T { return d.Mul(d).Add(d.Of((radius - w.Half) * (radius + w.Half))) }
	half := v.Of(w.Half)
	root := beside(v.Sub(half)).Mul(beside(v.Add(half))).Sqrt() // √((R² + s'²)² - 4 r² s'²)
	long := v.Mul(v).Add(v.Of(radius * radius)).Add(root).Scale(0.5).Sqrt()
	t := v.Div(long).Scale(-w.sign() * b.Sense() * w.Half)
	z := t.Of(radius * radius).Sub(t.Mul(t)).Sqrt()
	polar := deg.Radians().Scale(b.Sense()).Add(t.Div(z).Atan())
	return polar.Scale(b.OuterRadius), lift.Add(lift.Of(b.Track)).Add(z.Div(long).Scale(w.sign() * w.Half))
}

// WallF returns the wall at a distance from the camshaft axis (length, above the groove's
// half width) in the developed plane, as series in the cam angle in degrees. X is the
// outer radius times the polar angle, whatever the distance. One order is lost.
func (b Barrel) WallF(deg, lift taylor.F, w Wall, radius float64) (x, y taylor.F) {
	return wallAt(b, deg, lift, w, radius)
}

// WallI encloses what WallF computes; its order is one less than that of lift.
func (b Barrel) WallI(deg, lift taylor.I, w Wall, radius float64) (x, y taylor.I) {
	return wallAt(b, deg, lift, w, radius)
}

// flankAt is the point of the wall that touches the roller at a distance along its axis.
func flankAt[T taylor.Scalar[T]](b Barrel, deg, lift T, w Wall, along float64) (x, y, axial T) {
	v := slope(deg, lift)
	long := v.Mul(v).Add(v.Of(along * along)).Sqrt()
	t := v.Div(long).Scale(-w.sign() * b.Sense() * w.Half)
	sin, cos := deg.Radians().Scale(b.Sense()).SinCos()
	x, y = cos.Scale(along).Sub(sin.Mul(t)), sin.Scale(along).Add(cos.Mul(t))
	return x, y, lift.Add(lift.Of(b.Track)).Add(long.Of(w.sign() * w.Half * along).Div(long))
}

// Shift is how a tool narrower than the groove is moved from the pitch curve to cut a wall.
type Shift struct {
	Tool   float64 // its radius, length, at most Wall.Half
	Exact  float64 // distance from the camshaft axis at which it touches the wall where the roller does, length
	Rotary bool    // moved along the turning by the rotary axis, else by an axis across
}

// axisAt is the tool's axis as the plane at a distance from the camshaft axis sees it: moved
// square to the track, as that is at the distance where it is exact, by what the wall lies further
// out than the tool reaches.
func axisAt[T taylor.Scalar[T]](b Barrel, deg, lift T, w Wall, s Shift, radius float64) (x, y T) {
	d := w.Half - s.Tool
	v := slope(deg, lift)
	long := v.Mul(v).Add(v.Of(s.Exact * s.Exact)).Sqrt()
	t := v.Div(long).Scale(-w.sign() * b.Sense() * d)
	if s.Rotary {
		t = t.Scale(radius / s.Exact)
	}
	x, y = deg.Radians().Scale(b.Sense()*radius), lift.Add(lift.Of(b.Track))
	return x.Add(t), y.Add(long.Of(w.sign() * d * s.Exact).Div(long))
}

// AxisF returns the path of a tool's axis as the plane at a distance from the camshaft axis
// (length, above 0) sees it, as series in the cam angle in degrees: X is that distance times the
// axis's polar angle, and what the axis is beside that radial line; Y the axial position. One
// order is lost.
func (b Barrel) AxisF(deg, lift taylor.F, w Wall, s Shift, radius float64) (x, y taylor.F) {
	return axisAt(b, deg, lift, w, s, radius)
}

// AxisI encloses what AxisF computes; its order is one less than that of lift.
func (b Barrel) AxisI(deg, lift taylor.I, w Wall, s Shift, radius float64) (x, y taylor.I) {
	return axisAt(b, deg, lift, w, s, radius)
}

// FlankF returns the point of the wall that touches the roller at a distance from the
// camshaft axis measured along the roller's axis (length, above 0), in the cam frame: x
// and y across the camshaft, axial from the datum end. One order is lost.
func (b Barrel) FlankF(deg, lift taylor.F, w Wall, along float64) (x, y, axial taylor.F) {
	return flankAt(b, deg, lift, w, along)
}

// FlankI encloses what FlankF computes; its order is one less than that of lift.
func (b Barrel) FlankI(deg, lift taylor.I, w Wall, along float64) (x, y, axial taylor.I) {
	return flankAt(b, deg, lift, w, along)
}

// Clear says how far the wall is from being undercut at a distance along the roller's
// axis: 1 far from it, 0 at the edge of regression, below 0 where the roller would cut
// away what it should run on. Slope and bend are ds/dθ and d²s/dθ², length per rad and
// rad².
//
// It is the determinant of the wall's two tangents, along the turning and along the
// roller: with v² = z² + s'² and the developed pitch curve's radius of curvature
// ρ = v³/(z s”), which is positive where it bends towards +Y,
//
//	1 ∓ r/ρ - (r s'/v²)²
//
// The last term is what a flat pattern does not see.
func (w Wall) Clear(slope, bend, along float64) float64 {
	v2 := slope*slope + along*along
	twist := w.Half * slope / v2
	return 1 - w.sign()*w.Half*along*bend/(v2*math.Sqrt(v2)) - twist*twist
}
