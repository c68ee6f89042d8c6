package chain

import (
	"math"
	"math/big"
	"strconv"
	"testing"

	"lobewright/synth/plane"
	"pgregory.net/rapid"
)

func parseFloat(s string) float64 {
	f, err := strconv.ParseFloat(s, 64)
	if err != nil {
		return math.NaN()
	}
	return f
}

// TestBulgeRoundTrip: the arcs a DXF reader rebuilds are those of the chain, within a
// small part of a count (the mismatch of the radii aside).
func TestBulgeRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c, err := Snap(smooth(t), Grid{6}, SnapOptions{MaxSweep: rapid.Float64Range(0.3, math.Pi).Draw(t, "sweep")})
		if err != nil {
			t.Fatal(err)
		}
		var ps []plane.Point
		var bs []float64
		for _, v := range c.Bulges() {
			ps, bs = append(ps, c.Grid.Value(v.P)), append(bs, v.Bulge)
		}
		back, want := FromBulges(ps, bs, c.Closed()), c.Path()
		if len(back) != len(want) {
			t.Fatalf("%d elements became %d", len(want), len(back))
		}
		for i, e := range back {
			w := want[i]
			if e.From != w.From || e.To != w.To || e.Kind != w.Kind || e.CCW != w.CCW {
				t.Fatalf("element %d: %v became %v", i, w, e)
			}
			if d := e.PointAt(0.5).Dist(w.PointAt(0.5)); d > 2*c.Grid.Step() {
				t.Fatalf("element %d: middle moved by %g", i, d)
			}
			if e.Slack > 1e-9 {
				t.Fatalf("element %d: slack %g", i, e.Slack)
			}
		}
	})
}

// TestKnownBulges: tan(sweep/4) for a half circle, a quarter and a three-quarter arc.
func TestKnownBulges(t *testing.T) {
	p := []plane.Point{{X: 1}, {X: 0, Y: 1}}
	quarter := math.Tan(math.Pi / 8)
	for _, c := range []struct {
		b      float64
		center plane.Point
		sweep  float64
	}{
		{quarter, plane.Point{}, math.Pi / 2},
		{-quarter, plane.Point{X: 1, Y: 1}, -math.Pi / 2},
		{1, plane.Point{X: 0.5, Y: 0.5}, math.Pi},
		{-1, plane.Point{X: 0.5, Y: 0.5}, -math.Pi},
		{math.Tan(3 * math.Pi / 8), plane.Point{X: 1, Y: 1}, 3 * math.Pi / 2},
	} {
		e := FromBulges(p, []float64{c.b}, false)[0]
		if !near(e.Center, c.center, 1e-15*4) || math.Abs(e.Sweep()-c.sweep) > 1e-12 {
			t.Errorf("bulge %g: center %v sweep %g, want %v %g", c.b, e.Center, e.Sweep(), c.center, c.sweep)
		}
		s := Segment{Kind: Arc, From: Point{X: 2}, To: Point{Y: 2}, CCW: c.sweep > 0,
			Center: Point{int64(2 * c.center.X), int64(2 * c.center.Y)}}
		if got := s.bulge(); math.Abs(got-c.b) > 1e-14*math.Abs(c.b) {
			t.Errorf("center %v: bulge %g, want %g", c.center, got, c.b)
		}
	}
}

// TestSlackHolds compares the center with the one worked out in 300-bit arithmetic:
// half the slack bounds its error.
func TestSlackHolds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		draw := func(name string) plane.Point {
			return plane.Point{X: rapid.Float64Range(-300, 300).Draw(t, name), Y: rapid.Float64Range(-300, 300).Draw(t, name)}
		}
		from, to := draw("from"), draw("to")
		b := math.Exp(rapid.Float64Range(-16, 2).Draw(t, "log bulge"))
		if rapid.Bool().Draw(t, "cw") {
			b = -b
		}
		if from == to {
			return
		}
		e := fromBulge(from, to, b)
		x, y := exactCenter(from, to, b)
		dx, _ := x.Sub(x, big.NewFloat(e.Center.X)).Float64()
		dy, _ := y.Sub(y, big.NewFloat(e.Center.Y)).Float64()
		if math.Hypot(dx, dy) > e.Slack/2 {
			t.Fatalf("center is off by %g, half the slack is %g", math.Hypot(dx, dy), e.Slack/2)
		}
		if e.Slack > 1e-15*50*(e.Radius()+600) {
			t.Fatalf("slack %g is wasteful", e.Slack)
		}
	})
}

func exactCenter(from, to plane.Point, b float64) (x, y *big.Float) {
	f := func(v float64) *big.Float { return new(big.Float).SetPrec(300).SetFloat64(v) }
	n := func() *big.Float { return new(big.Float).SetPrec(300) }
	g := n().Sub(f(1), n().Mul(f(b), f(b)))
	g.Quo(g, n().Mul(f(4), f(b)))
	cx, cy := n().Sub(f(to.X), f(from.X)), n().Sub(f(to.Y), f(from.Y))
	x = n().Sub(n().Quo(n().Add(f(from.X), f(to.X)), f(2)), n().Mul(g, cy))
	y = n().Add(n().Quo(n().Add(f(from.Y), f(to.Y)), f(2)), n().Mul(g, cx))
	return x, y
}
