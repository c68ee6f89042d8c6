package partial

import (
	"math"

	"lobewright/synth/qp"
)

// How near to the optimum a motion is can only be said against a bound that holds
// for every motion, not for those on a mesh: the optimum of a finer mesh is lower
// still, so no mesh gives a bound by itself. The bound comes from duality.
//
// Let L be a sum of point values of f, f', f” with any weights such that the facts fix
// L(f) (weights on windows have the sign that makes L(f) at least what the limits
// give): L(f) >= b. When L vanishes on 1, x and x², Peano's theorem (P. J. Davis,
// Interpolation and Approximation, Blaisdell 1963, cited from memory) turns L less some
// weights w on f” into an integral of the jerk,
//
//	L(f) = Σ w_i f”(x_i) + ∫ g(x) f”'(x) dx,
//
// where g, from L alone, is piecewise quadratic, so that its norm is integrated
// exactly. Then b <= A Σ|w| + J ∫|g| for any motion with peaks A and J, whatever
// its form: with no w, J >= b/∫|g|; with J capped, A >= (b - J∫|g|)/Σ|w|. On rigid
// stretches the jerk is 0 and g does not count.
//
// Any weights give a true bound. Good ones are the multipliers of the same problem on
// motions whose acceleration is linear between the points of a mesh, with windows held
// at the points only: there the program's own value differs from the bound by no more
// than what g loses where it changes sign inside a stretch, of the second order in its
// width.

// relaxed is that program. Its unknowns are the accelerations at the points, then
// lift and velocity at the first, then the peak.
type relaxed struct {
	m              *mesh
	n              int
	f0, v0, peak   int
	f, v           [][]float64 // of each point and of the first a turn later, dense in the unknowns but the peak
	program        qp.Problem
	facts, windows []weight // what each row of E and each window row of G weighs
	firstWindow    int
	peaks          []peakRow
}

// weight is what a row says of a point: kind 0, 1, 2 for lift, velocity, acceleration;
// turn for the same a turn later less the first.
type weight struct {
	point, kind int
	around      bool
	sign        float64
}

// peakRow is a row that holds the acceleration at a point.
type peakRow struct {
	row, point int
	sign       float64
}

// newRelaxed writes the program. With minimized acceleration jerk caps the jerk.
func newRelaxed(m *mesh, least goal, jerk, unit float64) *relaxed {
	n := len(m.stretches)
	r := &relaxed{m: m, n: n, f0: n, v0: n + 1, peak: n + 2}
	r.program = qp.Problem{N: n + 3, C: make([]float64, n+3)}
	r.program.C[r.peak] = 1
	r.states()
	r.known()
	r.firstWindow = len(r.program.G)
	r.window()
	for i, s := range m.stretches {
		if s.rigid {
			continue
		}
		j, h := m.next(i), s.width()
		if least == leastPeakA {
			r.hold([]int{i, j}, []float64{-1 / h, 1 / h}, jerk, unit, false)
		} else {
			r.hold([]int{i, j}, []float64{-1 / h, 1 / h}, 0, unit, true)
		}
	}
	if least == leastPeakA {
		for i := range n {
			if m.stretches[i].rigid || m.stretches[(i+n-1)%n].rigid {
				continue
			}
			r.peaks = append(r.peaks, peakRow{len(r.program.G), i, 1}, peakRow{len(r.program.G) + 1, i, -1})
			r.hold([]int{i}, []float64{1}, 0, unit, true)
		}
	}
	return r
}

// hold adds two rows, above and below.
func (r *relaxed) hold(i []int, v []float64, limit, unit float64, minimized bool) {
	for _, sign := range []float64{1, -1} {
		var row qp.Row
		for k := range i {
			row.I, row.V = append(row.I, i[k]), append(row.V, sign*v[k])
		}
		if minimized {
			row.I, row.V = append(row.I, r.peak), append(row.V, -unit)
			r.program.H = append(r.program.H, 0)
		} else {
			r.program.H = append(r.program.H, limit)
		}
		r.program.G = append(r.program.G, row)
	}
}

// states integrates the acceleration twice, from point to point.
func (r *relaxed) states() {
	f, v := make([]float64, r.n+2), make([]float64, r.n+2)
	f[r.f0], v[r.v0] = 1, 1
	r.f, r.v = [][]float64{f}, [][]float64{v}
	for i, s := range r.m.stretches {
		h, j := s.width(), r.m.next(i)
		g, w := append([]float64(nil), f...), append([]float64(nil), v...)
		for k := range g {
			g[k] += h * v[k]
		}
		g[i] += h * h / 3
		g[j] += h * h / 6
		w[i] += h / 2
		w[j] += h / 2
		f, v = g, w
		r.f, r.v = append(r.f, f), append(r.v, v)
	}
}

// known adds what the facts fix, each thing once: behind a rigid stretch lift and
// velocity follow from those before it.
func (r *relaxed) known() {
	n := r.n
	for i, k := range r.m.node {
		if k < 0 {
			continue
		}
		at, follows := r.m.line.nodes[k], i > 0 && r.m.stretches[i-1].rigid
		if at.f.is && !follows {
			r.fact(r.f[i], at.f.x, weight{point: i})
		}
		if at.v.is && !follows {
			r.fact(r.v[i], at.v.x, weight{point: i, kind: 1})
		}
		if at.a.is {
			r.fact(unit(n+2, i), at.a.x, weight{point: i, kind: 2})
		}
	}
	last := r.m.line.nodes[r.m.node[0]]
	wraps := r.m.stretches[n-1].rigid
	if !wraps || !last.f.is {
		r.fact(minus(r.f[n], r.f[0]), 0, weight{around: true})
	}
	if !wraps {
		r.fact(minus(r.v[n], r.v[0]), 0, weight{kind: 1, around: true})
	}
}

func (r *relaxed) fact(row []float64, value float64, w weight) {
	r.program.E, r.program.F = append(r.program.E, sparse(row)), append(r.program.F, value)
	r.facts = append(r.facts, w)
}

// window adds the windows at the points.
func (r *relaxed) window() {
	for i, k := range r.m.node {
		before := r.m.cellOf((i + r.n - 1) % r.n)
		c := r.m.cellOf(i)
		lo, hi := math.Max(c.lo, before.lo), math.Min(c.hi, before.hi)
		if k >= 0 {
			at := r.m.line.nodes[k]
			if at.f.is {
				continue
			}
			lo, hi = at.lo, at.hi
		}
		if !math.IsInf(lo, -1) {
			r.limit(r.f[i], -1, lo, i)
		}
		if !math.IsInf(hi, 1) {
			r.limit(r.f[i], 1, hi, i)
		}
	}
}

func (r *relaxed) limit(f []float64, sign, value float64, point int) {
	row := make([]float64, len(f))
	for k, x := range f {
		row[k] = sign * x
	}
	r.program.G, r.program.H = append(r.program.G, sparse(row)), append(r.program.H, sign*value)
	r.windows = append(r.windows, weight{point: point, sign: sign})
}

func unit(n, i int) []float64 {
	x := make([]float64, n)
	x[i] = 1
	return x
}

func minus(a, b []float64) []float64 {
	out := make([]float64, len(a))
	for i := range a {
		out[i] = a[i] - b[i]
	}
	return out
}

func sparse(x []float64) qp.Row {
	var r qp.Row
	for i, v := range x {
		if v != 0 {
			r.I, r.V = append(r.I, i), append(r.V, v)
		}
	}
	return r
}
