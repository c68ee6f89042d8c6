package gcode_test

import (
	"fmt"
	"math"

	"lobewright/gcode"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
)

// oval is an ellipse about (cx, cy) with half axes a and b, or its parallel curve d
// outside, over t in degrees; turn is +1 counterclockwise with growing t, else -1.
// With a = b it is the contour of an eccentric circle cam.
type oval struct{ cx, cy, a, b, d, turn float64 }

func at[T taylor.Scalar[T]](o oval, t T) (x, y T) {
	s, c := t.Radians().Scale(o.turn).SinCos()
	nx, ny := c.Scale(o.b), s.Scale(o.a) // outward normal
	n := nx.Mul(nx).Add(ny.Mul(ny)).Sqrt()
	x = c.Scale(o.a).Add(t.Of(o.cx)).Add(nx.Div(n).Scale(o.d))
	y = s.Scale(o.b).Add(t.Of(o.cy)).Add(ny.Div(n).Scale(o.d))
	return x, y
}

func (o oval) Pieces() []plane.Piece { return []plane.Piece{{From: 0, To: 150}, {From: 150, To: 360}} }

func (o oval) Over(_ int, t taylor.Interval, order int) (x, y taylor.I) {
	return at(o, taylor.IVar(t, order))
}

func (o oval) At(_ int, t float64) plane.Frame {
	x, y := at(o, taylor.FVar(t))
	p, a := plane.Vector{X: x.Deriv(1), Y: y.Deriv(1)}, plane.Vector{X: x.Deriv(2), Y: y.Deriv(2)}
	j := plane.Vector{X: x.Deriv(3), Y: y.Deriv(3)}
	v := p.Norm()
	k := p.Cross(a) / (v * v * v)
	dk := (p.Cross(j)/(v*v*v) - 3*k*p.Dot(a)/(v*v)) / v
	return plane.Frame{P: plane.Point{X: x.C[0], Y: y.C[0]}, T: p.Unit(), K: k, DK: dk}
}

func (o oval) parallel(d float64) gcode.Curve { o.d += d; return o }

// arcs returns a tangent-continuous path of n biarcs on the oval.
func (o oval) arcs(n int) chain.Path {
	var p chain.Path
	for i := range n {
		t0, t1 := float64(i)*360/float64(n), float64(i+1)*360/float64(n)
		a, b := o.At(0, t0), o.At(0, t1)
		if i == n-1 {
			b = o.At(0, 0)
		}
		p = append(p, biarc(a, b, chain.Span{From: t0, To: t1})...)
	}
	return p
}

// biarc joins two frames by two arcs of equal tangent lengths.
func biarc(a, b plane.Frame, s chain.Span) chain.Path {
	v, mid := b.P.Sub(a.P), (s.From+s.To)/2
	t := a.T.Add(b.T)
	// |v|² - 2 α v·t + 2 α² (1 - Ta·Tb) ... with 2α²(Ta·Tb - 1) on the right side
	q := 2 * (1 - a.T.Dot(b.T))
	l := v.Dot(v) / (v.Dot(t) + math.Sqrt(v.Dot(t)*v.Dot(t)+q*v.Dot(v)))
	j := a.P.Add(b.P.Add(b.T.Scale(-l)).Sub(a.P.Add(a.T.Scale(l))).Scale(0.5)).Add(a.T.Scale(l))
	return chain.Path{arcFrom(a.P, a.T, j, chain.Span{From: s.From, To: mid}), arcTo(j, b.P, b.T, chain.Span{From: mid, To: s.To})}
}

// arcFrom is the arc from p along t to q.
func arcFrom(p plane.Point, t plane.Vector, q plane.Point, s chain.Span) chain.Element {
	v := q.Sub(p)
	h := v.Dot(v) / (2 * t.Cross(v)) // signed radius
	return chain.Element{Kind: chain.Arc, From: p, To: q, Center: p.Add(t.Left().Scale(h)), CCW: h > 0, Source: s}
}

func arcTo(p, q plane.Point, t plane.Vector, s chain.Span) chain.Element {
	return arcFrom(q, t.Neg(), p, chain.Span{From: s.To, To: s.From}).Reverse()
}

// lines returns a chord path on the oval, n chords.
func (o oval) lines(n int) chain.Path {
	var p chain.Path
	for i := range n {
		t0, t1 := float64(i)*360/float64(n), float64(i+1)*360/float64(n)
		p = append(p, chain.Element{Kind: chain.Line, From: o.At(0, t0).P, To: o.At(0, math.Mod(t1, 360)).P, Source: chain.Span{From: t0, To: t1}})
	}
	return p
}

// fitted returns the provider of an operation's paths: one fit for all parallels.
func (o oval) fitted(n int) func(float64) (chain.Path, error) {
	p := o.arcs(n)
	return func(d float64) (chain.Path, error) { return p.Offset(-o.turn * d) }
}

func (o oval) chords(n int) func(float64) (chain.Path, error) {
	return func(d float64) (chain.Path, error) { return oval{o.cx, o.cy, o.a, o.b, d, o.turn}.lines(n), nil }
}

func part(o oval) gcode.Part {
	return gcode.Part{Name: "wafer-lift", Title: "Chalk (stick) lift – front", Revision: "B", Thickness: 12, CamClockwise: o.turn > 0,
		BlankDiameter: 150, ClampRadius: 15, BoreDiameter: 20, StartAt: 40, Curve: o.parallel}
}

func machine() gcode.Machine {
	return gcode.Machine{Decimals: 3, ArcMismatch: 0.002, BlockNumbers: true, SafeZ: 5}
}

func mill(o oval) gcode.Operation {
	return gcode.Operation{Number: 1, Process: gcode.Mill, Compensation: gcode.CompPath, Feed: 300, Tool: 3, ToolDiameter: 16, SpindleSpeed: 3000,
		PlungeFeed: 80, StepDown: 5, Stock: []float64{0.4, 0.1, 0}, Direction: gcode.Climb, Path: o.fitted(40)}
}

func wire(o oval) gcode.Operation {
	return gcode.Operation{Number: 2, Process: gcode.Wire, Compensation: gcode.CompPath, Feed: 4, WireDiameter: 0.25,
		Offsets: []float64{0.19, 0.145, 0.13}, Tab: gcode.Tab{Width: 3, At: 250}, StartHole: gcode.StartHole{Radius: 66, At: 250}, Path: o.fitted(40)}
}

var (
	ellipse   = oval{0, 0, 52, 38, 0, 1}
	eccentric = oval{-12, 0, 40, 40, 0, 1}
)

func (o oval) String() string { return fmt.Sprintf("%g x %g turning %+g", o.a, o.b, o.turn) }
