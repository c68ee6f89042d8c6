// Package read reads DXF outlines back, so that what a program will cut can be
// proven from the bytes it will be given. It shares no code with a writer.
//
// It is strict where ordinary readers are lenient: a file that leaves room for
// doubt about shape, scale or place is refused with the line and the reason. So
// every entity must be of a kind listed here and lie flat in the plane Z0, with all its groups known; figures must
// be finite; a layer must be declared, visible and unique; a block must be
// empty; sections come in the format's order and the file ends at EOF.
//
// Taken are AC1015 ("2000") and AC1009 ("r12"), with line ends LF or CR LF:
// LWPOLYLINE (not in r12), two-dimensional POLYLINE, CIRCLE, ARC, LINE, and
// TEXT that begins at its point. The format is that of the public "DXF
// Reference" of its vendor.
package read

import (
	"fmt"

	"lobewright/synth/plane"
)

// LargestFile bounds the size of a file, in bytes.
const LargestFile = 64 << 20

// LargestFigure bounds every coordinate, length and bulge.
const LargestFigure = 1e9

// Unit is the unit of length a file declares.
type Unit string

const (
	Unknown    Unit = ""   // an r12 file that does not say
	Millimeter Unit = "mm" // $INSUNITS 4
	Inch       Unit = "in" // $INSUNITS 1
)

// Error is a fault of a file and its place.
type Error struct {
	Line int // from 1
	Text string
}

// Error says the line and the fault.
func (e *Error) Error() string { return fmt.Sprintf("line %d: %s", e.Line, e.Text) }

func fault(line int, message string, args ...any) error {
	return &Error{line, fmt.Sprintf(message, args...)}
}

// File is what a DXF file says. Lengths are in its unit, angles in degrees
// counterclockwise from +X. Entities are in the order of the file.
type File struct {
	Version   string      // "2000" or "r12"
	Unit      Unit        // never Unknown in version 2000
	Min, Max  plane.Point // extents as the header states them
	Layers    []Layer
	Polylines []Polyline
	Circles   []Circle
	Arcs      []Arc
	Lines     []Line
	Texts     []Text
}

// Layer is a declared layer.
type Layer struct {
	Name     string
	Color    int // color index, 1 to 255
	LineType string
	Line     int // of the file
}

// Polyline is a chain of lines and arcs through its points: Bulges[i] is the
// tangent of a quarter of the sweep from Points[i] to the next point, positive
// counterclockwise, 0 a line. A closed one goes on from its last point to its
// first. Neighboring points differ; the last bulge of an open one is 0.
type Polyline struct {
	Layer  string
	Points []plane.Point
	Bulges []float64
	Closed bool
	Line   int // of the file
}

// Circle is a full circle.
type Circle struct {
	Layer  string
	Center plane.Point
	Radius float64 // above 0
	Line   int
}

// Arc runs counterclockwise from the polar angle From to the polar angle To, in degrees.
type Arc struct {
	Layer    string
	Center   plane.Point
	Radius   float64 // above 0
	From, To float64
	Line     int
}

// Line is a straight line; its ends differ.
type Line struct {
	Layer    string
	From, To plane.Point
	Line     int
}

// Text is a line of text, its codes decoded.
type Text struct {
	Layer  string
	At     plane.Point
	Height float64 // above 0
	Angle  float64 // degrees
	Value  string
	Line   int
}

// PolylinesOn returns the polylines of a layer.
func (f *File) PolylinesOn(layer string) []Polyline {
	var on []Polyline
	for _, p := range f.Polylines {
		if p.Layer == layer {
			on = append(on, p)
		}
	}
	return on
}

// Parse reads a file. The error is an *Error.
func Parse(data []byte) (*File, error) {
	pairs, err := scan(data)
	if err != nil {
		return nil, err
	}
	p := &parser{lineTypes: map[string]bool{}, layers: map[string]bool{}, names: map[string]bool{}}
	if err := p.sections(pairs); err != nil {
		return nil, err
	}
	return &p.file, nil
}
