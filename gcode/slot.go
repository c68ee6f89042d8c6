package gcode

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// A groove is cut on its pitch curve by a tool as wide as it is. The tool cannot plunge
// into full material: it goes down on a ramp along the curve, where the curve is a dwell
// when there is one, and turns once at each depth. Every second depth is ramped and cut
// backwards, so that all ramps lie on the same stretch. No compensation: the tool's size
// is the groove's width.
//
// Part.Curve(0) and Operation.Path(0) are the pitch curve.

const (
	rampDegrees = 20.0 // cam angle of a ramp; common practice, no source
	slotOverlap = 2.0  // how far a turn runs past its end, cam angle
)

// slotDepths returns the Z of every turn, in counts, top first.
func slotDepths(part Part, op Operation, g chain.Grid) []int64 {
	n := 1.0
	if op.StepDown > 0 {
		n = math.Ceil(part.GrooveDepth/op.StepDown - 1e-9)
	}
	var zs []int64
	for k := 1.0; k <= n; k++ {
		zs = append(zs, -counts(g, part.GrooveDepth*k/n))
	}
	return zs
}

func planSlot(part Part, op Operation, m Machine) (Program, error) {
	e := newEmitter(part, op, m)
	e.p.Header = header(part, op, m)
	l, err := op.loopAt(part, m, 0)
	if err != nil {
		return Program{}, err
	}
	e.add(Block{G: e.safety()})
	e.add(Block{G: []Code{e.arcMode()}})
	e.add(Block{T: number(op.Tool), M: []int{6}})
	e.add(Block{S: number(op.speed()), M: []int{3}})
	from, top := part.StartAt-rampDegrees/2, int64(0)
	for k, z := range slotDepths(part, op, e.grid) {
		// Forwards from a to b and one turn; backwards the same from its end.
		a, b := from, from+rampDegrees
		end := b + 360 + slotOverlap
		ramp, err := l.between(a, b)
		if err != nil {
			return Program{}, err
		}
		turn, err := l.between(b, end)
		if err != nil {
			return Program{}, err
		}
		if k%2 == 1 {
			if ramp, err = l.between(end-rampDegrees, end); err != nil {
				return Program{}, err
			}
			if turn, err = l.between(end-rampDegrees-360-slotOverlap, end-rampDegrees); err != nil {
				return Program{}, err
			}
			ramp, turn = ramp.Reverse(), turn.Reverse()
			from = end - rampDegrees - 360 - slotOverlap
		}
		down, err := snap(append(append(chain.Path(nil), ramp...), turn...), m.grid())
		if err != nil {
			return Program{}, err
		}
		e.note(fmt.Sprintf("TURN %d DOWN TO %s", k+1, e.grid.Format(z)))
		if k == 0 {
			start := down.Segments[0].From
			e.line(Rapid, start, Block{})
			e.z(Rapid, m.SafeZ, Block{G: []Code{LengthOn}, H: number(op.Tool)})
			e.z(Straight, 0, Block{F: e.feed(op.PlungeFeed)})
		}
		e.descend(down, ramp[len(ramp)-1].To, top, z, op)
		top = z
	}
	e.z(Rapid, m.SafeZ, Block{})
	e.add(Block{M: []int{5}})
	e.add(Block{G: e.safety()})
	e.add(Block{M: []int{30}})
	return *e.p, nil
}

// descend adds the segments of a ramp, which go down evenly from one height to another
// (counts) as far as its end, and the turn behind it.
func (e *emitter) descend(c chain.Chain, end plane.Point, from, to int64, op Operation) {
	path, n, near := c.Path(), 0, math.Inf(1)
	for i, s := range path {
		if d := s.To.Dist(end); d < near {
			near, n = d, i+1
		}
	}
	whole, gone := 0.0, 0.0
	for _, s := range path[:n] {
		whole += s.Length()
	}
	for i, s := range c.Segments {
		var on Block
		if i == 0 {
			on.F = e.feed(op.PlungeFeed)
		}
		if i == n {
			on.F = e.feed(op.Feed)
		}
		if i < n {
			gone += path[i].Length()
			z := from + int64(math.Round(float64(to-from)*gone/whole))
			if i == n-1 {
				z = to
			}
			on.Z = count(z)
		}
		e.chain(chain.Chain{Grid: c.Grid, Segments: []chain.Segment{s}}, on, false)
	}
}
