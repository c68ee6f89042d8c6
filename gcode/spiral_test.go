package gcode

import (
	"math"
	"testing"

	"lobewright/tolerance/chain"
	"pgregory.net/rapid"
)

// Every sampled point of a spiral lies within the slack of the arcs that stand for it, and the slack is a
// thousandth of a tolerance of 1 µm with a few arcs.
func TestSpiralsAreNearTheirArcs(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := spiral{from: rapid.Float64Range(-400, 400).Draw(t, "from"), r0: rapid.Float64Range(20, 120).Draw(t, "r0")}
		s.to = s.from + rapid.SampledFrom([]float64{1, -1}).Draw(t, "way")*rapid.Float64Range(0.05, 4).Draw(t, "over")
		s.r1 = s.r0 + rapid.Float64Range(-0.6, 0.6).Draw(t, "steep")*s.r0*math.Abs(s.to-s.from)*math.Pi/180
		const enough = 1e-6
		path, slack := s.arcs(enough)
		if slack > enough || len(path) > 16 {
			t.Fatalf("%d arcs within %g", len(path), slack)
		}
		for i, e := range path {
			if i > 0 && e.From != path[i-1].To {
				t.Fatalf("arcs %d and %d do not meet", i-1, i)
			}
			if e.Kind == chain.Arc && (e.Sweep() > 0) != e.CCW {
				t.Fatalf("arc %d turns the wrong way", i)
			}
		}
		for k := range 401 {
			u := float64(k) / 400
			p := polarPoint(s.from+(s.to-s.from)*u, s.r0+(s.r1-s.r0)*u)
			e := path[min(int(u*float64(len(path))), len(path)-1)]
			d := math.Abs(p.Dist(e.Center) - e.Radius())
			if e.Kind == chain.Line {
				d = math.Abs(e.To.Sub(e.From).Unit().Cross(p.Sub(e.From)))
			}
			if d > slack+1e-11 {
				t.Fatalf("at %g of the way the spiral is %g off, the slack is %g", u, d, slack)
			}
		}
	})
}

// The slack of a single arc is within a factor of four of the truth: it takes R for 2R, and the largest third derivative all over.
func TestSlackIsTight(t *testing.T) {
	s := spiral{from: 10, to: 12, r0: 50, r1: 50.8}
	e, slack := s.arc()
	most := 0.0
	for k := range 2001 {
		u := float64(k) / 2000
		p := polarPoint(s.from+(s.to-s.from)*u, s.r0+(s.r1-s.r0)*u)
		most = math.Max(most, math.Abs(p.Dist(e.Center)-e.Radius()))
	}
	if !(slack >= most && slack < 4*most) {
		t.Errorf("slack %g, largest distance found %g", slack, most)
	}
}
