package smooth_test

import (
	"errors"
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"lobewright/synth/smooth"
)

// Any table: uneven steps, dwells, corners, outliers, noise below or above the smoothing.
func anyTable(t *rapid.T) (smooth.Table, float64) {
	n := rapid.IntRange(smooth.LeastRows, 160).Draw(t, "rows")
	first := rapid.Float64Range(-720, 720).Draw(t, "first")
	uneven := rapid.Float64Range(0, 0.95).Draw(t, "uneven")
	noise := math.Pow(10, rapid.Float64Range(-7, 0).Draw(t, "noise"))
	flat := rapid.Float64Range(0, 1).Draw(t, "flat")
	waves := float64(rapid.IntRange(1, 4).Draw(t, "waves"))
	var out smooth.Table
	for i := range n {
		deg := 360 / float64(n) * (float64(i) + uneven*rapid.Float64Range(0, 1).Draw(t, "step"))
		lift := math.Max(0, 10*(math.Sin(waves*deg*math.Pi/180)-2*flat+1))
		if lift > 0 || rapid.Bool().Draw(t, "noisy dwell") {
			lift += noise * rapid.Float64Range(-1, 1).Draw(t, "error")
		}
		if rapid.IntRange(0, 40).Draw(t, "outlier") == 0 {
			lift++
		}
		out.Angle, out.Lift = append(out.Angle, first+deg), append(out.Lift, lift)
	}
	return out, math.Pow(10, rapid.Float64Range(-6, 0).Draw(t, "smoothing"))
}

// sloppy is what rounding may do to a derivative of order k, as a share of its bound.
var sloppy = [5]float64{1e-11, 1e-12, 1e-12, 1e-12, 1e-12}

func TestEveryTableIsHeld(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		table, smoothing := anyTable(t)
		curve, report, err := smooth.Fit(table, smoothing)
		if err != nil {
			t.Fatal(err)
		}
		if !covers(curve) {
			t.Fatalf("pieces do not cover a turn: %v", curve.Pieces)
		}
		for i, deg := range table.Angle {
			lift, _, _, _ := curve.At(deg)
			if off := math.Abs(lift - table.Lift[i]); off > smoothing+1e-10 {
				t.Errorf("row %d moved by %g, smoothing %g", i, off, smoothing)
			}
		}
		for k, step := range steps(curve) {
			if step > sloppy[k] {
				t.Errorf("derivative %d steps by %g of its bound", k, step)
			}
		}
		if report.Pieces > len(table.Angle) {
			t.Errorf("%d pieces for %d rows", report.Pieces, len(table.Angle))
		}
	})
}

// Any angle is one of the turn, also where rounding puts it beside the ends of it.
func TestAtAnyAngle(t *testing.T) {
	c := cycle(t, "modified-sine", "polynomial-3-4-5", 20, 20.3, 90, 60, 80)
	curve, _, err := smooth.Fit(tabulated(c, 360, 0.1, 0.001), 0.002)
	if err != nil {
		t.Fatal(err)
	}
	for _, p := range curve.Pieces {
		want, _, _, _ := curve.At(p.From)
		for _, turns := range []float64{-100, -7, -2, -1, 0, 1, 3, 100} {
			for _, beside := range []float64{0, -1e-15, 1e-15, -1e-13, 1e-13, -1e-11} {
				if got, _, _, _ := curve.At(p.From + 360*turns + beside); !(math.Abs(got-want) < 1e-8) {
					t.Errorf("%g turns from %g: lift %g, want %g", turns, p.From, got, want)
				}
			}
		}
	}
}

// The row a table begins with is nothing of the curve.
func TestStartingRowDoesNotMatter(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		table, smoothing := anyTable(t)
		n := len(table.Angle)
		for i, a := range table.Angle { // whole steps of 2^-20 degree, so that a turn more or less is exact
			table.Angle[i] = math.Round(a*(1<<20)) / (1 << 20)
		}
		k := rapid.IntRange(1, n-1).Draw(t, "k")
		var turned smooth.Table
		for i := range n {
			j, turn := (i+k)%n, 0.0
			if i+k >= n {
				turn = 360
			}
			turned.Angle, turned.Lift = append(turned.Angle, table.Angle[j]+turn), append(turned.Lift, table.Lift[j])
		}
		a, _, errA := smooth.Fit(table, smoothing)
		b, _, errB := smooth.Fit(turned, smoothing)
		if errA != nil || errB != nil {
			t.Fatal(errA, errB)
		}
		if len(a.Pieces) != len(b.Pieces) {
			t.Fatalf("%d pieces and %d", len(a.Pieces), len(b.Pieces))
		}
		for i := range a.Pieces {
			if p, q := a.Pieces[i], b.Pieces[i]; p.From != q.From || !slices.Equal(p.Poly, q.Poly) {
				t.Fatalf("piece %d is %v and %v", i, p, q)
			}
		}
	})
}

// A spline of degree 5 on twelve knots comes back from its table: as many pieces, the same
// lift and acceleration. It is made of truncated powers, as the kernel of the Bernoulli
// polynomial B6, whose sixth derivative is constant but for a step of the fifth at its knot:
// weights that add up to 0 leave a periodic spline (Schoenberg; Wahba, Spline Models for
// Observational Data, SIAM 1990, ch. 2, cited from memory).
func TestExactSplineComesBack(t *testing.T) {
	knots := []float64{0, 24, 60, 75, 100, 140, 171, 200, 240, 270, 300, 333}
	weights := []float64{1, -2, 3, -1, -4, 2, 1, 3, -2, -3, 1, 1}
	exact := func(deg float64) (lift, acceleration float64) {
		lift = 20
		for i, at := range knots {
			x := (deg - at) / 360
			x -= math.Floor(x)
			// B6 and its second derivative 30 B4, in turns
			b6 := ((((x-3)*x+2.5)*x*x)-0.5)*x*x + 1./42
			b4 := ((x-2)*x+1)*x*x - 1./30
			lift += 100 * weights[i] * b6
			acceleration += 100 * weights[i] * 30 * b4 / (4 * math.Pi * math.Pi)
		}
		return lift, acceleration
	}
	var table smooth.Table
	for i := range 360 {
		lift, _ := exact(float64(i))
		table.Angle, table.Lift = append(table.Angle, float64(i)), append(table.Lift, lift)
	}
	const smoothing = 1e-9
	curve, report, err := smooth.Fit(table, smoothing)
	if err != nil {
		t.Fatal(err)
	}
	if report.Pieces != len(knots) {
		t.Errorf("%d pieces, want %d", report.Pieces, len(knots))
	}
	for i := range 1000 {
		deg := 0.36*float64(i) + 0.1
		lift, acceleration := exact(deg)
		got, _, a, _ := curve.At(deg)
		if math.Abs(got-lift) > smoothing || math.Abs(a-acceleration) > 1e-5 {
			t.Errorf("at %g: lift %.12g, acceleration %.9g; want %.12g, %.9g", deg, got, a, lift, acceleration)
		}
	}
}

// Smoothing 0 passes through every row.
func TestNoSmoothing(t *testing.T) {
	c := cycle(t, "modified-sine", "polynomial-3-4-5", 20, 20, 90, 60, 80)
	_, report, err := smooth.Fit(tabulated(c, 360, 0, 0.001), 0)
	if err != nil {
		t.Fatal(err)
	}
	if most := largest(report.Residual); most > 20*1e-13 {
		t.Errorf("moved a row by %g", most)
	}
}

// A table without motion is one piece.
func TestConstantTable(t *testing.T) {
	c := cycle(t, "modified-sine", "modified-sine", 20, 20, 90, 60, 80)
	table := tabulated(c, 100, -40, 0.001)
	for i := range table.Lift {
		table.Lift[i] = 3 + 0.001*float64(i%2)
	}
	curve, report, err := smooth.Fit(table, 0.001)
	if err != nil {
		t.Fatal(err)
	}
	if len(curve.Pieces) != 1 || len(curve.Pieces[0].Poly) != 1 || !covers(curve) || largest(report.Residual) > 0.001 {
		t.Errorf("%v, moved by %g", curve, largest(report.Residual))
	}
}

// Noise above the smoothing is followed, but not by more than MostPieces pieces; the error
// says what smoothing would do, and it does.
func TestNoiseAboveTheSmoothing(t *testing.T) {
	c := cycle(t, "cycloidal", "cycloidal", 20, 20, 90, 60, 80)
	noisy := func(n int) smooth.Table {
		table := tabulated(c, n, 0, 0)
		state := uint64(1)
		for i := range table.Lift { // a linear congruential generator: Knuth, TAOCP 2, 3.3.4
			state = state*6364136223846793005 + 1442695040888963407
			table.Lift[i] += 0.02 * (float64(state>>11)/(1<<53) - 0.5)
		}
		return table
	}
	if _, report, err := smooth.Fit(noisy(360), 0.003); err != nil || largest(report.Residual) > 0.003+1e-12 {
		t.Errorf("360 rows: %v, moved by %g", err, largest(report.Residual))
	}
	table := noisy(4000)
	_, _, err := smooth.Fit(table, 0.001)
	var close smooth.TooClose
	if !errors.As(err, &close) {
		t.Fatalf("4000 rows: %v", err)
	}
	_, report, err := smooth.Fit(table, close.Needed)
	if err != nil || report.Pieces > close.Pieces {
		t.Errorf("with the smoothing %g of the error: %v, %d pieces, promised %d", close.Needed, err, report.Pieces, close.Pieces)
	}
}

func TestUnsoundTables(t *testing.T) {
	good := func() smooth.Table {
		var table smooth.Table
		for i := range 36 {
			table.Angle, table.Lift = append(table.Angle, float64(10*i)), append(table.Lift, math.Sin(float64(i)))
		}
		return table
	}
	if _, _, err := smooth.Fit(good(), 0.01); err != nil {
		t.Fatal(err)
	}
	for name, spoil := range map[string]func(*smooth.Table) float64{
		"negative smoothing": func(*smooth.Table) float64 { return -1 },
		"no smoothing":       func(*smooth.Table) float64 { return math.NaN() },
		"few rows":           func(t *smooth.Table) float64 { t.Angle, t.Lift = t.Angle[:19], t.Lift[:19]; return 0.01 },
		"lifts missing":      func(t *smooth.Table) float64 { t.Lift = t.Lift[1:]; return 0.01 },
		"lines missing":      func(t *smooth.Table) float64 { t.Line = []int{1}; return 0.01 },
		"not finite":         func(t *smooth.Table) float64 { t.Lift[3] = math.Inf(1); return 0.01 },
		"no angle":           func(t *smooth.Table) float64 { t.Angle[3] = math.NaN(); return 0.01 },
		"unsorted":           func(t *smooth.Table) float64 { t.Angle[3] = 20; return 0.01 },
		"beyond a turn":      func(t *smooth.Table) float64 { t.Angle[35] = 360; return 0.01 },
	} {
		table := good()
		smoothing := spoil(&table)
		if _, _, err := smooth.Fit(table, smoothing); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}
