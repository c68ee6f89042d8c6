package synth

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Unrolled is a curve around the camshaft axis as a rotary axis and a radial one see it: X is the polar
// angle in radians, going on beyond a turn, times a scale (a length), Y the distance from the axis. A move that is linear in both
// axes, a spiral r = a + b·φ, is a straight line there. It is for finding such moves; distances in it are not those of the
// cam's plane, but see Shrinks.
type Unrolled struct {
	curve  *Curve
	scale  float64
	sense  float64 // of the polar angle as the cam angle grows
	lag    float64 // radians: polar angle less sense times cam angle, at the start
	pieces []plane.Piece
}

// Unrolled returns the curve so, with a scale of its own: its largest distance from the camshaft axis, near enough. Fails where
// a ray from the camshaft axis would meet the curve twice.
func (c *Curve) Unrolled() (*Unrolled, error) {
	u := &Unrolled{curve: c, sense: -1}
	if c.cam.spec.Camshaft.Clockwise {
		u.sense = 1
	}
	first := c.pieces[0].From
	u.lag = math.Remainder(angleOf(c.At(0, first).P)-u.sense*first*math.Pi/180, 2*math.Pi)
	for i, p := range c.pieces {
		u.pieces = append(u.pieces, plane.Piece{From: p.From, To: p.To, Straight: p.Circle != nil})
		const looks = 180
		for k := range looks + 1 {
			t := p.From + (p.To-p.From)*float64(k)/looks
			f := c.At(i, t)
			u.scale = math.Max(u.scale, f.P.Radius())
			if !(plane.Vector(f.P).Cross(f.T)*u.sense > 0) {
				return nil, fmt.Errorf("at cam angle %.4g° a ray from the camshaft axis meets the path twice: a rotary and a radial axis cannot follow it; use axes: xy", plane.Wrap360(t))
			}
		}
	}
	return u, nil
}

// angleOf is the polar angle in radians.
func angleOf(p plane.Point) float64 { return math.Atan2(p.Y, p.X) }

// Scale is the length of X for a radian.
func (u *Unrolled) Scale() float64 { return u.scale }

// Sense is the sign of X as the cam angle grows.
func (u *Unrolled) Sense() float64 { return u.sense }

// Pieces returns those of the curve; an arc about the camshaft axis is straight here.
func (u *Unrolled) Pieces() []plane.Piece { return u.pieces }

// Closed reports that the curve ends one turn beside its start.
func (u *Unrolled) Closed() bool { return false }

// At returns the curve at cam angle t in degrees, in the piece; exact to rounding.
func (u *Unrolled) At(piece int, t float64) plane.Frame {
	f := u.curve.At(piece, t)
	n := f.T.Left()
	// The curve as series in its own length from the point, by the formulas of Frenet.
	series := func(p, t, n float64) taylor.F {
		s := taylor.FVar(0).Of(p)
		s.C[1], s.C[2], s.C[3] = t, f.K*n/2, (f.DK*n-f.K*f.K*t)/6
		return s
	}
	x, y := series(f.P.X, f.T.X, n.X), series(f.P.Y, f.T.Y, n.Y)
	out := plane.Vector(f.P).Unit()
	ahead, aside := x.Scale(out.X).Add(y.Scale(out.Y)), y.Scale(out.X).Sub(x.Scale(out.Y))
	turned := u.sense*t*math.Pi/180 + u.lag
	turned += math.Remainder(angleOf(f.P)-turned, 2*math.Pi)
	phi := aside.Div(ahead).Atan()
	phi.C[0] += turned
	return frame(phi.Scale(u.scale), x.Mul(x).Add(y.Mul(y)).Sqrt())
}

// Shrinks is by how much a small distance from the curve, square to it, is larger here than in the cam's plane: 1 where the curve
// runs at the scale's distance about the axis, and never less.
func (u *Unrolled) Shrinks(piece int, t float64) float64 {
	f := u.curve.At(piece, t)
	r := f.P.Radius()
	along, around := plane.Vector(f.P).Dot(f.T)/r, math.Abs(plane.Vector(f.P).Cross(f.T))/r
	return 1 / (math.Hypot(1, along*r/(u.scale*around)) * around)
}
