package gcode

import (
	"math"

	"lobewright/gcode/read"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
)

// endless is an open curve of one turn that goes on before and behind, each turn beside the
// last by the way around at a distance z from the camshaft axis.
type endless struct {
	Curve
	z      float64 // length
	sense  float64 // sign of X as the cam angle grows
	pieces []plane.Piece
}

// turnsBefore and turnsBehind are how far the path of a program may run.
const turnsBefore, turnsBehind = 2, 2

func newEndless(c Curve, z, sense float64) endless {
	e := endless{Curve: c, z: z, sense: sense}
	for k := -turnsBefore; k <= turnsBehind; k++ {
		for _, p := range c.Pieces() {
			e.pieces = append(e.pieces, plane.Piece{From: p.From + 360*float64(k), To: p.To + 360*float64(k), Straight: p.Straight})
		}
	}
	for i := 1; i < len(e.pieces); i++ { // adding turns rounds
		e.pieces[i].From = e.pieces[i-1].To
	}
	return e
}

// Closed reports that the curve is open.
func (e endless) Closed() bool { return false }

// Pieces returns those of all turns.
func (e endless) Pieces() []plane.Piece { return e.pieces }

// of returns the piece of the one turn, and by how many turns it is moved.
func (e endless) of(piece int) (base int, turns float64) {
	n := len(e.pieces) / (turnsBefore + 1 + turnsBehind)
	return piece % n, float64(piece/n - turnsBefore)
}

// At evaluates one piece in plain floats.
func (e endless) At(piece int, t float64) plane.Frame {
	i, turns := e.of(piece)
	f := e.Curve.At(i, t-360*turns)
	f.P.X += e.sense * 2 * math.Pi * e.z * turns
	return f
}

// Over encloses one piece. The curve's own expression goes on beyond the ends of its pieces, so
// a parameter that rounding moved over them does no harm.
func (e endless) Over(piece int, t taylor.Interval, order int) (x, y taylor.I) {
	i, turns := e.of(piece)
	x, y = e.Curve.Over(i, t.Sub(taylor.Exactly(360*turns)), order)
	around := x.Of(360 * turns).Radians().Scale(e.sense * e.z)
	return x.Add(around), y
}

// surface turns the moves of a program into lines of the plane at a distance z from the camshaft
// axis.
func (v *drumVerifier) surface(moves []read.Move, z float64) chain.Path {
	at := func(p plane.Point, r float64) plane.Point {
		axial, beside := p.X, p.Y
		if v.x.Rotary == 'B' {
			axial, beside = p.Y, p.X
		}
		if v.x.Rotary == 'A' {
			beside = -beside
		}
		polar := r * math.Pi / 180
		if v.x.RotaryTable {
			polar = -polar
		}
		return plane.Point{X: z*polar + beside, Y: axial}
	}
	path := make(chain.Path, 0, len(moves))
	for _, m := range moves {
		// The product rounds: far less than Slack.
		path = append(path, chain.Element{From: at(m.From, m.FromR), To: at(m.To, m.ToR), Slack: surfaceSlack * v.x.Radius})
	}
	return path
}

// surfaceSlack bounds what turning degrees into lengths rounds, as a share of the radius, for
// some turns.
const surfaceSlack = 1e-13
