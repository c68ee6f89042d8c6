package motion_test

import (
	"math"
	"testing"
)

// S, V and A at n/120, the tabulation of H. A. Rothbart ed., Cam Design Handbook
// (2004), appendix B; values by 30-digit arithmetic from the formulas.
func TestTables(t *testing.T) {
	for name, rows := range map[string][][4]float64{
		"simple-harmonic": {
			{5, .004277569313095, .2050300632898, 4.892584283626},
			{10, .01703708685547, .4065520053516, 4.766652893134},
			{15, .03806023374436, .6011177298843, 4.559162750075},
			{20, .06698729810778, .7853981633974, 4.273664068323},
			{30, .1464466094067, 1.110720734540, 3.489432099819},
			{40, .25, 1.360349523176, 2.467401100272},
			{50, .3705904774487, 1.517272739891, 1.277220793315},
		},
		"cycloidal": {
			{5, .0004743362722763, .03407417371093, 1.626208021406},
			{10, .003755861787386, .1339745962156, 3.141592653590},
			{15, .01246046048036, .2928932188135, 4.442882938158},
			{20, .02883444281122, .5, 5.441398092703},
			{30, .0908450569081, 1, 6.283185307180},
			{40, .1955011094779, 1.5, 5.441398092703},
			{50, .3370891951207, 1.866025403784, 3.141592653590},
		},
		"modified-trapezoidal": {
			{5, .0007304860653952, .05211404529374, 2.444061881407},
			{10, .005608076087297, .1944922648242, 4.233239355439},
			{15, .01766866086614, .3889845296483, 4.888123762813},
			{20, .03811951259004, .5926563530989, 4.888123762813},
			{30, .1044801939692, 1, 4.888123762813},
			{40, .2047861792567, 1.407343646901, 4.888123762813},
			{50, .3389414094206, 1.805507735176, 4.233239355439},
		},
		"modified-sine": {
			{5, .0008261033897823, .05893553828317, 2.763978535272},
			{10, .006342147900339, .2199504232442, 4.787351254121},
			{15, .01998140871658, .4399008464884, 5.527957070544},
			{20, .04309701578486, .669064787529, 5.443974981390},
			{30, .1171784846146, 1.099752116221, 4.787351254121},
			{40, .2241692444608, 1.450851643416, 3.553302311825},
			{50, .3555861751981, 1.680015584456, 1.890672669566},
		},
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
		"polynomial-3-4-5":   {.05: .001158125, .1: .00856, .125: .01605224609375, .2: .05792, .25: .103515625, .3: .16308, .4: .31744},
		"polynomial-4-5-6-7": {.05: .000193578125, .1: .002728, .125: .0062389373779297, .2: .033344, .25: .070556640625, .3: .126036, .4: .289792},
		"double-harmonic": {.05: 3.7894239325333e-5, .1: 5.9886614929164e-4, .125: .0014485813926751, .2: .0091186271093947, .25: .021446609406726,
			.3: .042480249556895, .4: .11936437851566, .5: .25, .75: .72855339059327},
		"modified-constant-velocity": {.05: .0038763587716561, .0625: .0072406813306170, .1: .024783959783821, .125: .042462074518041, .2: .11880880752012,
			.25: .18118545677432, .3: .24494836541946, .4: .37247418270973},
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

// Where laws have their local extremes, and what they are there: closed forms, or 40-digit
// arithmetic from the laws' formulas; the other derivative vanishes. Places are given
// to ten digits, so the value is met to the square of that.
func TestLocalExtremes(t *testing.T) {
	pi := math.Pi
	for _, c := range []struct {
		name  string
		u     float64
		order int // of the derivative that is extreme there
		value float64
	}{
		{"double-harmonic", 2. / 3, 1, 3 * math.Sqrt(3) * pi / 8},
		{"double-harmonic", .4195693767, 2, 9 * pi * pi / 16},
		{"double-harmonic", .2190743889, 3, 20.57547099360},
		{"double-harmonic", .7241284334, 3, -42.41372003138},
		{"polynomial-3-4-5", (3 - math.Sqrt(3)) / 6, 2, 10 / math.Sqrt(3)},
		{"polynomial-3-4-5", (3 + math.Sqrt(3)) / 6, 2, -10 / math.Sqrt(3)},
		{"polynomial-3-4-5", .5, 3, -30},
		{"polynomial-4-5-6-7", (5 - math.Sqrt(5)) / 10, 2, 84 * math.Sqrt(5) / 25},
		{"polynomial-4-5-6-7", .5, 3, -52.5},
		{"polynomial-4-5-6-7", .1127016654, 3, 42},
		{"polynomial-4-5-6-7", .8872983346, 3, 42},
		{"modified-sine", .5, 3, -23.15545242957476},
		{"simple-harmonic", .5, 3, -pi * pi * pi / 2},
	} {
		l := named(t, c.name)
		_, v, a, j := l.At(c.u)
		_, _, _, before := l.At(c.u - 1e-4)
		_, _, _, after := l.At(c.u + 1e-4)
		got, rate := []float64{v, a, j}[c.order-1], []float64{a, j, (after - before) / 2e-4}[c.order-1]
		near(t, c.name, got, c.value, 2e-11)
		near(t, c.name+" rate", rate, 0, 1e-3)
	}
	for name, want := range map[string][2]float64{"polynomial-3-4-5": {60, 60}, "modified-sine": {69.46635728872428, 69.46635728872428}, "double-harmonic": {0, 0}} {
		_, _, _, j := named(t, name).At(0)
		near(t, name+" jerk at the start", j, want[0], 1e-12)
		if _, _, _, j = named(t, name).At(1); name != "double-harmonic" {
			near(t, name+" jerk at the end", j, want[1], 1e-12)
		}
	}
	_, _, a, _ := named(t, "double-harmonic").At(1)
	near(t, "double-harmonic acceleration at the end", a, -pi*pi, 1e-13)
	_, _, _, j := named(t, "modified-constant-velocity").At(.0625) // where the cosine begins
	near(t, "modified-constant-velocity, jerk where its cosine begins", j, 0, 1e-11)
	_, _, _, j = named(t, "modified-constant-velocity").At(.25 - 1e-12) // where it ends
	near(t, "modified-constant-velocity, jerk where its cosine ends", j, -67.12689960429746, 1e-9)
}
