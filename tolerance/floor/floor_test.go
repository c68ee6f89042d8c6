package floor

import (
	"math"
	"testing"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
	"pgregory.net/rapid"
)

func mustFloor(t rapid.TB, c Curve, eps float64) int {
	t.Helper()
	n, err := Arcs(c, eps)
	if err != nil {
		t.Fatal(err)
	}
	return n
}

func TestCircle(t *testing.T) {
	marked := cam{30, 5, 0, []zone{{360, 0, 0, dwell}}}.curve()
	for _, eps := range []float64{1, 1e-3, 1e-6, 1e-9} {
		for name, c := range map[string]curve{"marked": marked, "plain": ellipse(30, 30)} {
			if n := mustFloor(t, c, eps); n != 1 {
				t.Errorf("%s circle, eps %g: floor %d, want 1", name, eps, n)
			}
		}
	}
}

// A circle of radius 40 with m waves of height a: the best circle leaves +a and -a 2m times in turn, so one arc
// does while a <= eps (de la Vallée Poussin), and no longer.
func waveOf[T taylor.Scalar[T]](m, a float64) func(int, T) (T, T) {
	return func(_ int, t T) (T, T) {
		_, w := t.Scale(m).Radians().SinCos()
		s, c := t.Radians().SinCos()
		r := t.Of(40).Add(w.Scale(a))
		return r.Mul(c), r.Mul(s)
	}
}

func TestWaves(t *testing.T) {
	for _, eps := range []float64{0.1, 1e-3, 1e-5} {
		for _, m := range []float64{2, 3, 7} {
			for share, want := range map[float64]bool{0.9: false, 0.9999: false, 1.01: true, 1.3: true} {
				c := curve{pieces: []plane.Piece{{From: 10, To: 370}}, f: waveOf[taylor.F](m, share*eps), i: waveOf[taylor.I](m, share*eps)}
				if n := mustFloor(t, c, eps); n > 1 != want {
					t.Errorf("%g waves of %g eps, eps %g: floor %d", m, share, eps, n)
				}
			}
		}
	}
}

// leg is an arc of a planted curve, from share lo of it to share hi, with waves of height ripple on it that
// vanish at its ends.
type leg struct{ cx, cy, r, from, sweep, waves, ripple, lo, hi float64 }

func legsOf[T taylor.Scalar[T]](legs []leg) func(int, T) (T, T) {
	each := 360 / float64(len(legs))
	return func(i int, t T) (T, T) {
		l := legs[i]
		u := t.Sub(t.Of(each * float64(i))).Scale((l.hi - l.lo) / each).Add(t.Of(l.lo))
		w, _ := u.Scale(180 * l.waves).Radians().SinCos()
		s, c := u.Scale(l.sweep).Add(u.Of(l.from)).SinCos()
		r := u.Of(l.r).Add(w.Scale(l.ripple))
		return r.Mul(c).Add(u.Of(l.cx)), r.Mul(s).Add(u.Of(l.cy))
	}
}

// planted is a closed curve of arcs through the points, arc i turning by sweeps[i] radians, left or right.
// It starts on the first arc, at share cut.
func planted(at []plane.Point, sweeps, waves []float64, ripple, cut float64) curve {
	var legs []leg
	for i, p := range at {
		v := at[(i+1)%len(at)].Sub(p)
		center := p.Add(v.Scale(0.5)).Add(v.Left().Scale(0.5 / math.Tan(sweeps[i]/2)))
		out := p.Sub(center)
		legs = append(legs, leg{center.X, center.Y, out.Norm(), float64(out.Angle()), sweeps[i], waves[i], ripple, 0, 1})
	}
	if cut > 0 {
		head := legs[0]
		legs[0].lo, head.hi = cut, cut
		legs = append(legs, head)
	}
	c := curve{f: legsOf[taylor.F](legs), i: legsOf[taylor.I](legs)}
	each := 360 / float64(len(legs))
	for i := range legs {
		c.pieces = append(c.pieces, plane.Piece{From: each * float64(i), To: each * float64(i+1)})
	}
	c.pieces[len(legs)-1].To = 360
	return c
}

// drawPlanted also returns the number of arcs.
func drawPlanted(t *rapid.T, ripple float64) (curve, int) {
	n := rapid.IntRange(2, 9).Draw(t, "arcs")
	at := make([]plane.Point, n)
	sweeps, waves := make([]float64, n), make([]float64, n)
	for i := range at {
		at[i] = plane.Polar(rapid.Float64Range(20, 60).Draw(t, "radius"), plane.Degrees(360*float64(i)/float64(n)))
		sweeps[i] = rapid.Float64Range(0.05, 2.5).Draw(t, "sweep") * float64(1-2*rapid.IntRange(0, 1).Draw(t, "right"))
		waves[i] = float64(rapid.IntRange(1, 12).Draw(t, "waves"))
	}
	cut := rapid.SampledFrom([]float64{0, 0.1, 0.5, 0.9}).Draw(t, "cut")
	return planted(at, sweeps, waves, ripple, cut), n
}

// A curve within eps of n arcs never gets a floor above n, close as it may come to eps.
func TestNeverAbovePlanted(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		eps := math.Pow(10, rapid.Float64Range(-6, -1).Draw(t, "log eps"))
		c, arcs := drawPlanted(t, eps*rapid.SampledFrom([]float64{0, 0.5, 0.99, 0.999999}).Draw(t, "share"))
		if n := mustFloor(t, c, eps); n > arcs {
			t.Fatalf("floor %d of a curve of %d arcs", n, arcs)
		}
	})
}

// Where the arcs meet in plain corners the floor finds all of them.
func TestFindsPlanted(t *testing.T) {
	for n := 3; n <= 8; n++ {
		at, sweeps := make([]plane.Point, n), make([]float64, n)
		for i := range at {
			at[i] = plane.Polar(40, plane.Degrees(360*float64(i)/float64(n)))
			sweeps[i] = []float64{-0.3, 0.1, -0.15}[i%3]
		}
		for _, eps := range []float64{1e-2, 1e-5} {
			for _, cut := range []float64{0, 0.3} {
				if got := mustFloor(t, planted(at, sweeps, make([]float64, n), 0, cut), eps); got != n {
					t.Errorf("%d arcs with corners, cut at %g, eps %g: floor %d", n, cut, eps, got)
				}
			}
		}
	}
}

// liar tells wrong points where it is not asked for enclosures.
type liar struct {
	curve
	noise float64
}

func (l liar) At(piece int, t float64) plane.Frame {
	f := l.curve.At(piece, t)
	f.P.X += l.noise * math.Sin(7e3*t)
	f.DK = f.DK*3 + 1e-4
	return f
}

// Only the enclosures prove anything: floats that lie may cost reach, never truth.
func TestFloatsProveNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c, arcs := drawPlanted(t, 0)
		l := liar{c, math.Pow(10, rapid.Float64Range(-4, 1).Draw(t, "log noise"))}
		if n := mustFloor(t, l, 1e-3); n > arcs {
			t.Fatalf("floor %d of a curve of %d arcs", n, arcs)
		}
	})
}

func curves() map[string]curve {
	return map[string]curve{"ellipse": ellipse(60, 35), "cyc345": cyc345(0), "cyc345 contour": cyc345(11),
		"parabolic": parabolic(0), "parabolic contour": parabolic(11), "no dwell": noDwell(), "wavy": wavy()}
}

// Between theory and a chain that is proven to be within eps. 0.75: 0.866 for free arcs, and what k' changing
// sign saves.
func TestBetweenTheoryAndChain(t *testing.T) {
	for name, c := range curves() {
		for _, eps := range []float64{0.01, 0.002, 0.0005} {
			n := mustFloor(t, c, eps)
			p, err := fit.Arcs(c, eps, fit.Options{})
			if err != nil {
				t.Fatal(err)
			}
			d, err := certify.Closed(c, p)
			if err != nil {
				t.Fatal(err)
			}
			if over := mustFloor(t, c, d.Bound); over > len(p) {
				t.Errorf("%s: floor %d at %g, where a chain of %d is certified", name, over, d.Bound, len(p))
			}
			if theory := fit.Theory(c, eps, chain.Arc); float64(n) < 0.75*theory {
				t.Errorf("%s, eps %g: floor %d, N* %.1f", name, eps, n, theory)
			}
		}
	}
}

// As eps goes to 0 the floor goes to ∫(|k'|/(192 eps))^(1/3) ds. Ellipse: k = ab/w³, w² = a² sin² + b² cos²,
// k' = -3ab (a²-b²) sin cos / w⁶.
func TestLimit(t *testing.T) {
	const a, b, eps, n = 60.0, 35.0, 1e-7, 40000
	sum := 0.0
	for i := range n {
		s, c := math.Sincos(2 * math.Pi * (float64(i) + 0.5) / n)
		w := math.Sqrt(a*a*s*s + b*b*c*c)
		dk := 3 * a * b * (a*a - b*b) * math.Abs(s*c) / math.Pow(w, 6)
		sum += math.Cbrt(dk/(192*eps)) * w * 2 * math.Pi / n
	}
	if got := float64(mustFloor(t, ellipse(a, b), eps)); got < 0.99*sum || got > sum+1 {
		t.Errorf("floor %v, free arcs by theory %.1f", got, sum)
	}
}

// A larger scale with eps in proportion, another start and the other way round leave the count alone,
// but for what is lost where the last arc is a close call.
func TestSameCurve(t *testing.T) {
	zones := []zone{{90, 0, 24, cycloidal}, {60, 24, 24, dwell}, {120, 24, 0, poly345}, {90, 0, 0, dwell}}
	want := mustFloor(t, cam{40, 0, 0, zones}.curve(), 0.001)
	inch := []zone{{90, 0, 24 / 25.4, cycloidal}, {60, 24 / 25.4, 24 / 25.4, dwell}, {120, 24 / 25.4, 0, poly345}, {90, 0, 0, dwell}}
	for name, n := range map[string]int{
		"inch":    mustFloor(t, cam{40 / 25.4, 0, 0, inch}.curve(), 0.001/25.4),
		"turned":  mustFloor(t, cam{40, -77, 0, zones}.curve(), 0.001),
		"rotated": mustFloor(t, cam{40, 0, 0, append(zones[2:4:4], zones[:2]...)}.curve(), 0.001),
		"mirror": mustFloor(t, cam{40, 0, 0, []zone{{90, 0, 0, dwell}, {120, 0, 24, poly345}, {60, 24, 24, dwell},
			{90, 24, 0, cycloidal}}}.curve(), 0.001),
	} {
		if n < want-1 || n > want+1 {
			t.Errorf("%s: floor %d, want %d, give or take 1", name, n, want)
		}
	}
}

func TestBadInput(t *testing.T) {
	good := ellipse(60, 35)
	nan := good
	nan.f = func(int, taylor.F) (x, y taylor.F) { return x.Of(math.NaN()), y }
	short, gap := good, good
	short.pieces = []plane.Piece{{From: 0, To: 350}}
	gap.pieces = []plane.Piece{{From: 0, To: 100}, {From: 120, To: 360}}
	for name, bad := range map[string]struct {
		c   curve
		eps float64
	}{
		"zero": {good, 0}, "negative": {good, -1}, "nan eps": {good, math.NaN()}, "infinite": {good, math.Inf(1)},
		"nan curve": {nan, 1e-3}, "rounding": {good, 1e-12}, "short": {short, 1e-3}, "gap": {gap, 1e-3}, "none": {curve{}, 1e-3},
	} {
		if n, err := Arcs(bad.c, bad.eps); err == nil {
			t.Errorf("%s: floor %d, want an error", name, n)
		}
	}
	for _, eps := range []float64{1e-8, 1e3, 1e300} {
		if n, err := Arcs(ellipse(60, 35), eps); err != nil || n < 1 || eps > 30 && n > 1 {
			t.Errorf("eps %g: floor %d, %v", eps, n, err)
		}
	}
}

func BenchmarkFloor(b *testing.B) {
	for _, k := range []struct {
		name string
		c    curve
	}{{"ellipse", ellipse(60, 35)}, {"cyc345", cyc345(0)}, {"cyc345_contour", cyc345(11)}, {"parabolic", parabolic(0)},
		{"no_dwell", noDwell()}, {"wavy", wavy()}} {
		for _, um := range []float64{10, 2, 1, 0.5} {
			eps := um / 1000
			b.Run(k.name+"/"+map[float64]string{10: "10um", 2: "2um", 1: "1um", 0.5: "0.5um"}[um], func(b *testing.B) {
				n := 0
				for b.Loop() {
					n = mustFloor(b, k.c, eps)
				}
				b.ReportMetric(float64(n), "floor")
				b.ReportMetric(fit.Theory(k.c, eps, chain.Arc), "theory")
				if p, err := fit.Arcs(k.c, eps, fit.Options{}); err == nil {
					b.ReportMetric(float64(len(p)), "fitted")
				}
			})
		}
	}
}
