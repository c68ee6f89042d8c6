package gcode

import (
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
)

// Failure is one thing a program does that it must not, or does not do.
//
// IDs: "deviation" (a cut is further than Eps from its curve), "coverage" (a cut
// does not go all around), "clearance" (a lead, link, plunge or rapid comes too near to
// the finished contour), "lead" (a lead is not tangent to its cut), "reach" (the tool on its own cut gouges another
// flank), "clamp", "blank" (a rapid through material), "arc-mismatch", "block-count",
// "depth", "feed", "rotary-speed", "rotary-acceleration", "groove-width" (the tool is not as wide as the groove), "words" (units, tool, spindle, compensation, end), "order" (wire).
type Failure struct {
	ID       string
	Value    float64 // found; NaN when it is no number
	Limit    float64 // allowed; NaN when it is no number
	CamAngle float64 // degrees, NaN when it has no place on the cam
	Line     int     // of the file; 0 when it has none
	N        int     // block number there; -1 when it has none
	Text     string
}

// CutResult is one cut as read.
type CutResult struct {
	Offset      float64 // distance of the tool's center from the finished contour, length
	Z           float64 // mill
	First, Last int     // lines of the file, without leads
	Lines, Arcs int     // its moves by kind
	Clockwise   bool
	Deviation   certify.Deviation // of the written path from its exact parallel curve; Bound is +Inf when there is none
}

// Result is what was proven of a program as read.
type Result struct {
	Cuts []CutResult

	Deviation       certify.Deviation // of the cut with the largest Bound
	Clearance       float64           // least margin of leads, links and plunges to what they must keep, length; +Inf when there are none
	ClearanceLine   int
	ArcMismatch     float64 // largest, length
	ArcMismatchLine int
	Rotary          Spin // where the work turns
	Blocks, Bytes   int
	Lines, Arcs     int        // feed moves by kind
	ShortestMove    float64    // of the feed moves in the plane, length
	PathLength      float64    // feed moves, plunges among them, length
	Seconds         float64    // feed moves at their feeds, rapids at RapidMM or RapidInch a minute; 0 when no feed is given
	Finish          chain.Path // the last cut as written, growing cam angle (wire: its longest stretch)
	FinishOffset    float64    // distance of Finish from the finished contour, length
	Failures        []Failure
}

// Spin is the hardest that a program drives its rotary axis, with the lines of the file; 0 when it has none.
type Spin struct {
	Speed, Rate         float64 // degrees/min, degrees/s²
	SpeedLine, RateLine int
}

// Rapid rates that Seconds assumes, length/min. Common practice, no source.
const (
	RapidMM   = 5000.0
	RapidInch = 200.0
)
