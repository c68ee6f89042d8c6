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
		near(t, c.name+" torque", p.Torque, c.m, 1e-10*c.m)
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

// S, V and A at n/120, the tabulation of H. A. Rothbart ed., Cam Design Handbook
// (2004), appendix B; values by 30-digit arithmetic from the formulas.
func TestTables(t *testing.T) {
	for name, rows := range map[string][][4]float64{
		"simple-harmonic": {{5, .004277569313095, .2050300632898, 4.892584283626}, {20, .06698729810778, .7853981633974, 4.273664068323}, {50, .3705904774487, 1.517272739891, 1.277220793315}},
		"cycloidal":       {{5, .0004743362722763, .03407417371093, 1.626208021406}, {15, .01246046048036, .2928932188135, 4.442882938158}, {50, .3370891951207, 1.866025403784, 3.141592653590}},
		"modified-trapezoidal": {{5, .0007304860653952, .05211404529374, 2.444061881407}, {10, .005608076087297, .1944922648242, 4.233239355439}, {15, .01766866086614, .3889845296483, 4.888123762813},
			{30, .1044801939692, 1, 4.888123762813}, {40, .2047861792567, 1.407343646901, 4.888123762813}, {50, .3389414094206, 1.805507735176, 4.233239355439}},
		"modified-sine": {{5, .0008261033897823, .05893553828317, 2.763978535272}, {15, .01998140871658, .4399008464884, 5.527957070544}, {20, .04309701578486, .669064787529, 5.443974981390},
			{40, .2241692444608, 1.450851643416, 3.553302311825}, {50, .3555861751981, 1.680015584456, 1.890672669566}},
	} {
		l := named(t, name)
		for _, r := range rows {
			s, v, a, _ := l.At(r[0] / 120)
			near(t, name+" S", s, r[1], 5e-14)
			near(t, name+" V", v, r[2], 5e-13)
			near(t, name+" A", a, r[3], 5e-12)
			s, v, a, _ = l.At(1 - r[0]/120) // point symmetry
			near(t, name+" S mirrored", s, 1-r[1], 5e-14)
			near(t, name+" V mirrored", v, r[2], 5e-13)
			near(t, name+" A mirrored", a, -r[3], 5e-12)
		}
	}
	for name, want := range map[string]map[float64]float64{
		"polynomial-3-4-5":           {.05: .001158125, .1: .00856, .2: .05792, .25: .103515625, .4: .31744},
		"polynomial-4-5-6-7":         {.05: .000193578125, .1: .002728, .2: .033344, .25: .070556640625, .4: .289792},
		"double-harmonic":            {.05: 3.7894239325333e-5, .125: .0014485813926751, .3: .042480249556895, .5: .25, .75: .72855339059327},
		"modified-constant-velocity": {.05: .0038763587716561, .0625: .0072406813306170, .1: .024783959783821, .125: .042462074518041, .2: .11880880752012, .25: .18118545677432, .4: .37247418270973},
	} {
		for u, s := range want {
			got, _, _, _ := named(t, name).At(u)
			near(t, name+" S", got, s, 5e-15)
		}
	}
}

// The laws as their sources print them, against the zones, which are written
// about other points.
func TestSourceFormulas(t *testing.T) {
	pi, pow := math.Pi, math.Pow
	for name, s := range map[string]func(u float64) float64{
		"simple-harmonic":    func(u float64) float64 { return (1 - math.Cos(pi*u)) / 2 },
		"double-harmonic":    func(u float64) float64 { return (1-math.Cos(pi*u))/2 - (1-math.Cos(2*pi*u))/8 },
		"cycloidal":          func(u float64) float64 { return u - math.Sin(2*pi*u)/(2*pi) },
		"polynomial-3-4-5":   func(u float64) float64 { return 10*pow(u, 3) - 15*pow(u, 4) + 6*pow(u, 5) },
		"polynomial-4-5-6-7": func(u float64) float64 { return 35*pow(u, 4) - 84*pow(u, 5) + 70*pow(u, 6) - 20*pow(u, 7) },
		"modified-sine": func(u float64) float64 {
			k := 1 / (4 + pi)
			switch {
			case u < 1./8:
				return k * (pi*u - math.Sin(4*pi*u)/4)
			case u < 7./8:
				return k * (2 + pi*u - 9./4*math.Sin(4*pi*u/3+pi/3))
			}
			return k * (4 + pi*u - math.Sin(4*pi*u)/4)
		},
	} {
		l := named(t, name)
		for i := range 1001 {
			u := float64(i) / 1000
			got, _, _, _ := l.At(u)
			near(t, name, got, s(u), 2e-14)
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

// The largest acceleration of the double harmonic's rise, inside, by 40-digit arithmetic.
func TestDoubleHarmonicInside(t *testing.T) {
	_, _, a, j := named(t, "double-harmonic").At(0.4195693767)
	near(t, "acceleration", a, 9*math.Pi*math.Pi/16, 1e-12)
	near(t, "jerk there", j, 0, 1e-7)
}

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
