package synth

import (
	"math"
	"testing"

	"lobewright/synth/plane"
)

// horseshoe is a bent bar: arcs of radius 20 and 30 about the origin, joined by
// round ends of radius 5, open by a mouth towards +X. Travelled counterclockwise,
// outside on the right. Every concave radius is 20, but the mouth between the two ends is
// narrower: the disc between them touches both.
type horseshoe struct{ half float64 } // half the mouth's angle to the centers of the ends, degrees

// pieces of 90 units each: outer arc, upper-left end... in order of travel.
func (h horseshoe) Pieces() []plane.Piece {
	return []plane.Piece{{From: 0, To: 90}, {From: 90, To: 180}, {From: 180, To: 270}, {From: 270, To: 360}}
}

// arcs are center, radius, start angle and sweep in degrees, sweep positive counterclockwise.
func (h horseshoe) arc(i int) (c plane.Point, r, start, sweep float64) {
	top, bottom := plane.Polar(25, plane.Degrees(h.half)), plane.Polar(25, plane.Degrees(-h.half))
	switch i {
	case 0:
		return plane.Point{}, 30, h.half, 360 - 2*h.half
	case 1:
		return bottom, 5, -h.half, 180
	case 2:
		return plane.Point{}, 20, -h.half, -(360 - 2*h.half)
	}
	return top, 5, h.half + 180, 180
}

func (h horseshoe) At(i int, t float64) plane.Frame {
	c, r, start, sweep := h.arc(i)
	a := plane.Degrees(start + sweep*(t-90*float64(i))/90)
	sign := 1.0
	if sweep < 0 {
		sign = -1
	}
	u := plane.Unit(a)
	return plane.Frame{P: c.Add(u.Scale(r)), T: u.Left().Scale(sign), K: sign / r}
}

// A neck narrower than the tool with harmless local radii: the mouth. Its disc
// touches both round ends; its center lies on the line between their centers, so its
// radius is 25 sin(half) - 5 (elementary geometry).
func TestNeckIsFound(t *testing.T) {
	for _, half := range []float64{20, 30, 45, 88} {
		d := leastDisc(horseshoe{half}, -1)
		want := 25*math.Sin(half*math.Pi/180) - 5
		near(t, "neck", d.Radius, want, 1e-9)
		if !d.Neck {
			t.Errorf("half mouth %v°: not called a neck", half)
		}
	}
	// Inside the bar the round ends have radius 5, the bar's half width.
	in := leastDisc(horseshoe{30}, 1)
	near(t, "half the bar", in.Radius, 5, 1e-6)
}

// A tool of radius 12 is stopped by a mouth of 7.5. Resting in it its center is at
// 25 cos(30°) + sqrt(17² - 12.5²). The deepest material is seen from the points of
// the inner arc whose normal, through the axis, just passes the round ends, at 30° -
// asin(5/25) from the middle (elementary geometry).
func TestWhatAToolLeaves(t *testing.T) {
	u := leaves(horseshoe{30}, -1, 12)
	center := 25*math.Cos(math.Pi/6) + math.Sqrt(17*17-12.5*12.5)
	slant := math.Pi/6 - math.Asin(5.0/25)
	across := center * math.Sin(slant)
	near(t, "depth left", u.Depth, 20+center*math.Cos(slant)-math.Sqrt(144-across*across), 0.02)
	near(t, "its place", math.Abs(u.Point.PolarAngle()-180), slant*180/math.Pi, 0.05)
	if got := leaves(horseshoe{30}, -1, 7); got.Depth != 0 {
		t.Errorf("a tool of radius 7 passes the mouth of 7.5, yet leaves %v", got)
	}
}
