package synth

import (
	"math"
	"os"
	"testing"

	"lobewright/synth/plane"
	"lobewright/synth/spec"
)

func cut(t *testing.T, name string) *Cam {
	t.Helper()
	data, err := os.ReadFile("../samples/" + name + ".yaml")
	if err != nil {
		t.Fatal(err)
	}
	s, err := spec.Read(name, data, Vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	c, err := Build(s)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// What is left under the roller, found ray by ray: the material on a ray from the axis ends
// where the roller in some position comes to it. The roller at a turn then rests on the
// ray's end that pushes it out most.
func TestShortfallOfRoller(t *testing.T) {
	c := cut(t, "refused-roller")
	s, ok := c.Shortfall()
	if !ok {
		t.Fatal("nothing is missing")
	}
	r := c.follower.Radius()
	var centers []plane.Point
	for k := range 1200 { // the centers about the nose, a tenth of a degree apart
		zone, at := c.cycle.Zone(150 + float64(k)/10)
		centers = append(centers, c.Pitch().At(zone, at).P)
	}
	var left []plane.Point
	for k := range 3500 {
		u := plane.Unit(plane.Degrees(203 + float64(k)/250))
		lo, hi := 0.0, 60.0
		for range 40 {
			mid := (lo + hi) / 2
			p, free := plane.Point{}.Add(u.Scale(mid)), true
			for _, q := range centers {
				free = free && p.Dist(q) >= r
			}
			if free {
				lo = mid
			} else {
				hi = mid
			}
		}
		left = append(left, plane.Point{}.Add(u.Scale(lo)))
	}
	depth, where := 0.0, 0.0
	for deg := 180.0; deg < 240; deg += 0.1 {
		u, x := plane.Unit(plane.Degrees(deg)), 0.0
		for _, p := range left {
			along, across := plane.Vector(p).Dot(u), plane.Vector(p).Cross(u)
			if half := r*r - across*across; half > 0 {
				x = math.Max(x, along+math.Sqrt(half))
			}
		}
		if d := c.LiftAt(deg).S - (x - c.Prime()); d > depth {
			depth, where = d, deg
		}
	}
	near(t, "missing lift", s.Depth, depth, 5e-3*depth)
	if d := math.Abs(s.At - 210); math.Abs(d-math.Abs(where-210)) > 1 {
		t.Errorf("deepest at %g, want %g or its mirror about 210", s.At, where)
	}
}

// Under a flat face what is left is convex, and its support is the face's height: here
// against the least over all turns of the height each position of the face leaves at that
// turn, found over a polygon of half-planes (Sutherland and Hodgman's clipping).
func TestShortfallOfFace(t *testing.T) {
	s := *cut(t, "flap-press").spec
	s.Cam.BaseRadius = 4
	s.Cam.Bore = nil
	c, err := Build(&s)
	if err != nil {
		t.Fatal(err)
	}
	got, ok := c.Shortfall()
	if !ok {
		t.Fatal("nothing is missing")
	}
	body := []plane.Point{{X: -99, Y: -99}, {X: 99, Y: -99}, {X: 99, Y: 99}, {X: -99, Y: 99}}
	height := func(deg float64) float64 { return 4 + c.LiftAt(deg).S }
	const steps = 1200
	for i := range steps {
		deg := 360 * float64(i) / steps
		n := plane.Unit(plane.Degrees(deg))
		var kept []plane.Point
		for k, a := range body {
			b := body[(k+1)%len(body)]
			da, db := plane.Vector(a).Dot(n)-height(deg), plane.Vector(b).Dot(n)-height(deg)
			if da <= 0 {
				kept = append(kept, a)
			}
			if da < 0 && db > 0 || da > 0 && db < 0 {
				kept = append(kept, a.Add(b.Sub(a).Scale(da/(da-db))))
			}
		}
		body = kept
	}
	depth := 0.0
	for deg := 0.0; deg < 360; deg += 0.05 {
		n, h := plane.Unit(plane.Degrees(deg)), 0.0
		for _, p := range body {
			h = math.Max(h, plane.Vector(p).Dot(n))
		}
		depth = math.Max(depth, height(deg)-h)
	}
	near(t, "missing lift", got.Depth, depth, 2e-3*depth)
}

func TestNoShortfall(t *testing.T) {
	for _, name := range []string{"stick-lift", "flap-press", "tray-tilt", "brush-wipe", "glue-tap"} {
		if s, ok := cut(t, name).Shortfall(); ok {
			t.Errorf("%s: %+v", name, s)
		}
	}
}
