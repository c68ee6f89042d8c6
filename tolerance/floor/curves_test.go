package floor

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// curve is a test curve: one generic formula on floats and on intervals.
type curve struct {
	pieces []plane.Piece
	deeper int // derivatives the formula uses up
	f      func(piece int, t taylor.F) (x, y taylor.F)
	i      func(piece int, t taylor.I) (x, y taylor.I)
}

func (c curve) Pieces() []plane.Piece { return c.pieces }

func (c curve) At(piece int, t float64) plane.Frame {
	x, y := c.f(piece, taylor.FVar(t))
	dx, dy := x.D(), y.D()
	v := dx.Mul(dx).Add(dy.Mul(dy)).Sqrt()
	k := dx.Mul(dy.D()).Sub(dy.Mul(dx.D())).Div(v.Mul(v).Mul(v))
	return plane.Frame{P: plane.Point{X: x.C[0], Y: y.C[0]}, T: plane.Vector{X: dx.C[0], Y: dy.C[0]}.Unit(), K: k.C[0], DK: k.C[1] / v.C[0]}
}

func (c curve) Over(piece int, t taylor.Interval, order int) (x, y taylor.I) {
	return c.i(piece, taylor.IVar(t, order+c.deeper))
}

// at evaluates at any parameter, by whole turns.
func (c curve) at(t float64) plane.Point {
	t0 := c.pieces[0].From
	t = math.Mod(t-t0, 360) + t0
	if t < t0 {
		t += 360
	}
	for i, p := range c.pieces {
		if t <= p.To {
			return c.At(i, t).P
		}
	}
	return c.At(0, t0).P
}

func ellipseOf[T taylor.Scalar[T]](a, b float64) func(int, T) (T, T) {
	return func(_ int, t T) (T, T) {
		s, c := t.Radians().SinCos()
		return c.Scale(a), s.Scale(b)
	}
}

func ellipse(a, b float64) curve {
	return curve{pieces: []plane.Piece{{From: 0, To: 90}, {From: 90, To: 360}}, f: ellipseOf[taylor.F](a, b), i: ellipseOf[taylor.I](a, b)}
}

// law is a share 0..1 of a motion's course.
type law int

const (
	dwell law = iota
	cycloidal
	poly345
	parabolicUp   // first half of constant acceleration
	parabolicDown // second half
)

func lawOf[T taylor.Scalar[T]](l law, u T) T {
	poly := func(c ...float64) T {
		v := u.Of(c[len(c)-1])
		for k := len(c) - 2; k >= 0; k-- {
			v = v.Mul(u).Add(u.Of(c[k]))
		}
		return v
	}
	switch l {
	case cycloidal:
		s, _ := u.Scale(360).Radians().SinCos()
		return u.Sub(s.Scale(1 / (2 * math.Pi)))
	case poly345:
		return poly(0, 0, 0, 10, -15, 6)
	case parabolicUp:
		return poly(0, 0, 0.5).Scale(2)
	case parabolicDown:
		return poly(0, 2, -1)
	}
	return u.Of(0)
}

// zone lifts from one lift to another over an angle; the parabolic laws are the
// two halves of a motion, each with its own lifts.
type zone struct {
	over, from, to float64
	law            law
}

// cam is a plate cam in polar form with radius base at lift 0, and its parallel at distance
// off to the left.
type cam struct {
	base, start, off float64
	zones            []zone
}

func camOf[T taylor.Scalar[T]](c cam) func(int, T) (T, T) {
	pieces := c.pieces()
	return func(piece int, t T) (T, T) {
		z, p := c.zones[piece], pieces[piece]
		u := t.Sub(t.Of(p.From)).Scale(1 / z.over)
		r := t.Of(c.base + z.from).Add(lawOf(z.law, u).Scale(z.to - z.from))
		s, k := t.Radians().SinCos()
		x, y := r.Mul(k), r.Mul(s)
		if c.off == 0 {
			return x, y
		}
		dx, dy := x.D(), y.D()
		speed := dx.Mul(dx).Add(dy.Mul(dy)).Sqrt()
		return x.Sub(dy.Div(speed).Scale(c.off)), y.Add(dx.Div(speed).Scale(c.off))
	}
}

func (c cam) pieces() []plane.Piece {
	var ps []plane.Piece
	t := c.start
	for _, z := range c.zones {
		p := plane.Piece{From: t, To: t + z.over}
		if z.law == dwell {
			p.Circle = &plane.Circle{Radius: c.base + z.from - c.off}
		}
		ps, t = append(ps, p), t+z.over
	}
	ps[len(ps)-1].To = c.start + 360
	return ps
}

func (c cam) curve() curve {
	k := curve{pieces: c.pieces(), f: camOf[taylor.F](c), i: camOf[taylor.I](c)}
	if c.off != 0 {
		k.deeper = 1
	}
	return k
}

func cyc345(off float64) curve {
	return cam{40, -10, off, []zone{{90, 0, 24, cycloidal}, {60, 24, 24, dwell}, {120, 24, 0, poly345}, {90, 0, 0, dwell}}}.curve()
}

func parabolic(off float64) curve {
	return cam{40, 0, off, []zone{{45, 0, 12, parabolicUp}, {45, 12, 24, parabolicDown}, {60, 24, 24, dwell},
		{60, 24, 12, parabolicUp}, {60, 12, 0, parabolicDown}, {90, 0, 0, dwell}}}.curve()
}

// noDwell rises and falls without rest.
func noDwell() curve {
	return cam{40, 33, 0, []zone{{160, 0, 12, cycloidal}, {200, 12, 0, poly345}}}.curve()
}

// wavy has five lobes with concave stretches.
func wavyOf[T taylor.Scalar[T]](_ int, t T) (T, T) {
	_, c5 := t.Scale(5).Radians().SinCos()
	s, c := t.Radians().SinCos()
	r := t.Of(50).Add(c5.Scale(4))
	return r.Mul(c), r.Mul(s)
}

func wavy() curve {
	return curve{pieces: []plane.Piece{{From: 7, To: 367}}, f: wavyOf[taylor.F], i: wavyOf[taylor.I]}
}
