package follower_test

import (
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/motion"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// measures integrates along a cam's base curve: its length and the area it encloses, by
// Green's theorem.
func measures(c *motion.Cycle, s cam) (length, area float64) {
	length = integral(c, func(deg float64) float64 {
		x, y := s.base(deg)
		return math.Hypot(x.C[1], y.C[1])
	})
	area = s.kind.Sense() * integral(c, func(deg float64) float64 {
		x, y := s.base(deg)
		return (x.C[0]*y.C[1] - y.C[0]*x.C[1]) / 2
	})
	return length, area
}

// The reference cam: 3-4-5 rise of 20 in 90°, dwell of 60°, 3-4-5 fall in 120°. Perimeter
// 2π Rb + ∮ s dθ (Cauchy) and area ½∮(p² - p'²) of the flat-faced cam; length and area of
// the roller's pitch curve, and of its contour by Steiner's formulas. The figures were
// derived with 30 digits, the flat ones also from a polygon of 2 million points.
func TestLengthsAndAreas(t *testing.T) {
	c := join(t, event(t, 20, 90, "polynomial-3-4-5"), event(t, 0, 60, ""),
		event(t, -20, 120, "polynomial-3-4-5"), event(t, 0, 90, ""))
	for _, clockwise := range []bool{true, false} {
		k := of(must(follower.NewTranslatingFlat(60, 60, clockwise)), c)
		l, a := measures(c, k)
		near(t, "flat: perimeter", l, 415*math.Pi/3, 1e-10)
		near(t, "flat: area", a, 14943.8010910284, 1e-10)
	}
	for _, r := range []struct{ offset, length, area, contourLength, contourArea float64 }{
		{0, 376.973977721468, 11230.4004051053, 314.142124649672, 7774.8198932496},
		{8, 376.393130630562, 11193.3000697591, 313.561277558766, 7743.5280288125},
	} {
		k := of(roller(40, 10, r.offset, true), c)
		l, a := measures(c, k)
		near(t, "roller: pitch length", l, r.length, 1e-10)
		near(t, "roller: pitch area", a, r.area, 1e-10)
		// The same figures along the contour itself.
		length := integral(c, func(deg float64) float64 {
			x, y := k.base(deg)
			return math.Hypot(x.C[1], y.C[1]) * (1 - 10/k.radius(deg))
		})
		area := integral(c, func(deg float64) float64 {
			x, y := k.base(deg)
			speed := math.Hypot(x.C[1], y.C[1]) * (1 - 10/k.radius(deg))
			tangent := plane.Vector{X: x.C[1], Y: y.C[1]}.Unit()
			return plane.Vector(k.contour(deg)).Cross(tangent) * speed / 2
		})
		near(t, "roller: contour length", length, r.contourLength, 1e-10)
		near(t, "roller: contour area", area, r.contourArea, 1e-10)
	}
}

// For any face, Cauchy's perimeter ∮ p dφ and the area ½∮(p² - h²)dφ, h = dp/dφ, are those of the
// curve itself; a swinging face turns at a speed of its own, which the integrals by cam
// angle carry along.
func TestSwingingFaceIntegrals(t *testing.T) {
	c := join(t, event(t, 10, 120, "cycloidal"), event(t, 0, 60, ""), event(t, -10, 100, "modified-sine"), event(t, 0, 80, ""))
	for _, above := range []bool{true, false} {
		for _, clockwise := range []bool{true, false} {
			f := must(follower.NewSwingingFlat(40, 5, 20, 110, 90, above, clockwise))
			k := of(f, c)
			l, a := measures(c, k)
			support := func(g func(p, h, turn float64) float64) float64 {
				return integral(c, func(deg float64) float64 {
					p, phi := f.SupportF(taylor.FVar(deg), k.lift(deg))
					turn := phi.C[1] * f.Sense()
					return g(p.C[0], p.C[1]/phi.C[1], turn)
				})
			}
			near(t, "perimeter", l, support(func(p, h, turn float64) float64 { return p * turn }), 1e-12)
			near(t, "area", a, support(func(p, h, turn float64) float64 { return (p*p - h*h) * turn / 2 }), 1e-12)
			near(t, "turning", support(func(p, h, turn float64) float64 { return turn }), 2*math.Pi, 1e-12)
		}
	}
}
