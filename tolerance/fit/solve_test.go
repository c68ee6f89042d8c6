package fit

import (
	"math"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
	"pgregory.net/rapid"
)

// Systems of a band, cyclic or not, are solved: A·z is what it was said to be.
func TestSkyline(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 20).Draw(t, "n")
		cyclic := rapid.Bool().Draw(t, "cyclic")
		rows := n + rapid.IntRange(0, 20).Draw(t, "more rows")
		a := make([][]float64, n)
		for i := range a {
			a[i] = make([]float64, n)
			a[i][i] = 0.1
		}
		var k skyline
		k.reset(n)
		for r := range rows { // the sum of squares of forms of three neighbors
			var at []int
			for o := range 3 {
				if i := r%n + o; i < n {
					at = append(at, i)
				} else if cyclic && n > 2 {
					at = append(at, i-n)
				}
			}
			c := []float64{rapid.Float64Range(-2, 2).Draw(t, "c0"), rapid.Float64Range(-2, 2).Draw(t, "c1"), rapid.Float64Range(-2, 2).Draw(t, "c2")}
			for x, i := range at {
				for y, j := range at {
					a[i][j] += c[x] * c[y]
					if j <= i {
						k.couple(i, j)
					}
				}
			}
		}
		k.shape()
		want := make([]float64, n)
		for i := range a {
			want[i] = rapid.Float64Range(-5, 5).Draw(t, "z")
		}
		for i := range a {
			for j := range a {
				if a[i][j] != 0 {
					k.add(i, j, a[i][j])
				}
				k.b[i] += a[i][j] * want[j]
			}
		}
		if !k.solve() {
			t.Fatalf("not solved")
		}
		for i := range want {
			if math.Abs(k.b[i]-want[i]) > 1e-8 {
				t.Fatalf("z[%d] = %v, want %v", i, k.b[i], want[i])
			}
		}
	})
	bad := skyline{}
	bad.reset(1)
	bad.shape()
	if bad.solve() {
		t.Error("a system of zeros was solved")
	}
}

// The crest of a cubic is what a dense search finds.
func TestCrest(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := rapid.Float64Range(-1, 1)
		d0, d1, h := f.Draw(t, "d0"), f.Draw(t, "d1"), rapid.Float64Range(0.1, 3).Draw(t, "h")
		m0, m1 := rapid.Float64Range(0.01, 4).Draw(t, "m0"), -rapid.Float64Range(0.01, 4).Draw(t, "m1")
		want := math.Inf(-1)
		for i := range 10001 {
			u := float64(i) / 10000
			want = math.Max(want, d0*(1+2*u)*(1-u)*(1-u)+h*m0*u*(1-u)*(1-u)+d1*u*u*(3-2*u)-h*m1*u*u*(1-u))
		}
		if got := crest(d0, m0, d1, m1, h); math.Abs(got-want) > 1e-6*(1+h) {
			t.Fatalf("crest %v, want %v", got, want)
		}
		if got := crest(-d0, -m0, -d1, -m1, h); math.Abs(got+want) > 1e-6*(1+h) {
			t.Fatalf("upside down %v, want %v", got, -want)
		}
	})
}

// As eps goes to 0 the count goes to N*: 1.020·N* = 204 arcs at 0.01 um were measured by a separate
// program that pins the ellipse's start.
func TestAsymptotic(t *testing.T) {
	c := ellipse(60, 35)
	p, err := Arcs(c, 1e-5, Options{})
	if err != nil {
		t.Fatal(err)
	}
	n := Theory(c, 1e-5, chain.Arc)
	t.Logf("%d arcs, N* %.1f", len(p), n)
	if float64(len(p)) > 1.03*n || float64(len(p)) < 0.99*n {
		t.Errorf("%d arcs, want about N* = %.1f", len(p), n)
	}
}

// The fitter of last resort serves every curve by itself.
func TestTilted(t *testing.T) {
	for name, c := range curves() {
		const eps = 0.003
		p, err := assemble(c, c.Pieces(), func(st stretch) (chain.Path, error) { return st.tilted(eps) })
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		closedAndJoined(t, c, p)
		if to, from := curveToPath(c, p, 40), pathToCurve(c, p, 8); to > eps || from > eps {
			t.Errorf("%s: deviation %g, %g", name, to, from)
		}
	}
}

// startedAt is the curve with its parameter counted from another place.
func startedAt(c testCurve, start float64) testCurve {
	z := c.z
	c.pieces = []plane.Piece{{From: start, To: start + 360}}
	c.z = func(_ int, rad float64) [4]complex128 { return z(0, rad) }
	return c
}

// A closed curve without dwell takes as many arcs wherever its parameter starts, and the joint there
// lies off the curve like any other.
func TestPeriodic(t *testing.T) {
	const eps = 0.001
	fewest, most, off := math.MaxInt, 0, 0.0
	for _, start := range []float64{-170, -10, 0, 17, 45, 90, 133} {
		c := startedAt(ellipse(60, 35), start)
		p := checkArcs(t, c, eps, 30)
		fewest, most = min(fewest, len(p)), max(most, len(p))
		off = math.Max(off, p[0].From.Dist(c.point(start)))
	}
	t.Logf("%d to %d arcs, N* %.1f; first joint up to %.2f eps off", fewest, most, Theory(ellipse(60, 35), eps, chain.Arc), off/eps)
	if most-fewest > 2 {
		t.Errorf("between %d and %d arcs", fewest, most)
	}
	if off < 0.05*eps {
		t.Errorf("all first joints lie on the curve within %g: they are pinned", off)
	}
}

// scaled is the curve f times as large.
func scaled(c testCurve, f float64) testCurve {
	z := c.z
	c.left *= f
	c.pieces = append([]plane.Piece(nil), c.pieces...)
	for i, p := range c.pieces {
		if p.Circle != nil {
			c.pieces[i].Circle = &plane.Circle{Radius: p.Circle.Radius * f}
		}
	}
	c.z = func(i int, rad float64) [4]complex128 {
		v := z(i, rad)
		for j := range v {
			v[j] *= complex(f, 0)
		}
		return v
	}
	return c
}

// Units do not matter: the same cam in inches takes as many arcs.
func TestInches(t *testing.T) {
	for _, c := range []testCurve{cyc345(1, 0), cyc345(-1, -11), parabolic(0), noDwell(14)} {
		for _, inches := range []float64{1e-4, 5e-5} {
			p := checkArcs(t, scaled(c, 1/25.4), inches, 30)
			q := checkArcs(t, c, inches*25.4, 30)
			if d := len(p) - len(q); d < -1 || d > 1 {
				t.Errorf("%d arcs in inches, %d in mm", len(p), len(q))
			}
		}
	}
}

// Tolerances far from any use still give what is promised.
func TestExtremes(t *testing.T) {
	sliver := polarCam(40, 0, 1, 0, []zone{{90, 0, 10, 0, 1, cycloidal}, {0.001, 10, 10, 0, 0, nil}, {150, 10, 0, 0, 1, poly345}, {119.999, 0, 0, 0, 0, nil}})
	long := polarCam(40, 0, 1, 0, []zone{{10, 0, 0.5, 0, 1, cycloidal}, {10, 0.5, 0, 0, 1, poly345}, {340, 0, 0, 0, 0, nil}})
	for name, c := range map[string]testCurve{"cam": cyc345(1, 0), "parabolic": parabolic(11), "no dwell": noDwell(0), "ellipse": ellipse(60, 35),
		"short dwell": sliver, "long dwell": long} {
		for _, eps := range []float64{3, 0.5, 0.05, 1e-6} {
			p, err := Arcs(c, eps, Options{})
			if err != nil {
				t.Errorf("%s, %g: %v", name, eps, err)
				continue
			}
			closedAndJoined(t, c, p)
			if d := curveToPath(c, p, 20); d > eps {
				t.Errorf("%s, %g: deviation %g", name, eps, d)
			}
		}
	}
}
