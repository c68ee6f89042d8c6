package gcode

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
)

// Spirals as arcs, proven.
//
// A move of a rotary and a radial axis is the spiral r = a + b·φ. The certificate knows lines and arcs. The obvious
// way, a certificate of its own for spirals, needs their feet, which have no closed form.
//
// Used here: a spiral is cut into a few pieces, and each is replaced by the circle through its ends and its middle. With C the
// center, F(φ) = |S(φ)-C|² - R² is nothing at the three of them (but for rounding, which is enclosed), so by Lagrange's
// remainder |F| <= |F”'|/6·|x(x²-h²)| <= |F”'|/6·2h³/(3√3) at x from the middle of a piece of half angle h, and the spiral is |F|/R
// from the circle at most; F”' is enclosed over the whole piece in interval arithmetic. That distance, the slack, is
// taken off the tolerance before the certificate and added to what it says.
//
// Price: two arcs a move for most, of which the slack is below half a percent of the tolerance.

// spiral is a move of both axes: polar angles in degrees as they are read, radii as lengths.
type spiral struct{ from, to, r0, r1 float64 }

// polarPoint is a point of the plane at a polar angle in degrees; whole turns make no difference.
func polarPoint(deg, r float64) plane.Point {
	deg = math.Round(math.Mod(deg, 360)*1e11) / 1e11
	if deg < 0 {
		deg = math.Round((deg+360)*1e11) / 1e11
	}
	sin, cos := math.Sincos(deg * math.Pi / 180)
	return plane.Point{X: r * cos, Y: r * sin}
}

const (
	mostPieces = 64
	quarter    = 90.0 // degrees: a longer arc about the axis is cut
)

// arcs returns elements that lie within slack (a length) of the spiral, and it of them; the slack
// is at most enough, if some number of pieces reaches that.
func (s spiral) arcs(enough float64) (path chain.Path, slack float64) {
	if s.from == s.to {
		return chain.Path{{From: polarPoint(s.from, s.r0), To: polarPoint(s.to, s.r1)}}, 0
	}
	if s.r0 == s.r1 {
		n := int(math.Ceil(math.Abs(s.to-s.from)/quarter - 1e-9))
		return s.pieces(max(n, 1), func(p spiral) (chain.Element, float64) {
			return chain.Element{Kind: chain.Arc, From: polarPoint(p.from, p.r0), To: polarPoint(p.to, p.r1), CCW: p.to > p.from}, 0
		})
	}
	for n := 1; ; n *= 2 {
		if path, slack = s.pieces(n, spiral.arc); slack <= enough || n >= mostPieces {
			return path, slack
		}
	}
}

// pieces cuts the spiral in n of equal angle.
func (s spiral) pieces(n int, one func(spiral) (chain.Element, float64)) (path chain.Path, slack float64) {
	at := func(i int) (deg, r float64) {
		if i == n {
			return s.to, s.r1
		}
		u := float64(i) / float64(n)
		return s.from + (s.to-s.from)*u, s.r0 + (s.r1-s.r0)*u
	}
	for i := range n {
		var p spiral
		p.from, p.r0 = at(i)
		p.to, p.r1 = at(i + 1)
		e, off := one(p)
		if i > 0 {
			e.From = path[i-1].To
		}
		path, slack = append(path, e), math.Max(slack, off)
	}
	return path, slack
}

// straightest is the radius, as a share of the spiral's, above which its piece is taken for a line.
const straightest = 1e6

// spiralRounding is above what turning degrees into points rounds, as a share of the radius.
const spiralRounding = 2e-13

// arc returns the arc (or line) through the ends and the middle, and how far the spiral is from it at most.
func (s spiral) arc() (chain.Element, float64) {
	mid, r := (s.from+s.to)/2, (s.r0+s.r1)/2
	a, m, b := polarPoint(s.from, s.r0), polarPoint(mid, r), polarPoint(s.to, s.r1)
	e := chain.Element{From: a, To: b}
	c, v := b.Sub(a), m.Sub(a)
	d := 2 * c.Cross(v)
	center := a.Add(plane.Vector{X: v.Y*c.Dot(c) - c.Y*v.Dot(v), Y: c.X*v.Dot(v) - v.X*c.Dot(c)}.Scale(1 / d))
	if radius := center.Dist(a); radius < straightest*r {
		e.Kind, e.Center, e.CCW = chain.Arc, center, c.Cross(v) < 0
	}
	// Turned so that the middle lies on the x axis: S(x) = (r + b·x)·(cos x, sin x).
	half := math.Abs(s.to-s.from) * math.Pi / 360
	rate := (s.r1 - s.r0) / ((s.to - s.from) * math.Pi / 180)
	sin, cos := math.Sincos(mid * math.Pi / 180)
	turn := func(w plane.Vector) plane.Vector {
		return plane.Vector{X: w.X*cos + w.Y*sin, Y: w.Y*cos - w.X*sin}
	}
	f := func(x taylor.I) taylor.I {
		si, co := x.SinCos()
		far := x.Scale(rate).Add(x.Of(r))
		px, py := far.Mul(co).Sub(x.Of(r)), far.Mul(si) // from the middle
		if e.Kind == chain.Line {
			n := turn(c).Unit().Left()
			back := turn(a.Sub(m))
			return px.Sub(x.Of(back.X)).Scale(n.X).Add(py.Sub(x.Of(back.Y)).Scale(n.Y))
		}
		g := turn(m.Sub(center)) // F = V·V + 2 V·(M-C), V from the middle
		return px.Mul(px).Add(py.Mul(py)).Add(px.Scale(2 * g.X)).Add(py.Scale(2 * g.Y))
	}
	const order = 3
	wide := f(taylor.IVar(taylor.Interval{Lo: -half, Hi: half}, order))
	knots := 0.0
	for _, x := range []float64{-half, 0, half} {
		knots = math.Max(knots, f(taylor.IVar(taylor.Exactly(x), 0)).Range().Mag())
	}
	// The quadratic through three values is at most 5/4 of the largest between them.
	most := wide.C[3].Mag()*half*half*half*2/(3*math.Sqrt(3)) + 1.25*knots
	if e.Kind == chain.Arc {
		most /= center.Dist(a)
	}
	return e, most*(1+1e-9) + spiralRounding*math.Max(s.r0, s.r1)
}
