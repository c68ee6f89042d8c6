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
		{"simple-harmonic", 30, .2118575279}, {"simple-harmonic", 120, 1.121150276},
		{"cycloidal", 30, .1630988884}, {"cycloidal", 120, .8233803491}, {"cycloidal", 180, 1.444848726},
		{"simple-harmonic", 45, 1.0 / 3}, {"simple-harmonic", 60, .4660372313}, {"simple-harmonic", 90, .7675918792},
		{"cycloidal", 45, .2542224155}, {"cycloidal", 60, .3522976643}, {"cycloidal", 90, .5711203198},
		{"polynomial-3-4-5", 60, .3792930584}, {"modified-sine", 60, .4080740494},
	} {
		z, err := Size(sizing(0.5, 0, true, rise(20, c.over, c.law), dwell(60), fall(20, 110, "cycloidal"), dwell(190-c.over)))
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

func TestSizeRefuses(t *testing.T) {
	s := sizing(5, 0, true, rise(14, 90, "cycloidal"), fall(14, 270, "cycloidal"))
	s.Limits.RadiusOfCurvature = nil
	if _, err := Size(s); err == nil {
		t.Error("sized without limits.radius_of_curvature")
	}
}
