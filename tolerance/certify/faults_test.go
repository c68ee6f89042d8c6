package certify_test

import (
	"math"
	"slices"
	"strings"
	"testing"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
)

// Each fault is planted in a good path. Refused must say why; the others must not be
// below the truth, and not near the good path's bound either.
func TestPlantedFaults(t *testing.T) {
	contour := sampleCam()
	contour.off = 8
	c := contour.curve()
	good := arcs(c, spread(3, 36))
	clean, err := certify.Closed(c, good)
	if err != nil {
		t.Fatal(err)
	}
	eps := clean.Bound
	faults := []struct {
		name    string
		refused string // part of the message, "" when a bound is due
		plant   func(p chain.Path) chain.Path
	}{
		{"segment missing", "does not start where", func(p chain.Path) chain.Path { return slices.Delete(p, 7, 8) }},
		{"segment missing, gap closed by a line", "", func(p chain.Path) chain.Path {
			p[7] = chain.Element{Kind: chain.Line, From: p[7].From, To: p[7].To}
			return p
		}},
		{"last segment missing", "not closed", func(p chain.Path) chain.Path { return p[:35] }},
		{"whole path twice", "does not lead on", func(p chain.Path) chain.Path { return slices.Concat(p, p) }},
		{"a full circle between two elements", "does not lead on", func(p chain.Path) chain.Path {
			whole := p[7]
			whole.From = whole.To
			return slices.Concat(p[:8], chain.Path{whole}, p[8:])
		}},
		{"hairpin", "", func(p chain.Path) chain.Path {
			tip := p[7].To.Add(plane.Vector{X: 3, Y: 4})
			return slices.Concat(p[:8], chain.Path{{From: p[7].To, To: tip}, {From: tip, To: p[7].To}}, p[8:])
		}},
		{"hairpin along the curve", "runs against", func(p chain.Path) chain.Path {
			back := p[7]
			back.From, back.To, back.CCW = back.To, back.From, !back.CCW
			return slices.Concat(p[:8], chain.Path{back, p[7]}, p[8:])
		}},
		{"sense flipped", "runs against", func(p chain.Path) chain.Path { p[7].CCW = !p[7].CCW; return p }},
		{"center mirrored", "runs against", func(p chain.Path) chain.Path {
			p[7] = mirrored(p[7])
			return p
		}},
		{"bulge flipped", "", func(p chain.Path) chain.Path {
			p[7] = mirrored(p[7])
			p[7].CCW = !p[7].CCW
			return p
		}},
		{"joint moved by 10 eps", "", func(p chain.Path) chain.Path {
			n := p[7].To.Sub(p[7].Center).Unit()
			p[7].To = p[7].To.Add(n.Scale(10 * eps))
			p[8].From = p[7].To
			return p
		}},
		{"center moved", "", func(p chain.Path) chain.Path { p[7].Center.X += 0.2; return p }},
		{"reversed", "runs against", func(p chain.Path) chain.Path {
			slices.Reverse(p)
			for i := range p {
				p[i].From, p[i].To, p[i].CCW = p[i].To, p[i].From, !p[i].CCW
			}
			return p
		}},
		{"segments swapped", "does not start where", func(p chain.Path) chain.Path { p[7], p[8] = p[8], p[7]; return p }},
		{"joints swapped", "", func(p chain.Path) chain.Path {
			a, b := p[7].To, p[8].To
			p[7] = chain.Element{From: p[7].From, To: b}
			p[8] = chain.Element{From: b, To: a}
			p[9] = chain.Element{From: a, To: p[9].To}
			return p
		}},
		{"slack", "", func(p chain.Path) chain.Path { p[7].Slack = 2 * eps; return p }},
		{"another curve's path", "", func(chain.Path) chain.Path { return arcs(ellipse(36, 33), spread(3, 36)) }},
		{"element of no length", "no length", func(p chain.Path) chain.Path {
			return slices.Concat(p[:8], chain.Path{{From: p[7].To, To: p[7].To}}, p[8:])
		}},
		{"not a number", "no lengths", func(p chain.Path) chain.Path { p[7].To.X = math.NaN(); return p }},
		{"endless radius", "no radius", func(p chain.Path) chain.Path { p[7].Center.X = math.Inf(1); return p }},
		{"unknown kind", "neither", func(p chain.Path) chain.Path { p[7].Kind = 9; return p }},
		{"radii that do not fit", "do not fit", func(p chain.Path) chain.Path { p[7].Center = p[7].From.Add(plane.Vector{X: 0.1}); return p }},
		{"no path", "empty", func(chain.Path) chain.Path { return nil }},
	}
	for _, f := range faults {
		p := f.plant(slices.Clone(good))
		d, err := certify.Closed(c, p)
		switch {
		case f.refused != "":
			if err == nil || !strings.Contains(err.Error(), f.refused) {
				t.Errorf("%s: %v, %+v; want a refusal with %q", f.name, err, d, f.refused)
			}
		case err == nil:
			truth := hausdorff(c, p, blends, d.From, d.To, 2000)
			if d.Bound < truth || d.Bound < 1.5*eps {
				t.Errorf("%s: bound %v, truth %v, without the fault %v", f.name, d.Bound, truth, eps)
			}
		default:
			t.Logf("%s: refused: %v", f.name, err)
		}
	}
}

// mirrored has its center on the other side of the chord.
func mirrored(e chain.Element) chain.Element {
	middle := e.From.Add(e.To.Sub(e.From).Scale(0.5))
	e.Center = middle.Add(middle.Sub(e.Center))
	return e
}

// An arc above a half turn: exact radii pass, a grid's mismatch is refused.
func TestMajorArc(t *testing.T) {
	c := ellipse(50, 50)
	a, b := plane.Point{X: 50}, plane.Point{Y: -50}
	p := chain.Path{{Kind: chain.Arc, From: a, To: b, CCW: true}, {Kind: chain.Arc, From: b, To: a, CCW: true}}
	if d, err := certify.Closed(c, p); err != nil || d.Bound > 2e-8 {
		t.Errorf("270 and 90 degrees: %+v, %v", d, err)
	}
	p[0].To.Y, p[1].From.Y = -50.001, -50.001
	if d, err := certify.Closed(c, p); err == nil || !strings.Contains(err.Error(), "divide the arc") {
		t.Errorf("270 degrees with radii 0.001 apart: %+v, %v", d, err)
	}
	half := chain.Path{{Kind: chain.Arc, From: a, To: plane.Point{X: -50.002}, CCW: true},
		{Kind: chain.Arc, From: plane.Point{X: -50.002}, To: a, CCW: true}}
	if d, err := certify.Closed(c, half); err != nil || d.Bound < 0.002 || d.Bound > 0.002011 {
		t.Errorf("half turns with radii 0.002 apart: %+v, %v; want 0.002", d, err)
	}
}

// A curve that goes round twice, and a path that does so once: every point of either is on the other.
func TestDoubledTurn(t *testing.T) {
	twice := curve{pieces: []plane.Piece{{From: 0, To: 360}}, f: twiceRound[taylor.F], i: twiceRound[taylor.I]}
	once := arcs(ellipse(50, 50), spread(0, 4))
	if d, err := certify.Closed(twice, once); err == nil || !strings.Contains(err.Error(), "sweeps") {
		t.Errorf("%+v, %v", d, err)
	}
	if d, err := certify.Closed(twice, slices.Concat(once, once)); err != nil || d.Bound > 2e-8 {
		t.Errorf("the path twice: %+v, %v", d, err)
	}
}

func twiceRound[T taylor.Scalar[T]](_ int, t T) (x, y T) {
	s, c := t.Add(t).Radians().SinCos()
	return c.Scale(50), s.Scale(50)
}

// Stretches start and end where their points are; the end caps count; an overlap is walked past the turn.
func TestStretch(t *testing.T) {
	c := sampleCam().curve()
	at := spread(100, 40)
	loop := arcs(c, at)
	few := loop[3:9]
	d, err := certify.Stretch(c, few)
	if err != nil || math.Abs(d.From-at[3]) > 1e-6 || math.Abs(d.To-at[9]) > 1e-6 {
		t.Fatalf("%+v, %v; want %v to %v", d, err, at[3], at[9])
	}
	if truth := hausdorff(c, few, blends, d.From, d.To, 3000); d.Bound < truth || d.Bound > 1.01*truth {
		t.Errorf("bound %v, truth %v", d.Bound, truth)
	}
	over := slices.Concat(loop[30:], loop[:40], loop[:4]) // from 370 on, more than a turn
	d, err = certify.Stretch(c, over)
	if err != nil || math.Abs(d.From-10) > 1e-6 || math.Abs(d.To-(10+450+36)) > 1e-6 {
		t.Errorf("overlap: %+v, %v; want 10 to 496", d, err)
	}
	lifted := slices.Clone(few)
	last := &lifted[len(lifted)-1]
	last.To = last.To.Add(last.To.Sub(last.Center).Unit().Scale(0.02))
	if d, err = certify.Stretch(c, lifted); err != nil || d.Bound < 0.02 {
		t.Errorf("end lifted by 0.02: %+v, %v", d, err)
	}
}

// The curve itself is checked: pieces in order, no gap.
func TestBadCurves(t *testing.T) {
	good := ellipse(50, 40)
	p := polygon(good, spread(0, 20))
	open := good
	open.pieces = []plane.Piece{{From: 0, To: 300}}
	torn := good
	torn.pieces = []plane.Piece{{From: 0, To: 100}, {From: 120, To: 360}}
	nowhere := good
	nowhere.i = func(_ int, t taylor.I) (x, y taylor.I) { r := t.Of(-1).Sqrt(); return r, r }
	empty := good
	empty.pieces = nil
	for name, c := range map[string]curve{"open": open, "torn": torn, "undefined": nowhere, "empty": empty} {
		if d, err := certify.Closed(c, p); err == nil {
			t.Errorf("%s curve: accepted, %+v", name, d)
		}
		if _, _, err := certify.Clear(c, p[0], 1); err == nil {
			t.Errorf("%s curve: clearance accepted", name)
		}
	}
}

func BenchmarkCertify(b *testing.B) {
	contour := sampleCam()
	contour.off = 8
	for _, k := range []struct {
		name string
		c    curve
		path chain.Path
	}{
		{"ellipse 40 arcs", ellipse(60, 35), arcs(ellipse(60, 35), spread(-12, 40))},
		{"pitch 40 arcs", sampleCam().curve(), arcs(sampleCam().curve(), spread(-12, 40))},
		{"contour 40 arcs", contour.curve(), arcs(contour.curve(), spread(-12, 40))},
		{"contour 40 arcs grid 0.001", contour.curve(), gridded(arcs(contour.curve(), spread(-12, 40)), 0.001)},
		{"contour 300 lines", contour.curve(), polygon(contour.curve(), spread(-12, 300))},
	} {
		b.Run(k.name, func(b *testing.B) {
			var d certify.Deviation
			var err error
			for b.Loop() {
				if d, err = certify.Closed(k.c, k.path); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(d.Bound/hausdorff(k.c, k.path, blends, d.From, d.To, 6000), "bound/true")
			b.ReportMetric(1000*d.Bound, "um")
		})
	}
}
