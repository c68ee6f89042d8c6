package fit

import (
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// fourier is a closed curve without any dwell: a circle with waves.
func fourier(r0, start, dir float64, amp, phase []float64) testCurve {
	return testCurve{dir: dir, pieces: []plane.Piece{{From: start, To: start + 360}}, z: func(_ int, t float64) [4]complex128 {
		r := [4]float64{r0}
		for i := range amp {
			k := float64(i + 1)
			s, c := math.Sincos(k*t + phase[i])
			r[0] += amp[i] * c
			r[1] -= amp[i] * k * s
			r[2] -= amp[i] * k * k * c
			r[3] += amp[i] * k * k * k * s
		}
		e := cmplx.Rect(1, t)
		return [4]complex128{complex(r[0], 0) * e, complex(r[1], r[0]) * e, complex(r[2]-r[0], 2*r[1]) * e, complex(r[3]-3*r[1], 3*r[2]-r[0]) * e}
	}}
}

type specimen struct {
	name string
	c    testCurve
	eps  float64
}

func logUniform(r *rand.Rand, lo, hi float64) float64 {
	return lo * math.Exp(r.Float64()*math.Log(hi/lo))
}

// generate draws a cam or a waved circle as pitch curve or parallel, both ways round.
func generate(seed, i uint64) specimen {
	r := rand.New(rand.NewPCG(seed, i))
	dir := 1.0
	if r.IntN(2) == 0 {
		dir = -1
	}
	s := specimen{eps: logUniform(r, 0.0005, 0.010)}
	r0 := logUniform(r, 30, 90)
	start := math.Floor(r.Float64()*400 - 200)
	if r.Float64() < 0.25 {
		n := 1 + r.IntN(6)
		amp, phase := make([]float64, n), make([]float64, n)
		for j := range amp {
			k := float64(j + 1)
			amp[j], phase[j] = r.Float64()*0.25*r0/(k*k), 2*math.Pi*r.Float64()
		}
		s.name, s.c = fmt.Sprintf("fourier %d", n), fourier(r0, start, dir, amp, phase)
	} else {
		h := math.Min(logUniform(r, 2, 40), r0*0.6)
		names := motionNames()
		a, b := names[r.IntN(len(names))], names[r.IntN(len(names))]
		rise, fall := 60+80*r.Float64(), 60+80*r.Float64()
		top := 0.0
		if r.IntN(3) > 0 {
			top = logUniform(r, 2, 60)
		}
		low := 360 - rise - fall - top
		s.name = fmt.Sprintf("%s/%s h %.1f r0 %.1f top %.1f low %.1f", a, b, h, r0, top, low)
		noLow := r.IntN(4) == 0
		if noLow {
			rise, fall = rise+low/2, fall+low/2
			s.name += " no low dwell"
		}
		zones := strokeZones(a, rise, 0, h)
		if top > 0 {
			zones = append(zones, zone{top, h, h, 0, 0, nil})
		}
		zones = append(zones, strokeZones(b, fall, h, 0)...)
		if !noLow {
			zones = append(zones, zone{low, 0, 0, 0, 0, nil})
		}
		if at := r.IntN(len(zones)); r.IntN(3) == 0 { // start at another junction
			zones = append(append([]zone(nil), zones[at:]...), zones[:at]...)
		}
		s.c = polarCam(r0, start, dir, 0, zones)
		side := r.IntN(3)
		if side > 0 {
			left := clearOffset(s.c, side == 1) * r.Float64() * 0.5
			s.c = polarCam(r0, start, dir, left, zones)
			s.name += fmt.Sprintf(" left %.1f", left)
		}
	}
	s.name = fmt.Sprintf("#%d %s dir %g start %g eps %.2f um", i, s.name, dir, start, s.eps*1000)
	return s
}

// clearOffset returns how far a parallel may go to one side before it cusps, at most 25.
func clearOffset(c testCurve, toLeft bool) float64 {
	most := 25.0
	for i, p := range c.pieces {
		for j := 0; j <= 200; j++ {
			k := c.At(i, at(p, j, 201)).K
			if toLeft && k > 0 {
				most = math.Min(most, 1/k)
			}
			if !toLeft && k < 0 {
				most = math.Min(most, -1/k)
			}
		}
	}
	if !toLeft {
		return -most
	}
	return most
}

// terms counts S and Z of the bound: sections between dwells and jumps of the curvature, and
// sign changes of k'.
func terms(c testCurve) (sections, changes int) {
	n := len(c.pieces)
	dwells := 0
	for i, p := range c.pieces {
		next := (i + 1) % n
		a, b := c.At(i, p.To), c.At(next, c.pieces[next].From)
		if math.Abs(a.K-b.K) > 1e-6*math.Max(math.Abs(a.K), math.Abs(b.K)) {
			sections++
		}
		if p.Circle != nil {
			dwells++
		}
		if p.Circle == nil && (n == 1 || c.pieces[next].Circle != nil) {
			sections++
		}
	}
	if dwells == 0 && n > 1 {
		sections++
	}
	sign := 0.0
	first := 0.0
	for i, p := range c.pieces {
		if p.Circle != nil {
			sign = 0
			continue
		}
		for j := 1; j < 2000; j++ {
			d := c.At(i, at(p, j, 2001)).DK
			if sign*d < 0 {
				changes++
			}
			if d != 0 {
				sign = math.Copysign(1, d)
			}
			if first == 0 {
				first = sign
			}
		}
	}
	if dwells == 0 && first*sign < 0 {
		changes++
	}
	return sections, changes
}

func freeArcs(c testCurve, p chain.Path) int {
	free := len(p)
	for _, q := range c.pieces {
		if q.Circle != nil {
			free--
		}
	}
	return free
}

// bound is the promised count of arcs that are not dwells.
func bound(c testCurve, eps float64) float64 {
	sections, changes := terms(c)
	return 1.03*Theory(c, eps, chain.Arc) + float64(sections) + float64(changes)/2
}

// TestCorpus holds the count, the deviation and what parallels need on generated curves.
func TestCorpus(t *testing.T) {
	const seed, specimens = 20240607, 240
	total, theory, worst, parallels := 0.0, 0.0, 0.0, 0
	for i := range uint64(specimens) {
		s := generate(seed, i)
		p := checkArcs(t, s.c, s.eps, 24)
		free := freeArcs(s.c, p)
		limit := bound(s.c, s.eps)
		if float64(free) > limit {
			t.Errorf("%d arcs, limit %.2f", free, limit)
		}
		parallels += checkParallels(t, s.c, p)
		worst = math.Max(worst, curveToPath(s.c, p, 24)/s.eps)
		total, theory = total+float64(free), theory+Theory(s.c, s.eps, chain.Arc)
		if t.Failed() {
			t.Fatalf("seed %d: %s", seed, s.name)
		}
	}
	t.Logf("%d curves: %.0f arcs, %.4f N*, deviation up to %.4f eps, %d parallels", specimens, total, total/theory, worst, parallels)
	if parallels < specimens {
		t.Errorf("only %d parallels were possible: the corpus has lost its teeth", parallels)
	}
}

// checkParallels takes the parallels by 15 to either side where the curve's own lies well clear of a
// cusp, and returns how many.
func checkParallels(t fataler, c testCurve, p chain.Path) int {
	t.Helper()
	const clear = 0.7 // share of the way to a cusp
	n := 0
	for _, d := range []float64{15, -15} {
		if math.Abs(clearOffset(c, d > 0))*clear < math.Abs(d) {
			continue
		}
		n++
		if _, err := p.Offset(d); err != nil {
			t.Errorf("%v", err)
		}
	}
	return n
}

// TestCorpusLines holds the count of lines.
func TestCorpusLines(t *testing.T) {
	const seed, specimens = 5, 60
	total, theory := 0.0, 0.0
	for i := range uint64(specimens) {
		s := generate(seed, i)
		p, err := Lines(s.c, s.eps, Options{})
		if err != nil {
			t.Fatalf("seed %d %s: %v", seed, s.name, err)
		}
		closedAndJoined(t, s.c, p)
		if d := curveToPath(s.c, p, 10); d > s.eps {
			t.Errorf("deviation %g of %g", d, s.eps)
		}
		n := Theory(s.c, s.eps, chain.Line)
		if limit := 1.01*n + float64(len(s.c.pieces)) + 2; float64(len(p)) > limit {
			t.Errorf("%d lines, limit %.1f", len(p), limit)
		}
		total, theory = total+float64(len(p)), theory+n
		if t.Failed() {
			t.Fatalf("seed %d: %s", seed, s.name)
		}
	}
	t.Logf("%d curves: %.0f lines, %.4f of the integral", specimens, total, total/theory)
}

// BenchmarkFit fits the curves of the comparison and prints the arcs that are not dwells beside N*.
func BenchmarkFit(b *testing.B) {
	for _, k := range compared() {
		for _, um := range []float64{10, 1, 0.1, 0.01, 0.001} {
			b.Run(fmt.Sprintf("%s/%gum", k.name, um), func(b *testing.B) {
				n := 0
				for b.Loop() {
					p, err := Arcs(k.c, um/1000, Options{})
					if err != nil {
						b.Fatal(err)
					}
					n = freeArcs(k.c, p)
				}
				b.ReportMetric(float64(n), "arcs/op")
				b.ReportMetric(Theory(k.c, um/1000, chain.Arc), "N*")
			})
		}
	}
}
