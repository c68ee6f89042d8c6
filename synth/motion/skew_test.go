package motion_test

import (
	"math"
	"strings"
	"testing"

	"lobewright/synth/motion"
	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

func skewed(t tb, l motion.Law, p float64) motion.Law {
	t.Helper()
	s, err := l.Skewed(p)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// Peak accelerations a1 and a2 of skewed laws, by H. A. Rothbart ed., Cam Design Handbook
// (2004), p. 37 and p. 71 (a1 = a(1+p)/2p, a2 = a(1+p)/2, p = b1/b2), to 14 digits.
func TestSkewedPeaks(t *testing.T) {
	for _, c := range []struct {
		law           string
		inflection    float64
		first, second float64
		jerk1, jerk2  float64 // peak jerk of each part, 0 where not tabulated
	}{
		{law: "modified-trapezoidal", inflection: 1. / 3, first: 7.3321856442199, second: 3.6660928221099},
		{law: "modified-sine", inflection: 1. / 3, first: 8.2919356058161, second: 4.1459678029081, jerk1: 156.2993039, jerk2: 39.0748259749},
		{law: "cycloidal", inflection: 1. / 3, first: 9.4247779607694, second: 4.7123889803847},
		{law: "polynomial-3-4-5", inflection: 1. / 3, first: 8.6602540378444, second: 4.3301270189222},
		{law: "parabolic", inflection: 1. / 3, first: 6, second: 3},
		{law: "modified-trapezoidal", inflection: 1. / 4, first: 9.7762475256265, second: 3.2587491752088},
		{law: "modified-sine", inflection: 1. / 4, first: 11.055914141088, second: 3.6853047136961},
		{law: "parabolic", inflection: 1. / 4, first: 8, second: 8. / 3},
	} {
		sym := named(t, c.law)
		l := skewed(t, sym, c.inflection)
		p := l.Peaks()
		near(t, c.law+" velocity", p.Velocity, sym.Peaks().Velocity, 1e-13)
		near(t, c.law+" acceleration", p.Acceleration, c.first, 1e-13*c.first)
		mirror := skewed(t, sym, 1-c.inflection) // its larger part is the second
		near(t, c.law+" mirrored acceleration", mirror.Peaks().Acceleration, c.first, 1e-13*c.first)
		var part [2][2]float64 // of acceleration and jerk, before and after the inflection
		for i := range 4801 {
			u := float64(i) / 4800
			_, _, a, j := l.At(u)
			k := 0
			if u >= c.inflection {
				k = 1
			}
			part[k][0], part[k][1] = math.Max(part[k][0], math.Abs(a)), math.Max(part[k][1], math.Abs(j))
		}
		near(t, c.law+" second acceleration", part[1][0], c.second, 2e-6*c.second) // on a grid
		if c.jerk1 != 0 {
			near(t, c.law+" jerk", p.Jerk, c.jerk1, 5e-8)
			near(t, c.law+" second jerk", part[1][1], c.jerk2, 5e-11)
		}
	}
}

// Rothbart 2004, p. 37: skewed constant acceleration is s = C1 u² up to the inflection
// and 1 - s = C2 (1-u)² after it, with lift p at share p; so C1 = 1/p, C2 = 1/(1-p).
func TestSkewedParabola(t *testing.T) {
	const p = 0.2
	l := skewed(t, named(t, "parabolic"), p)
	for i := range 101 {
		u := float64(i) / 100
		want := u * u / p
		if u > p {
			want = 1 - (1-u)*(1-u)/(1-p)
		}
		s, _, _, _ := l.At(u)
		near(t, "lift", s, want, 3e-16)
	}
}

// At any inflection every symmetric law begins and ends as before, has its sign of
// acceleration change there, and meets in lift, velocity and acceleration.
func TestSkewedProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(append(motion.SymmetricNames(), "trigonometric")).Draw(t, "law")
		p := rapid.Float64Range(0.02, 0.98).Draw(t, "inflection")
		sym := trig(t, 0.3, 0.2, 0.5)
		if name != "trigonometric" {
			sym = named(t, name)
		}
		l := skewed(t, sym, p)
		for i := range 41 {
			u := float64(i) / 40
			s, v, a, j := l.At(p * u) // the first half, twice as long an angle as u
			ws, wv, wa, wj := sym.At(u / 2)
			near(t, "lift", s, 2*p*ws, 1e-15)
			near(t, "velocity", v, wv, 1e-12)
			if u < 1 {
				near(t, "acceleration", a, wa/(2*p), 1e-10/p)
				near(t, "jerk", j, wj/(4*p*p), 1e-9/(p*p))
				if a < -1e-9/p {
					t.Fatalf("acceleration %g before the inflection", a)
				}
			}
			s, v, a, _ = l.At(1 - (1-p)*u)
			near(t, "lift after", s, 1-2*(1-p)*ws, 1e-15)
			near(t, "velocity after", v, wv, 1e-12)
			if u < 1 && a > 1e-9/(1-p) {
				t.Fatalf("acceleration %g after the inflection", a)
			}
		}
		zones := l.Zones()
		for i := 1; i < len(zones); i++ {
			if zones[i].From != zones[i-1].To {
				t.Fatalf("gap from %v to %v", zones[i-1].To, zones[i].From)
			}
			a, b := motion.Eval(zones[i-1], taylor.FVar(zones[i].From)), motion.Eval(zones[i], taylor.FVar(zones[i].From))
			near(t, "lift at a boundary", a.Deriv(0), b.Deriv(0), 1e-15)
			near(t, "velocity at a boundary", a.Deriv(1), b.Deriv(1), 1e-12)
		}
		if q := l.Peaks(); q.VelocityStep != 0 || (q.AccelerationStep != 0) != (sym.Peaks().AccelerationStep != 0) {
			t.Fatalf("steps %+v", q)
		}
	})
}

func TestSkewedErrors(t *testing.T) {
	cycloid := named(t, "cycloidal")
	half, err := motion.FromRest("cycloidal")
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		l    motion.Law
		p    float64
		want string
	}{
		{named(t, "double-harmonic"), 0.4, "double-harmonic takes no inflection; the laws that take one are parabolic, simple-harmonic, cycloidal,"},
		{named(t, "constant-velocity"), 0.4, "takes no inflection"},
		{half, 0.4, "half cycloidal takes no inflection"},
		{skewed(t, cycloid, 0.3), 0.4, "takes no inflection"},
		{cycloid, 0, "above 0"}, {cycloid, 1, "below 1"}, {cycloid, math.NaN(), "inflection is NaN"},
		{motion.Law{}, 0.4, "takes no inflection"},
	} {
		if _, err := c.l.Skewed(c.p); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("want %q, got %v", c.want, err)
		}
	}
}
