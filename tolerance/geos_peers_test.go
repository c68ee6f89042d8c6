//go:build peers

package tolerance_test

import (
	"fmt"
	"math"
	"sort"
	"testing"
	"time"

	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/tolerance/certify"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/fit"

	"github.com/twpayne/go-geos"
)

// densely is the pitch curve as a polygon whose chords are within eps/20, closed.
func densely(c *synth.Curve, eps float64) [][]float64 {
	var ring [][]float64
	for i, p := range c.Pieces() {
		n := 0.0
		for k := range 20 {
			f := c.At(i, p.From+(p.To-p.From)*(float64(k)+0.5)/20)
			g := c.At(i, p.From+(p.To-p.From)*(float64(k)+0.501)/20)
			n = math.Max(n, f.P.Dist(g.P)/0.001*20*math.Sqrt(math.Abs(f.K)/(8*eps/20)))
		}
		count := int(n) + 2
		for k := range count {
			f := c.At(i, p.From+(p.To-p.From)*float64(k)/float64(count))
			ring = append(ring, []float64{f.P.X, f.P.Y})
		}
	}
	return append(ring, ring[0])
}

// lined turns a ring of points into a path of lines with growing cam angle.
func lined(ring [][]float64, turns float64) chain.Path {
	var p chain.Path
	at := func(i int) plane.Point { return plane.Point{X: ring[i][0], Y: ring[i][1]} }
	area := 0.0
	for i := 1; i < len(ring); i++ {
		area += ring[i-1][0]*ring[i][1] - ring[i][0]*ring[i-1][1]
		p = append(p, chain.Element{Kind: chain.Line, From: at(i - 1), To: at(i)})
	}
	if area*turns < 0 {
		p = p.Reverse()
	}
	return p
}

// GEOS (Debian package libgeos-dev, by github.com/twpayne/go-geos) does what is done with general tools: a dense polygon of the
// pitch curve, its buffer by the roller's radius, simplified to the tolerance. Blocks, certified
// deviation and time are printed beside ours, made and certified in the same run.
func TestPeerGEOS(t *testing.T) {
	const eps = 0.002
	var samples []sampleCam
	for _, s := range sampleCams(t) {
		if s.spec.Cam.Kind == "plate" && s.spec.Follower.RollerDiameter > 0 {
			samples = append(samples, s)
		}
	}
	if len(samples) < 4 {
		t.Fatalf("only %d samples to compare on", len(samples))
	}
	t.Logf("GEOS %s, %d samples, tolerance %g", geosVersion(), len(samples), eps)
	var arcs, lines, quicker, deviation []float64
	for _, c := range samples {
		tolerance := eps * c.mm()
		contour, sense := c.Contour(), 1.0
		if c.OutsideIsLeft() { // then travel with growing cam angle is clockwise
			sense = -1
		}
		start := time.Now()
		ring := densely(c.Pitch(), tolerance)
		inner := geos.NewPolygon([][][]float64{ring}).Buffer(-c.Follower().Radius(), 64).Simplify(tolerance)
		theirs := lined(inner.ExteriorRing().CoordSeq().ToCoords(), sense)
		took := time.Since(start)
		d, err := certify.Closed(contour, theirs)
		if err != nil {
			t.Fatalf("%s: %v", c.name, err)
		}
		start = time.Now()
		p, err := fit.Arcs(c.Pitch(), 0.99*tolerance, fit.Options{})
		if err != nil {
			t.Fatal(err)
		}
		ours, err := p.Offset(c.LeftOfPitch(0))
		if err != nil {
			t.Fatal(err)
		}
		fitted := time.Since(start)
		own, err := certify.Closed(contour, ours)
		if err != nil {
			t.Fatal(err)
		}
		straight, err := fit.Lines(contour, 0.99*tolerance, fit.Options{})
		if err != nil {
			t.Fatal(err)
		}
		t.Logf("%-18s GEOS %4d lines, certified %.2f of the tolerance, %v; ours %3d arcs (%.2f, %v) or %4d lines", c.name, len(theirs), d.Bound/tolerance, took.Round(time.Millisecond/10),
			len(ours), own.Bound/tolerance, fitted.Round(time.Millisecond/10), len(straight))
		if own.Bound > tolerance {
			t.Errorf("%s: ours is certified to %.6g of %g only", c.name, own.Bound, tolerance)
		}
		if len(straight) >= len(theirs) {
			t.Errorf("%s: %d lines, GEOS takes %d", c.name, len(straight), len(theirs))
		}
		arcs = append(arcs, float64(len(theirs))/float64(len(ours)))
		lines = append(lines, float64(len(theirs))/float64(len(straight)))
		deviation = append(deviation, d.Bound/tolerance)
		quicker = append(quicker, took.Seconds()/fitted.Seconds())
	}
	t.Logf("medians: GEOS takes %.1f times as many blocks as our arcs and %.2f times as many as our lines, is certified to %.2f of the tolerance, takes %.2f times as long as our arcs",
		median(arcs), median(lines), median(deviation), median(quicker))
}

// median is the middle of values, the upper of two.
func median(x []float64) float64 {
	sort.Float64s(x)
	return x[len(x)/2]
}

func geosVersion() string {
	return fmt.Sprintf("%d.%d.%d", geos.VersionMajor, geos.VersionMinor, geos.VersionPatch)
}
