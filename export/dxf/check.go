package dxf

import (
	"fmt"
	"math"
	"strings"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// LargestDecimals bounds the decimals of a polyline's grid, so that a
// coordinate of up to LargestCoordinate is exact in a float64 reader's count.
const LargestDecimals = 8

// Bounds of a bulge. Below the least the arc leaves its chord by less than
// 5e-13 of it: that is a line. Above the largest it is all but a full
// circle (359.8 degrees), whose center no reader finds from its ends.
const (
	LeastBulge   = 1e-12
	LargestBulge = 1000
)

// check refuses a drawing that some reader would misread.
func (d Drawing) check() error {
	if d.Version != R2000 && d.Version != R12 {
		return fmt.Errorf("version %q is unknown; allowed are %q and %q", d.Version, R2000, R12)
	}
	if len(d.Polylines)+len(d.Circles)+len(d.Arcs)+len(d.Lines)+len(d.Texts) == 0 {
		return fmt.Errorf("the drawing is empty")
	}
	seen := doubles{}
	for i, p := range d.Polylines {
		if err := checkItem(p.Layer, p.check(), seen, p.key); err != nil {
			return fmt.Errorf("polyline %d: %w", i+1, err)
		}
	}
	for i, c := range d.Circles {
		if err := checkItem(c.Layer, checkRound(c.Center, c.Radius), seen, c.key); err != nil {
			return fmt.Errorf("circle %d: %w", i+1, err)
		}
	}
	for i, a := range d.Arcs {
		if err := checkItem(a.Layer, a.check(), seen, a.key); err != nil {
			return fmt.Errorf("arc %d: %w", i+1, err)
		}
	}
	for i, l := range d.Lines {
		if err := checkItem(l.Layer, l.check(), seen, l.key); err != nil {
			return fmt.Errorf("line %d: %w", i+1, err)
		}
	}
	for i, t := range d.Texts {
		if err := checkItem(t.Layer, t.check(d.Version), seen, t.key); err != nil {
			return fmt.Errorf("text %d: %w", i+1, err)
		}
	}
	return d.checkExtent()
}

// checkExtent refuses arcs that reach beyond the limit though their ends do not.
func (d Drawing) checkExtent() error {
	b := d.extent()
	for _, p := range []plane.Point{b.min, b.max} {
		if err := checkPoint("the drawing's outermost", p); err != nil {
			return err
		}
	}
	return nil
}

// doubles holds what was seen on each layer.
type doubles map[string]bool

// checkItem checks what all items share, after the item's own fault.
func checkItem(layer string, fault error, seen doubles, key func() string) error {
	if err := checkLayer(layer); err != nil {
		return err
	}
	if fault != nil {
		return fmt.Errorf("layer %s: %w", layer, fault)
	}
	k := layer + " " + key()
	if seen[k] {
		return fmt.Errorf("layer %s: the same item is there twice; a doubled line is cut twice", layer)
	}
	seen[k] = true
	return nil
}

func (p Polyline) key() string {
	var b strings.Builder
	fmt.Fprint(&b, "polyline ", p.Closed, p.Grid.Decimals)
	for _, v := range p.Vertices {
		fmt.Fprint(&b, " ", v.P.X, " ", v.P.Y, " ", v.Bulge)
	}
	return b.String()
}
func (c Circle) key() string { return fmt.Sprint("circle ", c.Center, c.Radius) }
func (a Arc) key() string {
	return fmt.Sprint("arc ", a.Center, a.Radius, plane.Wrap360(a.From), plane.Wrap360(a.To))
}
func (t Text) key() string { return fmt.Sprint("text ", t.At, t.Height, t.Angle, t.Value) }

// key is the same for a line drawn either way.
func (l Line) key() string {
	a, b := l.From, l.To
	if b.X < a.X || b.X == a.X && b.Y < a.Y {
		a, b = b, a
	}
	return fmt.Sprint("line ", a, b)
}

func (p Polyline) check() error {
	if p.Grid.Decimals < 0 || p.Grid.Decimals > LargestDecimals {
		return fmt.Errorf("its grid has %d decimals; 0 to %d are allowed", p.Grid.Decimals, LargestDecimals)
	}
	n := len(p.Vertices)
	if n < 2 {
		return fmt.Errorf("it has %d vertices; at least 2 are needed", n)
	}
	for i, v := range p.Vertices {
		if err := checkVertex(p.Grid, v); err != nil {
			return fmt.Errorf("vertex %d: %w", i+1, err)
		}
		if i == n-1 && !p.Closed {
			if v.Bulge != 0 {
				return fmt.Errorf("vertex %d: the last bulge of an open polyline is %g, it must be 0", n, v.Bulge)
			}
			continue
		}
		if v.P == p.Vertices[(i+1)%n].P {
			return fmt.Errorf("vertex %d: the next vertex is the same point (%s, %s); drop one (a closed polyline does not repeat its first)",
				i+1, decimal(p.Grid, v.P.X), decimal(p.Grid, v.P.Y))
		}
	}
	if p.Closed && n == 2 && p.Vertices[0].Bulge == -p.Vertices[1].Bulge {
		return fmt.Errorf("it runs back over itself: two vertices, bulges %g and %g", p.Vertices[0].Bulge, p.Vertices[1].Bulge)
	}
	return nil
}

func checkVertex(g chain.Grid, v chain.Vertex) error {
	most := int64(LargestCoordinate * math.Pow10(g.Decimals))
	if v.P.X > most || v.P.X < -most || v.P.Y > most || v.P.Y < -most {
		return fmt.Errorf("(%s, %s) is beyond %g", decimal(g, v.P.X), decimal(g, v.P.Y), float64(LargestCoordinate))
	}
	size := math.Abs(v.Bulge)
	switch {
	case v.Bulge == 0:
		return nil
	case math.IsNaN(size) || size > LargestBulge:
		return fmt.Errorf("bulge %g; magnitudes up to %d are allowed: split the arc", v.Bulge, LargestBulge)
	case size < LeastBulge:
		return fmt.Errorf("bulge %g is below %g: write a line (0)", v.Bulge, LeastBulge)
	}
	return nil
}

// checkFigure refuses a figure that is not finite or beyond the limit.
func checkFigure(name string, v, most float64) error {
	if math.IsNaN(v) || math.Abs(v) > most {
		return fmt.Errorf("%s is %g; finite figures up to %g are allowed", name, v, most)
	}
	return nil
}

// leastLength is the least radius, line or text height: shorter ones are
// dropped or drawn as points by readers that work in single precision at
// the size of a cam (2^-24 of 1000 is 6e-5; a DXF grid is 1e-6).
const leastLength = 1e-6

func checkSize(name string, v float64) error {
	if err := checkFigure(name, v, LargestCoordinate); err != nil {
		return err
	}
	if v < leastLength {
		return fmt.Errorf("%s is %g; at least %g is needed", name, v, leastLength)
	}
	return nil
}

func checkPoint(name string, p plane.Point) error {
	if err := checkFigure(name+" X", p.X, LargestCoordinate); err != nil {
		return err
	}
	return checkFigure(name+" Y", p.Y, LargestCoordinate)
}

func checkRound(c plane.Point, radius float64) error {
	if err := checkPoint("center", c); err != nil {
		return err
	}
	return checkSize("radius", radius)
}

func (a Arc) check() error {
	if err := checkRound(a.Center, a.Radius); err != nil {
		return err
	}
	if err := checkFigure("start angle", a.From, 360); err != nil {
		return err
	}
	if err := checkFigure("end angle", a.To, 360); err != nil {
		return err
	}
	if a.sweep() == 0 {
		return fmt.Errorf("it starts and ends at %g degrees; draw a circle", a.From)
	}
	return nil
}

func (l Line) check() error {
	if err := checkPoint("start", l.From); err != nil {
		return err
	}
	if err := checkPoint("end", l.To); err != nil {
		return err
	}
	return checkSize("length", l.From.Dist(l.To))
}

func (t Text) check(v Version) error {
	if err := checkPoint("position", t.At); err != nil {
		return err
	}
	if err := checkSize("height", t.Height); err != nil {
		return err
	}
	if err := checkFigure("angle", t.Angle, 360); err != nil {
		return err
	}
	return checkText(t.Value, v)
}
