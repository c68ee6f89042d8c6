package gcode

import (
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
)

// Curve is what planning and proof need of a closed curve: a plate cam's contour
// or a parallel curve of it, over cam angle in degrees.
type Curve interface {
	Pieces() []plane.Piece
	At(piece int, t float64) plane.Frame
	Over(piece int, t taylor.Interval, order int) (x, y taylor.I)
}

// Part is the cam as every operation on it sees it.
type Part struct {
	Name, Title, Revision string
	Inch                  bool    // lengths are inches, else mm
	Thickness             float64 // length, above 0
	GrooveDepth           float64 // length, of a slot
	GrooveWidth           float64 // length, of a slot
	CamClockwise          bool    // the camshaft's turning direction, seen on the marked face
	BlankDiameter         float64 // length; 0 when not known
	ClampRadius           float64 // length about the camshaft axis; 0 when there is no clamp
	BoreDiameter          float64 // length, for the header; 0 when there is none
	StartAt               float64 // cam angle, degrees, where a milled pass begins and ends

	// Curve returns the curve parallel to the contour at offset (a length, 0 or
	// more) to the outside, over the same cam angles. With CamClockwise the
	// contour runs counterclockwise with growing angle, else clockwise. Of a slot the
	// offset is from the pitch curve, and may be below 0.
	Curve func(offset float64) Curve
}

// outside returns +1 when the outside of the contour is on the left of growing cam
// angle, else -1.
func (p Part) outside() float64 {
	if p.CamClockwise {
		return -1
	}
	return 1
}

// Process is a way of cutting.
type Process string

const (
	Mill Process = "mill"
	Wire Process = "wire"
	Slot Process = "slot" // a groove milled on its pitch curve, and along its walls by a tool narrower than it
)

// Compensation says who moves the path by the tool's radius.
type Compensation string

const (
	// CompPath: the tool-center path is written, no G41 or G42.
	CompPath Compensation = "path"
	// CompWear: the tool-center path is written under G41 or G42; the register
	// holds 0 at first and a small number to trim the size.
	CompWear Compensation = "wear"
	// CompControl: the contour grown by the stock is written under G41 or G42;
	// the register holds the tool's radius (wire: the offset of the pass).
	CompControl Compensation = "control"
)

// Direction is the cutting direction of a milled pass.
type Direction string

const (
	Climb        Direction = "climb"        // clockwise about the contour, tool on the left
	Conventional Direction = "conventional" // counterclockwise, tool on the right
)

// Tab is the stretch that holds the cam while the wire cuts the rest.
type Tab struct {
	Width float64 // length along the contour, above 0
	At    float64 // polar angle of its middle, degrees
}

// StartHole is where the wire is threaded.
type StartHole struct {
	Radius float64 // length from the camshaft axis, outside the contour
	At     float64 // polar angle, degrees
}

// Slots are lines of the user's own for a wire machine: how to thread and cut the wire, and the generator's conditions for each
// pass. Empty ones are left to the machine.
type Slots struct {
	Thread, Cut string
	Conditions  []string // by pass
}

// Operation is one program.
type Operation struct {
	Number       int     // its place in the spec, from 1
	Program      int     // program number, 1 to 9999; 0 for Number
	Coolant      int     // M word that turns it on: 7 or 8; 0 for none
	Process      Process // Mill or Wire
	Compensation Compensation
	Feed         float64 // length/min; wire: 0 leaves the feed to the generator

	// Mill.
	Tool         int     // tool number, and the number of its H and D registers, above 0
	ToolDiameter float64 // length
	SpindleSpeed float64 // rpm, printed as a whole number
	PlungeFeed   float64 // length/min
	StepDown     float64 // length; 0 means full depth
	Stock        []float64
	Direction    Direction
	Overlap      float64 // degrees a pass runs past its start; 0 for 4
	Breakthrough float64 // length the tool goes below the part; 0 for 1 mm or 0.04 inch
	ContourFeed  bool    // Feed is held at the contour, else at the tool's center

	// Rotary is the letter of the rotary axis; 0 when there is none. A barrel: whether a narrow tool is shifted by it alone.
	Rotary      byte
	RotaryShift bool

	// Spirals returns, of a plate that is milled or ground on a rotary and a radial axis, lines near the tool center's path
	// parallel to the contour at offset, in the plane where X is the polar angle in radians times scale and Y the distance from the camshaft
	// axis: one turn, in the direction of growing cam angle, every element with its Source.
	Spirals func(offset float64) (path chain.Path, scale float64, err error)
	Grinds  bool // a wheel, else a cutter

	// Wire.
	WireDiameter float64   // length
	Offsets      []float64 // wire center to contour, a length for each pass
	Slots        Slots
	Tab          Tab
	StartHole    StartHole

	// Path returns the path parallel to the contour at offset (a length, 0 or
	// more) to the outside: not on the grid, closed, with continuous tangents
	// when it has arcs, in the direction of growing cam angle, every element
	// with its Source. An error says that the pass does not reach.
	Path func(offset float64) (chain.Path, error)
}

// programNumber returns the O word.
func (op Operation) programNumber() int {
	if op.Program > 0 {
		return op.Program
	}
	return op.Number
}

// overlap returns how far a milled pass runs past its start, degrees of cam angle.
func (op Operation) overlap() float64 {
	if op.Overlap > 0 {
		return op.Overlap
	}
	return overlapDegrees
}

// breakthrough returns how far the tool goes below the part, length.
func (op Operation) breakthrough(p Part) float64 {
	if op.Breakthrough > 0 {
		return op.Breakthrough
	}
	return p.small(1, 0.04)
}

// on and off are the M words before and after the cutting.
func (op Operation) on() []int {
	if op.Coolant > 0 {
		return []int{3, op.Coolant}
	}
	return []int{3}
}

func (op Operation) off() []int {
	if op.Coolant > 0 {
		return []int{9, 5}
	}
	return []int{5}
}

// radius returns the tool's radius, a length.
func (op Operation) radius() float64 { return op.ToolDiameter / 2 }

// centers returns the distance of the tool's or wire's center from the finished
// contour for every pass, a length.
func (op Operation) centers() []float64 {
	if op.Process == Wire {
		return op.Offsets
	}
	c := make([]float64, len(op.Stock))
	for i, s := range op.Stock {
		c[i] = op.radius() + s
	}
	return c
}

// Machine describes the control that will read the programs.
type Machine struct {
	Decimals     int     // 0 to 9, of lengths and feeds
	AbsoluteArcs bool    // I and J are the center itself, else seen from the arc's start
	ArcMismatch  float64 // length: largest difference of an arc's radii
	BlockNumbers bool
	Semicolons   bool // comments follow a semicolon
	MaxBlocks    int  // 0 when not limited
	Limits       Limits
	RadiusArcs   bool     // arcs are written with R, else with their center
	Path         PathMode // what the control does at corners; empty leaves it as it is set
	PathBlend    float64  // length: what it may round corners by under Blended; 0 leaves it to the control
	Start, End   []string // lines of the user's own, after the first modes and before the last
	SafeZ        float64  // length above the top of the blank

	RotaryDecimals int     // 0 to 9, of degrees
	RotaryModulo   bool    // the axis rolls over: rotary words are 0 to 360 and the control goes the short way, else they run on
	RotaryTable    bool    // growing rotary words turn the work, else the tool about it, counterclockwise seen on the marked face
	RotarySpeed    float64 // largest speed of the rotary axis, degrees/min; 0 when not limited
	RotaryRate     float64 // largest acceleration of the rotary axis, degrees/s²; 0 when not limited
	InverseSeconds bool    // F under G93 is the seconds of the move, else one over its minutes
}

// Limits are what a control takes; 0 where there is none.
type Limits struct {
	Radius float64 // length: an arc above it is written as lines
	Chord  float64 // length: an arc with a shorter one is written as a line
	Sweep  float64 // degrees: an arc above it is split; 90 when 0
	Bytes  int     // of a program
	Line   int     // characters of a line
}

// PathMode is what a control does where the path has corners.
type PathMode string

const (
	Exact   PathMode = "exact" // G61: it keeps to the path
	Blended PathMode = "blend" // G64: it may round corners
)

func (m Machine) grid() chain.Grid { return chain.Grid{Decimals: m.Decimals} }
