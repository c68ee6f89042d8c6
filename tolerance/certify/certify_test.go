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

// A regular polygon in a circle deviates by its sagitta R(1-cos(phi/2)); the
// circle itself as arcs by nothing.
func TestCircle(t *testing.T) {
	const r = 50.0
	c := ellipse(r, r)
	for _, n := range []int{3, 7, 40, 314} {
		d, err := certify.Closed(c, polygon(c, spread(11, n)))
		want := r * (1 - math.Cos(math.Pi/float64(n)))
		if err != nil || d.Bound < want || d.Bound > want*1.0055 || d.Left < want*0.994 || d.Left > want || d.Right > 1e-9 {
			t.Errorf("%d lines: %+v, %v; want a bound just above %v", n, d, err, want)
		}
		if math.Abs(d.From-11) > 1e-9 || d.To != d.From+360 {
			t.Errorf("%d lines: stretch %v to %v, want 11 to 371", n, d.From, d.To)
		}
	}
	for _, n := range []int{2, 4, 9} {
		p := arcs(c, spread(20, n))
		d, err := certify.Closed(c, p)
		if err != nil || d.Bound > 2e-8 {
			t.Errorf("%d exact arcs: %+v, %v", n, d, err)
		}
		for i := range p { // concentric, 0.01 further out
			p[i].From, p[i].To = p[i].From.Add(p[i].From.Sub(plane.Point{}).Scale(0.01/r)), p[i].To.Add(p[i].To.Sub(plane.Point{}).Scale(0.01/r))
		}
		for i := range p {
			p[i].To = p[(i+1)%n].From
		}
		if d, err = certify.Closed(c, p); err != nil || d.Bound < 0.01 || d.Bound > 0.010051 || d.Right < 0.00995 {
			t.Errorf("%d arcs 0.01 outside: %+v, %v", n, d, err)
		}
	}
	start := plane.Point{X: r + 0.02}
	d, err := certify.Closed(c, chain.Path{{Kind: chain.Arc, From: start, To: start, CCW: true}})
	if err != nil || d.Bound < 0.02 || d.Bound > 0.0201*1.0001 {
		t.Errorf("a whole turn as one arc: %+v, %v", d, err)
	}
}

// The ratio of bound and truth, on paths with lines and arcs, with and without a grid.
func TestTightness(t *testing.T) {
	contour := sampleCam()
	contour.off = 8
	for name, c := range map[string]curve{"ellipse": ellipse(60, 35), "pitch": sampleCam().curve(), "contour": contour.curve()} {
		for what, p := range map[string]chain.Path{
			"lines": polygon(c, spread(-12, 90)),
			"arcs":  arcs(c, spread(-12, 40)),
		} {
			d, err := certify.Closed(c, p)
			truth := hausdorff(c, p, blends, d.From, d.To, 4000)
			if err != nil || d.Bound < truth || d.Bound > 1.01*truth || math.Max(d.Left, d.Right) < 0.985*truth {
				t.Errorf("%s, %s: %+v, %v; truth %v", name, what, d, err, truth)
			}
			if got := c.at(d.At).Dist(nearestOn(p[d.Segment], c.at(d.At))); math.Abs(got-truth) > 0.01*truth {
				t.Errorf("%s, %s: element %d is %v away at %v, want the largest, %v", name, what, d.Segment, got, d.At, truth)
			}
		}
	}
}

func nearestOn(e chain.Element, q plane.Point) plane.Point {
	best := e.From
	for k := range 20001 {
		if p := on(e, blends, float64(k)/20000); p.Dist(q) < best.Dist(q) {
			best = p
		}
	}
	return best
}

// randomPath draws a curve and a path for it, good if there are enough elements.
func randomPath(t *rapid.T, least int) (curve, chain.Path) {
	var c curve
	if rapid.Bool().Draw(t, "ellipse") {
		c = ellipse(rapid.Float64Range(30, 60).Draw(t, "a"), rapid.Float64Range(30, 60).Draw(t, "b"))
	} else {
		m := sampleCam()
		m.lift = rapid.Float64Range(0.5, 15).Draw(t, "lift")
		m.rise = rapid.Float64Range(60, 110).Draw(t, "rise")
		m.off = rapid.SampledFrom([]float64{0, 6, -9}).Draw(t, "off")
		c = m.curve()
	}
	at := spread(rapid.Float64Range(-30, 300).Draw(t, "start"), rapid.IntRange(least, 30).Draw(t, "n"))
	wobble := 360 / float64(len(at)) * 0.4
	for i := range at {
		at[i] += rapid.Float64Range(-wobble, wobble).Draw(t, "shift")
	}
	p := polygon(c, at)
	if rapid.Bool().Draw(t, "arcs") {
		p = arcs(c, at)
	}
	if q := rapid.SampledFrom([]float64{0, 0.001, 0.05}).Draw(t, "grid"); q > 0 {
		p = gridded(p, q)
	}
	return c, p
}

// holds fails when a certificate is below the truth under any control.
func holds(t *rapid.T, c curve, p chain.Path, d certify.Deviation) {
	const refinement = 1e-8
	for as := range controls {
		if truth := hausdorff(c, p, as, d.From, d.To, 400); d.Bound < truth-refinement {
			t.Fatalf("bound %v below the truth %v (control %d)\n%+v", d.Bound, truth, as, p)
		}
	}
	if math.Max(d.Left, d.Right) > d.Bound {
		t.Fatalf("found %v and %v, above the bound %v", d.Left, d.Right, d.Bound)
	}
}

// Any path made worse in any way is refused, or its bound is at or above the truth.
func TestNeverBelowTruth(t *testing.T) {
	refused, proven := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		c, p := randomPath(t, 4)
		for range rapid.IntRange(0, 3).Draw(t, "faults") {
			i := rapid.IntRange(0, len(p)-1).Draw(t, "where")
			j := (i + 1) % len(p)
			switch rapid.IntRange(0, 4).Draw(t, "fault") {
			case 0: // a joint moved
				size := rapid.SampledFrom([]float64{1e-4, 1e-2, 1}).Draw(t, "size")
				p[i].To = p[i].To.Add(plane.Vector{X: rapid.Float64Range(-size, size).Draw(t, "x"), Y: rapid.Float64Range(-size, size).Draw(t, "y")})
				p[j].From = p[i].To
			case 1:
				p[i].CCW = !p[i].CCW
			case 2: // a joint left out
				if len(p) > 3 && j > i {
					p[i].To = p[j].To
					p = append(p[:j:j], p[j+1:]...)
				}
			case 3: // the center moved
				p[i].Center = p[i].Center.Add(plane.Vector{X: rapid.Float64Range(-2, 2).Draw(t, "x")})
			case 4:
				p[i].Slack = 0.001
			}
		}
		d, err := certify.Closed(c, p)
		if err != nil {
			refused++
			return
		}
		proven++
		holds(t, c, p, d)
	})
	if proven < 20 {
		t.Errorf("%d paths proven, %d refused: the test has lost its teeth", proven, refused)
	}
}

// Good paths on every curve are proven, whatever the grid.
func TestGoodPathsPass(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c, p := randomPath(t, 15)
		d, err := certify.Closed(c, p)
		if err != nil && !strings.Contains(err.Error(), "end radii") {
			t.Fatalf("%v\n%+v", err, p)
		}
		if err == nil {
			holds(t, c, p, d)
		}
	})
}

// The wedge at a joint: a polygon around a circle touches it with every side, and is
// R(1/cos(pi/n)-1) away at its corners, where the feet on the two sides are far apart. The
// same with sides that are arcs of a large radius, bulged a little inwards.
func TestWedges(t *testing.T) {
	const r = 50.0
	c := ellipse(r, r)
	for _, n := range []int{3, 4, 6, 20} {
		want := r * (1/math.Cos(math.Pi/float64(n)) - 1)
		var corners []plane.Point
		for _, a := range spread(17, n) {
			corners = append(corners, plane.Polar(r+want, plane.Degrees(a)))
		}
		var lines, bulged chain.Path
		for i, a := range corners {
			b := corners[(i+1)%n]
			lines = append(lines, chain.Element{From: a, To: b})
			middle := a.Add(b.Sub(a).Scale(0.5))
			inward := middle.Sub(plane.Point{}).Unit().Scale(-0.01 * want)
			bulged = append(bulged, through(a, middle.Add(inward), b))
		}
		for what, p := range map[string]chain.Path{"lines": lines, "arcs": bulged} {
			d, err := certify.Closed(c, p)
			if err != nil || d.Bound < want*(1-1e-12) || d.Bound > want*1.02 {
				t.Errorf("%d %s: %+v, %v; want just above %v", n, what, d, err, want)
			}
		}
	}
}
