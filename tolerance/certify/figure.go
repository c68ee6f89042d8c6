package certify

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
)

// figure is an element with rigorous intervals for all that is derived from its
// coordinates. Distances from an arc are built from differences with the point A,
// not with the center, so an arc of a very large radius loses no digits:
// |P-C|² - r0² = V·(V + 2G) with V = P-A, G = A-C.
type figure struct {
	e     chain.Element
	a, b  vec
	along vec             // B-A
	long  taylor.Interval // |B-A|
	arc   bool
	full  bool    // a whole turn: From == To
	sign  float64 // +1 counterclockwise, -1 clockwise
	c     vec
	g     vec             // A-C
	r0    taylor.Interval // |A-C|
	shift taylor.Interval // mean radius - r0
	mean  taylor.Interval // mean radius
	half  float64         // half width of the band of radii, upper bound
	sweep float64         // radians, float
	major bool            // sweep above a half turn
}

const (
	// mismatchShare is the largest relative difference of the end radii of an arc
	// above a half turn: rounding of coordinates, not of a grid.
	mismatchShare = 1e-9
	// halfTurnShare: |sin| of a sweep this near a half turn passes for one. It
	// adds s·halfTurnShare² to the band, far below rounding.
	halfTurnShare = 1e-12
	// roundingShare is above the relative rounding of the few float operations in a distance.
	roundingShare = 1e-14
)

func newFigure(e chain.Element) (figure, error) {
	f := figure{e: e, a: exactly(e.From), b: exactly(e.To), arc: e.Kind == chain.Arc, sign: 1}
	if !finite(e.From.X, e.From.Y, e.To.X, e.To.Y, e.Slack) || e.Slack < 0 {
		return f, fmt.Errorf("its coordinates or its slack are no lengths: %+v", e)
	}
	f.along = f.b.sub(f.a)
	f.long = f.along.norm()
	switch e.Kind {
	case chain.Line:
		return f, nil
	case chain.Arc:
		return f, f.round()
	}
	return f, fmt.Errorf("kind %d is neither a line nor an arc", e.Kind)
}

// round fills in what an arc has more than a line, and refuses what is no arc.
func (f *figure) round() error {
	e := f.e
	if !e.CCW {
		f.sign = -1
	}
	if !finite(e.Center.X, e.Center.Y) || e.Center == e.From || e.Center == e.To {
		return fmt.Errorf("the arc from %s to %s about %s has no radius", show(e.From), show(e.To), show(e.Center))
	}
	f.c = exactly(e.Center)
	f.g = f.a.sub(f.c)
	f.r0 = f.g.norm()
	f.full = e.From == e.To
	f.mean = f.r0
	if f.full {
		f.major, f.sweep = true, 2*math.Pi
		return nil
	}
	gb := f.b.sub(f.c)
	turn := f.g.cross(f.along).Mul(taylor.Exactly(f.sign)) // r0 r1 sin(sweep)
	ahead := f.g.dot(gb)
	if turn.Lo <= 0 && turn.Hi >= 0 && ahead.Hi > 0 {
		return fmt.Errorf("the arc from %s to %s is so short that it may as well be a whole turn", show(e.From), show(e.To))
	}
	f.sweep = math.Atan2(turn.Mid(), ahead.Mid())
	if f.sweep < 0 {
		f.sweep += 2 * math.Pi
	}
	half := ahead.Hi < 0 && turn.Lo >= -halfTurnShare*f.r0.Sqr().Lo
	f.major = turn.Lo < 0 && !half
	return f.band(gb)
}

// band computes the mean radius and the half width of the radii a control may run.
func (f *figure) band(gb vec) error {
	excess := f.along.dot(f.along.add(f.g).add(f.g)) // r1² - r0²
	diff := excess.Div(f.r0.Add(gb.norm()))
	f.shift = halved(diff)
	f.mean = f.r0.Add(f.shift)
	f.half = f.shift.Mag()
	s := excess.Div(twice(f.long)).Mag() // shift of the center onto the bisector
	height := f.g.cross(f.along).Div(f.long)
	r := halved(f.long).Sqr().Add(height.Sqr()).Sqrt()
	if !(s < r.Lo/2) {
		return fmt.Errorf("the arc from %s to %s about %s is none: its end radii %.6g and %.6g do not fit", show(f.e.From), show(f.e.To),
			show(f.e.Center), f.r0.Mid(), gb.norm().Mid())
	}
	if !f.major {
		return nil
	}
	if !(diff.Mag() <= mismatchShare*f.r0.Lo) {
		return fmt.Errorf("the arc from %s to %s sweeps %.4g degrees with end radii that differ by %.3g; "+
			"above 180 degrees they must agree: divide the arc", show(f.e.From), show(f.e.To), f.sweep*180/math.Pi, diff.Mag())
	}
	f.half = math.Max(f.half, r.Add(taylor.Interval{Lo: -s, Hi: s}).Sub(f.mean).Mag())
	return nil
}

// point reports whether the figure is a single point.
func (f *figure) point() bool { return !f.arc && f.e.From == f.e.To }

// length is the element's length, in plain floats.
func (f *figure) length() float64 {
	if f.arc {
		return f.sweep * f.mean.Mid()
	}
	return f.long.Mid()
}

func (f *figure) name() string {
	kind := "line"
	if f.arc {
		kind = "arc"
	}
	return fmt.Sprintf("%s from %s to %s", kind, show(f.e.From), show(f.e.To))
}

// side encloses, over a patch, how far the figure's line or circle of mean radius is to the left
// of the curve (of its direction of travel along the figure), a length.
func (f *figure) side(p *patch) extent {
	if !f.arc {
		return f.beside(p).over(p.h)
	}
	radial := f.radial(p).over(p.h).apply(func(x float64) taylor.Interval { return f.outside(x) })
	if f.sign < 0 {
		return radial.negated()
	}
	return radial
}

// beside is the distance from the line, as a cubic.
func (f *figure) beside(p *patch) cubic {
	by := func(v vec) taylor.Interval { return v.cross(f.along).Div(f.long) }
	return cubic{by(p.p[0].sub(f.a)), by(p.p[1]), by(p.p[2]), by(p.w[3]).Mag()}
}

// radial is F = (|P-C|² - r0²) / 2 r0, as a cubic. F needs no root, and the
// distance from the circle is a monotone function of it.
func (f *figure) radial(p *patch) cubic {
	v := p.p[0].sub(f.a)
	u := v.add(f.g)
	wide := p.w[0].sub(f.c)
	return cubic{
		v.dot(u.add(f.g)).Div(twice(f.r0)),
		u.dot(p.p[1]).Div(f.r0),
		halved(p.p[1].sqr()).Add(u.dot(p.p[2])).Div(f.r0),
		wide.dot(p.w[3]).Add(p.w[1].dot(p.w[2])).Div(f.r0).Mag(),
	}
}

// outside encloses |P-C| - mean radius for F = x: 2x/(1+sqrt(1+2x/r0)) - shift.
func (f *figure) outside(x float64) taylor.Interval {
	if x < -f.r0.Hi/2 {
		return f.mean.Neg() // |P-C| is not below 0
	}
	two := taylor.Exactly(2 * x)
	root := two.Div(f.r0).Add(taylor.Exactly(1)).Sqrt()
	return two.Div(root.Add(taylor.Exactly(1))).Sub(f.shift)
}

// forward says whether the foot of the curve certainly moves forward on the figure all
// over the patch, and whether it certainly does not at its midpoint. About an arc's center the
// curve also keeps within a quarter turn of its midpoint, and further away than 4 steps between pieces.
func (f *figure) forward(p *patch, step float64) (yes, no bool) {
	if !f.arc {
		return p.w[1].dot(f.along).Lo > 0, p.p[1].dot(f.along).Hi <= 0
	}
	sense := taylor.Exactly(f.sign)
	at := p.p[0].sub(f.c)
	wide := p.w[0].sub(f.c)
	quarter := wide.dot(at).Lo > 4*step*at.norm().Hi
	return quarter && wide.cross(p.w[1]).Mul(sense).Lo > 0, at.cross(p.p[1]).Mul(sense).Hi <= 0
}

// miss bounds how far the foot of the curve point p is from the figure's start
// or end: a length along a line, an angle (radians, its tangent) on an arc; infinite when
// they are a quarter turn or more apart.
func (f *figure) miss(p vec, atEnd bool) float64 {
	joint := f.a
	if atEnd {
		joint = f.b
	}
	if !f.arc {
		return p.sub(joint).dot(f.along).Div(f.long).Mag()
	}
	arm := joint.sub(f.c)
	ahead := p.sub(f.c).dot(arm)
	if !(ahead.Lo > 0) {
		return math.Inf(1)
	}
	return p.sub(joint).cross(arm).Div(ahead).Mag()
}

// total is the bound of both directions for a distance d from the feet and a miss
// eta at the ends: see the opening comment of the package.
func (f *figure) total(d, eta float64) float64 {
	along := eta * eta
	if f.arc {
		along *= (f.mean.Hi + d) * (f.mean.Hi + f.half)
	}
	return math.Sqrt(d*d+along)*outward + f.e.Slack
}

// reach is the distance of a point from the figure of mean radius, in plain floats, good to roundingShare
// of the coordinates.
func (f *figure) reach(p plane.Point) float64 {
	v := p.Sub(f.e.From)
	switch {
	case f.point():
		return v.Norm()
	case !f.arc:
		u := f.e.To.Sub(f.e.From)
		if v.Dot(u) <= 0 {
			return v.Norm()
		}
		if w := p.Sub(f.e.To); w.Dot(u) >= 0 {
			return w.Norm()
		}
		return math.Abs(v.Cross(u)) / u.Norm()
	}
	w, g := p.Sub(f.e.Center), f.e.From.Sub(f.e.Center)
	if in, _ := f.sector(exactly(p)); in || w == (plane.Vector{}) {
		return math.Abs(v.Dot(v.Add(g).Add(g))/(w.Norm()+g.Norm()) - f.shift.Mid())
	}
	return math.Min(p.Dist(f.end(f.a)), p.Dist(f.end(f.b)))
}

// end is the point at the mean radius, in the direction of the arc's end.
func (f *figure) end(e vec) plane.Point {
	if !f.arc {
		return e.point()
	}
	arm := e.sub(f.c).mid()
	off := f.shift.Mid()
	if e != f.a {
		off = -off
	}
	return e.point().Add(arm.Unit().Scale(off))
}

// sector says whether all of the box p certainly has its foot on the figure, or certainly off it.
func (f *figure) sector(p vec) (in, out bool) {
	if f.full {
		return true, false
	}
	if !f.arc {
		s, e := p.sub(f.a).dot(f.along), p.sub(f.b).dot(f.along)
		return s.Lo >= 0 && e.Hi <= 0, s.Hi < 0 || e.Lo > 0
	}
	sense := taylor.Exactly(f.sign)
	s, e := f.g.cross(p.sub(f.a)).Mul(sense), p.sub(f.b).cross(f.b.sub(f.c)).Mul(sense)
	if f.major { // the sector is the union of two half planes
		return s.Lo >= 0 || e.Lo >= 0, s.Hi < 0 && e.Hi < 0
	}
	return s.Lo >= 0 && e.Lo >= 0, s.Hi < 0 || e.Hi < 0
}
