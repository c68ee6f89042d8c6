package certify_test

import (
	"math"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
	"pgregory.net/rapid"
)

// Clearances from a circle of radius 50, by hand.
func TestClearOfCircle(t *testing.T) {
	b := certify.Prepare(ellipse(50, 50))
	pt := func(x, y float64) plane.Point { return plane.Point{X: x, Y: y} }
	for _, k := range []struct {
		name string
		e    chain.Element
		want float64
	}{
		{"tangent line", chain.Element{From: pt(-80, 58), To: pt(80, 58)}, 8},
		{"radial line outside", chain.Element{From: pt(0, 55), To: pt(0, 90)}, 5},
		{"radial line from within", chain.Element{From: pt(0, 20), To: pt(0, 47)}, 3},
		{"plunge", chain.Element{From: pt(36, 48), To: pt(36, 48)}, 10},
		{"line that stops short of a chord", chain.Element{From: pt(90, 30), To: pt(60, 30)}, math.Hypot(60, 30) - 50},
		{"concentric arc", chain.Element{Kind: chain.Arc, From: pt(58, 0), To: pt(0, 58), CCW: true}, 8},
		{"concentric arc the long way", chain.Element{Kind: chain.Arc, From: pt(58, 0), To: pt(0, 58)}, 8},
		{"arc away from the circle", chain.Element{Kind: chain.Arc, From: pt(70, -8), To: pt(70, 8), Center: pt(70, 0), CCW: true}, math.Hypot(70, 8) - 50},
		{"the same arc towards it", chain.Element{Kind: chain.Arc, From: pt(70, -8), To: pt(70, 8), Center: pt(70, 0)}, 12},
		{"a whole turn", chain.Element{Kind: chain.Arc, From: pt(70, -8), To: pt(70, -8), Center: pt(70, 0)}, 12},
		{"all but a whole turn", chain.Element{Kind: chain.Arc, From: pt(82, 0), To: pt(82, 1e-11), Center: pt(70, 0)}, 8},
		{"slack", chain.Element{From: pt(-80, 58), To: pt(80, 58), Slack: 0.5}, 7.5},
		{"far away", chain.Element{From: pt(1e6, -1), To: pt(1e6, 1)}, 1e6 - 50},
	} {
		found, _, err := b.Clear(k.e, k.want*(1-1e-6))
		if err != nil || found < k.want*(1-1.1e-4) || found > k.want+1e-9*k.want {
			t.Errorf("%s, just allowed: %v, %v; want %v", k.name, found, err, k.want)
		}
		found, at, err := b.Clear(k.e, k.want*(1+1e-6))
		if err != nil || math.Abs(found-k.want) > 1.1e-4*k.want || found >= k.want*(1+1e-6) {
			t.Errorf("%s, just too near: %v at %v, %v; want %v", k.name, found, at, err, k.want)
		}
	}
	if found, at, err := b.Clear(chain.Element{From: pt(0, 40), To: pt(0, 90)}, 1); err != nil || found > 1e-6 || math.Abs(at-90) > 0.01 {
		t.Errorf("a line through the circle: %v at %v, %v", found, at, err)
	}
	if _, _, err := b.Clear(chain.Element{From: pt(-80, 58), To: pt(80, 58)}, 8); err == nil || !strings.Contains(err.Error(), "not proven") {
		t.Errorf("a clearance of exactly 8 from a distance of exactly 8: %v; neither can be proven", err)
	}
	if _, _, err := b.Clear(chain.Element{From: pt(0, 60), To: pt(0, 90)}, math.NaN()); err == nil {
		t.Error("clearance of NaN accepted")
	}
}

// A finishing path that runs parallel to the contour at 8 keeps 8 less its own deviation.
func TestClearAlongContour(t *testing.T) {
	inner := sampleCam()
	outer := inner
	outer.off = -8
	c, path := inner.curve(), arcs(outer.curve(), spread(5, 60))
	d, err := certify.Closed(outer.curve(), path)
	if err != nil {
		t.Fatal(err)
	}
	b := certify.Prepare(c)
	least := math.Inf(1)
	for i, e := range path {
		found, _, err := b.Clear(e, 8-d.Bound)
		if err != nil || found < 8-d.Bound {
			t.Errorf("element %d: %v, %v; want at least %v", i, found, err, 8-d.Bound)
		}
		least = math.Min(least, found)
	}
	if want := 8 - d.Right; least > 8-math.Min(d.Left, d.Right)+1e-3 || want > 8 {
		t.Errorf("least clearance %v, deviations %v and %v", least, d.Left, d.Right)
	}
}

// Random elements about random curves, against dense sampling, with mismatched radii as well.
func TestClearNeverAboveTruth(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := ellipse(rapid.Float64Range(20, 60).Draw(t, "a"), rapid.Float64Range(20, 60).Draw(t, "b"))
		if rapid.Bool().Draw(t, "cam") {
			c = sampleCam().curve()
		}
		draw := func(name string) plane.Point {
			return plane.Point{X: rapid.Float64Range(-90, 90).Draw(t, name+"x"), Y: rapid.Float64Range(-90, 90).Draw(t, name+"y")}
		}
		e := chain.Element{From: draw("from"), To: draw("to")}
		if rapid.Bool().Draw(t, "arc") {
			e = through(e.From, draw("over"), e.To)
			e.CCW = rapid.Bool().Draw(t, "ccw")
			shift := rapid.SampledFrom([]float64{0, 0.01, 1}).Draw(t, "mismatch")
			e.Center = e.Center.Add(plane.Vector{X: shift, Y: shift / 2})
		}
		least := rapid.Float64Range(0.01, 30).Draw(t, "least")
		found, at, err := certify.Clear(c, e, least)
		if err != nil {
			if strings.Contains(err.Error(), "not proven") {
				t.Fatal(err)
			}
			return // no arc
		}
		body := sampling(500, func(s float64) plane.Point { return c.at(360 * s) })
		truth := math.Inf(1)
		for as := range controls {
			for k := range 401 {
				q := on(e, as, float64(k)/400)
				if body.near(q, false) < truth+1 {
					truth = math.Min(truth, body.near(q, true))
				}
			}
		}
		room := 1e-9
		if found < least { // refuted: near the least distance, not below it
			room += 1.1e-4*found + 1e-7
		}
		if found > truth+room {
			t.Fatalf("asked for %v, found %v at %v, but %v is reached", least, found, at, truth)
		}
		between := e.From.Dist(e.To) / 800 // a sample of the element is that near
		if e.Kind == chain.Arc {           // and the band of its radii up to 2 wide in all
			between = e.From.Dist(e.Center)*2*math.Pi/800 + 2.5
		}
		if found < truth*(1-1.1e-4)-between {
			t.Fatalf("asked for %v, found %v, far below the truth %v", least, found, truth)
		}
	})
}

func TestAwayFromCircle(t *testing.T) {
	pt := func(x, y float64) plane.Point { return plane.Point{X: x, Y: y} }
	clamp := plane.Circle{Radius: 22}
	for _, k := range []struct {
		name string
		e    chain.Element
		want float64
	}{
		{"chord", chain.Element{From: pt(-40, 30), To: pt(40, 30)}, 8},
		{"line away", chain.Element{From: pt(30, 40), To: pt(60, 80)}, 28},
		{"arc about the axis", chain.Element{Kind: chain.Arc, From: pt(50, 0), To: pt(0, 50), CCW: true}, 28},
		{"arc whose near side is not in its sweep", chain.Element{Kind: chain.Arc, From: pt(60, -10), To: pt(60, 10), Center: pt(60, 0), CCW: true}, math.Hypot(60, 10) - 22},
		{"the near side", chain.Element{Kind: chain.Arc, From: pt(60, -10), To: pt(60, 10), Center: pt(60, 0)}, 28},
		{"radii 50 and 50.5", chain.Element{Kind: chain.Arc, From: pt(50, 0), To: pt(0, 50.5), CCW: true}, 28},
		{"into the disc", chain.Element{From: pt(-40, 10), To: pt(40, 10)}, -12},
		{"plunge", chain.Element{From: pt(30, 40), To: pt(30, 40)}, 28},
	} {
		got, err := certify.AwayFromCircle(k.e, clamp)
		if err != nil || got > k.want || got < k.want-1e-11 {
			t.Errorf("%s: %v, %v; want %v, not above", k.name, got, err, k.want)
		}
	}
	if _, err := certify.AwayFromCircle(chain.Element{Kind: 7}, clamp); err == nil {
		t.Error("an unknown kind has a distance")
	}
}

func BenchmarkClear(b *testing.B) {
	inner := sampleCam()
	outer := inner
	outer.off = -8
	path := arcs(outer.curve(), spread(5, 60))
	body := certify.Prepare(inner.curve())
	b.Run("prepare", func(b *testing.B) {
		for b.Loop() {
			certify.Prepare(inner.curve())
		}
	})
	b.Run("60 parallel arcs", func(b *testing.B) {
		for b.Loop() {
			for _, e := range path {
				if _, _, err := body.Clear(e, 7.99); err != nil {
					b.Fatal(err)
				}
			}
		}
	})
}
