package certify_test

import (
	"math"
	"sort"
	"testing"
	"time"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
)

// framed is a test curve that tells curvature too, for the fitter.
type framed struct{ curve }

func (c framed) At(piece int, t float64) plane.Frame {
	x, y := c.f(piece, taylor.FVar(t))
	dx, dy := x.D(), y.D()
	v := dx.Mul(dx).Add(dy.Mul(dy)).Sqrt()
	k := dx.Mul(dy.D()).Sub(dy.Mul(dx.D())).Div(v.Mul(v).Mul(v))
	f := c.curve.At(piece, t)
	f.K, f.DK = k.C[0], k.C[1]/v.C[0]
	return f
}

type named struct {
	name string
	framed
}

func framedCurves() []named {
	contour := sampleCam()
	contour.off = 8
	return []named{{"ellipse", framed{ellipse(60, 35)}}, {"pitch", framed{sampleCam().curve()}}, {"contour", framed{contour.curve()}}}
}

// farFrom is the distance of a point from the nearest of element i, prolonged to its line or circle, and its
// neighbors: no more than the distance from the path.
func farFrom(p chain.Path, i int, q plane.Point) float64 {
	least := math.Inf(1)
	for _, k := range []int{i, (i + 1) % len(p), (i + len(p) - 1) % len(p)} {
		e := p[k]
		d := math.Abs(q.Dist(e.Center) - e.Radius())
		if e.Kind == chain.Line {
			d = math.Abs(e.To.Sub(e.From).Unit().Cross(q.Sub(e.From)))
		}
		least = math.Min(least, d)
	}
	return least
}

// searched is the largest distance of the curve from the path by about n points, then golden sections about the
// twenty that look largest. It reads no higher than the truth.
func searched(c curve, p chain.Path, n int) float64 {
	type peak struct {
		d, t, h float64
		i       int
	}
	var peaks []peak
	for i, e := range p {
		each := max(n/len(p), 8)
		h := (e.Source.To - e.Source.From) / float64(each)
		for j := range each + 1 {
			t := e.Source.From + h*float64(j)
			peaks = append(peaks, peak{farFrom(p, i, c.at(t)), t, h, i})
		}
	}
	sort.Slice(peaks, func(i, j int) bool { return peaks[i].d > peaks[j].d })
	worst := 0.0
	for _, k := range peaks[:20] {
		a, b := k.t-k.h, k.t+k.h
		const golden = 0.6180339887498949 // (√5-1)/2
		for range 40 {
			x, y := b-golden*(b-a), a+golden*(b-a)
			if farFrom(p, k.i, c.at(x)) > farFrom(p, k.i, c.at(y)) {
				b = y
			} else {
				a = x
			}
		}
		worst = math.Max(worst, math.Max(k.d, farFrom(p, k.i, c.at((a+b)/2))))
	}
	return worst
}

// fitted is a fitted path off any grid.
func fitted(tb testing.TB, c framed, eps float64, kind chain.Kind) chain.Path {
	tb.Helper()
	p, err := fit.Lines(c, eps, fit.Options{})
	if kind == chain.Arc {
		p, err = fit.Arcs(c, eps, fit.Options{})
	}
	if err != nil {
		tb.Fatal(err)
	}
	return p
}

// On fitted paths off any grid the bound is never below a dense search refined at its top candidates, and within
// 1 % of it: a million points once, 20000 for the others.
func TestRatioOnFittedPaths(t *testing.T) {
	for _, c := range framedCurves() {
		for _, eps := range []float64{0.01, 0.001, 0.0001} {
			for _, kind := range []chain.Kind{chain.Line, chain.Arc} {
				p := fitted(t, c.framed, eps, kind)
				d, err := certify.Closed(c, p)
				if err != nil {
					t.Fatal(err)
				}
				n := 20000
				if c.name == "contour" && eps == 0.001 && kind == chain.Arc {
					n = 1e6
				}
				least := searched(c.curve, p, n)
				if ratio := d.Bound / least; !(ratio >= 1 && ratio <= 1.01) {
					t.Errorf("%s, eps %g, kind %v: bound %.9g, searched %.9g, ratio %.5f", c.name, eps, kind, d.Bound, least, ratio)
				}
			}
		}
	}
}

// The certificate's cost beside the fit's, in the same run: cert/fit is their ratio in time, wanted
// below 0.1, and bound/true what the bound is above a refined search.
func BenchmarkCertifyBesideFit(b *testing.B) {
	for _, c := range framedCurves() {
		for _, kind := range []chain.Kind{chain.Line, chain.Arc} {
			b.Run(c.name+map[chain.Kind]string{chain.Line: "_lines", chain.Arc: "_arcs"}[kind], func(b *testing.B) {
				var fitting, proving time.Duration
				var p chain.Path
				var d certify.Deviation
				for b.Loop() {
					start := time.Now()
					p = fitted(b, c.framed, 0.001, kind)
					middle := time.Now()
					var err error
					if d, err = certify.Closed(c, p); err != nil {
						b.Fatal(err)
					}
					fitting += middle.Sub(start)
					proving += time.Since(middle)
				}
				b.ReportMetric(proving.Seconds()/fitting.Seconds(), "cert/fit")
				b.ReportMetric(d.Bound/searched(c.curve, p, 20000), "bound/true")
				b.ReportMetric(float64(len(p)), "blocks")
			})
		}
	}
}
