package certify_test

import (
	"math"
	"sort"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
)

// The oracle: a Hausdorff distance by dense sampling and local refinement. It
// shares nothing with the package; it reads at or below the truth but for the
// refinement's 1e-9.

// control is what a machine may make of an arc whose radii differ.
type control int

const (
	blends  control = iota // radius from r0 to r1 linearly
	steps                  // r0, then straight to the end
	bisects                // center moved onto the bisector of the chord
	controls
)

// on is the point of an element at share s of it, 0 <= s <= 1.
func on(e chain.Element, as control, s float64) plane.Point {
	if e.Kind == chain.Line {
		return e.From.Add(e.To.Sub(e.From).Scale(s))
	}
	c := e.Center
	if as == bisects {
		u := e.To.Sub(e.From).Unit()
		middle := e.From.Add(e.To.Sub(e.From).Scale(0.5))
		c = c.Add(u.Scale(middle.Sub(c).Dot(u)))
	}
	a, b := e.From.Sub(c), e.To.Sub(c)
	sweep := math.Atan2(a.Cross(b), a.Dot(b))
	if e.CCW && sweep < 0 {
		sweep += 2 * math.Pi
	} else if !e.CCW && sweep > 0 {
		sweep -= 2 * math.Pi
	}
	r := a.Norm()
	switch {
	case as == blends:
		r += (b.Norm() - r) * s
	case as == steps && s > 0.999:
		r += (b.Norm() - r) * (s - 0.999) / 0.001
		s = 1
	case as == steps:
		s /= 0.999
	}
	return c.Add(a.Turn(plane.Angle(sweep * s)).Scale(r / a.Norm()))
}

type sampled struct {
	n  int
	at func(float64) plane.Point // by share of the whole, 0..1
	p  []plane.Point
}

func sampling(n int, at func(float64) plane.Point) sampled {
	s := sampled{n: n, at: at}
	for k := 0; k <= n; k++ {
		s.p = append(s.p, at(float64(k)/float64(n)))
	}
	return s
}

// near is the distance of q from the sampled figure: the nearest sample and its neighbors,
// joined by lines, and on demand golden section of the figure itself between them.
func (s sampled) near(q plane.Point, refine bool) float64 {
	best, k := math.Inf(1), 0
	for i, p := range s.p {
		dx, dy := p.X-q.X, p.Y-q.Y
		if d := dx*dx + dy*dy; d < best {
			best, k = d, i
		}
	}
	if !refine {
		d := math.Inf(1)
		for _, i := range []int{(k + s.n - 1) % s.n, k % s.n} {
			v, u := q.Sub(s.p[i]), s.p[i+1].Sub(s.p[i])
			share := math.Max(0, math.Min(1, v.Dot(u)/u.Dot(u)))
			d = math.Min(d, v.Sub(u.Scale(share)).Norm())
		}
		return d
	}
	a, b := float64(k-1)/float64(s.n), float64(k+1)/float64(s.n)
	const golden = 0.6180339887498949
	dist := func(x float64) float64 { return s.at(s.within(x)).Dist(q) }
	u, v := b-golden*(b-a), a+golden*(b-a)
	du, dv := dist(u), dist(v)
	d := math.Min(math.Sqrt(best), math.Min(dist(a), dist(b)))
	for b-a > 1e-11 {
		if d = math.Min(d, math.Min(du, dv)); du < dv {
			b, v, dv = v, u, du
			u = b - golden*(b-a)
			du = dist(u)
		} else {
			a, u, du = u, v, dv
			v = a + golden*(b-a)
			dv = dist(v)
		}
	}
	return d
}

// within brings a share just outside 0..1 back: around a closed figure, to the end of an open one.
func (s sampled) within(x float64) float64 {
	if s.p[0].Dist(s.p[s.n]) < 1e-9 {
		return x - math.Floor(x)
	}
	return math.Max(0, math.Min(1, x))
}

// farthest is the largest distance of the samples of s from o: of the few that look farthest, refined.
func (s sampled) farthest(o sampled) float64 {
	const few = 16
	far := make([]float64, len(s.p))
	order := make([]int, len(s.p))
	for i, q := range s.p {
		far[i], order[i] = o.near(q, false), i
	}
	sort.Slice(order, func(i, j int) bool { return far[order[i]] > far[order[j]] })
	worst := 0.0
	for _, i := range order[:min(few, len(order))] {
		worst = math.Max(worst, o.near(s.p[i], true))
	}
	return worst
}

// hausdorff is the distance of the path, as one control runs it, and the stretch from..to of the curve.
func hausdorff(c curve, p chain.Path, as control, from, to float64, dense int) float64 {
	stretch := sampling(dense, func(s float64) plane.Point { return c.at(from + s*(to-from)) })
	n := len(p)
	each := max(dense/n, 4)
	path := sampling(n*each, func(s float64) plane.Point {
		i := min(int(s*float64(n)), n-1)
		return on(p[i], as, s*float64(n)-float64(i))
	})
	return math.Max(stretch.farthest(path), path.farthest(stretch))
}
