package motion_test

import (
	"math"
	"testing"

	"lobewright/synth/motion"
)

func half(t tb, name string, fromRest bool) motion.Law {
	t.Helper()
	make := motion.ToRest
	if fromRest {
		make = motion.FromRest
	}
	l, err := make(name)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func polynomial(t tb, start, end float64) motion.Law {
	t.Helper()
	l, err := motion.Polynomial(start, end)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

// The half laws of Kloomok and Muffley, Product Engineering 1955, as their formulas
// stand (C-1 and H-2: Rothbart 2004, p. 85; the others from memory); peak factors by hand:
// C: V 2, A π, J π², VA (3√3/4)π; H: V π/2, A π²/4, J π³/8, VA π³/16.
func TestHalfLaws(t *testing.T) {
	pi := math.Pi
	for _, c := range []struct {
		name         string
		fromRest     bool
		s            func(u float64) float64
		start, end   float64
		v, a, j, m   float64
		step         float64 // of acceleration, at the dwell
		accelerating float64
	}{
		{"cycloidal", true, func(u float64) float64 { return u - math.Sin(pi*u)/pi }, 0, 2, 2, pi, pi * pi, 3 * math.Sqrt(3) / 4 * pi, 0, 1},
		{"cycloidal", false, func(u float64) float64 { return u + math.Sin(pi*u)/pi }, 2, 0, 2, pi, pi * pi, 3 * math.Sqrt(3) / 4 * pi, 0, -1},
		{"simple-harmonic", true, func(u float64) float64 { return 1 - math.Cos(pi*u/2) }, 0, pi / 2, pi / 2, pi * pi / 4, pi * pi * pi / 8, pi * pi * pi / 16, pi * pi / 4, 1},
		{"simple-harmonic", false, func(u float64) float64 { return math.Sin(pi * u / 2) }, pi / 2, 0, pi / 2, pi * pi / 4, pi * pi * pi / 8, pi * pi * pi / 16, pi * pi / 4, -1},
	} {
		l := half(t, c.name, c.fromRest)
		if l.Name() != "half "+c.name {
			t.Error(l.Name())
		}
		for i := range 101 {
			u := float64(i) / 100
			s, _, a, _ := l.At(u)
			near(t, c.name, s, c.s(u), 4e-16)
			if a*c.accelerating < -1e-12 {
				t.Errorf("%s: acceleration %g at %g", c.name, a, u)
			}
		}
		start, end := l.EndSpeeds()
		near(t, c.name+" start", start, c.start, 1e-14)
		near(t, c.name+" end", end, c.end, 1e-14)
		p := l.Peaks()
		near(t, c.name+" velocity", p.Velocity, c.v, 1e-13)
		near(t, c.name+" acceleration", p.Acceleration, c.a, 1e-12)
		near(t, c.name+" jerk", p.SmoothJerk, c.j, 1e-11)
		near(t, c.name+" torque", p.Torque, c.m, 1e-11)
		near(t, c.name+" step", p.AccelerationStep, c.step, 1e-13)
		if p.VelocityStep != 0 {
			t.Errorf("%s: velocity steps by %g", c.name, p.VelocityStep)
		}
	}
	for _, err := range []error{second(motion.FromRest("modified-sine")), second(motion.ToRest("parabolic"))} {
		if err == nil {
			t.Error("a half law that is none")
		}
	}
}

// Rothbart 2004, p. 85: C-1 meets H-2 when 2 h1/b1 = π h2/(2 b2), so that
// h1/h = π b1/(π b1 + 4 b2); with b1 = b2 that is 0.4399008464884.
func TestCoupledHalves(t *testing.T) {
	near(t, "equal angles", math.Pi/(math.Pi+4), 0.4399008464884, 5e-14)
	c1, h2, back := half(t, "cycloidal", true), half(t, "simple-harmonic", false), named(t, "cycloidal")
	for _, b := range [][2]float64{{60, 60}, {40, 90}, {100, 20}} {
		const h = 12
		h1 := h * math.Pi * b[0] / (math.Pi*b[0] + 4*b[1])
		c := join(t, 0, 0, rise(h1, b[0], c1), rise(h-h1, b[1], h2), fall(h, 100, back), dwell(260-b[0]-b[1]))
		met := false
		for _, j := range c.Junctions() {
			if j.VelocityStep() != 0 {
				t.Errorf("angles %v: velocity steps by %g at %g", b, j.VelocityStep(), j.At)
			}
			if j.At == b[0] {
				met = true
				near(t, "velocity at the joint", j.Velocity[0], 2*h1/(b[0]*math.Pi/180), 1e-12)
				if j.AccelerationStep() != 0 {
					t.Errorf("angles %v: acceleration steps by %g", b, j.AccelerationStep())
				}
			}
		}
		if !met {
			t.Errorf("angles %v: no junction where the halves meet", b)
		}
		near(t, "largest lift", c.MaxLift(), h, 1e-14)
	}
	// 1 % beside the condition the velocity steps.
	c := join(t, 0, 0, rise(4.4*1.01, 60, c1), rise(5.6, 60, h2), fall(4.4*1.01+5.6, 100, back), dwell(140))
	if s := c.Junctions(); s[0].VelocityStep() != 0 || math.Abs(s[1].VelocityStep()) < 1e-3 {
		t.Errorf("steps %v and %v", s[0].VelocityStep(), s[1].VelocityStep())
	}
}

// A fall runs its law backwards: the half from rest of a falling event is ToRest.
func TestHalfFall(t *testing.T) {
	c := join(t, 0, 0, rise(10, 100, named(t, "cycloidal")), fall(5, 60, half(t, "cycloidal", false)), fall(5, 60, half(t, "cycloidal", true)), dwell(140))
	for _, j := range c.Junctions() {
		if j.VelocityStep() != 0 || j.AccelerationStep() != 0 {
			t.Errorf("at %g: velocity %v, acceleration %v", j.At, j.Velocity, j.Acceleration)
		}
	}
	whole := named(t, "cycloidal") // the two halves are the cycloid
	for i := range 61 {
		u := float64(i) / 60
		want, _, _, _ := whole.At(1 - u)
		got, _, _, _ := c.At(100 + 120*u)
		near(t, "lift", got, 10*want, 1e-14)
	}
}

// A rise handed over to constant velocity and taken from it, by each means: no step of
// velocity, none of acceleration at speed.
func TestConstantVelocityStretch(t *testing.T) {
	cv, back := named(t, "constant-velocity"), named(t, "modified-sine")
	const v = 0.1 // length per degree
	for name, c := range map[string]struct {
		up, down             motion.Law
		liftUp, up1, liftOff float64
	}{
		"polynomial": {polynomial(t, 0, v*40/3), polynomial(t, v*50/4, 0), 3, 40, 4},
		"cycloidal":  {half(t, "cycloidal", true), half(t, "cycloidal", false), v * 40 / 2, 40, v * 50 / 2},
		"harmonic":   {half(t, "simple-harmonic", true), half(t, "simple-harmonic", false), v * 40 * 2 / math.Pi, 40, v * 50 * 2 / math.Pi},
	} {
		h := c.liftUp + 9 + c.liftOff
		k := join(t, 0, 0, rise(c.liftUp, 40, c.up), rise(9, 90, cv), rise(c.liftOff, 50, c.down), fall(h, 100, back), dwell(80))
		for _, j := range k.Junctions() {
			if j.VelocityStep() != 0 || (j.At == 40 || j.At == 130) && j.AccelerationStep() != 0 {
				t.Errorf("%s, at %g: velocity %v, acceleration %v", name, j.At, j.Velocity, j.Acceleration)
			}
		}
		near(t, name+" largest lift", k.MaxLift(), h, 1e-13)
		if k.MinLift() != 0 {
			t.Errorf("%s: least lift %g", name, k.MinLift())
		}
	}
}

// An event that goes beyond its ends: the cycle's extremes are the true ones. From a
// dwell to V = 4 the lift is h(-6u³ + 13u⁴ - 6u⁵), lowest at u = (26 - sqrt(136))/30.
func TestExtremesBeyondEnds(t *testing.T) {
	u := (26 - math.Sqrt(136)) / 30
	dip := -(-6*u*u*u + 13*u*u*u*u - 6*u*u*u*u*u)
	const h, v = 5, 4 * 5. / 60 // length per degree
	to := polynomial(t, 0, 4)
	from := polynomial(t, v*60/h, 0) // to rest: 1 - S(1-u) of the other, so as far above
	k := join(t, 20, 7, dwell(30), rise(h, 60, to), rise(h, 60, from), fall(2*h, 100, named(t, "cycloidal")), dwell(110))
	near(t, "least", k.MinLift(), 7-h*dip, 1e-10)
	near(t, "largest", k.MaxLift(), 7+2*h+h*dip, 1e-10)
	at, event := k.Lowest()
	near(t, "lowest at", at, 50+60*u, 1e-5)
	if event != 1 {
		t.Errorf("lowest in event %d", event)
	}
	// The same as falls, which run the laws backwards.
	k = join(t, 0, 7, dwell(30), rise(2*h, 100, named(t, "cycloidal")), fall(h, 60, from), fall(h, 60, to), dwell(110))
	near(t, "least of falls", k.MinLift(), 7-h*dip, 1e-10)
	near(t, "largest of falls", k.MaxLift(), 7+2*h+h*dip, 1e-10)
	if at, event = k.Lowest(); event != 3 {
		t.Errorf("lowest at %g in event %d", at, event)
	}
	near(t, "lowest of falls at", at, 250-60*u, 1e-5)
}
