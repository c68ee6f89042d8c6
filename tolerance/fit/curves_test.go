package fit

import (
	"math"
	"math/cmplx"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// A test curve is a point and three derivatives by t in radians, as complex numbers,
// piece by piece; dir -1 runs it clockwise; left is a parallel offset to the left of travel.
type testCurve struct {
	pieces []plane.Piece
	z      func(piece int, rad float64) [4]complex128
	dir    float64
	left   float64
}

func (c testCurve) Pieces() []plane.Piece { return c.pieces }

func (c testCurve) At(piece int, t float64) plane.Frame {
	z := c.z(piece, t*math.Pi/180)
	if c.dir < 0 {
		for i := range z {
			z[i] = cmplx.Conj(z[i])
		}
	}
	cross := func(a, b complex128) float64 { return real(a)*imag(b) - imag(a)*real(b) }
	dot := func(a, b complex128) float64 { return real(a)*real(b) + imag(a)*imag(b) }
	v := cmplx.Abs(z[1])
	k := cross(z[1], z[2]) / (v * v * v)
	dk := (cross(z[1], z[3])/(v*v*v) - 3*k*dot(z[1], z[2])/(v*v)) / v
	tan := z[1] / complex(v, 0)
	p := z[0] + tan*complex(0, c.left)
	g := 1 - c.left*k
	return plane.Frame{P: plane.Point{X: real(p), Y: imag(p)}, T: plane.Vector{X: real(tan), Y: imag(tan)}, K: k / g, DK: dk / (g * g * g)}
}

func ellipse(a, b float64) testCurve {
	return testCurve{pieces: []plane.Piece{{From: 0, To: 90}, {From: 90, To: 360}}, dir: 1, z: func(_ int, t float64) [4]complex128 {
		s, c := math.Sincos(t)
		return [4]complex128{complex(a*c, b*s), complex(-a*s, b*c), complex(-a*c, -b*s), complex(a*s, -b*c)}
	}}
}

// lift is a law on 0..1 with three derivatives.
type lift func(u float64) [4]float64

func cycloidal(u float64) [4]float64 {
	w := 2 * math.Pi
	s, c := math.Sincos(w * u)
	return [4]float64{u - s/w, 1 - c, w * s, w * w * c}
}

func poly345(u float64) [4]float64 {
	return [4]float64{u * u * u * (10 + u*(-15+6*u)), u * u * (30 + u*(-60+30*u)), u * (60 + u*(-180+120*u)), 60 + u*(-360+360*u)}
}

func half1(u float64) [4]float64 { return [4]float64{2 * u * u, 4 * u, 4, 0} }
func half2(u float64) [4]float64 {
	w := 1 - u
	return [4]float64{1 - 2*w*w, 4 * w, -4, 0}
}

// zone is a stretch of a cam: lift from to over degrees by a law's part lo..hi; law nil is
// a dwell.
type zone struct {
	over, from, to, lo, hi float64
	law                    lift
}

// polarCam is a cam in polar coordinates: radius r0 plus lift by zones. t starts at start.
func polarCam(r0, start, dir, left float64, zones []zone) testCurve {
	c := testCurve{dir: dir, left: left}
	t := start
	for i, z := range zones {
		p := plane.Piece{From: t, To: t + z.over}
		if i == len(zones)-1 {
			p.To = start + 360
		}
		if z.law == nil {
			p.Circle = &plane.Circle{Radius: r0 + z.from - dir*left}
		}
		c.pieces = append(c.pieces, p)
		t = p.To
	}
	c.z = func(i int, rad float64) [4]complex128 {
		z := zones[i]
		r := [4]float64{r0 + z.from}
		if z.law != nil {
			span := z.over * math.Pi / 180 / (z.hi - z.lo) // rad of the whole law
			u := z.lo + (rad-c.pieces[i].From*math.Pi/180)/span
			h := z.to - z.from
			f := z.law(u)
			r = [4]float64{r0 + z.from + h*f[0], h * f[1] / span, h * f[2] / (span * span), h * f[3] / (span * span * span)}
		}
		e := cmplx.Rect(1, rad)
		return [4]complex128{
			complex(r[0], 0) * e, complex(r[1], r[0]) * e,
			complex(r[2]-r[0], 2*r[1]) * e, complex(r[3]-3*r[1], 3*r[2]-r[0]) * e,
		}
	}
	return c
}

// cyc345 is the cam of the tables that the counts are compared with: h 24, R0 40.
func cyc345(dir, left float64) testCurve {
	return polarCam(40, -10, dir, left, []zone{{90, 0, 24, 0, 1, cycloidal}, {60, 24, 24, 0, 0, nil}, {120, 24, 0, 0, 1, poly345}, {90, 0, 0, 0, 0, nil}})
}

// parabolic has curvature jumps at dwell ends and in the middle of rise and fall.
func parabolic(left float64) testCurve {
	return polarCam(40, 0, 1, left, []zone{{45, 0, 24, 0, 0.5, half1}, {45, 0, 24, 0.5, 1, half2}, {60, 24, 24, 0, 0, nil},
		{60, 24, 0, 0, 0.5, half1}, {60, 24, 0, 0.5, 1, half2}, {90, 0, 0, 0, 0, nil}})
}

// inch is a small cam in inches with short and long pieces.
func inch() testCurve {
	return polarCam(1.5, 100, -1, 0, []zone{{200, 0, 0, 0, 0, nil}, {30, 0, 0.12, 0, 1, poly345}, {2, 0.12, 0.12, 0, 0, nil},
		{100, 0.12, 0, 0, 1, cycloidal}, {28, 0, 0, 0, 0, nil}})
}

// noDwell rises and falls without dwell and starts in the middle of the rise.
func noDwell(left float64) testCurve {
	return polarCam(40, 33, 1, left, []zone{{96, 0, 12, 0.4, 1, cycloidal}, {200, 12, 0, 0, 1, cycloidal}, {64, 0, 12, 0, 0.4, cycloidal}})
}

// wavy is a closed harmonic curve of five lobes with concave stretches.
func wavy() testCurve {
	return testCurve{dir: 1, pieces: []plane.Piece{{From: 7, To: 367}}, z: func(_ int, t float64) [4]complex128 {
		s, c := math.Sincos(5 * t)
		r := [4]float64{50 + 4*c, -20 * s, -100 * c, 500 * s}
		e := cmplx.Rect(1, t)
		return [4]complex128{complex(r[0], 0) * e, complex(r[1], r[0]) * e, complex(r[2]-r[0], 2*r[1]) * e, complex(r[3]-3*r[1], 3*r[2]-r[0]) * e}
	}}
}

// corners is a cam of constant velocity: its tangent jumps where rise and fall meet.
func corners() testCurve {
	steady := func(u float64) [4]float64 { return [4]float64{u, 1, 0, 0} }
	return polarCam(30, 0, 1, 0, []zone{{180, 0, 10, 0, 1, steady}, {180, 10, 0, 0, 1, steady}})
}

// square has straight sides of 40 and the corners of a square.
func square() testCurve {
	c := testCurve{dir: 1}
	for i := 0; i < 4; i++ {
		c.pieces = append(c.pieces, plane.Piece{From: 90 * float64(i), To: 90 * float64(i+1)})
	}
	c.z = func(i int, t float64) [4]complex128 {
		side := cmplx.Rect(20, math.Pi/2*float64(i))
		u := t/(math.Pi/2) - float64(i)
		return [4]complex128{side * complex(1, 2*u-1), side * complex(0, 4/math.Pi), 0, 0}
	}
	return c
}

// kinkAtEnd reports whether the curve has a corner at parameter t.
func (c testCurve) kinkAtEnd(t float64) bool {
	for i, p := range c.pieces {
		next := (i + 1) % len(c.pieces)
		u, v := c.At(i, p.To).T, c.At(next, c.pieces[next].From).T
		if t == p.To && math.Abs(u.Cross(v)) > 1e-9 {
			return true
		}
	}
	return false
}

func round(marked bool) testCurve {
	c := ellipse(30, 30)
	c.pieces = []plane.Piece{{From: 0, To: 360}}
	if marked {
		c.pieces[0].Circle = &plane.Circle{Radius: 30}
	}
	return c
}

// curveToPath returns the largest distance of dense curve points from the elements that
// stand for their parameter and their neighbors.
func curveToPath(c testCurve, p chain.Path, perElement int) float64 {
	worst := 0.0
	for i, e := range p {
		near := chain.Path{p[(i+len(p)-1)%len(p)], e, p[(i+1)%len(p)]}
		for j := 0; j <= perElement; j++ {
			q := c.point(e.Source.From + (e.Source.To-e.Source.From)*float64(j)/float64(perElement))
			worst = math.Max(worst, pathDistance(near, q))
		}
	}
	return worst
}

// pathToCurve returns the largest distance of dense path points from the curve near their
// parameter (Newton on the foot).
func pathToCurve(c testCurve, p chain.Path, perElement int) float64 {
	worst := 0.0
	for _, e := range p {
		for j := 0; j <= perElement; j++ {
			x := float64(j) / float64(perElement)
			q := e.PointAt(x)
			t, best := e.Source.From+x*(e.Source.To-e.Source.From), math.Inf(1)
			for k := 0; k < 60; k++ {
				f := c.frame(t)
				best = math.Min(best, q.Dist(f.P))
				speed := f.P.Dist(c.frame(t+1e-4).P) / 1e-4
				t += math.Max(math.Min(q.Sub(f.P).Dot(f.T)/speed, 1), -1)
			}
			worst = math.Max(worst, best)
		}
	}
	return worst
}

func (c testCurve) point(t float64) plane.Point { return c.frame(t).P }

func (c testCurve) frame(t float64) plane.Frame {
	start := c.pieces[0].From
	for t < start {
		t += 360
	}
	for t > start+360 {
		t -= 360
	}
	for i, p := range c.pieces {
		if t <= p.To {
			return c.At(i, t)
		}
	}
	return c.At(len(c.pieces)-1, t)
}

func pathDistance(p chain.Path, q plane.Point) float64 {
	best := math.Inf(1)
	for _, e := range p {
		best = math.Min(best, math.Min(q.Dist(e.From), q.Dist(e.To)))
		if e.Kind == chain.Line {
			u := e.StartTangent()
			if s := q.Sub(e.From).Dot(u); s > 0 && s < e.Length() {
				best = math.Min(best, math.Abs(u.Cross(q.Sub(e.From))))
			}
			continue
		}
		f := e
		f.To = e.Center.Add(q.Sub(e.Center).Unit().Scale(e.Radius()))
		if math.Abs(f.Sweep()) < math.Abs(e.Sweep()) {
			best = math.Min(best, q.Dist(f.To))
		}
	}
	return best
}
