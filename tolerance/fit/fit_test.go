package fit

import (
	"math"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
	"pgregory.net/rapid"
)

func curves() map[string]testCurve {
	return map[string]testCurve{
		"circle": round(true), "circle not marked": round(false), "ellipse": ellipse(60, 35),
		"cam": cyc345(1, 0), "cam contour": cyc345(1, 11), "cam clockwise": cyc345(-1, 0), "cam clockwise contour": cyc345(-1, -11),
		"parabolic": parabolic(0), "parabolic contour": parabolic(11),
		"inch": inch(), "no dwell": noDwell(0), "no dwell contour": noDwell(14), "wavy": wavy(), "thin": ellipse(60, 6),
		"corners": corners(), "square": square(),
	}
}

func closedAndJoined(t fataler, c testCurve, p chain.Path) {
	t.Helper()
	start := c.pieces[0].From
	// A joint may lie beside the start of the first piece, by no more than the elements beside it reach.
	beside := math.Max(p[0].Source.To-p[0].Source.From, p[len(p)-1].Source.To-p[len(p)-1].Source.From)
	if math.Abs(p[0].Source.From-start) > beside || p[len(p)-1].Source.To != p[0].Source.From+360 {
		t.Errorf("stands for %v to %v, want one turn from %g", p[0].Source.From, p[len(p)-1].Source.To, start)
	}
	for i, e := range p {
		next := p[(i+1)%len(p)]
		if e.To != next.From {
			t.Errorf("joint after %d is open", i)
		}
		if !(e.Source.To > e.Source.From) || i+1 < len(p) && e.Source.To != next.Source.From {
			t.Errorf("source of %d: %v, next %v", i, e.Source, next.Source)
		}
	}
}

func TestArcs(t *testing.T) {
	for name, c := range curves() {
		for _, um := range []float64{20, 5, 2, 0.5} {
			eps := um / 1000
			if name == "inch" {
				eps /= 20
			}
			free := freeArcs(c, checkArcs(t, c, eps, 60))
			theory := Theory(c, eps, chain.Arc)
			// A circle that does not say it is one takes a few arcs that turn by less than 145 degrees.
			limit := math.Max(bound(c, eps), 4)
			if name == "thin" { // ten times as long as wide, no cam: an arc turns too far for the theory
				limit = 1.3*theory + 2
			}
			if float64(free) > limit {
				t.Errorf("%s, %g um: %d arcs, theory %.1f", name, um, free, theory)
			}
			t.Logf("%s, %g um: %d free arcs, theory %.1f", name, um, free, theory)
		}
	}
}

// checkArcs fits, checks all that Arcs promises but the count, and returns the path.
func checkArcs(t fataler, c testCurve, eps float64, perArc int) chain.Path {
	t.Helper()
	p, err := Arcs(c, eps, Options{})
	if err != nil {
		t.Fatalf("%g: %v", eps, err)
	}
	closedAndJoined(t, c, p)
	if to, from := curveToPath(c, p, perArc), pathToCurve(c, p, perArc/5); to > eps || from > eps {
		t.Errorf("deviation %g, %g of %g", to, from, eps)
	}
	for i, e := range p {
		next := p[(i+1)%len(p)]
		u, v := e.EndTangent(), next.StartTangent()
		if kink := math.Atan2(u.Cross(v), u.Dot(v)); math.Abs(kink) > 1e-9 && !c.kinkAtEnd(e.Source.To) {
			t.Errorf("eps %g: kink of %g after %d", eps, kink, i)
		}
	}
	nearCurvatures(t, c, p, eps)
	return p
}

// nearCurvatures checks that no arc bends much more or less than the curve does along it and
// its neighbors, so that parallels of the path exist where parallels of the curve do. The
// best chain's curvature is off by up to k'h/2, h = (124.7·eps/k')^(1/3); twice that and
// a part for tilted ends are allowed.
func nearCurvatures(t fataler, c testCurve, p chain.Path, eps float64) {
	t.Helper()
	steepest := 0.0
	for i, q := range c.pieces {
		for j := 0; j <= 200; j++ {
			steepest = math.Max(steepest, math.Abs(c.At(i, at(q, j, 201)).DK))
		}
	}
	allowed := 1.1*math.Cbrt(steepest*steepest*arcConstant*eps) + 1e-9
	for i, e := range p {
		low, high := math.Inf(1), math.Inf(-1)
		for _, q := range []chain.Element{p[(i+len(p)-1)%len(p)], e, p[(i+1)%len(p)]} {
			for j := 0; j <= 20; j++ {
				k := c.frame(q.Source.From + float64(j)/20*(q.Source.To-q.Source.From)).K
				low, high = math.Min(low, k), math.Max(high, k)
			}
		}
		if k := e.Curvature(); k < low-allowed || k > high+allowed {
			t.Errorf("eps %g: arc %d has curvature %g, the curve %g to %g there", eps, i, k, low, high)
		}
	}
}

// fataler is what checks need of testing.T and rapid.T.
type fataler interface {
	Helper()
	Fatalf(string, ...any)
	Errorf(string, ...any)
}

// randomCam draws a cam of one to three rises and falls, with and without top dwells, both
// ways round, as pitch curve or a parallel curve up to 80 % of the way to a cusp.
func randomCam(t *rapid.T) testCurve {
	law := rapid.SampledFrom([]lift{cycloidal, poly345})
	r0 := rapid.Float64Range(25, 90).Draw(t, "r0")
	n := rapid.IntRange(1, 3).Draw(t, "lobes")
	var zones []zone
	rest := 360.0
	add := func(z zone) { zones, rest = append(zones, z), rest-z.over }
	for i := 0; i < n; i++ {
		share := 360 / float64(n)
		h := rapid.Float64Range(0.05, 0.25).Draw(t, "h") * r0
		add(zone{share * rapid.Float64Range(0.2, 0.45).Draw(t, "rise"), 0, h, 0, 1, law.Draw(t, "law")})
		if rapid.Bool().Draw(t, "top") {
			add(zone{share * rapid.Float64Range(0.002, 0.09).Draw(t, "dwell"), h, h, 0, 0, nil})
		}
		add(zone{share * rapid.Float64Range(0.2, 0.45).Draw(t, "fall"), h, 0, 0, 1, law.Draw(t, "law")})
	}
	add(zone{rest, 0, 0, 0, 0, nil})
	dir := rapid.SampledFrom([]float64{1, -1}).Draw(t, "dir")
	start := rapid.Float64Range(-200, 200).Draw(t, "start")
	pitch := polarCam(r0, start, dir, 0, zones)
	left, right := 30.0, 30.0 // how far a parallel may go
	for i, p := range pitch.pieces {
		for j := 0; j <= 100; j++ {
			k := pitch.At(i, at(p, j, 101)).K
			left, right = math.Min(left, 1/math.Max(k, 1e-9)), math.Min(right, 1/math.Max(-k, 1e-9))
		}
	}
	return polarCam(r0, start, dir, rapid.Float64Range(-0.8*right, 0.8*left).Draw(t, "left"), zones)
}

func TestRandomCams(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := randomCam(t)
		eps := math.Exp(rapid.Float64Range(math.Log(0.0005), math.Log(0.02)).Draw(t, "log eps"))
		free := freeArcs(c, checkArcs(t, c, eps, 16))
		if limit := bound(c, eps); float64(free) > limit {
			t.Errorf("%d arcs, limit %.1f", free, limit)
		}
	})
}

func TestLines(t *testing.T) {
	for name, c := range curves() {
		for _, um := range []float64{10, 5, 2, 0.5} {
			eps := um / 1000
			if name == "inch" {
				eps /= 20
			}
			p, err := Lines(c, eps, Options{})
			if err != nil {
				t.Errorf("%s, %g um: %v", name, um, err)
				continue
			}
			closedAndJoined(t, c, p)
			to, from := curveToPath(c, p, 40), pathToCurve(c, p, 4)
			if to > eps || from > eps {
				t.Errorf("%s, %g um: deviation %g, %g", name, um, to, from)
			}
			theory := Theory(c, eps, chain.Line)
			if limit := 1.01*theory + float64(len(c.pieces)) + 2; float64(len(p)) > limit {
				t.Errorf("%s, %g um: %d lines, theory %.1f, limit %.1f", name, um, len(p), theory, limit)
			}
			t.Logf("%s, %g um: %d lines, theory %.1f, deviation %.4f %.4f eps", name, um, len(p), theory, to/eps, from/eps)
		}
	}
}

// TestWritten takes the whole way: the pitch curve fitted once, moved to the contour, put on
// a grid of 1 um. An offset chain has the deviation of the chain itself, and the grid
// adds less than half a diagonal, 0.71 um.
func TestWritten(t *testing.T) {
	for _, eps := range []float64{0.005, 0.002, 0.001} {
		for _, dir := range []float64{1, -1} {
			p, err := Arcs(cyc345(dir, 0), eps, Options{})
			if err != nil {
				t.Fatal(err)
			}
			contour, err := p.Offset(dir * 11)
			if err != nil {
				t.Fatal(err)
			}
			c := cyc345(dir, dir*11)
			if d := curveToPath(c, contour, 40); d > eps {
				t.Errorf("offset: deviation %g of %g", d, eps)
			}
			written, err := chain.Snap(contour, chain.Grid{Decimals: 3}, chain.SnapOptions{})
			if err != nil {
				t.Fatal(err)
			}
			d := curveToPath(c, written.Path(), 40)
			if d > eps+0.0007 || !written.Closed() || written.Mismatch() > 0.001 {
				t.Errorf("written: deviation %g of %g, mismatch %g", d, eps, written.Mismatch())
			}
			t.Logf("eps %g: written deviation %.6f, mismatch %.6f, %d segments", eps, d, written.Mismatch(), len(written.Segments))
		}
	}
}

func TestRefuses(t *testing.T) {
	open := ellipse(60, 35)
	open.pieces = []plane.Piece{{From: 0, To: 180}}
	gap := ellipse(60, 35)
	gap.pieces = []plane.Piece{{From: 0, To: 100}, {From: 110, To: 360}}
	spiral := polarCam(40, 0, 1, 0, []zone{{360, 0, 5, 0, 1, cycloidal}})
	still := testCurve{dir: 1, pieces: []plane.Piece{{From: 0, To: 360}}, z: func(int, float64) [4]complex128 { return [4]complex128{1} }}
	for name, c := range map[string]testCurve{"open": open, "gap": gap, "spiral": spiral, "still": still, "none": {}} {
		if p, err := Arcs(c, 0.01, Options{}); err == nil {
			t.Errorf("%s: arcs %v, no error", name, p)
		}
		if p, err := Lines(c, 0.01, Options{}); err == nil {
			t.Errorf("%s: lines %v, no error", name, p)
		}
	}
	for _, eps := range []float64{0, -1, math.NaN(), math.Inf(1), 1e-12} {
		if _, err := Arcs(ellipse(60, 35), eps, Options{}); err == nil {
			t.Errorf("eps %g: no error", eps)
		}
	}
}

// TestTheory: for a circle the lines are 2π√(r/(16·eps)) exactly; the other integrals at 1 um
// were worked out by a separate program, to a tenth.
func TestTheory(t *testing.T) {
	for _, c := range []struct {
		kind      chain.Kind
		c         testCurve
		want, tol float64
	}{
		{chain.Arc, ellipse(60, 35), 43.1, 0.06},
		{chain.Line, ellipse(60, 35), 331.8, 0.06},
		{chain.Line, round(false), 2 * math.Pi * math.Sqrt(30/0.016), 1e-3},
		{chain.Arc, round(true), 0, 0},
		{chain.Arc, cyc345(1, 0), 30.6, 0.06},
		{chain.Arc, cyc345(1, 11), 30.6, 0.06}, // parallel curves take the same
		{chain.Line, cyc345(1, 0), 354.6, 0.06},
		{chain.Line, cyc345(1, 11), 311.5, 0.06},
	} {
		if got := Theory(c.c, 0.001, c.kind); math.Abs(got-c.want) > c.tol {
			t.Errorf("kind %d: %.3f, want %.3f", c.kind, got, c.want)
		}
	}
}

func BenchmarkLines(b *testing.B) {
	c := cyc345(1, 0)
	for b.Loop() {
		if _, err := Lines(c, 0.002, Options{}); err != nil {
			b.Fatal(err)
		}
	}
}
