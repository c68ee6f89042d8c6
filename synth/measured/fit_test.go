package measured_test

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"
	"lobewright/synth/measured"
	"lobewright/synth/motion"
	"pgregory.net/rapid"
)

// cycle is a known motion: dwell, rise, dwell, fall, dwell.
func cycle(t tb, rise, fall string, h float64) *motion.Cycle {
	t.Helper()
	law := func(name string) motion.Law {
		l, err := motion.Named(name, 0.5)
		if err != nil {
			t.Fatal(err)
		}
		return l
	}
	c, err := motion.Join(0, 0, []motion.Event{{Kind: motion.Dwell, Over: 60}, {Kind: motion.Rise, Lift: h, Over: 90, Law: law(rise)},
		{Kind: motion.Dwell, Over: 40}, {Kind: motion.Fall, Lift: h, Over: 120, Law: law(fall)}, {Kind: motion.Dwell, Over: 50}})
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// tabulated is a table of n rows, rounded as a user's would be.
func tabulated(c *motion.Cycle, n int, round float64) string {
	var b strings.Builder
	b.WriteString("cam_angle,lift\n")
	for i := range n {
		deg := 360 * float64(i) / float64(n)
		s, _, _, _ := c.At(deg)
		fmt.Fprintf(&b, "%.9f,%.9f\n", deg, math.Round(s/round)*round)
	}
	return b.String()
}

func parse(t tb, csv string, smoothing float64) []measured.Row {
	t.Helper()
	rows, faults := measured.Parse([]byte(csv), smoothing)
	if faults != nil {
		t.Fatal(faults)
	}
	return rows
}

func smooth(t tb, csv string, smoothing float64) measured.Curve {
	t.Helper()
	m, err := measured.Smooth(parse(t, csv, smoothing), smoothing)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// A known law is found again from its own table at 1 degree rounded to 0.001: the lift
// within 0.002, the acceleration within 3 % of its peak over 95 % of the cycle.
func TestRecover(t *testing.T) {
	for _, laws := range [][2]string{{"modified-sine", "polynomial-3-4-5"}, {"cycloidal", "polynomial-4-5-6-7"}, {"modified-trapezoidal", "modified-sine"}} {
		for _, h := range []float64{5, 14, 50} {
			c := cycle(t, laws[0], laws[1], h)
			m := smooth(t, tabulated(c, 360, 0.001), 0.001)
			got, err := motion.Of(m.Zones)
			if err != nil {
				t.Fatal(err)
			}
			lift, off, n, peak := 0.0, 0, 7200, c.Peaks().Acceleration.Value
			for i := range n {
				deg := 360 * float64(i) / float64(n)
				s0, _, a0, _ := c.At(deg)
				s1, _, a1, _ := got.At(deg)
				lift = math.Max(lift, math.Abs(s1-s0))
				if math.Abs(a1-a0) > 0.03*peak {
					off++
				}
			}
			within := 1 - float64(off)/float64(n)
			t.Logf("%v, lift %g: %d knots, lift within %.5f, acceleration within 3 %% over %.2f %%", laws, h, m.Report.Knots, lift, 100*within)
			if lift > 0.002 || within < 0.95 || m.Report.Knots > 90 {
				t.Errorf("%v, lift %g: lift off by %g, acceleration within 3 %% over %.4g of the cycle, %d knots", laws, h, lift, within, m.Report.Knots)
			}
			if r := m.Report; r.NoiseLift < 0.0001 || r.NoiseLift > 0.0003 { // rounding to 0.001 is 0.00029 where the lift moves, none in dwells
				t.Errorf("noise %g", r.NoiseLift)
			}
			if m.Report.TooCoarse(0.001) {
				t.Errorf("%v, lift %g: called too coarse, %g", laws, h, m.Report.Between)
			}
		}
	}
}

// What is promised of any table: no row moved by more than the smoothing, nowhere below
// 0, smooth to the fourth derivative at every knot, the same whatever row comes first.
func TestPromises(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(60, 300).Draw(t, "rows")
		smoothing := rapid.Float64Range(0.0005, 0.01).Draw(t, "smoothing")
		c := cycle(t, rapid.SampledFrom([]string{"modified-sine", "cycloidal", "parabolic"}).Draw(t, "rise"), "polynomial-3-4-5", rapid.Float64Range(1, 40).Draw(t, "lift"))
		noise := rapid.SliceOfN(rapid.Float64Range(-0.3, 0.3), n, n).Draw(t, "noise")
		rows := make([]measured.Row, n)
		for i := range rows {
			deg := 360 * (float64(i) + noise[(i*7)%n]) / float64(n)
			s, _, _, _ := c.At(deg)
			rows[i] = measured.Row{Angle: deg, Lift: s + smoothing*noise[i], Line: i + 2}
		}
		m, err := measured.Smooth(rows, smoothing)
		if err != nil {
			var noisy measured.TooNoisy
			if errors.As(err, &noisy) && n < 200 {
				return // a jump of acceleration between few rows
			}
			t.Fatal(err)
		}
		got, err := motion.Of(m.Zones)
		if err != nil {
			t.Fatal(err)
		}
		if got.MinLift() < 0 {
			t.Fatalf("lowest lift %g", got.MinLift())
		}
		for i, r := range rows {
			s, _, _, _ := got.At(r.Angle)
			if d := math.Abs(s - r.Lift); d > smoothing*(1+1e-9) || math.Abs(s-r.Lift-m.Report.Residuals[i]) > 1e-12 {
				t.Fatalf("row %d moved by %g, reported %g, allowed %g", i, s-r.Lift, m.Report.Residuals[i], smoothing)
			}
		}
		for _, j := range got.Junctions() {
			if j.VelocityStep() != 0 || j.AccelerationStep() != 0 || j.Jerk[0] != j.Jerk[1] {
				t.Fatalf("steps at %g: %+v", j.At, j)
			}
		}
	})
}

// Least squares on the same knots, densely, by QR of gonum: an independent solution of
// what the band solver does, for a table that needs no condition.
func TestAgainstDense(t *testing.T) {
	c := cycle(t, "cycloidal", "cycloidal", 9)
	var rows []measured.Row
	for i := range 180 {
		s, _, _, _ := c.At(2 * float64(i))
		rows = append(rows, measured.Row{Angle: 2 * float64(i), Lift: s + 5, Line: i}) // well above 0
	}
	m, err := measured.Smooth(rows, 0.02)
	if err != nil {
		t.Fatal(err)
	}
	// The space of the pieces: its truncated powers would be ill-conditioned, so the
	// basis is the spline's own values: perturbed data must not lower the residual sum.
	got, err := motion.Of(m.Zones)
	if err != nil {
		t.Fatal(err)
	}
	// Quintic pieces with four continuous derivatives: unknowns are 6 a piece, the
	// conditions are eliminated by the null space of their matrix.
	k := len(m.Zones)
	conditions := mat.NewDense(5*k, 6*k, nil)
	for i, z := range m.Zones {
		next := (i + 1) % k
		h := m.Zones[next].To - m.Zones[next].From
		for d := range 5 {
			for p := d; p < 6; p++ {
				f := 1.0
				for q := range d {
					f *= float64(p - q)
				}
				conditions.Set(5*i+d, 6*i+p, f)
			}
			f := 1.0
			for q := range d {
				f *= float64(d - q)
			}
			conditions.Set(5*i+d, 6*next+d, -f*math.Pow((z.To-z.From)/h, float64(d)))
		}
	}
	var svd mat.SVD
	if !svd.Factorize(conditions, mat.SVDFullV) {
		t.Fatal("no factorization")
	}
	var v mat.Dense
	svd.VTo(&v)
	null := v.Slice(0, 6*k, 5*k, 6*k)
	design, y := mat.NewDense(len(rows), 6*k, nil), mat.NewVecDense(len(rows), nil)
	for i, r := range rows {
		zone, t := got.Zone(r.Angle)
		z := m.Zones[zone]
		for p := range 6 {
			design.Set(i, 6*zone+p, math.Pow((t-z.From)/z.Span, float64(p)))
		}
		y.SetVec(i, r.Lift)
	}
	var reduced, coefficients mat.Dense
	reduced.Mul(design, null)
	if err := coefficients.Solve(&reduced, y); err != nil {
		t.Fatal(err)
	}
	var fitted mat.Dense
	fitted.Mul(&reduced, &coefficients)
	for i := range rows {
		if d := fitted.At(i, 0) - rows[i].Lift - m.Report.Residuals[i]; math.Abs(d) > 1e-6 {
			t.Fatalf("row %d: residual %g, by the dense solution %g", i, m.Report.Residuals[i], fitted.At(i, 0)-rows[i].Lift)
		}
	}
}

// A spline of the class itself comes back: a harmonic, which has no corner.
func TestHarmonic(t *testing.T) {
	var rows []measured.Row
	for i := range 72 {
		a := float64(i) * 5 * math.Pi / 180
		rows = append(rows, measured.Row{Angle: float64(i) * 5, Lift: 10 - 4*math.Cos(a) + math.Sin(2*a), Line: i})
	}
	m, err := measured.Smooth(rows, 1e-4)
	if err != nil {
		t.Fatal(err)
	}
	got, err := motion.Of(m.Zones)
	if err != nil {
		t.Fatal(err)
	}
	for i := range 720 {
		a := float64(i) * math.Pi / 360
		s, _, acc, _ := got.At(float64(i) / 2)
		if math.Abs(s-(10-4*math.Cos(a)+math.Sin(2*a))) > 1.2e-4 || math.Abs(acc-(4*math.Cos(a)-4*math.Sin(2*a))) > 0.05 {
			t.Fatalf("at %g: lift %g, acceleration %g", float64(i)/2, s, acc)
		}
	}
	if m.Report.Knots > 24 {
		t.Errorf("%d knots for two harmonics", m.Report.Knots)
	}
}

// Twenty rows of a cam with a rise in 30 degrees cannot tell how it rises.
func TestTooCoarse(t *testing.T) {
	l, err := motion.Named("cycloidal", 0.5)
	if err != nil {
		t.Fatal(err)
	}
	c, err := motion.Join(0, 0, []motion.Event{{Kind: motion.Dwell, Over: 150}, {Kind: motion.Rise, Lift: 10, Over: 30, Law: l}, {Kind: motion.Fall, Lift: 10, Over: 180, Law: l}})
	if err != nil {
		t.Fatal(err)
	}
	m := smooth(t, tabulated(c, 20, 0.001), 0.01)
	if !m.Report.TooCoarse(0.01) || math.Abs(m.Report.BetweenAt.Angle-165) > 40 {
		t.Errorf("%+v", m.Report)
	}
}

func TestRefusals(t *testing.T) {
	rows := parse(t, tabulated(cycle(t, "cycloidal", "cycloidal", 9), 360, 1e-9), 0.001)
	low := append([]measured.Row(nil), rows...)
	low[10].Lift = -0.002
	var tooLow measured.TooLow
	if _, err := measured.Smooth(low, 0.001); !errors.As(err, &tooLow) || tooLow.Row.Line != 12 {
		t.Error(err)
	}
	noisy := parse(t, tabulated(cycle(t, "cycloidal", "cycloidal", 9), 2000, 1e-9), 0.001)
	for i := range noisy {
		noisy[i].Lift += 1 + 0.5*math.Sin(float64(i*i))
	}
	var tooNoisy measured.TooNoisy
	if m, err := measured.Smooth(noisy, 0.001); !errors.As(err, &tooNoisy) || !(tooNoisy.Needed > 0.001) {
		t.Error(m.Report, err)
	}
	if _, err := measured.Smooth(noisy, 2); err != nil {
		t.Error(err)
	}
}

func BenchmarkSmooth(b *testing.B) {
	c := cycle(b, "modified-sine", "polynomial-3-4-5", 14)
	for _, n := range []int{360, 3600, 20000} {
		rows := parse(b, tabulated(c, n, 0.001), 0.002)
		b.Run(fmt.Sprint(n), func(b *testing.B) {
			for range b.N {
				if _, err := measured.Smooth(rows, 0.002); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// tb is what testing.TB and rapid.T share.
type tb interface {
	Helper()
	Fatal(...any)
}
