package certify_test

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
)

// curve is a test curve: the same generic formula on floats and on intervals.
type curve struct {
	pieces []plane.Piece
	deeper int // derivatives the formula uses up
	f      func(piece int, t taylor.F) (x, y taylor.F)
	i      func(piece int, t taylor.I) (x, y taylor.I)
}

func (c curve) Pieces() []plane.Piece { return c.pieces }

func (c curve) At(piece int, t float64) plane.Frame {
	x, y := c.f(piece, taylor.FVar(t))
	v := plane.Vector{X: x.C[1], Y: y.C[1]}
	return plane.Frame{P: plane.Point{X: x.C[0], Y: y.C[0]}, T: v.Unit()}
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

func ellipseOf[T taylor.Scalar[T]](a, b, cx, cy float64) func(int, T) (T, T) {
	return func(_ int, t T) (T, T) {
		s, c := t.Radians().SinCos()
		return c.Scale(a).Add(t.Of(cx)), s.Scale(b).Add(t.Of(cy))
	}
}

func ellipse(a, b float64) curve { return ellipseAt(a, b, 0, 0) }

func ellipseAt(a, b, cx, cy float64) curve {
	return curve{pieces: []plane.Piece{{From: 0, To: 150}, {From: 150, To: 360}},
		f: ellipseOf[taylor.F](a, b, cx, cy), i: ellipseOf[taylor.I](a, b, cx, cy)}
}

// cam is a plate cam in polar form: cycloidal rise, dwell, cycloidal fall, dwell, and its parallel
// at distance off to the left of travel.
type cam struct{ base, lift, rise, high, fall, off float64 }

func (c cam) ends() []float64 {
	return []float64{-30, -30 + c.rise, -30 + c.rise + c.high, -30 + c.rise + c.high + c.fall, 330}
}

func camOf[T taylor.Scalar[T]](c cam) func(int, T) (T, T) {
	ends := c.ends()
	return func(piece int, t T) (T, T) {
		r := t.Of(c.base)
		u := t.Sub(t.Of(ends[piece])).Scale(1 / (ends[piece+1] - ends[piece]))
		s, _ := u.Scale(360).Radians().SinCos()
		step := u.Sub(s.Scale(1 / (2 * math.Pi))).Scale(c.lift)
		switch piece {
		case 0:
			r = r.Add(step)
		case 1:
			r = r.Add(t.Of(c.lift))
		case 2:
			r = r.Add(t.Of(c.lift)).Sub(step)
		}
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

func (c cam) curve() curve {
	e := c.ends()
	k := curve{f: camOf[taylor.F](c), i: camOf[taylor.I](c)}
	for i := range 4 {
		k.pieces = append(k.pieces, plane.Piece{From: e[i], To: e[i+1]})
	}
	if c.off != 0 {
		k.deeper = 1
	}
	return k
}

func sampleCam() cam { return cam{base: 40, lift: 12, rise: 90, high: 60, fall: 120} }

// polygon joins points of the curve by lines, at the parameters given and back to the first.
func polygon(c curve, at []float64) chain.Path {
	var p chain.Path
	for i, t := range at {
		to := at[(i+1)%len(at)]
		p = append(p, chain.Element{Kind: chain.Line, From: c.at(t), To: c.at(to)})
	}
	return p
}

// arcs joins points of the curve by arcs through the points half way between, which
// is no good fit but one with kinks at every joint.
func arcs(c curve, at []float64) chain.Path {
	var p chain.Path
	for i, t := range at {
		to := at[(i+1)%len(at)]
		for to < t {
			to += 360
		}
		end := c.at(to)
		if i == len(at)-1 {
			end = p[0].From
		}
		p = append(p, through(c.at(t), c.at((t+to)/2), end))
	}
	return p
}

// through is the arc from a over m to b.
func through(a, m, b plane.Point) chain.Element {
	u, v := m.Sub(a), b.Sub(a)
	d := 2 * u.Cross(v)
	k := plane.Vector{X: v.Y*u.Dot(u) - u.Y*v.Dot(v), Y: u.X*v.Dot(v) - v.X*u.Dot(u)}.Scale(1 / d)
	return chain.Element{Kind: chain.Arc, From: a, To: b, Center: a.Add(k), CCW: d > 0}
}

// spread is n parameters over a turn from start.
func spread(start float64, n int) []float64 {
	at := make([]float64, n)
	for i := range at {
		at[i] = start + 360*float64(i)/float64(n)
	}
	return at
}

// gridded rounds joints and centers to multiples of q.
func gridded(p chain.Path, q float64) chain.Path {
	r := func(a plane.Point) plane.Point {
		return plane.Point{X: math.Round(a.X/q) * q, Y: math.Round(a.Y/q) * q}
	}
	out := make(chain.Path, len(p))
	for i, e := range p {
		e.From, e.To, e.Center = r(e.From), r(e.To), r(e.Center)
		out[i] = e
	}
	return out
}
