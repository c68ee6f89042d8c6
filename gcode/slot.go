package gcode

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// A groove is first cut on its pitch curve. The tool cannot plunge into full material: it
// goes down on a ramp along the curve, where the curve is a dwell when there is one, and
// turns once at each depth. Every second depth is ramped and cut backwards, so that all
// ramps lie on the same stretch. A tool as wide as the groove is done then.
//
// A narrower one goes on along both walls, inner wall first, once for each stock: down
// into the slot it has cut, an arc to the wall's path, a turn and a little more, an arc
// back. Each wall is climb-cut unless the spec says otherwise: the inner one clockwise, the
// outer one counterclockwise. No compensation.
//
// Part.Curve and Operation.Path count their offset from the pitch curve.

const (
	rampDegrees = 20.0 // cam angle of a ramp; common practice, no source
	slotOverlap = 2.0  // how far a turn runs past its end, cam angle
	wholeWidth  = 1e-6 // share of the groove's width by which a tool that fills it may differ
)

// fills reports whether the tool is as wide as the groove.
func (p Part) fills(op Operation) bool {
	return math.Abs(p.GrooveWidth-op.ToolDiameter) <= wholeWidth*p.GrooveWidth
}

// wallPass is one pass along one wall.
type wallPass struct {
	offset    float64 // of the tool's center from the pitch curve, outside positive, length
	stock     float64
	clockwise bool
	last      bool
}

// wallPasses returns the passes along the walls in their order.
func wallPasses(part Part, op Operation) []wallPass {
	if part.fills(op) {
		return nil
	}
	room := part.GrooveWidth/2 - op.radius()
	var all []wallPass
	for i, s := range op.Stock {
		climb := op.Direction != Conventional
		last := i == len(op.Stock)-1
		all = append(all, wallPass{s - room, s, climb, last}, wallPass{room - s, s, !climb, last})
	}
	return all
}

// wallDepths returns the Z of the cuts of a pass along a wall: in steps, the last at once.
func wallDepths(part Part, op Operation, g chain.Grid, w wallPass) []int64 {
	all := slotDepths(part, op, g)
	if w.last && len(op.Stock) > 1 {
		return all[len(all)-1:]
	}
	return all
}

// wall adds the cuts of one pass along a wall.
func (e *emitter) wall(part Part, op Operation, m Machine, w wallPass) error {
	l, err := op.loopAt(part, m, w.offset)
	if err != nil {
		return err
	}
	path, err := l.around(part.StartAt, slotOverlap, w.clockwise == part.CamClockwise)
	if err != nil {
		return err
	}
	first, last := path[0], path[len(path)-1]
	// Towards the pitch curve: inwards from the outer wall's path.
	in, out := part.towards(w, first.From, first.StartTangent()), part.towards(w, last.To, last.EndTangent())
	r := math.Abs(w.offset)
	lead := func(p plane.Point, t, n plane.Vector, back float64) chain.Element {
		c := p.Add(n.Scale(r))
		far := c.Add(t.Scale(back * r))
		a := chain.Element{Kind: chain.Arc, From: far, To: p, Center: c, CCW: t.Cross(n) > 0}
		if back > 0 {
			a.From, a.To = p, far
		}
		return a
	}
	whole := append(chain.Path{lead(first.From, first.StartTangent(), in, -1)}, path...)
	whole = append(whole, lead(last.To, last.EndTangent(), out, 1))
	c, err := snap(whole, m)
	if err != nil {
		return err
	}
	name := "INNER"
	if w.offset > 0 {
		name = "OUTER"
	}
	for _, z := range wallDepths(part, op, e.grid, w) {
		e.note(fmt.Sprintf("%s WALL STOCK %s DOWN TO %s", name, e.grid.Format(counts(e.grid, w.stock)), e.grid.Format(z)))
		e.line(Rapid, c.Segments[0].From, Block{})
		e.add(Block{Motion: Straight, Z: count(z), F: e.feed(op.PlungeFeed)})
		e.chain(c, Block{F: e.feed(op.Feed)}, false)
		e.z(Rapid, m.SafeZ, Block{})
	}
	return nil
}

// towards is the unit normal at a point of a wall's path, of direction t, that points to
// the pitch curve.
func (p Part) towards(w wallPass, at plane.Point, t plane.Vector) plane.Vector {
	n := t.Left()
	if (n.Dot(plane.Vector(at)) > 0) == (w.offset > 0) { // n points outwards
		n = n.Neg()
	}
	return n
}

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
	e.begin(op)
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
		down, err := snap(append(append(chain.Path(nil), ramp...), turn...), m)
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
	for _, w := range wallPasses(part, op) {
		if err := e.wall(part, op, m, w); err != nil {
			return Program{}, fmt.Errorf("wall at %g from the pitch curve: %w", w.offset, err)
		}
	}
	e.end(op)
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
