package motion

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/floats/scalar"
	"pgregory.net/rapid"
)

// atPowers evaluates a polynomial by powers of u, u in 0 to 1, and its derivatives.
func atPowers(c []float64, u float64) (s, v, a float64) {
	for j := len(c) - 1; j >= 0; j-- {
		a = a*u + 2*v
		v = v*u + s
		s = s*u + c[j]
	}
	return s, v, a
}

func sameCurve(t *testing.T, what string, middle, powers []float64) {
	t.Helper()
	if len(middle) != len(powers) {
		t.Errorf("%s: degree %d, want %d (%v)", what, len(middle)-1, len(powers)-1, middle)
	}
	for i := range 101 {
		u := float64(i) / 100
		got, _, _ := atPowers(middle, 2*u-1)
		want, _, _ := atPowers(powers, u)
		if !scalar.EqualWithinAbs(got, want, 2e-14) {
			t.Errorf("%s: at u = %g %.17g, want %.17g", what, u, got, want)
		}
	}
}

// The bases of quintic and septic Hermite interpolation by powers of u, each with one
// fact 1 and all others 0; worked out by hand.
func TestHermiteBases(t *testing.T) {
	for degree, basis := range map[int][][]float64{
		5: {
			{1, 0, 0, -10, 15, -6}, {0, 1, 0, -6, 8, -3}, {0, 0, .5, -1.5, 1.5, -.5},
			{0, 0, 0, 10, -15, 6}, {0, 0, 0, -4, 7, -3}, {0, 0, 0, .5, -1, .5},
		},
		7: {
			{1, 0, 0, 0, -35, 84, -70, 20}, {0, 1, 0, 0, -20, 45, -36, 10}, {0, 0, .5, 0, -5, 10, -7.5, 2}, {0, 0, 0, 1. / 6, -2. / 3, 1, -2. / 3, 1. / 6},
			{0, 0, 0, 0, 35, -84, 70, -20}, {0, 0, 0, 0, -15, 39, -34, 10}, {0, 0, 0, 0, 2.5, -7, 6.5, -2}, {0, 0, 0, 0, -1. / 6, .5, -.5, 1. / 6},
		},
	} {
		orders := (degree + 1) / 2
		for one := range basis {
			var facts []endFact
			for i := range basis {
				f := endFact{u: float64(i / orders), order: i % orders}
				if i == one {
					f.value = 1
				}
				facts = append(facts, f)
			}
			sameCurve(t, "basis", leastPolynomial(facts), basis[one])
		}
	}
}

// H. A. Rothbart ed., Cam Design Handbook (2004), p. 445, figs 13.24 and 13.25: half of a
// rise and fall about its top at u = 0, to a dwell at u = 1; odd derivatives at the top
// are 0, in the second the fourth too.
func TestPartialConstraints(t *testing.T) {
	top := []endFact{{0, 0, 1}, {0, 1, 0}, {0, 3, 0}, {1, 0, 0}, {1, 1, 0}, {1, 2, 0}}
	sameCurve(t, "fig. 13.24", leastPolynomial(top), []float64{1, 0, -10. / 3, 0, 5, -8. / 3})
	sameCurve(t, "fig. 13.25", leastPolynomial(append(top, endFact{0, 4, 0})), []float64{1, 0, -2.5, 0, 0, 4, -2.5})
}

// Facts that a lower degree meets give that degree.
func TestLeastDegree(t *testing.T) {
	for _, c := range []struct {
		start, end float64
		powers     []float64
	}{
		{0, 0, []float64{0, 0, 0, 10, -15, 6}},
		{0, 2, []float64{0, 0, 0, 2, -1}},
		{2, 0, []float64{0, 2, 0, -2, 1}},
		{1, 1, []float64{0, 1}},
		{.5, 1.5, []float64{0, .5, 0, 1, -.5}}, // 0.5 u + (2u³ - u⁴)/2
		{3, 3, []float64{0, 3, 0, -20, 30, -12}},
	} {
		l, err := Polynomial(c.start, c.end)
		if err != nil {
			t.Fatal(err)
		}
		sameCurve(t, l.Name(), l.zones[0].Poly, c.powers)
	}
	l, _ := Polynomial(0, 2) // dwell to V = 2, in exact fractions
	for u, want := range map[float64]float64{.25: .02734375, .5: .1875, .75: .52734375} {
		if s, _, _, _ := l.At(u); !scalar.EqualWithinAbs(s, want, 1e-16) {
			t.Errorf("S(%g) = %.17g, want %g", u, s, want)
		}
	}
	if p := l.Peaks(); !scalar.EqualWithinAbs(p.Acceleration, 3, 1e-13) || p.AccelerationStep != 0 || p.VelocityStep != 0 {
		t.Errorf("peaks %+v, want acceleration 3 and no step", p)
	}
}

// Any end velocities are met, with no acceleration there, and the extremes hold every
// lift and are taken.
func TestPolynomialEnds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		start := rapid.Float64Range(-20, 20).Draw(t, "start")
		end := rapid.Float64Range(-20, 20).Draw(t, "end")
		l, err := Polynomial(start, end)
		if err != nil {
			t.Fatal(err)
		}
		s0, v0, a0, _ := l.At(0)
		s1, v1, a1, _ := l.At(1)
		for i, e := range []float64{s0, v0 - start, a0, s1 - 1, v1 - end, a1} {
			if math.Abs(e) > 2e-12 {
				t.Fatalf("end fact %d is off by %g", i, e)
			}
		}
		least, largest := 0.0, 1.0
		for i := range 2001 {
			s, _, _, _ := l.At(float64(i) / 2000)
			least, largest = math.Min(least, s), math.Max(largest, s)
		}
		// A parabola through the best of 2000 points misses by A/8 of the squared step.
		slack := 1e-9 + 200/(8*2000.*2000)
		if l.below < -least-1e-9 || l.below > -least+slack || l.above < largest-1-1e-9 || l.above > largest-1+slack {
			t.Fatalf("lifts from %g to %g, told -%g to 1+%g", least, largest, l.below, l.above)
		}
	})
}

// From rest, S stays at or above 0 up to V1 = 2.5, where the cubic term 10 - 4 V1
// vanishes, and goes below just beyond.
func TestPolynomialDips(t *testing.T) {
	for end, dips := range map[float64]bool{0: false, 2: false, 2.499: false, 2.5: false, 2.55: true, 5: true} {
		l, err := Polynomial(0, end)
		if err != nil {
			t.Fatal(err)
		}
		if (l.below > 0) != dips || l.above != 0 {
			t.Errorf("to velocity %g: %g below 0, %g above 1", end, l.below, l.above)
		}
	}
	// V1 = 4: S = -6u³ + 13u⁴ - 6u⁵; V = -18u² + 52u³ - 30u⁴ = 0 at u = (26 - sqrt(136))/30.
	l, _ := Polynomial(0, 4)
	u := (26 - math.Sqrt(136)) / 30
	s, _, _ := atPowers([]float64{0, 0, 0, -6, 13, -6}, u)
	if !scalar.EqualWithinAbs(l.below, -s, 1e-13) {
		t.Errorf("to velocity 4: %.15g below 0, want %.15g", l.below, -s)
	}
}

func TestPolynomialErrors(t *testing.T) {
	for _, v := range [][2]float64{{math.NaN(), 0}, {0, math.Inf(1)}, {-1001, 0}} {
		if l, err := Polynomial(v[0], v[1]); err == nil || len(l.zones) != 0 {
			t.Errorf("%v: %v", v, err)
		}
	}
}
