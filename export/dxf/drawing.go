// Package dxf writes the true-scale outline of a cam as a DXF file, for the
// shops that cut from it and the programs that draw it.
//
// The problem. A DXF reader rarely complains. Of four readers tried, all took
// a file with NaN for a coordinate, one hung on a line feed inside a text, and
// none noticed a file without units, which is then read as millimeters or
// inches at the reader's whim. So the writer must be the one that refuses.
//
// The obvious method is to hand the geometry to a library's drawing object.
// The one used here keeps line types and layer 0 in package variables that
// every drawing changes, prints floats with sixteen decimals, and computes
// extents without the bulge of an arc. It serves well as a set of sections,
// tables and entities, and that is what is taken from it; the order of the
// sections, the numbers, the header, the texts and the polyline are written here.
//
// What is promised:
//   - coordinates of a polyline are the decimals of its grid, digit for digit;
//     all other numbers are the shortest decimals that give the same float64 back;
//   - the same drawing gives the same bytes, from any number of goroutines;
//   - only printable ASCII, line ends CR LF, as the format's first programs write;
//   - Write refuses what some reader would misread; it repairs nothing.
//
// Two versions are written. "2000" (AC1015) has LWPOLYLINE, and units in its
// header. "r12" (AC1009) is for older controls: POLYLINE with VERTEX, and no
// unit variable, for R12 has none; a comment at the head of the file names the unit, and the
// drawing should say it in a note and show a check line.
//
// The format is that of the public "DXF Reference" of its vendor, releases R12 and 2000.
package dxf

import (
	"fmt"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Version says which release of the format is written.
type Version string

const (
	R2000 Version = "2000" // AC1015: LWPOLYLINE, units in the header
	R12   Version = "r12"  // AC1009: POLYLINE and VERTEX, for old readers
)

// Drawing is what goes into one file. Lengths are in millimeters, or in inches when
// Inch is set; angles are in degrees, counterclockwise from +X.
type Drawing struct {
	Inch      bool
	Version   Version
	Polylines []Polyline
	Circles   []Circle
	Arcs      []Arc
	Lines     []Line
	Texts     []Text
}

// Polyline is a chain of lines and arcs. The bulge of a vertex is
// the tangent of a quarter of the sweep from it to the next vertex: 0 a line, positive
// counterclockwise, 1 a half circle. A closed one returns from its last vertex to its
// first, which is not repeated; the last bulge of an open one is 0.
type Polyline struct {
	Layer    string
	Grid     chain.Grid // printed decimals, 0 to LargestDecimals
	Vertices []chain.Vertex
	Closed   bool
}

// Path is the polyline as any reader must rebuild it from its points and bulges.
func (p Polyline) Path() chain.Path {
	var points []plane.Point
	var bulges []float64
	for _, v := range p.Vertices {
		points, bulges = append(points, p.Grid.Value(v.P)), append(bulges, v.Bulge)
	}
	return chain.FromBulges(points, bulges, p.Closed)
}

// Circle is a full circle.
type Circle struct {
	Layer  string
	Center plane.Point
	Radius float64 // length, above 0
}

// Arc is an arc counterclockwise from the polar angle From to the polar angle To.
type Arc struct {
	Layer    string
	Center   plane.Point
	Radius   float64 // length, above 0
	From, To float64 // degrees, -360 to 360; the two differ, and not by a full turn
}

// Line is a straight line.
type Line struct {
	Layer    string
	From, To plane.Point // they differ
}

// Text is one line of text whose base line begins at At.
//
// Characters outside ASCII are written as \U+XXXX, those above U+FFFF, which
// readers do not agree on, as a question mark; the signs for degree,
// plus-minus and diameter (U+00B0, U+00B1, U+2300) by the format's own codes.
type Text struct {
	Layer  string
	At     plane.Point
	Height float64 // of capitals, length, above 0
	Angle  float64 // of the base line, degrees, -360 to 360
	Value  string  // not empty, without control characters; see Wrap
}

// CheckLine returns a line of known length along +X on the layer LayerCheckLine,
// with its text above it, so that whoever opens the file can measure the scale.
// length and height (of the text) are in the units of the drawing.
func CheckLine(from plane.Point, length, height float64, inch bool) (Line, Text) {
	unit := "mm"
	if inch {
		unit = "in"
	}
	line := Line{Layer: LayerCheckLine, From: from, To: from.Add(plane.Vector{X: length})}
	text := Text{
		Layer:  LayerCheckLine,
		At:     from.Add(plane.Vector{Y: height / 2}),
		Height: height,
		Value:  fmt.Sprintf("CHECK LINE %s %s", shortest(length), unit),
	}
	return line, text
}

// Write returns the bytes of the file. It returns an error, and no bytes, for a
// drawing that is empty or that a reader could misread: figures that are not finite or
// beyond the limits of this package, layer names it does not allow, repeated vertices
// and zero-length items, the same item twice on a layer, texts that are
// empty, too long, or hold control characters. The error names the item.
func Write(d Drawing) ([]byte, error) {
	if err := d.check(); err != nil {
		return nil, fmt.Errorf("DXF: %w", err)
	}
	f := new(pairs)
	if d.Version == R12 {
		writeR12(f, d)
	} else {
		writeR2000(f, d)
	}
	if f.err != nil {
		return nil, fmt.Errorf("DXF: %w", f.err)
	}
	return f.buf.Bytes(), nil
}
