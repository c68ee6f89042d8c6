package synth

import (
	"math"
	"testing"

	"lobewright/synth/spec"
)

// sizing is a spec to be sized: an in-line or offset roller of radius 10, 30°.
func sizing(radius float64, offset float64, clockwise bool, events ...spec.Event) *spec.Spec {
	s := &spec.Spec{File: "size.yaml", Units: spec.MM, Camshaft: spec.Camshaft{Speed: 60, Clockwise: clockwise}}
	s.Motion.Events = events
	s.Follower = spec.Follower{Kind: "translating-roller", RollerDiameter: 20, Offset: offset}
	s.Cam = spec.Cam{Kind: "plate", BaseRadius: 40}
	s.Limits.PressureAngle = 30
	s.Limits.RadiusOfCurvature = &radius
	return s
}

// Lift over prime radius that gives exactly 30°, in-line: simple-harmonic 1/3 at 45° in
// closed form, tan a = pi h/(2 B sqrt(Rp(Rp+h))); cycloidal from its closed form with x = 2
// atan(2 pi k), Rp/h = k(1 - cos x) - (x - sin x)/(2 pi), k = 1/(B tan a); 3-4-5 and modified
// sine solved with 30 digits (derived).
func TestSizeClosedForms(t *testing.T) {
	for _, c := range []struct {
		law         string
		over, ratio float64
	}{
		{"simple-harmonic", 45, 1.0 / 3}, {"simple-harmonic", 60, .4660372313}, {"simple-harmonic", 90, .7675918792},
		{"cycloidal", 45, .2542224155}, {"cycloidal", 60, .3522976643}, {"cycloidal", 90, .5711203198},
		{"polynomial-3-4-5", 60, .3792930584}, {"modified-sine", 60, .4080740494},
	} {
		z, err := Size(sizing(0.5, 0, true, rise(20, c.over, c.law), dwell(60), fall(20, 180, "cycloidal"), dwell(120-c.over)))
		if err != nil {
			t.Fatal(err)
		}
		near(t, c.law+" prime radius", z.Limits[0].Least+10, 20/c.ratio, 1e-7)
		if z.Limits[0].ID != "pressure-angle" {
			t.Errorf("first limit %s", z.Limits[0].ID)
		}
	}
}

// At the nose of a simple-harmonic rise and fall rho = r²/(r + pi² h/(2 B²)), r = Rp + h: a
// contour radius of 20 with a roller of 10, h 20, 60°, asks for r² = 30 (r + 90).
func TestSizeCurvature(t *testing.T) {
	s := sizing(20, 0, true, rise(20, 60, "simple-harmonic"), fall(20, 60, "simple-harmonic"), dwell(240))
	s.Limits.PressureAngle = 60
	z, err := Size(s)
	if err != nil {
		t.Fatal(err)
	}
	r := 15 + math.Sqrt(15*15+30*90)
	near(t, "base radius", z.BaseRadius, r-30, 1e-7)
	if z.Binds != "radius-of-curvature" {
		t.Errorf("%s binds", z.Binds)
	}
}

// The answer is tight: it passes its gates, a thousandth less fails one, and every smaller
// radius is proven to fail.
func TestSizeIsTight(t *testing.T) {
	for _, s := range []*spec.Spec{
		sizing(5, 0, true, dwell(60), rise(14, 90, "modified-sine"), dwell(40), fall(14, 120, "polynomial-3-4-5"), dwell(50)),
		sizing(5, 8, true, rise(20, 60, "cycloidal"), dwell(60), fall(20, 90, "modified-trapezoidal"), dwell(150)),
		sizing(12, -6, false, rise(20, 70, "polynomial-4-5-6-7"), fall(20, 70, "simple-harmonic"), dwell(220)),
		sizing(3, 5, false, rise(10, 50, "parabolic"), dwell(60), fall(10, 90, "double-harmonic"), dwell(160)),
	} {
		z, err := Size(s)
		if err != nil {
			t.Fatal(err)
		}
		if !(z.Excluded >= z.BaseRadius*(1-2*sizeShare)) {
			t.Errorf("base radius %v, but only up to %v is excluded", z.BaseRadius, z.Excluded)
		}
		for _, c := range []struct {
			share float64
			pass  bool
		}{{1, true}, {0.999, false}} {
			again := *s
			again.Cam.BaseRadius = c.share * z.BaseRadius
			cam, err := Build(&again)
			if err != nil {
				t.Fatal(err)
			}
			pass := true
			for _, g := range cam.Gates() {
				if g.ID == "pressure-angle" || g.ID == "radius-of-curvature" || g.ID == "undercut" {
					pass = pass && g.Pass
				}
			}
			if pass != c.pass {
				t.Errorf("%v of the base radius %v: passes %v", c.share, z.BaseRadius, pass)
			}
		}
	}
}

func TestSizeRefuses(t *testing.T) {
	s := sizing(5, 0, true, rise(14, 90, "cycloidal"), fall(14, 270, "cycloidal"))
	s.Limits.RadiusOfCurvature = nil
	if _, err := Size(s); err == nil {
		t.Error("sized without limits.radius_of_curvature")
	}
}
