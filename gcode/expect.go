package gcode

import (
	"lobewright/gcode/read"
	"lobewright/tolerance/chain"
)

// Cut is one run of the tool around the contour that a program must make.
type Cut struct {
	Offset float64 // distance of the tool's center from the finished contour, length
	Stock  float64 // distance of the written path from it: Offset, or Offset less Radius under CompControl
	Z      float64 // mill: height of the cut, exactly as written

	// Slot: a cut along a wall, and its direction. Offset and Stock are from the pitch curve.
	Wall, Clockwise bool
}

// Expect is what a program of an operation must do, from the operation and the
// exact curves.
type Expect struct {
	Process      Process
	Number       int
	Inch         bool
	Eps          float64 // length: largest deviation of a cut, either way
	CamClockwise bool
	Curve        func(offset float64) Curve
	Rotary       byte    // letter of the rotary axis; 0 when there is none
	Modulo       bool    // the rotary axis rolls over and goes the short way
	Turning      Turning // of a plate on a rotary and a radial axis
	Grinds       bool    // a wheel, else a cutter
	Compensation Compensation
	Registers    []Register // what the D registers hold
	Feed         float64    // length/min as written; 0 for none
	FeedStep     float64    // what F is printed in
	ContourFeed  bool       // Feed is held at the contour: on arcs F is another
	Fluid        bool       // the coolant is on while the tool cuts
	MaxBlocks    int        // 0 when not limited
	Limits       Limits
	Path         PathMode
	PathBlend    float64  // length
	Own          []string // lines of the user's own, in order
	ArcMismatch  float64  // length

	// Cuts: for a mill every one in order; for a wire one a pass, wanted all
	// around, in stretches that may come back and forth.
	Cuts []Cut

	// Mill.
	Clockwise     bool // direction of every cut about the contour
	Radius        float64
	Tool, Speed   int
	PlungeFeed    float64
	SafeZ         float64
	BlankDiameter float64 // 0 when not known: then no rapid below SafeZ may move sideways
	ClampRadius   float64 // 0 when there is no clamp
	HalfWidth     float64 // slot: half the groove's width
}

// Expected returns what the operation's program must do, each cut within eps (a
// length) of its exact parallel curve.
func Expected(part Part, op Operation, m Machine, eps float64) Expect {
	g := m.grid()
	written := func(x float64) float64 { return gridValue(g, x) }
	x := Expect{Process: op.Process, Number: op.programNumber(), Fluid: op.Coolant > 0, ContourFeed: op.ContourFeed, Inch: part.Inch, Eps: eps, CamClockwise: part.CamClockwise, Curve: part.Curve,
		Compensation: op.Compensation, Registers: registers(op), Feed: written(op.Feed), FeedStep: g.Step(), MaxBlocks: m.MaxBlocks, ArcMismatch: m.ArcMismatch, Limits: m.Limits, Path: m.Path, PathBlend: written(m.PathBlend), Own: ownLines(op, m)}
	if op.Process == Wire {
		for _, o := range op.Offsets {
			x.Cuts = append(x.Cuts, Cut{Offset: o, Stock: writtenOffset(op.Compensation, o, o)})
		}
		return x
	}
	if op.Process == Slot {
		height := func(z int64) float64 { return float64(z) / float64(counts(g, 1)) }
		for _, z := range slotDepths(part, op, g) {
			x.Cuts = append(x.Cuts, Cut{Z: height(z)})
		}
		for _, w := range wallPasses(part, op) {
			for _, z := range wallDepths(part, op, g, w) {
				x.Cuts = append(x.Cuts, Cut{Offset: w.offset, Stock: w.offset, Z: height(z), Wall: true, Clockwise: w.clockwise})
			}
		}
		x.HalfWidth = part.GrooveWidth / 2
	}
	for i, c := range op.centers() {
		if op.Process == Slot {
			break
		}
		for _, z := range depths(part, op, g, i) {
			x.Cuts = append(x.Cuts, Cut{Offset: c, Stock: writtenOffset(op.Compensation, c, op.radius()), Z: float64(z) / float64(counts(g, 1))})
		}
	}
	x.Clockwise, x.Radius, x.Tool, x.Speed = op.clockwise(), op.radius(), op.Tool, op.speed()
	if op.Rotary != 0 && op.Process == Mill {
		x.Rotary, x.Modulo, x.Grinds, x.Turning = op.Rotary, m.RotaryModulo, op.Grinds, Turning{way: turningOf(part.CamClockwise, m), Speed: m.RotarySpeed, Rate: m.RotaryRate, Seconds: m.InverseSeconds, band: part.slideBand()}
	}
	x.PlungeFeed, x.SafeZ = written(op.PlungeFeed), written(m.SafeZ)
	x.BlankDiameter, x.ClampRadius = part.BlankDiameter, part.ClampRadius
	return x
}

// ownLines are the lines of the user's own in a program that is not wire; those of a wire's passes depend on their order.
func ownLines(op Operation, m Machine) []string {
	if op.Process == Wire {
		return nil
	}
	return append(append([]string(nil), m.Start...), m.End...)
}

// writtenOffset is the offset of the written path from the contour.
func writtenOffset(c Compensation, center, radius float64) float64 {
	if c == CompControl {
		return center - radius
	}
	return center
}

// gridValue returns x rounded to the grid, as a reader gets it back.
func gridValue(g chain.Grid, x float64) float64 {
	return float64(counts(g, x)) / float64(counts(g, 1))
}

// register returns what the D register holds; ok is false when the set-up table
// has no such register.
func (x Expect) register(d int) (value float64, ok bool) {
	for _, r := range x.Registers {
		if r.Number == d {
			return r.Value, true
		}
	}
	return 0, false
}

// comp returns the compensation state a cut in this direction needs.
func (x Expect) comp(clockwise bool) read.Comp {
	switch {
	case x.Compensation == CompPath:
		return read.Off
	case clockwise:
		return read.Left
	}
	return read.Right
}
