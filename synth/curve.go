package synth

import (
	"math"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Curve is the pitch curve of a cam or one of its parallels: an exact function
// of the cam angle, analytic on each of its pieces. It stands for the contour,
// for a groove wall and for the path of a cutter or wire alike.
//
// At and Over evaluate by piece, never by comparing angles, so both sides of a
// junction can be asked for.
type Curve struct {
	cam    *Cam
	left   float64   // distance from the pitch curve, to the left of travel, length
	tool   *DrumTool // of a barrel: the tool whose axis this is
	pieces []plane.Piece
}

// Pieces returns the analytic pieces, which cover one turn of the camshaft.
func (c *Curve) Pieces() []plane.Piece { return c.pieces }

// Closed reports whether the curve ends where it starts. A barrel's, being developed, ends
// one turn beside it.
func (c *Curve) Closed() bool {
	_, drum := c.cam.drum()
	return !drum
}

// Left returns the distance from the pitch curve to the left of travel.
func (c *Curve) Left() float64 { return c.left }

// outside is the distance outside the base curve.
func (c *Curve) outside() float64 { return c.left * c.cam.outward() }

// At returns point, unit tangent, curvature and its rate at cam angle t in
// degrees, which must lie in the piece; exact to rounding. The tangent is that of
// the pitch curve: where a parallel is undercut (1 - left*K < 0) the curve runs
// against it.
func (c *Curve) At(piece int, t float64) plane.Frame {
	if f, ok := c.cam.face(); ok {
		p, phi := f.SupportF(taylor.FVar(t), c.cam.liftF(piece, t))
		frame, _ := follower.FaceFrame(p, phi, c.outside())
		return frame
	}
	if x, y, ok := c.drumF(piece, t); ok {
		return frame(x, y)
	}
	x, y := c.cam.pitchF(piece, t)
	return offsetFrame(frame(x, y), c.left)
}

// Over encloses the curve and its derivatives by t in degrees over the whole
// interval, to the given order, at most taylor.Order-1.
func (c *Curve) Over(piece int, t taylor.Interval, order int) (x, y taylor.I) {
	if f, ok := c.cam.face(); ok {
		deg := taylor.IVar(t, order+1)
		p, phi := f.SupportI(deg, c.cam.lift.I(piece, deg))
		return follower.Contour(p.Add(p.Of(c.outside())), phi)
	}
	if x, y, ok := c.drumI(piece, t, order); ok {
		return x, y
	}
	if c.left == 0 {
		return c.cam.pitchI(piece, t, order)
	}
	x, y = c.cam.pitchI(piece, t, order+1)
	dx, dy := x.D(), y.D()
	v := dx.Mul(dx).Add(dy.Mul(dy)).Sqrt()
	return x.Sub(dy.Div(v).Scale(c.left)), y.Add(dx.Div(v).Scale(c.left))
}

// frame evaluates the textbook's curvature (x'y” - y'x”)/(x'² + y'²)^(3/2) and
// its rate on series of the pitch curve.
func frame(x, y taylor.F) plane.Frame {
	dx, dy := x.D(), y.D()
	v := dx.Mul(dx).Add(dy.Mul(dy)).Sqrt()
	k := dx.Mul(dy.D()).Sub(dy.Mul(dx.D())).Div(v.Mul(v).Mul(v))
	return plane.Frame{
		P:  plane.Point{X: x.C[0], Y: y.C[0]},
		T:  plane.Vector{X: dx.C[0] / v.C[0], Y: dy.C[0] / v.C[0]},
		K:  k.C[0],
		DK: k.C[1] / v.C[0],
	}
}

// offsetFrame moves a frame by d to the left: K/(1-dK), DK/(1-dK)³ (any text on
// parallel curves, e.g. M. do Carmo, Differential Geometry of Curves and Surfaces).
func offsetFrame(f plane.Frame, d float64) plane.Frame {
	if d == 0 {
		return f
	}
	m := 1 - d*f.K
	return plane.Frame{P: f.P.Add(f.T.Left().Scale(d)), T: f.T, K: f.K / m, DK: f.DK / (m * m * m)}
}

// Jumps below these shares of the curve's own scale are rounding, not junctions.
const (
	tangentJump   = 1e-9 // rad
	curvatureJump = 1e-9 // of the curvature's size
	rateJump      = 1e-7 // of the rate's size, one more derivative lost
)

// curve returns the parallel of the pitch curve at a distance to the left of travel.
func (c *Cam) curve(left float64) *Curve {
	if c.made == nil {
		return c.build(left)
	}
	c.made.lock.Lock()
	defer c.made.lock.Unlock()
	p := c.made.of[left]
	if p == nil {
		p = c.build(left)
		c.made.of[left] = p
	}
	return p
}

// build makes the parallel of the pitch curve.
func (c *Cam) build(left float64) *Curve {
	zones := c.zones
	p := &Curve{cam: c, left: left, pieces: make([]plane.Piece, len(zones))}
	for i, z := range zones {
		p.pieces[i] = plane.Piece{From: z.From, To: z.To}
		if _, drum := c.drum(); drum {
			p.pieces[i].Straight = z.Dwell
		} else if z.Dwell {
			p.pieces[i].Circle = &plane.Circle{Radius: p.At(i, z.From).P.Radius()}
		}
	}
	for i, z := range zones {
		prev := (i + len(zones) - 1) % len(zones)
		if i == 0 && !p.Closed() {
			continue
		}
		p.pieces[i].Jump = jump(p.At(prev, zones[prev].To), p.At(i, z.From), c.size())
	}
	return p
}

// jump compares the frames on both sides of a boundary; size is the curve's
// own length scale.
func jump(a, b plane.Frame, size float64) [3]float64 {
	j := [3]float64{math.Atan2(a.T.Cross(b.T), a.T.Dot(b.T)), b.K - a.K, b.DK - a.DK}
	if math.Abs(j[0]) < tangentJump {
		j[0] = 0
	}
	k := math.Max(1/size, math.Max(math.Abs(a.K), math.Abs(b.K)))
	if math.Abs(j[1]) < curvatureJump*k {
		j[1] = 0
	}
	if math.Abs(j[2]) < rateJump*math.Max(k/size, math.Max(math.Abs(a.DK), math.Abs(b.DK))) {
		j[2] = 0
	}
	return j
}

// pitchF is the roller center as series about cam angle t in degrees.
func (c *Cam) pitchF(zone int, t float64) (x, y taylor.F) {
	return c.follower.F(taylor.FVar(t), c.liftF(zone, t))
}

// liftF is the lift as a series about cam angle t in degrees.
func (c *Cam) liftF(zone int, t float64) taylor.F {
	return c.lift.F(zone, taylor.FVar(t))
}

// pitchI encloses pitchF over an interval of cam angle.
func (c *Cam) pitchI(zone int, t taylor.Interval, order int) (x, y taylor.I) {
	deg := taylor.IVar(t, order)
	return c.follower.I(deg, c.lift.I(zone, deg))
}
