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

func framedCurves() map[string]framed {
	contour := sampleCam()
	contour.off = 8
	return map[string]framed{"ellipse": {ellipse(60, 35)}, "pitch": {sampleCam().curve()}, "contour": {contour.curve()}}
}

// farFrom is the distance of a point from an element whose sector or strip it is in or near.
func farFrom(e chain.Element, q plane.Point) float64 {
	if e.Kind == chain.Line {
		return math.Abs(e.To.Sub(e.From).Unit().Cross(q.Sub(e.From)))
	}
	return math.Abs(q.Dist(e.Center) - e.Radius())
}

// truth is the largest deviation of the curve from the elements that stand for its stretches: perElement
// points each, then golden sections about the few that look largest. It reads no higher than the true deviation
// of a path with continuous tangent.
func truth(c curve, p chain.Path, perElement int) float64 {
	type peak struct {
		d, t, h float64
		e       chain.Element
	}
	var peaks []peak
	for _, e := range p {
		h := (e.Source.To - e.Source.From) / float64(perElement)
		for j := range perElement + 1 {
			t := e.Source.From + h*float64(j)
			peaks = append(peaks, peak{farFrom(e, c.at(t)), t, h, e})
		}
	}
	sort.Slice(peaks, func(i, j int) bool { return peaks[i].d > peaks[j].d })
	worst := 0.0
	for _, k := range peaks[:20] {
		a := math.Max(k.t-k.h, k.e.Source.From)
		b := math.Min(k.t+k.h, k.e.Source.To)
		const golden = 0.6180339887498949 // (√5-1)/2
		for range 50 {
			x, y := b-golden*(b-a), a+golden*(b-a)
			if farFrom(k.e, c.at(x)) > farFrom(k.e, c.at(y)) {
				b = y
			} else {
				a = x
			}
		}
		worst = math.Max(worst, math.Max(k.d, farFrom(k.e, c.at((a+b)/2))))
	}
	return worst
}

// fitted is a fitted path off any grid.
func fitted(tb testing.TB, c framed, eps float64, kind chain.Kind) chain.Path {
	tb.Helper()
	p, err := fit.Lines(c, eps)
	if kind == chain.Arc {
		p, err = fit.Arcs(c, eps, fit.Options{})
	}
	if err != nil {
		tb.Fatal(err)
	}
	return p
}

// On fitted paths off any grid the bound is never below a dense search refined at its top candidates, and within
// 1 % of it.
func TestRatioOnFittedPaths(t *testing.T) {
	for name, c := range framedCurves() {
		for _, eps := range []float64{0.01, 0.001, 0.0001} {
			for _, kind := range []chain.Kind{chain.Line, chain.Arc} {
				p := fitted(t, c, eps, kind)
				d, err := certify.Closed(c, p)
				if err != nil {
					t.Fatal(err)
				}
				// The certificate chooses its own stretches: what the search sees may lie on a neighbor.
				least := truth(c.curve, p, 40000/len(p))
				if ratio := d.Bound / least; kind == chain.Arc && !(ratio >= 1) || ratio > 1.01 {
					t.Errorf("%s, eps %g, kind %v: bound %.9g, searched %.9g, ratio %.5f", name, eps, kind, d.Bound, least, ratio)
				}
			}
		}
	}
}

// The certificate's cost beside the fit's, in the same run: cert/fit is their ratio in time, wanted
// below 0.1, and bound/true what the bound is above a refined search.
func BenchmarkCertifyBesideFit(b *testing.B) {
	for name, c := range framedCurves() {
		for what, kind := range map[string]chain.Kind{"lines": chain.Line, "arcs": chain.Arc} {
			b.Run(name+" "+what, func(b *testing.B) {
				var fitting, proving time.Duration
				var p chain.Path
				var d certify.Deviation
				for b.Loop() {
					start := time.Now()
					p = fitted(b, c, 0.001, kind)
					middle := time.Now()
					var err error
					if d, err = certify.Closed(c, p); err != nil {
						b.Fatal(err)
					}
					fitting += middle.Sub(start)
					proving += time.Since(middle)
				}
				b.ReportMetric(proving.Seconds()/fitting.Seconds(), "cert/fit")
				b.ReportMetric(d.Bound/truth(c.curve, p, 400), "bound/true")
				b.ReportMetric(float64(len(p)), "blocks")
			})
		}
	}
}
