package gcode_test

import (
	"math"

	"lobewright/gcode"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
)

// keyhole is a disk of radius 60 with a pocket of radius 12 behind a neck 12 wide
// with lips of radius 6, counterclockwise: every radius lets a cutter of radius 8
// through, but the neck does not. Its parallel curve d outside crosses itself
// at the neck for d > 6.
type keyhole struct{ d float64 }

// bend is one arc: center, radius (negative: clockwise), polar angles of its ends.
type bend struct{ x, y, r, from, to float64 }

func (k keyhole) bends() []bend {
	const disk, pocket, lip, half = 60, 12, 6, 12 // half: of the distance between the lips' centers
	lx := math.Sqrt((disk-lip)*(disk-lip) - half*half)
	px := lx - math.Sqrt((pocket+lip)*(pocket+lip)-half*half)
	rim := math.Atan2(half, lx) * 180 / math.Pi
	in := math.Atan2(half, lx-px) * 180 / math.Pi
	return []bend{
		{0, 0, disk + k.d, rim, 360 - rim},
		{lx, -half, lip + k.d, -rim, 180 - in},
		{px, 0, -(pocket - k.d), -in, in - 360},
		{lx, half, lip + k.d, in - 180, rim},
	}
}

// Cam angle: 90 degrees an arc, evenly.
func (k keyhole) Pieces() []plane.Piece {
	var ps []plane.Piece
	for i := range k.bends() {
		ps = append(ps, plane.Piece{From: float64(i) * 90, To: float64(i+1) * 90})
	}
	return ps
}

func onBend[T taylor.Scalar[T]](b bend, piece int, t T) (x, y T) {
	turn := (b.to - b.from) / 90
	s, c := t.Sub(t.Of(float64(piece) * 90)).Scale(turn).Add(t.Of(b.from)).Radians().SinCos()
	r := math.Abs(b.r)
	return c.Scale(r).Add(t.Of(b.x)), s.Scale(r).Add(t.Of(b.y))
}

func (k keyhole) At(piece int, t float64) plane.Frame {
	b := k.bends()[piece]
	x, y := onBend(b, piece, taylor.FVar(t))
	v := plane.Vector{X: x.Deriv(1), Y: y.Deriv(1)}
	return plane.Frame{P: plane.Point{X: x.C[0], Y: y.C[0]}, T: v.Unit(), K: 1 / b.r}
}

func (k keyhole) Over(piece int, t taylor.Interval, order int) (x, y taylor.I) {
	return onBend(k.bends()[piece], piece, taylor.IVar(t, order))
}

func (k keyhole) path() chain.Path {
	var p chain.Path
	bs := k.bends()
	for i, b := range bs {
		to := bs[(i+1)%len(bs)]
		e := chain.Element{Kind: chain.Arc, Center: plane.Point{X: b.x, Y: b.y}, CCW: b.r > 0, Source: chain.Span{From: float64(i) * 90, To: float64(i+1) * 90}}
		e.From = e.Center.Add(plane.Unit(plane.Degrees(b.from)).Scale(math.Abs(b.r)))
		e.To = plane.Point{X: to.x, Y: to.y}.Add(plane.Unit(plane.Degrees(to.from)).Scale(math.Abs(to.r)))
		p = append(p, e)
	}
	return p
}

// keyholeJob mills the keyhole with a cutter of the diameter, from cam angle start.
func keyholeJob(diameter, start float64) job {
	j := job{part(eccentric), mill(eccentric), machine(), 0.002}
	j.part.Curve = func(d float64) gcode.Curve { return keyhole{d} }
	j.op.Path = func(d float64) (chain.Path, error) { return keyhole{d}.path(), nil }
	j.op.ToolDiameter, j.op.Stock, j.op.StepDown, j.part.StartAt, j.part.ClampRadius = diameter, []float64{0}, 0, start, 5
	return j
}
