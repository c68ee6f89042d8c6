package tolerance_test

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"lobewright/synth"
	"lobewright/synth/spec"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
)

// sampleCam is the cam of a sample.
type sampleCam struct {
	*synth.Cam
	spec *spec.Spec
	name string
}

// mm is a millimeter in the sample's unit.
func (s sampleCam) mm() float64 {
	if s.spec.Units == spec.Inch {
		return 1 / 25.4
	}
	return 1
}

// sampleCams builds the samples that release, but that of a table, which the pack reads.
func sampleCams(tb testing.TB) []sampleCam {
	files, err := filepath.Glob("../samples/*.yaml")
	if err != nil {
		tb.Fatal(err)
	}
	var all []sampleCam
	for _, name := range files {
		text, err := os.ReadFile(name)
		if err != nil {
			tb.Fatal(err)
		}
		s, err := spec.Read(name, text, synth.Vocabulary())
		if err != nil {
			tb.Fatal(err)
		}
		if s.Motion.Table != nil {
			continue
		}
		c, err := synth.Build(s)
		if err != nil {
			tb.Fatal(err)
		}
		if cut(c) {
			all = append(all, sampleCam{c, s, strings.TrimSuffix(filepath.Base(name), ".yaml")})
		}
	}
	return all
}

// fitted fits a curve and certifies what comes of it.
func fitted(tb testing.TB, c *synth.Curve, eps float64, kind chain.Kind) chain.Path {
	p, err := fit.Lines(c, eps, fit.Options{})
	if kind == chain.Arc {
		p, err = fit.Arcs(c, eps, fit.Options{})
	}
	if err != nil {
		tb.Fatal(err)
	}
	prove := certify.Closed
	if !c.Closed() {
		prove = certify.Open
	}
	if _, err := prove(c, p); err != nil {
		tb.Fatal(err)
	}
	return p
}

// BenchmarkFitAndCertify is the fit of each sample's pitch curve at 1 µm with its certificate, by arcs and by lines.
func BenchmarkFitAndCertify(b *testing.B) {
	for _, s := range sampleCams(b) {
		for _, kind := range []chain.Kind{chain.Arc, chain.Line} {
			b.Run(s.name+map[chain.Kind]string{chain.Line: "/lines", chain.Arc: "/arcs"}[kind], func(b *testing.B) {
				n := 0
				for b.Loop() {
					n = len(fitted(b, s.Pitch(), 0.001*s.mm(), kind))
				}
				b.ReportMetric(float64(n), "blocks")
			})
		}
	}
}

// BenchmarkGrowth fits and certifies each sample with arcs from 10 µm to 1 nm and prints by which power of the number of
// blocks the time grows: the slope of the logarithms by least squares.
func BenchmarkGrowth(b *testing.B) {
	for _, s := range sampleCams(b) {
		b.Run(s.name, func(b *testing.B) {
			slope := 0.0
			for b.Loop() {
				var x, y []float64
				for um := 10.0; um > 0.0009; um /= 10 {
					start := time.Now()
					n := len(fitted(b, s.Pitch(), um/1000*s.mm(), chain.Arc))
					x, y = append(x, math.Log(float64(n))), append(y, math.Log(time.Since(start).Seconds()))
				}
				mx, my := mean(x), mean(y)
				sxy, sxx := 0.0, 0.0
				for i := range x {
					sxy += (x[i] - mx) * (y[i] - my)
					sxx += (x[i] - mx) * (x[i] - mx)
				}
				slope = sxy / sxx
			}
			b.ReportMetric(slope, "power")
		})
	}
}

func mean(x []float64) float64 {
	sum := 0.0
	for _, v := range x {
		sum += v
	}
	return sum / float64(len(x))
}
