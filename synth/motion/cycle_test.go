package motion_test

import (
	"math"
	"strings"
	"testing"

	"lobewright/synth/motion"
	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

func join(t tb, startAt, startLift float64, events ...motion.Event) *motion.Cycle {
	t.Helper()
	c, err := motion.Join(startAt, startLift, events)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func dwell(over float64) motion.Event { return motion.Event{Kind: motion.Dwell, Over: over} }
func rise(lift, over float64, l motion.Law) motion.Event {
	return motion.Event{Kind: motion.Rise, Lift: lift, Over: over, Law: l}
}
func fall(lift, over float64, l motion.Law) motion.Event {
	return motion.Event{Kind: motion.Fall, Lift: lift, Over: over, Law: l}
}

// stickLift is the lift of a chalk stick: two different laws between dwells.
func stickLift(t tb) *motion.Cycle {
	return join(t, 0, 0, dwell(60), rise(14, 90, named(t, "modified-sine")), dwell(40),
		fall(14, 120, named(t, "polynomial-3-4-5")), dwell(50))
}

func TestWrappedDwell(t *testing.T) {
	c := stickLift(t)
	z := c.Zones()
	if z[0].From != -50 || z[0].To != 60 || !z[0].Dwell || z[len(z)-1].To != 310 {
		t.Fatalf("zones run %g to %g, the first to %g", z[0].From, z[len(z)-1].To, z[0].To)
	}
	for i := 1; i < len(z); i++ {
		if z[i].From != z[i-1].To {
			t.Errorf("zone %d begins at %v, the one before ends at %v", i, z[i].From, z[i-1].To)
		}
	}
	for deg, want := range map[float64]float64{359: -1, -1: -1, 310: -50, 670: -50, 0: 0, 59.5: 59.5, 309.5: 309.5, 719: -1} {
		zone, at := c.Zone(deg)
		if at != want || !(z[zone].From <= at && at < z[zone].To) {
			t.Errorf("Zone(%g) = %d, %g; want angle %g", deg, zone, at, want)
		}
	}
	if got := c.MaxLift(); got != 14 {
		t.Errorf("largest lift %g", got)
	}
}

func TestJunctions(t *testing.T) {
	js := stickLift(t).Junctions()
	var at []float64
	for _, j := range js {
		at = append(at, j.At)
		if j.VelocityStep() != 0 || j.AccelerationStep() != 0 {
			t.Errorf("at %g: velocity %v, acceleration %v: want no step", j.At, j.Velocity, j.Acceleration)
		}
	}
	want := []float64{60, 71.25, 138.75, 150, 190, 310 - 360}
	if len(at) != len(want) {
		t.Fatalf("junctions at %v, want %v", at, want)
	}
	for _, w := range want {
		found := false
		for _, a := range at {
			found = found || math.Abs(a-w) < 1e-12
		}
		if !found {
			t.Errorf("no junction at %g among %v", w, at)
		}
	}
}

// Steps worked out by hand: parabolic +-4 h/β², harmonic π²/2 h/β², the end
// of a double harmonic -π² h/β², constant velocity h/β.
func TestSteps(t *testing.T) {
	beta := math.Pi / 2
	for _, c := range []struct {
		law  string
		v, a []float64 // steps over the cycle dwell 90, rise 3 over 90, dwell 90, fall over 90
	}{
		{"parabolic", nil, []float64{4, -8, 4, -4, 8, -4}},
		{"simple-harmonic", nil, []float64{math.Pi * math.Pi / 2, math.Pi * math.Pi / 2, -math.Pi * math.Pi / 2, -math.Pi * math.Pi / 2}},
		{"double-harmonic", nil, []float64{0, math.Pi * math.Pi, -math.Pi * math.Pi, 0}},
		{"constant-velocity", []float64{1, -1, -1, 1}, []float64{0, 0, 0, 0}},
	} {
		l := named(t, c.law)
		js := join(t, 10, 0, dwell(90), rise(3, 90, l), dwell(90), fall(3, 90, l)).Junctions()
		if len(js) != len(c.a) {
			t.Fatalf("%s: %d junctions, want %d", c.law, len(js), len(c.a))
		}
		js = append(js[1:], js[0]) // the first is the fall's end
		for i, j := range js {
			near(t, c.law+" acceleration step", j.AccelerationStep(), c.a[i]*3/(beta*beta), 1e-11)
			v := 0.0
			if c.v != nil {
				v = c.v[i]
			}
			near(t, c.law+" velocity step", j.VelocityStep(), v*3/beta, 1e-12)
		}
	}
}

// A motion that goes on analytically has no junction there: one eccentric's
// harmonic, and a constant velocity given in two events.
func TestAnalyticBoundary(t *testing.T) {
	h := named(t, "simple-harmonic")
	if js := join(t, 30, 0, rise(5, 180, h), fall(5, 180, h)).Junctions(); len(js) != 0 {
		t.Errorf("eccentric: junctions %+v", js)
	}
	cv := named(t, "constant-velocity")
	js := join(t, 0, 0, rise(1, 60, cv), rise(2, 120, cv), fall(3, 180, cv)).Junctions()
	if len(js) != 2 || js[0].At != 0 || js[1].At != 180 {
		t.Errorf("sawtooth: junctions %+v, want 0 and 180", js)
	}
	if js := join(t, 0, 2, dwell(100), dwell(260)).Junctions(); len(js) != 0 {
		t.Errorf("dwell: junctions %+v", js)
	}
}

// A fall runs its law backwards: h*S(1-u), also for an asymmetric law.
func TestFallBackwards(t *testing.T) {
	dh := named(t, "double-harmonic")
	c := join(t, 0, 0, rise(8, 150, dh), fall(8, 210, dh))
	for i := range 200 {
		u := (float64(i) + 0.5) / 200
		s, v, a, j := dh.At(1 - u)
		beta := 210 * math.Pi / 180
		gs, gv, ga, gj := c.At(150 + 210*u)
		near(t, "lift", gs, 8*s, 1e-13)
		near(t, "velocity", gv, -8*v/beta, 1e-12)
		near(t, "acceleration", ga, 8*a/beta/beta, 1e-11)
		near(t, "jerk", gj, -8*j/beta/beta/beta, 1e-10)
	}
}

// Peaks of a cycle from the laws' closed factors.
func TestCyclePeaks(t *testing.T) {
	p := stickLift(t).Peaks()
	pi, beta, gamma := math.Pi, math.Pi/2, 2*math.Pi/3
	near(t, "velocity", p.Velocity.Value, 4*pi/(pi+4)*14/beta, 1e-11)
	near(t, "velocity at", p.Velocity.At, 105, 1e-9)
	near(t, "acceleration", p.Acceleration.Value, 4*pi*pi/(pi+4)*14/beta/beta, 1e-11)
	near(t, "acceleration at", p.Acceleration.At, 71.25, 1e-9)
	near(t, "jerk", p.Jerk.Value, 16*pi*pi*pi/(pi+4)*14/beta/beta/beta, 1e-10)
	near(t, "jerk at", p.Jerk.At, 60, 1e-9)
	l := named(t, "polynomial-3-4-5")
	q := join(t, 350, 0, rise(14, 120, l), fall(14, 240, l)).Peaks()
	near(t, "3-4-5 acceleration", q.Acceleration.Value, 10/math.Sqrt(3)*14/gamma/gamma, 1e-11)
	near(t, "3-4-5 acceleration at", q.Acceleration.At, 350+120*(3-math.Sqrt(3))/6-360, 1e-6)
}

// Lifts accumulate over several rises; decimals that close on paper close here.
func TestManyRises(t *testing.T) {
	m := named(t, "cycloidal")
	c := join(t, 20, 0, rise(0.1, 40, m), dwell(30), rise(0.2, 50, m), fall(0.15, 60, m), dwell(20), fall(0.05, 30, m), fall(0.1, 40, m), dwell(90))
	near(t, "largest lift", c.MaxLift(), 0.3, 1e-16)
	if c.MinLift() != 0 {
		t.Errorf("least lift %g, want 0", c.MinLift())
	}
	for deg, want := range map[float64]float64{20: 0, 75: 0.1, 140: 0.3, 210: 0.15, 250: 0.1, 330: 0} {
		s, _, _, _ := c.At(deg)
		near(t, "lift", s, want, 1e-15)
	}
}

// A cycle drawn at random meets its dwells to 1e-14 of the lift, its zones follow
// each other, and enclosures on intervals hold the floats inside them.
func TestRandomCycles(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(motion.Names()).Draw(t, "rise")
		other := rapid.SampledFrom(motion.Names()).Draw(t, "fall")
		a := rapid.Float64Range(5, 120).Draw(t, "rise over")
		b := rapid.Float64Range(5, 120).Draw(t, "fall over")
		h := rapid.Float64Range(0.01, 200).Draw(t, "lift")
		base := rapid.Float64Range(0, 50).Draw(t, "start lift")
		at := rapid.Float64Range(0, 359.9).Draw(t, "start")
		c := join(t, at, base, dwell(20), rise(h, a, named(t, name)), dwell(50), fall(h, b, named(t, other)), dwell(290-a-b))
		zones, p := c.Zones(), c.Peaks()
		for i, z := range zones {
			if index, t0 := c.Zone(z.From); index != i || t0 != z.From {
				t.Fatalf("Zone(%v) = %d, %v; want %d and the angle itself", z.From, index, t0, i)
			}
			next := zones[(i+1)%len(zones)]
			end := motion.Eval(z, taylor.FVar(z.To)).C[0]
			begin := motion.Eval(next, taylor.FVar(next.From)).C[0]
			near(t, "lift at a boundary", end, begin, 1e-14*(h+base))
			for i := range 20 {
				_, v, a, j := c.At(z.From + (z.To-z.From)*float64(i)/20)
				if math.Abs(v) > p.Velocity.Value*(1+1e-10) || math.Abs(a) > p.Acceleration.Value*(1+1e-10) || math.Abs(j) > p.Jerk.Value*(1+1e-10) {
					t.Fatalf("velocity %v, acceleration %v, jerk %v exceed the peaks %+v", v, a, j, p)
				}
			}
			lo := z.From + (z.To-z.From)*rapid.Float64Range(0, 1).Draw(t, "lo")
			hi := lo + (z.To-lo)*rapid.Float64Range(0, 1).Draw(t, "hi")
			x := math.Min(lo+(hi-lo)*rapid.Float64Range(0, 1).Draw(t, "x"), hi)
			iv := motion.Eval(z, taylor.IVar(taylor.Interval{Lo: lo, Hi: hi}, taylor.Order))
			fv := motion.Eval(z, taylor.FVar(x))
			for k := range fv.C {
				slack := 1e-14 * (h + base) // rounding of the float series itself
				if fv.C[k] < iv.C[k].Lo-slack || fv.C[k] > iv.C[k].Hi+slack {
					t.Fatalf("coefficient %d at %v: %v outside %v", k, x, fv.C[k], iv.C[k])
				}
			}
		}
	})
}

func TestJoinErrors(t *testing.T) {
	m := named(t, "cycloidal")
	for _, c := range []struct {
		want   string
		at     float64
		events []motion.Event
	}{
		{"cover 350", 0, []motion.Event{rise(1, 100, m), fall(1, 100, m), dwell(150)}},
		{"must close", 0, []motion.Event{rise(1, 100, m), fall(2, 100, m), dwell(160)}},
		{"event 2 (fall) has lift -1", 0, []motion.Event{rise(1, 100, m), fall(-1, 100, m), dwell(160)}},
		{"event 1 (rise) has no law", 0, []motion.Event{rise(1, 100, motion.Law{}), fall(1, 100, m), dwell(160)}},
		{"event 3 (dwell) covers NaN", 0, []motion.Event{rise(1, 100, m), fall(1, 100, m), dwell(math.NaN())}},
		{"cover 0 degrees", 0, nil},
		{"cam angle 360", 360, []motion.Event{dwell(360)}},
		{"kind 7", 0, []motion.Event{{Kind: 7, Over: 360}}},
	} {
		if _, err := motion.Join(c.at, 0, c.events); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("want an error with %q, got %v", c.want, err)
		}
	}
}
