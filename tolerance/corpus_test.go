package tolerance_test

import (
	"fmt"
	"math"
	"math/rand"
	"strings"
	"testing"

	"lobewright/synth"
	"lobewright/synth/spec"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"
	"lobewright/tolerance/floor"
)

// drawn writes random specs of cams, without operations.
type drawn struct {
	*rand.Rand
	b strings.Builder
}

func (d *drawn) say(format string, args ...any) { fmt.Fprintf(&d.b, format, args...) }

// between draws a size, equally likely in every octave.
func (d *drawn) between(lo, hi float64) float64 { return lo * math.Exp(d.Float64()*math.Log(hi/lo)) }

// stroke writes a rise or a fall; half of those with a symmetric law are skewed.
func (d *drawn) stroke(kind string, lift, over float64) {
	laws := []string{"simple-harmonic", "cycloidal", "modified-sine", "modified-trapezoidal", "polynomial-3-4-5", "polynomial-4-5-6-7", "parabolic", "modified-constant-velocity"}
	law := laws[d.Intn(len(laws))]
	d.say("    - {%s: %.4f, over: %.3f, law: %s", kind, lift, over, law)
	if d.Intn(4) == 0 {
		d.say(", inflection: %.2f", 0.3+0.4*d.Float64())
	}
	d.say("}\n")
}

// draw writes a spec of one of the kinds.
func (d *drawn) draw(kind int) string {
	base, lift := d.between(20, 90), d.between(2, 25)
	if kind == 3 { // a flat face asks for a convex contour
		lift = d.between(2, 8)
	}
	way := []string{"clockwise", "counterclockwise"}[d.Intn(2)]
	d.say("lobewright: 1\npart: drawn\nunits: mm\ncamshaft: {speed: 100, rotation: %s}\nmotion:\n  start_at_cam_angle: %d\n  events:\n", way, d.Intn(360))
	rise, fall, top := d.between(60, 130), d.between(60, 130), 0.0
	if d.Intn(3) > 0 {
		top = d.between(1, 60)
	}
	if d.Intn(4) == 0 { // no dwell below
		x := 360 - rise - fall - top
		rise, fall = rise+x/2, fall+x/2
	}
	rise, fall, top = math.Floor(rise), math.Floor(fall), math.Floor(top)
	d.stroke("rise", lift, rise)
	if top > 0 {
		d.say("    - {dwell: %.0f}\n", top)
	}
	if x := 360 - rise - fall - top; x < 8 {
		fall += x
	}
	d.stroke("fall", lift, fall)
	if x := 360 - rise - fall - top; x > 0 {
		d.say("    - {dwell: rest}\n")
	}
	roller, side := d.between(6, 16), []string{"above", "below"}[d.Intn(2)]
	cam := "plate"
	switch kind {
	case 0, 6:
		d.say("follower: {kind: translating-roller, roller_diameter: %.2f, offset: %.2f}\n", 2*roller, (d.Float64()-0.5)*0.4*base)
	case 1:
		d.say("follower: {kind: translating-knife, offset: %.2f}\n", (d.Float64()-0.5)*0.2*base)
	case 2:
		d.say("follower: {kind: translating-mushroom, face_radius: %.2f, head_diameter: 200}\n", d.between(30, 120))
	case 3:
		d.say("follower: {kind: translating-flat, face_width: 200}\n")
	case 4, 7:
		arm := d.between(1.1, 1.8) * base
		d.say("follower: {kind: swinging-roller, roller_diameter: %.2f, arm_length: %.2f, pivot_distance: %.2f, side: %s}\n", 2*roller, arm, math.Hypot(arm, base+roller)*(0.95+0.1*d.Float64()), side)
	case 5:
		d.say("follower: {kind: swinging-flat, pivot_distance: %.2f, face_offset: %.2f, face: {from: %.2f, to: %.2f}, side: %s}\n", d.between(2, 3)*base, 6*d.Float64(), 0.3*base, 4*base, side)
	case 8:
		d.say("follower: {kind: translating-roller, roller_diameter: %.2f}\n", 2*roller)
	}
	switch {
	case kind == 8:
		radius := d.between(40, 90)
		d.say("cam: {kind: barrel, radius: %.2f, length: %.2f, track_position: %.2f, groove_depth: 8, clearance: 0.05, datum: none}\n", radius, 2*lift+6*roller, 3*roller)
	case kind >= 6:
		cam = "groove"
		d.say("cam: {kind: %s, base_radius: %.2f, thickness: 20, groove_depth: 8, clearance: 0.05, datum: none, outside_diameter: %.2f}\n", cam, base, 2*(base+4*roller+3*lift))
	default:
		d.say("cam: {kind: plate, base_radius: %.2f, thickness: 10, datum: none}\n", base)
	}
	d.say("limits: {pressure_angle: 80}\ntolerance: {profile: 0.1, chord: 0.01}\n")
	return d.b.String()
}

// cut reports whether the exact curves are what is cut: neither undercut nor out of the follower's reach.
func cut(c *synth.Cam) bool {
	for _, g := range c.Gates() {
		if !g.Pass && g.ID != "wall" && g.ID != "angular-datum" && g.ID != "blank" && g.ID != "contact" && g.ID != "arm" && g.ID != "pivot" {
			return false
		}
	}
	return true
}

// counted is what the bound of the arcs is made of: dwells, S (sections between dwells, and steps
// of the curvature) and Z, the sign changes of its rate, from samples.
func counted(c *synth.Curve) (dwells, sections, changes int) {
	pieces := c.Pieces()
	n := len(pieces)
	most := 0.0
	for i, p := range pieces {
		for _, t := range []float64{p.From, (p.From + p.To) / 2, p.To} {
			most = math.Max(most, math.Abs(c.At(i, t).K))
		}
	}
	sign := 0.0
	for i, p := range pieces {
		still := p.Circle != nil || p.Straight
		next := (i + 1) % n
		if i < n-1 || c.Closed() {
			if math.Abs(c.At(i, p.To).K-c.At(next, pieces[next].From).K) > 1e-6*most {
				sections++
			}
		}
		if still {
			dwells++
			sign = 0
			continue
		}
		if i == n-1 && !c.Closed() || n == 1 || pieces[next].Circle != nil || pieces[next].Straight {
			sections++
		}
		for j := 1; j < 1000; j++ {
			d := c.At(i, p.From+(p.To-p.From)*float64(j)/1000).DK
			if sign*d < 0 {
				changes++
			}
			if d != 0 {
				sign = d
			}
		}
	}
	if dwells == 0 {
		sections++
		changes++ // that across the start may not have been seen
	}
	return dwells, sections, changes
}

// TestCorpusOfCams holds the promised counts on cams of every kind, every fourth off the grid and the others on a grid of a tenth of the
// tolerance or finer, every chain with its certificate; floors are below counts.
func TestCorpusOfCams(t *testing.T) {
	const kinds, wanted, first = 9, 216, 4_000
	type sums struct{ arcs, nstar, lines, integral, floor, free float64 }
	var all sums
	released, unsound, worst, kinkiest := 0, 0, 0.0, 0.0
	for seed := int64(first); released < wanted; seed++ {
		d := &drawn{Rand: rand.New(rand.NewSource(seed))}
		text := d.draw(released % kinds)
		s, err := spec.Read("drawn.yaml", []byte(text), synth.Vocabulary())
		if err != nil {
			t.Fatalf("seed %d: %v\n%s", seed, err, text)
		}
		c, err := synth.Build(s)
		if err != nil || !cut(c) {
			if unsound++; unsound > 3*wanted {
				t.Fatalf("of %d specs only %d are sound: %v\n%s", released+unsound, released, err, text)
			}
			continue
		}
		released++
		eps := d.between(0.0005, 0.010)
		x := &corpusCase{T: t, eps: eps, offGrid: released%4 == 0, grid: chain.Grid{Decimals: 4 + int(math.Max(0, math.Ceil(-math.Log10(eps)-3)))}}
		curve := c.Pitch()
		x.arcs(curve, c.LeftOfPitch(0), c.Contour())
		if released%3 == 0 {
			x.lines(c.Contour())
			all.lines, all.integral = all.lines+float64(x.lined), all.integral+x.integral
		}
		if released%9 == 0 {
			n, err := floor.Arcs(curve, eps)
			if err != nil || n > x.blocks {
				t.Errorf("floor %d of %d blocks, %v", n, x.blocks, err)
			}
			all.floor, all.free = all.floor+float64(n), all.free+float64(x.blocks)
		}
		all.arcs, all.nstar = all.arcs+float64(x.free), all.nstar+x.nstar
		worst, kinkiest = math.Max(worst, x.worst), math.Max(kinkiest, x.kink)
		if t.Failed() {
			t.Fatalf("seed %d, eps %.3g um:\n%s", seed, 1000*eps, text)
		}
	}
	t.Logf("%d cams (%d drawn were unsound): %.0f arcs beside dwells, %.4f N*; %.0f lines, %.4f of the integral; floor %.3f of the blocks; certified up to %.4f eps on the grid, kinks up to %.3f of what is allowed",
		released, unsound, all.arcs, all.arcs/all.nstar, all.lines, all.lines/all.integral, all.floor/all.free, worst, kinkiest)
}

// corpusCase is one cam of the corpus.
type corpusCase struct {
	*testing.T
	eps                 float64
	offGrid             bool // fitted to eps itself, and not written
	grid                chain.Grid
	blocks, free, lined int
	nstar, integral     float64
	worst, kink         float64 // of what was certified on the grid to eps, of the kinks to their bound
}

// prove is the certificate of a whole path.
func (x *corpusCase) prove(c *synth.Curve, p chain.Path) float64 {
	prove := certify.Closed
	if !c.Closed() {
		prove = certify.Open
	}
	d, err := prove(c, p)
	if err != nil {
		x.Errorf("%v", err)
	}
	return d.Bound
}

// arcs fits the pitch curve, holds the count, and puts its parallel, the contour, on the grid.
func (x *corpusCase) arcs(pitch *synth.Curve, left float64, contour *synth.Curve) {
	q := math.Pow10(-x.grid.Decimals)
	eps := x.eps
	if !x.offGrid {
		eps = 0.99 * (x.eps - 0.2*q)
	}
	p, err := fit.Arcs(pitch, eps, fit.Options{})
	if err != nil {
		x.Fatalf("%v", err)
	}
	dwells, sections, changes := counted(pitch)
	x.blocks, x.free, x.nstar = len(p), len(p)-dwells, fit.Theory(pitch, eps, chain.Arc)
	if limit := 1.03*x.nstar + float64(sections) + float64(changes)/2; float64(x.free) > limit {
		x.Errorf("%d arcs beside %d dwells, limit %.2f (N* %.2f, S %d, Z %d)", x.free, dwells, limit, x.nstar, sections, changes)
	}
	// The fit's own measure is of samples; a written path is fitted to a little less.
	if b := x.prove(pitch, p); b > 1.001*x.eps {
		x.Errorf("certified %.6g of %.6g", b, x.eps)
	}
	if x.offGrid || !contour.Closed() {
		return // a barrel's walls are no parallels of its track
	}
	moved, err := p.Offset(left)
	if err != nil {
		x.Fatalf("%v", err)
	}
	snapped, err := chain.Snap(moved, x.grid, chain.SnapOptions{})
	if err != nil {
		x.Fatalf("%v", err)
	}
	written := snapped.Path()
	if b := x.prove(contour, written); b > x.eps {
		x.Errorf("on the grid certified %.6g of %.6g", b, x.eps)
	} else {
		x.worst = math.Max(x.worst, b/x.eps)
	}
	if m := snapped.Mismatch(); m > 1.5*q {
		x.Errorf("end radii differ by %.3g on a grid of %g", m, q)
	}
	for i, a := range written {
		b := written[(i+1)%len(written)]
		u, v := a.EndTangent(), b.StartTangent()
		kink := math.Abs(math.Atan2(u.Cross(v), u.Dot(v)))
		allowed := 2 * q * (1/a.Length() + 1/b.Length())
		if x.kink = math.Max(x.kink, kink/allowed); kink > allowed {
			x.Errorf("kink of %.3g after element %d, allowed %.3g", kink, i, allowed)
		}
	}
}

// lines fits the contour, on the grid.
func (x *corpusCase) lines(contour *synth.Curve) {
	q := math.Pow10(-x.grid.Decimals)
	p, err := fit.Lines(contour, 0.99*(x.eps-0.2*q), fit.Options{})
	if err != nil {
		x.Fatalf("%v", err)
	}
	x.lined, x.integral = len(p), fit.Theory(contour, x.eps-0.2*q, chain.Line)
	if limit := 1.01*x.integral + float64(len(contour.Pieces())) + 2; float64(len(p)) > limit {
		x.Errorf("%d lines, limit %.2f", len(p), limit)
	}
	if snapped, err := chain.Snap(p, x.grid, chain.SnapOptions{}); err != nil {
		x.Fatalf("%v", err)
	} else if b := x.prove(contour, snapped.Path()); b > x.eps {
		x.Errorf("lines on the grid: certified %.6g of %.6g", b, x.eps)
	}
}
