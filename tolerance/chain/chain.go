// Package chain holds written paths: lines and arcs as floats (Path) and on the
// output grid (Chain), where a coordinate is a whole number of counts and is
// printed as that integer with a point in it.
package chain

import (
	"lobewright/synth/plane"
)

// Kind says what a segment is.
type Kind uint8

const (
	Line Kind = iota
	Arc
)

// Span is the stretch of curve parameter (cam angle, degrees) that a segment
// stands for. To may exceed 360 after a walk past the curve's start. The zero
// Span means not known (a path read from a file).
type Span struct{ From, To float64 }

// Element is a line or arc as floats. For an arc the distances of From and To
// from Center may differ a little (rounding on a grid); every point a control
// may make of it lies between the two radii about Center, or within Slack of that.
type Element struct {
	Kind     Kind
	From, To plane.Point
	Center   plane.Point // arcs only
	CCW      bool        // arcs only: counterclockwise as seen on the marked face
	Slack    float64     // length: error bound of Center and radius, 0 when they are exact
	Source   Span
}

// Path is a sequence of elements, each starting where the last one ended.
type Path []Element

// Point is a point on an output grid, in counts.
type Point struct{ X, Y int64 }

// Grid is an output grid: one count is 10^-Decimals of the unit of length.
type Grid struct{ Decimals int }

// Segment is a line or arc on a grid.
type Segment struct {
	Kind     Kind
	From, To Point
	Center   Point // arcs only
	CCW      bool  // arcs only
	Source   Span
}

// Chain is a path on a grid.
type Chain struct {
	Grid     Grid
	Segments []Segment
}
