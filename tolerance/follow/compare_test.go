package follow_test

import (
	"math"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/follow"
)

func compare(t *testing.T, r follow.Roller, p chain.Path, l follow.Lift, junctions ...float64) (follow.Error, []follow.Sample) {
	t.Helper()
	e, s, err := follow.Compare(r, p, l, -50, junctions...)
	if err != nil {
		t.Fatal(err)
	}
	for i := range s {
		if s[i].At < -50 || s[i].At >= 310 || i > 0 && s[i].At < s[i-1].At {
			t.Fatalf("sample %d at %g: out of order or range", i, s[i].At)
		}
	}
	return e, s
}

func dwell(float64) (float64, float64, float64) { return 0, 0, 0 }

// polygon returns n lines with corners on the circle of radius r about the axis.
func polygon(n int, r float64) chain.Path {
	var p chain.Path
	for i := range n {
		at := func(i int) plane.Point { return plane.Polar(r, plane.Degrees(10+360*float64(i%n)/float64(n))) }
		p = append(p, chain.Element{Kind: chain.Line, From: at(i), To: at(i + 1)})
	}
	return p
}

func TestTrueCircleHasNoError(t *testing.T) {
	c := eccentric{12, 50, 6}
	for _, p := range []chain.Path{arcs(c.circle(), 0, 7), arcs(c.circle(), 100, 7).Reverse(), arcs(c.circle(), 5, 1)} {
		e, s := compare(t, c.roller(), p, c.motion)
		if e.Lift > 1e-12 || e.Velocity > 1e-11 || e.VelocityStep > 1e-11 || e.Acceleration > 1e-10 {
			t.Errorf("errors %+v", e)
		}
		if len(s) != 17*len(p) {
			t.Errorf("%d samples on %d arcs", len(s), len(p))
		}
	}
}

// A circle too large by d under the in-line eccentric: the lift is wrong by
// √((m+d)² - e² sin²φ) - √(m² - e² sin²φ), most where sin φ = ±1; for small d that is
// d over the cosine of the pressure angle.
func TestLargerCircle(t *testing.T) {
	const d = 0.01
	c := eccentric{12, 50, 0}
	big := c.circle()
	big.Radius += d
	e, _ := compare(t, c.roller(), arcs(big, 20, 11), c.motion)
	want := math.Sqrt(50.01*50.01-144) - math.Sqrt(2500-144)
	near(t, "lift error", e.Lift, want, 1e-9)
	near(t, "by the pressure angle", e.Lift, d/math.Cos(math.Asin(12.0/50)), 1e-5*d)
	if a := plane.Wrap360(e.LiftAt); math.Abs(a-90) > 1 && math.Abs(a-270) > 1 {
		t.Errorf("largest at %g, want 90 or 270", a)
	}
	near(t, "velocity step", e.VelocityStep, 0, 1e-11)
}

// A dwell cut as a polygon of n lines, corners on the circle, x from the middle of
// a line: lift R cos(π/n)/cos x. Lift error R(1 - cos(π/n)), velocity step at the
// corners 2R tan(π/n), acceleration R(tan²(π/n) + sec²(π/n)) beside a corner.
func TestPolygon(t *testing.T) {
	const n, radius = 120, 55.0
	r := follow.Roller{Datum: radius, Clockwise: true}
	e, _ := compare(t, r, polygon(n, radius), dwell)
	h := math.Pi / n
	near(t, "lift error", e.Lift, radius*(1-math.Cos(h)), 1e-12)
	near(t, "velocity error", e.Velocity, radius*math.Tan(h), 1e-6)
	near(t, "velocity step", e.VelocityStep, 2*radius*math.Tan(h), 1e-9)
	near(t, "acceleration error", e.Acceleration, radius*(2*math.Tan(h)*math.Tan(h)+1), 1e-6)
	e, _ = compare(t, r, polygon(n, radius).Reverse(), dwell)
	near(t, "velocity step, backward", e.VelocityStep, 2*radius*math.Tan(h), 1e-9)
}

// The same polygon as a contour under a roller: around each corner the roller center
// turns on its own radius, a slider-crank with crank R and rod ρ: acceleration
// -R - R²/ρ straight over the corner, a little more where the round ends, and no step of
// velocity.
func TestPolygonUnderRoller(t *testing.T) {
	const n, radius, rho = 90, 45.0, 11.0
	for _, side := range []struct {
		path chain.Path
		d    float64
	}{{polygon(n, radius), -rho}, {polygon(n, radius).Reverse(), rho}} {
		p, err := follow.Centers(side.path, side.d)
		if err != nil {
			t.Fatal(err)
		}
		if len(p) != 2*n {
			t.Fatalf("%d elements, want a line and a round for each of %d corners", len(p), n)
		}
		e, _ := compare(t, follow.Roller{Datum: radius + rho, Clockwise: true}, p, dwell)
		h := math.Pi / n
		phi := math.Atan2(rho*math.Sin(h), radius+rho*math.Cos(h)) // end of the round
		sin, cos := math.Sincos(phi)
		root := math.Sqrt(rho*rho - radius*radius*sin*sin)
		want := radius*cos + radius*radius*(cos*cos-sin*sin)/root + math.Pow(radius*radius*sin*cos, 2)/math.Pow(root, 3)
		near(t, "acceleration error", e.Acceleration, want, 1e-6)
		near(t, "acceleration over the corner", want, radius+radius*radius/rho, 0.3)
		near(t, "lift error", e.Lift, radius*(1-math.Cos(math.Pi/n)), 1e-9)
		near(t, "velocity step", e.VelocityStep, 0, 1e-9)
	}
}

// Lines cut in pieces get no rounds at the cuts.
func TestCentersOfCutLines(t *testing.T) {
	const n = 30
	var cut chain.Path
	for _, e := range polygon(n, 45) {
		a, b := e.Split(0.37)
		cut = append(cut, a, b)
	}
	p, err := follow.Centers(cut, -11)
	if err != nil {
		t.Fatal(err)
	}
	if len(p) != 3*n {
		t.Errorf("%d elements, want %d lines and %d rounds", len(p), 2*n, n)
	}
	if _, _, err := follow.Compare(follow.Roller{Datum: 56, Clockwise: true}, p, dwell, 0); err != nil {
		t.Error(err)
	}
}

// An open path keeps its ends, moved square to it; a corner on an arc is rounded.
func TestCentersOpen(t *testing.T) {
	at := func(x, y float64) plane.Point { return plane.Point{X: x, Y: y} }
	p, err := follow.Centers(chain.Path{
		{Kind: chain.Line, From: at(0, 0), To: at(10, 0)},
		{Kind: chain.Arc, From: at(10, 0), To: at(10, 20), Center: at(10, 10), CCW: true},
		{Kind: chain.Arc, From: at(10, 20), To: at(30, 20), Center: at(20, 20), CCW: true},
	}, -2)
	if err != nil {
		t.Fatal(err)
	}
	if len(p) != 4 || p[0].From != at(0, -2) || p[2].Kind != chain.Arc || math.Abs(p[2].Radius()-2) > 1e-12 || p[2].Center != at(10, 20) {
		t.Fatalf("moved to %+v", p)
	}
	if end := p[3].To; end.Dist(at(32, 20)) > 1e-12 {
		t.Errorf("ends at %v", end)
	}
}

// Inside, a polygon's lines meet where they cross: inscribed radius less d.
func TestCentersInside(t *testing.T) {
	const n, radius, d = 30, 45.0, 4.0
	p, err := follow.Centers(polygon(n, radius), d)
	if err != nil {
		t.Fatal(err)
	}
	h := math.Pi / n
	for _, e := range p {
		near(t, "corner", e.From.Radius(), (radius*math.Cos(h)-d)/math.Cos(h), 1e-12)
	}
	if _, err := follow.Centers(polygon(n, radius), 60); err == nil {
		t.Error("moved past the middle: want an error")
	}
}

// Smooth arcs stay arcs with their centers; a hair kink of 1e-4 rad meets on its bisector
// and becomes a step of velocity. The arcs are prolonged to meet there, 11 kink/2 each on
// radius 56, which leaves 45/56 of the kink, times the radius. An arc that is too small is an error.
func TestCentersOfArcs(t *testing.T) {
	const kink = 1e-4
	c := plane.Circle{Radius: 45}
	p := arcs(c, 0, 6)
	q, err := follow.Centers(p, -11)
	if err != nil {
		t.Fatal(err)
	}
	for i, e := range q {
		if e.Center != p[i].Center || math.Abs(e.Radius()-56) > 1e-12 {
			t.Errorf("element %d: %+v", i, e)
		}
	}
	// Flatter arcs through the same joints: the joints break.
	for i := range p {
		e := &p[i]
		middle := e.From.Add(e.To.Sub(e.From).Scale(0.5))
		e.Center = middle.Add(e.Center.Sub(middle).Scale(1 + kink)) // still on the bisector
	}
	q, err = follow.Centers(p, -11)
	if err != nil {
		t.Fatal(err)
	}
	if len(q) != len(p) {
		t.Fatalf("%d elements, want %d", len(q), len(p))
	}
	broken := turn(p[0], p[1])
	e, _ := compare(t, follow.Roller{Datum: 56, Clockwise: true}, q, dwell)
	near(t, "velocity step", e.VelocityStep, 45*math.Abs(broken), 1e-3*45*math.Abs(broken))
	if _, err := follow.Centers(arcs(c, 0, 6), 46); err == nil || !strings.Contains(err.Error(), "inside out") {
		t.Errorf("want an error about an arc inside out, got %v", err)
	}
}

func turn(a, b chain.Element) float64 {
	u, v := a.EndTangent(), b.StartTangent()
	return math.Atan2(u.Cross(v), u.Dot(v))
}

// oval returns four arcs that meet smoothly, radius 20 about (±12, 0) and 40 about
// (0, ±16), turned by a (degrees).
func oval(a float64) chain.Path {
	spin := func(x, y float64) plane.Point {
		return plane.Point{}.Add(plane.Vector{X: x, Y: y}.Turn(plane.Degrees(a)))
	}
	arc := func(fx, fy, tx, ty, cx, cy float64) chain.Element {
		return chain.Element{Kind: chain.Arc, From: spin(fx, fy), To: spin(tx, ty), Center: spin(cx, cy), CCW: true}
	}
	return chain.Path{
		arc(24, -16, 24, 16, 12, 0), arc(24, 16, -24, 16, 0, -16),
		arc(-24, 16, -24, -16, -12, 0), arc(-24, -16, 24, -16, 0, 16),
	}
}

// The design's acceleration steps where the radius goes from 20 to 40; the written
// path is the design turned by 0.004 degrees. Told of the junctions, Compare leaves
// out the slivers, and what is left is the lift's derivatives times 0.004 degrees.
func TestJunctionSlivers(t *testing.T) {
	const off = 0.004
	r := follow.Roller{Datum: 24, Clockwise: true}
	var junctions []float64
	for _, e := range oval(0) {
		junctions = append(junctions, r.AngleOf(e.From))
	}
	design := func(t float64) (s, v, a float64) {
		t = plane.Wrap360(t-junctions[0]) + junctions[0]
		for i, e := range oval(0) {
			if i == 3 || t < plane.Wrap360(junctions[i+1]-junctions[0])+junctions[0] {
				s, v, a, _ = r.On(t, e)
				break
			}
		}
		return s, v, a
	}
	// In polar form κ = (r² + 2r'² - r r'')/(r² + r'²)^(3/2), so a step of κ makes one of r''
	// of -(r² + r'²)^(3/2)/r times as much.
	_, v, before, _ := r.On(junctions[1], oval(0)[0])
	_, _, after, _ := r.On(junctions[1], oval(0)[1])
	radius := math.Hypot(24, 16)
	step := math.Pow(radius*radius+v*v, 1.5) / radius * (1.0/20 - 1.0/40)
	near(t, "step of acceleration", after-before, step, 1e-10)

	told, _ := compare(t, r, oval(off), design, junctions...)
	early, _ := compare(t, r, oval(-off), design, junctions...)
	if told.Acceleration > 0.01 || early.Acceleration > 0.01 {
		t.Errorf("told of the junctions: acceleration errors %g and %g", told.Acceleration, early.Acceleration)
	}
	peak := 0.0 // of the design's velocity
	for phi := range 3600 {
		_, v, _ := design(float64(phi) / 10)
		peak = math.Max(peak, math.Abs(v))
	}
	near(t, "lift error", told.Lift, peak*off*deg, 1e-3*peak*off*deg)
	untold, _ := compare(t, r, oval(off), design)
	near(t, "not told: acceleration error", untold.Acceleration, step, 0.02*step)

	// A junction inside an element is cut there, and its step stands in the samples.
	_, samples := compare(t, r, arcs(plane.Circle{Radius: 28}, 3, 5), design, junctions...)
	seen := 0
	for i := 1; i < len(samples); i++ {
		if samples[i].At-samples[i-1].At < 1e-7 && math.Abs(samples[i].Acceleration-samples[i-1].Acceleration) > 0.9*step {
			seen++
		}
	}
	if seen != 4 {
		t.Errorf("%d of 4 steps seen inside elements", seen)
	}
}

// Elements too short to have a direction, whatever way they point, change nothing.
func TestDots(t *testing.T) {
	c := eccentric{12, 50, 6}
	p := arcs(c.circle(), 0, 7)
	back := p[3].From.Add(p[3].StartTangent().Scale(-1e-11))
	p[2].To = back
	p = append(p[:3:3], append(chain.Path{
		{Kind: chain.Line, From: back, To: p[3].From},
		{Kind: chain.Line, From: p[3].From, To: back},
		{Kind: chain.Arc, From: back, To: p[3].From, Center: p[3].Center, CCW: true},
	}, p[3:]...)...)
	e, _ := compare(t, c.roller(), p, c.motion)
	if e.Lift > 1e-10 || e.VelocityStep > 1e-9 || e.Acceleration > 1e-9 {
		t.Errorf("errors %+v", e)
	}
}

func TestCompareErrors(t *testing.T) {
	c := eccentric{12, 50, 0}
	whole := arcs(c.circle(), 0, 6)
	beside := arcs(plane.Circle{Center: plane.Point{X: 80}, Radius: 50}, 0, 6)
	for want, p := range map[string]chain.Path{
		"empty":          nil,
		"must close":     whole[:5],
		"turn back":      append(append(chain.Path{}, whole[:3]...), whole[:3].Reverse()...),
		"degrees about":  append(append(chain.Path{}, whole...), whole...),
		"would have to ": beside,
	} {
		if _, _, err := follow.Compare(c.roller(), p, dwell, 0); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("want an error with %q, got %v", want, err)
		}
	}
}
