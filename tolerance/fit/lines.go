package fit

import (
	"fmt"
	"math"
	"sort"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// Chords. A chord between points of the curve is off by k·L²/8 in its middle and by
// nothing at its ends. With its ends eps outside the bend it is off by ±eps, may be √2
// longer, and the count is ∫√(|k|/(16·eps)) ds, the least that is possible for
// lines joined anywhere within eps. Greedy: from each vertex the furthest next one.
// Where the bend changes sign the best place of the vertex across the band is
// not known beforehand; some are tried. Measured on generated cams: 1.003 times the
// integral in sum, the left-over of the last chord included.

const (
	lineShare      = 0.998 // of eps: what the search allows itself; between samples it knows value and slope
	samplesPerLine = 16
	bendChanges    = 4  // the curvature may change sign within the next chord when |k|³ < this·16·eps·k'²
	lineSplits     = 12 // bisections for the furthest vertex
	linesMost      = 1000000
)

// offsets returns where across the band, in eps to the left, a vertex may be tried.
func offsets(f plane.Frame, eps float64) []float64 {
	if k := math.Abs(f.K); k*k*k < bendChanges*lineConstant*eps*f.DK*f.DK {
		return []float64{-1, -0.6, -0.3, 0, 0.3, 0.6, 1}
	}
	if f.K > 0 {
		return []float64{-1}
	}
	return []float64{1}
}

// vertex is a corner of a polyline near the curve.
type vertex struct {
	p    plane.Point
	t, s float64
}

func vertexAt(f plane.Frame, t, s, off float64) vertex {
	return vertex{f.P.Add(f.T.Left().Scale(off)), t, s}
}

// Lines returns a path of lines, closed when the curve is, within eps (a length) of the curve by the estimate
// of dense samples, vertices up to eps off the curve. It runs with growing parameter;
// Source as in Arcs. A corner of the curve gets a vertex of its own, and so do the ends of a straight piece. Errors as for Arcs.
func Lines(c Curve, eps float64, o Options) (chain.Path, error) {
	pieces, err := validate(c, eps)
	if err != nil {
		return nil, err
	}
	r, err := newRun(c, partsOf(pieces), linesPer(eps), samplesPerLine*o.denser(pieces))
	if err != nil {
		return nil, err
	}
	r.options = o
	for i := range r.samples {
		r.samples[i].share = o.at(r.samples[i].t)
	}
	eps *= lineShare
	start := r.firstVertex(eps)
	vs := []vertex{start}
	for _, corner := range append(r.corners(), len(r.samples)) {
		end := start
		end.t, end.s = r.samples[corner-1].t, r.samples[corner-1].s
		if corner < len(r.samples) || isOpen(c) {
			end.p = r.samples[corner-1].P
		}
		if vs, err = r.chords(vs, end, eps); err != nil {
			return nil, err
		}
	}
	return polyline(vs, !isOpen(c)), nil
}

// firstVertex places the start where a chord from either side can end.
func (r *run) firstVertex(eps float64) vertex {
	first, last := r.samples[0], r.samples[len(r.samples)-1]
	off := 0.0
	a, b := offsets(first.Frame, eps), offsets(last.Frame, eps)
	if !isOpen(r.curve) && len(a) == 1 && len(b) == 1 && a[0] == b[0] && math.Abs(first.T.Cross(last.T)) < kinkAngle {
		off = a[0] * eps * r.options.at(first.t)
	}
	return vertexAt(first.Frame, first.t, 0, off)
}

// denser is by how much samples lie closer for the least share of eps, from a look at every degree or so of
// the pieces.
func (o Options) denser(pieces []plane.Piece) float64 {
	least := 1.0
	for _, p := range pieces {
		for j := range surveyed {
			least = math.Min(least, o.at(at(p, j, surveyed)))
		}
	}
	return 1 / math.Sqrt(least)
}

// corners returns the pins where the tangent jumps, and the ends of straight pieces.
func (r *run) corners() []int {
	var at []int
	for _, j := range r.pins {
		if math.Abs(r.samples[j-1].T.Cross(r.samples[j].T)) > kinkAngle {
			at = append(at, j)
		}
	}
	at = append(at, r.ends...)
	sort.Ints(at)
	return at
}

// chords goes on from the last vertex to end.
func (r *run) chords(vs []vertex, end vertex, eps float64) ([]vertex, error) {
	for {
		a := vs[len(vs)-1]
		if r.straight(a, end, eps) {
			return append(vs, end), nil
		}
		b, ok := r.furthestVertex(a, end, eps)
		if !ok || len(vs) == linesMost {
			return nil, fmt.Errorf("no line within %g of the curve leaves cam angle %.6g; the curve is not smooth there", eps, a.t)
		}
		vs = append(vs, b)
	}
}

// furthestVertex returns the next vertex of those whose chord from a is good.
func (r *run) furthestVertex(a, end vertex, eps float64) (vertex, bool) {
	f := r.frame(a.t)
	here := eps * r.options.at(a.t)
	guess := math.Min(1/linesPer(here)(f), math.Cbrt(lineConstant*here/math.Abs(f.DK)))
	if !(guess > 0) {
		guess = end.s - a.s
	}
	var best vertex
	found := false
	try := func(s float64) bool {
		good := false
		t := r.tAt(s)
		if t <= a.t || t >= end.t {
			return false
		}
		g, there := r.frame(t), eps*r.options.at(t)
		for _, off := range offsets(g, there) {
			b := vertexAt(g, t, s, off*there)
			if r.straight(a, b, eps) {
				good = true
				if !found || s > best.s {
					best, found = b, true
				}
				break
			}
		}
		return good
	}
	lo, hi := 0.0, math.Min(guess, end.s-a.s)
	for try(a.s+hi) && hi < end.s-a.s {
		lo, hi = hi, hi*1.5
	}
	for i := 0; i < lineSplits || !found && i < 60; i++ {
		mid := (lo + hi) / 2
		if try(a.s + mid) {
			lo = mid
		} else {
			hi = mid
		}
	}
	return best, found
}

// straight reports whether the curve between two vertices stays within eps of the line
// through them and runs forward along it, from the samples and parabolas through them.
func (r *run) straight(a, b vertex, eps float64) bool {
	v := b.p.Sub(a.p)
	n := v.Left().Scale(1 / v.Norm())
	d0, m0, s0, limit0 := 0.0, 0.0, 0.0, 0.0
	lo, hi := r.after(a.t), r.after(b.t)
	for i := lo; i < hi; i++ {
		f := &r.samples[i]
		d, m := f.P.Sub(a.p).Dot(n), f.T.Dot(n)
		limit := eps * (1 + 1e-9) * f.share            // the vertices themselves are eps off
		if !(math.Abs(d) <= limit && f.T.Dot(v) > 0) { // also when a and b coincide
			return false
		}
		if m0*m < 0 && i > lo && math.Abs(crest(d0, m0, d, m, f.s-s0)) > math.Min(limit, limit0) {
			return false
		}
		limit0 = limit
		d0, m0, s0 = d, m, f.s
	}
	return true
}

// polyline joins the vertices by lines and may close them.
func polyline(vs []vertex, closed bool) chain.Path {
	var p chain.Path
	for i := 1; i < len(vs); i++ {
		p = append(p, chain.Element{Kind: chain.Line, From: vs[i-1].p, To: vs[i].p, Source: chain.Span{From: vs[i-1].t, To: vs[i].t}})
	}
	return tie(p, closed)
}
