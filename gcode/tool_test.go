package gcode_test

import (
	"math"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/synth/plane"
)

// The compensation side, proven by moving the tool: from the program as read, with
// nothing but the definition (G41: the tool is on the left of travel) and the
// register's value, the tool's body is laid beside every move. It stays outside the contour
// and touches it. The teeth of a right-hand cutter under M3 turn clockwise seen
// from above; climb cutting is when the tooth in the cut runs against the tool's
// travel, with the material.
func TestToolSideAndCuttingDirection(t *testing.T) {
	for _, o := range []oval{ellipse, eccentric, {3, -2, 45, 38, 0, -1}} {
		for _, c := range []gcode.Compensation{gcode.CompPath, gcode.CompWear, gcode.CompControl} {
			for _, d := range []gcode.Direction{gcode.Climb, gcode.Conventional} {
				j := job{part(o), mill(o), machine(), 0.002}
				j.op.Compensation, j.op.Direction, j.op.Stock, j.op.StepDown = c, d, []float64{0}, 0
				_, _, back := j.program(t)
				moveTool(t, j, back)
			}
		}
	}
}

func moveTool(t *testing.T, j job, back *read.Program) {
	t.Helper()
	register := 0.0
	if j.op.Compensation == gcode.CompControl {
		register = j.op.ToolDiameter / 2
	}
	whole, r := samples(j.part.Curve(0)), j.op.ToolDiameter/2
	least, cuts := math.Inf(1), 0
	for i, m := range back.Moves {
		if m.Kind != read.Arc {
			continue // straight moves switch compensation, where controls differ
		}
		if back.Moves[i-1].Comp != m.Comp {
			t.Fatal("compensation is switched on an arc")
		}
		for k := range 9 {
			p, travel := onMove(m, float64(k)/8)
			switch m.Comp {
			case read.Left:
				p = p.Add(travel.Left().Scale(register))
			case read.Right:
				p = p.Add(travel.Left().Scale(-register))
			}
			d, contact := nearestOf(p, whole)
			least = math.Min(least, d)
			if within(p, whole) {
				t.Fatalf("%s %s: the tool's center is inside the contour", j.op.Compensation, j.op.Direction)
			}
			if d > r+0.01 {
				continue // lead
			}
			cuts++
			arm := contact.Sub(p)
			tooth := plane.Vector{X: arm.Y, Y: -arm.X} // clockwise
			if along := tooth.Dot(travel); (along < 0) != (j.op.Direction == gcode.Climb) {
				t.Fatalf("%s %s: the tooth in the cut runs %+.3g along travel", j.op.Compensation, j.op.Direction, along)
			}
		}
	}
	if math.Abs(least-r) > 2*j.eps || cuts < 100 {
		t.Errorf("%s %s: the tool comes to %.6g of the contour, its radius is %g; %d samples in the cut", j.op.Compensation, j.op.Direction, least, r, cuts)
	}
}

// onMove returns a point on an arc and the direction of travel, from the words of the
// move alone.
func onMove(m read.Move, f float64) (plane.Point, plane.Vector) {
	a, b := m.From.Sub(m.Center), m.To.Sub(m.Center)
	turn := math.Atan2(a.Cross(b), a.Dot(b))
	if m.CCW && turn < 0 {
		turn += 2 * math.Pi
	}
	if !m.CCW && turn > 0 {
		turn -= 2 * math.Pi
	}
	arm := a.Turn(plane.Angle(turn * f))
	travel := arm.Unit().Left()
	if !m.CCW {
		travel = travel.Neg()
	}
	return m.Center.Add(arm), travel
}

func nearestOf(p plane.Point, ps []plane.Point) (float64, plane.Point) {
	best, least := ps[0], math.Inf(1)
	for _, q := range ps {
		if d := p.Dist(q); d < least {
			best, least = q, d
		}
	}
	return least, best
}

// within is the even-odd rule on the polygon.
func within(p plane.Point, ps []plane.Point) bool {
	in := false
	for i, a := range ps {
		b := ps[(i+1)%len(ps)]
		if (a.Y > p.Y) != (b.Y > p.Y) && p.X < a.X+(p.Y-a.Y)/(b.Y-a.Y)*(b.X-a.X) {
			in = !in
		}
	}
	return in
}
