package motion_test

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"

	"lobewright/synth/motion"
	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

func named(t tb, name string) motion.Law {
	t.Helper()
	l, err := motion.Named(name, motion.DefaultConstantShare)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func trig(t tb, b, c, d float64) motion.Law {
	t.Helper()
	l, err := motion.Trigonometric(b, c, d)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func near(t tb, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) && got != want {
		t.Errorf("%s: got %.15g, want %.15g (off by %.2g, allowed %.2g)", what, got, want, got-want, tol)
	}
}

// Peak factors in closed form, each the maximum of the law's own derivative, worked
// out by hand. Torque factors have no short closed form for all laws; they were
// computed to 12 digits by 40-digit arithmetic from the laws' formulas.
func TestPeakFactorsClosedForm(t *testing.T) {
	pi, inf := math.Pi, math.Inf(1)
	for _, c := range []struct {
		name               string
		v, a, j, smooth, m float64
	}{
		{"constant-velocity", 1, inf, inf, 0, inf},
		{"parabolic", 2, 4, inf, 0, 8},
		{"simple-harmonic", pi / 2, pi * pi / 2, inf, pi * pi * pi / 2, pi * pi * pi / 8},
		{"double-harmonic", 3 * math.Sqrt(3) * pi / 8, pi * pi, inf, 42.41372003138, 9.89484685269},
		{"cycloidal", 2, 2 * pi, 4 * pi * pi, 4 * pi * pi, 3 * math.Sqrt(3) * pi / 2},
		{"modified-trapezoidal", 2, 8 * pi / (pi + 2), 32 * pi * pi / (pi + 2), 32 * pi * pi / (pi + 2), 8.0899809823131},
		{"modified-sine", 4 * pi / (pi + 4), 4 * pi * pi / (pi + 4), 16 * pi * pi * pi / (pi + 4), 16 * pi * pi * pi / (pi + 4), 5.4577527627194},
		{"polynomial-3-4-5", 15. / 8, 10 / math.Sqrt(3), 60, 60, 6.6942687275},
		{"polynomial-4-5-6-7", 35. / 16, 84 * math.Sqrt(5) / 25, 52.5, 52.5, 10.750226164},
		{"modified-constant-velocity", 8 * pi / (5*pi + 4), 16 * pi * pi / (5*pi + 4), 128 * pi * pi * pi / (5*pi + 4), 128 * pi * pi * pi / (5*pi + 4), 5.7333770921308},
	} {
		p := named(t, c.name).Peaks()
		near(t, c.name+" velocity", p.Velocity, c.v, 1e-12*c.v)
		near(t, c.name+" acceleration", p.Acceleration, c.a, 1e-12*c.a)
		near(t, c.name+" jerk", p.Jerk, c.j, 1e-12*c.j)
		near(t, c.name+" smooth jerk", p.SmoothJerk, c.smooth, 1e-12*math.Max(1, c.smooth))
		digits := 1e-12
		if c.name == "double-harmonic" || c.name == "polynomial-3-4-5" || c.name == "polynomial-4-5-6-7" {
			digits = 1e-11 // given to so many
		}
		near(t, c.name+" torque", p.Torque, c.m, digits*c.m)
	}
}

// Published factors, to the digits printed there; both tables are quoted from memory:
// VDI 2143 part 1 (1980): velocity, acceleration, jerk, torque;
// R. L. Norton, Cam Design and Manufacturing Handbook, 2nd ed. 2009: velocity, acceleration, jerk.
func TestPeakFactorsPublished(t *testing.T) {
	inf := math.Inf(1)
	for _, c := range []struct {
		source, name string
		v, a, j, m   [2]float64 // value, half a unit of its last digit
	}{
		{source: "VDI 2143", name: "simple-harmonic", v: [2]float64{1.57, .005}, a: [2]float64{4.93, .005}, j: [2]float64{inf}, m: [2]float64{3.88, .005}},
		{source: "VDI 2143", name: "cycloidal", v: [2]float64{2, .005}, a: [2]float64{6.28, .005}, j: [2]float64{39.5, .05}, m: [2]float64{8.16, .005}},
		{source: "VDI 2143", name: "polynomial-3-4-5", v: [2]float64{1.88, .0051}, a: [2]float64{5.77, .005}, j: [2]float64{60, .5}, m: [2]float64{6.69, .005}},
		{source: "VDI 2143", name: "modified-trapezoidal", v: [2]float64{2, .005}, a: [2]float64{4.89, .005}, j: [2]float64{61.4, .05}, m: [2]float64{8.09, .005}},
		{source: "VDI 2143", name: "modified-sine", v: [2]float64{1.76, .005}, a: [2]float64{5.53, .005}, j: [2]float64{69.5, .05}, m: [2]float64{5.46, .005}},
		{source: "Norton", name: "parabolic", v: [2]float64{2, .0005}, a: [2]float64{4, .0005}, j: [2]float64{inf}},
		{source: "Norton", name: "modified-trapezoidal", v: [2]float64{2, .0005}, a: [2]float64{4.888, .0005}, j: [2]float64{61.43, .005}},
		{source: "Norton", name: "simple-harmonic", v: [2]float64{1.571, .0005}, a: [2]float64{4.935, .0005}, j: [2]float64{inf}},
		{source: "Norton", name: "modified-sine", v: [2]float64{1.760, .0005}, a: [2]float64{5.528, .0005}, j: [2]float64{69.47, .005}},
		{source: "Norton", name: "cycloidal", v: [2]float64{2, .0005}, a: [2]float64{6.283, .0005}, j: [2]float64{39.48, .005}},
		{source: "Norton", name: "polynomial-3-4-5", v: [2]float64{1.875, .0005}, a: [2]float64{5.774, .0005}, j: [2]float64{60, .05}},
		{source: "Norton", name: "polynomial-4-5-6-7", v: [2]float64{2.188, .00051}, a: [2]float64{7.513, .0005}, j: [2]float64{52.5, .05}},
		// universal seven-segment family (C. N. Neklutin 1969), from memory
		{source: "Neklutin", name: "modified-constant-velocity", v: [2]float64{1.28, .005}, a: [2]float64{8.01, .005}, j: [2]float64{201.4, .05}},
	} {
		p := named(t, c.name).Peaks()
		what := c.source + " " + c.name
		near(t, what+" velocity", p.Velocity, c.v[0], c.v[1])
		near(t, what+" acceleration", p.Acceleration, c.a[0], c.a[1])
		near(t, what+" jerk", p.Jerk, c.j[0], c.j[1])
		if c.m[0] != 0 {
			near(t, what+" torque", p.Torque, c.m[0], c.m[1])
		}
	}
}

// Members of the trigonometric family, and constant shares other than the default;
// values by 40-digit arithmetic from the law's definition.
func TestFamilyPeaks(t *testing.T) {
	p := trig(t, 1./3, 1./3, 1./3).Peaks()
	near(t, "thirds velocity", p.Velocity, 2, 1e-12)
	near(t, "thirds acceleration", p.Acceleration, 5.278810157861311, 1e-11)
	near(t, "thirds jerk", p.Jerk, 49.75161363489682, 1e-10)
	near(t, "thirds torque", p.Torque, 8.0979722409762, 1e-10)
	for share, want := range map[float64][3]float64{
		1. / 3: {1.404086978318894, 6.616604004131592, 124.7200471865557},
		0.2:    {1.527538675879143, 5.998630352770246, 94.22626523931877},
		0:      {1.759603385953770, 5.527957070544091, 69.46635728872428}, // the modified sine itself
	} {
		l, err := motion.Named("modified-constant-velocity", share)
		if err != nil {
			t.Fatal(err)
		}
		p := l.Peaks()
		near(t, "velocity", p.Velocity, want[0], 1e-11)
		near(t, "acceleration", p.Acceleration, want[1], 1e-11)
		near(t, "jerk", p.Jerk, want[2], 1e-9)
	}
	for name, s := range map[string][3]float64{
		"parabolic": {0, 1, 0}, "modified-trapezoidal": {.25, .5, .25}, "simple-harmonic": {0, 0, 1},
		"modified-sine": {.25, 0, .75}, "cycloidal": {.5, 0, .5},
	} {
		family, law := trig(t, s[0], s[1], s[2]), named(t, name)
		for i := range 1001 {
			u := float64(i) / 1000
			got, _, _, _ := family.At(u)
			want, _, _, _ := law.At(u)
			near(t, name+" as a member of the family", got, want, 3e-16)
		}
	}
}

// Every law starts at 0 and ends at 1 to the last place, in both directions.
func TestEnds(t *testing.T) {
	for _, name := range motion.Names() {
		l := named(t, name)
		s0, _, _, _ := l.At(0)
		s1, _, _, _ := l.At(1)
		near(t, name+" S(0)", s0, 0, 1e-16)
		near(t, name+" S(1)", s1, 1, 2.3e-16)
		start, end := l.EndSpeeds()
		want := 0.0
		if name == "constant-velocity" {
			want = 1
		}
		if start != want || end != want {
			t.Errorf("%s: end speeds %g and %g, want %g", name, start, end, want)
		}
	}
}

// Zones cover [0, 1] and meet in value, velocity and acceleration for any shares.
func TestZonesMeet(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		b := rapid.Float64Range(0.01, 0.98).Draw(t, "sine")
		c := rapid.Float64Range(0, 0.99-b).Draw(t, "constant")
		law := trig(t, b, c, 1-b-c)
		if rapid.Bool().Draw(t, "constant velocity") {
			l, err := motion.Named("modified-constant-velocity", rapid.Float64Range(0, 0.95).Draw(t, "share"))
			if err != nil {
				t.Fatal(err)
			}
			law = l
		}
		zones := law.Zones()
		if zones[0].From != 0 || zones[len(zones)-1].To != 1 {
			t.Fatalf("zones cover %g to %g", zones[0].From, zones[len(zones)-1].To)
		}
		amax := law.Peaks().Acceleration
		for i := 1; i < len(zones); i++ {
			if math.Abs(zones[i].From-zones[i-1].To) > 1e-15 {
				t.Fatalf("gap between %v and %v", zones[i-1].To, zones[i].From)
			}
			p := motion.Eval(zones[i-1], taylor.FVar(zones[i-1].To))
			q := motion.Eval(zones[i], taylor.FVar(zones[i-1].To))
			near(t, "lift", p.Deriv(0), q.Deriv(0), 1e-14)
			near(t, "velocity", p.Deriv(1), q.Deriv(1), 1e-13)
			if amax < 100 && c+b < 0.99 {
				near(t, "acceleration", p.Deriv(2), q.Deriv(2), 1e-11)
			}
		}
		if s := law.Peaks().VelocityStep; s != 0 {
			t.Fatalf("velocity steps by %g", s)
		}
	})
}

// Exact integrals over one event, by symbolic integration.
func TestIntegrals(t *testing.T) {
	pi := math.Pi
	for name, want := range map[string][4]float64{ // of S, S², V², A²
		"simple-harmonic":    {.5, 3. / 8, pi * pi / 8, pow4(pi) / 8},
		"cycloidal":          {.5, 1./3 + 5/(8*pi*pi), 3. / 2, 2 * pi * pi},
		"polynomial-3-4-5":   {.5, 181. / 462, 10. / 7, 120. / 7},
		"polynomial-4-5-6-7": {.5, 521. / 1287, 700. / 429, 280. / 11},
		"constant-velocity":  {.5, 1. / 3, 1, 0},
	} {
		l := named(t, name)
		for k, f := range []func(u float64) float64{
			func(u float64) float64 { s, _, _, _ := l.At(u); return s },
			func(u float64) float64 { s, _, _, _ := l.At(u); return s * s },
			func(u float64) float64 { _, v, _, _ := l.At(u); return v * v },
			func(u float64) float64 { _, _, a, _ := l.At(u); return a * a },
		} {
			near(t, name, quad.Fixed(f, 0, 1, 40, nil, 0), want[k], 1e-12*math.Max(1, want[k]))
		}
	}
}

func pow4(x float64) float64 { return x * x * x * x }

func TestLawErrors(t *testing.T) {
	for want, err := range map[string]error{
		"cycloidal":        second(motion.Named("cycloid", 0.5)),
		"below 1":          second(motion.Named("modified-constant-velocity", 1)),
		"at least 0":       second(motion.Trigonometric(-0.1, 0.6, 0.5)),
		"must sum to 1":    second(motion.Trigonometric(0.1, 0.6, 0.5)),
		"each must be":     second(motion.Trigonometric(math.NaN(), 0.6, 0.5)),
		"constant_share i": second(motion.Named("modified-constant-velocity", math.NaN())),
	} {
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("want an error with %q, got %v", want, err)
		}
	}
}

func second(_ motion.Law, err error) error { return err }

// tb is what testing.T and rapid.T share.
type tb interface {
	Helper()
	Fatal(...any)
	Errorf(string, ...any)
}
