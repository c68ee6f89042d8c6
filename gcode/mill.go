package gcode

import (
	"fmt"
	"math"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Choices of this planner, stated in every program's header. Common practice, no
// source.
const (
	overlapDegrees = 4.0  // how far a milled pass runs past its start, cam angle
	leadShare      = 1.25 // radius of the tool center's lead arc over the tool's radius
	leadControl    = 2.0  // the same under full compensation by the control
	exitShare      = 1.5  // straight move off the contour over the tool's radius
)

// small returns a length given in both units, in the part's.
func (p Part) small(mm, inch float64) float64 {
	if p.Inch {
		return inch
	}
	return mm
}

// gap is the least distance between tool and blank where the tool plunges.
func (p Part) gap() float64 { return p.small(2, 0.08) }

// clockwise says whether the operation's milled passes go clockwise about the
// contour: with a right-hand tool under M3 that is climb cutting.
func (op Operation) clockwise() bool { return op.Direction != Conventional }

// Plan returns the program of the operation. Errors: a value that cannot be, a
// pass that does not reach, a path that does not fit on the grid.
func Plan(part Part, op Operation, m Machine) (Program, error) {
	if err := validate(part, op, m); err != nil {
		return Program{}, err
	}
	switch op.Process {
	case Wire:
		return planWire(part, op, m)
	case Slot:
		return planSlot(part, op, m)
	}
	if op.Rotary != 0 {
		return planPolar(part, op, m)
	}
	return planMill(part, op, m)
}

func planMill(part Part, op Operation, m Machine) (Program, error) {
	e := newEmitter(part, op, m)
	e.p.Registers = registers(op)
	e.p.Header = header(part, op, m)
	e.begin(op)
	for i := range op.Stock {
		if err := millPass(e, part, op, m, i); err != nil {
			return Program{}, fmt.Errorf("pass %d of %d: %w", i+1, len(op.Stock), err)
		}
	}
	e.end(op)
	return *e.p, nil
}

// safety returns the words that put a milling control into a known state.
func (e *emitter) safety() []Code {
	return []Code{e.units(), PlaneXY, Absolute, CompOff, LengthOff, CycleOff, FeedPerMinute, WorkFirst}
}

func (op Operation) speed() int { return int(math.Round(op.SpindleSpeed)) }

// depths returns the Z of every cut of pass i, in counts, top first. Passes go down in equal
// steps of at most StepDown; one that leaves what the last leaves goes at full depth, unless it is
// the first.
func depths(part Part, op Operation, g chain.Grid, i int) []int64 {
	total := part.Thickness + op.breakthrough(part)
	n := 1.0
	if op.StepDown > 0 && (i == 0 || op.Stock[i] != op.Stock[len(op.Stock)-1]) {
		n = math.Ceil(total/op.StepDown - 1e-9) // a step larger only by rounding is one step
	}
	var zs []int64
	for k := 1.0; k <= n; k++ {
		zs = append(zs, -counts(g, total*k/n))
	}
	return zs
}

// millPass adds the cuts of one pass.
func millPass(e *emitter, part Part, op Operation, m Machine, i int) error {
	c, err := millPath(part, op, m, i)
	if err != nil {
		return err
	}
	start, zs := c.Segments[0].From, depths(part, op, e.grid, i)
	for k, z := range zs {
		e.note(fmt.Sprintf("PASS %d STOCK %s DEPTH %d OF %d", i+1, e.grid.Format(counts(e.grid, op.Stock[i])), k+1, len(zs)))
		e.line(Rapid, start, Block{})
		if i == 0 && k == 0 {
			e.z(Rapid, m.SafeZ, Block{G: []Code{LengthOn}, H: number(op.Tool)})
		}
		e.add(Block{Motion: Straight, Z: count(z), F: e.feed(op.PlungeFeed)})
		on := Block{F: e.feed(op.Feed)}
		if op.Compensation != CompPath {
			on.G, on.D = []Code{sideCode(op.side())}, number(op.Tool)
		}
		from := len(e.p.Blocks)
		e.chain(c, on, op.Compensation != CompPath)
		e.contourFeed(op, c, e.p.Blocks[from:])
		e.z(Rapid, m.SafeZ, Block{})
	}
	return nil
}

// contourFeed sets F on arcs so that the feed is held where the tool touches, not at its center:
// on an arc of radius R of the center the contour has R less the tool's radius where it bulges, R
// and the radius where it is hollow (elementary). Lines keep the feed.
func (e *emitter) contourFeed(op Operation, c chain.Chain, blocks []Block) {
	if !op.ContourFeed {
		return
	}
	last := counts(e.grid, op.Feed)
	path := c.Path()
	for i := range blocks {
		want := counts(e.grid, contourFeed(op.Feed, op.radius(), op.clockwise(), path[i]))
		if i == 0 || want != last {
			blocks[i].F = count(want)
		}
		last = want
	}
}

// contourFeed is the feed of the tool's center on an element, length/min.
func contourFeed(feed, radius float64, clockwise bool, e chain.Element) float64 {
	if e.Kind != chain.Arc {
		return feed
	}
	r := e.From.Dist(e.Center)
	if e.CCW == clockwise { // hollow: the arc turns away from the contour's side
		return feed * r / (r + radius)
	}
	if r <= radius { // the contour is a corner there
		return feed
	}
	return feed * r / (r - radius)
}

// side is +1 when the tool is on the left of travel, the contour on the right.
func (op Operation) side() float64 {
	if op.clockwise() {
		return 1
	}
	return -1
}

// millPath returns the written path of pass i with its leads, on the grid.
func millPath(part Part, op Operation, m Machine, i int) (chain.Chain, error) {
	r := op.radius()
	written, leadRadius := r+op.Stock[i], leadShare*r
	if op.Compensation == CompControl {
		written, leadRadius = op.Stock[i], leadControl*r+r
	}
	l, err := op.loopAt(part, m, written)
	if err != nil {
		return chain.Chain{}, err
	}
	path, err := l.around(part.StartAt, op.overlap(), op.clockwise() == part.CamClockwise)
	if err != nil {
		return chain.Chain{}, err
	}
	in, out := leadIn(path, op.side(), leadRadius), leadOut(path, op.side(), leadRadius)
	far := part.plungeRadius(op, reach(l.path))
	path = append(append(in.in(in.outside(far, exitShare*r)), path...), out.away(out.straight(exitShare*r))...)
	return snap(path, m)
}

// around returns a whole turn from cam angle t and overlap degrees more, with
// growing angle, or backwards.
func (l loop) around(t, overlap float64, back bool) (chain.Path, error) {
	if !back {
		return l.between(t, t+360+overlap)
	}
	p, err := l.between(t-360-overlap, t)
	return p.Reverse(), err
}

// plungeRadius returns the distance from the camshaft axis at which the tool is
// outside the blank. Without a blank in the spec the farthest that the tool's center
// goes in the pass, a length, stands for its rim.
func (p Part) plungeRadius(op Operation, farthest float64) float64 {
	if p.BlankDiameter > 0 {
		return p.BlankDiameter/2 + op.radius() + p.gap()
	}
	return farthest + op.radius() + p.gap()
}

// reach returns a distance from the camshaft axis, length, beyond which no point of the path is.
func reach(path chain.Path) float64 {
	lo, hi := path.Bounds()
	far := 0.0
	for _, c := range []plane.Point{lo, hi, {X: lo.X, Y: hi.Y}, {X: hi.X, Y: lo.Y}} {
		far = math.Max(far, c.Radius())
	}
	return far
}
