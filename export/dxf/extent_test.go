package dxf

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"lobewright/export/dxf/read"
	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

func polyline(closed bool, numbers ...float64) Drawing {
	p := Polyline{Layer: LayerContour, Grid: chain.Grid{Decimals: 6}, Closed: closed}
	for i := 0; i < len(numbers); i += 3 {
		p.Vertices = append(p.Vertices, chain.Vertex{P: p.Grid.Point(plane.Point{X: numbers[i], Y: numbers[i+1]}), Bulge: numbers[i+2]})
	}
	return Drawing{Version: R2000, Polylines: []Polyline{p}}
}

// Closed forms: a bulge b on a chord c has the sagitta |b|c/2; b = tan(sweep/4).
func TestExtentClosedForms(t *testing.T) {
	quarter := math.Tan(math.Pi / 8)
	tall := math.Tan(math.Pi * 3 / 8) // sweep 270 degrees
	r2 := math.Sqrt2
	for name, c := range map[string]struct {
		d                      Drawing
		minX, minY, maxX, maxY float64
	}{
		"circle of two halves":      {polyline(true, 130, 200, 1, 70, 200, 1), 70, 170, 130, 230},
		"clockwise halves":          {polyline(true, 130, 200, -1, 70, 200, -1), 70, 170, 130, 230},
		"right half":                {polyline(false, 0, -10, 1, 0, 10, 0), 0, -10, 10, 10},
		"left half, clockwise":      {polyline(false, 0, -10, -1, 0, 10, 0), -10, -10, 0, 10},
		"quarter inside its chord":  {polyline(false, 10, 0, quarter, 0, 10, 0), 0, 0, 10, 10},
		"quarter over the top":      {polyline(false, 5, 5, quarter, -5, 5, 0), -5, 5, 5, 5 * r2},
		"three quarters":            {polyline(false, 5, -5, tall, -5, -5, 0), -5 * r2, -5, 5 * r2, 5 * r2},
		"sagitta of a flat arc":     {polyline(false, 0, 0, -1e-9, 1000, 0, 0), 0, 0, 1000, 1e-9 * 1000 / 2},
		"lines only, away from 0,0": {polyline(true, 100, 200, 0, 110, 200, 0, 100, 230, 0), 100, 200, 110, 230},
		"circle":                    {Drawing{Version: R2000, Circles: []Circle{{LayerBore, plane.Point{X: 100, Y: 200}, 50}}}, 50, 150, 150, 250},
		"arc through +X":            {Drawing{Version: R2000, Arcs: []Arc{{LayerBore, plane.Point{X: 1}, 2, 300, 60}}}, 2, -math.Sqrt(3), 3, math.Sqrt(3)},
		"line":                      {Drawing{Version: R2000, Lines: []Line{{LayerBore, plane.Point{X: 3, Y: -4}, plane.Point{X: -1, Y: 7}}}}, -1, -4, 3, 7},
	} {
		f, err := read.Parse(mustWrite(t, c.d))
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		for _, v := range [][2]float64{{f.Min.X, c.minX}, {f.Min.Y, c.minY}, {f.Max.X, c.maxX}, {f.Max.Y, c.maxY}} {
			if math.Abs(v[0]-v[1]) > 1e-13*(1+math.Abs(v[1])) {
				t.Errorf("%s: extents %v to %v, want (%g, %g) to (%g, %g)", name, f.Min, f.Max, c.minX, c.minY, c.maxX, c.maxY)
				break
			}
		}
	}
}

// No point of an arc lies outside the extents, and the extents are reached within
// the height of a step of the sampling, r(1-cos(step/2)).
func TestExtentAgainstSampledArcs(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		center := plane.Point{X: rapid.Float64Range(-100, 100).Draw(t, "x"), Y: rapid.Float64Range(-100, 100).Draw(t, "y")}
		r := rapid.Float64Range(1, 100).Draw(t, "r")
		from := rapid.Float64Range(-math.Pi, math.Pi).Draw(t, "from")
		sweep := rapid.Float64Range(0.01, 6.2).Draw(t, "sweep") * rapid.SampledFrom([]float64{-1, 1}).Draw(t, "turn")
		grid := chain.Grid{Decimals: 8}
		at := func(a float64) plane.Point { return center.Add(plane.Unit(plane.Angle(a)).Scale(r)) }
		d := Drawing{Polylines: []Polyline{{LayerContour, grid, []chain.Vertex{
			{P: grid.Point(at(from)), Bulge: math.Tan(sweep / 4)}, {P: grid.Point(at(from + sweep))}}, false}}}
		got := d.extent()

		const steps = 1000
		sampled := emptyBox()
		for i := range steps + 1 {
			sampled.add(at(from + sweep*float64(i)/steps))
		}
		// Ends are rounded to half a grid step; a bulge of a nearly full circle
		// magnifies that by at most (1+b²)/(4b) of the radius formula, each way.
		b := math.Abs(math.Tan(sweep / 4))
		rounding := grid.Step() * (2 + (1+b*b)/b)
		short := r*(1-math.Cos(sweep/steps/2)) + rounding
		for _, v := range [][2]float64{
			{sampled.min.X, got.min.X}, {sampled.min.Y, got.min.Y},
			{got.max.X, sampled.max.X}, {got.max.Y, sampled.max.Y},
		} {
			if v[0]-v[1] < -rounding || v[0]-v[1] > short {
				t.Fatalf("extents %v, sampled %v; allowed -%g to %g", got, sampled, rounding, short)
			}
		}
	})
}

func TestExtentHoldsTheText(t *testing.T) {
	b := Drawing{Texts: []Text{{LayerNotes, plane.Point{X: 10, Y: 20}, 2, 90, "abcd"}}}.extent()
	if b.min.X != 8 || math.Abs(b.max.Y-28) > 1e-12 || math.Abs(b.max.X-10) > 1e-12 || math.Abs(b.min.Y-20) > 1e-12 {
		t.Errorf("a text of 4 characters of height 2 that runs upward from (10, 20): extents %v", b)
	}
}
