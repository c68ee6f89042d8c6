package synth

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// gaussPoints and gaussParts: each analytic piece is cut into parts of at most
// gaussDegrees and integrated by Gauss-Legendre, exact to rounding there.
const (
	gaussPoints  = 20
	gaussDegrees = 15.0
)

// integral integrates f over the curve's parameter in degrees, piece by piece.
func (c *Curve) integral(f func(piece int, t float64) float64) float64 {
	sum := 0.0
	for i, p := range c.pieces {
		n := int(math.Ceil((p.To - p.From) / gaussDegrees))
		for k := range n {
			a := p.From + (p.To-p.From)*float64(k)/float64(n)
			b := p.From + (p.To-p.From)*float64(k+1)/float64(n)
			sum += quad.Fixed(func(t float64) float64 { return f(i, t) }, a, b, gaussPoints, quad.Legendre{}, 0)
		}
	}
	return sum
}

// speed returns the length the curve runs per degree of cam angle, negative
// where it is undercut and runs against its tangent.
func (c *Curve) speed(piece int, t float64) (float64, plane.Frame) {
	if f, ok := c.cam.face(); ok {
		p, phi := f.SupportF(taylor.FVar(t), c.cam.liftF(piece, t))
		frame, rho := follower.FaceFrame(p, phi, c.outside())
		return rho * math.Abs(phi.C[1]), frame
	}
	if x, y, ok := c.drumF(piece, t); ok {
		return math.Hypot(x.C[1], y.C[1]), frame(x, y)
	}
	x, y := c.cam.pitchF(piece, t)
	f := frame(x, y)
	return math.Hypot(x.C[1], y.C[1]) * (1 - c.left*f.K), offsetFrame(f, c.left)
}

// Length returns the curve's length.
func (c *Curve) Length() float64 {
	return c.integral(func(i int, t float64) float64 {
		v, _ := c.speed(i, t)
		return math.Abs(v)
	})
}

// Area returns the enclosed area, positive for either direction of travel, by
// Green's theorem: half the integral of x dy - y dx; 0 of an open curve.
func (c *Curve) Area() float64 {
	if !c.Closed() {
		return 0
	}
	return math.Abs(c.integral(func(i int, t float64) float64 {
		v, f := c.speed(i, t)
		return v / 2 * (f.P.X*f.T.Y - f.P.Y*f.T.X)
	}))
}

// Turning returns the total turning of the tangent in radians: 2 pi or -2 pi for a
// simple closed curve.
func (c *Curve) Turning() float64 {
	return c.integral(func(i int, t float64) float64 {
		v, f := c.speed(i, t)
		return v * f.K
	})
}

// Radii are the least radii of curvature of a curve, length, with their cam
// angles in degrees; +Inf when the curve is nowhere convex or concave.
type Radii struct {
	Convex, ConvexAt   float64
	Concave, ConcaveAt float64
}

// Radii returns the least convex and concave radii of curvature. Convex means
// bulging away from the camshaft.
func (c *Curve) Radii() Radii {
	sign := -c.cam.outward() // a convex stretch turns left when the curve runs counterclockwise
	convex := c.largest(every, func(i int, t float64) float64 { return sign * c.At(i, t).K })
	concave := c.largest(every, func(i int, t float64) float64 { return -sign * c.At(i, t).K })
	r := Radii{Convex: math.Inf(1), Concave: math.Inf(1), ConvexAt: convex.t, ConcaveAt: concave.t}
	// Curvatures below this share of the prime circle's are straight to rounding.
	floor := 1e-9 / c.cam.size()
	if convex.value > floor {
		r.Convex = 1 / convex.value
	}
	if concave.value > floor {
		r.Concave = 1 / concave.value
	}
	return r
}

// leastRound is the least convex radius of curvature of the contour with its sign: below
// 0 where it is undercut, which a contour of curvature alone would hide.
func (c *Cam) leastRound() (radius float64, at place) {
	if f, ok := c.face(); ok {
		p := largest(c.Contour().pieces, every, func(i int, t float64) float64 { return -faceRound(f, c.liftF(i, t), t) })
		return -p.value, p
	}
	if _, ok := c.drum(); ok {
		return c.drumRound()
	}
	r := c.Pitch().Radii()
	zone, t := c.cycle.Zone(r.ConvexAt)
	return r.Convex - c.inset(), place{piece: zone, t: t}
}

// faceRound is the radius of curvature under a flat face at cam angle t, degrees.
func faceRound(f follower.Face, lift taylor.F, t float64) float64 {
	return follower.RadiusOfCurvature(f.SupportF(taylor.FVar(t), lift)).C[0]
}
