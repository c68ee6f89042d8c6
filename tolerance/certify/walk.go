package certify

import (
	"fmt"
	"math"
	"sort"

	"lobewright/synth/plane"
)

// walker finds the curve parameters of a path's joints in plain floats. Nothing in
// this file is part of the proof: wrong parameters make the proof fail, not lie.
type walker struct {
	*survey
	u, s  []float64 // parameter and length along the chords, one more than samples
	p     []plane.Point
	total float64 // length of the turn
}

// samples of a whole turn, shared among the pieces; each piece has leastSamples at least.
const (
	samples      = 360
	leastSamples = 8
)

func newWalker(s *survey) *walker {
	w := &walker{survey: s}
	for i, piece := range s.pieces {
		n := max(leastSamples, int(samples*(piece.To-piece.From)/(s.t1-s.t0)))
		for k := 0; k < n; k++ {
			t := piece.From + (piece.To-piece.From)*float64(k)/float64(n)
			w.u, w.p = append(w.u, t), append(w.p, s.curve.At(i, t).P)
		}
	}
	last := len(s.pieces) - 1
	w.u, w.p = append(w.u, s.t1), append(w.p, s.curve.At(last, s.pieces[last].To).P)
	w.s = make([]float64, len(w.p))
	for k := 1; k < len(w.p); k++ {
		w.s[k] = w.s[k-1] + w.p[k].Dist(w.p[k-1])
	}
	w.total = w.s[len(w.s)-1]
	return w
}

// sample returns parameter and point of the k-th sample, k running on over whole turns both ways.
func (w *walker) sample(k int) (u float64, p plane.Point) {
	n := len(w.p) - 1
	turn := k / n
	if k < turn*n {
		turn--
	}
	return w.u[k-turn*n] + float64(turn)*(w.t1-w.t0), w.p[k-turn*n]
}

// index returns the last sample at or before the running length s >= 0.
func (w *walker) index(s float64) int {
	turn := math.Floor(s / w.total)
	k := sort.SearchFloat64s(w.s, s-turn*w.total)
	return int(turn)*(len(w.p)-1) + max(k-1, 0)
}

// run returns the length along the curve up to the running parameter u >= t0.
func (w *walker) run(u float64) float64 {
	m := w.mark(u)
	k := max(sort.Search(len(w.u), func(i int) bool { return w.u[i] > m.t })-1, 0)
	k = min(k, len(w.u)-2)
	share := (m.t - w.u[k]) / (w.u[k+1] - w.u[k])
	return float64(m.turn)*w.total + w.s[k] + share*(w.s[k+1]-w.s[k])
}

// start returns the mark of the path's first point.
func (w *walker) start(p plane.Point) mark { return w.mark(w.first(p)) }

// step returns the mark of the end of a figure that starts at a.
func (w *walker) step(a mark, f *figure) (mark, error) {
	if !(f.length() <= 2*w.total) {
		return a, fmt.Errorf("it is %.4g long, the whole curve only %.4g", f.length(), w.total)
	}
	return w.mark(w.next(w.run(w.angle(a)), f.length(), f.e.To)), nil
}

// first finds the foot of the path's first point: the nearest of those found
// from every sample that is nearer than its neighbors and about as near as the nearest.
func (w *walker) first(j plane.Point) float64 {
	n := len(w.p) - 1
	nearest, spacing := math.Inf(1), 0.0
	for k := 0; k < n; k++ {
		nearest = math.Min(nearest, w.p[k].Dist(j))
		spacing = math.Max(spacing, w.s[k+1]-w.s[k])
	}
	best, at := math.Inf(1), w.t0
	for k := 0; k < n; k++ {
		d := w.p[k].Dist(j)
		if d > nearest+spacing || d > w.p[(k+n-1)%n].Dist(j) || d > w.p[(k+1)%n].Dist(j) {
			continue
		}
		u := w.foot(k, j)
		if d := w.frame(u).P.Dist(j); d < best {
			best, at = d, u
		}
	}
	if m := w.mark(at); m.turn != 0 { // start within the first turn
		at = m.t
	}
	return at
}

// next finds the foot of j between half and one and a half element lengths on from s.
func (w *walker) next(s, length float64, j plane.Point) float64 {
	from, to := w.index(s+length/2), w.index(s+1.5*length)+1
	best, at := math.Inf(1), from
	for k := from; k <= to; k++ {
		if _, p := w.sample(k); p.Dist(j) < best {
			best, at = p.Dist(j), k
		}
	}
	return w.foot(at, j)
}

func (w *walker) frame(u float64) plane.Frame {
	m := w.mark(u)
	return w.curve.At(w.piece(m.t), m.t)
}

const (
	secants   = 6
	footSteps = 60
	footShare = 1e-11 // of the curve's size: a foot this near adds its square to that of a deviation, which is a thousand times as large at 1 nm
)

// foot refines from sample k: where the tangent is perpendicular to the way to j. The way's length along
// the tangent is nearly the length along the curve, so a few secant steps from the place on the
// samples' chords do; where they do not, the samples' bracket is narrowed.
func (w *walker) foot(k int, j plane.Point) float64 {
	past := func(u float64) float64 { f := w.frame(u); return f.P.Sub(j).Dot(f.T) }
	a, p := w.sample(k - 1)
	b, q := w.sample(k + 1)
	way := q.Sub(p)
	u := a + (b-a)*math.Max(0, math.Min(1, j.Sub(p).Dot(way)/way.Dot(way)))
	v, slope := past(u), way.Norm()/(b-a)
	for range secants {
		next := u - v/slope
		if !(next >= a && next <= b) || next == u {
			break
		}
		y := past(next)
		slope, u, v = (y-v)/(next-u), next, y
		if math.Abs(v) <= footShare*w.size {
			return u
		}
	}
	return w.bracketed(k, past)
}

// bracketed refines from sample k by the Illinois variant of false position (M. Dowell, P. Jarratt,
// BIT 11, 1971), or stays there when the foot is not between its neighbors.
func (w *walker) bracketed(k int, past func(u float64) float64) float64 {
	a, _ := w.sample(k - 1)
	b, _ := w.sample(k + 1)
	fa, fb := past(a), past(b)
	u, _ := w.sample(k)
	if !(fa < 0 && fb > 0) {
		return u
	}
	for i := 0; i < footSteps && b-a > 0; i++ {
		u = b - fb*(b-a)/(fb-fa)
		if !(u > a && u < b) {
			u = a + (b-a)/2
		}
		v := past(u)
		if math.Abs(v) <= footShare*w.size {
			return u
		}
		if v > 0 {
			b, fb = u, v
			fa /= 2
		} else {
			a, fa = u, v
			fb /= 2
		}
	}
	return u
}
