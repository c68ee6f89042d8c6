package motion_test

import (
	"math"
	"strings"
	"testing"

	"lobewright/synth/motion"
	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

// The zones of a cycle make the same cycle again.
func TestOfZones(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		at := rapid.Float64Range(0, 359).Draw(t, "start")
		base := rapid.Float64Range(0, 5).Draw(t, "start lift")
		v := rapid.Float64Range(0, 6).Draw(t, "velocity")
		a := rapid.Float64Range(10, 120).Draw(t, "over")
		want := join(t, at, base, rise(3, a, polynomial(t, 0, v)), rise(3, a, polynomial(t, v, 0)), fall(6, 360-2*a, named(t, "modified-sine")))
		got, err := motion.Of(want.Zones())
		if err != nil {
			t.Fatal(err)
		}
		near(t, "least", got.MinLift(), want.MinLift(), 1e-9)
		near(t, "largest", got.MaxLift(), want.MaxLift(), 1e-9)
		for i := range 50 {
			deg := 7.3 * float64(i)
			s, w, _, _ := got.At(deg)
			ws, ww, _, _ := want.At(deg)
			if s != ws || w != ww {
				t.Fatalf("at %g: %g, %g; want %g, %g", deg, s, w, ws, ww)
			}
		}
	})
}

// sin of the cam angle: extremes -2 and 2 inside zones, at 270 and 90 degrees.
func TestOfExtremes(t *testing.T) {
	wave := func(from, to float64) motion.Zone {
		return motion.Zone{From: from, To: to, Origin: 0, Span: 180, Poly: []float64{0}, Sines: []motion.Sine{{Amp: 2, Freq: math.Pi}}, Event: -1}
	}
	c, err := motion.Of([]motion.Zone{wave(10, 200), wave(200, 370)})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "largest", c.MaxLift(), 2, 1e-10)
	near(t, "least", c.MinLift(), -2, 1e-10)
	at, event := c.Lowest()
	near(t, "lowest at", at, 270, 1e-3)
	if event != -1 {
		t.Errorf("lowest in event %d", event)
	}
	if js := c.Junctions(); len(js) != 0 {
		t.Errorf("junctions of a sine: %+v", js)
	}
	z := c.Zones()
	if s := motion.Eval(z[1], taylor.FVar(z[1].To)).C[0]; math.Abs(s-2*math.Sin(10*math.Pi/180)) > 1e-14 {
		t.Errorf("end %g", s)
	}
}

func TestOfErrors(t *testing.T) {
	flat := func(from, to, lift float64) motion.Zone {
		return motion.Zone{From: from, To: to, Span: 1, Poly: []float64{lift}, Event: -1}
	}
	empty := motion.Zone{From: 0, To: 100, Span: 1, Dwell: true}
	nowhere := flat(0, 360, 1)
	nowhere.Span = 0
	for want, zones := range map[string][]motion.Zone{
		"at least one zone":              nil,
		"zone 2 begins at cam angle 101": {flat(0, 100, 1), flat(101, 360, 1)},
		"must cover 360":                 {flat(0, 359, 1)},
		"cover cam angles 0 to 100":      {empty},
		"cover cam angles -1 to 359":     {flat(-1, 359, 1)},
		"zone 1 covers 5 to 5":           {flat(5, 5, 1)},
		"zone 1 covers NaN":              {flat(math.NaN(), 360, 1)},
		"span of 0":                      {nowhere},
		"zone 2 is not finite":           {flat(0, 100, 1), flat(100, 360, math.Inf(1))},
		"zone 1 is not finite":           {flat(0, 360, math.NaN())},
	} {
		if c, err := motion.Of(zones); err == nil || c != nil || !strings.Contains(err.Error(), want) {
			t.Errorf("want an error with %q, got %v", want, err)
		}
	}
}
